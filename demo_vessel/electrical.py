"""Who feeds the switchboard when: one set, two, or the shaft generator alone."""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import dataclass

from demo_vessel.machinery import SETS
from demo_vessel.records import MINUTES
from demo_vessel.voyage import ITINERARY, Kind, Voyage

_WEEK = 7 * 1440
_MONDAY = 6 * 1440 + 600
"""first Monday, 1000 UTC: the leading set changes"""


@dataclass(frozen=True, slots=True)
class Supply:
    """From this minute on."""

    minute: int
    running: tuple[str, ...]
    shaft_generator: bool


class Switchboard:
    """The plan of the whole history."""

    def __init__(self, ship: Voyage) -> None:
        self._steps = _steps(ship)
        self._minutes = [step.minute for step in self._steps]

    @property
    def changes(self) -> list[int]:
        return self._minutes

    def at(self, minute: int) -> Supply:
        return self._steps[bisect_right(self._minutes, minute) - 1]


def _steps(ship: Voyage) -> list[Supply]:
    two: list[tuple[int, int]] = []
    by_shaft: list[tuple[int, int]] = []
    for phase in ship.phases:
        call = ITINERARY[phase.call]
        if phase.kind is Kind.MANOEUVRING:
            two.append((phase.begin - 35, phase.end + 20))
        elif phase.kind is Kind.PORT and call.loaded:
            # Discharging: cargo pumps for the first part of the stay.
            two.append((phase.begin + 400, phase.begin + 400 + int(0.5 * (phase.end - phase.begin))))
        elif phase.kind is Kind.SEA and call.shaft_generator:
            by_shaft.append((phase.begin + 15, phase.end - 45))
    borders = {0, *range(_MONDAY, MINUTES, _WEEK)}
    for begin, end in two + by_shaft:
        borders |= {max(0, begin), end}
    steps: list[Supply] = []
    for minute in sorted(border for border in borders if border < MINUTES):
        shaft = any(begin <= minute < end for begin, end in by_shaft)
        count = 0 if shaft else 2 if any(begin <= minute < end for begin, end in two) else 1
        lead = (minute - _MONDAY) // _WEEK % len(SETS)
        running = tuple(sorted(SETS[(lead + number) % len(SETS)] for number in range(count)))
        if not steps or (running, shaft) != (steps[-1].running, steps[-1].shaft_generator):
            steps.append(Supply(minute, running, shaft))
    return steps


def demand_kw(kind: Kind, sea_c: float, discharging: bool) -> float:
    """Electrical demand; air conditioning and cooling water pumps take more in warm waters."""
    base = {
        Kind.PORT: 860.0 if discharging else 430.0,
        Kind.ANCHORAGE: 410.0,
        Kind.MANOEUVRING: 790.0,
        Kind.WORKING_UP: 520.0,
        Kind.SEA: 495.0,
    }[kind]
    return base + 4.5 * max(0.0, sea_c - 15.0)
