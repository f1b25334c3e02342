"""The monthly summary as sections of sentences and tables; the renderers only set them."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass, field
from datetime import UTC, datetime, timedelta
from math import isfinite
from typing import Any

import numpy as np
import pandas as pd

from logbook.answers.cautions import CAUTIONS, STATUS
from logbook.answers.entries import content, ship_time
from logbook.answers.trend import segment_line
from logbook.book.entry import Entry, utc_text
from logbook.judgement.figures import Worked, work_out
from logbook.judgement.flags import FLAGS, MARK, split
from logbook.judgement.trend import trend_of
from logbook.plant.records import Plant

PRINTED_CAUTIONS = (0, 1, 10, 11, 14, 15, 16)


@dataclass(frozen=True, slots=True)
class Table:
    heads: tuple[str, ...]
    rows: Sequence[tuple[str, ...]]


@dataclass
class Section:
    """One numbered part of the summary."""

    title: str
    sentences: list[str] = field(default_factory=list)
    tables: list[Table] = field(default_factory=list)


@dataclass(frozen=True)
class Month:
    plant: str
    title: str
    from_utc: datetime
    to_utc: datetime
    sections: list[Section]


def span_of(month: str, offset_min: int) -> tuple[datetime, datetime]:
    """The UTC instants between which a month of ship time lies. Raises ValueError for a text like 2026-13."""
    first = datetime.strptime(month, "%Y-%m").replace(tzinfo=UTC)
    following = (first + timedelta(days=32)).replace(day=1)
    return first - timedelta(minutes=offset_min), following - timedelta(minutes=offset_min)


def month(
    plant: Plant, entries: Sequence[Entry], title: str, from_utc: datetime, to_utc: datetime, head: tuple[int, str]
) -> Month:
    """Everything the figures of today say about a span of time. Sums first, divided last."""
    inside = [entry for entry in entries if from_utc < entry.taken_utc <= to_utc]
    worked = {engine.id: work_out(plant, entries, engine.id) for engine in plant.engines}
    parts = {name: _rows(found, from_utc, to_utc) for name, found in worked.items()}
    # By the clock: spans over a port stay overlap those of the readings taken in port.
    elapsed = (to_utc - from_utc).total_seconds() / 3600
    sections = [_head(plant, head), _plain(plant, parts)]
    sections += [_counters(parts, elapsed), _efficiency(worked, parts), _trend(worked, from_utc, to_utc)]
    sections += [_remarks(plant, inside), _quality(inside, parts)]
    cautions = Section("Cautions", [f"{number + 1}. {CAUTIONS[number]}" for number in PRINTED_CAUTIONS])
    return Month(plant.name, title, from_utc, to_utc, [*sections, cautions])


def _rows(found: Worked, from_utc: datetime, to_utc: datetime) -> pd.DataFrame:
    """The figures of the span with energy and heat beside them."""
    frame = found.frame.assign(
        energy_kwh=found.power.energy_kwh, mass_kg=found.fuel.mass_kg, heat_mj=found.fuel.energy_mj
    )
    common = frame["flags"].str.contains("common_fuel_meter")
    frame.loc[common, ["mass_kg", "heat_mj"]] = np.nan
    return frame[(frame["at_utc"] > utc_text(from_utc)) & (frame["at_utc"] <= utc_text(to_utc))]


def _head(plant: Plant, head: tuple[int, str]) -> Section:
    table = Table(
        ("engine", "rated kW", "rpm", "cylinders", "cycle", "fuel"),
        [
            (e.id, f"{e.rated_power_kw:.0f}", f"{e.rated_speed_rpm:.0f}", str(e.cylinders), e.cycle, e.fuel)
            for e in plant.engines
        ],
    )
    return Section(
        "Head",
        [STATUS, f"Head of the book: entry {head[0]}, digest {head[1]}.", f"plant.toml digest {plant.digest}."],
        [table],
    )


def _compared(rows: pd.DataFrame) -> dict[str, float] | None:
    """Pooled figures of the compared readings with a reference; None where there are none."""
    part = rows[rows["comparable"] & np.isfinite(rows["excess_gap"])]
    if part.empty:
        return None
    energy, heat = part["energy_kwh"].sum(), part["heat_mj"].sum()
    expected = (part["energy_kwh"] * 3.6 / (part["brake_thermal_efficiency"] + part["excess_gap"])).sum()
    fuel = (part["energy_kwh"] * part["sfoc_g_kwh"] / 1e6).sum()
    u = float((part["u_excess_gap"] / part["brake_thermal_efficiency"]).mean())
    return {
        "n": float(len(part)),
        "energy": float(energy),
        "efficiency": float(energy * 3.6 / heat),
        "deviation": float(heat / expected - 1),
        "excess_points": float(energy * 3.6 * (1 / expected - 1 / heat)),
        "excess_t": float(fuel * (1 - expected / heat)),
        "u_excess_t": float(fuel * u),
        "bound": _mean(part["reversible_bound_ambient"]),
        "hot": _mean(part["combustion_temperature_k"]),
        "cold": _mean(part["ambient_temperature_k"]),
        "load": float((part["load_fraction"] * part["energy_kwh"]).sum() / energy),
    }


def _mean(column: pd.Series[Any]) -> float:
    good = column[np.isfinite(column)]
    return float(good.mean()) if len(good) else float("nan")


def _plain(plant: Plant, parts: dict[str, pd.DataFrame]) -> Section:
    section = Section("Plain page")
    price = next((grade.price_per_t for grade in plant.fuels if grade.price_per_t), None)
    for name, rows in parts.items():
        pooled = _compared(rows)
        if pooled is None:
            section.sentences.append(f"{name}: no reading of this span can be compared ({_why(rows)}).")
            continue
        u = 2 * pooled["u_excess_t"]
        money = f", {pooled['excess_t'] * price:.0f} {plant.currency}" if price and pooled["excess_t"] > u else ""
        zero = " (not different from zero)" if abs(pooled["excess_t"]) <= u else money
        section.sentences.append(
            f"{name}: {100 * pooled['deviation']:+.1f} % against its own reference at equal load, that is"
            f" {pooled['excess_t']:+.1f} +- {u:.1f} t over {pooled['n']:.0f} readings compared{zero}."
        )
    return section


def _why(rows: pd.DataFrame) -> str:
    counts = Counter(key for flags in rows["flags"] for key in split(flags) if FLAGS[key].kind != MARK)
    return "; ".join(f"{FLAGS[key].sentence}: {count}" for key, count in counts.most_common(3)) or "it did not run"


def _counters(parts: dict[str, pd.DataFrame], elapsed: float) -> Section:
    rows = []
    for name, part in parts.items():
        hours, energy = float(part["running_h"].sum()), float(part["energy_kwh"].sum())
        mass = float(part["mass_kg"].sum()) / 1000
        per_day = 24 * mass / elapsed if elapsed else float("nan")
        rows.append((name, f"{elapsed:.1f}", f"{hours:.1f}", f"{energy / 1000:.1f}", f"{mass:.1f}", f"{per_day:.2f}"))
    return Section(
        "Hours, energy and fuel",
        ["Fuel of a common meter is not divided between its engines; spans without a difference are left out."],
        [Table(("engine", "elapsed h", "running h", "brake MWh", "fuel t", "t per 24 h"), rows)],
    )


def _efficiency(worked: dict[str, Worked], parts: dict[str, pd.DataFrame]) -> Section:
    rows = []
    for name, part in parts.items():
        found = _compared(part)
        if found is None:
            continue
        gap = found["bound"] - found["efficiency"]
        method = worked[name].combustion.method
        rows.append(
            (
                name, f"{100 * found['load']:.0f}", f"{100 * found['efficiency']:.2f}",
                f"{100 * found['excess_points']:+.2f}", f"{100 * found['deviation']:+.2f}",
                _number(100 * found["bound"]), _number(100 * gap), _number(found["hot"], 0), _number(found["cold"], 0),
                method,
            )
        )  # fmt: skip
    heads = (
        "engine", "load %", "brake eff. %", "excess points", "excess %", "bound %", "gap points", "T hot K", "T cold K",
        "combustion temperature by",
    )  # fmt: skip
    sentences = [
        "Compared readings only, pooled. The bound comes from the two temperatures beside it; the gap is no loss."
    ]
    return Section("Efficiency", sentences, [Table(heads, rows)])


def _number(value: float, digits: int = 2) -> str:
    return f"{value:.{digits}f}" if isfinite(value) else ""


def _trend(worked: dict[str, Worked], from_utc: datetime, to_utc: datetime) -> Section:
    section = Section("Trend of the excess")
    for name, found in worked.items():
        for segment in trend_of(found).segments:
            if segment.to_utc > utc_text(from_utc) and segment.from_utc <= utc_text(to_utc):
                section.sentences.append(f"{name}: {segment_line(segment)}")
    if not section.sentences:
        section.sentences.append("No segment with comparable readings touches this span.")
    return section


def _remarks(plant: Plant, inside: Sequence[Entry]) -> Section:
    rows = []
    for entry in inside:
        if entry.kind in ("work", "event", "remark", "setting") or entry.body.get("remark"):
            said = str(entry.body.get("remark", "")) if entry.kind == "reading" else content(plant, entry)
            rows.append((ship_time(entry), entry.subject, entry.kind, said, entry.person))
    return Section("Remarks, events and work done", [], [Table(("ship time", "of", "kind", "what", "by"), rows)])


def _quality(inside: Sequence[Entry], parts: dict[str, pd.DataFrame]) -> Section:
    readings = [entry for entry in inside if entry.kind == "reading"]
    amended = sum(entry.replaces is not None for entry in inside)
    section = Section("Data quality", [f"{len(readings)} readings, {amended} amendments in this span."])
    rows = []
    for name, part in parts.items():
        counts = Counter(key for flags in part["flags"] for key in split(flags))
        for key, count in counts.most_common():
            rows.append((name, str(count), FLAGS[key].kind, FLAGS[key].sentence))
    section.tables.append(Table(("engine", "readings", "kind", "reason"), rows))
    return section
