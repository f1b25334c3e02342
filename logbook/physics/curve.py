"""The reference curve over load: monotone piecewise cubic, no overshoot, no value outside its range."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats, floats, shaped

SINGLE_POINT_WITHIN = 0.02
"""One point holds within +-2 % of rated power of it."""


@dataclass(frozen=True)
class Curve:
    """Points of a trial over load (fraction of rated power, rising)."""

    load: Floats
    value: Floats

    def __post_init__(self) -> None:
        if self.load.ndim != 1 or self.load.shape != self.value.shape or self.load.size == 0:
            raise ValueError("A curve needs as many values as loads, and at least one.")
        if not (np.isfinite(self.load).all() and np.isfinite(self.value).all()):
            raise ValueError("A curve needs finite numbers: leave out the points that were not read.")
        if np.any(np.diff(self.load) <= 0):
            raise ValueError("The loads of a curve must rise from point to point.")

    def __call__(self, load: ArrayLike) -> Any:
        """The value at a load (fractions of rated power); NaN outside the range: never a guess.

        Monotone piecewise cubic after Fritsch and Carlson (scipy's PCHIP has their end rule); two points: a straight
        line; one point: within 2 % of rated power of it.
        """
        (x,) = floats(load)
        if self.load.size == 1:
            near = np.abs(x - self.load[0]) <= SINGLE_POINT_WITHIN + 1e-12
            return shaped(np.where(near, self.value[0], np.nan))
        if self.load.size == 2:
            inside = (x >= self.load[0]) & (x <= self.load[1])
            return shaped(np.where(inside, np.interp(x, self.load, self.value), np.nan))
        from scipy.interpolate import PchipInterpolator

        return shaped(PchipInterpolator(self.load, self.value, extrapolate=False)(x))


def curve(load: ArrayLike, value: ArrayLike) -> Curve:
    """A curve from loads (fractions of rated power) and values.

    ValueError: lists unequal or empty, a number not finite, loads not rising.
    """
    x, y = floats(load, value)
    return Curve(x, y)
