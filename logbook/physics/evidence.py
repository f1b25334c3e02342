"""Evidence of observed deviations against fault signatures."""

from __future__ import annotations

from math import sqrt

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats, floats

CLIP = 4.0


def standardised(
    now: float, clean: float, scatter: float, n_effective: float, scatter_clean: float, n_clean_effective: float,
    *, u_shape: float = 0.0, u_lots: float = 0.0,
) -> float:  # fmt: skip
    """z of a mean deviation against that of the clean span, clipped to +-4. All in the unit of the symptom.

    `u_shape` of the curve between the two loads, `u_lots` of both spans' lots. ValueError: no points, or no scatter.
    """
    if not (n_effective > 0 and n_clean_effective > 0):
        raise ValueError("A symptom needs points now and in the clean span.")
    spread = sqrt(scatter**2 / n_effective + scatter_clean**2 / n_clean_effective + u_shape**2 + u_lots**2)
    if not spread > 0:
        raise ValueError("A symptom needs a scatter above zero to be weighed by.")
    return float(np.clip((now - clean) / spread, -CLIP, CLIP))


def evidence(z: ArrayLike, signature: ArrayLike) -> float:
    """sum(s z)/sqrt(sum s^2): about N(0,1) when nothing is wrong.

    z (m,), signature (m,) of codes -2..2; NaN in either is a blank and left out. ValueError: nothing left, or only 0.
    """
    s, observed = _present(z, signature)
    return float(s @ observed / np.sqrt(s @ s))


def likeness(z: ArrayLike, signature: ArrayLike) -> float:
    """Cosine: penalises movers that should stay (0 counts) and stayers that should move; blanks are left out.

    As `evidence`; 0 where no symptom moved at all.
    """
    s, observed = _present(z, signature)
    length = float(observed @ observed)
    return float(s @ observed / np.sqrt((s @ s) * length)) if length else 0.0


def cosine(first: ArrayLike, second: ArrayLike) -> float:
    """How alike two signatures are on the symptoms that both state; as `likeness`."""
    return likeness(first, second)


def _present(z: ArrayLike, signature: ArrayLike) -> tuple[Floats, Floats]:
    observed, s = floats(z, signature)
    if observed.ndim != 1 or observed.shape != s.shape:
        raise ValueError("A signature needs a code or a blank for every symptom.")
    both = np.isfinite(observed) & np.isfinite(s)
    if not np.any(s[both]):
        raise ValueError("No symptom that this signature moves was read.")
    return s[both], observed[both]
