"""Power, mean pressures, consumption and brake efficiency."""

from __future__ import annotations

from math import pi
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import floats, good, shaped

J_PER_KWH = 3.6e6
KG_J_PER_G_KWH = 1e-3 / J_PER_KWH
"""1 g/kWh in kg/J"""
NAUTICAL_MILE_M = 1852.0
W_PER_METRIC_HORSEPOWER = 735.49875


def swept_volume(bore_m: ArrayLike, stroke_m: ArrayLike) -> Any:
    """Swept volume of one cylinder [m3]."""
    d, s = floats(bore_m, stroke_m)
    holds = good((d > 0) & (s > 0), "Bore and stroke must be above zero.", d, s)
    return shaped(pi * np.where(holds, d, np.nan) ** 2 * s / 4)


def revolutions_per_cycle(cycle: str) -> int:
    """1 for two-stroke, 2 for four-stroke. ValueError for another word."""
    try:
        return {"two-stroke": 1, "four-stroke": 2}[cycle]
    except KeyError:
        raise ValueError(f"cycle is two-stroke or four-stroke, not '{cycle}'.") from None


def torsion_power(
    twist_rad: ArrayLike,
    shear_modulus_pa: ArrayLike,
    outer_diameter_m: ArrayLike,
    length_m: ArrayLike,
    speed_rev_s: ArrayLike,
    inner_diameter_m: ArrayLike = 0.0,
) -> tuple[Any, Any]:
    """(torque [N m], power [W]) from the twist of a shaft: M = G I_p theta / L, P = 2 pi n M."""
    theta, g, do, length, n, di = floats(
        twist_rad, shear_modulus_pa, outer_diameter_m, length_m, speed_rev_s, inner_diameter_m
    )
    holds = good(
        (length > 0) & (di >= 0) & (do > di),
        "Measured length must be above zero, and the shaft's bore smaller than its outside.",
        theta, g, do, length, n, di,
    )  # fmt: skip
    torque = g * pi * (do**4 - di**4) / 32 * theta / np.where(holds, length, np.nan)
    return shaped(torque), shaped(2 * pi * n * torque)


def brake_power_of_set(electrical_w: ArrayLike, generator_efficiency: ArrayLike) -> Any:
    """Brake power [W] behind the power at the generator's terminals [W]; efficiency 0..1."""
    p, eta = floats(electrical_w, generator_efficiency)
    holds = good((eta > 0) & (eta <= 1), "Generator efficiency lies between 0 and 1.", p, eta)
    return shaped(np.where(holds, p / np.where(holds, eta, 1), np.nan))


def brake_power_with_take_off(shaft_w: ArrayLike, take_off_w: ArrayLike, take_off_efficiency: ArrayLike) -> Any:
    """Brake power [W] of an engine whose take-off sits before the torsion meter; power taken in counts negative."""
    p, pto, eta = floats(shaft_w, take_off_w, take_off_efficiency)
    holds = good((eta > 0) & (eta <= 1), "Take-off efficiency lies between 0 and 1.", p, pto, eta)
    return shaped(p + pto / np.where(holds, eta, np.nan))


def mean_pressure(
    power_w: ArrayLike, swept_volume_m3: ArrayLike, cylinders: ArrayLike, speed_rev_s: ArrayLike, cycle: str
) -> Any:
    """Mean effective (or indicated) pressure [Pa]: P k/(V_s z n)."""
    p, v, z, n = floats(power_w, swept_volume_m3, cylinders, speed_rev_s)
    holds = good((n > 0) & (v > 0) & (z > 0), "Speed, swept volume and cylinders must be above zero.", p, v, z, n)
    return shaped(p * revolutions_per_cycle(cycle) / np.where(holds, v * z * n, np.nan))


def power_from_mean_pressure(
    pressure_pa: ArrayLike, swept_volume_m3: ArrayLike, cylinders: ArrayLike, speed_rev_s: ArrayLike, cycle: str
) -> Any:
    """Power [W] from a mean pressure [Pa]: p V_s z n/k."""
    p, v, z, n = floats(pressure_pa, swept_volume_m3, cylinders, speed_rev_s)
    holds = good(
        (n >= 0) & (v > 0) & (z > 0), "Swept volume and cylinders must be above zero, speed not below.", p, v, z, n
    )
    return shaped(p * np.where(holds, v * z * n, np.nan) / revolutions_per_cycle(cycle))


def cylinder_constant(swept_volume_m3: ArrayLike, cycle: str) -> Any:
    """kW for each bar and rev/min of one cylinder [kW/(bar rpm)]."""
    (v,) = floats(swept_volume_m3)
    holds = good(v > 0, "Swept volume must be above zero.", v)
    return shaped(np.where(holds, v, np.nan) * 1e5 / (60 * 1000 * revolutions_per_cycle(cycle)))


def specific_consumption(fuel_kg: ArrayLike, energy_j: ArrayLike) -> Any:
    """Fuel for the energy delivered [kg/J]; over a period: sums first, divided last."""
    m, e = floats(fuel_kg, energy_j)
    holds = good(e > 0, "No energy was delivered: there is no specific consumption.", m, e) & good(
        m >= 0, "Fuel consumed is below zero: check both readings of the meter.", m, e
    )
    return shaped(m / np.where(holds, e, np.nan))


def brake_efficiency(consumption_kg_j: ArrayLike, lower_calorific_value_j_kg: ArrayLike) -> Any:
    """Brake thermal efficiency 0..1: 1/(b LCV). With b in g/kWh and LCV in MJ/kg that is 3600/(b LCV)."""
    b, q = floats(consumption_kg_j, lower_calorific_value_j_kg)
    holds = good((b > 0) & (q > 0), "Consumption and calorific value must be above zero.", b, q)
    return shaped(np.where(holds, 1 / np.where(holds, b * q, 1), np.nan))


def heat_rate(consumption_kg_j: ArrayLike, lower_calorific_value_j_kg: ArrayLike) -> Any:
    """Heat of the fuel for each unit of work [J/J]: b LCV, the inverse of the efficiency. Times 3600: kJ/kWh."""
    b, q = floats(consumption_kg_j, lower_calorific_value_j_kg)
    holds = good((b > 0) & (q > 0), "Consumption and calorific value must be above zero.", b, q)
    return shaped(b * np.where(holds, q, np.nan))


def efficiency_of_fuels(energy_j: ArrayLike, mass_kg: ArrayLike, lower_calorific_value_j_kg: ArrayLike) -> Any:
    """Efficiency with several fuels at once: E / sum m LCV; fuels on axis 0 of mass and calorific value."""
    e, m, q = floats(energy_j, mass_kg, lower_calorific_value_j_kg)
    burnt = (m * q).sum(axis=0)
    holds = good(burnt > 0, "No fuel was burnt: there is no efficiency.", e, burnt)
    return shaped(e / np.where(holds, burnt, np.nan))


def propeller_power(power_w: ArrayLike, speed_ratio: ArrayLike) -> Any:
    """Power at another speed on the same propeller curve [W]: cube of the speed ratio. Fixed pitch, same condition."""
    p, ratio = floats(power_w, speed_ratio)
    holds = good(ratio >= 0, "The speed ratio is not below zero.", p, ratio)
    return shaped(p * np.where(holds, ratio, np.nan) ** 3)


def running_index(power_ratio: ArrayLike, speed_ratio: ArrayLike) -> Any:
    """(P/P_rated)/(n/n_rated)^3: above 1 heavy, below 1 light running."""
    p, n = floats(power_ratio, speed_ratio)
    holds = good((p >= 0) & (n > 0), "The speed ratio must be above zero, and the power ratio not below.", p, n)
    return shaped(p / np.where(holds, n, np.nan) ** 3)


def slip(pitch_m: ArrayLike, revolutions: ArrayLike, distance_m: ArrayLike) -> tuple[Any, Any]:
    """(apparent slip, engine distance [m]): (pitch x revolutions - distance over ground)/engine distance."""
    pitch, rev, dist = floats(pitch_m, revolutions, distance_m)
    engine = pitch * rev
    holds = good((pitch > 0) & (rev > 0), "Pitch and revolutions must be above zero.", pitch, rev, dist)
    engine = np.where(holds, engine, np.nan)
    return shaped((engine - dist) / engine), shaped(engine)


def power_from_index(curve_power_w: ArrayLike, speed_ratio: ArrayLike, fuel_energy_ratio: ArrayLike) -> Any:
    """Power [W] from fuel index and speed: trial power at that index x n/n_trial x (rho LCV)/(rho LCV)_trial.

    It is fuel turned into power: an efficiency from it is shown and never compared.
    """
    p, n, q = floats(curve_power_w, speed_ratio, fuel_energy_ratio)
    holds = good(
        (n >= 0) & (q > 0), "The speed ratio is not below zero, and the fuel's energy ratio above zero.", p, n, q
    )
    return shaped(p * n * np.where(holds, q, np.nan))
