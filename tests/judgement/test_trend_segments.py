"""The first trend: daily points inside segments, robust slope with its interval, silence where nothing is there."""

import numpy as np
import pytest
from judgement_helpers import MAIN_ENGINE, Log, plant

from logbook.judgement.borders import ends_efficiency
from logbook.judgement.figures import work_out
from logbook.judgement.trend import trend_of
from logbook.plant.records import Counter, Meter, Plant

MASS = Meter("ME_in", "fuel_meter_supply", ("ME",), "kg", Counter(9), 0.5)


def ship() -> Plant:
    return plant(MAIN_ENGINE, meters=(MASS,))


def history(days: int, excess: list[float], *, scatter: float = 0.003, seed: int = 1, log: Log | None = None) -> Log:
    """Four-hourly watches at 75 % load; `excess` per day, relative to the trial's 169 g/kWh."""
    random = np.random.default_rng(seed)
    log = log or Log()
    log.lot(lower_calorific_value_mj_kg=42.7)
    fuel, hours = 1_000_000.0, 0
    for watch in range(days * 6 + 1):
        if watch:
            fuel += 9000 * 4 * 0.169 * (1 + excess[(watch - 1) // 6]) * (1 + scatter * random.standard_normal())
            hours += 4
        log.read(
            4 * watch,
            {
                "engine_speed": 98.0, "shaft_power": 9000.0, "engine_running_hours": 10_000.0 + hours,
                "revolution_counter": 1_000_000.0 + 98 * 60 * hours, "fuel_meter_supply.ME_in": round(fuel),
                "compressor_inlet_temperature.1": 25.0, "barometric_pressure": 1000.0,
                "cooler_water_inlet_temperature.1": 25.0,
            },
        )  # fmt: skip
    return log


def test_growth_is_called_and_sized() -> None:
    days = 60
    relative = [0.0005 * day for day in range(days)]
    (segment,) = trend_of(work_out(ship(), history(days, relative).entries, "ME")).segments
    assert segment.call == "growing"
    # 0.05 % a day is 2.083 % in 1,000 h of consumption; at 0.499 efficiency about -1.0 points, of D/(1 + D).
    expected = 100 * 0.4989 * (0.0005 * 1000 / 24)
    assert segment.slope == pytest.approx(expected, rel=0.12)
    assert segment.low is not None
    assert segment.high is not None
    assert segment.low < segment.slope < segment.high
    assert segment.n == days + 1 or segment.n == days


@pytest.mark.parametrize("seed", range(6))
def test_a_clean_engine_is_not_called(seed: int) -> None:
    (segment,) = trend_of(work_out(ship(), history(40, [0.0] * 40, scatter=0.01, seed=seed).entries, "ME")).segments
    assert segment.call in ("cannot tell yet", "steady")


def test_a_cleaning_is_a_border_and_a_filter_is_not() -> None:
    relative = [0.0005 * day for day in range(30)] + [0.0005 * day for day in range(30)]
    log = history(60, relative)
    log.write(30 * 24 + 1, "work", "ME", {"work": "turbocharger_cleaning"})
    log.write(40 * 24 + 1, "work", "ME", {"work": "filter_changed"})
    first, second = trend_of(work_out(ship(), log.entries, "ME")).segments
    assert second.opened_by == "turbocharger_cleaning"
    assert (first.call, second.call) == ("growing", "growing")


def test_few_days_say_how_many_are_missing() -> None:
    (segment,) = trend_of(work_out(ship(), history(4, [0.0] * 4).entries, "ME")).segments
    assert segment.slope is None
    assert segment.call == "cannot tell yet"
    assert segment.more_readings_needed == 8 - segment.n


def test_points_are_pooled_not_averaged() -> None:
    found = trend_of(work_out(ship(), history(3, [0.02, 0.02, 0.02], scatter=0.0).entries, "ME"))
    # Counters are read to the kilogram.
    assert found.points["sfoc_deviation"].to_numpy() == pytest.approx(0.02, abs=2e-4)
    assert found.points["excess_gap"].iloc[0] == pytest.approx(3600 / (169 * 42.7) * 0.02 / 1.02, abs=1e-4)


def test_an_instrument_ends_only_what_uses_it() -> None:
    assert ends_efficiency("instrument_exchanged", "fuel_meter_return.ME_out")
    assert not ends_efficiency("instrument_exchanged", "cylinder_exhaust_temperature.3")
    assert not ends_efficiency("hull_cleaned")
