"""Small parts of plant.toml that several tables have."""

from __future__ import annotations

import re
from collections.abc import Mapping
from itertools import pairwise

from logbook.plant.catalogue import ReadingDefinition
from logbook.plant.fields import Table, nearest, shown
from logbook.plant.records import Counter, EfficiencyCurve

_ID = re.compile(r"[A-Za-z0-9][A-Za-z0-9_-]{0,15}")


def short_id(table: Table) -> str:
    """An id that may stand in a key, in a file name and in a column of a screen; empty where it is not good."""
    found = table.text("id", required='a short name, e.g. "ME"')
    if found and not _ID.fullmatch(found):
        table.note("id", "up to 16 letters, digits, _ or -, beginning with a letter or digit")
        return ""
    return found


def reading_keys(table: Table, points: Mapping[str, ReadingDefinition], where: Mapping[str, str]) -> tuple[str, ...]:
    """The points of a log in walk order, as `readings` lists them; empty where it is not there.

    `where` says of every `per` that has no place in this list where such a point is read instead.
    """
    keys = table.texts("readings")
    path = (*table.path, "readings")
    good = []
    for key in keys:
        if key not in points:
            table.faults.note(path, shown(key), "keys of the catalogue or of a [[point]]", nearest(key, points))
        elif key in good:
            table.faults.note(path, f"{shown(key)} a second time", "each point once")
        elif points[key].per in where:
            table.faults.note(path, shown(key), where[points[key].per])
        else:
            good.append(key)
    return tuple(good)


def read_counter(table: Table) -> Counter:
    """Digits, decimals and multiplier of a counter."""
    digits = table.whole("digits", 8, least=1, greatest=12, required=True)
    decimals = table.whole("decimals", 0, least=0, greatest=4)
    if decimals >= digits:
        table.note("decimals", f"fewer decimal places than digits ({digits})")
        decimals = 0
    return Counter(digits, table.number("multiplier", 1.0, least=1e-3, greatest=1e6), decimals)


def rising(table: Table, key: str, values: tuple[float, ...]) -> None:
    """Loads must rise from point to point."""
    if any(later <= earlier for earlier, later in pairwise(values)):
        table.note(key, "loads that rise from point to point")


def read_efficiency(table: Table, key: str, example: str, *, required: bool = False) -> EfficiencyCurve | None:
    """`key = 0.955`, or a table with load_percent and efficiency; None where it is not there or not good."""
    expected = f"an efficiency, e.g. {key} = {example}, or {{ load_percent = [50, 100], efficiency = [...] }}"
    raw = table.raw(key)
    if raw is None:
        if required:
            table.missing(key, expected)
        return None
    if isinstance(raw, int | float):
        constant = table.number(key, least=0.3, greatest=1)
        return None if constant is None else EfficiencyCurve((100.0,), (constant,))
    if not isinstance(raw, Mapping):
        table.note(key, expected)
        return None
    inner = Table(raw, (*table.path, key), table.faults)
    load = inner.numbers("load_percent", least=1, greatest=130, required=True)
    efficiency = inner.numbers("efficiency", least=0.3, greatest=1, required=True)
    rising(inner, "load_percent", load)
    if load and efficiency and len(load) != len(efficiency):
        inner.note("efficiency", f"as many numbers as load_percent has ({len(load)}, not {len(efficiency)})")
        return None
    return EfficiencyCurve(load, efficiency) if load and efficiency else None


def at_full_load(points: EfficiencyCurve) -> float:
    """Efficiency at 100 % load, on the straight line between its neighbours; outside the points, that of the last."""
    pairs = list(zip(points.load_percent, points.efficiency, strict=True))
    for (low, below), (high, above) in pairwise(pairs):
        if low <= 100.0 <= high and low < high:
            return below + (above - below) * (100.0 - low) / (high - low)
    return pairs[-1][1] if pairs[-1][0] <= 100.0 else pairs[0][1]
