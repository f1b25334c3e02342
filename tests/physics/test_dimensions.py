"""Dimensions close: in other base units every formula gives the same quantity.

pint states the dimension of each argument and result. The base units are then changed (a kilogram of 2, a metre of 3
...): a formula whose dimensions close gives the old number times the factor of its result's dimension, any other does
not. Formulas with an empirical constant in them (VCF, saturation pressure, site factors) cannot be held in this way.
"""

from collections.abc import Callable

import numpy as np
import pint
import pytest

from logbook.physics import account, bounds, compare, cost, density, detect, fuel, power, trend, uncertainty
from logbook.physics.carbon_intensity import carbon_intensity

UNITS = pint.UnitRegistry()
UNITS.define("florin = [money]")
BASE = {"[mass]": 2.0, "[length]": 3.0, "[time]": 5.0, "[temperature]": 7.0, "[money]": 11.0}

FUEL_PER_ENERGY, HEAT = "kg/J", "J/kg"


def _factor(unit: str) -> float:
    """How the number of a quantity changes with the base units."""
    dimension = UNITS.Quantity(1, unit).dimensionality
    return float(np.prod([BASE[base] ** -float(power_) for base, power_ in dimension.items()]))


def _numbers(result: object) -> list[float]:
    return [float(number) for number in np.ravel(np.asarray(result, float))]


def _theil_sen(values: list[float], times: list[float]) -> tuple[float, ...]:
    found = trend.theil_sen(values, times)
    return found.slope, found.low, found.intercept


def _welch(before: list[float], after: list[float], u_lot: float) -> tuple[float, ...]:
    found = compare.welch(before, after, u_lot=u_lot)
    return found.difference, found.standard_error, found.high, found.p


def _cusum(values: list[float], target: float, allowance: float, limit: float) -> tuple[float, ...]:
    found = detect.cusum(values, target, allowance, limit)
    return found.high[-1], found.low[0]


def _change_point(values: list[float]) -> tuple[float, ...]:
    found = detect.change_point(values)
    return found.after_mean, found.sum_of_squares, found.p


def _cleaning(price: float, growth: float) -> tuple[float, float]:
    found = cost.cleaning_interval(price, growth)
    return found.days, found.cost_per_day


def _forecast(values: list[float], times: list[float], level: float) -> float:
    found = cost.forecast(values, times, trend.theil_sen(values, times), level)
    assert found is not None
    return found.at


def _account(consumption: float, reference: float, lcv: float, reference_lcv: float) -> tuple[float, ...]:
    five = account.factors(consumption, reference, reference_lcv / lcv, 1.01, 1.02, 1.005)
    found = account.against_reference(
        consumption, reference, five, 1 / (consumption * lcv), 1 / (reference * reference_lcv)
    )
    return found.consumption[0], found.consumption[4], found.efficiency[4]


SERIES = [3.0, 1.0, 4.0, 1.5, 5.0, 9.0, 2.6, 5.3, 5.8]
TIMES = [1.0, 2.0, 3.0, 4.0, 5.5, 6.0, 7.0, 8.0, 9.0]
B, LCV = 4.7e-8, 42.7e6

FORMULAS: list[tuple[Callable[..., object], list[tuple[object, str]], list[str]]] = [
    (power.swept_volume, [(0.6, "m"), (2.4, "m")], ["m**3"]),
    (power.torsion_power, [(0.0011, ""), (82.6e9, "Pa"), (0.58, "m"), (2.0, "m"), (1.6, "1/s"), (0.1, "m")],
     ["N*m", "W"]),
    (power.brake_power_of_set, [(1.98e6, "W"), (0.955, "")], ["W"]),
    (power.brake_power_with_take_off, [(8.2e6, "W"), (6.4e5, "W"), (0.93, "")], ["W"]),
    (lambda p, v, n: power.mean_pressure(p, v, 6, n, "four-stroke"), [(2.88e6, "W"), (0.03, "m**3"), (12.5, "1/s")],
     ["Pa"]),
    (lambda p, v, n: power.power_from_mean_pressure(p, v, 6, n, "four-stroke"),
     [(2e6, "Pa"), (0.03, "m**3"), (12.5, "1/s")], ["W"]),
    (power.specific_consumption, [(6552.0, "kg"), (1.4e11, "J")], [FUEL_PER_ENERGY]),
    (power.brake_efficiency, [(B, FUEL_PER_ENERGY), (LCV, HEAT)], [""]),
    (power.heat_rate, [(B, FUEL_PER_ENERGY), (LCV, HEAT)], [""]),
    (power.efficiency_of_fuels, [(3950e3, "W"), ([0.17, 0.005], "kg/s"), ([48e6, 42.7e6], HEAT)], [""]),
    (power.propeller_power, [(9.65e6, "W"), (0.97, "")], ["W"]),
    (power.slip, [(3.8, "m"), (125_280, ""), (444_480.0, "m")], ["", "m"]),
    (power.power_from_index, [(9.63e6, "W"), (0.98, ""), (1.03, "")], ["W"]),
    (fuel.blended_calorific_value, [([612.0, 17.5], "kg"), ([48e6, 42.7e6], HEAT)], [HEAT]),
    (fuel.blended_density, [([40.0, 60.0], "m**3"), ([845.0, 962.0], "kg/m**3")], ["kg/m**3"]),
    (bounds.reversible_bound, [(1850.0, "K"), (300.0, "K")], [""]),
    (bounds.reference_efficiency, [(B, FUEL_PER_ENERGY), (1.01, ""), (LCV, HEAT)], [""]),
    (bounds.consumption_deviation,
     [(1.02 * B, FUEL_PER_ENERGY), (41e6, HEAT), (1.01, ""), (B, FUEL_PER_ENERGY), (LCV, HEAT)], [""]),
    (_account, [(1.1 * B, FUEL_PER_ENERGY), (B, FUEL_PER_ENERGY), (41e6, HEAT), (LCV, HEAT)],
     [FUEL_PER_ENERGY, FUEL_PER_ENERGY, ""]),
    (account.log_mean, [(1.1 * B, FUEL_PER_ENERGY), (B, FUEL_PER_ENERGY)], [FUEL_PER_ENERGY]),
    (cost.excess_fuel, [(1.02 * B, FUEL_PER_ENERGY), (B, FUEL_PER_ENERGY), (1.4e11, "J")], ["kg"]),
    (_cleaning, [(9000.0, "florin"), (6.0, "florin/s**2")], ["s", "florin/s"]),
    (_forecast, [(SERIES, "K"), (TIMES, "s"), (12.0, "K")], ["s"]),
    (_theil_sen, [(SERIES, "K"), (TIMES, "s")], ["K/s", "K/s", "K"]),
    (lambda y, e0, s: trend.ewma(y, e0, s).high, [(SERIES, "K"), (4.0, "K"), (0.5, "K")], ["K"]),
    (lambda x, u, lot: uncertainty.slope(x, [1, 1, 1, 2, 2, 2, 3, 3, 3], u, lot),
     [(TIMES, "s"), (0.3, "K"), (0.25, "K")], ["K/s"]),
    (uncertainty.repeatability, [(SERIES, "Pa"), (TIMES, "s")], ["Pa"]),
    (uncertainty.combined, [(3.0, "K"), (4.0, "K")], ["K"]),
    (uncertainty.of_full_scale, [(1.0, ""), (16.0, "Pa"), (4.0, "Pa")], [""]),
    (_welch, [(SERIES[:4], "K"), (SERIES[4:], "K"), (0.5, "K")], ["K", "K", "K", ""]),
    (compare.readings_needed, [(2.0, "K"), (1.0, "K")], [""]),
    (_cusum, [(SERIES, "K"), (4.0, "K"), (0.5, "K"), (2.0, "K")], ["K", "K"]),
    (_change_point, [(SERIES, "K")], ["K", "K**2", ""]),
]  # fmt: skip


def _in_both_bases(
    formula: Callable[..., object], arguments: list[tuple[object, str]], results: list[str]
) -> tuple[list[float], list[float]]:
    """What the formula gives in the other base units, and what it must give there."""
    before = _numbers(formula(*(value for value, _ in arguments)))
    after = _numbers(formula(*(np.asarray(value) * _factor(unit) for value, unit in arguments)))
    return after, [number * _factor(unit) for number, unit in zip(before, results, strict=True)]


@pytest.mark.parametrize(("formula", "arguments", "results"), FORMULAS)
def test_dimensions_close(
    formula: Callable[..., object], arguments: list[tuple[object, str]], results: list[str]
) -> None:
    after, expected = _in_both_bases(formula, arguments, results)
    assert after == pytest.approx(expected, rel=1e-9)


def test_a_formula_that_does_not_close_is_found_out() -> None:
    """Consumption with the calorific value forgotten is no efficiency; a torque is no power."""
    after, expected = _in_both_bases(lambda b, _: 1 / b, [(B, FUEL_PER_ENERGY), (LCV, HEAT)], [""])
    assert after != pytest.approx(expected, rel=0.1)
    after, expected = _in_both_bases(power.propeller_power, [(9.65e6, "N*m"), (0.97, "")], ["W"])
    assert after != pytest.approx(expected, rel=0.1)


@pytest.mark.parametrize(
    ("constant", "quantity", "unit"),
    [
        (power.J_PER_KWH, "1 kWh", "J"),
        (power.KG_J_PER_G_KWH, "1 g/kWh", "kg/J"),
        (power.NAUTICAL_MILE_M, "1 nautical_mile", "m"),
        (power.W_PER_METRIC_HORSEPOWER, "1 metric_horsepower", "W"),
        (fuel.REFERENCE_PRESSURE_PA, "1 atm", "Pa"),
    ],
)
def test_constants(constant: float, quantity: str, unit: str) -> None:
    """Calculated independently with pint."""
    assert constant == pytest.approx(UNITS.Quantity(quantity).to(unit).magnitude, rel=1e-12)


def test_torsion_meter_in_customary_units() -> None:
    """G I_p theta/L and 2 pi n M with units attached, calculated independently with pint."""
    outer, inner, length = UNITS.Quantity("580 mm"), UNITS.Quantity("120 mm"), UNITS.Quantity("2.0 m")
    modulus, speed = UNITS.Quantity("82.6 GPa"), UNITS.Quantity("98/min")
    torque = modulus * np.pi * (outer**4 - inner**4) / 32 * 0.0011 / length
    found = power.torsion_power(0.0011, 82.6e9, 0.58, 2.0, 98 / 60, 0.12)
    assert found[0] == pytest.approx(torque.to("N*m").magnitude)
    assert found[1] == pytest.approx((2 * np.pi * speed * torque).to("W").magnitude)


def test_mean_pressure_in_customary_units() -> None:
    """P k/(V_s z n) with units attached, calculated independently with pint."""
    volume = np.pi / 4 * UNITS.Quantity("320 mm") ** 2 * UNITS.Quantity("400 mm")
    pressure = (UNITS.Quantity("2880 kW") * 2 / (volume * 6 * UNITS.Quantity("750/min"))).to("Pa").magnitude
    assert power.mean_pressure(2880e3, power.swept_volume(0.32, 0.4), 6, 12.5, "four-stroke") == pytest.approx(pressure)


def test_mass_from_counters_in_customary_units() -> None:
    """Litres times kg/m3 times a bare VCF is kilograms; each meter with its own, calculated independently with pint."""
    rho = UNITS.Quantity("962 kg/m**3")
    supply = UNITS.Quantity("12480 L") * rho * density.volume_correction(962.0, 128.0)
    back = UNITS.Quantity("7610 L") * rho * density.volume_correction(962.0, 137.0)
    found = density.mass_supply_less_return(12.480, 128.0, 7.610, 137.0, 962.0)
    assert found == pytest.approx((supply - back).to("kg").magnitude)


def test_heat_rate_in_customary_units() -> None:
    """171 g/kWh at 42.7 MJ/kg in kJ/kWh, calculated independently with pint."""
    rate = (UNITS.Quantity("171 g/kWh") * UNITS.Quantity("42.7 MJ/kg")).to("kJ/kWh").magnitude
    assert 3600 * power.heat_rate(171 * power.KG_J_PER_G_KWH, 42.7e6) == pytest.approx(rate)


def test_gas_volume_in_customary_units() -> None:
    """p V/T of the meter over that of the reference, calculated independently with pint."""
    barometer = UNITS.Quantity("1.005 bar")
    pressure, temperature = UNITS.Quantity("4.2 bar") + barometer, UNITS.Quantity(18, "degC").to("K")
    volume = UNITS.Quantity("1250 m**3") * pressure / UNITS.Quantity("1 atm") * UNITS.Quantity("273.15 K") / temperature
    assert fuel.gas_volume(1250, 5.205e5, 291.15) == pytest.approx(volume.to("m**3").magnitude)


def test_carbon_intensity_in_customary_units() -> None:
    """Tonnes of CO2 over tonnes times miles is g/(t nm), calculated independently with pint."""
    co2 = UNITS.Quantity("5000 t") * 3.114 + UNITS.Quantity("300 t") * 3.206
    attained = (co2 / (UNITS.Quantity("60000 t") * UNITS.Quantity("55000 nautical_mile"))).to("g/(t*nautical_mile)")
    found = carbon_intensity("bulk carrier", 60_000, 2024, 55_000, {"heavy_fuel_oil": 5000, "diesel_oil": 300})
    assert found.attained == pytest.approx(attained.magnitude)


def test_cylinder_constant_in_its_own_units() -> None:
    """kW for each bar and rev/min, calculated independently with pint."""
    volume = UNITS.Quantity(0.678584, "m**3")
    constant = (volume * UNITS.Quantity(1, "bar") / UNITS.Quantity(1, "min")).to("kW").magnitude
    assert power.cylinder_constant(volume.magnitude, "two-stroke") == pytest.approx(constant)


def test_efficiency_in_customary_units() -> None:
    """171 g/kWh at 42.7 MJ/kg, calculated independently with pint."""
    eta = (1 / (UNITS.Quantity("171 g/kWh") * UNITS.Quantity("42.7 MJ/kg"))).to("").magnitude
    assert power.brake_efficiency(171 * power.KG_J_PER_G_KWH, 42.7e6) == pytest.approx(eta)
