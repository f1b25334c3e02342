"""Uncertainty after the GUM, with the general libraries uncertainties and GTC as witnesses."""

from collections.abc import Callable

import GTC
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats
from uncertainties import ufloat, umath

from logbook.physics import uncertainty

POSITIVE = st.floats(1e-3, 0.1)


def test_end_gauge() -> None:
    """JCGM 100, example H.1: components 25, 9.7, 2.9, 16.6 nm give 31.7 nm (32 printed)."""
    found = uncertainty.combined(25, 9.7, 2.9, 16.6)
    assert found == pytest.approx(31.7, abs=0.05)
    parts = [GTC.ureal(0, u) for u in (25, 9.7, 2.9, 16.6)]
    assert found == pytest.approx(GTC.uncertainty(sum(parts)))


def test_effective_degrees_of_the_end_gauge() -> None:
    """JCGM 100, example H.1: 16, with the degrees of the components of its table H.1; GTC calculates the same."""
    u, degrees = [25.0, 5.8, 3.9, 6.7, 2.9, 16.6], [18, 24, 5, 8, 50, 2]
    found = uncertainty.effective_degrees(u, degrees)
    assert int(found) == 16
    parts = [GTC.ureal(0, component, nu) for component, nu in zip(u, degrees, strict=True)]
    assert found == pytest.approx(GTC.dof(sum(parts)), rel=1e-6)


def test_effective_degrees_of_components_known_for_certain() -> None:
    """A component of infinite degrees adds to u_c only; GTC calculates the same."""
    assert uncertainty.effective_degrees([1.0, 2.0], [np.inf, np.inf]) == np.inf
    found = uncertainty.effective_degrees([1.0, 2.0], [5, np.inf])
    assert found == pytest.approx(GTC.dof(GTC.ureal(0, 1, 5) + GTC.ureal(0, 2)))


def test_efficiency_of_three_readings() -> None:
    """10 000 +-100 kW, 1800 +-9 kg/h, 42.7 +-0.2 MJ/kg; calculated independently with uncertainties."""
    power, fuel, lcv = ufloat(10_000, 100), ufloat(1800, 9), ufloat(42.7, 0.2)
    eta = power * 3600 / (fuel * lcv * 1000)
    relative = uncertainty.combined(100 / 10_000, 9 / 1800, 0.2 / 42.7)
    assert 100 * relative == pytest.approx(1.2122, abs=1e-4)
    assert eta.n == pytest.approx(0.468384, abs=1e-6)
    assert relative * eta.n == pytest.approx(eta.s, rel=1e-9)
    assert relative * eta.n == pytest.approx(0.005678, abs=1e-6)


@pytest.mark.parametrize(
    ("components", "expected", "tolerance"),
    [((0.5, 2.0, 0.7), 2.18, 5e-3), ((0.5, 0.5, 0.7), 0.995, 5e-4), ((3.0, 4.0), 5.0, 1e-12)],
)
def test_root_sum_of_squares(components: tuple[float, ...], expected: float, tolerance: float) -> None:
    """Calculated independently by arithmetic."""
    assert uncertainty.combined(*components) == pytest.approx(expected, abs=tolerance)


def test_rectangular_limit() -> None:
    """Exact: 0.5/sqrt(3)."""
    assert uncertainty.from_limit(0.5) == pytest.approx(0.28868, abs=5e-6)
    assert GTC.type_b.uniform(0.5) == pytest.approx(uncertainty.from_limit(0.5))


@pytest.mark.parametrize(
    ("number", "digits", "percent"),
    [(9.6, 2, 0.3007), (9600, 4, 0.003007), (-0.0096, 2, 0.3007), (0, 2, 0), (9.6, 0, 0)],
)
def test_digits_typed(number: float, digits: int, percent: float) -> None:
    """9.6 MW carries 0.30 %; calculated independently by arithmetic."""
    assert 100 * uncertainty.of_digits(number, digits) == pytest.approx(percent, rel=1e-3)


def test_a_gauge_read_to_five_degrees() -> None:
    """Calculated independently by arithmetic: half of 5 degC, rectangular, 1.44 K."""
    assert uncertainty.from_limit(2.5) == pytest.approx(1.44, abs=5e-3)


def test_percent_of_full_scale_grows_at_a_low_reading() -> None:
    assert uncertainty.of_full_scale(1.0, 16.0, np.array([16.0, 4.0, -2.0])) == pytest.approx([1, 4, 8])


@pytest.mark.parametrize(("ratio", "at"), [(2, (0.45, 1.12, 2.24)), (3, (0.72, 1.80, 3.61)),
                                           (4, (1.00, 2.50, 5.00)), (6, (1.56, 3.91, 7.81))])  # fmt: skip
@pytest.mark.parametrize("column", [0, 1, 2])
def test_supply_less_return(ratio: float, at: tuple[float, float, float], column: int) -> None:
    """Meters of 0.2, 0.5 and 1 %; calculated independently by arithmetic."""
    accuracy = (0.2, 0.5, 1.0)[column]
    assert uncertainty.supply_less_return(accuracy, ratio) == pytest.approx(at[column], abs=5.1e-3)


@pytest.mark.parametrize(("ratio", "at"), [(2, (0.6, 1.5, 3)), (3, (1.0, 2.5, 5)), (4, (1.4, 3.5, 7)),
                                           (6, (2.2, 5.5, 11))])  # fmt: skip
def test_supply_less_return_at_worst(ratio: float, at: tuple[float, float, float]) -> None:
    """Meters of 0.2, 0.5 and 1 % wrong in opposite directions; calculated independently by arithmetic."""
    accuracy = np.array([0.2, 0.5, 1.0])
    assert uncertainty.supply_less_return_worst(accuracy, ratio) == pytest.approx(at)
    high, low = ratio * (1 + accuracy / 100), (ratio - 1) * (1 - accuracy / 100)
    assert 100 * (high - low - 1) == pytest.approx(at)


@settings(max_examples=40)
@given(st.floats(1.01, 10.0), POSITIVE)
def test_supply_less_return_agrees_with_uncertainties(ratio: float, accuracy: float) -> None:
    consumed = ufloat(ratio, ratio * accuracy) - ufloat(ratio - 1, (ratio - 1) * accuracy)
    assert uncertainty.supply_less_return(accuracy, ratio) == pytest.approx(consumed.s, rel=1e-9)


@pytest.mark.parametrize(("rho", "expected"), [(0.4, 17.1), (-0.1, 40), (0.0, 40)])
def test_effective_number(rho: float, expected: float) -> None:
    """Calculated independently by arithmetic, n 40."""
    assert uncertainty.effective_number(40, rho) == pytest.approx(expected, abs=0.05)


def test_autocorrelation() -> None:
    """Calculated independently by arithmetic: of 1..5 it is 4/10, of a zigzag it would be below zero."""
    assert uncertainty.autocorrelation([1, 2, 3, 4, 5]) == pytest.approx(0.4)
    assert uncertainty.autocorrelation([1, -1, 1, -1, 1]) == 0.0
    assert uncertainty.autocorrelation([2, 2, 2, 2]) == 0.0
    assert uncertainty.autocorrelation([1, 2]) == 0.0
    assert uncertainty.autocorrelation([]) == 0.0


DAY_CYCLE = [0.2, 0.5, 0.1, 0.4, 0.7, 0.9, 0.6, 0.8, 0.5, 0.2, 0, 0.3, 0.6, 0.9, 1.0, 0.8]


def test_repeatability_sees_a_slow_cycle() -> None:
    """First differences alone give 0.10484, about the trend 0.31823; calculated independently with scipy."""
    assert uncertainty.repeatability(DAY_CYCLE) == pytest.approx(0.31823, abs=1e-5)


def test_repeatability_sees_a_zigzag() -> None:
    """+1, -1, +1 ...: about the trend 1.4826, first differences 1.4826 * 2/sqrt(2); calculated by arithmetic."""
    assert uncertainty.repeatability([1, -1] * 6 + [1]) == pytest.approx(1.4826 * np.sqrt(2))


def test_repeatability_does_not_take_a_trend_for_scatter() -> None:
    rng = np.random.default_rng(7)
    noise = rng.normal(0, 0.3, 400)
    times = np.arange(400) * 24.0
    flat, steep = uncertainty.repeatability(noise, times), uncertainty.repeatability(noise + 0.01 * times, times)
    assert flat == pytest.approx(0.3, rel=0.2)
    assert steep == pytest.approx(flat, rel=1e-6)


X_60_DAYS = np.arange(60) * 24.0 / 1000
LOTS_OF_20 = np.repeat([1, 2, 3], 20)


@pytest.mark.parametrize(
    ("u_point", "u_lot", "expected"), [(0.30, 0, 0.09318), (0, 0.25, 0.32746), (0.30, 0.25, 0.34046)]
)
def test_slope_over_three_lots(u_point: float, u_lot: float, expected: float) -> None:
    """60 daily points; calculated independently with numpy."""
    assert uncertainty.slope(X_60_DAYS, LOTS_OF_20, u_point, u_lot) == pytest.approx(expected, abs=1e-5)


def test_slope_over_three_lots_by_simulation() -> None:
    """4000 invented series: the least-squares slopes scatter as stated."""
    rng = np.random.default_rng(11)
    noise = rng.normal(0, 0.30, (4000, 60)) + np.repeat(rng.normal(0, 0.25, (4000, 3)), 20, axis=1)
    d = X_60_DAYS - X_60_DAYS.mean()
    assert (noise @ d / (d @ d)).std() == pytest.approx(0.34046, rel=0.05)


def test_slope_inside_one_lot_has_no_lot_term() -> None:
    assert uncertainty.slope(X_60_DAYS, np.ones(60), 0.30, 0.25) == pytest.approx(0.09318, abs=1e-5)


def test_fewer_independent_points_widen_the_slope() -> None:
    assert uncertainty.slope(X_60_DAYS, np.ones(60), 0.30, 0, n_effective=15) == pytest.approx(2 * 0.09318, abs=2e-5)


@pytest.mark.parametrize(
    ("before", "after", "lots"),
    [
        ("AAA", "AAA", 0.0),
        ("AABB", "CCDD", 0.5 + 0.5),
        ("AABBCC", "DDDD", 1 / 3 + 1),
        # One lot on both sides: its error cancels as far as its shares do.
        ("AABB", "BBCC", 0.25 + 0.25),
    ],
)
def test_difference_of_two_windows(before: str, after: str, lots: float) -> None:
    """u_rep^2 + u_lot^2 (1/L_before + 1/L_after) for lots apart; calculated independently by arithmetic."""
    found = uncertainty.window_difference(0.1, list(before), list(after), 0.25)
    assert found == pytest.approx(np.sqrt(0.1**2 + 0.25**2 * lots))


def test_difference_of_two_windows_by_simulation() -> None:
    """20 000 invented pairs of windows with unequal lots, one of them on both sides."""
    rng = np.random.default_rng(4)
    before, after = np.array([0, 0, 0, 1, 2]), np.array([2, 2, 3, 3, 3, 3])
    errors = rng.normal(0, 0.25, (20_000, 4))
    noise = rng.normal(0, 0.30, (20_000, 11))
    d = (errors[:, after] + noise[:, 5:]).mean(axis=1) - (errors[:, before] + noise[:, :5]).mean(axis=1)
    u_rep = 0.30 * np.sqrt(1 / 5 + 1 / 6)
    assert uncertainty.window_difference(u_rep, before, after, 0.25) == pytest.approx(d.std(), rel=0.02)


def test_four_witnesses_that_agree() -> None:
    """Calculated independently with scipy."""
    values = np.log([9800, 9980, 10010, 9960])
    found = uncertainty.agreement(values, [0.015, 0.02, 0.025, 0.03])
    assert np.exp(found.combined) == pytest.approx(9899.4, abs=0.1)
    assert found.z == pytest.approx([-0.916, 0.471, 0.487, 0.216], abs=1e-3)
    assert found.chi2 == pytest.approx(0.856, abs=1e-3)
    assert found.p == pytest.approx(0.836, abs=1e-3)
    assert found.suspect is None


SUSPECTED, FOUR_U = np.log([9450, 9980, 10010, 9960]), np.array([0.015, 0.02, 0.025, 0.03])


def test_four_witnesses_of_which_one_is_only_suspected() -> None:
    """Calculated independently with scipy: p 0.063 is above 0.05, so nobody is accused."""
    found = uncertainty.agreement(SUSPECTED, FOUR_U)
    assert np.exp(found.combined) == pytest.approx(9735.0, abs=0.1)
    assert found.z == pytest.approx([-2.697, 1.443, 1.220, 0.810], abs=1e-3)
    assert found.chi2 == pytest.approx(7.290, abs=1e-3)
    assert found.p == pytest.approx(0.063, abs=1e-3)
    assert found.suspect is None
    assert found.suspect_error is None
    others = uncertainty.agreement(SUSPECTED[1:], FOUR_U[1:])
    assert np.exp(others.combined) == pytest.approx(9984.9, abs=0.1)
    assert others.chi2 == pytest.approx(0.018, abs=1e-3)
    # Leaving the candidate out lowers chi2 by its z squared.
    assert found.chi2 - others.chi2 == pytest.approx(found.z[0] ** 2)


def test_a_witness_found_out_is_named_with_its_error() -> None:
    """The same readings with half the scatter; error calculated independently with scipy: 5.506 % (ln) low."""
    found = uncertainty.agreement(SUSPECTED, FOUR_U / 2)
    assert found.suspect == 0
    assert found.suspect_error is not None
    assert 100 * found.suspect_error == pytest.approx(-5.506, abs=1e-3)


def test_two_estimates_accuse_nobody() -> None:
    found = uncertainty.agreement([0.0, 1.0], [0.01, 0.01])
    assert found.p < 1e-6
    assert found.suspect is None


def test_two_readings_in_a_row_settle_what_one_only_suspects() -> None:
    """chi2 and degrees add: twice 7.290 with 6 degrees; calculated independently with scipy."""
    found = uncertainty.agreement(SUSPECTED, FOUR_U)
    assert found.p == pytest.approx(stats.chi2.sf(found.chi2, 3))
    assert stats.chi2.sf(2 * found.chi2, 6) < 0.05


def test_one_very_sure_witness_keeps_its_residual() -> None:
    """z of a witness 10^9 times surer than the other: both residuals are the difference over its uncertainty."""
    found = uncertainty.agreement([0.0, 1.0], [1e-9, 1.0])
    assert found.z == pytest.approx([-1.0, 1.0])


def test_weighted_mean_has_the_least_uncertainty_uncertainties_can_find() -> None:
    u = np.array([0.015, 0.02, 0.025, 0.03])
    parts = [ufloat(y, s) for y, s in zip(SUSPECTED, u, strict=True)]
    mean = sum(part / s**2 for part, s in zip(parts, u, strict=True)) / (1 / u**2).sum()
    found = uncertainty.agreement(SUSPECTED, u)
    assert found.combined == pytest.approx(mean.n)
    for part, s, z in zip(parts, u, found.z, strict=True):
        residual = part - mean
        assert residual.s == pytest.approx(s * np.sqrt(1 - (mean.s / s) ** 2))
        assert residual.n / residual.s == pytest.approx(z)


def test_of_excess() -> None:
    """Fuel 0.5, power 2, LCV 0.7, a 0.1, reference 0.5 %: 1.0825 points; calculated independently by arithmetic."""
    found = uncertainty.of_excess(
        0.492899, 0.483624, u_reference=0.005, u_ambient=0.001, u_fuel=0.005, u_energy=0.02, u_calorific_value=0.007
    )
    assert 100 * found == pytest.approx(1.0825, abs=1e-4)


@settings(max_examples=40)
@given(POSITIVE, POSITIVE, POSITIVE, POSITIVE, POSITIVE)
def test_of_excess_agrees_with_uncertainties(ref: float, a: float, fuel: float, energy: float, lcv: float) -> None:
    one = [ufloat(1, u) for u in (ref, a, fuel, energy, lcv)]
    excess = 0.49 / (one[0] * one[1]) - 0.48 * umath.exp(umath.log(one[3]) - umath.log(one[2]) - umath.log(one[4]))
    found = uncertainty.of_excess(
        0.49, 0.48, u_reference=ref, u_ambient=a, u_fuel=fuel, u_energy=energy, u_calorific_value=lcv
    )
    assert found == pytest.approx(excess.s, rel=1e-9)


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: uncertainty.repeatability([1, 2]), "at least 3 points; 2 were given"),
        (lambda: uncertainty.agreement([1.0], [0.1]), "at least two values"),
        (lambda: uncertainty.agreement([1.0, 2.0], [0.1]), "an uncertainty for each"),
        (lambda: uncertainty.agreement([1.0, 2.0], [0.1, 0.0]), "above zero"),
        (lambda: uncertainty.agreement([1.0, np.nan], [0.1, 0.1]), "leave out the witness"),
        (lambda: uncertainty.repeatability([1, np.nan, 3, 4]), "leave out what was not read"),
        (lambda: uncertainty.repeatability([1, 2, 3], [5, 5, 5]), "different times"),
        (lambda: uncertainty.repeatability([1, 2, 3], [1, 2]), "of one length; 3 and 2 were given"),
        (lambda: uncertainty.autocorrelation([1, np.nan, 3]), "leave out what was not read"),
        (lambda: uncertainty.of_digits(np.nan, 2), "finite number"),
        (lambda: uncertainty.of_full_scale(1.0, 16.0, 0.0), "reading of zero has no percentage"),
        (lambda: uncertainty.supply_less_return(0.5, 0.9), "1 or more"),
        (lambda: uncertainty.supply_less_return_worst(0.5, 0.9), "1 or more"),
        (lambda: uncertainty.effective_degrees([1, 2], [0, 5]), "degrees above zero"),
        (lambda: uncertainty.effective_degrees([0, 0], [1, 5]), "not all of them zero"),
        (lambda: uncertainty.effective_degrees([1, 2], [5]), "for each its degrees"),
        (lambda: uncertainty.effective_number(40, 1.0), "under 1"),
        (lambda: uncertainty.effective_number(0, 0.2), "needs points"),
        (lambda: uncertainty.slope([1, 1], ["A", "A"], 0.1, 0.1), "different times"),
        (lambda: uncertainty.slope([1, 2, 3], ["A", "A"], 0.1, 0.1), "the lot of every point"),
        (lambda: uncertainty.slope([1], ["A"], 0.1, 0.1), "at least 2 points; 1 was given"),
        (lambda: uncertainty.window_difference(0.1, [], ["A"], 0.1), "at least one point in each"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()


def test_in_an_array_only_the_element_that_cannot_be_is_lost() -> None:
    assert np.isnan(uncertainty.of_full_scale(1.0, 16.0, [4.0, 0.0])).tolist() == [False, True]
    assert np.isnan(uncertainty.supply_less_return(0.5, [2.0, 0.5])).tolist() == [False, True]
