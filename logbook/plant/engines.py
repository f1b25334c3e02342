"""The [[engine]] tables of plant.toml."""

from __future__ import annotations

from collections.abc import Mapping

from logbook.plant.catalogue import ReadingDefinition
from logbook.plant.fields import Table, nearest, shown
from logbook.plant.parts import at_full_load, read_counter, read_efficiency, reading_keys, rising, short_id
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
    EfficiencyCurve,
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
EXHAUST_AT = ("after turbine", "before turbine", "after cylinder")

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
# Points of this `per` are read elsewhere than in the round of an engine.
_READ_ELSEWHERE: Mapping[str, str] = {
    "meter": "no meter here: each [[meter]] is read with the engines that it serves",
    "plant": "points of an engine; what is read once for the whole plant stands in the readings of [plant]",
    "ship": "points of an engine; what is read once for the whole ship stands in the readings of [plant]",
    "tank": "points of an engine; tanks are sounded by themselves",
    "lot": "points of an engine; the analysis of a fuel is entered with its lot",
}


def read_engine(table: Table, points: Mapping[str, ReadingDefinition]) -> Engine:
    """One engine; what is wrong is noted, and the rest read on."""
    engine_id = short_id(table)
    if engine_id == "plant":
        table.note("id", "another name: `plant` stands for the whole plant in the book")
    use = table.word("use", USES, "propulsion", required=True)
    electrical = table.number("rated_electrical_kw", least=1, greatest=1e5, unit="kW")
    with_generator = use == "generating" or electrical is not None
    efficiency = read_efficiency(table, "generator_efficiency", "0.955", required=with_generator)
    power = _rated_power(table, electrical, efficiency)
    modes = table.texts("operating_modes") or ("standard",)
    blowers, on_below, off_above = _blowers(table)
    compression, expansion = _ratios(table)
    turbochargers = table.whole("turbochargers", 1, least=0, greatest=6)
    # An engine usually has as many charge air coolers as turbochargers.
    coolers = table.whole("coolers", turbochargers, least=0, greatest=6)
    bearings = table.whole("bearings", 0, least=0, greatest=40)
    fixed_pitch, by_cube = _propeller(table)
    return Engine(
        id=engine_id,
        name=table.text("name", engine_id),
        cycle=table.word("cycle", CYCLES, "two-stroke", required=True),
        fuel=table.word("fuel", FUELS_BURNT, "liquid"),
        use=use,
        cylinders=table.whole("cylinders", 1, least=1, greatest=24, required=True),
        bore_mm=table.must("bore_mm", least=40, greatest=1200, unit="mm"),
        stroke_mm=table.must("stroke_mm", least=40, greatest=4000, unit="mm"),
        rated_power_kw=power,
        rated_speed_rpm=table.must("rated_speed_rpm", least=30, greatest=3000, unit="rpm"),
        turbochargers=turbochargers,
        coolers=coolers,
        bearings=bearings,
        rated_electrical_kw=electrical,
        generator_efficiency=efficiency,
        shaft_generator=_shaft_generator(table.table("shaft_generator")),
        compression_ratio=compression,
        expansion_ratio=expansion,
        stroke_part_at_closing=table.number("stroke_part_at_closing", least=0.3, greatest=1.1),
        trapping_rise_k=table.number("trapping_rise_k", least=0, greatest=150, unit="K"),
        charge_purity=table.number("charge_purity", 1.0, least=0.5, greatest=1),
        combustion_temperature=table.word("combustion_temperature", COMBUSTION_TEMPERATURE_METHODS) or None,
        set_combustion_temperature_k=table.number(
            "set_combustion_temperature_k", 1850.0, least=1000, greatest=3000, unit="K"
        ),
        exhaust_at=table.word("exhaust_at", EXHAUST_AT, "after turbine"),
        operating_modes=modes,
        propeller_pitch_m=table.number("propeller_pitch_m", least=0.2, greatest=20, unit="m"),
        fixed_pitch=fixed_pitch,
        mean_speed_cube=by_cube,
        auxiliary_blowers=blowers,
        blowers_on_below_percent=on_below,
        blowers_off_above_percent=off_above,
        reference_load_percent=table.number("reference_load_percent", least=10, greatest=110, unit="%"),
        correction=_correction(table.table("correction")),
        trials=_trials(table, modes),
        counters=_counters(table.table("counters"), points),
        readings=_readings(table, points, use, {"bearing": bearings, "turbocharger": turbochargers, "cooler": coolers}),
    )


def _rated_power(table: Table, electrical: float | None, efficiency: EfficiencyCurve | None) -> float:
    """Brake power, given or from the electrical rating of a set; NaN (and a fault) where neither is to be had."""
    power = table.number("rated_power_kw", least=1, greatest=1.2e5, unit="kW")
    if power is not None:
        if electrical is not None and power <= electrical:
            table.note("rated_power_kw", f"brake power, above rated_electrical_kw ({electrical:g}); or leave it out")
        return power
    if electrical is not None and efficiency is not None:
        return electrical / at_full_load(efficiency)
    if not any(table.has(key) for key in ("rated_power_kw", "rated_electrical_kw")):
        table.missing("rated_power_kw", "the rated brake power [kW], or of a generating set rated_electrical_kw")
    return float("nan")


def _blowers(table: Table) -> tuple[bool, float | None, float | None]:
    """Whether auxiliary blowers are fitted, and between which loads they go on and off."""
    fitted = table.flag("auxiliary_blowers")
    on_below = table.number("blowers_on_below_percent", least=0, greatest=100, unit="% load")
    off_above = table.number("blowers_off_above_percent", least=0, greatest=100, unit="% load")
    if on_below is not None and off_above is not None and on_below > off_above:
        table.note("blowers_on_below_percent", f"not above blowers_off_above_percent ({off_above:g})")
    band = [key for key in ("blowers_on_below_percent", "blowers_off_above_percent") if table.has(key)]
    if band and _without_blowers(table):
        table.note(band[0], "auxiliary_blowers = true beside it; or leave it out")
    return fitted, on_below, off_above


def _without_blowers(table: Table) -> bool:
    """The engine has none; not so when what the file says of them is a fault of its own."""
    return table.content.get("auxiliary_blowers", False) is False


def _ratios(table: Table) -> tuple[float | None, float | None]:
    compression = table.number("compression_ratio", least=5, greatest=30)
    expansion = table.number("expansion_ratio", least=5, greatest=40)
    if expansion is not None and not table.has("compression_ratio"):
        table.note("expansion_ratio", "compression_ratio beside it")
    if compression is not None and expansion is not None and expansion < compression:
        table.note("expansion_ratio", f"not below compression_ratio ({compression:g})")
    return compression, expansion


def _propeller(table: Table) -> tuple[bool, bool]:
    """Whether the pitch is fixed, and whether power may be taken from the cube of the mean speed."""
    fixed_pitch, by_cube = table.flag("fixed_pitch"), table.flag("mean_speed_cube")
    if by_cube and not fixed_pitch:
        table.note("mean_speed_cube", "fixed_pitch = true beside it: a controllable-pitch shaft has no cube law")
    return fixed_pitch, by_cube


def _readings(
    table: Table, points: Mapping[str, ReadingDefinition], use: str, fitted: Mapping[str, int]
) -> tuple[str, ...]:
    where = dict(_READ_ELSEWHERE)
    if use != "generating":
        where["generator"] = 'points of this engine; only a set (use = "generating") has a generator'
    where |= {per: f"{per}s = ... beside it: this engine has none" for per, count in fitted.items() if not count}
    return reading_keys(table, points, where)


def _shaft_generator(table: Table | None) -> ShaftGenerator | None:
    if table is None:
        return None
    rated = table.must("rated_power_kw", least=1, greatest=20000, unit="kW")
    efficiency = read_efficiency(table, "efficiency", "0.93", required=True)
    return ShaftGenerator(rated, efficiency) if efficiency is not None else None


def _correction(table: Table | None) -> Correction:
    if table is None:
        return Correction()
    rule = table.word("rule", CORRECTION_RULES, "none", required=True)
    percents = {
        key: table.number(key, 0.0, least=-10, greatest=10, unit="%")
        for key in ("percent_per_10k_coolant", "percent_per_10k_suction_air", "percent_per_10mbar_barometer")
    }
    correction = Correction(
        rule=rule,
        engine_kind=table.word("engine_kind", ISO_KINDS, required=rule == "ISO 3046"),
        mechanical_efficiency=table.number("mechanical_efficiency", 0.80, least=0.5, greatest=1),
        curve_at=table.word("curve_at", CURVE_AT, "equal brake power"),
        source=table.text("source", "typical, not your maker's"),
        **percents,
    )
    if rule == "two-stroke percentages" and not any(table.has(key) for key in percents):
        table.note("rule", "the percentages of the maker's guide beside this rule: percent_per_10k_coolant ...")
    return correction


def _trials(table: Table, modes: tuple[str, ...]) -> tuple[TrialCurve, ...]:
    trials: list[TrialCurve] = []
    for index, inner in enumerate(table.tables("trial")):
        trial = _trial(inner, index, modes, table)
        if any(trial.name == other.name for other in trials):
            inner.faults.note((*inner.path, "name"), f"{shown(trial.name)} a second time", "a name of its own")
        trials.append(trial)
    return tuple(trials)


def _trial(table: Table, index: int, modes: tuple[str, ...], engine: Table) -> TrialCurve:
    mode = table.word("operating_mode", modes, modes[0])
    state = table.word("blowers", BLOWER_STATES, required=engine.content.get("auxiliary_blowers") is True)
    if state and _without_blowers(engine):
        table.note("blowers", "no such key, or auxiliary_blowers = true of this engine")
    load = table.numbers("load_percent", least=1, greatest=130, required=True)
    rising(table, "load_percent", load)
    columns = {
        key: table.numbers(key, least=least, greatest=greatest) for key, (least, greatest) in _TRIAL_COLUMNS.items()
    }
    for key, values in columns.items():
        if values and load and len(values) != len(load):
            table.note(key, f"as many numbers as load_percent has ({len(load)}, not {len(values)})")
    if not table.has("sfoc_g_kwh") and not table.has("heat_rate_kj_kwh"):
        table.missing("sfoc_g_kwh", "sfoc_g_kwh, or heat_rate_kj_kwh of a gas engine")
    return TrialCurve(
        name=table.text("name", f"trial {index + 1}"),
        operating_mode=mode,
        blowers=state or None,
        lower_calorific_value_mj_kg=table.number(
            "lower_calorific_value_mj_kg", 42.7, least=5, greatest=130, unit="MJ/kg"
        ),
        load_percent=load,
        **columns,
    )


def _counters(table: Table | None, points: Mapping[str, ReadingDefinition]) -> dict[str, Counter]:
    if table is None:
        return {}
    counters = {}
    allowed = [key for key, point in points.items() if point.kind == "counter" and point.per not in _READ_ELSEWHERE]
    for key in table.content:
        table.asked.add(key)
        if key not in allowed:
            expected = "a counter of the engine, e.g. revolution_counter = { digits = 8 }"
            table.faults.note((*table.path, key), f"the key {shown(key)}", expected, nearest(key, allowed))
            continue
        inner = table.table(key)
        if inner is not None:
            counters[key] = read_counter(inner)
    return counters
