"""Detection of a change in a series: cumulative sums, and one change point with Pettitt's test."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats
from logbook.physics.series import series


@dataclass(frozen=True, slots=True)
class Cusum:
    """Sums above and below, the first point beyond the limit, and where the sum that signalled began."""

    high: Floats
    low: Floats
    first_signal: int | None
    """index from 0"""
    since: int | None
    """index of the first point after the last zero of the sum that signalled"""


def cusum(values: ArrayLike, target: float, allowance: float, limit: float) -> Cusum:
    """Hi = max(0, Hi + x - mu0 - K), Lo = max(0, Lo + mu0 - K - x); signal above H.

    `target` mu0, `allowance` K and `limit` H in the unit of the values; K not below zero, H above it, else ValueError.
    """
    (x,) = series("A CUSUM", values)
    if not np.isfinite(target) or not allowance >= 0 or not limit > 0:
        raise ValueError("A CUSUM needs a target, an allowance not below zero and a limit above zero.")
    high, low = np.zeros_like(x), np.zeros_like(x)
    up = down = 0.0
    for index, value in enumerate(x):
        up = max(0.0, up + value - target - allowance)
        down = max(0.0, down + target - allowance - value)
        high[index], low[index] = up, down
    beyond = np.flatnonzero((high > limit) | (low > limit))
    if not beyond.size:
        return Cusum(high, low, None, None)
    first = int(beyond[0])
    which = high if high[first] > limit else low
    zeros = np.flatnonzero(which[:first] == 0)
    return Cusum(high, low, first, int(zeros[-1]) + 1 if zeros.size else 0)


@dataclass(frozen=True, slots=True)
class ChangePoint:
    """The best split of a series in two."""

    after: int
    """number of points before the change (the change is after the so-manieth point, counted from 1)"""
    before_mean: float
    after_mean: float
    sum_of_squares: float
    total_sum_of_squares: float
    k: float
    """Pettitt's K"""
    p: float
    """its approximate probability without any change; below 0.05 the change is accepted"""
    costs: Floats
    """two-segment sum of squares for a change after the 1st, 2nd ... last but one point"""

    def since(self, scatter: float, n_effective_ratio: float = 1.0) -> tuple[int, int]:
        """First and last `after` whose sum of squares is within 3.84 s^2 n/n_eff of the least.

        `scatter` of one point, not below zero; `n_effective_ratio` n/n_eff, 1 or more; else ValueError.
        """
        if not scatter >= 0 or not n_effective_ratio >= 1:
            raise ValueError("The interval of a change needs a scatter not below zero, and n/n_eff of 1 or more.")
        near = np.flatnonzero(self.costs <= self.costs.min() + 3.84 * scatter**2 * n_effective_ratio) + 1
        return int(near[0]), int(near[-1])


def change_point(values: ArrayLike) -> ChangePoint:
    """One change of the mean by least squares, with Pettitt's test. Needs 4 points, else ValueError."""
    from scipy.stats import rankdata

    (y,) = series("A change point", values, least=4)
    n = y.size
    # Centred first, so that the sums of squares do not lose their digits.
    d = y - y.mean()
    sums = np.cumsum(d)[:-1]
    k = np.arange(1, n)
    total = float(d @ d)
    costs: Floats = total - sums**2 / k - sums**2 / (n - k)
    after = int(np.argmin(costs)) + 1
    u = 2 * np.cumsum(rankdata(y))[:-1] - k * (n + 1)
    pettitt = float(np.abs(u).max())
    p = min(1.0, 2 * float(np.exp(-6 * pettitt**2 / (n**3 + n**2))))
    return ChangePoint(
        after, float(y[:after].mean()), float(y[after:].mean()), float(costs[after - 1]), total, pettitt, p, costs
    )
