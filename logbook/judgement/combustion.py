"""Combustion temperature by the line method of the engine, and the cycle of a measured set of pressures.

One line method an engine; where an input of it is missing there is no temperature, never that of another method.
A reading with measured Pmax gives a `cycle` point in addition, which is never joined to the line.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from logbook.judgement.table import Floats, Table
from logbook.physics import bounds, cycle
from logbook.plant.records import Engine

STROKE_PART = {"two-stroke": 0.68, "four-stroke": 0.90}
"""Part of the stroke left when the port or valve closes, where plant.toml says nothing; from memory."""
TRAPPING_RISE_K = {"two-stroke": 45.0, "four-stroke": 25.0}
"""Rise of the charge by mixing and warm walls [K], where plant.toml says nothing; from memory."""
TRIAL_BAROMETER_PA = 100_000.0
"""Trials are corrected to reference conditions."""
EXHAUST_POINTS: Mapping[str, str] = {
    "after turbine": "turbine_outlet_temperature",
    "before turbine": "turbine_inlet_temperature",
    "after cylinder": "cylinder_exhaust_temperature",
}
ZERO_C_K = 273.15
BAR_PA = 1e5


@dataclass(frozen=True, slots=True)
class Combustion:
    """Temperatures and efficiencies of combustion; shape (rows,)."""

    method: str
    hot_k: Floats
    """T_H by the line method; NaN where an input is missing"""
    point_hot_k: Floats
    """T_H by `cycle` where Pmax was read"""
    cycle_efficiency: Floats
    """ideal cycle of the measured Pmax; NaN on every other row"""
    charge_pressure_pa: Floats
    """absolute"""
    start_k: Floats
    """T1: charge temperature and trapping rise"""
    trapped_lambda: Floats
    curve_maximum_pressure_pa: Floats
    """absolute: by the trial curve, in proportion to the charge pressure read"""
    maximum_pressure_pa: Floats
    """absolute, mean over cylinders, as measured"""


def line_method(engine: Engine, table: Table) -> str:
    """The line method of an engine: its own, else from the curve where that can be had, else `set`."""
    if engine.combustion_temperature:
        return engine.combustion_temperature
    curves = any(trial.cylinder_maximum_pressure_bar and trial.charge_air_pressure_bar for trial in engine.trials)
    logged = table.places("charge_air_pressure") or "charge_air_pressure" in engine.readings
    return bounds.FROM_CURVE if curves and logged and engine.compression_ratio else bounds.SET


def combustion_of(
    engine: Engine,
    table: Table,
    *,
    barometer_pa: Floats,
    fuel_kg_s: Floats,
    speed_rpm: Floats,
    lower_calorific_value_j_kg: Floats,
    hydrogen_to_carbon: Floats,
    curve_charge_pressure_bar: Floats,
    curve_maximum_pressure_bar: Floats,
) -> Combustion:
    """Combustion temperature and ideal cycle of every row. Curves as on the gauge at the row's brake power."""
    method = line_method(engine, table)
    none = np.full(len(table), np.nan)
    p1 = table.mean("charge_air_pressure") * BAR_PA + barometer_pa
    rise = TRAPPING_RISE_K[engine.cycle] if engine.trapping_rise_k is None else engine.trapping_rise_k
    t1 = table.mean("charge_air_temperature") + ZERO_C_K + rise
    pmax_read = table.mean("cylinder_maximum_pressure") * BAR_PA + barometer_pa
    pmax_curve = np.asarray(
        bounds.maximum_pressure_from_curve(
            curve_maximum_pressure_bar * BAR_PA + TRIAL_BAROMETER_PA,
            curve_charge_pressure_bar * BAR_PA + TRIAL_BAROMETER_PA,
            p1,
        )
    )
    set_k = np.full(len(table), engine.set_combustion_temperature_k)
    if engine.compression_ratio is None:
        hot = set_k if method == bounds.SET else none
        return Combustion(method, hot, none, none, p1, t1, none, pmax_curve, pmax_read)

    lam = _trapped_lambda(engine, p1, t1, fuel_kg_s, speed_rpm, hydrogen_to_carbon)

    def run(maximum_pressure_pa: Floats) -> tuple[Floats, Floats, Floats]:
        """T3, flame temperature and efficiency; only the rows that have all inputs are worked out."""
        results = none.copy(), none.copy(), none.copy()
        rows = np.isfinite(p1 + t1 + lam + lower_calorific_value_j_kg + maximum_pressure_pa)
        done = cycle.limited_pressure_cycle(
            p1[rows], t1[rows], engine.compression_ratio or np.nan, maximum_pressure_pa[rows], lam[rows],
            lower_calorific_value_j_kg[rows], hydrogen_to_carbon[rows], 0.0, engine.expansion_ratio,
        )  # fmt: skip
        for result, found in zip(results, (done.t3_k, done.flame_k, done.efficiency), strict=True):
            result[rows] = found
        return results

    point_hot, _, efficiency = run(pmax_read)
    hot = set_k
    if method == bounds.CYCLE:
        hot = point_hot
    elif method == bounds.FROM_CURVE:
        hot, _, _ = run(pmax_curve)
    elif method == bounds.FLAME:
        _, hot, _ = run(np.full(len(table), BAR_PA))
    return Combustion(method, hot, point_hot, efficiency, p1, t1, lam, pmax_curve, pmax_read)


def _trapped_lambda(
    engine: Engine, p1: Floats, t1: Floats, fuel_kg_s: Floats, speed_rpm: Floats, hydrogen_to_carbon: Floats
) -> Floats:
    swept = math.pi / 4 * (engine.bore_mm / 1e3) ** 2 * engine.stroke_mm / 1e3
    part = STROKE_PART[engine.cycle] if engine.stroke_part_at_closing is None else engine.stroke_part_at_closing
    fuel = cycle.fuel_per_cycle(fuel_kg_s, speed_rpm / 60, engine.cylinders, engine.cycle == "two-stroke")
    air = cycle.trapped_air(p1, t1, swept, engine.compression_ratio or np.nan, part, engine.charge_purity)
    return np.asarray(cycle.trapped_lambda(fuel, air, hydrogen_to_carbon))
