"""What was really true of the two years: `python -m demo_vessel.truth` writes it to truth.json."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

from demo_vessel.faults import FAULTS, GENERAL_WEAR_PER_YEAR
from demo_vessel.fuel import LOTS
from demo_vessel.generate import generate
from demo_vessel.records import History
from demo_vessel.rounds import TORSION_ERROR, MainEngineCounters, set_counters, set_meters

FILE = Path(__file__).parent / "truth.json"


def _utc(text: str) -> str | None:
    return f"{text.replace(' ', 'T')}:00Z" if text else None


def truth_of(history: History) -> dict[str, Any]:
    """Faults, months and lots of a history, as they stand in truth.json."""
    counters = MainEngineCounters()
    return {
        "vessel": "Quillan Strand",
        "seed": history.seed,
        "faults": [
            {
                "what": fault.what,
                "nature": fault.nature,
                "engine": fault.engine,
                "place": fault.place,
                "from": _utc(fault.begins),
                "until": _utc(fault.ends),
                "ended_by": fault.ended_by or None,
                "grows": fault.grows,
                "size_at_end": dict(fault.effects),
            }
            for fault in FAULTS
        ],
        "general_wear_of_main_engine_per_year": GENERAL_WEAR_PER_YEAR,
        "constant_relative_errors": {
            "torsion_meter": TORSION_ERROR,
            "fuel_meter_supply.ME_in": counters.supply_l.error,
            "fuel_meter_return.ME_out": counters.return_l.error,
            "fuel_meter_supply.AE_in": set_meters()["AE_in"].error,
            "fuel_meter_return.AE_out": set_meters()["AE_out"].error,
        }
        | {f"generator_energy {name}": counter.energy_kwh.error for name, counter in set_counters().items()},
        "lots": {lot.id: {"true_lower_calorific_value_mj_kg": lot.true_lcv_mj_kg} for lot in LOTS},
        "months": [
            {
                "month": month.month,
                "engine": "ME",
                "running_hours": round(month.running_hours, 2),
                "brake_energy_kwh": round(month.energy_kwh, 1),
                "fuel_kg": round(month.fuel_kg, 1),
                "brake_efficiency": None if month.brake_efficiency is None else round(month.brake_efficiency, 5),
                "excess_relative": round(month.excess_relative, 5),
            }
            for month in history.months
        ],
    }


def text_of(history: History) -> str:
    """The file's own text."""
    return json.dumps(truth_of(history), indent=1, ensure_ascii=False) + "\n"


if __name__ == "__main__":
    FILE.write_text(text_of(generate()), encoding="utf-8")
