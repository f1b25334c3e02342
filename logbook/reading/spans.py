"""The span between two readings: how long it was, and how many hours of it the engine turned.

Rates use elapsed hours from UTC instants, never 24 and never the clock face; energy from a power uses the hours run.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import datetime, timedelta

from logbook.reading.ship_time import elapsed_h


@dataclass(frozen=True, slots=True)
class Turn:
    """The engine was started or stopped (a trip or an outage is a stop)."""

    at: datetime
    starts: bool


@dataclass(frozen=True, slots=True)
class ReadingSpan:
    """From one reading of an engine to the next."""

    begin: datetime
    end: datetime
    elapsed_h: float
    running_h: float | None
    """None: it cannot be had from what was entered"""
    source: str
    """of the running hours: `ran through`, `stood still`, `hour counter`, `start and stop entries`, or empty"""

    def per_day(self, quantity: float) -> float:
        """A quantity of this span normalised to 24 h; show the elapsed hours beside it.

        Raises ZeroDivisionError for a span without time.
        """
        return 24.0 * quantity / self.elapsed_h


def span_between(
    begin: datetime,
    end: datetime,
    *,
    running_at_begin: bool,
    running_at_end: bool,
    turns: Iterable[Turn] = (),
    counter_hours: float | None = None,
) -> ReadingSpan:
    """The span of two readings. `counter_hours`: what the hour counter counted, None where that is open or not read.

    The first that can be had: the elapsed hours where the engine ran at both ends with no start or stop between (then
    the hour counter is only a check), none where it stood at both; the hour counter; the start and stop entries.
    """
    elapsed = elapsed_h(begin, end)
    within = sorted((turn for turn in turns if begin <= turn.at <= end), key=lambda turn: turn.at)
    # A reading taken at the very start or stop has it at its edge, not between.
    inside = [turn for turn in within if begin < turn.at < end]
    if not inside and running_at_begin == running_at_end and (running_at_begin or not counter_hours):
        source = "ran through" if running_at_begin else "stood still"
        return ReadingSpan(begin, end, elapsed, elapsed if running_at_begin else 0.0, source)
    if counter_hours is not None:
        return ReadingSpan(begin, end, elapsed, counter_hours, "hour counter")
    hours = _hours_of_turns(begin, end, running_at_begin, running_at_end, within)
    return ReadingSpan(begin, end, elapsed, hours, "" if hours is None else "start and stop entries")


def _hours_of_turns(begin: datetime, end: datetime, ran: bool, runs: bool, turns: Iterable[Turn]) -> float | None:
    """Hours between starts and stops; None where they do not lead from the state at one end to that at the other."""
    turned, since, running = timedelta(), begin, ran
    for turn in turns:
        if turn.starts == running:
            if running and turn.at > begin:
                # A start of a running engine: the stop before it is missing.
                return None
            continue
        if running:
            turned += turn.at - since
        running, since = turn.starts, turn.at
    if running != runs:
        return None
    if running:
        turned += end - since
    return turned.total_seconds() / 3600
