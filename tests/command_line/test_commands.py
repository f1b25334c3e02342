"""Commands in process: what they say, what they write, exit codes, refusals in words."""

import csv
import io
import json
import shutil
from datetime import UTC, datetime
from pathlib import Path

import pytest

from logbook.book.book import Book
from logbook.command_line.environment import Environment
from logbook.command_line.main import COMMANDS, main

FIXTURE = Path(__file__).parents[1] / "fixtures" / "ship_handkept" / "plant.toml"
NOW = datetime(2026, 5, 14, 12, tzinfo=UTC)


def run(*arguments: str, variables: dict[str, str] | None = None) -> tuple[int, str, str]:
    out, err = io.StringIO(), io.StringIO()
    code = main(
        list(arguments), Environment(out=out, err=err, variables=variables or {}, account="cadet", now=lambda: NOW)
    )
    return code, out.getvalue(), err.getvalue()


@pytest.fixture
def plant(tmp_path: Path) -> Path:
    shutil.copy(FIXTURE, tmp_path / "plant.toml")
    return tmp_path


def watch(plant: Path, hour: int, supply: int, back: int, power: int = 9300) -> None:
    code, _, err = run(
        "enter", str(plant), "ME", "--at", f"2026-05-13T{hour:02d}:00Z", "engine_speed=98", f"shaft_power={power}",
        "engine_fuel_index=74.5", "compressor_inlet_temperature.1=31", "charge_air_pressure=2.35",
        "charge_air_temperature.1=38", "cooler_water_inlet_temperature.1=28", "barometric_pressure=1010",
        f"fuel_meter_supply.ME_in={supply}", "fuel_meter_temperature.ME_in=128", f"fuel_meter_return.ME_out={back}",
        "fuel_meter_temperature.ME_out=137", f"revolution_counter={40_000_000 + 5880 * hour}",
    )  # fmt: skip
    assert code == 0, err


@pytest.fixture
def logged(plant: Path) -> Path:
    at = ("--at", "2026-05-10T00:00Z")
    assert (
        run("note", str(plant), "lot", "lot=L1", "grade=RMG 380", "density15_kg_m3=953", "sulphur_percent=0.41", *at)[0]
        == 0
    )
    assert run("note", str(plant), "event", "event=change_over", "lot=L1", "engines=ME", *at)[0] == 0
    for number in range(5):
        watch(plant, 4 * number, 51_000_000 + 19_900 * number, 21_000_000 + 12_700 * number)
    return plant


def test_every_command_has_help_with_an_example(capsys: pytest.CaptureFixture[str]) -> None:
    for name in COMMANDS:
        with pytest.raises(SystemExit) as ended:
            main([name, "--help"])
        assert ended.value.code == 0
        assert "example" in capsys.readouterr().out


def test_figures_of_a_watch(logged: Path) -> None:
    """19 900 L at 128 degC less 12 700 L at 137 degC of 953 kg/m3 at 15 degC over 4 h at 9 300 kW: worked by the
    table 54B of ASTM D1250 (1980) by hand: 17 404.7 - 11 024.9 kg."""
    code, out, _ = run("figures", str(logged), "ME", "--json")
    assert code == 0
    rows = [json.loads(line) for line in out.splitlines()]
    from math import exp

    alpha = 186.9696 / 953**2 + 0.4862 / 953
    mass = sum(
        sign * litres * 0.953 * exp(-alpha * (t - 15) * (1 + 0.8 * alpha * (t - 15)))
        for sign, litres, t in ((1, 19_900, 128), (-1, 12_700, 137))
    )
    assert rows[0]["brake_thermal_efficiency"] is None
    assert rows[-1]["sfoc_g_kwh"] == pytest.approx(mass * 1000 / (9300 * 4), rel=1e-6)
    assert rows[-1]["comparable"] is True
    assert rows[-1]["gap"] == pytest.approx(rows[-1]["reversible_bound_ambient"] - rows[-1]["brake_thermal_efficiency"])
    assert rows[-1]["excess_gap"] == pytest.approx(rows[-1]["gap"] - rows[-1]["gap_reference"])


def test_a_figure_unfolds(logged: Path) -> None:
    code, out, err = run("figures", str(logged), "ME", "--explain", "8.sfoc_g_kwh")
    assert code == 0, err
    assert "table 54B" in out
    assert "51099500" in out or "510" in out
    assert run("figures", str(logged), "ME", "--explain", "8.nonsense")[0] == 2
    assert run("figures", str(logged), "ME", "--explain", "999.gap")[0] == 2


def test_the_month_in_three_forms(logged: Path) -> None:
    code, text, _ = run("month", str(logged), "2026-05")
    assert code == 0
    assert "Not an approved electronic record book" in text
    assert "4 Efficiency" in text
    code, markdown, _ = run("month", str(logged), "2026-05", "--format", "markdown")
    assert code == 0
    assert markdown.startswith("# Invented motor ship")
    code, table, _ = run("month", str(logged), "2026-05", "--format", "csv")
    assert code == 0
    rows = list(csv.DictReader(io.StringIO(table)))
    (efficiency,) = [row["value"] for row in rows if row["head"] == "brake eff. %"]
    _, out, _ = run("figures", str(logged), "ME", "--json")
    compared = [json.loads(line) for line in out.splitlines()][1:]
    pooled = len(compared) / sum(1 / row["brake_thermal_efficiency"] for row in compared)
    assert float(efficiency) == pytest.approx(100 * pooled, abs=0.006)


def test_a_remark_cannot_become_a_formula(logged: Path) -> None:
    run("note", str(logged), "remark", "text==HYPERLINK(1)", "--at", "2026-05-13T09:00Z")
    _, table, _ = run("month", str(logged), "2026-05", "--format", "csv")
    assert "\n=HYPERLINK" not in table
    assert all(not row["value"].startswith("=") for row in csv.DictReader(io.StringIO(table)))


def test_trend_says_too_few(logged: Path) -> None:
    code, out, _ = run("trend", str(logged), "ME")
    assert code == 0
    assert "cannot tell yet" in out


def test_what_is_asked_is_asked_and_accepted(plant: Path) -> None:
    code, _, err = run("enter", str(plant), "ME", "shaft_power=96100")
    assert code == 2
    assert "outside 0 to 14280" in err
    assert "--accept" in err
    with Book.open(plant, read_only=True) as book:
        assert book.entries(kinds=["reading"]) == []
    assert run("enter", str(plant), "ME", "shaft_power=96100", "--accept")[0] == 0


@pytest.mark.parametrize(
    ("arguments", "code", "said"),
    [
        (["enter", "PLANT", "MX", "shaft_power=1"], 2, "no engine 'MX'"),
        (["enter", "PLANT", "ME", "shaft_pwer=1"], 2, "Did you mean shaft_power?"),
        (["enter", "PLANT", "ME", "cylinder=1"], 2, "may be:"),
        (["enter", "PLANT", "ME", "shaft_power"], 2, "key=value"),
        (["enter", "PLANT", "ME", "shaft_power=many"], 2, "not understood"),
        (["enter", "PLANT", "ME", "shaft_power=1", "--at", "yesterday"], 2, "write e.g."),
        (["note", "PLANT", "evnt", "event=stop"], 2, "Did you mean event?"),
        (["note", "PLANT", "event", "event=exploded"], 2, "no word for event"),
        (["note", "PLANT", "lot", "lot=L1"], 2, "needs grade"),
        (["note", "PLANT", "lot", "lot=L1", "grade=x", "density15_kg_m3=0.987"], 2, "0.987 kg/L is 987"),
        (["figures", "PLANT", "MX"], 2, "no engine"),
        (["trend", "PLANT", "MX"], 2, "no engine"),
        (["month", "PLANT", "2026-13"], 2, "no month"),
        (["month", "PLANT"], 2, "Name a month"),
        (["entries", "PLANT", "--entry", "99"], 2, "no entry 99"),
        (["entries", "PLANT", "--kind", "poem"], 2, "no kind of entry"),
        (["verify", "PLANT", "--seal", "abc"], 2, "64 signs"),
        (["verify", "PLANT", "--seal", "0" * 64], 1, ""),
        (["entries", "/nonexistent"], 3, "no /nonexistent/plant.toml"),
        (["import", "PLANT", "nothing.csv"], 2, "--suggest"),
        (["open", "PLANT"], 2, "terminal"),
        (["figure", "PLANT"], 2, "Did you mean 'figures'?"),
        (["entries", "PLANT", "--nonsense"], 2, "--help"),
    ],
)  # fmt: skip
def test_wrong_requests_end_in_a_sentence(plant: Path, arguments: list[str], code: int, said: str) -> None:
    Book.open(plant).close()
    found, _, err = run(*[str(plant) if part == "PLANT" else part for part in arguments])
    assert found == code
    assert said in err
    assert "Traceback" not in err


def test_a_wrong_plant_is_answered_with_every_fault(plant: Path) -> None:
    text = (plant / "plant.toml").read_text()
    (plant / "plant.toml").write_text(
        text.replace("cylinders = 6", "cylinder = 6").replace("bore_mm = 600", "bore_mm = -1")
    )
    code, _, err = run("entries", str(plant))
    assert code == 3
    assert 'Did you mean "cylinders"?' in err
    assert "bore_mm" in err


def test_the_person_of_a_key_cannot_be_overruled(plant: Path) -> None:
    run(
        "enter",
        str(plant),
        "ME",
        "engine_speed=98",
        "--person",
        "Chief",
        variables={"LOGBOOK_PERSON": "Third engineer"},
    )
    with Book.open(plant, read_only=True) as book:
        (entry,) = book.entries(kinds=["reading"])
    assert (entry.person, entry.identity_by) == ("Third engineer", "key")


def test_a_changed_plant_goes_into_the_book(plant: Path) -> None:
    run("enter", str(plant), "ME", "engine_speed=98")
    with (plant / "plant.toml").open("a") as stream:
        stream.write("\n# a remark\n")
    run("enter", str(plant), "ME", "engine_speed=98", "--at", "2026-05-14T16:00Z")
    with Book.open(plant, read_only=True) as book:
        assert len(book.entries(kinds=["plant_description"])) == 2


def test_verify_backup_and_comparison_with_the_copy(logged: Path, tmp_path: Path) -> None:
    copy = tmp_path / "elsewhere.db"
    code, out, _ = run("backup", str(logged), str(copy))
    assert code == 0
    digest = out.split()[-1]
    assert run("verify", str(logged), "--seal", digest, "--against", str(copy))[0] == 0
    assert run("backup", str(logged), str(copy))[0] == 3
