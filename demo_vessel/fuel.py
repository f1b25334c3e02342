"""Fuel lots: what their papers say, what is true of them, and how they expand and mix.

Density here follows a thermal expansion of our own (an expansion coefficient that falls straight with density), not
the published tables: the two agree within 0.05 % of mass.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from demo_vessel.records import minute_of


@dataclass(frozen=True, slots=True)
class Lot:
    id: str
    grade: str
    port: str
    delivered: str
    """UTC"""
    in_use: str
    """UTC; empty: cut in at the border of the control area"""
    density15_kg_m3: float
    sulphur_percent: float
    water_percent: float
    ash_percent: float
    viscosity_cst: float
    """at 50 degC, of distillate at 40 degC"""
    true_lcv_mj_kg: float
    laboratory_lcv_mj_kg: float | None = None

    @property
    def distillate(self) -> bool:
        return self.grade == "DMA"


_R = "RMG 380"
LOTS = (
    Lot("R01", _R, "Durban", "2024-09-25 14:00", "2024-09-28 20:00", 948.2, 0.46, 0.18, 0.020, 158, 41.511),
    Lot("R02", _R, "Singapore", "2024-10-17 06:00", "2024-10-22 02:30", 957.6, 0.47, 0.12, 0.025, 231, 41.409),
    Lot("R03", _R, "Callao", "2024-11-29 16:00", "2024-12-05 13:00", 951.3, 0.44, 0.20, 0.018, 189, 41.538),
    Lot("R04", _R, "Fujairah", "2025-01-31 09:00", "2025-02-04 05:15", 963.9, 0.48, 0.24, 0.031, 262, 41.219),
    Lot("R05", _R, "Rotterdam", "2025-02-23 08:00", "2025-02-26 12:00", 938.7, 0.45, 0.10, 0.014, 122, 41.720),
    Lot("R06", _R, "Santos", "2025-03-17 12:00", "2025-03-24 08:40", 945.1, 0.41, 0.28, 0.020, 147, 41.487, 41.51),
    Lot("R07", _R, "Singapore", "2025-05-03 03:00", "2025-05-08 01:20", 966.4, 0.47, 0.15, 0.028, 288, 41.357),
    Lot("R08", _R, "Singapore", "2025-06-28 20:00", "2025-07-03 07:10", 954.8, 0.46, 0.21, 0.024, 205, 41.461),
    Lot("R09", _R, "Fujairah", "2025-07-12 11:00", "2025-08-01 10:00", 960.2, 0.49, 0.16, 0.030, 247, 41.438),
    Lot("R10", _R, "Rotterdam", "2025-09-02 07:00", "2025-09-04 10:00", 936.5, 0.43, 0.08, 0.012, 115, 41.749),
    Lot("R11", _R, "Singapore", "2025-10-22 02:00", "2025-10-25 06:30", 968.8, 0.47, 0.30, 0.034, 301, 41.231, 41.26),
    Lot("R12", _R, "Qingdao", "2025-11-01 05:00", "2025-12-06 20:10", 949.9, 0.42, 0.14, 0.020, 176, 41.552),
    Lot("R13", _R, "Rotterdam", "2026-01-24 10:00", "2026-01-27 09:00", 941.3, 0.45, 0.11, 0.016, 131, 41.655),
    Lot("R14", _R, "Fujairah", "2026-03-19 08:00", "2026-03-23 04:45", 962.7, 0.48, 0.22, 0.029, 255, 41.336),
    Lot("R15", _R, "Qingdao", "2026-04-13 02:00", "2026-04-18 09:20", 971.4, 0.49, 0.35, 0.038, 334, 40.366),
    Lot("R16", _R, "Newcastle", "2026-06-10 03:00", "2026-06-14 18:30", 947.6, 0.44, 0.17, 0.021, 163, 41.562),
    Lot("R17", _R, "Singapore", "2026-07-07 06:00", "2026-07-11 15:50", 958.9, 0.47, 0.19, 0.026, 236, 41.426, 41.45),
    Lot("R18", _R, "Rotterdam", "2026-08-24 09:00", "2026-08-26 11:00", 939.8, 0.44, 0.09, 0.013, 126, 41.722),
    Lot("D01", "DMA", "Durban", "2024-09-27 17:00", "", 846.1, 0.08, 0.01, 0.002, 3.2, 42.779),
    Lot("D02", "DMA", "Rotterdam", "2025-09-02 12:00", "", 851.7, 0.07, 0.01, 0.002, 3.6, 42.717),
)
BY_ID = {lot.id: lot for lot in LOTS}

MIXING_H = {False: 24.0, True: 4.0}
"""Written with a change-over: residual through settling and service tank, distillate from a tank of its own."""
_TIME_CONSTANT_H = {False: 6.0, True: 1.0}


@dataclass(frozen=True, slots=True)
class InUse:
    """What goes to the engines at a moment."""

    density15_kg_m3: float
    true_lcv_mj_kg: float
    viscosity_cst: float
    distillate: bool


@dataclass(frozen=True, slots=True)
class ChangeOver:
    minute: int
    lot: Lot
    mixing_h: float


def change_overs(entered: list[int], left: list[int]) -> list[ChangeOver]:
    """All change-overs in order of time, from the borders of the control area that the voyage crossed."""
    residual = sorted((minute_of(lot.in_use), lot) for lot in LOTS if not lot.distillate)
    distillate = sorted((minute_of(lot.delivered), lot) for lot in LOTS if lot.distillate)
    inside = list(zip(entered, left, strict=False))
    found = [
        ChangeOver(minute, lot, MIXING_H[False])
        for minute, lot in residual
        if not any(begin <= minute <= end for begin, end in inside)
    ]
    for begin, end in inside:
        found.append(ChangeOver(begin, [lot for minute, lot in distillate if minute <= begin][-1], MIXING_H[True]))
        found.append(ChangeOver(end, [lot for minute, lot in residual if minute <= end][-1], MIXING_H[True]))
    return sorted(found, key=lambda change: change.minute)


def in_use(changes: list[ChangeOver], minute: int) -> InUse:
    """The blend at the engines: the lot before fades out of the service tank."""
    past = [change for change in changes if change.minute <= minute]
    lot = past[-1].lot
    fading = 0.0
    if len(past) > 1:
        constant = _TIME_CONSTANT_H[past[-1].lot.distillate or past[-2].lot.distillate]
        fading = math.exp(-(minute - past[-1].minute) / 60.0 / constant)
    old = past[-2].lot if len(past) > 1 else lot

    def mixed(new: float, before: float) -> float:
        return new + fading * (before - new)

    return InUse(
        mixed(lot.density15_kg_m3, old.density15_kg_m3),
        mixed(lot.true_lcv_mj_kg, old.true_lcv_mj_kg),
        mixed(lot.viscosity_cst, old.viscosity_cst),
        lot.distillate,
    )


def density(density15_kg_m3: float, temperature_c: float) -> float:
    """Density [kg/m3] at a temperature."""
    coefficient = 8.31e-4 - 1.06e-6 * (density15_kg_m3 - 850.0)
    grown = coefficient * (temperature_c - 15.0)
    return density15_kg_m3 / (1.0 + grown + 1.3 * grown * grown)


def injection_temperature_c(fuel: InUse) -> float:
    """Temperature at the engine for about 13 cSt; distillate runs unheated."""
    return 42.0 if fuel.distillate else 121.0 + 13.0 * math.log10(fuel.viscosity_cst / 160.0) / math.log10(2.0)
