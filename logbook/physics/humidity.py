"""Moist air: saturation pressure (Buck 1996, constants from memory; within 0.04 % of IAPWS-IF97 from 0 to 50 degC)."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats, floats, good, shaped


def saturation_pressure(temperature_c: ArrayLike) -> Any:
    """Saturation pressure of water [Pa]; temperature [degC, -20 to 60; the check against IF97 is from 0 to 50]."""
    (t,) = floats(temperature_c)
    t = np.where(good((t >= -20) & (t <= 60), "Saturation pressure is given from -20 to 60 degC.", t), t, np.nan)
    return shaped(611.21 * np.exp((18.678 - t / 234.5) * t / (257.14 + t)))


def vapour_pressure(temperature_c: ArrayLike, relative_humidity: ArrayLike) -> Any:
    """Pressure of the water vapour in the air [Pa]; relative humidity 0..1."""
    t, phi = floats(temperature_c, relative_humidity)
    holds = good((phi >= 0) & (phi <= 1), "Relative humidity lies between 0 and 1 (60 % is 0.6).", t, phi)
    return shaped(np.where(holds, phi, np.nan) * np.asarray(saturation_pressure(t)))


def humidity_ratio(temperature_c: ArrayLike, relative_humidity: ArrayLike, pressure_pa: ArrayLike) -> Any:
    """Water for each kilogram of dry air [kg/kg]; total pressure [Pa]."""
    pv, p = _vapour_and_total(temperature_c, relative_humidity, pressure_pa)
    return shaped(0.621945 * pv / (p - pv))


def moist_density(temperature_c: ArrayLike, relative_humidity: ArrayLike, pressure_pa: ArrayLike) -> Any:
    """Density of moist air [kg/m3]; total pressure [Pa]."""
    (t,) = floats(temperature_c)
    pv, p = _vapour_and_total(t, relative_humidity, pressure_pa)
    return shaped((p - 0.378 * pv) / (287.05 * (t + 273.15)))


def _vapour_and_total(
    temperature_c: ArrayLike, relative_humidity: ArrayLike, pressure_pa: ArrayLike
) -> tuple[Floats, Floats]:
    (p,) = floats(pressure_pa)
    pv: Floats = np.asarray(vapour_pressure(temperature_c, relative_humidity))
    holds = good(p > pv, "The barometer must be in Pa, and above the pressure of the water vapour alone.", p, pv)
    return pv, np.where(holds, p, np.nan)
