"""Where the fuel's energy goes, now, by the reference and over the last month, on one scale."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import isfinite
from typing import Any

import numpy as np
import pandas as pd

from logbook.answers.headline import headline
from logbook.book.entry import Entry
from logbook.judgement.figures import work_out
from logbook.plant.records import Plant

MONTH_DAYS = 30


@dataclass(frozen=True, slots=True)
class Rung:
    """One rung [0..1] in each of the three columns; NaN where it cannot be had."""

    name: str
    now: float
    reference: float
    month: float
    u_now: float
    note: str = ""


@dataclass(frozen=True)
class LadderAnswer:
    """The ladder of one engine."""

    engine: str
    at_utc: str
    """of the last comparable reading"""
    headline: list[str]
    rungs: list[Rung]
    """from top to bottom"""
    widths: list[tuple[str, float, float]]
    """(what lies between two rungs, now, last month) [0..1]; they add up with the brake efficiency to 1"""
    notes: list[str]


def ladder(plant: Plant, entries: Sequence[Entry], engine_id: str) -> LadderAnswer | None:
    """The ladder as of the last comparable reading; None when there is none."""
    worked = work_out(plant, entries, engine_id)
    frame = worked.frame
    comparable = frame[frame["comparable"]]
    if comparable.empty:
        return None
    row: dict[str, Any] = {str(key): value for key, value in comparable.iloc[-1].items()}
    last = pd.Timestamp(row["at_utc"])
    at = pd.to_datetime(comparable["at_utc"])
    month = comparable[at > last - pd.Timedelta(days=MONTH_DAYS)]
    energy = worked.power.energy_kwh[month.index.to_numpy()]
    # Efficiency of a period: sums first, divided last. Bound and reference are weighted with the fuel's energy.
    fuel_energy = energy / month["brake_thermal_efficiency"].to_numpy(float)

    def pooled(column: pd.Series[Any]) -> float:
        values = column.to_numpy(float)
        good = np.isfinite(values) & np.isfinite(fuel_energy)
        return float(np.average(values[good], weights=fuel_energy[good])) if good.any() else float("nan")

    sets = frame[np.isfinite(frame["ideal_cycle_efficiency"])]
    ideal = float(sets.iloc[-1]["ideal_cycle_efficiency"]) if len(sets) else float("nan")
    ideal_note = f"as of the last pressure set, {sets.iloc[-1]['at_utc'][:10]}" if len(sets) else "no pressure set yet"
    month_sets = sets[pd.to_datetime(sets["at_utc"]) > last - pd.Timedelta(days=MONTH_DAYS)]
    ideal_month = float(month_sets["ideal_cycle_efficiency"].mean()) if len(month_sets) else float("nan")
    bound, brake = float(row["reversible_bound_ambient"]), float(row["brake_thermal_efficiency"])
    expected = brake + float(row["excess_gap"])
    month_bound, month_brake = pooled(month["reversible_bound_ambient"]), pooled(month["brake_thermal_efficiency"])
    rungs = [
        Rung("all fuel energy (LCV)", 1.0, 1.0, 1.0, 0.0),
        Rung(
            "reversible bound", bound, bound, month_bound, float("nan"),
            f"{_k(row['combustion_temperature_k'])} ({row['combustion_temperature_method']}) to"
            f" {_k(row['ambient_temperature_k'])}",
        ),
        Rung("ideal cycle", ideal, float("nan"), ideal_month, float("nan"), ideal_note),
        Rung("brake", brake, expected, month_brake, float(row["u_brake_thermal_efficiency"])),
    ]  # fmt: skip
    widths = _widths(bound, ideal, brake, month_bound, ideal_month, month_brake)
    notes = [
        "The bound comes from two temperatures; the combustion temperature is assumed, not logged.",
        "The gap is not recoverable loss and is no promise of saving.",
    ]
    exhaust = float(row["reversible_bound_exhaust"])
    if isfinite(exhaust):
        notes.insert(
            0, f"Second bound, to the exhaust {worked.engine.exhaust_at}: {100 * exhaust:.1f} % (outside the sum)."
        )
    return LadderAnswer(engine_id, str(row["at_utc"]), headline(row), rungs, widths, notes)


def _k(value: Any) -> str:
    return f"{float(value):.0f} K" if isfinite(float(value)) else "-"


def _widths(
    bound: float, ideal: float, brake: float, month_bound: float, month_ideal: float, month_brake: float
) -> list[tuple[str, float, float]]:
    """Now and last month. Without an ideal cycle the two widths it divides are one."""
    rows = [("second law, unavoidable between these temperatures", 1 - bound, 1 - month_bound)]
    if isfinite(ideal):
        rows.append(("cycle", bound - ideal, month_bound - month_ideal))
        rows.append(("cylinder and mechanical together", ideal - brake, month_ideal - month_brake))
    else:
        rows.append(("cycle, cylinder and mechanical together", bound - brake, month_bound - month_brake))
    rows.append(("brake, to the shaft", brake, month_brake))
    return rows
