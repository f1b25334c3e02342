"""Small parts of plant.toml that several tables have."""

from __future__ import annotations

import difflib
import re
from collections.abc import Mapping
from itertools import pairwise

from logbook.plant.catalogue import ReadingDefinition
from logbook.plant.fields import Table
from logbook.plant.records import Counter, EfficiencyCurve

_ID = re.compile(r"[A-Za-z0-9][A-Za-z0-9_-]{0,15}")


def short_id(table: Table) -> str:
    """An id that may stand in a key, in a file name and in a column of a screen."""
    found = table.text("id", "", required='a short name, e.g. "ME"')
    if found and not _ID.fullmatch(found):
        table.note("id", "up to 16 letters, digits, _ or -, beginning with a letter or digit")
        return ""
    return found


def reading_keys(table: Table, points: Mapping[str, ReadingDefinition]) -> tuple[str, ...]:
    """The points of a log in walk order, as `readings` lists them; empty where it is not there."""
    keys = table.texts("readings")
    for key in keys:
        if key not in points:
            near = difflib.get_close_matches(key, points, n=1)
            table.faults.note(
                (*table.path, "readings"),
                f"'{key}'",
                "keys of the catalogue or of a [[point]]",
                f"Did you mean '{near[0]}'?" if near else "",
            )
    return keys


def read_counter(table: Table) -> Counter:
    """Digits, decimals and multiplier of a counter."""
    digits = table.whole("digits", 8, least=1, greatest=12, required=True) or 8
    decimals = table.whole("decimals", 0, least=0, greatest=4) or 0
    if decimals >= digits:
        table.note("decimals", f"fewer decimal places than digits ({digits})")
        decimals = 0
    return Counter(digits, table.number("multiplier", 1.0, least=1e-3, greatest=1e6) or 1.0, decimals)


def rising(table: Table, key: str, values: tuple[float, ...]) -> None:
    """Loads must rise from point to point."""
    if any(later <= earlier for earlier, later in pairwise(values)):
        table.note(key, "loads that rise from point to point")


def read_efficiency(table: Table, key: str) -> EfficiencyCurve | None:
    """`key = 0.955`, or a table with load_percent and efficiency."""
    raw = table.raw(key)
    if raw is None:
        return None
    if isinstance(raw, int | float) and not isinstance(raw, bool):
        if not 0.3 <= raw <= 1:
            table.note(key, "an efficiency from 0.3 to 1")
            return None
        return EfficiencyCurve((100.0,), (float(raw),))
    inner = table.table(key) if isinstance(raw, dict) else None
    if inner is None:
        table.note(key, "an efficiency from 0.3 to 1, or { load_percent = [...], efficiency = [...] }")
        return None
    load = inner.numbers("load_percent", least=0, greatest=130, required=True)
    efficiency = inner.numbers("efficiency", least=0.3, greatest=1, required=True)
    rising(inner, "load_percent", load)
    if len(load) != len(efficiency):
        inner.note("efficiency", f"as many numbers as load_percent has ({len(load)})")
    inner.done()
    return EfficiencyCurve(load, efficiency)
