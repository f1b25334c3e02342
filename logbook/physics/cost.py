"""Forecast of a level, the cleaning interval that costs least, excess fuel and money."""

from __future__ import annotations

from dataclasses import dataclass
from math import inf, sqrt
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import floats
from logbook.physics.series import series
from logbook.physics.trend import TheilSen


@dataclass(frozen=True, slots=True)
class Forecast:
    """When a trend reaches a level [time of the series]. `latest` infinite: not foreseeable."""

    at: float
    earliest: float
    latest: float
    beyond_data: bool
    """later than once the span already observed: then it is not stated"""


def forecast(values: ArrayLike, times: ArrayLike, trend: TheilSen, level: float) -> Forecast | None:
    """Crossing of the user's own economy level from the pivot of medians; None where the trend does not go there."""
    y, x = series("A forecast", values, times)
    x0, y0 = float(np.median(x)), float(np.median(y))
    rise = level - y0
    if rise * trend.slope <= 0:
        return None
    steep, flat = (trend.high, trend.low) if trend.slope > 0 else (trend.low, trend.high)
    at = x0 + rise / trend.slope
    earliest = x0 + rise / steep
    latest = x0 + rise / flat if flat * trend.slope > 0 else inf
    return Forecast(at, earliest, latest, at > float(x.max()) + float(np.ptp(x)))


@dataclass(frozen=True, slots=True)
class CleaningInterval:
    """The interval of least cost [days] and what it costs [currency/day]."""

    days: float
    cost_per_day: float


def cleaning_interval(cost: float, growth_per_day2: float) -> CleaningInterval:
    """Interval of least cost [days] and its cost rate: T* = sqrt(2C/(a p)), sqrt(2 C a p).

    `cost` of one cleaning with off-hire; `growth_per_day2`: by how much the daily penalty grows each day, same
    currency. Full restoration; with a floor T* stays. Never beyond the maker's interval. ValueError unless above zero.
    """
    if not cost > 0 or not growth_per_day2 > 0:
        raise ValueError("Cost and growth must be above zero: without growth no cleaning pays.")
    return CleaningInterval(sqrt(2 * cost / growth_per_day2), sqrt(2 * cost * growth_per_day2))


def excess_fuel(consumption_kg_j: ArrayLike, expected_kg_j: ArrayLike, energy_j: ArrayLike) -> Any:
    """sum (b - b_expected) E over compared readings [kg]; negative parts stay. Expected: b_ref a LCV_ref/LCV."""
    b, expected, e = floats(consumption_kg_j, expected_kg_j, energy_j)
    return float(np.sum((b - expected) * e))


@dataclass(frozen=True, slots=True)
class ExcessCost:
    """Excess fuel and its standard uncertainty [kg], CO2 [kg] and money [currency]; below zero: less than expected."""

    fuel_kg: float
    u_fuel_kg: float
    co2_kg: float
    money: float

    @property
    def differs_from_zero(self) -> bool:
        """The excess is larger than its expanded uncertainty (twice the standard one)."""
        return abs(self.fuel_kg) > 2 * self.u_fuel_kg


def excess_cost(fuel_kg: float, u_fuel_kg: float, carbon_factor: float, price_per_kg: float) -> ExcessCost:
    """What excess fuel means in CO2 (`carbon_factor` kg/kg of fuel) and money (`price_per_kg` currency/kg).

    `u_fuel_kg` of all three kinds and the reference's. ValueError: an uncertainty, factor or price below zero.
    """
    if not (u_fuel_kg >= 0 and carbon_factor >= 0 and price_per_kg >= 0):
        raise ValueError("Uncertainty, carbon factor and price of excess fuel are not below zero.")
    return ExcessCost(fuel_kg, u_fuel_kg, fuel_kg * carbon_factor, fuel_kg * price_per_kg)
