"""Entries as columns."""

import time

import numpy as np
import pytest
from judgement_helpers import Log

from logbook.judgement.events import count_within, events_of
from logbook.judgement.table import build_table, plant_value
from logbook.reading.value import State, Value


def test_numbers_words_and_states_are_kept_apart() -> None:
    log = Log()
    log.read(0, {"engine_speed": 98.0, "cylinder_exhaust_temperature.1": 330, "cylinder_exhaust_temperature.2": 340})
    log.read(4, {"engine_speed": State.NOT_READ, "lot": "L01", "cylinder_exhaust_temperature.1": State.DEFECTIVE})
    log.read(8, {"engine_speed": Value(number=97.0, estimated=True, findings=("odd",), source="instrument")})
    log.read(9, {"sea_water_temperature": 20}, engine="plant")
    table = build_table(log.entries, "ME")
    assert table.number.tolist() == [1, 2, 3]
    assert np.diff(table.hours).tolist() == [4.0, 4.0]
    np.testing.assert_array_equal(table.column("engine_speed"), [98.0, np.nan, 97.0])
    np.testing.assert_array_equal(table.mean("cylinder_exhaust_temperature"), [335.0, np.nan, np.nan])
    np.testing.assert_array_equal(table.column("shaft_power"), [np.nan] * 3)
    assert table.in_state("engine_speed", State.NOT_READ).tolist() == [False, True, False]
    assert table.in_state("cylinder_exhaust_temperature", State.DEFECTIVE).tolist() == [False, True, False]
    assert table.word("lot").tolist() == ["", "L01", ""]
    assert table.estimated["engine_speed"].tolist() == [False, False, True]
    assert table.from_instrument["engine_speed"].tolist() == [False, False, True]
    assert table.findings["engine_speed"] == {2: ("odd",)}


@pytest.mark.parametrize(
    ("values", "running"),
    [
        ({"engine_state": "running"}, True),
        ({"engine_state": "stopped", "engine_running_hours": 100.0}, False),
        ({"engine_state": State.STAND_BY}, False),
        ({"engine_speed": 98.0}, True),
        ({"engine_speed": 0.0, "engine_running_hours": 100.0}, False),
        ({"engine_speed": State.STOPPED, "engine_running_hours": 100.0}, False),
        ({"fuel_meter_supply.ME_in": 100.0}, True),
        ({"engine_speed": State.NOT_READ}, False),
        ({}, False),
    ],
)
def test_running(values: dict[str, object], running: bool) -> None:
    log = Log()
    log.read(0, values)
    assert build_table(log.entries, "ME").running().tolist() == [running]


def test_plant_values_belong_to_their_round_else_to_the_nearest() -> None:
    log = Log()
    log.read(0.0, {"barometric_pressure": 1010}, engine="plant", round="A")
    log.read(0.3, {"engine_speed": 98}, round="A")
    log.read(4.0, {"engine_speed": 98})
    log.read(5.5, {"barometric_pressure": 1015}, engine="plant")
    log.read(8.0, {"engine_speed": 98})
    log.read(12.0, {"engine_speed": 98, "barometric_pressure": 1020})
    log.read(12.0, {"barometric_pressure": 900}, engine="plant")
    log.read(16.0, {"engine_speed": 98})
    log.read(16.0, {"barometric_pressure": 1003}, engine="plant")
    engine, plant = build_table(log.entries, "ME"), build_table(log.entries, "plant")
    value = plant_value(engine, plant, "barometric_pressure", 2.0)
    np.testing.assert_array_equal(value.values, [1010, 1015, np.nan, 1020, 1003])
    assert value.nearby.tolist() == [False, True, False, False, False]
    assert value.entry.tolist() == [1, 4, 0, 6, 9]
    hourly = plant_value(engine, plant, "barometric_pressure", 1.0)
    np.testing.assert_array_equal(hourly.values, [1010, np.nan, np.nan, 1020, 1003])


def test_two_plant_entries_of_one_round_are_both_of_it() -> None:
    log = Log()
    log.read(0.0, {"barometric_pressure": 1010}, engine="plant", round="A")
    log.read(0.1, {"sea_water_temperature": 20}, engine="plant", round="A")
    log.read(0.3, {"engine_speed": 98}, round="A")
    value = plant_value(build_table(log.entries, "ME"), build_table(log.entries, "plant"), "barometric_pressure", 2.0)
    assert value.values.tolist() == [1010]
    assert value.nearby.tolist() == [False]


def test_events_at_the_moment_of_a_reading_are_outside_the_span() -> None:
    log = Log()
    for hours in (0.0, 2.0, 4.0):
        log.event(hours, "stop")
    log.event(3.0, "stop", engine="AE1")
    events = events_of(log.entries, "ME")
    begin = np.array([events[0].hours, events[1].hours, events[0].hours])
    end = np.array([events[1].hours, events[2].hours, events[2].hours])
    assert count_within(events, ["stop"], begin, end).tolist() == [0, 0, 1]


def test_a_long_log_becomes_a_table_well_under_a_second() -> None:
    log = Log()
    values = {f"cylinder_exhaust_temperature.{place}": 330.0 + place for place in range(60)}
    for row in range(4400):
        log.read(4.0 * row, values)
    began = time.perf_counter()
    table = build_table(log.entries, "ME")
    assert time.perf_counter() - began < 0.8
    assert len(table) == 4400
    assert len(table.columns) == 60
