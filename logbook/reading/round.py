"""Which rounds a plant has, their fields in walk order, and what a text in each field means."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import datetime, timedelta

from logbook.plant.catalogue import WALK_GROUPS, ReadingDefinition
from logbook.plant.records import Counter, Engine, Meter, Plant
from logbook.plant.usual import engine_readings
from logbook.reading import counters
from logbook.reading.entering import Field, Target, Understand, Understood
from logbook.reading.finding import Finding
from logbook.reading.ship_time import shown_offset
from logbook.reading.typed import Habits, read_row, read_typed
from logbook.reading.typing_test import CounterContext, counter_findings, row_findings, span_findings
from logbook.reading.value import State, Value

PLANT = "plant"
WATCH_HOURS = 4
SHIP_AT_NOON = ("distance_observed", "distance_log", "draught_forward", "draught_aft", "wind_force")

_WIDTH_OF_ABBREVIATION = 10


@dataclass(frozen=True, slots=True)
class RoundPlan:
    """One kind of round that a person may begin."""

    title: str
    subjects: tuple[str, ...]
    occasion: str


def habits_of(plant: Plant, engine: Engine | None = None) -> Habits:
    """How the people of this plant type."""
    modes = engine.operating_modes if engine else ()
    return Habits(plant.decimal_comma, plant.power_unit_hp, modes)


def plans_of(plant: Plant) -> tuple[RoundPlan, ...]:
    """The rounds of a plant: each engine by itself, generating sets also side by side, the noon of a ship."""
    occasion = "round" if plant.kind == "station" else "watch"
    sets = tuple(engine.id for engine in plant.engines if engine.is_set)
    movers = [engine.id for engine in plant.engines if not engine.is_set]
    plans = [RoundPlan(f"{engine} {occasion}", (engine,), occasion) for engine in movers]
    if len(sets) > 1:
        plans.append(RoundPlan(f"{' '.join(sets)} {occasion}, rows across the sets", sets, occasion))
    plans += [RoundPlan(f"{engine} {occasion}", (engine,), occasion) for engine in sets]
    if plant.kind == "ship":
        plans += [RoundPlan(f"{engine} noon", (engine,), "noon") for engine in movers]
    return tuple(plans)


def round_length(plan: RoundPlan) -> timedelta:
    """From one round of this kind to the next."""
    return timedelta(hours=1 if plan.occasion == "round" else (24 if plan.occasion == "noon" else WATCH_HOURS))


def round_name(plan: RoundPlan, taken: datetime, offset_min: int) -> str:
    """`2026-05-14 0400 +03:00 ME watch`: with its offset, since a ship's date and hour may come twice."""
    ship = taken + timedelta(minutes=offset_min)
    return f"{ship:%Y-%m-%d %H%M} {shown_offset(offset_min)} {plan.title}"


def begin(plant: Plant, plan: RoundPlan, now: datetime, offset_min: int) -> tuple[datetime, int]:
    """The moment a round begun now stands for: the watch, hour or noon of the ship's clock that ended last."""
    ship = now + timedelta(minutes=offset_min)
    hours = round(round_length(plan).total_seconds() / 3600)
    # A round is read in the last half hour of its watch: then it stands for the one that ends.
    ship += timedelta(minutes=30)
    base = ship.replace(minute=0, second=0, microsecond=0)
    into = (base.hour - (12 if plan.occasion == "noon" else 0)) % hours
    return base - timedelta(hours=into, minutes=offset_min), offset_min


def _abbreviated(point: ReadingDefinition, cycle: str, tail: str) -> str:
    head = f"{point.abbreviation_for(cycle)} {tail}".rstrip()
    return f"{head:<{_WIDTH_OF_ABBREVIATION}} {point.label_for(cycle)}"


def _places(point: ReadingDefinition, engine: Engine) -> tuple[str, ...]:
    if point.per in ("cylinder", "turbocharger", "cooler", "bearing"):
        return tuple(str(number) for number in range(1, engine.count_of(point.per) + 1))
    return ("",)


def _key(point: ReadingDefinition, place: str) -> str:
    return f"{point.key}.{place}" if place else point.key


def _points_of(plant: Plant, engine: Engine) -> list[ReadingDefinition]:
    keys = engine.readings or engine_readings(engine.cycle, engine.fuel, engine.use)
    points = [
        plant.points[key] for key in keys if plant.points[key].per not in ("meter", "tank", "lot", "plant", "ship")
    ]
    if engine.shaft_generator is None and not engine.readings:
        points = [point for point in points if not point.key.startswith("shaft_generator")]
    if not engine.auxiliary_blowers and not engine.readings:
        points = [point for point in points if point.key != "auxiliary_blower_state"]
    return points


def _fields_of_engine(plant: Plant, engine: Engine) -> list[Field]:
    fields = []
    for point in _points_of(plant, engine):
        places = _places(point, engine)
        if not places:
            continue
        tail = f"{places[0]}-{places[-1]}" if len(places) > 1 else ""
        fields.append(
            Field(
                name=f"{engine.id}/{point.key}",
                label=_abbreviated(point, engine.cycle, tail),
                unit=point.unit,
                group=point.walk,
                definition=point,
                targets=tuple((engine.id, _key(point, place)) for place in places),
            )
        )
    return fields


def _fields_across(plant: Plant, engines: list[Engine]) -> list[Field]:
    """A row across the sets for each point that stands alone on a set; a row of its own for cylinders."""
    fields = []
    points = {point.key: point for engine in engines for point in _points_of(plant, engine)}
    for point in points.values():
        having = [engine for engine in engines if point in _points_of(plant, engine)]
        single = [engine for engine in having if len(_places(point, engine)) == 1]
        if single:
            fields.append(
                Field(
                    name=f"{'+'.join(engine.id for engine in single)}/{point.key}",
                    label=_abbreviated(point, single[0].cycle, ""),
                    unit=point.unit,
                    group=point.walk,
                    definition=point,
                    targets=tuple((engine.id, _key(point, _places(point, engine)[0])) for engine in single),
                )
            )
        for engine in having:
            places = _places(point, engine)
            if len(places) > 1:
                fields.append(
                    Field(
                        name=f"{engine.id}/{point.key}",
                        label=_abbreviated(point, engine.cycle, f"{engine.id}"),
                        unit=point.unit,
                        group=point.walk,
                        definition=point,
                        targets=tuple((engine.id, _key(point, place)) for place in places),
                    )
                )
    return fields


def _meter_point(plant: Plant, meter: Meter) -> ReadingDefinition:
    """The catalogue's point, in the unit that this meter shows."""
    from dataclasses import replace

    family = {"kg": "mass", "t": "mass", "kWh": "energy", "MWh": "energy", "Nm3": "gas volume", "Sm3": "gas volume"}
    return replace(plant.points[meter.key], unit=meter.unit, family=family.get(meter.unit, "volume"))


def _fields_of_meters(plant: Plant, subjects: tuple[str, ...]) -> list[Field]:
    fields = []
    for meter in plant.meters:
        if not set(meter.serves) & set(subjects):
            continue
        subject = meter.serves[0] if len(meter.serves) == 1 else PLANT
        point = _meter_point(plant, meter)
        fields.append(
            Field(
                name=f"{subject}/{meter.key}.{meter.id}",
                label=f"{point.abbreviation} {meter.id}",
                unit=meter.unit,
                group="counters",
                definition=point,
                targets=((subject, f"{meter.key}.{meter.id}"),),
            )
        )
        if meter.temperature == "read":
            kind = "gas_meter_temperature" if meter.key == "gas_meter" else "fuel_meter_temperature"
            temperature = plant.points[kind]
            fields.append(
                Field(
                    name=f"{subject}/{kind}.{meter.id}",
                    label=f"{temperature.abbreviation} {meter.id}",
                    unit=temperature.unit,
                    group="counters",
                    definition=temperature,
                    targets=((subject, f"{kind}.{meter.id}"),),
                )
            )
    return fields


def _fields_of_plant(plant: Plant, occasion: str) -> list[Field]:
    keys = plant.plant_readings + (SHIP_AT_NOON if occasion == "noon" else ())
    return [
        Field(
            name=f"{PLANT}/{key}",
            label=_abbreviated(plant.points[key], "two-stroke", ""),
            unit=plant.points[key].unit,
            group=plant.points[key].walk,
            definition=plant.points[key],
            targets=((PLANT, key),),
        )
        for key in dict.fromkeys(keys)
    ]


def fields_of(plant: Plant, subjects: tuple[str, ...], occasion: str) -> tuple[Field, ...]:
    """The fields of a round in walk order: engines, their meters, and the plant once."""
    engines = [plant.engine(subject) for subject in subjects]
    found = _fields_across(plant, engines) if len(engines) > 1 else _fields_of_engine(plant, engines[0])
    found += _fields_of_meters(plant, subjects) + _fields_of_plant(plant, occasion)
    order = {group: number for number, group in enumerate(WALK_GROUPS)}
    return tuple(sorted(found, key=lambda item: order.get(item.group, len(order))))


def counter_of(plant: Plant, subject: str, key: str) -> tuple[Counter, float] | None:
    """How the counter behind a key counts, and its rated rate [unit/h]; None where plant.toml does not say."""
    name, _, place = key.partition(".")
    for meter in plant.meters:
        if meter.key == name and meter.id == place:
            return meter.counter, counters.rated_rate_of_meter(meter, [plant.engine(engine) for engine in meter.serves])
    if subject == PLANT:
        return None
    engine = plant.engine(subject)
    counter, rate = engine.counters.get(name), counters.rated_rate(name, engine)
    return (counter, rate) if counter is not None and rate is not None else None


def understanding(
    plant: Plant, last: Mapping[Target, Value], last_at: Mapping[str, datetime], taken: datetime
) -> Understand:
    """What a text in a field means, tested against the last readings.

    `last_at`: when each subject was read last; a subject that never was has no counter to test against.
    """

    def understand(item: Field, text: str, entered: Mapping[Target, Value]) -> Understood:
        subject = item.targets[0][0]
        engine = plant.engine(subject) if subject != PLANT else None
        habits = habits_of(plant, engine)
        findings: list[Finding] = []
        values: dict[Target, Value] = {}
        if item.is_row:
            # In a row across sets the places are engines; read_row wants distinct names for them.
            names = tuple(f"{target[1]}@{target[0]}" for target in item.targets)
            found, asked = read_row(text, names, item.definition, habits)
            findings += asked
            values = {target: found[name] for target, name in zip(item.targets, names, strict=True) if name in found}
            findings += row_findings(
                {f"{key}@{owner}": value for (owner, key), value in values.items()},
                {f"{key}@{owner}": value for (owner, key), value in last.items()},
            )
        else:
            counted = counter_of(plant, subject, item.targets[0][1]) if item.definition.kind == "counter" else None
            counter = counted[0] if counted else None
            value, asked = read_typed(text, item.definition, habits, counter=counter)
            findings += asked
            if value is not None:
                values[item.targets[0]] = value
        for target, value in values.items():
            findings += _tested(plant, item, target, value, entered, last, last_at, taken)
        return Understood(values, tuple(findings))

    return understand


def _tested(
    plant: Plant,
    item: Field,
    target: Target,
    value: Value,
    entered: Mapping[Target, Value],
    last: Mapping[Target, Value],
    last_at: Mapping[str, datetime],
    taken: datetime,
) -> list[Finding]:
    subject, key = target
    engine = plant.engine(subject) if subject != PLANT else None
    found = list(span_findings(value, item.definition, engine, running=_runs(subject, entered)))
    if item.definition.kind == "counter" and target in last and subject in last_at:
        counter = counter_of(plant, subject, key)
        before = last[target].number
        if counter is not None and before is not None:
            elapsed_h = (taken - last_at[subject]).total_seconds() / 3600
            found += counter_findings(value, CounterContext(counter[0], before, counter[1], elapsed_h))
    if not item.is_row:
        return found
    place = subject if len({owner for owner, _ in item.targets}) > 1 else key.rpartition(".")[2]
    return [Finding(one.key, f"{place}: {one.sentence}", one.refused, one.offers, key) for one in found]


def _runs(subject: str, entered: Mapping[Target, Value]) -> bool:
    """Whether the spans apply: they do unless the round says that this engine stands still."""
    state = entered.get((subject, "engine_state"))
    if state is not None:
        return state.word == "running"
    power = entered.get((subject, "generator_power"))
    return power is None or power.state not in (State.STOPPED, State.STAND_BY)


def field_for(plant: Plant, subject: str, key: str) -> Field | None:
    """The field of one key of an engine (or of the plant), in the log or not; None where it has no such place."""
    name, _, place = key.partition(".")
    point = plant.points.get(name)
    if point is None:
        return None
    targets: tuple[Target, ...] = ((subject, key),)
    unit = point.unit
    if point.per == "meter":
        meter = next((meter for meter in plant.meters if meter.id == place), None)
        if meter is None:
            return None
        if meter.key == name:
            point = _meter_point(plant, meter)
            unit = point.unit
    elif subject != PLANT and point.per in ("cylinder", "turbocharger", "cooler", "bearing"):
        places = _places(point, plant.engine(subject))
        if place and place not in places:
            return None
        if not place:
            targets = tuple((subject, _key(point, one)) for one in places)
    elif place:
        return None
    return Field(f"{subject}/{key}", point.label, unit, point.walk, point, targets)
