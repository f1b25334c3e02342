"""plant.toml -> a `Plant`, or every fault in it at once, each with its line."""

from __future__ import annotations

import hashlib
import re
import stat
import tomllib
from collections.abc import Iterable, Mapping
from pathlib import Path

from logbook.plant.catalogue import ReadingDefinition, catalogue
from logbook.plant.engines import read_engine
from logbook.plant.equipment import read_fuel, read_marks, read_meter, read_person, read_point, read_tank
from logbook.plant.fields import FILE_NAME, Fault, Faults, Table, shown
from logbook.plant.parts import reading_keys
from logbook.plant.records import Plant
from logbook.plant.syntax import syntax_fault
from logbook.plant.usual import plant_readings

LARGEST_BYTES = 500_000
SHIP_TYPES = (
    "bulk carrier", "gas carrier", "tanker", "container ship", "general cargo", "refrigerated cargo",
    "combination carrier", "LNG carrier", "ro-ro vehicle", "ro-ro cargo", "ro-ro passenger",
    "cruise passenger",
)  # fmt: skip
"""The words of the reference lines of carbon intensity; physics has their numbers."""
BAROMETER_AT = ("engine", "bridge, reduced to sea level")
SUCTION_AIR_AT = ("turbocharger suction", "engine room")
_OFFSET = re.compile(r"([+-])(\d{1,2}):?([0-5]\d)|([+-])(\d{1,2})")
# Points of this `per` are not read once a round for the whole plant.
_READ_ELSEWHERE: Mapping[str, str] = {
    "meter": "no meter here: each [[meter]] is read with the engines that it serves",
    "tank": "points read once for the whole plant; tanks are sounded by themselves",
    "lot": "points read once for the whole plant; the analysis of a fuel is entered with its lot",
    **dict.fromkeys(
        ("engine", "cylinder", "turbocharger", "cooler", "bearing", "generator"),
        "points read once for the whole plant; what is read at an engine stands in its own readings",
    ),
}


class PlantUnusable(Exception):
    """The plant folder has no plant.toml that can be used: a sentence, and every fault of the file."""

    def __init__(self, sentence: str, faults: tuple[Fault, ...] = ()) -> None:
        super().__init__("\n".join([sentence, *(fault.sentence() for fault in faults)]))
        self.sentence = sentence
        self.faults = faults


def read_plant(folder: Path) -> Plant:
    """The plant of a folder. Raises PlantUnusable with all faults."""
    path = folder / FILE_NAME
    plant, faults = parse_plant(_text_of(path, folder))
    if plant is None:
        count = f"{len(faults)} fault{'s' if len(faults) > 1 else ''}"
        raise PlantUnusable(f"{path} cannot be used: {count}.", faults)
    return plant


def _text_of(path: Path, folder: Path) -> str:
    try:
        status = path.stat()
        if not stat.S_ISREG(status.st_mode):
            raise PlantUnusable(f"{path} is no file. Make a plant folder with: logbook new FOLDER --kind ship")
        if status.st_size > LARGEST_BYTES:
            raise PlantUnusable(
                f"{path} has {status.st_size / 1000:.0f} kB; a plant.toml has {LARGEST_BYTES // 1000} kB at most. "
                "Is it the right file?"
            )
        # Some editors put a mark before the first letter; it says nothing.
        return path.read_text(encoding="utf-8-sig")
    except FileNotFoundError:
        raise PlantUnusable(f"There is no {path}. Make one with: logbook new {folder} --kind ship") from None
    except UnicodeDecodeError as error:
        line = error.object.count(b"\n", 0, error.start) + 1
        raise PlantUnusable(f"{path} is not UTF-8 text: look at line {line}, and save the file as UTF-8.") from error
    except OSError as error:
        raise PlantUnusable(f"{path} cannot be read: {error.strerror or error}.") from error


def parse_plant(text: str) -> tuple[Plant | None, tuple[Fault, ...]]:
    """The plant that the text describes, or None with every fault found, in the order of their lines."""
    try:
        content = tomllib.loads(text)
    except ValueError as error:
        return None, (syntax_fault(text, str(error)),)
    except RecursionError:
        return None, (Fault(1, FILE_NAME, "brackets within brackets without end", "a file as `logbook new` writes it"),)
    faults = Faults(text)
    plant = _plant(Table(content, (), faults), text)
    found = faults.in_order()
    return (None if found else plant), found


def _plant(top: Table, text: str) -> Plant:
    head = top.table("plant")
    if head is None:
        if not top.has("plant"):
            top.missing("plant", "the table [plant] with kind and name")
        head = Table({}, ("plant",), Faults(text))
    kind = head.word("kind", ("ship", "station"), "ship", required=True)
    own_points = [read_point(table) for table in top.tables("point")]
    points = dict(catalogue()) | {point.key: point for point in own_points}
    barometer_at = head.word("barometer_at", BAROMETER_AT, "engine")
    engines = tuple(read_engine(table, points) for table in top.tables("engine"))
    if not top.content.get("engine"):
        top.missing("engine", "at least one engine, under the line [[engine]]")
    ids = list(dict.fromkeys(engine.id for engine in engines if engine.id))
    meters = tuple(read_meter(table, ids) for table in top.tables("meter"))
    tanks = tuple(read_tank(table, ids) for table in top.tables("tank"))
    fuels = tuple(read_fuel(table) for table in top.tables("fuel"))
    people = tuple(read_person(table) for table in top.tables("person"))
    _unique(top, "engine", "id", (engine.id for engine in engines))
    _unique(top, "meter", "id", (meter.id for meter in meters))
    _unique(top, "tank", "id", (tank.id for tank in tanks))
    _unique(top, "fuel", "grade", (fuel.grade for fuel in fuels))
    _unique(top, "person", "id", (person.id for person in people))
    _unique(top, "person", "account", (person.account for person in people))
    _unique(top, "point", "key", (point.key for point in own_points))
    return Plant(
        kind=kind,
        name=head.text("name", required="the name of the ship or station"),
        engines=engines,
        meters=meters,
        tanks=tanks,
        fuels=fuels,
        people=people,
        marks=read_marks(top.table("marks")),
        points=points,
        plant_readings=reading_keys(head, points, _READ_ELSEWHERE) or _usual_readings(kind, own_points),
        utc_offset_min=_offset(head),
        altitude_m=head.number("altitude_m", 0.0, least=-400, greatest=5000, unit="m"),
        barometer_at=barometer_at,
        barometer_height_m=head.number(
            "barometer_height_m", 0.0, least=-50, greatest=300, unit="m", required=barometer_at != "engine"
        ),
        suction_air_at=head.word("suction_air_at", SUCTION_AIR_AT, "turbocharger suction"),
        hour=head.word("hour", ("ending", "beginning"), "ending"),
        hourly=head.flag("hourly", kind == "station"),
        currency=head.text("currency", "USD"),
        ship_type=head.word("ship_type", SHIP_TYPES),
        capacity_t=head.number("capacity_t", least=1, greatest=1e6, unit="t"),
        decimal_comma=head.flag("decimal_comma"),
        power_unit_hp=head.word("horsepower", ("metric", "mechanical")),
        text=text,
        digest=hashlib.sha256(text.encode("utf-8")).hexdigest(),
    )


def _usual_readings(kind: str, own_points: Iterable[ReadingDefinition]) -> tuple[str, ...]:
    return plant_readings(kind) + tuple(point.key for point in own_points if point.per in ("plant", "ship"))


def _offset(head: Table) -> int:
    """Ship or station time ahead of UTC [min]."""
    match = _OFFSET.fullmatch(head.text("utc_offset", "+00:00"))
    sign, hours, minutes = (match[1] or match[4], match[2] or match[5], match[3] or "0") if match else ("+", "99", "0")
    ahead = int(hours) * 60 + int(minutes)
    if ahead > 14 * 60:
        head.note("utc_offset", 'local time ahead of UTC, e.g. "+02:00", or "-03:30" behind it')
        return 0
    return -ahead if sign == "-" else ahead


def _unique(top: Table, what: str, key: str, values: Iterable[str]) -> None:
    """Every id, grade or account stands once; empty ones are faults of their own, or none."""
    seen: set[str] = set()
    for index, value in enumerate(values):
        if value and value in seen:
            found = f"{shown(value)} a second time"
            top.faults.note((what, index, key), found, f"another {key} for every {what}")
        seen.add(value)
