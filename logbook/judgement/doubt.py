"""A slip of the finger stands alone: it disagrees with the readings before it and is not borne out by its neighbour.

Rules about one reading (ceiling, plausible efficiency, speed against revolutions) do not see a digit that was
swapped in a low place. What a reading says is therefore held against what this engine said before, within the
scatter of this engine; a step that the next reading repeats is a fact and is left alone.
"""

from __future__ import annotations

import numpy as np
import pandas as pd

from logbook.judgement.table import Bools, Floats

WINDOW = 25
"""Readings looked back upon."""
LEAST = 5
"""So many are needed before this engine's own scatter is known."""
SCATTERS = 5.0
"""Further out than so many scatters; steady readings get there once in thousands."""


def stands_alone(values: Floats, *, floor: float, unproved: float | None = None) -> Bools:
    """Readings that neither those before nor a neighbour bear out.

    `values`: one series in order of time (NaN: nothing to say), shape (n,). `floor`: never closer than this
    [unit of values]. `unproved`: while fewer than `LEAST` readings came before, further than this from zero is
    out, for values that are zero by definition when all is as the reference; None: nothing is said so early.

    Row i depends on the readings before it and on reading i + 1 only.
    """
    alone = np.zeros(len(values), bool)
    at = np.flatnonzero(np.isfinite(values))
    if not at.size:
        return alone
    series = pd.Series(values[at])
    usual = series.rolling(WINDOW, min_periods=LEAST).median().shift(1)
    off = series - usual
    scatter = 1.4826 * off.abs().rolling(WINDOW, min_periods=LEAST).median().shift(1)
    middle = usual.to_numpy(copy=True)
    limit = np.fmax(SCATTERS * scatter.to_numpy(), floor)
    early = ~np.isfinite(middle)
    middle[early] = 0.0
    # Until this engine's scatter is known, only what no engine does can be doubted.
    limit[~np.isfinite(scatter.to_numpy())] = np.inf if unproved is None else max(unproved, floor)
    x = values[at]
    far = np.abs(x - middle) > limit
    alone[at] = far & ~_borne_out(x, middle, limit, far)
    return alone


def _borne_out(x: Floats, middle: Floats, limit: Floats, far: Bools) -> Bools:
    """The reading before or after lies as far out on the same side."""
    result = np.zeros(len(x), bool)
    side = np.sign(x - middle)
    before = far[:-1] & far[1:] & (side[:-1] == side[1:]) & (np.abs(np.diff(x)) <= limit[1:])
    result[1:] |= before
    after = (side[:-1] * (x[1:] - middle[:-1]) > limit[:-1] / 2) & (np.abs(np.diff(x)) <= limit[:-1])
    result[:-1] |= after
    return result
