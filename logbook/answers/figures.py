"""Figures of every reading for people and programs, and the trace that unfolds one of them."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from math import isfinite
from typing import Any

import pandas as pd

from logbook.answers.entries import label, shown_with_unit
from logbook.answers.headline import headline
from logbook.book.entry import Entry
from logbook.judgement import figures as judged
from logbook.judgement.figures import COLUMNS
from logbook.judgement.group import common_meters, group_figures
from logbook.plant.records import Plant

# Figure -> (formula in words, the figures it is made of, keys of the readings behind it, source)
_TRACES: dict[str, tuple[str, tuple[str, ...], tuple[str, ...], str]] = {
    "brake_thermal_efficiency": (
        "brake energy of the span / (fuel mass x lower calorific value) = 3600 / (g/kWh x MJ/kg)",
        ("brake_power_kw", "running_h", "fuel_rate_kg_h", "lower_calorific_value_mj_kg", "sfoc_g_kwh"),
        ("shaft_power", "generator_energy", "generator_power", "fuel_meter_supply", "fuel_meter_return", "gas_meter"),
        "ISO 3046-1 terms; arithmetic",
    ),
    "sfoc_g_kwh": (
        "fuel mass of the span / brake energy of the span",
        ("fuel_rate_kg_h", "brake_power_kw", "running_h"),
        ("fuel_meter_supply", "fuel_meter_return", "fuel_meter_temperature", "shaft_power", "generator_energy"),
        "supply and return each with its own temperature: ASTM D1250-80, table 54B",
    ),
    "heat_rate_kj_kwh": (
        "fuel energy (lower calorific value) / brake energy",
        ("sfoc_g_kwh", "lower_calorific_value_mj_kg"),
        ("fuel_meter_supply", "gas_meter", "generator_energy"),
        "arithmetic",
    ),
    "sfoc_corrected_g_kwh": (
        "heat rate / calorific value of the reference / ambient factor",
        ("heat_rate_kj_kwh", "sfoc_g_kwh", "lower_calorific_value_mj_kg"),
        ("compressor_inlet_temperature", "barometric_pressure", "cooler_water_inlet_temperature"),
        "the engine's correction rule in plant.toml",
    ),
    "sfoc_deviation": (
        "corrected consumption / reference consumption at this load - 1",
        ("sfoc_corrected_g_kwh", "sfoc_reference_g_kwh", "load_fraction"),
        (),
        "reference: monotone cubic (Fritsch-Carlson) through the trial's points",
    ),
    "excess_gap": (
        "efficiency of the reference at this load and ambient - brake thermal efficiency"
        " (the combustion temperature cancels)",
        ("sfoc_reference_g_kwh", "sfoc_deviation", "brake_thermal_efficiency", "u_excess_gap"),
        (),
        "the two definitions of the gap subtracted",
    ),
    "reversible_bound_ambient": (
        "1 - ambient temperature / combustion temperature, both in kelvin",
        ("combustion_temperature_k", "combustion_temperature_method", "ambient_temperature_k"),
        ("compressor_inlet_temperature", "charge_air_pressure", "charge_air_temperature", "cylinder_maximum_pressure"),
        "Carnot; a yardstick between two temperatures, not a loss that could be recovered",
    ),
    "gap": (
        "reversible bound - brake thermal efficiency",
        ("reversible_bound_ambient", "brake_thermal_efficiency"),
        (),
        "",
    ),
    "load_fraction": ("brake power / rated power", ("brake_power_kw", "power_source"), ("shaft_power",), ""),
}


def figures(plant: Plant, entries: Sequence[Entry], engine_id: str) -> pd.DataFrame:
    """One row a reading; the columns and names that figures carry outside."""
    if engine_id in groups(plant):
        return group_figures(plant, entries, engine_id)
    return judged.figures(plant, entries, engine_id)


def groups(plant: Plant) -> tuple[str, ...]:
    """Fuel meters that serve several engines: figures exist for the group, under the meter's name."""
    return tuple(meter.id for meter in common_meters(plant))


def records(frame: pd.DataFrame) -> Iterator[dict[str, Any]]:
    """Rows as plain records: None where a figure cannot be had, never 0."""
    for row in frame.to_dict("records"):
        yield {
            str(key): None if isinstance(value, float) and not isfinite(value) else value for key, value in row.items()
        }


def explainable() -> tuple[str, ...]:
    return tuple(_TRACES)


def explain(plant: Plant, entries: Sequence[Entry], row: dict[str, Any], figure: str) -> list[str]:
    """A figure of one reading unfolded: formula, the figures and readings behind it, source, reasons."""
    formula, inputs, keys, source = _TRACES[figure]
    lines = [
        f"{figure} of entry {row['entry']} ({row['engine']}, {row['at_utc']}): {_shown(row[figure])}",
        f"= {formula}",
    ]
    lines += [f"  {name:<32} {_shown(row[name])}" for name in inputs]
    numbered = {entry.number: entry for entry in entries}
    entry = numbered.get(int(row["entry"]))
    if entry is not None and keys:
        lines.append("readings of this entry (the span begins at the reading before):")
        for key, value in entry.values().items():
            if key.partition(".")[0] in keys:
                lines.append(f"  {label(plant, key):<32} {shown_with_unit(plant, key, value)}")
    if source:
        lines.append(f"source: {source}")
    return lines + headline(row)[:1] if figure == "excess_gap" else lines


def _shown(value: Any) -> str:
    if value is None or (isinstance(value, float) and not isfinite(value)):
        return "cannot be had"
    return f"{value:.6g}" if isinstance(value, float) else str(value)


__all__ = ["COLUMNS", "explain", "explainable", "figures", "records"]
