"""Figures of the engines that share one fuel meter, under the meter's name as engine.

Consumption of a common meter belongs to the group: sum of fuel over sum of energies, against a reference weighted with
each engine's own energy. A group excess names no engine: exhaust temperatures and charge pressures of each set say
where to look, and running one set alone for a watch tells.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
import pandas as pd

from logbook.book.entry import Entry, utc_text
from logbook.judgement import fuel, lots, reference
from logbook.judgement.events import events_of
from logbook.judgement.figures import COLUMNS, HOUR_NEAR_H, MJ_KWH, PLANT, WATCH_NEAR_H, Worked, lots_of, work_out
from logbook.judgement.flags import Flags, comparable, joined
from logbook.judgement.spans import begin_of, spans_of
from logbook.judgement.table import build_table, plant_value
from logbook.physics.uncertainty import combined, of_excess
from logbook.plant.records import Meter, Plant


def common_meters(plant: Plant) -> tuple[Meter, ...]:
    """Supply or gas meters that serve several engines: each gives a group its name."""
    return tuple(meter for meter in plant.meters if meter.key in (fuel.SUPPLY, fuel.GAS) and len(meter.serves) > 1)


def group_figures(plant: Plant, entries: Sequence[Entry], meter_id: str) -> pd.DataFrame:
    """One row for each reading of a common meter; columns as of an engine. Raises KeyError for another meter."""
    meter = next((meter for meter in common_meters(plant) if meter.id == meter_id), None)
    if meter is None:
        raise KeyError(meter_id)
    table = build_table(entries, PLANT)
    events = events_of(entries, PLANT)
    alike = [
        other for other in plant.meters if set(other.serves) == set(meter.serves) and other.key in fuel.FUEL_METERS
    ]
    engines = [work_out(plant, entries, engine) for engine in meter.serves]
    columns = [fuel.meter_column(other, table, [worked.table for worked in engines]) for other in alike]
    counted = fuel.counted_rows(columns, events, len(table))
    # Readings of the plant without the meter (another round) are no rows of the group.
    entries_of_meter = [entry for entry, here in zip(table.entries, counted.tolist(), strict=True) if here]
    table = build_table(entries_of_meter, PLANT)
    rows = len(table)
    flags = Flags(rows)
    running = np.ones(rows, bool)
    columns = [fuel.meter_column(other, table, [worked.table for worked in engines]) for other in alike]
    spans = spans_of(table, begin_of(np.ones(rows, bool)), running, events, None)
    within = HOUR_NEAR_H if plant.hourly else WATCH_NEAR_H
    barometer = plant_value(table, table, "barometric_pressure", within).values * 100.0
    liquid, gas = lots_of(plant, entries, engines[0].engine, table, spans, events_of(entries, meter.serves[0]), columns)
    used = fuel.fuel_used(
        plant, columns, spans=spans, running=running, events=events, liquid=liquid, gas=gas, barometer_pa=barometer
    )
    in_use = gas if meter.key == fuel.GAS else liquid

    energy, weighted, expected_heat, missing = _energies(engines, spans.begin_h, spans.end_h)
    ran = energy > 0
    energy = np.where(ran & ~missing, energy, np.nan)
    lcv_reference = next(
        (trial.lower_calorific_value_mj_kg for worked in engines for trial in worked.engine.trials), np.nan
    )
    heat, mass = used.energy_mj, used.mass_kg
    efficiency = energy * MJ_KWH / np.where(heat > 0, heat, np.nan)
    sfoc = mass * 1000 / energy
    reference_sfoc = weighted / energy
    heat_rate = heat * 1000 / energy
    deviation = heat_rate / lcv_reference / reference_sfoc - 1
    expected = energy * MJ_KWH / expected_heat
    elapsed = spans.elapsed_h
    flags.add("no_power_reading", missing)
    flags.add("counter_open_question", used.open_question)
    flags.add("no_fuel_reading", ran & ~np.isfinite(heat) & ~used.open_question)
    flags.add("lot_mixed", ran & in_use.mixed)
    flags.add("lot_unknown", ran & in_use.unknown & ~in_use.mixed)
    flags.add("lcv_default", ran & (in_use.source == lots.GRADE_DEFAULT))
    without = ran & ~np.isfinite(reference_sfoc) & ~missing
    has_trials = all(worked.engine.trials for worked in engines)
    corrected = any(worked.engine.correction.rule != "none" for worked in engines)
    flags.add("no_reference", without & (not has_trials))
    # With a curve for each, what is missing is a load within it, or what the correction needs.
    flags.add("correction_input_missing" if corrected else "outside_curve", without & has_trials)
    flags.add("passed_zero", used.passed_zero)
    flags.add("meter_exchanged", used.exchanged)
    flags.masks[~ran & ~missing] = 0
    u_fuel = np.asarray(combined(used.relative_u_calibration, used.relative_u_repeat))
    frame = pd.DataFrame(
        {
            "entry": table.number,
            "engine": meter_id,
            "round": [entry.round for entry in table.entries],
            "at_utc": [utc_text(entry.taken_utc) for entry in table.entries],
            "utc_offset_min": [entry.utc_offset_min for entry in table.entries],
            "occasion": [entry.occasion for entry in table.entries],
            "operating_mode": "",
            "elapsed_h": elapsed,
            "brake_power_kw": energy / elapsed,
            "power_source": np.where(ran, "generator energy counter", ""),
            "fuel_rate_kg_h": mass / elapsed,
            "fuel_source": used.source,
            "lot": in_use.lot,
            "lower_calorific_value_mj_kg": in_use.lower_calorific_value_mj_kg,
            "sfoc_g_kwh": sfoc,
            "sfoc_corrected_g_kwh": heat_rate / lcv_reference,
            "heat_rate_kj_kwh": heat_rate,
            "brake_thermal_efficiency": efficiency,
            "excess_gap": expected - efficiency,
            "sfoc_reference_g_kwh": reference_sfoc,
            "sfoc_deviation": deviation,
            "u_brake_thermal_efficiency": efficiency * np.asarray(combined(u_fuel, 0.0075, in_use.relative_u)),
            "u_excess_gap": of_excess(
                expected, efficiency, u_reference=reference.U_REFERENCE, u_ambient=reference.U_AMBIENT,
                u_fuel=u_fuel, u_energy=0.0075, u_calorific_value=in_use.relative_u,
            ),
        }
    )  # fmt: skip
    frame["comparable"] = comparable(flags.masks) & np.isfinite(frame["excess_gap"])
    frame["flags"] = joined(flags.masks)
    frame["plant_digest"] = plant.digest
    return frame.reindex(columns=list(COLUMNS))


def _energies(
    engines: Sequence[Worked], begin_h: np.ndarray, end_h: np.ndarray
) -> tuple[np.ndarray, np.ndarray, np.ndarray, np.ndarray]:
    """Per group span: brake energy [kWh], sum of E a b_ref [g], heat by the reference [MJ], and whether one is missing.

    The spans of the engines end at the same rounds; each belongs to the group span that it ends in.
    """
    rows = len(begin_h)
    energy, weighted, heat = np.zeros(rows), np.zeros(rows), np.zeros(rows)
    missing = np.zeros(rows, bool)
    for worked in engines:
        place = np.searchsorted(end_h, worked.spans.end_h, "left")
        inside = (place < rows) & (worked.spans.begin >= 0)
        place = np.where(inside, place, 0)
        inside &= worked.spans.end_h > begin_h[place] if rows else False
        own = worked.power.energy_kwh
        turned = inside & ~worked.spans.idle
        missing |= np.bincount(place[turned & ~np.isfinite(own)], minlength=rows) > 0
        here = turned & np.isfinite(own)
        needed = own * worked.ambient.factor * worked.reference.sfoc_g_kwh
        energy += np.bincount(place[here], own[here], rows)
        weighted += np.bincount(place[here], needed[here], rows)
        by_reference = needed / 1000 * worked.reference.lower_calorific_value_mj_kg
        heat += np.bincount(place[here], by_reference[here], rows)
    return energy, weighted, heat, missing
