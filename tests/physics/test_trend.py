"""Robust trend against pymannkendall and scipy, EWMA, and the test of a curve's shape."""

from collections.abc import Callable

import numpy as np
import pymannkendall
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy import stats
from scipy.optimize import curve_fit

from logbook.physics import trend

BY_HAND = [12.9, 14.8, 13.2, 15.7, 13.8, 15.6, 12.9, 11.0, 17.3, 15.9, 19.0, 18.3, 20.1, 21.7]


def test_mann_kendall() -> None:
    """Web text "Mann-Kendall by hand", College of the Holy Cross: S, V, Z; p calculated with pymannkendall."""
    found = trend.mann_kendall(BY_HAND)
    assert found.s == 54
    assert found.variance == pytest.approx(332.667, abs=1e-3)
    assert found.z == pytest.approx(2.90584, abs=1e-5)
    assert found.p == pytest.approx(0.003663, abs=1e-6)


SERIES = st.lists(st.integers(-20, 20), min_size=8, max_size=40)


@settings(max_examples=40)
@given(SERIES)
def test_mann_kendall_agrees_with_pymannkendall(values: list[int]) -> None:
    assume(len(set(values)) > 1)
    found, theirs = trend.mann_kendall(values), pymannkendall.original_test(values)
    assert (found.s, found.variance) == (theirs.s, pytest.approx(theirs.var_s))
    assert found.z == pytest.approx(theirs.z)
    assert found.p == pytest.approx(theirs.p, abs=1e-12)


def test_autocorrelation_takes_certainty_away() -> None:
    found = trend.mann_kendall(BY_HAND, n_effective=3.5)
    assert found.z == pytest.approx(2.90584 / 2, abs=1e-5)


def test_a_constant_series_has_no_trend() -> None:
    assert trend.mann_kendall([5.0] * 10).p == 1.0


def test_theil_sen() -> None:
    """Calculated independently with scipy's theilslopes; intercept by medians."""
    found = trend.theil_sen(BY_HAND, np.arange(1, 15))
    assert (found.slope, found.low, found.high) == pytest.approx((0.566667, 0.3250, 0.8667), abs=5e-5)
    assert found.intercept == pytest.approx(11.4)
    assert found.n == 14


@settings(max_examples=40)
@given(st.lists(st.integers(-500, 500), min_size=8, max_size=40, unique=True), st.floats(0.1, 100))
def test_theil_sen_agrees_with_scipy(values: list[int], spacing: float) -> None:
    times = np.arange(len(values)) * spacing
    found = trend.theil_sen(values, times)
    theirs = stats.theilslopes(values, times, alpha=0.95)
    assert found.slope == pytest.approx(theirs.slope)
    assert (found.low, found.high) == pytest.approx((theirs.low_slope, theirs.high_slope))
    assert found.intercept == pytest.approx(theirs.intercept)


NUMBERS = st.lists(st.integers(-500, 500), min_size=8, max_size=30)


@settings(max_examples=40)
@given(NUMBERS, st.floats(1.0, 30.0))
def test_interval_contains_the_slope_and_widens_with_fewer_independent_points(values: list[int], share: float) -> None:
    n = len(values)
    whole = trend.theil_sen(values)
    fewer = trend.theil_sen(values, n_effective=max(n / share, 0.5))
    assert fewer.low <= whole.low <= whole.slope <= whole.high <= fewer.high
    assert fewer.slope == whole.slope


@settings(max_examples=40)
@given(NUMBERS, st.floats(1e-3, 1e3), st.floats(1e-3, 1e3), st.floats(-1e3, 1e3), st.floats(-10, 10))
def test_slope_follows_its_units(values: list[int], unit: float, time_unit: float, shift: float, tilt: float) -> None:
    """Scaled, shifted and tilted data scale, leave and tilt the slope and its interval; mirrored data mirror them."""
    y, x = np.array(values, float), np.arange(len(values), dtype=float)
    plain = np.array([(fit := trend.theil_sen(y, x)).slope, fit.low, fit.high])
    found = trend.theil_sen(unit * y + shift, time_unit * x)
    size = unit / time_unit
    assert [found.slope, found.low, found.high] == pytest.approx(plain * size, rel=1e-9, abs=1e-9 * size * 1e3 + 1e-9)
    mirrored = trend.theil_sen(-y, x)
    assert [mirrored.slope, mirrored.high, mirrored.low] == pytest.approx(-plain)
    # A tilt may break ties, and with them the variance: the slope alone is compared.
    assert trend.theil_sen(y + tilt * x, x).slope == pytest.approx(plain[0] + tilt, abs=1e-9)


@pytest.mark.parametrize("n", [8, 14])
def test_interval_holds_the_true_slope_as_often_as_it_says(n: int) -> None:
    """1000 series of white noise about a slope of 0.02: 95 %, less at most three standard errors of the count."""
    rng = np.random.default_rng(n)
    fits = [trend.theil_sen(row + 0.02 * np.arange(n)) for row in rng.normal(size=(1000, n))]
    assert np.mean([fit.low <= 0.02 <= fit.high for fit in fits]) >= 0.93


def test_interval_without_an_end_where_too_little_is_known() -> None:
    found = trend.theil_sen(BY_HAND, n_effective=1.0)
    assert (found.low, found.high) == (-np.inf, np.inf)


def test_pairs_at_the_same_time_are_left_out() -> None:
    """As scipy's theilslopes, which leaves them out, too."""
    times = np.repeat(np.arange(7), 2)
    found = trend.theil_sen(BY_HAND, times)
    assert found.slope == pytest.approx(stats.theilslopes(BY_HAND, times).slope)


def test_a_single_wild_reading_does_not_move_the_slope() -> None:
    times = np.arange(20) * 24.0
    values = 0.01 * times
    values[10] = 900
    assert trend.theil_sen(values, times).slope == pytest.approx(0.01)


@pytest.mark.parametrize(
    ("values", "slope"),
    [([0.10, 0.02, 0.29, 0.36, 0.43, 0.70, 0.62, 0.89, 0.91, 1.08], 0.00112857),
     ([0.05, 0.10, 0.10, 0.40, 0.45, 0.45, 0.60, 0.80, 0.70, 0.90], 0.00100000)],
)  # fmt: skip
def test_slope_of_each_segment(values: list[float], slope: float) -> None:
    """Hours 0, 100 .. 900; calculated independently with scipy's theilslopes."""
    assert trend.theil_sen(values, np.arange(10) * 100.0).slope == pytest.approx(slope, abs=5e-9)


def test_slope_across_a_cleaning_is_wrong() -> None:
    """Pooled without the border 0.00031381; calculated independently with scipy's theilslopes."""
    both = [0.10, 0.02, 0.29, 0.36, 0.43, 0.70, 0.62, 0.89, 0.91, 1.08,
            0.05, 0.10, 0.10, 0.40, 0.45, 0.45, 0.60, 0.80, 0.70, 0.90]  # fmt: skip
    assert trend.theil_sen(both, np.arange(20) * 100.0).slope == pytest.approx(0.00031381, abs=5e-9)


HANDBOOK = [52.0, 47.0, 53.0, 49.3, 50.1, 47.0, 51.0, 50.1, 51.2, 50.5, 49.6, 47.6, 49.9, 51.3, 47.8, 51.2, 52.6, 52.4,
            53.6, 52.1]  # fmt: skip


def test_ewma() -> None:
    """Data after NIST/SEMATECH e-Handbook 6.3.2.4 (from memory); values calculated independently by arithmetic."""
    found = trend.ewma(HANDBOOK, 50, 2.0539, 0.3)
    assert found.values == pytest.approx(
        [50.60, 49.52, 50.56, 50.18, 50.16, 49.21, 49.75, 49.85, 50.26, 50.33, 50.11, 49.36, 49.52, 50.05, 49.38,
         49.92, 50.73, 51.23, 51.94, 51.99], abs=6e-3,
    )  # fmt: skip
    assert (found.high, found.low) == pytest.approx((52.5884, 47.4116), abs=5e-5)
    assert found.first_signal is None
    early = np.sqrt(1 - 0.7 ** (2 * np.arange(1, 21)))
    assert found.half_width == pytest.approx(2.5884 * early, rel=2e-5)


def test_ewma_limits_by_simulation() -> None:
    """Scatter of the average after each of five unevenly spaced points, 20 000 invented series."""
    weights = trend.ewma_weight([24, 24, 120, 8, 48], 200)
    rows = np.random.default_rng(8).normal(0, 2.0, (20_000, 5))
    average = np.zeros(20_000)
    half = trend.ewma(rows[0], 0.0, 2.0, weights, k=1.0).half_width
    for point in range(5):
        average = (1 - weights[point]) * average + weights[point] * rows[:, point]
        assert average.std() == pytest.approx(half[point], rel=0.03)


def test_early_limits_see_a_large_first_step() -> None:
    """2.0 beyond k s weight 1.848, and well within the settled limit 2.588; calculated independently by arithmetic."""
    assert trend.ewma([50 + 2.0 / 0.3], 50, 2.0539, 0.3).first_signal == 0


def test_ewma_signals_a_shift() -> None:
    found = trend.ewma([*HANDBOOK, 56, 56, 56], 50, 2.0539, 0.3)
    assert found.first_signal == 20
    assert trend.ewma([50, 44, 44, 44], 50, 2.0539, 0.3).first_signal == 2


def test_ewma_weight_of_uneven_spacing() -> None:
    """24 h apart with a time constant of 200 h: 0.113080; one step of a unit jump shows it."""
    weight = trend.ewma_weight(24, 200)
    assert weight == pytest.approx(0.113080, abs=5e-7)
    # Two steps of 12 h forget as much as one of 24 h.
    assert (1 - trend.ewma_weight(12, 200)) ** 2 == pytest.approx(1 - weight)
    assert trend.ewma([1.0], 0.0, 1.0, weight).values[0] == pytest.approx(0.113080, abs=5e-7)


LOADS = [58, 62, 66, 70, 74, 78, 82, 86, 60, 72, 80, 68]
EXCESS = [0.95, 0.80, 0.78, 0.62, 0.60, 0.42, 0.40, 0.22, 0.86, 0.66, 0.42, 0.74]


def test_shape_of_the_curve() -> None:
    """Calculated independently with numpy."""
    found = trend.shape_test(np.arange(12), LOADS, EXCESS)
    assert found.per_load == pytest.approx(-0.024536, abs=1e-6)
    assert found.u_per_load == pytest.approx(0.001548, abs=1e-6)
    assert found.per_load / found.u_per_load == pytest.approx(-15.85, abs=0.01)
    assert found.across == pytest.approx(-0.530, abs=5e-4)
    assert np.subtract(*np.percentile(LOADS, [90, 10])) == pytest.approx(21.6)
    assert found.differs


@pytest.mark.parametrize(("wave", "has_memory"), [(0.0, False), (0.3, True)])
def test_shape_agrees_with_the_covariance_of_scipy(wave: float, has_memory: bool) -> None:
    """A slow wave in the residuals leaves fewer independent points."""
    excess = np.array(EXCESS) + wave * np.sin(np.arange(12))

    def plane(at: np.ndarray, c0: float, c1: float, c2: float) -> np.ndarray:
        return c0 + c1 * at[0] + c2 * at[1]

    at = np.array([np.arange(12), LOADS], float)
    fit, covariance = curve_fit(plane, at, excess)
    found = trend.shape_test(at[0], LOADS, excess)
    assert found.per_load == pytest.approx(fit[2], rel=1e-6)
    d = excess - plane(at, *fit)
    rho = max(float(d[1:] @ d[:-1] / (d @ d)), 0)
    assert (rho > 0.1) is has_memory
    assert found.u_per_load == pytest.approx(np.sqrt(covariance[2, 2] * (1 + rho) / (1 - rho)), rel=1e-5)


@pytest.mark.parametrize("scale", [0.3, 0.0])
def test_a_small_effect_of_load_is_not_called_a_difference_of_shape(scale: float) -> None:
    assert not trend.shape_test(np.arange(12), LOADS, scale * np.array(EXCESS)).differs


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: trend.mann_kendall([1, 2]), "at least 3 points; 2 were given"),
        (lambda: trend.theil_sen([1] * 7), "A trend needs at least 8 points; 7 were given"),
        (lambda: trend.theil_sen([1] * 8, [1] * 9), "of one length; 8 and 9 were given"),
        (lambda: trend.theil_sen([1, 2, np.nan, 4, 5, 6, 7, 8]), "leave out what was not read"),
        (lambda: trend.theil_sen(5.0), "lists of numbers"),
        (lambda: trend.theil_sen(range(9), n_effective=0), "effective number of points is above 0"),
        (lambda: trend.mann_kendall(range(9), n_effective=10), "not above their number"),
        (lambda: trend.mann_kendall([1, np.nan, 3]), "leave out what was not read"),
        (lambda: trend.ewma([], 0, 1), "at least 1 point; 0 were given"),
        (lambda: trend.ewma([1, np.nan], 0, 1), "leave out what was not read"),
        (lambda: trend.ewma([1, 2], 0, 0), "scatter above zero"),
        (lambda: trend.ewma([1, 2], 0, 1, 1.5), "weight above 0 and up to 1"),
        (lambda: trend.ewma([1, 2], 0, 1, [0.3, 0.3, 0.3]), "one for every point"),
        (lambda: trend.ewma_weight(0, 200), "above zero"),
        (lambda: trend.shape_test(range(12), range(12), [np.nan] * 12), "leave out what was not read"),
        (lambda: trend.theil_sen([1] * 8, [1] * 8), "different times"),
        (lambda: trend.shape_test(range(12), [75] * 12, range(12)), "different loads"),
        (lambda: trend.shape_test(range(11), range(11), range(11)), "12 points"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()
