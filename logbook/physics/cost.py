"""Forecast of a level, the cleaning interval that costs least, excess fuel and money."""

from __future__ import annotations

from dataclasses import dataclass
from math import inf, sqrt
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import floats
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
    y, x = floats(values, times)
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
    days: float
    cost_per_day: float


def cleaning_interval(cost: float, growth_per_day2: float) -> CleaningInterval:
    """Interval of least cost [days] and its cost rate: T* = sqrt(2C/(a p)), sqrt(2 C a p).

    `cost` of one cleaning with off-hire; `growth_per_day2`: by how much the daily penalty grows each day, same
    currency. Full restoration; with a floor T* stays. Never beyond the maker's interval. ValueError unless above zero.
    """
    if cost <= 0 or growth_per_day2 <= 0:
        raise ValueError("Cost and growth must be above zero: without growth no cleaning pays.")
    return CleaningInterval(sqrt(2 * cost / growth_per_day2), sqrt(2 * cost * growth_per_day2))


def excess_fuel(consumption_kg_j: ArrayLike, expected_kg_j: ArrayLike, energy_j: ArrayLike) -> Any:
    """sum (b - b_expected) E over compared readings [kg]; negative parts stay. Expected: b_ref a LCV_ref/LCV."""
    b, expected, e = floats(consumption_kg_j, expected_kg_j, energy_j)
    return float(np.sum((b - expected) * e))
