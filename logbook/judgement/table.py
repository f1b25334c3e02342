"""Readings as columns of floats, states kept apart: one table an engine (or the plant), one row an entry."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from typing import Any

import numpy as np
from numpy.typing import NDArray

from logbook.book.entry import Entry
from logbook.judgement.events import hours_of
from logbook.reading.value import State

Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]
Integers = NDArray[np.int64]

_RUNNING_SIGNS = ("engine_speed", "shaft_power", "generator_power", "shaft_torque")
_IDLE = (State.STOPPED, State.STAND_BY)


@dataclass(slots=True)
class Table:
    """The readings of one subject in order of time; column = `key` or `key.PLACE`, NaN where there is no number."""

    subject: str
    entries: Sequence[Entry]
    number: Integers
    """entry numbers"""
    hours: Floats
    """when each was taken [h since 1970]"""
    columns: dict[str, Floats]
    states: dict[str, dict[int, State]]
    """by key and row: why there is no number"""
    words: dict[str, dict[int, str]]
    estimated: dict[str, Bools]
    """by key: where the number carries the mark E; no key where none does"""
    from_instrument: dict[str, Bools]
    digits: dict[str, Integers]
    """significant digits typed, of `shaft_power` and the like; 0 where not known"""
    findings: dict[str, dict[int, tuple[str, ...]]]
    amended: Bools
    """the entry replaces another"""
    rounds: dict[str, int] = field(default_factory=dict)
    """round -> its last row"""

    def __len__(self) -> int:
        return len(self.number)

    def column(self, key: str) -> Floats:
        """The numbers of one point; all NaN where it was never read."""
        found = self.columns.get(key)
        return np.full(len(self), np.nan) if found is None else found

    def places(self, key: str) -> list[str]:
        """The columns of a point: `key` itself and `key.PLACE`, in the order they first came up."""
        return [name for name in self.columns if name == key or name.startswith(f"{key}.")]

    def mean(self, key: str) -> Floats:
        """Mean over the places of a point that were read; NaN where none was."""
        names = self.places(key)
        if len(names) <= 1:
            return self.column(names[0]) if names else self.column(key)
        stack = np.stack([self.columns[name] for name in names])
        read = np.isfinite(stack)
        count = read.sum(axis=0)
        total = np.where(read, stack, 0.0).sum(axis=0)
        mean: Floats = np.divide(total, count, out=np.full(len(self), np.nan), where=count > 0)
        return mean

    def in_state(self, key: str, *states: State) -> Bools:
        """Rows where the point, or one of its places, is in one of these states."""
        found = np.zeros(len(self), bool)
        for name, rows in self.states.items():
            if name == key or name.startswith(f"{key}."):
                found[[row for row, state in rows.items() if state in states]] = True
        return found

    def word(self, key: str) -> NDArray[np.object_]:
        """The words of a point; empty text where there is none."""
        words = np.full(len(self), "", dtype=object)
        for row, word in self.words.get(key, {}).items():
            words[row] = word
        return words

    def marked(self, marks: dict[str, Bools], key: str) -> Bools:
        """Rows where one of the places of a point carries a mark: `table.marked(table.estimated, key)`."""
        found = np.zeros(len(self), bool)
        for name, rows in marks.items():
            if name == key or name.startswith(f"{key}."):
                found |= rows
        return found

    def running(self) -> Bools:
        """Whether the engine ran when it was read.

        The engine's state decides where it was logged; else speed or power above zero, or any number at all
        beside no sign of a stop, means running.
        """
        rows = len(self)
        state = self.word("engine_state")
        idle = self.in_state("engine_state", *_IDLE)
        said_running, said_idle = state == "running", idle | np.isin(state, [str(s) for s in _IDLE])
        signs = [name for sign in _RUNNING_SIGNS for name in self.places(sign)]
        turning = np.zeros(rows, bool)
        zero = np.zeros(rows, bool)
        for name in signs:
            turning |= self.columns[name] > 0
            zero |= self.columns[name] <= 0
        for sign in _RUNNING_SIGNS:
            zero |= self.in_state(sign, *_IDLE)
        any_number = np.zeros(rows, bool)
        for column in self.columns.values():
            any_number |= np.isfinite(column)
        result: Bools = said_running | (~said_idle & (turning | (any_number & ~zero)))
        return result

    def row_of(self, entry: int) -> int:
        """Row of an entry by its number. Raises KeyError if it is not in the table."""
        rows = np.flatnonzero(self.number == entry)
        if not rows.size:
            raise KeyError(entry)
        return int(rows[0])


def build_table(entries: Iterable[Entry], subject: str) -> Table:
    """The table of one engine (or of `plant`) from the entries of the book, in order of time."""
    readings = [entry for entry in entries if entry.kind == "reading" and entry.subject == subject]
    readings.sort(key=lambda entry: (entry.taken_utc, entry.number))
    rows = len(readings)
    places: dict[str, list[int]] = defaultdict(list)
    numbers: dict[str, list[float]] = defaultdict(list)
    digits: dict[str, list[int]] = defaultdict(list)
    states: dict[str, dict[int, State]] = defaultdict(dict)
    words: dict[str, dict[int, str]] = defaultdict(dict)
    estimated: dict[str, list[int]] = defaultdict(list)
    instrument: dict[str, list[int]] = defaultdict(list)
    findings: dict[str, dict[int, tuple[str, ...]]] = defaultdict(dict)
    for row, entry in enumerate(readings):
        # The bodies are read as they are: making a Value of each would take longer than all the arithmetic.
        values: dict[str, dict[str, Any]] = entry.body.get("values", {})
        for key, body in values.items():
            number = body.get("number")
            if number is not None:
                places[key].append(row)
                numbers[key].append(number)
                digits[key].append(body.get("digits", 0))
            elif "state" in body:
                states[key][row] = State(body["state"])
            else:
                words[key][row] = body.get("word", "")
            if "mark" in body:
                estimated[key].append(row)
            if body.get("source") == "instrument":
                instrument[key].append(row)
            if "findings" in body:
                findings[key][row] = tuple(body["findings"])

    def masks(marked: dict[str, list[int]]) -> dict[str, Bools]:
        result = {}
        for key, at in marked.items():
            result[key] = np.zeros(rows, bool)
            result[key][at] = True
        return result

    return Table(
        subject=subject,
        entries=readings,
        number=np.array([entry.number for entry in readings], np.int64),
        hours=np.array([hours_of(entry.taken_utc) for entry in readings], float),
        columns={key: _filled(rows, at, numbers[key], np.nan) for key, at in places.items()},
        states=dict(states),
        words=dict(words),
        estimated=masks(estimated),
        from_instrument=masks(instrument),
        digits={key: _filled(rows, at, digits[key], 0).astype(np.int64) for key, at in places.items()},
        findings=dict(findings),
        amended=np.array([entry.replaces is not None for entry in readings], bool),
        rounds={entry.round: row for row, entry in enumerate(readings) if entry.round},
    )


def _filled(rows: int, at: list[int], values: Sequence[float], rest: float) -> Floats:
    column = np.full(rows, rest, float)
    column[at] = values
    return column


@dataclass(frozen=True, slots=True)
class PlantValue:
    """A value of the whole plant as it belongs to each reading of an engine."""

    values: Floats
    nearby: Bools
    """taken from another round"""
    entry: Integers
    """entry it stands in; 0 where it is missing"""


def plant_value(engine: Table, plant: Table, key: str, within_h: float) -> PlantValue:
    """Own value of the engine's reading; else of the plant's reading in its round; else the nearest within
    `within_h` hours; else missing."""
    own = engine.mean(key)
    entry = np.where(np.isfinite(own), engine.number, 0)
    values = own.copy()
    nearby = np.zeros(len(engine), bool)
    column = plant.mean(key)
    read = np.flatnonzero(np.isfinite(column))
    if not read.size:
        return PlantValue(values, nearby, entry)
    row = same_round(engine, plant)
    in_round = (row >= 0) & np.isfinite(column[row]) & ~np.isfinite(values)
    values[in_round], entry[in_round] = column[row[in_round]], plant.number[row[in_round]]
    missing = np.flatnonzero(~np.isfinite(values))
    nearest = read[_nearest(plant.hours[read], engine.hours[missing])]
    close = np.abs(plant.hours[nearest] - engine.hours[missing]) <= within_h
    missing, nearest = missing[close], nearest[close]
    values[missing], entry[missing] = column[nearest], plant.number[nearest]
    # One round may hold several entries of the plant, each with some of its values.
    nearby[missing] = [
        not engine.entries[row].round or engine.entries[row].round != plant.entries[at].round
        for row, at in zip(missing.tolist(), nearest.tolist(), strict=True)
    ]
    return PlantValue(values, nearby, entry)


@dataclass(frozen=True, slots=True)
class SharedColumn:
    """A point that may stand in the engine's own reading or in another of the same round."""

    values: Floats
    entry: Integers
    """entry each value stands in; 0 where it is missing"""


def shared_column(engine: Table, others: Sequence[Table], key: str) -> SharedColumn:
    """Own value of the engine's reading, else that of another subject in the same round; never of another round."""
    values = engine.column(key).copy()
    entry = np.where(np.isfinite(values), engine.number, 0)
    for other in others:
        if key not in other.columns or not len(other):
            continue
        column, row = other.columns[key], same_round(engine, other)
        found = (row >= 0) & np.isfinite(column[row]) & ~np.isfinite(values)
        values[found], entry[found] = column[row[found]], other.number[row[found]]
    return SharedColumn(values, entry)


def same_round(engine: Table, other: Table) -> Integers:
    """For every row of `engine`, the row of `other` in the same round or at the same instant; -1 for none."""
    row = np.array([other.rounds.get(entry.round, -1) for entry in engine.entries], np.int64)
    if len(other):
        at = np.clip(np.searchsorted(other.hours, engine.hours), 0, len(other) - 1)
        instant = (row < 0) & (other.hours[at] == engine.hours)
        row[instant] = at[instant]
    return row


def _nearest(times: Floats, wanted: Floats) -> Integers:
    right = np.clip(np.searchsorted(times, wanted), 1, max(len(times) - 1, 1))
    if len(times) == 1:
        return np.zeros(len(wanted), np.int64)
    left = right - 1
    result: Integers = np.where(wanted - times[left] <= times[right] - wanted, left, right)
    return result
