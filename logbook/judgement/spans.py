"""Spans between readings: where each begins, how long it was, how long the engine turned in it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from logbook.judgement.counters import Ends, differences, usable
from logbook.judgement.events import START_STOP, Event, count_within
from logbook.judgement.table import Bools, Floats, Integers, Table
from logbook.plant.records import Counter

HOUR_COUNTER = "engine_running_hours"
TENTHS = Counter(digits=6, decimals=1)
"""An hour counter that plant.toml does not describe."""


@dataclass(frozen=True, slots=True)
class Spans:
    """The span that ends with each reading; shape (rows,)."""

    ends: Ends
    elapsed_h: Floats
    """from UTC instants; NaN for the first reading"""
    running_h: Floats
    """hours the engine turned; NaN where they cannot be had"""
    continuous: Bools
    """ran at both ends with no start or stop between"""
    idle: Bools
    """did not run at any time"""
    start_or_stop: Bools
    pooled: Bools
    """a running reading between the ends was passed over"""
    hours_open: Bools
    """the hour counter was needed and its question is open"""

    @property
    def begin(self) -> Integers:
        """Row where each span begins; -1: the first reading has none."""
        return self.ends.begin

    @property
    def begin_h(self) -> Floats:
        return self.ends.begin_h

    @property
    def end_h(self) -> Floats:
        return self.ends.end_h


def begin_of(counted: Bools) -> Integers:
    """Where each span begins: at the last reading that counted the fuel, else at the reading before.

    `counted`: rows where every fuel counter of the engine was read. A row that was not counted has no fuel; its
    time still runs from the row before.
    """
    rows = np.arange(len(counted))
    last = np.maximum.accumulate(np.where(counted, rows, -1)) if len(rows) else rows
    before = np.concatenate([[-1], last[:-1]])[: len(rows)]
    begin: Integers = np.where(counted & (before >= 0), before, rows - 1)
    return begin


def spans_of(
    table: Table, begin: Integers, running: Bools, events: Sequence[Event], hour_counter: Counter | None
) -> Spans:
    """The spans that begin at the rows `begin`, with elapsed and running hours."""
    rows = np.arange(len(table))
    real = begin >= 0
    start = np.where(real, begin, rows)
    begin_h, end_h = table.hours[start], table.hours
    ends = Ends(begin, begin_h, end_h)
    elapsed = np.where(real, end_h - begin_h, np.nan)
    inside = count_within(events, START_STOP, begin_h, end_h)
    ran = np.concatenate([[0], np.cumsum(running)])
    between = ran[rows] - ran[np.minimum(start + 1, rows)]
    all_between = rows - np.minimum(start + 1, rows)
    through = real & running[start] & running & (between == all_between) & (inside == 0)
    idle = real & ~running[start] & ~running & (between == 0) & (inside == 0)

    counter = hour_counter or TENTHS
    resolution = counter.multiplier * 10.0**-counter.decimals
    hours = differences(
        usable(table.column(HOUR_COUNTER), table.number, events, HOUR_COUNTER),
        ends,
        counter=counter, rate_per_h=1.0, factor=1.0, allowance=resolution,
        events=events, instrument=HOUR_COUNTER, entries=table.number,
    )  # fmt: skip
    # The counter is only a check while the engine ran through, but hours that are missing from it are a stop.
    short = through & (elapsed - hours.used > 1.5 * resolution)
    continuous = through & ~short
    start_or_stop = real & ~continuous & ~idle
    running_h = np.where(continuous, elapsed, np.where(idle, 0.0, hours.used))
    for row in np.flatnonzero(start_or_stop & ~np.isfinite(running_h) & ~hours.open_question):
        running_h[row] = _hours_from_events(
            bool(running[start[row]]), bool(running[row]), begin_h[row], end_h[row], events
        )
    return Spans(
        ends=ends,
        elapsed_h=elapsed,
        running_h=np.minimum(running_h, elapsed),
        continuous=continuous,
        idle=idle,
        start_or_stop=start_or_stop,
        pooled=real & (between > 0),
        hours_open=start_or_stop & hours.open_question,
    )


def _hours_from_events(ran: bool, runs: bool, begin_h: float, end_h: float, events: Sequence[Event]) -> float:
    """Hours between the starts and stops that were entered; NaN where they do not explain both ends."""
    hours, since = 0.0, begin_h
    for event in events:
        if event.kind not in START_STOP or not begin_h <= event.hours <= end_h:
            continue
        starts = event.kind == "start"
        if starts == ran:
            continue
        if ran:
            hours += event.hours - since
        ran, since = starts, event.hours
    if ran != runs:
        return float("nan")
    return hours + (end_h - since if ran else 0.0)
