"""`logbook calc`: every formula by name, against published and independently calculated values; refusals in words."""

import io
import json
from datetime import UTC, datetime
from typing import Any

import pytest

from logbook.command_line.calculations import calculations
from logbook.command_line.environment import Environment
from logbook.command_line.main import main


def run(*arguments: str) -> tuple[int, str, str]:
    out, err = io.StringIO(), io.StringIO()
    code = main(
        ["calc", *arguments], Environment(out=out, err=err, variables={}, account="", now=lambda: datetime.now(UTC))
    )
    return code, out.getvalue(), err.getvalue()


TREND = "values=12.9,14.8,13.2,15.7,13.8,15.6,12.9,11.0,17.3,15.9,19.0,18.3,20.1,21.7"
STEP = "values=.4,-.3,.6,.1,-.5,.2,.7,-.2,.3,-.1,.2,1.9,2.6,1.8,2.2,2.9,1.7,2.4,2.1,2.5"
CUSUM = (
    "values=102.0,94.8,98.3,98.4,102.0,98.5,99.0,97.7,100.0,98.1,101.3,98.7,101.1,98.4,97.0,96.7,100.3,101.4,97.2,101.0"
)
CYCLE = ["p1_bar=3.6", "t1_k=350", "compression_ratio=13.5", "pmax_bar=180", "lambda=2.2", "lcv=40.3", "hc_ratio=1.8"]

# Source of each row in the comment behind it; "calculated" = independently, with the library named.
CASES: list[tuple[str, list[str], dict[str, Any], float]] = [
    # ISO 8217 annex, example of a public marine engineering course: 40.37
    ("calorific-value", ["kind=residual", "density15=987", "sulphur=2.5", "water=0.2", "ash=0"], {"net_mj_kg": 40.372}, 5e-4),
    # ASTM D1250 table 54B, calculated by arithmetic
    ("volume-correction", ["density15=950", "temperature=50", "volume_m3=1000"],
     {"vcf": 0.974657, "mass_vacuum_t": 925.924, "mass_air_t": 924.852}, 2e-6),
    ("density15", ["reading=945", "temperature=40", "glass=yes"], {"density15": 961.548}, 1e-5),  # table 53B, arithmetic
    ("ignition-number", ["density15=990", "viscosity=180"], {"ccai": 859.14}, 1e-5),  # data sheet 504.26: 859
    ("air-need", ["carbon=0.862", "hydrogen=0.136", "sulphur=0.0017"], {"air_fuel_ratio": 14.594}, 5e-4),  # arithmetic
    # calculated with scipy
    ("carbon-balance", ["carbon=0.862", "hydrogen=0.136", "sulphur=0.0017", "co2_dry=0.04", "humidity_ratio=0.0107"],
     {"air_kg_kg": 53.480, "lambda": 3.6648, "o2_dry": 0.15517, "exhaust_kg_kg": 55.053}, 1e-4),
    # Mathur & Sharma ex. 27.2 exponents; calculated by arithmetic
    ("ambient-correction", ["engine=turbocharged four-stroke, charge-air cooler", "pressure_kpa=100", "temperature=45",
                            "coolant=32"], {"k": 0.90378, "alpha": 0.88694, "beta": 1.01898}, 1e-5),
    ("two-stroke-rule", ["sfoc=172", "lcv=41", "blower=30", "coolant=29", "pressure_mbar=1005"],
     {"percent": 0.330, "sfoc_corrected_g_kwh": 164.609}, 1e-5),  # arithmetic
    ("gas", ["temperature_k=300"], {"h_kj_kg": 300.19, "s0_kj_kgk": 1.70203}, 1e-6),  # Moran & Shapiro A-22
    ("gas", ["temperature_k=1000", "lambda=2.0", "hc_ratio=1.8"], {"h_kj_kg": 780.569, "u_kj_kg": 579.495}, 2e-5),
    ("cycle", CYCLE, {"t2_k": 928.652, "t3_k": 1942.505, "t4_k": 1028.932, "efficiency": 0.539136, "mep_bar": 26.351,
                      "flame_k": 1865.0, "label": "limited pressure"}, 3e-5),  # calculated with cantera
    # Moran & Shapiro ex. 9.3: 898.3, 1347.5, 1617 K, 0.635
    ("air-cycle", ["p1_bar=1", "t1_k=300", "compression_ratio=18", "pressure_ratio=1.5", "cutoff_ratio=1.2"],
     {"t2_k": 898.3, "t3_k": 1347.5, "t4_k": 1617, "efficiency": 0.635}, 2e-3),
    ("flame", ["t_air_k=900", "lambda=2", "hc_ratio=1.85", "lcv=42.7"], {"flame_k": 1977}, 5e-4),  # cantera
    ("bound", ["hot=565", "cold=25"], {"reversible_bound": 0.644276}, 1e-6),  # arithmetic
    ("bound", ["hot=1049degF", "cold=77degF"], {"reversible_bound": 0.644276}, 1e-6),
    ("exergy", ["temperature=320", "lambda=3", "hc_ratio=1.85", "ambient=25"],
     {"h_kj_kg": 309.24, "exergy_kj_kg": 94.92}, 1e-4),  # calculated with numpy
    ("mean-pressure", ["power_kw=13560", "bore_mm=600", "stroke_mm=2400", "cylinders=6", "speed_rpm=105",
                       "cycle=two-stroke"], {"mean_pressure_bar": 19.031}, 1e-4),  # arithmetic
    # Rajput, A Textbook of Internal Combustion Engines, ex. 17.1: 13.30 kW
    ("mean-pressure", ["pressure_bar=6", "bore_mm=110", "stroke_mm=140", "cylinders=1", "speed_rpm=1000",
                       "cycle=two-stroke"], {"power_kw": 13.30}, 1e-3),
    ("slip", ["pitch_m=3.8", "revolutions=125280", "distance_nm=240"], {"slip": 0.066344}, 1e-4),  # "What is slip"
    # worked example, calculated by arithmetic from the resolutions' figures
    ("carbon-intensity", ["ship_type=bulk carrier", "capacity=60000", "year=2024", "distance_nm=55000",
                          "fuel.heavy_fuel_oil=5000", "fuel.diesel_oil=300"],
     {"attained": 5.00964, "required": 4.70662, "ratio": 1.06438, "rating": "D"}, 1e-5),
    ("readings-needed", ["scatter=2", "change=1"], {"per_side": 63}, 0),  # calculated with scipy
    ("cleaning-interval", ["cost=9000", "growth_per_day2=6"], {"days": 54.772, "cost_per_day": 328.634}, 1e-5),
    # "Mann-Kendall by hand", College of the Holy Cross: S 54, Z 2.906
    ("trend", [TREND, "times=1,2,3,4,5,6,7,8,9,10,11,12,13,14"],
     {"s": 54, "z": 2.90584, "p": 0.003663, "slope": 0.566667, "intercept": 11.4, "interval": [0.3250, 0.8667]}, 1e-4),
    ("change-point", [STEP], {"after_index": 11, "means": [0.12727, 2.23333], "k": 99, "p": 0.00182}, 2e-3),  # ruptures
    # Montgomery & Runger, Applied Statistics and Probability for Engineers, table 16-8: no signal
    ("cusum", [CUSUM, "target=99", "allowance=1", "limit=10"], {"first_signal": None}, 0),
    ("agree", ["values=9450,9980,10010,9960", "uncertainties=1.5,2,2.5,3"],
     {"combined": 9735.0, "chi2": 7.290, "p": 0.063, "z": [-2.697, 1.443, 1.220, 0.810], "suspect": None}, 1e-2),
]  # fmt: skip


@pytest.mark.parametrize(
    ("name", "inputs", "expected", "rel"), CASES, ids=lambda value: value if isinstance(value, str) else ""
)
def test_results(name: str, inputs: list[str], expected: dict[str, Any], rel: float) -> None:
    code, out, err = run(name, *inputs, "--json")
    assert code == 0, err
    record = json.loads(out)
    assert set(record) == {"name", "inputs", "results", "steps", "source"}
    for key, value in expected.items():
        found = record["results"][key]
        assert found == (pytest.approx(value, rel=rel) if isinstance(value, int | float | list) else value)


def test_every_name_has_a_case_and_a_worked_example() -> None:
    assert {case[0] for case in CASES} == set(calculations())
    import shlex

    for one in calculations().values():
        code, out, err = run(*shlex.split(one.example))
        assert code == 0, err
        assert "source:" in out


@pytest.mark.parametrize("name", list(calculations()))
def test_a_name_alone_says_what_it_takes(name: str) -> None:
    code, out, _ = run(name)
    assert code == 0
    assert f"logbook calc {name} " in out


@pytest.mark.parametrize(
    ("arguments", "said"),
    [
        (["boundd", "hot=1"], "Did you mean bound?"),
        (["bound", "hott=1", "cold=2"], "did you mean hot?"),
        (["bound", "hot=1"], "missing: cold"),
        (["cycle", "p1_bar=3"], "missing: t1_k, compression_ratio, pmax_bar, lambda, lcv, hc_ratio"),
        (["bound", "hot=warm", "cold=2"], "hot:"),
        (["bound", "hot=20", "cold=30"], "hot temperature above the cold"),
        (["gas", "temperature_k=nan"], "temperature_k: 'nan' is no number; expected a number in K"),
        (["calorific-value", "kind=residual", "density15=0.987", "sulphur=1", "water=0", "ash=0"], "0.987 kg/L is 987"),
        (["mean-pressure", "bore_mm=1", "stroke_mm=1", "cylinders=1", "speed_rpm=1", "cycle=two-stroke"], "power_kw or pressure_bar"),
        (["bound", "hot"], "key=value"),
    ],
)  # fmt: skip
def test_refusals_say_what_to_do(arguments: list[str], said: str) -> None:
    code, _, err = run(*arguments)
    assert code == 2
    assert said in err
    assert "Traceback" not in err
