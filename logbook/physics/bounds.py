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
    """B = 1 - T_L/T_H (Carnot), T_L the air at suction. Temperatures [K], hot above cold above zero.

    Else ValueError, or NaN in arrays.
    """
    hot, cold = inputs = floats(hot_k, cold_k)
    holds = good((cold > 0) & (hot > cold), "Enter a hot temperature above the cold one, both in kelvin.", *inputs)
    hot, cold = (np.where(holds, value, np.nan) for value in inputs)
    return shaped(1 - cold / hot)


def exhaust_bound(hot_k: ArrayLike, exhaust_k: ArrayLike) -> Any:
    """B_x = 1 - T_x/T_H, T_x the exhaust after the turbine [K]: what would be left if all heat left with the exhaust.

    No strict bound, for heat also leaves through coolers at lower temperatures; it may lie below the ideal cycle at
    low load and stays outside the sum of widths. Exhaust points are never mixed. Errors as for `reversible_bound`.
    """
    return reversible_bound(hot_k, exhaust_k)


def maximum_pressure_from_curve(
    curve_maximum_pressure_pa: ArrayLike, curve_charge_pressure_pa: ArrayLike, charge_pressure_pa: ArrayLike
) -> Any:
    """Pmax of the trial curve at this power, in proportion to the charge pressure read [Pa, all absolute]."""
    pmax, p1c, p1 = inputs = floats(curve_maximum_pressure_pa, curve_charge_pressure_pa, charge_pressure_pa)
    holds = good(
        (pmax > 0) & (p1c > 0) & (p1 > 0),
        "Enter Pmax and charge pressure of the curve and the charge pressure read as absolute pressures.",
        *inputs,
    )
    pmax, p1c, p1 = (np.where(holds, value, np.nan) for value in inputs)
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
    """B - eta_b; with eta_ref for eta_b the gap of the reference. Not a recoverable loss, no promise of saving."""
    b, brk = floats(bound, brake)
    return shaped(b - brk)


def second_law_ratio(bound: ArrayLike, brake: ArrayLike) -> Any:
    """eta_b / B; a bound above zero, else ValueError, or NaN in arrays."""
    b, brk = inputs = floats(bound, brake)
    holds = good(b > 0, "Enter a bound above zero.", *inputs)
    return shaped(brk / np.where(holds, b, np.nan))


def reference_efficiency(
    reference_sfoc_kg_j: ArrayLike, ambient_factor: ArrayLike, reference_lcv_j_kg: ArrayLike
) -> Any:
    """What the engine would give at this load and ambient if it were as its reference: 1/(b_ref a LCV_ref).

    Consumption [kg/J], ambient factor a (1 at reference conditions), calorific value of the reference [J/kg]; all above
    zero, else ValueError, or NaN in arrays.
    """
    b, a, lcv = inputs = floats(reference_sfoc_kg_j, ambient_factor, reference_lcv_j_kg)
    holds = good(
        (b > 0) & (a > 0) & (lcv > 0),
        "Enter reference consumption, ambient factor and calorific value above zero.",
        *inputs,
    )
    return shaped(1 / np.where(holds, b * a * lcv, np.nan))


def consumption_deviation(
    sfoc_kg_j: ArrayLike,
    lcv_j_kg: ArrayLike,
    ambient_factor: ArrayLike,
    reference_sfoc_kg_j: ArrayLike,
    reference_lcv_j_kg: ArrayLike,
) -> Any:
    """D = b (LCV/LCV_ref)/(a b_ref) - 1: corrected consumption over that of the reference at equal load, less 1.

    Consumptions in one unit, calorific values in one unit; ambient factor a. What it divides by is above zero, else
    ValueError, or NaN in arrays.
    """
    b, lcv, a, b_ref, lcv_ref = inputs = floats(
        sfoc_kg_j, lcv_j_kg, ambient_factor, reference_sfoc_kg_j, reference_lcv_j_kg
    )
    holds = good(
        (a > 0) & (b_ref > 0) & (lcv_ref > 0),
        "Enter reference consumption, ambient factor and calorific value above zero.",
        *inputs,
    )
    return shaped(b * lcv / np.where(holds, a * b_ref * lcv_ref, np.nan) - 1)


def excess_gap(reference_efficiency_: ArrayLike, brake: ArrayLike) -> Any:
    """gap - gap of the reference = eta_ref - eta_b: the combustion temperature cancels. Positive = worse."""
    ref, brk = floats(reference_efficiency_, brake)
    return shaped(ref - brk)


def excess_from_deviation(reference_efficiency_: ArrayLike, deviation: ArrayLike) -> Any:
    """The same excess from the deviation D of corrected consumption, above -1: eta_ref D/(1 + D)."""
    ref, d = inputs = floats(reference_efficiency_, deviation)
    holds = good(d > -1, "Enter a deviation above -1, as a fraction (2 % is 0.02).", *inputs)
    d = np.where(holds, d, np.nan)
    return shaped(ref * d / (1 + d))
