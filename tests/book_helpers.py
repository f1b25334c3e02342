"""Small makers of entries for the tests of several rooms."""

from datetime import UTC, datetime, timedelta

from logbook.book.entry import NewEntry, reading_body
from logbook.reading.value import Value

START = datetime(2026, 5, 1, tzinfo=UTC)


def number(value: float, **more: object) -> Value:
    return Value(number=value, text=f"{value:g}", digits=3, **more)  # type: ignore[arg-type]


def reading(hours: float, engine: str = "ME", occasion: str = "watch", **values: float) -> NewEntry:
    """A reading of an engine so many hours after START."""
    return NewEntry(
        kind="reading",
        subject=engine,
        taken_utc=START + timedelta(hours=hours),
        utc_offset_min=120,
        person="Second engineer",
        body=reading_body(occasion, {key: number(value) for key, value in values.items()}),
    )
