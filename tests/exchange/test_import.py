"""Import: sheets, column maps, doubtful cells, refusals in words."""

import io
import shutil
from datetime import UTC, datetime
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from openpyxl import Workbook

from logbook.book.book import Book
from logbook.command_line.environment import Environment
from logbook.command_line.main import main
from logbook.exchange.columns import MapUnusable, parse_map
from logbook.exchange.sheet import SheetUnusable, read_sheet

PLANT = Path(__file__).parents[1] / "fixtures" / "ship_handkept" / "plant.toml"
MAP = """
kind = "readings"
engine = "ME"
[time]
date = "Date"
clock = "Time"
date_order = "day first"
offset = "+02:00"
[columns]
"RPM" = "engine_speed"
"kW" = "shaft_power"
"FO" = "fuel_meter_supply.ME_in"
"Filter" = { key = "air_filter_pressure_drop.1", unit = "mmWC" }
"Remarks" = "remark"
"""


def run(*arguments: str) -> tuple[int, str, str]:
    out, err = io.StringIO(), io.StringIO()
    environment = Environment(out=out, err=err, variables={}, account="tester", now=lambda: datetime.now(UTC))
    return main(list(arguments), environment), out.getvalue(), err.getvalue()


@pytest.fixture
def plant(tmp_path: Path) -> Path:
    folder = tmp_path / "plant"
    folder.mkdir()
    shutil.copy(PLANT, folder / "plant.toml")
    (tmp_path / "map.toml").write_text(MAP)
    return folder


def bring(plant: Path, text: str, *more: str) -> tuple[int, str, str]:
    (plant.parent / "log.csv").write_text(text)
    return run("import", str(plant), str(plant.parent / "log.csv"), "--columns", str(plant.parent / "map.toml"), *more)


HEAD = "Date;Time;RPM;kW;FO;Filter;Remarks\n"


def test_cells_become_values(plant: Path) -> None:
    code, out, _ = bring(
        plant, HEAD + "14.05.2026;0400;98,2;9610;100;116;=1+1 \x1b[31mred\n14.05.2026;0800;N/R;stopped;;;\n"
    )
    assert code == 0
    assert "2 entries written" in out
    with Book.open(plant, read_only=True) as book:
        first, second = book.entries(kinds=["reading"])
    values = first.values()
    assert values["engine_speed"].number == 98.2
    assert values["air_filter_pressure_drop.1"].number == pytest.approx(11.375714)  # 116 x 0.0980665
    assert first.taken_utc == datetime(2026, 5, 14, 2, tzinfo=UTC)
    assert second.values()["engine_state"].word == "stopped"
    _, shown, _ = run("entries", str(plant))
    assert "\x1b" not in shown


def test_a_cell_that_is_not_understood_is_named_and_kept(plant: Path) -> None:
    code, out, _ = bring(plant, HEAD + "14.05.2026;0400;abc;9610;;;\n")
    assert code == 0
    assert "row 2, RPM: 'abc'" in out
    with Book.open(plant, read_only=True) as book:
        (entry,) = book.entries(kinds=["reading"])
    assert entry.values()["engine_speed"].text == "abc"
    assert entry.values()["engine_speed"].state is not None


@pytest.mark.parametrize(
    ("row", "said"),
    [("31.02.2026;0400;98;9610;;;", "no date here"), ("14.05.2026;2560;98;9610;;;", "no time of day")],
)
def test_a_row_without_its_time_stops_the_whole_import(plant: Path, row: str, said: str) -> None:
    code, out, err = bring(plant, HEAD + "14.05.2026;0000;98;9610;;;\n" + row + "\n")
    assert code == 2
    assert "row 3" in out
    assert said in out
    assert "Nothing was imported" in err
    assert not (plant / "logbook.db").exists()


def test_other_values_for_a_known_reading_are_left_alone(plant: Path) -> None:
    bring(plant, HEAD + "14.05.2026;0400;98,2;9610;;;\n")
    code, out, _ = bring(plant, HEAD + "14.05.2026;0400;99,9;9610;;;\n")
    assert code == 0
    assert "stands in the book with other values" in out
    with Book.open(plant, read_only=True) as book:
        (entry,) = book.entries(kinds=["reading"])
    assert entry.values()["engine_speed"].number == 98.2


def test_xlsx_reads_like_csv(plant: Path, tmp_path: Path) -> None:
    book = Workbook()
    page = book.active
    assert page is not None
    page.append(["Date", "Time", "RPM", "kW", "FO", "Filter", "Remarks"])
    page.append(["14.05.2026", "0400", 98.2, 9610, 100, 116, None])
    book.save(tmp_path / "log.xlsx")
    code, out, err = run("import", str(plant), str(tmp_path / "log.xlsx"), "--columns", str(tmp_path / "map.toml"))
    assert code == 0, err
    assert "1 entries written" in out


@pytest.mark.parametrize(
    ("content", "said"),
    [(b"PK\x03\x04 not a zip", "no XLSX sheet"), (b"", "no XLSX sheet")],
)
def test_a_damaged_xlsx_is_refused(tmp_path: Path, content: bytes, said: str) -> None:
    (tmp_path / "log.xlsx").write_bytes(content)
    with pytest.raises(SheetUnusable, match=said):
        read_sheet(tmp_path / "log.xlsx")


def test_faults_of_a_map_come_all_at_once() -> None:
    with pytest.raises(MapUnusable) as found:
        parse_map('knd = "readings"\ndecimal = "x"\n[columns]\n"a" = 5\n')
    text = str(found.value)
    for part in ("Did you mean kind", "decimal", "kind is missing", "[time] needs", "columns.a"):
        assert part in text


def test_a_map_that_names_other_columns_is_told_so(plant: Path) -> None:
    code, out, _ = bring(plant, "Date;Time;RPMs;kW;FO;Filter;Remarks\n14.05.2026;0400;98;1;;;\n")
    assert code == 2
    assert "Did you mean 'RPMs'" in out


@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(st.binary(max_size=300))
def test_any_bytes_end_in_a_sentence(tmp_path: Path, content: bytes) -> None:
    for name in ("any.csv", "any.xlsx"):
        (tmp_path / name).write_bytes(content)
        try:
            sheet = read_sheet(tmp_path / name)
        except SheetUnusable as error:
            assert str(error)
        else:
            assert any(sheet.heads)


@settings(max_examples=100, deadline=None)
@given(st.text(max_size=200))
def test_any_text_as_a_map_ends_in_sentences(text: str) -> None:
    try:
        assert parse_map(text).columns
    except MapUnusable as error:
        assert str(error)
