"""Bound, ladder, excess and the four combustion temperatures against independent calculations."""

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.physics import bounds, combustion_temperature, cycle
from logbook.physics.curve import curve

HOT_AND_COLD = st.tuples(st.floats(900, 3000), st.floats(240, 400))
FRACTION = st.floats(0.05, 0.95)


def per_joule(g_kwh: float) -> float:
    return g_kwh * 1e-3 / 3.6e6


def test_carnot() -> None:
    """565/25 degC: calculated independently by arithmetic. 550/27: Khandare, text on thermodynamics, ch. 5, who takes
    273 for the zero."""
    assert bounds.reversible_bound(565 + 273.15, 25 + 273.15) == pytest.approx(0.644276, abs=1e-6)
    assert bounds.reversible_bound(550 + 273, 27 + 273) == pytest.approx(0.6355, abs=5e-5)


def test_ladder_of_case_b() -> None:
    """Case B of the cycle, T_L 303.15 K, exhaust after turbine 245 degC, eta_i 0.515, 178.0 g/kWh at 40.3 MJ/kg.

    Calculated independently with numpy.
    """
    found = cycle.limited_pressure_cycle(3.6e5, 350, 13.5, 180e5, 2.2, 40.3e6)
    bound = bounds.reversible_bound(found.t3_k, 303.15)
    brake = 1 / (per_joule(178.0) * 40.3e6)
    steps = bounds.ladder(bound, found.efficiency, brake, 0.515)
    assert bound == pytest.approx(0.843939, abs=2e-6)
    assert bounds.exhaust_bound(found.t3_k, 245 + 273.15) == pytest.approx(0.733257, abs=2e-6)
    assert brake == pytest.approx(0.501854, abs=1e-6)
    widths = [steps.second_law, steps.cycle, steps.cylinder, steps.mechanical]
    assert widths == pytest.approx([0.156061, 0.304803, 0.024136, 0.013146], abs=2e-6)
    assert sum(widths) + steps.brake == pytest.approx(1, abs=1e-15)
    assert bounds.gap(bound, brake) * 100 == pytest.approx(34.208, abs=1e-3)
    assert bounds.second_law_ratio(bound, brake) == pytest.approx(0.594657, abs=2e-6)


def test_change_between_two_moments_has_no_remainder() -> None:
    """Case B, then T_H 60 K lower, T_L 298.15 K, 180.0 g/kWh; calculated independently with numpy."""
    hot = cycle.limited_pressure_cycle(3.6e5, 350, 13.5, 180e5, 2.2, 40.3e6).t3_k
    bound = bounds.reversible_bound(np.array([hot, hot - 60]), np.array([303.15, 298.15]))
    brake = 1 / (np.array([per_joule(178.0), per_joule(180.0)]) * 40.3e6)
    gap = bounds.gap(bound, brake)
    assert bound[1] == pytest.approx(0.841621, abs=2e-6)
    assert brake[1] == pytest.approx(0.496278, abs=1e-6)
    changes = [100 * float(np.diff(value)[0]) for value in (brake, bound, gap)]
    assert changes == pytest.approx([-0.5576, -0.2318, 0.3258], abs=1e-4)
    assert changes[0] == pytest.approx(changes[1] - changes[2], abs=1e-12)


@given(HOT_AND_COLD, FRACTION, FRACTION, FRACTION)
def test_widths_and_brake_add_up_to_one(
    temperatures: tuple[float, float], ideal: float, indicated: float, brake: float
) -> None:
    """With and without an indicated rung, and with rungs in any order: a width may be negative."""
    bound = bounds.reversible_bound(*temperatures)
    four = bounds.ladder(bound, ideal, brake, indicated)
    assert four.second_law + four.cycle + four.cylinder + four.mechanical + four.brake == pytest.approx(1, abs=1e-12)
    three = bounds.ladder(bound, ideal, brake)
    assert three.cylinder is None
    assert three.second_law + three.cycle + three.mechanical + three.brake == pytest.approx(1, abs=1e-12)
    assert three.mechanical == pytest.approx(four.cylinder + four.mechanical, abs=1e-12)


@given(HOT_AND_COLD, st.floats(1, 200))
def test_bound_lies_between_zero_and_one_and_rises_with_the_hot_temperature(
    temperatures: tuple[float, float], hotter: float
) -> None:
    hot, cold = temperatures
    assert 0 < bounds.reversible_bound(hot, cold) < bounds.reversible_bound(hot + hotter, cold) < 1


# The trial points of the reference curve; load, g/kWh.
REFERENCE = curve([0.25, 0.50, 0.75, 0.90, 1.00], [182.0, 173.5, 169.0, 170.2, 172.1])
# load, g/kWh, LCV MJ/kg, a, T_L K -> eta_ref, eta_b, D %, excess, then gap and gap of the reference at T_H 1850 and
# 1950 K, all in points.
EXCESS = [
    (0.68, 182.0, 40.9, 1.00896, 311.15, 0.492899, 0.483624, 1.91773, 0.92746, (34.8187, 35.6812), (33.8912, 34.7537)),
    (0.60, 186.4, 40.6, 1.0075, 303.15, 0.489169, 0.475697, 2.83209, 1.34722, (36.0438, 36.8841), (34.6966, 35.5369)),
    (0.82, 175.2, 40.9, 0.99404, 285.15, 0.500859, 0.502395, -0.30575, -0.15361, (34.3470, 35.1374),
     (34.5006, 35.2911)),
]  # fmt: skip


@pytest.mark.parametrize(
    ("load", "sfoc", "lcv", "a", "cold", "eta_ref", "eta_b", "deviation", "excess", "gaps", "reference_gaps"), EXCESS
)
def test_excess_gap(
    load: float, sfoc: float, lcv: float, a: float, cold: float, eta_ref: float, eta_b: float, deviation: float,
    excess: float, gaps: tuple[float, float], reference_gaps: tuple[float, float],
) -> None:  # fmt: skip
    """Calculated independently with scipy."""
    b_ref = per_joule(REFERENCE(load))
    reference = bounds.reference_efficiency(b_ref, a, 42.7e6)
    brake = 1 / (per_joule(sfoc) * lcv * 1e6)
    d = bounds.consumption_deviation(per_joule(sfoc), lcv * 1e6, a, b_ref, 42.7e6)
    assert reference == pytest.approx(eta_ref, abs=1e-6)
    assert brake == pytest.approx(eta_b, abs=1e-6)
    assert 100 * d == pytest.approx(deviation, abs=1e-5)
    assert 100 * bounds.excess_gap(reference, brake) == pytest.approx(excess, abs=1e-5)
    # The two ways to it are one.
    assert bounds.excess_from_deviation(reference, d) == pytest.approx(bounds.excess_gap(reference, brake), abs=1e-12)
    bound = bounds.reversible_bound(np.array([1850.0, 1950.0]), cold)
    gap, gap_reference = bounds.gap(bound, brake), bounds.gap(bound, reference)
    assert 100 * gap == pytest.approx(gaps, abs=1e-4)
    assert 100 * gap_reference == pytest.approx(reference_gaps, abs=1e-4)
    # T_H cancels.
    assert gap - gap_reference == pytest.approx([bounds.excess_gap(reference, brake)] * 2, abs=1e-12)


# p1 bar, T1 K, r, lambda, LCV J/kg and the trial curve's Pmax and p1, all absolute, of the three checks below.
STATE = (345, 13.5, 2.30, 40.9e6)


def test_cycle_with_pressure_from_curve() -> None:
    """Curve 160 bar at 3.40 bar, read 3.25; calculated independently with numpy and cantera."""
    assert bounds.maximum_pressure_from_curve(160e5, 3.40e5, 3.25e5) / 1e5 == pytest.approx(152.941, abs=1e-3)
    hot = combustion_temperature.by_cycle_with_curve(160e5, 3.40e5, 3.25e5, *STATE)
    bound = bounds.reversible_bound(hot, 300.15)
    assert (hot, bound) == (pytest.approx(1893.413, abs=0.01), pytest.approx(0.841477, abs=2e-6))
    t1, r, lam, lcv = STATE
    with_more_fuel = combustion_temperature.by_cycle_with_curve(160e5, 3.40e5, 3.25e5, t1, r, lam / 1.018, lcv)
    assert with_more_fuel == pytest.approx(1907.769, abs=0.01)
    change = bounds.reversible_bound(with_more_fuel, 300.15) - bound
    assert 100 * change == pytest.approx(0.1193, abs=1e-4)


def test_cycle_with_measured_pressure() -> None:
    """Pmax 166 bar absolute; calculated independently with numpy and cantera."""
    hot = combustion_temperature.by_cycle(166e5, 3.25e5, *STATE)
    assert hot == pytest.approx(1915.138, abs=0.01)
    assert bounds.reversible_bound(hot, 300.15) == pytest.approx(0.843275, abs=2e-6)
    t1, r, lam, lcv = STATE
    ideal = cycle.limited_pressure_cycle(3.25e5, t1, r, 166e5, lam, lcv).efficiency
    assert ideal == pytest.approx(0.543569, abs=2e-6)


@pytest.mark.parametrize(
    ("t1", "r", "lam", "lcv", "flame"),
    [(320, 14.0, 2.60, 42.7, 1734.9), (350, 13.5, 2.20, 40.3, 1865.0), (345, 12.0, 2.00, 42.7, 1967.4),
     (330, 16.0, 3.20, 42.7, 1644.3), (340, 15.0, 2.40, 40.3, 1804.5), (330, 12.0, 3.00, 42.7, 1611.2),
     (340, 15.0, 2.40, 42.7, 1855.8)],
)  # fmt: skip
def test_flame_from_the_compressed_state(t1: float, r: float, lam: float, lcv: float, flame: float) -> None:
    """Cases A to P of the cycle; calculated independently with cantera."""
    assert combustion_temperature.by_flame(t1, r, lam, lcv * 1e6) == pytest.approx(flame, abs=0.06)


@settings(max_examples=40)
@given(
    st.floats(1.2, 5), st.floats(300, 390), st.floats(10, 17), st.floats(60, 220), st.floats(1.2, 4), st.floats(39, 50)
)
def test_cycle_is_never_below_flame(p1: float, t1: float, r: float, pmax: float, lam: float, lcv: float) -> None:
    """Equal in the pure constant-pressure case, above it where part of the heat is taken in at constant volume."""
    state = (t1, r, lam, lcv * 1e6)
    flame = combustion_temperature.by_flame(*state)
    hot = combustion_temperature.by_cycle(pmax * 1e5, p1 * 1e5, *state)
    if cycle.limited_pressure_cycle(p1 * 1e5, t1, r, pmax * 1e5, lam, lcv * 1e6).label == cycle.CONSTANT_PRESSURE:
        assert hot == pytest.approx(flame, abs=1e-6)
    else:
        assert hot > flame


def test_set_value() -> None:
    assert combustion_temperature.by_setting() == 1850.0
    assert combustion_temperature.by_setting(1790.0) == 1790.0


def test_suction_air_alone_moves_the_raw_gap() -> None:
    """15 to 42 degC at T_H 1850 K: 1.46 points; calculated independently by arithmetic. The excess does not feel it."""
    cold = np.array([15.0, 42.0]) + 273.15
    assert 100 * float(np.diff(bounds.reversible_bound(1850.0, cold))[0]) == pytest.approx(-1.46, abs=5e-3)


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: bounds.reversible_bound(300, 1850), "hot temperature above the cold"),
        (lambda: bounds.reversible_bound(1850, -5), "in kelvin"),
        (lambda: bounds.exhaust_bound(500, 520), "hot temperature above the cold"),
        (lambda: bounds.second_law_ratio(0, 0.5), "bound above zero"),
        (lambda: bounds.reference_efficiency(0, 1, 42.7e6), "above zero"),
        (lambda: bounds.consumption_deviation(1, 1, 1, 0, 1), "above zero"),
        (lambda: bounds.excess_from_deviation(0.5, -1), "above -1"),
        (lambda: bounds.maximum_pressure_from_curve(160e5, 0, 3e5), "absolute"),
        (lambda: combustion_temperature.by_setting(25), "e.g. 1850"),
        (lambda: combustion_temperature.by_flame(345, 13.5, 0.9, 40.9e6), "not enough air"),
        (lambda: combustion_temperature.by_cycle(166e5, -3e5, 345, 13.5, 2.3, 40.9e6), "absolute"),
    ],
)
def test_impossible_scalars_are_refused_with_what_to_enter(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()


def test_impossible_elements_of_arrays_become_nan() -> None:
    hot = np.array([1850.0, 200.0, np.nan])
    assert np.isfinite(bounds.reversible_bound(hot, 300.0)).tolist() == [True, False, False]
    pmax = combustion_temperature.by_cycle_with_curve(160e5, np.array([3.4e5, 0.0]), 3.25e5, *STATE)
    assert np.isfinite(pmax).tolist() == [True, False]
    flame = combustion_temperature.by_flame(np.array([345.0, 20.0]), 13.5, np.array([2.3, 2.3]), 40.9e6)
    assert np.isfinite(flame).tolist() == [True, False]
