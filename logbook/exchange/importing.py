"""A sheet and its column map -> entries of the book, and every doubtful cell by row and column.

Nothing is mended: a cell that is not understood is kept as text, as a reading that was not read; a doubtful number is
kept with the doubt beside it. A row whose time or engine is not understood stops the whole import.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field
from datetime import datetime

from logbook.book.entry import Entry, NewEntry, canonical_json, reading_body
from logbook.exchange.columns import EVENT_FIELDS, LOT_FIELDS, SPECIAL, ColumnMap, Target
from logbook.exchange.sheet import Sheet, SheetRow
from logbook.plant.catalogue import ReadingDefinition
from logbook.plant.records import Counter, Plant
from logbook.plant.walk import meter_point
from logbook.reading.finding import NOT_UNDERSTOOD
from logbook.reading.round import counter_of
from logbook.reading.ship_time import (
    TimeRefused,
    end_of_hour,
    instant,
    parse_clock,
    parse_date,
    parse_moment,
    parse_offset,
)
from logbook.reading.typed import Habits, read_typed
from logbook.reading.typing_test import CounterContext, counter_findings, span_findings
from logbook.reading.value import OCCASIONS, State, Value

SOURCE = "import"


@dataclass(frozen=True, slots=True)
class Doubt:
    """One cell (or row) that needs a look: where it stands, what it says, why."""

    row: int
    column: str
    text: str
    sentence: str
    stops: bool = False
    """the row cannot be imported at all, and so neither can the file"""

    def line(self) -> str:
        place = f"row {self.row}, {self.column}" if self.column else f"row {self.row}"
        return f"{place}: '{self.text}': {self.sentence}" if self.text else f"{place}: {self.sentence}"


@dataclass
class Imported:
    """What a file holds, before anything is written."""

    entries: list[NewEntry] = field(default_factory=list)
    doubts: list[Doubt] = field(default_factory=list)
    left_out_columns: list[str] = field(default_factory=list)
    rows: int = 0

    @property
    def stopped(self) -> bool:
        return any(doubt.stops for doubt in self.doubts)


@dataclass(frozen=True, slots=True)
class _Person:
    name: str
    identity_by: str


def read_log(
    plant: Plant,
    sheet: Sheet,
    columns: ColumnMap,
    *,
    person: str,
    identity_by: str,
    progress: Callable[[int], None] | None = None,
) -> Imported:
    """Everything the sheet holds as entries, with the doubts. Writes nothing."""
    result = Imported(rows=len(sheet.rows))
    faults = _map_faults(plant, sheet, columns)
    if faults:
        result.doubts = faults
        return result
    result.left_out_columns = [
        head for head in sheet.heads if head and head not in columns.columns and head not in _time_heads(columns)
    ]
    place = {head: index for index, head in enumerate(sheet.heads)}
    who = _Person(person, identity_by)
    reader = {"readings": _Readings, "events": _Events, "lots": _Lots}[columns.kind](
        plant, columns, place, who, sheet, result
    )
    for count, row in enumerate(sheet.rows):
        reader.take(row)
        if progress is not None and count % 200 == 0:
            progress(count)
    if progress is not None:
        progress(len(sheet.rows))
    return result


def _time_heads(columns: ColumnMap) -> set[str]:
    return {columns.date, columns.clock, columns.moment, columns.offset_column, columns.engine_column}


def _map_faults(plant: Plant, sheet: Sheet, columns: ColumnMap) -> list[Doubt]:
    """What of the map does not fit the sheet or the plant: said before any row is read."""
    import difflib

    faults: list[Doubt] = []

    def note(column: str, sentence: str) -> None:
        faults.append(Doubt(columns.head_row, column, "", sentence, stops=True))

    for head in [*columns.columns, *filter(None, _time_heads(columns))]:
        if head not in sheet.heads:
            near = difflib.get_close_matches(head, sheet.heads, n=1)
            note(head, f"the file has no such column.{f' Did you mean {near[0]!r}?' if near else ''}")
    engines = [engine.id for engine in plant.engines]
    if columns.engine and columns.engine not in engines:
        note("engine", f"this plant has no engine '{columns.engine}'; it has: {', '.join(engines)}.")
    if columns.occasion not in OCCASIONS:
        note("occasion", f"'{columns.occasion}' is no occasion; there are: {', '.join(OCCASIONS)}.")
    fields = {"readings": None, "events": EVENT_FIELDS, "lots": LOT_FIELDS}[columns.kind]
    for head, target in columns.columns.items():
        for key in target.by_engine.values() if target.by_engine else (target.key,):
            if key in SPECIAL or (fields is not None and key in fields):
                continue
            sentence = (
                _key_fault(plant, key) if fields is None else f"'{key}' is no field; there are: {', '.join(fields)}."
            )
            if sentence:
                note(head, sentence)
    if columns.offset:
        try:
            parse_offset(columns.offset)
        except TimeRefused as error:
            note("offset", str(error))
    return faults


def _key_fault(plant: Plant, key: str) -> str:
    import difflib

    name, _, place = key.partition(".")
    if name not in plant.points:
        near = difflib.get_close_matches(name, plant.points, n=1)
        return f"'{key}' is no reading of this plant.{f' Did you mean {near[0]}?' if near else ''}"
    if plant.points[name].per == "meter" and place not in {meter.id for meter in plant.meters}:
        having = ", ".join(meter.id for meter in plant.meters) or "none"
        return f"'{key}': plant.toml has no meter '{place}'; it has: {having}."
    return ""


class _Reader:
    """What reading a row of any kind needs."""

    def __init__(
        self, plant: Plant, columns: ColumnMap, place: Mapping[str, int], who: _Person, sheet: Sheet, result: Imported
    ) -> None:
        self.plant = plant
        self.columns = columns
        self.place = place
        self.who = who
        self.sheet = sheet
        self.result = result
        self.fixed_offset = parse_offset(columns.offset) if columns.offset else plant.utc_offset_min

    def cell(self, row: SheetRow, head: str) -> str:
        index = self.place[head]
        return row.cells[index] if index < len(row.cells) else ""

    def doubt(self, row: SheetRow, column: str, text: str, sentence: str, *, stops: bool = False) -> None:
        self.result.doubts.append(Doubt(row.number, column, text, sentence, stops))

    def taken(self, row: SheetRow) -> tuple[datetime, int] | None:
        """When the row was read; None (and a doubt that stops) where it does not say."""
        columns = self.columns
        head = columns.moment or columns.date
        text = self.cell(row, head)
        try:
            offset = self.fixed_offset
            if columns.offset_column:
                head = columns.offset_column
                offset = parse_offset(self.cell(row, head))
            head = columns.moment or columns.date
            if columns.moment:
                moment, offset = parse_moment(text, offset, columns.date_order)
                return end_of_hour(moment, self.plant.hour) if self.plant.hourly else moment, offset
            day = parse_date(text, columns.date_order)
            head, text = columns.clock, self.cell(row, columns.clock) if columns.clock else "0000"
            return instant(day, parse_clock(text), offset), offset
        except TimeRefused as error:
            self.doubt(row, head, text, str(error), stops=True)
            return None

    def entry(
        self, kind: str, subject: str, taken: datetime, offset: int, body: Mapping[str, object], person: str = ""
    ) -> NewEntry:
        return NewEntry(
            kind=kind,
            subject=subject,
            taken_utc=taken,
            utc_offset_min=offset,
            person=person or self.who.name,
            identity_by="as stated" if person else self.who.identity_by,
            source=SOURCE,
            body=dict(body) | {"file": self.sheet.file_name, "file_digest": self.sheet.digest[:16]},
        )

    def take(self, row: SheetRow) -> None:
        raise NotImplementedError


class _Readings(_Reader):
    """Rows that are readings of an engine."""

    def __init__(self, *arguments: object) -> None:
        super().__init__(*arguments)  # type: ignore[arg-type]
        self.last: dict[tuple[str, str], tuple[float, datetime]] = {}
        self.cached: dict[tuple[str, str], tuple[ReadingDefinition, str, Counter | None]] = {}
        comma = self.columns.decimal == "," or (not self.columns.decimal and self.plant.decimal_comma)
        self.habits = {
            engine.id: Habits(comma, self.plant.power_unit_hp, engine.operating_modes) for engine in self.plant.engines
        }

    def take(self, row: SheetRow) -> None:
        engine = self.cell(row, self.columns.engine_column) if self.columns.engine_column else self.columns.engine
        if engine not in self.habits:
            self.doubt(row, self.columns.engine_column, engine, "no engine of this plant.", stops=True)
            return
        when = self.taken(row)
        if when is None:
            return
        taken, offset = when
        values: dict[str, Value] = {}
        extra: dict[str, str] = {}
        idle: State | None = None
        for head, target in self.columns.columns.items():
            text = self.cell(row, head)
            key = target.for_engine(engine)
            if not text or key == "ignore":
                continue
            if key in SPECIAL:
                extra[key] = text
                continue
            value = self.value(row, head, target, engine, key, text)
            if value.state in (State.STOPPED, State.STAND_BY):
                idle = idle or value.state
            values[key] = value
        values = self._idle(values, idle)
        if not values and not extra:
            self.doubt(row, "", "", "the row has a time and nothing else; it was left out.")
            return
        self._test(row, engine, taken, values)
        self.result.entries.append(
            self.entry("reading", engine, taken, offset, self._body(values, extra), extra.get("person", ""))
        )

    def value(self, row: SheetRow, head: str, target: Target, engine: str, key: str, text: str) -> Value:
        point, unit, counter = self._point(engine, key, target)
        value, findings = read_typed(text, point, self.habits[engine], source=SOURCE, unit=unit, counter=counter)
        for finding in findings:
            self.doubt(row, head, text, finding.sentence)
        if value is None:
            return Value(
                state=State.NOT_READ, reason="not understood", text=text, source=SOURCE, findings=(NOT_UNDERSTOOD,)
            )
        return value.accepting(*(finding.key for finding in findings))

    def _point(self, engine: str, key: str, target: Target) -> tuple[ReadingDefinition, str, Counter | None]:
        found = self.cached.get((engine, key))
        if found is None:
            name, _, place = key.partition(".")
            point, unit = self.plant.points[name], target.unit
            meter = next((meter for meter in self.plant.meters if meter.key == name and meter.id == place), None)
            if meter is not None:
                point, unit = meter_point(self.plant, meter), ""
            counted = counter_of(self.plant, engine, key)
            found = self.cached[engine, key] = (point, unit, counted[0] if counted else None)
        return found

    @staticmethod
    def _idle(values: dict[str, Value], idle: State | None) -> dict[str, Value]:
        """One `stopped` or `S/B` in a row without a running engine's numbers says it of the engine."""
        running = {"engine_speed", "shaft_power", "generator_power"}
        if idle is None or any(value.number and key in running for key, value in values.items()):
            return values
        word = "stopped" if idle is State.STOPPED else "stand-by"
        return {"engine_state": Value(word=word, text=word, source=SOURCE)} | values

    def _test(self, row: SheetRow, engine_id: str, taken: datetime, values: dict[str, Value]) -> None:
        engine = self.plant.engine(engine_id)
        state = values.get("engine_state")
        running = state is None or state.word == "running"
        heads = {target.for_engine(engine_id): head for head, target in self.columns.columns.items()}
        for key, value in list(values.items()):
            if value.number is None:
                continue
            point = self.plant.point(key)
            found = list(span_findings(value, point, engine, running=running))
            if point.kind == "counter":
                before = self.last.get((engine_id, key))
                counter = counter_of(self.plant, engine_id, key)
                if before is not None and counter is not None:
                    hours = (taken - before[1]).total_seconds() / 3600
                    found += counter_findings(value, CounterContext(counter[0], before[0], counter[1], hours))
                self.last[engine_id, key] = (value.number, taken)
            for finding in found:
                self.doubt(row, heads.get(key, key), value.text, finding.sentence)
            if found:
                values[key] = value.accepting(*(finding.key for finding in found))

    def _body(self, values: dict[str, Value], extra: Mapping[str, str]) -> dict[str, object]:
        if "lot" in extra:
            values["lot"] = Value(word=extra["lot"], text=extra["lot"], source=SOURCE)
        occasion = extra.get("occasion", self.columns.occasion)
        body = reading_body(occasion if occasion in OCCASIONS else self.columns.occasion, values)
        if "remark" in extra:
            body["remark"] = extra["remark"]
        return body


class _Events(_Reader):
    """Rows that say what happened: an event, or work done."""

    def take(self, row: SheetRow) -> None:
        when = self.taken(row)
        if when is None:
            return
        taken, offset = when
        body: dict[str, object] = {}
        for head, target in self.columns.columns.items():
            text = self.cell(row, head)
            if text and target.key != "ignore":
                body[target.key] = self.columns.words.get(text, text) if target.key == "event" else text
                if target.key == "event" and text in self.columns.words:
                    body["remark"] = text
        subject = str(body.pop("engine", self.columns.engine or "plant"))
        if subject != "plant" and subject not in {engine.id for engine in self.plant.engines}:
            self.doubt(row, "engine", subject, "no engine of this plant.", stops=True)
            return
        word = str(body.get("event", ""))
        kind = "work" if word in WORK_WORDS else "event"
        if word not in WORK_WORDS and word not in EVENT_WORDS:
            self.doubt(
                row, "event", word, "no word of the program for what happened: name it under [words].", stops=True
            )
            return
        if kind == "work":
            body["work"] = body.pop("event")
        for key in ("closing", "opening"):
            if key in body:
                try:
                    body[key] = float(str(body[key]).replace(",", "."))
                except ValueError:
                    self.doubt(row, key, str(body[key]), "a counter reading is a number.", stops=True)
                    return
        person = str(body.pop("person", ""))
        self.result.entries.append(self.entry(kind, subject, taken, offset, body, person))


WORK_WORDS = frozenset(
    {
        "overhaul", "turbocharger_overhaul", "turbocharger_cleaning", "cooler_cleaning", "injectors_renewed",
        "fuel_pumps_overhauled", "unit_overhauled", "fuel_valve_exchanged", "hull_cleaned", "propeller_cleaned",
        "dry_dock", "filter_changed",
    }
)  # fmt: skip
EVENT_WORDS = frozenset(
    {
        "start", "stop", "trip", "outage", "SBE", "COSP", "EOSP", "FWE", "change_over", "instrument_exchanged",
        "instrument_adjusted", "instrument_doubted", "setting_changed", "mode_changed", "turbine_washed",
        "compressor_washed", "soot_blown", "heavy_weather", "ice", "shallow_water", "unit_cut_out", "unit_cut_in",
    }
)  # fmt: skip


class _Lots(_Reader):
    """Rows that are fuel lots: the analysis, and when the lot came into use."""

    def take(self, row: SheetRow) -> None:
        body: dict[str, object] = {}
        in_use = ""
        for head, target in self.columns.columns.items():
            text = self.cell(row, head)
            if not text or target.key == "ignore":
                continue
            if target.key == "in_use_from":
                in_use = text
            elif target.key in ("lot", "grade", "remark"):
                body[target.key] = text
            else:
                try:
                    body[target.key] = float(text.replace(",", "."))
                except ValueError:
                    self.doubt(row, head, text, "a number is expected.", stops=True)
                    return
        lot = str(body.get("lot", ""))
        if not lot:
            self.doubt(row, "", "", "the row names no lot.", stops=True)
            return
        density = body.get("density15_kg_m3")
        if isinstance(density, float) and 0.6 <= density <= 1.1:
            body["density15_kg_m3"] = density * 1000
            self.doubt(row, "density15_kg_m3", f"{density}", f"read as {density * 1000:g} kg/m3 (kg/L typed).")
        try:
            taken, offset = parse_moment(in_use, self.fixed_offset, self.columns.date_order)
        except TimeRefused as error:
            self.doubt(row, "in_use_from", in_use, str(error), stops=True)
            return
        self.result.entries.append(self.entry("lot", lot, taken, offset, body))
        engines = (
            [self.columns.engine]
            if self.columns.engine
            else [engine.id for engine in self.plant.engines if engine.fuel != "gas"]
        )
        change = {"event": "change_over", "lot": lot, "engines": engines}
        self.result.entries.append(self.entry("event", "plant", taken, offset, change))


def without_known(entries: Iterable[NewEntry], book: Iterable[Entry]) -> tuple[list[NewEntry], int, list[NewEntry]]:
    """(new ones, how many stand in the book already, those that say something else than the book).

    The same file twice adds nothing: an entry is known by kind, subject, moment and, beside readings, by content.
    """
    known: dict[tuple[str, str, datetime, str], set[str]] = {}
    for old in book:
        known.setdefault(_identity(old.kind, old.subject, old.taken_utc, old.body), set()).add(_content(old.body))
    fresh: list[NewEntry] = []
    differing: list[NewEntry] = []
    same = 0
    for entry in entries:
        identity = _identity(entry.kind, entry.subject, entry.taken_utc, entry.body)
        if identity not in known:
            fresh.append(entry)
            known[identity] = {_content(entry.body)}
        elif _content(entry.body) in known[identity]:
            same += 1
        else:
            differing.append(entry)
    return fresh, same, differing


def _identity(kind: str, subject: str, taken: datetime, body: Mapping[str, object]) -> tuple[str, str, datetime, str]:
    what = "" if kind == "reading" else str(body.get("event") or body.get("work") or "")
    return kind, subject, taken.replace(microsecond=0), what


def _content(body: Mapping[str, object]) -> str:
    return canonical_json({key: value for key, value in body.items() if key not in ("file", "file_digest")})
