"""What plant.toml does not say, and which figures go without it: a plant opens with little, and grows."""

from __future__ import annotations

from collections.abc import Iterator

from logbook.plant.missing_of_engine import COMPARISON, EFFICIENCY, LADDER, Missing, joined, missing_of_engine
from logbook.plant.records import Meter, Plant
from logbook.plant.walk import PLANT

__all__ = ["Missing", "missing"]

ALTITUDE_WITHOUT_BAROMETER_M = 100.0
"""Above it a barometer cannot be assumed: 900 m is about a tenth of the pressure."""
_VOLUMES = ("L", "m3")


def missing(plant: Plant) -> tuple[Missing, ...]:
    """All that is missing: engine by engine, then meters, fuels and the plant."""
    engines = [found for engine in plant.engines for found in missing_of_engine(plant, engine)]
    return (*engines, *_meters(plant), *_fuels(plant), *_whole_plant(plant))


def _meters(plant: Plant) -> Iterator[Missing]:
    together: dict[tuple[str, ...], list[str]] = {}
    for meter in plant.meters:
        if meter.key in ("fuel_meter_supply", "fuel_meter_return", "gas_meter") and len(meter.serves) > 1:
            together.setdefault(meter.serves, []).append(meter.id)
        yield from _temperature(meter)
        if meter.key == "fuel_meter_return" and not any(
            other.key == "fuel_meter_supply" and set(other.serves) & set(meter.serves) for other in plant.meters
        ):
            yield Missing(
                meter.id,
                ("fuel_rate_kg_h", *EFFICIENCY),
                f"It counts what comes back, and no supply meter is entered for {joined(meter.serves)}.",
                '[[meter]] key = "fuel_meter_supply"',
                "no_fuel_reading",
            )
    for serves, meters in together.items():
        yield Missing(
            " ".join(meters),
            EFFICIENCY,
            f"Fuel is measured for {joined(serves)} together: figures of one of them stand only while it runs alone.",
            "[[meter]] for each of them, if they are fitted",
            "common_fuel_meter",
        )


def _temperature(meter: Meter) -> Iterator[Missing]:
    liquid = meter.key in ("fuel_meter_supply", "fuel_meter_return", "boiler_fuel_meter") and meter.unit in _VOLUMES
    if (liquid or (meter.key == "gas_meter" and meter.unit == "m3")) and not meter.temperature:
        yield Missing(
            meter.id,
            ("fuel_rate_kg_h", *EFFICIENCY),
            f"It counts {meter.unit}, and without its temperature that is no mass.",
            'temperature = "read" in its [[meter]], or a fixed number of degC',
            "no_fuel_reading",
        )


def _fuels(plant: Plant) -> Iterator[Missing]:
    if not plant.fuels:
        yield Missing(
            PLANT,
            ("lower_calorific_value_mj_kg", *EFFICIENCY),
            "No grade of fuel is entered: until a lot has its analysis, there is no calorific value.",
            "[[fuel]] grade, kind, lower_calorific_value_mj_kg",
            "lcv_missing",
        )
    for fuel in plant.fuels:
        by_mass, by_volume = fuel.lower_calorific_value_mj_kg, fuel.lower_calorific_value_mj_m3
        if by_mass is None and by_volume is None:
            key = "lower_calorific_value_mj_m3" if fuel.kind == "gas" else "lower_calorific_value_mj_kg"
            yield Missing(
                fuel.grade,
                ("lower_calorific_value_mj_kg", *EFFICIENCY),
                "No calorific value is entered: a lot without an analysis has none, and its efficiency is empty.",
                f"{key} in [[fuel]], or the analysis of every lot",
                "lcv_missing",
            )
        else:
            yield Missing(
                fuel.grade,
                COMPARISON,
                "A lot without an analysis takes the calorific value of its grade, and is shown, not compared.",
                "the analysis of every lot: logbook note PLANT lot ...",
                "lcv_default",
            )
        if fuel.density15_kg_m3 is None and fuel.kind != "gas" and _by_volume(plant):
            yield Missing(
                fuel.grade,
                ("fuel_rate_kg_h", *EFFICIENCY),
                "No density is entered: litres of a lot without an analysis are no mass.",
                "density15_kg_m3 in [[fuel]], or the analysis of every lot",
                "no_fuel_reading",
            )
        wanted = [key for key in ("price_per_t", "carbon_factor") if getattr(fuel, key) is None]
        if wanted:
            figures = {"price_per_t": "excess_cost", "carbon_factor": "excess_co2_t"}
            yield Missing(
                fuel.grade,
                tuple(figures[key] for key in wanted),
                f"{joined(wanted)} not entered: what the excess costs is said in tonnes of fuel only.",
                f"{', '.join(wanted)} in [[fuel]]",
            )


def _by_volume(plant: Plant) -> bool:
    return any(meter.key != "gas_meter" and meter.unit in _VOLUMES for meter in plant.meters)


def _whole_plant(plant: Plant) -> Iterator[Missing]:
    if "barometric_pressure" not in plant.plant_readings:
        assumed = plant.altitude_m <= ALTITUDE_WITHOUT_BAROMETER_M
        yield Missing(
            PLANT,
            ("sfoc_corrected_g_kwh", *LADDER),
            "The barometer is not read: "
            + ("1013 mbar are taken." if assumed else "at this altitude nothing can be taken for it."),
            "barometric_pressure in readings of [plant]",
            "barometer_assumed" if assumed else "barometer_missing",
        )
    if plant.kind == "ship":
        for engine in plant.engines:
            if engine.use == "propulsion" and engine.propeller_pitch_m is None:
                yield Missing(
                    engine.id,
                    ("slip",),
                    "The pitch of the propeller is not entered.",
                    "propeller_pitch_m in [[engine]]",
                )
        if not plant.ship_type or plant.capacity_t is None:
            yield Missing(
                PLANT,
                ("carbon_intensity",),
                "Type and capacity of the ship are not both entered.",
                "ship_type, capacity_t in [plant]",
            )
    if plant.marks.excess_points is None:
        yield Missing(
            PLANT,
            ("forecast",),
            "No mark of your own is entered: the trend cannot say when the excess will reach it.",
            "[marks] excess_points",
        )
    if not any("countersign" in person.rights for person in plant.people):
        yield Missing(
            PLANT,
            ("countersignature",),
            "Nobody is entered with the right to countersign: no month can be sealed.",
            '[[person]] id, name, rights = ["read", "enter", "sign", "countersign"]',
        )
