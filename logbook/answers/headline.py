"""What one reading says: the excess first, then brake efficiency, then bound and gap with their temperatures."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from math import isfinite
from typing import Any

from logbook.judgement.flags import FLAGS, MARK, sentence, split

KG_T, H_DAY = 1000.0, 24.0


@dataclass(frozen=True, slots=True)
class Excess:
    """By how much more an engine burns than its own reference at this load and ambient."""

    g_kwh: float
    relative: float
    t_day: float
    points: float
    """of efficiency, 0..1"""
    u_points: float


def excess_of(row: Mapping[str, Any]) -> Excess | None:
    """The excess of a row of figures; None where it cannot be had."""
    deviation, sfoc = float(row["sfoc_deviation"]), float(row["sfoc_g_kwh"])
    points = float(row["excess_gap"])
    if not isfinite(deviation) or not isfinite(points):
        return None
    if not isfinite(sfoc):
        # Gas metered by volume has no mass: heat at the reference's value stands for it.
        sfoc = float(row["sfoc_corrected_g_kwh"])
    g_kwh = sfoc * deviation / (1 + deviation)
    t_day = g_kwh * float(row["brake_power_kw"]) * H_DAY / 1e6
    return Excess(g_kwh, deviation, t_day, points, float(row["u_excess_gap"]))


def percent(fraction: float, digits: int = 1) -> str:
    return f"{100 * fraction:.{digits}f} %" if isfinite(fraction) else "-"


def headline(row: Mapping[str, Any]) -> list[str]:
    """The answer to one reading, in the order a chief engineer wants it."""
    found = excess_of(row)
    lines = []
    if found is not None:
        lines.append(
            f"Excess {found.g_kwh:+.1f} g/kWh, {100 * found.relative:+.1f} %, {found.t_day:+.2f} t/day"
            f" at {percent(float(row['load_fraction']), 0)} load"
        )
        lines.append(
            f"  in efficiency {100 * found.points:+.1f} +- {200 * found.u_points:.1f} points against its reference"
        )
    else:
        lines.append("Excess: cannot be had for this reading.")
    efficiency = float(row["brake_thermal_efficiency"])
    if isfinite(efficiency):
        u = float(row["u_brake_thermal_efficiency"])
        consumption = float(row["sfoc_g_kwh"])
        shown = f", {consumption:.1f} g/kWh" if isfinite(consumption) else ""
        lines.append(
            f"Brake thermal efficiency {100 * efficiency:.1f} +- {200 * u:.1f} %"
            f" ({float(row['heat_rate_kj_kwh']):.0f} kJ/kWh{shown}) at {float(row['brake_power_kw']):.0f} kW"
        )
    bound = float(row["reversible_bound_ambient"])
    if isfinite(bound):
        lines.append(
            f"Reversible bound {percent(bound)} between {float(row['combustion_temperature_k']):.0f} K"
            f" ({row['combustion_temperature_method']}) and {float(row['ambient_temperature_k']):.0f} K (ambient)"
        )
        lines.append(
            f"Gap {100 * float(row['gap']):.1f} points; of the reference {100 * float(row['gap_reference']):.1f}"
        )
    lines += reasons(str(row["flags"]))
    return lines


def reasons(flags: str) -> list[str]:
    """Every flag of a row in words: refusals first, then marks."""
    keys = split(flags)
    ordered = [key for key in keys if FLAGS[key].kind != MARK] + [key for key in keys if FLAGS[key].kind == MARK]
    return [sentence(key) for key in ordered]
