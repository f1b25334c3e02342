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
    """z of a mean deviation against that of the clean span, clipped to +-4. All in the unit of the symptom."""
    spread = sqrt(scatter**2 / n_effective + scatter_clean**2 / n_clean_effective + u_shape**2 + u_lots**2)
    return float(np.clip((now - clean) / spread, -CLIP, CLIP))


def evidence(z: ArrayLike, signature: ArrayLike) -> float:
    """sum(s z)/sqrt(sum s^2): about N(0,1) when nothing is wrong; NaN in the signature = blank, left out."""
    s, observed = _present(z, signature)
    return float(s @ observed / np.sqrt(s @ s))


def likeness(z: ArrayLike, signature: ArrayLike) -> float:
    """Cosine: penalises movers that should stay (0 counts) and stayers that should move; blanks are left out."""
    s, observed = _present(z, signature)
    return float(s @ observed / np.sqrt((s @ s) * (observed @ observed)))


def cosine(first: ArrayLike, second: ArrayLike) -> float:
    """How alike two signatures are on the symptoms that both state."""
    a, b = _present(first, second)
    return float(a @ b / np.sqrt((a @ a) * (b @ b)))


def _present(z: ArrayLike, signature: ArrayLike) -> tuple[Floats, Floats]:
    observed, s = floats(z, signature)
    both = np.isfinite(observed) & np.isfinite(s)
    return s[both], observed[both]
