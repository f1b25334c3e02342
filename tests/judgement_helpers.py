"""Small makers of plants and entries for the tests of the judgement room."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import replace
from datetime import UTC, datetime, timedelta
from typing import Any

from logbook.book.entry import Entry
from logbook.plant.catalogue import catalogue
from logbook.plant.records import (
    Correction,
    Counter,
    EfficiencyCurve,
    Engine,
    Fuel,
    Marks,
    Meter,
    Plant,
    Tank,
    TrialCurve,
)  # fmt: skip
from logbook.reading.value import State, Value

START = datetime(2026, 5, 1, tzinfo=UTC)

# The trial curve of the published check values: percent of rated power, g/kWh.
TRIAL = TrialCurve(
    name="shop trial",
    operating_mode="standard",
    blowers=None,
    lower_calorific_value_mj_kg=42.7,
    load_percent=(25.0, 50.0, 75.0, 90.0, 100.0),
    sfoc_g_kwh=(182.0, 173.5, 169.0, 170.2, 172.1),
    charge_air_pressure_bar=(0.28, 0.90, 1.78, 2.45, 2.92),
    cylinder_maximum_pressure_bar=(80.0, 110.0, 140.0, 158.0, 170.0),
)

MAIN_ENGINE = Engine(
    id="ME",
    name="Main engine",
    cycle="two-stroke",
    fuel="liquid",
    use="propulsion",
    cylinders=6,
    bore_mm=600.0,
    stroke_mm=2400.0,
    rated_power_kw=12000.0,
    rated_speed_rpm=105.0,
    compression_ratio=13.5,
    stroke_part_at_closing=0.68,
    trapping_rise_k=45.0,
    combustion_temperature="set",
    correction=Correction("two-stroke percentages", 0.60, 0.20, -0.02),
    trials=(TRIAL,),
    counters={
        "revolution_counter": Counter(8),
        "engine_running_hours": Counter(6, decimals=1),
        "shaft_energy": Counter(9),
    },
)

SET = Engine(
    id="AE1",
    name="Auxiliary engine 1",
    cycle="four-stroke",
    fuel="liquid",
    use="generating",
    cylinders=6,
    bore_mm=320.0,
    stroke_mm=400.0,
    rated_power_kw=3000.0,
    rated_speed_rpm=750.0,
    rated_electrical_kw=2880.0,
    generator_efficiency=EfficiencyCurve((100.0,), (0.96,)),
    combustion_temperature="set",
    counters={"generator_energy": Counter(8), "engine_running_hours": Counter(6, decimals=1)},
)

SUPPLY = Meter("ME_in", "fuel_meter_supply", ("ME",), "L", Counter(8), 0.5, temperature="read")
RETURN = Meter("ME_out", "fuel_meter_return", ("ME",), "L", Counter(8), 0.5, temperature="read")

FUELS = (
    Fuel("RMG 380", "residual", 40.2),
    Fuel("DMA", "distillate", 42.7, density15_kg_m3=850.0),
    Fuel("natural gas", "gas", lower_calorific_value_mj_m3=35.9),
)


def plant(*engines: Engine, meters: Iterable[Meter] = (SUPPLY, RETURN), **more: Any) -> Plant:
    settings: dict[str, Any] = {
        "kind": "ship", "name": "Invented ship", "engines": engines or (MAIN_ENGINE,), "meters": tuple(meters),
        "tanks": (Tank("S1", "Service tank", "service", 20.0),), "fuels": FUELS, "people": (), "marks": Marks(),
        "points": catalogue(), "plant_readings": (), "utc_offset_min": 0, "altitude_m": 0.0,
        "barometer_at": "engine", "barometer_height_m": 0.0, "suction_air_at": "turbocharger suction",
        "hour": "ending", "hourly": False, "currency": "EUR", "ship_type": "", "capacity_t": None,
        "decimal_comma": False, "power_unit_hp": "", "text": "", "digest": "d" * 64,
    }  # fmt: skip
    return Plant(**{**settings, **more})


def body_of(value: Any) -> dict[str, Any]:
    """A number, a word, a state or a Value as the book keeps it."""
    if isinstance(value, Value):
        return value.to_body()
    if isinstance(value, State):
        return Value(state=value).to_body()
    if isinstance(value, str):
        return Value(word=value).to_body()
    return Value(number=float(value), text=f"{value:g}", digits=5).to_body()


class Log:
    """Entries of an invented log, numbered as they are written, at hours after START."""

    def __init__(self) -> None:
        self.entries: list[Entry] = []

    def write(self, hours: float, kind: str, subject: str, body: Mapping[str, Any], **more: Any) -> Entry:
        fields: dict[str, Any] = {
            "number": len(self.entries) + 1, "schema": 1, "kind": kind, "subject": subject, "round": "",
            "taken_utc": START + timedelta(hours=hours), "utc_offset_min": 120,
            "entered_utc": START + timedelta(hours=hours), "person": "3/E", "identity_by": "as stated",
            "source": "hand", "replaces": None, "reason": "", "body": dict(body), "previous_digest": "", "digest": "",
        }  # fmt: skip
        entry = Entry(**{**fields, **more})
        self.entries.append(entry)
        return entry

    def read(self, hours: float, values: Mapping[str, Any], engine: str = "ME", **more: Any) -> Entry:
        body = {"occasion": "watch", "values": {key: body_of(value) for key, value in values.items()}}
        return self.write(hours, "reading", engine, body, **more)

    def event(self, hours: float, event: str, engine: str = "ME", **body: Any) -> Entry:
        return self.write(hours, "event", engine, {"event": event, **body})

    def lot(self, lot: str = "L01", since: float = -1000.0, **analysis: Any) -> None:
        """A lot with its analysis, in use since so many hours after START."""
        what = {"grade": "RMG 380", "density15_kg_m3": 962.0, "sulphur_percent": 0.47, "water_percent": 0.15,
                "ash_percent": 0.02}  # fmt: skip
        mixing = {key: analysis.pop(key) for key in ("mixing_hours", "engines") if key in analysis}
        self.write(since, "lot", lot, {"lot": lot, **what, **analysis})
        self.write(since, "event", "plant", {"event": "change_over", "lot": lot, **mixing})

    def amend(self, number: int, **changes: Any) -> None:
        """Strike an entry out: the amendment takes its place, as the book gives it to the judgement."""
        (old,) = [entry for entry in self.entries if entry.number == number]
        self.entries.remove(old)
        new = replace(old, number=max(e.number for e in self.entries) + 1, replaces=number, reason="typed wrong")
        self.entries.append(replace(new, **changes))
