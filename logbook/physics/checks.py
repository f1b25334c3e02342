"""How every formula of this room meets a state that cannot be.

A scalar that cannot be raises ValueError with a sentence; in an array that element becomes NaN and the rest is worked
out. One way, here, for the whole room.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

Floats = NDArray[np.float64]


def good(condition: ArrayLike, sentence: str, *values: ArrayLike) -> NDArray[np.bool_]:
    """The elements for which `condition` holds; for scalars alone a false condition raises ValueError(sentence).

    `values` are all the inputs of the formula: where any of them is an array, the state is an array.
    """
    holds = np.asarray(condition, bool)
    if not holds.all() and all(np.ndim(value) == 0 for value in (condition, *values)):
        if any(np.isnan(float(np.asarray(value, float))) for value in values):
            # A figure that could not be had stays one.
            return holds
        raise ValueError(sentence)
    return holds


def shaped(result: ArrayLike, *inputs: ArrayLike) -> Any:
    """A float when every input was a scalar, an array otherwise."""
    array = np.asarray(result, float)
    return float(array) if array.ndim == 0 else array


def floats(*values: ArrayLike) -> tuple[Floats, ...]:
    """The inputs as arrays of floats, not yet broadcast."""
    return tuple(np.asarray(value, float) for value in values)
