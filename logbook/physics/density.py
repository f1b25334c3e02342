"""Density and volume of oil over temperature: the 1980 tables 53B and 54B, base 15 degC (ASTM D1250, ISO 91-1).

Constants and bounds: several independent public source texts of the 1980 table agree. The 2004 edition works from
60 degF with longer constants and gives slightly other last digits.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats, floats, good, shaped

LEAST, GREATEST = 653.0, 1075.0
"""Bounds of the tables [kg/m3 at 15 degC]"""
AIR_BUOYANCY_KG_M3 = 1.1
"""Weight in air of a volume of oil is that of a density smaller by this (practice in several public texts)."""
_MOST_STEPS = 60


def expansion(density15_kg_m3: ArrayLike) -> Any:
    """Thermal expansion alpha at 15 degC [1/K] by zone of density [kg/m3, 653 to 1075, else ValueError].

    Zones: gasoline to 770.5, transition to 787.5, kerosene to 838.5, gas, diesel and fuel oils above.
    """
    (rho,) = floats(density15_kg_m3)
    return shaped(_alpha(_known_density(rho)))


def _alpha(rho: Floats) -> Floats:
    return np.select(
        [rho <= 770.5, rho < 787.5, rho < 838.5],
        [
            346.4228 / rho**2 + 0.4388 / rho,
            -0.00336312 + 2680.3206 / rho**2,
            594.5418 / rho**2,
        ],
        186.9696 / rho**2 + 0.4862 / rho,
    )


def _shrunk(alpha_dt: Floats) -> Floats:
    """Volume at 15 degC for each unit of volume at t."""
    shrunk: Floats = np.exp(-alpha_dt * (1 + 0.8 * alpha_dt))
    return shrunk


def _known_density(rho: Floats, *inputs: Floats) -> Floats:
    holds = good(
        (rho >= LEAST) & (rho <= GREATEST),
        "Density at 15 degC must lie between 653 and 1075 kg/m3 (0.987 kg/L is 987).",
        rho, *inputs,
    )  # fmt: skip
    return np.where(holds, rho, np.nan)


def _known_temperature(t: Floats, *inputs: Floats) -> Floats:
    holds = good((t >= -50) & (t <= 200), "The temperature of oil must lie between -50 and 200 degC.", t, *inputs)
    return np.where(holds, t, np.nan)


def volume_correction(density15_kg_m3: ArrayLike, temperature_c: ArrayLike) -> Any:
    """VCF: volume at 15 degC / volume at t (table 54B). Density at 15 degC [kg/m3], temperature [degC, -50 to 200]."""
    rho, t = floats(density15_kg_m3, temperature_c)
    return shaped(_shrunk(_alpha(_known_density(rho, t)) * (_known_temperature(t, rho) - 15.0)))


def density15(reading_kg_m3: ArrayLike, temperature_c: ArrayLike, glass: bool = False) -> Any:
    """Density at 15 degC [kg/m3] from a reading at t (table 53B); `glass`: a glass hydrometer, which grows too.

    Raises ValueError where the result is outside the table. At 770.5 and 838.5 kg/m3 the constants of 1980 jump and a
    band of readings has no exact solution: the result then stands within 0.1 kg/m3 up to 100 degC, 0.4 at 200.
    """
    reading, t = floats(reading_kg_m3, temperature_c)
    dt = _known_temperature(t, reading) - 15.0
    at_t = reading * (1 - 2.3e-5 * dt - 2e-8 * dt**2) if glass else reading + 0 * dt
    found = at_t
    for _ in range(_MOST_STEPS):
        # On its way to a density in the table a step may lie outside; the end of the table leads it.
        fresh = at_t / _shrunk(_alpha(np.clip(found, LEAST, GREATEST)) * dt)
        moved = np.abs(fresh - found)
        # Half a step: in the transition zone whole ones swing about the solution, wider each time when it is hot.
        found = (found + fresh) / 2
        if not np.any(moved >= 1e-7):
            break
    return shaped(_known_density(found, reading, t))


def mass_from_volume(volume_m3: ArrayLike, density15_kg_m3: ArrayLike, temperature_c: ArrayLike) -> Any:
    """True mass [kg] of a volume read at t [m3, degC]."""
    v, rho, t = floats(volume_m3, density15_kg_m3, temperature_c)
    alpha_dt = _alpha(_known_density(rho, v, t)) * (_known_temperature(t, v, rho) - 15.0)
    return shaped(v * rho * _shrunk(alpha_dt))


def mass_supply_less_return(
    supply_m3: ArrayLike,
    supply_temperature_c: ArrayLike,
    return_m3: ArrayLike,
    return_temperature_c: ArrayLike,
    density15_kg_m3: ArrayLike,
) -> Any:
    """Fuel consumed [kg]: both volumes [m3] converted each with its own temperature [degC], then subtracted."""
    supply: Floats = np.asarray(mass_from_volume(supply_m3, density15_kg_m3, supply_temperature_c))
    back: Floats = np.asarray(mass_from_volume(return_m3, density15_kg_m3, return_temperature_c))
    return shaped(supply - back)


def mass_in_air(volume15_m3: ArrayLike, density15_kg_m3: ArrayLike) -> Any:
    """Weight in air of oil at 15 degC [kg], as bunker papers state it: V15 (rho15 - 1.1)."""
    v, rho = floats(volume15_m3, density15_kg_m3)
    return shaped(v * (_known_density(rho, v) - AIR_BUOYANCY_KG_M3))


def vacuum_from_air(mass_in_air_kg: ArrayLike, density15_kg_m3: ArrayLike) -> Any:
    """True mass [kg] of a weight in air from bunker papers."""
    m, rho = floats(mass_in_air_kg, density15_kg_m3)
    rho = _known_density(rho, m)
    return shaped(m * rho / (rho - AIR_BUOYANCY_KG_M3))
