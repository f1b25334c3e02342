"""Air and exhaust for each kilogram of fuel, from the dry exhaust gas; heat of the exhaust.

The lambda here is the overall one: on a two-stroke engine it includes scavenge air that was never trapped, so the
cycle is not to be fed with it. Wet analysers are converted first. The short cut lambda = 20.95/(20.95 - O2 %) reads
3 to 5 % high for hydrocarbon fuels and is not used.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics import gas
from logbook.physics.checks import floats, good, shaped

# Atomic masses and air as the carbon balance of ISO 8178 / NOx Technical Code uses them [kg/mol, fractions].
_C, _H2, _S = 0.012011, 0.002016, 0.03206
_X_CO2_AIR, _X_O2_AIR, _M_AIR, _M_H2O = 0.0004, 0.2095, 0.028965, 0.018015


@dataclass(frozen=True, slots=True)
class CarbonBalance:
    """Per kilogram of fuel; fractions 0..1. The lambda is the overall one (a two-stroke's scavenge air included)."""

    air_kg_kg: Any
    """dry air"""
    lambda_: Any
    o2_dry: Any
    co2_dry: Any
    wet_factor: Any
    """k_w: wet fraction = dry fraction x k_w"""
    exhaust_kg_kg: Any
    """wet exhaust, humidity of the air included"""


def carbon_balance(
    carbon: ArrayLike,
    hydrogen: ArrayLike,
    sulphur: ArrayLike = 0.0,
    *,
    co2_dry: ArrayLike | None = None,
    o2_dry: ArrayLike | None = None,
    humidity_ratio: ArrayLike = 0.0,
) -> CarbonBalance:
    """Air and exhaust from the dry CO2 or O2 fraction of the exhaust: one of the two.

    Mass fractions of the fuel (no O, no N); humidity ratio of the air [kg/kg dry]. Own form after ISO 8178 / NOx
    Technical Code appendix 6, method 1. Scalars that cannot be (CO2 above the highest this fuel can give, O2 of 20.95 %
    or more) raise ValueError.
    """
    if co2_dry is not None and o2_dry is None:
        measured = co2_dry
    elif o2_dry is not None and co2_dry is None:
        measured = o2_dry
    else:
        raise ValueError("Enter the dry CO2 or the dry O2 of the exhaust, one of the two.")
    c, h, s, w, x = inputs = floats(carbon, hydrogen, sulphur, humidity_ratio, measured)
    fuel = good(
        (c > 0) & (h >= 0) & (s >= 0) & (c + h + s <= 1 + 1e-9),
        "Enter carbon, hydrogen and sulphur of the fuel as mass fractions that add up to 1 at most.",
        *inputs,
    ) & good(w >= 0, "Enter the humidity ratio of the air, 0 or more.", *inputs)
    c, h, s, w = (np.where(fuel, value, np.nan) for value in (c, h, s, w))
    n_c, n_h2, n_s = c / _C, h / _H2, s / _S
    need = n_c + n_h2 / 2 + n_s
    burnt = n_c + n_s - need
    if co2_dry is not None:
        least = need / _X_O2_AIR
        highest = (n_c + _X_CO2_AIR * least) / (burnt + least)
        holds = good(
            (x > _X_CO2_AIR) & (x <= highest * (1 + 1e-9)),
            "Enter dry CO2 as a fraction above 0.0004 (4 % is 0.04) and not above the highest this fuel can give.",
            *inputs,
        )
        x = np.where(holds, x, np.nan)
        moles = (n_c - x * burnt) / (x - _X_CO2_AIR)
    else:
        holds = good((x >= 0) & (x < _X_O2_AIR), "Enter dry O2 as a fraction from 0 to below 0.2095.", *inputs)
        x = np.where(holds, x, np.nan)
        moles = (need + x * burnt) / (_X_O2_AIR - x)
    dry = burnt + moles
    air = _M_AIR * moles
    return CarbonBalance(
        air_kg_kg=shaped(air),
        lambda_=shaped(_X_O2_AIR * moles / need),
        o2_dry=shaped((_X_O2_AIR * moles - need) / dry),
        co2_dry=shaped((n_c + _X_CO2_AIR * moles) / dry),
        wet_factor=shaped(dry / (dry + n_h2 + air * w / _M_H2O)),
        exhaust_kg_kg=shaped(air * (1 + w) + 1),
    )


def exhaust_heat(
    flow_kg_s: ArrayLike,
    temperature_k: ArrayLike,
    reference_k: ArrayLike,
    lambda_: ArrayLike,
    hc_ratio: ArrayLike,
    oc_ratio: ArrayLike = 0.0,
) -> Any:
    """Heat of the exhaust above a reference temperature, that of the suction air [W].

    Flow of exhaust [kg/s], temperatures [K], overall lambda, fuel CHyOz. Errors as for the gas properties.
    """
    m, t, ref, lam, y, z = inputs = floats(flow_kg_s, temperature_k, reference_k, lambda_, hc_ratio, oc_ratio)
    t, ref = gas.known_temperature(t, *inputs), gas.known_temperature(ref, *inputs)
    mix = gas.products(gas.enough_air(lam, *inputs), y, z)
    return shaped(m * (gas.enthalpy(mix, t) - gas.enthalpy(mix, ref)) / mix.mass)
