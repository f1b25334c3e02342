"""One entry of the book, its canonical bytes and its digest."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import UTC, datetime, timedelta, timezone
from typing import Any

from logbook.reading.value import Value

SCHEMA = 1
"""Form of the body; kept with each entry, so that a later form leaves old entries as they were."""

KINDS = (
    "reading", "event", "work", "delivery", "lot", "transfer", "sounding", "remark", "baseline", "setting",
    "plant_description", "signature", "countersignature", "clock",
)  # fmt: skip

FIRST_DIGEST = hashlib.sha256(b"engine-logbook: the first entry follows").hexdigest()
"""Stands where the first entry names the digest before it."""


def utc_text(moment: datetime) -> str:
    """An instant as the book keeps it: 2026-05-14T04:00:00Z; sorts as text.

    Raises ValueError for a moment without an offset: local time alone names no instant.
    """
    if moment.tzinfo is None:
        raise ValueError("A moment in the book needs its offset from UTC.")
    return moment.astimezone(UTC).strftime("%Y-%m-%dT%H:%M:%SZ")


def utc_moment(text: str) -> datetime:
    """The instant that `utc_text` wrote."""
    return datetime.fromisoformat(text)


def canonical_json(body: Any) -> str:
    """JSON with sorted keys and no blanks: the same content always has the same bytes. Refuses NaN."""
    return json.dumps(body, sort_keys=True, ensure_ascii=False, separators=(",", ":"), allow_nan=False)


@dataclass(frozen=True, slots=True)
class NewEntry:
    """What a person or an import wants to write; number, time of entry and digest are given by the book."""

    kind: str
    subject: str
    """engine, plant ("plant"), tank or lot that it belongs to"""
    taken_utc: datetime
    utc_offset_min: int
    person: str
    body: Mapping[str, Any]
    identity_by: str = "as stated"
    source: str = "hand"
    round: str = ""
    """what one person read on one walk carries one word, e.g. `2026-05-14T04:00Z watch 3/E`"""
    replaces: int | None = None
    reason: str = ""


@dataclass(frozen=True, slots=True)
class Entry:
    """An entry as it stands in the book."""

    number: int
    schema: int
    kind: str
    subject: str
    round: str
    taken_utc: datetime
    utc_offset_min: int
    entered_utc: datetime
    person: str
    identity_by: str
    source: str
    replaces: int | None
    reason: str
    body: Mapping[str, Any]
    previous_digest: str
    digest: str

    @property
    def taken_ship_time(self) -> datetime:
        """Time of reading by the ship's or station's clock of that moment."""
        return self.taken_utc.astimezone(timezone(timedelta(minutes=self.utc_offset_min)))

    @property
    def occasion(self) -> str:
        return str(self.body.get("occasion", ""))

    def values(self) -> dict[str, Value]:
        """The values of a reading by `key` or `key.PLACE`; empty for other kinds."""
        return {key: Value.from_body(body) for key, body in self.body.get("values", {}).items()}


Row = tuple[
    int, int, str, str, str, str, int, str, str, str, str, int | None, str, str, str, str,
]  # fmt: skip
"""A row of the table, in the order of `COLUMNS`."""

COLUMNS = (
    "number", "schema", "kind", "subject", "round", "taken_utc", "utc_offset_min", "entered_utc", "person",
    "identity_by", "source", "replaces", "reason", "body", "previous_digest", "digest",
)  # fmt: skip


def digest_of(row: Row) -> str:
    """SHA-256 over the digest before and the canonical bytes of all else in the row."""
    # The body goes in last and as its stored text: a body that was changed but means the same is still a change.
    content = f"{canonical_json([*row[:13], row[14]])}\n{row[13]}"
    return hashlib.sha256(content.encode("utf-8", "surrogatepass")).hexdigest()


def row_of(entry: NewEntry, number: int, entered_utc: datetime, previous_digest: str) -> Row:
    """The complete row, digest and all. Raises ValueError for an unknown kind or a number that is not finite."""
    if entry.kind not in KINDS:
        raise ValueError(f"The book has no kind of entry '{entry.kind}'; it has: {', '.join(KINDS)}.")
    row: Row = (
        number,
        SCHEMA,
        entry.kind,
        entry.subject,
        entry.round,
        utc_text(entry.taken_utc),
        entry.utc_offset_min,
        utc_text(entered_utc),
        entry.person,
        entry.identity_by,
        entry.source,
        entry.replaces,
        entry.reason,
        canonical_json(entry.body),
        previous_digest,
        "",
    )
    return (*row[:15], digest_of(row))


def entry_of(row: Row, body: Mapping[str, Any] | None = None) -> Entry:
    """The record behind a row; `body` where it is at hand already, as when it was just written."""
    return Entry(
        number=row[0],
        schema=row[1],
        kind=row[2],
        subject=row[3],
        round=row[4],
        taken_utc=utc_moment(row[5]),
        utc_offset_min=row[6],
        entered_utc=utc_moment(row[7]),
        person=row[8],
        identity_by=row[9],
        source=row[10],
        replaces=row[11],
        reason=row[12],
        body=json.loads(row[13]) if body is None else body,
        previous_digest=row[14],
        digest=row[15],
    )


def reading_body(occasion: str, values: Mapping[str, Value], **more: Any) -> dict[str, Any]:
    """Body of a reading: its occasion and its values by `key` or `key.PLACE`."""
    return {"occasion": occasion, "values": {key: value.to_body() for key, value in values.items()}, **more}
