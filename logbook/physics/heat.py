"""Heat balance, exhaust by carbon balance, exergy, and the condition figures of turbocharger and cooler."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics import gas
from logbook.physics.checks import floats, good, shaped
from logbook.physics.cycle import isentropic_temperature

# Atomic masses and air as the carbon balance of ISO 8178 / NOx Technical Code uses them [kg/mol, fractions].
_C, _H2, _S = 0.012011, 0.002016, 0.03206
_X_CO2_AIR, _X_O2_AIR, _M_AIR, _M_H2O = 0.0004, 0.2095, 0.028965, 0.018015
WATER_HEAT_CAPACITY = 4190.0
"""[J/(kg K)]"""


@dataclass(frozen=True, slots=True)
class CarbonBalance:
    """Per kilogram of fuel; fractions 0..1. The lambda is the overall one (a two-stroke's scavenge air included)."""

    air_kg_kg: Any
    lambda_: Any
    o2_dry: Any
    co2_dry: Any
    wet_factor: Any
    exhaust_kg_kg: Any


def carbon_balance(
    carbon: ArrayLike,
    hydrogen: ArrayLike,
    sulphur: ArrayLike,
    *,
    co2_dry: ArrayLike | None = None,
    o2_dry: ArrayLike | None = None,
    humidity_ratio: ArrayLike = 0.0,
) -> CarbonBalance:
    """Air and exhaust from the dry CO2 or O2 fraction of the exhaust (own form after ISO 8178 / NOx Technical Code
    appendix 6, method 1). Mass fractions of the fuel (no O, no N); humidity ratio of the air [kg/kg].

    Raises ValueError for a scalar that cannot be (CO2 above the highest possible of this fuel, O2 of 20.95 % or more).
    """
    c, h, s, w = floats(carbon, hydrogen, sulphur, humidity_ratio)
    n_c, n_h2, n_s = c / _C, h / _H2, s / _S
    need = n_c + n_h2 / 2 + n_s
    if co2_dry is not None:
        (x,) = floats(co2_dry)
        holds = good((x > _X_CO2_AIR) & (x < 1), "Dry CO2 is a fraction above 0.0004 (4 % is 0.04).", x, c)
        moles = (n_c - x * (n_c + n_s - need)) / np.where(holds, x - _X_CO2_AIR, np.nan)
    elif o2_dry is not None:
        (x,) = floats(o2_dry)
        holds = good((x >= 0) & (x < _X_O2_AIR), "Dry O2 is a fraction from 0 to below 0.2095 (14 % is 0.14).", x, c)
        moles = (need + x * (n_c + n_s - need)) / np.where(holds, _X_O2_AIR - x, np.nan)
    else:
        raise ValueError("The carbon balance needs co2_dry or o2_dry.")
    lambda_ = _X_O2_AIR * moles / need
    possible = good(
        np.isnan(lambda_) | (lambda_ >= 1 - 1e-9),
        "That is above the highest dry CO2 this fuel can give: the reading is wrong.",
        x, c, h, s,
    )  # fmt: skip
    moles = np.where(possible, moles, np.nan)
    dry = n_c + n_s + moles - need
    air = _M_AIR * moles
    return CarbonBalance(
        air_kg_kg=shaped(air),
        lambda_=shaped(np.where(possible, lambda_, np.nan)),
        o2_dry=shaped((_X_O2_AIR * moles - need) / dry),
        co2_dry=shaped((n_c + _X_CO2_AIR * moles) / dry),
        wet_factor=shaped(dry / (dry + n_h2 + air * w / _M_H2O)),
        exhaust_kg_kg=shaped(air * (1 + w) + 1),
    )


@dataclass(frozen=True, slots=True)
class HeatBalance:
    """Shares of the fuel's heat (0..1). `rest` = radiation, incomplete combustion and all measuring errors together."""

    brake: Any
    jacket: Any
    oil: Any
    cooler: Any
    exhaust: Any
    rest: Any


def heat_balance(
    fuel_heat_w: ArrayLike,
    brake_w: ArrayLike,
    jacket_w: ArrayLike,
    oil_w: ArrayLike,
    cooler_w: ArrayLike,
    exhaust_w: ArrayLike,
) -> HeatBalance:
    """Shares on lower calorific value, reference suction temperature. All [W]. A rest that is negative or above 8 %
    means that a flow or temperature is wrong (1 to 4 % is usual; from memory)."""
    q, *parts = floats(fuel_heat_w, brake_w, jacket_w, oil_w, cooler_w, exhaust_w)
    good(q > 0, "The fuel's heat must be above zero.", q)
    shares = [part / q for part in parts]
    return HeatBalance(*(shaped(share) for share in (*shares, 1 - sum(shares))))


def water_heat(flow_kg_s: ArrayLike, inlet_c: ArrayLike, outlet_c: ArrayLike) -> Any:
    """Heat into a water stream [W]."""
    m, cold, hot = floats(flow_kg_s, inlet_c, outlet_c)
    return shaped(m * WATER_HEAT_CAPACITY * (hot - cold))


def exhaust_heat(flow_kg_s: ArrayLike, temperature_k: ArrayLike, reference_k: ArrayLike, lambda_: ArrayLike,
                 hc_ratio: ArrayLike) -> Any:  # fmt: skip
    """Heat of the exhaust above a reference temperature [W]; flow [kg/s], overall lambda."""
    m, t, ref, lam, y = floats(flow_kg_s, temperature_k, reference_k, lambda_, hc_ratio)
    mix = gas.products(lam, y)
    return shaped(m * (gas.enthalpy(mix, t) - gas.enthalpy(mix, ref)) / mix.mass)


def exhaust_exergy(
    temperature_k: ArrayLike,
    lambda_: ArrayLike,
    hc_ratio: ArrayLike,
    ambient_k: ArrayLike,
    pressure_ratio: ArrayLike = 1.0,
) -> tuple[Any, Any]:
    """(enthalpy above ambient, exergy) of exhaust gas [J/kg of gas]; temperatures [K], p/p_ambient.

    e = (h - h0) - T0 (s0 - s0_0) + R_g T0 ln(p/p0): what a bottoming cycle could at best turn into power.
    """
    t, lam, y, t0, ratio = floats(temperature_k, lambda_, hc_ratio, ambient_k, pressure_ratio)
    good((t0 > 200) & (t > 200), "Temperatures must be in kelvin.", t, lam, y, t0)
    mix = gas.products(lam, y)
    h = (gas.enthalpy(mix, t) - gas.enthalpy(mix, t0)) / mix.mass
    s = (gas.entropy(mix, t) - gas.entropy(mix, t0)) / mix.mass
    return shaped(h), shaped(h - t0 * s + mix.gas_constant / mix.mass * t0 * np.log(ratio))


def constant_cp_exergy(cp_j_kg_k: ArrayLike, temperature_k: ArrayLike, ambient_k: ArrayLike) -> Any:
    """Exergy with a constant heat capacity [J/kg]: cp [(T - T0) - T0 ln(T/T0)]."""
    cp, t, t0 = floats(cp_j_kg_k, temperature_k, ambient_k)
    return shaped(cp * ((t - t0) - t0 * np.log(t / t0)))


def fuel_exergy_ratio(carbon: ArrayLike, hydrogen: ArrayLike, oxygen: ArrayLike = 0.0, sulphur: ArrayLike = 0.0) -> Any:
    """Exergy of a liquid fuel over its lower calorific value, from mass fractions (from memory, after Kotas; +-1 %)."""
    c, h, o, s = floats(carbon, hydrogen, oxygen, sulphur)
    return shaped(1.0401 + 0.1728 * h / c + 0.0432 * o / c + 0.2169 * (s / c) * (1 - 2.0628 * h / c))


def compressor_efficiency(
    inlet_pressure_pa: ArrayLike, outlet_pressure_pa: ArrayLike, inlet_k: ArrayLike, outlet_k: ArrayLike
) -> Any:
    """Isentropic efficiency of the compressor with real air; pressures absolute [Pa], temperatures [K]."""
    p1, p2, t1, t2 = floats(inlet_pressure_pa, outlet_pressure_pa, inlet_k, outlet_k)
    holds = good(
        (p2 > p1) & (t2 > t1), "The compressor's outlet must be above its inlet, pressures absolute.", p1, p2, t1
    )
    ideal = np.asarray(isentropic_temperature(t1, np.where(holds, p2 / p1, np.nan)))
    h1 = gas.enthalpy(gas.AIR, t1)
    return shaped((gas.enthalpy(gas.AIR, ideal) - h1) / (gas.enthalpy(gas.AIR, t2) - h1))


def cooler_effectiveness(air_in_c: ArrayLike, air_out_c: ArrayLike, water_in_c: ArrayLike) -> tuple[Any, Any]:
    """(approach [K], effectiveness 0..1) of a charge air cooler.

    Air out - water in; (air in - air out)/(air in - water in).
    """
    hot, out, water = floats(air_in_c, air_out_c, water_in_c)
    return shaped(out - water), shaped((hot - out) / (hot - water))
