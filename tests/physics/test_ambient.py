"""Corrections to reference conditions: ISO 3046-1, percentage rules, an engine's own sensitivity."""

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy.stats import linregress

from logbook.physics import ambient
from logbook.physics.curve import curve
from logbook.physics.humidity import vapour_pressure

NATURALLY_ASPIRATED = "diesel or dual-fuel, naturally aspirated, limited by excess air"
CHARGE_COOLED = "turbocharged four-stroke, charge-air cooler"


def test_textbook_site() -> None:
    """Mathur & Sharma, Internal Combustion Engine, ex. 27.1: 366.8 kW, 228.8 g/kWh."""
    found = ambient.iso_3046(
        NATURALLY_ASPIRATED, 87e3, 45.0, 0.80 * 9.6e3,
        mechanical_efficiency=0.85, reference_vapour_pressure_pa=0.30 * 3.2e3,
    )  # fmt: skip
    assert (found.k, found.alpha, found.beta) == pytest.approx((0.76281, 0.73351, 1.03995), abs=1e-5)
    assert 500 * found.alpha == pytest.approx(366.8, abs=0.06)
    assert 220 * found.beta == pytest.approx(228.8, abs=0.06)


@pytest.mark.parametrize(
    ("kind", "pressure", "air", "humidity", "coolant", "eta", "k", "alpha", "beta"),
    [(NATURALLY_ASPIRATED, 87e3, 45, 0.50, None, 0.80, 0.79046, 0.75379, 1.04865),
     (NATURALLY_ASPIRATED, 100e3, 45, 0.60, None, 0.80, 0.90625, 0.88984, 1.01844),
     (CHARGE_COOLED, 100e3, 45, 0.30, 32.0, 0.80, 0.90378, 0.88694, 1.01898),
     (CHARGE_COOLED, 96e3, 38, 0.30, 34.0, 0.85, 0.89622, 0.88340, 1.01451),
     (CHARGE_COOLED, 100e3, 45, 0.30, None, 0.80, 0.92501, 0.91189, 1.01439)],
)  # fmt: skip
def test_site_factors(
    kind: str, pressure: float, air: float, humidity: float, coolant: float | None, eta: float,
    k: float, alpha: float, beta: float,
) -> None:  # fmt: skip
    """Calculated independently by arithmetic with Buck's vapour pressures."""
    found = ambient.iso_3046(
        kind, pressure, air, vapour_pressure(air, humidity), coolant, eta
    )  # fmt: skip
    assert (found.k, found.alpha, found.beta) == pytest.approx((k, alpha, beta), abs=1e-5)


@pytest.mark.parametrize("kind", list(ambient.ISO_3046))
@pytest.mark.parametrize("coolant", [None, 25.0])
def test_factors_are_one_at_reference(kind: str, coolant: float | None) -> None:
    found = ambient.iso_3046(kind, 100e3, 25.0, vapour_pressure(25.0, 0.30), coolant)
    assert (found.k, found.alpha, found.beta) == pytest.approx((1.0, 1.0, 1.0), abs=1e-12)


def test_the_reference_vapour_pressure_is_that_of_30_percent_at_25_degrees() -> None:
    """Calculated independently by arithmetic with Buck's formula: 950.56 Pa."""
    assert pytest.approx(950.56, abs=0.005) == ambient.REFERENCE_VAPOUR_PRESSURE_PA


@pytest.mark.parametrize(("kind", "counts"), [(kind, row.a == 1) for kind, row in ambient.ISO_3046.items()])
def test_humidity_is_asked_for_where_it_counts_and_only_there(kind: str, counts: bool) -> None:
    if counts:
        with pytest.raises(ValueError, match="Humidity counts"):
            ambient.iso_3046(kind, 98e3, 30.0)
        assert ambient.iso_3046(kind, 98e3, 30.0, 3000.0).k < ambient.iso_3046(kind, 98e3, 30.0, 1000.0).k
    else:
        without = ambient.iso_3046(kind, 98e3, 30.0)
        assert ambient.iso_3046(kind, 98e3, 30.0, 3000.0) == without
        # A humidity that was not read takes nothing away where it does not count.
        assert ambient.iso_3046(kind, 98e3, 30.0, float("nan")) == without


@pytest.mark.parametrize(
    ("kind", "a", "m", "n", "s"),
    [
        ("diesel or dual-fuel, naturally aspirated, limited by excess air", 1, 1, 0.75, 0),  # Mathur & Sharma ex. 27.1
        ("diesel or dual-fuel, naturally aspirated, limited thermally", 0, 1, 1, 0),  # from memory
        ("turbocharged four-stroke, no charge-air cooler", 0, 0.7, 2.0, 0),  # a public rating procedure, a from memory
        ("turbocharged four-stroke, charge-air cooler", 0, 0.7, 1.2, 1),  # Mathur & Sharma ex. 27.2
        ("spark gas, naturally aspirated", 1, 0.86, 0.55, 0),  # a public generating-set rating procedure
        ("spark gas, turbocharged, cooler", 0, 0.57, 0.55, 1.75),  # from memory, low confidence
        ("spark petrol, naturally aspirated", 1, 1, 0.5, 0),  # a public generating-set rating procedure
    ],
)
def test_exponents_by_the_words_of_the_table(kind: str, a: float, m: float, n: float, s: float) -> None:
    row = ambient.exponents(kind)
    assert (row.a, row.m, row.n, row.s) == (a, m, n, s)
    assert row.standing


def test_the_words_of_the_table_are_all_there() -> None:
    assert len(ambient.ISO_3046) == 7


@settings(max_examples=40)
@given(
    st.sampled_from(list(ambient.ISO_3046)), st.floats(75e3, 108e3), st.floats(-10, 50), st.floats(0, 1),
    st.floats(5, 40), st.floats(0.7, 0.98),
)  # fmt: skip
def test_consumption_rises_whenever_k_is_below_one(
    kind: str, pressure: float, air: float, humidity: float, coolant: float, eta: float
) -> None:
    found = ambient.iso_3046(kind, pressure, air, vapour_pressure(air, humidity), coolant, eta)
    assume(abs(found.k - 1) > 1e-9)
    assert (found.beta > 1) == (found.k < 1)
    assert (found.alpha < found.k) == (found.k < 1)
    assert found.beta * found.alpha == pytest.approx(found.k)


@settings(max_examples=40)
@given(st.floats(80e3, 105e3), st.floats(0, 45))
def test_alpha_becomes_k_without_friction(pressure: float, air: float) -> None:
    found = ambient.iso_3046(CHARGE_COOLED, pressure, air, mechanical_efficiency=1.0)
    assert found.alpha == pytest.approx(found.k)
    assert found.beta == pytest.approx(1.0)


def test_no_power_is_left_at_the_least_k() -> None:
    """Calculated independently by arithmetic: at eta_m 0.8 the least k is c/(1 + c) = 0.14894, c = 0.175."""
    assert 0 < ambient.power_and_consumption(0.14894 + 1e-5, 0.8).alpha < 2e-5
    with pytest.raises(ValueError, match="no power"):
        ambient.power_and_consumption(0.14894 - 1e-5, 0.8)
    # At eta_m 0.5 it is 0.41176, which 45 degC and 45 kPa reach.
    kind = "diesel or dual-fuel, naturally aspirated, limited thermally"
    found = ambient.iso_3046(kind, np.array([45e3, 43e3]), 45.0, mechanical_efficiency=0.5)
    assert found.k == pytest.approx([0.45 * 298 / 318, 0.43 * 298 / 318])
    assert found.alpha[0] > 0
    assert np.isnan(found.alpha[1])
    assert np.isnan(found.beta[1])


def test_a_coolant_not_read_leaves_its_term_out_in_an_array_too() -> None:
    found = ambient.iso_3046(CHARGE_COOLED, 100e3, 45.0, coolant_c=np.array([32.0, np.nan]))
    assert found.beta == pytest.approx([1.01898, 1.01439], abs=1e-5)


def test_expected_consumption_on_both_readings_of_the_standard() -> None:
    """At 75 % load, 45 degC, coolant 32 degC; calculated independently with scipy's PCHIP."""
    trial = curve([0.25, 0.50, 0.75, 0.90, 1.00], [182.0, 173.5, 169.0, 170.2, 172.1])
    site = ambient.iso_3046(CHARGE_COOLED, 100e3, 45.0, coolant_c=32.0)
    assert trial(0.75) * site.beta == pytest.approx(172.208, abs=1e-3)
    adjusted = 0.75 / site.alpha
    assert 100 * adjusted == pytest.approx(84.560, abs=1e-3)
    assert trial(adjusted) == pytest.approx(169.5853, abs=1e-4)
    assert trial(adjusted) * site.beta == pytest.approx(172.804, abs=1e-3)


@pytest.mark.parametrize(
    ("coefficients", "consumption", "blower", "coolant", "mbar", "lcv", "percent", "expected"),
    [(ambient.POWER_READJUSTED, 172.0, 30, 29, 1005, 41.0, 0.330, 164.609),
     (ambient.POWER_READJUSTED, 176.5, 38, 36, 1012, 40.9, 0.896, 167.558),
     (ambient.POWER_READJUSTED, 170.0, 25, 25, 1000, 42.7, 0.0, 170.0),
     (ambient.NOT_READJUSTED, 170.0, 25, 25, 1000, 42.7, 0.0, 170.0)],
)  # fmt: skip
def test_percentage_rules(
    coefficients: tuple[float, float, float], consumption: float, blower: float, coolant: float, mbar: float,
    lcv: float, percent: float, expected: float,
) -> None:  # fmt: skip
    """Start values from memory, to be overwritten from the maker's guide; calculated independently by arithmetic."""
    factor = ambient.percentage_rules(blower, mbar, coolant, *coefficients)
    assert 100 * (factor - 1) == pytest.approx(percent, abs=1e-3)
    assert consumption * (lcv / 42.7) / factor == pytest.approx(expected, abs=1e-3)


def test_percentage_rules_without_the_coolant() -> None:
    """Calculated independently by arithmetic: +0.820 %, coolant not read +0.400 %."""
    with_and_without = ambient.percentage_rules(45.0, 1000.0, np.array([32.0, np.nan]), *ambient.POWER_READJUSTED)
    assert 100 * (with_and_without - 1) == pytest.approx([0.820, 0.400], abs=1e-9)
    assert ambient.percentage_rules(45.0, 1000.0, None, *ambient.POWER_READJUSTED) == pytest.approx(1.004)


SUCTION = [18, 21, 24, 27, 30, 33, 36, 39]
LOG_RATIO = [-0.31, -0.12, -0.08, 0.10, 0.22, 0.19, 0.46, 0.41]


def test_own_sensitivity() -> None:
    """Calculated independently with numpy."""
    found = ambient.own_sensitivity(SUCTION, LOG_RATIO)
    assert (found.c0, found.c1, found.u_c1, found.scatter) == pytest.approx(
        (-0.01444, 0.35198, 0.03524, 0.06852), abs=1e-5
    )
    assert found.usable
    assert found.factor(25.0) == 1.0
    assert found.factor(35.0) == pytest.approx(np.exp(0.0035198), abs=1e-7)
    assert found.relative_u(np.array([5.0, 25.0, 35.0])) == pytest.approx([7.048e-4, 0.0, 3.524e-4], abs=1e-7)


def test_own_sensitivity_beside_wear_over_a_long_span() -> None:
    """Made of c0 0.1, c1 0.35, c2 0.4 exactly: a span of 700 hours gives all three back, 500 hours fit no wear."""
    t, hours = np.array(SUCTION, float), np.array([0.0, 700, 100, 600, 200, 500, 300, 400])
    made = 0.1 + 0.35 * (t - 25) / 10 + 0.4 * hours / 1000
    found = ambient.own_sensitivity(t, made, hours)
    assert (found.c0, found.c1, found.c2, found.u_c1) == pytest.approx((0.1, 0.35, 0.4, 0.0), abs=1e-9)
    short = ambient.own_sensitivity(t, made, hours * 500 / 700)
    assert short == ambient.own_sensitivity(t, made)
    assert short.c2 == 0


@settings(max_examples=40)
@given(st.lists(st.floats(-0.5, 0.5), min_size=8, max_size=8))
def test_own_sensitivity_agrees_with_scipy(errors: list[float]) -> None:
    """linregress, live."""
    y = np.array(LOG_RATIO) + errors
    assume(np.ptp(y) > 1e-3)
    line = linregress((np.array(SUCTION) - 25) / 10, y)
    found = ambient.own_sensitivity(SUCTION, y)
    assert (found.c0, found.c1, found.u_c1) == pytest.approx((line.intercept, line.slope, line.stderr), abs=1e-9)


def test_own_sensitivity_with_fewer_independent_points_is_less_certain() -> None:
    found = ambient.own_sensitivity(SUCTION, LOG_RATIO, n_effective=0.5)
    assert found.u_c1 == pytest.approx(4 * 0.03524, abs=5e-5)
    assert not found.usable


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: ambient.exponents("two-stroke"), "no kind of engine here; there are: diesel"),
        (lambda: ambient.iso_3046(CHARGE_COOLED, 1000.0, 25.0), "barometer must be in Pa"),
        (lambda: ambient.iso_3046(CHARGE_COOLED, 1e5, 298.0), "air must be in degC"),
        (lambda: ambient.iso_3046(CHARGE_COOLED, 1e5, 25.0, coolant_c=298.0), "coolant must be in degC"),
        (lambda: ambient.iso_3046(NATURALLY_ASPIRATED, 1e5, 25.0, 2e5), "part of the barometer"),
        (lambda: ambient.percentage_rules(25, 1.0, 25, 0.6, 0.2, -0.02), "barometer must be in mbar"),
        (lambda: ambient.percentage_rules(298, 1000, 25, 0.6, 0.2, -0.02), "air must be in degC"),
        (lambda: ambient.iso_3046(CHARGE_COOLED, 1e5, 25.0, mechanical_efficiency=85), "between 0 and 1"),
        (lambda: ambient.own_sensitivity([25, 25, 25], [0, 1, 2]), "different suction temperatures"),
        (lambda: ambient.own_sensitivity([25, 35], [0, 1]), "at least 3 points"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()
