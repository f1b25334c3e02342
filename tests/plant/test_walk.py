"""The walk of a round: what is read, in which order, and under which key."""

from pathlib import Path

import pytest
from plant_texts import edited

from logbook.plant.catalogue import WALK_GROUPS, catalogue
from logbook.plant.description import parse_plant, read_plant
from logbook.plant.records import Plant
from logbook.plant.usual import FOUR_STROKE, GAS, SHIP, STATION, TWO_STROKE, engine_readings, plant_readings
from logbook.plant.walk import PLANT, WalkItem, walk

FIXTURES = Path(__file__).parents[1] / "fixtures"


def plant_of(*edits: tuple[str, str]) -> Plant:
    plant, faults = parse_plant(edited(*edits))
    assert plant is not None, [fault.sentence() for fault in faults]
    return plant


def items(plant: Plant, engine: str = "ME") -> dict[str, WalkItem]:
    return {item.key: item for item in walk(plant, plant.engine(engine))}


USUAL = (('readings = ["engine_speed", "shaft_power", "cylinder_exhaust_temperature"]\n', ""),)


@pytest.mark.parametrize("keys", [TWO_STROKE, FOUR_STROKE, GAS, SHIP, STATION])
def test_the_usual_points_are_in_the_catalogue_once_and_in_walk_order(keys: tuple[str, ...]) -> None:
    groups = [WALK_GROUPS.index(catalogue()[key].walk) for key in keys]
    assert groups == sorted(groups)
    assert len(set(keys)) == len(keys)


@pytest.mark.parametrize("keys", [TWO_STROKE, FOUR_STROKE, GAS])
def test_the_usual_points_of_an_engine_are_read_at_the_engine(keys: tuple[str, ...]) -> None:
    assert {catalogue()[key].per for key in keys} <= {
        "engine", "cylinder", "turbocharger", "cooler", "bearing", "generator",
    }  # fmt: skip
    assert {catalogue()[key].per for key in (*SHIP, *STATION)} == {"plant"}


@pytest.mark.parametrize(
    ("folder", "engine", "least", "greatest"),
    [("ship_handkept", "ME", 60, 70), ("station_handkept", "G1", 40, 50), ("station_handkept", "G4", 40, 50)],
)
def test_a_usual_log_has_forty_to_seventy_values(folder: str, engine: str, least: int, greatest: int) -> None:
    plant = read_plant(FIXTURES / folder)
    assert least <= sum(len(item.keys) for item in walk(plant, plant.engine(engine))) <= greatest


def test_the_sample_ship_is_walked_in_order_once() -> None:
    plant = read_plant(FIXTURES / "ship_handkept")
    found = walk(plant, plant.engine("ME"))
    groups = [WALK_GROUPS.index(item.definition.walk) for item in found]
    assert groups == sorted(groups)
    keys = [key for item in found for key in item.keys]
    assert len(set(keys)) == len(keys)
    assert [item.key for item in found if item.definition.walk == "counters"] == [
        "revolution_counter", "engine_running_hours", "cylinder_oil_meter",
        "fuel_meter_supply.ME_in", "fuel_meter_temperature.ME_in",
        "fuel_meter_return.ME_out", "fuel_meter_temperature.ME_out",
    ]  # fmt: skip


def test_a_row_has_a_place_for_every_cylinder_and_a_single_value_has_none() -> None:
    found = items(plant_of())
    assert found["cylinder_exhaust_temperature"].places == ("1", "2", "3", "4", "5", "6")
    assert found["cylinder_exhaust_temperature"].keys[-1] == "cylinder_exhaust_temperature.6"
    assert found["engine_speed"].places == ()
    assert found["engine_speed"].keys == ("engine_speed",)


def test_turbochargers_and_coolers_have_places_even_where_there_is_one() -> None:
    two = items(plant_of(*USUAL, ("cylinders = 6", "cylinders = 6\nturbochargers = 2\ncoolers = 1")))
    assert two["turbocharger_speed"].places == ("1", "2")
    assert two["charge_air_temperature"].places == ("1",)
    assert two["charge_air_pressure"].places == ()


def test_what_is_not_fitted_is_not_read() -> None:
    found = items(plant_of(*USUAL, ("cylinders = 6", "cylinders = 6\nturbochargers = 0")))
    assert not {"turbocharger_speed", "cooler_air_pressure_drop", "thrust_bearing_temperature"} & set(found)
    assert "thrust_bearing_temperature" in items(plant_of(*USUAL, ("cylinders = 6", "cylinders = 6\nbearings = 8")))
    assert {"auxiliary_blower_state", "shaft_generator_power"} <= set(items(plant_of(*USUAL)))
    without = plant_of(
        *USUAL,
        ("auxiliary_blowers = true\nblowers_on_below_percent = 30\nblowers_off_above_percent = 40\n", ""),
        ('blowers = "off"\n', ""),
        ("[engine.shaft_generator]\nrated_power_kw = 900\nefficiency = 0.93\n", ""),
    )
    assert not {"auxiliary_blower_state", "shaft_generator_power"} & set(items(without))


def test_the_mode_is_read_where_there_are_several() -> None:
    assert "operating_mode" in items(plant_of(*USUAL))
    assert "operating_mode" not in items(plant_of(*USUAL), "AE1")


def test_readings_of_the_plants_own_choice_keep_their_order() -> None:
    chosen = '["engine_running_hours", "cylinder_exhaust_temperature", "engine_speed"]'
    plant = plant_of(('["engine_speed", "shaft_power", "cylinder_exhaust_temperature"]', chosen))
    found = walk(plant, plant.engine("ME"))
    own = [item.key for item in found if item.subject == "ME" and "." not in item.key]
    assert own == ["engine_running_hours", "cylinder_exhaust_temperature", "engine_speed"]


def test_meters_and_plant_points_stand_behind_the_last_reading_of_their_group() -> None:
    assert list(items(plant_of())) == [
        "engine_speed", "shaft_power", "cylinder_exhaust_temperature",
        "sea_water_temperature", "low_temperature_water_temperature",
        "fuel_meter_supply.ME_in", "fuel_meter_temperature.ME_in",
        "barometric_pressure", "outside_air_temperature",
    ]  # fmt: skip
    bottom_last = ('"cylinder_exhaust_temperature"]', '"revolution_counter", "lube_oil_inlet_pressure"]')
    assert list(items(plant_of(bottom_last)))[2:6] == [
        "revolution_counter", "lube_oil_inlet_pressure", "sea_water_temperature", "low_temperature_water_temperature",
    ]  # fmt: skip


def test_own_points_join_the_usual_ones_and_not_those_that_were_chosen() -> None:
    assert "governor_output" in items(plant_of(*USUAL))
    assert items(plant_of(*USUAL))["governor_output"].definition.walk == "aux"
    assert "governor_output" not in items(plant_of())
    of_sets = plant_of(*USUAL, ('family = "share"', 'family = "share"\nper = "generator"'))
    assert "governor_output" in items(of_sets, "AE1")
    assert "governor_output" not in items(of_sets, "ME")


def test_a_meter_is_read_in_the_unit_that_it_shows() -> None:
    litres = items(plant_of())["fuel_meter_supply.ME_in"]
    assert (litres.unit, litres.definition.family, litres.subject) == ("L", "volume", "ME")
    tonnes = items(plant_of(('unit = "L"', 'unit = "t"')))["fuel_meter_supply.ME_in"]
    assert (tonnes.unit, tonnes.definition.unit, tonnes.definition.family) == ("t", "t", "mass")


@pytest.mark.parametrize(
    ("unit", "temperature", "beside"),
    [
        ("Nm3", "", []),
        ("Nm3", 'temperature = "read"', ["gas_meter_temperature.ME_in"]),
        ("m3", 'temperature = "read"', ["gas_meter_temperature.ME_in", "gas_meter_pressure.ME_in"]),
    ],
)
def test_a_gas_meter_at_its_own_condition_is_read_with_pressure(unit: str, temperature: str, beside: list[str]) -> None:
    plant = plant_of(
        ('key = "fuel_meter_supply"', 'key = "gas_meter"'), ('unit = "L"', f'unit = "{unit}"'),
        ('temperature = "read"', temperature),
    )  # fmt: skip
    found = items(plant)
    assert found["gas_meter.ME_in"].definition.family == "gas volume"
    assert [key for key in found if key.startswith("gas_meter_")] == beside


def test_a_meter_of_several_engines_and_one_of_none_belong_to_the_plant() -> None:
    plant = plant_of(
        ('serves = ["ME"]', 'serves = ["ME", "AE1"]'),
        ("[[tank]]", '[[meter]]\nid = "FEEDER"\nkey = "exported_energy"\nunit = "MWh"\ndigits = 8\n[[tank]]'),
    )
    for engine in ("ME", "AE1"):
        found = items(plant, engine)
        assert found["fuel_meter_supply.ME_in"].subject == PLANT
        assert found["exported_energy.FEEDER"].subject == PLANT
        assert found["exported_energy.FEEDER"].unit == "MWh"
    assert "fuel_meter_supply.ME_in" not in items(plant_of(), "AE1")


def test_words_of_a_four_stroke_engine() -> None:
    plant = plant_of(*USUAL)
    assert items(plant)["charge_air_pressure"].label == "Scavenge air pressure"
    assert items(plant, "AE1")["charge_air_pressure"].label == "Charge air pressure"


def test_usual_points_by_kind() -> None:
    assert engine_readings("two-stroke", "liquid", "propulsion") == TWO_STROKE
    assert engine_readings("four-stroke", "gas", "generating") == GAS
    assert engine_readings("four-stroke", "liquid", "generating") == FOUR_STROKE
    both = engine_readings("four-stroke", "both", "generating")
    assert set(both) - set(FOUR_STROKE) == {"gas_inlet_pressure"}
    medium_speed = engine_readings("four-stroke", "liquid", "propulsion")
    assert "shaft_power" in medium_speed
    assert not any(key.startswith(("cylinder_piston", "cylinder_oil", "auxiliary_blower")) for key in medium_speed)
    assert plant_readings("station") == STATION
