"""Answers worked out in a thread of their own, with a reading connection of their own to the book."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from pathlib import Path
from typing import TypeVar

from logbook.book.book import Book
from logbook.book.entry import Entry

Answer = TypeVar("Answer")


def answered(folder: Path, question: Callable[[Sequence[Entry]], Answer]) -> Answer:
    """What `question` makes of the valid entries of the book. For a worker thread: the panes stay alive meanwhile."""
    with Book.open(folder, read_only=True) as book:
        return question(book.entries())
