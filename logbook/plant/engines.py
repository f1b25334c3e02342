"""The [[engine]] tables of plant.toml."""

from __future__ import annotations

import difflib
from collections.abc import Mapping

from logbook.plant.catalogue import ReadingDefinition
from logbook.plant.fields import Table
from logbook.plant.parts import read_counter, read_efficiency, reading_keys, rising, short_id
from logbook.plant.records import (
    BLOWER_STATES,
    COMBUSTION_TEMPERATURE_METHODS,
    CORRECTION_RULES,
    CURVE_AT,
    CYCLES,
    FUELS_BURNT,
    USES,
    Correction,
    Counter,
    Engine,
    ShaftGenerator,
    TrialCurve,
)

ISO_KINDS = (
    "diesel or dual-fuel, naturally aspirated, limited by excess air",
    "diesel or dual-fuel, naturally aspirated, limited thermally",
    "turbocharged four-stroke, no charge-air cooler",
    "turbocharged four-stroke, charge-air cooler",
    "spark gas, naturally aspirated",
    "spark gas, turbocharged, cooler",
    "spark petrol, naturally aspirated",
)
"""The words of the table of ISO 3046-1 as this program keys it; physics has their exponents."""

# Columns of a trial table beside load -> what is possible at all.
_TRIAL_COLUMNS: Mapping[str, tuple[float, float]] = {
    "sfoc_g_kwh": (80, 600),
    "heat_rate_kj_kwh": (5000, 20000),
    "charge_air_pressure_bar": (-0.5, 8),
    "cylinder_maximum_pressure_bar": (10, 350),
    "cylinder_compression_pressure_bar": (10, 300),
    "exhaust_receiver_pressure_bar": (-0.5, 8),
    "turbocharger_speed_rpm": (100, 200000),
    "engine_speed_rpm": (10, 3000),
    "engine_fuel_index": (0, 200),
    "cylinder_exhaust_temperature_c": (50, 900),
    "turbine_inlet_temperature_c": (50, 1000),
    "turbine_outlet_temperature_c": (50, 900),
    "air_filter_pressure_drop_mbar": (0, 200),
    "cooler_air_pressure_drop_mbar": (0, 300),
    "cooler_approach_k": (-5, 80),
}


def read_engine(table: Table, points: Mapping[str, ReadingDefinition]) -> Engine:
    """One engine; what is wrong is noted, and the rest read on."""
    engine_id = short_id(table)
    if engine_id == "plant":
        table.note("id", "another name: `plant` stands for the whole plant in the book")
    use = table.word("use", USES, "propulsion", required=True)
    cycle = table.word("cycle", CYCLES, "two-stroke", required=True)
    fuel = table.word("fuel", FUELS_BURNT, "liquid")
    efficiency = read_efficiency(table, "generator_efficiency")
    electrical = table.number("rated_electrical_kw", None, least=1, greatest=1e5, unit="kW")
    power = table.number("rated_power_kw", None, least=1, greatest=1.2e5, unit="kW")
    if power is None and not table.has("rated_power_kw"):
        if electrical is None or efficiency is None:
            expected = "rated_power_kw (brake), or for a set rated_electrical_kw with generator_efficiency"
            table.faults.note((*table.path, "rated_power_kw"), "nothing", expected)
        else:
            power = electrical / efficiency.efficiency[-1]
    if use == "generating" and efficiency is None and not table.has("generator_efficiency"):
        table.faults.note(
            (*table.path, "generator_efficiency"),
            "nothing",
            "the generator's efficiency, e.g. 0.955, or a table over load",
        )
    modes = table.texts("operating_modes") or ("standard",)
    blowers = table.flag("auxiliary_blowers")
    on_below = table.number("blowers_on_below_percent", None, least=0, greatest=100, unit="% load")
    off_above = table.number("blowers_off_above_percent", None, least=0, greatest=100, unit="% load")
    if on_below is not None and off_above is not None and on_below > off_above:
        table.note("blowers_on_below_percent", "not above blowers_off_above_percent")
    compression = table.number("compression_ratio", None, least=5, greatest=30)
    expansion = table.number("expansion_ratio", None, least=5, greatest=40)
    if compression is not None and expansion is not None and expansion < compression:
        table.note("expansion_ratio", f"not below compression_ratio ({compression:g})")
    engine = Engine(
        id=engine_id,
        name=table.text("name", engine_id),
        cycle=cycle,
        fuel=fuel,
        use=use,
        cylinders=table.whole("cylinders", 1, least=1, greatest=24, required=True) or 1,
        bore_mm=table.must("bore_mm", least=40, greatest=1200, unit="mm"),
        stroke_mm=table.must("stroke_mm", least=40, greatest=4000, unit="mm"),
        rated_power_kw=power if power is not None else float("nan"),
        rated_speed_rpm=table.must("rated_speed_rpm", least=30, greatest=3000, unit="rpm"),
        turbochargers=table.whole("turbochargers", 1, least=0, greatest=6) or 0,
        coolers=_coolers(table),
        bearings=table.whole("bearings", 0, least=0, greatest=40) or 0,
        rated_electrical_kw=electrical,
        generator_efficiency=efficiency,
        shaft_generator=_shaft_generator(table.table("shaft_generator")),
        compression_ratio=compression,
        expansion_ratio=expansion,
        stroke_part_at_closing=table.number("stroke_part_at_closing", None, least=0.3, greatest=1.1),
        trapping_rise_k=table.number("trapping_rise_k", None, least=0, greatest=150, unit="K"),
        charge_purity=table.number("charge_purity", 1.0, least=0.5, greatest=1) or 1.0,
        combustion_temperature=table.word("combustion_temperature", COMBUSTION_TEMPERATURE_METHODS) or None,
        set_combustion_temperature_k=table.number(
            "set_combustion_temperature_k", 1850.0, least=1000, greatest=3000, unit="K"
        )
        or 1850.0,
        exhaust_at=table.word(
            "exhaust_at", ("after turbine", "before turbine", "after cylinder", "stack"), "after turbine"
        ),
        operating_modes=modes,
        propeller_pitch_m=table.number("propeller_pitch_m", None, least=0.2, greatest=20, unit="m"),
        fixed_pitch=table.flag("fixed_pitch"),
        mean_speed_cube=table.flag("mean_speed_cube"),
        auxiliary_blowers=blowers,
        blowers_on_below_percent=on_below,
        blowers_off_above_percent=off_above,
        reference_load_percent=table.number("reference_load_percent", None, least=10, greatest=110, unit="%"),
        correction=_correction(table.table("correction")),
        trials=tuple(_trial(inner, index, modes, blowers) for index, inner in enumerate(table.tables("trial"))),
        counters=_counters(table.table("counters"), points),
        readings=reading_keys(table, points),
    )
    table.done()
    return engine


def _coolers(table: Table) -> int:
    # An engine usually has as many charge air coolers as turbochargers.
    default = table.content.get("turbochargers", 1)
    found = table.whole("coolers", None, least=0, greatest=6)
    return found if found is not None else (default if isinstance(default, int) else 1)


def _shaft_generator(table: Table | None) -> ShaftGenerator | None:
    if table is None:
        return None
    rated = table.must("rated_power_kw", least=1, greatest=20000, unit="kW")
    efficiency = read_efficiency(table, "efficiency")
    if efficiency is None and not table.has("efficiency"):
        table.faults.note((*table.path, "efficiency"), "nothing", "its efficiency, e.g. 0.93, or a table over load")
    table.done()
    return ShaftGenerator(rated, efficiency) if efficiency is not None else None


def _correction(table: Table | None) -> Correction:
    if table is None:
        return Correction()
    rule = table.word("rule", CORRECTION_RULES, "none", required=True)
    percents = {
        key: table.number(key, 0.0, least=-10, greatest=10, unit="%") or 0.0
        for key in ("percent_per_10k_coolant", "percent_per_10k_suction_air", "percent_per_10mbar_barometer")
    }
    correction = Correction(
        rule=rule,
        engine_kind=table.word("engine_kind", ISO_KINDS, required=rule == "ISO 3046"),
        mechanical_efficiency=table.number("mechanical_efficiency", 0.80, least=0.5, greatest=1) or 0.80,
        curve_at=table.word("curve_at", CURVE_AT, "equal brake power"),
        source=table.text("source", "typical, not your maker's"),
        **percents,
    )
    if rule == "two-stroke percentages" and not any(table.has(key) for key in percents):
        table.note("rule", "the percentages of the maker's guide beside this rule: percent_per_10k_coolant ...")
    table.done()
    return correction


def _trial(table: Table, index: int, modes: tuple[str, ...], blowers: bool) -> TrialCurve:
    mode = table.word("operating_mode", modes, modes[0])
    state = table.word("blowers", BLOWER_STATES, required=blowers) if blowers else None
    if not blowers and table.has("blowers"):
        table.note("blowers", "no such key: this engine has no auxiliary_blowers = true")
        table.asked.add("blowers")
    load = table.numbers("load_percent", least=1, greatest=130, required=True)
    rising(table, "load_percent", load)
    columns = {
        key: table.numbers(key, least=least, greatest=greatest) for key, (least, greatest) in _TRIAL_COLUMNS.items()
    }
    for key, values in columns.items():
        if values and len(values) != len(load):
            table.note(key, f"as many numbers as load_percent has ({len(load)}, not {len(values)})")
    if not columns["sfoc_g_kwh"] and not columns["heat_rate_kj_kwh"]:
        table.faults.note((*table.path, "sfoc_g_kwh"), "nothing", "sfoc_g_kwh, or heat_rate_kj_kwh of a gas engine")
    lcv = table.number("lower_calorific_value_mj_kg", 42.7, least=5, greatest=130, unit="MJ/kg") or 42.7
    curve = TrialCurve(
        name=table.text("name", f"trial {index + 1}"),
        operating_mode=mode,
        blowers=state or None,
        lower_calorific_value_mj_kg=lcv,
        load_percent=load,
        **columns,
    )
    table.done()
    return curve


def _counters(table: Table | None, points: Mapping[str, ReadingDefinition]) -> dict[str, Counter]:
    if table is None:
        return {}
    counters = {}
    allowed = [key for key, point in points.items() if point.kind == "counter"]
    for key in table.content:
        inner = table.table(key)
        if key not in allowed:
            near = difflib.get_close_matches(key, allowed, n=1)
            expected = "a counter of the catalogue, e.g. revolution_counter = { digits = 8 }"
            table.note(key, expected, f"Did you mean '{near[0]}'?" if near else "")
        elif inner is not None:
            counters[key] = read_counter(inner)
            inner.done()
    return counters
