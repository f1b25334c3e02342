"""Figures of a generating set over a period."""

import math
from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.physics import power, station

HOURS = st.floats(0, 800)


def test_hours_of_one_set() -> None:
    """One set of 2880 kW, after IEEE 762; calculated independently by arithmetic."""
    found = station.availability(610, 62, 30, 18)
    assert found.available_h == 672
    assert 100 * found.availability == pytest.approx(93.333, abs=1e-3)
    assert 100 * found.service_factor == pytest.approx(84.722, abs=1e-3)
    assert 100 * found.forced_outage_rate == pytest.approx(2.8662, abs=1e-4)
    assert 100 * found.forced_outage_factor == pytest.approx(2.5)


@pytest.mark.parametrize(
    ("name", "expected", "tolerance"),
    [("capacity_factor_gross", 0.64622, 1e-5), ("capacity_factor_net", 0.64211, 1e-5), ("output_factor", 0.76275, 1e-5),
     ("station_service", 0.04776, 1e-5), ("mean_power_kw", 1861.11, 0.01), ("load_factor", 0.68676, 1e-5),
     ("mean_power_in_service_kw", 2196.7, 0.05), ("load_factor_in_service", 0.81060, 1e-5)],
)  # fmt: skip
def test_output_of_one_set(name: str, expected: float, tolerance: float) -> None:
    """Gross 1340 MWh, net 1276 MWh, peak 2710 kW; calculated independently by arithmetic."""
    found = station.output(
        gross_kwh=1340e3, net_kwh=1276e3, peak_kw=2710, gross_capacity_kw=2880, net_capacity_kw=2760,
        period_h=720, service_h=610,
    )  # fmt: skip
    assert getattr(found, name) == pytest.approx(expected, abs=tolerance)


@pytest.mark.parametrize(("kwh", "heat_rate", "percent"), [(1340e3, 8540.0, 42.155), (1276e3, 8968.34, 40.141)])
def test_heat_rate_gross_and_net(kwh: float, heat_rate: float, percent: float) -> None:
    """268.0 t at 42.7 MJ/kg; calculated independently by arithmetic."""
    eta = power.brake_efficiency(power.specific_consumption(268e3, kwh * power.J_PER_KWH), 42.7e6)
    assert 3600 / eta == pytest.approx(heat_rate, abs=0.01)
    assert 100 * eta == pytest.approx(percent, abs=1e-3)


@settings(max_examples=40)
@given(st.floats(1, 800), HOURS, HOURS, HOURS)
def test_factors_are_shares_of_the_period(service: float, reserve: float, planned: float, forced: float) -> None:
    found = station.availability(service, reserve, planned, forced)
    period = service + reserve + planned + forced
    assert found.availability * period + planned + forced == pytest.approx(period)
    assert found.service_factor <= found.availability + 1e-12
    assert found.forced_outage_rate >= found.forced_outage_factor - 1e-12


def test_a_set_that_only_stood_by_has_no_forced_outage_rate() -> None:
    found = station.availability(0, 700, 20, 0)
    assert math.isnan(found.forced_outage_rate)
    assert found.forced_outage_factor == 0


def test_months_side_by_side() -> None:
    """One set of 2880 kW as above, a month without any hours, a month in reserve."""
    found = station.availability(np.array([610.0, 0, 0]), np.array([62.0, 0, 700]), np.array([30.0, 0, 20]), [18, 0, 0])
    assert found.availability == pytest.approx([0.93333, math.nan, 700 / 720], abs=1e-5, nan_ok=True)
    assert found.forced_outage_rate == pytest.approx([0.028662, math.nan, math.nan], abs=1e-6, nan_ok=True)


def _output(**changed: float) -> station.Output:
    given_values = {
        "gross_kwh": 1340e3, "net_kwh": 1276e3, "peak_kw": 2710, "gross_capacity_kw": 2880, "net_capacity_kw": 2760,
        "period_h": 720, "service_h": 610,
    }  # fmt: skip
    return station.output(**(given_values | changed))


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: station.availability(0, 0, 0, 0), "sum is above zero"),
        (lambda: station.availability(10, -1, 0, 0), "not below zero"),
        (lambda: _output(service_h=0), "above zero"),
        (lambda: _output(net_kwh=1400e3), "net not above gross"),
        (lambda: _output(service_h=721), "more than those of the period"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()
