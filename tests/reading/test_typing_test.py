"""The typing test: possible or not, while running; what a counter can count; a row copied from the last watch."""

import pytest

from logbook.plant.catalogue import catalogue
from logbook.plant.records import Counter, Engine
from logbook.reading.typed import read_typed
from logbook.reading.typing_test import CounterContext, counter_findings, row_findings, span_findings, span_for
from logbook.reading.value import State, Value

POINTS = catalogue()
COUNTER = Counter(digits=8)


def engine(**other: object) -> Engine:
    usual: dict[str, object] = {
        "id": "ME", "name": "Main engine", "cycle": "two-stroke", "fuel": "liquid", "use": "propulsion", "cylinders": 6,
        "bore_mm": 600, "stroke_mm": 2400, "rated_power_kw": 11900, "rated_speed_rpm": 105,
    }  # fmt: skip
    return Engine(**(usual | other))  # type: ignore[arg-type]


FOUR_STROKE = engine(cycle="four-stroke")


def typed(text: str, key: str) -> Value:
    value, findings = read_typed(text, POINTS[key])
    assert value is not None, findings
    return value


@pytest.mark.parametrize(
    ("text", "key", "of", "keys"),
    [
        ("340", "cylinder_exhaust_temperature", engine(), []),
        ("640", "cylinder_exhaust_temperature", engine(), ["looks_like_fahrenheit"]),
        ("640 C", "cylinder_exhaust_temperature", engine(), ["outside_span"]),
        ("60", "cylinder_exhaust_temperature", engine(), ["outside_span"]),
        ("1500", "cylinder_exhaust_temperature", engine(), ["outside_span"]),
        ("600", "cylinder_exhaust_temperature", engine(), ["looks_like_fahrenheit"]),
        ("600", "cylinder_exhaust_temperature", FOUR_STROKE, []),
        ("9610", "shaft_power", engine(), []),
        ("96100", "shaft_power", engine(), ["outside_span"]),
        ("1300", "shaft_torque", engine(), ["outside_span"]),
        ("1080", "shaft_torque", engine(), []),
        ("23", "engine_speed", FOUR_STROKE, ["outside_span"]),
        ("750", "engine_speed", engine(cycle="four-stroke", fuel="gas"), []),
        ("95", "engine_speed", engine(fuel="both"), []),
        ("690", "cylinder_exhaust_temperature", engine(cycle="four-stroke", fuel="both"), []),
        ("1000", "lot_sulphur", None, ["looks_like_ppm"]),
        ("10", "lot_sulphur", None, ["looks_like_ppm"]),
        ("60000", "lot_sulphur", None, ["outside_span"]),
        ("12", "injection_timing_setting", engine(), []),
    ],
)
def test_spans(text: str, key: str, of: Engine | None, keys: list[str]) -> None:
    found = span_findings(typed(text, key), POINTS[key], of, running=True)
    assert [item.key for item in found] == keys
    # Warned once, never refused: a second Enter accepts it.
    assert not any(item.refused for item in found)


def test_a_fahrenheit_looking_number_offers_both_and_remembers_the_answer() -> None:
    (found,) = span_findings(
        typed("640", "cylinder_exhaust_temperature"), POINTS["cylinder_exhaust_temperature"], engine(), running=True
    )
    assert found.offers == ("640 degC", "640 degF")
    assert found.answers == ("degC", "degF")
    assert typed("640 degF", "cylinder_exhaust_temperature").number == pytest.approx(337.78, abs=0.01)


def test_a_stopped_engine_has_no_spans_but_the_plant_has() -> None:
    cold = typed("25", "cylinder_exhaust_temperature")
    assert span_findings(cold, POINTS["cylinder_exhaust_temperature"], engine(), running=False) == ()
    hot = typed("55", "sea_water_temperature")
    assert span_findings(hot, POINTS["sea_water_temperature"], None, running=False)


def test_states_are_not_tested() -> None:
    value = Value(state=State.STOPPED, text="stopped")
    assert span_findings(value, POINTS["shaft_power"], engine(), running=True) == ()
    assert counter_findings(value, CounterContext(COUNTER, 100, 6_300, 4)) == ()


def test_spans_of_the_plant_are_those_of_any_engine() -> None:
    assert span_for(POINTS["barometric_pressure"], None) == (600, 1080)


def test_pmax_below_pcomp_is_no_typing_matter() -> None:
    low = typed("90", "cylinder_maximum_pressure")
    assert span_findings(low, POINTS["cylinder_maximum_pressure"], engine(), running=True) == ()


def context(last: float = 57_325_235, *, running: bool = True, expected: float | None = None) -> CounterContext:
    return CounterContext(COUNTER, last, rate_per_h=105 * 60, elapsed_h=4.0, running=running, expected=expected)


@pytest.mark.parametrize(
    ("text", "key", "offer"),
    [
        ("57349366", None, None),
        ("57325235", "counter_standing", None),
        ("57394366", "counter_over_ceiling", "57349366"),  # two digits swapped
        ("9366", "counter_backward", "57329366"),  # only the last four
        ("5734936", "counter_backward", "57349365 E"),  # the last digit left out
        ("573493660", "counter_digits", None),
        ("57325100", "counter_backward", None),
    ],
)
def test_counters(text: str, key: str | None, offer: str | None) -> None:
    value = typed(text, "revolution_counter")
    found = counter_findings(value, context())
    assert [item.key for item in found] == ([key] if key else [])
    if offer is not None:
        assert offer in found[0].offers
        assert offer in found[0].sentence
    # The reading is kept as it was typed.
    assert value.number == float(text)
    assert not any(item.refused for item in found)


def test_a_counter_that_passed_zero_says_so() -> None:
    (found,) = counter_findings(typed("117", "revolution_counter"), context(99_999_842))
    assert found.key == "counter_passed_zero"
    assert "275" in found.sentence


def test_a_counter_of_an_idle_engine_may_stand() -> None:
    assert counter_findings(typed("57325235", "revolution_counter"), context(running=False)) == ()


def test_a_span_too_long_for_the_counter_has_a_question() -> None:
    far = CounterContext(Counter(digits=5), 100, rate_per_h=6_300, elapsed_h=24.0)
    (found,) = counter_findings(typed("400", "revolution_counter"), far)
    assert found.key == "counter_undetermined"


def test_the_forgotten_factor_ten() -> None:
    # 4 423 in 8 h is 9.2 rpm against a tachometer of 92.
    last = 100_000.0
    told = CounterContext(COUNTER, last, rate_per_h=105 * 60, elapsed_h=8.0, running=True, expected=92 * 60 * 8)
    (found,) = counter_findings(typed("104423", "revolution_counter"), told)
    assert found.key == "counter_tenfold"
    assert counter_findings(typed("144230", "revolution_counter"), told) == ()


def test_a_counter_of_tens_is_judged_in_its_own_counts() -> None:
    tens = Counter(digits=6, multiplier=10)
    value, _ = read_typed("99 7842", POINTS["revolution_counter"], counter=tens)
    assert value is None  # no way to part digits
    swapped, _ = read_typed("989742", POINTS["revolution_counter"], counter=tens)
    assert swapped is not None
    (found,) = counter_findings(swapped, CounterContext(tens, 9_950_000, 6_300, 8.0))
    assert found.key == "counter_backward"
    assert "998742" in found.offers


def row(*texts: str) -> dict[str, Value]:
    return {f"cylinder_exhaust_temperature.{place}": typed(text, "cylinder_exhaust_temperature")
            for place, text in enumerate(texts, 1)}  # fmt: skip


@pytest.mark.parametrize(
    ("now", "before", "asked"),
    [
        (row("340", "352", "348"), row("340", "352", "348"), True),
        (row("340", "352", "348"), row("340", "352", "349"), False),
        (row("340", "352", "348"), row("340", "352", "348.0"), False),
        (row("stopped", "stopped", "stopped"), row("stopped", "stopped", "stopped"), False),
        (row("340", "352"), row("340", "352"), False),
        (row("340", "352", "348"), {}, False),
    ],
)
def test_a_row_equal_to_the_last_in_every_digit_is_asked_once(
    now: dict[str, Value], before: dict[str, Value], asked: bool
) -> None:
    found = row_findings(now, before)
    assert [item.key for item in found] == (["same_as_last"] if asked else [])
