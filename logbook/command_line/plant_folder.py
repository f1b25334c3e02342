"""Opening a plant folder for a command: plant.toml read, book opened, a changed plant.toml noted in the book."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING

from logbook.book.book import AmendmentRefused, Book, BookUnusable
from logbook.book.drafts import DraftUnusable
from logbook.book.entry import NewEntry
from logbook.command_line.environment import Environment, ExitCode, Person, Refused
from logbook.plant.description import PlantUnusable, read_plant

if TYPE_CHECKING:
    from logbook.plant.records import Plant


def plant_of(folder: Path) -> Plant:
    """The plant of that folder; Refused with every fault of its plant.toml."""
    try:
        return read_plant(folder)
    except PlantUnusable as error:
        raise Refused(str(error), ExitCode.CANNOT_USE_PLANT) from error


@contextmanager
def opened(folder: Path, environment: Environment, person: Person, *, write: bool) -> Iterator[tuple[Plant, Book]]:
    """Plant and book, closed at the end. Whatever the book refuses becomes a sentence and an exit code."""
    plant = plant_of(folder)
    try:
        with Book.open(folder, read_only=not write, now=environment.now) as book:
            if write:
                note_plant(book, plant, person, environment)
            yield plant, book
    except BookUnusable as error:
        raise Refused(str(error), ExitCode.CANNOT_USE_PLANT) from error
    except AmendmentRefused as error:
        raise Refused(str(error), ExitCode.WRONG_REQUEST) from error
    except DraftUnusable as error:
        raise Refused(str(error), ExitCode.CANNOT_USE_PLANT) from error


def note_plant(book: Book, plant: Plant, person: Person, environment: Environment) -> None:
    """Append plant.toml to the book when it differs from the one that the book last saw."""
    described = book.entries(kinds=["plant_description"])
    last = max(described, key=lambda entry: entry.number, default=None)
    if last is not None and last.body.get("digest") == plant.digest:
        return
    now = environment.now()
    book.append(
        NewEntry(
            kind="plant_description",
            subject="plant",
            taken_utc=now,
            utc_offset_min=plant.utc_offset_min,
            person=person.name,
            identity_by=person.identity_by,
            # The first one describes the plant from the beginning; so does a later one until it is given a date.
            body={"digest": plant.digest, "text": plant.text, "how": "correction"},
        )
    )
