"""Main engine and generating sets: plain polynomials over load, an air path of a few relations, and the faults.

Nothing here is taken from the program that is to be tried on it. Loads are fractions of rated brake power, figures of
the curves hold at 25 degC suction air and coolant, 1000 mbar and 42.7 MJ/kg.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise

from demo_vessel.faults import effect, excess_consumption
from demo_vessel.fuel import InUse, density, injection_temperature_c
from demo_vessel.propulsion import RATED_KW, RATED_RPM

CYLINDERS = 7
REFERENCE_LCV = 42.7
BLOWERS_ON_BELOW = 0.33
SHAFT_GENERATOR_KW = 1000.0

SETS = ("AE1", "AE2", "AE3")
SET_CYLINDERS = 6
SET_RPM = 900.0
SET_ELECTRICAL_KW = 880.0

_DESIGN_RATIO = 3.92
_K = 0.2857
"""(k - 1)/k of air"""
_KELVIN = 273.15


@dataclass(frozen=True, slots=True)
class Conditions:
    """What the engine breathes and is cooled with."""

    suction_c: float
    coolant_c: float
    barometer_mbar: float


REFERENCE = Conditions(25.0, 25.0, 1000.0)


def interpolated(at: float, points: tuple[tuple[float, float], ...]) -> float:
    """Straight lines between points, held at the ends."""
    if at <= points[0][0]:
        return points[0][1]
    for (left, low), (right, high) in pairwise(points):
        if at <= right:
            return low + (at - left) / (right - left) * (high - low)
    return points[-1][1]


def generator_efficiency(electrical_kw: float) -> float:
    return interpolated(electrical_kw / SET_ELECTRICAL_KW, ((0.25, 0.925), (0.50, 0.948), (0.75, 0.956), (1.0, 0.958)))


SET_RATED_KW = SET_ELECTRICAL_KW / 0.958


def take_off_efficiency(electrical_kw: float) -> float:
    return interpolated(electrical_kw / SHAFT_GENERATOR_KW, ((0.25, 0.895), (0.50, 0.915), (1.0, 0.930)))


# Main engine


def consumption_g_kwh(load: float) -> float:
    """Consumption of the clean engine at reference conditions."""
    off = load - 0.80
    curve = 166.8 + 34.0 * off**2 + 6.0 * off**3
    return curve * 0.996 if load < BLOWERS_ON_BELOW else curve


def ambient_factor(conditions: Conditions) -> float:
    return (
        1.0
        + 0.0061 * (conditions.coolant_c - 25.0) / 10.0
        + 0.0021 * (conditions.suction_c - 25.0) / 10.0
        - 0.0002 * (conditions.barometer_mbar - 1000.0) / 10.0
    )


def main_engine_fuel_kg_h(brake_kw: float, conditions: Conditions, fuel: InUse, minute: int) -> float:
    """Fuel of the main engine [kg/h], faults and wear included."""
    return (
        brake_kw
        * consumption_g_kwh(brake_kw / RATED_KW)
        / 1000.0
        * ambient_factor(conditions)
        * (REFERENCE_LCV / fuel.true_lcv_mj_kg)
        * (1.0 + excess_consumption("ME", minute))
    )


@dataclass(frozen=True, slots=True)
class MainEngine:
    """True state of the main engine at a moment. Pressures as a gauge shows them."""

    scavenge_bar: float
    scavenge_c: float
    receiver_bar: float
    compression_bar: float
    maximum_bar: float
    turbocharger_rpm: float
    exhaust_c: float
    turbine_inlet_c: float
    turbine_outlet_c: float
    compressor_outlet_c: float
    filter_mbar: float
    cooler_mbar: float
    cooler_water_in_c: float
    cooler_water_out_c: float
    index: float
    blowers_on: bool

    @property
    def cooler_approach_k(self) -> float:
        return self.scavenge_c - self.cooler_water_in_c


def main_engine(
    load: float, rpm: float, fuel_kg_h: float, conditions: Conditions, fuel: InUse, minute: int
) -> MainEngine:
    """All of the air path and the cylinders' mean values at a load and speed."""
    blowers = load < BLOWERS_ON_BELOW
    barometer = conditions.barometer_mbar / 1000.0
    scavenge = (1.0 - 0.25 + 2.95 * load + 0.22 * load**2) * barometer
    scavenge *= 1.0 - 0.0024 * (conditions.suction_c - 25.0)
    scavenge *= 1.0 + effect("charge_pressure", "ME", minute) * min(1.0, load / 0.75)
    if blowers:
        scavenge += 0.10
    flow = scavenge / _DESIGN_RATIO
    filter_mbar, cooler_mbar = 6.4 * flow**2, 22.0 * flow**2
    ratio = (scavenge + cooler_mbar / 1000.0) / (barometer - filter_mbar / 1000.0)
    suction = conditions.suction_c + _KELVIN
    lift = ratio**_K - 1.0
    efficiency = (0.80 + 0.06 * load) * (1.0 + effect("compressor_efficiency", "ME", minute))
    outlet_c = suction * (1.0 + lift / efficiency) - _KELVIN
    approach = 4.0 + 6.5 * load + effect("approach_k", "ME", minute) * (0.35 + 0.65 * load / 0.8)
    scavenge_c = conditions.coolant_c + approach
    exhaust_c = (
        254.5 + 37.0 * load + 68.0 * load**2
        + 1.4 * (conditions.suction_c - 25.0) + 1.1 * (conditions.coolant_c - 25.0)
        + effect("exhaust_k", "ME", minute)
    )  # fmt: skip
    inlet_c = exhaust_c + 44.0 + 6.0 * load + effect("turbine_inlet_k", "ME", minute)
    receiver = 0.93 * (scavenge - barometer)
    expansion = 1.0 - ((barometer + 0.012 * load) / (receiver + barometer)) ** 0.25
    outlet_turbine = (inlet_c + _KELVIN) * (
        1.0 - 0.80 * (1.0 + effect("turbine_efficiency", "ME", minute)) * expansion
    ) - _KELVIN
    speed = (suction / 298.15 * lift / (_DESIGN_RATIO**_K - 1.0)) ** 0.5
    volume = fuel_kg_h / density(fuel.density15_kg_m3, injection_temperature_c(fuel)) / rpm
    full = RATED_KW * 0.1682 / 838.0 / RATED_RPM
    compression = (35.4 + 1.2 * (1.0 - load)) * scavenge - barometer
    return MainEngine(
        scavenge_bar=scavenge - barometer,
        scavenge_c=scavenge_c,
        receiver_bar=receiver,
        compression_bar=compression,
        maximum_bar=compression + 20.0 + 22.0 * load - 4.0 * load**2,
        turbocharger_rpm=14200.0 * speed * (1.0 + effect("turbocharger_speed", "ME", minute)),
        exhaust_c=exhaust_c,
        turbine_inlet_c=inlet_c,
        turbine_outlet_c=outlet_turbine,
        compressor_outlet_c=outlet_c,
        filter_mbar=filter_mbar,
        cooler_mbar=cooler_mbar,
        cooler_water_in_c=conditions.coolant_c,
        cooler_water_out_c=conditions.coolant_c + 13.0 * flow * (outlet_c - scavenge_c) / 130.0,
        index=6.0 + 82.0 * volume / full,
        blowers_on=blowers,
    )


# Generating sets


def set_consumption_g_kwh(load: float) -> float:
    """Consumption of a clean set, per brake kWh, at reference conditions."""
    return 201.0 + 62.0 * (load - 0.86) ** 2


def set_fuel_kg_h(name: str, electrical_kw: float, conditions: Conditions, fuel: InUse, minute: int) -> float:
    """Fuel of one set [kg/h]."""
    brake = electrical_kw / generator_efficiency(electrical_kw)
    warm = 1.0 + 0.0075 * (conditions.suction_c - 25.0) / 10.0 + 0.0040 * (conditions.coolant_c - 25.0) / 10.0
    consumption = set_consumption_g_kwh(brake / SET_RATED_KW) / 1000.0 * warm
    return brake * consumption * (REFERENCE_LCV / fuel.true_lcv_mj_kg) * (1.0 + excess_consumption(name, minute))


@dataclass(frozen=True, slots=True)
class GeneratingSet:
    """True state of a running set at a moment."""

    charge_bar: float
    charge_c: float
    compression_bar: float
    maximum_bar: float
    turbocharger_rpm: float
    exhaust_c: float
    turbine_inlet_c: float
    turbine_outlet_c: float
    index: float


def generating_set(electrical_kw: float, conditions: Conditions) -> GeneratingSet:
    """Mean values of a set at a load."""
    load = electrical_kw / generator_efficiency(electrical_kw) / SET_RATED_KW
    charge = 0.10 + 1.55 * load + 0.75 * load**2 - 0.004 * (conditions.suction_c - 25.0)
    exhaust = 300.0 + 62.0 * load + 28.0 * load**2 + 1.3 * (conditions.suction_c - 25.0)
    compression = 38.0 * (charge + 1.0) - 1.0
    return GeneratingSet(
        charge_bar=charge,
        charge_c=conditions.coolant_c + 6.0 + 6.0 * load,
        compression_bar=compression,
        maximum_bar=compression + 33.0 + 14.0 * load,
        turbocharger_rpm=47000.0 * (((charge + 1.0) ** _K - 1.0) / (3.40**_K - 1.0)) ** 0.5,
        exhaust_c=exhaust,
        turbine_inlet_c=exhaust + 74.0 + 20.0 * load,
        turbine_outlet_c=exhaust + 28.0 - 45.0 * load,
        index=8.0 + 27.0 * load,
    )
