"""Two years of the demonstration vessel from one seed: voyage, machines, faults -> what the engineers wrote down.

Time goes from one border to the next (ends of watches, voyage events, change-overs, starts and stops). Between two
borders everything is constant and integrated exactly; what was counted and what is true come from the same sums.
"""

from __future__ import annotations

from bisect import bisect_right
from collections import defaultdict
from collections.abc import Callable
from dataclasses import dataclass
from itertools import pairwise
from random import Random

from demo_vessel import papers
from demo_vessel.electrical import Switchboard, demand_kw
from demo_vessel.faults import excess_consumption, hull_factor
from demo_vessel.fuel import ChangeOver, InUse, change_overs, density, in_use
from demo_vessel.geography import PORTS
from demo_vessel.instruments import Gauges
from demo_vessel.machinery import (
    SETS,
    Conditions,
    generating_set,
    main_engine,
    main_engine_fuel_kg_h,
    set_fuel_kg_h,
    take_off_efficiency,
)
from demo_vessel.propulsion import RATED_KW, speed_rpm
from demo_vessel.records import MINUTES, History, MonthTruth, Note, Reading, SpanTruth, moment
from demo_vessel.rounds import (
    MainEngineCounters,
    Reader,
    Spot,
    Walk,
    meter_temperatures_c,
    set_counters,
    set_meters,
)
from demo_vessel.slips import Slips
from demo_vessel.voyage import ITINERARY, Kind, Phase, ShipClock, clock_changes, sail

SEED = 20241001

MAIN_ENGINE_CIRCULATION_L_H = 4600.0
SETS_CIRCULATION_L_H = 620.0
CYLINDER_OIL_G_KWH, CYLINDER_OIL_KG_L = 0.85, 0.93
SPEED_SCATTER = 0.0022
"""Relative difference between the speed of a moment and the mean of its watch."""

READERS = {
    4: Reader(papers.THIRD, coarse=False),
    8: Reader(papers.SECOND, coarse=False),
    0: Reader(papers.FOURTH, coarse=True),
}
"""By the hour at which the watch ends, of twelve hours: 12 to 4, 4 to 8, 8 to 12."""


@dataclass(frozen=True, slots=True)
class Operation:
    """How the machines ran between two borders: means, and what they were given."""

    phase: Phase
    conditions: Conditions
    sea_c: float
    air_c: float
    fuel: InUse
    lot: str
    rpm: float
    """0: the main engine stands"""
    shaft_kw: float
    brake_kw: float
    shaft_generator_kw: float
    fuel_kg_h: float
    set_kw: dict[str, float]
    set_fuel_kg_h: float

    @property
    def running(self) -> bool:
        return self.rpm > 0


class _Generator:
    def __init__(self, seed: int) -> None:
        self.seed = seed
        self.ship = sail(seed, hull_factor)
        changes = clock_changes(self.ship)
        self.clock = ShipClock(PORTS[ITINERARY[0].port].utc_offset_min, changes)
        self.watch_ends = self.clock.watch_ends()
        self.switchboard = Switchboard(self.ship)
        self.changes = self._change_overs()
        self.rng = Random(f"{seed}/machines")
        self.walk = Walk(Gauges(seed))
        self.slips = Slips(seed)
        self.counters = MainEngineCounters()
        self.set_counters = set_counters()
        self.set_meters = set_meters()
        self.readings: list[Reading] = []
        self.notes: list[Note] = [
            Note(
                "clock", "plant", moment(change.minute), change.after_min, papers.CHIEF,
                papers.clock_body(change.before_min, change.after_min),
            )
            for change in changes
        ]  # fmt: skip
        self.spans: list[SpanTruth] = []
        self.months: dict[str, list[float]] = defaultdict(lambda: [0.0] * 5)
        self.consumed_kg: dict[str, list[tuple[int, float]]] = defaultdict(list)
        """by lot: minute and fuel of every interval"""
        self._since = [0.0] * 5
        """energy, fuel, revolutions, hours and weighted excess since the last reading of the main engine"""
        self._read_at = 0
        self._noon_nm = 0.0
        self._weekly = -7 * 1440
        self._monthly = dict.fromkeys(SETS, -30 * 1440)
        self._watch_noise = (-1, 0.0, 0.0)

    def _change_overs(self) -> list[ChangeOver]:
        marks = [mark for mark in self.ship.marks if mark.minute < MINUTES]
        entered = [mark.minute for mark in marks if mark.event == "control area entered"]
        left = [mark.minute for mark in marks if mark.event == "control area left"]
        return change_overs(entered, left)

    # Time

    def run(self, progress: Callable[[float], None]) -> History:
        marks = {mark.minute: mark.event for mark in self.ship.marks if mark.minute <= MINUTES}
        watches = set(self.watch_ends)
        cut_in = {change.minute for change in self.changes[1:]}
        borders = {0, MINUTES, papers.METER_EXCHANGE} | watches | set(marks) | cut_in | set(self.switchboard.changes)
        borders |= {phase.begin for phase in self.ship.phases} | papers.month_begins()
        ordered = sorted(border for border in borders if 0 <= border <= MINUTES)
        self._phase_begins = [phase.begin for phase in self.ship.phases]
        read_at = watches | {minute for minute, event in marks.items() if event in papers.VOYAGE_EVENTS} | cut_in
        for begin, end in pairwise(ordered):
            if begin == papers.METER_EXCHANGE:
                self._exchange_meter(begin)
            operation = self._operate(begin, end)
            self._count(operation, begin, end)
            if end in read_at and end < MINUTES:
                self._read(operation, end, marks.get(end, ""), end in watches)
                progress(end / MINUTES)
        self._write_notes()
        records: list[Reading | Note] = [*self.readings, *self.notes]
        records.sort(key=lambda record: record.taken_utc)
        return History(self.seed, tuple(records), self._month_truths(), tuple(self.spans))

    def _operate(self, begin: int, end: int) -> Operation:
        phase = self.ship.phases[bisect_right(self._phase_begins, begin) - 1]
        middle = (begin + end) // 2
        sea_c = self.ship.sea_c(middle)
        air_c = self.ship.weather.air_c(middle, sea_c, self.ship.at(middle)[1])
        conditions = Conditions(air_c + 6.5, max(20.0, sea_c + 4.5), self.ship.weather.barometer_mbar(middle))
        fuel = in_use(self.changes, middle)
        load_noise, fuel_noise, steady = self._noise_of_watch(begin)
        supply = self.switchboard.at(begin)
        two_ashore = phase.kind is Kind.PORT and len(supply.running) == 2
        demand = demand_kw(phase.kind, sea_c, two_ashore) * (1.0 + 0.025 * self.rng.gauss(0.0, 1.0))
        set_kw = {name: demand / len(supply.running) for name in supply.running}
        set_fuel = sum(set_fuel_kg_h(name, power, conditions, fuel, middle) for name, power in set_kw.items())
        set_fuel *= 1.0 + 0.004 * self.rng.gauss(0.0, 1.0)
        rpm = shaft = brake = take_off = consumption = 0.0
        if phase.kind not in (Kind.PORT, Kind.ANCHORAGE):
            order = phase.load * self.ship.weather.load_factor(steady) * (1.0 + load_noise)
            if phase.kind is Kind.MANOEUVRING:
                order = max(0.05, phase.load * (1.0 + 0.2 * self.rng.gauss(0.0, 1.0)))
            shaft = order * RATED_KW
            take_off = demand if supply.shaft_generator else 0.0
            brake = shaft + (take_off / take_off_efficiency(take_off) if take_off else 0.0)
            rpm = speed_rpm(shaft, self.ship.heaviness(steady, phase.call))
            consumption = main_engine_fuel_kg_h(brake, conditions, fuel, middle) * (1.0 + fuel_noise)
        lot = [change.lot.id for change in self.changes if change.minute <= begin][-1]
        return Operation(
            phase, conditions, sea_c, air_c, fuel, lot, rpm, shaft, brake, take_off, consumption, set_kw, set_fuel
        )

    def _noise_of_watch(self, minute: int) -> tuple[float, float, int]:
        """Load and consumption wander from watch to watch, not inside one; weather is that of its middle."""
        index = bisect_right(self.watch_ends, minute)
        if index != self._watch_noise[0]:
            self._watch_noise = (index, self.rng.gauss(0.0, 0.003), self.rng.gauss(0.0, 0.0025))
        begin = self.watch_ends[index - 1] if index else 0
        end = self.watch_ends[index] if index < len(self.watch_ends) else MINUTES
        return self._watch_noise[1], self._watch_noise[2], (begin + end) // 2

    def _count(self, operation: Operation, begin: int, end: int) -> None:
        hours = (end - begin) / 60.0
        supply_c, return_c = meter_temperatures_c(operation.fuel)
        into, back = (density(operation.fuel.density15_kg_m3, celsius) for celsius in (supply_c, return_c))
        if operation.running:
            energy, burnt = operation.brake_kw * hours, operation.fuel_kg_h * hours
            turned = operation.rpm * 60.0 * hours
            sent = MAIN_ENGINE_CIRCULATION_L_H * hours * (1.0 + 0.01 * self.rng.gauss(0.0, 1.0))
            self.counters.revolutions.add(turned)
            self.counters.running_hours.add(hours)
            self.counters.supply_l.add(sent)
            self.counters.return_l.add((sent * into - burnt * 1000.0) / back)
            self.counters.shaft_generator_kwh.add(operation.shaft_generator_kw * hours)
            self.counters.cylinder_oil_l.add(energy * CYLINDER_OIL_G_KWH / 1000.0 / CYLINDER_OIL_KG_L)
            excess = energy * excess_consumption("ME", (begin + end) // 2)
            self._since = [
                old + new for old, new in zip(self._since, (energy, burnt, turned, hours, excess), strict=True)
            ]
            month = self.months[f"{moment(begin):%Y-%m}"]
            heat = burnt * operation.fuel.true_lcv_mj_kg
            for place, quantity in enumerate((hours, energy, burnt, heat, excess)):
                month[place] += quantity
        sent = SETS_CIRCULATION_L_H * hours
        self.set_meters["AE_in"].add(sent)
        self.set_meters["AE_out"].add((sent * into - operation.set_fuel_kg_h * hours * 1000.0) / back)
        for name, power in operation.set_kw.items():
            self.set_counters[name].energy_kwh.add(power * hours)
            self.set_counters[name].running_hours.add(hours)
        self.consumed_kg[operation.lot].append((begin, (operation.fuel_kg_h + operation.set_fuel_kg_h) * hours))

    # Reading

    def _read(self, operation: Operation, minute: int, mark: str, is_watch: bool) -> None:
        offset = self.clock.offset(minute)
        ship_time = moment(minute + offset)
        reader = READERS[(ship_time.hour // 4 * 4 + (0 if is_watch else 4)) % 12]
        occasion = "watch" if is_watch else "event" if mark in papers.VOYAGE_EVENTS else "change_over"
        noon = is_watch and ship_time.hour == 12
        if noon:
            occasion = "noon"
        steady = operation.phase.kind is Kind.SEA and minute - operation.phase.begin > 300
        afternoon = is_watch and ship_time.hour == 16
        indicator = afternoon and steady and minute - self._weekly >= 6.5 * 1440
        if indicator:
            occasion, self._weekly = "full_set", minute

        def write(engine: str, values: dict[str, str], of: str = occasion) -> None:
            label = f"{ship_time:%Y-%m-%d %H%M} {papers.offset_text(offset)} {occasion}"
            reading = Reading(moment(minute), offset, engine, of, label, reader.name, values)
            self.readings += self.slips.typed(reading, steady and is_watch)

        write("ME", self._main_engine_values(operation, minute, mark, is_watch, indicator, reader))
        for name in SETS:
            pressures = afternoon and name in operation.set_kw and minute - self._monthly[name] >= 27 * 1440
            if pressures:
                self._monthly[name] = minute
            values = self._set_values(name, operation, minute, is_watch, pressures, reader)
            write(name, values, "full_set" if pressures else occasion)
        plant = self.walk.plant(operation.sea_c, operation.conditions, operation.air_c, self.set_meters, operation.fuel)
        if noon:
            plant |= self._noon_values(operation, minute)
        write("plant", plant)

    def _main_engine_values(
        self, operation: Operation, minute: int, mark: str, is_watch: bool, indicator: bool, reader: Reader
    ) -> dict[str, str]:
        running = operation.running and mark != "FWE"
        if not running:
            values = self.walk.main_engine_idle("stand-by" if mark == "SBE" else "stopped")
        elif operation.phase.kind is Kind.MANOEUVRING:
            values = self.walk.main_engine_manoeuvring(operation.rpm, operation.fuel)
        else:
            off = 1.0 + SPEED_SCATTER * self.rng.gauss(0.0, 1.0)
            spot = Spot(operation.rpm * off, operation.shaft_kw * off**3, operation.shaft_generator_kw)
            load = (operation.brake_kw - operation.shaft_kw + spot.shaft_kw) / RATED_KW
            consumption = operation.fuel_kg_h * (1.0 + (off**3 - 1.0))
            state = main_engine(load, spot.rpm, consumption, operation.conditions, operation.fuel, minute)
            values = self.walk.main_engine(state, spot, operation.conditions, operation.fuel, minute, reader)
            if indicator:
                values |= self.walk.main_engine_pressures(state, minute)
        values |= self.walk.main_engine_meters(self.counters, operation.fuel, operation.running)
        self._close_span(minute)
        return values

    def _close_span(self, minute: int) -> None:
        energy, burnt, turned, hours, excess = self._since
        share = excess / energy if energy else 0.0
        self.spans.append(SpanTruth(moment(self._read_at), moment(minute), energy, burnt, turned, hours, share))
        self._since, self._read_at = [0.0] * 5, minute

    def _set_values(
        self, name: str, operation: Operation, minute: int, is_watch: bool, pressures: bool, reader: Reader
    ) -> dict[str, str]:
        power = operation.set_kw.get(name)
        if power is None:
            values = {"engine_state": "S/B"}
        elif not is_watch:
            values = {"engine_state": "running"}
        else:
            machine = generating_set(power, operation.conditions)
            values = self.walk.running_set(name, machine, power, operation.conditions, minute, reader.coarse)
            if pressures:
                values |= self.walk.set_pressures(name, machine, minute)
        counters = self.set_counters[name]
        return values | {
            "generator_energy": counters.energy_kwh.text(),
            "engine_running_hours": counters.running_hours.text(),
        }

    def _noon_values(self, operation: Operation, minute: int) -> dict[str, str]:
        run_nm = self.ship.at(minute)[2]
        gone, self._noon_nm = run_nm - self._noon_nm, run_nm
        loaded = ITINERARY[operation.phase.call].loaded
        values = {
            "draught_forward": "12.7" if loaded else "6.9",
            "draught_aft": "12.9" if loaded else "8.3",
            "wind_force": f"{self.ship.beaufort(minute):.0f}",
        }
        if gone > 1.0:
            through_water = gone * (1.0 + 0.015 * self.rng.gauss(0.0, 1.0))
            values = {"distance_observed": f"{gone:.0f}", "distance_log": f"{through_water:.0f}"} | values
        return values

    # Papers

    def _exchange_meter(self, minute: int) -> None:
        closing, opening = self.counters.return_l.exchange(37.0, 0.0004)
        body = papers.meter_exchange_body(closing, opening)
        self.notes.append(self._note("event", "ME", minute, body))

    def _note(self, kind: str, subject: str, minute: int, body: dict[str, object], person: str = papers.CHIEF) -> Note:
        return Note(kind, subject, moment(minute), self.clock.offset(max(0, minute)), person, body)

    def _write_notes(self) -> None:
        for kind, subject, minute, body in [
            *papers.voyage_notes(self.ship),
            *papers.set_notes(self.switchboard),
            *papers.fuel_notes(self.changes, self.consumed_kg),
            *papers.work_notes(),
            *papers.sounding_notes(self.changes, self.consumed_kg, self.seed),
        ]:
            self.notes.append(self._note(kind, subject, minute, body))

    def _month_truths(self) -> tuple[MonthTruth, ...]:
        return tuple(
            MonthTruth(name, hours, energy, burnt, heat, excess / energy if energy else 0.0)
            for name, (hours, energy, burnt, heat, excess) in sorted(self.months.items())
        )


def generate(seed: int = SEED, progress: Callable[[float], None] = lambda share: None) -> History:
    """The whole history. The same seed gives the same records, to the letter. `progress` is told the share done."""
    return _Generator(seed).run(progress)
