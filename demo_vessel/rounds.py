"""The walk: true states of the machines turned into the texts that an engineer types, point by point in walk order."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from demo_vessel.faults import effect
from demo_vessel.fuel import InUse, injection_temperature_c
from demo_vessel.instruments import Counter, Gauges
from demo_vessel.machinery import (
    CYLINDERS,
    SET_CYLINDERS,
    SET_RPM,
    Conditions,
    GeneratingSet,
    MainEngine,
)
from demo_vessel.propulsion import RATED_KW, RATED_RPM

TORSION_ERROR = 0.003
"""Constant relative error of the torsion meter."""
TORSION_SCATTER = 0.004
"""Relative scatter of one reading of the torsion meter."""


@dataclass
class MainEngineCounters:
    """All totalisers of the main engine."""

    revolutions: Counter = field(default_factory=lambda: Counter(61_254_310, 8))
    running_hours: Counter = field(default_factory=lambda: Counter(38_412.7, 6, 1))
    cylinder_oil_l: Counter = field(default_factory=lambda: Counter(402_117, 7))
    shaft_generator_kwh: Counter = field(default_factory=lambda: Counter(5_310_480, 8))
    supply_l: Counter = field(default_factory=lambda: Counter(76_402_551, 8, error=0.0005))
    return_l: Counter = field(default_factory=lambda: Counter(41_097_223, 8, error=0.0006))


@dataclass
class SetCounters:
    """Totalisers of one generating set."""

    energy_kwh: Counter
    running_hours: Counter


def set_counters() -> dict[str, SetCounters]:
    """Totalisers of the sets as they stand at the beginning."""
    return {
        name: SetCounters(Counter(kwh, 8, error=error), Counter(hours, 6, 1))
        for name, kwh, hours, error in (
            ("AE1", 9_412_310, 24_618.2, 0.001),
            ("AE2", 9_876_145, 25_730.9, -0.002),
            ("AE3", 8_903_777, 23_402.4, 0.0015),
        )
    }


def set_meters() -> dict[str, Counter]:
    """The common fuel meters of the sets as they stand at the beginning."""
    return {"AE_in": Counter(20_815_402, 8, error=0.0004), "AE_out": Counter(15_230_776, 8)}


@dataclass(frozen=True, slots=True)
class Reader:
    """Who reads, and how coarsely: one of the engineers takes exhaust thermometers to 5 degC."""

    name: str
    coarse: bool


@dataclass(frozen=True, slots=True)
class Spot:
    """The main engine at the moment it is read."""

    rpm: float
    shaft_kw: float
    shaft_generator_kw: float


class Walk:
    """One pair of eyes on all instruments of the ship."""

    def __init__(self, gauges: Gauges) -> None:
        self._gauges = gauges

    def main_engine(
        self, engine: MainEngine, spot: Spot, conditions: Conditions, fuel: InUse, minute: int, reader: Reader
    ) -> dict[str, str]:
        """A full round of the running main engine, counters apart."""
        gauges = self._gauges
        torque_zero = effect("torque_zero", "ME", minute) * RATED_KW * spot.rpm / RATED_RPM
        power = spot.shaft_kw * (1.0 + TORSION_ERROR) + torque_zero
        lube_c = 43.0 + 0.08 * (conditions.coolant_c - 25.0)
        load = spot.shaft_kw / RATED_KW
        values = {
            "engine_state": "running",
            "engine_speed": gauges.read("rpm", spot.rpm, 0.03, 0.1),
            "shaft_power": gauges.read("torsion", power, TORSION_SCATTER * spot.shaft_kw, 10),
            "load_indicator": gauges.read("load indicator", engine.index / 0.9, 0.4, 0.5),
            "auxiliary_blower_state": "on" if engine.blowers_on else "off",
        }
        units = [
            engine.exhaust_c
            + gauges.constant_error(f"unit exhaust {unit}", 3.5)
            + effect("unit_exhaust_k", "ME", minute, str(unit))
            + effect("thermometer_k", "ME", minute, str(unit))
            for unit in range(1, CYLINDERS + 1)
        ]
        values |= gauges.row("cylinder_exhaust_temperature", units, 2.0, 5 if reader.coarse else 1, 0.0)
        values |= gauges.row("cylinder_jacket_outlet_temperature", [83.5 + 2.0 * load] * CYLINDERS, 0.6, 1, 0.9)
        values |= gauges.row(
            "cylinder_piston_cooling_outlet_temperature", [lube_c + 6.0 + 9.0 * load] * CYLINDERS, 0.6, 1, 1.0
        )
        values |= {
            "compressor_inlet_temperature.1": gauges.read("suction", conditions.suction_c, 0.5, 1),
            "air_filter_pressure_drop.1": gauges.read("filter", engine.filter_mbar, 0.12, 0.1),
            "compressor_outlet_temperature.1": gauges.read("compressor outlet", engine.compressor_outlet_c, 1.2, 1),
            "charge_air_pressure": gauges.read("scavenge", engine.scavenge_bar, 0.012, 0.01),
            "charge_air_temperature.1": gauges.read("scavenge thermometer", engine.scavenge_c, 0.5, 1),
            "cooler_air_pressure_drop.1": gauges.read("cooler", engine.cooler_mbar, 0.3, 0.5),
            "cooler_water_inlet_temperature.1": gauges.read("water in", engine.cooler_water_in_c, 0.4, 1),
            "cooler_water_outlet_temperature.1": gauges.read("water out", engine.cooler_water_out_c, 0.4, 1),
            "turbocharger_speed.1": gauges.read("turbocharger", engine.turbocharger_rpm, 40.0, 10),
            "turbine_inlet_temperature.1": gauges.read("before turbine", engine.turbine_inlet_c, 2.5, 1),
            "turbine_outlet_temperature.1": gauges.read("after turbine", engine.turbine_outlet_c, 2.0, 1),
            "exhaust_receiver_pressure": gauges.read("receiver", engine.receiver_bar, 0.012, 0.01),
            "exhaust_back_pressure": gauges.read("back pressure", 14.0 * load + 2.0, 0.6, 1),
            "engine_fuel_index": gauges.read("index", engine.index, 0.35, 0.5),
            "fuel_inlet_pressure": gauges.read("fuel pressure", 7.9, 0.08, 0.1),
            "fuel_inlet_temperature": gauges.read("fuel temperature", injection_temperature_c(fuel), 0.8, 1),
            "fuel_viscosity": gauges.read("viscometer", 3.1 if fuel.distillate else 13.0, 0.25, 0.1),
            "cylinder_oil_feed_setting": "0.85",
            "lube_oil_inlet_pressure": gauges.read("lube oil pressure", 2.35, 0.02, 0.05),
            "lube_oil_inlet_temperature": gauges.read("lube oil", lube_c, 0.5, 1),
            "jacket_water_inlet_temperature": gauges.read("jacket in", 72.0 + 1.0 * load, 0.6, 1),
            "jacket_water_outlet_temperature": gauges.read("jacket out", 83.5 + 2.0 * load, 0.6, 1),
            "jacket_water_pressure": gauges.read("jacket pressure", 3.6, 0.04, 0.1),
            "thrust_bearing_temperature.1": gauges.read("thrust", 47.0 + 9.0 * load, 0.7, 1),
            "shaft_generator_power": (
                gauges.read("shaft generator", spot.shaft_generator_kw, 0.01 * spot.shaft_generator_kw, 5)
                if spot.shaft_generator_kw
                else "stopped"
            ),
        }
        return values

    def main_engine_pressures(self, engine: MainEngine, minute: int) -> dict[str, str]:
        """The weekly set with the indicator."""
        gauges, units = self._gauges, range(1, CYLINDERS + 1)
        maxima = [
            engine.maximum_bar
            + gauges.constant_error(f"unit maximum {unit}", 1.0)
            + effect("unit_maximum_pressure_bar", "ME", minute, str(unit))
            for unit in units
        ]
        compressions = [engine.compression_bar + gauges.constant_error(f"unit compression {u}", 0.7) for u in units]
        return gauges.row("cylinder_maximum_pressure", maxima, 1.0, 1, 0.0) | gauges.row(
            "cylinder_compression_pressure", compressions, 0.8, 1, 0.0
        )

    def main_engine_idle(self, state: str) -> dict[str, str]:
        """The main engine standing, kept warm."""
        return {
            "engine_state": state,
            "shaft_generator_power": "stopped",
            "jacket_water_outlet_temperature": self._gauges.read("jacket out", 64.0, 1.2, 1),
            "lube_oil_inlet_temperature": self._gauges.read("lube oil", 39.0, 0.8, 1),
        }

    def main_engine_manoeuvring(self, rpm: float, fuel: InUse) -> dict[str, str]:
        """On the telegraph nobody walks round: what the control room shows."""
        gauges = self._gauges
        return {
            "engine_state": "running",
            "engine_speed": gauges.read("rpm", rpm, 4.0, 1),
            "shaft_power": "N/R",
            "fuel_inlet_temperature": gauges.read("fuel temperature", injection_temperature_c(fuel), 1.2, 1),
            "lube_oil_inlet_pressure": gauges.read("lube oil pressure", 2.35, 0.03, 0.05),
            "jacket_water_outlet_temperature": gauges.read("jacket out", 80.0, 1.0, 1),
            "shaft_generator_power": "stopped",
        }

    def main_engine_meters(self, counters: MainEngineCounters, fuel: InUse, running: bool) -> dict[str, str]:
        """Counters last."""
        values = {
            "revolution_counter": counters.revolutions.text(),
            "engine_running_hours": counters.running_hours.text(),
            "cylinder_oil_meter": counters.cylinder_oil_l.text(),
            "shaft_generator_energy": counters.shaft_generator_kwh.text(),
            "fuel_meter_supply.ME_in": counters.supply_l.text(),
            "fuel_meter_return.ME_out": counters.return_l.text(),
        }
        if running:
            supply_c, return_c = meter_temperatures_c(fuel)
            values |= {
                "fuel_meter_temperature.ME_in": self._gauges.read("meter in", supply_c, 0.4, 1),
                "fuel_meter_temperature.ME_out": self._gauges.read("meter out", return_c, 0.4, 1),
            }
        return values

    def running_set(
        self, name: str, machine: GeneratingSet, electrical_kw: float, conditions: Conditions, minute: int, coarse: bool
    ) -> dict[str, str]:
        """A round of one running generating set, counters apart."""
        gauges = self._gauges
        units = [
            machine.exhaust_c
            + gauges.constant_error(f"{name} exhaust {unit}", 5.0)
            + effect("unit_exhaust_k", name, minute, str(unit))
            for unit in range(1, SET_CYLINDERS + 1)
        ]
        values = {
            "engine_state": "running",
            "generator_power": gauges.read(f"{name} kW", electrical_kw, 0.012 * electrical_kw, 5),
            "power_factor": gauges.read(f"{name} pf", 0.82, 0.01, 0.01),
            "engine_speed": gauges.read(f"{name} rpm", SET_RPM, 1.0, 1),
        }
        # The places of a set's row carry the set's own name in the gauges' memory only.
        step = 5 if coarse else 1
        values |= {
            f"cylinder_exhaust_temperature.{unit}": gauges.read(f"{name} exh", value, 2.5, step)
            for unit, value in enumerate(units, 1)
        }
        crankcase = 1.2 + effect("crankcase_mbar", name, minute)
        values |= {
            "charge_air_pressure": gauges.read(f"{name} charge", machine.charge_bar, 0.02, 0.05),
            "charge_air_temperature.1": gauges.read(f"{name} charge t", machine.charge_c, 0.6, 1),
            "cooler_water_inlet_temperature.1": gauges.read(f"{name} water", conditions.coolant_c, 0.5, 1),
            "turbocharger_speed.1": gauges.read(f"{name} tc", machine.turbocharger_rpm, 150.0, 100),
            "turbine_inlet_temperature.1": gauges.read(f"{name} before turbine", machine.turbine_inlet_c, 3.0, 1),
            "turbine_outlet_temperature.1": gauges.read(f"{name} after turbine", machine.turbine_outlet_c, 2.5, 1),
            "engine_fuel_index": gauges.read(f"{name} index", machine.index, 0.3, 0.5),
            "fuel_inlet_pressure": gauges.read(f"{name} fuel", 6.2, 0.1, 0.1),
            "lube_oil_inlet_pressure": gauges.read(f"{name} oil p", 4.3, 0.05, 0.1),
            "lube_oil_inlet_temperature": gauges.read(f"{name} oil t", 63.0, 0.7, 1),
            "lube_oil_filter_pressure_drop": gauges.read(f"{name} oil dp", 0.45, 0.03, 0.05),
            "jacket_water_outlet_temperature": gauges.read(f"{name} jacket", 84.0, 0.8, 1),
            "crankcase_pressure": gauges.read(f"{name} crankcase", crankcase, 0.12, 0.1),
        }
        return values

    def set_pressures(self, name: str, machine: GeneratingSet, minute: int) -> dict[str, str]:
        """The monthly set with the indicator."""
        values = {}
        for unit in range(1, SET_CYLINDERS + 1):
            maximum = machine.maximum_bar + effect("unit_maximum_pressure_bar", name, minute, str(unit))
            compression = machine.compression_bar * (1.0 + effect("unit_compression", name, minute, str(unit)))
            values[f"cylinder_maximum_pressure.{unit}"] = self._gauges.read(f"{name} pmax", maximum, 1.2, 1)
            values[f"cylinder_compression_pressure.{unit}"] = self._gauges.read(f"{name} pcomp", compression, 1.0, 1)
        return values

    def plant(
        self, sea_c: float, conditions: Conditions, air_c: float, meters: Mapping[str, Counter], fuel: InUse
    ) -> dict[str, str]:
        """What belongs to the whole ship, and the common meters of the sets."""
        gauges = self._gauges
        supply_c, return_c = meter_temperatures_c(fuel)
        return {
            "sea_water_temperature": gauges.read("sea", sea_c, 0.3, 1),
            "low_temperature_water_temperature": gauges.read("LT", conditions.coolant_c, 0.4, 1),
            "barometric_pressure": gauges.read("barometer", conditions.barometer_mbar, 0.6, 1),
            "outside_air_temperature": gauges.read("outside", air_c, 0.5, 1),
            "fuel_meter_supply.AE_in": meters["AE_in"].text(),
            "fuel_meter_temperature.AE_in": gauges.read("AE meter in", supply_c, 0.5, 1),
            "fuel_meter_return.AE_out": meters["AE_out"].text(),
            "fuel_meter_temperature.AE_out": gauges.read("AE meter out", return_c, 0.5, 1),
        }


def meter_temperatures_c(fuel: InUse) -> tuple[float, float]:
    """Fuel at the supply and at the return meter [degC]."""
    injection = injection_temperature_c(fuel)
    return injection - 2.0, injection + (3.0 if fuel.distillate else 7.0)
