"""Figures of a reading: published check values, and a case for every reason against comparing."""

from dataclasses import replace

import numpy as np
import pandas as pd
import pytest
from judgement_helpers import MAIN_ENGINE, SET, TRIAL, Log, plant

from logbook.judgement.figures import COLUMNS, figures
from logbook.plant.records import Correction, Counter, EfficiencyCurve, Meter, Plant, ShaftGenerator

MASS = Meter("ME_in", "fuel_meter_supply", ("ME",), "kg", Counter(8), 0.5)
BASE = {
    "engine_speed": 98.0, "shaft_power": 9000.0, "engine_running_hours": 1000.0, "revolution_counter": 1_000_000.0,
    "fuel_meter_supply.ME_in": 50_000.0, "compressor_inlet_temperature.1": 25.0, "barometric_pressure": 1000.0,
    "cooler_water_inlet_temperature.1": 25.0, "engine_fuel_index": 75.0,
}  # fmt: skip


def ship(**more: object) -> Plant:
    return plant(replace(MAIN_ENGINE, **more), meters=(MASS,))  # type: ignore[arg-type]


def after(hours: float, fuel_kg: float, *, running_h: float | None = None, **values: object) -> dict[str, object]:
    ran = hours if running_h is None else running_h
    return {
        **BASE, "engine_running_hours": 1000.0 + ran, "revolution_counter": 1_000_000.0 + 98.0 * 60 * ran,
        "fuel_meter_supply.ME_in": 50_000.0 + fuel_kg, **values,
    }  # fmt: skip


def pair(
    end: dict[str, object], *, hours: float = 4, begin: dict[str, object] | None = None, log: Log | None = None
) -> Log:
    """Two readings of the main engine, `hours` apart, with a lot in use since long before."""
    log = log or Log()
    if not any(entry.kind == "lot" for entry in log.entries):
        log.lot(lower_calorific_value_mj_kg=42.7)
    log.read(0, begin or BASE)
    log.read(hours, end)
    return log


def last(log: Log, installed: Plant | None = None) -> pd.Series:
    return figures(installed or ship(), log.entries, "ME").iloc[-1]


FUEL_H = 9000 * 0.171
"""9000 kW at 171 g/kWh [kg/h]"""


def test_columns_and_order() -> None:
    frame = figures(ship(), pair(after(4, 4 * FUEL_H)).entries, "ME")
    assert tuple(frame.columns) == COLUMNS


def test_an_ordinary_watch() -> None:
    """171 g/kWh at 42.7 MJ/kg: 0.493036 and 7301.7 kJ/kWh, calculated independently by arithmetic."""
    row = last(pair(after(4, 4 * FUEL_H)))
    assert row["sfoc_g_kwh"] == pytest.approx(171)
    assert row["brake_thermal_efficiency"] == pytest.approx(0.493036, abs=1e-6)
    assert row["heat_rate_kj_kwh"] == pytest.approx(7301.7)
    assert row["load_fraction"] == pytest.approx(0.75)
    assert row["sfoc_deviation"] == pytest.approx(171 / 169.0 - 1)
    # The set combustion temperature of 1850 K and air of 298.15 K.
    assert row["reversible_bound_ambient"] == pytest.approx(1 - 298.15 / 1850)
    assert row["excess_gap"] == pytest.approx(row["gap"] - row["gap_reference"])
    assert row["comparable"], row["flags"]


@pytest.mark.parametrize(
    ("load", "sfoc", "lcv", "suction", "coolant", "mbar", "expected", "deviation"),
    [
        (0.68, 182.0, 40.9, 38, 36, 1012, 0.92746, 1.91773),
        (0.82, 175.2, 40.9, 12, 20, 1018, -0.15361, -0.30575),
    ],
)
def test_published_excess(
    load: float, sfoc: float, lcv: float, suction: float, coolant: float, mbar: float, expected: float, deviation: float
) -> None:
    """Curve 182, 173.5, 169, 170.2, 172.1 g/kWh; calculated independently with scipy's PCHIP."""
    power = load * MAIN_ENGINE.rated_power_kw
    log = Log()
    log.lot(lower_calorific_value_mj_kg=lcv)
    air = {
        "compressor_inlet_temperature.1": suction, "cooler_water_inlet_temperature.1": coolant, "shaft_power": power,
        "barometric_pressure": mbar,
    }  # fmt: skip
    row = last(pair(after(4, 4 * power * sfoc / 1000, **air), begin={**BASE, **air}, log=log))
    assert 100 * row["excess_gap"] == pytest.approx(expected, abs=1e-4)
    assert 100 * row["sfoc_deviation"] == pytest.approx(deviation, abs=1e-4)


def test_first_watch_after_port_counts_running_hours() -> None:
    """9800 kW, elapsed 76 h, running 4 h, 6552 kg: 167.143 g/kWh (8.797 with elapsed hours); arithmetic."""
    log = Log()
    log.lot(lower_calorific_value_mj_kg=42.7)
    log.read(0, {**BASE, "engine_speed": 0.0, "shaft_power": 0.0})
    log.read(76, after(76, 6552, running_h=4, shaft_power=9800))
    row = last(log)
    assert row["sfoc_g_kwh"] == pytest.approx(167.143, abs=1e-3)
    assert (row["elapsed_h"], row["running_h"]) == (76, 4)
    assert "span_with_start_or_stop" in row["flags"]
    assert not row["comparable"]


def test_a_watch_of_five_hours_is_divided_by_five() -> None:
    """The clock was retarded by an hour: the face says four hours, the instants five."""
    row = last(pair(after(5, 5 * FUEL_H), hours=5))
    assert row["fuel_rate_kg_h"] == pytest.approx(FUEL_H)


def test_spot_power_stands_only_where_the_mean_speed_agrees() -> None:
    """94.2 rpm from revolutions against 98.0 read: 3.9 % off; common practice: 1 %."""
    row = last(pair(after(4, 4 * FUEL_H, revolution_counter=1_000_000 + 94.2 * 60 * 4)))
    assert "load_changed_in_span" in row["flags"]
    assert not row["comparable"]


def test_take_off_counts_as_brake_power() -> None:
    """Shaft 8200 kW, take-off 640 kW, efficiency 0.93: 8888.17 kW; calculated independently by arithmetic."""
    fitted = ship(shaft_generator=ShaftGenerator(1000, EfficiencyCurve((100.0,), (0.93,))))
    more = {"shaft_power": 8200.0, "shaft_generator_power": 640.0}
    row = last(pair(after(4, 6000, **more), begin={**BASE, **more}), fitted)
    assert row["brake_power_kw"] == pytest.approx(8888.17, abs=0.01)
    without = last(pair(after(4, 6000, shaft_power=8200.0), begin={**BASE, "shaft_power": 8200.0}), fitted)
    assert "no_power_reading" in without["flags"]


def test_a_take_off_that_drives_the_shaft_counts_negative() -> None:
    """400 kW drawn as a motor at 0.93 put 372 kW on the shaft: 8200 - 372 kW brake; arithmetic."""
    fitted = ship(shaft_generator=ShaftGenerator(1000, EfficiencyCurve((100.0,), (0.93,))))
    more = {"shaft_power": 8200.0, "shaft_generator_power": -400.0}
    row = last(pair(after(4, 5400, **more), begin={**BASE, **more}), fitted)
    assert row["brake_power_kw"] == pytest.approx(8200 - 372)
    assert row["comparable"], row["flags"]


def test_an_impossible_air_temperature_is_said() -> None:
    air = {"compressor_inlet_temperature.1": 130.0}
    row = last(pair(after(4, 4 * FUEL_H, **air), begin={**BASE, **air}))
    assert np.isnan(row["excess_gap"])
    assert "correction_input_missing" in row["flags"].split(";")
    assert not row["comparable"]


FLAGGED = {
    "no_fuel_reading": {"fuel_meter_supply.ME_in": None},
    "counter_open_question": {"fuel_meter_supply.ME_in": 40_000.0},
    "outside_plausible": {"fuel_meter_supply.ME_in": 50_000.0 + 4 * 9000 * 0.340},
    "correction_input_missing": {"compressor_inlet_temperature.1": None},
    "coolant_not_read": {"cooler_water_inlet_temperature.1": None},
    "barometer_assumed": {"barometric_pressure": None},
    "outside_curve": {"shaft_power": 2000.0, "fuel_meter_supply.ME_in": 50_000.0 + 4 * 2000 * 0.19},
}


@pytest.mark.parametrize("flag", FLAGGED)
def test_what_stands_against_a_row_is_said(flag: str) -> None:
    end = {key: value for key, value in after(4, 4 * FUEL_H, **FLAGGED[flag]).items() if value is not None}
    begin = dict(BASE)
    if flag == "outside_curve":
        begin["shaft_power"] = 2000.0
    row = last(pair(end, begin=begin))
    assert flag in row["flags"].split(";")
    assert row["comparable"] == (flag in ("coolant_not_read", "barometer_assumed"))


@pytest.mark.parametrize(
    ("event", "flag"),
    [
        ({"event": "setting_changed"}, "setting_changed"),
        ({"event": "turbine_washed"}, "soot_blowing_or_washing"),
        ({"event": "heavy_weather"}, "weather"),
        ({"event": "unit_cut_out", "unit": "3"}, "unit_cut_out"),
        ({"event": "instrument_doubted", "instrument": "shaft_power"}, "meter_doubtful"),
        ({"event": "stop"}, "span_with_start_or_stop"),
    ],
)
def test_what_happened_in_the_span_stands_against_it(event: dict[str, str], flag: str) -> None:
    log = Log()
    log.lot(lower_calorific_value_mj_kg=42.7)
    log.write(2, "event", "ME", event)
    row = last(pair(after(4, 4 * FUEL_H), log=log))
    assert flag in row["flags"].split(";")
    assert not row["comparable"]


def test_an_open_bypass_is_not_the_state_of_the_trial() -> None:
    row = last(pair(after(4, 4 * FUEL_H, exhaust_bypass_state="on")))
    assert row["flags"] == "bypass_position_differs"
    assert not row["comparable"]
    assert last(pair(after(4, 4 * FUEL_H, exhaust_bypass_state="off")))["comparable"]


def test_an_exchanged_meter_is_counted_through_and_not_compared() -> None:
    log = Log()
    log.lot(lower_calorific_value_mj_kg=42.7)
    log.event(2, "instrument_exchanged", instrument="fuel_meter_supply.ME_in", closing=53_000, opening=120)
    row = last(pair(after(4, 0, **{"fuel_meter_supply.ME_in": 3276.0}), log=log))
    assert row["fuel_rate_kg_h"] == pytest.approx((3000 + 3156) / 4)
    assert "meter_exchanged" in row["flags"]
    assert not row["comparable"]


def test_passed_zero_is_marked_and_compared() -> None:
    begin = {**BASE, "fuel_meter_supply.ME_in": 99_998_000.0}
    row = last(pair(after(4, 0, **{"fuel_meter_supply.ME_in": 4 * FUEL_H - 2000}), begin=begin))
    assert row["sfoc_g_kwh"] == pytest.approx(171)
    assert row["flags"] == "passed_zero"
    assert row["comparable"]


def test_a_wrong_reading_spoils_two_spans() -> None:
    log = Log()
    log.lot(lower_calorific_value_mj_kg=42.7)
    log.read(0, BASE)
    log.read(4, after(4, 4 * FUEL_H, **{"fuel_meter_supply.ME_in": 65_165.0}))
    log.read(8, after(8, 8 * FUEL_H))
    log.read(12, after(12, 12 * FUEL_H))
    frame = figures(ship(), log.entries, "ME")
    assert frame["comparable"].tolist() == [False, False, False, True]


def test_lots_mix_for_a_day_after_a_change_over() -> None:
    log = Log()
    log.lot("L1", lower_calorific_value_mj_kg=42.7)
    log.lot("L2", since=1, lower_calorific_value_mj_kg=40.2)
    log.read(0, BASE)
    for watch in range(1, 8):
        log.read(4 * watch, after(4 * watch, 4 * watch * FUEL_H))
    frame = figures(ship(), log.entries, "ME")
    mixed = frame["flags"].str.contains("lot_mixed").tolist()
    # The span that begins within the day after the change-over is the last one that is mixed.
    assert mixed == [False, True, True, True, True, True, True, True]
    assert frame["lower_calorific_value_mj_kg"].iloc[-1] == 40.2


def test_without_an_analysis_the_default_is_not_compared() -> None:
    log = Log()
    log.write(-100, "lot", "L1", {"lot": "L1", "grade": "RMG 380"})
    log.event(-100, "change_over", lot="L1")
    row = last(pair(after(4, 4 * FUEL_H), log=log))
    assert {"lcv_default"} <= set(row["flags"].split(";"))
    assert row["lower_calorific_value_mj_kg"] == 40.2
    assert not row["comparable"]


def test_blowers_and_modes_are_compared_like_with_like() -> None:
    off = replace(TRIAL, blowers="off", operating_mode="tier II")
    two = ship(
        auxiliary_blowers=True, trials=(off,), operating_modes=("tier II", "tier III"),
        blowers_on_below_percent=30.0, blowers_off_above_percent=40.0,
    )  # fmt: skip
    row = last(pair(after(4, 4 * FUEL_H)), two)
    assert row["flags"] == "blowers_assumed"
    assert row["comparable"]
    row = last(pair(after(4, 4 * FUEL_H, auxiliary_blower_state="on")), two)
    assert "blowers_differ" in row["flags"]
    row = last(pair(after(4, 4 * FUEL_H, operating_mode="tier III", auxiliary_blower_state="off")), two)
    assert "mode_has_no_reference" in row["flags"]


def test_a_set_by_its_counters() -> None:
    """1980 kWh at the terminals at an efficiency of 0.955 are 2073.30 kWh brake; arithmetic."""
    one = replace(SET, generator_efficiency=EfficiencyCurve((100.0,), (0.955,)))
    station = plant(
        one, meters=(Meter("FM", "fuel_meter_supply", ("AE1",), "kg", Counter(7)),), kind="station", hourly=True
    )
    log = Log()
    log.lot(grade="DMA", lower_calorific_value_mj_kg=42.7)
    log.read(0, {"generator_energy": 1000, "generator_power": 1980, "fuel_meter_supply.FM": 5000}, "AE1")
    log.read(1, {"generator_energy": 2980, "generator_power": 1980, "fuel_meter_supply.FM": 5400}, "AE1")
    row = figures(station, log.entries, "AE1").iloc[-1]
    assert row["brake_power_kw"] == pytest.approx(2073.30, abs=0.01)
    assert row["sfoc_g_kwh"] == pytest.approx(400_000 / 2073.298, abs=1e-3)
    assert row["power_source"] == "generator energy counter"
    assert "no_reference" in row["flags"]


def test_no_barometer_high_up_is_no_assumption() -> None:
    end = {key: value for key, value in after(4, 4 * FUEL_H).items() if key != "barometric_pressure"}
    row = last(pair(end), replace(ship(), altitude_m=640))
    assert "barometer_missing" in row["flags"]
    assert not row["comparable"]


def test_an_estimate_follows_into_the_result() -> None:
    from logbook.reading.value import Value

    guessed = Value(number=50_000 + 4 * FUEL_H, text="56156 E", digits=5, estimated=True)
    row = last(pair(after(4, 4 * FUEL_H, **{"fuel_meter_supply.ME_in": guessed})))
    assert "estimated_share" in row["flags"]
    assert not row["comparable"]


def test_not_corrected_is_marked() -> None:
    row = last(pair(after(4, 4 * FUEL_H)), ship(correction=Correction()))
    assert row["flags"] == "not_corrected"
    assert row["comparable"]


def test_an_amended_value_marks_its_spans() -> None:
    log = pair(after(4, 4 * FUEL_H))
    log.amend(4)
    row = last(log)
    assert "contains_amended" in row["flags"]
    assert row["comparable"]


def test_an_engine_that_stands_has_no_figures_and_no_reasons() -> None:
    log = Log()
    log.lot(lower_calorific_value_mj_kg=42.7)
    log.read(0, {"engine_state": "stopped"})
    log.read(4, {"engine_state": "stopped"})
    frame = figures(ship(), log.entries, "ME")
    assert frame["flags"].tolist() == ["", ""]
    assert np.isnan(frame["sfoc_g_kwh"]).all()
    assert not frame["comparable"].any()


def test_measured_pressures_give_a_point_beside_the_line() -> None:
    """T_H by the curve's Pmax in proportion to the charge pressure; the ideal cycle only where Pmax was read."""
    by_curve = ship(combustion_temperature="cycle, pressure from curve")
    air = {"charge_air_pressure": 1.78, "charge_air_temperature.1": 35.0}
    sets = {f"cylinder_maximum_pressure.{unit}": 140.0 for unit in range(1, 7)}
    row = last(pair(after(4, 4 * FUEL_H, **air, **sets), begin={**BASE, **air}), by_curve)
    assert row["combustion_temperature_method"] == "cycle, pressure from curve"
    assert 1600 < row["combustion_temperature_k"] < 2200
    assert 0.45 < row["ideal_cycle_efficiency"] < 0.65
    without = last(pair(after(4, 4 * FUEL_H, **air), begin={**BASE, **air}), by_curve)
    assert np.isnan(without["ideal_cycle_efficiency"])
    assert without["combustion_temperature_k"] == pytest.approx(row["combustion_temperature_k"])
    missing = last(pair(after(4, 4 * FUEL_H)), by_curve)
    assert "no_combustion_temperature" in missing["flags"]
    assert np.isnan(missing["gap"])
    assert missing["excess_gap"] == pytest.approx(row["excess_gap"])
    assert missing["comparable"]
