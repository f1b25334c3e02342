"""The tables of plant.toml beside the engines: meters, tanks, fuels, people, marks and points of the plant's own."""

from __future__ import annotations

import re
from collections.abc import Sequence

from logbook.plant.catalogue import WALK_GROUPS, ReadingDefinition, Span, catalogue, parse_span
from logbook.plant.fields import Table
from logbook.plant.parts import read_counter, short_id
from logbook.plant.records import METER_KINDS, RIGHTS, Fuel, Marks, Meter, Person, Tank

METER_UNITS = {
    "fuel_meter_supply": ("L", "m3", "kg", "t"),
    "fuel_meter_return": ("L", "m3", "kg", "t"),
    "boiler_fuel_meter": ("L", "m3", "kg", "t"),
    "gas_meter": ("Nm3", "Sm3", "m3", "kg"),
    "exported_energy": ("kWh", "MWh"),
}
TANK_USES = ("storage", "settling", "service", "day", "oil")
FUEL_KINDS = ("residual", "distillate", "gas", "other")
POINT_PER = ("engine", "cylinder", "turbocharger", "cooler", "bearing", "generator", "plant", "ship")
POINT_KINDS = ("gauge", "counter", "state", "level")
PRESSURE_REFERENCES = ("gauge", "absolute", "differential")
_POINT_KEY = re.compile(r"[a-z][a-z0-9_]{0,63}")


def read_meter(table: Table, engines: Sequence[str]) -> Meter:
    meter_id = short_id(table)
    key = table.word("key", METER_KINDS, METER_KINDS[0], required=True)
    of_fuel = key not in ("exported_energy", "boiler_fuel_meter")
    return Meter(
        id=meter_id,
        key=key,
        serves=_serves(table, engines, required=of_fuel),
        unit=table.word("unit", METER_UNITS[key], METER_UNITS[key][0], required=True),
        counter=read_counter(table),
        accuracy_percent=table.number("accuracy_percent", 0.5, least=0.01, greatest=20, unit="%"),
        rated_rate_per_h=table.number("rated_rate_per_h", least=0.001, greatest=1e7),
        temperature=_temperature(table),
        serial=table.text("serial"),
    )


def _serves(table: Table, engines: Sequence[str], *, required: bool) -> tuple[str, ...]:
    example = f'the engines it serves, e.g. ["{engines[0] if engines else "ME"}"]'
    return table.words("serves", engines, what="engines of this plant", required=example if required else "")


def _temperature(table: Table) -> str:
    """`read`, a fixed number of degC as text, or empty."""
    if isinstance(table.raw("temperature"), int | float):
        fixed = table.number("temperature", least=-30, greatest=200, unit="degC")
        return "" if fixed is None else f"{fixed:g}"
    if table.has("temperature") and table.content["temperature"] != "read":
        table.note("temperature", '"read", or a fixed number of degC')
        return ""
    return "read" if table.has("temperature") else ""


def read_tank(table: Table, engines: Sequence[str]) -> Tank:
    tank_id = short_id(table)
    if tank_id == "plant" or tank_id in engines:
        table.note("id", "an id that no engine has, and not `plant`: the book tells them apart by it")
    return Tank(
        id=tank_id,
        name=table.text("name", tank_id),
        use=table.word("use", TANK_USES, "storage", required=True),
        volume_m3=table.must("volume_m3", least=0.01, greatest=1e5, unit="m3"),
        serves=_serves(table, engines, required=False),
        mixing_hours=table.number("mixing_hours", 24.0, least=0, greatest=240, unit="h"),
    )


def read_fuel(table: Table) -> Fuel:
    kind = table.word("kind", FUEL_KINDS, "residual", required=True)
    fuel = Fuel(
        grade=table.text("grade", required="the grade, as on the delivery note"),
        kind=kind,
        lower_calorific_value_mj_kg=table.number("lower_calorific_value_mj_kg", least=5, greatest=130, unit="MJ/kg"),
        density15_kg_m3=table.number("density15_kg_m3", least=600, greatest=1100, unit="kg/m3"),
        lower_calorific_value_mj_m3=table.number("lower_calorific_value_mj_m3", least=1, greatest=120, unit="MJ/m3"),
        gas_condition=table.word("gas_condition", ("Nm3", "Sm3"), "Nm3"),
        carbon_factor=table.number("carbon_factor", least=0, greatest=4, unit="t CO2 per t of fuel"),
        price_per_t=table.number("price_per_t", least=0, greatest=1e5),
    )
    if fuel.lower_calorific_value_mj_m3 is not None and kind not in ("gas", "other"):
        table.note("lower_calorific_value_mj_m3", 'kind = "gas" beside it; a liquid has lower_calorific_value_mj_kg')
    return fuel


def read_person(table: Table) -> Person:
    return Person(
        id=short_id(table),
        name=table.text("name", required="the person's name"),
        rank=table.text("rank"),
        rights=table.words("rights", RIGHTS, what="rights") or ("read", "enter"),
        account=table.text("account"),
    )


def read_marks(table: Table | None) -> Marks:
    if table is None:
        return Marks()
    return Marks(
        excess_points=table.number("excess_points", least=0.01, greatest=30, unit="points"),
        sfoc_deviation=table.number("sfoc_deviation", least=0.0001, greatest=1, unit="as a fraction: 0.02 is 2 %"),
    )


def read_point(table: Table) -> ReadingDefinition:
    """A point of the plant's own."""
    key = table.text("key", required="a key of its own, small letters and _")
    if key and (not _POINT_KEY.fullmatch(key) or key in catalogue()):
        table.note("key", "small letters, digits and _, and no key of the catalogue")
    label = table.text("label", key)
    families = sorted({point.family for point in catalogue().values()})
    family = table.word("family", families, "number", required=True)
    span = _span(table)
    return ReadingDefinition(
        key=key,
        label=label,
        label_four_stroke="",
        abbreviation=table.text("abbreviation", label[:10]),
        abbreviation_four_stroke="",
        unit=_unit(table, family),
        family=family,
        per=table.word("per", POINT_PER, "engine"),
        kind=table.word("kind", POINT_KINDS, "gauge"),
        pressure_reference=table.word(
            "pressure_reference", PRESSURE_REFERENCES, required=family in ("pressure", "small pressure")
        ),
        spans=dict.fromkeys(("two-stroke", "four-stroke", "gas"), span) if span else {},
        uncertainty="",
        walk=table.word("walk", WALK_GROUPS, "aux"),
    )


def _unit(table: Table, family: str) -> str:
    """The unit in which the point is kept: one of its family, else the family's own."""
    # The unit lists are read for plants with points of their own only.
    from logbook.plant.units import spellings_of

    known = spellings_of(family)
    own = next((point.unit for point in catalogue().values() if point.family == family), "-")
    unit = table.text("unit", own)
    if known and unit not in (*known, own):
        table.word("unit", sorted({own, *known}))
    return unit


def _span(table: Table) -> Span | None:
    text = table.text("span")
    expected = "a span from least to greatest, like 15..250"
    try:
        span = parse_span(text)
    except ValueError:
        table.note("span", expected)
        return None
    if span is not None and span.least >= span.greatest:
        table.note("span", expected)
    return span
