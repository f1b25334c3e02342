"""Which rounds a plant has, their fields in walk order, and what a text in each field means."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import datetime, timedelta

from logbook.plant.catalogue import WALK_GROUPS
from logbook.plant.records import Counter, Engine, Plant
from logbook.plant.walk import IN_PLACES, PLANT, WalkItem, meter_point, walk
from logbook.reading import counters
from logbook.reading.entering import Field, Target, Understand, Understood
from logbook.reading.finding import Finding
from logbook.reading.ship_time import shown_offset
from logbook.reading.typed import Habits, read_row, read_typed
from logbook.reading.typing_test import CounterContext, counter_findings, row_findings, span_findings
from logbook.reading.value import State, Value

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


def _label(item: WalkItem, cycle: str, tail: str) -> str:
    """The trade's abbreviation, what it is of, and as much of the words as fit."""
    head = f"{item.definition.abbreviation_for(cycle)} {tail}".rstrip()
    return f"{head:<{_WIDTH_OF_ABBREVIATION}} {item.definition.label_for(cycle)}"


def _field(item: WalkItem, cycle: str, *, of: str = "") -> Field:
    tail = f"{item.places[0]}-{item.places[-1]}" if len(item.places) > 1 else item.key.partition(".")[2]
    return Field(
        name=f"{item.subject}/{item.key}",
        label=_label(item, cycle, of or tail),
        unit=item.unit,
        group=item.definition.walk,
        definition=item.definition,
        targets=tuple((item.subject, key) for key in item.keys),
    )


def _fields_across(plant: Plant, engines: list[Engine]) -> list[Field]:
    """A row across the sets for each point that stands alone on a set; a row of its own for cylinders."""
    found: dict[str, Field] = {}
    across: dict[str, list[tuple[Engine, WalkItem]]] = {}
    for engine in engines:
        for item in walk(plant, engine):
            own = item.subject == engine.id
            if own and len(item.keys) == 1 and item.definition.per != "meter":
                if item.definition.key not in across:
                    found[item.definition.key] = _field(item, engine.cycle)
                across.setdefault(item.definition.key, []).append((engine, item))
            else:
                field = _field(item, engine.cycle, of=engine.id if own and len(item.keys) > 1 else "")
                found.setdefault(field.name, field)
    for key, having in across.items():
        first_engine, first = having[0]
        found[key] = Field(
            name=f"{'+'.join(engine.id for engine, _ in having)}/{key}",
            label=_label(first, first_engine.cycle, ""),
            unit=first.unit,
            group=first.definition.walk,
            definition=first.definition,
            targets=tuple((engine.id, item.keys[0]) for engine, item in having),
        )
    order = {group: number for number, group in enumerate(WALK_GROUPS)}
    return sorted(found.values(), key=lambda item: order[item.group])


def fields_of(plant: Plant, subjects: tuple[str, ...], occasion: str) -> tuple[Field, ...]:
    """The fields of a round in walk order: engines, their meters, and the plant once."""
    engines = [plant.engine(subject) for subject in subjects]
    if len(engines) == 1:
        found = [_field(item, engines[0].cycle) for item in walk(plant, engines[0])]
    else:
        found = _fields_across(plant, engines)
    names = {item.name for item in found}
    if occasion == "noon":
        for key in SHIP_AT_NOON:
            point = plant.points[key]
            field = _field(WalkItem(key, point, (), point.label, point.unit, PLANT), "two-stroke")
            found += [field] if field.name not in names else []
    return tuple(found)


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
            point = meter_point(plant, meter)
            unit = point.unit
    elif subject != PLANT and point.per in IN_PLACES:
        places = [str(number) for number in range(1, plant.engine(subject).count_of(point.per) + 1)]
        if place and place not in places:
            return None
        if not place:
            targets = tuple((subject, f"{key}.{one}") for one in places)
    elif place:
        return None
    return Field(f"{subject}/{key}", point.label, unit, point.walk, point, targets)
