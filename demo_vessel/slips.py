"""What goes wrong between gauge and paper: readings left out, instruments out of order, slips of the finger."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from datetime import UTC, datetime
from random import Random

from demo_vessel.records import Reading

_LEFT_OUT = 0.0015
"""Share of the gauge readings that nobody took."""
_SLIPPED = 1 / 110
"""Share of the main engine's sea watches with a slip of the finger."""
_ALWAYS_READ = ("engine_state", "engine_speed", "shaft_power", "auxiliary_blower_state", "shaft_generator_power")
_COUNTERS = ("revolution_counter", "engine_running_hours", "cylinder_oil_meter", "fuel_meter", "energy")

_OUT_OF_ORDER = {
    "fuel_viscosity": (datetime(2025, 3, 3, tzinfo=UTC), datetime(2025, 3, 10, tzinfo=UTC)),
    "exhaust_back_pressure": (datetime(2026, 3, 8, tzinfo=UTC), datetime(2026, 3, 15, tzinfo=UTC)),
    "cylinder_piston_cooling_outlet_temperature.6": (
        datetime(2025, 11, 24, tzinfo=UTC),
        datetime(2025, 12, 15, tzinfo=UTC),
    ),
}


class Slips:
    """The engineers' fingers. Some slips are noticed at the next round and amended, some never."""

    def __init__(self, seed: int) -> None:
        self._rng = Random(f"{seed}/slips")

    def typed(self, reading: Reading, steady: bool) -> list[Reading]:
        """What is written for a reading: itself, with what was left out, and perhaps an amendment."""
        values = dict(reading.values)
        if self._rng.random() < _LEFT_OUT * len(values):
            gauges = [key for key in values if key not in _ALWAYS_READ and not any(word in key for word in _COUNTERS)]
            if gauges:
                values[self._rng.choice(gauges)] = "N/R"
        if reading.engine == "ME" and values["engine_state"] == "running":
            for key, (begin, end) in _OUT_OF_ORDER.items():
                if key in values and begin <= reading.taken_utc < end:
                    values[key] = "def"
        right = replace(reading, values=values) if values != reading.values else reading
        if reading.engine != "ME" or not steady or self._rng.random() >= _SLIPPED:
            return [right]
        key, wrong, reason = self._slip(values)
        while wrong == values[key]:
            # Two like figures changed over are no slip.
            key, wrong, reason = self._slip(values)
        slipped = replace(right, values=values | {key: wrong})
        amended = replace(right, amendment_reason=reason)
        return [slipped, amended] if self._rng.random() < 0.6 else [slipped]

    def _slip(self, values: Mapping[str, str]) -> tuple[str, str, str]:
        """Which value, what was typed, and what the amendment says."""
        kind = self._rng.choice(("digit dropped", "digit doubled", "figures changed", "point forgotten", "counter"))
        unit = self._rng.randint(1, 7)
        if kind == "counter":
            key = self._rng.choice(("fuel_meter_supply.ME_in", "revolution_counter"))
            text = values[key]
            place = len(text) - 4
            return key, text[:place] + text[place + 1] + text[place] + text[place + 2 :], "two figures changed over"
        if kind == "point forgotten":
            return "engine_speed", values["engine_speed"].replace(".", ""), "decimal point forgotten"
        key = f"cylinder_exhaust_temperature.{unit}"
        text = values[key]
        if text == "N/R":
            return "barometric_pressure", "1103", "figures changed over"
        if kind == "digit dropped":
            return key, text[:-1], "last figure left out"
        if kind == "digit doubled":
            return key, text + text[-1], "figure typed twice"
        return key, text[1] + text[0] + text[2:], "figures changed over"
