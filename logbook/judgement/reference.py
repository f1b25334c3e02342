"""The reference of every row: trial curves by operating mode and blower state, and the ambient factor."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from logbook.judgement.events import Event
from logbook.judgement.flags import Flags
from logbook.judgement.table import Bools, Floats, Table
from logbook.physics import ambient, humidity
from logbook.physics.curve import curve
from logbook.plant.records import Engine, Plant, TrialCurve

ASSUMED_BAROMETER_PA = 101_325.0
LOWEST_ALTITUDE_OF_MISSING_BAROMETER_M = 100.0
REDUCTION_MBAR_PER_M = 0.12
"""Barometer reduced to sea level, back to the height of the engine; valid to 300 m, from memory."""
PA_PER_MBAR = 100.0
U_AMBIENT = 0.001
U_REFERENCE = 0.005
"""Relative standard uncertainty of ambient factor and reference curve; from memory."""


@dataclass(frozen=True, slots=True)
class Ambient:
    """What surrounds the engine; shape (rows,)."""

    barometer_pa: Floats
    suction_c: Floats
    factor: Floats
    """a: 1 at reference conditions; NaN where an input is missing"""
    power_factor: Floats
    """alpha of ISO 3046; 1 elsewhere"""


def barometer_of(plant: Plant, read_mbar: Floats, nearby: Bools, flags: Flags) -> Floats:
    """Absolute pressure at the engine [Pa]; assumed near sea level, missing above."""
    pressure = read_mbar * PA_PER_MBAR
    if plant.barometer_at != "engine":
        pressure = pressure - REDUCTION_MBAR_PER_M * PA_PER_MBAR * plant.barometer_height_m
    flags.add("plant_value_nearby", nearby & np.isfinite(read_mbar))
    missing = ~np.isfinite(pressure)
    if plant.altitude_m > LOWEST_ALTITUDE_OF_MISSING_BAROMETER_M:
        flags.add("barometer_missing", missing)
        return pressure
    flags.add("barometer_assumed", missing)
    return np.where(missing, ASSUMED_BAROMETER_PA, pressure)


def ambient_of(engine: Engine, table: Table, barometer_pa: Floats, humidity_percent: Floats, flags: Flags) -> Ambient:
    """Ambient factor of every row by the engine's rule."""
    rule = engine.correction
    suction = table.mean("compressor_inlet_temperature")
    coolant = table.mean("cooler_water_inlet_temperature")
    ones = np.ones(len(table))
    if rule.rule == "none":
        flags.add("not_corrected", ones > 0)
        return Ambient(barometer_pa, suction, ones, ones)
    power = ones
    missing = ~np.isfinite(suction + barometer_pa)
    if rule.rule == "two-stroke percentages":
        factor = np.asarray(
            ambient.percentage_rules(
                suction, barometer_pa / PA_PER_MBAR, coolant,
                rule.percent_per_10k_coolant, rule.percent_per_10k_suction_air, rule.percent_per_10mbar_barometer,
            )
        )  # fmt: skip
        needs_coolant = rule.percent_per_10k_coolant != 0
    else:
        exponents = ambient.exponents(rule.engine_kind)
        vapour = np.zeros(len(table))
        if exponents.a:
            vapour = np.asarray(humidity.vapour_pressure(suction, humidity_percent / 100))
            missing |= ~np.isfinite(vapour)
        found = ambient.iso_3046(
            rule.engine_kind, barometer_pa, suction, vapour, coolant, np.full(len(table), rule.mechanical_efficiency)
        )
        factor, power = np.asarray(found.beta), np.asarray(found.alpha)
        needs_coolant = exponents.s != 0
    # A temperature or barometer that cannot be gives no factor: for the correction it was not read.
    missing |= ~np.isfinite(factor)
    flags.add("correction_input_missing", missing)
    flags.add("coolant_not_read", ~missing & ~np.isfinite(coolant) & needs_coolant)
    return Ambient(barometer_pa, suction, np.where(missing, np.nan, factor), power)


@dataclass(frozen=True, slots=True)
class Reference:
    """The trial at every row's load; NaN where there is none. Pressures as on the gauge."""

    sfoc_g_kwh: Floats
    lower_calorific_value_mj_kg: Floats
    charge_pressure_bar: Floats
    maximum_pressure_bar: Floats
    mode: NDArray[np.object_]


def modes_of(engine: Engine, table: Table, events: Sequence[Event]) -> NDArray[np.object_]:
    """Operating mode of every row: as read, else since the last change of mode, else the first of the engine."""
    mode = np.full(len(table), engine.operating_modes[0], dtype=object)
    for event in events:
        if event.kind == "mode_changed" and event.body.get("mode"):
            mode[table.hours > event.hours] = str(event.body["mode"])
    read = table.word("operating_mode")
    return np.where(read != "", read, mode)


def _blowers(engine: Engine, table: Table, load: Floats, flags: Flags, running: Bools) -> NDArray[np.object_]:
    """`on`, `off`, or empty: not known or none fitted."""
    state = table.word("auxiliary_blower_state")
    if not engine.auxiliary_blowers:
        return np.full(len(table), "", dtype=object)
    unread = (state == "") & running
    on_below, off_above = engine.blowers_on_below_percent, engine.blowers_off_above_percent
    if on_below is not None:
        low = unread & (load * 100 < on_below)
        state[low] = "on"
        flags.add("blowers_assumed", low)
    if off_above is not None:
        high = unread & (load * 100 > off_above)
        state[high] = "off"
        flags.add("blowers_assumed", high)
    flags.add("blowers_unknown", (state == "") & running & np.isfinite(load))
    return state


def _consumption(trial: TrialCurve) -> tuple[float, ...]:
    if trial.sfoc_g_kwh:
        return trial.sfoc_g_kwh
    return tuple(rate / trial.lower_calorific_value_mj_kg for rate in trial.heat_rate_kj_kwh)


def reference_of(
    engine: Engine,
    table: Table,
    *,
    load: Floats,
    power_factor: Floats,
    running: Bools,
    events: Sequence[Event],
    flags: Flags,
) -> Reference:
    """The reference curve of every row at its load (fraction): like with like in mode and blower state."""
    rows = len(table)
    none = np.full(rows, np.nan)
    mode = modes_of(engine, table, events)
    sfoc, lcv, charge, maximum = none.copy(), none.copy(), none.copy(), none.copy()
    known = running & np.isfinite(load)
    if not engine.trials:
        flags.add("no_reference", running)
        return Reference(sfoc, lcv, charge, maximum, mode)
    blowers = _blowers(engine, table, load, flags, running)
    at = load / power_factor if engine.correction.curve_at == "adjusted power" else load
    matched, mode_known = np.zeros(rows, bool), np.zeros(rows, bool)
    for trial in engine.trials:
        same_mode = mode == trial.operating_mode
        here = known & same_mode & (blowers == (trial.blowers or "")) & ~matched
        mode_known |= same_mode
        matched |= here
        loads = np.array(trial.load_percent) / 100
        for column, values in (
            (sfoc, _consumption(trial)),
            (charge, trial.charge_air_pressure_bar),
            (maximum, trial.cylinder_maximum_pressure_bar),
        ):
            if values:
                column[here] = curve(loads, values)(at[here])
        lcv[here] = trial.lower_calorific_value_mj_kg
    flags.add("mode_has_no_reference", known & ~mode_known)
    flags.add("blowers_differ", known & mode_known & ~matched & (blowers != ""))
    flags.add("outside_curve", matched & ~np.isfinite(sfoc))
    return Reference(sfoc, lcv, charge, maximum, mode)
