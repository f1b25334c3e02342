"""Robust trend of a series: Theil-Sen with Sen's interval, Mann-Kendall, EWMA, and the test of a curve's shape."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats
from logbook.physics.series import series
from logbook.physics.uncertainty import autocorrelation, effective_number

LEAST_POINTS = 8
"""Fewer points make no trend (`too_few`)."""
SHAPE_LEAST_POINTS = 12


@dataclass(frozen=True, slots=True)
class MannKendall:
    """S, its variance, Z and the two-sided p of no trend."""

    s: int
    variance: float
    z: float
    p: float


def _kendall_sum(y: Floats) -> int:
    return int(sum(np.sign(y[i + 1 :] - y[i]).sum() for i in range(y.size - 1)))


def mann_kendall(values: ArrayLike, n_effective: float | None = None) -> MannKendall:
    """Mann-Kendall test, ties allowed. `n_effective`: variance times n/n_eff for autocorrelated points.

    Needs 3 points and n_eff above 0, at most n, else ValueError.
    """
    from scipy.stats import norm

    (y,) = series("A Mann-Kendall test", values, least=3)
    n = y.size
    if n_effective is not None and not 0 < n_effective <= n:
        raise ValueError("The effective number of points is above 0 and not above their number.")
    s = _kendall_sum(y)
    _, ties = np.unique(y, return_counts=True)
    variance = (n * (n - 1) * (2 * n + 5) - float((ties * (ties - 1) * (2 * ties + 5)).sum())) / 18
    if n_effective is not None:
        variance *= n / n_effective
    z = 0.0 if variance == 0 else (s - np.sign(s)) / np.sqrt(variance)
    return MannKendall(s, variance, float(z), float(2 * norm.sf(abs(z))))


@dataclass(frozen=True, slots=True)
class TheilSen:
    """Slope [unit/time] with its interval, and the intercept by medians."""

    slope: float
    low: float
    high: float
    intercept: float
    n: int


def theil_sen(
    values: ArrayLike, times: ArrayLike | None = None, *, n_effective: float | None = None, confidence: float = 0.95
) -> TheilSen:
    """Median of all pair slopes with Sen's interval.

    values (n,), times (n,) or 0, 1, 2 ...; pairs at the same time are left out. Needs 8 points, else ValueError.
    `n_effective` widens the interval as in `mann_kendall`; an end beyond the steepest pair is infinite.
    """
    from scipy.stats import norm

    y, x = series("A trend", values, np.arange(np.size(values)) if times is None else times, least=LEAST_POINTS)
    i, j = np.triu_indices(y.size, 1)
    dx = x[j] - x[i]
    slopes = np.sort(((y[j] - y[i])[dx != 0]) / dx[dx != 0])
    if not slopes.size:
        raise ValueError("A trend needs points at different times.")
    slope = float(np.median(slopes))
    variance = mann_kendall(y, n_effective).variance
    c = float(norm.ppf(0.5 + confidence / 2)) * np.sqrt(variance)
    count = slopes.size
    # Ranks (N - C)/2 and (N + C)/2 + 1, counted from 1, to the nearest as scipy does; beyond the ends nothing is known.
    lower, upper = round((count - c) / 2), round((count + c) / 2 + 1)
    low = float(slopes[lower - 1]) if lower >= 1 else -np.inf
    high = float(slopes[upper - 1]) if upper <= count else np.inf
    return TheilSen(slope, low, high, float(np.median(y) - slope * np.median(x)), y.size)


@dataclass(frozen=True, slots=True)
class Ewma:
    """The average after each point (n,), the half width of its limits there (n,) [both in the unit of the values]."""

    values: Floats
    half_width: Floats
    low: float
    """limits at the last point"""
    high: float
    first_signal: int | None
    """index of the first value beyond the limits"""


def ewma_weight(spacing: ArrayLike, time_constant: float) -> Floats:
    """Weight of points so far apart: 1 - exp(-dt/tau), both in one unit. ValueError unless above zero."""
    apart = np.asarray(spacing, float)
    if not np.all(apart > 0) or not time_constant > 0:
        raise ValueError("Spacing and time constant of a moving average are above zero.")
    weight: Floats = -np.expm1(-apart / time_constant)
    return weight


def ewma(values: ArrayLike, target: float, scatter: float, weight: ArrayLike = 0.3, k: float = 3.0) -> Ewma:
    """Exponentially weighted moving average with limits target +- k times its own scatter.

    `weight` one number, or one a point (n,) for uneven spacing. The limits begin at k s weight and, with one weight,
    settle at k s sqrt[weight/(2 - weight)]. ValueError: scatter or k not above zero, weight not above 0 up to 1.
    """
    (y,) = series("A moving average", values)
    if np.ndim(weight) and np.shape(weight) != y.shape:
        raise ValueError("A moving average needs one weight, or one for every point.")
    weights = np.broadcast_to(np.asarray(weight, float), y.shape)
    if not np.all((weights > 0) & (weights <= 1)) or not (scatter > 0 and k > 0):
        raise ValueError("A moving average needs a weight above 0 and up to 1, and a scatter above zero.")
    found, half = np.empty_like(y), np.empty_like(y)
    average, variance = target, 0.0
    for index, (value, lam) in enumerate(zip(y, weights, strict=True)):
        average = lam * value + (1 - lam) * average
        variance = (lam * scatter) ** 2 + (1 - lam) ** 2 * variance
        found[index], half[index] = average, k * np.sqrt(variance)
    beyond = np.flatnonzero(np.abs(found - target) > half)
    last = float(half[-1])
    return Ewma(found, half, target - last, target + last, int(beyond[0]) if beyond.size else None)


@dataclass(frozen=True, slots=True)
class ShapeTest:
    """Whether the excess depends on load within a segment: then the curve's shape does not fit the engine."""

    per_load: float
    u_per_load: float
    across: float
    """effect between the 10th and 90th percentile of load [unit of the excess]"""
    differs: bool


def shape_test(times: ArrayLike, loads: ArrayLike, excess: ArrayLike, least_effect: float = 0.2) -> ShapeTest:
    """Least squares excess = c0 + c1 x + c2 (load - mean load); differs when |c2|/u >= 3 and its effect >= 0.2 points.

    Needs 12 points at different loads, else ValueError.
    """
    x, load, y = series("The test of the curve's shape", times, loads, excess, least=SHAPE_LEAST_POINTS)
    if np.ptp(load) == 0:
        raise ValueError("The test of the curve's shape needs points at different loads.")
    design = np.column_stack([np.ones_like(x), x - x.mean(), load - load.mean()])
    c, *_ = np.linalg.lstsq(design, y, rcond=None)
    residual = y - design @ c
    s2 = float(residual @ residual) / (y.size - 3)
    n_eff = effective_number(y.size, autocorrelation(residual))
    u = float(np.sqrt(s2 * np.linalg.pinv(design.T @ design)[2, 2] * y.size / n_eff))
    across = float(c[2]) * float(np.subtract(*np.percentile(load, [90, 10])))
    differs = u > 0 and abs(c[2]) / u >= 3 and abs(across) >= least_effect
    return ShapeTest(float(c[2]), u, across, bool(differs))
