"""What happened, as the judgement needs it: bodies of the book in, small records in order of time out.

What a body means here (every `instrument` is a key with its place, `fuel_meter_return.ME_out`):

| kind of entry | body | meaning |
|---|---|---|
| reading | `occasion`, `values` | subject = engine; values of the whole plant: subject `plant` in the same round |
| lot | `lot`, `grade`, `density15_kg_m3`, `sulphur_percent`, `water_percent`, `ash_percent`, | subject = the lot; its |
| | `lower_calorific_value_mj_kg` or (gas) `lower_calorific_value_mj_m3`: the laboratory's | analysis |
| event | `event` = `change_over`, `lot`, `engines`, `mixing_hours` | the service tank holds this lot from now on |
| event | `start`, `stop`, `trip`, `outage`, `SBE`, `COSP`, `EOSP`, `FWE` | the first four: the engine's state |
| event | `instrument_exchanged`, `instrument`, `closing`, `opening`, `digits`, `multiplier`, `decimals` | new counter |
| event | `instrument_doubted` / `instrument_adjusted`, `instrument` | doubted from now on / set right |
| event | `counter_answer`, `instrument`, `entry`, `answer`, `times` | a person answers an open question |
| event | `turbine_washed`, `compressor_washed`, `soot_blown` | the span it lies in is not compared |
| event | `heavy_weather`, `ice`, `shallow_water`, `until_utc` | from then until, or at that moment |
| event | `unit_cut_out` / `unit_cut_in`, `unit` | in between one unit or turbocharger is out of service |
| event | `mode_changed`, `mode` | the operating mode from now on, where readings do not name it |
| event, setting | `setting_changed` | timing, Pmax, nozzle ring, charge air, control data |
| work | `work` | done on a part; words of the segment table |

`engines` names the engines it concerns; without it the subject does, and the subject `plant` concerns all.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from datetime import UTC, datetime
from typing import Any

import numpy as np
from numpy.typing import NDArray

from logbook.book.entry import Entry

START_STOP = frozenset({"start", "stop", "trip", "outage"})
WASHES = frozenset({"turbine_washed", "compressor_washed", "soot_blown"})
WEATHER = frozenset({"heavy_weather", "ice", "shallow_water"})
PASSED_ZERO, RESET, WRONG = "passed zero", "reset", "reading was wrong"
"""The answers a person may give to an open question of a counter."""

_EPOCH = datetime(1970, 1, 1, tzinfo=UTC)


def hours_of(moment: datetime) -> float:
    """An instant as hours since 1970-01-01T00:00Z: differences of these are elapsed hours."""
    return (moment - _EPOCH).total_seconds() / 3600.0


@dataclass(frozen=True, slots=True)
class Event:
    """One event, piece of work or setting of an engine."""

    entry: int
    hours: float
    """since 1970 [h]"""
    kind: str
    body: Mapping[str, Any]

    @property
    def instrument(self) -> str:
        return str(self.body.get("instrument", ""))


def _concerns(entry: Entry, engine_id: str) -> bool:
    engines = entry.body.get("engines")
    return engine_id in engines if engines else entry.subject in (engine_id, "plant")


def _kind(entry: Entry) -> str:
    if entry.kind == "setting":
        return "setting_changed"
    return str(entry.body.get("event" if entry.kind == "event" else "work", ""))


def events_of(entries: Iterable[Entry], engine_id: str) -> tuple[Event, ...]:
    """Events, work and settings that concern one engine, in order of time."""
    found = [
        Event(entry.number, hours_of(entry.taken_utc), _kind(entry), entry.body)
        for entry in entries
        if entry.kind in ("event", "work", "setting") and _concerns(entry, engine_id)
    ]
    return tuple(sorted(found, key=lambda event: event.hours))


def count_within(
    events: Iterable[Event], kinds: Iterable[str], begin_h: NDArray[np.float64], end_h: NDArray[np.float64]
) -> NDArray[np.int64]:
    """How many events of these kinds lie strictly inside each span; an event at the moment of a reading does not."""
    wanted = set(kinds)
    times = np.sort(np.array([event.hours for event in events if event.kind in wanted], float))
    inside = np.searchsorted(times, end_h, "left") - np.searchsorted(times, begin_h, "right")
    count: NDArray[np.int64] = np.maximum(inside, 0)
    return count


def overlapping(
    periods: Iterable[tuple[float, float]], begin_h: NDArray[np.float64], end_h: NDArray[np.float64]
) -> NDArray[np.bool_]:
    """Spans of which some part lies in one of the periods (from, until) [h]."""
    touched = np.zeros(begin_h.shape, bool)
    for since, until in periods:
        touched |= (begin_h < until) & (end_h > since)
    return touched


def weather_periods(events: Iterable[Event]) -> list[tuple[float, float]]:
    """From and until of every spell of ice, shallow water or heavy weather [h since 1970]."""
    periods = []
    for event in events:
        if event.kind in WEATHER:
            until = event.body.get("until_utc")
            # Without an end it is a remark of that moment: it touches the span it lies in and no other.
            end = hours_of(datetime.fromisoformat(until)) if until else event.hours
            periods.append((event.hours, end) if end > event.hours else (event.hours - 1e-6, event.hours + 1e-6))
    return periods


def cut_out_periods(events: Iterable[Event]) -> list[tuple[float, float]]:
    """While a unit or turbocharger was cut out [h since 1970]; open ended until it is cut in again."""
    return _from_to(events, {"unit_cut_out"}, {"unit_cut_in"}, lambda event: str(event.body.get("unit", "")))


def doubted_periods(events: Iterable[Event], instrument: str) -> list[tuple[float, float]]:
    """While an instrument was doubted: until it was adjusted or exchanged [h since 1970]."""
    own = [event for event in events if event.instrument == instrument]
    return _from_to(
        own, {"instrument_doubted"}, {"instrument_adjusted", "instrument_exchanged"}, lambda event: event.instrument
    )


def _from_to(events: Iterable[Event], opening: set[str], closing: set[str], name: Any) -> list[tuple[float, float]]:
    periods: list[tuple[float, float]] = []
    since: dict[str, float] = {}
    for event in events:
        if event.kind in opening:
            since.setdefault(name(event), event.hours)
        elif event.kind in closing and name(event) in since:
            periods.append((since.pop(name(event)), event.hours))
    return periods + [(start, np.inf) for start in since.values()]
