"""Drafts: kept field by field, offered after a reconnect, held by one live session."""

import subprocess
import sys
from datetime import UTC, datetime
from pathlib import Path

import pytest

from logbook.book.drafts import Draft, Drafts, DraftUnusable, Typed


def draft(person: str = "Third engineer", start: str = "2026-05-14T00:00Z") -> Draft:
    return Draft(
        person=person,
        round=f"{start} ME watch",
        subjects=("ME",),
        occasion="watch",
        taken_utc=datetime(2026, 5, 14, 4, tzinfo=UTC),
        utc_offset_min=180,
        fields={"ME/engine_speed": Typed("98,2"), "ME/shaft_power": Typed("96100", ("outside_span",))},
        position="ME/engine_fuel_index",
    )


def test_a_draft_comes_back_as_it_was_left(tmp_path: Path) -> None:
    kept = draft()
    Drafts(tmp_path).keep(kept)
    assert Drafts(tmp_path).unfinished("Third engineer") == ([kept], [])
    assert Drafts(tmp_path).unfinished("Second engineer") == ([], [])


def test_two_people_on_one_engine_are_kept_apart(tmp_path: Path) -> None:
    drafts = Drafts(tmp_path)
    drafts.keep(draft("Third engineer"))
    other = draft("Fourth engineer")
    other.fields = {"ME/engine_speed": Typed("98,4")}
    drafts.keep(other)
    assert drafts.unfinished("Fourth engineer")[0] == [other]
    assert drafts.unfinished("Third engineer")[0] == [draft()]


def test_a_finished_draft_is_gone(tmp_path: Path) -> None:
    drafts = Drafts(tmp_path)
    drafts.keep(draft())
    assert drafts.claim(draft())
    drafts.finish(draft())
    assert drafts.unfinished("Third engineer") == ([], [])
    assert list(drafts.folder.iterdir()) == []


def test_a_second_live_session_is_told(tmp_path: Path) -> None:
    first, second = Drafts(tmp_path), Drafts(tmp_path)
    assert first.claim(draft())
    assert first.claim(draft())
    assert not second.claim(draft())


def test_a_claim_ends_with_its_process(tmp_path: Path) -> None:
    code = (
        "import sys, os; sys.path.insert(0, 'tests/book'); from test_drafts import *;"
        f"assert Drafts(Path({str(tmp_path)!r})).claim(draft()); os.kill(os.getpid(), 9)"
    )
    done = subprocess.run([sys.executable, "-c", code], check=False, cwd=Path(__file__).parents[2])
    assert done.returncode == -9
    assert Drafts(tmp_path).claim(draft())


def test_a_damaged_draft_is_said_and_left(tmp_path: Path) -> None:
    drafts = Drafts(tmp_path)
    drafts.keep(draft())
    (drafts.folder / "broken.json").write_text('{"person": "Third')
    found, unreadable = drafts.unfinished("Third engineer")
    assert found == [draft()]
    assert "broken.json cannot be read" in unreadable[0]
    assert (drafts.folder / "broken.json").exists()


def test_a_place_that_takes_no_file_is_said(tmp_path: Path) -> None:
    (tmp_path / "drafts").write_text("a file where the folder should be")
    with pytest.raises(DraftUnusable, match="still on this screen"):
        Drafts(tmp_path).keep(draft())


def test_names_cannot_lead_out_of_the_folder(tmp_path: Path) -> None:
    strange = draft("../../etc/passwd")
    Drafts(tmp_path).keep(strange)
    assert [path.parent for path in tmp_path.rglob("*.json")] == [tmp_path / "drafts"]
