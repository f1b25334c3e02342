"""Account of a change of specific consumption: exact, no remainder (split by logarithmic means).

b = B0 x F_fuel x F_ambient x F_load x F_instrument x F_engine. Log-mean Divisia split; exactness is algebra.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats, floats, good, shaped
from logbook.physics.series import series

TERMS = ("fuel", "ambient", "load", "instrument", "engine")


def log_mean(x: ArrayLike, y: ArrayLike) -> Any:
    """(x - y)/ln(x/y), and x where they are equal; both above zero, else ValueError (NaN in an array)."""
    a, b = floats(x, y)
    holds = good((a > 0) & (b > 0), "A logarithmic mean needs values above zero.", x, y)
    low, high = np.where(holds, np.minimum(a, b), np.nan), np.where(holds, np.maximum(a, b), np.nan)
    rise = high - low
    # log1p keeps its digits where the two nearly agree.
    return shaped(np.where(rise == 0, low, rise / np.where(rise == 0, 1.0, np.log1p(rise / low))))


@dataclass(frozen=True)
class Account:
    """Terms in the order of TERMS, axis 0: consumption [unit of b] and efficiency (fraction). Sums are exact."""

    consumption: Floats
    efficiency: Floats
    factors: Floats


def factors(
    consumption: ArrayLike,
    reference: ArrayLike,
    lcv_ratio: ArrayLike,
    ambient: ArrayLike,
    load: ArrayLike,
    instrument: ArrayLike = 1.0,
) -> Floats:
    """The five factors (5, ...): `lcv_ratio` LCV_ref/LCV, `ambient` a, `load` b_ref(load)/B0,
    `instrument` 1 + error. All above zero, else ValueError (NaN for that element of an array)."""
    given = (consumption, reference, lcv_ratio, ambient, load, instrument)
    arrays = np.broadcast_arrays(*floats(*given))
    holds = good(
        np.all([one > 0 for one in arrays], axis=0), "An account needs consumption and factors above zero.", *given
    )
    b, b0, fuel, a, share, meter = (np.where(holds, one, np.nan) for one in arrays)
    engine = b / (b0 * fuel * a * share * meter)
    return np.stack([fuel, a, share, meter, engine])


def against_reference(
    consumption: ArrayLike, reference: ArrayLike, five: Floats, efficiency: ArrayLike, reference_efficiency: ArrayLike
) -> Account:
    """Account of readings against the reference: the terms add up to b - B0 and to eta - eta_0."""
    b, b0, eta, eta0 = floats(consumption, reference, efficiency, reference_efficiency)
    logs = np.log(five)
    c = log_mean(b, b0) * logs
    e = -log_mean(eta, eta0) * logs
    e[0] = 0.0
    return Account(c, e, five)


def of_period(accounts: Account, energy: ArrayLike, fuel_energy: ArrayLike, reference: float) -> Account:
    """Account of a period from those of its readings (5, n): weights energy (consumption), fuel energy (efficiency).

    `energy`, `fuel_energy` (n,), any unit, not below zero and not all zero; compared readings only, else ValueError.
    """
    weight, q = series("The account of a period", energy, fuel_energy)
    if accounts.consumption.shape != (len(TERMS), weight.size) or not np.isfinite(accounts.consumption).all():
        raise ValueError("The account of a period needs an account of every reading: leave out what is not compared.")
    if weight.min() < 0 or q.min() < 0 or weight.sum() == 0 or q.sum() == 0:
        raise ValueError("The account of a period needs energy and fuel energy above zero.")
    c = (accounts.consumption * weight).sum(axis=1) / weight.sum()
    e = (accounts.efficiency * q).sum(axis=1) / q.sum()
    pooled = reference + float(c.sum())
    return Account(c, e, np.exp(c / log_mean(pooled, reference)))


def between(
    consumption_a: float,
    factors_a: Floats,
    efficiency_a: float,
    consumption_b: float,
    factors_b: Floats,
    efficiency_b: float,
) -> Account:
    """Account of the change from A to B."""
    logs = np.log(factors_b / factors_a)
    e = -log_mean(efficiency_b, efficiency_a) * logs
    e[0] = 0.0
    return Account(log_mean(consumption_b, consumption_a) * logs, e, factors_b / factors_a)
