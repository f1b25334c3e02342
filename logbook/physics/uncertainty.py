"""Uncertainty after the GUM (JCGM 100): combination, resolution, autocorrelation, lots, agreement of witnesses."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats, floats, good, shaped
from logbook.physics.series import series

SQRT3 = float(np.sqrt(3))


def combined(*components: ArrayLike) -> Any:
    """Root sum of squares of independent components (all absolute, or all relative for a product)."""
    return shaped(np.sqrt(sum(np.asarray(u, float) ** 2 for u in components)))


def from_limit(limit: ArrayLike) -> Any:
    """Standard uncertainty of a stated limit +-a (rectangular): a/sqrt(3)."""
    (a,) = floats(limit)
    return shaped(a / SQRT3)


def of_digits(number: float, digits: int) -> float:
    """Relative standard uncertainty of a number typed with so many significant digits: half a digit, rectangular.

    9.6 has 0.05/sqrt(3) on 9.6: 0.30 %. Zero and unknown digits give 0. ValueError unless finite.
    """
    if not np.isfinite(number):
        raise ValueError("Digits were typed for a finite number only.")
    if digits <= 0 or number == 0:
        return 0.0
    last_digit = 10.0 ** (int(np.floor(np.log10(abs(number)))) - digits + 1)
    return float(last_digit / 2 / SQRT3 / abs(number))


def of_full_scale(percent_of_full_scale: ArrayLike, full_scale: ArrayLike, reading: ArrayLike) -> Any:
    """Percent of full scale as percent of the reading, which is not zero, else ValueError (NaN in an array)."""
    p, fs, x = floats(percent_of_full_scale, full_scale, reading)
    holds = good(x != 0, "A reading of zero has no percentage.", percent_of_full_scale, full_scale, reading)
    return shaped(p * fs / np.where(holds, np.abs(x), np.nan))


def supply_less_return(accuracy: ArrayLike, supply_to_consumption: ArrayLike) -> Any:
    """Relative uncertainty of supply less return: a sqrt(r^2 + (r - 1)^2) for two independent meters of accuracy a.

    `supply_to_consumption` r is 1 or more, else ValueError (NaN in an array).
    """
    a, r = floats(accuracy, _supply_ratio(accuracy, supply_to_consumption))
    return shaped(a * np.sqrt(r**2 + (r - 1) ** 2))


def supply_less_return_worst(accuracy: ArrayLike, supply_to_consumption: ArrayLike) -> Any:
    """Largest relative error of supply less return, the meters wrong by +a and -a: a (2r - 1); r as above."""
    a, r = floats(accuracy, _supply_ratio(accuracy, supply_to_consumption))
    return shaped(a * (2 * r - 1))


def _supply_ratio(accuracy: ArrayLike, ratio: ArrayLike) -> Floats:
    (r,) = floats(ratio)
    holds = good(r >= 1, "Supply is never less than consumption: the ratio is 1 or more.", accuracy, ratio)
    return np.where(holds, r, np.nan)


def effective_degrees(components: ArrayLike, degrees: ArrayLike) -> float:
    """Welch-Satterthwaite: u_c^4 / sum(u_i^4/nu_i); `degrees` may be infinite.

    Components not below zero nor all zero, degrees above zero, else ValueError.
    """
    u, nu = floats(components, degrees)
    if u.ndim != 1 or u.shape != nu.shape or not (np.all(u >= 0) and np.any(u > 0) and np.all(nu > 0)):
        raise ValueError(
            "Effective degrees need uncertainties, not all of them zero, and for each its degrees above zero."
        )
    spread = float((u**4 / nu).sum())
    return float((u**2).sum() ** 2 / spread) if spread else np.inf


def autocorrelation(values: ArrayLike) -> float:
    """Lag-one autocorrelation of a series, never below 0; 0 for fewer than 3 points or a constant."""
    (y,) = series("An autocorrelation", values, least=0)
    d = y - y.mean() if y.size else y
    power = float(d @ d)
    if y.size < 3 or power == 0:
        return 0.0
    return max(float(d[1:] @ d[:-1]) / power, 0.0)


def effective_number(n: float, rho: float) -> float:
    """Number of independent points that n autocorrelated ones are worth: n (1 - rho)/(1 + rho), never above n.

    `rho` from -1 to under 1, `n` above zero, else ValueError.
    """
    if not (n > 0 and -1 <= rho < 1):
        raise ValueError("An effective number needs points, and an autocorrelation from -1 to under 1.")
    rho = max(rho, 0.0)
    return float(n * (1 - rho) / (1 + rho))


def repeatability(values: ArrayLike, times: ArrayLike | None = None) -> float:
    """Scatter of one point [unit of the values]: the larger of two robust estimates.

    From first differences, and from the residuals about the Theil-Sen trend: the first alone misses a day cycle or a
    reader's habit. Needs 3 points, else ValueError.
    """
    times = np.arange(np.size(values)) if times is None else times
    y, x = series("A scatter", values, times, least=3)
    if np.ptp(x) == 0:
        raise ValueError("A scatter needs points at different times.")
    from scipy.stats import theilslopes

    d = np.diff(y)
    from_differences = 1.4826 * float(np.median(np.abs(d - np.median(d)))) / np.sqrt(2)
    fit = theilslopes(y, x)
    residual = y - fit.slope * x
    from_trend = 1.4826 * float(np.median(np.abs(residual - np.median(residual))))
    return float(max(from_differences, from_trend))


def slope(times: ArrayLike, lots: ArrayLike, u_point: float, u_lot: float, n_effective: float | None = None) -> float:
    """Standard uncertainty of a slope whose points share an error inside each lot [unit/time].

    `times` (n,), `lots` (n,) names or numbers; repeatability of one point and uncertainty of one lot, same unit.
    ValueError: a lot missing, or all points at one time.
    """
    (x,) = series("The uncertainty of a slope", times, least=2)
    names = np.asarray(lots)
    if names.shape != x.shape:
        raise ValueError("The uncertainty of a slope needs the lot of every point.")
    d = x - x.mean()
    spread = float(d @ d)
    if spread == 0:
        raise ValueError("A slope needs points at different times.")
    factor = 1.0 if n_effective is None else x.size / n_effective
    by_lot = sum(float(d[names == name].sum()) ** 2 for name in np.unique(names))
    return float(np.sqrt(u_point**2 / spread * factor + u_lot**2 * by_lot / spread**2))


def window_difference(u_repeatability: float, lots_before: ArrayLike, lots_after: ArrayLike, u_lot: float) -> float:
    """Standard uncertainty of the difference of two windows' means whose points share an error inside each lot.

    `lots_before` (n,), `lots_after` (m,): the lot of every point; `u_repeatability` of the difference itself. A lot
    counts with its share after less its share before: lots of equal size on separate sides give u_lot^2 (1/L_before +
    1/L_after), one lot on both sides cancels. ValueError: a window without points.
    """
    before, after = np.asarray(lots_before), np.asarray(lots_after)
    if before.size == 0 or after.size == 0:
        raise ValueError("The difference of two windows needs the lot of at least one point in each.")
    names = np.union1d(before, after)
    moved = np.array([np.mean(after == name) - np.mean(before == name) for name in names])
    return float(np.sqrt(u_repeatability**2 + u_lot**2 * (moved @ moved)))


@dataclass(frozen=True, slots=True)
class Agreement:
    """Several estimates of one quantity against each other."""

    combined: float
    z: Floats
    """studentised residuals"""
    chi2: float
    p: float
    suspect: int | None
    """index of the estimate that stands out (from 0), None while chi2 is in order or only two disagree"""
    suspect_error: float | None
    """its value less the weighted mean of the others"""


def agreement(values: ArrayLike, uncertainties: ArrayLike) -> Agreement:
    """Weighted mean of m independent estimates, studentised residuals, chi2 with m - 1 degrees.

    A candidate is the largest |z|: named as suspect even while chi2 is in order would be an accusation, so only below
    p = 0.05 and with three estimates or more. Raises ValueError for fewer than two, or uncertainties not above zero.
    """
    from scipy.stats import chi2 as chi2_distribution

    y, u = floats(values, uncertainties)
    if y.size < 2 or y.shape != u.shape:
        raise ValueError("An agreement needs at least two values, and an uncertainty for each.")
    if not (np.isfinite(y).all() and np.isfinite(u).all()):
        raise ValueError("An agreement needs finite numbers: leave out the witness that was not read.")
    if np.any(u <= 0):
        raise ValueError("Uncertainties must be above zero.")
    w = 1 / u**2
    mean = float((w * y).sum() / w.sum())
    r = y - mean
    # 1 - h as the share of the others: the difference would lose its digits beside one very sure witness.
    rest = np.array([np.delete(w, index).sum() for index in range(w.size)]) / w.sum()
    z = r / (u * np.sqrt(rest))
    chi2 = float((w * r**2).sum())
    p = float(chi2_distribution.sf(chi2, y.size - 1))
    candidate = int(np.argmax(np.abs(z)))
    others = np.delete(np.arange(y.size), candidate)
    error = float(y[candidate] - (w[others] * y[others]).sum() / w[others].sum())
    named = p < 0.05 and y.size > 2
    return Agreement(mean, z, chi2, p, candidate if named else None, error if named else None)


def of_excess(
    reference_efficiency: ArrayLike,
    brake_efficiency: ArrayLike,
    *,
    u_reference: ArrayLike,
    u_ambient: ArrayLike,
    u_fuel: ArrayLike,
    u_energy: ArrayLike,
    u_calorific_value: ArrayLike,
) -> Any:
    """Standard uncertainty of the excess gap (fraction) from relative ones of what it is made of."""
    ref, brake = floats(reference_efficiency, brake_efficiency)
    return shaped(
        np.sqrt(
            (ref * np.asarray(combined(u_reference, u_ambient))) ** 2
            + (brake * np.asarray(combined(u_fuel, u_energy, u_calorific_value))) ** 2
        )
    )
