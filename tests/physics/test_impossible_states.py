"""States that cannot be: a sentence for scalars, NaN in that element of an array, and no warning on the way.

One table for fuel, density, power, ambient correction, humidity and station figures.
"""

import warnings
from collections.abc import Callable
from dataclasses import astuple, is_dataclass
from functools import partial

import numpy as np
import pytest

from logbook.physics import ambient, density, fuel, humidity, power, station

CHARGE_COOLED = "turbocharged four-stroke, charge-air cooler"
FULL_TERMS = "diesel or dual-fuel, naturally aspirated, limited by excess air"


def _output(gross: object, net: object, peak: object, capacity: object, period: object, service: object) -> object:
    return station.output(
        gross_kwh=gross, net_kwh=net, peak_kw=peak, gross_capacity_kw=capacity, net_capacity_kw=2760.0,
        period_h=period, service_h=service,
    )  # fmt: skip


# Formula, possible arguments, and for some of them values that cannot be.
FORMULAS: list[tuple[Callable[..., object], tuple[float, ...], dict[int, tuple[float, ...]]]] = [
    (partial(fuel.calorific_value, "residual"), (987.0, 2.5, 0.2, 0.0),
     {0: (0.987, -987.0, 1500.0), 1: (-1.0, 50.0), 2: (-0.1, 60.0), 3: (-0.1, 5.0)}),
    (fuel.ignition_number, (990.0, 180.0, 50.0), {0: (0.99, 0.0), 1: (0.0, -0.85, 1.0), 2: (-300.0, 500.0)}),
    (fuel.air_need, (0.862, 0.136, 0.0017, 0.0), {0: (-0.1, 86.2), 1: (13.6,), 2: (-1.0,), 3: (2.0,)}),
    (fuel.hydrogen_to_carbon, (0.862, 0.136), {0: (0.0, -1.0), 1: (-0.1,)}),
    (fuel.gas_volume, (1250.0, 5.205e5, 291.15), {1: (0.0, -4e4), 2: (0.0, -18.0)}),
    (lambda v, z: fuel.gas_volume(v, 1e5, 300.0, compressibility_ratio=z), (1.0, 1.0), {1: (0.0, -1.0)}),
    (density.expansion, (950.0,), {0: (0.95, 0.0, -950.0, 1200.0)}),
    (density.volume_correction, (950.0, 50.0), {0: (0.95, 0.0, 1200.0), 1: (-300.0, 400.0)}),
    (density.density15, (945.0, 40.0), {0: (0.945, 0.0, -5.0, 1e9), 1: (-300.0, 400.0)}),
    (density.mass_from_volume, (12.48, 962.0, 128.0), {1: (0.962, 0.0), 2: (400.0,)}),
    (density.mass_supply_less_return, (12.48, 128.0, 7.61, 137.0, 962.0), {1: (400.0,), 3: (-300.0,), 4: (0.0,)}),
    (density.mass_in_air, (974.657, 950.0), {1: (0.95, 1.1)}),
    (density.vacuum_from_air, (1e6, 950.0), {1: (0.95, 1.1)}),
    (power.swept_volume, (0.6, 2.4), {0: (0.0, -0.6), 1: (0.0,)}),
    (power.torsion_power, (0.0011, 82.6e9, 0.58, 2.0, 1.6, 0.1), {2: (0.05,), 3: (0.0,), 5: (0.58, -0.1)}),
    (power.brake_power_of_set, (1980e3, 0.955), {1: (0.0, 95.5, -1.0)}),
    (power.brake_power_with_take_off, (8200e3, 640e3, 0.93), {2: (0.0, 93.0)}),
    (lambda p, v, z, n: power.mean_pressure(p, v, z, n, "two-stroke"), (13.56e6, 0.68, 6.0, 1.75),
     {1: (0.0, -1.0), 2: (0.0,), 3: (0.0, -1.0)}),
    (lambda p, v, z, n: power.power_from_mean_pressure(p, v, z, n, "four-stroke"), (2e6, 0.03, 6.0, 12.5),
     {1: (0.0, -1.0), 2: (0.0,), 3: (-1.0,)}),
    (lambda v: power.cylinder_constant(v, "two-stroke"), (0.68,), {0: (0.0, -1.0)}),
    (power.specific_consumption, (6552.0, 1.4e11), {0: (-1.0,), 1: (0.0, -1.0)}),
    (power.brake_efficiency, (4.75e-8, 42.7e6), {0: (0.0, -1.0), 1: (0.0,)}),
    (power.heat_rate, (4.75e-8, 42.7e6), {0: (0.0, -1.0), 1: (0.0,)}),
    (power.propeller_power, (9.65e6, 0.97), {1: (-0.1,)}),
    (power.running_index, (0.8, 0.95), {0: (-0.1,), 1: (0.0, -1.0)}),
    (power.slip, (3.8, 125_280.0, 444_480.0), {0: (0.0, -3.8), 1: (0.0, -1.0)}),
    (power.power_from_index, (9.63e6, 0.98, 1.03), {1: (-0.1,), 2: (0.0, -1.0)}),
    (humidity.saturation_pressure, (25.0,), {0: (298.0, -257.14)}),
    (humidity.vapour_pressure, (25.0, 0.6), {0: (298.0,), 1: (60.0, -0.1)}),
    (humidity.humidity_ratio, (45.0, 0.6, 1e5), {0: (318.0,), 1: (60.0,), 2: (0.0, 100.0)}),
    (humidity.moist_density, (45.0, 0.6, 1e5), {0: (318.0,), 1: (60.0,), 2: (0.0, 100.0)}),
    (lambda p, t, c, eta: ambient.iso_3046(CHARGE_COOLED, p, t, coolant_c=c, mechanical_efficiency=eta),
     (1e5, 45.0, 32.0, 0.8), {0: (-1.0, 0.0, 1000.0), 1: (-300.0, 318.0), 2: (-300.0, 305.0), 3: (0.0, -0.8, 80.0)}),
    (lambda p, t, pv: ambient.iso_3046(FULL_TERMS, p, t, pv), (1e5, 45.0, 5000.0), {2: (-1.0, 2e5)}),
    (ambient.power_and_consumption, (0.9, 0.8), {0: (0.1,), 1: (0.0, 2.0)}),
    (lambda t, p, c: ambient.percentage_rules(t, p, c, 0.6, 0.2, -0.02), (30.0, 1005.0, 29.0),
     {0: (303.0,), 1: (1.0, 100.5e3), 2: (302.0,)}),
    (station.availability, (610.0, 62.0, 30.0, 18.0), {0: (-1.0,), 3: (-1.0,)}),
    (_output, (1340e3, 1276e3, 2710.0, 2880.0, 720.0, 610.0),
     {0: (0.0,), 1: (2e6,), 2: (0.0,), 3: (0.0,), 4: (0.0, 600.0), 5: (0.0, -1.0)}),
]  # fmt: skip

CASES = [
    pytest.param(formula, arguments, place, value, id=f"{number}-{place}-{value:g}")
    for number, (formula, arguments, impossible) in enumerate(FORMULAS)
    for place, values in impossible.items()
    for value in values
]


@pytest.fixture(autouse=True)
def _no_warning() -> object:
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        yield


def _results(found: object) -> list[object]:
    if is_dataclass(found) and not isinstance(found, type):
        return list(astuple(found))
    return list(found) if isinstance(found, tuple) else [found]


@pytest.mark.parametrize(("formula", "arguments", "place", "value"), CASES)
def test_a_scalar_that_cannot_be_is_refused_with_a_sentence(
    formula: Callable[..., object], arguments: tuple[float, ...], place: int, value: float
) -> None:
    given = list(arguments)
    given[place] = value
    with pytest.raises(ValueError, match=r"^[A-Z].*[.]$"):
        formula(*given)


@pytest.mark.parametrize(("formula", "arguments", "place", "value"), CASES)
def test_in_an_array_that_element_becomes_nan_and_the_rest_is_worked_out(
    formula: Callable[..., object], arguments: tuple[float, ...], place: int, value: float
) -> None:
    given: list[object] = list(arguments)
    given[place] = np.array([value, arguments[place], np.nan])
    alone, together = _results(formula(*arguments)), _results(formula(*given))
    spoilt = False
    for one, array in zip(alone, together, strict=True):
        elements = np.broadcast_to(np.asarray(array, float), (3,))
        assert elements[1] == pytest.approx(one)
        spoilt |= bool(np.isnan(elements[0]))
    assert spoilt


@pytest.mark.parametrize(("formula", "arguments"), [(formula, arguments) for formula, arguments, _ in FORMULAS])
def test_arrays_of_any_shape_give_what_scalars_give(
    formula: Callable[..., object], arguments: tuple[float, ...]
) -> None:
    alone = _results(formula(*arguments))
    together = _results(formula(*(np.full((2, 3), value) for value in arguments)))
    for one, array in zip(alone, together, strict=True):
        assert isinstance(one, float)
        assert np.shape(array) == (2, 3)
        assert np.asarray(array) == pytest.approx(np.full((2, 3), one))


def test_amounts_mixed_that_cannot_be() -> None:
    """Fuels run along axis 0: two tanks, the second of them empty."""
    mass, lcv = np.array([[612.0, 0.0], [17.5, 0.0]]), np.array([[48e6, 48e6], [42.7e6, 42.7e6]])
    blend = fuel.blended_calorific_value(mass, lcv)
    assert blend[0] == pytest.approx((612 * 48e6 + 17.5 * 42.7e6) / 629.5)
    assert np.isnan(blend[1])
    efficiency = power.efficiency_of_fuels(np.array([3950e3, 0.0]), mass / 3600, lcv)
    assert efficiency[0] == pytest.approx(0.472061, abs=1e-6)
    assert np.isnan(efficiency[1])
    with pytest.raises(ValueError, match="not below zero"):
        fuel.blended_density([1.0, -1.0], [845.0, 962.0])
