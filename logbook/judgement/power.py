"""Brake energy of each span from the best source that can be had, and the rule for what a spot power stands for."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from logbook.judgement.counters import Differences, Ends, differences, usable
from logbook.judgement.events import START_STOP, Event, count_within
from logbook.judgement.spans import Spans
from logbook.judgement.table import Bools, Floats, Table
from logbook.physics.curve import curve
from logbook.physics.power import brake_power_of_set, brake_power_with_take_off, propeller_power
from logbook.physics.uncertainty import SQRT3
from logbook.plant.records import Counter, EfficiencyCurve, Engine
from logbook.reading.value import State

SHAFT_COUNTER, GENERATOR_COUNTER = "shaft energy counter", "generator energy counter"
TORSION_MEAN, TORSION_SPOT = "torsion meter, mean of the span", "torsion meter, spot"
SWITCHBOARD_SPOT, SPEED_CUBE, INDEX = "switchboard kW, spot", "mean speed cube", "index and speed"
SOURCES = (
    SHAFT_COUNTER, GENERATOR_COUNTER, TORSION_MEAN, TORSION_SPOT, SWITCHBOARD_SPOT, SPEED_CUBE, INDEX,
)  # fmt: skip
"""Best first: the first that can be had is used and named."""

UNCERTAINTY = {
    SHAFT_COUNTER: 0.02, GENERATOR_COUNTER: 0.0075, TORSION_MEAN: 0.02, TORSION_SPOT: 0.02,
    SWITCHBOARD_SPOT: 0.02, SPEED_CUBE: 0.04, INDEX: 0.05,
}  # fmt: skip
"""Relative standard uncertainty of calibration, from memory."""
SPOT_SCATTER = 0.01
"""Relative scatter of a spot power, from memory."""

LONGEST_SPOT_H, LONGEST_SPOT_OF_SET_H = 6.0, 1.0
SPEED_WITHIN, SPOT_ENDS_WITHIN, STEADY_WITHIN = 0.01, 0.03, 0.03
"""Mean speed against spot speed; spot powers at both ends; power by counter against spot power."""
ROUNDING_H = 1.0 / 60.0
"""A span may be a minute over: readings are written to the minute."""
REVOLUTIONS, SHAFT_ENERGY = "revolution_counter", "shaft_energy"
GENERATOR_ENERGY, TAKE_OFF_ENERGY = "generator_energy", "shaft_generator_energy"
USUAL_COUNTER = Counter(digits=8)
"""A counter that plant.toml does not describe."""


@dataclass(frozen=True, slots=True)
class Power:
    """Brake energy and power of each span; shape (rows,)."""

    brake_kw: Floats
    """mean over the running hours; a spot reading where it stands for the span"""
    energy_kwh: Floats
    """brake; NaN where it cannot be had"""
    generator_kwh: Floats
    """at the generator's terminals"""
    source: NDArray[np.object_]
    mean_speed_rpm: Floats
    """from revolutions; NaN where they were not read"""
    spot_kw: Floats
    """brake power at the moment of the reading"""
    take_off_kw: Floats
    """electrical, of a power take-off; 0 where none is fitted"""
    relative_u_calibration: Floats
    relative_u_repeat: Floats
    open_question: Bools
    passed_zero: Bools
    exchanged: Bools
    load_changed: Bools
    too_long: Bools
    not_steady: Bools


def efficiency_at(points: EfficiencyCurve, load: Floats) -> Floats:
    """Efficiency of a generator or take-off at a load (fraction); held at its ends, one point is constant."""
    if len(points.load_percent) == 1:
        return np.full(load.shape, points.efficiency[0])
    loads = np.array(points.load_percent) / 100
    held = np.clip(load, loads[0], loads[-1])
    return np.asarray(curve(loads, points.efficiency)(held))


class _Reader:
    """The counters of one engine, read over the spans and over the steps from reading to reading."""

    def __init__(self, engine: Engine, table: Table, events: Sequence[Event]) -> None:
        self.engine, self.table, self.events = engine, table, events

    def name(self, key: str) -> str:
        """The column of a counter: the engine's one, with or without a place."""
        places = self.table.places(key)
        return places[0] if places else key

    def over(self, key: str, ends: Ends, rate_per_h: float) -> Differences:
        name = self.name(key)
        counter = self.engine.counters.get(key, USUAL_COUNTER)
        return differences(
            usable(self.table.column(name), self.table.number, self.events, name),
            ends,
            counter=counter,
            rate_per_h=rate_per_h,
            allowance=counter.multiplier * 10.0**-counter.decimals,
            events=self.events,
            instrument=name,
            entries=self.table.number,
        )


def power_of(
    engine: Engine, table: Table, spans: Spans, running: Bools, events: Sequence[Event], index_kw: Floats
) -> Power:
    """Brake energy of every span. `index_kw`: brake power from fuel index and speed, NaN where it cannot be had."""
    rows = len(table)
    reader = _Reader(engine, table, events)
    take_off, take_off_brake_kw = _take_off(engine, table)
    spot = _spot(engine, table) + take_off_brake_kw
    revolutions = reader.over(REVOLUTIONS, spans.ends, engine.rated_speed_rpm * 60)
    hours = np.where(spans.running_h > 0, spans.running_h, np.nan)
    mean_speed = revolutions.used / (60 * hours)

    stands = _stands(engine, table, spans, running, reader, spot)
    spot_energy = np.where(spans.continuous, stands.energy_kwh, spot * hours)
    counter_key = GENERATOR_ENERGY if engine.is_set else SHAFT_ENERGY
    rated = engine.rated_electrical_kw or engine.rated_power_kw
    counted = reader.over(counter_key, spans.ends, rated)
    generator = counted.used if engine.is_set else np.full(rows, np.nan)
    counter_energy = _brake_energy(engine, table, reader, spans, counted.used, take_off_brake_kw)
    from_instrument = table.marked(table.from_instrument, "shaft_power")
    cube = np.full(rows, np.nan)
    if engine.mean_speed_cube and engine.fixed_pitch:
        ratio = mean_speed / table.mean("engine_speed")
        cube = np.where(stands.changed | stands.too_long, propeller_power(spot, ratio) * hours, np.nan)

    energies = {
        SHAFT_COUNTER: counter_energy if not engine.is_set else np.full(rows, np.nan),
        GENERATOR_COUNTER: counter_energy if engine.is_set else np.full(rows, np.nan),
        TORSION_MEAN: np.where(from_instrument, spot * hours, np.nan),
        SPEED_CUBE: cube,
        SWITCHBOARD_SPOT if engine.is_set else TORSION_SPOT: spot_energy,
        INDEX: index_kw * hours,
    }
    energy, brake = np.full(rows, np.nan), np.full(rows, np.nan)
    source = np.full(rows, "", dtype=object)
    # A counter that was read and whose question is open is not replaced by a lesser source.
    open_rows = counted.open_question
    for name, found in energies.items():
        here = np.isfinite(found) & (source == "") & ~open_rows
        energy[here], source[here] = found[here], name
        brake[here] = found[here] / hours[here]
    # Power at the moment is known even where no span or no hours go with it.
    known = (source == "") & np.isfinite(spot) & running & ~open_rows
    brake[known], source[known] = spot[known], SWITCHBOARD_SPOT if engine.is_set else TORSION_SPOT
    by_counter = np.isin(source, (SHAFT_COUNTER, GENERATOR_COUNTER))
    by_spot = np.isin(source, (TORSION_SPOT, SWITCHBOARD_SPOT))
    by_revolutions = (by_spot & (not engine.is_set)) | (source == SPEED_CUBE)
    last_place = _last_place(engine, counter_key)
    return Power(
        brake_kw=brake,
        energy_kwh=energy,
        generator_kwh=generator,
        source=source,
        mean_speed_rpm=mean_speed,
        spot_kw=spot,
        take_off_kw=take_off,
        relative_u_calibration=np.array([UNCERTAINTY.get(name, np.nan) for name in source.tolist()], float),
        relative_u_repeat=np.where(
            by_counter,
            np.divide(last_place / math.sqrt(6), counted.used, out=np.zeros(rows), where=counted.used > 0),
            np.hypot(SPOT_SCATTER, _typed_resolution(engine, table)),
        ),
        open_question=counted.open_question | (by_revolutions & (stands.open_question | revolutions.open_question)),
        passed_zero=(by_counter & counted.passed_zero) | (by_revolutions & revolutions.passed_zero),
        exchanged=(by_counter & counted.exchanged) | (by_revolutions & revolutions.exchanged),
        load_changed=by_spot & spans.continuous & stands.changed,
        too_long=by_spot & spans.continuous & stands.too_long,
        not_steady=by_counter & spans.continuous & (np.abs(brake / spot - 1) > STEADY_WITHIN),
    )


def _spot(engine: Engine, table: Table) -> Floats:
    """Brake power at the moment [kW], without a power take-off."""
    if engine.is_set:
        electrical = table.mean("generator_power")
        return np.asarray(brake_power_of_set(electrical, _generator_efficiency(engine, electrical)))
    power = table.mean("shaft_power")
    from_torque = table.mean("shaft_torque") * table.mean("engine_speed") * 2 * math.pi / 60
    return np.where(np.isfinite(power), power, from_torque)


def _generator_efficiency(engine: Engine, electrical_kw: Floats) -> Floats:
    rated = engine.rated_electrical_kw or engine.rated_power_kw
    points = engine.generator_efficiency
    return efficiency_at(points, electrical_kw / rated) if points else np.full(electrical_kw.shape, np.nan)


def _take_off(engine: Engine, table: Table) -> tuple[Floats, Floats]:
    """Electrical and brake power of a power take-off at the moment [kW]; 0 where none is fitted, or it is stopped."""
    if engine.shaft_generator is None:
        return np.zeros(len(table)), np.zeros(len(table))
    electrical = table.mean("shaft_generator_power")
    idle = table.in_state("shaft_generator_power", State.STOPPED, State.STAND_BY)
    electrical = np.where(idle, 0.0, electrical)
    return electrical, _through_take_off(engine, electrical)


def _through_take_off(engine: Engine, electrical: Floats) -> Floats:
    assert engine.shaft_generator is not None
    eta = efficiency_at(engine.shaft_generator.efficiency, np.abs(electrical) / engine.shaft_generator.rated_power_kw)
    given = np.asarray(brake_power_with_take_off(0.0, np.maximum(electrical, 0.0), eta))
    # Taken in, as a motor, less arrives at the shaft than was drawn from the board.
    return np.where(electrical < 0, electrical * eta, given)


def _brake_energy(
    engine: Engine, table: Table, reader: _Reader, spans: Spans, counted: Floats, take_off_brake_kw: Floats
) -> Floats:
    """Brake energy of the energy counter [kWh]."""
    hours = np.where(spans.running_h > 0, spans.running_h, np.nan)
    if engine.is_set:
        mean_kw = counted / hours
        return np.asarray(brake_power_of_set(counted, _generator_efficiency(engine, mean_kw)))
    if engine.shaft_generator is None:
        return counted
    taken = reader.over(TAKE_OFF_ENERGY, spans.ends, engine.shaft_generator.rated_power_kw).used
    by_counter = _through_take_off(engine, taken / hours) * hours
    return counted + np.where(np.isfinite(by_counter), by_counter, take_off_brake_kw * hours)


def _last_place(engine: Engine, key: str) -> float:
    counter = engine.counters.get(key, USUAL_COUNTER)
    return counter.multiplier * 10.0**-counter.decimals


def _typed_resolution(engine: Engine, table: Table) -> Floats:
    """Relative standard uncertainty of the digits typed of a power: half a digit, rectangular; 0 where not known."""
    names = table.places("generator_power" if engine.is_set else "shaft_power")
    if not names:
        return np.zeros(len(table))
    number, digits = np.abs(table.columns[names[0]]), table.digits[names[0]]
    typed = (number > 0) & (digits > 0)
    magnitude = np.floor(np.log10(number, out=np.zeros(len(table)), where=typed))
    half = 10.0 ** (magnitude - digits + 1) / 2 / SQRT3
    return np.divide(half, number, out=np.zeros(len(table)), where=typed)


@dataclass(frozen=True, slots=True)
class _Stands:
    """What spot powers stand for: each for the step since the reading before, a span for all its steps."""

    energy_kwh: Floats
    changed: Bools
    too_long: Bools
    open_question: Bools


def _stands(engine: Engine, table: Table, spans: Spans, running: Bools, reader: _Reader, spot: Floats) -> _Stands:
    rows = np.arange(len(table))
    before = np.maximum(rows - 1, 0)
    ends = Ends(rows - 1, table.hours[before], table.hours)
    elapsed = ends.end_h - ends.begin_h
    through = (
        (rows > 0)
        & running
        & running[before]
        & (count_within(reader.events, START_STOP, ends.begin_h, ends.end_h) == 0)
    )
    open_question = np.zeros(len(table), bool)
    if engine.is_set:
        # At fixed speed the speed says nothing: the spot powers at both ends must agree.
        within = np.abs(spot / spot[before] - 1) <= SPOT_ENDS_WITHIN
        longest = LONGEST_SPOT_OF_SET_H
    else:
        turned = reader.over(REVOLUTIONS, ends, engine.rated_speed_rpm * 60)
        open_question = turned.open_question
        within = np.abs(turned.used / (60 * elapsed) / table.mean("engine_speed") - 1) <= SPEED_WITHIN
        longest = LONGEST_SPOT_H
    energy = np.where(through, spot * elapsed, 0.0)

    def over_span(values: NDArray[np.generic]) -> Floats:
        total = np.concatenate([[0.0], np.cumsum(values)])
        first = np.where(spans.begin >= 0, spans.begin, rows)
        result: Floats = total[rows + 1] - total[first + 1]
        return result

    missing = over_span(through & ~np.isfinite(energy)) > 0
    return _Stands(
        energy_kwh=np.where(missing, np.nan, over_span(np.where(np.isfinite(energy), energy, 0.0))),
        changed=over_span(through & ~within) > 0,
        too_long=over_span(through & (elapsed > longest + ROUNDING_H)) > 0,
        open_question=over_span(through & open_question) > 0,
    )
