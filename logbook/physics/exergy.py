"""Exergy: what of a heat or a fuel could at best become power.

Only the exergy of the exhaust says what a waste-heat plant could at best turn into power; its heat says what could at
best be recovered as heat above the acid dew point (the maker's minimum stack temperature stands).
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics import gas
from logbook.physics.checks import floats, good, shaped


def exhaust_exergy(
    temperature_k: ArrayLike,
    lambda_: ArrayLike,
    hc_ratio: ArrayLike,
    ambient_k: ArrayLike,
    pressure_ratio: ArrayLike = 1.0,
    oc_ratio: ArrayLike = 0.0,
) -> tuple[Any, Any]:
    """(enthalpy above ambient, exergy) of exhaust gas [J/kg of gas]: e = (h - h0) - T0 (s0 - s0_0) + R_g T0 ln(p/p0).

    Temperatures [K]; overall lambda, fuel CHyOz; p/p_ambient, absolute. Errors as for the gas properties.
    """
    t, lam, y, t0, ratio, z = inputs = floats(temperature_k, lambda_, hc_ratio, ambient_k, pressure_ratio, oc_ratio)
    t, t0 = gas.known_temperature(t, *inputs), gas.known_temperature(t0, *inputs)
    ratio = np.where(good(ratio > 0, "Enter absolute pressures above zero.", *inputs), ratio, np.nan)
    mix = gas.products(gas.enough_air(lam, *inputs), y, z)
    h = (gas.enthalpy(mix, t) - gas.enthalpy(mix, t0)) / mix.mass
    s = (gas.entropy(mix, t) - gas.entropy(mix, t0)) / mix.mass
    return shaped(h), shaped(h - t0 * s + mix.gas_constant / mix.mass * t0 * np.log(ratio))


def constant_cp_exergy(cp_j_kg_k: ArrayLike, temperature_k: ArrayLike, ambient_k: ArrayLike) -> Any:
    """Exergy with a constant heat capacity [J/kg]: cp [(T - T0) - T0 ln(T/T0)]; temperatures [K]."""
    cp, t, t0 = inputs = floats(cp_j_kg_k, temperature_k, ambient_k)
    holds = good((cp > 0) & (t > 0) & (t0 > 0), "Enter a heat capacity above zero and kelvin.", *inputs)
    cp, t, t0 = (np.where(holds, value, np.nan) for value in inputs)
    return shaped(cp * ((t - t0) - t0 * np.log(t / t0)))


def fuel_exergy_ratio(carbon: ArrayLike, hydrogen: ArrayLike, oxygen: ArrayLike = 0.0, sulphur: ArrayLike = 0.0) -> Any:
    """Exergy of a liquid fuel over its lower calorific value, from mass fractions (from memory, after Kotas; +-1 %)."""
    c, h, o, s = inputs = floats(carbon, hydrogen, oxygen, sulphur)
    holds = good(
        (c > 0) & (h >= 0) & (o >= 0) & (s >= 0) & (c + h + o + s <= 1 + 1e-9),
        "Enter carbon, hydrogen, oxygen and sulphur as mass fractions that add up to 1 at most.",
        *inputs,
    )
    c = np.where(holds, c, np.nan)
    return shaped(1.0401 + 0.1728 * h / c + 0.0432 * o / c + 0.2169 * (s / c) * (1 - 2.0628 * h / c))
