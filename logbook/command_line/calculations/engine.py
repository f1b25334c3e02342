"""Engine and thermodynamics at the desk."""

from __future__ import annotations

from collections.abc import Collection

from logbook.command_line.calculations.record import FRACTION, LIST, WHOLE, WORD, Answer, Calculation, Inputs, Key

ZERO_C_K = 273.15
REFERENCE_LCV_MJ_KG = 42.7


def _ambient_correction(i: Inputs) -> Answer:
    from logbook.physics.ambient import MECHANICAL_EFFICIENCY, REFERENCE_VAPOUR_PRESSURE_PA, exponents, iso_3046
    from logbook.physics.humidity import vapour_pressure

    e, p, t = exponents(i["engine"]), i["pressure_kpa"], i["temperature"]
    eta, coolant = i.get("mechanical_efficiency", MECHANICAL_EFFICIENCY), i.get("coolant")
    if not 30 < p < 120:
        raise ValueError("pressure_kpa is the barometer in kPa, between 30 and 120: 1013 mbar is 101.3.")
    vapour = vapour_pressure(t, i["humidity"]) if "humidity" in i else None
    found = iso_3046(i["engine"], p * 1e3, t, vapour, coolant, eta)
    if e.a and vapour is not None:
        pressures = f"({p:g} - {vapour / 1e3:.4g})/(100 - {REFERENCE_VAPOUR_PRESSURE_PA / 1e3:.4g})"
    else:
        pressures = f"{p:g}/100"
    terms = [f"[{pressures}]^{e.m:g}", f"(298/{t + 273:g})^{e.n:g}"]
    if e.s and coolant is not None:
        terms.append(f"(298/{coolant + 273:g})^{e.s:g}")
    steps = [
        f"exponents a {e.a:g}, m {e.m:g}, n {e.n:g}, s {e.s:g}: {e.standing}",
        f"k = {' x '.join(terms)} = {found.k:.6g}",
        f"alpha = {found.k:.6g} - 0.7 x (1 - {found.k:.6g}) x (1/{eta:g} - 1) = {found.alpha:.6g}",
        f"beta = {found.k:.6g}/{found.alpha:.6g} = {found.beta:.6g}: reference consumption = site consumption / beta",
    ]
    cautions = []
    if "memory" in e.standing:
        cautions.append("Exponents typical, from memory in part: your maker's statement decides.")
    if "mechanical_efficiency" not in i:
        cautions.append(f"Mechanical efficiency {eta:g} is typical, from memory, not your maker's.")
    if e.s and coolant is None:
        cautions.append("Coolant not read: its term is left out. Leave it out of every figure this is compared with.")
    if not e.a and "humidity" in i:
        cautions.append("Humidity does not count for this kind of engine.")
    if not e.s and coolant is not None:
        cautions.append("The coolant does not count for this kind of engine.")
    return Answer({"k": found.k, "alpha": found.alpha, "beta": found.beta}, tuple(steps), tuple(cautions))


def _two_stroke_rule(i: Inputs) -> Answer:
    from logbook.physics.ambient import POWER_READJUSTED, percentage_rules

    given = i.get("coefficients", list(POWER_READJUSTED))
    if len(given) != 3:
        raise ValueError("coefficients are three: percent for +10 K coolant, +10 K suction air, +10 mbar.")
    coolant, blower, p, sfoc, lcv = i.get("coolant"), i["blower"], i["pressure_mbar"], i["sfoc"], i["lcv"]
    factor = percentage_rules(blower, p, coolant, *given)
    if sfoc <= 0 or lcv <= 0 or factor <= 0:
        raise ValueError("sfoc and lcv must be above zero, and the rule leave more than nothing.")
    percent, corrected = 100 * (factor - 1), sfoc * lcv / REFERENCE_LCV_MJ_KG / factor
    c_c, c_a, c_p = (f"{coefficient:g}" for coefficient in given)
    of_coolant = "" if coolant is None else f"{c_c} x ({coolant:g} - 25)/10 + "
    cautions = []
    if "coefficients" not in i:
        cautions.append(
            "Coefficients typical, from memory, not your maker's: give coefficients= for +10 K coolant, +10 K suction air,"
            " +10 mbar from the maker's guide."
        )
    if coolant is None:
        cautions.append("Coolant not read: its term is left out. Leave it out of every figure this is compared with.")
    return Answer(
        {"percent": percent, "sfoc_corrected_g_kwh": corrected},
        (
            f"d = {of_coolant}{c_a} x ({blower:g} - 25)/10 + {c_p} x ({p:g} - 1000)/10 = {percent:+.4g} %",
            f"corrected = {sfoc:g} x ({lcv:g}/{REFERENCE_LCV_MJ_KG:g}) / (1 + {percent:.4g}/100) = {corrected:.6g} g/kWh",
        ),
        tuple(cautions),
    )


def _gas(i: Inputs) -> Answer:
    from logbook.physics.gas import AIR_MOLE_FRACTIONS, GASES, air_state, product_moles, product_state

    t = i["temperature_k"]
    if "lambda" in i:
        state = product_state(t, i["lambda"], i["hc_ratio"])
        moles = product_moles(i["lambda"], i["hc_ratio"])
        fractions = (moles / moles.sum()).tolist()
        what = f"products of CH{i['hc_ratio']:g} burnt with lambda {i['lambda']:g}, h and u counted from 298.15 K"
    else:
        state, fractions = air_state(t), list(AIR_MOLE_FRACTIONS)
        what = "dry air, on the datum h 300.19 kJ/kg and s0 1.70203 kJ/(kg K) at 300 K"
    mixture = ", ".join(f"{name} {part:.5f}" for name, part in zip(GASES, fractions, strict=True))
    return Answer(
        {
            "cp_kj_kgk": state.cp / 1e3, "k": state.k, "h_kj_kg": state.h / 1e3, "u_kj_kg": state.u / 1e3,
            "s0_kj_kgk": state.s0 / 1e3,
        },
        (
            what,
            f"mole fractions: {mixture}",
            f"polynomials from {'200 to 1000' if t < 1000 else '1000 to 6000'} K, summed over the gases at {t:g} K",
            f"k = cp/(cp - R) = {state.cp:.6g}/({state.cp:.6g} - {state.cp - state.cp / state.k:.6g}) = {state.k:.6g}",
        ),
    )  # fmt: skip


_LABELS = {
    "constant volume": "Pmax is above what the fuel can give: doubt the indicator, Pmax, lambda.",
    "constant pressure": "Pmax is at or below the end of compression: check compression ratio, t1, p1, the indicator.",
}


def _cycle(i: Inputs) -> Answer:
    from logbook.physics.cycle import limited_pressure_cycle

    p1, t1, r = i["p1_bar"], i["t1_k"], i["compression_ratio"]
    re = i.get("expansion_ratio", r)
    found = limited_pressure_cycle(
        p1 * 1e5, t1, r, i["pmax_bar"] * 1e5, i["lambda"], i["lcv"] * 1e6, i["hc_ratio"], 0.0, re
    )
    p2, p3 = found.p2_pa / 1e5, found.p3_pa / 1e5
    heat, work = found.heat_j_kg / 1e3, found.work_j_kg / 1e3
    cautions = ["An ideal cycle and a mean gas temperature: a yardstick. The gap below it is not recoverable loss."]
    if found.label in _LABELS:
        cautions.insert(0, _LABELS[found.label])
    if "expansion_ratio" not in i:
        cautions.append(
            "Ideal cycle without further expansion: expansion_ratio was left out, so it is the compression ratio."
        )
    return Answer(
        {
            "t2_k": found.t2_k, "p2_bar": p2, "t3_k": found.t3_k, "p3_bar": p3, "t4_k": found.t4_k,
            "efficiency": found.efficiency, "mep_bar": found.mean_pressure_pa / 1e5, "flame_k": found.flame_k,
            "label": found.label,
        },
        (
            f"1-2 isentrope of air, volume ratio {r:g}: {t1:g} K, {p1:g} bar -> {found.t2_k:.6g} K, {p2:.6g} bar",
            f"heat = f LCV = {heat / i['lcv'] / 1e3:.6g} x {i['lcv']:g} MJ/kg = {heat:.6g} kJ per kg of air",
            f"2-3 heat at constant volume, then at constant pressure ({found.label}): {found.t3_k:.6g} K, {p3:.6g} bar",
            f"3-4 isentrope of the products to {re:g} V2: {found.t4_k:.6g} K, {found.p4_pa / 1e5:.6g} bar",
            f"4-1 blow-down; work = {work:.6g} kJ per kg of air; efficiency = {work:.6g}/{heat:.6g} = {found.efficiency:.6g}",
            f"flame at constant pressure from {found.t2_k:.6g} K: {found.flame_k:.6g} K",
        ),
        tuple(cautions),
    )  # fmt: skip


def _air_cycle(i: Inputs) -> Answer:
    from logbook.physics.cycle import air_cycle

    p1, t1, r, rp, rc = i["p1_bar"], i["t1_k"], i["compression_ratio"], i["pressure_ratio"], i["cutoff_ratio"]
    found = air_cycle(p1 * 1e5, t1, r, rp, rc)
    heat, work = found.heat_j_kg / 1e3, found.work_j_kg / 1e3
    return Answer(
        {
            "t2_k": found.t2_k, "t3_k": found.t3_k, "t4_k": found.t4_k, "t5_k": found.t5_k,
            "efficiency": found.efficiency, "mep_bar": found.mean_pressure_pa / 1e5,
        },
        (
            f"1-2 isentrope, volume ratio {r:g}: {t1:g} K -> {found.t2_k:.6g} K",
            f"2-3 constant volume: {found.t2_k:.6g} x {rp:g} = {found.t3_k:.6g} K",
            f"3-4 constant pressure: {found.t3_k:.6g} x {rc:g} = {found.t4_k:.6g} K",
            f"4-5 isentrope to the first volume: {found.t5_k:.6g} K",
            f"heat {heat:.6g}, work {work:.6g} kJ/kg; efficiency = {work:.6g}/{heat:.6g} = {found.efficiency:.6g}",
        ),
    )  # fmt: skip


def _flame(i: Inputs) -> Answer:
    from logbook.physics.cycle import flame_temperature
    from logbook.physics.gas import fuel_air_ratio

    found = flame_temperature(i["t_air_k"], i["lambda"], i["hc_ratio"], i["lcv"] * 1e6)
    f = fuel_air_ratio(i["lambda"], i["hc_ratio"])
    return Answer(
        {"flame_k": found},
        (
            f"fuel for each kg of air f = {f:.6g}; heat = {f:.6g} x {i['lcv']:g} = {f * i['lcv'] * 1e3:.6g} kJ per kg of air",
            f"enthalpy of the products at {found:.6g} K = that heat + enthalpy of the air at {i['t_air_k']:g} K",
        ),
        ("The mean of the gas: the flame itself, near stoichiometric, is far hotter.",),
    )


def _bound(i: Inputs) -> Answer:
    from logbook.physics.bounds import reversible_bound

    hot, cold = i["hot"] + ZERO_C_K, i["cold"] + ZERO_C_K
    if not hot > cold > 0:
        raise ValueError("hot must be above cold, both in degC and above -273.15.")
    found = reversible_bound(hot, cold)
    return Answer(
        {"reversible_bound": found},
        (
            f"{i['hot']:.6g} degC = {hot:.6g} K; {i['cold']:.6g} degC = {cold:.6g} K",
            f"1 - {cold:.6g}/{hot:.6g} = {found:.6g}",
        ),
    )


def _exergy(i: Inputs) -> Answer:
    from logbook.physics.exergy import exhaust_exergy

    t, t0 = i["temperature"] + ZERO_C_K, i["ambient"] + ZERO_C_K
    if min(i["temperature"], i["ambient"]) < -73 or max(i["temperature"], i["ambient"]) > 2000:
        raise ValueError("temperature and ambient are in degC, between -73 and 2000.")
    pressed = "pressure_bar" in i
    if pressed and min(i["pressure_bar"], i["ambient_pressure_bar"]) <= 0:
        raise ValueError("Both pressures are absolute and above zero.")
    ratio = i["pressure_bar"] / i["ambient_pressure_bar"] if pressed else 1.0
    h, e = (value / 1e3 for value in exhaust_exergy(t, i["lambda"], i["hc_ratio"], t0, ratio))
    _, without = exhaust_exergy(t, i["lambda"], i["hc_ratio"], t0)
    term = e - without / 1e3
    steps = [
        f"h - h0 from {t0:.6g} to {t:.6g} K, products of CH{i['hc_ratio']:g} at lambda {i['lambda']:g} = {h:.6g} kJ/kg",
        f"T0 (s0 - s0_0) = {h - e + term:.6g} kJ/kg; (h - h0) less that = {e - term:.6g} kJ/kg",
    ]
    if pressed:
        steps.append(
            f"R T0 ln({i['pressure_bar']:g}/{i['ambient_pressure_bar']:g}) = {term:.6g} kJ/kg; exergy {e:.6g} kJ/kg"
        )
    return Answer({"h_kj_kg": h, "exergy_kj_kg": e}, tuple(steps))


def _mean_pressure(i: Inputs) -> Answer:
    from logbook.physics.power import mean_pressure, power_from_mean_pressure, revolutions_per_cycle, swept_volume

    volume = swept_volume(i["bore_mm"] / 1e3, i["stroke_mm"] / 1e3)
    z, n, cycle = i["cylinders"], i["speed_rpm"], i["cycle"]
    k = revolutions_per_cycle(cycle)
    swept = f"V_s = pi/4 x {i['bore_mm'] / 1e3:g}^2 x {i['stroke_mm'] / 1e3:g} = {volume:.6g} m3; k = {k}"
    if "power_kw" in i:
        bar = mean_pressure(i["power_kw"] * 1e3, volume, z, n / 60, cycle) / 1e5
        step = f"p = {i['power_kw']:g} kW x {k} / ({volume:.6g} x {z:g} x {n:g}/60) = {bar:.6g} bar"
        return Answer({"mean_pressure_bar": bar}, (swept, step))
    kw = power_from_mean_pressure(i["pressure_bar"] * 1e5, volume, z, n / 60, cycle) / 1e3
    step = f"P = {i['pressure_bar']:g} bar x {volume:.6g} x {z:g} x {n:g}/60 / {k} = {kw:.6g} kW"
    return Answer({"power_kw": kw}, (swept, step))


def _slip(i: Inputs) -> Answer:
    from logbook.physics.power import NAUTICAL_MILE_M, slip

    observed = i["distance_nm"]
    found, engine_m = slip(i["pitch_m"], i["revolutions"], observed * NAUTICAL_MILE_M)
    engine = engine_m / NAUTICAL_MILE_M
    return Answer(
        {"slip": found, "engine_distance_nm": engine},
        (
            f"engine distance = {i['pitch_m']:g} x {i['revolutions']:.10g} / 1852 = {engine:.6g} nm",
            f"slip = ({engine:.6g} - {observed:g})/{engine:.6g} = {found:.6g}, that is {100 * found:+.3g} %",
        ),
    )


def _engines() -> Collection[str]:
    from logbook.physics.ambient import ISO_3046

    return tuple(ISO_3046)


def _cycles() -> Collection[str]:
    return "two-stroke", "four-stroke"


LAMBDA = Key("lambda", says="air over the least air needed, 1 or more")
HC_RATIO = Key("hc_ratio", says="atoms of hydrogen for each of carbon; 1.85 to 1.9 distillate, 1.45 to 1.65 residual")
LCV = Key("lcv", "MJ/kg", "calorific value", says="lower")
P1, T1 = Key("p1_bar", "bar", "pressure", absolute=True, says="absolute"), Key("t1_k", "K", "temperature")
COMPRESSION_RATIO = Key("compression_ratio", says="effective, from the closing of port or valve")

ALL = (
    Calculation(
        "ambient-correction",
        (
            Key("engine", kind=WORD, choices=_engines),
            Key("pressure_kpa", "kPa", "barometer", absolute=True, says="barometer"),
            Key("temperature", "degC", "temperature", says="of the air"),
            Key("humidity", family=FRACTION, needed=False, says="relative; needed where a = 1"),
            Key("coolant", "degC", "temperature", needed=False, says="at the charge-air cooler's inlet"),
            Key("mechanical_efficiency", family=FRACTION, needed=False, says="else 0.80"),
        ),
        {"k": "-", "alpha": "-", "beta": "-"},
        _ambient_correction,
        ("k = [(p_x - a phi p_sx)/(p_r - a phi p_sr)]^m (T_r/T_x)^n (T_cr/T_cx)^s, T = t + 273",
         "alpha = k - 0.7 (1 - k)(1/eta_m - 1): site power = alpha x reference power",
         "beta = k/alpha: site consumption = beta x reference consumption"),
        "ISO 3046-1 / ISO 15550 as worked in Mathur & Sharma, Internal Combustion Engine, ch. 27",
        "ambient-correction engine='turbocharged four-stroke, charge-air cooler' pressure_kpa=100 temperature=45 coolant=32",
        ("An alpha above 1 is arithmetic, not permission to overload. Large two-stroke engines: see two-stroke-rule.",),
    ),
    Calculation(
        "two-stroke-rule",
        (
            Key("sfoc", "g/kWh", "specific use"), LCV, Key("blower", "degC", "temperature", says="air at the blower's inlet"),
            Key("coolant", "degC", "temperature", needed=False, says="scavenge-air coolant"),
            Key("pressure_mbar", "mbar", "barometer", absolute=True, says="barometer"),
            Key("coefficients", kind=LIST, needed=False, says="three: % for +10 K coolant, +10 K suction air, +10 mbar; else 0.60,0.20,-0.02"),
        ),
        {"percent": "%", "sfoc_corrected_g_kwh": "g/kWh"},
        _two_stroke_rule,
        ("d % = c_c (coolant - 25)/10 + c_a (blower - 25)/10 + c_p (p - 1000)/10", "corrected = SFOC (LCV/42.7)/(1 + d/100)"),
        "makers' percentage rules; start values from memory",
        "two-stroke-rule sfoc=172 lcv=41 blower=30 coolant=29 pressure_mbar=1005",
    ),
    Calculation(
        "gas", (Key("temperature_k", "K", "temperature"), Key("lambda", needed=False), Key("hc_ratio", needed=False)),
        {"cp_kj_kgk": "kJ/(kg K)", "k": "-", "h_kj_kg": "kJ/kg", "u_kj_kg": "kJ/kg", "s0_kj_kgk": "kJ/(kg K)"},
        _gas,
        ("NASA polynomials of N2, O2, Ar, CO2, H2O summed over the mixture", "without lambda: dry air on the datum of air tables"),
        "nasa_gas.yaml distributed with cantera; datum Moran & Shapiro table A-22",
        "gas temperature_k=1000 lambda=2.0 hc_ratio=1.8",
        together=("lambda", "hc_ratio"),
    ),
    Calculation(
        "cycle",
        (
            P1, T1, COMPRESSION_RATIO,
            Key("expansion_ratio", needed=False, says="volume at exhaust opening over V2, else the compression ratio"),
            Key("pmax_bar", "bar", "pressure", absolute=True, says="absolute"), LAMBDA, LCV, HC_RATIO,
        ),
        {"t2_k": "K", "p2_bar": "bar", "t3_k": "K", "p3_bar": "bar", "t4_k": "K", "efficiency": "-", "mep_bar": "bar",
         "flame_k": "K", "label": ""},
        _cycle,
        ("1-2 isentropic compression of air", "2-3 heat at constant volume up to Pmax, then at constant pressure",
         "3-4 isentropic expansion of products to the expansion ratio", "4-1 blow-down; efficiency = work/heat"),
        "limited-pressure (Seiliger) cycle with real gas; checked with cantera",
        "cycle p1_bar=3.6 t1_k=350 compression_ratio=13.5 pmax_bar=180 lambda=2.2 lcv=40.3 hc_ratio=1.8",
    ),
    Calculation(
        "air-cycle",
        (
            P1, T1, Key("compression_ratio"), Key("pressure_ratio", says="p3/p2, 1 or more"),
            Key("cutoff_ratio", says="V4/V3, 1 or more"),
        ),
        {"t2_k": "K", "t3_k": "K", "t4_k": "K", "t5_k": "K", "efficiency": "-", "mep_bar": "bar"},
        _air_cycle,
        ("air-standard dual cycle, heat added and no fuel, heat capacity by the polynomials",),
        "Moran & Shapiro, Fundamentals of Engineering Thermodynamics, section 9.4",
        "air-cycle p1_bar=1 t1_k=300 compression_ratio=18 pressure_ratio=1.5 cutoff_ratio=1.2",
    ),
    Calculation(
        "flame", (Key("t_air_k", "K", "temperature"), LAMBDA, HC_RATIO, LCV), {"flame_k": "K"}, _flame,
        ("enthalpy of the products at T = heat + enthalpy of the air",), "arithmetic on the gas polynomials; checked with cantera",
        "flame t_air_k=900 lambda=2 hc_ratio=1.85 lcv=42.7",
    ),
    Calculation(
        "bound", (Key("hot", "degC", "temperature"), Key("cold", "degC", "temperature")), {"reversible_bound": "-"}, _bound,
        ("1 - T_cold/T_hot, in kelvin",), "Carnot", "bound hot=565 cold=25",
        ("A yardstick between two temperatures; the gap below it is not recoverable loss.",),
    ),
    Calculation(
        "exergy",
        (
            Key("temperature", "degC", "temperature", says="of the exhaust"), LAMBDA, HC_RATIO, Key("ambient", "degC", "temperature"),
            Key("pressure_bar", "bar", "pressure", needed=False, absolute=True, says="absolute"),
            Key("ambient_pressure_bar", "bar", "pressure", needed=False, absolute=True, says="absolute"),
        ),
        {"h_kj_kg": "kJ/kg", "exergy_kj_kg": "kJ/kg"}, _exergy,
        ("e = (h - h0) - T0 (s0 - s0_0) + R T0 ln(p/p0)",), "arithmetic on the gas polynomials",
        "exergy temperature=320 lambda=3 hc_ratio=1.85 ambient=25",
        ("What a waste-heat plant could at best make; the maker's least stack temperature stands.",),
        together=("pressure_bar", "ambient_pressure_bar"),
    ),
    Calculation(
        "mean-pressure",
        (
            Key("power_kw", "kW", "power", needed=False), Key("pressure_bar", "bar", "pressure", needed=False, says="mean pressure"),
            Key("bore_mm", "mm", "length"), Key("stroke_mm", "mm", "length"), Key("cylinders", kind=WHOLE),
            Key("speed_rpm", "rpm", "rotation"), Key("cycle", kind=WORD, choices=_cycles),
        ),
        {"mean_pressure_bar": "bar", "power_kw": "kW"}, _mean_pressure,
        ("p = P k/(V_s z n), k = 1 two-stroke, 2 four-stroke",), "Rajput, A Textbook of Internal Combustion Engines, ch. 17",
        "mean-pressure power_kw=13560 bore_mm=600 stroke_mm=2400 cylinders=6 speed_rpm=105 cycle=two-stroke",
        one_of=("power_kw", "pressure_bar"),
    ),
    Calculation(
        "slip",
        (Key("pitch_m", "m", "length"), Key("revolutions", "rev", "count"), Key("distance_nm", "nm", "distance", says="observed")),
        {"slip": "-", "engine_distance_nm": "nm"}, _slip,
        ("engine distance = pitch x revolutions/1852", "slip = (engine distance - observed)/engine distance"),
        "navigation practice", "slip pitch_m=6.20 revolutions=121440 distance_nm=382",
    ),
)  # fmt: skip
