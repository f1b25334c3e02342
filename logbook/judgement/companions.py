"""The companions of the excess: other readings as deviations from the trial at equal brake power."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import pandas as pd

from logbook.judgement.combustion import BAR_PA, TRIAL_BAROMETER_PA
from logbook.judgement.figures import Worked
from logbook.judgement.trend import running_hours
from logbook.physics.curve import curve

KELVIN, PERCENT = "K", "%"

# Reading -> (column of the trial, unit of its deviation)
_COMPANIONS = {
    "cylinder_exhaust_temperature": ("cylinder_exhaust_temperature_c", KELVIN),
    "turbine_outlet_temperature": ("turbine_outlet_temperature_c", KELVIN),
    "charge_air_pressure": ("charge_air_pressure_bar", PERCENT),
    "turbocharger_speed": ("turbocharger_speed_rpm", PERCENT),
    "engine_fuel_index": ("engine_fuel_index", PERCENT),
}


@dataclass(frozen=True)
class Companion:
    """Daily medians of one reading's deviation over running hours."""

    key: str
    unit: str
    hours: list[float]
    deviation: list[float]


def companions_of(worked: Worked) -> list[Companion]:
    """Deviations of what was read and has a trial curve: [K] for temperatures, [%] for the rest; raw, not corrected."""
    frame = worked.frame
    load = frame["load_fraction"].to_numpy(float)
    hours = running_hours(worked)
    found = []
    for key, (column, unit) in _COMPANIONS.items():
        value = worked.table.mean(key)
        expected = np.full(len(load), np.nan)
        for trial in worked.engine.trials:
            values = getattr(trial, column)
            here = (worked.reference.mode == trial.operating_mode) & np.isfinite(load) & ~np.isfinite(expected)
            if values:
                expected[here] = curve(np.array(trial.load_percent) / 100, values)(load[here])
        if key == "charge_air_pressure":
            value = value * BAR_PA + worked.ambient.barometer_pa
            expected = expected * BAR_PA + TRIAL_BAROMETER_PA
        deviation = value - expected if unit == KELVIN else 100 * (value / expected - 1)
        table = pd.DataFrame({"day": frame["at_utc"].str.slice(0, 10), "hours": hours, "deviation": deviation})
        daily = table[worked.running & np.isfinite(deviation)].groupby("day", sort=True).median()
        if len(daily):
            found.append(Companion(key, unit, daily["hours"].tolist(), daily["deviation"].tolist()))
    return found
