"""A small good plant.toml for the tests of several rooms, and edits of it."""

GOOD = """\
# A plant of the tests; every number is invented.
[plant]
kind = "ship"
name = "Test ship"
utc_offset = "-03:30"
decimal_comma = true

[[engine]]
id = "ME"
use = "propulsion"
cycle = "two-stroke"
fuel = "liquid"
cylinders = 6
bore_mm = 600
stroke_mm = 2400
rated_power_kw = 11900
rated_speed_rpm = 105
compression_ratio = 13.4
operating_modes = ["tier II", "tier III"]
auxiliary_blowers = true
blowers_on_below_percent = 30
blowers_off_above_percent = 40
fixed_pitch = true
readings = ["engine_speed", "shaft_power", "cylinder_exhaust_temperature"]

[engine.shaft_generator]
rated_power_kw = 900
efficiency = 0.93

[engine.correction]
rule = "two-stroke percentages"
percent_per_10k_coolant = 0.6

[engine.counters]
revolution_counter = { digits = 8 }

[[engine.trial]]
name = "sea trial"
operating_mode = "tier II"
blowers = "off"
load_percent = [50, 75, 100]
sfoc_g_kwh = [170, 168, 169]

[[engine]]
id = "AE1"
use = "generating"
cycle = "four-stroke"
fuel = "both"
cylinders = 6
bore_mm = 210
stroke_mm = 320
rated_electrical_kw = 950
rated_speed_rpm = 900
generator_efficiency = { load_percent = [50, 110], efficiency = [0.94, 0.97] }

[engine.correction]
rule = "ISO 3046"
engine_kind = "turbocharged four-stroke, charge-air cooler"

[[meter]]
id = "ME_in"
key = "fuel_meter_supply"
serves = ["ME"]
unit = "L"
digits = 8
decimals = 1
temperature = "read"

[[tank]]
id = "SERV"
use = "service"
volume_m3 = 35
serves = ["ME", "AE1"]

[[fuel]]
grade = "RMG 380"
kind = "residual"

[[person]]
id = "CE"
name = "A. Person"
rights = ["read", "enter", "sign", "countersign"]
account = "chief"

[marks]
excess_points = 1.0

[[point]]
key = "governor_output"
label = "Governor output"
family = "share"
unit = "%"
span = "0..110"
"""


def edited(*edits: tuple[str, str]) -> str:
    """GOOD with the first place of each old text replaced by the new one."""
    text = GOOD
    for old, new in edits:
        assert old in text, old
        text = text.replace(old, new, 1)
    return text


def line_with(text: str, part: str, which: int = 1) -> int:
    """Line (from 1) of the n-th line that holds `part`."""
    return [number for number, line in enumerate(text.split("\n"), 1) if part in line][which - 1]
