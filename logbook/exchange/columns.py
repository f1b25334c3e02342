"""The column map: a small TOML file that says what the columns of a log mean.

    kind = "readings"                    # readings, events or lots
    engine = "ME"                        # every line is of this engine; or: engine_column = "set"
    occasion = "watch"
    decimal = ","                        # left out: comma and point are both read

    [time]
    date = "Date"                        # or one column with both: moment = "Date and hour"
    clock = "Time"
    date_order = "day first"             # "day first", "month first" or "year first"
    offset = "+02:00"                    # ship time ahead of UTC; or: offset_column = "Clock"

    [columns]
    "RPM" = "engine_speed"
    "FO in" = "fuel_meter_supply.ME_in"
    "Filter mmWC" = { key = "air_filter_pressure_drop.1", unit = "mmWC" }
    "fuel counter" = { G1 = "fuel_meter_supply.FM1", G4 = "gas_meter.FM4" }     # by engine
    "Remarks" = "remark"                 # also: lot, person, occasion
    "Sign." = "ignore"

For events and lots the columns name fields (`event`, `engine`, `lot`, `grade`, `density15_kg_m3` ...); [words] turns
the log's own words for what happened into the program's.
"""

from __future__ import annotations

import difflib
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any

KINDS = ("readings", "events", "lots")
DATE_ORDERS = ("day first", "month first", "year first")
SPECIAL = ("remark", "lot", "person", "occasion", "ignore")
EVENT_FIELDS = ("event", "engine", "remark", "lot", "unit", "instrument", "closing", "opening", "person")
LOT_FIELDS = (
    "lot", "in_use_from", "grade", "density15_kg_m3", "sulphur_percent", "water_percent", "ash_percent",
    "viscosity50_mm2_s", "lower_calorific_value_mj_kg", "remark",
)  # fmt: skip


class MapUnusable(Exception):
    """The column map is wrong: every fault in a sentence of its own, one a line."""


@dataclass(frozen=True, slots=True)
class Target:
    """Where the cells of one column go."""

    key: str = ""
    """`key` or `key.PLACE`, a field of an event or lot, or one of SPECIAL"""
    by_engine: Mapping[str, str] = field(default_factory=dict)
    unit: str = ""
    """unit of the cells where they carry none; empty: the canonical unit of the point"""

    def for_engine(self, engine: str) -> str:
        return self.by_engine.get(engine, "ignore") if self.by_engine else self.key


@dataclass(frozen=True)
class ColumnMap:
    """What the columns of one kind of file mean."""

    kind: str
    columns: Mapping[str, Target]
    engine: str = ""
    engine_column: str = ""
    occasion: str = "watch"
    decimal: str = ""
    date: str = ""
    clock: str = ""
    moment: str = ""
    date_order: str = "year first"
    offset: str = ""
    offset_column: str = ""
    words: Mapping[str, str] = field(default_factory=dict)
    sheet: str = ""
    head_row: int = 1
    delimiter: str = ""
    encoding: str = ""


_TOP = {
    "kind", "engine", "engine_column", "occasion", "decimal", "sheet", "head_row", "delimiter", "encoding", "time",
    "columns", "words",
}  # fmt: skip
_TIME = {"date", "clock", "moment", "date_order", "offset", "offset_column"}


def parse_map(text: str, name: str = "the column map") -> ColumnMap:
    """The map that `text` holds. Raises MapUnusable with every fault at once."""
    try:
        content = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise MapUnusable(f"{name} is not written as TOML: {error}.") from error
    faults: list[str] = []
    time = _table(content, "time", faults)
    columns = _table(content, "columns", faults)
    words = _table(content, "words", faults)
    faults += _unknown(content, _TOP, "") + _unknown(time, _TIME, "time.")
    fields = {
        key: value
        for key, value in [*content.items(), *time.items()]
        if key not in ("time", "columns", "words") and key in _TOP | _TIME
    }
    for key, value in fields.items():
        if not isinstance(value, int if key == "head_row" else str) or isinstance(value, bool):
            faults.append(f"{key} = {value!r}: {'a whole number' if key == 'head_row' else 'a text'} is expected.")
    for key, allowed in (("kind", KINDS), ("date_order", DATE_ORDERS), ("decimal", (",", "."))):
        if key in fields and fields[key] not in allowed:
            faults.append(f"{key} = {fields[key]!r}: expected is one of {', '.join(map(repr, allowed))}.")
    if "kind" not in fields:
        faults.append(f"kind is missing: say what the lines are, one of {', '.join(map(repr, KINDS))}.")
    if not columns:
        faults.append("[columns] is missing or empty: it says what each column is.")
    if not ("moment" in fields or "date" in fields) and fields.get("kind") != "lots":
        faults.append("[time] needs moment, or date and clock: the columns that say when a line was read.")
    if fields.get("kind") == "readings" and not (fields.get("engine") or fields.get("engine_column")):
        faults.append("engine or engine_column is missing: say of which engine the lines are.")
    targets = {head: _target(head, value, faults) for head, value in columns.items()}
    for head, word in words.items():
        if not isinstance(word, str):
            faults.append(f"words.{head} = {word!r}: a word of the program is expected, e.g. 'turbocharger_cleaning'.")
    if faults:
        raise MapUnusable("\n".join(f"{name}: {fault}" for fault in faults))
    return ColumnMap(columns=targets, words=dict(words), **fields)


def _table(content: Mapping[str, Any], key: str, faults: list[str]) -> dict[str, Any]:
    table = content.get(key, {})
    if isinstance(table, dict):
        return table
    faults.append(f"{key} is a table: write [{key}] on a line of its own.")
    return {}


def _unknown(table: Mapping[str, Any], known: set[str], prefix: str) -> list[str]:
    faults = []
    for key in table:
        if key not in known:
            near = difflib.get_close_matches(key, known, n=1)
            faults.append(f"{prefix}{key} is no key here.{f' Did you mean {near[0]}?' if near else ''}")
    return faults


def _target(head: str, value: Any, faults: list[str]) -> Target:
    if isinstance(value, str):
        return Target(key=value)
    if isinstance(value, dict) and value and all(isinstance(inner, str) for inner in value.values()):
        if "key" in value:
            faults += _unknown(value, {"key", "unit"}, f"columns.{head}.")
            return Target(key=value["key"], unit=value.get("unit", ""))
        unit = value.pop("unit", "")
        return Target(by_engine=value, unit=unit)
    faults.append(
        f"columns.{head} = {value!r}: a key is expected, or {{ key = ..., unit = ... }}, or one key an engine."
    )
    return Target(key="ignore")
