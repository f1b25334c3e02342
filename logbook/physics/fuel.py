"""Fuel: heating value from an analysis, ignition number, air need, carbon factors, two fuels at once, gas volume."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import floats, good, shaped

RESIDUAL, DISTILLATE = "residual", "distillate"

# ISO 8217, informative annex: net and gross constant terms and the coefficients of density squared and density.
# The residual net line as printed in a public marine engineering course ("8 - Specific energy calculation"), whose
# third coefficient is misprinted there as 10^-6; the distillate line and both gross lines are from memory.
NET_TERMS = {RESIDUAL: (46.704, 8.802e-6, 3.167e-3), DISTILLATE: (46.423, 8.792e-6, 3.170e-3)}
GROSS_TERMS = {RESIDUAL: (52.190, 8.802e-6), DISTILLATE: (51.916, 8.792e-6)}


def _diluted(energy: Any, sulphur: Any, water: Any, ash: Any) -> Any:
    return energy * (1 - 0.01 * (water + ash + sulphur)) + 0.0942 * sulphur


def calorific_value(
    kind: str,
    density15_kg_m3: ArrayLike,
    sulphur_percent: ArrayLike = 0.0,
    water_percent: ArrayLike = 0.0,
    ash_percent: ArrayLike = 0.0,
) -> tuple[Any, Any]:
    """(net, gross) specific energy of an ordinary petroleum fuel [J/kg] from its analysis.

    `kind` residual or distillate; density at 15 degC [kg/m3], 820 to 1010; sulphur, water, ash [% m/m]. Scalars out of
    range raise ValueError. Not for gas, methanol or blends with fatty-acid esters: there the laboratory value is
    required. Source: ISO 8217, informative annex (see the note at the constants).
    """
    if kind not in NET_TERMS:
        raise ValueError(f"The formula knows residual and distillate fuel, not '{kind}': enter the laboratory's value.")
    rho, s, w, a = floats(density15_kg_m3, sulphur_percent, water_percent, ash_percent)
    inputs = (rho, s, w, a)
    holds = good(
        (rho >= 820) & (rho <= 1010),
        "Density at 15 degC must lie between 820 and 1010 kg/m3 (0.987 kg/L is 987): check the analysis.",
        *inputs,
    ) & good(
        (s >= 0) & (s <= 6) & (w >= 0) & (w <= 5) & (a >= 0) & (a <= 1),
        "Sulphur 0 to 6, water 0 to 5, ash 0 to 1 % m/m: check the analysis.",
        *inputs,
    )
    n0, n2, n1 = NET_TERMS[kind]
    g0, g2 = GROSS_TERMS[kind]
    net = _diluted(n0 - n2 * rho**2 + n1 * rho, s, w, a) - 0.02449 * w
    gross = _diluted(g0 - g2 * rho**2, s, w, a)
    holds = holds & good(
        (net >= 39) & (net <= 43.5), "The result is outside 39 to 43.5 MJ/kg: check the analysis.", *inputs
    )
    return shaped(np.where(holds, net, np.nan) * 1e6), shaped(np.where(holds, gross, np.nan) * 1e6)


def ignition_number(
    density15_kg_m3: ArrayLike, viscosity_mm2_s: ArrayLike, viscosity_temperature_c: ArrayLike = 50.0
) -> Any:
    """Calculated carbon aromaticity index [-]; viscosity [mm2/s, 5 or more] at its temperature [degC].

    A number without a verdict: limits are per grade and maker. The 50-degree form: data sheet 504.26; the temperature
    term is from memory.
    """
    rho, v, t = floats(density15_kg_m3, viscosity_mm2_s, viscosity_temperature_c)
    holds = good(v >= 5, "The ignition number needs a viscosity of 5 mm2/s or more.", rho, v, t) & good(
        (rho > 600) & (rho < 1100), "Density at 15 degC must be in kg/m3, e.g. 987.", rho, v, t
    )
    holds &= good((t >= 0) & (t <= 150), "The viscosity's temperature is in degC, 0 to 150.", rho, v, t)
    v, t = (np.where(holds, value, np.nan) for value in (v, t))
    return shaped(rho - 81 - 141 * np.log10(np.log10(v + 0.85)) - 483 * np.log10((t + 273) / 323))


_O2_BY_MASS = 0.2314


def air_need(carbon: ArrayLike, hydrogen: ArrayLike, sulphur: ArrayLike = 0.0, oxygen: ArrayLike = 0.0) -> Any:
    """Stoichiometric dry air [kg/kg fuel] from mass fractions of the fuel (0..1). Dry air: 0.2314 O2 by mass."""
    c, h, s, o = floats(carbon, hydrogen, sulphur, oxygen)
    holds = good(
        (c >= 0) & (h >= 0) & (s >= 0) & (o >= 0) & (c + h + s + o <= 1 + 1e-9),
        "Mass fractions of the fuel lie between 0 and 1 and do not add up to more than 1.",
        c, h, s, o,
    )  # fmt: skip
    need = (31.998 * c / 12.011 + 31.998 * h / 4.032 + 31.998 * s / 32.06 - o) / _O2_BY_MASS
    return shaped(np.where(holds, need, np.nan))


def hydrogen_to_carbon(carbon: ArrayLike, hydrogen: ArrayLike) -> Any:
    """Atoms of hydrogen for each of carbon, from mass fractions."""
    c, h = floats(carbon, hydrogen)
    holds = good((c > 0) & (h >= 0), "Carbon must be above zero, hydrogen not below: mass fractions of the fuel.", c, h)
    return shaped((h / 1.008) / (np.where(holds, c, np.nan) / 12.011))


@dataclass(frozen=True, slots=True)
class ReportingFuel:
    """Values of IMO resolution MEPC.364(79), for reporting only; efficiency uses the lot's own heating value."""

    lower_calorific_value_mj_kg: float
    carbon: float
    carbon_factor: float
    """t CO2 per t fuel"""
    factor_quoted: bool = False
    """the carbon factor is quoted in public secondary texts; all else in a row is from memory"""


REPORTING_FUELS = {
    "diesel_oil": ReportingFuel(42.7, 0.8744, 3.206, factor_quoted=True),
    "light_fuel_oil": ReportingFuel(41.2, 0.8594, 3.151, factor_quoted=True),
    "heavy_fuel_oil": ReportingFuel(40.2, 0.8493, 3.114, factor_quoted=True),
    "propane": ReportingFuel(46.3, 0.8182, 3.000),
    "butane": ReportingFuel(45.7, 0.8264, 3.030),
    "ethane": ReportingFuel(46.4, 0.7989, 2.927),
    "natural_gas": ReportingFuel(48.0, 0.7500, 2.750, factor_quoted=True),
    "methanol": ReportingFuel(19.9, 0.3750, 1.375),
    "ethanol": ReportingFuel(26.8, 0.5217, 1.913),
}


def blended_calorific_value(mass_kg: ArrayLike, lower_calorific_value_j_kg: ArrayLike) -> Any:
    """Heating value of fuels mixed in one tank [J/kg], by mass; arrays run over the fuels on axis 0."""
    return _weighted(lower_calorific_value_j_kg, mass_kg)


def blended_density(volume15_m3: ArrayLike, density15_kg_m3: ArrayLike) -> Any:
    """Density of fuels mixed in one tank [kg/m3], by volume, all at 15 degC; arrays run over the fuels on axis 0."""
    return _weighted(density15_kg_m3, volume15_m3)


def _weighted(value: ArrayLike, amount: ArrayLike) -> Any:
    x, a = floats(value, amount)
    total, least = a.sum(axis=0), a.min(axis=0)
    holds = good((least >= 0) & (total > 0), "Amounts mixed are not below zero, and one at least above.", total, least)
    return shaped((a * x).sum(axis=0) / np.where(holds, total, np.nan))


NORMAL_TEMPERATURE_K, STANDARD_TEMPERATURE_K, REFERENCE_PRESSURE_PA = 273.15, 288.15, 101325.0


def gas_volume(
    volume_m3: ArrayLike,
    pressure_pa: ArrayLike,
    temperature_k: ArrayLike,
    reference_temperature_k: float = NORMAL_TEMPERATURE_K,
    compressibility_ratio: ArrayLike = 1.0,
) -> Any:
    """Gas volume at reference [m3, at 101.325 kPa and 0 or 15 degC] from the actual one.

    Pressure absolute [Pa], temperature [K], Z_ref/Z. Heating value and volume must share the reference.
    """
    v, p, t, z = floats(volume_m3, pressure_pa, temperature_k, compressibility_ratio)
    holds = good(
        (p > 0) & (t > 0) & (z > 0),
        "Gas pressure must be absolute and above zero, temperature in kelvin, the ratio of Z above zero.",
        v, p, t, z,
    )  # fmt: skip
    return shaped(v * p / REFERENCE_PRESSURE_PA * reference_temperature_k / np.where(holds, t, np.nan) * z)
