"""The account of a change: every check calculated independently by arithmetic, and exact sums as a property."""

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.physics import account, bounds
from logbook.physics.curve import curve

B0, LCV_REF = 169.0, 42.7
TRIAL = curve([0.25, 0.50, 0.75, 0.90, 1.00], [182.0, 173.5, 169.0, 170.2, 172.1])
ETA_0 = 3600 / (B0 * LCV_REF)


def _reading(
    load: float, ambient: float, lcv: float, meter: float, consumption: float
) -> tuple[float, float, np.ndarray]:
    five = account.factors(consumption, B0, LCV_REF / lcv, ambient, TRIAL(load) / B0, 1 + meter)
    return consumption, 3600 / (consumption * lcv), five


A = _reading(0.60, 1.0075, 40.6, 0.01, 186.4)
B = _reading(0.82, 0.994, 41.8, 0.0, 175.4)


def test_names_and_order_of_the_terms() -> None:
    assert account.TERMS == ("fuel", "ambient", "load", "instrument", "engine")


@pytest.mark.parametrize(
    ("reading", "expected", "total"),
    [(A, [8.95440, 1.32672, 2.16017, 1.76676, 3.19195], 17.4), (B, [3.66788, -1.03619, 0.34448, 0, 3.42384], 6.4)],
)
def test_reading_against_the_reference(
    reading: tuple[float, float, np.ndarray], expected: list[float], total: float
) -> None:
    b, eta, five = reading
    found = account.against_reference(b, B0, five, eta, ETA_0)
    assert found.consumption == pytest.approx(expected, abs=1e-5)
    assert found.consumption.sum() == pytest.approx(total, abs=1e-10)


def test_the_engine_factor_of_the_first_reading() -> None:
    assert 100 * (A[2][4] - 1) == pytest.approx(1.8140, abs=1e-4)


def test_reading_in_points_of_efficiency() -> None:
    b, eta, five = A
    found = account.against_reference(b, B0, five, eta, ETA_0)
    assert 100 * ETA_0 == pytest.approx(49.88706, abs=1e-5)
    assert 100 * eta == pytest.approx(47.56972, abs=1e-5)
    assert 100 * found.efficiency == pytest.approx([0, -0.36403, -0.59272, -0.48477, -0.87582], abs=1e-5)
    assert 100 * found.efficiency.sum() == pytest.approx(-2.31735, abs=1e-5)
    # Engine and instrument together are the excess gap only at reference load and ambient: 1.3606 against 1.3472.
    assert -100 * found.efficiency[3:].sum() == pytest.approx(1.3606, abs=1e-4)


def test_between_two_readings() -> None:
    found = account.between(A[0], A[2], A[1], B[0], B[2], B[1])
    assert found.consumption == pytest.approx([-5.26768, -2.43960, -1.83835, -1.79946, 0.34509], abs=1e-5)
    assert found.consumption.sum() == pytest.approx(-11.0, abs=1e-10)
    assert 100 * B[1] == pytest.approx(49.10171, abs=1e-5)
    assert 100 * found.efficiency == pytest.approx([0, 0.65200, 0.49131, 0.48092, -0.09223], abs=1e-5)
    assert 100 * found.efficiency.sum() == pytest.approx(1.53200, abs=1e-5)


def _period(energy: list[float]) -> account.Account:
    b, eta, lcv = np.array([A[0], B[0]]), np.array([A[1], B[1]]), np.array([40.6, 41.8])
    single = account.against_reference(b, B0, np.column_stack([A[2], B[2]]), eta, ETA_0)
    return account.of_period(single, energy, np.array(energy) * b * lcv, B0)


def test_period_of_two_readings() -> None:
    found = _period([4000, 6000])
    assert found.consumption == pytest.approx([5.78249, -0.09103, 1.07075, 0.70670, 3.33108], abs=1e-5)
    assert B0 + found.consumption.sum() == pytest.approx(179.8, abs=1e-10)
    assert 100 * found.efficiency == pytest.approx([0, 0.02805, -0.30027, -0.19761, -0.94001], abs=1e-5)
    assert 100 * found.efficiency.sum() == pytest.approx(48.47722 - 49.88706, abs=2e-5)
    assert B0 * found.factors.prod() == pytest.approx(179.8)


POSITIVE = st.floats(0.85, 1.18)


@settings(max_examples=40)
@given(
    st.floats(150, 230), st.floats(150, 230), st.floats(39, 43), st.floats(39, 43),
    st.lists(POSITIVE, min_size=6, max_size=6), st.floats(1e3, 1e5), st.floats(1e3, 1e5),
)  # fmt: skip
def test_terms_sum_exactly(
    b_a: float, b_b: float, lcv_a: float, lcv_b: float, shares: list[float], energy_a: float, energy_b: float
) -> None:
    b, lcv, energy = np.array([b_a, b_b]), np.array([lcv_a, lcv_b]), np.array([energy_a, energy_b])
    ambient, load, meter = np.array(shares).reshape(3, 2)
    eta = 3600 / (b * lcv)
    five = account.factors(b, B0, LCV_REF / lcv, ambient, load, meter)
    assert B0 * five.prod(axis=0) == pytest.approx(b)

    single = account.against_reference(b, B0, five, eta, ETA_0)
    assert single.consumption.sum(axis=0) == pytest.approx(b - B0, abs=1e-9)
    assert single.efficiency.sum(axis=0) == pytest.approx(eta - ETA_0, abs=1e-12)

    change = account.between(b_a, five[:, 0], eta[0], b_b, five[:, 1], eta[1])
    assert change.consumption.sum() == pytest.approx(b_b - b_a, abs=1e-9)
    assert change.efficiency.sum() == pytest.approx(eta[1] - eta[0], abs=1e-12)

    period = account.of_period(single, energy, energy * b * lcv, B0)
    pooled = (energy * b).sum() / energy.sum()
    assert period.consumption.sum() == pytest.approx(pooled - B0, abs=1e-9)
    assert period.efficiency.sum() == pytest.approx(3600 * energy.sum() / (energy * b * lcv).sum() - ETA_0, abs=1e-12)
    assert B0 * period.factors.prod() == pytest.approx(pooled)


@settings(max_examples=40)
@given(st.floats(1e-3, 1e3), st.floats(1e-3, 1e3))
def test_log_mean_is_symmetric_and_between_the_two_means(x: float, y: float) -> None:
    found = float(account.log_mean(x, y))
    assert found == pytest.approx(float(account.log_mean(y, x)))
    assert np.sqrt(x * y) * (1 - 1e-12) <= found <= (x + y) / 2 * (1 + 1e-12)


def test_log_mean_of_equal_values() -> None:
    assert account.log_mean(170.0, 170.0) == 170.0
    assert account.log_mean(170.0, 170.0 * (1 + 1e-10)) == pytest.approx(170.0)


@pytest.mark.parametrize("apart", [1e-12, 1e-9, 1e-8, 1e-6])
def test_log_mean_keeps_its_digits_where_the_two_nearly_agree(apart: float) -> None:
    """Against its series, arithmetic mean less d^2/12 for values m -+ d/2 around 1; rel 1e-14."""
    assert account.log_mean(1 - apart / 2, 1 + apart / 2) == pytest.approx(1 - apart**2 / 12, rel=1e-14)


def test_one_meter_for_two_sets() -> None:
    """2000 kWh at 60 % and 3000 kWh at 75 %, a 1.0075, 945 kg, 41.0 MJ/kg: the group's reference is weighted."""
    trial = curve([0.50, 0.75, 0.90, 1.00], [173.5, 169.0, 170.2, 172.1])
    energy, ambient = np.array([2000.0, 3000.0]), 1.0075
    consumption = 945e3 / energy.sum()
    reference = (energy * ambient * trial([0.60, 0.75])).sum() / energy.sum()
    assert consumption == pytest.approx(189.000)
    assert reference == pytest.approx(170.94575, abs=1e-5)
    eta, eta_ref = 3600 / (consumption * 41.0), 3600 / (reference * LCV_REF)
    assert (eta, eta_ref) == pytest.approx((0.464576, 0.493192), abs=1e-6)
    deviation = bounds.consumption_deviation(consumption, 41.0, 1.0, reference, LCV_REF)
    assert 100 * deviation == pytest.approx(6.15965, abs=1e-5)
    assert 100 * bounds.excess_gap(eta_ref, eta) == pytest.approx(2.86163, abs=1e-5)
    # The group's account against its own reference has the engine's term alone, once the fuel is taken out.
    five = account.factors(consumption, reference, LCV_REF / 41.0, 1.0, 1.0)
    assert five[-1] == pytest.approx(1 + deviation)


def test_a_reading_that_cannot_be_has_no_account_and_leaves_the_others_theirs() -> None:
    five = account.factors([180.0, -1.0], B0, 1.0, 1.0, 1.0)
    assert five[:, 0] == pytest.approx([1, 1, 1, 1, 180 / 169])
    assert np.isnan(five[:, 1]).all()
    assert np.isnan(account.log_mean([1.0, 0.0], 2.0)).tolist() == [False, True]


def _of_period(energy: list[float], fuel_energy: list[float], consumption: tuple[float, float] = (180, 175)) -> object:
    b = np.array(consumption, float)
    single = account.against_reference(b, B0, account.factors(b, B0, 1.0, 1.0, 1.0), 3600 / (b * LCV_REF), ETA_0)
    return account.of_period(single, energy, fuel_energy, B0)


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: account.log_mean(0.0, 170.0), "values above zero"),
        (lambda: account.factors(180.0, B0, 1.0, 0.0, 1.0), "consumption and factors above zero"),
        (lambda: _of_period([0, 0], [1, 1]), "energy and fuel energy above zero"),
        (lambda: _of_period([1, 1], [-1, 2]), "energy and fuel energy above zero"),
        (lambda: _of_period([1, 1, 1], [1, 1, 1]), "an account of every reading"),
        (lambda: _of_period([1, 1], [1, 1], (180, np.nan)), "leave out what is not compared"),
        (lambda: _of_period([1, 1], [1]), "of one length; 2 and 1 were given"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()
