"""Fuel of each span by its meters: every volume with its own temperature and density, gas by its reference volume."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from logbook.judgement.counters import Differences, differences, usable
from logbook.judgement.doubt import stands_alone
from logbook.judgement.events import Event
from logbook.judgement.lots import LotsInUse
from logbook.judgement.spans import Spans
from logbook.judgement.table import Bools, Floats, Integers, Table, shared_column
from logbook.physics.density import expansion, mass_from_volume
from logbook.physics.fuel import NORMAL_TEMPERATURE_K, STANDARD_TEMPERATURE_K, gas_volume
from logbook.physics.uncertainty import from_limit
from logbook.plant.records import Meter, Plant

MASS_METER, SUPPLY_AND_RETURN = "mass meter", "volume meters, supply and return"
ONE_WAY, GAS_METER = "volume meter, one way", "gas meter"
SUPPLY, RETURN, GAS = "fuel_meter_supply", "fuel_meter_return", "gas_meter"
FUEL_METERS = (SUPPLY, RETURN, GAS)

MASS_UNITS = {"kg": 1.0, "t": 1000.0}
"""[kg]"""
VOLUME_UNITS = {"L": 1e-3, "m3": 1.0, "Nm3": 1.0, "Sm3": 1.0}
"""[m3]"""
REFERENCE_K = {"Nm3": NORMAL_TEMPERATURE_K, "Sm3": STANDARD_TEMPERATURE_K}

GENEROUS_CONSUMPTION_KG_KWH = 0.35
CIRCULATION = 6.0
LIGHTEST_KG_M3 = 800.0
GENEROUS_HEAT_MJ_KWH = 18.0
POOREST_GAS_MJ_M3 = 20.0
"""Ceiling of a meter that plant.toml gives no rated rate: no engine uses more than this, and no more than six times
the consumption goes round in a circulating system. Only to find readings that cannot be."""

TEMPERATURE_U_K = 2.0
"""Stated limit of a thermometer at a meter; from memory."""
TEMPERATURE_FLOOR_K = 10.0
"""A temperature at a meter is never doubted for less."""
ZERO_C_K = 273.15
BAR_PA = 1e5


@dataclass(frozen=True, slots=True)
class MeterColumn:
    """One meter as it was read with the engine; shape (rows,)."""

    meter: Meter
    values: Floats
    """[unit of the meter]"""
    entry: Integers
    temperature_c: Floats
    pressure_bar: Floats
    """gauge, gas only"""

    @property
    def instrument(self) -> str:
        return f"{self.meter.key}.{self.meter.id}"


@dataclass(frozen=True, slots=True)
class MeterUse:
    """What one meter counted in each span; shape (rows,)."""

    column: MeterColumn
    counted: Differences
    temperature_c: Floats
    """mean over the span"""
    quantity: Floats
    """[kg], of gas by volume [m3 at 0 degC, 101.325 kPa]"""
    mass_kg: Floats
    """NaN for gas by volume whose lot has no value by mass"""
    energy_mj: Floats
    relative_u: Floats
    """calibration of the meter and its thermometer"""
    relative_u_repeat: Floats
    """last place of the counter, read twice"""


@dataclass(frozen=True, slots=True)
class FuelUsed:
    """Fuel of each span; shape (rows,)."""

    meters: tuple[MeterUse, ...]
    mass_kg: Floats
    """NaN where it cannot be had; with gas by volume only where its lot has a value by mass"""
    energy_mj: Floats
    """lower calorific value times quantity, all fuels"""
    source: NDArray[np.object_]
    relative_u_calibration: Floats
    relative_u_repeat: Floats
    open_question: Bools
    passed_zero: Bools
    exchanged: Bools
    temperature_doubtful: Bools
    counted: Bools
    """every meter has a difference that can be turned into a quantity"""


def meter_columns(plant: Plant, engine_id: str, table: Table, others: Sequence[Table]) -> tuple[MeterColumn, ...]:
    """The fuel meters of an engine as read with it, or in the same round with the plant or a sister engine."""
    columns = []
    for meter in plant.meters_of(engine_id):
        if meter.key in FUEL_METERS:
            columns.append(meter_column(meter, table, others))
    return tuple(columns)


def meter_column(meter: Meter, table: Table, others: Sequence[Table]) -> MeterColumn:
    """One meter as it was read in the rounds of `table`."""
    shared = shared_column(table, others, f"{meter.key}.{meter.id}")
    kind = "gas_meter" if meter.key == GAS else "fuel_meter"
    if meter.temperature in ("read", ""):
        temperature = shared_column(table, others, f"{kind}_temperature.{meter.id}").values
    else:
        temperature = np.full(len(table), float(meter.temperature))
    pressure = shared_column(table, others, f"gas_meter_pressure.{meter.id}").values
    return MeterColumn(meter, shared.values, shared.entry, temperature, pressure)


def counted_rows(columns: Sequence[MeterColumn], events: Sequence[Event], rows: int) -> Bools:
    """Rows where every fuel meter was read and not answered to be wrong."""
    counted = np.full(rows, bool(columns))
    for column in columns:
        counted &= np.isfinite(usable(column.values, column.entry, events, column.instrument))
    return counted


def rated_rate_per_h(plant: Plant, meter: Meter) -> float:
    """Greatest flow of a meter [unit/h]: its own, else from the rated power that it serves."""
    if meter.rated_rate_per_h:
        return meter.rated_rate_per_h
    power = sum(plant.engine(engine).rated_power_kw for engine in meter.serves)
    if meter.key == GAS and meter.unit not in MASS_UNITS:
        return power * GENEROUS_HEAT_MJ_KWH / POOREST_GAS_MJ_M3
    circulates = any(other.key == RETURN and set(other.serves) & set(meter.serves) for other in plant.meters)
    mass = power * GENEROUS_CONSUMPTION_KG_KWH * (CIRCULATION if circulates else 1.0)
    if meter.unit in MASS_UNITS:
        return mass / MASS_UNITS[meter.unit]
    return mass / LIGHTEST_KG_M3 / VOLUME_UNITS[meter.unit]


def mean_over(values: Floats, begin: Integers) -> Floats:
    """Mean of what was read from the begin to the end of each span, both included; NaN where nothing was."""
    rows = np.arange(len(values))
    read = np.isfinite(values)
    total = np.concatenate([[0.0], np.cumsum(np.where(read, values, 0.0))])
    count = np.concatenate([[0], np.cumsum(read)])
    first = np.where(begin >= 0, begin, rows)
    number = count[rows + 1] - count[first]
    mean: Floats = np.divide(total[rows + 1] - total[first], number, out=np.full(len(values), np.nan), where=number > 0)
    return mean


def fuel_used(
    plant: Plant,
    columns: Sequence[MeterColumn],
    *,
    spans: Spans,
    running: Bools,
    events: Sequence[Event],
    liquid: LotsInUse,
    gas: LotsInUse,
    barometer_pa: Floats,
) -> FuelUsed:
    """Fuel mass and energy of every span, over all meters of one engine or group."""
    rows = len(running)
    uses = tuple(
        _use_of(
            column,
            differences(
                usable(column.values, column.entry, events, column.instrument),
                spans.ends,
                counter=column.meter.counter,
                rate_per_h=rated_rate_per_h(plant, column.meter),
                events=events,
                instrument=column.instrument,
                entries=column.entry,
            ),
            spans.begin,
            gas if column.meter.key == GAS else liquid,
            barometer_pa,
        )
        for column in columns
    )

    def total(pick: Callable[[MeterUse], Floats]) -> Floats:
        sign = [-1.0 if use.column.meter.key == RETURN else 1.0 for use in uses]
        signed = [s * pick(use) for s, use in zip(sign, uses, strict=True)]
        return np.sum(signed, axis=0) if signed else np.full(rows, np.nan)

    def either(pick: Callable[[MeterUse], Bools]) -> Bools:
        return np.any([pick(use) for use in uses], axis=0) if uses else np.zeros(rows, bool)

    mass, energy = total(lambda use: use.mass_kg), total(lambda use: use.energy_mj)
    # More came back than went out: one of the counters was read wrong, whichever it is.
    impossible = (mass < 0) | (energy < 0)
    mass[impossible] = energy[impossible] = np.nan
    scale = np.where(energy > 0, energy, np.nan)
    return FuelUsed(
        meters=uses,
        mass_kg=mass,
        energy_mj=energy,
        source=_source(uses, np.isfinite(mass) | np.isfinite(energy)),
        relative_u_calibration=np.sqrt(_total_square(uses, "relative_u", rows)) / scale,
        relative_u_repeat=np.sqrt(_total_square(uses, "relative_u_repeat", rows)) / scale,
        open_question=either(lambda use: use.counted.open_question) | impossible,
        passed_zero=either(lambda use: use.counted.passed_zero),
        exchanged=either(lambda use: use.counted.exchanged),
        temperature_doubtful=either(lambda use: _temperature_doubtful(use.column.temperature_c, running, spans.begin)),
        counted=~either(lambda use: ~np.isfinite(use.quantity)) & bool(uses) & ~impossible,
    )


def _total_square(uses: Sequence[MeterUse], name: str, rows: int) -> Floats:
    """Sum over the meters of (energy x relative uncertainty) squared [MJ2]."""
    squares = [(use.energy_mj * getattr(use, name)) ** 2 for use in uses]
    return np.sum(squares, axis=0) if squares else np.full(rows, np.nan)


def _use_of(
    column: MeterColumn, counted: Differences, begin: Integers, lots: LotsInUse, barometer_pa: Floats
) -> MeterUse:
    meter, used = column.meter, counted.used
    temperature = mean_over(column.temperature_c, begin)
    by_mass = lots.lower_calorific_value_mj_kg
    error = np.full(len(used), float(from_limit(meter.accuracy_percent / 100)))
    if meter.unit in MASS_UNITS:
        quantity = mass = used * MASS_UNITS[meter.unit]
        energy = mass * by_mass
    elif meter.key == GAS:
        quantity = _normal_volume(column, used, begin, temperature, barometer_pa)
        # Value and volume on one reference: 0 degC.
        by_volume = lots.lower_calorific_value_mj_m3 * np.where(
            lots.at_normal, 1.0, STANDARD_TEMPERATURE_K / NORMAL_TEMPERATURE_K
        )
        energy = quantity * by_volume
        mass = energy / by_mass
    else:
        quantity = mass = np.asarray(
            mass_from_volume(used * VOLUME_UNITS[meter.unit], lots.density15_kg_m3, temperature)
        )
        energy = mass * by_mass
        thermometer = np.asarray(expansion(lots.density15_kg_m3)) * float(from_limit(TEMPERATURE_U_K))
        error = np.hypot(error, np.nan_to_num(thermometer))
    last_place = meter.counter.multiplier * 10.0**-meter.counter.decimals
    repeat = np.divide(last_place / np.sqrt(6.0), used, out=np.zeros(len(used)), where=used > 0)
    return MeterUse(column, counted, temperature, quantity, mass, energy, error, repeat)


def _normal_volume(
    column: MeterColumn, used: Floats, begin: Integers, temperature_c: Floats, barometer_pa: Floats
) -> Floats:
    """Gas of each span [m3 at 0 degC, 101.325 kPa]; actual volumes need pressure and temperature at the meter."""
    if column.meter.unit in REFERENCE_K:
        return used * (NORMAL_TEMPERATURE_K / REFERENCE_K[column.meter.unit])
    pressure = mean_over(column.pressure_bar, begin) * BAR_PA + barometer_pa
    return np.asarray(gas_volume(used, pressure, temperature_c + ZERO_C_K))


def _temperature_doubtful(temperature_c: Floats, running: Bools, begin: Integers) -> Bools:
    """Spans that a temperature enters which stands alone."""
    alone = stands_alone(np.where(running, temperature_c, np.nan), floor=TEMPERATURE_FLOOR_K)
    count = np.concatenate([[0], np.cumsum(alone)])
    rows = np.arange(len(alone))
    touched: Bools = count[rows + 1] > count[np.where(begin >= 0, begin, rows)]
    return touched


def _source(uses: Sequence[MeterUse], known: Bools) -> NDArray[np.object_]:
    """The word for where the fuel comes from: of two fuels that of the greater energy."""
    liquid = [use for use in uses if use.column.meter.key != GAS]
    words = np.full(len(known), "", dtype=object)
    if any(use.column.meter.unit in MASS_UNITS for use in liquid):
        words[known] = MASS_METER
    elif any(use.column.meter.key == RETURN for use in liquid):
        words[known] = SUPPLY_AND_RETURN
    elif liquid:
        words[known] = ONE_WAY
    gas = [use.energy_mj for use in uses if use.column.meter.key == GAS]
    if gas:
        less = np.sum([use.energy_mj for use in liquid if use.column.meter.key == SUPPLY] or [np.zeros(len(known))], 0)
        words[known & ~(np.sum(gas, axis=0) < less)] = GAS_METER
    return words
