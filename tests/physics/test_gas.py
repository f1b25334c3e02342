"""Gas properties against independent calculations and a general reference library."""

import cantera as ct
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from logbook.physics import gas

RNG_T = st.floats(210, 3000)


@pytest.mark.parametrize(
    ("name", "cp_298", "cp_1000", "rise"),
    [("N2", 29.1242, 32.6828, 21.465), ("O2", 29.3782, 34.8830, 22.707), ("CO2", 37.1352, 54.3209, 33.397),
     ("H2O", 33.5875, 41.2947, 26.003)],
)  # fmt: skip
def test_single_gases(name: str, cp_298: float, cp_1000: float, rise: float) -> None:
    """Calculated independently with cantera 3.2 (file nasa_gas.yaml)."""
    moles = np.zeros(5)
    moles[gas.GASES.index(name)] = 1
    mix = gas.mixture(moles)
    assert gas.heat_capacity(mix, 298.15) == pytest.approx(cp_298, rel=1e-4)
    assert gas.heat_capacity(mix, 1000.0) == pytest.approx(cp_1000, rel=1e-4)
    assert gas.enthalpy(mix, 1000.0) / 1e3 == pytest.approx(rise, abs=1e-3)


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
    ("lam", "fractions", "states"),
    [
        (2.0, (0.75623, 0.10143, 0.00905, 0.07034, 0.06296), ((1031.21, 1.3847), (1201.26, 1.3132), (1317.95, 1.2778))),
        (3.0, (0.76425, 0.13667, 0.00914, 0.04752, 0.04242), ((1022.61, 1.3895), (1181.52, 1.3204), (1291.57, 1.2853))),
    ],
)
def test_lean_products(lam: float, fractions: tuple[float, ...], states: tuple[tuple[float, float], ...]) -> None:
    """CH1.8; calculated independently with numpy on the same polynomials."""
    moles = gas.product_moles(lam, 1.8)
    assert moles / moles.sum() == pytest.approx(fractions, abs=1e-5)
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


def test_the_branches_meet_at_1000_k() -> None:
    mix = gas.products(2.0, 1.8)
    below = np.nextafter(1000.0, 0)
    for function in (gas.heat_capacity, gas.enthalpy, gas.entropy):
        assert function(mix, below) == pytest.approx(function(mix, 1000.0), rel=2e-8)


@given(st.lists(RNG_T, min_size=1, max_size=6))
def test_arrays_and_floats_agree(temperatures: list[float]) -> None:
    array = gas.product_state(np.array(temperatures), 2.2, 1.85)
    single = [gas.product_state(t, 2.2, 1.85) for t in temperatures]
    assert array.h == pytest.approx([state.h for state in single], rel=1e-12)
    assert isinstance(single[0].h, float)


def test_impossible_states() -> None:
    with pytest.raises(ValueError, match="not enough air"):
        gas.products(0.9, 1.8)
    with pytest.raises(ValueError, match="200 to 6000"):
        gas.air_state(100.0)
    found = gas.product_state(np.array([1000.0, 1000.0, 50.0]), np.array([2.0, 0.5, 2.0]), 1.8)
    assert np.isfinite(found.h).tolist() == [True, False, False]


@pytest.mark.parametrize("t", [280.0, 450.0, 900.0, 1500.0, 2400.0])
def test_live_against_cantera(t: float) -> None:
    """The same species file, read by cantera itself, another road to the same numbers."""
    species = {s.name: s for s in ct.Species.list_from_file("nasa_gas.yaml")}
    mix = ct.Solution(thermo="ideal-gas", species=[species[name] for name in gas.GASES])
    moles = gas.product_moles(2.4, 1.85)
    reference = ct.Solution(thermo="ideal-gas", species=[species[name] for name in gas.GASES])
    reference.TPX = gas.DATUM_K, 1e5, moles
    mix.TPX = t, 1e5, moles
    state = gas.product_state(t, 2.4, 1.85)
    assert state.cp == pytest.approx(mix.cp_mass, rel=1e-6)
    assert state.h == pytest.approx(mix.enthalpy_mass - reference.enthalpy_mass, rel=1e-6, abs=1.0)
