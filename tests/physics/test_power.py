"""Power, mean pressures, consumption, efficiency, slip."""

from collections.abc import Callable
from math import pi

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.physics import power

KWH = power.J_PER_KWH
G_KWH = power.KG_J_PER_G_KWH


def test_indicated_power() -> None:
    """Rajput, A Textbook of Internal Combustion Engines, ex. 17.1: 13.30 kW (13.3046)."""
    volume = power.swept_volume(0.110, 0.140)
    found = power.power_from_mean_pressure(6e5, volume, 1, 1000 / 60, "two-stroke")
    assert found / 1e3 == pytest.approx(13.3046, abs=1e-3)


@pytest.mark.parametrize(
    ("cycle", "bore", "stroke", "speed_rpm", "power_kw", "pressure_bar", "constant"),
    [("two-stroke", 0.600, 2.400, 105, 13_560, 19.031, 1.130973),
     ("four-stroke", 0.320, 0.400, 750, 2880, 23.873, 0.0268083)],
)  # fmt: skip
def test_mean_pressure_and_cylinder_constant(
    cycle: str, bore: float, stroke: float, speed_rpm: float, power_kw: float, pressure_bar: float, constant: float
) -> None:
    """Six cylinders; calculated independently by arithmetic."""
    volume = power.swept_volume(bore, stroke)
    pressure = power.mean_pressure(power_kw * 1e3, volume, 6, speed_rpm / 60, cycle)
    assert pressure / 1e5 == pytest.approx(pressure_bar, abs=1e-3)
    assert power.cylinder_constant(volume, cycle) == pytest.approx(constant, rel=2e-6)
    assert constant * pressure_bar * speed_rpm * 6 == pytest.approx(power_kw, rel=1e-4)


@settings(max_examples=40)
@given(st.floats(1e5, 30e5), st.floats(0.5, 20), st.sampled_from(["two-stroke", "four-stroke"]))
def test_mean_pressure_inverts_power(pressure: float, speed: float, cycle: str) -> None:
    found = power.mean_pressure(power.power_from_mean_pressure(pressure, 0.05, 6, speed, cycle), 0.05, 6, speed, cycle)
    assert found == pytest.approx(pressure)


def test_torsion_meter() -> None:
    """Solid shaft 580 mm, 82.6 GPa, 2.0 m, 0.0011 rad, 98 rpm; calculated independently by arithmetic."""
    torque, shaft = power.torsion_power(0.0011, 82.6e9, 0.580, 2.0, 98 / 60)
    assert torque / 1e3 == pytest.approx(504.72, rel=1e-3)
    assert shaft / 1e3 == pytest.approx(5179.8, rel=1e-3)
    assert shaft == pytest.approx(2 * pi * 98 / 60 * torque)


def test_a_bore_takes_its_own_share_of_the_torque_away() -> None:
    solid, _ = power.torsion_power(0.0011, 82.6e9, 0.580, 2.0, 1.0)
    hollow, _ = power.torsion_power(0.0011, 82.6e9, 0.580, 2.0, 1.0, inner_diameter_m=0.290)
    assert hollow / solid == pytest.approx(15 / 16)


def test_generating_set() -> None:
    """1980 kW at the terminals, 0.955; calculated independently by arithmetic."""
    assert power.brake_power_of_set(1980e3, 0.955) / 1e3 == pytest.approx(2073.30, abs=0.01)


def test_take_off_before_the_torsion_meter() -> None:
    """Calculated independently by arithmetic: leaving it out makes the consumption 8.4 % too high."""
    found = power.brake_power_with_take_off(8200e3, 640e3, 0.93)
    assert found / 1e3 == pytest.approx(8888.17, abs=0.01)
    assert found / 8200e3 - 1 == pytest.approx(0.084, abs=5e-4)
    assert power.brake_power_with_take_off(8200e3, -640e3, 0.93) < 8200e3


@pytest.mark.parametrize(
    ("consumption", "lcv", "efficiency", "heat_rate"),
    [(171, 42.7, 0.493036, 7301.7), (165, 42.7, 0.510964, 7045.5), (200, 42.7, 0.421546, 8540.0),
     (190, 40.2, 0.471327, 7638.0)],
)  # fmt: skip
def test_brake_efficiency(consumption: float, lcv: float, efficiency: float, heat_rate: float) -> None:
    """Calculated independently by arithmetic: 3600/(b LCV)."""
    found = power.brake_efficiency(consumption * G_KWH, lcv * 1e6)
    assert found == pytest.approx(efficiency, abs=1e-6)
    assert 3600 * power.heat_rate(consumption * G_KWH, lcv * 1e6) == pytest.approx(heat_rate, abs=0.05)


def test_consumption_for_a_metric_horsepower_hour() -> None:
    """171 g/kWh is 125.770 g/PSh; calculated independently by arithmetic."""
    per_hour = 171 * G_KWH * power.W_PER_METRIC_HORSEPOWER * 3600
    assert per_hour * 1e3 == pytest.approx(125.770, abs=5e-4)


def test_consumption_of_a_period_is_pooled_and_no_mean_of_ratios() -> None:
    """Calculated independently by arithmetic: 174.778 g/kWh, where the mean of the ratios would be 177.0."""
    energy, mass = np.array([9600, 4800, 7200]) * KWH, np.array([1632, 912, 1231.2])
    pooled = power.specific_consumption(mass.sum(), energy.sum())
    assert pooled / G_KWH == pytest.approx(174.778, abs=1e-3)
    assert power.specific_consumption(mass, energy).mean() / G_KWH == pytest.approx(177.0, abs=0.01)


@pytest.mark.parametrize(("hours", "expected"), [(4.0, 167.143), (76.0, 8.797)])
def test_first_watch_after_port(hours: float, expected: float) -> None:
    """Running hours, and the wrong figure elapsed hours would give; calculated independently by arithmetic."""
    found = power.specific_consumption(6552, 9800e3 * hours * 3600)
    assert found / G_KWH == pytest.approx(expected, abs=1e-3)


@pytest.mark.parametrize(("hours", "expected"), [(25, 9184.0), (24, 9566.7)])
def test_day_of_twenty_five_hours(hours: float, expected: float) -> None:
    """229.6 MWh; calculated independently by arithmetic (24 h would be wrong by 4.2 %)."""
    assert 229.6e3 * KWH / (hours * 3600) / 1e3 == pytest.approx(expected, abs=0.1)


@pytest.mark.parametrize(
    ("spot_kw", "ratio", "expected_kw", "tolerance"),
    [
        # Calculated independently by arithmetic.
        (100, 0.9, 72.9, 1e-9),
        (9650, 96.4 / 97.1, 9442.8, 0.1),
        (9650, 94.2 / 97.1, 8810.9, 0.1),
    ],
)
def test_propeller_law(spot_kw: float, ratio: float, expected_kw: float, tolerance: float) -> None:
    assert power.propeller_power(spot_kw * 1e3, ratio) / 1e3 == pytest.approx(expected_kw, abs=tolerance)


@settings(max_examples=40)
@given(st.floats(0.3, 1.1))
def test_running_index_is_one_on_the_propeller_curve(ratio: float) -> None:
    assert power.running_index(power.propeller_power(1.0, ratio), ratio) == pytest.approx(1.0)


def test_running_index_is_above_one_when_heavy() -> None:
    """3.5 % less speed at equal power is 11.3 % heavy; calculated independently by arithmetic."""
    assert power.running_index(1.0, 0.965) == pytest.approx(1.11281, abs=1e-5)


def test_slip() -> None:
    """Public web page "What is slip": 257.054 nm, +6.6 % (6.6344)."""
    found, engine_m = power.slip(3.8, 87 * 60 * 24, 240 * power.NAUTICAL_MILE_M)
    assert engine_m / power.NAUTICAL_MILE_M == pytest.approx(257.054, abs=0.01)
    assert 100 * found == pytest.approx(6.6344, abs=0.01)


def test_power_from_index_and_speed() -> None:
    """Calculated independently by arithmetic."""
    found = power.power_from_index(9630e3, 96.4 / 98.2, 905.0 * 40.9 / (838.0 * 42.7))
    assert found / 1e3 == pytest.approx(9778.9, abs=0.1)


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: power.specific_consumption(1, 0), "No energy was delivered"),
        (lambda: power.brake_efficiency(0, 42.7e6), "above zero"),
        (lambda: power.brake_power_of_set(1980e3, 95.5), "between 0 and 1"),
        (lambda: power.mean_pressure(1e6, 0.1, 6, 0, "two-stroke"), "above zero"),
        (lambda: power.cylinder_constant(0.1, "2-stroke"), "two-stroke or four-stroke"),
        (lambda: power.mean_pressure(1e6, 0.1, 0, 2, "two-stroke"), "above zero"),
        (lambda: power.torsion_power(0.001, 82.6e9, 0.58, 0.0, 1.6), "length must be above zero"),
        (lambda: power.torsion_power(0.001, 82.6e9, 0.58, 2.0, 1.6, 0.58), "bore smaller"),
        (lambda: power.brake_power_with_take_off(8.2e6, 6.4e5, 0), "between 0 and 1"),
        (lambda: power.efficiency_of_fuels(1e6, [0.0, 0.0], [48e6, 42.7e6]), "No fuel was burnt"),
        (lambda: power.running_index(0.8, 0), "speed ratio"),
        (lambda: power.slip(3.8, 0, 1000), "Pitch and revolutions"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()


def test_an_impossible_element_of_an_array_becomes_nan_and_the_rest_is_worked_out() -> None:
    found = power.specific_consumption(np.array([1.0, 1.0]), np.array([KWH, 0.0]))
    assert found[0] == pytest.approx(1 / KWH)
    assert np.isnan(found[1])
    assert np.isnan(power.mean_pressure(np.array([1e6, 1e6]), 0.1, 6, np.array([1.0, 0.0]), "two-stroke")[1])
    index = power.running_index(np.array([0.7, 0.7]), np.array([0.9, 0.0]))
    assert index[0] == pytest.approx(0.7 / 0.729)
    assert np.isnan(index[1])
