"""Draws the pictures of the README from the panes themselves: `python tests/pictures.py`."""

from __future__ import annotations

import asyncio
import re
from datetime import UTC, datetime
from pathlib import Path

from logbook.book.book import Book
from logbook.book.drafts import Drafts
from logbook.panes.app import LogbookApp, Session
from logbook.panes.terminal.glyphs import BOX
from logbook.plant.description import read_plant

HERE = Path(__file__).parents[1] / "demo_vessel"
FOLDER = HERE / "pictures"
NOW = datetime(2026, 9, 30, 20, 10, tzinfo=UTC)
TYPED = ("run", "78.4", "9120", "64", "off", "341 338 347 344 340 345 339")


async def _draw(session: Session, name: str, *, wait_for: str = "", typed: tuple[str, ...] = ()) -> None:
    app = LogbookApp(session, name)
    async with app.run_test(size=(80, 24)) as pilot:
        if typed:
            await pilot.press("1")
        for text in typed:
            await pilot.press(*text, "enter")
        for _ in range(400):
            await pilot.pause(0.1)
            if wait_for in "".join(strip.text for strip in app.screen._compositor.render_strips()):
                break
        picture = app.export_screenshot(title=f"{session.plant.name}: {name}")
    # Rich links a font from the net; the picture has to do without one.
    picture = re.sub(r"@font-face\s*{.*?}", "", picture, flags=re.DOTALL)
    picture = picture.replace("<text ", '<text xml:space="preserve" ')
    (FOLDER / f"{name.lower()}.svg").write_text(picture, encoding="utf-8")


def main() -> None:
    """All four, from the vessel's own book, which must have been built."""
    plant = read_plant(HERE)
    FOLDER.mkdir(exist_ok=True)
    with Book.open(HERE) as book:
        session = Session(
            plant=plant, folder=HERE, book=book, drafts=Drafts(HERE), person="Third engineer", identity_by="as stated",
            read_only=False, glyphs=BOX, now=lambda: NOW,
        )  # fmt: skip
        asyncio.run(_draw(session, "Watch", wait_for="fields", typed=TYPED))
        for draft in session.drafts.unfinished(session.person)[0]:
            session.drafts.finish(draft)
        asyncio.run(_draw(session, "Ladder", wait_for="Excess"))
        asyncio.run(_draw(session, "Trend", wait_for="running hours"))
        asyncio.run(_draw(session, "Book", wait_for="digest"))


if __name__ == "__main__":
    main()
