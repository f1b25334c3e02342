"""What people type: numbers, states, words, rows; what is asked; nothing is silently taken for something else."""

import re

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from logbook.plant.catalogue import catalogue
from logbook.plant.records import Counter
from logbook.reading.typed import Habits, read_row, read_typed, split_row
from logbook.reading.value import State

POINTS = catalogue()
EXHAUST = POINTS["cylinder_exhaust_temperature"]
COMMA = Habits(decimal_comma=True)
CYLINDERS = tuple(f"cylinder_exhaust_temperature.{number}" for number in range(1, 7))


@pytest.mark.parametrize(
    ("text", "key", "number", "digits"),
    [
        ("340", "cylinder_exhaust_temperature", 340, 3),
        ("12,5", "charge_air_pressure", 12.5, 3),
        ("12.50", "charge_air_pressure", 12.5, 4),
        ("0,85", "power_factor", 0.85, 2),
        (".85", "power_factor", 0.85, 2),
        ("0", "charge_air_pressure", 0, 1),
        ("0.0", "charge_air_pressure", 0, 2),
        ("-3", "outside_air_temperature", -3, 1),
        ("\u22123,5", "outside_air_temperature", -3.5, 2),
        ("+3", "outside_air_temperature", 3, 1),
        ("12.", "outside_air_temperature", 12, 2),
        ("  57325235 ", "revolution_counter", 57325235, 8),
        ("57 325 235", "revolution_counter", 57325235, 8),
        ("57\u00a0325\u202f235", "revolution_counter", 57325235, 8),
        ("57'325'235", "revolution_counter", 57325235, 8),
        ("57,325,235", "revolution_counter", 57325235, 8),
        ("1.234.567,8", "fuel_meter_supply", 1234567.8, 8),
        ("1,234,567.8", "fuel_meter_supply", 1234567.8, 8),
        ("003165", "revolution_counter", 3165, 4),
        ("12345.6", "engine_running_hours", 12345.6, 6),
        ("12345:36", "engine_running_hours", 12345.6, 7),
        ("12345.36", "engine_running_hours", 12345.36, 7),
        ("5.73E+07", "revolution_counter", 57300000, 3),
        ("12,5 MW", "shaft_power", 12500, 3),
        ("9.6MW", "shaft_power", 9600, 2),
        ("6", "wind_force", 6, 1),
        ("45", "exhaust_bypass_state", 45, 2),
    ],
)
def test_numbers(text: str, key: str, number: float, digits: int) -> None:
    value, findings = read_typed(text, POINTS[key])
    assert findings == ()
    assert value is not None
    assert value.number == pytest.approx(number, rel=1e-15)
    assert value.digits == digits
    assert value.text == text.strip()


@pytest.mark.parametrize(
    ("text", "number", "shown"),
    [("620 E", 620, "620"), ("620E", 620, "620"), ("12,5 MW E", 12500, "12,5 MW"), ("4 423 E", 4423, "4 423")],
)
def test_the_mark_of_an_estimate_is_kept_apart_from_the_text(text: str, number: float, shown: str) -> None:
    value, findings = read_typed(text, POINTS["shaft_power"])
    assert findings == ()
    assert value is not None
    assert (value.number, value.estimated, value.text, value.shown()) == (number, True, shown, f"{shown} E")


@pytest.mark.parametrize(
    ("text", "state", "reason"),
    [
        ("N/R", State.NOT_READ, ""),
        ("n/r", State.NOT_READ, ""),
        ("NR gauge glass dirty", State.NOT_READ, "gauge glass dirty"),
        ("not read", State.NOT_READ, ""),
        ("-", State.NOT_FITTED, ""),
        ("- removed in dock", State.NOT_FITTED, "removed in dock"),
        ("stopped", State.STOPPED, ""),
        ("s", State.STOPPED, ""),
        ("Stopped: drifting", State.STOPPED, "drifting"),
        ("S/B", State.STAND_BY, ""),
        ("stand-by", State.STAND_BY, ""),
        ("def", State.DEFECTIVE, ""),
        ("def thermocouple broken", State.DEFECTIVE, "thermocouple broken"),
        ("defective (no signal)", State.DEFECTIVE, "no signal"),
    ],
)
def test_states_and_their_reasons(text: str, state: State, reason: str) -> None:
    value, findings = read_typed(text, EXHAUST)
    assert findings == ()
    assert value is not None
    assert (value.state, value.reason, value.number) == (state, reason, None)


@pytest.mark.parametrize(
    ("text", "key", "word"),
    [
        ("running", "engine_state", "running"),
        ("Run", "engine_state", "running"),
        ("stopped", "engine_state", "stopped"),
        ("s/b", "engine_state", "stand-by"),
        ("on", "auxiliary_blower_state", "on"),
        ("OFF", "auxiliary_blower_state", "off"),
        ("open", "exhaust_bypass_state", "open"),
        ("closed", "exhaust_bypass_state", "shut"),
        ("tier iii", "operating_mode", "Tier III"),
        ("2", "operating_mode", "Tier III"),
    ],
)
def test_words_of_state_points(text: str, key: str, word: str) -> None:
    value, findings = read_typed(text, POINTS[key], Habits(operating_modes=("standard", "Tier III")))
    assert findings == ()
    assert value is not None
    assert value.word == word


@pytest.mark.parametrize(
    ("text", "key", "words"),
    [
        ("maybe", "auxiliary_blower_state", "on, off"),
        ("tier iv", "operating_mode", "standard, Tier III"),
        ("turning", "engine_state", "running, stopped, stand-by"),
        ("ajar", "exhaust_bypass_state", "open, shut, a number in %"),
        ("abc", "cylinder_exhaust_temperature", "N/R, stopped, S/B, -, def"),
        ("- 5", "cylinder_exhaust_temperature", "a number in degC"),
        ("12.3.4", "cylinder_exhaust_temperature", "a number in degC"),
        ("1e999", "cylinder_exhaust_temperature", "a number in degC"),
        ("340 35", "cylinder_exhaust_temperature", "degC, degF, K"),
        ("340 furlongs", "cylinder_exhaust_temperature", "degC, degF, K"),
        ("12345:75", "engine_running_hours", "h, min"),
        ("3\x1b[2J", "cylinder_exhaust_temperature", "cannot be printed"),
        ("2.4 bara", "charge_air_pressure", "barometer"),
    ],
)
def test_what_is_not_understood_has_no_value_and_is_told_what_would_be(text: str, key: str, words: str) -> None:
    value, findings = read_typed(text, POINTS[key], Habits(operating_modes=("standard", "Tier III")))
    assert value is None
    assert len(findings) == 1
    assert findings[0].refused
    assert words in findings[0].sentence


def test_nothing_typed_is_nothing() -> None:
    assert read_typed("  ", EXHAUST) == (None, ())
    assert read_row("  ", CYLINDERS, EXHAUST) == ({}, ())


@pytest.mark.parametrize(
    ("text", "habits", "number"),
    [("12,345", COMMA, 12.345), ("12.345", Habits(), 12.345), ("0,953", Habits(), 0.953), ("0.953", COMMA, 0.953)],
)
def test_three_decimals_are_plain_where_the_habit_or_a_nought_says_so(text: str, habits: Habits, number: float) -> None:
    value, findings = read_typed(text, POINTS["power_factor"], habits)
    assert value is not None
    assert (value.number, findings) == (number, ())


@pytest.mark.parametrize(
    ("text", "habits", "offers"),
    [("12,345", Habits(), ("12.345", "12345")), ("12.345 kW", COMMA, ("12,345 kW", "12345 kW"))],
)
def test_thousands_or_decimals_are_asked_where_both_could_be(
    text: str, habits: Habits, offers: tuple[str, str]
) -> None:
    value, findings = read_typed(text, POINTS["shaft_power"], habits)
    assert value is None
    assert findings[0].key == "thousands_or_decimal"
    assert findings[0].refused
    assert findings[0].offers == offers
    numbers = [read_typed(offer, POINTS["shaft_power"], habits)[0] for offer in offers]
    assert [number and number.number for number in numbers] == [12.345, 12345]


@pytest.mark.parametrize(
    ("text", "key", "number", "asked"),
    [("1,225", "charge_air_pressure", 1.225, 0), ("14,120", "turbocharger_speed", 14120, 1)],
)
def test_the_span_tells_thousands_from_decimals(text: str, key: str, number: float, asked: int) -> None:
    value, findings = read_typed(text, POINTS[key])
    assert value is not None
    assert value.number == number
    assert len(findings) == asked


def test_horsepower_is_asked_once_and_then_known() -> None:
    power = POINTS["shaft_power"]
    value, (asked,) = read_typed("165 hp", power)
    assert value is None
    assert asked.refused
    assert (asked.question, asked.answers) == ("hp", ("metric", "mechanical"))
    # Either offer is understood when it is typed.
    typed = [read_typed(offer, power)[0] for offer in asked.offers]
    assert [round(value.number or 0, 3) for value in typed if value] == [121.357, 123.04]
    for known in (
        read_typed("165 hp", power, Habits(horsepower="mechanical")),
        read_typed("165 hp", power, answers={"hp": "mechanical"}),
    ):
        assert known[0] is not None
        assert known[0].number == pytest.approx(165 * 0.745699872)
        assert known[1] == ()


@pytest.mark.parametrize(
    ("text", "key", "finding", "number"),
    [
        ("760", "barometric_pressure", "looks_like_mmhg", 760),
        ("9600", "lot_lower_calorific_value", "looks_like_kcal", 9600),
        ("40200", "lot_lower_calorific_value", "read_as", 40.2),
        ("0.953", "lot_density_15c", "read_as", 953),
        ("30 API", "lot_density_15c", "read_as", 875.299),
    ],
)
def test_what_looks_like_another_unit_is_asked_and_kept(text: str, key: str, finding: str, number: float) -> None:
    value, findings = read_typed(text, POINTS[key])
    assert [item.key for item in findings] == [finding]
    assert not findings[0].refused
    assert value is not None
    assert value.number == pytest.approx(number, rel=1e-5)


def test_the_unit_of_a_column_is_that_of_every_bare_cell() -> None:
    point = POINTS["air_filter_pressure_drop"]
    value, findings = read_typed("14", point, unit="mmWC")
    assert value is not None
    assert value.number == pytest.approx(14 * 0.0980665)
    assert findings == ()
    typed, _ = read_typed("14 mbar", point, unit="mmWC")
    assert typed is not None
    assert typed.number == 14


def test_a_gauge_point_takes_an_absolute_pressure_with_the_barometer_and_says_so() -> None:
    value, findings = read_typed("2.4 bara", POINTS["charge_air_pressure"], barometer_bar=1.005)
    assert value is not None
    assert value.number == pytest.approx(1.395)
    assert [item.key for item in findings] == ["read_as"]


def test_a_counter_is_typed_in_its_counts() -> None:
    counter = Counter(digits=6, multiplier=10)
    point = POINTS["revolution_counter"]
    value, _ = read_typed("998 742", point, counter=counter)
    assert value is not None
    assert (value.number, value.text, value.digits) == (9987420, "998 742", 6)
    in_units, _ = read_typed("44230 rev", point, counter=counter)
    assert in_units is not None
    assert in_units.number == 44230


# Rows


@pytest.mark.parametrize(
    ("text", "habits", "pieces"),
    [
        ("340 352 348", Habits(), ["340", "352", "348"]),
        ("340, 352, 348", Habits(), ["340", "352", "348"]),
        ("340;352;348", Habits(), ["340", "352", "348"]),
        ("340/352 / 348", Habits(), ["340", "352", "348"]),
        ("340,352,348", Habits(), ["340", "352", "348"]),
        ("340,352,348", COMMA, ["340", "352", "348"]),
        ("2,4 2,5 2,6", COMMA, ["2,4", "2,5", "2,6"]),
        ("2,4, 2,5, 2,6", COMMA, ["2,4", "2,5", "2,6"]),
        ("2,4;2,5;2,6", COMMA, ["2,4", "2,5", "2,6"]),
        ("2.4,2.5,2.6", Habits(), ["2.4", "2.5", "2.6"]),
        ("N/R/352/S/B", Habits(), ["N/R", "352", "S/B"]),
        ("340 - s", Habits(), ["340", "-", "s"]),
        ("340;;348", Habits(), ["340", "", "348"]),
        ("340;352;", Habits(), ["340", "352"]),
    ],
)
def test_a_row_comes_apart(text: str, habits: Habits, pieces: list[str]) -> None:
    assert split_row(text, habits) == pieces


def test_a_station_row_with_a_stopped_set() -> None:
    values, findings = read_row("1200 1265 s 1854", ("G1", "G2", "G3", "G4"), POINTS["generator_power"])
    assert findings == ()
    assert [values[name].number for name in ("G1", "G2", "G4")] == [1200, 1265, 1854]
    assert values["G3"].state is State.STOPPED


def test_marks_units_and_states_in_a_row() -> None:
    values, findings = read_row("644 E 648E - N/R 640 641 F", CYLINDERS, EXHAUST)
    assert findings == ()
    got = [values[name] for name in CYLINDERS]
    assert [value.estimated for value in got] == [True, True, False, False, False, False]
    assert got[0].number == pytest.approx(340)
    assert [value.state for value in got[2:4]] == [State.NOT_FITTED, State.NOT_READ]
    assert got[5].number == pytest.approx((641 - 32) / 1.8)


def test_one_state_is_that_of_the_whole_row() -> None:
    values, findings = read_row("stopped", CYLINDERS, EXHAUST)
    assert findings == ()
    assert {value.state for value in values.values()} == {State.STOPPED}
    assert len(values) == 6


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("340 352 348 350 351", "5 values for 6 places"),
        ("340", "1 values for 6 places"),
        ("1 2 3 4 5 6 7", "7 values for 6 places"),
        ("340;;348;350;351;349", "2 has none"),
        ("340;352;348;350;;", "4 values for 6 places"),
    ],
)
def test_a_row_of_another_length_is_refused_and_says_which(text: str, words: str) -> None:
    values, (finding,) = read_row(text, CYLINDERS, EXHAUST)
    assert values == {}
    assert finding.refused
    assert words in finding.sentence


def test_decimals_typed_against_the_habit_are_offered_as_points() -> None:
    values, (finding,) = read_row("2,4 2,5 2,6", CYLINDERS[:3], POINTS["charge_air_pressure"])
    assert values == {}
    assert finding.offers == ("2.4 2.5 2.6",)
    assert read_row(finding.offers[0], CYLINDERS[:3], POINTS["charge_air_pressure"])[1] == ()


def test_commas_with_two_parts_to_play_are_asked_about() -> None:
    # Six values by the rule, although the blanks say that it may be three.
    values, findings = read_row("2,4 2,5 2,6", CYLINDERS, POINTS["charge_air_pressure"])
    assert [values[name].number for name in CYLINDERS] == [2, 4, 2, 5, 2, 6]
    assert [item.key for item in findings] == ["commas_in_row"]


def test_a_finding_in_a_row_names_its_place_and_concerns_no_other() -> None:
    values, (finding,) = read_row("340 x 348 350 351 349", CYLINDERS, EXHAUST)
    assert sorted(values) == sorted(set(CYLINDERS) - {CYLINDERS[1]})
    assert finding.sentence.startswith("2: ")
    assert finding.concerns(CYLINDERS[1])
    assert not finding.concerns(CYLINDERS[0])


# Anything at all

POINT_KEYS = st.sampled_from(sorted(POINTS))
HABITS = st.builds(
    Habits, st.booleans(), st.sampled_from(["", "metric", "mechanical"]), st.just(("standard", "Tier III"))
)
LOG_LIKE = st.text(st.sampled_from("0123456789.,:;/ -+EsSNRBKFCbarkWmn\u00b0\u00a0'x"), max_size=14)


@given(st.one_of(st.text(max_size=20), LOG_LIKE), POINT_KEYS, HABITS)
@example("9" * 400, "shaft_power", Habits())
@example("\u0663\u0664", "shaft_power", Habits())
@example("\x01", "engine_state", Habits())
def test_any_text_is_a_value_or_is_refused(text: str, key: str, habits: Habits) -> None:
    value, findings = read_typed(text, POINTS[key], habits)
    if text.strip():
        assert (value is None) == any(finding.refused for finding in findings)
    else:
        assert (value, findings) == (None, ())
    if value is not None:
        assert value.text
        # A number is never made from a text that has none.
        assert value.number is None or re.search("[0-9]", text)


@given(st.one_of(st.text(max_size=30), LOG_LIKE), st.integers(1, 8), HABITS)
def test_any_row_has_a_value_for_each_place_or_is_refused(text: str, places: int, habits: Habits) -> None:
    targets = [f"cylinder_exhaust_temperature.{number}" for number in range(1, places + 1)]
    values, findings = read_row(text, targets, EXHAUST, habits)
    assert set(values) <= set(targets)
    if text.strip() and len(values) < places:
        assert any(finding.refused for finding in findings)


DECIMALS = st.decimals(min_value=-99999999, max_value=99999999, places=2, allow_nan=False)


@given(DECIMALS, st.sampled_from([",", "."]), st.booleans(), st.sampled_from(["", " kW", "MW", " PS"]), st.booleans())
def test_the_number_is_the_one_that_was_typed(number, sign, blanks, unit, estimated) -> None:  # type: ignore[no-untyped-def]
    text = f"{number:,.2f}".replace(",", " " if blanks else "").replace(".", sign) + unit + (" E" if estimated else "")
    value, findings = read_typed(text, POINTS["shaft_power"])
    assert findings == ()
    assert value is not None
    factor = {"": 1.0, " kW": 1.0, "MW": 1000.0, " PS": 0.73549875}[unit]
    assert value.number == pytest.approx(float(number) * factor, rel=1e-14)
    assert value.estimated is estimated
    if number and abs(number) >= 1:
        assert value.digits == len(str(abs(int(number)))) + 2


@given(st.lists(st.integers(-50, 900), min_size=1, max_size=9), st.sampled_from([" ", ", ", ";", "/", " / ", ","]))
def test_a_row_of_whole_numbers_comes_back_in_order(numbers: list[int], separator: str) -> None:
    targets = [f"cylinder_exhaust_temperature.{place}" for place in range(len(numbers))]
    values, findings = read_row(separator.join(map(str, numbers)), targets, EXHAUST)
    assert findings == ()
    assert [values[target].number for target in targets] == numbers


def test_a_million_cells_are_a_matter_of_seconds(benchmark) -> None:  # type: ignore[no-untyped-def]
    point = POINTS["cylinder_exhaust_temperature"]
    value, _ = benchmark(read_typed, "340", point, COMMA, source="import")
    assert value.number == 340
