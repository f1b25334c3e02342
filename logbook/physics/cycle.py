"""The limited-pressure cycle with real gas properties, and what belongs to it.

Per kilogram of trapped dry air. Heating value at constant pressure and 298.15 K enters as an enthalpy; with the energy
function E = H - G T (not u(T) - u(298.15)) the balance is exact on that basis.
Kept approximations: liquid fuel injected at 298 K, complete combustion, no residual gas, dry air, no heat loss, no
gas-exchange work. Gas engines with premixed charge compress a mixture: for them the model is indicative only.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from logbook.physics import gas
from logbook.physics.checks import Floats, floats, good, shaped

_STEPS = 6
"""Newton steps; over random states the change after four was below 1e-10 K."""

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
    """on the compression volume V1 - V2"""
    heat_j_kg: Any
    work_j_kg: Any
    flame_k: Any
    """adiabatic flame at constant pressure from T2 [K]"""
    label: Any
    """`limited pressure`, `constant volume` (Pmax above what the fuel can give: suspicious) or `constant pressure`
    (Pmax at or below the compression end)"""


def _compressed_temperature(mix: gas.Mixture, t1: Floats, volume_ratio: Floats, start: Floats) -> Floats:
    """T after an isentropic change of volume V1/V2 = `volume_ratio`."""
    target = gas.entropy(mix, t1) - mix.gas_constant * np.log(t1) + mix.gas_constant * np.log(volume_ratio)
    t = start
    for _ in range(_STEPS):
        residual = gas.entropy(mix, t) - mix.gas_constant * np.log(t) - target
        t = t - residual * t / (gas.heat_capacity(mix, t) - mix.gas_constant)
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
    inputs = (p1, t1, r, pmax, lam, lcv, y, z, re)
    holds = (
        good((p1 > 0) & (pmax > 0), "Pressures must be absolute and above zero.", *inputs)
        & good((t1 > 200) & (t1 < 600), "T1 must lie between 200 and 600 K.", *inputs)
        & good((r > 1.5) & (r < 40), "The compression ratio must lie between 1.5 and 40.", *inputs)
        & good(re >= r, "The expansion ratio cannot be below the compression ratio.", *inputs)
        & good((lam >= 1) & (lam < 20), "Lambda must lie between 1 and 20: below 1 there is not enough air.", *inputs)
        & good((lcv > 1e6) & (lcv < 130e6), "The calorific value must lie between 1 and 130 MJ/kg.", *inputs)
    )
    p1, t1, r, pmax, lam, lcv, y, z, re, holds = np.broadcast_arrays(p1, t1, r, pmax, lam, lcv, y, z, re, holds)
    p1, t1, r, lam = (np.where(holds, value, np.nan) for value in (p1, t1, r, lam))
    air = gas.AIR
    burnt = gas.products(lam, y, z)
    ga, gp = air.gas_constant, burnt.gas_constant
    heat = lcv * np.asarray(gas.fuel_air_ratio(lam, y, z))

    v1 = ga * t1 / p1
    v2 = v1 / r
    v4 = re * v2
    t2 = _compressed_temperature(air, t1, r, t1 * r**0.36)
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

    t4 = _compressed_temperature(burnt, t3, v3 / v4, t3 * (v3 / v4) ** 0.28)
    p4 = gp * t4 / v4
    rejected = _energy(burnt, t4) - _energy(air, t1) + p1 * (v4 - v1)
    work = heat - rejected
    flame = _from_enthalpy(burnt, heat + gas.enthalpy(air, t2), t2 + 0.8 * heat / cp2)
    return Cycle(
        t2_k=shaped(t2),
        p2_pa=shaped(p2),
        t3_k=shaped(t3),
        p3_pa=shaped(p3),
        t4_k=shaped(t4),
        p4_pa=shaped(p4),
        efficiency=shaped(work / heat),
        mean_pressure_pa=shaped(work / (v1 - v2)),
        heat_j_kg=shaped(heat),
        work_j_kg=shaped(work),
        flame_k=shaped(flame),
        label=_label(only_volume, np.asarray(pmax <= p2)),
    )


def _label(only_volume: NDArray[np.bool_], at_compression: NDArray[np.bool_]) -> Any:
    label = np.where(only_volume, CONSTANT_VOLUME, np.where(at_compression, CONSTANT_PRESSURE, LIMITED))
    return str(label) if label.ndim == 0 else label


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
    """Air-standard dual cycle, variable heat capacity. p1 [Pa], T1 [K], r, p3/p2, V4/V3.

    Impossible scalars raise ValueError. (Moran & Shapiro, Fundamentals of Engineering Thermodynamics, section 9.4.)
    """
    p1, t1, r, rp, rc = floats(pressure_pa, temperature_k, compression_ratio, pressure_ratio, cutoff_ratio)
    holds = good(
        (p1 > 0) & (t1 > 200) & (r > 1) & (rp >= 1) & (rc >= 1) & (rc < r),
        "An air cycle needs p1 > 0, T1 > 200 K, ratios of 1 or more, and a cut-off ratio below the compression ratio.",
        p1, t1, r, rp, rc,
    )  # fmt: skip
    t1 = np.where(holds, t1, np.nan)
    air, g = gas.AIR, gas.AIR_GAS_CONSTANT
    t2 = _compressed_temperature(air, t1, r, t1 * r**0.36)
    t3 = t2 * rp
    t4 = t3 * rc
    t5 = _compressed_temperature(air, t4, rc / r, t4 * (rc / r) ** 0.3)
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
    t_air, lam, y, lcv, z = floats(air_temperature_k, lambda_, hc_ratio, lower_calorific_value_j_kg, oc_ratio)
    holds = good((t_air > 200) & (t_air < 1500), "The air temperature must lie between 200 and 1500 K.", t_air, lam, y)
    burnt = gas.products(lam, y, z)
    heat = lcv * np.asarray(gas.fuel_air_ratio(np.where(lam >= 1, lam, np.nan), y, z))
    start = np.where(holds, t_air, np.nan) + 0.8 * heat / 1100.0
    return shaped(_from_enthalpy(burnt, heat + gas.enthalpy(gas.AIR, np.where(holds, t_air, np.nan)), start))


def effective_compression_ratio(
    scavenge_pressure_pa: ArrayLike, temperature_k: ArrayLike, compression_pressure_pa: ArrayLike
) -> tuple[Any, Any]:
    """(r, T2 [K]) from a compression pressure: the ratio that an isentrope of air would need.

    Both pressures absolute [Pa]; T1 [K]. It absorbs heat loss and leakage: infer it once from a good state and keep it;
    a later value is a condition figure, not a new setting.
    """
    p1, t1, p2 = floats(scavenge_pressure_pa, temperature_k, compression_pressure_pa)
    holds = good(
        (p1 > 0) & (p2 > p1) & (t1 > 200), "Pcomp must be above the scavenge pressure, both absolute.", p1, t1, p2
    )
    p1, t1, p2 = (np.where(holds, value, np.nan) for value in (p1, t1, p2))
    t2 = isentropic_temperature(t1, p2 / p1)
    return shaped(p2 * t1 / (p1 * np.asarray(t2))), shaped(t2)


def isentropic_temperature(temperature_k: ArrayLike, pressure_ratio: ArrayLike) -> Any:
    """T of air after an isentropic change of pressure p2/p1 [K]."""
    t1, ratio = floats(temperature_k, pressure_ratio)
    target = gas.entropy(gas.AIR, t1) + gas.AIR_GAS_CONSTANT * np.log(ratio)
    t = t1 * ratio**0.27
    for _ in range(_STEPS):
        t = t - (gas.entropy(gas.AIR, t) - target) * t / gas.heat_capacity(gas.AIR, t)
    return shaped(t)


def stroke_part_at_exhaust_opening(crank_angle_rad: ArrayLike, crank_to_rod: ArrayLike) -> Any:
    """Part of the stroke run when the exhaust opens; angle after top centre [rad], crank radius / rod length."""
    theta, lam = floats(crank_angle_rad, crank_to_rod)
    return shaped((1 - np.cos(theta) + (1 - np.sqrt(1 - (lam * np.sin(theta)) ** 2)) / lam) / 2)


def expansion_ratio(compression_ratio: ArrayLike, stroke_part_at_opening: ArrayLike, stroke_part: ArrayLike) -> Any:
    """Volume at exhaust opening over V2: never below r, at most the geometric 1 + (r - 1)/phi_c.

    `stroke_part` = phi_c, the part of the stroke left when port or valve closes. Never fitted to a measured efficiency.
    """
    r, x, phi = floats(compression_ratio, stroke_part_at_opening, stroke_part)
    return shaped(np.clip(1 + (r - 1) * x / phi, r, 1 + (r - 1) / phi))


def trapped_lambda(
    fuel_per_cycle_kg: ArrayLike,
    trapped_air_kg: ArrayLike,
    hc_ratio: ArrayLike = 1.8,
    oc_ratio: ArrayLike = 0.0,
) -> Any:
    """Excess-air ratio of what is trapped: air / (fuel x air need). Not the overall lambda of the exhaust."""
    fuel, air = floats(fuel_per_cycle_kg, trapped_air_kg)
    fuel = np.where(good(fuel > 0, "Fuel for each cycle must be above zero.", fuel, air), fuel, np.nan)
    return shaped(air / (fuel * gas.air_fuel_ratio(hc_ratio, oc_ratio)))


def trapped_air(
    pressure_pa: ArrayLike,
    temperature_k: ArrayLike,
    swept_volume_m3: ArrayLike,
    compression_ratio: ArrayLike,
    stroke_part: ArrayLike,
    charge_purity: ArrayLike = 1.0,
) -> Any:
    """Air trapped in one cylinder [kg]: purity p1 V1/(R T1), V1 = phi_c V_s r/(r - 1)."""
    p1, t1, vs, r, phi, purity = floats(
        pressure_pa, temperature_k, swept_volume_m3, compression_ratio, stroke_part, charge_purity
    )
    return shaped(purity * p1 * phi * vs * r / (r - 1) / (gas.AIR_GAS_CONSTANT * t1))


def fuel_per_cycle(fuel_kg_s: ArrayLike, speed_rev_s: ArrayLike, cylinders: ArrayLike, two_stroke: bool) -> Any:
    """Fuel of one working cycle of one cylinder [kg]: m k/(z n), k = 1 two-stroke, 2 four-stroke."""
    m, n, z = floats(fuel_kg_s, speed_rev_s, cylinders)
    n = np.where(good(n > 0, "Speed must be above zero.", m, n, z), n, np.nan)
    return shaped(m * (1 if two_stroke else 2) / (z * n))
