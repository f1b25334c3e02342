"""How the statistics of this room meet a series that will not do.

A series counts as a whole: one reading that is not a number would spoil a sum or, worse, reset it without a word.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats


def series(what: str, *values: ArrayLike, least: int = 1) -> tuple[Floats, ...]:
    """The series as arrays (n,) of floats, all of one length.

    `what` begins the sentence of the ValueError: fewer than `least` points, unequal lengths, or a value that is not
    finite.
    """
    arrays = tuple(np.asarray(one, float) for one in values)
    if any(one.ndim != 1 for one in arrays):
        raise ValueError(f"{what} needs lists of numbers.")
    sizes = [one.size for one in arrays]
    if len(set(sizes)) > 1:
        raise ValueError(f"{what} needs its lists to be of one length; {' and '.join(map(str, sizes))} were given.")
    if sizes[0] < least:
        noun = "point" if least == 1 else "points"
        verb = "was" if sizes[0] == 1 else "were"
        raise ValueError(f"{what} needs at least {least} {noun}; {sizes[0]} {verb} given.")
    if not all(np.isfinite(one).all() for one in arrays):
        raise ValueError(f"{what} needs finite numbers: leave out what was not read.")
    return arrays
