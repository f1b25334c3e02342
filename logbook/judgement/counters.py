"""Differences of a counter over many spans: ordinary forward steps in one sweep, all else by the one rule.

The rule for a backward step, a step over the ceiling, an exchange or an answered question stands in
`logbook.reading.counters` and is applied there; here only the spans that need no question are taken at once.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from logbook.judgement.events import WRONG, Event
from logbook.judgement.table import Bools, Floats, Integers
from logbook.plant.records import Counter
from logbook.reading.counters import Exchange, difference

CEILING = 1.1
"""A difference may be so many times what the rated rate allows in the elapsed time."""


@dataclass(frozen=True, slots=True)
class Ends:
    """Where spans begin and end; shape (rows,)."""

    begin: Integers
    """row where each begins; -1: it has none"""
    begin_h: Floats
    """[h since 1970]"""
    end_h: Floats
    """[h since 1970]"""


@dataclass(frozen=True, slots=True)
class Differences:
    """What a counter counted in each span, and what is to be said of it."""

    used: Floats
    """[unit of the counter]; NaN: not read at one end, or a question is open"""
    open_question: Bools
    passed_zero: Bools
    exchanged: Bools


def usable(values: Floats, entries: Integers, events: Sequence[Event], instrument: str) -> Floats:
    """The readings of a counter without those that a person has answered to be wrong."""
    wrong = [
        int(event.body.get("entry", 0))
        for event in events
        if event.kind == "counter_answer" and event.instrument == instrument and event.body.get("answer") == WRONG
    ]
    return np.where(np.isin(entries, wrong), np.nan, values) if wrong else values


def differences(
    values: Floats,
    ends: Ends,
    *,
    counter: Counter,
    rate_per_h: float,
    events: Sequence[Event],
    instrument: str,
    entries: Integers,
    factor: float = CEILING,
    allowance: float = 0.0,
) -> Differences:
    """What the counter `instrument` counted in each span.

    `values` [unit of the counter], one a row; `rate_per_h` the rated rate [unit/h] and `factor` times it the ceiling,
    plus a fixed `allowance` [unit] for the last place of the display.
    """
    rows = len(values)
    old = np.where(ends.begin >= 0, values[ends.begin], np.nan) if rows else values
    ceiling = factor * rate_per_h * (ends.end_h - ends.begin_h) + allowance
    forward = values - old
    read = np.isfinite(forward)
    exchanged = np.zeros(rows, bool)
    for event in _exchanges(events, instrument):
        exchanged |= read & (ends.begin_h < event.hours) & (event.hours <= ends.end_h)
    ordinary = read & ~exchanged & (forward >= 0) & (forward <= ceiling)
    used = np.where(ordinary, forward, np.nan)
    open_question, passed_zero = np.zeros(rows, bool), np.zeros(rows, bool)
    for row in np.flatnonzero(read & ~ordinary).tolist():
        used[row], open_question[row], passed_zero[row] = _by_rule(
            float(old[row]), float(values[row]), float(ceiling[row]), counter,
            [e for e in _exchanges(events, instrument) if ends.begin_h[row] < e.hours <= ends.end_h[row]],
            _answer(events, instrument, int(entries[row])),
        )  # fmt: skip
    return Differences(used, open_question, passed_zero, exchanged)


def _exchanges(events: Sequence[Event], instrument: str) -> list[Event]:
    return [event for event in events if event.kind == "instrument_exchanged" and event.instrument == instrument]


def _answer(events: Sequence[Event], instrument: str, entry: int) -> Event | None:
    answers = [
        event
        for event in events
        if event.kind == "counter_answer" and event.instrument == instrument and event.body.get("entry") == entry
    ]
    return answers[-1] if answers else None


def _by_rule(
    old: float, new: float, ceiling: float, counter: Counter, exchanges: list[Event], answer: Event | None
) -> tuple[float, bool, bool]:
    found = difference(
        old,
        new,
        counter,
        ceiling=ceiling,
        exchanges=[Exchange(float(e.body["closing"]), float(e.body["opening"]), _new(counter, e)) for e in exchanges],
        answer=str(answer.body["answer"]) if answer is not None else "",
        times=int(answer.body.get("times", 1)) if answer is not None else 1,
    )
    return (
        np.nan if found.used is None else found.used,
        bool(found.question),
        "passed_zero" in found.marks,
    )


def _new(old: Counter, exchange: Event) -> Counter | None:
    """How the new counter counts, where the exchange says so."""
    body = exchange.body
    if not {"digits", "multiplier", "decimals"} & set(body):
        return None
    return Counter(
        digits=int(body.get("digits", old.digits)),
        multiplier=float(body.get("multiplier", old.multiplier)),
        decimals=int(body.get("decimals", old.decimals)),
    )
