"""The two hand-kept sample logs through the real import: figures against what was true, slips flagged and kept out."""

import gzip
import io
import json
import shutil
from datetime import UTC, datetime
from pathlib import Path
from typing import Any

import numpy as np
import pandas as pd
import pytest

from logbook.book.book import Book
from logbook.command_line.environment import Environment
from logbook.command_line.main import main
from logbook.judgement.figures import COLUMNS, figures
from logbook.plant.description import read_plant

FIXTURES = Path(__file__).parents[1] / "fixtures"


def run(*arguments: str) -> tuple[int, str, str]:
    out, err = io.StringIO(), io.StringIO()
    environment = Environment(out=out, err=err, variables={}, account="tester", now=lambda: datetime.now(UTC))
    code = main(list(arguments), environment)
    return code, out.getvalue(), err.getvalue()


def imported(name: str, folder: Path, *more: str) -> list[str]:
    """A plant folder with the sample's log and papers; returns what each import said."""
    source = FIXTURES / name
    shutil.copy(source / "plant.toml", folder / "plant.toml")
    said = []
    for log in ("log", *more):
        columns = "columns" if log == "log" else log
        code, out, err = run(
            "import", str(folder), str(source / f"{log}.csv"), "--columns", str(source / f"{columns}.toml")
        )
        assert code == 0, err
        said.append(out)
    return said


def truth(name: str) -> Any:
    return json.loads(gzip.decompress((FIXTURES / name / "truth.json.gz").read_bytes()))


def hours_since(frame: pd.DataFrame, start: str) -> pd.Series:
    return (pd.to_datetime(frame["at_utc"]) - pd.Timestamp(start, tz="UTC")).dt.total_seconds() / 3600


@pytest.fixture(scope="module")
def ship(tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, pd.DataFrame, list[str]]:
    folder = tmp_path_factory.mktemp("ship")
    said = imported("ship_handkept", folder, "lots", "events")
    with Book.open(folder, read_only=True) as book:
        frame = figures(read_plant(folder), book.entries(), "ME")
    true = {round(watch["h"], 2): watch["bte"] for watch in truth("ship_handkept")["per_watch"]}
    frame["true"] = [true.get(hour, np.nan) for hour in hours_since(frame, "2025-02-01").round(2)]
    return folder, frame, said


def test_ship_brake_efficiency(ship: tuple[Path, pd.DataFrame, list[str]]) -> None:
    """Sea watches that the program itself compares, against the truth of the invented ship."""
    frame = ship[1]
    compared = frame[frame["comparable"] & frame["true"].notna()]
    error = compared["brake_thermal_efficiency"] / compared["true"] - 1
    assert abs(error.median()) < 0.002
    assert error.abs().median() < 0.007
    assert error.abs().max() < 0.05
    # A good watch: its efficiency lies within what the gauges scatter (3 %) of the truth.
    off = (frame["brake_thermal_efficiency"] / frame["true"] - 1).abs()
    good = frame["true"].notna() & (off < 0.03)
    assert good.sum() > 1800
    assert (good & frame["comparable"]).sum() / good.sum() >= 0.95


def test_ship_slips_are_named_and_kept_out(ship: tuple[Path, pd.DataFrame, list[str]]) -> None:
    """The slips of the finger in the fuel counters: each named by row, none of them among the compared."""
    folder, frame, said = ship
    assert "row 317, FO out: '34458094'" in said[0]
    assert "two digits swapped" in said[0]
    open_rows = frame[frame["flags"].str.contains("counter_open_question")]
    assert len(open_rows) >= 8
    assert not open_rows["comparable"].any()
    assert frame["flags"].str.contains("passed_zero").any()
    del folder


def test_columns_are_those_fixed_for_the_outside(ship: tuple[Path, pd.DataFrame, list[str]]) -> None:
    code, out, _ = run("figures", str(ship[0]), "ME", "--last", "2")
    assert code == 0
    assert tuple(out.splitlines()[0].split(",")) == COLUMNS
    assert len(COLUMNS) == 39


def test_the_same_file_twice_adds_nothing(ship: tuple[Path, pd.DataFrame, list[str]]) -> None:
    folder = ship[0]
    with Book.open(folder, read_only=True) as book:
        before = book.count()
    said = imported("ship_handkept", folder, "lots", "events")
    assert "0 entries written, 2373 in the book already" in said[0]
    with Book.open(folder, read_only=True) as book:
        assert book.count() == before


def test_trend_of_the_ship_is_honest(ship: tuple[Path, pd.DataFrame, list[str]]) -> None:
    """The turbine fouled by 2.4 % until it was cleaned: growing before, and a border at the cleaning."""
    code, out, _ = run("trend", str(ship[0]), "ME", "--json")
    assert code == 0
    segments = json.loads(out)["segments"]
    assert segments[0]["call"] == "growing"
    assert segments[1]["opened_by"] == "turbocharger_cleaning"
    assert segments[2]["opened_by"] == "cooler_cleaning"


@pytest.fixture(scope="module")
def station(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("station")
    imported("station_handkept", folder)
    return folder


def test_station_heat_rate(station: Path) -> None:
    """Heat rate per electrical kWh, gross, of every set-hour that has both counters and no start or stop inside."""
    plant = read_plant(station)
    with Book.open(station, read_only=True) as book:
        entries = book.entries()
    true = {(one["set"], round(one["h"])): one["heat_rate"] for one in truth("station_handkept")["per_hour"]}
    errors = []
    for engine in plant.engines:
        frame = figures(plant, entries, engine.id)
        whole = frame[~frame["flags"].str.contains("start_or_stop|counter_open|no_fuel|no_power")]
        hours = hours_since(whole, "2025-03-01").round().astype(int)
        expected = np.array([true.get((engine.id, hour), np.nan) for hour in hours])
        # Brake heat rate over the generator's efficiency of 0.96 is the electrical one.
        errors.append(whole["heat_rate_kj_kwh"].to_numpy() / 0.96 / expected - 1)
    error = np.concatenate(errors)
    error = error[np.isfinite(error)]
    assert len(error) > 4500
    assert abs(np.median(error)) < 0.0005
    assert np.median(np.abs(error)) < 0.0015


def test_check_writes_nothing(tmp_path: Path) -> None:
    source = FIXTURES / "ship_handkept"
    shutil.copy(source / "plant.toml", tmp_path / "plant.toml")
    code, out, _ = run(
        "import", str(tmp_path), str(source / "log.csv"), "--columns", str(source / "columns.toml"), "--check"
    )
    assert code == 0
    assert "row 1187, FO out" in out
    assert "Nothing was written" in out
    assert not (tmp_path / "logbook.db").exists()


@pytest.mark.parametrize("name", ["ship_handkept", "station_handkept"])
def test_the_draft_of_the_map_serves_as_it_is(name: str, tmp_path: Path) -> None:
    shutil.copy(FIXTURES / name / "plant.toml", tmp_path / "plant.toml")
    code, out, _ = run("import", str(tmp_path), str(FIXTURES / name / "log.csv"), "--suggest")
    assert code == 0
    assert out == (FIXTURES / name / "columns.toml").read_text()
    assert "not recognised" not in out
