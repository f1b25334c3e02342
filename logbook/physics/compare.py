"""Before and after: Welch's interval, and how many readings a change of a given size needs."""

from __future__ import annotations

from dataclasses import dataclass
from math import ceil, sqrt

from numpy.typing import ArrayLike

from logbook.physics.series import series

LEAST_A_SIDE = 3


@dataclass(frozen=True, slots=True)
class Difference:
    """after - before, with its interval."""

    difference: float
    standard_error: float
    degrees: float
    low: float
    high: float
    p: float

    @property
    def changed(self) -> bool:
        """The interval excludes zero."""
        return self.low > 0 or self.high < 0


def welch(before: ArrayLike, after: ArrayLike, *, u_lot: float = 0.0, confidence: float = 0.95) -> Difference:
    """Difference of two means with unequal scatter (Welch).

    before (n,), after (m,), 3 finite readings a side or more, else ValueError. `u_lot`, of the difference, enters the
    standard error where lots differ (`uncertainty.window_difference` without repeatability).
    """
    from scipy.stats import t as student

    (b,), (a,) = (series("A comparison", side, least=0) for side in (before, after))
    if min(b.size, a.size) < LEAST_A_SIDE:
        raise ValueError(
            f"A comparison needs at least {LEAST_A_SIDE} readings a side; {b.size} and {a.size} were given."
        )
    vb, va = float(b.var(ddof=1)) / b.size, float(a.var(ddof=1)) / a.size
    if vb + va == 0:
        raise ValueError("The readings of both sides do not scatter at all: that is no measurement.")
    degrees = (vb + va) ** 2 / (vb**2 / (b.size - 1) + va**2 / (a.size - 1))
    error = sqrt(vb + va + u_lot**2)
    d = float(a.mean() - b.mean())
    half = float(student.ppf(0.5 + confidence / 2, degrees)) * error
    return Difference(d, error, degrees, d - half, d + half, float(2 * student.sf(abs(d) / error, degrees)))


def readings_needed(scatter: float, change: float, confidence: float = 0.95, power: float = 0.80) -> int:
    """Readings a side to see a true change; scatter of one reading and change in one unit.

    The normal formula is one too few, two below six. ValueError: scatter not above zero, change zero, or confidence
    and power not between 0 and 1.
    """
    from scipy.stats import norm

    if not scatter > 0 or not abs(change) > 0:
        raise ValueError("Scatter must be above zero and the change not zero.")
    if not (0 < confidence < 1 and 0 < power < 1):
        raise ValueError("Confidence and power lie between 0 and 1.")
    quantiles = float(norm.ppf(0.5 + confidence / 2) + norm.ppf(power))
    return ceil(2 * (quantiles * scatter / abs(change)) ** 2)


def still_needed(scatter: float, change: float, present: int) -> int:
    """How many more readings a side, with the allowance for the normal formula; at least 1."""
    n = readings_needed(scatter, change)
    return max(1, n + (2 if n < 6 else 1) - present)
