"""The limited-pressure cycle, flame, compression ratio and trapped air against independent calculations."""

import cantera as ct
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.physics import cycle, gas, power
from logbook.physics.cycle import limited_pressure_cycle

# p1 bar abs, T1 K, r, Pmax bar abs, lambda, LCV MJ/kg -> T2, p2, T3, p3, T4, eta, flame, mep, label. All with CH1.8.
# Calculated independently with cantera 3.2 by another road: absolute enthalpies, the fuel's enthalpy deduced from the
# heating value, work by quadrature of p dV; heat in - work - heat out closed within 3e-9 of the heat.
CASES = {
    "A": (2.00, 320, 14.0, 130, 2.60, 42.7, 870.350, 76.156, 1867.261, 130, 910.854, 0.569190, 1734.9, 15.112),
    "B": (3.60, 350, 13.5, 180, 2.20, 40.3, 928.652, 128.950, 1942.505, 180, 1028.932, 0.539136, 1865.0, 26.351),
    "C": (4.50, 345, 12.0, 200, 2.00, 42.7, 880.820, 137.867, 2049.825, 200, 1163.519, 0.510574, 1967.4, 37.256),
    "D": (1.50, 330, 16.0, 120, 3.20, 42.7, 935.701, 68.051, 1801.017, 120, 788.576, 0.600762, 1644.3, 9.336),
    "E": (3.00, 340, 15.0, 160, 2.40, 40.3, 939.013, 124.281, 1862.091, 160, 952.208, 0.556033, 1804.5, 21.201),
    "V": (2.00, 330, 12.0, 400, 3.00, 42.7, 847.349, 61.625, 1835.942, 136.416, 859.232, 0.561452, 1611.2, None),
    "P": (3.00, 340, 15.0, 100, 2.40, 42.7, 939.013, 124.281, 1855.770, 124.281, 1026.649, 0.524629, 1855.8, None),
}
LABELS = {"V": cycle.CONSTANT_VOLUME, "P": cycle.CONSTANT_PRESSURE}


def run(p1: float, t1: float, r: float, pmax: float, lam: float, lcv: float, **more: float) -> cycle.Cycle:
    return limited_pressure_cycle(p1 * 1e5, t1, r, pmax * 1e5, lam, lcv * 1e6, 1.8, **more)


@pytest.mark.parametrize("name", CASES)
def test_cases(name: str) -> None:
    p1, t1, r, pmax, lam, lcv, t2, p2, t3, p3, t4, eta, flame, mep = CASES[name]
    found = run(p1, t1, r, pmax, lam, lcv)
    assert found.t2_k == pytest.approx(t2, abs=0.05)
    assert found.p2_pa / 1e5 == pytest.approx(p2, abs=0.005)
    assert found.t3_k == pytest.approx(t3, abs=0.05)
    assert found.p3_pa / 1e5 == pytest.approx(p3, abs=0.005)
    assert found.t4_k == pytest.approx(t4, abs=0.05)
    assert found.efficiency == pytest.approx(eta, abs=2e-5)
    assert found.flame_k == pytest.approx(flame, abs=0.1)
    assert found.label == LABELS.get(name, cycle.LIMITED)
    if mep:
        assert found.mean_pressure_pa / 1e5 == pytest.approx(mep, abs=2e-3)


def test_all_cases_at_once_as_arrays() -> None:
    table = np.array([case[:6] for case in CASES.values()]).T
    found = limited_pressure_cycle(table[0] * 1e5, table[1], table[2], table[3] * 1e5, table[4], table[5] * 1e6)
    assert found.efficiency == pytest.approx([case[11] for case in CASES.values()], abs=2e-5)
    assert list(found.label) == [LABELS.get(name, cycle.LIMITED) for name in CASES]


@pytest.mark.parametrize(
    ("re", "eta", "t4", "p4", "mep"),
    [(13.5, 0.539136, 1028.932, 10.896, 26.351), (15, 0.555250, 995.421, 9.487, 27.139),
     (16, 0.564237, 975.319, 8.714, 27.578), (17, 0.572048, 956.724, 8.045, 27.960)],
)  # fmt: skip
def test_further_expansion(re: float, eta: float, t4: float, p4: float, mep: float) -> None:
    """Case B with an expansion ratio; calculated independently with cantera."""
    found = run(*CASES["B"][:6], expansion_ratio=re)
    assert found.efficiency == pytest.approx(eta, abs=2e-5)
    assert found.t4_k == pytest.approx(t4, abs=0.05)
    assert found.p4_pa / 1e5 == pytest.approx(p4, abs=2e-3)
    assert found.mean_pressure_pa / 1e5 == pytest.approx(mep, abs=2e-3)


def test_case_a_with_further_expansion() -> None:
    """Calculated independently with cantera."""
    found = run(*CASES["A"][:6], expansion_ratio=15.5)
    assert (found.t4_k, found.efficiency) == (pytest.approx(881.095, abs=0.05), pytest.approx(0.584193, abs=2e-5))


@pytest.mark.parametrize(
    ("angle", "rod", "phi", "r", "part", "re"),
    [(110, 0.45, 0.68, 13.5, 0.77524, 15.251), (113, 0.45, 0.68, 13.5, 0.79517, 15.617),
     (115, 0.45, 0.68, 13.5, 0.80792, 15.851), (130, 0.25, 0.80, 14.0, 0.85841, 14.949),
     (130, 0.25, 0.95, 14.0, 0.85841, 14.0)],
)  # fmt: skip
def test_expansion_ratio_from_exhaust_opening(
    angle: float, rod: float, phi: float, r: float, part: float, re: float
) -> None:
    """Calculated independently by arithmetic; the last is raised to r."""
    found = cycle.stroke_part_at_exhaust_opening(np.radians(angle), rod)
    assert found == pytest.approx(part, abs=1e-5)
    assert cycle.expansion_ratio(r, found, phi) == pytest.approx(re, abs=1e-3)


def test_textbook_dual_cycle() -> None:
    """Moran & Shapiro ex. 9.3 (air table): 898.3, 1347.5, 1617 K, 718.3 and 456.4 kJ/kg, 0.635, 0.56 MPa."""
    found = cycle.air_cycle(0.1e6, 300, 18, 1.5, 1.2)
    printed = [898.3, 1347.5, 1617, 718.3e3, 456.4e3, 0.635, 0.56e6]
    ours = [found.t2_k, found.t3_k, found.t4_k, found.heat_j_kg, found.work_j_kg, found.efficiency,
            found.mean_pressure_pa]  # fmt: skip
    assert ours == pytest.approx(printed, rel=3e-3)
    # Calculated independently with numpy on the same polynomials.
    assert ours == pytest.approx([897.76, 1346.64, 1615.97, 716.25e3, 455.43e3, 0.63585, 0.55999e6], rel=1e-5)
    assert found.t5_k == pytest.approx(651.86, abs=0.01)


def test_constant_heat_capacity_overstates() -> None:
    """Closed form with k = 1.4 gives 0.67977 for the same cycle: 0.04 too much."""
    k, r, rp, rc = 1.4, 18, 1.5, 1.2
    closed = 1 - r ** (1 - k) * (rp * rc**k - 1) / ((rp - 1) + k * rp * (rc - 1))
    assert closed == pytest.approx(0.67977, abs=1e-5)
    assert closed - cycle.air_cycle(0.1e6, 300, r, rp, rc).efficiency == pytest.approx(0.0439, abs=1e-3)


@pytest.mark.parametrize(
    ("p1", "t1", "p2", "t2", "r"),
    [(3.60, 350, 128.94993, 928.65, 13.500), (3.00, 340, 118, 926.71, 14.431), (2.45, 345, 92, 927.86, 13.962)],
)
def test_effective_compression_ratio(p1: float, t1: float, p2: float, t2: float, r: float) -> None:
    """Calculated independently with scipy; the first inverts case B."""
    found, temperature = cycle.effective_compression_ratio(p1 * 1e5, t1, p2 * 1e5)
    assert found == pytest.approx(r, abs=1e-3)
    assert temperature == pytest.approx(t2, abs=0.01)


def test_trapped_air() -> None:
    """Two-stroke and four-stroke examples, calculated independently by arithmetic."""
    vs = power.swept_volume(0.6, 2.4)
    fuel = cycle.fuel_per_cycle(9800 * 172e-3 / 3600, 98 / 60, 6, True)
    air = cycle.trapped_air(3.30e5, 350, vs, 13.5, 0.68)
    assert fuel == pytest.approx(47.778e-3, rel=1e-5)
    assert air == pytest.approx(1.63697, rel=1e-5)
    assert cycle.trapped_lambda(fuel, air) == pytest.approx(2.3622, abs=1e-4)
    assert cycle.trapped_lambda(fuel, 0.95 * air) == pytest.approx(2.2441, abs=1e-4)
    vs = power.swept_volume(0.32, 0.4)
    fuel = cycle.fuel_per_cycle(2450 * 196e-3 / 3600, 750 / 60, 6, False)
    air = cycle.trapped_air(3.40e5, 345, vs, 14.0, 0.95)
    assert (fuel, air) == (pytest.approx(3.55704e-3, rel=1e-5), pytest.approx(0.113000, rel=1e-5))
    assert cycle.trapped_lambda(fuel, air) == pytest.approx(2.1902, abs=1e-4)


@pytest.mark.parametrize(
    ("t_air", "lambdas"),
    [(298.15, (2404, 1832, 1509, 1416, 1154)), (320, (2419, 1848, 1526, 1433, 1172)),
     (900, (2812, 2276, 1977, 1891, 1652)), (950, (2848, 2315, 2018, 1932, 1695))],
)  # fmt: skip
def test_flame(t_air: float, lambdas: tuple[float, ...]) -> None:
    """CH1.85, 42.7 MJ/kg, lambda 1.0 1.5 2.0 2.2 3.0; calculated independently with cantera."""
    found = cycle.flame_temperature(t_air, np.array([1.0, 1.5, 2.0, 2.2, 3.0]), 1.85, 42.7e6)
    assert found == pytest.approx(lambdas, abs=1)


def test_octane_flame_of_the_textbook() -> None:
    """Moran & Shapiro ex. 13.8: liquid octane, theoretical air of 1:3.76, 2395 K; the calorific value follows from the
    formation enthalpies -249 910 (octane), -393 520 (CO2) and -241 820 (water vapour) kJ/kmol."""
    lcv = (8 * 393_520 + 9 * 241_820 - 249_910) / 114.22 * 1e3
    assert cycle.flame_temperature(298.15, 1.0, 18 / 8, lcv) == pytest.approx(2395, rel=4e-3)


STATES = st.tuples(
    st.floats(1.2, 5), st.floats(300, 390), st.floats(10, 17), st.floats(60, 220), st.floats(1.2, 4), st.floats(39, 50)
)


@settings(max_examples=80)
@given(STATES, st.floats(1.0, 1.3))
def test_what_must_hold_everywhere(state: tuple[float, ...], further: float) -> None:
    p1, t1, r, _, lam, lcv = state
    found = run(*state, expansion_ratio=r * further)
    # The bound between the hottest and the coldest gas is not reached.
    assert 0 < found.efficiency < 1 - t1 / found.t3_k
    # Both isentropes invert.
    assert cycle.isentropic_temperature(found.t2_k, p1 * 1e5 / found.p2_pa) == pytest.approx(t1, abs=1e-6)
    assert cycle.effective_compression_ratio(p1 * 1e5, t1, found.p2_pa)[0] == pytest.approx(r, rel=1e-9)
    # Work by branches is heat in less heat out.
    f = gas.fuel_air_ratio(lam, 1.8)
    burnt, air = gas.products(lam, 1.8), gas.AIR

    def energy(mix: gas.Mixture, t: float) -> float:
        return float(gas.enthalpy(mix, t) - mix.gas_constant * t)

    v1 = air.gas_constant * t1 / (p1 * 1e5)
    v2 = v1 / r
    v3 = burnt.gas_constant * found.t3_k / found.p3_pa
    v4 = r * further * v2
    work = (
        energy(air, t1) - energy(air, found.t2_k) + found.p3_pa * (v3 - v2)
        + energy(burnt, found.t3_k) - energy(burnt, found.t4_k) - p1 * 1e5 * (v4 - v1)
    )  # fmt: skip
    assert work == pytest.approx(found.work_j_kg, rel=1e-8)
    assert found.heat_j_kg == pytest.approx(f * lcv * 1e6)


def test_one_case_by_cantera_itself() -> None:
    """Case B's compression and expansion as isentropes that cantera solves, live."""
    p1, t1, r, pmax, lam, lcv = (3.6e5, 350.0, 13.5, 180e5, 2.2, 40.3e6)
    found = limited_pressure_cycle(p1, t1, r, pmax, lam, lcv)
    species = {s.name: s for s in ct.Species.list_from_file("nasa_gas.yaml")}
    air = ct.Solution(thermo="ideal-gas", species=[species[name] for name in gas.GASES])
    air.TPX = t1, p1, gas.AIR_MOLE_FRACTIONS
    entropy, volume = air.entropy_mass, air.volume_mass
    air.SV = entropy, volume / r
    assert air.T == pytest.approx(found.t2_k, abs=0.01)
    burnt = ct.Solution(thermo="ideal-gas", species=[species[name] for name in gas.GASES])
    burnt.TPX = found.t3_k, found.p3_pa, gas.product_moles(lam, 1.8)
    v4 = volume / (1 + gas.fuel_air_ratio(lam, 1.8))
    burnt.SV = burnt.entropy_mass, v4
    assert burnt.T == pytest.approx(found.t4_k, abs=0.01)


def test_impossible_states() -> None:
    with pytest.raises(ValueError, match="not enough air"):
        run(3.6, 350, 13.5, 180, 0.8, 40.3)
    with pytest.raises(ValueError, match="absolute"):
        run(-3.6, 350, 13.5, 180, 2.2, 40.3)
    with pytest.raises(ValueError, match="expansion ratio"):
        run(3.6, 350, 13.5, 180, 2.2, 40.3, expansion_ratio=12)
    found = limited_pressure_cycle(np.array([3.6e5, -1.0]), 350, 13.5, 180e5, 2.2, 40.3e6)
    assert np.isfinite(found.efficiency).tolist() == [True, False]
