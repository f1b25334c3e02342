"""Forecast, cleaning interval, excess fuel."""

from collections.abc import Callable
from math import inf

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import minimize_scalar

from logbook.physics import cost
from logbook.physics.power import J_PER_KWH, KG_J_PER_G_KWH
from logbook.physics.trend import TheilSen, theil_sen

BY_HAND = [12.9, 14.8, 13.2, 15.7, 13.8, 15.6, 12.9, 11.0, 17.3, 15.9, 19.0, 18.3, 20.1, 21.7]
TIMES = np.arange(1, 15, dtype=float)


def test_forecast() -> None:
    """Series of "Mann-Kendall by hand", level 25; calculated independently with scipy."""
    found = cost.forecast(BY_HAND, TIMES, theil_sen(BY_HAND, TIMES), 25)
    assert found is not None
    assert (found.at, found.earliest, found.latest) == pytest.approx((24.000, 18.288, 36.269), abs=1e-3)
    assert not found.beyond_data


def test_a_falling_series_mirrors_a_rising_one() -> None:
    falling = -np.array(BY_HAND)
    found = cost.forecast(falling, TIMES, theil_sen(falling, TIMES), -25)
    assert found is not None
    assert (found.at, found.earliest, found.latest) == pytest.approx((24.000, 18.288, 36.269), abs=1e-3)


def test_nothing_is_forecast_further_than_the_span_observed() -> None:
    trend = theil_sen(BY_HAND, TIMES)
    pivot = float(np.median(BY_HAND)), float(np.median(TIMES))
    at_27, at_28 = (cost.forecast(BY_HAND, TIMES, trend, pivot[0] + trend.slope * (t - pivot[1])) for t in (26.9, 27.1))
    assert at_27 is not None
    assert at_28 is not None
    assert (at_27.beyond_data, at_28.beyond_data) == (False, True)


def test_a_slope_that_may_be_zero_has_no_latest_time() -> None:
    found = cost.forecast(BY_HAND, TIMES, TheilSen(0.5, -0.1, 0.9, 11.4, 14), 25)
    assert found is not None
    assert found.latest == inf


@pytest.mark.parametrize("level", [5.0, float(np.median(BY_HAND))])
def test_a_trend_that_does_not_go_there_has_no_forecast(level: float) -> None:
    assert cost.forecast(BY_HAND, TIMES, theil_sen(BY_HAND, TIMES), level) is None


def test_cleaning_interval() -> None:
    """54.772 days, 328.634 per day; calculated independently with scipy's minimiser."""
    found = cost.cleaning_interval(9000, 6.0)
    assert found.days == pytest.approx(54.772, abs=1e-3)
    assert found.cost_per_day == pytest.approx(328.634, abs=1e-3)


@settings(max_examples=40)
@given(st.floats(100, 1e6), st.floats(0.01, 100))
def test_no_other_interval_costs_less(price: float, growth: float) -> None:
    found = cost.cleaning_interval(price, growth)

    def rate(days: float) -> float:
        return (price + growth * days**2 / 2) / days

    least = minimize_scalar(rate, bounds=(found.days / 5, found.days * 5), method="bounded")
    assert rate(found.days) == pytest.approx(found.cost_per_day)
    assert found.cost_per_day <= least.fun * (1 + 1e-9)
    # The optimum is flat: 0.7 or 1.4 of it costs about 6 % more.
    assert rate(0.7 * found.days) / found.cost_per_day == pytest.approx(1.06, abs=0.006)
    assert rate(1.4 * found.days) / found.cost_per_day == pytest.approx(1.06, abs=0.006)


def test_excess_fuel() -> None:
    """3.191953 g/kWh over 4200 MWh: 13.406 t, 41.747 t CO2 with 3.114; calculated independently by arithmetic."""
    found = cost.excess_fuel(172.191953 * KG_J_PER_G_KWH, 169.0 * KG_J_PER_G_KWH, 4.2e6 * J_PER_KWH)
    assert found / 1e3 == pytest.approx(13.406, abs=1e-3)
    whole = cost.excess_cost(found, 2000.0, 3.114, 0.6)
    assert whole.co2_kg / 1e3 == pytest.approx(41.747, abs=1e-3)
    assert whole.money == pytest.approx(0.6 * 13406, rel=1e-4)
    assert whole.fuel_kg == found


def test_calibration_of_the_reference_in_money() -> None:
    """0.5 % of 169 g/kWh over 4200 MWh is 3.5 t; calculated independently by arithmetic."""
    found = cost.excess_fuel(1.005 * 169 * KG_J_PER_G_KWH, 169 * KG_J_PER_G_KWH, 4.2e6 * J_PER_KWH)
    assert found / 1e3 == pytest.approx(3.549, abs=1e-3)


@pytest.mark.parametrize(("fuel", "u", "differs"), [(13.4, 6.6, True), (13.4, 6.8, False), (-13.4, 6.6, True),
                                                    (0.0, 0.0, False)])  # fmt: skip
def test_an_excess_within_its_uncertainty_is_not_different_from_zero(fuel: float, u: float, differs: bool) -> None:
    assert cost.excess_cost(fuel, u, 3.114, 600.0).differs_from_zero is differs


def test_readings_better_than_the_reference_are_not_clipped() -> None:
    consumption = np.array([171.0, 167.0]) * KG_J_PER_G_KWH
    found = cost.excess_fuel(consumption, 169.0 * KG_J_PER_G_KWH, np.array([1e6, 1e6]) * J_PER_KWH)
    assert found == pytest.approx(0.0, abs=1e-6)


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: cost.cleaning_interval(0, 6), "above zero"),
        (lambda: cost.cleaning_interval(9000, 0), "without growth no cleaning pays"),
        (lambda: cost.cleaning_interval(float("nan"), 6), "above zero"),
        (lambda: cost.forecast(BY_HAND, TIMES[:-1], theil_sen(BY_HAND, TIMES), 25), "one length; 14 and 13 were given"),
        (lambda: cost.excess_cost(1.0, -1.0, 3.114, 600), "not below zero"),
        (lambda: cost.excess_cost(1.0, 1.0, float("nan"), 600), "not below zero"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()
