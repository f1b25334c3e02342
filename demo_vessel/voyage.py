"""Two years of trade: calls, passages hour by hour, weather, and the ship's clock with its watches."""

from __future__ import annotations

import enum
import math
from bisect import bisect_right
from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from itertools import pairwise
from random import Random

from demo_vessel.geography import PORTS, distance_nm, route, sea_temperature_c, zone_min
from demo_vessel.propulsion import RATED_KW, heaviness, speed_kn, speed_rpm
from demo_vessel.records import BEGIN_UTC, MINUTES, minute_of

WATCH_MIN = 240
_SLOT_MIN = 240
_CONTROL_AREA_NM = 470.0
"""From Rotterdam so far out distillate is burnt."""


class Kind(enum.Enum):
    """What the ship does."""

    PORT = "port"
    ANCHORAGE = "anchorage"
    MANOEUVRING = "manoeuvring"
    WORKING_UP = "working up"
    SEA = "sea"


@dataclass(frozen=True, slots=True)
class Call:
    """A port and the passage to it."""

    port: str
    sails: str
    """fixed by the trade; the stay takes up what weather makes of the passage"""
    load: float = 0.76
    """ordered engine load on the passage, of rated power"""
    shaft_generator: bool = False
    loaded: bool = True
    anchorage_h: int = 0
    shared_clock: bool = False
    """clocks are changed by 20 minutes in each of three watches"""


ITINERARY = (
    Call("Durban", "2024-10-02 06:00"),
    Call("Singapore", "2024-10-19 04:00", 0.76, shaft_generator=True, loaded=False),
    Call("Qingdao", "2024-10-30 22:00", 0.78),
    Call("Callao", "2024-12-01 15:00", 0.73, shaft_generator=True, loaded=False, anchorage_h=20),
    Call("Newcastle", "2024-12-27 02:00", 0.70, shared_clock=True),
    Call("Kwinana", "2025-01-08 10:00", 0.52, loaded=False),
    Call("Kandla", "2025-01-27 08:00", 0.77, shaft_generator=True, anchorage_h=36),
    Call("Fujairah", "2025-02-02 16:00", 0.74, loaded=False),
    Call("Rotterdam", "2025-02-26 12:00", 0.77, shaft_generator=True),
    Call("Santos", "2025-03-20 20:00", 0.74, loaded=False, shared_clock=True),
    Call("Durban", "2025-04-06 09:00", 0.76, shaft_generator=True, shared_clock=True),
    Call("Kandla", "2025-04-22 03:00", 0.74, loaded=False, anchorage_h=30),
    Call("Singapore", "2025-05-05 11:00", 0.76),
    Call("Newcastle", "2025-05-26 01:00", 0.45, loaded=False),
    Call("Qingdao", "2025-06-20 06:00", 0.27),
    Call("Singapore", "2025-06-30 14:00", 0.75, loaded=False),
    Call("Fujairah", "2025-07-14 18:00", 0.76, shaft_generator=True),
    Call("Durban", "2025-07-29 05:00", 0.75, loaded=False),
    Call("Santos", "2025-08-14 21:00", 0.74),
    Call("Rotterdam", "2025-09-04 10:00", 0.76, shaft_generator=True),
    Call("Durban", "2025-09-28 04:00", 0.75, loaded=False),
    Call("Kandla", "2025-10-13 07:00", 0.74, anchorage_h=24),
    Call("Singapore", "2025-10-23 13:00", 0.75, shaft_generator=True, loaded=False),
    Call("Qingdao", "2025-11-03 04:00", 0.76),
    Call("Newcastle", "2025-11-22 06:00", 0.72, loaded=False),
    Call("Kwinana", "2025-12-03 12:00", 0.70),
    Call("Durban", "2025-12-20 17:00", 0.75, shaft_generator=True, loaded=False, shared_clock=True),
    Call("Santos", "2026-01-05 19:00", 0.73),
    Call("Rotterdam", "2026-01-27 09:00", 0.76, loaded=False),
    Call("Santos", "2026-02-17 22:00", 0.74, shaft_generator=True),
    Call("Durban", "2026-03-05 04:00", 0.75, loaded=False),
    Call("Fujairah", "2026-03-21 12:00", 0.76),
    Call("Singapore", "2026-04-03 09:00", 0.75, loaded=False),
    Call("Qingdao", "2026-04-15 01:00", 0.77, shaft_generator=True),
    Call("Callao", "2026-05-17 18:00", 0.74, loaded=False, anchorage_h=12),
    Call("Newcastle", "2026-06-12 05:00", 0.72, shaft_generator=True),
    Call("Singapore", "2026-07-09 10:00", 0.73, loaded=False, anchorage_h=290),
    Call("Kandla", "2026-07-26 06:00", 0.72, anchorage_h=96),
    Call("Fujairah", "2026-08-03 15:00", 0.74, loaded=False),
    Call("Rotterdam", "2026-08-26 11:00", 0.77, shaft_generator=True),
    Call("Santos", "2026-09-16 20:00", 0.75, loaded=False),
    Call("Singapore", "2026-10-20 00:00", 0.76, shaft_generator=True),
)


@dataclass(frozen=True, slots=True)
class Phase:
    """A stretch of time in which the ship does one thing. Minutes since the beginning."""

    kind: Kind
    begin: int
    end: int
    call: int
    """index of the call it leads to, or lies in"""
    load: float = 0.0
    """ordered, of rated power"""


@dataclass(frozen=True, slots=True)
class Mark:
    """A voyage event."""

    minute: int
    event: str
    place: str


class Weather:
    """Wind, air and barometer in steps of four hours, each wandering about its mean."""

    def __init__(self, seed: int) -> None:
        rng = Random(f"{seed}/weather")
        slots = MINUTES // _SLOT_MIN + 200
        self._wind = list(_wandering(rng, slots, 0.90))
        self._air = list(_wandering(rng, slots, 0.88))
        self._barometer = list(_wandering(rng, slots, 0.96))
        self._load = list(_wandering(rng, slots, 0.75))

    def beaufort(self, minute: int, latitude: float) -> float:
        return max(0.0, 3.6 + 0.035 * max(0.0, abs(latitude) - 20.0) + 1.25 * self._wind[minute // _SLOT_MIN])

    def air_c(self, minute: int, sea_c: float, longitude: float) -> float:
        sun_hour = (minute / 60.0 + longitude / 15.0) % 24.0
        return sea_c - 0.6 + 1.2 * self._air[minute // _SLOT_MIN] + 1.8 * math.cos((sun_hour - 14.0) * math.pi / 12.0)

    def barometer_mbar(self, minute: int) -> float:
        return 1012.5 + 6.0 * self._barometer[minute // _SLOT_MIN]

    def load_factor(self, minute: int) -> float:
        """What sea and rudder make of an ordered load, watch by watch."""
        return 1.0 + 0.012 * self._load[minute // _SLOT_MIN]


def _wandering(rng: Random, steps: int, memory: float) -> Iterator[float]:
    """Standard normal numbers, each remembering the one before."""
    value = rng.gauss(0.0, 1.0)
    for _ in range(steps):
        yield value
        value = memory * value + math.sqrt(1 - memory**2) * rng.gauss(0.0, 1.0)


@dataclass
class Voyage:
    """The whole history of the ship's movements."""

    weather: Weather
    hull: Callable[[int], float]
    phases: list[Phase] = field(default_factory=list)
    marks: list[Mark] = field(default_factory=list)
    _minutes: list[int] = field(default_factory=list)
    _track: list[tuple[float, float, float]] = field(default_factory=list)

    def at(self, minute: int) -> tuple[float, float, float]:
        """Latitude, longitude (running on without a jump) and distance run [nm] at a moment."""
        index = min(max(bisect_right(self._minutes, minute) - 1, 0), len(self._minutes) - 2)
        first, last = self._minutes[index], self._minutes[index + 1]
        part = min(1.0, (minute - first) / (last - first))
        before, after = self._track[index], self._track[index + 1]
        return (
            before[0] + part * (after[0] - before[0]),
            before[1] + part * (after[1] - before[1]),
            before[2] + part * (after[2] - before[2]),
        )

    def sea_c(self, minute: int) -> float:
        day = (minute / 1440.0 + BEGIN_UTC.timetuple().tm_yday) % 365.25
        return sea_temperature_c(self.at(minute)[0], day)

    def beaufort(self, minute: int) -> float:
        return self.weather.beaufort(minute, self.at(minute)[0])

    def heaviness(self, minute: int, call: int) -> float:
        """Propeller power against that of the design line at the same speed."""
        return heaviness(ITINERARY[call].loaded, self.beaufort(minute), self.hull(minute))

    def note(self, minute: int, latitude: float, longitude: float, run_nm: float) -> None:
        if not self._minutes or minute > self._minutes[-1]:
            self._minutes.append(minute)
            self._track.append((latitude, longitude, run_nm))


def sail(seed: int, hull: Callable[[int], float]) -> Voyage:
    """The voyage of the two years. `hull`: power needed against the clean hull, at a moment."""
    ship = Voyage(Weather(seed), hull)
    first = PORTS[ITINERARY[0].port]
    sails = minute_of(ITINERARY[0].sails)
    ship.note(0, first.latitude, first.longitude, 0.0)
    ship.note(sails, first.latitude, first.longitude, 0.0)
    ship.phases.append(Phase(Kind.PORT, 0, sails, 0))
    for index in range(1, len(ITINERARY)):
        _passage(ship, index)
        if ship.phases[-1].end >= MINUTES:
            break
    return ship


def _passage(ship: Voyage, index: int) -> None:
    """From berth to berth; distance is run hour by hour at the speed that power, hull and weather give."""
    start, call = ITINERARY[index - 1], ITINERARY[index]
    now = ship.phases[-1].end
    parts = route(start.port, call.port)
    begun_nm = ship.at(now)[2]
    total_nm = sum(distance_nm(a, b) for part in parts for a, b in pairwise(part))
    now = _manoeuvre(ship, now, 110, index, "SBE", "COSP", start.port)
    for number, part in enumerate(parts):
        if number:
            ship.marks.append(Mark(now, "EOSP", "canal approaches"))
            ship.phases.append(Phase(Kind.MANOEUVRING, now, now + 14 * 60, index, 0.16))
            now += 14 * 60
            ship.marks.append(Mark(now, "COSP", "canal left"))
        now = _steam(ship, now, part, index, begun_nm, total_nm)
    ship.marks.append(Mark(now, "EOSP", call.port))
    sails = minute_of(call.sails)
    if call.anchorage_h:
        now = _manoeuvre(ship, now, 95, index, "", "FWE", f"{call.port} anchorage")
        ship.phases.append(Phase(Kind.ANCHORAGE, now, now + call.anchorage_h * 60, index))
        now = _manoeuvre(ship, now + call.anchorage_h * 60, 140, index, "SBE", "FWE", call.port)
    else:
        now = _manoeuvre(ship, now, 150, index, "", "FWE", call.port)
    latitude, longitude, run_nm = ship.at(now)
    ship.note(now, latitude, longitude, run_nm)
    ship.note(sails, latitude, longitude, run_nm)
    ship.phases.append(Phase(Kind.PORT, now, sails, index))


def _manoeuvre(ship: Voyage, now: int, minutes: int, index: int, opens: str, closes: str, place: str) -> int:
    if opens:
        ship.marks.append(Mark(now, opens, place))
    ship.phases.append(Phase(Kind.MANOEUVRING, now, now + minutes, index, 0.13))
    ship.marks.append(Mark(now + minutes, closes, place))
    return now + minutes


def _steam(
    ship: Voyage, now: int, part: list[tuple[float, float]], index: int, begun_nm: float, total_nm: float
) -> int:
    call = ITINERARY[index]
    working_up = 120 if call.load > 0.35 else 60
    sea_begin = now + working_up
    ship.phases.append(Phase(Kind.WORKING_UP, now, sea_begin, index, 0.72 * call.load))
    run_nm = ship.at(now)[2]
    # Out of a canal the position goes on from its far end.
    ship.note(now, part[0][0], part[0][1], run_nm)
    for start, end in pairwise(part):
        length, done = distance_nm(start, end), 0.0
        while done < length:
            load = call.load if now >= sea_begin else 0.72 * call.load
            power = load * ship.weather.load_factor(now) * RATED_KW
            bad = ship.weather.beaufort(now, start[0])
            rpm = speed_rpm(power, heaviness(call.loaded, bad, ship.hull(now)))
            knots = speed_kn(rpm, call.loaded, bad, ship.hull(now))
            step = min(60, max(1, math.ceil((length - done) / knots * 60)))
            before_nm = run_nm - begun_nm
            gone = min(knots * step / 60, length - done)
            done, run_nm, now = done + gone, run_nm + gone, now + step
            share = done / length
            ship.note(now, start[0] + share * (end[0] - start[0]), start[1] + share * (end[1] - start[1]), run_nm)
            _control_area(ship, index, before_nm, run_nm - begun_nm, total_nm, now)
    ship.phases.append(Phase(Kind.SEA, sea_begin, now, index, call.load))
    return now


def _control_area(ship: Voyage, index: int, before_nm: float, after_nm: float, total_nm: float, now: int) -> None:
    if ITINERARY[index - 1].port == "Rotterdam" and before_nm < _CONTROL_AREA_NM <= after_nm:
        ship.marks.append(Mark(now, "control area left", ""))
    border = total_nm - _CONTROL_AREA_NM
    if ITINERARY[index].port == "Rotterdam" and before_nm < border <= after_nm:
        ship.marks.append(Mark(now, "control area entered", ""))


@dataclass(frozen=True, slots=True)
class ClockChange:
    minute: int
    """UTC, since the beginning"""
    before_min: int
    after_min: int


def clock_changes(ship: Voyage) -> list[ClockChange]:
    """Ship's clocks follow the zone of the position by night at sea, and the port's own time before arrival."""
    offset = PORTS[ITINERARY[0].port].utc_offset_min
    changes: list[ClockChange] = []
    for phase in ship.phases:
        if phase.kind is not Kind.SEA or phase.begin >= MINUTES:
            continue
        call = ITINERARY[phase.call]
        arriving = phase.end - 60 * 50 if "canal" not in _next_mark(ship, phase.end) else phase.end
        now = _next_clock(phase.begin, offset, 22)
        while now + 8 * 60 < min(phase.end, MINUTES):
            near = now >= arriving
            zone = zone_min(ship.at(now)[1])
            wanted = PORTS[call.port].utc_offset_min if near else zone
            turn = (wanted - offset + 720) % 1440 - 720
            # Out of the port's own half-hour zone first, then by whole hours.
            step = turn if 0 < abs(turn) < 60 else math.copysign(60, turn) if turn else 0
            odd = offset % 60
            if odd and not near:
                step = odd if turn > 0 else -odd
            if step:
                moments = [now, now + 240, now + 480] if call.shared_clock and abs(step) == 60 else [now + 240]
                for instant in moments:
                    after = _wrapped(offset + int(step) // len(moments))
                    changes.append(ClockChange(instant, offset, after))
                    offset = after
            now = _next_clock(now + 12 * 60, offset, 22)
    return changes


def _next_mark(ship: Voyage, minute: int) -> str:
    return next((mark.place for mark in ship.marks if mark.minute == minute and mark.event == "EOSP"), "")


def _wrapped(offset: int) -> int:
    """East of the date line +12:00, west of it from -11:00 on."""
    return offset - 1440 if offset > 720 else offset + 1440 if offset <= -720 else offset


def _next_clock(minute: int, offset: int, hour: int) -> int:
    """The next moment at which the ship's clock shows a full hour."""
    into = (minute + offset - hour * 60) % 1440
    return minute if into == 0 else minute + 1440 - into


class ShipClock:
    """The offset at any moment, and where the watches end."""

    def __init__(self, first_offset: int, changes: list[ClockChange]) -> None:
        self._minutes = [change.minute for change in changes]
        self._offsets = [first_offset] + [change.after_min for change in changes]

    def offset(self, minute: int) -> int:
        return self._offsets[bisect_right(self._minutes, minute)]

    def watch_ends(self) -> list[int]:
        """Moments at which the ship's clock shows 0000, 0400 ... 2000."""
        borders = [0, *self._minutes, MINUTES]
        ends: list[int] = []
        for begin, end, offset in zip(borders, borders[1:], self._offsets, strict=False):
            first = begin + (-(begin + offset)) % WATCH_MIN
            ends += range(first, end, WATCH_MIN)
        return ends
