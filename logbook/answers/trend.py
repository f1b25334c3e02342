"""The trend of the excess in words, and as the records that a program may want."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from dataclasses import asdict, dataclass
from math import isfinite
from typing import Any

import numpy as np
import pandas as pd

from logbook.answers.headline import excess_of
from logbook.book.entry import Entry
from logbook.judgement.borders import INSTRUMENT_EVENTS, MARKS, ends_efficiency, word
from logbook.judgement.companions import Companion, companions_of
from logbook.judgement.events import Event
from logbook.judgement.figures import Worked, work_out
from logbook.judgement.flags import FLAGS, MARK, split
from logbook.judgement.trend import Segment, Trend, trend_of
from logbook.plant.records import Plant


@dataclass(frozen=True)
class AxisEvent:
    """An event where it falls on the axis of running hours."""

    hours: float
    word: str
    border: bool
    at_utc: str


@dataclass(frozen=True)
class TrendAnswer:
    """All that the Trend pane and the command say of one engine."""

    engine: str
    sentences: list[str]
    hours: list[float]
    excess_points: list[float]
    events: list[AxisEvent]
    segments: tuple[Segment, ...]
    companions: list[Companion]


def trend(plant: Plant, entries: Sequence[Entry], engine_id: str) -> TrendAnswer:
    """The trend of one engine since its last restoration, with all earlier segments. Raises KeyError."""
    worked = work_out(plant, entries, engine_id)
    found = trend_of(worked)
    return TrendAnswer(
        engine=engine_id,
        sentences=_sentences(plant, worked, found),
        hours=found.points["hours"].tolist(),
        excess_points=(found.points["excess_gap"] * 100).tolist(),
        events=_axis_events(found),
        segments=found.segments,
        companions=companions_of(worked),
    )


def _sentences(plant: Plant, worked: Worked, found: Trend) -> list[str]:
    if not found.segments:
        counts = Counter(key for flags in worked.frame["flags"] for key in split(flags) if FLAGS[key].kind != MARK)
        reasons = "; ".join(f"{FLAGS[key].sentence} ({count})" for key, count in counts.most_common(3))
        return [f"No reading of {worked.engine.id} can be compared yet. Most often: {reasons or 'no readings'}."]
    segment = found.segments[-1]
    since = f"since {segment.from_utc[:10]}"
    opened = f" ({word(segment.opened_by)})" if segment.opened_by else " (the log begins)"
    lines = [_call(segment, since, opened)]
    latest = worked.frame[worked.frame["comparable"]].tail(1).to_dict("records")
    excess = excess_of({str(key): value for key, value in latest[0].items()}) if latest else None
    lines.append(
        f"Mean excess {100 * segment.mean:+.2f} points over {segment.n} days compared"
        f" ({segment.compared_hours:.0f} running hours); last reading"
        f" {excess.g_kwh:+.1f} g/kWh." if excess else f"{segment.n} days compared."
    )  # fmt: skip
    lines.append(_fuel(plant, segment))
    if segment.shape_differs:
        lines.append("The excess depends on load: the curve's shape does not fit this engine; build an own baseline.")
    if segment.mean < 0 and abs(segment.mean) > 2 * _u_mean(worked):
        lines.append("Better than clean: look at instrument and fuel first, then at Pmax (early ignition).")
    return lines


def _u_mean(worked: Worked) -> float:
    values = worked.frame.loc[worked.frame["comparable"], "u_excess_gap"]
    return float(values.mean()) if len(values) else float("nan")


def _call(segment: Segment, since: str, opened: str) -> str:
    if segment.slope is None or segment.low is None or segment.high is None:
        need = f"; about {segment.more_readings_needed} more days" if segment.more_readings_needed else ""
        return f"Excess: cannot tell yet, {segment.n} days {since}{opened}{need}."
    interval = f"({segment.low:+.2f} to {segment.high:+.2f}) points in 1,000 h"
    if segment.call == "cannot tell yet":
        need = f"; about {segment.more_readings_needed} more days" if segment.more_readings_needed else ""
        return f"Excess: cannot tell yet {since}{opened}: {segment.slope:+.2f} {interval}{need}."
    return f"Excess {segment.call} {segment.slope:+.2f} {interval} {since}{opened}."


def _fuel(plant: Plant, segment: Segment) -> str:
    fuel, u = segment.excess_fuel_t, 2 * segment.u_excess_fuel_t
    if not isfinite(fuel) or not isfinite(u):
        return "Excess fuel cannot be had."
    said = f"Excess fuel since then {fuel:+.1f} +- {u:.1f} t over the readings compared"
    price = next((grade.price_per_t for grade in plant.fuels if grade.price_per_t), None)
    if abs(fuel) <= u:
        return f"{said}: not different from zero."
    if fuel < 0:
        return f"{said}; no saving is printed for it."
    return f"{said}, {fuel * price:.0f} {plant.currency}." if price else f"{said}."


def _axis_events(found: Trend) -> list[AxisEvent]:
    if not found.running_hours_at:
        return []
    moments = np.array([moment for moment, _ in found.running_hours_at])
    hours = np.array([at for _, at in found.running_hours_at])
    result = []
    for event in found.events:
        border = ends_efficiency(event.kind, event.instrument)
        if not border and event.kind not in (*MARKS, *INSTRUMENT_EVENTS):
            continue
        at = float(np.interp(event.hours, moments, hours))
        utc = pd.Timestamp(event.hours, unit="h", tz="UTC").strftime("%Y-%m-%d")
        result.append(AxisEvent(at, _event_word(event), border, utc))
    return result


def _event_word(event: Event) -> str:
    lot = event.body.get("lot")
    return f"{word(event.kind)} {lot}" if lot and event.kind == "change_over" else word(event.kind)


def as_record(answer: TrendAnswer) -> dict[str, Any]:
    """For `--json`: names as they are fixed for the outside."""
    segments = []
    for segment in answer.segments:
        record = asdict(segment)
        record["interval"] = [record.pop("low"), record.pop("high")]
        record["slope_per"] = "1000 h"
        record["axis"] = "engine_hours"
        segments.append(record)
    return {"engine": answer.engine, "segments": segments, "changes": []}


def segment_line(segment: Segment) -> str:
    """A segment in one line: span, what opened it, slope, call, excess fuel."""
    slope = "too few" if segment.slope is None else f"{segment.slope:+.2f} ({segment.low:+.2f} to {segment.high:+.2f})"
    opened = word(segment.opened_by) if segment.opened_by else "the log begins"
    return (
        f"{segment.from_utc[:10]} to {segment.to_utc[:10]}  {opened:<28} {segment.n:>4} days  {slope:<26}"
        f" {segment.call:<16} {segment.excess_fuel_t:+.1f} t"
    )
