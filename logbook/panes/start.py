"""Puts the app before a person: driver, settings, and what happens when the line drops."""

from __future__ import annotations

from collections.abc import Callable
from datetime import datetime
from pathlib import Path

from logbook.book.book import Book
from logbook.book.drafts import Drafts
from logbook.panes.app import LogbookApp, Session
from logbook.panes.terminal.glyphs import Glyphs
from logbook.panes.terminal.settings import run
from logbook.plant.records import Plant


def show(
    plant: Plant,
    folder: Path,
    book: Book,
    *,
    person: str,
    identity_by: str,
    read_only: bool,
    first: str,
    glyphs: Glyphs,
    plain_driver: bool,
    now: Callable[[], datetime],
) -> None:
    """Run the panes until the person leaves."""
    session = Session(
        plant=plant,
        folder=folder,
        book=book,
        drafts=Drafts(folder),
        person=person,
        identity_by=identity_by,
        read_only=read_only,
        glyphs=glyphs,
        now=now,
    )
    run(LogbookApp(session, first), plain_driver=plain_driver)
