"""The book in words: one line an entry, and an entry in full. Panes and commands say the same."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from logbook.book.entry import Entry
from logbook.plant.records import Plant
from logbook.reading.text import printable
from logbook.reading.value import Value

LATE_AFTER_H = 12.0
"""An entry written so much later than it was taken is shown as late."""

# What leads the line of a reading, where it was read.
_LEADING = (
    "engine_state", "engine_speed", "shaft_power", "generator_power", "load_indicator", "engine_fuel_index",
    "charge_air_pressure", "turbine_outlet_temperature", "barometric_pressure", "sea_water_temperature",
    "distance_observed",
)  # fmt: skip


@dataclass(frozen=True, slots=True)
class EntryLine:
    """One entry as a list shows it."""

    number: int
    ship_time: str
    kind: str
    subject: str
    person: str
    content: str
    marks: str
    """`struck out by 12`, `amends 3`, `late`; in words, never by colour alone"""
    struck_out: bool


def ship_time(entry: Entry) -> str:
    """`2026-05-14 0400 +02:00`: by the clock of the ship or station, with its offset."""
    sign, minutes = ("-" if entry.utc_offset_min < 0 else "+"), abs(entry.utc_offset_min)
    return f"{entry.taken_ship_time:%Y-%m-%d %H%M} {sign}{minutes // 60:02d}:{minutes % 60:02d}"


def lines(plant: Plant, entries: Sequence[Entry], replaced: Mapping[int, int]) -> list[EntryLine]:
    """A line for each entry, in the order given."""
    return [_line(plant, entry, replaced) for entry in entries]


def _line(plant: Plant, entry: Entry, replaced: Mapping[int, int]) -> EntryLine:
    marks = []
    if entry.number in replaced:
        marks.append(f"struck out by {replaced[entry.number]}")
    if entry.replaces is not None:
        marks.append(f"amends {entry.replaces}: {printable(entry.reason)}")
    late_h = (entry.entered_utc - entry.taken_utc).total_seconds() / 3600
    if late_h > LATE_AFTER_H and entry.source == "hand":
        marks.append(f"written {late_h:.0f} h later")
    return EntryLine(
        number=entry.number,
        ship_time=ship_time(entry),
        kind=entry.occasion if entry.kind == "reading" and entry.occasion else entry.kind,
        subject=printable(entry.subject),
        person=printable(entry.person),
        content=content(plant, entry),
        marks="; ".join(marks),
        struck_out=entry.number in replaced,
    )


def content(plant: Plant, entry: Entry) -> str:
    """What an entry says, in one line."""
    if entry.kind == "reading":
        return _reading_content(plant, entry)
    if entry.kind == "plant_description":
        return f"plant.toml {str(entry.body.get('digest', ''))[:12]}, {entry.body.get('how', '')}"
    return printable(", ".join(_words(key, value) for key, value in entry.body.items()))


def _words(key: str, value: Any) -> str:
    if isinstance(value, list):
        value = " ".join(map(str, value))
    shown = str(value).replace("_", " ") if key in ("event", "work") else value
    return str(shown) if key in ("event", "work", "text", "lot", "remark") else f"{key.replace('_', ' ')} {shown}"


def _reading_content(plant: Plant, entry: Entry) -> str:
    values = entry.values()
    parts = [f"{shown_with_unit(plant, key, values[key])}" for key in _LEADING if key in values][:4]
    numbers = sum(value.number is not None for value in values.values())
    parts.append(f"{numbers} values" if numbers != 1 else "1 value")
    remark = entry.body.get("remark")
    if remark:
        parts.append(f"'{printable(str(remark))}'")
    return ", ".join(parts)


def label(plant: Plant, key: str, cycle: str = "two-stroke") -> str:
    """`EXH 3` for `cylinder_exhaust_temperature.3`: the trade's abbreviation and the place."""
    name, _, place = key.partition(".")
    try:
        point = plant.point(name)
    except KeyError:
        return printable(key)
    return printable(f"{point.abbreviation_for(cycle)} {place}".rstrip())


def shown_with_unit(plant: Plant, key: str, value: Value) -> str:
    """`9610 kW`: the value as typed; the canonical unit where none was typed."""
    shown = printable(value.shown())
    if (
        value.number is None
        or not shown.rstrip(" E").replace(",", ".").replace(" ", "").lstrip("+-").replace(".", "", 1).isdigit()
    ):
        return shown
    try:
        unit = plant.point(key).unit
    except KeyError:
        return shown
    return shown if unit == "-" else f"{shown} {unit}"


def in_full(plant: Plant, entry: Entry, replaced: Mapping[int, int]) -> list[str]:
    """An entry with every value, as lines of text: key, value, unit, source, findings."""
    line = _line(plant, entry, replaced)
    head = f"Entry {entry.number}  {line.ship_time}  {line.kind} of {line.subject}  by {line.person}"
    written = (
        f"written {entry.entered_utc:%Y-%m-%d %H%M}Z, person known by: {entry.identity_by}, source: {entry.source}"
    )
    found = [head, written]
    if line.marks:
        found.append(line.marks)
    if entry.kind != "reading":
        found.append(line.content)
    for key, value in entry.values().items():
        extra = [shown for shown in (value.source if value.source != "hand" else "", *value.findings) if shown]
        note = f"  ({'; '.join(extra)})" if extra else ""
        found.append(f"  {printable(key):<44} {shown_with_unit(plant, key, value)}{note}")
    if entry.body.get("remark"):
        found.append(f"  remark: {printable(str(entry.body['remark']))}")
    found.append(f"digest {entry.digest}")
    return found
