"""Which events end a segment of which figure, and which are only drawn on its axis: a table, not code."""

from __future__ import annotations

EFFICIENCY, CORRECTED, ALL = "efficiency", "corrected", "all"
"""excess_gap and sfoc_deviation; every corrected figure; all figures of the engine"""

BORDERS: dict[str, str] = {
    "overhaul": EFFICIENCY,
    "turbocharger_overhaul": EFFICIENCY,
    "turbocharger_cleaning": EFFICIENCY,
    "cooler_cleaning": EFFICIENCY,
    "injectors_renewed": EFFICIENCY,
    "fuel_pumps_overhauled": EFFICIENCY,
    "setting_changed": ALL,
    "baseline_changed": ALL,
}
"""Kind of event or work -> what it is a border for, among the figures trended here."""

MARKS = (
    "unit_overhauled", "fuel_valve_exchanged", "turbine_washed", "compressor_washed", "soot_blown", "filter_changed",
    "change_over", "lot_change", "mode_changed", "hull_cleaned", "propeller_cleaned", "dry_dock",
)  # fmt: skip
"""Drawn on the axis; they end no segment of the efficiency figures."""

INSTRUMENT_EVENTS = ("instrument_exchanged", "instrument_adjusted")
INSTRUMENTS_OF_EFFICIENCY = (
    "fuel_meter_supply", "fuel_meter_return", "gas_meter", "fuel_meter_temperature", "shaft_power", "shaft_torque",
    "shaft_energy", "generator_energy", "generator_power",
)  # fmt: skip

WORDS = {
    "overhaul": "overhaul",
    "turbocharger_overhaul": "turbocharger overhauled",
    "turbocharger_cleaning": "turbocharger cleaned",
    "cooler_cleaning": "charge air cooler cleaned",
    "injectors_renewed": "injectors renewed",
    "fuel_pumps_overhauled": "fuel pumps overhauled",
    "setting_changed": "setting changed",
    "baseline_changed": "baseline changed",
    "instrument_exchanged": "instrument exchanged",
    "instrument_adjusted": "instrument adjusted",
    "power_source_changed": "power source changed",
    "unit_overhauled": "unit overhauled",
    "fuel_valve_exchanged": "fuel valve exchanged",
    "change_over": "other lot",
    "mode_changed": "other operating mode",
}


def word(kind: str) -> str:
    """An event in words."""
    return WORDS.get(kind, kind.replace("_", " "))


def ends_efficiency(kind: str, instrument: str = "") -> bool:
    """Whether an event ends a segment of excess_gap and sfoc_deviation."""
    if kind in INSTRUMENT_EVENTS:
        return instrument.partition(".")[0] in INSTRUMENTS_OF_EFFICIENCY
    return kind in BORDERS
