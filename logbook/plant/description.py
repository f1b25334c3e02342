"""plant.toml -> a `Plant`, or every fault in it at once, each with its line."""

from __future__ import annotations

import hashlib
import re
import tomllib
from pathlib import Path
from typing import TypeVar

from logbook.plant.catalogue import WALK_GROUPS, ReadingDefinition, catalogue, parse_span
from logbook.plant.engines import read_engine
from logbook.plant.fields import Fault, Faults, Table
from logbook.plant.parts import read_counter, reading_keys, short_id
from logbook.plant.records import (
    METER_KINDS,
    RIGHTS,
    Engine,
    Fuel,
    Marks,
    Meter,
    Person,
    Plant,
    Tank,
)
from logbook.plant.toml_lines import lines_of
from logbook.plant.usual import plant_readings

FILE_NAME = "plant.toml"
LARGEST_BYTES = 1_000_000
Item = TypeVar("Item", Engine, Meter, Tank, Person)
_OFFSET = re.compile(r"([+-])(\d{1,2})(?::?(\d{2}))?")

METER_UNITS = {
    "fuel_meter_supply": ("L", "m3", "kg", "t"),
    "fuel_meter_return": ("L", "m3", "kg", "t"),
    "boiler_fuel_meter": ("L", "m3", "kg", "t"),
    "gas_meter": ("Nm3", "Sm3", "m3", "kg"),
    "exported_energy": ("kWh", "MWh"),
}


class PlantUnusable(Exception):
    """The plant folder has no plant.toml that can be used. `faults` has every one of them."""

    def __init__(self, sentence: str, faults: tuple[Fault, ...] = ()) -> None:
        super().__init__("\n".join([sentence, *(fault.sentence() for fault in faults)]))
        self.faults = faults


def read_plant(folder: Path) -> Plant:
    """The plant of a folder. Raises PlantUnusable with all faults."""
    path = folder / FILE_NAME
    try:
        if path.stat().st_size > LARGEST_BYTES:
            raise PlantUnusable(f"{path} is larger than {LARGEST_BYTES // 1000} kB: that is no plant.toml.")
        text = path.read_text(encoding="utf-8")
    except FileNotFoundError:
        raise PlantUnusable(f"There is no {path}. Make one with: logbook new {folder} --kind ship") from None
    except UnicodeDecodeError as error:
        raise PlantUnusable(f"{path} is not UTF-8 text (byte {error.start}). Save it as UTF-8.") from error
    except OSError as error:
        raise PlantUnusable(f"{path} cannot be read: {error.strerror or error}.") from error
    plant, faults = parse_plant(text)
    if plant is None:
        count = f"{len(faults)} fault{'s' if len(faults) > 1 else ''}"
        raise PlantUnusable(f"{path} cannot be used: {count}.", faults)
    return plant


def parse_plant(text: str) -> tuple[Plant | None, tuple[Fault, ...]]:
    """The plant that the text describes, or None with every fault found."""
    try:
        content = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        return None, (_syntax_fault(text, str(error)),)
    except RecursionError:
        return None, (
            Fault(1, FILE_NAME, "tables within tables without end", "a plant.toml as `logbook new` writes it"),
        )
    faults = Faults(lines_of(text))
    top = Table(content, (), faults)
    plant = _plant(top, text, faults)
    faults.found.sort(key=lambda fault: fault.line)
    return (None if faults.found else plant), tuple(faults.found)


def _syntax_fault(text: str, said: str) -> Fault:
    place = re.search(r"\(at line (\d+), column (\d+)\)", said)
    line = int(place[1]) if place else text.count("\n") + 1
    what = re.sub(r"\s*\(at .*\)", "", said)
    lines = text.splitlines()
    stands = lines[line - 1].strip()[:50] if 0 < line <= len(lines) else "the end of the file"
    return Fault(line, FILE_NAME, f"{what} in '{stands}'", 'key = value, with texts in "quotation marks"')


def _plant(top: Table, text: str, faults: Faults) -> Plant:
    head = top.table("plant") or Table({}, ("plant",), faults)
    if not top.has("plant"):
        faults.note(("plant",), "nothing", "the table [plant] with kind and name")
    kind = head.word("kind", ("ship", "station"), "ship", required=True)
    name = head.text("name", "", required="the name of the ship or station")
    offset = _offset(head)
    points = dict(catalogue()) | {point.key: point for point in _points(top)}
    readings = reading_keys(head, points) or plant_readings(kind)
    barometer_at = head.word("barometer_at", ("engine", "bridge, reduced to sea level"), "engine")
    altitude = head.number("altitude_m", 0.0, least=-400, greatest=5000, unit="m") or 0.0
    barometer_height = head.number("barometer_height_m", 0.0, least=-50, greatest=300, unit="m") or 0.0
    suction = head.word("suction_air_at", ("turbocharger suction", "engine room"), "turbocharger suction")
    hour = head.word("hour", ("ending", "beginning"), "ending")
    hourly = head.flag("hourly", kind == "station")
    currency = head.text("currency", "USD")
    ship_type = head.text("ship_type", "")
    capacity = head.number("capacity_t", None, least=1, greatest=1e6, unit="t")
    comma = head.flag("decimal_comma", False)
    horsepower = head.word("horsepower", ("metric", "mechanical"), "")
    head.done()

    engines = tuple(_unique([read_engine(table, points) for table in top.tables("engine")], "engine", faults))
    if not engines:
        faults.note(("engine",), "no engine", "at least one [[engine]]")
    ids = [engine.id for engine in engines]
    meters = tuple(_unique([_meter(table, ids) for table in top.tables("meter")], "meter", faults))
    tanks = tuple(_unique([_tank(table, ids) for table in top.tables("tank")], "tank", faults))
    fuels = tuple(_fuel(table) for table in top.tables("fuel"))
    people = tuple(_unique([_person(table) for table in top.tables("person")], "person", faults))
    marks = _marks(top.table("marks"))
    top.asked.add("point")
    top.done()
    return Plant(
        kind=kind,
        name=name,
        engines=engines,
        meters=meters,
        tanks=tanks,
        fuels=fuels,
        people=people,
        marks=marks,
        points=points,
        plant_readings=readings,
        utc_offset_min=offset,
        altitude_m=altitude,
        barometer_at=barometer_at,
        barometer_height_m=barometer_height,
        suction_air_at=suction,
        hour=hour,
        hourly=hourly,
        currency=currency,
        ship_type=ship_type,
        capacity_t=capacity,
        decimal_comma=comma,
        power_unit_hp=horsepower,
        text=text,
        digest=hashlib.sha256(text.encode("utf-8")).hexdigest(),
    )


def _offset(head: Table) -> int:
    text = head.text("utc_offset", "+00:00")
    match = _OFFSET.fullmatch(text)
    minutes = int(match[2]) * 60 + int(match[3] or 0) if match else 10**6
    if match is None or minutes > 14 * 60:
        head.note("utc_offset", 'ship time ahead of UTC, e.g. "+02:00", or "-03:30" behind it')
        return 0
    return -minutes if match[1] == "-" else minutes


def _unique(items: list[Item], what: str, faults: Faults) -> list[Item]:
    seen: set[str] = set()
    for index, item in enumerate(items):
        if item.id and item.id in seen:
            faults.note((what, index, "id"), f"'{item.id}' a second time", f"an id of its own for every {what}")
        seen.add(item.id)
    return items


def _serves(table: Table, engines: list[str], *, required: bool) -> tuple[str, ...]:
    serves = table.texts("serves", required='the engines it serves, e.g. ["ME"]' if required else "")
    for engine in serves:
        if engine not in engines:
            table.note("serves", f"engines of this plant: {', '.join(engines) or 'none'}")
            break
    return serves


def _meter(table: Table, engines: list[str]) -> Meter:
    meter_id = short_id(table)
    key = table.word("key", METER_KINDS, METER_KINDS[0], required=True)
    unit = table.word("unit", METER_UNITS[key], METER_UNITS[key][0], required=True)
    raw = table.raw("temperature")
    temperature = ""
    if raw == "read":
        temperature = "read"
    elif isinstance(raw, int | float) and not isinstance(raw, bool) and -30 <= raw <= 200:
        temperature = f"{raw:g}"
    elif raw is not None:
        table.note("temperature", '"read", or a fixed number of degC')
    meter = Meter(
        id=meter_id,
        key=key,
        serves=_serves(table, engines, required=key != "exported_energy"),
        unit=unit,
        counter=read_counter(table),
        accuracy_percent=table.number("accuracy_percent", 0.5, least=0, greatest=20, unit="%") or 0.5,
        rated_rate_per_h=table.number("rated_rate_per_h", None, least=0, greatest=1e7),
        temperature=temperature,
        serial=table.text("serial"),
    )
    table.done()
    return meter


def _tank(table: Table, engines: list[str]) -> Tank:
    tank = Tank(
        id=short_id(table),
        name=table.text("name"),
        use=table.word("use", ("storage", "settling", "service", "day", "oil"), "storage", required=True),
        volume_m3=table.must("volume_m3", least=0.01, greatest=1e5, unit="m3"),
        serves=_serves(table, engines, required=False),
        mixing_hours=table.number("mixing_hours", 24.0, least=0, greatest=240, unit="h") or 0.0,
    )
    table.done()
    return tank


def _fuel(table: Table) -> Fuel:
    fuel = Fuel(
        grade=table.text("grade", required="the grade, as on the delivery note"),
        kind=table.word("kind", ("residual", "distillate", "gas", "other"), "residual", required=True),
        lower_calorific_value_mj_kg=table.number("lower_calorific_value_mj_kg", None, least=5, greatest=130),
        density15_kg_m3=table.number("density15_kg_m3", None, least=600, greatest=1100, unit="kg/m3"),
        lower_calorific_value_mj_m3=table.number("lower_calorific_value_mj_m3", None, least=1, greatest=120),
        gas_condition=table.word("gas_condition", ("Nm3", "Sm3"), "Nm3"),
        carbon_factor=table.number("carbon_factor", None, least=0, greatest=4),
        price_per_t=table.number("price_per_t", None, least=0, greatest=1e5),
    )
    table.done()
    return fuel


def _person(table: Table) -> Person:
    rights = table.texts("rights")
    for right in rights:
        if right not in RIGHTS:
            table.note("rights", f"some of {', '.join(RIGHTS)}")
            break
    person = Person(
        id=short_id(table),
        name=table.text("name", required="the person's name"),
        rank=table.text("rank"),
        rights=rights or ("read", "enter"),
        account=table.text("account"),
    )
    table.done()
    return person


def _marks(table: Table | None) -> Marks:
    if table is None:
        return Marks()
    marks = Marks(
        excess_points=table.number("excess_points", None, least=0, greatest=30),
        sfoc_deviation=table.number("sfoc_deviation", None, least=0, greatest=1),
    )
    table.done()
    return marks


def _points(top: Table) -> list[ReadingDefinition]:
    """Points of the plant's own."""
    points = []
    families = {point.family for point in catalogue().values()}
    for table in top.tables("point"):
        try:
            span = parse_span(table.text("span"))
        except ValueError:
            table.note("span", "a span like 15..250")
            span = None
        key = table.text("key", required="a key of its own, small letters and _")
        if key and (not re.fullmatch(r"[a-z][a-z0-9_]*", key) or key in catalogue()):
            table.note("key", "small letters, digits and _, and no key of the catalogue")
        label = table.text("label", key)
        points.append(
            ReadingDefinition(
                key=key,
                label=label,
                label_four_stroke="",
                abbreviation=table.text("abbreviation", label[:12]),
                abbreviation_four_stroke="",
                unit=table.text("unit", "-"),
                family=table.word("family", sorted(families), "number", required=True),
                per=table.word("per", ("engine", "cylinder", "turbocharger", "cooler", "plant", "ship"), "engine"),
                kind=table.word("kind", ("gauge", "counter", "state", "level"), "gauge"),
                pressure_reference=table.word("pressure_reference", ("gauge", "absolute", "differential"), ""),
                spans=dict.fromkeys(("two-stroke", "four-stroke", "gas"), span) if span else {},
                uncertainty="",
                walk=table.word("walk", WALK_GROUPS, "aux"),
            )
        )
        table.done()
    return points
