"""Ship time: offsets, dates, clock faces; days of 23, 24 and 25 hours, the date line, repeated and shared hours."""

import itertools
from collections.abc import Callable
from datetime import UTC, date, datetime, timedelta, timezone

import pytest
from hypothesis import given
from hypothesis import strategies as st

from logbook.reading.ship_time import (
    DATE_ORDERS,
    TimeRefused,
    elapsed_h,
    end_of_hour,
    instant,
    offset_of_zone_description,
    parse_clock,
    parse_date,
    parse_moment,
    parse_offset,
    shown_offset,
)


def at(text: str, offset: str) -> datetime:
    return parse_moment(text, parse_offset(offset))[0]


def utc(text: str) -> datetime:
    return datetime.fromisoformat(text).replace(tzinfo=UTC)


@pytest.mark.parametrize(
    ("text", "minutes"),
    [
        ("+2", 120), ("2", 120), ("+02", 120), ("+02:00", 120), ("+0200", 120), ("-3", -180), ("\u22123", -180),
        ("-3:30", -210), ("+5:30", 330), ("+05:45", 345), ("+0545", 345), ("UTC+3", 180), ("GMT -5", -300),
        ("Z", 0), ("UTC", 0), ("0", 0), ("-0", 0), ("+14", 840), ("-12", -720),
    ],
)  # fmt: skip
def test_offsets(text: str, minutes: int) -> None:
    assert parse_offset(text) == minutes


@pytest.mark.parametrize("text", ["", "+", "+15", "-13", "+2:60", "120", "+2.5", "two", "+2 h east", "\u0662"])
def test_no_offsets(text: str) -> None:
    with pytest.raises(TimeRefused, match=r"\+05:30"):
        parse_offset(text)


@pytest.mark.parametrize(
    ("text", "minutes"), [("+5", -300), ("5", -300), ("-9", 540), ("ZD +5", -300), ("ZD -5:30", 330), ("0", 0)]
)
def test_a_zone_description_has_the_opposite_sign(text: str, minutes: int) -> None:
    # What is added to ship time to get UTC; ISO 8601 has it the other way round.
    assert offset_of_zone_description(text) == minutes


@pytest.mark.parametrize(
    ("text", "order", "day"),
    [
        ("01.02.2025", "year first", date(2025, 2, 1)),
        ("1.2.25", "day first", date(2025, 2, 1)),
        ("2025-02-01", "year first", date(2025, 2, 1)),
        ("2025-02-01", "day first", date(2025, 2, 1)),
        ("2025/2/1", "month first", date(2025, 2, 1)),
        ("01/02/2025", "day first", date(2025, 2, 1)),
        ("01/02/2025", "month first", date(2025, 1, 2)),
        ("29.02.2028", "day first", date(2028, 2, 29)),
    ],
)
def test_dates(text: str, order: str, day: date) -> None:
    assert parse_date(text, order) == day


@pytest.mark.parametrize(
    ("text", "order"),
    [
        ("01/02/2025", "year first"),  # the first of February here, the second of January there
        ("01-02-2025", "year first"),
        ("30.02.2025", "day first"),
        ("13/13/2025", "month first"),
        ("1.2/2025", "day first"),
        ("14.05.999", "day first"),
        ("0001-01-01", "year first"),
        ("9999-12-31", "year first"),
        ("yesterday", "day first"),
        ("", "day first"),
    ],
)
def test_no_dates(text: str, order: str) -> None:
    with pytest.raises(TimeRefused, match="2026-05-14"):
        parse_date(text, order)


@pytest.mark.parametrize(
    ("text", "hours"),
    [
        ("0400", 4), ("400", 4), ("04:00", 4), ("4:00", 4), ("4", 4), ("04:30", 4.5), ("0000", 0), ("24:00", 24),
        ("2400", 24), ("0", 0), ("23:59:30", 23.991666666666667), ("0400 hrs", 4), ("12h", 12),
    ],
)  # fmt: skip
def test_clock_faces(text: str, hours: float) -> None:
    assert parse_clock(text).total_seconds() / 3600 == pytest.approx(hours)


@pytest.mark.parametrize("text", ["", "25", "24:01", "2401", "0460", "4:5", "four", "40000", "-4"])
def test_no_clock_faces(text: str) -> None:
    with pytest.raises(TimeRefused, match="0400"):
        parse_clock(text)


@pytest.mark.parametrize(
    ("text", "offset", "moment", "own_offset"),
    [
        ("2025-03-01 04:00", 180, "2025-03-01T01:00", 180),
        ("2025-08-09T19:12+00:00", 120, "2025-08-09T19:12", 0),
        ("2025-08-09T19:12-03:30", 0, "2025-08-09T22:42", -210),
        ("14.05.2026 0400", 120, "2026-05-14T02:00", 120),
        ("2026-05-14T04:00Z", 120, "2026-05-14T04:00", 0),
        ("2026-05-14 24:00", 0, "2026-05-15T00:00", 0),
    ],
)
def test_moments(text: str, offset: int, moment: str, own_offset: int) -> None:
    assert parse_moment(text, offset) == (utc(moment), own_offset)


@pytest.mark.parametrize("text", ["2026-05-14", "", "0001-01-01T00:00+14:00", "9999-12-31T23:00-12:00", "14.05.2026 "])
def test_no_moments(text: str) -> None:
    with pytest.raises(TimeRefused):
        parse_moment(text, 0)


# Worked examples


def test_a_day_of_twenty_three_hours() -> None:
    hours = elapsed_h(at("2031-03-15 12:00", "+1"), at("2031-03-16 12:00", "+2"))
    assert hours == 23
    assert 121_440 / (hours * 60) == pytest.approx(88.0)


def test_a_day_of_twenty_five_hours() -> None:
    hours = elapsed_h(at("2031-03-15 12:00", "+2"), at("2031-03-16 12:00", "+1"))
    assert hours == 25
    assert 132_000 / (hours * 60) == pytest.approx(88.0)
    assert 41.5 * 24 / hours == pytest.approx(39.84)


def test_noon_at_zone_description_plus_five() -> None:
    offset = offset_of_zone_description("+5")
    assert instant(date(2031, 3, 15), parse_clock("1200"), offset) == utc("2031-03-15T17:00")


@pytest.mark.parametrize(("offset", "clock"), [("+05:30", "06:30"), ("+05:45", "06:15")])
def test_noon_in_half_hour_zones(offset: str, clock: str) -> None:
    assert at("2031-03-15 12:00", offset) == utc(f"2031-03-15T{clock}")


def test_the_repeated_hour() -> None:
    first, second = at("2031-10-05 01:30", "+3"), at("2031-10-05 01:30", "+2")
    assert (first, second) == (utc("2031-10-04T22:30"), utc("2031-10-04T23:30"))
    assert elapsed_h(first, second) == 1


@pytest.mark.parametrize(
    ("earlier", "later", "hours"),
    [
        (("2031-03-15 12:00", "+12"), ("2031-03-15 12:00", "-11"), 23),  # going east: the date is repeated
        (("2031-03-14 12:00", "-11"), ("2031-03-16 12:00", "+12"), 25),  # going west: the 15th is skipped
        (("2031-03-15 12:00", "+12"), ("2031-03-15 12:00", "-12"), 24),  # the clock stays as it is
    ],
)
def test_the_date_line(earlier: tuple[str, str], later: tuple[str, str], hours: float) -> None:
    assert elapsed_h(at(*earlier), at(*later)) == hours


def test_the_hour_shared_by_three_watches() -> None:
    ends = [("2031-03-15 20:00", 60), ("2031-03-15 24:00", 80), ("2031-03-16 04:00", 100), ("2031-03-16 08:00", 120)]
    moments = [parse_moment(text, offset)[0] for text, offset in ends]
    watches = [elapsed_h(begin, end) for begin, end in itertools.pairwise(moments)]
    assert watches == pytest.approx([3 + 40 / 60] * 3)


def test_hour_ending_and_hour_beginning() -> None:
    labelled = at("2025-03-01 04:00", "+3")
    assert end_of_hour(labelled, "ending") == utc("2025-03-01T01:00")
    assert end_of_hour(labelled, "beginning") == utc("2025-03-01T02:00")


# Properties

OFFSETS = st.integers(-12 * 60, 14 * 60)
FACES = st.tuples(st.dates(date(1950, 1, 1), date(2150, 1, 1)), st.integers(0, 24 * 60))


@given(FACES, OFFSETS, FACES, OFFSETS)
def test_elapsed_hours_are_always_the_utc_difference(
    first: tuple[date, int], offset_1: int, second: tuple[date, int], offset_2: int
) -> None:
    moments = [
        instant(day, timedelta(minutes=minutes), offset)
        for (day, minutes), offset in ((first, offset_1), (second, offset_2))
    ]
    faces = [datetime(day.year, day.month, day.day) + timedelta(minutes=minutes) for day, minutes in (first, second)]
    by_faces = (faces[1] - faces[0]).total_seconds() / 3600
    expected = by_faces - (offset_2 - offset_1) / 60
    assert elapsed_h(*moments) == pytest.approx(expected, abs=1e-9)
    # The same instants told in any other zone are as far apart.
    moved = [moment.astimezone(timezone(timedelta(minutes=offset_1))) for moment in moments]
    assert elapsed_h(*moved) == elapsed_h(*moments)


@given(OFFSETS)
def test_an_offset_that_is_shown_is_read_back(minutes: int) -> None:
    assert parse_offset(shown_offset(minutes)) == minutes


@given(st.text(max_size=24), OFFSETS, st.sampled_from(DATE_ORDERS))
def test_any_text_is_a_moment_or_is_refused_with_a_sentence(text: str, offset: int, order: str) -> None:
    for read in (
        lambda: parse_moment(text, offset, order),
        lambda: parse_date(text, order),
        lambda: parse_clock(text),
        lambda: parse_offset(text),
        lambda: offset_of_zone_description(text),
    ):
        assert _refusal_of(read) is None or "write" in str(_refusal_of(read))


def _refusal_of(read: Callable[[], object]) -> TimeRefused | None:
    try:
        read()
    except TimeRefused as refusal:
        return refusal
    return None
