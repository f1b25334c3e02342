"""Cumulative sums and one change point, against ruptures and scipy."""

from collections.abc import Callable

import numpy as np
import pytest
import ruptures
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.signal import lfilter
from scipy.stats import rankdata
from statsmodels.datasets import nile

from logbook.physics import detect

TABLE_16_8 = [102.0, 94.8, 98.3, 98.4, 102.0, 98.5, 99.0, 97.7, 100.0, 98.1, 101.3, 98.7, 101.1, 98.4, 97.0, 96.7,
              100.3, 101.4, 97.2, 101.0]  # fmt: skip
STEP = [0.4, -0.3, 0.6, 0.1, -0.5, 0.2, 0.7, -0.2, 0.3, -0.1, 0.2, 1.9, 2.6, 1.8, 2.2, 2.9, 1.7, 2.4, 2.1, 2.5]


def test_cusum() -> None:
    """Montgomery & Runger, Applied Statistics and Probability for Engineers, table 16-8."""
    found = detect.cusum(TABLE_16_8, 99, 1, 10)
    high = [2.0, 0, 0, 0, 2.0, 0.5, 0, 0, 0, 0, 1.3, 0, 1.1, 0, 0, 0, 0.3, 1.7, 0, 1.0]
    low = [0, 3.2, 2.9, 2.5, 0, 0, 0, 0.3, 0, 0, 0, 0, 0, 0, 1.0, 2.3, 0, 0, 0.8, 0]
    assert found.high == pytest.approx(high, abs=1e-9)
    assert found.low == pytest.approx(low, abs=1e-9)
    assert found.first_signal is None
    assert found.since is None


@pytest.mark.parametrize("sign", [1, -1])
def test_cusum_signals_a_step_and_says_since_when(sign: int) -> None:
    """Signal at the 13th, since the 12th; calculated independently with numpy."""
    found = detect.cusum(sign * np.array(STEP), sign * 0.127, 0.5 * 0.38, 5 * 0.38)
    assert found.first_signal == 12
    assert found.since == 11


def test_cusum_that_never_was_zero_began_at_the_first_point() -> None:
    assert detect.cusum([2, 2, 2], 0, 0.5, 4).since == 0


@pytest.mark.parametrize(("points_between_calls", "limit"), [(1825, 6.36), (9125, 7.96), (36_500, 9.35)])
def test_limit_for_a_rate_of_false_calls(points_between_calls: int, limit: float) -> None:
    """White noise, K 0.5 s, both sides; calculated independently here by a Markov chain of the upper sum."""
    from scipy.stats import norm

    states = 200
    width = 2 * limit / (2 * states - 1)
    middle = np.arange(states) * width
    upper = norm.cdf(middle[None, :] + width / 2 - middle[:, None] + 0.5)
    step = np.diff(upper, axis=1, prepend=0.0)
    run = np.linalg.solve(np.eye(states) - step, np.ones(states))[0]
    # Two sides call twice as often as one.
    assert run / 2 == pytest.approx(points_between_calls, rel=0.03)


def test_cusum_calls_as_often_as_the_chain_says() -> None:
    """K 0.5 s, H 4 s: once in 168 points (both sides), the textbook's example; 20 000 points of white noise."""
    values, calls, start = np.random.default_rng(3).normal(size=20_000), 0, 0
    while True:
        found = detect.cusum(values[start : start + 1000], 0, 0.5, 4)
        if found.first_signal is None:
            break
        calls, start = calls + 1, start + found.first_signal + 1
    assert values.size / calls == pytest.approx(168, rel=0.2)


@pytest.mark.parametrize(
    ("limit", "rho", "u_lot", "allowance", "between_calls"),
    [(5, 0.0, 0.0, 0.5, 465), (5, 0.3, 0.0, 0.5, 97), (22, 0.0, 0.5, 0.5, 700), (5, 0.0, 0.5, 1.5, 3200)],
)
def test_false_calls_come_oftener_with_memory_and_with_lots(
    limit: float, rho: float, u_lot: float, allowance: float, between_calls: float
) -> None:
    """All in units of s, both sides, lots of 30 points; calculated independently by simulation, +-10 %."""
    rng = np.random.default_rng(6)
    length, calls, points = 80 * between_calls, 0, 0
    noise = lfilter([np.sqrt(1 - rho**2)], [1, -rho], rng.normal(size=length + 100))[100:]
    y = noise + np.repeat(rng.normal(0, u_lot, length // 30 + 1), 30)[:length]
    while points < length:
        found = detect.cusum(y[points : points + 3 * between_calls], 0, allowance, limit)
        calls += found.first_signal is not None
        points += 3 * between_calls if found.first_signal is None else found.first_signal + 1
    assert length / calls == pytest.approx(between_calls, rel=0.3)


def test_change_point() -> None:
    """Calculated independently with ruptures, scipy and numpy."""
    found = detect.change_point(STEP)
    assert found.after == 11
    assert (found.before_mean, found.after_mean) == pytest.approx((0.12727, 2.23333), abs=1e-5)
    assert (found.total_sum_of_squares, found.sum_of_squares) == pytest.approx((24.6375, 2.68182), abs=1e-5)
    assert found.k == 99
    assert found.p == pytest.approx(0.00182, abs=5e-6)


def test_since_interval_of_the_change() -> None:
    """The 11th alone: 10th 6.397 and 12th 5.438 against 3.254; calculated independently with numpy."""
    found = detect.change_point(STEP)
    assert found.costs[[9, 11]] == pytest.approx([6.397, 5.438], abs=1e-3)
    scatter = np.sqrt(found.sum_of_squares / (len(STEP) - 2))
    assert found.sum_of_squares + 3.84 * scatter**2 == pytest.approx(3.254, abs=1e-3)
    assert found.since(scatter) == (11, 11)
    assert found.since(scatter, n_effective_ratio=5) == (11, 12)
    assert found.since(scatter, n_effective_ratio=7) == (10, 12)


@settings(max_examples=40)
@given(st.lists(st.integers(-50, 50), min_size=4, max_size=40))
def test_change_point_agrees_with_ruptures(values: list[int]) -> None:
    y = np.array(values, float)
    found = detect.change_point(y)
    cost = ruptures.costs.CostL2().fit(y.reshape(-1, 1))
    splits = [cost.error(0, k) + cost.error(k, y.size) for k in range(1, y.size)]
    assert found.costs == pytest.approx(splits, abs=1e-6)
    assert found.sum_of_squares == pytest.approx(min(splits), abs=1e-6)


def test_dynamic_programming_of_ruptures_finds_the_same_split() -> None:
    assert ruptures.Dynp(model="l2", min_size=1, jump=1).fit(np.array(STEP)).predict(n_bkps=1) == [11, 20]


@settings(max_examples=40)
@given(st.lists(st.integers(-5, 5), min_size=4, max_size=30))
def test_pettitt_from_its_definition(values: list[int]) -> None:
    """K is the largest |sum of signs between the two sides|, and so by ranks; ties share theirs."""
    y = np.array(values, float)
    signs = np.sign(y[:, None] - y[None, :])
    by_signs = max(abs(signs[:k, k:].sum()) for k in range(1, y.size))
    ranks = rankdata(y)
    by_ranks = max(abs(2 * ranks[:k].sum() - k * (y.size + 1)) for k in range(1, y.size))
    found = detect.change_point(y)
    assert found.k == pytest.approx(by_signs)
    assert found.k == pytest.approx(by_ranks)
    assert 0 <= found.p <= 1


def test_the_nile_at_aswan_fell_in_1898() -> None:
    """Annual flow 1871-1970 (data of statsmodels): the change after 1898 is published by Cobb, Biometrika 65 (1978).

    The split agrees with ruptures; cumulative sums against the first twenty years date it to the same year, +-1.
    """
    data = nile.load_pandas().data
    flow, year = data["volume"].to_numpy(float), data["year"].to_numpy(int)
    found = detect.change_point(flow)
    assert year[found.after - 1] == 1898
    assert ruptures.Dynp(model="l2", min_size=1, jump=1).fit(flow).predict(n_bkps=1) == [found.after, 100]
    assert found.p < 1e-5
    scatter = float(np.sqrt(found.sum_of_squares / 98))
    first, last = found.since(scatter)
    assert first <= found.after <= last
    assert last - first <= 5
    clean = flow[:20]
    s = float(clean.std(ddof=1))
    signal = detect.cusum(flow, float(clean.mean()), 0.5 * s, 5 * s)
    assert signal.since is not None
    assert abs(int(year[signal.since]) - 1899) <= 1


def test_noise_alone_is_not_accepted_as_a_change() -> None:
    noise = np.random.default_rng(5).normal(size=(200, 30))
    accepted = sum(detect.change_point(row).p < 0.05 for row in noise)
    assert accepted <= 20


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: detect.cusum([1, 2], 0, -1, 5), "not below zero"),
        (lambda: detect.cusum([1, 2], 0, 1, 0), "limit above zero"),
        (lambda: detect.cusum([1, 2], np.nan, 1, 1), "needs a target"),
        # max(0, NaN) is 0: the sum would begin anew without a word.
        (lambda: detect.cusum([1, np.nan, 5, 5], 0, 1, 3), "leave out what was not read"),
        (lambda: detect.cusum([], 0, 1, 3), "at least 1 point; 0 were given"),
        (lambda: detect.change_point([1, 2, np.nan, 4]), "leave out what was not read"),
        (lambda: detect.change_point(STEP).since(np.nan), "a scatter not below zero"),
        (lambda: detect.change_point(STEP).since(1.0, 0.5), "1 or more"),
        (lambda: detect.change_point([1, 2, 3]), "at least 4 points; 3 were given"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()
