"""Fuel at the desk."""

from __future__ import annotations

from typing import Any

from logbook.command_line.calculations.record import NUMBER, TEXT, Calculation, Inputs, Results

T = "temperature"


def _calorific_value(i: Inputs) -> Results:
    from logbook.physics.fuel import calorific_value

    net, gross = calorific_value(i["kind"], i["density15"], i["sulphur"], i["water"], i["ash"])
    return {"net_mj_kg": net / 1e6, "gross_mj_kg": gross / 1e6}


def _volume_correction(i: Inputs) -> Results:
    from logbook.physics.density import mass_in_air, volume_correction

    vcf = volume_correction(i["density15"], i["temperature"])
    found: Results = {"vcf": vcf}
    if "volume_m3" in i:
        volume15 = i["volume_m3"] * vcf
        found |= {
            "volume15_m3": volume15,
            "mass_vacuum_t": volume15 * i["density15"] / 1000,
            "mass_air_t": mass_in_air(volume15, i["density15"]) / 1000,
        }
    return found


def _density15(i: Inputs) -> Results:
    from logbook.physics.density import density15

    glass = i.get("glass", "no")
    if glass not in ("yes", "no"):
        raise ValueError(f"glass is yes or no, not '{glass}'.")
    return {"density15": density15(i["reading"], i["temperature"], glass == "yes")}


def _ignition_number(i: Inputs) -> Results:
    from logbook.physics.fuel import ignition_number

    return {"ccai": ignition_number(i["density15"], i["viscosity"], i.get("viscosity_temperature", 50.0))}


def _air_need(i: Inputs) -> Results:
    from logbook.physics.fuel import air_need

    return {"air_fuel_ratio": air_need(i["carbon"], i["hydrogen"], i.get("sulphur", 0.0), i.get("oxygen", 0.0))}


def _carbon_balance(i: Inputs) -> Results:
    from logbook.physics.exhaust import carbon_balance

    found: Any = carbon_balance(
        i["carbon"], i["hydrogen"], i["sulphur"], co2_dry=i.get("co2_dry"), o2_dry=i.get("o2_dry"),
        humidity_ratio=i.get("humidity_ratio", 0.0),
    )  # fmt: skip
    return {
        "air_kg_kg": found.air_kg_kg, "lambda": found.lambda_, "o2_dry": found.o2_dry, "co2_dry": found.co2_dry,
        "exhaust_kg_kg": found.exhaust_kg_kg,
    }  # fmt: skip


def _carbon_intensity(i: Inputs) -> Results:
    from logbook.physics.carbon_intensity import carbon_intensity

    fuels = {key.removeprefix("fuel."): value for key, value in i.items() if key.startswith("fuel.")}
    found = carbon_intensity(i["ship_type"], i["capacity"], int(i["year"]), i["distance_nm"], fuels)
    return {
        "attained": found.attained, "required": found.required, "ratio": found.ratio, "rating": found.rating,
        "bounds": list(found.bounds),
    }  # fmt: skip


ALL = (
    Calculation(
        "calorific-value",
        {"kind": TEXT, "density15": "density", "sulphur": "content", "water": "content", "ash": "content"},
        {"net_mj_kg": "MJ/kg", "gross_mj_kg": "MJ/kg"},
        _calorific_value,
        ("(c0 - c2 rho^2 + c1 rho) x [1 - 0.01 (water + ash + sulphur)] + 0.0942 sulphur - 0.02449 water",
         "gross: without the last term and with its own constants"),
        "ISO 8217, informative annex; the distillate line and both gross lines from memory",
        "calorific-value kind=residual density15=987 sulphur=2.5 water=0.2 ash=0",
        caution="A measured laboratory value goes before the formula. Not for gas, methanol or ester blends.",
    ),
    Calculation(
        "volume-correction",
        {"density15": "density", "temperature": T},
        {"vcf": "", "volume15_m3": "m3", "mass_vacuum_t": "t", "mass_air_t": "t"},
        _volume_correction,
        ("VCF = exp[-alpha dt (1 + 0.8 alpha dt)], dt = t - 15 degC, alpha by zone of density", "V15 = V x VCF",
         "mass in vacuum = V15 rho15; in air = V15 (rho15 - 1.1)"),
        "ASTM D1250-80 / ISO 91-1, table 54B, 1980 form, base 15 degC",
        "volume-correction density15=950 temperature=50 volume_m3=1000",
        takes={"volume_m3": NUMBER},
    ),
    Calculation(
        "density15",
        {"reading": "density", "temperature": T},
        {"density15": "kg/m3"},
        _density15,
        ("rho at t = reading x (1 - 2.3e-5 dt - 2e-8 dt^2) for a glass hydrometer", "rho15 = rho at t / VCF, repeated until it stands"),
        "ASTM D1250-80, table 53B, 1980 form",
        "density15 reading=945 temperature=40 glass=yes",
        takes={"glass": TEXT},
    ),
    Calculation(
        "ignition-number",
        {"density15": "density", "viscosity": "viscosity"},
        {"ccai": ""},
        _ignition_number,
        ("rho - 81 - 141 log10[log10(v + 0.85)] - 483 log10[(t + 273)/323]",),
        "data sheet 504.26 (50-degree form); temperature term from memory",
        "ignition-number density15=990 viscosity=180",
        takes={"viscosity_temperature": T},
        caution="A number without a verdict: limits are per grade and maker.",
    ),
    Calculation(
        "air-need",
        {"carbon": NUMBER, "hydrogen": NUMBER},
        {"air_fuel_ratio": "kg/kg"},
        _air_need,
        ("[31.998 c/12.011 + 31.998 h/4.032 + 31.998 s/32.06 - o]/0.2314",),
        "arithmetic; dry air with 0.2314 oxygen by mass",
        "air-need carbon=0.862 hydrogen=0.136 sulphur=0.0017",
        takes={"sulphur": NUMBER, "oxygen": NUMBER},
    ),
    Calculation(
        "carbon-balance",
        {"carbon": NUMBER, "hydrogen": NUMBER, "sulphur": NUMBER},
        {"air_kg_kg": "kg/kg", "lambda": "", "o2_dry": "", "co2_dry": "", "exhaust_kg_kg": "kg/kg"},
        _carbon_balance,
        ("moles of air from the dry CO2 (or O2) fraction", "lambda = 0.2095 L/(oxygen need)", "exhaust = air (1 + W) + 1"),
        "own form after ISO 8178 / NOx Technical Code appendix 6, method 1",
        "carbon-balance carbon=0.862 hydrogen=0.136 sulphur=0.0017 co2_dry=0.04 humidity_ratio=0.0107",
        takes={"co2_dry": NUMBER, "o2_dry": NUMBER, "humidity_ratio": NUMBER},
        one_of=("co2_dry", "o2_dry"),
    ),
    Calculation(
        "carbon-intensity",
        {"ship_type": TEXT, "capacity": NUMBER, "year": NUMBER, "distance_nm": NUMBER},
        {"attained": "g/(t nm)", "required": "g/(t nm)", "ratio": "", "rating": "", "bounds": "g/(t nm)"},
        _carbon_intensity,
        ("attained = sum(fuel x CF) x 1e6/(own capacity x distance)", "required = (1 - Z/100) a C^-c", "bounds = required x d1..d4"),
        "IMO MEPC.352(78), 353(78), 338(76) with 400(83), 354(78), as quoted in public secondary texts",
        "carbon-intensity ship_type='bulk carrier' capacity=60000 year=2024 distance_nm=55000 fuel.heavy_fuel_oil=5000 fuel.diesel_oil=300",
        many="fuel.",
        caution="Unadjusted, for own use: corrections and voyage adjustments are not made.",
    ),
)  # fmt: skip
