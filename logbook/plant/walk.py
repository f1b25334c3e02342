"""The walk of a round: what is read at one engine, at its meters and once for the plant, in walk order."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace

from logbook.plant.catalogue import WALK_GROUPS, ReadingDefinition, catalogue
from logbook.plant.records import Engine, Meter, Plant
from logbook.plant.usual import engine_readings

PLANT = "plant"
"""Subject of what is read once a round for the whole plant."""
IN_PLACES = ("cylinder", "turbocharger", "cooler", "bearing")
_FAMILY_OF_UNIT = {
    "kg": "mass", "t": "mass", "kWh": "energy", "MWh": "energy", "Nm3": "gas volume", "Sm3": "gas volume",
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class WalkItem:
    """One line of the walk: a single value, or the places of a row that is typed as one list."""

    key: str
    """`engine_speed`; of a meter with its place: `fuel_meter_supply.ME_in`"""
    definition: ReadingDefinition
    """of a meter in the unit that it shows"""
    places: tuple[str, ...]
    """("1", ..., "6") of a cylinder row; empty for a single value"""
    label: str
    unit: str
    subject: str
    """engine id, or `plant`: read once for all engines that it serves"""

    @property
    def keys(self) -> tuple[str, ...]:
        """Every key of the line: `cylinder_exhaust_temperature.1` and so on."""
        return tuple(f"{self.key}.{place}" for place in self.places) or (self.key,)


def walk(plant: Plant, engine: Engine) -> tuple[WalkItem, ...]:
    """All that is read in a round of one engine.

    The engine's own `readings` keep their order; its meters and the points of the plant come after the last reading of
    their group of the walk.
    """
    items = [_of_engine(plant, engine, key) for key in engine.readings or _usual_keys(plant, engine)]
    for item in sorted([*_of_meters(plant, engine), *_of_plant(plant)], key=_group):
        # What belongs to no later group of the walk stands before it.
        before = [place for place, other in enumerate(items, 1) if _group(other) <= _group(item)]
        items.insert(before[-1] if before else 0, item)
    return tuple(items)


def _group(item: WalkItem) -> int:
    return WALK_GROUPS.index(item.definition.walk)


def _usual_keys(plant: Plant, engine: Engine) -> list[str]:
    """The usual points that this engine has, with the plant's own, in walk order."""
    own = [key for key, point in plant.points.items() if _is_own(key, point, engine)]
    keys = [key for key in (*engine_readings(engine.cycle, engine.fuel, engine.use), *own) if _has(plant, engine, key)]
    if len(engine.operating_modes) > 1:
        keys.append("operating_mode")
    return sorted(keys, key=lambda key: WALK_GROUPS.index(plant.points[key].walk))


def _is_own(key: str, point: ReadingDefinition, engine: Engine) -> bool:
    of_engine = point.per == "engine" or point.per in IN_PLACES or (point.per == "generator" and engine.is_set)
    return of_engine and key not in catalogue()


def _has(plant: Plant, engine: Engine, key: str) -> bool:
    if key.startswith("shaft_generator"):
        return engine.shaft_generator is not None
    if key == "auxiliary_blower_state":
        return engine.auxiliary_blowers
    return engine.count_of(plant.points[key].per) > 0


def _of_engine(plant: Plant, engine: Engine, key: str) -> WalkItem:
    point = plant.points[key]
    count = engine.count_of(point.per) if point.per in IN_PLACES else 0
    places = tuple(str(number) for number in range(1, count + 1))
    return WalkItem(key, point, places, point.label_for(engine.cycle), point.unit, engine.id)


def meter_point(plant: Plant, meter: Meter) -> ReadingDefinition:
    """The catalogue's point of a meter, in the unit that this one shows."""
    family = _FAMILY_OF_UNIT.get(meter.unit, "volume")
    if meter.key == "gas_meter" and family == "volume":
        family = "gas volume"
    return replace(plant.points[meter.key], unit=meter.unit, family=family)


def _of_meters(plant: Plant, engine: Engine) -> Iterable[WalkItem]:
    """Meters that serve the engine; those that serve none are read once for the plant."""
    for meter in plant.meters:
        if meter.serves and engine.id not in meter.serves:
            continue
        subject = meter.serves[0] if len(meter.serves) == 1 else PLANT
        of_gas = meter.key == "gas_meter"
        beside = [f"{'gas' if of_gas else 'fuel'}_meter_temperature"] if meter.temperature == "read" else []
        if of_gas and meter.unit == "m3":
            # Volume at the meter's own condition says nothing without its pressure.
            beside.append("gas_meter_pressure")
        for point in (meter_point(plant, meter), *(plant.points[key] for key in beside)):
            key = f"{point.key}.{meter.id}"
            yield WalkItem(key, point, (), f"{point.label} {meter.id}", point.unit, subject)


def _of_plant(plant: Plant) -> Iterable[WalkItem]:
    for key in plant.plant_readings:
        point = plant.points[key]
        yield WalkItem(key, point, (), point.label, point.unit, PLANT)
