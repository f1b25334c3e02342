"""`logbook calc`: every formula by name, against published and independently calculated values; refusals in words."""

import io
import json
import re
import shlex
import subprocess
import sys
from datetime import UTC, datetime
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.command_line.calculations import calculations
from logbook.command_line.environment import Environment
from logbook.command_line.main import main


def run(*arguments: str) -> tuple[int, str, str]:
    out, err = io.StringIO(), io.StringIO()
    code = main(
        ["calc", *arguments], Environment(out=out, err=err, variables={}, account="", now=lambda: datetime.now(UTC))
    )
    return code, out.getvalue(), err.getvalue()


def record_of(*arguments: str) -> dict[str, Any]:
    code, out, err = run(*arguments, "--json")
    assert code == 0, err
    found: dict[str, Any] = json.loads(out)
    return found


def refusal(*arguments: str) -> str:
    """The one line that a refused request prints."""
    code, out, err = run(*arguments)
    assert code == 2
    assert out == ""
    assert err.startswith("logbook: ")
    assert err.count("\n") == 1
    return err


# What other programs may rely on: name -> inputs, those in brackets may be left out; results.
NAMES = {
    "calorific-value": ("kind density15 sulphur water ash", "net_mj_kg gross_mj_kg"),
    "volume-correction": ("density15 temperature [volume_m3]", "vcf volume15_m3 mass_vacuum_t mass_air_t"),
    "density15": ("reading temperature [glass]", "density15"),
    "ignition-number": ("density15 viscosity [viscosity_temperature]", "ccai"),
    "air-need": ("carbon hydrogen [sulphur] [oxygen]", "air_fuel_ratio"),
    "carbon-balance": ("carbon hydrogen sulphur co2_dry|o2_dry [humidity_ratio]",
                       "air_kg_kg lambda o2_dry co2_dry exhaust_kg_kg"),
    "ambient-correction": ("engine pressure_kpa temperature [humidity] [coolant] [mechanical_efficiency]", "k alpha beta"),
    "two-stroke-rule": ("sfoc lcv blower [coolant] pressure_mbar [coefficients]", "percent sfoc_corrected_g_kwh"),
    "gas": ("temperature_k [lambda hc_ratio]", "cp_kj_kgk k h_kj_kg u_kj_kg s0_kj_kgk"),
    "cycle": ("p1_bar t1_k compression_ratio [expansion_ratio] pmax_bar lambda lcv hc_ratio",
              "t2_k p2_bar t3_k p3_bar t4_k efficiency mep_bar flame_k label"),
    "air-cycle": ("p1_bar t1_k compression_ratio pressure_ratio cutoff_ratio", "t2_k t3_k t4_k t5_k efficiency mep_bar"),
    "flame": ("t_air_k lambda hc_ratio lcv", "flame_k"),
    "bound": ("hot cold", "reversible_bound"),
    "exergy": ("temperature lambda hc_ratio ambient [pressure_bar ambient_pressure_bar]", "h_kj_kg exergy_kj_kg"),
    "mean-pressure": ("power_kw|pressure_bar bore_mm stroke_mm cylinders speed_rpm cycle", "mean_pressure_bar|power_kw"),
    "slip": ("pitch_m revolutions distance_nm", "slip engine_distance_nm"),
    "carbon-intensity": ("ship_type capacity year distance_nm fuel.NAME", "attained required ratio rating bounds"),
    "readings-needed": ("scatter change", "per_side"),
    "cleaning-interval": ("cost growth_per_day2", "days cost_per_day"),
    "trend": ("values [times]", "s z p slope intercept interval"),
    "change-point": ("values", "after_index means k p"),
    "cusum": ("values target allowance limit", "high low first_signal"),
    "agree": ("values uncertainties", "combined z chi2 p suspect"),
}  # fmt: skip

KENDALL = "values=12.9,14.8,13.2,15.7,13.8,15.6,12.9,11.0,17.3,15.9,19.0,18.3,20.1,21.7"
KENDALL_RESULTS = {
    "s": 54,
    "z": 2.90584,
    "p": 0.003663,
    "slope": 0.566667,
    "intercept": 11.4,
    "interval": [0.3250, 0.8667],
}
STEP = "values=.4,-.3,.6,.1,-.5,.2,.7,-.2,.3,-.1,.2,1.9,2.6,1.8,2.2,2.9,1.7,2.4,2.1,2.5"
VESSELS = (
    "values=102.0,94.8,98.3,98.4,102.0,98.5,99.0,97.7,100.0,98.1,101.3,98.7,101.1,98.4,97.0,96.7,100.3,101.4,97.2,101.0"
)
CASE_B = "p1_bar=3.6 t1_k=350 compression_ratio=13.5 pmax_bar=180 lambda=2.2 lcv=40.3 hc_ratio=1.8"
CASE_V = "p1_bar=2 t1_k=330 compression_ratio=12 pmax_bar=400 lambda=3 lcv=42.7 hc_ratio=1.8"
CASE_P = "p1_bar=3 t1_k=340 compression_ratio=15 pmax_bar=100 lambda=2.4 lcv=42.7 hc_ratio=1.8"
EXCESS_AIR = "engine='diesel or dual-fuel, naturally aspirated, limited by excess air'"
CHARGE_COOLED = "engine='turbocharged four-stroke, charge-air cooler'"
DIESEL = "carbon=0.862 hydrogen=0.136 sulphur=0.0017"
BULK = "'ship_type=bulk carrier'"
FOUR = "values=9450,9980,10010,9960 uncertainties=1.5,2,2.5,3"

# Source of each row in the comment behind or above it; "arithmetic" and the names of libraries: calculated independently.
CASES: list[tuple[str, str, dict[str, Any], float]] = [
    # public web page "8 - Specific energy calculation", a marine engineering course: 40.37
    ("calorific-value", "kind=residual density15=987 sulphur=2.5 water=0.2 ash=0", {"net_mj_kg": 40.37}, 1.3e-4),
    ("calorific-value", "kind=residual density15=991 sulphur=3 water=0.5 ash=0.05", {"net_mj_kg": 40.006}, 2.5e-5),  # arithmetic
    ("calorific-value", "kind=distillate density15=845 sulphur=0.1 water=0 ash=0", {"net_mj_kg": 42.791, "gross_mj_kg": 45.60207}, 2.5e-5),
    # ASTM D1250 table 54B of 1980, arithmetic
    ("volume-correction", "density15=950 temperature=50 volume_m3=1000",
     {"vcf": 0.974657, "volume15_m3": 974.657, "mass_vacuum_t": 925.924, "mass_air_t": 924.852}, 2e-6),
    ("volume-correction", "density15=775 temperature=30", {"vcf": 0.983430}, 2e-6),
    ("density15", "reading=945 temperature=40 glass=yes", {"density15": 961.548}, 5e-6),  # table 53B, arithmetic
    ("density15", "reading=945 temperature=40 glass=no", {"density15": 962.100}, 5e-6),
    ("density15", "reading=945 temperature=40", {"density15": 962.100}, 5e-6),
    ("ignition-number", "density15=990 viscosity=180", {"ccai": 859.14}, 5e-5),  # data sheet 504.26: 859
    ("ignition-number", "density15=991 viscosity=380 viscosity_temperature=50", {"ccai": 851.94}, 5e-5),  # arithmetic
    ("air-need", DIESEL, {"air_fuel_ratio": 14.594}, 5e-4),  # arithmetic
    ("air-need", "carbon=0.8413 hydrogen=0.1587", {"air_fuel_ratio": 15.09}, 4e-3),  # octane, Moran & Shapiro ex. 13.1
    # scipy
    ("carbon-balance", f"{DIESEL} co2_dry=0.04 humidity_ratio=0.0107",
     {"air_kg_kg": 53.480, "lambda": 3.6648, "o2_dry": 0.15517, "exhaust_kg_kg": 55.053}, 2e-5),
    ("carbon-balance", f"{DIESEL} o2_dry=0.15517 humidity_ratio=0.0107", {"air_kg_kg": 53.480, "co2_dry": 0.04}, 2e-4),
    # Mathur & Sharma ex. 27.2 for the exponents; arithmetic with Buck's vapour pressure
    ("ambient-correction", f"{CHARGE_COOLED} pressure_kpa=100 temperature=45 coolant=32 mechanical_efficiency=0.8",
     {"k": 0.90378, "alpha": 0.88694, "beta": 1.01898}, 1e-5),
    ("ambient-correction", f"{CHARGE_COOLED} pressure_kpa=96 temperature=38 coolant=34 mechanical_efficiency=85%",
     {"k": 0.89622, "alpha": 0.88340, "beta": 1.01451}, 1e-5),
    ("ambient-correction", f"{CHARGE_COOLED} pressure_kpa=100 temperature=45", {"k": 0.92501, "alpha": 0.91189, "beta": 1.01439}, 1e-5),
    ("ambient-correction", f"{CHARGE_COOLED} pressure_kpa=100 temperature=25 coolant=25", {"k": 1.0, "alpha": 1.0, "beta": 1.0}, 1e-12),
    ("ambient-correction", f"{EXCESS_AIR} pressure_kpa=87 temperature=45 humidity=0.5", {"k": 0.79046, "alpha": 0.75379, "beta": 1.04865}, 1e-5),
    ("ambient-correction", f"{EXCESS_AIR} pressure_kpa=1000mbar temperature=113degF humidity=60%", {"k": 0.90625, "alpha": 0.88984, "beta": 1.01844}, 1e-5),
    # arithmetic on start values from memory
    ("two-stroke-rule", "sfoc=172 lcv=41 blower=30 coolant=29 pressure_mbar=1005", {"percent": 0.330, "sfoc_corrected_g_kwh": 164.609}, 5e-6),
    ("two-stroke-rule", "sfoc=176.5 lcv=40.9 blower=38 coolant=36 pressure_mbar=1012", {"percent": 0.896, "sfoc_corrected_g_kwh": 167.558}, 5e-6),
    ("two-stroke-rule", "sfoc=170 lcv=42.7 blower=25 coolant=25 pressure_mbar=1000 coefficients=0.41,0.71,-0.05", {"percent": 0.0, "sfoc_corrected_g_kwh": 170.0}, 1e-9),
    ("two-stroke-rule", "sfoc=170 lcv=42.7 blower=45 pressure_mbar=1000", {"percent": 0.400}, 1e-9),
    ("gas", "temperature_k=300", {"cp_kj_kgk": 1.0048, "k": 1.3999, "h_kj_kg": 300.19, "u_kj_kg": 214.08, "s0_kj_kgk": 1.70203}, 5e-5),  # Moran & Shapiro A-22
    ("gas", "temperature_k=1000 lambda=2.0 hc_ratio=1.8", {"h_kj_kg": 780.569, "u_kj_kg": 579.495, "cp_kj_kgk": 1.20126, "k": 1.3132}, 5e-5),  # numpy
    # cantera, by absolute enthalpies and quadrature of p dV
    ("cycle", CASE_B, {"t2_k": 928.652, "p2_bar": 128.950, "t3_k": 1942.505, "p3_bar": 180.0, "t4_k": 1028.932,
                       "efficiency": 0.539136, "mep_bar": 26.351, "flame_k": 1865.0, "label": "limited pressure"}, 3e-5),
    ("cycle", f"{CASE_B} expansion_ratio=15", {"efficiency": 0.555250, "t4_k": 995.421, "mep_bar": 27.139}, 3e-5),
    ("cycle", CASE_V, {"t3_k": 1835.942, "p3_bar": 136.416, "efficiency": 0.561452, "label": "constant volume"}, 3e-5),
    ("cycle", CASE_P, {"t3_k": 1855.770, "p3_bar": 124.281, "efficiency": 0.524629, "label": "constant pressure"}, 3e-5),
    # Moran & Shapiro ex. 9.3: 898.3, 1347.5, 1617 K, 0.635, 0.56 MPa
    ("air-cycle", "p1_bar=1 t1_k=300 compression_ratio=18 pressure_ratio=1.5 cutoff_ratio=1.2",
     {"t2_k": 898.3, "t3_k": 1347.5, "t4_k": 1617, "efficiency": 0.635, "mep_bar": 5.6}, 2e-3),
    ("air-cycle", "p1_bar=1 t1_k=300 compression_ratio=18 pressure_ratio=1.5 cutoff_ratio=1.2",  # numpy
     {"t2_k": 897.76, "t3_k": 1346.64, "t4_k": 1615.97, "t5_k": 651.86, "efficiency": 0.63585, "mep_bar": 5.5999}, 1e-5),
    ("flame", "t_air_k=900 lambda=2 hc_ratio=1.85 lcv=42.7", {"flame_k": 1977}, 5e-4),  # cantera
    ("flame", "t_air_k=25degC lambda=3 hc_ratio=1.85 lcv=42700kJ/kg", {"flame_k": 1154}, 9e-4),
    ("bound", "hot=565 cold=25", {"reversible_bound": 0.644276}, 1e-6),  # arithmetic
    ("bound", "hot=1049degF cold=298.15K", {"reversible_bound": 0.644276}, 1e-6),
    ("bound", "hot=550 cold=27", {"reversible_bound": 0.635}, 1e-3),  # Khandare, ch. 5
    ("exergy", "temperature=320 lambda=3 hc_ratio=1.85 ambient=25", {"h_kj_kg": 309.24, "exergy_kj_kg": 94.92}, 3e-5),  # numpy
    ("exergy", "temperature=320 lambda=3 hc_ratio=1.85 ambient=25 pressure_bar=1.04 ambient_pressure_bar=1.013", {"exergy_kj_kg": 94.92 + 2.25}, 3e-5),
    ("exergy", "temperature=280 lambda=2.5 hc_ratio=1.8 ambient=30", {"h_kj_kg": 262.18, "exergy_kj_kg": 71.43}, 1e-4),
    ("mean-pressure", "power_kw=13560 bore_mm=600 stroke_mm=2400 cylinders=6 speed_rpm=105 cycle=two-stroke", {"mean_pressure_bar": 19.031}, 5e-5),  # arithmetic
    ("mean-pressure", "power_kw=2.88MW bore_mm=32cm stroke_mm=400 cylinders=6 speed_rpm=12.5r/s cycle=four-stroke", {"mean_pressure_bar": 23.873}, 5e-5),
    # Rajput, A Textbook of Internal Combustion Engines, ex. 17.1: 13.30 kW
    ("mean-pressure", "pressure_bar=6 bore_mm=110 stroke_mm=140 cylinders=1 speed_rpm=1000 cycle=two-stroke", {"power_kw": 13.30}, 4e-4),
    ("slip", "pitch_m=3.8 revolutions=125280 distance_nm=240", {"slip": 0.066344, "engine_distance_nm": 257.054}, 1e-5),  # web page "What is slip"
    # arithmetic on the resolutions' figures; invented ships
    ("carbon-intensity", f"{BULK} capacity=60000 year=2024 distance_nm=55000 fuel.heavy_fuel_oil=5000 fuel.diesel_oil=300",
     {"attained": 5.00964, "required": 4.70662, "ratio": 1.06438, "rating": "D", "bounds": [4.0477, 4.4242, 4.9890, 5.5538]}, 1e-5),
    ("carbon-intensity", f"{BULK} capacity=320000 year=2025 distance_nm=60000 fuel.heavy_fuel_oil=9000 fuel.diesel_oil=200000kg",
     {"attained": 1.49308, "required": 1.77056, "ratio": 0.84328, "rating": "A"}, 1e-5),
    ("readings-needed", "scatter=2 change=1", {"per_side": 63}, 0),  # scipy
    ("readings-needed", "scatter=1 change=-2", {"per_side": 4}, 0),
    ("cleaning-interval", "cost=9000 growth_per_day2=6", {"days": 54.772, "cost_per_day": 328.634}, 1e-5),  # scipy's minimiser
    # "Mann-Kendall by hand", College of the Holy Cross: S, V, Z; pymannkendall, scipy. Without times they are 1, 2, 3 ...
    ("trend", f"{KENDALL} times=1,2,3,4,5,6,7,8,9,10,11,12,13,14", KENDALL_RESULTS, 2e-4),
    ("trend", KENDALL, KENDALL_RESULTS, 2e-4),
    ("change-point", STEP, {"after_index": 11, "means": [0.12727, 2.23333], "k": 99, "p": 0.00182}, 2e-3),  # ruptures, scipy
    # Montgomery & Runger, Applied Statistics and Probability for Engineers, table 16-8: no signal
    ("cusum", f"{VESSELS} target=99 allowance=1 limit=10",
     {"first_signal": None, "high": [2.0, 0, 0, 0, 2.0, 0.5, 0, 0, 0, 0, 1.3, 0, 1.1, 0, 0, 0, 0.3, 1.7, 0, 1.0],
      "low": [0, 3.2, 2.9, 2.5, 0, 0, 0, 0.3, 0, 0, 0, 0, 0, 0, 1.0, 2.3, 0, 0, 0.8, 0]}, 1e-6),
    # numpy: signal at the 13th reading
    ("cusum", f"{STEP} target=0.127 allowance=0.19 limit=1.9", {"first_signal": 13}, 0),
    # scipy
    ("agree", "values=9800,9980,10010,9960 uncertainties=1.5,2,2.5,3%",
     {"combined": 9899.4, "z": [-0.916, 0.471, 0.487, 0.216], "chi2": 0.856, "p": 0.836, "suspect": None}, 2e-3),
    ("agree", FOUR, {"combined": 9735.0, "z": [-2.697, 1.443, 1.220, 0.810], "chi2": 7.290, "p": 0.063, "suspect": None}, 5e-3),
    ("agree", FOUR.replace("9450", "9300"), {"suspect": 1}, 0),
]  # fmt: skip


@pytest.mark.parametrize(("name", "inputs", "expected", "rel"), CASES, ids=[case[0] for case in CASES])
def test_results(name: str, inputs: str, expected: dict[str, Any], rel: float) -> None:
    record = record_of(name, *shlex.split(inputs))
    assert list(record) == ["name", "inputs", "results", "steps", "source"]
    assert record["name"] == name
    assert record["source"]
    for key, value in expected.items():
        found = record["results"][key]
        assert found == (pytest.approx(value, rel=rel, abs=1e-9) if isinstance(value, int | float | list) else value)


def test_every_name_has_a_case() -> None:
    assert {case[0] for case in CASES} == set(NAMES) == set(calculations())


@pytest.mark.parametrize("name", list(NAMES))
def test_inputs_and_results_have_the_names_that_others_rely_on(name: str) -> None:
    one = calculations()[name]
    inputs, results = NAMES[name]
    optional = set(" ".join(re.findall(r"\[(.*?)\]", inputs)).split())
    either = {word for group in inputs.split() if "|" in group for word in group.split("|")}
    needed = set(re.sub(r"\[.*?\]", "", inputs).split()) - {"|".join(one.one_of), "fuel.NAME"}
    assert {key.name for key in one.keys if key.needed} == needed
    assert {key.name for key in one.keys} == needed | optional | either
    assert set(one.one_of) == either
    assert bool(one.many) == ("fuel.NAME" in inputs)
    assert set(one.gives) == set(results.replace("|", " ").split())
    # And that is what comes out, over all cases of the name.
    given = {found for case in CASES if case[0] == name for found in record_of(name, *shlex.split(case[1]))["results"]}
    assert given == set(one.gives)
    missing = refusal(name, "nothing").partition("missing: ")[2].partition(". See")[0].split(", ")
    assert set(missing) >= needed
    assert not optional & set(missing)


@pytest.mark.parametrize("name", list(NAMES))
def test_a_name_alone_says_what_it_takes_and_its_example_runs(name: str) -> None:
    code, out, _ = run(name)
    assert code == 0
    one = calculations()[name]
    assert all(f"  {key.name} " in out for key in one.keys)
    assert f"source: {one.source}".split(",")[0] in out
    example = out.splitlines()[-1].strip()
    assert example == f"logbook calc {one.example}"
    code, out, err = run(*shlex.split(example)[2:])
    assert code == 0, err
    assert out.startswith(f"{name}\n")
    assert "\nsource: " in out
    assert all(len(line) <= 80 for line in out.splitlines())


def test_the_list_of_names() -> None:
    code, out, _ = run()
    assert code == 0
    heads = [line.split()[0] for line in out.splitlines() if not line.startswith(" ")]
    assert heads == list(calculations())
    assert all(len(line) <= 80 for line in out.splitlines())


@pytest.mark.parametrize(("name", "inputs"), [(case[0], case[1]) for case in CASES], ids=[case[0] for case in CASES])
def test_every_number_printed_carries_its_unit(name: str, inputs: str) -> None:
    """A result has its unit behind it, `-` for a ratio; words and results that are not there have none."""
    code, out, err = run(name, *shlex.split(inputs))
    assert code == 0, err
    results = record_of(name, *shlex.split(inputs))["results"]
    text = " ".join(out.partition("results\n")[2].partition("source:")[0].split())
    for key, value in results.items():
        unit = calculations()[name].gives[key]
        assert unit or isinstance(value, str)
        if isinstance(value, int | float):
            assert f"{key} {value:.6g} {unit}" in text
        elif value is None:
            assert f"{key} none" in text


def test_steps_show_the_numbers() -> None:
    _, out, _ = run("bound", "hot=1049degF", "cold=25")
    assert "hot               565 degC (1049degF)" in out
    assert "1 - 298.15/838.15 = 0.644276" in out
    steps = record_of("calorific-value", *shlex.split(CASES[0][1]))["steps"]
    assert "987^2" in steps[0]
    assert "= 40.3719 MJ/kg" in steps[0]


@pytest.mark.parametrize(
    ("name", "typed", "key", "understood"),
    [
        ("bound", "hot=208degF cold=25", "hot", (208 - 32) / 1.8),
        ("bound", "hot=838,15K cold=25", "hot", 565.0),
        ("air-need", "carbon=86.2% hydrogen=0.136", "carbon", 0.862),
        ("volume-correction", "density15=0.950kg/L temperature=50 volume_m3=1000000L", "density15", 950.0),
        ("volume-correction", "density15=950 temperature=50 volume_m3=1000000L", "volume_m3", 1000.0),
        ("ignition-number", "density15=990 viscosity=180cSt", "viscosity", 180.0),
        ("slip", "pitch_m=3.8m revolutions=125280rev distance_nm=444.48km", "distance_nm", 240.0),
        ("cycle", CASE_B.replace("p1_bar=3.6", "p1_bar=360kPa"), "p1_bar", 3.6),
        ("cycle", CASE_B.replace("p1_bar=3.6", "p1_bar=3.6bara"), "p1_bar", 3.6),
        (
            "two-stroke-rule",
            "sfoc=172 lcv=41 blower=30 pressure_mbar=753.8mmHg",
            "pressure_mbar",
            753.8 * 1.33322387415,
        ),
        ("calorific-value", "kind=residual density15=987 sulphur=25000ppm water=0.2 ash=0", "sulphur", 2.5),
    ],
)
def test_a_value_may_carry_a_unit(name: str, typed: str, key: str, understood: float) -> None:
    assert record_of(name, *shlex.split(typed))["inputs"][key] == pytest.approx(understood)


REFUSED = [
    ("boundd hot=1", "Did you mean bound?"),
    ("nonsense", "The list: logbook calc"),
    ("bound hott=1 cold=2", "did you mean hot?"),
    ("bound hot=1", "missing: cold"),
    ("bound hot", "key=value"),
    ("bound hot= cold=1", "key=value"),
    ("bound hot=565 hot=300 cold=25", "hot is given twice"),
    ("bound hot=warm cold=2", "hot: 'warm' is no number; expected a number in degC, or with its unit: degF, K"),
    ("bound hot=5bar cold=2", "hot: 'bar' is no unit of this point"),
    ("bound hot=20 cold=30", "hot must be above cold, both in degC"),
    ("bound hot=20 cold=-300", "above -273.15"),
    ("bound --json", "give a NAME and its inputs"),
    ("--json", "give a NAME and its inputs"),
    ("cycle p1_bar=3", "missing: t1_k, compression_ratio, pmax_bar, lambda, lcv, hc_ratio"),
    (f"cycle {CASE_B.replace('lambda=2.2', 'lambda=0.9')}", "not enough air"),
    (f"cycle {CASE_B.replace('p1_bar=3.6', 'p1_bar=2.6barg')}", "enter the barometer first, or the absolute pressure"),
    (f"cycle {CASE_B.replace('lambda=2.2', 'lambda=2.2bar')}", "lambda: 'bar' is not understood; expected a number"),
    ("gas temperature_k=nan", "'nan' is no number"),
    ("gas temperature_k=1e999", "'1e999' is no number"),
    ("gas temperature_k=1000 lambda=2", "lambda and hc_ratio go together; missing: hc_ratio"),
    ("gas temperature_k=1000 hc_ratio=2", "lambda and hc_ratio go together; missing: lambda"),
    ("exergy temperature=320 lambda=3 hc_ratio=1.85 ambient=25 pressure_bar=2", "missing: ambient_pressure_bar"),
    ("exergy temperature=320 lambda=3 hc_ratio=1.85 ambient=25 pressure_bar=2 ambient_pressure_bar=0", "above zero"),
    ("exergy temperature=593.15K lambda=3 hc_ratio=1.85 ambient=-298.15", "in degC"),
    ("calorific-value kind=residual density15=0.987 sulphur=1 water=0 ash=0", "0.987 kg/L is 987"),
    ("calorific-value kind=heavy density15=987 sulphur=1 water=0 ash=0", "'heavy' is none of: residual; distillate"),
    ("calorific-value kind=residual density15=987 sulphur=1 water=0.2%v/v ash=0", "enter it in % m/m"),
    ("volume-correction density15=950 temperature=500", "between -50 and 200 degC"),
    ("density15 reading=945 temperature=40 glass=maybe", "'maybe' is none of: yes; no"),
    (f"carbon-balance {DIESEL} co2_dry=0.04 o2_dry=0.1", "co2_dry and o2_dry exclude each other"),
    (f"carbon-balance {DIESEL}", "missing: co2_dry or o2_dry"),
    (f"carbon-balance {DIESEL} co2_dry=4", "4 % is 0.04"),
    ("mean-pressure bore_mm=1 stroke_mm=1 cylinders=1 speed_rpm=1 cycle=two-stroke", "power_kw or pressure_bar"),
    ("mean-pressure power_kw=1 pressure_bar=1 bore_mm=1 stroke_mm=1 cylinders=1 speed_rpm=1 cycle=two-stroke",
     "power_kw and pressure_bar exclude each other"),
    ("mean-pressure power_kw=1 bore_mm=1 stroke_mm=1 cylinders=6.5 speed_rpm=1 cycle=two-stroke", "no whole number"),
    ("mean-pressure power_kw=1 bore_mm=1 stroke_mm=1 cylinders=6 speed_rpm=1 cycle=2-stroke", "did you mean two-stroke?"),
    ("mean-pressure power_kw=500hp bore_mm=1 stroke_mm=1 cylinders=6 speed_rpm=1 cycle=two-stroke",
     "Write 500PS or 500hp(mechanical)"),
    ("slip pitch_m=6,200 revolutions=121440 distance_nm=382", "'6,200' is 6.2 or 6200"),
    (f"ambient-correction {EXCESS_AIR} pressure_kpa=87 temperature=45", "Humidity counts for this kind of engine"),
    (f"ambient-correction {EXCESS_AIR} pressure_kpa=87 temperature=45 humidity=60", "60 % is 0.6"),
    (f"ambient-correction {CHARGE_COOLED} pressure_kpa=1013 temperature=45", "1013 mbar is 101.3"),
    ("ambient-correction engine='turbocharged four stroke' pressure_kpa=100 temperature=45", "did you mean turbocharged"),
    ("two-stroke-rule sfoc=172 lcv=41 blower=30 pressure_mbar=1005 coefficients=1,2", "coefficients are three"),
    ("two-stroke-rule sfoc=0 lcv=41 blower=30 pressure_mbar=1005", "sfoc and lcv must be above zero"),
    ("two-stroke-rule sfoc=172 lcv=41 blower=30 pressure_mbar=1.005", "in mbar"),
    (f"carbon-intensity {BULK} capacity=6e4 year=2024.7 distance_nm=1 fuel.diesel_oil=1", "'2024.7' is no whole number"),
    (f"carbon-intensity {BULK} capacity=6e4 year=2022 distance_nm=1 fuel.diesel_oil=1", "2023 to 2030"),
    (f"carbon-intensity {BULK} capacity=6e4 year=2024 distance_nm=1", "missing: fuel.NAME"),
    (f"carbon-intensity {BULK} capacity=6e4 year=2024 distance_nm=1 fuel.diesel=1", "did you mean diesel_oil?"),
    ("carbon-intensity ship_type=tankr capacity=6e4 year=2024 distance_nm=1 fuel.diesel_oil=1", "did you mean tanker?"),
    (f"carbon-intensity {BULK} capacity=0 year=2024 distance_nm=1 fuel.diesel_oil=1", "Capacity must be above zero"),
    ("readings-needed scatter=0 change=1", "Scatter must be above zero"),
    ("readings-needed scatter=1e200 change=1e-200", "too large or too small"),
    ("cleaning-interval cost=1 growth_per_day2=0", "above zero"),
    ("trend values=1,2,3,4,5,6,x,8", "values: 'x' is no number"),
    ("trend values=1,2,3,4,5,6,7,", "values: '' is no number"),
    ("trend values=1,2,3", "at least 8 points; 3 were given"),
    (f"trend {KENDALL} times=1,2", "one length; 14 and 2 were given"),
    ("change-point values=1,2,3", "at least 4 points"),
    ("cusum values=1,2 target=1 allowance=-1 limit=1", "allowance not below zero"),
    ("agree values=1,2 uncertainties=1", "one for each value: 1 were given for 2"),
    ("agree values=1,-2 uncertainties=1,1", "must be above zero"),
    ("agree values=1,2 uncertainties=1,0", "above zero"),
]  # fmt: skip


@pytest.mark.parametrize(("request_", "said"), REFUSED, ids=[row[0] for row in REFUSED])
def test_refusals_say_what_to_do(request_: str, said: str) -> None:
    assert said in refusal(*shlex.split(request_))


def test_all_that_is_wrong_is_said_at_once() -> None:
    said = refusal("cycle", "p1_bar=x", "t1=350", "lambda", "hc_ratio=1.8", "hc_ratio=1.9")
    for fault in ("p1_bar: 'x' is no number", "takes no 't1'; did you mean t1_k?", "'lambda' is not written as key=value",
                  "hc_ratio is given twice", "missing: t1_k, compression_ratio, pmax_bar, lambda, lcv"):  # fmt: skip
        assert fault in said


@pytest.mark.parametrize(
    ("name", "inputs", "said"),
    [
        ("two-stroke-rule", "sfoc=172 lcv=41 blower=30 coolant=29 pressure_mbar=1005", "not your maker's"),
        ("two-stroke-rule", "sfoc=172 lcv=41 blower=30 pressure_mbar=1005", "Coolant not read"),
        ("ambient-correction", f"{CHARGE_COOLED} pressure_kpa=100 temperature=45 coolant=32", "Mechanical efficiency 0.8 is typical"),
        ("ambient-correction", f"{CHARGE_COOLED} pressure_kpa=100 temperature=45", "Coolant not read"),
        ("ambient-correction", f"{CHARGE_COOLED} pressure_kpa=100 temperature=45 humidity=0.5", "Humidity does not count"),
        ("ambient-correction", "engine='spark gas, turbocharged, cooler' pressure_kpa=100 temperature=45", "Exponents typical, from memory"),
        ("calorific-value", "kind=distillate density15=845 sulphur=0.1 water=0 ash=0", "distillate line is from memory"),
        ("ignition-number", "density15=990 viscosity=40 viscosity_temperature=100", "from memory"),
        ("carbon-intensity", "'ship_type=ro-ro passenger' capacity=30000 year=2025 distance_nm=90000 fuel.methanol=5000",
         "From memory: the carbon factor of methanol"),
        ("carbon-intensity", "'ship_type=ro-ro passenger' capacity=30000 year=2025 distance_nm=90000 fuel.diesel_oil=5000",
         "From memory for ro-ro passenger"),
        ("cycle", CASE_V, "doubt the indicator"),
        ("cycle", CASE_P, "below the end of compression"),
        ("agree", "values=9450,9980 uncertainties=1,1", "a third witness is needed"),
    ],
)  # fmt: skip
def test_what_is_from_memory_or_doubtful_is_said(name: str, inputs: str, said: str) -> None:
    code, out, err = run(name, *shlex.split(inputs))
    assert code == 0, err
    cautions = " ".join(out.split("caution: ", 1)[1].split())
    assert said in cautions
    # A program that reads the JSON meets the same cautions, behind the steps.
    assert any(said in step for step in record_of(name, *shlex.split(inputs))["steps"] if step.startswith("caution: "))


def test_your_makers_own_figures_carry_no_caution_about_memory() -> None:
    _, out, _ = run(
        "two-stroke-rule",
        "sfoc=172",
        "lcv=41",
        "blower=30",
        "coolant=29",
        "pressure_mbar=1005",
        "coefficients=0.5,0.3,-0.01",
    )
    assert "caution" not in out
    _, out, _ = run(
        "ambient-correction",
        *shlex.split(CHARGE_COOLED),
        "pressure_kpa=100",
        "temperature=45",
        "coolant=32",
        "mechanical_efficiency=0.9",
    )
    assert "memory" not in out


EXTREMES = (
    "0",
    "-1",
    "5%",
    "3 degC",
    "1e-300",
    "1e300",
    "-1e308",
    "1e18",
    "1e-9",
    "-273.15",
    "nan",
    "inf",
    "1_000",
    "",
)


@settings(max_examples=200, deadline=None)
@given(
    st.sampled_from([(case[0], case[1]) for case in CASES]),
    st.lists(st.tuples(st.integers(0, 9), st.sampled_from(EXTREMES) | st.text(max_size=8)), max_size=2),
)
def test_whatever_is_typed_ends_in_an_answer_or_a_sentence(
    case: tuple[str, str], changes: list[tuple[int, str]]
) -> None:
    """Some inputs of a case replaced by extremes or by anything at all."""
    typed = shlex.split(case[1])
    for place, text in changes:
        typed[place % len(typed)] = f"{typed[place % len(typed)].partition('=')[0]}={text}"
    code, out, err = run(case[0], *typed, "--json")
    if code == 0:
        json.loads(out, parse_constant=lambda constant: pytest.fail(f"{constant} is no JSON"))
    else:
        assert changes
        assert code == 2
        assert err.startswith("logbook: ")
        assert "unrecognized" not in err


def test_calc_loads_physics_and_no_more() -> None:
    """Every name, in a fresh interpreter, one of them with units typed."""
    argv = [["calc"], *(["calc", *shlex.split(one.example)] for one in calculations().values())]
    argv += [["calc", "bound", "hot=1049degF", "cold=298.15K"], ["calc", "cycle"], ["calc", "bound", "hot=5parsec"]]
    heavy = {"textual", "pandas", "pint", "plotext", "sqlite_utils", "openpyxl", "rich"}
    script = (
        "import sys\nfrom logbook.command_line.main import main\n"
        f"for argv in {argv!r}:\n    main(argv)\n"
        f"print(*sorted({heavy!r} & set(sys.modules)), file=sys.stderr)\n"
        "print(*sorted({name.split('.')[1] for name in sys.modules if name.startswith('logbook.')}), file=sys.stderr)"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True)
    loaded, rooms = done.stderr.splitlines()[-2:]
    assert loaded == ""
    assert set(rooms.split()) == {"command_line", "physics", "plant", "version"}


def test_the_list_and_a_wrong_name_load_no_library() -> None:
    script = (
        "import sys\nfrom logbook.command_line.main import main\nmain(['calc'])\nmain(['calc', 'nonsense'])\n"
        "print(*sorted({'numpy', 'scipy', 'pint', 'pandas'} & set(sys.modules)), file=sys.stderr)"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True)
    assert done.stderr.splitlines()[-1] == ""
