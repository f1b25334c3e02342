"""plant.toml: what a good file means, files that cannot be read, and the two hand-kept samples as plants."""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path

import pytest
from plant_texts import GOOD, edited

from logbook.physics.ambient import ISO_3046
from logbook.physics.carbon_intensity import REFERENCE_LINES
from logbook.plant.description import LARGEST_BYTES, SHIP_TYPES, PlantUnusable, parse_plant, read_plant
from logbook.plant.engines import ISO_KINDS
from logbook.plant.missing_of_engine import _HUMID_KINDS
from logbook.plant.records import EfficiencyCurve, Plant

FIXTURES = Path(__file__).parents[1] / "fixtures"


def good(text: str) -> Plant:
    plant, faults = parse_plant(text)
    assert plant is not None, [fault.sentence() for fault in faults]
    assert faults == ()
    return plant


# What a good file means


def test_a_good_file_becomes_the_records() -> None:
    plant = good(GOOD)
    engine, generator = plant.engines
    assert (plant.kind, plant.name, plant.utc_offset_min, plant.decimal_comma) == ("ship", "Test ship", -210, True)
    assert (engine.bore_mm, engine.stroke_mm, engine.operating_modes) == (600.0, 2400.0, ("tier II", "tier III"))
    assert (engine.blowers_on_below_percent, engine.blowers_off_above_percent) == (30.0, 40.0)
    assert engine.shaft_generator is not None
    assert engine.shaft_generator.efficiency == EfficiencyCurve((100.0,), (0.93,))
    assert engine.counters["revolution_counter"].modulus == 1e8
    (trial,) = engine.trials
    assert (trial.operating_mode, trial.blowers, trial.sfoc_g_kwh) == ("tier II", "off", (170.0, 168.0, 169.0))
    assert generator.generator_efficiency == EfficiencyCurve((50.0, 110.0), (0.94, 0.97))
    (meter,) = plant.meters
    # 8 digits of which 1 is a decimal: passes zero at 10 000 000.0.
    assert (meter.counter.modulus, meter.temperature, meter.accuracy_percent) == (1e7, "read", 0.5)
    assert plant.people[0].rights == ("read", "enter", "sign", "countersign")
    assert plant.marks.excess_points == 1.0
    assert plant.point("governor_output").spans["two-stroke"].bounds(None) == (0.0, 110.0)
    assert plant.text == GOOD


def test_the_brake_power_of_a_set_is_its_electrical_rating_over_the_efficiency_at_full_load() -> None:
    # Between 50 % (0.94) and 110 % (0.97) full load lies five sixths of the way: 0.965.
    assert good(GOOD).engine("AE1").rated_power_kw == pytest.approx(950 / 0.965, rel=1e-12)
    constant = edited(("{ load_percent = [50, 110], efficiency = [0.94, 0.97] }", "0.95"))
    assert good(constant).engine("AE1").rated_power_kw == pytest.approx(1000.0, rel=1e-12)
    low = edited(("load_percent = [50, 110], efficiency = [0.94, 0.97]", "load_percent = [50], efficiency = [0.95]"))
    assert good(low).engine("AE1").rated_power_kw == pytest.approx(1000.0, rel=1e-12)
    over = edited(("load_percent = [50, 110], efficiency = [0.94, 0.97]", "load_percent = [110], efficiency = [0.95]"))
    assert good(over).engine("AE1").rated_power_kw == pytest.approx(1000.0, rel=1e-12)


@pytest.mark.parametrize(
    ("text", "minutes"),
    [("+02:00", 120), ("-03:30", -210), ("+5", 300), ("+0530", 330), ("+14:00", 840), ("-12", -720), ("+00:00", 0)],
)
def test_offsets(text: str, minutes: int) -> None:
    assert good(edited(("-03:30", text))).utc_offset_min == minutes


def test_a_fixed_meter_temperature_and_one_that_is_not_given() -> None:
    assert good(edited(('temperature = "read"', "temperature = 98.5"))).meters[0].temperature == "98.5"
    assert good(edited(('temperature = "read"\n', ""))).meters[0].temperature == ""


def test_what_is_left_out_takes_its_usual_value() -> None:
    plant = good(GOOD)
    engine = plant.engine("ME")
    assert (engine.turbochargers, engine.coolers, engine.bearings) == (1, 1, 0)
    assert (engine.combustion_temperature, engine.set_combustion_temperature_k) == (None, 1850.0)
    assert (plant.hourly, plant.hour, plant.currency, plant.altitude_m) == (False, "ending", "USD", 0.0)
    assert good(edited(('kind = "ship"', 'kind = "station"'))).hourly


def test_coolers_follow_the_turbochargers_unless_they_are_given() -> None:
    assert good(edited(("cylinders = 6", "cylinders = 6\nturbochargers = 2"))).engine("ME").coolers == 2
    assert good(edited(("cylinders = 6", "cylinders = 6\nturbochargers = 2\ncoolers = 1"))).engine("ME").coolers == 1


def test_points_of_the_plants_own_that_are_read_once_join_the_usual_ones() -> None:
    text = edited(('family = "share"', 'family = "share"\nper = "plant"'))
    assert good(text).plant_readings[-1] == "governor_output"


# Files


def unusable(folder: Path) -> PlantUnusable:
    with pytest.raises(PlantUnusable) as caught:
        read_plant(folder)
    assert "\n" not in caught.value.sentence
    return caught.value


def test_read_plant(tmp_path: Path) -> None:
    (tmp_path / "plant.toml").write_text(GOOD, encoding="utf-8")
    assert read_plant(tmp_path) == good(GOOD)


def test_the_mark_some_editors_put_before_a_file_says_nothing(tmp_path: Path) -> None:
    (tmp_path / "plant.toml").write_text(GOOD, encoding="utf-8-sig")
    assert read_plant(tmp_path).digest == good(GOOD).digest


def test_lines_of_another_system_are_the_same_plant(tmp_path: Path) -> None:
    (tmp_path / "plant.toml").write_bytes(GOOD.replace("\n", "\r\n").encode())
    assert read_plant(tmp_path) == good(GOOD)


def test_no_file(tmp_path: Path) -> None:
    assert f"logbook new {tmp_path}" in unusable(tmp_path).sentence
    assert "There is no" in unusable(tmp_path / "nowhere").sentence


def test_a_folder_in_its_place(tmp_path: Path) -> None:
    (tmp_path / "plant.toml").mkdir()
    assert "is no file" in unusable(tmp_path).sentence


def test_a_pipe_in_its_place_is_not_waited_for(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "plant.toml")
    assert "is no file" in unusable(tmp_path).sentence


def test_a_file_for_the_folder(tmp_path: Path) -> None:
    (tmp_path / "file").write_text("")
    assert "cannot be read: Not a directory" in unusable(tmp_path / "file").sentence


def test_too_large(tmp_path: Path) -> None:
    (tmp_path / "plant.toml").write_bytes(b"#" * (LARGEST_BYTES + 1))
    assert "500 kB at most" in unusable(tmp_path).sentence


def test_not_utf8_says_the_line(tmp_path: Path) -> None:
    (tmp_path / "plant.toml").write_bytes(b'[plant]\nkind = "ship"\nname = "\xd6resund"\n')
    assert "not UTF-8 text: look at line 3" in unusable(tmp_path).sentence


def test_no_right_to_read(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def refused(*_: object, **__: object) -> str:
        raise PermissionError(13, "Permission denied")

    (tmp_path / "plant.toml").write_text(GOOD)
    # Root may read everything, so the refusal is played.
    monkeypatch.setattr(Path, "read_text", refused)
    assert "cannot be read: Permission denied" in unusable(tmp_path).sentence


def test_the_exception_carries_every_fault(tmp_path: Path) -> None:
    (tmp_path / "plant.toml").write_text(edited(("bore_mm = 600", "bore_mm = -1"), ("digits = 8", "digits = 99")))
    error = unusable(tmp_path)
    assert error.sentence.endswith("cannot be used: 2 faults.")
    assert str(error).split("\n")[1:] == [fault.sentence() for fault in error.faults]


# The two samples as plant files


def test_the_sample_ship_holds_its_particulars() -> None:
    plant = read_plant(FIXTURES / "ship_handkept")
    engine = plant.engine("ME")
    (trial,) = engine.trials
    assert (engine.cylinders, engine.bore_mm, engine.stroke_mm) == (6, 600.0, 2400.0)
    assert (engine.rated_power_kw, engine.rated_speed_rpm, engine.compression_ratio) == (11900.0, 105.0, 13.4)
    assert trial.load_percent == (25.0, 50.0, 75.0, 90.0, 100.0)
    assert trial.sfoc_g_kwh == (171.3, 165.3, 163.8, 164.2, 165.1)
    # 1 mmWC is 0.0980665 mbar; the papers give 7 to 60 and 14 to 145 mmWC.
    assert trial.air_filter_pressure_drop_mbar == pytest.approx(
        [0.0980665 * mm for mm in (7, 20, 38, 51, 60)], abs=6e-4
    )
    assert trial.cooler_air_pressure_drop_mbar == pytest.approx(
        [0.0980665 * mm for mm in (14, 45, 89, 121, 145)], abs=6e-4
    )
    assert [(meter.id, meter.unit, meter.counter.digits) for meter in plant.meters] == [
        ("ME_in", "L", 8), ("ME_out", "L", 8),
    ]  # fmt: skip
    assert engine.counters["revolution_counter"].digits == 8
    assert engine.counters["engine_running_hours"].digits == 6


def test_the_sample_station_holds_its_particulars() -> None:
    plant = read_plant(FIXTURES / "station_handkept")
    assert (plant.kind, plant.altitude_m, plant.utc_offset_min, plant.hourly) == ("station", 640.0, 180, True)
    for engine_id in ("G1", "G2", "G3"):
        engine = plant.engine(engine_id)
        assert engine.rated_power_kw == pytest.approx(2880 / 0.96)
        assert (engine.cylinders, engine.fuel, engine.compression_ratio) == (9, "liquid", 15.0)
        assert plant.meters_of(engine_id)[0].counter.digits == 7
    gas = plant.engine("G4")
    assert (gas.rated_electrical_kw, gas.fuel, plant.meters_of("G4")[0].unit) == (4300.0, "gas", "Nm3")
    fuel, oil = plant.fuel("natural gas"), plant.fuel("gas oil")
    assert fuel is not None
    assert (fuel.lower_calorific_value_mj_m3, fuel.gas_condition) == (35.9, "Nm3")
    assert oil is not None
    assert oil.density15_kg_m3 == 846.0


# Words that physics has, too


def test_words_are_those_of_the_tables_that_physics_holds() -> None:
    assert set(ISO_KINDS) == set(ISO_3046)
    assert set(SHIP_TYPES) == set(REFERENCE_LINES)
    assert set(_HUMID_KINDS) == {kind for kind, exponents in ISO_3046.items() if exponents.a}


# Start path


def test_reading_loads_the_standard_library_only_and_is_quick() -> None:
    code = (
        "import sys, time; from pathlib import Path\n"
        "from logbook.plant.description import parse_plant, read_plant\n"
        f"text = Path({str(FIXTURES / 'ship_handkept' / 'plant.toml')!r}).read_text()\n"
        "parse_plant(text)\n"
        "times = []\n"
        "for _ in range(5):\n"
        "    begun = time.perf_counter(); parse_plant(text); times.append(time.perf_counter() - begun)\n"
        "other = {name.partition('.')[0] for name in sys.modules} - set(sys.stdlib_module_names)\n"
        "print(min(times), *sorted(name for name in other if not name.startswith(('_', 'logbook'))))"
    )
    done = subprocess.run([sys.executable, "-I", "-c", code], capture_output=True, text=True, check=True)
    seconds, *others = done.stdout.split()
    assert others == []
    assert float(seconds) < 0.020
