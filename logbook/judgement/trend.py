"""A first trend: daily points of the excess inside segments, with the robust slope and its interval.

A trend lives inside one segment: between two events that are borders for the figure. A point is one engine's
comparable spans of one mode and one UTC day, pooled: sums first, divided last.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import pandas as pd

from logbook.judgement.borders import ends_efficiency
from logbook.judgement.events import Event
from logbook.judgement.figures import Worked
from logbook.judgement.table import Floats
from logbook.physics import trend as statistics
from logbook.physics import uncertainty

MJ_KWH = 3.6
STEADY_POINTS = 0.05
"""A slope whose whole interval lies within so many points in 1,000 h is called steady."""
HOURS_PER_SLOPE = 1000.0


@dataclass(frozen=True, slots=True)
class Segment:
    """One stretch between two borders, and what can be said of it."""

    figure: str
    axis: str
    from_utc: str
    to_utc: str
    opened_by: str
    """kind of the event that opened it; empty: the log begins"""
    n: int
    slope: float | None
    """[points of efficiency per 1,000 running hours]; None where too few"""
    low: float | None
    high: float | None
    call: str
    """`growing`, `shrinking`, `steady` or `cannot tell yet`"""
    mean: float
    """of the excess [fraction]"""
    more_readings_needed: int | None
    shape_differs: bool
    excess_fuel_t: float
    u_excess_fuel_t: float
    compared_hours: float


@dataclass(frozen=True)
class Trend:
    """Daily points of one engine and the segments they fall into."""

    points: pd.DataFrame
    """columns: at_utc, hours (running), excess_gap, sfoc_deviation, load_fraction, lot, energy_kwh, segment"""
    segments: tuple[Segment, ...]
    events: tuple[Event, ...]
    """borders and marks, in order of time"""
    running_hours_at: tuple[tuple[float, float], ...]
    """(hours since 1970, running hours) to place events on the axis"""


def running_hours(worked: Worked) -> Floats:
    """Running hours at each reading: summed over the spans, beginning at the first hour counter reading."""
    counter = worked.table.column("engine_running_hours")
    total = np.cumsum(np.nan_to_num(np.where(worked.spans.begin >= 0, worked.spans.running_h, 0.0)))
    read = np.flatnonzero(np.isfinite(counter))
    base = counter[read[0]] - total[read[0]] if read.size else 0.0
    return np.asarray(total + base)


def trend_of(worked: Worked) -> Trend:
    """The trend of the excess of one engine over its whole log."""
    frame = worked.frame
    hours = running_hours(worked)
    wanted = frame["comparable"].to_numpy(bool) & np.isfinite(frame["excess_gap"].to_numpy(float))
    table = pd.DataFrame(
        {
            "day": frame["at_utc"].str.slice(0, 10),
            "mode": frame["operating_mode"],
            "source": frame["power_source"],
            "lot": frame["lot"],
            "end_h": worked.spans.end_h,
            "hours": hours,
            "energy": worked.power.energy_kwh,
            "heat": worked.power.energy_kwh * MJ_KWH / frame["brake_thermal_efficiency"],
            "expected": worked.power.energy_kwh * MJ_KWH
            / (frame["brake_thermal_efficiency"] + frame["excess_gap"]),
            "load": frame["load_fraction"] * worked.power.energy_kwh,
            "running": worked.spans.running_h,
            "fuel": worked.power.energy_kwh * frame["sfoc_g_kwh"] / 1e6,
        }
    )[wanted]  # fmt: skip
    grouped = table.groupby(["day", "mode", "source"], sort=False)
    sums = grouped[["energy", "heat", "expected", "load", "running", "fuel"]].sum()
    points = pd.DataFrame(
        {
            "end_h": grouped["end_h"].mean(),
            "hours": grouped["hours"].mean(),
            # Pooled: what the day's energy would have needed as heat by the reference, and what it did need.
            "excess_gap": sums["energy"] * MJ_KWH * (1 / sums["expected"] - 1 / sums["heat"]),
            "sfoc_deviation": sums["heat"] / sums["expected"] - 1,
            "load_fraction": sums["load"] / sums["energy"],
            "energy_kwh": sums["energy"],
            "running_h": sums["running"],
            "excess_fuel_t": sums["fuel"] * (1 - sums["expected"] / sums["heat"]),
            "lot": grouped["lot"].last(),
        }
    ).reset_index().sort_values("end_h", ignore_index=True)  # fmt: skip
    borders = _borders(worked.events, points)
    times = np.array([moment for moment, _ in borders], float)
    points["segment"] = np.searchsorted(times, points["end_h"].to_numpy(float), "right")
    segments = []
    for number, part in points.groupby("segment"):
        index = int(str(number))
        opened_by = borders[index - 1][1] if index else ""
        segments.append(_segment(worked, part, opened_by))
    kinds = tuple(event for event in worked.events if event.kind)
    at = tuple(zip(worked.spans.end_h.tolist(), hours.tolist(), strict=True))
    return Trend(points, tuple(segments), kinds, at)


def _borders(events: Sequence[Event], points: pd.DataFrame) -> list[tuple[float, str]]:
    """(hours since 1970, kind) of everything that ends a segment."""
    found = [(event.hours, event.kind) for event in events if ends_efficiency(event.kind, event.instrument)]
    sources = points["source"].tolist()
    ends = points["end_h"].tolist()
    for before, after, moment in zip(sources, sources[1:], ends[1:], strict=False):
        if before != after:
            found.append((moment - 1e-6, "power_source_changed"))
    return sorted(found)


def _segment(worked: Worked, part: pd.DataFrame, opened_by: str) -> Segment:
    y = part["excess_gap"].to_numpy(float) * 100
    x = part["hours"].to_numpy(float)
    slope = low = high = None
    call, more = "cannot tell yet", None
    shape = False
    if len(part) >= statistics.LEAST_POINTS and np.ptp(x) > 0:
        first = statistics.theil_sen(y, x)
        n_eff = uncertainty.effective_number(len(y), uncertainty.autocorrelation(y - first.slope * x))
        fit = statistics.theil_sen(y, x, n_effective=max(n_eff, 3.0))
        u_lot = (
            float(np.nanmedian(worked.lots.relative_u))
            * float(np.nanmean(worked.frame["brake_thermal_efficiency"]))
            * 100
        )
        lots = part["lot"].to_numpy(str)
        # What one lot's heating value is wrong by does not average out inside the lot: it widens the interval.
        by_lots = 1.96 * uncertainty.slope(x, lots, 0.0, u_lot) if np.isfinite(u_lot) else 0.0
        half_low, half_high = np.hypot(fit.slope - fit.low, by_lots), np.hypot(fit.high - fit.slope, by_lots)
        slope = fit.slope * HOURS_PER_SLOPE
        low, high = slope - half_low * HOURS_PER_SLOPE, slope + half_high * HOURS_PER_SLOPE
        if low > 0:
            call = "growing"
        elif high < 0:
            call = "shrinking"
        elif max(-low, high) <= STEADY_POINTS:
            call = "steady"
        else:
            more = _more_needed(len(y), slope, low, high)
        if len(part) >= statistics.SHAPE_LEAST_POINTS and np.ptp(part["load_fraction"]) > 0:
            shape = statistics.shape_test(x, part["load_fraction"] * 100, y).differs
    elif len(part):
        more = statistics.LEAST_POINTS - len(part)
    fuel = float(part["excess_fuel_t"].sum())
    u = float(np.nanmean(worked.frame["u_excess_gap"] / worked.frame["brake_thermal_efficiency"]))
    consumed = float((part["excess_fuel_t"] * (1 + part["sfoc_deviation"]) / part["sfoc_deviation"]).abs().sum())
    return Segment(
        figure="excess_gap",
        axis="running_h",
        from_utc=_utc(part["end_h"].min()),
        to_utc=_utc(part["end_h"].max()),
        opened_by=opened_by,
        n=len(part),
        slope=slope,
        low=low,
        high=high,
        call=call,
        mean=float(np.average(part["excess_gap"], weights=part["energy_kwh"])),
        more_readings_needed=more,
        shape_differs=shape,
        excess_fuel_t=fuel,
        u_excess_fuel_t=u * consumed,
        compared_hours=float(part["running_h"].sum()),
    )


def _more_needed(n: int, slope: float, low: float, high: float) -> int:
    """Days more, about, until a slope of this size would stand clear of zero: its interval falls with n^1.5."""
    half = (high - low) / 2
    if slope == 0 or not np.isfinite(half):
        return n
    return int(max(1, np.ceil(n * ((half / abs(slope)) ** (2 / 3) - 1)))) if half > abs(slope) else 1


def _utc(hours: float) -> str:
    return pd.Timestamp(hours, unit="h", tz="UTC").strftime("%Y-%m-%dT%H:%M:%SZ")
