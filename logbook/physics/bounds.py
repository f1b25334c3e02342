"""The reversible bound, the ladder from fuel energy to the shaft, gap and excess.

B = 1 - T_L/T_H is a yardstick: the bound for a heat engine working between these two temperatures. A fuel engine is
not one, and the combustion temperature is set or computed, never logged: each B carries the name of its method.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import floats, good, shaped

FROM_CURVE, SET, CYCLE, FLAME = "cycle, pressure from curve", "set", "cycle", "flame"
"""The four ways to a combustion temperature; lines of bound and gap never mix them."""

SET_COMBUSTION_TEMPERATURE_K = 1850.0
"""Taken where none is set [K]; from memory."""


def reversible_bound(hot_k: ArrayLike, cold_k: ArrayLike) -> Any:
    """1 - T_L/T_H (Carnot). Temperatures [K], hot above cold above zero; else ValueError, or NaN in arrays."""
    hot, cold = floats(hot_k, cold_k)
    holds = good(
        (cold > 0) & (hot > cold), "The hot temperature must be above the cold one, both in kelvin.", hot, cold
    )
    return shaped(1 - np.where(holds, cold, np.nan) / np.where(holds, hot, np.nan))


def maximum_pressure_from_curve(
    curve_maximum_pressure_pa: ArrayLike, curve_charge_pressure_pa: ArrayLike, charge_pressure_pa: ArrayLike
) -> Any:
    """Pmax of the trial curve at this power, in proportion to the charge pressure read [Pa, all absolute]."""
    pmax, p1c, p1 = floats(curve_maximum_pressure_pa, curve_charge_pressure_pa, charge_pressure_pa)
    return shaped(pmax * p1 / p1c)


@dataclass(frozen=True, slots=True)
class Ladder:
    """Where the fuel's energy goes; the widths and the brake efficiency add up to 1 exactly.

    A width may be negative: it is then shown and flagged, never clipped.
    """

    second_law: Any
    """1 - B: unavoidable between these two temperatures"""
    cycle: Any
    """B - eta_cyc: heat taken in below T_H and rejected above T_L"""
    cylinder: Any
    """eta_cyc - eta_i: heat loss, timing, leakage, gas exchange; None where the indicated rung is not good enough"""
    mechanical: Any
    """eta_i - eta_b; without eta_i, `cylinder and mechanical together`"""
    brake: Any


def ladder(bound: ArrayLike, cycle: ArrayLike, brake: ArrayLike, indicated: ArrayLike | None = None) -> Ladder:
    """Widths of the ladder from the efficiencies of its rungs (0..1)."""
    b, cyc, brk = floats(bound, cycle, brake)
    if indicated is None:
        return Ladder(shaped(1 - b), shaped(b - cyc), None, shaped(cyc - brk), shaped(brk))
    (ind,) = floats(indicated)
    return Ladder(shaped(1 - b), shaped(b - cyc), shaped(cyc - ind), shaped(ind - brk), shaped(brk))


def gap(bound: ArrayLike, brake: ArrayLike) -> Any:
    """B - eta_b. Not a recoverable loss and no promise of saving."""
    b, brk = floats(bound, brake)
    return shaped(b - brk)


def second_law_ratio(bound: ArrayLike, brake: ArrayLike) -> Any:
    """eta_b / B."""
    b, brk = floats(bound, brake)
    return shaped(brk / b)


def reference_efficiency(
    reference_sfoc_kg_j: ArrayLike, ambient_factor: ArrayLike, reference_lcv_j_kg: ArrayLike
) -> Any:
    """What the engine would give at this load and ambient if it were as its reference: 1/(b_ref a LCV_ref).

    Consumption [kg/J], ambient factor a (1 at reference conditions), calorific value of the reference [J/kg].
    """
    b, a, lcv = floats(reference_sfoc_kg_j, ambient_factor, reference_lcv_j_kg)
    return shaped(1 / (b * a * lcv))


def excess_gap(reference_efficiency_: ArrayLike, brake: ArrayLike) -> Any:
    """gap - gap of the reference = eta_ref - eta_b: the combustion temperature cancels. Positive = worse."""
    ref, brk = floats(reference_efficiency_, brake)
    return shaped(ref - brk)


def excess_from_deviation(reference_efficiency_: ArrayLike, deviation: ArrayLike) -> Any:
    """The same excess from the deviation D of corrected consumption: eta_ref D/(1 + D)."""
    ref, d = floats(reference_efficiency_, deviation)
    return shaped(ref * d / (1 + d))
