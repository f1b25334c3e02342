"""Which lot was in the engine in each span, and what it is worth.

A lot is in use from its change-over; until the service tank holds it alone the fuels are mixed.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from logbook.book.entry import Entry
from logbook.judgement.events import Event, overlapping
from logbook.judgement.spans import Spans
from logbook.judgement.table import Bools, Floats
from logbook.physics.fuel import DISTILLATE, RESIDUAL, calorific_value
from logbook.plant.records import Fuel, Plant

LABORATORY, FORMULA, GRADE_DEFAULT = "laboratory", "formula from the analysis", "default of the grade"
"""Where a calorific value comes from, best first."""

CALORIFIC_VALUE_UNCERTAINTY = {LABORATORY: 0.003, FORMULA: 0.005, GRADE_DEFAULT: 0.02, "": np.nan}
"""Relative standard uncertainty, from memory: a measured value, the formula, a default."""

J_PER_MJ = 1e6

HYDROGEN_TO_CARBON = {"residual": 1.55, "distillate": 1.87, "gas": 3.8}
"""Atoms of hydrogen per atom of carbon; moves the cycle temperature by a few kelvin at most."""

DEFAULT_MIXING_HOURS = 24.0
STARTS_OF_GRADES = {"RM": "residual", "DM": "distillate", "DF": "distillate"}
"""How the standard's grades begin, for lots of a grade that plant.toml does not list."""


@dataclass(frozen=True, slots=True)
class Lot:
    """One lot, with the value that its analysis gives it."""

    id: str
    grade: str
    kind: str
    """residual, distillate, gas, other, or empty: not known"""
    entry: int
    """entry of the analysis; 0: from plant.toml"""
    density15_kg_m3: float
    """NaN where not known"""
    lower_calorific_value_mj_kg: float
    lower_calorific_value_mj_m3: float
    """gas, at `gas_condition`; NaN where not known"""
    source: str
    """laboratory, formula from the analysis, default of the grade, or empty: none"""
    gas_condition: str = "Nm3"
    amended: bool = False


NO_LOT = Lot("", "", "", 0, np.nan, np.nan, np.nan, "")


@dataclass(frozen=True, slots=True)
class ChangeOver:
    """From `hours` on the service tank holds this lot; for `mixing_hours` it is mixed with the one before."""

    hours: float
    """since 1970 [h]"""
    lot: str
    mixing_hours: float


@dataclass(frozen=True, slots=True)
class LotsInUse:
    """The lot of each span, as columns; shape (rows,)."""

    lot: NDArray[np.object_]
    """`L01`; empty where none is known"""
    kind: NDArray[np.object_]
    source: NDArray[np.object_]
    entry: NDArray[np.int64]
    density15_kg_m3: Floats
    lower_calorific_value_mj_kg: Floats
    lower_calorific_value_mj_m3: Floats
    at_normal: Bools
    """the value by volume is at 0 degC (else 15 degC)"""
    relative_u: Floats
    """standard uncertainty of the calorific value, relative"""
    hydrogen_to_carbon: Floats
    mixed: Bools
    unknown: Bools
    amended: Bools


def read_lots(entries: Iterable[Entry], plant: Plant) -> dict[str, Lot]:
    """Every lot by its id; of two analyses of one lot the later written holds for the whole of its time."""
    lots: dict[str, Lot] = {}
    for entry in sorted((entry for entry in entries if entry.kind == "lot"), key=lambda entry: entry.number):
        body = entry.body
        name = str(body.get("lot", entry.subject))
        lots[name] = _valued(name, body, plant.fuel(str(body.get("grade", ""))), entry)
    return lots


def _valued(name: str, body: Mapping[str, object], fuel: Fuel | None, entry: Entry) -> Lot:
    grade = str(body.get("grade", ""))
    kind = fuel.kind if fuel else STARTS_OF_GRADES.get(grade[:2].upper(), "")
    density = _number(body, "density15_kg_m3")
    source, value = LABORATORY, _number(body, "lower_calorific_value_mj_kg")
    by_volume = _number(body, "lower_calorific_value_mj_m3")
    if np.isnan(value) and np.isnan(by_volume):
        source, value = FORMULA, _by_formula(kind, density, body)
    if np.isnan(density) and fuel:
        density = _or_nan(fuel.density15_kg_m3)
    if np.isnan(value) and np.isnan(by_volume):
        default = default_lot(fuel)
        source, value, by_volume = (
            default.source,
            default.lower_calorific_value_mj_kg,
            default.lower_calorific_value_mj_m3,
        )
    condition = str(body.get("gas_condition", fuel.gas_condition if fuel else "Nm3"))
    amended = entry.replaces is not None
    return Lot(name, grade, kind, entry.number, density, value, by_volume, source, condition, amended)


def _by_formula(kind: str, density: float, body: Mapping[str, object]) -> float:
    """Calorific value from the analysis [MJ/kg]; NaN where density or sulphur are missing or out of its range.

    Water and ash that the paper does not state count as none.
    """
    sulphur = _number(body, "sulphur_percent")
    if kind not in (RESIDUAL, DISTILLATE) or np.isnan(density + sulphur):
        return np.nan
    water, ash = (np.nan_to_num(_number(body, key)) for key in ("water_percent", "ash_percent"))
    net, _ = calorific_value(kind, np.array([density]), np.array([sulphur]), water, ash)
    return float(net[0]) / J_PER_MJ


def default_lot(fuel: Fuel | None) -> Lot:
    """What is taken while nothing is known but the grade."""
    if fuel is None:
        return NO_LOT
    by_mass, by_volume = _or_nan(fuel.lower_calorific_value_mj_kg), _or_nan(fuel.lower_calorific_value_mj_m3)
    known = not (np.isnan(by_mass) and np.isnan(by_volume))
    source = GRADE_DEFAULT if known else ""
    density = _or_nan(fuel.density15_kg_m3)
    return Lot("", fuel.grade, fuel.kind, 0, density, by_mass, by_volume, source, fuel.gas_condition)


def _number(body: Mapping[str, object], key: str) -> float:
    value = body.get(key)
    return float(value) if isinstance(value, int | float) else np.nan


def _or_nan(value: float | None) -> float:
    return np.nan if value is None else value


def change_overs(
    events: Sequence[Event], lots: Mapping[str, Lot], plant: Plant, engine_id: str, gas: bool
) -> list[ChangeOver]:
    """The change-overs of an engine in order of time, to lots of gas or to all others.

    The first one starts clean: there was no lot before it.
    """
    usual = next(
        (
            tank.mixing_hours
            for tank in plant.tanks
            if tank.use in ("service", "day") and engine_id in (tank.serves or (engine_id,))
        ),
        DEFAULT_MIXING_HOURS,
    )
    tanks = {tank.id: tank.mixing_hours for tank in plant.tanks}
    found: list[ChangeOver] = []
    for event in events:
        if event.kind != "change_over":
            continue
        lot = str(event.body.get("lot", ""))
        if (lots.get(lot, NO_LOT).kind == "gas") is not gas:
            continue
        mixing = event.body.get("mixing_hours", tanks.get(str(event.body.get("tank", "")), usual))
        found.append(ChangeOver(event.hours, lot, float(mixing) if found else 0.0))
    return found


def named_change_overs(named: NDArray[np.object_], hours: Floats) -> list[ChangeOver]:
    """Change-overs as the log's own column tells them: somewhere since the reading that still named the lot before."""
    found: list[ChangeOver] = []
    last, last_hours = "", -np.inf
    for name, moment in zip(named.tolist(), hours.tolist(), strict=True):
        if name and name != last:
            found.append(ChangeOver(last_hours, name, moment - last_hours + DEFAULT_MIXING_HOURS if found else 0.0))
        if name:
            last, last_hours = name, moment
    return found


def lots_in_use(
    changes: Sequence[ChangeOver],
    lots: Mapping[str, Lot],
    default: Lot,
    named: NDArray[np.object_],
    spans: Spans,
) -> LotsInUse:
    """The lot of every span. `default` is taken where no lot is known at all; `named` is the log's own column.

    The lot of a span is the one that came last before its end. A lot that the log names otherwise, one without an
    analysis and a span from before the first known lot leave the lot unknown.
    """
    times = np.array([change.hours for change in changes], float)
    last = np.searchsorted(times, spans.end_h, "left") - 1
    until = np.searchsorted(times, spans.end_h, "right") - 1
    # A reading at the very moment of the first change-over has its lot already.
    last = np.where(last < 0, np.minimum(until, 0), last)
    # Index -1, before any lot, takes the default at the end of the list.
    known = [lots.get(change.lot, replace(NO_LOT, id=change.lot)) for change in changes] + [default]
    begin = np.where(np.isfinite(spans.elapsed_h), spans.begin_h, spans.end_h)
    mixing = [(change.hours, change.hours + change.mixing_hours) for change in changes[1:]]
    mixed = overlapping(mixing, begin, spans.end_h)
    ids = np.array([lot.id for lot in known], dtype=object)
    says_otherwise = (named != "") & (named != ids[last]) & (named != ids[until]) & ~mixed
    before_any = (begin < times[0]) if changes else np.ones(len(named), bool)
    without_analysis = np.array([not lot.entry for lot in known], bool)[last]
    return LotsInUse(
        lot=ids[last],
        kind=np.array([lot.kind for lot in known], dtype=object)[last],
        source=np.array([lot.source for lot in known], dtype=object)[last],
        entry=np.array([lot.entry for lot in known], np.int64)[last],
        density15_kg_m3=np.array([lot.density15_kg_m3 for lot in known], float)[last],
        lower_calorific_value_mj_kg=np.array([lot.lower_calorific_value_mj_kg for lot in known], float)[last],
        lower_calorific_value_mj_m3=np.array([lot.lower_calorific_value_mj_m3 for lot in known], float)[last],
        at_normal=np.array([lot.gas_condition != "Sm3" for lot in known], bool)[last],
        relative_u=np.array([CALORIFIC_VALUE_UNCERTAINTY[lot.source] for lot in known], float)[last],
        hydrogen_to_carbon=np.array([HYDROGEN_TO_CARBON.get(lot.kind, 1.85) for lot in known], float)[last],
        mixed=mixed,
        unknown=before_any | says_otherwise | without_analysis,
        amended=np.array([lot.amended for lot in known], bool)[last],
    )
