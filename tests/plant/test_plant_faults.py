"""Every fault of a plant.toml: its line, what stands there, what is expected and a way out; never an exception."""

from __future__ import annotations

import json

import pytest
from hypothesis import HealthCheck, example, given, settings
from hypothesis import strategies as st
from plant_texts import GOOD, edited, line_with

from logbook.plant.description import parse_plant
from logbook.plant.fields import Fault


def faults_of(text: str) -> tuple[Fault, ...]:
    plant, faults = parse_plant(text)
    assert plant is None
    assert faults
    return faults


# Faults, each with its line


# name, text, part of the line at fault, key, found, expected, suggestion
FAULTS: list[tuple[str, str, str, str, str, str, str]] = [
    ("wrong word", edited(('"ship"', '"boat"')), 'kind = "boat"', "plant.kind", '"boat"',
     'one of "ship", "station"', ""),
    ("near word", edited(('"two-stroke"', '"2-stroke"')), "2-stroke", "engine[1].cycle", '"2-stroke"',
     '"two-stroke", "four-stroke"', 'Did you mean "two-stroke"?'),
    ("missing key", edited(("bore_mm = 600\n", "")), "[[engine]]", "engine[1].bore_mm", "nothing", "40 to 1200 mm", ""),
    ("unknown key", edited(("bore_mm = 600", "bore_mm = 600\nbohr_mm = 600")), "bohr_mm", "engine[1].bohr_mm",
     'the key "bohr_mm"', "a key of [[engine]]", 'Did you mean "bore_mm"?'),
    ("unknown table", edited(("[marks]", "[mark]")), "[mark]", "mark", 'the key "mark"', "engine, fuel, marks",
     'Did you mean "marks"?'),
    ("key of the table above", edited(("percent_per_10k_coolant = 0.6", "percent_per_10k_coolant = 0.6\nbearings = 8")),
     "bearings = 8", "engine[1].correction.bearings", 'the key "bearings"', "a key of [engine.correction]",
     "bearings belongs to [[engine]]"),
    ("key of another table", edited(("volume_m3 = 35", "volume_m3 = 35\nserial = \"7\"")), "serial", "tank[1].serial",
     'the key "serial"', "a key of [[tank]]", "serial belongs to [[meter]]"),
    ("text for number", edited(("cylinders = 6", 'cylinders = "6"')), "cylinders", "engine[1].cylinders", '"6"',
     "a whole number from 1 to 24", "Write numbers without quotation marks."),
    ("decimal comma in a text", edited(("compression_ratio = 13.4", 'compression_ratio = "13,4"')), "compression_ratio",
     "engine[1].compression_ratio", '"13,4"', "a number from 5 to 30", "Write numbers without quotation marks."),
    ("number for text", edited(('name = "Test ship"', "name = 5")), "name = 5", "plant.name", "5", "the name", ""),
    ("empty name", edited(('name = "Test ship"', 'name = " "')), 'name = " "', "plant.name", '" "', "the name", ""),
    ("text of two lines", edited(('name = "Test ship"', 'name = "a\\nb"')), "name =", "plant.name", '"a\\nb"',
     "the name", ""),
    ("text for flag", edited(("auxiliary_blowers = true", 'auxiliary_blowers = "true"')), "auxiliary_blowers",
     "engine[1].auxiliary_blowers", '"true"', "true or false", "Write it without quotation marks."),
    ("truth for number", edited(("bore_mm = 600", "bore_mm = true")), "bore_mm = true", "engine[1].bore_mm", "true",
     "a number from 40", ""),
    ("broken number for whole", edited(("cylinders = 6", "cylinders = 6.5")), "6.5", "engine[1].cylinders", "6.5",
     "a whole number", ""),
    ("negative bore", edited(("bore_mm = 600", "bore_mm = -600")), "-600", "engine[1].bore_mm", "-600",
     "40 to 1200", ""),
    ("not a number", edited(("bore_mm = 600", "bore_mm = nan")), "nan", "engine[1].bore_mm", "NaN", "40 to 1200", ""),
    ("without end", edited(("bore_mm = 600", "bore_mm = inf")), "inf", "engine[1].bore_mm", "Infinity", "1200", ""),
    ("digits", edited(("digits = 8", "digits = 13")), "digits = 13", "engine[1].counters.revolution_counter.digits",
     "13", "a whole number from 1 to 12", ""),
    ("decimals over digits", edited(("digits = 8\ndecimals = 1", "digits = 1\ndecimals = 1")), "decimals",
     "meter[1].decimals", "1", "fewer decimal places than digits (1)", ""),
    ("efficiency", edited(("efficiency = 0.93", "efficiency = 1.2")), "1.2", "engine[1].shaft_generator.efficiency",
     "1.2", "0.3 to 1", ""),
    ("efficiency in percent", edited(("[0.94, 0.97]", "[94, 97]")), "[94, 97]",
     "engine[2].generator_efficiency.efficiency", "94 as number 1", "0.3 to 1", ""),
    ("efficiency of a set", edited(("generator_efficiency = { load_percent = [50, 110], efficiency = [0.94, 0.97] }\n",
     "")), "[[engine]]", "engine[2].generator_efficiency", "nothing", "an efficiency, e.g.", ""),
    ("efficiency as text", edited(("efficiency = 0.93", 'efficiency = "high"')), "high",
     "engine[1].shaft_generator.efficiency", '"high"', "an efficiency, e.g.", ""),
    ("efficiency lists", edited(("[0.94, 0.97]", "[0.94]")), "generator_efficiency",
     "engine[2].generator_efficiency.efficiency", "[0.94]", "load_percent has (2, not 1)", ""),
    ("load over 130", edited(("[50, 75, 100]", "[50, 75, 140]")), "140", "engine[1].trial[1].load_percent",
     "140 as number 3 of the list", "numbers from 1 to 130", ""),
    ("loads not rising", edited(("[50, 75, 100]", "[50, 100, 75]")), "[50, 100, 75]", "engine[1].trial[1].load_percent",
     "[50, 100, 75]", "loads that rise", ""),
    ("the same load twice", edited(("[50, 75, 100]", "[50, 75, 75]")), "[50, 75, 75]",
     "engine[1].trial[1].load_percent", "[50, 75, 75]", "loads that rise", ""),
    ("unequal lists", edited(("[170, 168, 169]", "[170, 168]")), "[170, 168]", "engine[1].trial[1].sfoc_g_kwh",
     "[170, 168]", "load_percent has (3, not 2)", ""),
    ("empty list", edited(("[50, 75, 100]", "[]")), "load_percent = []", "engine[1].trial[1].load_percent", "[]",
     "a list of numbers from 1 to 130", ""),
    ("number for list", edited(("[170, 168, 169]", "168")), "sfoc_g_kwh", "engine[1].trial[1].sfoc_g_kwh", "168",
     "a list of numbers from 80 to 600, e.g. [50, 75, 100]", ""),
    ("text in list", edited(("[170, 168, 169]", '[170, "168", 169]')), "sfoc_g_kwh", "engine[1].trial[1].sfoc_g_kwh",
     '"168" as number 2 of the list', "numbers from 80 to 600", ""),
    ("trial without consumption", edited(("sfoc_g_kwh = [170, 168, 169]\n", "")), "[[engine.trial]]",
     "engine[1].trial[1].sfoc_g_kwh", "nothing", "sfoc_g_kwh, or heat_rate_kj_kwh", ""),
    ("mode of a trial", edited(('operating_mode = "tier II"', 'operating_mode = "tier IV"')), "tier IV",
     "engine[1].trial[1].operating_mode", '"tier IV"', '"tier II", "tier III"', "Did you mean"),
    ("trial without blowers", edited(('blowers = "off"\n', "")), "[[engine.trial]]", "engine[1].trial[1].blowers",
     "nothing", 'one of "on", "off"', ""),
    ("blowers never heard of", edited(("auxiliary_blowers = true\nblowers_on_below_percent = 30\n"
     "blowers_off_above_percent = 40\n", "")), 'blowers = "off"', "engine[1].trial[1].blowers", '"off"',
     "auxiliary_blowers = true", ""),
    ("band without blowers", edited(("auxiliary_blowers = true\n", ""), ('blowers = "off"\n', "")),
     "blowers_on_below_percent", "engine[1].blowers_on_below_percent", "30", "auxiliary_blowers = true beside it", ""),
    ("band upside down", edited(("on_below_percent = 30", "on_below_percent = 50")), "on_below_percent",
     "engine[1].blowers_on_below_percent", "50", "not above blowers_off_above_percent (40)", ""),
    ("trial twice", edited(('[[engine]]\nid = "AE1"', '[[engine.trial]]\nname = "sea trial"\nblowers = "on"\n'
     'load_percent = [25]\nsfoc_g_kwh = [180]\n\n[[engine]]\nid = "AE1"')), 'name = "sea trial"',
     "engine[1].trial[2].name", '"sea trial" a second time', "a name of its own", ""),
    ("expansion alone", edited(("compression_ratio = 13.4", "expansion_ratio = 15")), "expansion_ratio",
     "engine[1].expansion_ratio", "15", "compression_ratio beside it", ""),
    ("expansion below compression", edited(("fixed_pitch = true", "fixed_pitch = true\nexpansion_ratio = 12")),
     "expansion_ratio", "engine[1].expansion_ratio", "12", "not below compression_ratio (13.4)", ""),
    ("cube of a controllable pitch", edited(("fixed_pitch = true", "mean_speed_cube = true")), "mean_speed_cube",
     "engine[1].mean_speed_cube", "true", "fixed_pitch = true beside it", ""),
    ("no rating", edited(("rated_power_kw = 11900\n", "")), "[[engine]]", "engine[1].rated_power_kw", "nothing",
     "the rated brake power", ""),
    ("brake power below the electrical", edited(("rated_electrical_kw = 950", "rated_electrical_kw = 950\n"
     "rated_power_kw = 940")), "rated_power_kw = 940", "engine[2].rated_power_kw", "940",
     "brake power, above rated_electrical_kw (950)", ""),
    ("rule without percentages", edited(("percent_per_10k_coolant = 0.6\n", "")), "rule =", "engine[1].correction.rule",
     '"two-stroke percentages"', "the percentages of the maker's guide", ""),
    ("ISO without kind", edited(('engine_kind = "turbocharged four-stroke, charge-air cooler"\n', "")),
     "[engine.correction]", "engine[2].correction.engine_kind", "nothing", '"spark gas, turbocharged, cooler"', ""),
    ("ISO kind", edited(("charge-air cooler", "with charge-air cooler")), "engine_kind",
     "engine[2].correction.engine_kind", '"turbocharged four-stroke, with charge-air cooler"', "one of",
     'Did you mean "turbocharged four-stroke, charge-air cooler"?'),
    ("unknown counter", edited(("revolution_counter =", "revolution_conter =")), "revolution_conter",
     "engine[1].counters.revolution_conter", 'the key "revolution_conter"', "a counter of the engine",
     'Did you mean "revolution_counter"?'),
    ("meter among the counters", edited(("revolution_counter =", "fuel_meter_supply =")), "fuel_meter_supply",
     "engine[1].counters.fuel_meter_supply", 'the key "fuel_meter_supply"', "a counter of the engine", ""),
    ("counter as number", edited(("revolution_counter = { digits = 8 }", "revolution_counter = 8")),
     "revolution_counter", "engine[1].counters.revolution_counter", "8",
     "a table: [engine.counters.revolution_counter]", ""),
    ("reading nobody knows", edited(('"engine_speed"', '"engine_sped"')), "engine_sped", "engine[1].readings",
     '"engine_sped"', "keys of the catalogue or of a [[point]]", 'Did you mean "engine_speed"?'),
    ("reading twice", edited(('"shaft_power"', '"engine_speed"')), "readings =", "engine[1].readings",
     '"engine_speed" a second time', "each point once", ""),
    ("plant point at an engine", edited(('"shaft_power"', '"sea_water_temperature"')), "readings =",
     "engine[1].readings", '"sea_water_temperature"', "stands in the readings of [plant]", ""),
    ("meter among the readings", edited(('"shaft_power"', '"fuel_meter_supply"')), "readings =", "engine[1].readings",
     '"fuel_meter_supply"', "each [[meter]] is read with the engines", ""),
    ("generator of a propulsion engine", edited(('"shaft_power"', '"generator_power"')), "readings =",
     "engine[1].readings", '"generator_power"', 'only a set (use = "generating")', ""),
    ("bearings without number", edited(('"shaft_power"', '"main_bearing_temperature"')), "readings =",
     "engine[1].readings", '"main_bearing_temperature"', "bearings = ... beside it", ""),
    ("engine point at the plant", edited(("decimal_comma = true", 'readings = ["engine_speed"]')), "readings =",
     "plant.readings", '"engine_speed"', "points read once for the whole plant", ""),
    ("engine named plant", edited(('id = "AE1"', 'id = "plant"'), ('"AE1"', '"plant"')), 'id = "plant"', "engine[2].id",
     '"plant"', "another name", ""),
    ("id of an engine", edited(('id = "ME"', 'id = "Main engine"'), ('["ME"]', '["AE1"]'), ('"ME", ', "")),
     'id = "Main engine"', "engine[1].id", '"Main engine"', "up to 16 letters, digits", ""),
    ("id twice", edited(('id = "AE1"', 'id = "ME"'), ('"ME", "AE1"', '"ME"')), 'id = "ME"', "engine[2].id",
     '"ME" a second time', "another id for every engine", ""),
    ("tank with the id of an engine", edited(('id = "SERV"', 'id = "ME"')), 'id = "ME"\nuse = "service"', "tank[1].id",
     '"ME"', "an id that no engine has", ""),
    ("grade twice", edited(("[[person]]", '[[fuel]]\ngrade = "RMG 380"\nkind = "residual"\n\n[[person]]')),
     'grade = "RMG 380"', "fuel[2].grade", '"RMG 380" a second time', "another grade for every fuel", ""),
    ("account twice", edited(("[marks]", '[[person]]\nid = "2E"\nname = "B"\naccount = "chief"\n[marks]')),
     'account = "chief"', "person[2].account", '"chief" a second time', "another account for every person", ""),
    ("meter of an unknown engine", edited(('serves = ["ME"]', 'serves = ["MEE"]')), "MEE", "meter[1].serves", '"MEE"',
     'engines of this plant: "ME", "AE1"', 'Did you mean "ME"?'),
    ("meter of nobody", edited(('serves = ["ME"]', "serves = []")), "serves = []", "meter[1].serves", "[]",
     'the engines it serves, e.g. ["ME"]', ""),
    ("meter serving twice", edited(('serves = ["ME"]', 'serves = ["ME", "ME"]')), '"ME", "ME"', "meter[1].serves",
     '"ME" a second time', "once", ""),
    ("unit of a meter", edited(('unit = "L"', 'unit = "kWh"')), 'unit = "kWh"', "meter[1].unit", '"kWh"',
     'one of "L", "m3", "kg", "t"', ""),
    ("unit of a gas meter", edited(('"fuel_meter_supply"', '"gas_meter"')), 'unit = "L"', "meter[1].unit", '"L"',
     'one of "Nm3", "Sm3", "m3", "kg"', ""),
    ("temperature of a meter", edited(('temperature = "read"', 'temperature = "warm"')), "warm", "meter[1].temperature",
     '"warm"', '"read", or a fixed number of degC', ""),
    ("heat of a meter", edited(('temperature = "read"', "temperature = 400")), "= 400", "meter[1].temperature", "400",
     "a number from -30 to 200 degC", ""),
    ("accuracy nought", edited(("decimals = 1", "accuracy_percent = 0")), "accuracy", "meter[1].accuracy_percent", "0",
     "a number from 0.01 to 20 %", ""),
    ("right", edited(('"countersign"', '"counter-sign"')), "rights", "person[1].rights", '"counter-sign"',
     "rights: ", 'Did you mean "countersign"?'),
    ("gas value of a liquid", edited(('kind = "residual"', 'kind = "residual"\nlower_calorific_value_mj_m3 = 36')),
     "mj_m3", "fuel[1].lower_calorific_value_mj_m3", "36", 'kind = "gas" beside it', ""),
    ("heating value in kJ", edited(('kind = "residual"', 'kind = "residual"\nlower_calorific_value_mj_kg = 40200')),
     "40200", "fuel[1].lower_calorific_value_mj_kg", "40200", "a number from 5 to 130 MJ/kg", ""),
    ("density in kg/L", edited(('kind = "residual"', 'kind = "residual"\ndensity15_kg_m3 = 0.97')), "density15",
     "fuel[1].density15_kg_m3", "0.97", "a number from 600 to 1100 kg/m3", ""),
    ("offset", edited(("-03:30", "2 hours")), "utc_offset", "plant.utc_offset", '"2 hours"', 'e.g. "+02:00"', ""),
    ("offset of a day", edited(("-03:30", "+15:00")), "utc_offset", "plant.utc_offset", '"+15:00"', "local time", ""),
    ("minutes of an offset", edited(("-03:30", "+02:75")), "utc_offset", "plant.utc_offset", '"+02:75"', "local", ""),
    ("height of the bridge", edited(("decimal_comma = true", 'barometer_at = "bridge, reduced to sea level"')),
     "[plant]", "plant.barometer_height_m", "nothing", "a number from -50 to 300 m", ""),
    ("ship type", edited(("decimal_comma = true", 'ship_type = "bulker"')), "bulker", "plant.ship_type", '"bulker"',
     '"bulk carrier"', 'Did you mean "bulk carrier"?'),
    ("key of a point", edited(('key = "governor_output"', 'key = "engine_speed"')), 'key = "engine_speed"',
     "point[1].key", '"engine_speed"', "no key of the catalogue", ""),
    ("family of a point", edited(('family = "share"\nunit = "%"', 'family = "shares"')), "shares", "point[1].family",
     '"shares"', "one of", 'Did you mean "share"?'),
    ("unit of a point", edited(('unit = "%"', 'unit = "kW"')), 'unit = "kW"', "point[1].unit", '"kW"',
     'one of "%"', ""),
    ("span of a point", edited(("0..110", "0-110")), "0-110", "point[1].span", '"0-110"', "like 15..250", ""),
    ("span upside down", edited(("0..110", "110..0")), "110..0", "point[1].span", '"110..0"', "from least", ""),
    ("pressure of nothing", edited(('family = "share"\nunit = "%"', 'family = "pressure"')), "[[point]]",
     "point[1].pressure_reference", "nothing", 'one of "gauge", "absolute", "differential"', ""),
    ("single brackets", edited(("[[tank]]", "[tank]")), "[tank]", "tank", "", "[[tank]] above each",
     "It has double brackets."),
    ("double brackets", edited(("[marks]", "[[marks]]")), "[[marks]]", "marks", "", "a table: [marks]",
     "It has single brackets."),
    ("date for number", edited(("bore_mm = 600", "bore_mm = 2026-05-14")), "2026", "engine[1].bore_mm", '"2026-05-14"',
     "a number", ""),
]  # fmt: skip


@pytest.mark.parametrize(
    ("text", "part", "key", "found", "expected", "suggestion"), [row[1:] for row in FAULTS], ids=[r[0] for r in FAULTS]
)
def test_a_fault_says_where_what_and_what_to_do(
    text: str, part: str, key: str, found: str, expected: str, suggestion: str
) -> None:
    (fault,) = faults_of(text)
    # A key that is missing is told at the head of its table; of two tables alike the second stands last.
    place = text.rindex(part) if "[2]" in key else text.index(part)
    assert fault.line == text.count("\n", 0, place) + 1
    assert fault.key == key
    assert found in fault.found
    assert expected in fault.expected
    assert suggestion in fault.suggestion
    sentence = fault.sentence()
    assert sentence.startswith(f"line {fault.line}: {key}: found ")
    assert sentence.isprintable()


def test_every_fault_comes_at_once_in_the_order_of_the_lines() -> None:
    texts = [("bore_mm = 600", "bore_mm = -1"), ("[170, 168, 169]", "[170]"), ('unit = "L"', 'unit = "gal"'),
             ("volume_m3 = 35", "volume = 35"), ('name = "Test ship"', "nam = 3")]  # fmt: skip
    faults = faults_of(edited(*texts))
    assert [fault.key for fault in faults] == [
        "plant.name", "plant.nam", "engine[1].bore_mm", "engine[1].trial[1].sfoc_g_kwh", "meter[1].unit",
        "tank[1].volume_m3", "tank[1].volume",
    ]  # fmt: skip
    assert [fault.line for fault in faults] == sorted(fault.line for fault in faults)


def test_a_bad_load_list_is_not_blamed_on_the_other_columns() -> None:
    (fault,) = faults_of(edited(("[50, 75, 100]", "[50, 75, 400]")))
    assert fault.key == "engine[1].trial[1].load_percent"


def test_an_empty_file_asks_for_plant_and_engine() -> None:
    faults = faults_of("")
    assert [(fault.line, fault.key, fault.found) for fault in faults] == [
        (1, "plant", "nothing"),
        (1, "engine", "nothing"),
    ]
    assert "[plant]" in faults[0].expected
    assert "[[engine]]" in faults[1].expected
    assert [fault.key for fault in faults_of("engine = []\n" + GOOD.partition("[[engine]]")[0])] == ["engine"]


# Broken TOML: line, column, what to do

SYNTAX = [
    ("decimal comma", ("bore_mm = 600", "bore_mm = 600,5"), "bore_mm", 14, "Write decimals with a point"),
    ("no quotation marks", ('"ship"', "ship"), "kind = ship", 8, 'Put texts in "quotation marks"'),
    ("Python's truth", ("= true", "= True"), "True", 17, "yes and no are true and false"),
    ("open quotation mark", ('"ship"', '"ship'), "kind =", 13, "Close the text with a quotation mark"),
    ("key twice", ("bore_mm = 600\n", "bore_mm = 600\nbore_mm = 600\n"), "bore_mm", 14, "stands there twice"),
    ("table twice", ("[[tank]]", "[marks]\n[marks]\n[[tank]]"), "[marks]", 7, "in double brackets: [[engine]]"),
    ("colon", ("bore_mm = 600", "bore_mm: 600"), "bore_mm:", 8, "Write key = value"),
    ("unmarked remark", ("bore_mm = 600", "bore_mm = 600 mm"), "600 mm", 15, "Write one key = value on each line"),
    ("backslash", ('"Test ship"', '"c:\\ship"'), "c:", 13, "A backslash in a text is written twice"),
    ("open bracket", ("[[tank]]", "[[tank]"), "[[tank]", 7, "is not closed"),
    ("open list", ("[50, 75, 100]", "[50, 75, 100"), "sfoc_g_kwh", 1, "is not closed"),
]


@pytest.mark.parametrize(
    ("edit", "part", "column", "advice"), [row[1:] for row in SYNTAX], ids=[row[0] for row in SYNTAX]
)
def test_broken_toml(edit: tuple[str, str], part: str, column: int, advice: str) -> None:
    text = edited(edit)
    (fault,) = faults_of(text)
    assert fault.line in [number for number, line in enumerate(text.split("\n"), 1) if part in line]
    assert f"at column {column} " in fault.found
    assert advice in fault.suggestion
    assert fault.sentence().startswith(f"line {fault.line}: plant.toml: found ")


def test_a_text_that_is_never_closed_is_told_at_the_end() -> None:
    text = edited(("[marks]", '[marks]\nremark = """\n'))
    (fault,) = faults_of(text)
    assert fault.line == line_with(text, 'span = "0..110"')
    assert "is not closed" in fault.suggestion


@pytest.mark.parametrize(
    "text",
    ["x = " + "9" * 5000, "[plant]\nname = 0x" + "f" * 5000, "x = " + "[" * 5000, "x = " + "{a=" * 2000],
    ids=["digits", "hexadecimal digits", "brackets", "braces"],
)
def test_absurd_texts_are_faults_too(text: str) -> None:
    assert all(len(fault.sentence()) < 1000 for fault in faults_of(text))


# Whatever is typed: faults, never an exception

LINES = GOOD.split("\n")
PIECES = st.sampled_from(
    ["", "[plant]", "[[engine]]", "[engine]", "[[engine.trial]]", "[engine.correction]", "[[meter]]", "[[point]]",
     "kind = 1", "id = []", "readings = [[]]", "readings = {}", "load_percent = []", "efficiency = []", "= 3", "x",
     "generator_efficiency = {}", "generator_efficiency = { load_percent = [], efficiency = [] }", "counters = 5",
     "trial = [1]", "rated_electrical_kw = 1e308", "serves = [1]", "temperature = []", "span = '..'",
     "span = '1..2*rated'", "utc_offset = '+99'", "rights = 'read'", '"" = 1', "a.b.c = 1", "digits = 0",
     "name = '''", 'name = """\\', "plant = 1", "[a.b.c]", "bore_mm = 0x7fffffffffffffffffff", "1979-05-27 = 1"]
)  # fmt: skip
VALUES = st.one_of(
    st.integers(),
    st.floats(),
    st.booleans(),
    st.text(max_size=8),
    st.lists(st.one_of(st.integers(-5, 200), st.text(max_size=3)), max_size=4),
    st.dictionaries(st.sampled_from(["digits", "load_percent", "efficiency", "x"]), st.integers(-5, 200), max_size=3),
)


def check_any(text: str) -> None:
    plant, faults = parse_plant(text)
    assert (plant is None) == bool(faults)
    lines = text.count("\n") + 1
    for fault in faults:
        assert 1 <= fault.line <= lines
        assert fault.sentence().isprintable()


@settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(st.lists(st.tuples(st.integers(0, len(LINES) - 1), PIECES), max_size=4))
def test_lines_put_in_anywhere(edits: list[tuple[int, str]]) -> None:
    lines = list(LINES)
    for place, piece in edits:
        lines.insert(place, piece)
    check_any("\n".join(lines))


@settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(st.lists(st.integers(0, len(LINES) - 1), max_size=6), st.randoms(use_true_random=False))
def test_lines_taken_out_and_shuffled(gone: list[int], random: object) -> None:
    lines = [line for place, line in enumerate(LINES) if place not in gone]
    if gone and gone[0] % 2:
        random.shuffle(lines)  # type: ignore[attr-defined]
    check_any("\n".join(lines))


@settings(max_examples=200, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(st.sampled_from([line.split(" = ")[0] for line in LINES if " = " in line]), VALUES)
@example("generator_efficiency", {"load_percent": 1})
@example("bore_mm", float("nan"))
def test_any_value_for_any_key(key: str, value: object) -> None:
    if isinstance(value, dict):
        written = "{ " + ", ".join(f"{name} = {number}" for name, number in value.items()) + " }"
    elif isinstance(value, float):
        written = repr(value) if "e" not in repr(value) or "." in repr(value) else repr(value).replace("e", ".0e")
    else:
        written = json.dumps(value, ensure_ascii=False)
    lines = [f"{key} = {written}" if line.startswith(f"{key} = ") else line for line in LINES]
    check_any("\n".join(lines))


@settings(max_examples=100, deadline=None)
@given(st.text(max_size=60), st.integers(0, len(GOOD)))
def test_any_text_anywhere(text: str, place: int) -> None:
    check_any(GOOD[:place] + text + GOOD[place:])
