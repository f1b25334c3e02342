"""Fuel and carbon at the desk."""

from __future__ import annotations

from collections.abc import Collection

from logbook.command_line.calculations.record import FRACTION, WHOLE, WORD, Answer, Calculation, Inputs, Key, shown

DENSITY15 = Key("density15", "kg/m3", "density", says="at 15 degC")
OIL_TEMPERATURE = Key("temperature", "degC", "temperature", says="of the oil")


def _calorific_value(i: Inputs) -> Answer:
    from logbook.physics.fuel import GROSS_TERMS, NET_TERMS, calorific_value

    kind, rho, s, w, a = i["kind"], i["density15"], i["sulphur"], i["water"], i["ash"]
    net, gross = (value / 1e6 for value in calorific_value(kind, rho, s, w, a))
    n0, n2, n1 = NET_TERMS[kind]
    g0, g2 = GROSS_TERMS[kind]
    diluted = f"x [1 - 0.01 x ({w:g} + {a:g} + {s:g})] + 0.0942 x {s:g}"
    return Answer(
        {"net_mj_kg": net, "gross_mj_kg": gross},
        (
            f"net = ({n0:g} - {n2:g} x {rho:g}^2 + {n1:g} x {rho:g}) {diluted} - 0.02449 x {w:g} = {net:.6g} MJ/kg",
            f"gross = ({g0:g} - {g2:g} x {rho:g}^2) {diluted} = {gross:.6g} MJ/kg",
        ),
        ("The distillate line is from memory.",) if kind == "distillate" else (),
    )


def _volume_correction(i: Inputs) -> Answer:
    from logbook.physics.density import AIR_BUOYANCY_KG_M3, expansion, mass_in_air, volume_correction

    rho, t = i["density15"], i["temperature"]
    vcf, alpha = volume_correction(rho, t), expansion(rho)
    alpha_dt = alpha * (t - 15)
    results = {"vcf": vcf}
    steps = [
        f"alpha at {rho:g} kg/m3 = {alpha:.6g} /K; alpha dt = {alpha:.6g} x ({t:g} - 15) = {alpha_dt:.6g}",
        f"VCF = exp[-{alpha_dt:.6g} x (1 + 0.8 x {alpha_dt:.6g})] = {vcf:.6f}",
    ]
    if "volume_m3" in i:
        v15 = i["volume_m3"] * vcf
        vacuum, air = v15 * rho / 1000, mass_in_air(v15, rho) / 1000
        results |= {"volume15_m3": v15, "mass_vacuum_t": vacuum, "mass_air_t": air}
        steps += [
            f"volume at 15 degC = {i['volume_m3']:g} x {vcf:.6f} = {v15:.6g} m3",
            f"mass in vacuum = {v15:.6g} x {rho:g} / 1000 = {vacuum:.6g} t",
            f"weight in air = {v15:.6g} x ({rho:g} - {AIR_BUOYANCY_KG_M3:g}) / 1000 = {air:.6g} t",
        ]
    return Answer(results, tuple(steps))


def _density15(i: Inputs) -> Answer:
    from logbook.physics.density import density15, volume_correction

    reading, t, glass = i["reading"], i["temperature"], i.get("glass") == "yes"
    found = density15(reading, t, glass)
    vcf = volume_correction(found, t)
    at_t = (
        f"density at {t:g} degC = {reading:g} x (1 - 2.3e-5 x {t - 15:g} - 2e-8 x {t - 15:g}^2) = {found * vcf:.6g} kg/m3"
        if glass
        else f"density at {t:g} degC = the reading, {reading:g} kg/m3: no glass that grows"
    )
    return Answer(
        {"density15": found},
        (
            at_t,
            f"density15 = {found * vcf:.6g} / VCF = {found * vcf:.6g} / {vcf:.6f} = {found:.6g} kg/m3, repeated until it stands",
        ),
    )


def _ignition_number(i: Inputs) -> Answer:
    from logbook.physics.fuel import ignition_number

    rho, v, t = i["density15"], i["viscosity"], i.get("viscosity_temperature", 50.0)
    found = ignition_number(rho, v, t)
    return Answer(
        {"ccai": found},
        (f"{rho:g} - 81 - 141 x log10[log10({v:g} + 0.85)] - 483 x log10[({t:g} + 273)/323] = {found:.6g}",),
        () if t == 50 else ("The term for a viscosity not at 50 degC is from memory.",),
    )


def _air_need(i: Inputs) -> Answer:
    from logbook.physics.fuel import air_need

    c, h, s, o = i["carbon"], i["hydrogen"], i.get("sulphur", 0.0), i.get("oxygen", 0.0)
    found = air_need(c, h, s, o)
    return Answer(
        {"air_fuel_ratio": found},
        (
            f"[31.998 x {c:g}/12.011 + 31.998 x {h:g}/4.032 + 31.998 x {s:g}/32.06 - {o:g}] / 0.2314 = {found:.6g} kg/kg",
        ),
    )


def _carbon_balance(i: Inputs) -> Answer:
    from logbook.physics.exhaust import carbon_balance

    humidity = i.get("humidity_ratio", 0.0)
    found = carbon_balance(
        i["carbon"], i["hydrogen"], i["sulphur"], co2_dry=i.get("co2_dry"), o2_dry=i.get("o2_dry"),
        humidity_ratio=humidity,
    )  # fmt: skip
    n_c, n_h2, n_s = i["carbon"] / 0.012011, i["hydrogen"] / 0.002016, i["sulphur"] / 0.03206
    need, moles = n_c + n_h2 / 2 + n_s, found.air_kg_kg / 0.028965
    measured = f"dry CO2 {100 * found.co2_dry:.4g} %" if "co2_dry" in i else f"dry O2 {100 * found.o2_dry:.4g} %"
    return Answer(
        {
            "air_kg_kg": found.air_kg_kg, "lambda": found.lambda_, "o2_dry": found.o2_dry, "co2_dry": found.co2_dry,
            "exhaust_kg_kg": found.exhaust_kg_kg,
        },
        (
            f"mol per kg fuel: carbon {n_c:.5g}, H2 {n_h2:.5g}, sulphur {n_s:.5g}; oxygen need {need:.5g}",
            f"dry air from {measured}: {moles:.6g} mol = {found.air_kg_kg:.6g} kg per kg fuel",
            f"lambda = 0.2095 x {moles:.6g} / {need:.5g} = {found.lambda_:.5g}, the overall one",
            f"exhaust = {found.air_kg_kg:.6g} x (1 + {humidity:g}) + 1 = {found.exhaust_kg_kg:.6g} kg per kg fuel",
        ),
    )  # fmt: skip


def _carbon_intensity(i: Inputs) -> Answer:
    from logbook.physics.carbon_intensity import (
        BY_GROSS_TONNAGE,
        FROM_MEMORY,
        REDUCTION_PERCENT,
        carbon_intensity,
        reference_line,
    )
    from logbook.physics.fuel import REPORTING_FUELS

    ship, capacity, year, distance = i["ship_type"], i["capacity"], i["year"], i["distance_nm"]
    fuels = {key.removeprefix("fuel."): value for key, value in i.items() if key.startswith("fuel.")}
    found = carbon_intensity(ship, capacity, year, distance, fuels)
    line = reference_line(ship, capacity)
    of_line = line.fixed_capacity or capacity
    burnt = " + ".join(f"{mass:g} x {REPORTING_FUELS[name].carbon_factor:g}" for name, mass in fuels.items())
    unquoted = [name for name in fuels if not REPORTING_FUELS[name].factor_quoted]
    cautions = []
    if ship in FROM_MEMORY:
        cautions.append(f"From memory for {ship}: {FROM_MEMORY[ship]}.")
    if unquoted:
        cautions.append(f"From memory: the carbon factor of {', '.join(unquoted)}.")
    return Answer(
        {
            "attained": found.attained, "required": found.required, "ratio": found.ratio, "rating": found.rating,
            "bounds": list(found.bounds),
        },
        (
            f"capacity = {'gross tonnage' if ship in BY_GROSS_TONNAGE else 'deadweight, t'}",
            f"CO2 = {burnt} = {found.co2_t:.6g} t",
            f"attained = {found.co2_t:.6g} x 1e6 / ({capacity:g} x {distance:g}) = {found.attained:.6g}",
            f"reference = {line.a:g} x {of_line:g}^-{line.c:g} = {found.reference:.6g}",
            f"required in {year} = (1 - {REDUCTION_PERCENT[year]:g}/100) x {found.reference:.6g} = {found.required:.6g}",
            f"bounds = {found.required:.6g} x {', '.join(f'{d:g}' for d in line.d)} = {shown(list(found.bounds))}",
            f"attained/required = {found.ratio:.6g}: {found.rating}",
        ),
        tuple(cautions),
    )  # fmt: skip


def _kinds() -> Collection[str]:
    from logbook.physics.fuel import DISTILLATE, RESIDUAL

    return RESIDUAL, DISTILLATE


def _ship_types() -> Collection[str]:
    from logbook.physics.carbon_intensity import REFERENCE_LINES

    return tuple(REFERENCE_LINES)


def _fuels() -> Collection[str]:
    from logbook.physics.fuel import REPORTING_FUELS

    return tuple(REPORTING_FUELS)


ALL = (
    Calculation(
        "calorific-value",
        (
            Key("kind", kind=WORD, choices=_kinds),
            DENSITY15,
            Key("sulphur", "% m/m", "content"), Key("water", "% m/m", "content"), Key("ash", "% m/m", "content"),
        ),
        {"net_mj_kg": "MJ/kg", "gross_mj_kg": "MJ/kg"},
        _calorific_value,
        ("net = (c0 - c2 rho^2 + c1 rho) [1 - 0.01 (water + ash + sulphur)] + 0.0942 sulphur - 0.02449 water",
         "gross = (g0 - g2 rho^2) [1 - 0.01 (water + ash + sulphur)] + 0.0942 sulphur"),
        "ISO 8217, informative annex; the distillate line and both gross lines from memory",
        "calorific-value kind=residual density15=987 sulphur=2.5 water=0.2 ash=0",
        ("A measured laboratory value goes before the formula. Not for gas, methanol or ester blends.",),
    ),
    Calculation(
        "volume-correction",
        (DENSITY15, OIL_TEMPERATURE, Key("volume_m3", "m3", "volume", needed=False, says="at that temperature")),
        {"vcf": "-", "volume15_m3": "m3", "mass_vacuum_t": "t", "mass_air_t": "t"},
        _volume_correction,
        ("VCF = exp[-alpha dt (1 + 0.8 alpha dt)], dt = t - 15 degC, alpha by zone of density", "V15 = V VCF",
         "mass in vacuum = V15 rho15; weight in air = V15 (rho15 - 1.1)"),
        "ASTM D1250-80 / ISO 91-1, table 54B, 1980 form, base 15 degC",
        "volume-correction density15=950 temperature=50 volume_m3=1000",
    ),
    Calculation(
        "density15",
        (
            Key("reading", "kg/m3", "density"), OIL_TEMPERATURE,
            Key("glass", kind=WORD, needed=False, choices=lambda: ("yes", "no"), says="a glass hydrometer grows with its oil"),
        ),
        {"density15": "kg/m3"},
        _density15,
        ("density at t = reading (1 - 2.3e-5 dt - 2e-8 dt^2) for a glass hydrometer, else the reading",
         "density15 = density at t / VCF(density15, t), repeated until it stands"),
        "ASTM D1250-80, table 53B, 1980 form",
        "density15 reading=945 temperature=40 glass=yes",
    ),
    Calculation(
        "ignition-number",
        (
            DENSITY15, Key("viscosity", "mm2/s", "viscosity"),
            Key("viscosity_temperature", "degC", "temperature", needed=False, says="of the viscosity, else 50"),
        ),
        {"ccai": "-"},
        _ignition_number,
        ("rho - 81 - 141 log10[log10(v + 0.85)] - 483 log10[(t + 273)/323]",),
        "data sheet 504.26 (50-degree form); temperature term from memory",
        "ignition-number density15=990 viscosity=180",
        ("A number without a verdict: limits are per grade and maker.",),
    ),
    Calculation(
        "air-need",
        (
            Key("carbon", family=FRACTION), Key("hydrogen", family=FRACTION),
            Key("sulphur", family=FRACTION, needed=False), Key("oxygen", family=FRACTION, needed=False),
        ),
        {"air_fuel_ratio": "kg/kg"},
        _air_need,
        ("[31.998 c/12.011 + 31.998 h/4.032 + 31.998 s/32.06 - o]/0.2314",),
        "arithmetic; dry air with 0.2314 oxygen by mass",
        "air-need carbon=0.862 hydrogen=0.136 sulphur=0.0017",
    ),
    Calculation(
        "carbon-balance",
        (
            Key("carbon", family=FRACTION), Key("hydrogen", family=FRACTION), Key("sulphur", family=FRACTION),
            Key("co2_dry", family=FRACTION, needed=False), Key("o2_dry", family=FRACTION, needed=False),
            Key("humidity_ratio", "kg/kg", needed=False, says="water in the dry air, else none"),
        ),
        {"air_kg_kg": "kg/kg", "lambda": "-", "o2_dry": "-", "co2_dry": "-", "exhaust_kg_kg": "kg/kg"},
        _carbon_balance,
        ("moles of air L from dry CO2 x: x = (n_C + 0.0004 L)/(n_C + n_S + L - need); from dry O2 likewise",
         "lambda = 0.2095 L/need; exhaust = air (1 + W) + 1"),
        "own form after ISO 8178 / NOx Technical Code appendix 6, method 1",
        "carbon-balance carbon=0.862 hydrogen=0.136 sulphur=0.0017 co2_dry=0.04 humidity_ratio=0.0107",
        ("The lambda is the overall one: on a two-stroke engine it counts air that was never trapped.",),
        one_of=("co2_dry", "o2_dry"),
    ),
    Calculation(
        "carbon-intensity",
        (
            Key("ship_type", kind=WORD, choices=_ship_types), Key("capacity", says="own deadweight in t, or gross tonnage"),
            Key("year", kind=WHOLE), Key("distance_nm", "nm", "distance"),
        ),
        {"attained": "g/(t or GT nm)", "required": "g/(t or GT nm)", "ratio": "-", "rating": "", "bounds": "g/(t or GT nm)"},
        _carbon_intensity,
        ("attained = sum(fuel CF) 1e6/(own capacity x distance)", "required = (1 - Z/100) a C^-c",
         "bounds = required x d1..d4; A below d1, then B, C, D, and E from d4"),
        "IMO MEPC.352(78), 353(78), 338(76) with 400(83), 354(78), as quoted in public secondary texts",
        "carbon-intensity ship_type='bulk carrier' capacity=60000 year=2024 distance_nm=55000 fuel.heavy_fuel_oil=5000 fuel.diesel_oil=300",
        ("Unadjusted, for own use: corrections and voyage adjustments are not made.",),
        many=Key("fuel", "t", "mass", choices=_fuels),
    ),
)  # fmt: skip
