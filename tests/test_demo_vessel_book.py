"""The book of the demonstration vessel: written once and whole, or not at all."""

import io
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import pytest
from demo_vessel_helpers import vessel, whole_history

import demo_vessel.__main__ as command
from demo_vessel.records import History
from demo_vessel.writing import entries
from logbook.book.book import Book
from logbook.book.entry import NewEntry
from logbook.book.verify import breaks
from logbook.plant.records import Plant


@pytest.fixture(scope="module")
def history() -> History:
    return whole_history()


@pytest.fixture(scope="module")
def plant() -> Plant:
    return vessel()


@pytest.fixture
def short(history: History, monkeypatch: pytest.MonkeyPatch) -> History:
    """The first days only, so that a book is written in no time."""
    part = replace(history, records=history.records[:400])
    monkeypatch.setattr(command, "generate", lambda progress: part)
    return part


def test_the_book_is_built_once(short: History, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    folder = tmp_path / "new" / "ship"
    assert command.main(["--build-only", "--folder", str(folder)]) == 0
    assert "100 %" in capsys.readouterr().err
    with Book.open(folder, read_only=True) as book:
        assert breaks(book.rows()) == ()
        count, head = book.count(), book.head()
        assert count == len(short.records) + 1
        standing = len([r for r in short.readings if not r.amendment_reason])
        assert len(book.entries(kinds=["reading"])) == standing
    assert command.main(["--build-only", "--folder", str(folder)]) == 0
    assert capsys.readouterr().err == ""
    with Book.open(folder, read_only=True) as book:
        assert book.head() == head


def test_an_amendment_takes_the_place_of_its_reading(history: History, plant: Plant, tmp_path: Path) -> None:
    (amended, *_) = (reading for reading in history.readings if reading.amendment_reason)
    both = [r for r in history.readings if (r.engine, r.taken_utc) == (amended.engine, amended.taken_utc)]
    (tmp_path / "plant.toml").write_text(plant.text, encoding="utf-8")
    with Book.open(tmp_path) as book:
        book.append_many(entries(replace(history, records=tuple(both)), plant, 1))
        (standing,) = book.entries()
        assert standing.replaces == 1
        assert standing.reason == amended.amendment_reason


def test_a_broken_off_build_leaves_no_entries(
    short: History, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    def broken(history: History, plant: Plant, first_number: int) -> Iterator[NewEntry]:
        for count, entry in enumerate(entries(history, plant, first_number)):
            if count == 200:
                raise KeyboardInterrupt
            yield entry

    monkeypatch.setattr("demo_vessel.writing.entries", broken)
    assert command.main(["--build-only", "--folder", str(tmp_path)]) == 130
    assert "nothing was written" in capsys.readouterr().err
    with Book.open(tmp_path, read_only=True) as book:
        assert book.count() == 0
    monkeypatch.undo()
    monkeypatch.setattr(command, "generate", lambda progress: short)
    assert command.main(["--build-only", "--folder", str(tmp_path)]) == 0
    with Book.open(tmp_path, read_only=True) as book:
        assert book.count() == len(short.records) + 1


def test_a_folder_that_cannot_be_used_is_a_sentence(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "a file"
    file.write_text("no folder", encoding="utf-8")
    assert command.main(["--build-only", "--folder", str(file / "ship")]) == 3
    said = capsys.readouterr().err
    assert "cannot be used" in said
    assert "Traceback" not in said


def test_another_plants_folder_is_left_alone(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (tmp_path / "plant.toml").write_text('[plant]\nkind = "ship"\nname = "Another"\n', encoding="utf-8")
    assert command.main(["--build-only", "--folder", str(tmp_path)]) == 3
    assert "another plant" in capsys.readouterr().err
    assert [path.name for path in tmp_path.iterdir()] == ["plant.toml"]


def test_without_build_only_the_panes_are_opened(
    short: History, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    asked: list[list[str]] = []
    monkeypatch.setattr("logbook.command_line.main.main", lambda argv: asked.append(argv) or 0)
    assert command.main(["--folder", str(tmp_path)]) == 0
    assert asked == [["open", str(tmp_path)]]


def test_the_bar_is_one_line_on_a_terminal() -> None:
    class Terminal(io.StringIO):
        def isatty(self) -> bool:
            return True

    stream = Terminal()
    bar = command.Bar(stream)
    for percent in range(1001):
        bar.show(percent / 1000)
    assert stream.getvalue().count("\n") == 1
    assert stream.getvalue().endswith("100 %\n")
