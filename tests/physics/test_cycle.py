"""The limited-pressure cycle, flame, compression ratio and trapped air against independent calculations."""

import dataclasses
from collections.abc import Callable

import cantera as ct
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import simpson

from logbook.physics import bounds, cycle, gas, power
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


@pytest.mark.parametrize(
    ("name", "f", "cutoff"),
    [("A", 0.0265171, 1.2882), ("B", 0.0313382, 1.5428), ("C", 0.0344720, 1.6563), ("D", 0.0215450, 1.1137),
     ("E", 0.0287267, 1.5821), ("P", None, 2.0298)],
)  # fmt: skip
def test_fuel_and_cutoff(name: str, f: float | None, cutoff: float) -> None:
    """Fuel for each kilogram of air, and V3/V2; calculated independently with cantera (H 1.00794 there, 1.008 here)."""
    lam = CASES[name][4]
    found = run(*CASES[name][:6])
    v2 = gas.AIR_GAS_CONSTANT * found.t2_k / found.p2_pa
    v3 = float(gas.products(lam, 1.8).gas_constant) * found.t3_k / found.p3_pa
    assert v3 / v2 == pytest.approx(cutoff, abs=1e-4)
    if f:
        assert gas.fuel_air_ratio(lam, 1.8) == pytest.approx(f, rel=1e-5)


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
    assert found.p4_pa / 1e5 == pytest.approx(5.098, abs=2e-3)
    assert found.mean_pressure_pa / 1e5 == pytest.approx(15.511, abs=2e-3)


# One change of case B at a time (T_L 303 K) -> changes of T3, eta_cyc, B. Calculated independently with numpy.
SENSITIVITY = [
    ("t1", 10, 21.8, 0.0001, 0.0017), ("p1", 0.1, -7.4, -0.0024, -0.0006), ("r", 0.5, -2.6, 0.0015, -0.0002),
    ("pmax", 5, 7.6, 0.0023, 0.0006), ("lam", 0.1, -35.5, 0.0037, -0.0029), ("lcv", 0.403, 9.2, -0.0007, 0.0007),
]  # fmt: skip


@pytest.mark.parametrize(("what", "by", "hot", "efficiency", "bound"), SENSITIVITY)
def test_how_far_an_error_goes(what: str, by: float, hot: float, efficiency: float, bound: float) -> None:
    state = dict(zip(("p1", "t1", "r", "pmax", "lam", "lcv"), CASES["B"][:6], strict=True))
    before, after = run(**state), run(**(state | {what: state[what] + by}))
    assert after.t3_k - before.t3_k == pytest.approx(hot, abs=0.06)
    assert after.efficiency - before.efficiency == pytest.approx(efficiency, abs=6e-5)
    bounds_of = [bounds.reversible_bound(found.t3_k, 303.0) for found in (before, after)]
    assert bounds_of[1] - bounds_of[0] == pytest.approx(bound, abs=6e-5)


def test_composition_hardly_matters_at_a_fixed_fuel_ratio() -> None:
    """y 1.5, 1.8, 2.0 at the f of case B: T3 +8, 0, -5 K and 0.0004 of efficiency; calculated independently."""
    p1, t1, r, pmax, lam, lcv = CASES["B"][:6]
    y = np.array([1.5, 1.8, 2.0])
    lam = 1 / (gas.fuel_air_ratio(lam, 1.8) * gas.air_fuel_ratio(y))
    found = limited_pressure_cycle(p1 * 1e5, t1, r, pmax * 1e5, lam, lcv * 1e6, y)
    assert found.t3_k - found.t3_k[1] == pytest.approx([8, 0, -5], abs=0.7)
    assert np.abs(found.efficiency - found.efficiency[1]).max() == pytest.approx(4e-4, abs=5e-5)


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


SPECIES = {species.name: species for species in ct.Species.list_from_file("nasa_gas.yaml")}


def cantera_gas(temperature_k: float, pressure_pa: float, moles: np.ndarray) -> ct.Solution:
    mix = ct.Solution(thermo="ideal-gas", species=[SPECIES[name] for name in gas.GASES])
    mix.TPX = temperature_k, pressure_pa, moles
    return mix


def fuel_enthalpy(lcv: float, y: float) -> float:
    """Absolute enthalpy of CHy at 298.15 K [J/kg] from its lower calorific value and the formation of CO2 and H2O."""
    burnt = ct.Solution(thermo="ideal-gas", species=[SPECIES["CO2"], SPECIES["H2O"], SPECIES["O2"]])
    burnt.TP = 298.15, ct.one_atm
    co2, h2o, o2 = burnt.partial_molar_enthalpies / 1e3
    return lcv + (co2 + y / 2 * h2o - (1 + y / 4) * o2) / ((12.011 + 1.008 * y) * 1e-3)


def isentrope(mix: ct.Solution, to_volume: float) -> float:
    """Take `mix` along its isentrope to a specific volume; the work it does on the way, by quadrature of p dV."""
    entropy, volumes = mix.entropy_mass, np.geomspace(mix.volume_mass, to_volume, 121)
    pressures = []
    for volume in volumes:
        mix.SV = entropy, volume
        pressures.append(mix.P)
    # In the logarithm of the volume the branch is smooth.
    return float(simpson(np.array(pressures) * volumes, x=np.log(volumes)))


@pytest.mark.parametrize("further", [1.0, 1.15])
@pytest.mark.parametrize("name", CASES)
def test_cycle_by_absolute_enthalpies(name: str, further: float) -> None:
    """Another road to every case, live with cantera: absolute enthalpies, work by quadrature of p dV."""
    p1, t1, r, pmax, lam, lcv = CASES[name][:6]
    p1, pmax, lcv = p1 * 1e5, pmax * 1e5, lcv * 1e6
    found = limited_pressure_cycle(p1, t1, r, pmax, lam, lcv, 1.8, expansion_ratio=r * further)
    f = gas.fuel_air_ratio(lam, 1.8)
    mass = 1 + f

    mix = cantera_gas(t1, p1, gas.AIR_MOLE_FRACTIONS)
    v1 = mix.volume_mass
    v2 = v1 / r
    work = isentrope(mix, v2)
    assert pytest.approx(found.t2_k, abs=1e-4) == mix.T
    p2, u2 = mix.P, mix.int_energy_mass

    burnt = cantera_gas(1800, p2, gas.product_moles(lam, 1.8))
    level = max(pmax, p2)
    burnt.HP = (u2 + f * fuel_enthalpy(lcv, 1.8) + level * v2) / mass, level
    if burnt.volume_mass * mass < v2:
        burnt.UV = (u2 + f * fuel_enthalpy(lcv, 1.8)) / mass, v2 / mass
    assert pytest.approx(found.t3_k, abs=1e-4) == burnt.T
    assert pytest.approx(found.p3_pa, rel=1e-7) == burnt.P
    work += burnt.P * (burnt.volume_mass * mass - v2)

    work += mass * isentrope(burnt, further * r * v2 / mass)
    assert pytest.approx(found.t4_k, abs=1e-4) == burnt.T
    work -= p1 * (further * r * v2 - v1)
    assert found.work_j_kg == pytest.approx(work, rel=1e-6)
    assert found.efficiency == pytest.approx(work / (f * lcv), abs=1e-6)


@pytest.mark.parametrize("t_air", [298.15, 320.0, 900.0, 950.0])
@pytest.mark.parametrize(("lam", "y"), [(1.0, 1.85), (1.5, 1.5), (2.2, 1.85), (3.0, 4.0)])
def test_flame_by_absolute_enthalpies(t_air: float, lam: float, y: float) -> None:
    """Adiabatic flame at constant pressure, complete combustion, live with cantera."""
    f = gas.fuel_air_ratio(lam, y)
    air = cantera_gas(t_air, 1e5, gas.AIR_MOLE_FRACTIONS)
    burnt = cantera_gas(1500, 1e5, gas.product_moles(lam, y))
    burnt.HP = (air.enthalpy_mass + f * fuel_enthalpy(42.7e6, y)) / (1 + f), 1e5
    assert cycle.flame_temperature(t_air, lam, y, 42.7e6) == pytest.approx(burnt.T, abs=1e-4)


@pytest.mark.parametrize("name", ["A", "B", "C", "D", "E"])
def test_dissociation_would_cool_the_gas_a_little(name: str) -> None:
    """To equilibrium at (h, p): 8 to 15 K less, B lower by 0.0008 to 0.0011; live with cantera. So B without it is the
    larger, hence safe as a bound."""
    lam = CASES[name][4]
    found = run(*CASES[name][:6])
    names = [*gas.GASES, "CO", "OH", "H2", "O", "H", "NO", "NO2"]
    burnt = ct.Solution(thermo="ideal-gas", species=[SPECIES[each] for each in names])
    burnt.TPX = found.t3_k, found.p3_pa, dict(zip(gas.GASES, gas.product_moles(lam, 1.8), strict=True))
    burnt.equilibrate("HP")
    assert -15.5 < burnt.T - found.t3_k < -7.5
    change = bounds.reversible_bound(burnt.T, 303.0) - bounds.reversible_bound(found.t3_k, 303.0)
    assert -0.00115 < change < -0.00075


def random_states(n: int) -> tuple[np.ndarray, ...]:
    """p1, T1, r, Pmax, lambda, LCV over all that engines do."""
    random = np.random.default_rng(20)
    low_and_high = ((1.2e5, 5e5), (300, 390), (10, 17), (60e5, 220e5), (1.2, 4), (39e6, 50e6))
    return tuple(random.uniform(low, high, n) for low, high in low_and_high)


def test_newton_has_settled(monkeypatch: pytest.MonkeyPatch) -> None:
    """Two steps fewer change nothing that could be seen, over 20,000 random states; Carnot is never reached."""
    states = random_states(20_000)
    found = limited_pressure_cycle(*states)
    monkeypatch.setattr(cycle, "_STEPS", 4)
    sooner = limited_pressure_cycle(*states)
    for name in ("t2_k", "t3_k", "t4_k", "flame_k"):
        assert np.abs(getattr(found, name) - getattr(sooner, name)).max() < 1e-8
    assert (found.efficiency < 1 - states[1] / found.t3_k).all()
    assert set(found.label) == {cycle.LIMITED, cycle.CONSTANT_VOLUME, cycle.CONSTANT_PRESSURE}


def test_long_columns_are_worked_out_in_blocks_without_a_seam() -> None:
    states = [column.reshape(2, -1) for column in random_states(2 * 9000)]
    found = limited_pressure_cycle(*states)
    assert found.t3_k.shape == found.label.shape == (2, 9000)
    for place in ((0, 0), (0, 8191), (0, 8192), (1, 8999)):
        single = limited_pressure_cycle(*(column[place] for column in states))
        assert isinstance(single.efficiency, float)
        assert isinstance(single.label, str)
        assert found.efficiency[place] == pytest.approx(single.efficiency, rel=1e-13)
        assert found.label[place] == single.label
    assert limited_pressure_cycle(*(column[:0] for column in random_states(1))).t3_k.shape == (0,)


def test_speed_of_many_cycles(benchmark: Callable[..., cycle.Cycle]) -> None:
    """200,000 readings at once."""
    states = random_states(200_000)
    assert benchmark(limited_pressure_cycle, *states).efficiency.size == 200_000


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: run(3.6, 350, 13.5, 180, 0.8, 40.3), "not enough air"),
        (lambda: run(-3.6, 350, 13.5, 180, 2.2, 40.3), "absolute"),
        (lambda: run(3.6, 77, 13.5, 180, 2.2, 40.3), "T1 in kelvin"),
        (lambda: run(3.6, 350, 1.0, 180, 2.2, 40.3), "compression ratio"),
        (lambda: run(3.6, 350, 13.5, 180, 2.2, 40.3, expansion_ratio=12), "expansion ratio"),
        (lambda: run(3.6, 350, 13.5, 180, 2.2, 40.3e3), "MJ/kg"),
        (lambda: cycle.air_cycle(0.1e6, 300, 18, 1.0, 1.0), "above 1"),
        (lambda: cycle.air_cycle(0.1e6, 300, 18, 1.5, 19), "below the compression ratio"),
        (lambda: cycle.air_cycle(-0.1e6, 300, 18, 1.5, 1.2), "absolute"),
        (lambda: cycle.flame_temperature(25, 2.0, 1.8, 42.7e6), "kelvin"),
        (lambda: cycle.flame_temperature(900, 0.5, 1.8, 42.7e6), "not enough air"),
        (lambda: cycle.flame_temperature(900, 2.0, 1.8, 42.7), "MJ/kg"),
        (lambda: cycle.compressed_temperature(350, 0.9), "compression ratio"),
        (lambda: cycle.isentropic_temperature(350, -1.0), "absolute"),
        (lambda: cycle.effective_compression_ratio(3.6e5, 350, 3.0e5), "above the scavenge pressure"),
        (lambda: cycle.stroke_part_at_exhaust_opening(113, 0.45), "half a turn"),
        (lambda: cycle.stroke_part_at_exhaust_opening(2.0, 1.5), "rod length"),
        (lambda: cycle.expansion_ratio(1.0, 0.8, 0.7), "compression ratio"),
        (lambda: cycle.expansion_ratio(13.5, 80, 0.7), "parts of the stroke"),
        (lambda: cycle.trapped_lambda(0.0, 1.6), "above zero"),
        (lambda: cycle.trapped_air(-1e5, 350, 0.7, 13.5, 0.68), "absolute"),
        (lambda: cycle.trapped_air(3e5, 350, 0.7, 1.0, 0.68), "compression ratio"),
        (lambda: cycle.trapped_air(3e5, 350, 0.7, 13.5, 68), "part of stroke"),
        (lambda: cycle.fuel_per_cycle(0.5, 0.0, 6, True), "speed above zero"),
    ],
)
def test_impossible_scalars_are_refused_with_what_to_enter(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()


@pytest.mark.parametrize("place", range(6))
@pytest.mark.parametrize("bad", [-1.0, 0.0, np.nan])
def test_an_impossible_element_of_any_input_is_nan_and_leaves_the_rest(place: int, bad: float) -> None:
    states = [column.copy() for column in random_states(3)]
    whole = limited_pressure_cycle(*states)
    states[place][1] = bad
    found = limited_pressure_cycle(*states)
    for field in dataclasses.fields(cycle.Cycle):
        before, after = getattr(whole, field.name), getattr(found, field.name)
        if field.name == "label":
            assert after.tolist() == [before[0], "", before[2]]
        else:
            assert np.isnan(after[1])
            assert after[[0, 2]].tolist() == before[[0, 2]].tolist()


def test_impossible_elements_of_arrays_become_nan() -> None:
    """One good element and one that cannot be, in each formula, without a warning."""
    found = [
        cycle.air_cycle(0.1e6, 300, np.array([18.0, 1.0]), 1.5, 1.2).efficiency,
        cycle.flame_temperature(900, np.array([2.0, 0.5]), 1.8, 42.7e6),
        cycle.compressed_temperature(np.array([350.0, -5.0]), 13.5),
        cycle.isentropic_temperature(350, np.array([30.0, 0.0])),
        cycle.effective_compression_ratio(np.array([3.6e5, 0.0]), 350, 129e5)[0],
        cycle.stroke_part_at_exhaust_opening(np.array([2.0, 113.0]), 0.45),
        cycle.expansion_ratio(np.array([13.5, 1.0]), 0.8, 0.68),
        cycle.trapped_lambda(np.array([0.047, 0.0]), 1.6),
        cycle.trapped_air(3.3e5, np.array([350.0, 0.0]), 0.68, 13.5, 0.68),
        cycle.fuel_per_cycle(0.5, np.array([1.6, 0.0]), 6, True),
    ]
    assert [np.isfinite(each).tolist() for each in found] == [[True, False]] * len(found)
