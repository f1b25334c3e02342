"""The panes by keyboard alone at 80x24, through Textual's pilot; what is drawn and what is written."""

import shutil
from collections.abc import Callable
from datetime import UTC, datetime, timedelta
from pathlib import Path

import pytest
from book_helpers import reading
from textual.pilot import Pilot

from logbook.book.book import Book
from logbook.book.drafts import Drafts
from logbook.panes.app import LogbookApp, Session
from logbook.panes.form import RoundForm
from logbook.panes.terminal.glyphs import ASCII, BOX, Glyphs
from logbook.plant.description import read_plant

FIXTURE = Path(__file__).parents[1] / "fixtures" / "ship_handkept" / "plant.toml"
NOW = datetime(2026, 5, 14, 2, 10, tzinfo=UTC)


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    shutil.copy(FIXTURE, tmp_path / "plant.toml")
    return tmp_path


def session(folder: Path, book: Book, *, read_only: bool = False, glyphs: Glyphs = BOX) -> Session:
    return Session(
        plant=read_plant(folder), folder=folder, book=book, drafts=Drafts(folder),
        person="Third engineer", identity_by="as stated",
        read_only=read_only, glyphs=glyphs, now=lambda: NOW,
    )  # fmt: skip


def screen(app: LogbookApp) -> str:
    return "\n".join(strip.text for strip in app.screen._compositor.render_strips())


async def until(pilot: Pilot[None], condition: Callable[[], bool]) -> None:
    for _ in range(200):
        if condition():
            return
        await pilot.pause(0.05)
    raise AssertionError(screen(pilot.app))  # type: ignore[arg-type]


async def test_a_round_is_entered_signed_off_and_in_the_book(folder: Path) -> None:
    with Book.open(folder) as book:
        app = LogbookApp(session(folder, book))
        async with app.run_test(size=(80, 24)) as pilot:
            await until(pilot, lambda: "New round" in screen(app))
            assert "2026-05-14 0400 +02:00 ME watch" in screen(app)
            await pilot.press("1")
            await until(pilot, lambda: bool(app.query(RoundForm)))
            await pilot.press(*"run", "enter", *"98.2", "enter", *"96100", "enter")
            await until(pilot, lambda: "outside 0 to" in screen(app))
            # A second Enter accepts and marks; the draft has every field that was left.
            await pilot.press("enter", "n")
            (draft,), _ = Drafts(folder).unfinished("Third engineer")
            assert draft.fields["ME/shaft_power"].text == "96100"
            assert draft.fields["ME/shaft_power"].accepted
            assert draft.fields["ME/load_indicator"].text == "N/R"
            await pilot.press("escape", "o")
            await until(pilot, lambda: "Sign off as Third engineer?" in screen(app))
            await pilot.press("enter")
            await until(pilot, lambda: book.count() == 1)
            await until(pilot, lambda: "Excess" in screen(app))
            (entry,) = book.entries()
            assert entry.person == "Third engineer"
            assert entry.values()["shaft_power"].findings == ("outside_span",)
            assert Drafts(folder).unfinished("Third engineer") == ([], [])


async def test_a_row_of_another_length_is_refused_and_kept_as_typed(folder: Path) -> None:
    with Book.open(folder) as book:
        app = LogbookApp(session(folder, book))
        async with app.run_test(size=(80, 24)) as pilot:
            await until(pilot, lambda: "New round" in screen(app))
            await pilot.press("1")
            await until(pilot, lambda: bool(app.query(RoundForm)))
            await pilot.press("enter", "enter", "enter", "enter", *"340 352", "enter", "enter")
            await until(pilot, lambda: "2 values for 6 places" in screen(app))
            form = app.query_one(RoundForm)
            assert form.entering.current.name == "ME/cylinder_exhaust_temperature"
            await pilot.press("escape", "o")
            # Nothing else was entered: there is nothing to sign off, and the text is still in the draft.
            await until(pilot, lambda: "Nothing is entered yet" in screen(app))
            (draft,), _ = Drafts(folder).unfinished("Third engineer")
            assert draft.fields["ME/cylinder_exhaust_temperature"].text == "340 352"


async def test_a_pasted_watch_goes_into_its_fields(folder: Path) -> None:
    from textual import events

    with Book.open(folder) as book:
        app = LogbookApp(session(folder, book))
        async with app.run_test(size=(80, 24)) as pilot:
            await until(pilot, lambda: "New round" in screen(app))
            await pilot.press("1")
            await until(pilot, lambda: bool(app.query(RoundForm)))
            form = app.query_one(RoundForm)
            form._on_paste(events.Paste("run\n98.2\n9610\n83\n340 352 348 351 347 340\n"))
            assert len(form.entering.values()) == 10
            assert form.entering.current.name == "ME/cylinder_maximum_pressure"


async def test_last_values_stand_beside_the_field_and_never_in_it(folder: Path) -> None:
    with Book.open(folder) as book:
        book.append(reading(0, engine_speed=97.5))
        app = LogbookApp(session(folder, book))
        async with app.run_test(size=(80, 24)) as pilot:
            await until(pilot, lambda: "New round" in screen(app))
            await pilot.press("1")
            await until(pilot, lambda: bool(app.query(RoundForm)))
            line = next(line for line in screen(app).splitlines() if line.startswith(" RPM"))
            assert line.rstrip().endswith("97.5")
            assert app.query_one(RoundForm).entering.texts == {}
            await pilot.press("enter", *"98.0", "enter")
            line = next(line for line in screen(app).splitlines() if line.startswith(" RPM"))
            assert "97.5 (+0.5)" in line


async def test_a_second_session_is_told_and_keeps_its_own_draft(folder: Path) -> None:
    with Book.open(folder) as book:
        first, second = LogbookApp(session(folder, book)), LogbookApp(session(folder, book))
        async with first.run_test(size=(80, 24)) as one:
            await until(one, lambda: "New round" in screen(first))
            await one.press("1")
            await until(one, lambda: bool(first.query(RoundForm)))
            await one.press(*"run", "enter")
            async with second.run_test(size=(80, 24)) as two:
                await until(two, lambda: "go on with" in screen(second))
                await two.press("1")
                await until(two, lambda: bool(second.query(RoundForm)))
                await two.press("enter", *"99", "enter")
                drafts, _ = Drafts(folder).unfinished("Third engineer")
                assert sorted(draft.round.endswith("(second session)") for draft in drafts) == [False, True]


async def test_reading_only_writes_nothing(folder: Path) -> None:
    Book.open(folder).close()
    with Book.open(folder, read_only=True) as book:
        app = LogbookApp(session(folder, book, read_only=True))
        async with app.run_test(size=(80, 24)) as pilot:
            await until(pilot, lambda: "may read and not write" in screen(app))
            await pilot.press("1", "left")
            assert not app.query(RoundForm)


async def test_the_book_lists_strikes_out_and_unfolds(folder: Path) -> None:
    from dataclasses import replace

    with Book.open(folder) as book:
        book.append(reading(0, engine_speed=97.5))
        book.append(replace(reading(0, engine_speed=79.5), replaces=1, reason="digits swapped"))
        app = LogbookApp(session(folder, book), first="Book")
        async with app.run_test(size=(80, 24)) as pilot:
            await until(pilot, lambda: "head of the book: entry 2" in screen(app))
            assert "~1" in screen(app)
            await pilot.press("enter")
            await until(pilot, lambda: "digits swapped" in screen(app) and "engine_speed" in screen(app))
            await pilot.press("escape", "question_mark")
            await until(pilot, lambda: "Cautions" in screen(app))


async def test_ladder_and_trend_say_why_there_is_nothing(folder: Path) -> None:
    with Book.open(folder) as book:
        book.append(reading(0, engine_speed=97.5))
        app = LogbookApp(session(folder, book, glyphs=ASCII), first="Ladder")
        async with app.run_test(size=(80, 24)) as pilot:
            await until(pilot, lambda: "no reading can be compared yet" in screen(app))
            await pilot.press("t")
            await until(pilot, lambda: "can be compared yet" in screen(app) and "Most often" in screen(app))


async def test_an_earlier_round_for_a_late_entry(folder: Path) -> None:
    with Book.open(folder) as book:
        app = LogbookApp(session(folder, book))
        async with app.run_test(size=(80, 24)) as pilot:
            await until(pilot, lambda: "New round" in screen(app))
            await pilot.press("left", "left")
            earlier = NOW.replace(minute=0) - timedelta(hours=8) + timedelta(hours=2)
            await until(pilot, lambda: f"{earlier:%Y-%m-%d %H}00 +02:00 ME watch" in screen(app))
