"""Tables 53B and 54B in the 1980 form, mass from counters, weight in air."""

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.physics import density

DENSITY = st.floats(653, 1075)


@pytest.mark.parametrize(
    ("rho15", "temperature", "vcf"),
    [(750, 30, 0.981892), (775, 30, 0.983430), (831.2, 30, 0.987043), (845, 30, 0.987395),
     (850, 45, 0.974900), (890, 40, 0.980332), (950, 50, 0.974657), (980, 60, 0.968643),
     (962, 128, 0.918464), (962, 137, 0.911862), (991, 135, 0.916620), (1005, 100, 0.942290)],
)  # fmt: skip
def test_volume_correction(rho15: float, temperature: float, vcf: float) -> None:
    """Calculated independently by arithmetic from the 1980 constants."""
    assert density.volume_correction(rho15, temperature) == pytest.approx(vcf, abs=2e-6)


@pytest.mark.parametrize(
    ("bound", "below", "above"),
    [(770.5, 1.15303e-3, 1.15171e-3), (787.5, 9.5889e-4, 9.5870e-4), (838.5, 8.45622e-4, 8.45773e-4)],
)
def test_expansion_on_both_sides_of_each_bound(bound: float, below: float, above: float) -> None:
    """Calculated independently by arithmetic: with the bound at 787.5 the transition is continuous."""
    assert density.expansion(bound - 1e-6) == pytest.approx(below, rel=1e-5)
    assert density.expansion(bound + 1e-6) == pytest.approx(above, rel=1e-5)


@settings(max_examples=40)
@given(DENSITY)
def test_no_correction_at_the_base_temperature(rho15: float) -> None:
    assert density.volume_correction(rho15, 15.0) == 1.0


@settings(max_examples=40)
@given(DENSITY, st.floats(-20, 149), st.floats(0.1, 1))
def test_volume_correction_falls_with_temperature(rho15: float, temperature: float, step: float) -> None:
    assert density.volume_correction(rho15, temperature + step) < density.volume_correction(rho15, temperature)


@settings(max_examples=40)
@given(st.one_of(st.floats(653.1, 769), st.floats(771.5, 837.5), st.floats(839.5, 1074.9)), st.floats(-30, 150))
def test_density15_inverts_the_density_at_temperature(rho15: float, temperature: float) -> None:
    """Over the whole table but the two jumps of its constants."""
    at_t = rho15 * density.volume_correction(rho15, temperature)
    assert density.density15(at_t, temperature) == pytest.approx(rho15, abs=1e-5)


@settings(max_examples=40)
@given(st.sampled_from([770.5, 838.5]), st.floats(-30, 90), st.floats(-0.2, 0.2))
def test_density15_at_the_jumps_of_the_constants(bound: float, temperature: float, off: float) -> None:
    """No exact solution exists in a narrow band: the density found gives the reading back within 0.1 kg/m3."""
    at_t = (bound + off) * density.volume_correction(bound + off, temperature)
    found = density.density15(at_t, temperature)
    assert found * density.volume_correction(found, temperature) == pytest.approx(at_t, abs=0.1)


@settings(max_examples=40)
@given(st.floats(845, 1000), st.floats(15.1, 60))
def test_a_glass_hydrometer_reads_too_high_when_warm(reading: float, temperature: float) -> None:
    assert density.density15(reading, temperature, glass=True) < density.density15(reading, temperature)


@pytest.mark.parametrize(("reading", "temperature"), [(640.0, 40.0), (983.0, 150.0)])
def test_a_reading_outside_the_table_may_be_of_a_density_inside(reading: float, temperature: float) -> None:
    """Light oil warm, and heavy oil so hot that the first step overshoots the end of the table."""
    found = density.density15(reading, temperature)
    assert density.LEAST < found < density.GREATEST
    assert found * density.volume_correction(found, temperature) == pytest.approx(reading, abs=1e-6)


@pytest.mark.parametrize(
    ("reading", "temperature", "glass", "expected"),
    [(945.0, 40, True, 961.548), (945.0, 40, False, 962.100), (925.0, 50, True, 948.322)],
)
def test_density15_from_a_reading(reading: float, temperature: float, glass: bool, expected: float) -> None:
    """Glass term: public source text of the 1980 table; values calculated independently by arithmetic."""
    assert density.density15(reading, temperature, glass) == pytest.approx(expected, abs=0.005)


def test_supply_less_return_each_with_its_own_temperature() -> None:
    """Calculated independently by arithmetic."""
    supply = density.mass_from_volume(12.480, 962, 128)
    back = density.mass_from_volume(7.610, 962, 137)
    assert supply == pytest.approx(11026.855, abs=0.01)
    assert back == pytest.approx(6675.578, abs=0.01)
    consumed = density.mass_supply_less_return(12.480, 128, 7.610, 137, 962)
    assert consumed == pytest.approx(4351.277, abs=0.01)
    # One temperature for both lines is 1.11 % low.
    hasty = density.mass_supply_less_return(12.480, 128, 7.610, 128, 962)
    assert hasty == pytest.approx(4302.948, abs=0.01)
    assert 1 - hasty / consumed == pytest.approx(0.0111, abs=5e-5)


def test_a_thousand_cubic_metres_at_50_degrees() -> None:
    """Calculated independently by arithmetic."""
    v15 = 1000 * density.volume_correction(950, 50)
    assert v15 == pytest.approx(974.657, abs=1e-3)
    assert density.mass_from_volume(1000, 950, 50) / 1e3 == pytest.approx(925.924, abs=1e-3)
    assert density.mass_in_air(v15, 950) / 1e3 == pytest.approx(924.852, abs=1e-3)


def test_weight_in_air_to_true_mass() -> None:
    """Calculated independently by arithmetic."""
    assert density.vacuum_from_air(1000e3, 950) / 1e3 == pytest.approx(1001.159, abs=1e-3)


@settings(max_examples=40)
@given(st.floats(1, 1e4), DENSITY)
def test_weight_in_air_and_true_mass_invert_each_other(volume15: float, rho15: float) -> None:
    in_air = density.mass_in_air(volume15, rho15)
    assert density.vacuum_from_air(in_air, rho15) == pytest.approx(volume15 * rho15)


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: density.expansion(0.962), "0.987 kg/L is 987"),
        (lambda: density.volume_correction(962, 401), "between -50 and 200"),
        (lambda: density.density15(0.945, 40), "between 653 and 1075"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()


def test_an_impossible_element_of_an_array_becomes_nan_and_the_rest_is_worked_out() -> None:
    found = density.density15(np.array([945.0, 0.945, np.nan]), 40.0)
    assert found[0] == pytest.approx(962.100, abs=0.005)
    assert np.isnan(found[1:]).all()
