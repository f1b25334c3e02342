"""The history as entries of a book: every text read as a person's would be, all of it written at once or not at all."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Callable, Iterator, Mapping
from datetime import datetime
from typing import Any

from demo_vessel.papers import CHIEF
from demo_vessel.records import History, Note, Reading
from logbook.book.book import Book
from logbook.book.entry import NewEntry
from logbook.plant.records import Engine, Plant
from logbook.reading.round import habits_of
from logbook.reading.typed import read_typed
from logbook.reading.typing_test import span_findings

SOURCE = "import"


class _Typed:
    """Texts -> values as the book keeps them. A gauge shows the same text again and again: each is read once."""

    def __init__(self, plant: Plant) -> None:
        self._plant = plant
        self._habits = habits_of(plant)
        self._kept: dict[tuple[str, bool], dict[tuple[str, str], dict[str, Any]]] = defaultdict(dict)

    def values(self, values: Mapping[str, str], subject: str) -> dict[str, dict[str, Any]]:
        engine = next((engine for engine in self._plant.engines if engine.id == subject), None)
        running = engine is None or values.get("engine_state") == "running"
        kept = self._kept[subject, running]
        return {
            key: kept.get((key, text)) or self._value(key, text, engine, running, kept) for key, text in values.items()
        }

    def _value(
        self, key: str, text: str, engine: Engine | None, running: bool, kept: dict[tuple[str, str], dict[str, Any]]
    ) -> dict[str, Any]:
        point = self._plant.points[key.partition(".")[0]]
        value, findings = read_typed(text, point, self._habits)
        if value is None:
            raise ValueError(f"{key}: '{text}' is no text that a log can hold: {findings[0].sentence}")
        findings += span_findings(value, point, engine, running=running)
        if findings:
            value = value.accepting(*(finding.key for finding in findings))
        body = value.to_body()
        if point.kind != "counter":
            kept[key, text] = body
        return body


def entries(history: History, plant: Plant, first_number: int) -> Iterator[NewEntry]:
    """Every record as a new entry. `first_number`: the number that the book gives to the first of them."""
    typed = _Typed(plant)
    numbers: dict[tuple[str, datetime], int] = {}
    for number, record in enumerate(history.records, first_number):
        if isinstance(record, Note):
            yield _noted(record)
            continue
        of = (record.engine, record.taken_utc)
        yield _read(record, typed, numbers[of] if record.amendment_reason else None)
        numbers[of] = number


def _noted(note: Note) -> NewEntry:
    return NewEntry(note.kind, note.subject, note.taken_utc, note.utc_offset_min, note.person, note.body, source=SOURCE)


def _read(reading: Reading, typed: _Typed, replaces: int | None) -> NewEntry:
    return NewEntry(
        kind="reading",
        subject=reading.engine,
        taken_utc=reading.taken_utc,
        utc_offset_min=reading.utc_offset_min,
        person=reading.person,
        body={"occasion": reading.occasion, "values": typed.values(reading.values, reading.engine)},
        source=SOURCE,
        round=reading.round,
        replaces=replaces,
        reason=reading.amendment_reason,
    )


def write(book: Book, plant: Plant, history: History, progress: Callable[[int], None]) -> int:
    """Append plant.toml and the whole history in one transaction. Raises BookUnusable."""
    described = [entry for entry in book.entries(kinds=["plant_description"]) if entry.body["digest"] == plant.digest]
    first = history.records[0]

    def all_entries() -> Iterator[NewEntry]:
        number = book.head()[0] + 1
        if not described:
            yield NewEntry(
                kind="plant_description",
                subject="plant",
                taken_utc=first.taken_utc,
                utc_offset_min=first.utc_offset_min,
                person=CHIEF,
                body={"digest": plant.digest, "text": plant.text, "how": "correction"},
                source=SOURCE,
            )
            number += 1
        yield from entries(history, plant, number)

    return book.append_many(all_entries(), progress)
