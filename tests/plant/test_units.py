"""Units as typed: every factor proved against pint, every row of the trade's table, and what is asked or refused."""

import csv
import math
from importlib.resources import files

import pint
import pytest
from hypothesis import given
from hypothesis import strategies as st

from logbook.plant.catalogue import catalogue
from logbook.plant.units import BARE, convert, normalised, parse_quantity, spellings_of

registry = pint.UnitRegistry()

NORMAL = "101.325 kPa / (273.15 K)"
STANDARD = "101.325 kPa / (288.15 K)"
CUBIC_FOOT = "cubic_foot * {psi} psi / (288.70555555555554 K)"
HP = "horsepower"

# family -> unit of the list -> the same in pint; the first of each is the base unit of the family.
IN_PINT = {
    "rotation": {"rpm": "revolution/minute", "rps": "revolution/second"},
    "power": {"kW": "kW", "MW": "MW", "W": "W", "PS": "metric_horsepower", "hp(mechanical)": HP},
    "torque": {
        "kNm": "kN*m", "Nm": "N*m", "MNm": "MN*m", "kgm": "kilogram_force*m", "lbft": "pound*g_0*foot",
    },
    "share": {"%": "percent"},
    "difference": {"K": "kelvin", "degF": "delta_degF"},
    "pressure": {
        "bar": "bar", "barg": "bar", "bara": "bar", "mbar": "mbar", "MPa": "MPa", "MPa(g)": "MPa", "MPa(a)": "MPa",
        "kPa": "kPa", "kPa(g)": "kPa", "kPa(a)": "kPa", "Pa": "Pa", "kg/cm2": "kilogram_force/cm**2",
        "ata": "technical_atmosphere", "at(technical)": "technical_atmosphere", "atm(standard)": "standard_atmosphere",
        "psi": "psi", "psia": "psi",
    },
    "small pressure": {"mbar": "mbar", "kPa": "kPa", "Pa": "Pa", "mmWC": "mmH2O", "inWC": "inH2O"},
    "barometer": {"mbar": "mbar", "bar": "bar", "kPa": "kPa", "mmHg": "mmHg", "inHg": "inHg"},
    "energy": {
        "kWh": "kWh", "MWh": "MWh", "GWh": "GWh", "kJ": "kJ", "MJ": "MJ", "GJ": "GJ",
        "kcal(LHV)": "kilocal_it", "Btu(LHV)": "Btu_it", "MMBtu(LHV)": "1e6*Btu_it", "therm(LHV)": "1e5*Btu_it",
    },
    "volume": {
        "L": "L", "m3": "m**3", "usg": "gallon", "ig": "imperial_gallon", "bbl": "oil_barrel",
    },
    "gas volume": {
        "Nm3": f"m**3 * {NORMAL}", "Sm3": f"m**3 * {STANDARD}", "m3": None,
        **{
            f"{head}scf({psi})": f"{factor} * {CUBIC_FOOT.format(psi=psi)}"
            for psi in ("14.696", "14.73") for head, factor in (("", 1), ("m", 1e3), ("mm", 1e6))
        },
    },
    "mass": {
        "kg": "kg", "t": "tonne", "g": "g", "lb": "pound", "long ton": "long_ton", "short ton": "short_ton",
    },
    "flow": {
        "kg/h": "kg/h", "t/h": "tonne/h", "t/d": "tonne/day", "L/h": None, "m3/h": None,
    },
    "hours": {"h": "h", "min": "min"},
    "calorific value": {
        "MJ/kg": "MJ/kg", "kJ/kg": "kJ/kg", "kcal/kg": "kilocal_it/kg", "kWh/kg": "kWh/kg", "Btu/lb": "Btu_it/pound",
    },
    "gas calorific value": {
        "MJ/Nm3": f"MJ / (m**3 * {NORMAL})", "MJ/Sm3": f"MJ / (m**3 * {STANDARD})",
        "kJ/Nm3": f"kJ / (m**3 * {NORMAL})", "kWh/Nm3": f"kWh / (m**3 * {NORMAL})",
        "kWh/Sm3": f"kWh / (m**3 * {STANDARD})", "kcal/Nm3": f"kilocal_it / (m**3 * {NORMAL})",
        "Btu/scf(LHV, 14.696)": f"Btu_it / ({CUBIC_FOOT.format(psi='14.696')})",
        "Btu/scf(LHV, 14.73)": f"Btu_it / ({CUBIC_FOOT.format(psi='14.73')})",
    },
    "heat rate": {
        "kJ/kWh": "kJ/kWh", "MJ/kWh": "MJ/kWh", "kcal/kWh(LHV)": "kilocal_it/kWh", "Btu/kWh(LHV)": "Btu_it/kWh",
    },
    "density": {"kg/m3": "kg/m**3", "kg/L": "kg/L", "sg(60/60)": "999.016 kg/m**3", "sg(15/4)": "999.972 kg/m**3"},
    "viscosity": {"cSt": "centistokes"},
    "distance": {"nm": "nautical_mile", "km": "km"},
    "ship speed": {"kn": "knot", "km/h": "km/h"},
    "length": {"m": "m", "cm": "cm", "mm": "mm", "ft": "foot", "in": "inch"},
    "count": {"count": "count"},
    "angle": {"deg": "degree"},
    "frequency": {"Hz": "Hz"},
    "specific use": {
        "g/kWh": "g/kWh", "kg/kWh": "kg/kWh", "g/PSh": "g/(metric_horsepower*h)", "g/hph(mechanical)": f"g/({HP}*h)",
        "lb/PSh": "pound/(metric_horsepower*h)", "lb/hph(mechanical)": f"pound/({HP}*h)", "lb/kWh": "pound/kWh",
        "kWh/L": None, "kWh/usg": None, "kWh/ig": None, "L/kWh": None,
    },
    "duration": {"ms": "ms", "s": "s"},
    "nox": {"mg/Nm3": "mg/m**3", "g/Nm3": "g/m**3"},
    "wind force": {"Bft": "count"},
    "content": {"%": "percent", "% m/m": "percent", "% v/v": "percent", "ppm": "ppm", "mg/kg": "mg/kg"},
    "index": {"index": "count"},
}  # fmt: skip

# Units that do not belong to the first of their family (another basis), against one that does.
OTHER_BASES = {
    ("gas volume", "m3"): ("m3", "1"),
    ("flow", "L/h"): ("L/h", "L/h"),
    ("flow", "m3/h"): ("L/h", "m**3/h"),
    ("specific use", "kWh/L"): ("kWh/L", "kWh/L"),
    ("specific use", "kWh/usg"): ("kWh/L", "kWh/gallon"),
    ("specific use", "kWh/ig"): ("kWh/L", "kWh/imperial_gallon"),
    ("specific use", "L/kWh"): ("L/kWh", "L/kWh"),
}


def rows() -> list[dict[str, str]]:
    lines = files("logbook.plant").joinpath("units.csv").read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(lines))


def units() -> list[tuple[str, str, str]]:
    """family, unit and its first spelling of every row that is a unit with a factor and no zero of its own."""
    return [
        (row["family"], row["unit"], row["spellings"].split()[0])
        for row in rows()
        if row["factor"] and row["family"] != "temperature"
    ]


@pytest.mark.parametrize(("family", "unit", "spelling"), units())
def test_every_factor_is_that_of_pint(family: str, unit: str, spelling: str) -> None:
    if (family, unit) in OTHER_BASES:
        base, expression = OTHER_BASES[family, unit]
        base_expression = OTHER_BASES[family, base][1]
    else:
        table = IN_PINT[family]
        base, base_expression, expression = next(iter(table)), next(iter(table.values())), table[unit]
    here = registry.Quantity(3.7, "") * registry(expression)
    there = registry(base_expression)
    assert here.check(there.dimensionality), f"{unit} and {base} are not of one dimension"
    expected = (here / there).to_base_units().magnitude
    found = convert(3.7, spelling, family, canonical_unit=base).number
    assert found == pytest.approx(expected, rel=5e-9)


@pytest.mark.parametrize(("typed", "kelvin"), [("98 F", "98 degF"), ("98.6 degC", "98.6 degC"), ("310.15 K", "310.15")])
def test_temperatures_are_those_of_pint(typed: str, kelvin: str) -> None:
    number, _, scale = kelvin.partition(" ")
    expected = registry.Quantity(float(number), scale or "kelvin").to("degC").magnitude
    assert parse_quantity(typed, "temperature").number == pytest.approx(expected, abs=1e-12)


def test_no_spelling_of_a_family_means_two_things() -> None:
    seen: dict[tuple[str, str], str] = {}
    for row in rows():
        for spelling in [row["unit"], *row["spellings"].split()]:
            if spelling:
                key = (row["family"], normalised(spelling))
                meaning = row["unit"] or row["ask"] or row["refusal"]
                assert seen.setdefault(key, meaning) == meaning, key


def test_every_choice_of_every_question_ends_in_a_number_or_a_refusal() -> None:
    for row in rows():
        for spelling in row["spellings"].split() if row["ask"] else ():
            asked = convert(100.0, spelling, row["family"]).ask
            assert asked is not None, spelling
            assert asked.key == row["ask"]
            for choice in asked.choices:
                answered = convert(100.0, spelling, row["family"], answers={asked.key: choice.answer})
                plain = convert(100.0, choice.spelling, row["family"])
                assert answered.number == plain.number
                assert answered.number is not None or answered.refusal or answered.ask


def test_a_family_of_the_catalogue_without_a_list_is_number_or_state() -> None:
    families = {point.family for point in catalogue().values()}
    assert {family for family in families if not spellings_of(family)} == {"number", "state"}


def test_every_point_of_the_catalogue_reads_its_own_unit() -> None:
    for point in catalogue().values():
        if point.unit != "-":
            found = convert(2.5, point.unit, point.family, canonical_unit=point.unit)
            assert found.number == 2.5, point.key


# typed, key of the point, number in the canonical unit: what the trade types and what it means.
PS, HP_MECHANICAL, AT, PSI = 0.73549875, 0.745699872, 0.980665, 0.0689475729
TRADE = [
    *[(f"7 {unit}", "shaft_power", 7.0) for unit in ("kW", "KW")],
    *[(f"7 {unit}", "shaft_power", 7000.0) for unit in ("MW", "mw", "Mw")],
    *[(f"7 {unit}", "shaft_power", 7 * PS) for unit in ("PS", "cv", "ch", "pk")],
    *[(f"7 {unit}", "generator_energy", 7.0) for unit in ("kWh", "kwh", "units")],
    *[(f"7 {unit}", "generator_energy", 7000.0) for unit in ("MWh", "mwh")],
    *[(f"7 {unit}", "charge_air_pressure", 7.0) for unit in ("bar", "b", "barg", "bar(g)", "bar (g)")],
    *[
        (f"7 {unit}", "charge_air_pressure", 7 * AT)
        for unit in ("kg/cm2", "kg/cm\u00b2", "kgf/cm^2", "kp/cm2", "ksc", "kg", "atue")
    ],
    *[(f"7 {unit}", "charge_air_pressure", 70.0) for unit in ("MPa", "mpa", "Mpa")],
    *[(f"7 {unit}", "charge_air_pressure", 0.07) for unit in ("kPa", "kpa")],
    *[(f"7 {unit}", "charge_air_pressure", 7 * PSI) for unit in ("psi", "psig", "lb", "#")],
    *[
        (f"7 {unit}", "air_filter_pressure_drop", 7 * 0.0980665)
        for unit in ("mmWC", "mmWG", "mmAq", "mmH2O", "mmWS", "mm")
    ],
    *[(f"7 {unit}", "air_filter_pressure_drop", 7 * 2.49089) for unit in ("inWC", "inH2O")],
    *[(f"7 {unit}", "barometric_pressure", 7.0) for unit in ("mbar", "mb", "hPa", "hpa")],
    *[(f"7 {unit}", "barometric_pressure", 7 * 1.333224) for unit in ("mmHg", "torr")],
    ("7 inHg", "barometric_pressure", 7 * 33.8639),
    *[(f"7{unit}", "sea_water_temperature", 7.0) for unit in (" C", "\u00b0C", "degC", " deg", "", "\u2103")],
    ("7 deg. C", "sea_water_temperature", 7.0),
    *[(f"68{unit}", "sea_water_temperature", 20.0) for unit in (" F", "degF", "\u00b0F", "\u2109")],
    ("280.15 K", "sea_water_temperature", 7.0),
    *[(f"7 {unit}", "fuel_meter_supply", 7.0) for unit in ("l", "L", "ltr", "lit")],
    *[(f"7 {unit}", "fuel_meter_supply", 7000.0) for unit in ("m3", "m\u00b3", "cbm", "kl")],
    ("7 usg", "fuel_meter_supply", 7 * 3.78541),
    ("7 ig", "fuel_meter_supply", 7 * 4.54609),
    ("7 bbl", "fuel_meter_supply", 7 * 158.987),
    ("7 m3", "gas_meter", 7.0),
    *[(f"953 {unit}", "lot_density_15c", 953.0) for unit in ("kg/m3", "kg / m^3")],
    *[(f"0.953 {unit}", "lot_density_15c", 953.0) for unit in ("kg/l", "g/cm3", "t/m3", "")],
    *[(f"7 {unit}", "fuel_viscosity", 7.0) for unit in ("cSt", "cst", "mm2/s")],
    *[(f"97 {unit}", "engine_speed", 97.0) for unit in ("rpm", "RPM", "r/min", "1/min", "min-1", "min\u207b\u00b9")],
    ("97 u/min", "engine_speed", 97.0),
    *[(f"2 {unit}", "engine_speed", 120.0) for unit in ("rps", "1/s")],
    *[(f"14 {unit}", "speed_through_water", 14.0) for unit in ("kn", "kt", "kts")],
    *[(f"14 {unit}", "distance_observed", 14.0) for unit in ("nm", "NM", "nmi", "M", "miles")],
    *[(f"14 {unit}", "shaft_torque", 0.014) for unit in ("Nm", "NM", "N.m", "N\u00b7m")],
    ("14 kNm", "shaft_torque", 14.0),
    *[(f"1 {unit}", "cylinder_oil_feed_setting", 1.0) for unit in ("g/kWh", "gr/kwh")],
    ("1 g/PSh", "cylinder_oil_feed_setting", 1 / PS),
    ("40.2 MJ/kg", "lot_lower_calorific_value", 40.2),
    ("40200 kJ/kg", "lot_lower_calorific_value", 40.2),
    ("40200", "lot_lower_calorific_value", 40.2),
    ("9600 kcal/kg", "lot_lower_calorific_value", 40.19328),
    ("17300 btu/lb", "lot_lower_calorific_value", 17300 * 0.002326),
    ("36 MJ/Nm3", "lot_gas_lower_calorific_value", 36.0),
    ("36 MJ/Sm3", "lot_gas_lower_calorific_value", 36 * 288.15 / 273.15),
    ("10 kWh/Nm3", "lot_gas_lower_calorific_value", 36.0),
    ("12345.6 h", "engine_running_hours", 12345.6),
    ("0.41 %", "lot_sulphur", 0.41),
    ("4100 ppm", "lot_sulphur", 0.41),
    *[(f"12 {unit}", "ignition_timing", 12.0) for unit in ("deg", "CAD", "dBTDC")],
]  # fmt: skip


@pytest.mark.parametrize(("typed", "key", "expected"), TRADE)
def test_what_the_trade_types(typed: str, key: str, expected: float) -> None:
    point = catalogue()[key]
    found = parse_quantity(typed, point.family, canonical_unit=point.unit, pressure_reference=point.pressure_reference)
    assert found.ask is None
    assert found.refusal == ""
    assert found.number == pytest.approx(expected, rel=2e-6)


# typed, family, canonical unit, number: families that no point of the catalogue has by itself.
@pytest.mark.parametrize(
    ("typed", "family", "unit", "expected"),
    [
        *[(f"2 {unit}", "mass", "kg", 2000.0) for unit in ("t", "te", "mt", "MT", "tonne")],
        *[(f"2 {unit}", "mass", "kg", 2.0) for unit in ("kg", "kgs")],
        *[(f"2 {unit}", "mass", "kg", 0.907185) for unit in ("lb", "lbs")],
        ("2 t", "volume", "kg", 2000.0),  # a fuel meter that shows kg
        ("2 Nm3", "volume", "Nm3", 2.0),
        *[(f"2 {unit}", "gas volume", "Nm3", 2.0) for unit in ("Nm3", "nm3", "mn3")],
        *[(f"2 {unit}", "gas volume", "Nm3", 2 * 273.15 / 288.15) for unit in ("Sm3", "sm3", "scm")],
        ("2 Nm3", "gas volume", "Sm3", 2 * 288.15 / 273.15),  # ISO 13443 conditions
        ("6024.19 Nm3", "gas volume", "Sm3", 6355.01),  # 1250 m3 at 4.2 bar gauge and 18 degC, by arithmetic
        *[(f"2 {unit}", "flow", "L/h", 2.0) for unit in ("l/h", "lph")],
        ("2 m3/h", "flow", "L/h", 2000.0),
        ("2 kg/h", "flow", "kg/h", 2.0),
        *[(f"24 {unit}", "flow", "kg/h", 1000.0) for unit in ("t/d", "mt/day")],
        *[(f"8 {unit}", "difference", "K", 8.0) for unit in ("K", "C", "deg", "")],
        *[(f"9 {unit}", "difference", "K", 5.0) for unit in ("F", "degF")],
        *[(f"8100 {unit}", "heat rate", "kJ/kWh", 8100.0) for unit in ("kJ/kWh", "MJ/MWh")],
        ("2 kWh/L", "specific use", "kWh/L", 2.0),
        ("208degF", "temperature", "degC", 97.7777777778),
        ("1.013 bar", "pressure", "kPa", 101.3),
        ("1013 hPa", "barometer", "kPa", 101.3),
        ("350 mm", "length", "mm", 350.0),
        ("12 V", "number", "V", 12.0),
    ],
)  # fmt: skip
def test_other_families(typed: str, family: str, unit: str, expected: float) -> None:
    assert parse_quantity(typed, family, canonical_unit=unit).number == pytest.approx(expected, rel=2e-6)


@pytest.mark.parametrize(
    ("number", "spelling", "family", "key", "meanings"),
    [
        (165, "hp", "power", "hp", {"metric": 165 * PS, "mechanical": 165 * HP_MECHANICAL}),
        (165, "bhp", "power", "hp", {"metric": 165 * PS, "mechanical": 165 * HP_MECHANICAL}),
        (165, "SHP", "power", "hp", {"metric": 165 * PS, "mechanical": 165 * HP_MECHANICAL}),
        (2, "at", "pressure", "atmosphere", {"technical": 1.96133, "standard": 2.0265}),
        (2, "atm", "pressure", "atmosphere", {"technical": 1.96133, "standard": 2.0265}),
        (2, "ton", "mass", "ton", {"tonne": 2000, "long": 2032.0938, "short": 1814.36948}),
        (2, "lt", "mass", "ton", {"tonne": 2000, "long": 2032.0938, "short": 1814.36948}),
        (2, "gal", "volume", "gallon", {"US": 7.570824, "imperial": 9.09218}),
        (0.953, "sg", "density", "specific gravity", {"60/60 degF": 952.062, "15/4 degC": 952.973}),
        (150, "g/bhph", "specific use", "hp", {"metric": 150 / PS, "mechanical": 150 / HP_MECHANICAL}),
        (0.33, "lb/hph", "specific use", "hp", {"metric": 203.5156, "mechanical": 200.7316}),
        (15, "kWh/gal", "specific use", "gallon", {"US": None, "imperial": None}),
        (36, "MJ/m3", "gas calorific value", "gas condition", {"0 degC": 36, "15 degC": 37.976935}),
        (1000, "scf", "gas volume", "base pressure", {"14.696 psia": 26.79122, "14.73 psia": 26.8532}),
        (1, "mmscf", "gas volume", "base pressure", {"14.696 psia": 26791.22, "14.73 psia": 26853.2}),
        (2000, "kcal/kWh", "heat rate", "heat basis", {"lower": 8373.6, "higher": None}),
        (8000, "Btu/kWh", "heat rate", "heat basis", {"lower": 8440.447, "higher": None}),
        (860, "kcal", "energy", "heat basis", {"lower": 1.00018, "higher": None}),
        (1, "MMBtu", "energy", "heat basis", {"lower": 293.0711, "higher": None}),
        (950, "btu/scf", "gas calorific value", "heat basis", {"lower": None, "higher": None}),
    ],
)
def test_what_has_to_be_asked(
    number: float, spelling: str, family: str, key: str, meanings: dict[str, float | None]
) -> None:
    found = convert(number, spelling, family)
    assert found.number is None
    assert found.ask is not None
    assert found.ask.key == key
    assert [choice.answer for choice in found.ask.choices] == list(meanings)
    for choice in found.ask.choices:
        expected = meanings[choice.answer]
        assert choice.number == (None if expected is None else pytest.approx(expected, rel=2e-6))
        assert choice.answer in found.ask.sentence
        # Once answered for a point, it is never asked again.
        assert convert(number, spelling, family, answers={key: choice.answer}).number == choice.number


def test_two_questions_come_one_after_the_other() -> None:
    answers = {"heat basis": "lower", "base pressure": "14.696 psia"}
    found = convert(950, "btu/scf", "gas calorific value", answers={"heat basis": "lower"})
    assert found.ask is not None
    assert found.ask.key == "base pressure"
    # 950 Btu per 0.0267914 Nm3.
    number = convert(950, "btu/scf", "gas calorific value", answers=answers).number
    assert number == pytest.approx(950 * 1.05505585e-3 / 0.0267914, rel=1e-5)


@pytest.mark.parametrize(
    ("number", "family", "unit", "span", "key", "other", "meaning"),
    [
        (640, "temperature", "degC", (120, 520), "looks_like_fahrenheit", "degF", 337.778),
        (760, "barometer", "mbar", None, "looks_like_mmhg", "mmHg", 1013.25),
        (29.92, "barometer", "mbar", None, "looks_like_inhg", "inHg", 1013.21),
        (9600, "calorific value", "MJ/kg", None, "looks_like_kcal", "kcal/kg", 40.1933),
        (1000, "content", "% m/m", (0, 5), "looks_like_ppm", "ppm", 0.1),
    ],
)
def test_a_bare_number_that_looks_like_another_unit(
    number: float, family: str, unit: str, span: tuple[float, float] | None, key: str, other: str, meaning: float
) -> None:
    found = convert(number, "", family, canonical_unit=unit, span=span)
    # It stands as typed until somebody says otherwise.
    assert found.number == number
    assert found.ask is not None
    assert found.ask.finding == key
    assert found.ask.key == BARE
    assert [choice.spelling for choice in found.ask.choices] == [unit, other]
    assert found.ask.choices[1].number == pytest.approx(meaning, rel=1e-5)
    remembered = convert(number, "", family, canonical_unit=unit, span=span, answers={BARE: other})
    assert remembered.number == pytest.approx(meaning, rel=1e-5)
    assert remembered.ask is None
    stands = convert(number, "", family, canonical_unit=unit, span=span, answers={BARE: unit})
    assert (stands.number, stands.ask) == (number, None)


def test_the_remembered_unit_is_that_of_every_bare_number_of_the_point() -> None:
    # 500 alone would be a fine number of degC: the gauge is in degF all the same.
    assert convert(500, "", "temperature", span=(120, 520), answers={BARE: "degF"}).number == pytest.approx(260.0)


@pytest.mark.parametrize(("number", "family", "meaning"), [(0.953, "density", 953.0), (40200, "calorific value", 40.2)])
def test_a_bare_number_that_can_be_nothing_else_is_taken_and_said(number: float, family: str, meaning: float) -> None:
    found = convert(number, "", family)
    assert found.number == pytest.approx(meaning)
    assert found.remark


@pytest.mark.parametrize(
    ("spelling", "reference", "barometer", "expected"),
    [
        ("bara", "gauge", 1.005, 1.395),
        ("psia", "gauge", 1.005, 2.4 * PSI - 1.005),
        ("ata", "gauge", 1.005, 2.4 * AT - 1.005),
        ("bara", "absolute", None, 2.4),
        ("barg", "absolute", 1.005, 3.405),
        ("barg", "differential", None, 2.4),
        ("psi", "differential", None, 2.4 * PSI),
        ("bar", "absolute", None, 2.4),
        ("bar", "gauge", None, 2.4),
    ],
)
def test_gauge_or_absolute_is_part_of_the_point(
    spelling: str, reference: str, barometer: float | None, expected: float
) -> None:
    found = convert(2.4, spelling, "pressure", pressure_reference=reference, barometer_bar=barometer)
    assert found.number == pytest.approx(expected, rel=1e-7)
    assert found.reference == reference


def test_the_barometer_is_taken_in_the_unit_of_the_point() -> None:
    found = convert(240, "kPa(a)", "pressure", pressure_reference="gauge", canonical_unit="kPa", barometer_bar=1.005)
    assert found.number == pytest.approx(139.5)


@pytest.mark.parametrize(("spelling", "reference"), [("bara", "gauge"), ("barg", "absolute"), ("bara", "differential")])
def test_no_barometer_no_conversion_between_gauge_and_absolute(spelling: str, reference: str) -> None:
    found = convert(2.4, spelling, "pressure", pressure_reference=reference)
    assert found.number is None
    assert "absolute" in found.refusal


@pytest.mark.parametrize(
    ("number", "spelling", "family", "unit", "words"),
    [
        (3, "furlong", "power", "kW", "kW, MW"),
        (3, "kW", "temperature", "degC", "degC, degF, K"),
        (3, "bar", "number", "-", "the number alone"),
        (3, "m3", "gas volume", "Nm3", "pressure and temperature"),
        (3, "Nm3", "gas volume", "m3", "pressure and temperature"),
        (3, "kWh/L", "specific use", "g/kWh", "density"),
        (3, "kg/h", "flow", "L/h", "density"),
        (3, "% v/v", "content", "% m/m", "mass"),
        (380, "sec", "viscosity", "cSt", "table"),
        (380, "RW1", "viscosity", "cSt", "table"),
        (380, "SSU", "viscosity", "cSt", "table"),
        (38, "MJ/Nm3(HHV)", "gas calorific value", "MJ/Nm3", "higher"),
        (43, "MJ/kg HHV", "calorific value", "MJ/kg", "higher"),
    ],
)
def test_refusals_say_what_would_be_understood(
    number: float, spelling: str, family: str, unit: str, words: str
) -> None:
    found = convert(number, spelling, family, canonical_unit=unit)
    assert found.number is None
    assert words in found.refusal


def test_api_gravity_is_at_sixty_degrees_fahrenheit_and_says_so() -> None:
    # API MPMS: degrees API = 141.5 / (specific gravity 60/60 degF) - 131.5; 10 is the density of water.
    found = convert(10, "API", "density")
    assert found.number == pytest.approx(999.016)
    assert "60 degF" in found.remark


@pytest.mark.parametrize("text", ["", "kW", "12,345.6.7", "--", "1e999", "twelve"])
def test_what_is_no_quantity_is_refused_with_the_list(text: str) -> None:
    found = parse_quantity(text, "power")
    assert found.number is None
    assert "kW" in found.refusal


def test_a_number_that_may_part_thousands_is_refused_at_the_desk() -> None:
    assert "12345" in parse_quantity("12,345 kW", "power").refusal


@given(
    st.floats(allow_nan=False, allow_infinity=False, width=32),
    st.text(max_size=8),
    st.sampled_from(sorted({row["family"] for row in rows()})),
)
def test_any_spelling_gives_a_finite_number_a_question_or_a_refusal(number: float, spelling: str, family: str) -> None:
    found = convert(number, spelling, family, barometer_bar=1.0, pressure_reference="gauge")
    outcomes = [found.number is not None, bool(found.refusal), found.ask is not None]
    assert any(outcomes)
    assert not (found.refusal and found.number is not None)
    if found.number is not None:
        assert math.isfinite(found.number)


@given(st.floats(min_value=1e-3, max_value=1e6), st.sampled_from(units()))
def test_there_and_back_again(number: float, row: tuple[str, str, str]) -> None:
    family, unit, spelling = row
    base = OTHER_BASES.get((family, unit), (next(iter(IN_PINT[family])), ""))[0]
    there = convert(number, spelling, family, canonical_unit=base).number
    assert there is not None
    assert convert(there, base, family, canonical_unit=unit).number == pytest.approx(number, rel=1e-12)
