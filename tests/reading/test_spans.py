"""Spans between readings: elapsed hours, and the hours the engine turned in them, from the best source there is."""

import itertools
from datetime import UTC, datetime, timedelta

import pytest
from hypothesis import given
from hypothesis import strategies as st

from logbook.reading.spans import Turn, span_between

NOON = datetime(2026, 5, 14, 12, tzinfo=UTC)


def after(hours: float) -> datetime:
    return NOON + timedelta(hours=hours)


def turn(hours: float, starts: bool) -> Turn:
    return Turn(after(hours), starts)


START, STOP = True, False


@pytest.mark.parametrize(
    ("ran", "runs", "turns", "counter", "running", "source"),
    [
        (True, True, [], None, 4.0, "ran through"),
        (True, True, [], 3.9, 4.0, "ran through"),  # the hour counter is only a check then
        (False, False, [], None, 0.0, "stood still"),
        (False, False, [], 0.0, 0.0, "stood still"),
        (False, False, [], 1.5, 1.5, "hour counter"),  # it ran in between, although nobody wrote so
        (False, True, [], 2.5, 2.5, "hour counter"),
        (True, True, [turn(1, STOP), turn(2, START)], 3.1, 3.1, "hour counter"),
        (True, True, [turn(1, STOP), turn(2, START)], None, 3.0, "start and stop entries"),
        (False, True, [turn(1.5, START)], None, 2.5, "start and stop entries"),
        (True, False, [turn(3, STOP)], None, 3.0, "start and stop entries"),
        (True, False, [turn(2, STOP), turn(3, STOP)], None, 2.0, "start and stop entries"),  # trip, then outage
        (True, False, [turn(4, STOP)], None, 4.0, "start and stop entries"),
        (False, True, [turn(0, START)], None, 4.0, "start and stop entries"),
        (False, True, [], None, None, ""),
        (True, False, [], None, None, ""),
        (True, True, [turn(1, STOP)], None, None, ""),  # when it started again nobody wrote
        (True, True, [turn(2, START)], None, None, ""),  # nor here when it stopped
    ],
)
def test_running_hours(
    ran: bool, runs: bool, turns: list[Turn], counter: float | None, running: float | None, source: str
) -> None:
    span = span_between(NOON, after(4), running_at_begin=ran, running_at_end=runs, turns=turns, counter_hours=counter)
    assert span.elapsed_h == 4.0
    assert span.running_h == (None if running is None else pytest.approx(running))
    assert span.source == source


def test_turns_outside_the_span_and_out_of_order_do_not_matter() -> None:
    turns = [turn(2, START), turn(-1, START), turn(1, STOP), turn(9, STOP)]
    assert span_between(NOON, after(4), running_at_begin=True, running_at_end=True, turns=turns).running_h == 3.0


def test_the_first_watch_after_port() -> None:
    # 9800 kW, 76 h since the last reading, running for 4.0 h, 6552 kg: 39 200 kWh and 167.143 g/kWh; by arithmetic.
    span = span_between(NOON, after(76), running_at_begin=False, running_at_end=True, counter_hours=4.0)
    assert span.running_h is not None
    energy = 9800 * span.running_h
    assert energy == 39_200
    assert 6552e3 / energy == pytest.approx(167.143, abs=1e-3)
    assert 6552e3 / (9800 * span.elapsed_h) == pytest.approx(8.797, abs=1e-3)


def test_per_day_is_normalised_with_the_hours_that_passed() -> None:
    # 229.6 MWh in a day of 25 hours: 9184 kW, 220.4 MWh in 24 h; by arithmetic.
    span = span_between(NOON, after(25), running_at_begin=True, running_at_end=True)
    assert span.per_day(229.6) / 24 * 1000 == pytest.approx(9184.0, abs=0.1)


@given(
    st.booleans(),
    st.lists(st.floats(0.01, 23.99), max_size=6, unique=True),
    st.lists(st.floats(0.01, 23.99), min_size=1, max_size=5, unique=True),
)
def test_hours_of_the_parts_of_a_day_add_up(ran: bool, changes: list[float], cuts: list[float]) -> None:
    turns = [turn(at, ran == (number % 2 == 1)) for number, at in enumerate(sorted(changes))]

    def runs(hours: float) -> bool:
        return ran == (sum(at <= hours for at in changes) % 2 == 0)

    def hours(begin: float, end: float) -> float | None:
        return span_between(
            after(begin), after(end), running_at_begin=runs(begin), running_at_end=runs(end), turns=turns
        ).running_h

    ends = [0.0, *sorted(set(cuts) - set(changes)), 24.0]
    parts = [hours(begin, end) for begin, end in itertools.pairwise(ends)]
    whole = hours(0.0, 24.0)
    assert whole is not None
    assert None not in parts
    assert sum(part or 0.0 for part in parts) == pytest.approx(whole, abs=1e-6)
    assert 0.0 <= whole <= 24.0
