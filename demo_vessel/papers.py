"""Everything but readings: events, lots, deliveries, work done, soundings, remarks. Bodies as the book keeps them."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from datetime import datetime
from random import Random
from typing import Any

from demo_vessel.electrical import Switchboard
from demo_vessel.faults import FAULTS, Fault
from demo_vessel.fuel import BY_ID, LOTS, ChangeOver, density
from demo_vessel.records import BEGIN_UTC, END_UTC, MINUTES, minute_of, moment
from demo_vessel.voyage import Kind, Voyage

CHIEF, SECOND, THIRD, FOURTH = "A. Marlow", "B. Tennant", "C. Idris", "D. Ferro"
VOYAGE_EVENTS = ("SBE", "COSP", "EOSP", "FWE")
METER_EXCHANGE = minute_of("2025-10-22 06:30")
"""between two readings: its own entry has the closing and the opening reading"""
HEAVY_WEATHER_BEAUFORT = 7.0

Draft = tuple[str, str, int, dict[str, Any]]
"""kind, subject, minute, body"""
Consumption = Mapping[str, list[tuple[int, float]]]
"""by lot: minute and fuel [kg] of every interval, in order of time"""


def month_begins() -> set[int]:
    """The first minute of every month."""
    begins, day = set(), BEGIN_UTC
    while day < END_UTC:
        begins.add(int((day - BEGIN_UTC).total_seconds()) // 60)
        day = datetime(day.year + day.month // 12, day.month % 12 + 1, 1, tzinfo=day.tzinfo)
    return begins


def offset_text(offset_min: int) -> str:
    sign, minutes = ("-" if offset_min < 0 else "+"), abs(offset_min)
    return f"{sign}{minutes // 60:02d}:{minutes % 60:02d}"


def clock_body(before_min: int, after_min: int) -> dict[str, Any]:
    turn = (after_min - before_min + 720) % 1440 - 720
    said = f"clocks {'advanced' if turn > 0 else 'retarded'} {abs(turn)} min, now UTC{offset_text(after_min)}"
    if abs(after_min - before_min) > 720:
        said += ", date line crossed"
    return {"before_min": before_min, "after_min": after_min, "text": said}


def meter_exchange_body(closing: int, opening: int) -> dict[str, Any]:
    return {
        "event": "instrument_exchanged",
        "instrument": "fuel_meter_return.ME_out",
        "closing": closing,
        "opening": opening,
        "digits": 8,
        "text": "return meter exchanged for the overhauled spare, serial 1174 for 0862",
    }


def voyage_notes(ship: Voyage) -> Iterator[Draft]:
    """Voyage events, start and stop of the main engine, heavy weather."""
    for mark in ship.marks:
        if mark.minute >= MINUTES or mark.event not in VOYAGE_EVENTS:
            continue
        yield "event", "plant", mark.minute, {"event": mark.event, "text": mark.place}
        if mark.event in ("SBE", "FWE"):
            yield "event", "ME", mark.minute, {"event": "start" if mark.event == "SBE" else "stop"}
    for phase in ship.phases:
        if phase.kind is not Kind.SEA:
            continue
        since = None
        for minute in range(phase.begin, min(phase.end, MINUTES - 240), 60):
            rough = ship.beaufort(minute) >= HEAVY_WEATHER_BEAUFORT
            if rough and since is None:
                since = minute
            elif since is not None and (not rough or minute + 60 >= min(phase.end, MINUTES - 240)):
                until = f"{moment(minute):%Y-%m-%dT%H:%M:%SZ}"
                yield "event", "plant", since, {"event": "heavy_weather", "until_utc": until}
                since = None


def set_notes(switchboard: Switchboard) -> Iterator[Draft]:
    """Starts and stops of the generating sets."""
    before = switchboard.at(0).running
    for minute in switchboard.changes[1:]:
        now = switchboard.at(minute).running
        for name in before:
            if name not in now:
                yield "event", name, minute, {"event": "stop"}
        for name in now:
            if name not in before:
                yield "event", name, minute, {"event": "start"}
        before = now


def _burnt_t(consumption: Consumption, lot: str, until: int = MINUTES) -> float:
    return sum(kg for minute, kg in consumption.get(lot, ()) if minute < until) / 1000.0


_LEFT_OVER_T = {"R01": 420.0, "D01": 60.0, "D02": 55.0}
"""stays on board for good"""
_STILL_IN_USE_T = {"R18": 1650.0}


def quantity_t(consumption: Consumption, lot: str) -> float:
    """What was delivered of a lot: what is burnt of it, what stays on board, and to the next 5 t."""
    if lot in _STILL_IN_USE_T:
        return _STILL_IN_USE_T[lot]
    return round((_burnt_t(consumption, lot) + _LEFT_OVER_T.get(lot, 2.0)) / 5.0 + 0.5) * 5.0


def fuel_notes(changes: list[ChangeOver], consumption: Consumption) -> Iterator[Draft]:
    """Delivery notes, analyses, change-overs."""
    for lot in LOTS:
        delivered = minute_of(lot.delivered)
        yield "delivery", lot.id, delivered, {
            "lot": lot.id, "grade": lot.grade, "port": lot.port, "quantity_t": quantity_t(consumption, lot.id),
            "density15_kg_m3": lot.density15_kg_m3, "sulphur_percent": lot.sulphur_percent, "flash_point": ">= 70",
        }  # fmt: skip
        analysis: dict[str, Any] = {
            "lot": lot.id, "grade": lot.grade, "density15_kg_m3": lot.density15_kg_m3,
            "sulphur_percent": lot.sulphur_percent, "water_percent": lot.water_percent,
            "ash_percent": lot.ash_percent,
            ("viscosity40_cst" if lot.distillate else "viscosity50_cst"): lot.viscosity_cst,
        }  # fmt: skip
        if lot.laboratory_lcv_mj_kg is not None:
            analysis["lower_calorific_value_mj_kg"] = lot.laboratory_lcv_mj_kg
        yield "lot", lot.id, delivered + 2 * 1440, analysis
    for change in changes:
        yield "event", "plant", change.minute, {
            "event": "change_over", "lot": change.lot.id, "mixing_hours": change.mixing_h,
        }  # fmt: skip


_ENDINGS: dict[str, tuple[str, str, dict[str, Any]]] = {
    "turbocharger_cleaning": (
        "work", "ME", {"part": "turbocharger 1", "text": "turbine side opened, blades and nozzle ring cleaned"},
    ),
    "instrument_adjusted": (
        "event", "ME", {"instrument": "shaft_power", "text": "zero of the torsion meter set on the turning gear"},
    ),
    "cooler_cleaning": ("work", "ME", {"part": "cooler 1", "text": "charge air cooler, water side, cleaned"}),
    "fuel_valve_exchanged": ("work", "ME", {"unit": "5", "text": "both fuel valves of unit 5 exchanged"}),
    "unit_overhauled": ("work", "AE2", {"unit": "3", "text": "piston drawn, rings renewed, liner honed"}),
    "hull_cleaned": ("work", "plant", {"text": "hull and propeller cleaned by divers"}),
    "instrument_exchanged": (
        "event", "ME",
        {"instrument": "cylinder_exhaust_temperature.2", "text": "thermometer of unit 2 exchanged, pocket sooted"},
    ),
}  # fmt: skip

_FURTHER: tuple[tuple[str, str, str, dict[str, Any]], ...] = (
    ("event", "ME", "2024-12-23 09:00", {"event": "filter_changed", "text": "turbocharger suction filter mats"}),
    ("event", "ME", "2025-07-27 08:00", {"event": "filter_changed", "text": "turbocharger suction filter mats"}),
    ("event", "ME", "2026-03-02 10:00", {"event": "filter_changed", "text": "turbocharger suction filter mats"}),
    ("remark", "plant", "2025-03-03 06:20", {"text": "Viscometer out of order, spare ordered for Santos."}),
    ("remark", "ME", "2025-04-28 10:00", {"text": "Exhaust after turbine high at the same load for some weeks."}),
    ("remark", "plant", "2025-05-27 08:00", {"text": "Orders: slow, to arrive 14 June. Auxiliary blowers on."}),
    ("remark", "ME", "2026-03-27 16:00", {"text": "Unit 5: exhaust high, Pmax low. Fuel valves to be exchanged."}),
    ("remark", "AE2", "2026-06-20 09:00", {"text": "Crankcase pressure of AE2 rising, Pcomp of unit 3 low."}),
    ("remark", "plant", "2026-07-05 18:00", {"text": "Twelve days at anchor in warm water; growth at the waterline."}),
)


def _ending(fault: Fault) -> Draft:
    kind, subject, body = _ENDINGS[fault.ended_by]
    return kind, subject, fault.end, {kind: fault.ended_by, **body}


def work_notes() -> Iterator[Draft]:
    """What ended the faults, further work, remarks."""
    for fault in FAULTS:
        if fault.ended_by in _ENDINGS:
            yield _ending(fault)
    for kind, subject, when, body in _FURTHER:
        yield kind, subject, minute_of(when), body


def remaining_t(consumption: Consumption, lot: str, minute: int) -> float:
    """What is still on board of a lot [t]; 0 before it came."""
    if minute < minute_of(BY_ID[lot].delivered):
        return 0.0
    return max(0.0, quantity_t(consumption, lot) - _burnt_t(consumption, lot, minute))


_SERVICE_T, _SETTLING_T = 34.0, 36.0
_TANK_C = {"HFO_SERV": 86.0, "HFO_SETT": 72.0, "DO_SERV": 30.0, "DO_STOR": 27.0}
_STORAGE_C = 42.0


def _tanks(changes: list[ChangeOver], consumption: Consumption, minute: int) -> dict[str, tuple[float, float]]:
    """By tank: mass [t] and density at 15 degC. Lots are kept apart; an old rest lies in the third pair."""
    past = [change.lot for change in changes if change.minute <= minute and not change.lot.distillate]
    now = past[-1]
    rest = remaining_t(consumption, now.id, minute)
    rest_of_first = _LEFT_OVER_T["R01"]
    if now.id == "R01":
        rest -= rest_of_first
    day = min(rest, _SERVICE_T + _SETTLING_T)
    tanks = {
        "HFO_SERV": (day * _SERVICE_T / (_SERVICE_T + _SETTLING_T), now.density15_kg_m3),
        "HFO_SETT": (day * _SETTLING_T / (_SERVICE_T + _SETTLING_T), now.density15_kg_m3),
        "HFO1P": ((rest - day) / 2, now.density15_kg_m3),
        "HFO1S": ((rest - day) / 2, now.density15_kg_m3),
        "HFO3": (rest_of_first, BY_ID["R01"].density15_kg_m3),
    }
    later = [lot for lot in LOTS if not lot.distillate and lot.id > now.id]
    waiting = sum(remaining_t(consumption, lot.id, minute) for lot in later)
    if waiting:
        for name in ("HFO2P", "HFO2S"):
            tanks[name] = (waiting / 2, later[0].density15_kg_m3)
    diesel = {lot.id: remaining_t(consumption, lot.id, minute) for lot in LOTS if lot.distillate}
    total = sum(diesel.values())
    mean = sum(mass * BY_ID[lot].density15_kg_m3 for lot, mass in diesel.items()) / total
    tanks["DO_SERV"] = (min(total, 28.0), mean)
    tanks["DO_STOR"] = (max(0.0, total - 28.0), mean)
    return tanks


def sounding_notes(changes: list[ChangeOver], consumption: Consumption, seed: int) -> Iterator[Draft]:
    """All fuel tanks, at the end of every month."""
    rng = Random(f"{seed}/soundings")
    for minute in sorted(month_begins()):
        for tank, (mass, density15) in _tanks(changes, consumption, minute).items():
            celsius = _TANK_C.get(tank, _STORAGE_C) + rng.gauss(0.0, 1.0)
            volume = max(0.0, mass * 1000.0 / density(density15, celsius) + rng.gauss(0.0, 0.3))
            yield "sounding", tank, minute, {"volume_m3": round(volume, 1), "temperature_c": round(celsius)}
