"""One row of figures for each reading of an engine, with the reasons that stand against comparing it.

A figure that cannot be had is NaN, never 0, and `flags` says why.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import pandas as pd

from logbook.book.entry import Entry, utc_text
from logbook.judgement import combustion, doubt, fuel, lots, power, reference
from logbook.judgement.events import (
    WASHES,
    Event,
    count_within,
    cut_out_periods,
    doubted_periods,
    events_of,
    overlapping,
    weather_periods,
)
from logbook.judgement.flags import Flags, comparable, joined
from logbook.judgement.spans import Spans, begin_of, spans_of
from logbook.judgement.table import Bools, Floats, Table, build_table, plant_value
from logbook.physics import bounds
from logbook.physics.uncertainty import combined, of_excess
from logbook.plant.records import Engine, Plant

COLUMNS = (
    "entry", "engine", "round", "at_utc", "utc_offset_min", "occasion", "operating_mode", "elapsed_h", "running_h",
    "load_fraction", "brake_power_kw", "power_source", "fuel_rate_kg_h", "fuel_source", "lot",
    "lower_calorific_value_mj_kg", "sfoc_g_kwh", "sfoc_corrected_g_kwh", "heat_rate_kj_kwh",
    "brake_thermal_efficiency", "combustion_temperature_k", "combustion_temperature_method", "ambient_temperature_k",
    "exhaust_temperature_k", "reversible_bound_ambient", "reversible_bound_exhaust", "ideal_cycle_efficiency",
    "indicated_efficiency", "gap", "gap_reference", "excess_gap", "second_law_ratio", "sfoc_reference_g_kwh",
    "sfoc_deviation", "u_brake_thermal_efficiency", "u_excess_gap", "comparable", "flags", "plant_digest",
)  # fmt: skip
"""The names that figures carry wherever they leave the program, in this order."""

PLANT = "plant"
EFFICIENCY_PLAUSIBLE = (0.25, 0.56)
SFOC_PLAUSIBLE = (150.0, 330.0)
PLAUSIBLE_ABOVE_LOAD = 0.25
LONE_CONSUMPTION, LONE_POWER = 0.025, 0.03
"""A reading is never doubted for standing alone by less than this, relative."""
UNPROVED_CONSUMPTION = 0.15
"""Before the scatter of this engine is known: so far from its reference an engine is not [relative]."""
WATCH_NEAR_H, HOUR_NEAR_H = 2.0, 0.999
ZERO_C_K = 273.15
MJ_KWH = 3.6


@dataclass(frozen=True)
class Worked:
    """Everything worked out for one engine, row by row: what figures, groups, traces and trends are made of."""

    engine: Engine
    table: Table
    running: Bools
    spans: Spans
    events: tuple[Event, ...]
    power: power.Power
    fuel: fuel.FuelUsed
    lots: lots.LotsInUse
    ambient: reference.Ambient
    reference: reference.Reference
    combustion: combustion.Combustion
    frame: pd.DataFrame
    """the columns of COLUMNS"""


def figures(plant: Plant, entries: Sequence[Entry], engine_id: str) -> pd.DataFrame:
    """One row for each reading of an engine; columns as COLUMNS, shape (readings, 39).

    `entries` of the book, valid ones only, in any order. Raises KeyError for an engine that the plant has not.
    """
    return work_out(plant, entries, engine_id).frame


def work_out(plant: Plant, entries: Sequence[Entry], engine_id: str) -> Worked:
    """The same with everything behind it."""
    engine = plant.engine(engine_id)
    table = build_table(entries, engine_id)
    plant_table = build_table(entries, PLANT)
    sisters = _sisters(plant, engine_id)
    others = [plant_table, *(build_table(entries, sister) for sister in sisters)]
    events = events_of(entries, engine_id)
    flags = Flags(len(table))
    running = table.running()
    meters = fuel.meter_columns(plant, engine_id, table, others)
    begin = begin_of(fuel.counted_rows(meters, events, len(table)))
    spans = spans_of(table, begin, running, events, engine.counters.get("engine_running_hours"))

    within = HOUR_NEAR_H if plant.hourly else WATCH_NEAR_H
    barometer_read = plant_value(table, plant_table, "barometric_pressure", within)
    barometer = reference.barometer_of(plant, barometer_read.values, barometer_read.nearby, flags)
    humid = plant_value(table, plant_table, "relative_humidity", within).values
    around = reference.ambient_of(engine, table, barometer, humid, flags)

    liquid, gas = lots_of(plant, entries, engine, table, spans, events, meters)
    used = fuel.fuel_used(
        plant, meters, spans=spans, running=running, events=events, liquid=liquid, gas=gas, barometer_pa=barometer
    )
    in_use = gas if meters and all(column.meter.key == fuel.GAS for column in meters) else liquid
    common = _common(plant, engine_id, entries, spans, others[1:])
    mass = np.where(common, np.nan, used.mass_kg)
    heat = np.where(common, np.nan, used.energy_mj)

    # A trial does not state the density of its fuel, so that power from the index cannot be had from it.
    brake = power.power_of(engine, table, spans, running, events, np.full(len(table), np.nan))
    load = brake.brake_kw / engine.rated_power_kw
    ref = reference.reference_of(
        engine, table, load=load, power_factor=around.power_factor, running=running, events=events, flags=flags
    )
    hours = np.where(spans.running_h > 0, spans.running_h, np.nan)
    energy = np.where(brake.energy_kwh > 0, brake.energy_kwh, np.nan)
    fuel_rate = mass / hours
    sfoc = mass * 1000 / energy
    heat_rate = heat * 1000 / energy
    efficiency = energy * MJ_KWH / np.where(heat > 0, heat, np.nan)
    value = np.where(mass > 0, heat / np.where(mass > 0, mass, 1), in_use.lower_calorific_value_mj_kg)
    corrected = heat_rate / ref.lower_calorific_value_mj_kg / around.factor
    deviation = corrected / ref.sfoc_g_kwh - 1
    expected = 3600 / (ref.sfoc_g_kwh * around.factor * ref.lower_calorific_value_mj_kg)
    excess = np.asarray(bounds.excess_gap(expected, efficiency))

    burning = combustion.combustion_of(
        engine, table,
        barometer_pa=barometer, fuel_kg_s=fuel_rate / 3600, speed_rpm=_speed(engine, table, brake),
        lower_calorific_value_j_kg=value * 1e6, hydrogen_to_carbon=in_use.hydrogen_to_carbon,
        curve_charge_pressure_bar=ref.charge_pressure_bar, curve_maximum_pressure_bar=ref.maximum_pressure_bar,
    )  # fmt: skip
    cold = _ambient_temperature(table, plant_table, within)
    exhaust = table.mean(combustion.EXHAUST_POINTS.get(engine.exhaust_at, "turbine_outlet_temperature")) + ZERO_C_K
    known = running & np.isfinite(efficiency)
    hot = np.where(known, burning.hot_k, np.nan)
    bound = _bound(hot, cold)
    gap = bound - efficiency

    u_fuel = np.asarray(combined(used.relative_u_calibration, used.relative_u_repeat))
    u_energy = np.asarray(combined(brake.relative_u_calibration, brake.relative_u_repeat))
    u_efficiency = efficiency * np.asarray(combined(u_fuel, u_energy, in_use.relative_u))
    u_excess = of_excess(
        expected, efficiency,
        u_reference=reference.U_REFERENCE, u_ambient=reference.U_AMBIENT,
        u_fuel=u_fuel, u_energy=u_energy, u_calorific_value=in_use.relative_u,
    )  # fmt: skip

    frame = pd.DataFrame(
        {
            "entry": table.number,
            "engine": engine_id,
            "round": [entry.round for entry in table.entries],
            "at_utc": [utc_text(entry.taken_utc) for entry in table.entries],
            "utc_offset_min": [entry.utc_offset_min for entry in table.entries],
            "occasion": [entry.occasion for entry in table.entries],
            "operating_mode": ref.mode,
            "elapsed_h": spans.elapsed_h,
            "running_h": spans.running_h,
            "load_fraction": np.where(running, load, np.nan),
            "brake_power_kw": np.where(running, brake.brake_kw, np.nan),
            "power_source": np.where(running, brake.source, ""),
            "fuel_rate_kg_h": fuel_rate,
            "fuel_source": np.where(np.isfinite(heat) | np.isfinite(mass), used.source, ""),
            "lot": in_use.lot,
            "lower_calorific_value_mj_kg": value,
            "sfoc_g_kwh": sfoc,
            "sfoc_corrected_g_kwh": corrected,
            "heat_rate_kj_kwh": heat_rate,
            "brake_thermal_efficiency": efficiency,
            "combustion_temperature_k": hot,
            "combustion_temperature_method": burning.method,
            "ambient_temperature_k": cold,
            "exhaust_temperature_k": exhaust,
            "reversible_bound_ambient": bound,
            "reversible_bound_exhaust": _bound(hot, exhaust),
            "ideal_cycle_efficiency": burning.cycle_efficiency,
            "indicated_efficiency": _indicated(engine, table, heat / hours),
            "gap": gap,
            "gap_reference": bound - expected,
            "excess_gap": excess,
            "second_law_ratio": efficiency / bound,
            "sfoc_reference_g_kwh": ref.sfoc_g_kwh,
            "sfoc_deviation": deviation,
            "u_brake_thermal_efficiency": u_efficiency,
            "u_excess_gap": u_excess,
        }
    )
    _flag(
        flags, engine, table, spans, running, events, used, brake, liquid if in_use is liquid else gas, common,
        mass, heat, load, efficiency, sfoc, deviation, hot, bound, burning.cycle_efficiency,
    )  # fmt: skip
    frame["comparable"] = comparable(flags.masks) & np.isfinite(efficiency)
    frame["flags"] = joined(flags.masks)
    frame["plant_digest"] = plant.digest
    return Worked(
        engine, table, running, spans, events, brake, used, in_use, around, ref, burning, frame[list(COLUMNS)]
    )


def _sisters(plant: Plant, engine_id: str) -> list[str]:
    """Engines that share a fuel meter with this one."""
    shared = {
        engine for meter in plant.meters_of(engine_id) if meter.key in fuel.FUEL_METERS for engine in meter.serves
    }
    return sorted(shared - {engine_id})


def lots_of(
    plant: Plant,
    entries: Sequence[Entry],
    engine: Engine,
    table: Table,
    spans: Spans,
    events: Sequence[Event],
    meters: Sequence[fuel.MeterColumn],
) -> tuple[lots.LotsInUse, lots.LotsInUse]:
    """(liquid, gas) lots of every span: by change-overs, else by the log's own column, else the grade's default."""
    known = lots.read_lots(entries, plant)
    named = table.word("lot")
    found = []
    for is_gas in (False, True):
        changes = lots.change_overs(events, known, plant, engine.id, is_gas)
        if not changes:
            of_kind = np.array(
                [name if name and (known.get(name, lots.NO_LOT).kind == "gas") is is_gas else "" for name in named],
                dtype=object,
            )
            changes = lots.named_change_overs(of_kind, table.hours)
        grades = [grade for grade in plant.fuels if (grade.kind == "gas") is is_gas]
        default = lots.default_lot(grades[0] if len(grades) == 1 else None)
        here = (
            named
            if (not is_gas or all(meter.meter.key == fuel.GAS for meter in meters))
            else np.full(len(table), "", object)
        )
        found.append(lots.lots_in_use(changes, known, default, here, spans))
    return found[0], found[1]


def _common(plant: Plant, engine_id: str, entries: Sequence[Entry], spans: Spans, sisters: Sequence[Table]) -> Bools:
    """Spans in which another engine ran on the same fuel meter."""
    ran = np.zeros(len(spans.begin_h), bool)
    for sister in sisters:
        turning = sister.hours[sister.running()]
        inside = np.searchsorted(turning, spans.end_h, "right") - np.searchsorted(turning, spans.begin_h, "left")
        ran |= (inside > 0) & (spans.begin >= 0)
        starts = [event for event in events_of(entries, sister.subject) if event.kind == "start"]
        ran |= count_within(starts, {"start"}, spans.begin_h, spans.end_h) > 0
    return ran


def _speed(engine: Engine, table: Table, brake: power.Power) -> Floats:
    """Mean speed of the span, else the speed read; a set that logs none turns at its rated speed."""
    speed = np.where(np.isfinite(brake.mean_speed_rpm), brake.mean_speed_rpm, table.mean("engine_speed"))
    return np.where(np.isfinite(speed), speed, engine.rated_speed_rpm) if engine.is_set else speed


def _ambient_temperature(table: Table, plant_table: Table, within_h: float) -> Floats:
    """Air at the turbocharger's suction, else the outside air [K]."""
    suction = table.mean("compressor_inlet_temperature")
    outside = plant_value(table, plant_table, "outside_air_temperature", within_h).values
    return np.where(np.isfinite(suction), suction, outside) + ZERO_C_K


def _bound(hot: Floats, cold: Floats) -> Floats:
    good = np.isfinite(hot) & np.isfinite(cold) & (hot > cold)
    bound = np.full(len(hot), np.nan)
    bound[good] = bounds.reversible_bound(hot[good], cold[good])
    return bound


def _indicated(engine: Engine, table: Table, heat_mj_h: Floats) -> Floats:
    """Indicated efficiency where mean indicated pressures were read."""
    from logbook.physics.power import power_from_mean_pressure, swept_volume

    pressure = table.mean("cylinder_mean_indicated_pressure") * 1e5
    volume = swept_volume(engine.bore_mm / 1e3, engine.stroke_mm / 1e3)
    watt = power_from_mean_pressure(pressure, volume, engine.cylinders, table.mean("engine_speed") / 60, engine.cycle)
    return np.asarray(watt) * MJ_KWH / 1e3 / np.where(heat_mj_h > 0, heat_mj_h, np.nan)


def _flag(
    flags: Flags, engine: Engine, table: Table, spans: Spans, running: Bools, events: Sequence[Event],
    used: fuel.FuelUsed, brake: power.Power, in_use: lots.LotsInUse, common: Bools,
    mass: Floats, heat: Floats, load: Floats, efficiency: Floats, sfoc: Floats, deviation: Floats,
    hot: Floats, bound: Floats, ideal: Floats,
) -> None:  # fmt: skip
    """Everything that stands against a row, or goes with it."""
    real = spans.begin >= 0
    ran = running | (np.nan_to_num(spans.running_h) > 0)
    open_question = used.open_question | brake.open_question | spans.hours_open
    have_fuel = np.isfinite(mass) | np.isfinite(heat)
    flags.add("counter_open_question", open_question & ran)
    flags.add("common_fuel_meter", common & ran)
    flags.add("no_fuel_reading", ran & ~have_fuel & ~common & ~used.open_question)
    flags.add("no_power_reading", ran & ~np.isfinite(brake.energy_kwh) & ~brake.open_question & ~spans.hours_open)
    flags.add("lcv_missing", ran & np.isfinite(mass) & ~np.isfinite(heat))
    flags.add("lcv_default", ran & have_fuel & (in_use.source == lots.GRADE_DEFAULT))
    flags.add("lot_mixed", ran & in_use.mixed)
    flags.add("lot_unknown", ran & in_use.unknown & ~in_use.mixed)
    flags.add("span_with_start_or_stop", real & spans.start_or_stop)
    flags.add("load_changed_in_span", brake.load_changed)
    flags.add("span_too_long", brake.too_long)
    flags.add("not_steady", brake.not_steady)
    flags.add("power_by_speed_cube", brake.source == power.SPEED_CUBE)
    flags.add("power_from_index", brake.source == power.INDEX)
    flags.add("passed_zero", used.passed_zero | brake.passed_zero)
    flags.add("pooled_span", spans.pooled)
    flags.add("meter_exchanged", used.exchanged | brake.exchanged)
    flags.add("setting_changed", real & (count_within(events, {"setting_changed"}, spans.begin_h, spans.end_h) > 0))
    flags.add("soot_blowing_or_washing", real & (count_within(events, WASHES, spans.begin_h, spans.end_h) > 0))
    flags.add("weather", real & overlapping(weather_periods(events), spans.begin_h, spans.end_h))
    # Trials are run with the bypass shut.
    flags.add("bypass_position_differs", ran & ~np.isin(table.word("exhaust_bypass_state"), ("", "off", "shut", "0")))
    flags.add("unit_cut_out", real & overlapping(cut_out_periods(events), spans.begin_h, spans.end_h))
    instruments = {event.instrument for event in events if event.kind == "instrument_doubted"}
    for instrument in instruments:
        flags.add("meter_doubtful", real & overlapping(doubted_periods(events, instrument), spans.begin_h, spans.end_h))

    loaded = load > PLAUSIBLE_ABOVE_LOAD
    low, high = EFFICIENCY_PLAUSIBLE
    least, most = SFOC_PLAUSIBLE
    by_mass = np.isfinite(sfoc) & (in_use.kind != "gas")
    implausible = loaded & ((efficiency < low) | (efficiency > high) | (by_mass & ((sfoc < least) | (sfoc > most))))
    flags.add("outside_plausible", implausible)
    flags.add(
        "meter_doubtful", running & (used.temperature_doubtful | _alone(engine, table, running, brake, deviation))
    )
    flags.add("no_combustion_temperature", np.isfinite(efficiency) & ~np.isfinite(hot))
    flags.add("above_bound", efficiency > bound)
    flags.add("above_ideal_cycle", efficiency > ideal)
    _marks(flags, table, spans, in_use)
    # An engine that stood still has nothing to compare, and so no reasons.
    flags.masks[~ran] = 0


def _alone(engine: Engine, table: Table, running: Bools, brake: power.Power, deviation: Floats) -> Bools:
    """A spot power that speed and fuel index do not bear out, or a consumption that stands alone."""
    with np.errstate(divide="ignore", invalid="ignore"):
        consumption = np.log(np.where(running, 1 + deviation, np.nan))
        found = doubt.stands_alone(consumption, floor=LONE_CONSUMPTION, unproved=UNPROVED_CONSUMPTION)
        if not engine.is_set:
            spot = np.where(running & (brake.spot_kw > 0), brake.spot_kw, np.nan)
            by_speed = np.log(spot / table.mean("engine_speed") ** 3)
            by_index = np.log(spot / table.mean("engine_fuel_index") / table.mean("engine_speed"))
            apart = doubt.stands_alone(by_index, floor=LONE_POWER)
            # A heavy sea moves power against speed; only together with the index it is the meter's doing.
            found |= apart & (doubt.stands_alone(by_speed, floor=LONE_POWER) | ~np.isfinite(by_speed))
    return found


def _marks(flags: Flags, table: Table, spans: Spans, in_use: lots.LotsInUse) -> None:
    counters = ("fuel_meter_supply", "fuel_meter_return", "gas_meter", "generator_energy", "shaft_energy")
    powers = ("shaft_power", "generator_power")
    begin = np.maximum(spans.begin, 0)
    estimated = np.zeros(len(table), bool)
    for key in (*counters, *powers):
        marked = table.marked(table.estimated, key)
        estimated |= marked | (marked[begin] & (key in counters))
    flags.add("estimated_share", estimated & (spans.begin >= 0))
    slight = np.zeros(len(table), bool)
    for mask in table.estimated.values():
        slight |= mask
    flags.add("contains_estimate", slight & ~estimated)
    flags.add("contains_amended", table.amended | (table.amended[begin] & (spans.begin >= 0)) | in_use.amended)
    accepted = np.zeros(len(table), bool)
    for key, rows in table.findings.items():
        if key.partition(".")[0] in (
            *counters,
            *powers,
            "engine_speed",
            "revolution_counter",
            "fuel_meter_temperature",
        ):
            accepted[list(rows)] = True
    flags.add("finding_accepted", accepted)
