"""Before and after, against scipy's t-test."""

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from logbook.physics import compare

CHANGED = ([171.2, 172.0, 170.8, 171.9, 171.5, 171.1], [169.8, 170.6, 169.9, 170.9, 170.1, 169.6])
UNCERTAIN = ([171.2, 173.9, 169.0, 172.8, 170.1], [170.5, 172.6, 168.3, 171.4, 169.9, 173.0])


@pytest.mark.parametrize(
    ("sides", "fall", "error", "degrees", "low", "high", "changed"),
    [(CHANGED, 1.26667, 0.28067, 9.9616, 0.64096, 1.89237, True),
     (UNCERTAIN, 0.45000, None, 8.1610, -2.17042, 3.07042, False)],
)  # fmt: skip
def test_welch(
    sides: tuple[list[float], list[float]], fall: float, error: float | None, degrees: float, low: float, high: float,
    changed: bool,
) -> None:  # fmt: skip
    """Calculated independently with scipy's ttest_ind; the module states after less before."""
    found = compare.welch(*sides)
    assert -found.difference == pytest.approx(fall, abs=1e-5)
    assert found.degrees == pytest.approx(degrees, abs=1e-4)
    assert (-found.high, -found.low) == pytest.approx((low, high), abs=1e-5)
    assert found.changed is changed
    if error is not None:
        assert found.standard_error == pytest.approx(error, abs=1e-5)
        assert found.p == pytest.approx(0.00113, abs=1e-5)


SIDE = st.lists(st.integers(1600, 1800), min_size=3, max_size=12, unique=True)


@settings(max_examples=40)
@given(SIDE, SIDE)
def test_welch_agrees_with_scipy(before: list[int], after: list[int]) -> None:
    found = compare.welch(before, after)
    theirs = stats.ttest_ind(after, before, equal_var=False)
    interval = theirs.confidence_interval()
    assert found.p == pytest.approx(theirs.pvalue, rel=1e-9)
    assert found.degrees == pytest.approx(theirs.df)
    assert (found.low, found.high) == pytest.approx((interval.low, interval.high))


def test_another_lot_widens_the_interval() -> None:
    found = compare.welch(*CHANGED, u_lot=0.5)
    assert found.standard_error == pytest.approx(np.hypot(0.28067, 0.5), abs=1e-5)
    assert not found.changed


@pytest.mark.parametrize(("scatter", "change", "expected"), [(1, 1, 16), (1, 2, 4), (2, 1, 63), (2, 2, 16), (3, 1, 142),
                                                             (3, 2, 36), (1.86056, 1.7, 19)])  # fmt: skip
def test_readings_needed(scatter: float, change: float, expected: int) -> None:
    """Calculated independently with scipy."""
    assert compare.readings_needed(scatter, change) == expected
    assert compare.readings_needed(scatter, -change) == expected


def test_pooled_scatter_of_the_second_example() -> None:
    """1.86056; calculated independently with numpy."""
    pooled = np.sqrt(sum((np.size(s) - 1) * np.var(s, ddof=1) for s in UNCERTAIN) / (sum(map(len, UNCERTAIN)) - 2))
    assert pooled == pytest.approx(1.86056, abs=1e-5)


@pytest.mark.parametrize(
    ("scatter", "change", "exact"), [(1, 1, 17), (1, 2, 6), (2, 1, 64), (2, 2, 17), (3, 1, 143), (3, 2, 37)]
)
def test_with_its_allowance_the_formula_reaches_the_power_of_the_exact_test(
    scatter: float, change: float, exact: int
) -> None:
    """Exact n by the non-central t distribution; calculated independently with scipy."""

    def power(n: int) -> float:
        degrees, shift = 2 * n - 2, change / scatter * np.sqrt(n / 2)
        return float(stats.nct.sf(stats.t.ppf(0.975, degrees), degrees, shift))

    assert compare.still_needed(scatter, change, 0) == exact
    assert power(exact) >= 0.80 > power(exact - 1)


def test_at_least_one_more_reading_is_asked_for() -> None:
    assert compare.still_needed(1, 1, present=12) == 5
    assert compare.still_needed(1, 1, present=200) == 1


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: compare.welch([1, 2], [1, 2, 3]), "at least 3 readings a side; 2 and 3 were given"),
        (lambda: compare.welch([1, 1, 1], [2, 2, 2]), "do not scatter"),
        (lambda: compare.welch([1, 2, np.nan], [1, 2, 3]), "leave out what was not read"),
        (lambda: compare.welch([], [1, 2, 3]), "0 and 3 were given"),
        (lambda: compare.readings_needed(np.nan, 1), "above zero"),
        (lambda: compare.readings_needed(1, np.nan), "not zero"),
        (lambda: compare.readings_needed(1, 1, confidence=1.0), "between 0 and 1"),
        (lambda: compare.readings_needed(1, 1, power=0.0), "between 0 and 1"),
        (lambda: compare.readings_needed(0, 1), "above zero"),
        (lambda: compare.readings_needed(1, 0), "not zero"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()
