"""Counters: passed zero, exchange, ceiling, open questions, pooled spans, slips of the finger; worked by hand."""

from itertools import pairwise

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from logbook.plant.records import Counter, Engine, Meter
from logbook.reading.counters import (
    PASSED_ZERO,
    RESET,
    WRONG,
    Exchange,
    ceiling,
    difference,
    last_place,
    pooled,
    rated_rate,
    rated_rate_of_meter,
    repairs,
)

SIX = Counter(digits=6)
EIGHT = Counter(digits=8)
OPEN = ("counter_open_question",)


def engine(**other: object) -> Engine:
    usual: dict[str, object] = {
        "id": "ME", "name": "Main engine", "cycle": "two-stroke", "fuel": "liquid", "use": "propulsion", "cylinders": 6,
        "bore_mm": 600, "stroke_mm": 2400, "rated_power_kw": 11900, "rated_speed_rpm": 95,
    }  # fmt: skip
    return Engine(**(usual | other))  # type: ignore[arg-type]


# Worked examples, arithmetic


def test_roll_over_of_a_counter_of_tens() -> None:
    # 6 digits, x10, 998 742 -> 003 165 in 8.00 h at some 92 rpm: 4 423 counts (4 422 would forget the nought itself).
    tens = Counter(digits=6, multiplier=10)
    most = ceiling(105 * 60, 8.0, last_place(tens))
    found = difference(9_987_420, 31_650, tens, ceiling=most)
    assert found.used == 44_230
    assert found.marks == ("passed_zero",)
    assert found.used / (8 * 60) == pytest.approx(92.1, abs=0.05)


def test_roll_over_of_a_counter_of_six_digits() -> None:
    assert difference(999_842, 117, SIX, ceiling=400).used == 275


def test_exchange() -> None:
    # Last 4 812 350; the old one closes at 4 815 910; the new one starts at 120; now 6 480: 3 560 + 6 360 L.
    found = difference(4_812_350, 6_480, EIGHT, ceiling=12_000, exchanges=[Exchange(4_815_910, 120)])
    assert (found.used, found.marks, found.question) == (9_920, ("meter_exchanged",), "")


def test_exchange_and_the_new_one_rolls() -> None:
    five = Counter(digits=5)
    found = difference(98_400, 310, five, ceiling=2_000, exchanges=[Exchange(99_870, 99_950)])
    assert (found.used, found.marks) == (1_830, ("meter_exchanged", "passed_zero"))


def test_exchange_to_a_counter_of_other_digits() -> None:
    found = difference(
        99_000, 50, Counter(digits=5), ceiling=3_000, exchanges=[Exchange(99_500, 9_900, Counter(digits=4))]
    )
    assert found.used == 500 + 150


def test_exchange_whose_closing_reading_is_impossible_leaves_the_question_open() -> None:
    found = difference(4_812_350, 6_480, EIGHT, ceiling=12_000, exchanges=[Exchange(4_715_910, 120)])
    assert found.used is None
    assert "closing" in found.question


def test_the_parts_of_an_exchange_together_stay_under_the_ceiling() -> None:
    assert difference(0, 8_000, SIX, ceiling=10_000, exchanges=[Exchange(8_000, 0)]).used is None


@pytest.mark.parametrize(
    ("rate", "hours", "expected"),
    [(95 * 60, 4, 25_080), (95 * 60, 24, 150_480), (1_200, 24, 31_680)],
)
def test_ceilings(rate: float, hours: float, expected: float) -> None:
    assert ceiling(rate, hours) == pytest.approx(expected)


@pytest.mark.parametrize(("counted", "used"), [(26.0, None), (25.0, 25.0), (24.0, 24.0)])
def test_hours_in_a_day_of_twenty_five(counted: float, used: float | None) -> None:
    tenths = Counter(digits=6, decimals=1)
    rate = rated_rate("engine_running_hours", engine())
    assert rate is not None
    found = difference(12_000.0, 12_000.0 + counted, tenths, ceiling=ceiling(rate, 25.0, last_place(tenths)))
    assert found.used == used
    assert (found.question != "") is (used is None)


def test_stuck_meter_estimate() -> None:
    # 24 h; metered 2 410 kg; stuck for 6 h at 620 kW and the set's own 205 g/kWh: the estimate goes with its mark.
    estimate = 6 * 620 * 0.205
    assert estimate == pytest.approx(762.6)
    assert estimate / (2_410 + estimate) == pytest.approx(0.24, abs=0.001)


def test_pooled_over_a_wrong_reading() -> None:
    # 100 000, 104 150, 107 600 (108 500 was meant), 112 600: 3 450 and 5 000 are wrong, 8 450 together is right.
    singles = [
        difference(old, new, SIX, ceiling=4_900).used
        for old, new in ((100_000, 104_150), (104_150, 107_600), (107_600, 112_600))
    ]
    assert singles == [4_150, 3_450, None]
    found = pooled(104_150, 107_600, 112_600, SIX, ceiling_before=4_900, ceiling_after=4_900)
    assert found is not None
    assert (found.used, found.marks) == (8_450, ("pooled_span",))


def test_nothing_is_pooled_where_no_question_is_open_or_the_sum_has_one() -> None:
    assert pooled(100, 200, 300, SIX, ceiling_before=150, ceiling_after=150) is None
    assert pooled(100, 900, 2_000, SIX, ceiling_before=150, ceiling_after=150) is None


# The rule


@pytest.mark.parametrize(
    ("old", "new", "most", "used", "marks"),
    [
        (100, 350, 400, 250, ()),
        (100, 100, 400, 0, ()),
        (100, 501, 400, None, OPEN),  # over the ceiling
        (899_999, 100, 200_000, None, OPEN),  # not in the top tenth
        (900_000, 100, 200_000, 100_100, ("passed_zero",)),  # the first of the top tenth
        (999_000, 100, 1_000, None, OPEN),  # over the ceiling across zero
        (5_000, 4_990, 400, None, OPEN),  # ten back
        (999_900, 50, 1_000_000, None, OPEN),  # so long that it may have passed zero twice
        (100, 350, 1_000_000, None, OPEN),  # and so may a forward step have
        (100, 350, None, 250, ()),  # no rate known
        (999_900, 50, None, None, OPEN),
    ],
)
def test_the_rule(old: float, new: float, most: float | None, used: float | None, marks: tuple[str, ...]) -> None:
    found = difference(old, new, SIX, ceiling=most)
    assert (found.used, found.marks) == (used, marks)
    assert bool(found.question) is (used is None)


@pytest.mark.parametrize(
    ("answer", "times", "used", "marks"),
    [
        (PASSED_ZERO, 1, 1_000_250, ("passed_zero",)),
        (PASSED_ZERO, 2, 2_000_250, ("passed_zero",)),
        (PASSED_ZERO, 0, 250, ()),
        (RESET, 1, None, ()),
        (WRONG, 1, None, ()),
    ],
)
def test_a_person_answers_the_open_question(
    answer: str, times: int, used: float | None, marks: tuple[str, ...]
) -> None:
    found = difference(100, 350, SIX, ceiling=5_000_000, answer=answer, times=times)
    assert (found.used, found.marks, found.question) == (used, marks, "")


def test_ceilings_from_the_rating() -> None:
    main = engine()
    assert rated_rate("revolution_counter", main) == 5_700
    assert rated_rate("shaft_energy", main) == 11_900
    assert rated_rate("start_count", main) is None
    supply = Meter("M1", "fuel_meter_supply", ("ME",), "kg", EIGHT)
    # 0.35 kg/kWh at rated power, and up to eight times that going round.
    assert rated_rate_of_meter(supply, [main]) == pytest.approx(11_900 * 0.35 * 8)
    own = Meter("M1", "fuel_meter_supply", ("ME",), "kg", EIGHT, rated_rate_per_h=6_000)
    assert rated_rate_of_meter(own, [main]) == 6_000
    station = Meter("E1", "exported_energy", ("ME",), "MWh", EIGHT)
    assert rated_rate_of_meter(station, [main]) == pytest.approx(11.9)


@pytest.mark.parametrize(
    ("typed", "last", "counter", "most", "offered"),
    [
        (57_392_366, 57_325_235, EIGHT, 5_000, {"57329366"}),  # 2 and 9 swapped
        (9_366, 57_325_235, EIGHT, 5_000, {"57329366"}),  # the last four digits
        (5_732_936, 57_325_235, EIGHT, 5_000, {"57329365 E"}),  # the last digit left out: nobody knows which
        (412_451, 41_241.2, Counter(digits=6, decimals=1), 4.5, {"41245.1"}),  # the red drum
    ],
)
def test_slips_are_offered(typed: float, last: float, counter: Counter, most: float, offered: set[str]) -> None:
    found = {slip.text for slip in repairs(typed, last, counter, ceiling_=most)}
    assert offered <= found
    # Not a thousand of them.
    assert len(found) <= 4


def test_leading_noughts_count_when_the_last_digits_are_completed() -> None:
    found = repairs(366, 57_328_900, EIGHT, ceiling_=5_000, typed_digits=4)
    assert "57330366" in [slip.text for slip in found]


# Properties

COUNTS = st.integers(0, 999_999)


@given(COUNTS, st.lists(st.integers(0, 2_000), min_size=1, max_size=8), st.integers(2, 5_000))
def test_parts_add_up_to_the_whole_however_a_span_is_split(start: int, steps: list[int], room: int) -> None:
    readings = [start]
    for step in steps:
        readings.append((readings[-1] + step) % 1_000_000)
    most = sum(steps) + room
    parts = [difference(old, new, SIX, ceiling=most) for old, new in pairwise(readings)]
    whole = difference(readings[0], readings[-1], SIX, ceiling=most)
    assert whole.used == sum(steps) or whole.question
    if whole.used is not None and all(part.used is not None for part in parts):
        assert sum(part.used or 0 for part in parts) == whole.used


@given(COUNTS, COUNTS, st.integers(0, 999_999))
def test_no_difference_is_negative_or_over_its_ceiling(old: int, new: int, most: int) -> None:
    found = difference(old, new, SIX, ceiling=most)
    assert (found.used is None) == bool(found.question)
    if found.used is not None:
        assert 0 <= found.used <= most
        assert (old + found.used) % 1_000_000 == new


@given(COUNTS, st.integers(0, 20_000), st.integers(-20_000, 20_000))
def test_a_wrong_reading_spoils_two_spans_and_not_their_sum(start: int, used: int, slip: int) -> None:
    middle, end = start + used // 2 + slip, start + used
    assume(0 <= start and end < 900_000 and 0 <= middle < 900_000)
    found = pooled(start, middle, end, SIX, ceiling_before=used // 2 + 1, ceiling_after=used // 2 + 1)
    assert found is None or found.used == used


@given(COUNTS, COUNTS, st.integers(1, 50_000))
def test_every_offer_would_be_accepted_as_it_is(typed: int, last: int, most: int) -> None:
    for slip in repairs(typed, last, SIX, ceiling_=most):
        number = float(slip.text.removesuffix(" E"))
        assert number != typed
        assert difference(last, number, SIX, ceiling=most).used == number - last
