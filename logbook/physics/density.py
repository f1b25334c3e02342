"""Density and volume of oil over temperature: the 1980 tables 53B and 54B, base 15 degC (ASTM D1250, ISO 91-1).

Constants and bounds: several independent public source texts of the 1980 table agree. The 2004 edition works from
60 degF with longer constants and gives slightly other last digits.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats, floats, good, shaped

ZONES = ((653.0, 770.5), (770.5, 787.5), (787.5, 838.5), (838.5, 1075.0))
"""gasoline, transition, kerosene, gas and fuel oils [kg/m3 at 15 degC]"""
_MOST_STEPS = 60


def expansion(density15_kg_m3: ArrayLike) -> Any:
    """Thermal expansion alpha at 15 degC [1/K] by zone of density [kg/m3, 653 to 1075, else ValueError]."""
    (rho,) = floats(density15_kg_m3)
    holds = good(
        (rho >= 653) & (rho <= 1075), "Density at 15 degC must lie between 653 and 1075 kg/m3 (0.987 kg/L is 987).", rho
    )
    rho = np.where(holds, rho, np.nan)
    return shaped(
        np.select(
            [rho <= 770.5, rho < 787.5, rho < 838.5],
            [
                346.4228 / rho**2 + 0.4388 / rho,
                -0.00336312 + 2680.3206 / rho**2,
                594.5418 / rho**2,
            ],
            186.9696 / rho**2 + 0.4862 / rho,
        )
    )


def volume_correction(density15_kg_m3: ArrayLike, temperature_c: ArrayLike) -> Any:
    """VCF: volume at 15 degC / volume at t (table 54B). Density at 15 degC [kg/m3], temperature [degC, -50 to 200]."""
    rho, t = floats(density15_kg_m3, temperature_c)
    holds = good((t >= -50) & (t <= 200), "The temperature of oil must lie between -50 and 200 degC.", rho, t)
    alpha_dt = np.asarray(expansion(rho)) * (np.where(holds, t, np.nan) - 15.0)
    return shaped(np.exp(-alpha_dt * (1 + 0.8 * alpha_dt)))


def density15(reading_kg_m3: ArrayLike, temperature_c: ArrayLike, glass: bool = False) -> Any:
    """Density at 15 degC [kg/m3] from a reading at t (table 53B); `glass`: a glass hydrometer, which grows too."""
    reading, t = floats(reading_kg_m3, temperature_c)
    dt = t - 15.0
    at_t = reading * (1 - 2.3e-5 * dt - 2e-8 * dt**2) if glass else reading + 0 * dt
    found = at_t
    for _ in range(_MOST_STEPS):
        fresh = at_t / np.asarray(volume_correction(found, t))
        moved = np.nanmax(np.abs(fresh - found), initial=0.0)
        found = fresh
        if moved < 1e-7:
            break
    return shaped(found)


def mass_from_volume(volume_m3: ArrayLike, density15_kg_m3: ArrayLike, temperature_c: ArrayLike) -> Any:
    """True mass [kg] of a volume read at t [m3, degC]."""
    v, rho = floats(volume_m3, density15_kg_m3)
    return shaped(v * rho * np.asarray(volume_correction(rho, temperature_c)))


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
    return shaped(v * (rho - 1.1))


def vacuum_from_air(mass_in_air_kg: ArrayLike, density15_kg_m3: ArrayLike) -> Any:
    """True mass [kg] of a weight in air from bunker papers."""
    m, rho = floats(mass_in_air_kg, density15_kg_m3)
    return shaped(m * rho / (rho - 1.1))
