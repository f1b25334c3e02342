"""Gas properties against independent calculations and a general reference library."""

from collections.abc import Callable

import cantera as ct
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from logbook.physics import gas

RNG_T = st.floats(210, 3000)


@pytest.mark.parametrize(
    ("name", "cp_298", "cp_1000", "rise", "formation"),
    [("N2", 29.1242, 32.6828, 21.465, 0), ("O2", 29.3782, 34.8830, 22.707, 0),
     ("CO2", 37.1352, 54.3209, 33.397, -393.508), ("H2O", 33.5875, 41.2947, 26.003, -241.825)],
)  # fmt: skip
def test_single_gases(name: str, cp_298: float, cp_1000: float, rise: float, formation: float) -> None:
    """Calculated independently with cantera 3.2 (file nasa_gas.yaml)."""
    moles = np.zeros(5)
    moles[gas.GASES.index(name)] = 1
    mix = gas.mixture(moles)
    assert gas.heat_capacity(mix, 298.15) == pytest.approx(cp_298, rel=1e-4)
    assert gas.heat_capacity(mix, 1000.0) == pytest.approx(cp_1000, rel=1e-4)
    assert gas.enthalpy(mix, 1000.0) / 1e3 == pytest.approx(rise, abs=1e-3)
    assert mix.datum / 1e3 == pytest.approx(formation, abs=2e-3)


def test_dry_air_as_a_mixture() -> None:
    """Mole fractions normalised from 1.00004; calculated independently by arithmetic."""
    assert gas.X_O2 == pytest.approx(0.209452, abs=5e-7)
    assert gas.M_AIR * 1e3 == pytest.approx(28.96633, abs=5e-6)
    assert pytest.approx(287.039, abs=1e-3) == gas.AIR_GAS_CONSTANT
    assert gas.X_O2 * gas.MOLAR_MASS[1] / gas.M_AIR == pytest.approx(0.23137, abs=5e-6)


@pytest.mark.parametrize(
    ("t", "cp", "k", "h", "u", "s0"),
    [
        (250, 1.0029, 1.4010, 250.01, 178.25, 1.51904),
        (300, 1.0048, 1.3999, 300.19, 214.08, 1.70203),
        (400, 1.0142, 1.3948, 401.08, 286.27, 1.99221),
        (600, 1.0505, 1.3760, 607.22, 435.00, 2.40964),
        (800, 1.0986, 1.3537, 822.07, 592.44, 2.71834),
        (1000, 1.1407, 1.3363, 1046.28, 759.24, 2.96832),
        (1200, 1.1714, 1.3246, 1277.58, 933.13, 3.17908),
        (1800, 1.2370, 1.3022, 2001.88, 1485.21, 3.66765),
        (2000, 1.2519, 1.2975, 2250.82, 1676.74, 3.79878),
    ],
)
def test_dry_air(t: float, cp: float, k: float, h: float, u: float, s0: float) -> None:
    """Calculated independently with cantera 3.2; datum of Moran & Shapiro, table A-22 (printed u(300) 214.07)."""
    air = gas.air_state(t)
    assert air.cp / 1e3 == pytest.approx(cp, abs=6e-5)
    assert air.k == pytest.approx(k, abs=6e-5)
    assert air.h / 1e3 == pytest.approx(h, abs=0.02)
    assert air.u / 1e3 == pytest.approx(u, abs=0.02)
    assert air.s0 / 1e3 == pytest.approx(s0, abs=2e-5)


@pytest.mark.parametrize(
    ("lam", "molar_mass", "fractions", "states"),
    [
        (
            2.0,
            29.0216,
            (0.75623, 0.10143, 0.00905, 0.07034, 0.06296),
            ((1031.21, 1.3847), (1201.26, 1.3132), (1317.95, 1.2778)),
        ),
        (
            3.0,
            29.0036,
            (0.76425, 0.13667, 0.00914, 0.04752, 0.04242),
            ((1022.61, 1.3895), (1181.52, 1.3204), (1291.57, 1.2853)),
        ),
    ],
)
def test_lean_products(
    lam: float, molar_mass: float, fractions: tuple[float, ...], states: tuple[tuple[float, float], ...]
) -> None:
    """CH1.8; calculated independently with numpy on the same polynomials."""
    moles = gas.product_moles(lam, 1.8)
    assert moles / moles.sum() == pytest.approx(fractions, abs=1e-5)
    assert gas.products(lam, 1.8).mass / moles.sum() * 1e3 == pytest.approx(molar_mass, abs=1e-4)
    for t, (cp, k) in zip((300, 1000, 1800), states, strict=True):
        state = gas.product_state(t, lam, 1.8)
        assert state.cp == pytest.approx(cp, rel=1e-4)
        assert state.k == pytest.approx(k, abs=1e-4)


def test_products_at_1000_k() -> None:
    """h 780.569, u 579.495 kJ/kg (lambda 2.0, CH1.8), counted from 298.15 K; calculated independently with numpy."""
    state = gas.product_state(1000.0, 2.0, 1.8)
    assert state.h / 1e3 == pytest.approx(780.569, abs=0.01)
    assert state.u / 1e3 == pytest.approx(579.495, abs=0.01)


def test_mass_is_kept() -> None:
    lam, y = np.meshgrid([1.0, 2.0, 4.0], [1.4, 1.8, 4.0])
    assert gas.products(lam, y).mass == pytest.approx(1 + gas.fuel_air_ratio(lam, y))


@pytest.mark.parametrize(("y", "afr"), [(1.8, 14.504), (1.85, 14.576), (1.9, 14.648), (4.0, 17.24)])
def test_air_need_of_a_carbon_atom(y: float, afr: float) -> None:
    """Calculated independently by arithmetic; methane 17.24."""
    assert gas.air_fuel_ratio(y) == pytest.approx(afr, rel=5e-4)


def test_octane_needs_what_the_textbook_says() -> None:
    """Moran & Shapiro, Fundamentals of Engineering Thermodynamics, ex. 13.1: 15.09 with air of 1:3.76."""
    assert gas.air_fuel_ratio(18 / 8) == pytest.approx(15.09, rel=4e-3)
    assert 1.5 * gas.air_fuel_ratio(18 / 8) == pytest.approx(22.6, rel=5e-3)


@pytest.mark.parametrize("name", gas.GASES)
def test_the_branches_meet_at_1000_k(name: str) -> None:
    """Each gas within 5e-9 in cp, h and s, h with its formation part; calculated independently by arithmetic."""
    moles = np.zeros(5)
    moles[gas.GASES.index(name)] = 1
    mix = gas.mixture(moles)
    below, above = np.nextafter(1000.0, 0), 1000.0
    assert gas.heat_capacity(mix, below) == pytest.approx(gas.heat_capacity(mix, above), rel=5e-9)
    assert gas.entropy(mix, below) == pytest.approx(gas.entropy(mix, above), rel=5e-9)
    absolute = [gas.enthalpy(mix, t) + mix.datum for t in (below, above)]
    assert absolute[0] == pytest.approx(absolute[1], rel=5e-9)


@given(st.lists(st.floats(900, 1100), min_size=2, max_size=8))
def test_each_element_takes_its_own_branch(temperatures: list[float]) -> None:
    t = np.array(temperatures)
    for function in (gas.heat_capacity, gas.enthalpy, gas.entropy):
        assert function(gas.AIR, t).tolist() == [function(gas.AIR, each) for each in temperatures]


@given(st.floats(250, 999) | st.floats(1001, 3000), st.floats(1.0, 5.0), st.floats(1.4, 4.0))
def test_heat_capacity_is_the_slope_of_enthalpy_and_entropy(t: float, lam: float, y: float) -> None:
    """dh = cp dT and ds = cp dT/T, by central differences of our own polynomials on either side of their seam."""
    mix, step = gas.products(lam, y), 0.01
    cp = gas.heat_capacity(mix, t)
    assert (gas.enthalpy(mix, t + step) - gas.enthalpy(mix, t - step)) / (2 * step) == pytest.approx(cp, rel=1e-5)
    assert (gas.entropy(mix, t + step) - gas.entropy(mix, t - step)) / (2 * step) == pytest.approx(cp / t, rel=1e-5)


@given(st.lists(RNG_T, min_size=1, max_size=6))
def test_arrays_and_floats_agree(temperatures: list[float]) -> None:
    array = gas.product_state(np.array(temperatures), 2.2, 1.85)
    single = [gas.product_state(t, 2.2, 1.85) for t in temperatures]
    assert array.h == pytest.approx([state.h for state in single], rel=1e-12)
    assert isinstance(single[0].h, float)


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: gas.products(0.9, 1.8), "not enough air"),
        (lambda: gas.product_state(1000.0, 0.99, 1.8), "not enough air"),
        (lambda: gas.product_state(20.0, 2.0, 1.8), "200 to 6000"),
        (lambda: gas.air_state(100.0), "200 to 6000"),
        (lambda: gas.air_fuel_ratio(-1.8), "zero or more"),
        (lambda: gas.air_fuel_ratio(0.0, 2.0), "a fuel that burns"),
    ],
)
def test_impossible_scalars_are_refused_with_what_to_enter(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()


def test_impossible_elements_of_arrays_become_nan() -> None:
    found = gas.product_state(np.array([1000.0, 1000.0, 50.0, np.nan]), np.array([2.0, 0.5, 2.0, 2.0]), 1.8)
    assert np.isfinite([found.cp, found.k, found.h, found.u, found.s0]).tolist() == [[True, False, False, False]] * 5
    # One bad number among arrays is a column of NaN, not an error.
    assert np.isnan(gas.product_state(np.array([900.0, 1000.0]), 0.5, 1.8).h).all()
    assert np.isfinite(gas.air_fuel_ratio(np.array([1.8, -1.0]))).tolist() == [True, False]


SPECIES = {species.name: species for species in ct.Species.list_from_file("nasa_gas.yaml")}


def cantera_gas() -> ct.Solution:
    """The same species file, read by cantera itself: another road to the same numbers."""
    return ct.Solution(thermo="ideal-gas", species=[SPECIES[name] for name in gas.GASES])


@pytest.mark.parametrize("t", [280.0, 450.0, 900.0, 1500.0, 2400.0])
@pytest.mark.parametrize("lam", [None, 1.0, 2.4])
def test_live_against_cantera(t: float, lam: float | None) -> None:
    """cp, h, u and s of dry air (no lambda) and of products, per kilogram of gas, above 298.15 K."""
    moles = gas.AIR_MOLE_FRACTIONS if lam is None else gas.product_moles(lam, 1.85)
    mix, reference = cantera_gas(), cantera_gas()
    mix.TPX = t, 1e5, moles
    reference.TPX = gas.DATUM_K, 1e5, moles
    if lam is None:
        state, datum = gas.air_state(t), gas.air_state(gas.DATUM_K)
        h, s0, u = state.h - datum.h, state.s0 - datum.s0, state.u - datum.u
    else:
        state, datum = gas.product_state(t, lam, 1.85), gas.product_state(gas.DATUM_K, lam, 1.85)
        h, s0, u = state.h, state.s0 - datum.s0, state.u
    assert state.cp == pytest.approx(mix.cp_mass, rel=1e-6)
    assert state.k == pytest.approx(mix.cp_mass / mix.cv_mass, rel=1e-6)
    assert h == pytest.approx(mix.enthalpy_mass - reference.enthalpy_mass, rel=1e-6, abs=1.0)
    assert u == pytest.approx(mix.int_energy_mass - reference.int_energy_mass, rel=1e-6, abs=1.0)
    assert s0 == pytest.approx(mix.entropy_mass - reference.entropy_mass, rel=1e-6, abs=1e-3)
