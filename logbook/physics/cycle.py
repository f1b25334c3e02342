"""The limited-pressure cycle with real gas properties, and what belongs to it.

Per kilogram of trapped dry air. Heating value at constant pressure and 298.15 K enters as an enthalpy; with the energy
function E = H - G T (not u(T) - u(298.15)) the balance is exact on that basis.
Kept approximations: liquid fuel injected at 298 K, complete combustion, no residual gas, dry air, no heat loss, no
gas-exchange work. Gas engines with premixed charge compress a mixture: for them the model is indicative only.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, fields
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from logbook.physics import gas
from logbook.physics.checks import Floats, floats, good, shaped

_STEPS = 6
"""Newton steps; over random states the change after four was below 1e-10 K."""
_BLOCK = 8192
"""Elements worked out at once: their columns then stay in the processor's cache (measured; a third quicker)."""

LIMITED, CONSTANT_VOLUME, CONSTANT_PRESSURE = "limited pressure", "constant volume", "constant pressure"


@dataclass(frozen=True, slots=True)
class Cycle:
    """States and results of one cycle (or arrays of them). Temperatures [K], pressures [Pa], energy per kg dry air."""

    t2_k: Any
    p2_pa: Any
    t3_k: Any
    p3_pa: Any
    t4_k: Any
    p4_pa: Any
    efficiency: Any
    """work / heat, 0..1"""
    mean_pressure_pa: Any
    """on the compression volume V1 - V2; times phi_c it is on the swept volume"""
    heat_j_kg: Any
    work_j_kg: Any
    flame_k: Any
    """adiabatic flame at constant pressure from T2 [K]"""
    label: Any
    """`limited pressure`, `constant volume` (Pmax above what the fuel can give: suspicious) or `constant pressure`
    (Pmax at or below the compression end: check r, trapping rise, p1, the indicator); empty where there is no cycle"""


def _after_isentrope(mix: gas.Mixture, t1: Floats, volume_ratio: Floats, start: Floats) -> Floats:
    """T after an isentropic change of volume, V1/V2 = `volume_ratio`."""
    g = mix.gas_constant
    target = gas.entropy(mix, t1) + g * np.log(volume_ratio / t1)
    t = start
    for _ in range(_STEPS):
        residual = gas.entropy(mix, t) - g * np.log(t) - target
        t = t - residual * t / (gas.heat_capacity(mix, t) - g)
    return t


def _from_enthalpy(mix: gas.Mixture, target: Floats, start: Floats) -> Floats:
    t = start
    for _ in range(_STEPS):
        t = t - (gas.enthalpy(mix, t) - target) / gas.heat_capacity(mix, t)
    return t


def _energy(mix: gas.Mixture, t: Floats) -> Floats:
    result: Floats = gas.enthalpy(mix, t) - mix.gas_constant * t
    return result


def _from_energy(mix: gas.Mixture, target: Floats, start: Floats) -> Floats:
    t = start
    for _ in range(_STEPS):
        t = t - (_energy(mix, t) - target) / (gas.heat_capacity(mix, t) - mix.gas_constant)
    return t


def compressed_temperature(temperature_k: ArrayLike, compression_ratio: ArrayLike) -> Any:
    """T2 of air after isentropic compression from T1 by r = V1/V2 [K]. T1 200 to 600 K, r 1.5 to 40."""
    t1, r = floats(temperature_k, compression_ratio)
    holds = _start_is_good(t1, r, (t1, r))
    t1, r = (np.where(holds, value, np.nan) for value in (t1, r))
    return shaped(_after_isentrope(gas.AIR, t1, r, t1 * r**0.36))


def _start_is_good(t1: Floats, r: Floats, inputs: Sequence[Floats]) -> NDArray[np.bool_]:
    return good((t1 > 200) & (t1 < 600), "Enter T1 in kelvin, between 200 and 600.", *inputs) & good(
        (r > 1.5) & (r < 40), "Enter a compression ratio between 1.5 and 40.", *inputs
    )


def limited_pressure_cycle(
    pressure_pa: ArrayLike,
    temperature_k: ArrayLike,
    compression_ratio: ArrayLike,
    maximum_pressure_pa: ArrayLike,
    lambda_: ArrayLike,
    lower_calorific_value_j_kg: ArrayLike,
    hc_ratio: ArrayLike = 1.8,
    oc_ratio: ArrayLike = 0.0,
    expansion_ratio: ArrayLike | None = None,
) -> Cycle:
    """The limited-pressure (dual, Seiliger) cycle; floats and arrays alike.

    Start of compression p1 [Pa, absolute], T1 [K]; effective compression ratio; mean maximum pressure [Pa, absolute];
    trapped excess-air ratio >= 1; lower calorific value [J/kg]; fuel CHyOz; expansion ratio (volume at exhaust opening
    over V2), the compression ratio where it is left out. Impossible scalars raise ValueError.
    """
    p1, t1, r, pmax, lam, lcv, y, z = floats(
        pressure_pa, temperature_k, compression_ratio, maximum_pressure_pa, lambda_, lower_calorific_value_j_kg,
        hc_ratio, oc_ratio,
    )  # fmt: skip
    re = r if expansion_ratio is None else np.asarray(expansion_ratio, float)
    inputs = (p1, t1, r, re, pmax, lam, lcv, y, z)
    holds = (
        good((p1 > 0) & (pmax > 0), "Enter p1 and Pmax as absolute pressures above zero.", *inputs)
        & _start_is_good(t1, r, inputs)
        & good((re >= r) & (re < 80), "Enter an expansion ratio from the compression ratio up to 80.", *inputs)
        & good((lam >= 1) & (lam < 20), "Enter lambda from 1 to 20: below 1 there is not enough air.", *inputs)
        & good((lcv > 1e6) & (lcv < 60e6), "Enter a lower calorific value between 1 and 60 MJ/kg.", *inputs)
    )
    columns = np.broadcast_arrays(holds, *inputs)
    shape = columns[0].shape
    flat = [column.ravel() for column in columns]
    blocks = [
        _cycle_of_block(*(column[first : first + _BLOCK] for column in flat))
        for first in range(0, max(flat[0].size, 1), _BLOCK)
    ]
    return Cycle(*(_joined([getattr(block, field.name) for block in blocks], shape) for field in fields(Cycle)))


def _joined(parts: Sequence[NDArray[Any]], shape: tuple[int, ...]) -> Any:
    column = np.concatenate(parts).reshape(shape)
    return column if shape else column.item()


def _cycle_of_block(holds: NDArray[np.bool_], *inputs: Floats) -> Cycle:
    p1, t1, r, re, pmax, lam, lcv, y, z = (np.where(holds, value, np.nan) for value in inputs)
    air = gas.AIR
    burnt = gas.products(lam, y, z)
    ga, gp = air.gas_constant, burnt.gas_constant
    heat = lcv * gas.fuel_air_ratio(lam, y, z)

    v1 = ga * t1 / p1
    v2 = v1 / r
    v4 = re * v2
    t2 = _after_isentrope(air, t1, r, t1 * r**0.36)
    p2 = ga * t2 / v2

    # Both ways of taking in the heat are worked out for every element; a mask chooses.
    limit = np.maximum(pmax, p2)
    e2 = _energy(air, t2)
    cp2 = gas.heat_capacity(burnt, t2)
    t3_pressure = _from_enthalpy(burnt, heat + e2 + limit * v2, t2 + 0.7 * heat / cp2)
    t3_volume = _from_energy(burnt, heat + e2, t2 + 0.8 * heat / (cp2 - gp))
    v3_pressure = gp * t3_pressure / limit
    only_volume = v3_pressure < v2
    t3 = np.where(only_volume, t3_volume, t3_pressure)
    v3 = np.where(only_volume, v2, v3_pressure)
    p3 = np.where(only_volume, gp * t3_volume / v2, limit)

    expansion = v3 / v4
    t4 = _after_isentrope(burnt, t3, expansion, t3 * expansion**0.28)
    rejected = _energy(burnt, t4) - _energy(air, t1) + p1 * (v4 - v1)
    work = heat - rejected
    return Cycle(
        t2_k=t2,
        p2_pa=p2,
        t3_k=t3,
        p3_pa=p3,
        t4_k=t4,
        p4_pa=gp * t4 / v4,
        efficiency=work / heat,
        mean_pressure_pa=work / (v1 - v2),
        heat_j_kg=heat,
        work_j_kg=work,
        flame_k=_from_enthalpy(burnt, heat + e2 + ga * t2, t2 + 0.8 * heat / cp2),
        label=np.select([np.isnan(work), only_volume, pmax <= p2], ["", CONSTANT_VOLUME, CONSTANT_PRESSURE], LIMITED),
    )


@dataclass(frozen=True, slots=True)
class AirCycle:
    """The air-standard dual cycle with heat added and no fuel; states numbered 1 to 5 as textbooks do."""

    t2_k: Any
    t3_k: Any
    t4_k: Any
    t5_k: Any
    efficiency: Any
    mean_pressure_pa: Any
    heat_j_kg: Any
    work_j_kg: Any


def air_cycle(
    pressure_pa: ArrayLike,
    temperature_k: ArrayLike,
    compression_ratio: ArrayLike,
    pressure_ratio: ArrayLike,
    cutoff_ratio: ArrayLike,
) -> AirCycle:
    """Air-standard dual cycle, variable heat capacity. p1 [Pa], T1 [K]; r, p3/p2 and V4/V3, of which the last two are
    1 or more and not both 1.

    Impossible scalars raise ValueError. (Moran & Shapiro, Fundamentals of Engineering Thermodynamics, section 9.4.)
    """
    p1, t1, r, rp, rc = inputs = floats(pressure_pa, temperature_k, compression_ratio, pressure_ratio, cutoff_ratio)
    holds = (
        _start_is_good(t1, r, inputs)
        & good(p1 > 0, "Enter p1 as an absolute pressure above zero.", *inputs)
        & good((rp >= 1) & (rc >= 1) & (rp * rc > 1), "Enter a pressure or a cut-off ratio above 1.", *inputs)
        & good(rc < r, "Enter a cut-off ratio below the compression ratio.", *inputs)
    )
    p1, t1, r, rp, rc = (np.where(holds, value, np.nan) for value in inputs)
    air, g = gas.AIR, gas.AIR_GAS_CONSTANT
    t2 = _after_isentrope(air, t1, r, t1 * r**0.36)
    t3 = t2 * rp
    t4 = t3 * rc
    t5 = _after_isentrope(air, t4, rc / r, t4 * (rc / r) ** 0.3)
    heat = _energy(air, t3) - _energy(air, t2) + gas.enthalpy(air, t4) - gas.enthalpy(air, t3)
    work = heat - (_energy(air, t5) - _energy(air, t1))
    v1 = g * t1 / p1
    return AirCycle(
        shaped(t2), shaped(t3), shaped(t4), shaped(t5), shaped(work / heat),
        shaped(work / (v1 * (1 - 1 / r))), shaped(heat), shaped(work),
    )  # fmt: skip


def flame_temperature(
    air_temperature_k: ArrayLike,
    lambda_: ArrayLike,
    hc_ratio: ArrayLike,
    lower_calorific_value_j_kg: ArrayLike,
    oc_ratio: ArrayLike = 0.0,
) -> Any:
    """Adiabatic flame at constant pressure, complete combustion [K]. Air [K], 200 to 1500; lambda >= 1; LCV [J/kg]."""
    t_air, lam, y, lcv, z = inputs = floats(air_temperature_k, lambda_, hc_ratio, lower_calorific_value_j_kg, oc_ratio)
    holds = (
        good((t_air > 200) & (t_air < 1500), "Enter the air temperature in kelvin, between 200 and 1500.", *inputs)
        & good(lam >= 1, "Enter lambda of 1 or more: below 1 there is not enough air.", *inputs)
        & good((lcv > 1e6) & (lcv < 60e6), "Enter a lower calorific value between 1 and 60 MJ/kg.", *inputs)
    )
    t_air, lam, lcv = (np.where(holds, value, np.nan) for value in (t_air, lam, lcv))
    burnt = gas.products(lam, y, z)
    heat = lcv * gas.fuel_air_ratio(lam, y, z)
    start = t_air + 0.8 * heat / gas.heat_capacity(burnt, t_air)
    return shaped(_from_enthalpy(burnt, heat + gas.enthalpy(gas.AIR, t_air), start))


def isentropic_temperature(temperature_k: ArrayLike, pressure_ratio: ArrayLike) -> Any:
    """T of air after an isentropic change of pressure p2/p1 [K]; T1 200 to 1500 K, p2/p1 0.01 to 300, absolute."""
    t1, ratio = inputs = floats(temperature_k, pressure_ratio)
    holds = good(
        (t1 > 200) & (t1 < 1500), "Enter the air temperature in kelvin, between 200 and 1500.", *inputs
    ) & good(
        (ratio > 0.01) & (ratio < 300), "Enter absolute pressures, whose ratio lies between 0.01 and 300.", *inputs
    )
    t1, ratio = (np.where(holds, value, np.nan) for value in inputs)
    target = gas.entropy(gas.AIR, t1) + gas.AIR_GAS_CONSTANT * np.log(ratio)
    t = t1 * ratio**0.27
    for _ in range(_STEPS):
        t = t - (gas.entropy(gas.AIR, t) - target) * t / gas.heat_capacity(gas.AIR, t)
    return shaped(t)


def effective_compression_ratio(
    scavenge_pressure_pa: ArrayLike, temperature_k: ArrayLike, compression_pressure_pa: ArrayLike
) -> tuple[Any, Any]:
    """(r, T2 [K]) from a compression pressure: the ratio that an isentrope of air would need.

    Both pressures absolute [Pa]; T1 [K]. It absorbs heat loss and leakage: infer it once from a good state and keep it;
    a later value is a condition figure, not a new setting.
    """
    p1, t1, p2 = inputs = floats(scavenge_pressure_pa, temperature_k, compression_pressure_pa)
    holds = good(
        (p1 > 0) & (p2 > p1) & (t1 > 200),
        "Enter Pcomp above the scavenge pressure, both absolute, and T1 in kelvin.",
        *inputs,
    )
    p1, t1, p2 = (np.where(holds, value, np.nan) for value in inputs)
    ratio = p2 / p1
    t2 = isentropic_temperature(t1, ratio)
    return shaped(ratio * t1 / t2), shaped(t2)


def stroke_part_at_exhaust_opening(crank_angle_rad: ArrayLike, crank_to_rod: ArrayLike) -> Any:
    """Part of the stroke run when the exhaust opens, x_EO; angle after top centre [rad], crank radius / rod length."""
    theta, rod = inputs = floats(crank_angle_rad, crank_to_rod)
    holds = good(
        (theta > 0) & (theta <= np.pi), "Enter the angle after top centre, up to half a turn.", *inputs
    ) & good((rod > 0) & (rod < 1), "Enter crank radius over rod length, between 0 and 1.", *inputs)
    theta, rod = (np.where(holds, value, np.nan) for value in inputs)
    return shaped((1 - np.cos(theta) + (1 - np.sqrt(1 - (rod * np.sin(theta)) ** 2)) / rod) / 2)


def expansion_ratio(compression_ratio: ArrayLike, stroke_part_at_opening: ArrayLike, stroke_part: ArrayLike) -> Any:
    """Volume at exhaust opening over V2: never below r, at most the geometric 1 + (r - 1)/phi_c.

    `stroke_part_at_opening` = x_EO; `stroke_part` = phi_c, the part of the stroke left when port or valve closes. Never
    fitted to a measured efficiency.
    """
    r, opening, closing = inputs = floats(compression_ratio, stroke_part_at_opening, stroke_part)
    holds = good(r > 1, "Enter a compression ratio above 1.", *inputs) & good(
        (opening > 0) & (opening <= 1) & (closing > 0) & (closing <= 1), "Enter parts of the stroke up to 1.", *inputs
    )
    r, opening, closing = (np.where(holds, value, np.nan) for value in inputs)
    return shaped(np.maximum(r, 1 + (r - 1) * opening / closing))


def trapped_lambda(
    fuel_per_cycle_kg: ArrayLike,
    trapped_air_kg: ArrayLike,
    hc_ratio: ArrayLike = 1.8,
    oc_ratio: ArrayLike = 0.0,
) -> Any:
    """Excess-air ratio of what is trapped: air / (fuel x air need). Not the overall lambda of the exhaust."""
    fuel, air, y, z = inputs = floats(fuel_per_cycle_kg, trapped_air_kg, hc_ratio, oc_ratio)
    holds = good((fuel > 0) & (air > 0), "Enter fuel and trapped air of a cycle above zero.", *inputs)
    fuel, air = (np.where(holds, value, np.nan) for value in (fuel, air))
    return shaped(air / (fuel * gas.air_fuel_ratio(y, z)))


def trapped_air(
    pressure_pa: ArrayLike,
    temperature_k: ArrayLike,
    swept_volume_m3: ArrayLike,
    compression_ratio: ArrayLike,
    stroke_part: ArrayLike,
    charge_purity: ArrayLike = 1.0,
) -> Any:
    """Air trapped in one cylinder [kg]: purity p1 V1/(R T1), V1 = phi_c V_s r/(r - 1).

    p1 absolute [Pa], T1 [K], V_s of one cylinder [m3], effective r; `stroke_part` = phi_c, the part of the stroke left
    when port or valve closes; purity of the charge 0..1 (1 is an assumption to be stated).
    """
    inputs = floats(pressure_pa, temperature_k, swept_volume_m3, compression_ratio, stroke_part, charge_purity)
    p1, t1, vs, r, part, purity = inputs
    holds = (
        good((p1 > 0) & (t1 > 0), "Enter the charge pressure absolute and its temperature in kelvin.", *inputs)
        & good((vs > 0) & (r > 1), "Enter a swept volume above zero and a compression ratio above 1.", *inputs)
        & good(
            (part > 0) & (part <= 1) & (purity > 0) & (purity <= 1), "Enter part of stroke and purity up to 1.", *inputs
        )
    )
    p1, t1, vs, r, part, purity = (np.where(holds, value, np.nan) for value in inputs)
    return shaped(purity * p1 * part * vs * r / (r - 1) / (gas.AIR_GAS_CONSTANT * t1))


def fuel_per_cycle(fuel_kg_s: ArrayLike, speed_rev_s: ArrayLike, cylinders: ArrayLike, two_stroke: bool) -> Any:
    """Fuel of one working cycle of one cylinder [kg]: m k/(z n), k = 1 two-stroke, 2 four-stroke."""
    m, n, z = inputs = floats(fuel_kg_s, speed_rev_s, cylinders)
    holds = good((n > 0) & (z >= 1), "Enter a speed above zero and at least one cylinder.", *inputs)
    n = np.where(holds, n, np.nan)
    return shaped(m * (1 if two_stroke else 2) / (z * n))
