"""What plant.toml does not say of an engine, and which figures go without it."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from logbook.plant.records import Correction, Engine, Plant, TrialCurve
from logbook.plant.walk import walk

EFFICIENCY = ("sfoc_g_kwh", "brake_thermal_efficiency", "gap", "excess_gap")
COMPARISON = ("gap_reference", "excess_gap", "sfoc_reference_g_kwh", "sfoc_deviation")
LADDER = ("combustion_temperature_k", "reversible_bound_ambient", "gap", "ideal_cycle_efficiency")
_HUMID_KINDS = (
    "diesel or dual-fuel, naturally aspirated, limited by excess air",
    "spark gas, naturally aspirated",
    "spark petrol, naturally aspirated",
)
"""ISO 3046-1: engines whose correction takes the humidity."""
_COMPANIONS = (
    "charge_air_pressure_bar", "cylinder_maximum_pressure_bar", "cylinder_compression_pressure_bar",
    "turbocharger_speed_rpm", "engine_fuel_index", "cylinder_exhaust_temperature_c", "turbine_inlet_temperature_c",
    "turbine_outlet_temperature_c", "air_filter_pressure_drop_mbar", "cooler_air_pressure_drop_mbar",
    "cooler_approach_k",
)  # fmt: skip
_COUNTERS_OF_FIGURES = (
    "revolution_counter", "shaft_energy", "generator_energy", "shaft_generator_energy", "engine_running_hours",
)  # fmt: skip
_EXHAUST_POINT = {
    "after turbine": "turbine_outlet_temperature",
    "before turbine": "turbine_inlet_temperature",
    "after cylinder": "cylinder_exhaust_temperature",
}


@dataclass(frozen=True, slots=True)
class Missing:
    """One thing that plant.toml does not say."""

    subject: str
    """engine, meter or grade, or `plant`"""
    figures: tuple[str, ...]
    """what goes without it"""
    sentence: str
    add: str
    """what to write, and where"""
    flag: str = ""
    """what the figures are marked with until then; empty: they are empty, or poorer, without a mark"""


def missing_of_engine(plant: Plant, engine: Engine) -> Iterator[Missing]:
    """What is missing of one engine; what costs most figures first."""
    read = {key.partition(".")[0] for item in walk(plant, engine) for key in item.keys}
    for look in (_fuel, _power, _reference, _correction, _bounds, _combustion):
        yield from look(plant, engine, read)


def _fuel(plant: Plant, engine: Engine, read: set[str]) -> Iterator[Missing]:
    kinds = {"liquid": ["fuel_meter_supply"], "gas": ["gas_meter"]}.get(engine.fuel, ["fuel_meter_supply", "gas_meter"])
    for kind in kinds:
        if kind not in read:
            fuel = "gas" if kind == "gas_meter" else "fuel"
            yield Missing(
                engine.id,
                ("fuel_rate_kg_h", *EFFICIENCY),
                f"No {fuel} meter serves it: its {fuel} is known only where an amount is entered or a tank is sounded.",
                f'[[meter]] key = "{kind}", serves = ["{engine.id}"]',
                "no_fuel_reading",
            )


def _power(plant: Plant, engine: Engine, read: set[str]) -> Iterator[Missing]:
    readings = "its points in readings of [[engine]]"
    if engine.is_set:
        by_meter, counter, spot = "generator_energy", "generator_energy", "generator_power"
        measured = spot in read or counter in read
    else:
        by_meter, counter, spot = "shaft_power or shaft_energy", "shaft_energy", "shaft_power"
        measured = spot in read or counter in read or {"shaft_torque", "engine_speed"} <= read
    if not measured:
        by_index = {"engine_fuel_index", "engine_speed"} <= read and _has_column(engine, "engine_fuel_index")
        yield Missing(
            engine.id,
            ("brake_power_kw", *EFFICIENCY),
            "Power is not read: it is taken from the fuel index, shown and never compared."
            if by_index and not engine.is_set
            else "Power is not read: fuel is counted, and no efficiency worked out.",
            f"{by_meter}: {readings}",
            "power_from_index" if by_index and not engine.is_set else "no_power_reading",
        )
    elif counter not in read:
        if engine.is_set and not plant.hourly:
            yield Missing(
                engine.id,
                EFFICIENCY,
                "Without its energy counter the power of a set stands for an hour at most, and rounds are not hourly.",
                f"generator_energy: {readings}",
                "span_too_long",
            )
        if not engine.is_set and "revolution_counter" not in read:
            yield Missing(
                engine.id,
                EFFICIENCY,
                "Without revolutions nothing shows that the power read stands for its watch.",
                f"revolution_counter: {readings}",
                "load_changed_in_span",
            )
    if engine.shaft_generator and "shaft_generator_power" not in read:
        yield Missing(
            engine.id,
            ("brake_power_kw", *EFFICIENCY),
            "The shaft generator is fitted and not read: brake power is not known.",
            f"shaft_generator_power: {readings}",
            "no_power_reading",
        )
    unknown = [key for key in _COUNTERS_OF_FIGURES if key in read and key not in engine.counters]
    if unknown:
        yield Missing(
            engine.id,
            ("brake_power_kw", "running_h"),
            f"The digits of {joined(unknown)} are not entered: eight are taken, and passing zero is told by them.",
            f"[engine.counters] {unknown[0]} = {{ digits = ... }}",
        )


def _reference(plant: Plant, engine: Engine, read: set[str]) -> Iterator[Missing]:
    add = "[[engine.trial]] load_percent, " + ("heat_rate_kj_kwh" if engine.fuel == "gas" else "sfoc_g_kwh")
    if not engine.trials:
        yield Missing(
            engine.id,
            COMPARISON,
            "No trial is entered: consumption and efficiency stand alone, not compared, until an own baseline is kept.",
            add,
            "no_reference",
        )
        return
    for mode in engine.operating_modes:
        trials = [trial for trial in engine.trials if trial.operating_mode == mode]
        if not trials:
            yield Missing(
                engine.id,
                COMPARISON,
                f"No trial is entered for the operating mode '{mode}': readings in it are not compared.",
                f'{add}, operating_mode = "{mode}"',
                "mode_has_no_reference",
            )
        elif engine.auxiliary_blowers:
            yield from _blowers(engine, mode, trials, add)
    if engine.auxiliary_blowers and None in (engine.blowers_on_below_percent, engine.blowers_off_above_percent):
        yield Missing(
            engine.id,
            COMPARISON,
            "The loads at which the auxiliary blowers go on and off are not entered: "
            "a reading that does not say their state is not compared.",
            "blowers_on_below_percent, blowers_off_above_percent in [[engine]]",
            "blowers_unknown",
        )
    absent = [column for column in _COMPANIONS if not _has_column(engine, column)]
    if absent:
        yield Missing(
            engine.id,
            ("causes",),
            f"No trial gives {joined(absent)}: these readings have no reference as witnesses of a cause.",
            f"[[engine.trial]] {absent[0]}{' ...' if len(absent) > 1 else ''}",
        )


def _blowers(engine: Engine, mode: str, trials: list[TrialCurve], add: str) -> Iterator[Missing]:
    for state in ("on", "off"):
        if all(trial.blowers != state for trial in trials):
            where = "" if len(engine.operating_modes) == 1 else f" in the mode '{mode}'"
            yield Missing(
                engine.id,
                COMPARISON,
                f"No trial has the auxiliary blowers {state}{where}: readings with them {state} are not compared.",
                f'{add}, blowers = "{state}"',
                "blowers_differ",
            )


def _correction(plant: Plant, engine: Engine, read: set[str]) -> Iterator[Missing]:
    rule = engine.correction
    corrected = ("sfoc_corrected_g_kwh", "sfoc_deviation", "excess_gap")
    if rule.rule == "none":
        suitable = "two-stroke percentages" if engine.cycle == "two-stroke" else "ISO 3046"
        yield Missing(
            engine.id,
            corrected,
            "No ambient correction is entered: a warm day looks like wear.",
            f'[engine.correction] rule = "{suitable}"',
            "not_corrected",
        )
        return
    needed = {"compressor_inlet_temperature": "the air temperature at the turbocharger suction"}
    if rule.engine_kind in _HUMID_KINDS and rule.rule == "ISO 3046":
        needed["relative_humidity"] = "the humidity"
    for key, name in needed.items():
        if key not in read:
            yield Missing(
                engine.id,
                corrected,
                f"The correction needs {name}, and it is not among the readings.",
                f"{key} in readings of {'[plant]' if key == 'relative_humidity' else '[[engine]]'}",
                "correction_input_missing",
            )
    if "cooler_water_inlet_temperature" not in read and engine.coolers:
        yield Missing(
            engine.id,
            corrected,
            "The cooling water to the charge air cooler is not read: its part of the correction is left out.",
            "cooler_water_inlet_temperature in readings of [[engine]]",
            "coolant_not_read",
        )
    if rule.source == Correction().source:
        yield Missing(
            engine.id,
            corrected,
            "Nobody is named for the coefficients of the correction: every figure says 'typical, not your maker's'.",
            "[engine.correction] source: who entered them, and from what",
        )


def _bounds(plant: Plant, engine: Engine, read: set[str]) -> Iterator[Missing]:
    if "compressor_inlet_temperature" not in read:
        yield Missing(
            engine.id,
            ("ambient_temperature_k", "reversible_bound_ambient", "gap"),
            "The air temperature at the suction is not read: it is the cold side of the bound.",
            "compressor_inlet_temperature in readings of [[engine]]",
        )
    point = _EXHAUST_POINT[engine.exhaust_at]
    if point not in read:
        yield Missing(
            engine.id,
            ("exhaust_temperature_k", "reversible_bound_exhaust"),
            f"The exhaust {engine.exhaust_at} is not read, and the second bound is worked out there.",
            f"{point} in readings of [[engine]], or exhaust_at",
        )
    if "cylinder_mean_indicated_pressure" not in read:
        yield Missing(
            engine.id,
            ("indicated_efficiency",),
            "Mean indicated pressure is not read: losses in the cylinder and of the mechanism stand together.",
            "cylinder_mean_indicated_pressure in readings of [[engine]], where an indicator is at hand",
        )


def _combustion(plant: Plant, engine: Engine, read: set[str]) -> Iterator[Missing]:
    method = engine.combustion_temperature
    if engine.compression_ratio is None:
        instead = f"the set {engine.set_combustion_temperature_k:g} K stands for it"
        yield Missing(
            engine.id,
            LADDER,
            "Without the compression ratio no cycle can be worked out: there is no ideal cycle, and "
            + ("no combustion temperature." if method not in (None, "set") else f"{instead}."),
            "compression_ratio in [[engine]] (effective, from closing of the valve)",
            "no_combustion_temperature" if method not in (None, "set") else "",
        )
        return
    charge = [key for key in ("charge_air_pressure", "charge_air_temperature") if key not in read]
    if charge:
        yield Missing(
            engine.id,
            LADDER,
            f"The cycle begins with the charge air, and {joined(charge)} is not read.",
            f"{joined(charge)} in readings of [[engine]]",
            "no_combustion_temperature",
        )
    curves = ("cylinder_maximum_pressure_bar", "charge_air_pressure_bar")
    absent = [column for column in curves if not _has_column(engine, column)]
    if absent and method in (None, "cycle, pressure from curve"):
        yield Missing(
            engine.id,
            ("combustion_temperature_k", "reversible_bound_ambient", "gap"),
            f"No trial gives {joined(absent)}: the combustion temperature "
            + ("is the set one." if method is None else "cannot be worked out."),
            f"[[engine.trial]] {', '.join(absent)}",
            "" if method is None else "no_combustion_temperature",
        )
    if "cylinder_maximum_pressure" not in read:
        yield Missing(
            engine.id,
            ("ideal_cycle_efficiency",),
            "Maximum pressures are not read: the ideal cycle needs a measured set of them, once a week or so.",
            "cylinder_maximum_pressure in readings of [[engine]]",
        )
    assumed = [key for key in ("stroke_part_at_closing", "trapping_rise_k") if getattr(engine, key) is None]
    if assumed:
        yield Missing(
            engine.id,
            LADDER,
            f"{joined(assumed)} not entered: usual values are taken for the cycle, from memory.",
            f"{', '.join(assumed)} in [[engine]]",
        )
    if engine.expansion_ratio is None:
        yield Missing(
            engine.id,
            ("ideal_cycle_efficiency",),
            "The expansion ratio is not entered: the ideal cycle stands without further expansion.",
            "expansion_ratio in [[engine]] (from the opening of the exhaust valve)",
        )


def _has_column(engine: Engine, column: str) -> bool:
    return any(getattr(trial, column) for trial in engine.trials)


def joined(names: Sequence[str]) -> str:
    """`a, b and c`."""
    return names[0] if len(names) == 1 else f"{', '.join(names[:-1])} and {names[-1]}"
