"""Drafts a column map from the heads of a log, by the trade's abbreviations. A person reads it before it is used."""

from __future__ import annotations

import csv
import re
from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache
from importlib.resources import files

from logbook.exchange.columns import SPECIAL
from logbook.exchange.sheet import Sheet
from logbook.plant.records import Engine, Plant

# Unit as it stands in heads -> (spelling to write into the map, families it may belong to)
_UNITS: dict[str, tuple[str, tuple[str, ...]]] = {
    "c": ("C", ("temperature",)),
    "degc": ("C", ("temperature",)),
    "°c": ("C", ("temperature",)),
    "f": ("F", ("temperature",)),
    "degf": ("F", ("temperature",)),
    "bar": ("bar", ("pressure",)),
    "mpa": ("MPa", ("pressure",)),
    "kg/cm2": ("kg/cm2", ("pressure",)),
    "psi": ("psi", ("pressure",)),
    "mbar": ("mbar", ("small pressure", "barometer")),
    "hpa": ("hPa", ("small pressure", "barometer")),
    "mmhg": ("mmHg", ("barometer",)),
    "mmwc": ("mmWC", ("small pressure",)),
    "mmwg": ("mmWC", ("small pressure",)),
    "kw": ("kW", ("power",)),
    "mw": ("MW", ("power",)),
    "kwh": ("kWh", ("energy",)),
    "mwh": ("MWh", ("energy",)),
    "rpm": ("rpm", ("rotation",)),
    "%": ("%", ("share", "index")),
    "l": ("L", ("volume",)),
    "m3": ("m3", ("volume", "gas volume")),
    "nm3": ("Nm3", ("gas volume",)),
    "nm": ("nm", ("distance",)),
    "kn": ("kn", ("ship speed",)),
    "h": ("h", ("hours",)),
    "m": ("m", ("length",)),
    "hz": ("Hz", ("frequency",)),
}
_METERS = ("fuel_meter_supply", "fuel_meter_return", "gas_meter")
_OFFSET = re.compile(r"utc\s*([+-]\s*\d{1,2}(?::?\d{2})?)", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class _Head:
    """A head taken apart: words without unit and number, the unit, the number of a place."""

    words: str
    whole: str
    unit: str
    place: str


@cache
def _phrases() -> tuple[tuple[str, str, str], ...]:
    lines = files("logbook.exchange").joinpath("heads.csv").read_text(encoding="utf-8").splitlines()
    return tuple((row["phrase"], row["key"], row["where"]) for row in csv.DictReader(lines))


def _apart(head: str) -> _Head:
    bare = re.sub(r"\(.*?\)", " ", head.lower())
    tokens = re.findall(r"kg/cm2|°c|%|[a-z0-9]+", bare)
    whole = " ".join(tokens)
    unit = next((token for token in reversed(tokens) if token in _UNITS), "")
    # One letter is a unit only at the end: the F of `DFT F` is the fore end, the C of `T/C rpm` a charger.
    if len(unit) == 1 and tokens[-1] != unit:
        unit = ""
    place = next((token for token in tokens if token.isdigit()), "")
    words = [*tokens]
    for part in (unit, place):
        if part:
            # The last one of that look: in `T/C in C` the first c is a charger's.
            del words[len(words) - 1 - words[::-1].index(part)]
    return _Head(" ".join(words), whole, unit, place)


def _key_for(head: _Head, plant: Plant, engine: Engine) -> str:
    """The key of a head without its place; empty when nothing fits."""
    use = "generating" if engine.is_set else "propulsion"
    families = _UNITS[head.unit][1] if head.unit else ()
    conditions = {"", use, "supply", "return"} | (set() if head.place else {"single"})
    fitting: list[tuple[int, str, str]] = []
    for phrase, key, where in _phrases():
        if where not in conditions:
            continue
        # A phrase met whole (`kWh counter`) needs no unit to agree; what was taken apart does.
        if phrase == head.whole and key in SPECIAL:
            return key
        if phrase not in (head.whole, head.words):
            continue
        family = "" if key in SPECIAL else plant.points[key].family
        if head.unit and phrase != head.whole and family not in families:
            continue
        if not head.unit and family == "temperature":
            continue
        if key in _METERS and not _meters(plant, engine, key):
            continue
        fitting.append((2 * bool(where) + (phrase == head.whole), key, where))
    if not fitting:
        return ""
    _, key, where = max(fitting, key=lambda found: found[0])
    return f"{key}@{where}" if key == "fuel_meter_temperature" else key


def _meters(plant: Plant, engine: Engine, key: str) -> list[str]:
    return [meter.id for meter in plant.meters_of(engine.id) if meter.key == key]


def _with_place(key: str, head: _Head, plant: Plant, engine: Engine) -> str:
    """`key.PLACE` for this engine; empty when the engine has no such place."""
    key, _, where = key.partition("@")
    if key in SPECIAL:
        return key
    if key in _METERS:
        meters = _meters(plant, engine, key)
        return f"{key}.{meters[0]}" if meters else ""
    if key == "fuel_meter_temperature":
        meters = _meters(plant, engine, "fuel_meter_return" if where == "return" else "fuel_meter_supply")
        return f"{key}.{meters[0]}" if meters else ""
    per = plant.points[key].per
    if per in ("cylinder", "turbocharger", "cooler", "bearing"):
        place = head.place or "1"
        return f"{key}.{place}" if int(place) <= engine.count_of(per) else ""
    return key


def _target_text(head: _Head, plant: Plant, engines: Iterable[Engine]) -> str:
    """The right side of a line of [columns]; empty when nothing fits."""
    found: dict[str, str] = {}
    for engine in engines:
        key = _key_for(head, plant, engine)
        placed = _with_place(key, head, plant, engine) if key else ""
        if placed:
            found[engine.id] = placed
    if not found:
        return ""
    keys = set(found.values())
    if len(keys) > 1:
        return "{ " + ", ".join(f'{engine} = "{key}"' for engine, key in found.items()) + " }"
    key = keys.pop()
    name = key.partition(".")[0]
    if head.unit and name not in SPECIAL and name not in _METERS:
        spelling = _UNITS[head.unit][0]
        if spelling.lower() not in (
            plant.points[name].unit.lower(),
            plant.points[name].unit.lower().removeprefix("deg"),
        ):
            return f'{{ key = "{key}", unit = "{spelling}" }}'
    return f'"{key}"'


def _quoted(text: str) -> str:
    return '"' + text.replace("\\", "\\\\").replace('"', '\\"') + '"'


def suggest(plant: Plant, sheet: Sheet, engine_id: str = "") -> str:
    """A column map for this log as TOML text; what was not recognised stands in it as a remark to be filled in."""
    time: list[str] = []
    columns: list[str] = []
    engine_column = ""
    for index, head in enumerate(sheet.heads):
        if not head:
            continue
        words = _apart(head).words
        cells = [row.cells[index] for row in sheet.rows[:200] if index < len(row.cells) and row.cells[index]]
        if words.startswith(("hour", "moment", "date and", "utc")) and cells and len(cells[0]) > 10:
            time.append(f"moment = {_quoted(head)}")
            offset = _OFFSET.search(head)
            if offset:
                time.append(f'offset = "{offset[1].replace(" ", "")}"')
        elif words in ("date", "day"):
            time.append(f"date = {_quoted(head)}")
            time.append(f'date_order = "{_date_order(cells)}"')
        elif words in ("time", "watch time", "hour") and cells and cells[0][:1].isdigit():
            time.append(f"clock = {_quoted(head)}")
        elif words in ("clock", "zone", "utc offset", "ship time"):
            time.append(f"offset_column = {_quoted(head)}")
        elif words in ("set", "engine", "machine", "unit") and cells:
            engine_column = head
        else:
            columns.append(head)
    engines = plant.engines if engine_column else (plant.engine(engine_id) if engine_id else plant.engines[0],)
    lines = [
        f"# Column map for {sheet.file_name}, drafted from its heads. Read every line before you use it.",
        'kind = "readings"',
        f"engine_column = {_quoted(engine_column)}" if engine_column else f'engine = "{engines[0].id}"',
        f'occasion = "{"round" if plant.kind == "station" else "watch"}"',
        "",
        "[time]",
        *time,
    ]
    if not any(line.startswith("offset") for line in time):
        minutes = abs(plant.utc_offset_min)
        sign = "-" if plant.utc_offset_min < 0 else "+"
        lines.append(f'offset = "{sign}{minutes // 60:02d}:{minutes % 60:02d}"   # taken from plant.toml')
    if plant.kind == "station":
        lines.append("# A line stands for the hour that ends at its time." if plant.hour == "ending" else "")
    lines += ["", "[columns]"]
    for head in columns:
        target = _target_text(_apart(head), plant, engines)
        lines.append(
            f"{_quoted(head)} = {target}"
            if target
            else f'# {_quoted(head)} = ""    # not recognised: a key, or "ignore"'
        )
    return "\n".join(lines) + "\n"


def _date_order(cells: list[str]) -> str:
    """From the dates themselves: a first number above 12 is a day or a year."""
    for cell in cells:
        parts = re.findall(r"\d+", cell)
        if len(parts) >= 3:
            if len(parts[0]) == 4:
                return "year first"
            if int(parts[0]) > 12:
                return "day first"
            if int(parts[1]) > 12:
                return "month first"
    return "day first"
