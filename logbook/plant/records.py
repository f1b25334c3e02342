"""What plant.toml says, as frozen records. The field names are the keys of the file.

Reading the file (with all faults at once) is in `description`; these records only hold what was found good.
Lists over load run alike: element i of every column belongs to element i of `load_percent`.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import datetime

from logbook.plant.catalogue import ReadingDefinition

CYCLES = ("two-stroke", "four-stroke")
FUELS_BURNT = ("liquid", "gas", "both")
USES = ("propulsion", "generating")
COMBUSTION_TEMPERATURE_METHODS = ("cycle, pressure from curve", "set", "cycle", "flame")
CORRECTION_RULES = ("none", "two-stroke percentages", "ISO 3046")
CURVE_AT = ("equal brake power", "adjusted power")
BLOWER_STATES = ("on", "off")
METER_KINDS = (
    "fuel_meter_supply", "fuel_meter_return", "gas_meter", "boiler_fuel_meter", "exported_energy",
)  # fmt: skip
RIGHTS = ("read", "enter", "sign", "countersign", "describe")
"""read the book; enter readings; sign a watch; countersign; change plant.toml"""


@dataclass(frozen=True, slots=True)
class TrialCurve:
    """One table of the shop or sea trial (or own baseline): one operating mode, blowers in one state.

    Every column after `load_percent` may be empty; filled, it has one number a load. Pressures as on the gauge.
    """

    name: str
    operating_mode: str
    blowers: str | None
    """`on`, `off`, or None: the engine has no auxiliary blowers"""
    lower_calorific_value_mj_kg: float
    load_percent: tuple[float, ...]
    sfoc_g_kwh: tuple[float, ...] = ()
    """corrected to reference conditions and to the calorific value above"""
    heat_rate_kj_kwh: tuple[float, ...] = ()
    """gas engines: per brake kWh, lower calorific value"""
    charge_air_pressure_bar: tuple[float, ...] = ()
    cylinder_maximum_pressure_bar: tuple[float, ...] = ()
    cylinder_compression_pressure_bar: tuple[float, ...] = ()
    exhaust_receiver_pressure_bar: tuple[float, ...] = ()
    turbocharger_speed_rpm: tuple[float, ...] = ()
    engine_speed_rpm: tuple[float, ...] = ()
    engine_fuel_index: tuple[float, ...] = ()
    cylinder_exhaust_temperature_c: tuple[float, ...] = ()
    turbine_inlet_temperature_c: tuple[float, ...] = ()
    turbine_outlet_temperature_c: tuple[float, ...] = ()
    air_filter_pressure_drop_mbar: tuple[float, ...] = ()
    cooler_air_pressure_drop_mbar: tuple[float, ...] = ()
    cooler_approach_k: tuple[float, ...] = ()


@dataclass(frozen=True, slots=True)
class Correction:
    """How consumption is brought to reference conditions."""

    rule: str = "none"
    percent_per_10k_coolant: float = 0.0
    percent_per_10k_suction_air: float = 0.0
    percent_per_10mbar_barometer: float = 0.0
    engine_kind: str = ""
    """ISO 3046: the words of its table, e.g. `turbocharged four-stroke, charge-air cooler`"""
    mechanical_efficiency: float = 0.80
    curve_at: str = "equal brake power"
    source: str = "typical, not your maker's"
    """who entered the coefficients and from what; printed with every corrected figure"""


@dataclass(frozen=True, slots=True)
class EfficiencyCurve:
    """Efficiency of a generator or power take-off over its load; one point = constant."""

    load_percent: tuple[float, ...]
    efficiency: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class ShaftGenerator:
    """Power take-off before the torsion meter."""

    rated_power_kw: float
    efficiency: EfficiencyCurve


@dataclass(frozen=True, slots=True)
class Counter:
    """How a counter counts: modulus = 10^digits counts of `multiplier` units."""

    digits: int
    multiplier: float = 1.0
    decimals: int = 0
    """decimal places among the digits: 6 digits, 1 decimal runs to 99999.9"""

    @property
    def modulus(self) -> float:
        """Where it passes zero [unit of the counter]."""
        return 10.0 ** (self.digits - self.decimals) * self.multiplier


@dataclass(frozen=True, slots=True)
class Engine:
    """One engine or generating set."""

    id: str
    name: str
    cycle: str
    fuel: str
    use: str
    cylinders: int
    bore_mm: float
    stroke_mm: float
    rated_power_kw: float
    """brake power; of a set given by its electrical rating: that / generator efficiency at full load"""
    rated_speed_rpm: float
    turbochargers: int = 1
    coolers: int = 1
    bearings: int = 0
    rated_electrical_kw: float | None = None
    generator_efficiency: EfficiencyCurve | None = None
    shaft_generator: ShaftGenerator | None = None
    compression_ratio: float | None = None
    """effective, from closing of the exhaust or inlet valve"""
    expansion_ratio: float | None = None
    stroke_part_at_closing: float | None = None
    trapping_rise_k: float | None = None
    charge_purity: float = 1.0
    combustion_temperature: str | None = None
    """line method; None: `cycle, pressure from curve` where it can be had, else `set`"""
    set_combustion_temperature_k: float = 1850.0
    exhaust_at: str = "after turbine"
    """the exhaust point used for the second bound"""
    operating_modes: tuple[str, ...] = ("standard",)
    propeller_pitch_m: float | None = None
    fixed_pitch: bool = False
    mean_speed_cube: bool = False
    auxiliary_blowers: bool = False
    blowers_on_below_percent: float | None = None
    blowers_off_above_percent: float | None = None
    reference_load_percent: float | None = None
    correction: Correction = Correction()
    trials: tuple[TrialCurve, ...] = ()
    counters: Mapping[str, Counter] = field(default_factory=dict)
    """by key: revolution_counter, engine_running_hours, generator_energy, shaft_energy ..."""
    readings: tuple[str, ...] = ()
    """the points of its log in walk order; empty: the usual ones for its kind"""

    @property
    def is_set(self) -> bool:
        """A generating set: power is read at the generator terminals."""
        return self.use == "generating"

    def count_of(self, per: str) -> int:
        """How many places a reading `per` cylinder, turbocharger, cooler or bearing has on this engine."""
        return {
            "cylinder": self.cylinders,
            "turbocharger": self.turbochargers,
            "cooler": self.coolers,
            "bearing": self.bearings,
        }.get(per, 1)


@dataclass(frozen=True, slots=True)
class Meter:
    """A fuel or energy counter. Its id is the place in a key: `fuel_meter_supply.ME_in`."""

    id: str
    key: str
    """catalogue key: one of METER_KINDS"""
    serves: tuple[str, ...]
    unit: str
    """unit of what is read: L, m3, kg, t, Nm3, Sm3, kWh ..."""
    counter: Counter
    accuracy_percent: float = 0.5
    rated_rate_per_h: float | None = None
    """greatest flow [unit/h], for the ceiling test; None: from rated power and a generous consumption"""
    temperature: str = ""
    """where its temperature is read: `read` (fuel_meter_temperature.ID) or a fixed number of degC"""
    serial: str = ""


@dataclass(frozen=True, slots=True)
class Tank:
    id: str
    name: str
    use: str
    """storage, settling, service, day, oil"""
    volume_m3: float
    serves: tuple[str, ...] = ()
    mixing_hours: float = 24.0


@dataclass(frozen=True, slots=True)
class Fuel:
    """A grade: what is used while its lot has no analysis, and for the account."""

    grade: str
    kind: str
    """residual, distillate, gas, other"""
    lower_calorific_value_mj_kg: float | None = None
    """default of the grade; figures from it are marked `lcv_default` and not compared"""
    density15_kg_m3: float | None = None
    lower_calorific_value_mj_m3: float | None = None
    """gas, at the condition of `gas_condition`"""
    gas_condition: str = "Nm3"
    carbon_factor: float | None = None
    price_per_t: float | None = None


@dataclass(frozen=True, slots=True)
class Person:
    id: str
    name: str
    rank: str
    rights: tuple[str, ...]
    account: str = ""
    """system account or key name by which the person is known"""


@dataclass(frozen=True, slots=True)
class Marks:
    """The chief's own economy levels; never safety limits."""

    excess_points: float | None = None
    sfoc_deviation: float | None = None


@dataclass(frozen=True, slots=True)
class Plant:
    """The whole of one plant.toml."""

    kind: str
    """ship or station"""
    name: str
    engines: tuple[Engine, ...]
    meters: tuple[Meter, ...]
    tanks: tuple[Tank, ...]
    fuels: tuple[Fuel, ...]
    people: tuple[Person, ...]
    marks: Marks
    points: Mapping[str, ReadingDefinition]
    """catalogue, with the plant's own points added"""
    plant_readings: tuple[str, ...]
    """points read once a round for the whole plant (ambient, sea, bridge data)"""
    utc_offset_min: int
    altitude_m: float
    barometer_at: str
    """`engine` or `bridge, reduced to sea level`"""
    barometer_height_m: float
    suction_air_at: str
    """`turbocharger suction` or `engine room`"""
    hour: str
    """stations: `ending` or `beginning`"""
    hourly: bool
    """rounds are hourly (plant values within the same hour, not within two hours)"""
    currency: str
    ship_type: str
    capacity_t: float | None
    decimal_comma: bool
    """the habit of the people: the comma in a list is decimal when one digit follows"""
    power_unit_hp: str
    """what `hp` means here: metric or mechanical; empty: ask"""
    text: str
    """plant.toml as it stands"""
    digest: str
    """SHA-256 of the text, hexadecimal"""
    valid_from: datetime | None = None

    def engine(self, engine_id: str) -> Engine:
        """The engine of that id; KeyError if there is none."""
        for engine in self.engines:
            if engine.id == engine_id:
                return engine
        raise KeyError(engine_id)

    def meters_of(self, engine_id: str) -> tuple[Meter, ...]:
        return tuple(meter for meter in self.meters if engine_id in meter.serves)

    def fuel(self, grade: str) -> Fuel | None:
        return next((fuel for fuel in self.fuels if fuel.grade == grade), None)

    def point(self, key: str) -> ReadingDefinition:
        """The definition behind `key` or `key.PLACE`; KeyError if there is none."""
        return self.points[key.partition(".")[0]]
