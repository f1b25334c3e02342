"""Condition figures of the turbocharger's compressor and of the charge air cooler."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics import gas
from logbook.physics.checks import Floats, floats, good, shaped
from logbook.physics.cycle import isentropic_temperature

_COLD_AIR_K = 1.4


def _compression(*values: ArrayLike) -> tuple[Floats, ...]:
    p1, p2, t1, t2 = inputs = floats(*values)
    holds = good(
        (p1 > 0) & (p2 > p1) & (t1 > 200) & (t2 > t1) & (t2 < 1500),
        "Enter an outlet of the compressor above its inlet, pressures absolute and temperatures in kelvin.",
        *inputs,
    )
    return tuple(np.where(holds, value, np.nan) for value in inputs)


def compressor_efficiency(
    inlet_pressure_pa: ArrayLike, outlet_pressure_pa: ArrayLike, inlet_k: ArrayLike, outlet_k: ArrayLike
) -> Any:
    """Isentropic efficiency of the compressor with real air: [h(T2s) - h(T1)]/[h(T2) - h(T1)].

    Pressures absolute [Pa] (inlet = barometer less filter drop), temperatures [K].
    """
    p1, p2, t1, t2 = _compression(inlet_pressure_pa, outlet_pressure_pa, inlet_k, outlet_k)
    h1 = gas.enthalpy(gas.AIR, t1)
    ideal = gas.enthalpy(gas.AIR, isentropic_temperature(t1, p2 / p1))
    return shaped((ideal - h1) / (gas.enthalpy(gas.AIR, t2) - h1))


def cold_air_compressor_efficiency(
    inlet_pressure_pa: ArrayLike, outlet_pressure_pa: ArrayLike, inlet_k: ArrayLike, outlet_k: ArrayLike
) -> Any:
    """The same with constant k = 1.4, as many forms have it: T1 [(p2/p1)^(0.4/1.4) - 1]/(T2 - T1); somewhat higher."""
    p1, p2, t1, t2 = _compression(inlet_pressure_pa, outlet_pressure_pa, inlet_k, outlet_k)
    return shaped(t1 * ((p2 / p1) ** ((_COLD_AIR_K - 1) / _COLD_AIR_K) - 1) / (t2 - t1))


def cooler_effectiveness(air_in_c: ArrayLike, air_out_c: ArrayLike, water_in_c: ArrayLike) -> tuple[Any, Any]:
    """(approach [K], effectiveness) of a charge air cooler; temperatures in one scale, degC or K.

    Air out - water in; (air in - air out)/(air in - water in). Air in must be above water in.
    """
    hot, out, water = inputs = floats(air_in_c, air_out_c, water_in_c)
    holds = good(hot > water, "Enter air into the cooler warmer than the water into it.", *inputs)
    hot, out, water = (np.where(holds, value, np.nan) for value in inputs)
    return shaped(out - water), shaped((hot - out) / (hot - water))


def cooler_heat(air_kg_s: ArrayLike, air_in_k: ArrayLike, air_out_k: ArrayLike) -> Any:
    """Heat taken from the charge air [W]: flow [kg/s] times the fall of enthalpy; temperatures [K].

    Must agree with the heat into the water: that checks the air flow.
    """
    m, hot, out = inputs = floats(air_kg_s, air_in_k, air_out_k)
    hot, out = gas.known_temperature(hot, *inputs), gas.known_temperature(out, *inputs)
    return shaped(m * (gas.enthalpy(gas.AIR, hot) - gas.enthalpy(gas.AIR, out)))
