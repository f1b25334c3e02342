"""The readings of a usual log, in walk order, for engines whose plant.toml names none of its own."""

TWO_STROKE = (
    "engine_state", "engine_speed", "shaft_power", "load_indicator", "auxiliary_blower_state",
    "cylinder_exhaust_temperature", "cylinder_maximum_pressure", "cylinder_compression_pressure",
    "cylinder_jacket_outlet_temperature", "cylinder_piston_cooling_outlet_temperature",
    "compressor_inlet_temperature", "air_filter_pressure_drop", "charge_air_pressure", "charge_air_temperature",
    "cooler_air_pressure_drop", "cooler_water_inlet_temperature", "cooler_water_outlet_temperature",
    "turbocharger_speed", "turbine_inlet_temperature", "turbine_outlet_temperature", "exhaust_receiver_pressure",
    "engine_fuel_index", "fuel_inlet_pressure", "fuel_inlet_temperature", "fuel_viscosity",
    "lube_oil_inlet_pressure", "lube_oil_inlet_temperature", "jacket_water_inlet_temperature",
    "jacket_water_outlet_temperature", "jacket_water_pressure", "thrust_bearing_temperature",
    "shaft_generator_power", "revolution_counter", "engine_running_hours", "cylinder_oil_meter",
)  # fmt: skip

FOUR_STROKE = (
    "engine_state", "engine_speed", "cylinder_exhaust_temperature", "cylinder_maximum_pressure",
    "compressor_inlet_temperature", "charge_air_pressure", "charge_air_temperature",
    "cooler_water_inlet_temperature", "turbocharger_speed", "turbine_inlet_temperature",
    "turbine_outlet_temperature", "engine_fuel_index", "fuel_inlet_pressure", "fuel_inlet_temperature",
    "lube_oil_inlet_pressure", "lube_oil_inlet_temperature", "lube_oil_filter_pressure_drop",
    "jacket_water_inlet_temperature", "jacket_water_outlet_temperature", "crankcase_pressure",
    "generator_power", "power_factor", "generator_energy", "engine_running_hours",
)  # fmt: skip

GAS = (
    "engine_state", "engine_speed", "ignition_timing", "cylinder_exhaust_temperature",
    "compressor_inlet_temperature", "charge_air_pressure", "charge_air_temperature",
    "cooler_water_inlet_temperature", "turbocharger_speed", "turbine_inlet_temperature",
    "turbine_outlet_temperature", "gas_inlet_pressure", "lube_oil_inlet_pressure", "lube_oil_inlet_temperature",
    "lube_oil_filter_pressure_drop", "jacket_water_inlet_temperature", "jacket_water_outlet_temperature",
    "crankcase_pressure", "generator_power", "power_factor", "generator_energy", "engine_running_hours",
    "start_count",
)  # fmt: skip

_OF_TWO_STROKES_ONLY = ("cylinder_piston", "auxiliary_blower", "cylinder_oil", "thrust")

SHIP = (
    "sea_water_temperature", "low_temperature_water_temperature", "barometric_pressure", "outside_air_temperature",
)  # fmt: skip
STATION = ("outside_air_temperature", "relative_humidity", "barometric_pressure")


def engine_readings(cycle: str, fuel: str, use: str) -> tuple[str, ...]:
    """The usual points of one engine."""
    if cycle == "two-stroke":
        usual: tuple[str, ...] = TWO_STROKE
    elif use == "propulsion":
        usual = tuple(key for key in TWO_STROKE if not key.startswith(_OF_TWO_STROKES_ONLY))
    else:
        usual = GAS if fuel == "gas" else FOUR_STROKE
    if fuel == "both":
        place = usual.index("fuel_inlet_pressure")
        usual = (*usual[:place], "gas_inlet_pressure", *usual[place:])
    return usual


def plant_readings(kind: str) -> tuple[str, ...]:
    """The usual points read once a round for the whole plant."""
    return SHIP if kind == "ship" else STATION
