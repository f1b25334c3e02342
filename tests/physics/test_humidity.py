"""Moist air against IAPWS-IF97 and the ASHRAE formulas of psychrolib."""

from collections.abc import Callable

import numpy as np
import psychrolib
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.physics import humidity

psychrolib.SetUnitSystem(psychrolib.SI)


@pytest.mark.parametrize(
    ("temperature", "buck", "if97"),
    [(0.01, 611.65, 611.66), (10, 1227.86, 1228.18), (20, 2338.34, 2339.21), (25, 3168.53, 3169.75),
     (30, 4245.13, 4246.69), (35, 5626.75, 5628.62), (40, 7382.36, 7384.43), (45, 9592.30, 9594.39),
     (50, 12349.4, 12351.3)],
)  # fmt: skip
def test_saturation_pressure(temperature: float, buck: float, if97: float) -> None:
    """Buck 1996 by arithmetic; IF97 calculated independently with iapws: within 0.04 %."""
    found = humidity.saturation_pressure(temperature)
    assert found == pytest.approx(buck, abs=0.06 if temperature == 50 else 6e-3)
    assert found == pytest.approx(if97, rel=4e-4)


@pytest.mark.parametrize(
    ("temperature", "relative", "pressure", "expected"),
    [(25, 0.30, 100e3, 0.00597), (25, 0.60, 100e3, 0.01206), (35, 0.80, 100e3, 0.02932),
     (45, 0.60, 100e3, 0.03799), (30, 0.60, 101_325, 0.01604)],
)  # fmt: skip
def test_humidity_ratio(temperature: float, relative: float, pressure: float, expected: float) -> None:
    """Calculated independently with psychrolib."""
    assert humidity.humidity_ratio(temperature, relative, pressure) == pytest.approx(expected, abs=2e-5)


@settings(max_examples=40)
@given(st.floats(1, 50), st.floats(0, 1), st.floats(80e3, 105e3))
def test_moist_air_agrees_with_psychrolib(temperature: float, relative: float, pressure: float) -> None:
    saturation = psychrolib.GetSatVapPres(temperature)
    assert humidity.saturation_pressure(temperature) == pytest.approx(saturation, rel=6e-4)
    ratio = psychrolib.GetHumRatioFromRelHum(temperature, relative, pressure)
    # psychrolib never goes below a ratio of 1e-7.
    assert humidity.humidity_ratio(temperature, relative, pressure) == pytest.approx(ratio, rel=1e-3, abs=2e-7)
    density = psychrolib.GetMoistAirDensity(temperature, ratio, pressure)
    assert humidity.moist_density(temperature, relative, pressure) == pytest.approx(density, rel=1e-4)


@settings(max_examples=40)
@given(st.floats(-20, 60), st.floats(0.01, 1))
def test_damp_air_is_lighter_than_dry(temperature: float, relative: float) -> None:
    damp, dry = (humidity.moist_density(temperature, phi, 100e3) for phi in (relative, 0.0))
    assert damp < dry


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: humidity.saturation_pressure(298), "-20 to 60 degC"),
        (lambda: humidity.vapour_pressure(25, 60), "60 % is 0.6"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()


def test_an_impossible_element_of_an_array_becomes_nan_and_the_rest_is_worked_out() -> None:
    found = humidity.saturation_pressure(np.array([25.0, 298.0]))
    assert found[0] == pytest.approx(3168.53, abs=6e-3)
    assert np.isnan(found[1])
