"""Carbon balance, heat balance, exergy, turbocharger and cooler against independent calculations."""

from collections.abc import Callable

import cantera as ct
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import simpson

from logbook.physics import exergy, exhaust, gas, heat, turbocharger

# Reference diesel fuel of the NOx Technical Code 2008, appendix 6, as mass fractions of C, H, S.
DIESEL = (0.862, 0.136, 0.0017)


@pytest.mark.parametrize(
    ("co2", "air", "lam", "o2", "wet", "gas_flow"),
    [
        (0.040, 53.480, 3.6648, 0.15517, 0.94810, 55.053),
        (0.045, 47.594, 3.2614, 0.14831, 0.94386, 49.104),
        (0.050, 42.895, 2.9394, 0.14145, 0.93966, 44.354),
    ],
)
def test_carbon_balance(co2: float, air: float, lam: float, o2: float, wet: float, gas_flow: float) -> None:
    """Humidity ratio 0.0107; calculated independently with scipy (4 and 5 %) and by arithmetic (4.5 %)."""
    found = exhaust.carbon_balance(*DIESEL, co2_dry=co2, humidity_ratio=0.0107)
    assert found.air_kg_kg == pytest.approx(air, abs=1e-3)
    assert found.lambda_ == pytest.approx(lam, abs=1e-4)
    assert found.o2_dry == pytest.approx(o2, abs=1e-5)
    assert found.co2_dry == pytest.approx(co2, abs=1e-12)
    assert found.wet_factor == pytest.approx(wet, abs=1e-5)
    assert found.exhaust_kg_kg == pytest.approx(gas_flow, abs=1e-3)


@given(st.floats(0.005, 0.152))
def test_co2_and_o2_give_the_same_air(co2: float) -> None:
    by_co2 = exhaust.carbon_balance(*DIESEL, co2_dry=co2)
    by_o2 = exhaust.carbon_balance(*DIESEL, o2_dry=by_co2.o2_dry)
    assert by_o2.air_kg_kg == pytest.approx(by_co2.air_kg_kg, rel=1e-9)
    assert by_o2.co2_dry == pytest.approx(co2, rel=1e-9)


def test_highest_possible_co2() -> None:
    """15.27 % from the carbon of the reference diesel alone, 15.31 % with the CO2 of the air; calculated independently
    by arithmetic. More is a wrong reading."""
    without_excess = exhaust.carbon_balance(*DIESEL, o2_dry=0.0)
    from_air = 0.0004 * without_excess.air_kg_kg / 0.028965
    from_fuel = DIESEL[0] / 0.012011
    assert without_excess.co2_dry == pytest.approx(0.1531, abs=5e-5)
    assert without_excess.co2_dry * from_fuel / (from_fuel + from_air) == pytest.approx(0.1527, abs=5e-5)
    assert exhaust.carbon_balance(*DIESEL, co2_dry=0.1530).lambda_ == pytest.approx(1.0, abs=1e-3)
    with pytest.raises(ValueError, match="highest this fuel can give"):
        exhaust.carbon_balance(*DIESEL, co2_dry=0.1532)


def test_short_cut_from_oxygen_reads_high() -> None:
    """lambda = 20.95/(20.95 - O2 %) is some 3 to 5 % too high for hydrocarbon fuels, from 10 to 15 % O2."""
    o2 = np.array([0.10, 0.12, 0.14, 0.15])
    percent = 100 * (0.2095 / (0.2095 - o2) / exhaust.carbon_balance(*DIESEL, o2_dry=o2).lambda_ - 1)
    assert percent.round().tolist() == [3, 4, 5, 5]


def test_carbon_balance_takes_in_what_it_gives_out() -> None:
    """Carbon and hydrogen in fuel and air are those in the wet exhaust."""
    humidity = 0.0107
    found = exhaust.carbon_balance(*DIESEL, co2_dry=0.045, humidity_ratio=humidity)
    dry_air = found.air_kg_kg / 0.028965
    dry_moles = dry_air + DIESEL[0] / 0.012011 + DIESEL[2] / 0.03206 - dry_air * 0.2095 / found.lambda_
    carbon = DIESEL[0] / 0.012011 + 0.0004 * dry_air
    assert found.co2_dry * dry_moles == pytest.approx(carbon, rel=1e-12)
    water = DIESEL[1] / 0.002016 + found.air_kg_kg * humidity / 0.018015
    assert dry_moles * (1 / found.wet_factor - 1) == pytest.approx(water, rel=1e-12)


@pytest.mark.parametrize(
    ("t", "lam", "y", "t0", "h", "e"),
    [(320, 3.0, 1.85, 25, 309.24, 94.92), (280, 2.5, 1.8, 30, 262.18, 71.43)],
)
def test_exhaust_exergy(t: float, lam: float, y: float, t0: float, h: float, e: float) -> None:
    """Temperatures in degC, results in kJ/kg; calculated independently with numpy."""
    found = exergy.exhaust_exergy(t + 273.15, lam, y, t0 + 273.15)
    assert [value / 1e3 for value in found] == pytest.approx([h, e], abs=6e-3)


def test_exhaust_exergy_in_parts() -> None:
    """The first case above: mean cp 1.0483 kJ/kgK, R_g 0.28682, pressure term +2.25 kJ/kg at 1.04/1.013 bar."""
    mix = gas.products(3.0, 1.85)
    h, e = exergy.exhaust_exergy(593.15, 3.0, 1.85, 298.15)
    assert h / 295 / 1e3 == pytest.approx(1.0483, abs=5e-5)
    assert float(mix.gas_constant / mix.mass) / 1e3 == pytest.approx(0.28682, abs=5e-6)
    _, under_pressure = exergy.exhaust_exergy(593.15, 3.0, 1.85, 298.15, 1.04 / 1.013)
    assert (under_pressure - e) / 1e3 == pytest.approx(2.25, abs=5e-3)


def test_exergy_with_constant_heat_capacity() -> None:
    """cp 1.08 kJ/kgK, 300 degC, T0 30 degC: 83.071 kJ/kg; calculated independently by arithmetic."""
    assert exergy.constant_cp_exergy(1080, 573.15, 303.15) / 1e3 == pytest.approx(83.071, abs=1e-3)


@given(st.floats(330, 900), st.floats(1.0, 6.0), st.floats(260, 320))
def test_exergy_is_what_a_row_of_carnot_engines_would_take(t: float, lam: float, t0: float) -> None:
    """Integral of (1 - T0/T) dh, by Simpson's rule over our own heat capacity; between 0 and the heat."""
    h, e = exergy.exhaust_exergy(t, lam, 1.85, t0)
    temperatures = np.linspace(t0, t, 201)
    cp = gas.product_state(temperatures, lam, 1.85).cp
    assert e == pytest.approx(simpson(cp * (1 - t0 / temperatures), x=temperatures), rel=1e-6, abs=0.01)
    assert 0 < e < h


@pytest.mark.parametrize(("c", "h", "s", "ratio"), [(0.862, 0.136, 0.0017, 1.06765), (0.866, 0.107, 0.025, 1.06612)])
def test_fuel_exergy(c: float, h: float, s: float, ratio: float) -> None:
    """Formula from memory, after Kotas; values calculated independently by arithmetic."""
    assert exergy.fuel_exergy_ratio(c, h, 0.0, s) == pytest.approx(ratio, abs=1e-5)


def test_fuel_exergy_of_octane() -> None:
    """1.0727 by the formula; Moran & Shapiro ex. 13.12 has 1.066 to 1.067 from first principles: within 1 %."""
    carbon, hydrogen = 8 * 12.011, 18 * 1.008
    whole = carbon + hydrogen
    found = exergy.fuel_exergy_ratio(carbon / whole, hydrogen / whole)
    assert found == pytest.approx(1.0727, abs=1e-4)
    assert found == pytest.approx(1.0665, rel=0.01)


def test_heat_balance() -> None:
    """A rest of 2 %, and one that says a flow or temperature is wrong; arithmetic."""
    found = heat.heat_balance(20e6, 10e6, 1.2e6, 0.8e6, 2.6e6, 5e6)
    shares = [found.brake, found.jacket, found.oil, found.cooler, found.exhaust, found.rest]
    assert shares == pytest.approx([0.50, 0.06, 0.04, 0.13, 0.25, 0.02])
    assert heat.heat_balance(20e6, 10e6, 1.2e6, 0.8e6, 2.6e6, 6e6).rest == pytest.approx(-0.03)


def test_heat_of_water_and_of_charge_air() -> None:
    """4.19 kJ/kgK for water; 1.0142 to 1.01 kJ/kgK for dry air (air table of Moran & Shapiro, A-22) from 420 to 320 K,
    whose enthalpies are 421.26 and 320.29 kJ/kg there."""
    assert heat.water_heat(50.0, 36, 48) == pytest.approx(50 * 4190 * 12)
    assert turbocharger.cooler_heat(20.0, 420, 320) == pytest.approx(20 * (421.26e3 - 320.29e3), rel=3e-3)


@pytest.mark.parametrize(("t", "lam"), [(520.0, 3.2), (650.0, 2.4), (1100.0, 2.0)])
def test_exhaust_heat_against_cantera(t: float, lam: float) -> None:
    """12 kg/s above a suction temperature of 303.15 K, calculated live."""
    species = {s.name: s for s in ct.Species.list_from_file("nasa_gas.yaml")}
    mix = ct.Solution(thermo="ideal-gas", species=[species[name] for name in gas.GASES])
    mix.TPX = t, 1e5, gas.product_moles(lam, 1.85)
    hot = mix.enthalpy_mass
    mix.TP = 303.15, 1e5
    assert exhaust.exhaust_heat(12.0, t, 303.15, lam, 1.85) == pytest.approx(12 * (hot - mix.enthalpy_mass), rel=1e-6)


def test_compressor_efficiency() -> None:
    """0.99 -> 3.55 bar absolute, 303.15 -> 475.15 K: 0.7686 with real air, 0.7760 with k 1.4; calculated independently
    with scipy."""
    state = (0.99e5, 3.55e5, 303.15, 475.15)
    assert turbocharger.compressor_efficiency(*state) == pytest.approx(0.7686, abs=5e-5)
    assert turbocharger.cold_air_compressor_efficiency(*state) == pytest.approx(0.7760, abs=5e-5)


def test_cooler() -> None:
    """Air 160 -> 42 degC, water 32 degC: approach 10 K, effectiveness 118/128; arithmetic."""
    approach, effectiveness = turbocharger.cooler_effectiveness(160, 42, 32)
    assert (approach, effectiveness) == (pytest.approx(10), pytest.approx(118 / 128))


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: exhaust.carbon_balance(*DIESEL), "one of the two"),
        (lambda: exhaust.carbon_balance(*DIESEL, co2_dry=0.04, o2_dry=0.15), "one of the two"),
        (lambda: exhaust.carbon_balance(*DIESEL, co2_dry=4.5), "4 % is 0.04"),
        (lambda: exhaust.carbon_balance(*DIESEL, o2_dry=0.21), "0.2095"),
        (lambda: exhaust.carbon_balance(86.2, 13.6, 0.17, co2_dry=0.045), "mass fractions"),
        (lambda: exhaust.carbon_balance(*DIESEL, co2_dry=0.045, humidity_ratio=-0.01), "humidity ratio"),
        (lambda: exhaust.exhaust_heat(12, 600, 300, 0.9, 1.85), "not enough air"),
        (lambda: exhaust.exhaust_heat(12, 600, 25, 2.0, 1.85), "kelvin"),
        (lambda: exergy.exhaust_exergy(600, 3.0, 1.85, 25), "kelvin"),
        (lambda: exergy.exhaust_exergy(600, 3.0, 1.85, 298.15, 0.0), "absolute"),
        (lambda: exergy.constant_cp_exergy(1080, 573.15, 0.0), "kelvin"),
        (lambda: exergy.fuel_exergy_ratio(0.0, 0.1), "mass fractions"),
        (lambda: heat.heat_balance(0, 1, 1, 1, 1, 1), "above zero"),
        (lambda: turbocharger.compressor_efficiency(3.55e5, 0.99e5, 303, 475), "above its inlet"),
        (lambda: turbocharger.cold_air_compressor_efficiency(0.99e5, 3.55e5, 30, 202), "kelvin"),
        (lambda: turbocharger.cooler_effectiveness(30, 42, 32), "warmer than the water"),
        (lambda: turbocharger.cooler_heat(20, 147, 45), "kelvin"),
    ],
)
def test_impossible_scalars_are_refused_with_what_to_enter(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()


def test_impossible_elements_of_arrays_become_nan() -> None:
    """One good element and one that cannot be, in each formula, without a warning."""
    lam = np.array([2.0, 0.5])
    found = [
        exhaust.carbon_balance(*DIESEL, co2_dry=np.array([0.045, 0.2])).air_kg_kg,
        exhaust.carbon_balance(*DIESEL, o2_dry=np.array([0.15, 0.2095])).exhaust_kg_kg,
        exhaust.exhaust_heat(12, 600, 300, lam, 1.85),
        exergy.exhaust_exergy(600, lam, 1.85, 298.15)[1],
        exergy.constant_cp_exergy(1080, np.array([573.15, -1.0]), 303.15),
        exergy.fuel_exergy_ratio(np.array([0.86, 0.0]), 0.13),
        heat.heat_balance(np.array([20e6, 0.0]), 10e6, 1e6, 1e6, 2e6, 5e6).rest,
        turbocharger.compressor_efficiency(0.99e5, np.array([3.55e5, 0.5e5]), 303.15, 475.15),
        turbocharger.cold_air_compressor_efficiency(0.99e5, 3.55e5, 303.15, np.array([475.15, 303.15])),
        turbocharger.cooler_effectiveness(np.array([160.0, 32.0]), 42, 32)[1],
        turbocharger.cooler_heat(20, np.array([420.0, 100.0]), 320),
    ]
    assert [np.isfinite(each).tolist() for each in found] == [[True, False]] * len(found)
