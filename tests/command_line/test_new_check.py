"""The commands `logbook new` and `logbook check`."""

import io
import json
import os
import sqlite3
import stat
from collections.abc import Iterator
from pathlib import Path

import pytest
from book_helpers import reading
from plant_texts import edited

from logbook.book.book import Book
from logbook.command_line import new
from logbook.command_line.environment import Environment
from logbook.command_line.main import main

FIXTURES = Path(__file__).parents[1] / "fixtures"


def run(*argv: object) -> tuple[int, str, str]:
    """Exit code, answer and complaint of one command."""
    environment = Environment(out=io.StringIO(), err=io.StringIO(), variables={}, account="tester")
    code = main([str(argument) for argument in argv], environment)
    assert isinstance(environment.out, io.StringIO)
    assert isinstance(environment.err, io.StringIO)
    return code, environment.out.getvalue(), environment.err.getvalue()


@pytest.fixture(autouse=True)
def open_umask() -> Iterator[None]:
    """Rights must be tight whatever the account's habit is."""
    before = os.umask(0)
    yield
    os.umask(before)


def rights(path: Path) -> int:
    return stat.S_IMODE(path.stat().st_mode)


# new


@pytest.mark.parametrize("kind", ["ship", "station"])
def test_new_makes_a_folder_that_opens_at_once(tmp_path: Path, kind: str) -> None:
    folder = tmp_path / "plants" / "northern star"
    code, said, complaint = run("new", folder, "--kind", kind)
    assert (code, complaint) == (0, "")
    assert f"wrote {folder}/plant.toml" in said
    # The next commands can be copied as they stand.
    assert f"logbook check '{folder}'" in said
    assert f"logbook open '{folder}'" in said
    assert rights(folder) == 0o700
    assert rights(folder / "plant.toml") == 0o600
    assert [path.name for path in folder.iterdir()] == ["plant.toml"]
    assert run("check", folder)[0] == 0


def test_new_in_a_folder_that_is_there(tmp_path: Path) -> None:
    tmp_path.chmod(0o755)
    code, said, _ = run("new", tmp_path, "--kind", "ship")
    assert code == 0
    assert said.startswith("Wrote ")
    assert rights(tmp_path) == 0o755


def test_new_never_overwrites(tmp_path: Path) -> None:
    (tmp_path / "plant.toml").write_text("mine")
    code, said, complaint = run("new", tmp_path, "--kind", "ship")
    assert (code, said) == (2, "")
    assert "is there already, and nothing was written" in complaint
    assert f"logbook check {tmp_path}" in complaint
    assert (tmp_path / "plant.toml").read_text() == "mine"


def test_new_does_not_write_through_a_dangling_link(tmp_path: Path) -> None:
    (tmp_path / "plant.toml").symlink_to(tmp_path / "elsewhere")
    assert run("new", tmp_path, "--kind", "ship")[0] == 2
    assert not (tmp_path / "elsewhere").exists()


def test_new_where_a_file_stands(tmp_path: Path) -> None:
    (tmp_path / "file").write_text("")
    code, _, complaint = run("new", tmp_path / "file", "--kind", "ship")
    assert (code, "is no folder" in complaint) == (2, True)
    code, _, complaint = run("new", tmp_path / "file" / "below", "--kind", "ship")
    assert (code, "cannot be written: Not a directory" in complaint) == (3, True)


def test_new_without_rights(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def refused(*_: object, **__: object) -> None:
        raise PermissionError(13, "Permission denied")

    # Root may write everywhere, so the refusal is played.
    monkeypatch.setattr(Path, "mkdir", refused)
    code, said, complaint = run("new", tmp_path / "below", "--kind", "ship")
    assert (code, said) == (3, "")
    assert "cannot be written: Permission denied. Name a folder where you may write." in complaint


def test_new_on_a_full_disk_leaves_no_half_file(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def full(_: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(new.os, "fsync", full)
    code, _, complaint = run("new", tmp_path, "--kind", "ship")
    assert (code, "No space left" in complaint) == (3, True)
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize(
    ("argv", "part"),
    [
        (["new"], "FOLDER"),
        (["new", "x"], "--kind"),
        (["new", "x", "--kind", "barge"], "'ship', 'station'"),
        (["check"], "PLANT"),
    ],
)
def test_wrong_requests(argv: list[str], part: str) -> None:
    code, said, complaint = run(*argv)
    assert (code, said) == (2, "")
    assert part in complaint
    assert not Path("x").exists()


@pytest.mark.parametrize("command", ["new", "check"])
def test_help_has_a_worked_example(command: str, capsys: pytest.CaptureFixture[str]) -> None:
    with pytest.raises(SystemExit) as left:
        run(command, "--help")
    assert left.value.code == 0
    said = capsys.readouterr().out
    assert f"example:\n  logbook {command} my_ship" in said
    assert max(map(len, said.split("\n"))) <= 80 + len("usage: ")


# check


def plant_folder(tmp_path: Path, *edits: tuple[str, str]) -> Path:
    (tmp_path / "plant.toml").write_text(edited(*edits), encoding="utf-8")
    return tmp_path


def test_check_of_a_plant_without_a_book() -> None:
    code, said, complaint = run("check", FIXTURES / "station_handkept")
    assert (code, complaint) == (0, "")
    assert " ".join(said.split()).startswith("plant.toml is good: Invented island power station, station, engines G1,")
    # What sister sets share is said once.
    assert said.count("No ambient correction is entered") == 1
    assert "G1, G2, G3, G4: No ambient correction is entered" in said
    assert "(not_corrected)" in said
    assert '  add      [engine.correction] rule = "ISO 3046"\n' in said
    # What hinders a comparison stands before what does not.
    assert said.index("(no_reference)") < said.index("Mean indicated pressure is not read")
    assert said.endswith("There is no book yet: the first entry makes it.\n")
    assert max(map(len, said.split("\n"))) <= 79


def test_check_says_every_fault_and_ends_with_three(tmp_path: Path) -> None:
    folder = plant_folder(tmp_path, ("bore_mm = 600", "bore_mm = -600"), ('unit = "L"', 'unit = "gal"'))
    code, said, complaint = run("check", folder)
    assert (code, complaint) == (3, "")
    flowing = " ".join(said.split())
    assert f"{folder}/plant.toml cannot be used: 2 faults." in flowing
    assert "line 14: engine[1].bore_mm: found -600; expected a number from 40 to 1200 mm." in flowing
    assert 'meter[1].unit: found "gal"; expected one of "L", "m3", "kg", "t".' in flowing


def test_check_of_faults_as_json(tmp_path: Path) -> None:
    code, said, _ = run("check", plant_folder(tmp_path, ("bore_mm = 600", "bohr_mm = 600")), "--json")
    found = json.loads(said)
    assert (code, found["usable"]) == (3, False)
    assert [(fault["line"], fault["key"]) for fault in found["faults"]] == [
        (8, "engine[1].bore_mm"),
        (14, "engine[1].bohr_mm"),
    ]
    assert found["faults"][1]["suggestion"] == 'Did you mean "bore_mm"?'
    assert found["faults"][1]["sentence"].startswith("line 14: engine[1].bohr_mm: found ")


@pytest.mark.parametrize("argv", [[], ["--json"]])
def test_check_where_there_is_nothing(tmp_path: Path, argv: list[str]) -> None:
    code, said, complaint = run("check", tmp_path / "nowhere", *argv)
    assert (code, complaint) == (3, "")
    assert "logbook new" in said


def test_check_as_json_says_what_is_missing(tmp_path: Path) -> None:
    code, said, _ = run("check", plant_folder(tmp_path), "--json")
    found = json.loads(said)
    assert (code, found["usable"], found["faults"], found["book"]) == (0, True, [], None)
    item = next(item for item in found["missing"] if item["flag"] == "mode_has_no_reference")
    assert item["subject"] == "ME"
    assert "excess_gap" in item["figures"]
    assert set(item) == {"subject", "figures", "sentence", "add", "flag"}


def with_book(folder: Path, *engines: str) -> Path:
    with Book.open(folder) as book:
        for hours, engine in enumerate(engines):
            book.append(reading(hours, engine, engine_speed=95.0))
    return folder


def test_check_of_a_whole_book(tmp_path: Path) -> None:
    folder = with_book(plant_folder(tmp_path), "ME", "ME", "AE1")
    code, said, _ = run("check", folder)
    assert code == 0
    assert "The book is whole: 3 entries; digest of the last:\n" in said
    assert "does not have" not in said
    found = json.loads(run("check", folder, "--json")[1])["book"]
    assert (found["entries"], found["breaks"], found["not_in_plant"]) == (3, [], [])
    assert found["digest"] in said


def test_check_of_an_altered_book(tmp_path: Path) -> None:
    folder = with_book(plant_folder(tmp_path), "ME", "ME", "ME")
    connection = sqlite3.connect(folder / "logbook.db")
    for (trigger,) in connection.execute("SELECT name FROM sqlite_master WHERE type = 'trigger'").fetchall():
        connection.execute(f"DROP TRIGGER {trigger}")
    connection.execute("UPDATE entries SET person = 'somebody else' WHERE number = 2")
    connection.commit()
    connection.close()
    code, said, _ = run("check", folder)
    assert code == 1
    assert "entry 2 was altered" in said
    assert "The book is NOT whole: 1 break of the chain." in said
    code, said, _ = run("check", folder, "--json")
    assert (code, json.loads(said)["book"]["breaks"]) == (1, ["entry 2 was altered"])


def test_check_of_a_book_that_is_none(tmp_path: Path) -> None:
    folder = plant_folder(tmp_path)
    (folder / "logbook.db").write_bytes(b"this is no book at all, but long enough to be read as one" * 40)
    code, said, _ = run("check", folder)
    assert code == 3
    assert "logbook backup" in " ".join(said.split())
    assert json.loads(run("check", folder, "--json")[1])["book"]["usable"] is False


def test_check_knows_readings_of_an_engine_that_was_renamed(tmp_path: Path) -> None:
    folder = with_book(plant_folder(tmp_path), "ME", "AE2")
    code, said, _ = run("check", folder)
    assert code == 0
    assert "The book has readings of AE2, which plant.toml does not have" in " ".join(said.split())
    assert json.loads(run("check", folder, "--json")[1])["book"]["not_in_plant"] == ["AE2"]
