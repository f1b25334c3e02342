"""Heat balance of an engine on the lower calorific value, reference temperature that of the suction air."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import floats, good, shaped

WATER_HEAT_CAPACITY = 4190.0
"""[J/(kg K)]"""


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
    """Shares of m_f LCV; all [W]. A rest that is negative or above 8 % means that a flow or temperature is wrong (1 to
    4 % is usual; from memory). A fuel heat of zero or less raises ValueError, or is NaN in arrays."""
    q, *parts = inputs = floats(fuel_heat_w, brake_w, jacket_w, oil_w, cooler_w, exhaust_w)
    q = np.where(good(q > 0, "Enter a fuel heat above zero.", *inputs), q, np.nan)
    shares = [part / q for part in parts]
    return HeatBalance(*(shaped(share) for share in (*shares, 1 - sum(shares))))


def water_heat(flow_kg_s: ArrayLike, inlet_c: ArrayLike, outlet_c: ArrayLike) -> Any:
    """Heat into a stream of water [W]; flow [kg/s], temperatures in one scale, degC or K."""
    m, cold, hot = floats(flow_kg_s, inlet_c, outlet_c)
    return shaped(m * WATER_HEAT_CAPACITY * (hot - cold))
