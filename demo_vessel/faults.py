"""What is wrong with the ship, from when to when and how much: the scenario, and the source of truth.json.

`what` is the word that the log's reader should come to. Every effect is given at full size; in between it grows evenly.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from functools import lru_cache

from demo_vessel.records import MINUTES, minute_of


@dataclass(frozen=True, slots=True)
class Fault:
    what: str
    nature: str
    """engine, instrument, fuel, hull"""
    engine: str
    place: str
    begins: str
    """UTC"""
    ends: str
    """UTC; empty: it stands at the end of the history"""
    ended_by: str
    """word of the entry that ended it"""
    effects: Mapping[str, float] = field(default_factory=dict)
    grows: bool = True
    """evenly from its beginning to its end; else it stands at full size all the time"""

    @property
    def begin(self) -> int:
        return minute_of(self.begins)

    @property
    def end(self) -> int:
        return minute_of(self.ends) if self.ends else MINUTES

    def size(self, minute: int) -> float:
        """0 before and after; 1 at its end."""
        if not self.begin <= minute < self.end:
            return 0.0
        if not self.grows:
            return 1.0
        return (minute - self.begin) / (self.end - self.begin)


FAULTS = (
    Fault(
        "fouled_turbine", "engine", "ME", "1", "2025-01-12 00:00", "2025-05-02 10:00", "turbocharger_cleaning",
        {
            "sfoc": 0.024, "charge_pressure": -0.045, "exhaust_k": 17.0, "turbine_inlet_k": 6.0,
            "turbine_efficiency": -0.05, "turbocharger_speed": -0.012,
        },
    ),
    Fault(
        "power_meter_reads_low", "instrument", "ME", "", "2025-06-24 00:00", "2025-09-01 09:00",
        "instrument_adjusted", {"torque_zero": -0.024},
    ),
    Fault(
        "cooler_water_side_fouled", "engine", "ME", "1", "2025-09-29 00:00", "2026-01-23 11:00", "cooler_cleaning",
        {"sfoc": 0.0075, "approach_k": 11.0, "exhaust_k": 11.0, "turbine_inlet_k": 1.0},
    ),
    Fault(
        "injector_worn_one", "engine", "ME", "5", "2026-02-19 00:00", "2026-04-01 08:00", "fuel_valve_exchanged",
        {"sfoc": 0.0025, "unit_exhaust_k": 28.0, "unit_maximum_pressure_bar": -10.0},
    ),
    Fault(
        "rings_or_liner_worn_one", "engine", "AE2", "3", "2026-02-10 00:00", "2026-06-28 07:00", "unit_overhauled",
        {
            "sfoc": 0.014, "unit_exhaust_k": 16.0, "unit_compression": -0.13, "unit_maximum_pressure_bar": -6.0,
            "crankcase_mbar": 1.1,
        },
    ),
    Fault(
        # Both change-overs are in the book; the effect is that of the lot's true value (fuel.py).
        "low_calorific_value", "fuel", "ME", "R15", "2026-04-18 09:20", "2026-06-14 18:30", "change_over",
        {"calorific_value": -0.019}, grows=False,
    ),
    Fault(
        "heavy_running", "hull", "ME", "", "2026-07-05 00:00", "2026-08-23 12:00", "hull_cleaned",
        {"propeller_power": 0.10},
    ),
    Fault(
        "exhaust_thermometer_low_one", "instrument", "ME", "2", "2026-07-10 00:00", "2026-08-07 05:00",
        "instrument_exchanged", {"thermometer_k": -24.0},
    ),
    Fault(
        "fouled_compressor", "engine", "ME", "1", "2026-08-27 00:00", "", "",
        {
            "sfoc": 0.018, "charge_pressure": -0.045, "exhaust_k": 14.0, "compressor_efficiency": -0.055,
            "turbocharger_speed": 0.012,
        },
    ),
)  # fmt: skip

GENERAL_WEAR_PER_YEAR = 0.003
"""Consumption of the main engine grows so much a year, evenly, whatever else happens."""


@lru_cache(maxsize=256)
def _active(engine: str, minute: int) -> tuple[tuple[Fault, float], ...]:
    """The faults of an engine that stand at a moment, with their size."""
    return tuple((fault, size) for fault in FAULTS if fault.engine == engine and (size := fault.size(minute)))


def effect(name: str, engine: str, minute: int, place: str | None = None) -> float:
    """Sum of one effect on an engine at a moment; `place`: only of faults of that unit."""
    return sum(
        fault.effects.get(name, 0.0) * size
        for fault, size in _active(engine, minute)
        if place is None or fault.place == place
    )


def excess_consumption(engine: str, minute: int) -> float:
    """Relative excess consumption by the engine's own faults and, of the main engine, by wear."""
    wear = GENERAL_WEAR_PER_YEAR * minute / (365.25 * 1440) if engine == "ME" else 0.0
    return effect("sfoc", engine, minute) + wear


def hull_factor(minute: int) -> float:
    """Power needed at the same speed of the shaft, against the clean hull."""
    return 1.0 + effect("propeller_power", "ME", minute)
