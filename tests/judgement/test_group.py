"""One fuel meter for several sets: figures of the group, weighted with each set's own energy."""

from dataclasses import replace

import pytest
from judgement_helpers import SET, TRIAL, Log, plant

from logbook.judgement.figures import figures
from logbook.judgement.group import common_meters, group_figures
from logbook.plant.records import Correction, Counter, EfficiencyCurve, Meter

CURVE = replace(
    TRIAL, load_percent=(50.0, 75.0, 90.0, 100.0), sfoc_g_kwh=(173.5, 169.0, 170.2, 172.1), charge_air_pressure_bar=(),
    cylinder_maximum_pressure_bar=(),
)  # fmt: skip
# 0.5 % for +10 K of suction air: at 40 degC the ambient factor is 1.0075.
RULE = Correction("two-stroke percentages", 0.0, 0.5, 0.0)
LOSSLESS = EfficiencyCurve((100.0,), (1.0,))
FIRST = replace(
    SET, id="AE1", rated_power_kw=2000 / 0.60, rated_electrical_kw=2000 / 0.60, generator_efficiency=LOSSLESS,
    trials=(CURVE,), correction=RULE,
)  # fmt: skip
SECOND = replace(FIRST, id="AE2", rated_power_kw=4000, rated_electrical_kw=4000)
METER = Meter("AE_in", "fuel_meter_supply", ("AE1", "AE2"), "kg", Counter(8), 0.5)
OTHER = Meter("ME_in", "fuel_meter_supply", ("AE1",), "L", Counter(8))


def log(second_runs: bool = True, first_kwh: float = 2000, fuel_kg: float = 945) -> Log:
    found = Log()
    found.lot(grade="DMA", lower_calorific_value_mj_kg=41.0)
    for hour, (first, second, fuel) in enumerate([(0.0, 0.0, 0.0), (first_kwh, 3000.0, fuel_kg)]):
        air = {"compressor_inlet_temperature.1": 40, "barometric_pressure": 1000}
        found.read(
            hour, {"generator_energy": 10_000 + first, "generator_power": first_kwh, **air}, "AE1", round=f"r{hour}"
        )
        if second_runs:
            found.read(
                hour, {"generator_energy": 50_000 + second, "generator_power": 3000, **air}, "AE2", round=f"r{hour}"
            )
        else:
            found.read(hour, {"engine_state": "stopped", "generator_energy": 50_000}, "AE2", round=f"r{hour}")
        found.read(hour, {"fuel_meter_supply.AE_in": 70_000 + fuel}, "plant", round=f"r{hour}")
    return found


def test_a_group_of_two_sets() -> None:
    """2000 kWh at 60 %, 3000 kWh at 75 %, a 1.0075, 945 kg, 41.0 MJ/kg: calculated independently by arithmetic."""
    station = plant(FIRST, SECOND, meters=(METER,))
    row = group_figures(station, log().entries, "AE_in").iloc[-1]
    assert row["sfoc_g_kwh"] == pytest.approx(189.000)
    assert row["sfoc_reference_g_kwh"] == pytest.approx(170.94575, abs=1e-4)
    assert row["brake_thermal_efficiency"] == pytest.approx(0.464576, abs=1e-6)
    assert row["sfoc_deviation"] == pytest.approx(0.0615965, abs=1e-6)
    assert row["excess_gap"] == pytest.approx(0.0286163, abs=1e-6)
    assert row["comparable"]
    # No set has a figure with fuel in it of its own.
    single = figures(station, log().entries, "AE1").iloc[-1]
    assert "common_fuel_meter" in single["flags"]
    assert single["sfoc_g_kwh"] != single["sfoc_g_kwh"]
    assert not single["comparable"]


def test_one_set_alone_has_its_own_figures() -> None:
    """2100 kWh, 402 kg: 191.429 g/kWh, 0.458682; calculated independently by arithmetic."""
    station = plant(FIRST, SECOND, meters=(METER,))
    row = figures(station, log(second_runs=False, first_kwh=2100, fuel_kg=402).entries, "AE1").iloc[-1]
    assert row["sfoc_g_kwh"] == pytest.approx(191.429, abs=1e-3)
    assert row["brake_thermal_efficiency"] == pytest.approx(0.458682, abs=1e-6)
    assert "common_fuel_meter" not in row["flags"]


def test_only_a_shared_meter_names_a_group() -> None:
    assert [meter.id for meter in common_meters(plant(FIRST, SECOND, meters=(METER, OTHER)))] == ["AE_in"]
    with pytest.raises(KeyError):
        group_figures(plant(FIRST, SECOND, meters=(METER, OTHER)), log().entries, "ME_in")
