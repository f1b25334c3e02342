"""What plant.toml leaves out, and which figures go without it."""

import dataclasses
from pathlib import Path

import pytest
from plant_texts import edited

from logbook.judgement.flags import FLAGS
from logbook.plant.description import parse_plant, read_plant
from logbook.plant.missing import Missing, missing
from logbook.plant.records import Plant
from logbook.plant.template import template

FIXTURES = Path(__file__).parents[1] / "fixtures"

COMPLETE = (
    # The usual points of the main engine, with an indicator, and all that a figure may want.
    ('readings = ["engine_speed", "shaft_power", "cylinder_exhaust_temperature"]\n',
     "expansion_ratio = 15.5\nstroke_part_at_closing = 0.68\ntrapping_rise_k = 45\npropeller_pitch_m = 5.5\n"
     "readings = ["
     '"engine_state", "engine_speed", "shaft_power", "operating_mode", "auxiliary_blower_state",'
     '"cylinder_exhaust_temperature", "cylinder_maximum_pressure", "cylinder_compression_pressure",'
     '"cylinder_mean_indicated_pressure", "compressor_inlet_temperature", "charge_air_pressure",'
     '"charge_air_temperature", "cooler_water_inlet_temperature", "turbine_outlet_temperature",'
     '"engine_fuel_index", "shaft_generator_power", "revolution_counter", "engine_running_hours"]\n'),
    ("percent_per_10k_coolant = 0.6", 'percent_per_10k_coolant = 0.6\nsource = "A. Person, maker\'s guide"'),
    ("revolution_counter = { digits = 8 }", "revolution_counter = { digits = 8 }\n"
     "engine_running_hours = { digits = 6 }"),
    ("sfoc_g_kwh = [170, 168, 169]",
     "sfoc_g_kwh = [170, 168, 169]\ncharge_air_pressure_bar = [1, 2, 3]\n"
     "cylinder_maximum_pressure_bar = [110, 140, 170]\ncylinder_compression_pressure_bar = [80, 110, 140]\n"
     "turbocharger_speed_rpm = [10000, 12000, 14000]\nengine_fuel_index = [50, 70, 90]\n"
     "cylinder_exhaust_temperature_c = [290, 310, 350]\nturbine_inlet_temperature_c = [330, 360, 400]\n"
     "turbine_outlet_temperature_c = [240, 245, 255]\nair_filter_pressure_drop_mbar = [1, 3, 5]\n"
     "cooler_air_pressure_drop_mbar = [5, 10, 15]\ncooler_approach_k = [6, 8, 10]\n\n"
     '[[engine.trial]]\nname = "on"\noperating_mode = "tier II"\nblowers = "on"\nload_percent = [25]\n'
     'sfoc_g_kwh = [178]\n\n[[engine.trial]]\nname = "III"\noperating_mode = "tier III"\nblowers = "off"\n'
     'load_percent = [75]\nsfoc_g_kwh = [175]\n\n[[engine.trial]]\nname = "III on"\noperating_mode = "tier III"\n'
     'blowers = "on"\nload_percent = [25]\nsfoc_g_kwh = [185]'),
    ('kind = "residual"', 'kind = "residual"\nlower_calorific_value_mj_kg = 40.2\ndensity15_kg_m3 = 970\n'
     "price_per_t = 500\ncarbon_factor = 3.114"),
    ("decimal_comma = true", 'ship_type = "tanker"\ncapacity_t = 50000'),
)  # fmt: skip


def plant_of(*edits: tuple[str, str]) -> Plant:
    plant, faults = parse_plant(edited(*COMPLETE, *edits))
    assert plant is not None, [fault.sentence() for fault in faults]
    return plant


def of(plant: Plant, subject: str) -> list[Missing]:
    return [item for item in missing(plant) if item.subject == subject]


def found(plant: Plant, part: str, subject: str = "") -> Missing:
    (item,) = [item for item in missing(plant) if part in item.sentence and subject in ("", item.subject)]
    return item


def without_reading(key: str) -> tuple[str, str]:
    return (f'"{key}",', "") if key != "engine_running_hours" else (f', "{key}"', "")


def test_nothing_is_missing_of_a_plant_that_says_all() -> None:
    plant = plant_of()
    assert of(plant, "ME") == []
    assert of(plant, "ME_in") == []
    assert of(plant, "plant") == []
    # A default of the grade is a default, whatever else is said.
    assert [item.flag for item in of(plant, "RMG 380")] == ["lcv_default"]


NO_BLOWERS_ON = (
    '[[engine.trial]]\nname = "on"\noperating_mode = "tier II"\nblowers = "on"\nload_percent = [25]\n'
    "sfoc_g_kwh = [178]\n\n"
)

CASES = [
    # name, edits, subject, part of the sentence, one figure, flag, part of what to add
    ("no meter", [('serves = ["ME"]', 'serves = ["AE1"]')], "ME", "No fuel meter serves it", "sfoc_g_kwh",
     "no_fuel_reading", 'key = "fuel_meter_supply", serves = ["ME"]'),
    ("no power", [without_reading("shaft_power"), without_reading("engine_fuel_index")], "ME",
     "Power is not read: fuel", "brake_thermal_efficiency", "no_power_reading", "shaft_power"),
    ("power from the index", [without_reading("shaft_power")], "ME", "taken from the fuel index", "brake_power_kw",
     "power_from_index", "shaft_power or shaft_energy"),
    ("no revolutions", [without_reading("revolution_counter")], "ME", "Without revolutions", "excess_gap",
     "load_changed_in_span", "revolution_counter"),
    ("take-off not read", [without_reading("shaft_generator_power")], "ME", "The shaft generator is fitted",
     "brake_power_kw", "no_power_reading", "shaft_generator_power"),
    ("digits", [("revolution_counter = { digits = 8 }\n", "")], "ME", "The digits of revolution_counter are",
     "running_h", "", "[engine.counters] revolution_counter"),
    ("a mode without trial", [('["tier II", "tier III"]', '["tier II", "tier III", "gas"]')], "ME",
     "operating mode 'gas'", "gap_reference", "mode_has_no_reference", 'operating_mode = "gas"'),
    ("no trial with blowers on", [(NO_BLOWERS_ON, "")], "ME", "auxiliary blowers on in the mode 'tier II'",
     "excess_gap", "blowers_differ", 'blowers = "on"'),
    ("no band", [("blowers_on_below_percent = 30\n", "")], "ME", "The loads at which the auxiliary blowers",
     "excess_gap", "blowers_unknown", "blowers_on_below_percent, blowers_off_above_percent"),
    ("witness", [("cooler_approach_k = [6, 8, 10]\n", "")], "ME", "No trial gives cooler_approach_k", "causes", "",
     "[[engine.trial]] cooler_approach_k"),
    ("two witnesses", [("cooler_approach_k = [6, 8, 10]\n", ""), ("engine_fuel_index = [50, 70, 90]\n", "")], "ME",
     "No trial gives engine_fuel_index and cooler_approach_k", "causes", "", "engine_fuel_index ..."),
    ("no correction", [('rule = "two-stroke percentages"', 'rule = "none"')], "ME", "No ambient correction",
     "sfoc_corrected_g_kwh", "not_corrected", 'rule = "two-stroke percentages"'),
    ("coolant", [without_reading("cooler_water_inlet_temperature")], "ME", "The cooling water", "sfoc_deviation",
     "coolant_not_read", "cooler_water_inlet_temperature"),
    ("no source", [("source = \"A. Person, maker's guide\"", "")], "ME", "Nobody is named for the coefficients",
     "sfoc_corrected_g_kwh", "", "[engine.correction] source"),
    ("exhaust", [without_reading("turbine_outlet_temperature")], "ME", "The exhaust after turbine is not read",
     "reversible_bound_exhaust", "", "turbine_outlet_temperature"),
    ("exhaust elsewhere", [("fixed_pitch = true", 'fixed_pitch = true\nexhaust_at = "before turbine"')], "ME",
     "The exhaust before turbine is not read", "exhaust_temperature_k", "", "turbine_inlet_temperature"),
    ("indicator", [without_reading("cylinder_mean_indicated_pressure")], "ME", "Mean indicated pressure is not read",
     "indicated_efficiency", "", "cylinder_mean_indicated_pressure"),
    ("no compression ratio", [("compression_ratio = 13.4\n", ""), ("expansion_ratio = 15.5\n", "")], "ME",
     "the set 1850 K stands for it", "ideal_cycle_efficiency", "", "compression_ratio"),
    ("no compression ratio for the method asked", [("compression_ratio = 13.4\n", 'combustion_temperature = "cycle"\n'),
     ("expansion_ratio = 15.5\n", "")], "ME", "no combustion temperature", "combustion_temperature_k",
     "no_combustion_temperature", "compression_ratio"),
    ("no charge air", [without_reading("charge_air_pressure")], "ME", "charge_air_pressure is not read", "gap",
     "no_combustion_temperature", "charge_air_pressure in readings"),
    ("no Pmax of the trial", [("cylinder_maximum_pressure_bar = [110, 140, 170]\n", "")], "ME",
     "the combustion temperature is the set one", "combustion_temperature_k", "", "cylinder_maximum_pressure_bar"),
    ("no Pmax of the trial for the method asked", [("cylinder_maximum_pressure_bar = [110, 140, 170]\n", ""),
     ("fixed_pitch = true", 'fixed_pitch = true\ncombustion_temperature = "cycle, pressure from curve"')], "ME",
     "the combustion temperature cannot be worked out", "combustion_temperature_k", "no_combustion_temperature",
     "cylinder_maximum_pressure_bar"),
    ("no Pmax read", [without_reading("cylinder_maximum_pressure")], "ME", "Maximum pressures are not read",
     "ideal_cycle_efficiency", "", "cylinder_maximum_pressure in readings"),
    ("assumed", [("trapping_rise_k = 45\n", "")], "ME", "trapping_rise_k not entered: usual values",
     "combustion_temperature_k", "", "trapping_rise_k"),
    ("no expansion ratio", [("expansion_ratio = 15.5\n", "")], "ME", "without further expansion",
     "ideal_cycle_efficiency", "", "expansion_ratio"),
    ("pitch", [("propeller_pitch_m = 5.5\n", "")], "ME", "The pitch of the propeller", "slip", "", "propeller_pitch_m"),
    ("together", [('serves = ["ME"]', 'serves = ["ME", "AE1"]')], "ME_in", "for ME and AE1 together", "sfoc_g_kwh",
     "common_fuel_meter", "[[meter]]"),
    ("temperature of a meter", [('temperature = "read"\n', "")], "ME_in", "It counts L, and without its temperature",
     "fuel_rate_kg_h", "no_fuel_reading", 'temperature = "read"'),
    ("return alone", [('key = "fuel_meter_supply"', 'key = "fuel_meter_return"')], "ME_in", "It counts what comes back",
     "fuel_rate_kg_h", "no_fuel_reading", "fuel_meter_supply"),
    ("no grade", [("[[fuel]]", "[[fuel]]")], "RMG 380", "takes the calorific value of its grade", "excess_gap",
     "lcv_default", "the analysis of every lot"),
    ("no heating value", [("lower_calorific_value_mj_kg = 40.2\n", "")], "RMG 380", "No calorific value is entered",
     "brake_thermal_efficiency", "lcv_missing", "lower_calorific_value_mj_kg in [[fuel]]"),
    ("no heating value of gas", [("lower_calorific_value_mj_kg = 40.2\n", ""), ('"residual"', '"gas"')], "RMG 380",
     "No calorific value is entered", "brake_thermal_efficiency", "lcv_missing", "lower_calorific_value_mj_m3"),
    ("no density", [("density15_kg_m3 = 970\n", "")], "RMG 380", "No density is entered", "fuel_rate_kg_h",
     "no_fuel_reading", "density15_kg_m3"),
    ("no price", [("price_per_t = 500\n", "")], "RMG 380", "price_per_t not entered", "excess_cost", "", "price_per_t"),
    ("no carbon factor", [("\ncarbon_factor = 3.114", "")], "RMG 380", "carbon_factor not entered", "excess_co2_t", "",
     "carbon_factor"),
    ("no barometer", [('ship_type = "tanker"', 'ship_type = "tanker"\nreadings = ["sea_water_temperature"]')], "plant",
     "1013 mbar are taken", "sfoc_corrected_g_kwh", "barometer_assumed", "barometric_pressure"),
    ("no barometer up the hill", [('ship_type = "tanker"', 'altitude_m = 640\nship_type = "tanker"\n'
     'readings = ["sea_water_temperature"]')], "plant", "at this altitude nothing can be taken", "gap",
     "barometer_missing", "barometric_pressure"),
    ("capacity", [("capacity_t = 50000", "")], "plant", "Type and capacity", "carbon_intensity", "", "capacity_t"),
    ("no mark", [("excess_points = 1.0\n", "")], "plant", "No mark of your own", "forecast", "", "[marks]"),
    ("nobody countersigns", [(', "countersign"', "")], "plant", "right to countersign", "countersignature", "",
     "[[person]]"),
]  # fmt: skip


@pytest.mark.parametrize(
    ("edits", "subject", "part", "figure", "flag", "add"), [row[1:] for row in CASES], ids=[row[0] for row in CASES]
)
def test_what_is_missing(
    edits: list[tuple[str, str]], subject: str, part: str, figure: str, flag: str, add: str
) -> None:
    item = found(plant_of(*edits), part, subject)
    assert figure in item.figures
    assert item.flag == flag
    assert add in item.add


def test_the_suction_temperature_is_wanted_twice() -> None:
    items = of(plant_of(without_reading("compressor_inlet_temperature")), "ME")
    assert [item.flag for item in items] == ["correction_input_missing", ""]
    assert "reversible_bound_ambient" in items[1].figures


def test_a_naturally_aspirated_engine_is_corrected_with_the_humidity() -> None:
    def wanted(kind: str) -> bool:
        plant = plant_of(("turbocharged four-stroke, charge-air cooler", kind))
        return any("relative_humidity" in item.add for item in of(plant, "AE1"))

    assert wanted("diesel or dual-fuel, naturally aspirated, limited by excess air")
    assert not wanted("diesel or dual-fuel, naturally aspirated, limited thermally")
    assert not wanted("turbocharged four-stroke, charge-air cooler")


def test_a_set_on_two_fuels_wants_both_meters() -> None:
    sentences = [item.sentence for item in of(plant_of(), "AE1") if item.flag == "no_fuel_reading"]
    assert len(sentences) == 2
    assert any(sentence.startswith("No gas meter") for sentence in sentences)


def test_a_set_without_energy_counter_stands_for_an_hour() -> None:
    chosen = ("rated_electrical_kw = 950", 'rated_electrical_kw = 950\nreadings = ["generator_power"]')
    assert found(plant_of(chosen), "stands for an hour at most").flag == "span_too_long"
    hourly = plant_of(chosen, ('ship_type = "tanker"', 'ship_type = "tanker"\nhourly = true'))
    assert not any("stands for an hour" in item.sentence for item in missing(hourly))
    nothing = ("rated_electrical_kw = 950", 'rated_electrical_kw = 950\nreadings = ["engine_state"]')
    assert "no_power_reading" in [item.flag for item in of(plant_of(nothing), "AE1")]


def test_no_trial_at_all_and_no_grade_at_all() -> None:
    station = read_plant(FIXTURES / "station_handkept")
    assert of(station, "G4")[0].flag == "no_reference"
    assert of(station, "G4")[0].add == "[[engine.trial]] load_percent, heat_rate_kj_kwh"
    bare = dataclasses.replace(station, fuels=())
    assert found(bare, "No grade of fuel").flag == "lcv_missing"


@pytest.mark.parametrize("folder", ["ship_handkept", "station_handkept"])
def test_the_samples_lack_nothing_that_their_papers_give(folder: str) -> None:
    sentences = " ".join(item.sentence for item in missing(read_plant(FIXTURES / folder)))
    assert "No fuel meter" not in sentences
    assert "Power is not read" not in sentences
    assert "barometer" not in sentences


def plants() -> list[Plant]:
    texts = [template("ship"), template("station"), edited(), edited(*COMPLETE)]
    found = [plant for plant, _ in map(parse_plant, texts) if plant is not None]
    assert len(found) == len(texts)
    return [*found, read_plant(FIXTURES / "ship_handkept"), read_plant(FIXTURES / "station_handkept")]


@pytest.mark.parametrize("plant", plants(), ids=lambda plant: plant.name)
def test_every_line_is_a_sentence_with_a_figure_a_key_and_a_flag_of_the_closed_list(plant: Plant) -> None:
    for item in missing(plant):
        assert item.figures
        assert item.add
        assert item.sentence.endswith(".")
        assert item.sentence.isprintable()
        assert not item.flag or item.flag in FLAGS
