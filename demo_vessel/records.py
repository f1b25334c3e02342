"""What the generator hands over: plain records in order of time, as an engineer would have written them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import UTC, datetime, timedelta
from functools import cache
from typing import Any

BEGIN_UTC = datetime(2024, 10, 1, tzinfo=UTC)
END_UTC = datetime(2026, 10, 1, tzinfo=UTC)
MINUTES = int((END_UTC - BEGIN_UTC).total_seconds()) // 60
"""Length of the history. Inside the generator a moment is a whole number of minutes since BEGIN_UTC."""


@cache
def minute_of(text: str) -> int:
    """`2025-04-30 08:00` (UTC) as minutes since the beginning."""
    return int((datetime.fromisoformat(text).replace(tzinfo=UTC) - BEGIN_UTC).total_seconds()) // 60


def moment(minute: int) -> datetime:
    """The UTC instant of a minute since the beginning."""
    return BEGIN_UTC + timedelta(minutes=minute)


@dataclass(frozen=True, slots=True)
class Reading:
    """What one person read of one engine (or of the plant) on one walk."""

    taken_utc: datetime
    utc_offset_min: int
    engine: str
    """engine, or `plant` for what belongs to the whole ship"""
    occasion: str
    round: str
    person: str
    values: Mapping[str, str]
    """`key` or `key.PLACE` -> text as typed, in the unit of the catalogue or the meter"""
    remark: str = ""
    amendment_reason: str = ""
    """filled: this takes the place of the reading of the same engine and moment"""


@dataclass(frozen=True, slots=True)
class Note:
    """Anything else in the book: event, lot, delivery, work, remark, sounding, clock change."""

    kind: str
    subject: str
    taken_utc: datetime
    utc_offset_min: int
    person: str
    body: Mapping[str, Any]


@dataclass(frozen=True, slots=True)
class MonthTruth:
    """What really happened in one month of UTC."""

    month: str
    running_hours: float
    energy_kwh: float
    """brake, main engine"""
    fuel_kg: float
    heat_mj: float
    """fuel mass times its true lower calorific value"""
    excess_relative: float
    """true excess consumption by the engine's own faults and wear, weighted with energy"""

    @property
    def brake_efficiency(self) -> float | None:
        """None for a month in which the engine did not turn."""
        return self.energy_kwh * 3.6 / self.heat_mj if self.heat_mj else None


@dataclass(frozen=True, slots=True)
class SpanTruth:
    """Integrated truth between two readings of the main engine, to check counters against."""

    begin_utc: datetime
    end_utc: datetime
    energy_kwh: float
    fuel_kg: float
    revolutions: float
    running_hours: float
    excess_relative: float


@dataclass(frozen=True, slots=True)
class History:
    """Two years of the demonstration vessel."""

    seed: int
    records: tuple[Reading | Note, ...]
    """in order of time"""
    months: tuple[MonthTruth, ...]
    spans: tuple[SpanTruth, ...]

    @property
    def readings(self) -> list[Reading]:
        return [record for record in self.records if isinstance(record, Reading)]

    def notes(self, kind: str) -> list[Note]:
        """All records of one kind: event, lot, delivery, work, remark, sounding or clock."""
        return [record for record in self.records if isinstance(record, Note) and record.kind == kind]
