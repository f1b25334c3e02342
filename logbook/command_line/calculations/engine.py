"""Engine and thermodynamics at the desk."""

from __future__ import annotations

from logbook.command_line.calculations.record import LIST, NUMBER, TEXT, Calculation, Inputs, Results

T = "temperature"
K = 273.15


def _ambient_correction(i: Inputs) -> Results:
    from logbook.physics.ambient import MECHANICAL_EFFICIENCY, iso_3046
    from logbook.physics.humidity import vapour_pressure

    vapour = vapour_pressure(i["temperature"], i["humidity"]) if "humidity" in i else 0.0
    found = iso_3046(
        i["engine"], i["pressure_kpa"] * 1e3, i["temperature"], vapour, i.get("coolant"),
        i.get("mechanical_efficiency", MECHANICAL_EFFICIENCY),
    )  # fmt: skip
    return {"k": found.k, "alpha": found.alpha, "beta": found.beta}


def _two_stroke_rule(i: Inputs) -> Results:
    from logbook.physics.ambient import POWER_READJUSTED, percentage_rules

    coefficients = i.get("coefficients", list(POWER_READJUSTED))
    if len(coefficients) != 3:
        raise ValueError("coefficients are three: percent for +10 K coolant, +10 K suction air, +10 mbar.")
    factor = percentage_rules(i["blower"], i["pressure_mbar"], i.get("coolant"), *coefficients)
    return {"percent": 100 * (factor - 1), "sfoc_corrected_g_kwh": i["sfoc"] * i["lcv"] / 42.7 / factor}


def _gas(i: Inputs) -> Results:
    from logbook.physics.gas import air_state, product_state

    state = (
        product_state(i["temperature_k"], i["lambda"], i.get("hc_ratio", 1.8))
        if "lambda" in i
        else air_state(i["temperature_k"])
    )
    return {
        "cp_kj_kgk": state.cp / 1e3, "k": state.k, "h_kj_kg": state.h / 1e3, "u_kj_kg": state.u / 1e3,
        "s0_kj_kgk": state.s0 / 1e3,
    }  # fmt: skip


def _cycle(i: Inputs) -> Results:
    from logbook.physics.cycle import limited_pressure_cycle

    found = limited_pressure_cycle(
        i["p1_bar"] * 1e5, i["t1_k"], i["compression_ratio"], i["pmax_bar"] * 1e5, i["lambda"], i["lcv"] * 1e6,
        i["hc_ratio"], 0.0, i.get("expansion_ratio"),
    )  # fmt: skip
    return {
        "t2_k": found.t2_k, "p2_bar": found.p2_pa / 1e5, "t3_k": found.t3_k, "p3_bar": found.p3_pa / 1e5,
        "t4_k": found.t4_k, "efficiency": found.efficiency, "mep_bar": found.mean_pressure_pa / 1e5,
        "flame_k": found.flame_k, "label": found.label,
    }  # fmt: skip


def _air_cycle(i: Inputs) -> Results:
    from logbook.physics.cycle import air_cycle

    found = air_cycle(i["p1_bar"] * 1e5, i["t1_k"], i["compression_ratio"], i["pressure_ratio"], i["cutoff_ratio"])
    return {
        "t2_k": found.t2_k, "t3_k": found.t3_k, "t4_k": found.t4_k, "t5_k": found.t5_k,
        "efficiency": found.efficiency, "mep_bar": found.mean_pressure_pa / 1e5,
    }  # fmt: skip


def _flame(i: Inputs) -> Results:
    from logbook.physics.cycle import flame_temperature

    return {"flame_k": flame_temperature(i["t_air_k"], i["lambda"], i["hc_ratio"], i["lcv"] * 1e6)}


def _bound(i: Inputs) -> Results:
    from logbook.physics.bounds import reversible_bound

    return {"reversible_bound": reversible_bound(i["hot"] + K, i["cold"] + K)}


def _exergy(i: Inputs) -> Results:
    from logbook.physics.exergy import exhaust_exergy

    ratio = i["pressure_bar"] / i["ambient_pressure_bar"] if {"pressure_bar", "ambient_pressure_bar"} <= set(i) else 1.0
    h, e = exhaust_exergy(i["temperature"] + K, i["lambda"], i["hc_ratio"], i["ambient"] + K, ratio)
    return {"h_kj_kg": h / 1e3, "exergy_kj_kg": e / 1e3}


def _mean_pressure(i: Inputs) -> Results:
    from logbook.physics.power import mean_pressure, power_from_mean_pressure, swept_volume

    volume = swept_volume(i["bore_mm"] / 1e3, i["stroke_mm"] / 1e3)
    rest = (volume, i["cylinders"], i["speed_rpm"] / 60, i["cycle"])
    if "power_kw" in i:
        return {"mean_pressure_bar": mean_pressure(i["power_kw"] * 1e3, *rest) / 1e5}
    return {"power_kw": power_from_mean_pressure(i["pressure_bar"] * 1e5, *rest) / 1e3}


def _slip(i: Inputs) -> Results:
    from logbook.physics.power import NAUTICAL_MILE_M, slip

    found, engine = slip(i["pitch_m"], i["revolutions"], i["distance_nm"] * NAUTICAL_MILE_M)
    return {"slip": found, "engine_distance_nm": engine / NAUTICAL_MILE_M}


_TYPICAL = "Coefficients are typical defaults from memory unless you give your maker's."

ALL = (
    Calculation(
        "ambient-correction",
        {"engine": TEXT, "pressure_kpa": NUMBER, "temperature": T},
        {"k": "", "alpha": "", "beta": ""},
        _ambient_correction,
        ("k = [(p_x - a phi p_sx)/(p_r - a phi p_sr)]^m (T_r/T_x)^n (T_cr/T_cx)^s", "alpha = k - 0.7 (1 - k)(1/eta_m - 1)", "beta = k/alpha"),
        "ISO 3046-1 / ISO 15550 as worked in Mathur & Sharma, Internal Combustion Engine, ch. 27",
        "ambient-correction engine='turbocharged four-stroke, charge-air cooler' pressure_kpa=100 temperature=45 coolant=32",
        takes={"humidity": NUMBER, "coolant": T, "mechanical_efficiency": NUMBER},
        caution="A correction above reference output is arithmetic, not permission to overload.",
    ),
    Calculation(
        "two-stroke-rule",
        {"sfoc": "specific use", "lcv": "calorific value", "blower": T, "pressure_mbar": NUMBER},
        {"percent": "%", "sfoc_corrected_g_kwh": "g/kWh"},
        _two_stroke_rule,
        ("d % = c_c (coolant - 25)/10 + c_a (blower - 25)/10 + c_p (p - 1000)/10", "corrected = SFOC (LCV/42.7)/(1 + d/100)"),
        "makers' percentage rules; start values from memory",
        "two-stroke-rule sfoc=172 lcv=41 blower=30 coolant=29 pressure_mbar=1005",
        takes={"coolant": T, "coefficients": LIST},
        caution=_TYPICAL,
    ),
    Calculation(
        "gas", {"temperature_k": NUMBER},
        {"cp_kj_kgk": "kJ/(kg K)", "k": "", "h_kj_kg": "kJ/kg", "u_kj_kg": "kJ/kg", "s0_kj_kgk": "kJ/(kg K)"},
        _gas,
        ("NASA polynomials of N2, O2, Ar, CO2, H2O summed over the mixture", "without lambda: dry air on the datum of air tables"),
        "nasa_gas.yaml distributed with cantera; datum Moran & Shapiro table A-22",
        "gas temperature_k=1000 lambda=2.0 hc_ratio=1.8",
        takes={"lambda": NUMBER, "hc_ratio": NUMBER},
    ),
    Calculation(
        "cycle",
        {"p1_bar": NUMBER, "t1_k": NUMBER, "compression_ratio": NUMBER, "pmax_bar": NUMBER, "lambda": NUMBER,
         "lcv": "calorific value", "hc_ratio": NUMBER},
        {"t2_k": "K", "p2_bar": "bar", "t3_k": "K", "p3_bar": "bar", "t4_k": "K", "efficiency": "", "mep_bar": "bar",
         "flame_k": "K", "label": ""},
        _cycle,
        ("1-2 isentropic compression of air", "2-3 heat at constant volume up to Pmax, then at constant pressure",
         "3-4 isentropic expansion of products to the expansion ratio", "4-1 blow-down; efficiency = work/heat"),
        "limited-pressure (Seiliger) cycle with real gas; checked with cantera",
        "cycle p1_bar=3.6 t1_k=350 compression_ratio=13.5 pmax_bar=180 lambda=2.2 lcv=40.3 hc_ratio=1.8",
        takes={"expansion_ratio": NUMBER},
    ),
    Calculation(
        "air-cycle",
        {"p1_bar": NUMBER, "t1_k": NUMBER, "compression_ratio": NUMBER, "pressure_ratio": NUMBER, "cutoff_ratio": NUMBER},
        {"t2_k": "K", "t3_k": "K", "t4_k": "K", "t5_k": "K", "efficiency": "", "mep_bar": "bar"},
        _air_cycle,
        ("air-standard dual cycle with variable heat capacity",),
        "Moran & Shapiro, Fundamentals of Engineering Thermodynamics, section 9.4",
        "air-cycle p1_bar=1 t1_k=300 compression_ratio=18 pressure_ratio=1.5 cutoff_ratio=1.2",
    ),
    Calculation(
        "flame", {"t_air_k": NUMBER, "lambda": NUMBER, "hc_ratio": NUMBER, "lcv": "calorific value"}, {"flame_k": "K"}, _flame,
        ("enthalpy of the products at T = heat + enthalpy of the air",), "arithmetic on the gas polynomials; checked with cantera",
        "flame t_air_k=900 lambda=2 hc_ratio=1.85 lcv=42.7",
    ),
    Calculation(
        "bound", {"hot": T, "cold": T}, {"reversible_bound": ""}, _bound, ("1 - T_cold/T_hot, in kelvin",),
        "Carnot", "bound hot=565 cold=25",
        caution="A yardstick between two temperatures; the gap below it is not recoverable loss.",
    ),
    Calculation(
        "exergy", {"temperature": T, "lambda": NUMBER, "hc_ratio": NUMBER, "ambient": T},
        {"h_kj_kg": "kJ/kg", "exergy_kj_kg": "kJ/kg"}, _exergy,
        ("e = (h - h0) - T0 (s0 - s0_0) + R T0 ln(p/p0)",), "arithmetic on the gas polynomials",
        "exergy temperature=320 lambda=3 hc_ratio=1.85 ambient=25",
        takes={"pressure_bar": NUMBER, "ambient_pressure_bar": NUMBER},
    ),
    Calculation(
        "mean-pressure",
        {"bore_mm": NUMBER, "stroke_mm": NUMBER, "cylinders": NUMBER, "speed_rpm": "rotation", "cycle": TEXT},
        {"mean_pressure_bar": "bar", "power_kw": "kW"}, _mean_pressure,
        ("p = P k/(V_s z n), k = 1 two-stroke, 2 four-stroke",), "Rajput, A Textbook of Internal Combustion Engines, ch. 17",
        "mean-pressure power_kw=13560 bore_mm=600 stroke_mm=2400 cylinders=6 speed_rpm=105 cycle=two-stroke",
        takes={"power_kw": "power", "pressure_bar": NUMBER}, one_of=("power_kw", "pressure_bar"),
    ),
    Calculation(
        "slip", {"pitch_m": NUMBER, "revolutions": NUMBER, "distance_nm": NUMBER}, {"slip": "", "engine_distance_nm": "nm"}, _slip,
        ("engine distance = pitch x revolutions/1852", "slip = (engine distance - observed)/engine distance"),
        "navigation practice", "slip pitch_m=6.20 revolutions=121440 distance_nm=382",
    ),
)  # fmt: skip
