"""Account of a change of specific consumption: exact, no remainder (split by logarithmic means).

b = B0 x F_fuel x F_ambient x F_load x F_instrument x F_engine. Log-mean Divisia split; exactness is algebra.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats, floats

TERMS = ("fuel", "ambient", "load", "instrument", "engine")


def log_mean(x: ArrayLike, y: ArrayLike) -> Floats:
    """(x - y)/ln(x/y), and x where they are equal; both above zero."""
    a, b = (np.asarray(value, float) for value in (x, y))
    ratio = np.log(a / b)
    close = np.abs(ratio) < 1e-9
    result: Floats = np.where(close, (a + b) / 2, (a - b) / np.where(close, 1.0, ratio))
    return result


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
    `instrument` 1 + error."""
    b, b0, fuel, a, share, meter = floats(consumption, reference, lcv_ratio, ambient, load, instrument)
    engine = b / (b0 * fuel * a * share * meter)
    return np.stack(np.broadcast_arrays(fuel, a, share, meter, engine))


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
    """Account of a period from those of its readings: weights energy (consumption) and fuel energy (efficiency)."""
    e_kwh, q = floats(energy, fuel_energy)
    c = (accounts.consumption * e_kwh).sum(axis=1) / e_kwh.sum()
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
