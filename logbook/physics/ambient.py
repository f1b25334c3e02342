"""Correction of consumption to reference conditions: ISO 3046-1, makers' percentage rules, an own sensitivity.

The ambient factor a multiplies the reference consumption; b/a is the consumption at reference conditions.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import floats, good, shaped

REFERENCE_PRESSURE_PA, REFERENCE_TEMPERATURE_C, REFERENCE_COOLANT_C, REFERENCE_HUMIDITY = 100e3, 25.0, 25.0, 0.30
"""100 kPa, 298 K, coolant 298 K, 30 % humidity (Mathur & Sharma, Internal Combustion Engine, ch. 27)"""
MECHANICAL_EFFICIENCY = 0.80
"""Where the maker states none; from memory, corroborated by a public generating-set rating procedure."""
_K = 273.0
"""The standard rounds: T = t + 273."""


@dataclass(frozen=True, slots=True)
class Exponents:
    """a (humidity), m (pressure), n (air temperature), s (coolant), and where they come from."""

    a: float
    m: float
    n: float
    s: float
    standing: str


ISO_3046 = {
    "diesel or dual-fuel, naturally aspirated, limited by excess air": Exponents(
        1, 1, 0.75, 0, "Mathur & Sharma ex. 27.1"
    ),
    "diesel or dual-fuel, naturally aspirated, limited thermally": Exponents(0, 1, 1, 0, "from memory"),
    "turbocharged four-stroke, no charge-air cooler": Exponents(
        0, 0.7, 2.0, 0, "m, n: a public generating-set rating procedure; a from memory"
    ),
    "turbocharged four-stroke, charge-air cooler": Exponents(0, 0.7, 1.2, 1, "Mathur & Sharma ex. 27.2"),
    "spark gas, naturally aspirated": Exponents(1, 0.86, 0.55, 0, "m, n: a public generating-set rating procedure"),
    "spark gas, turbocharged, cooler": Exponents(0, 0.57, 0.55, 1.75, "from memory, low confidence"),
    "spark petrol, naturally aspirated": Exponents(1, 1, 0.5, 0, "m, n: a public generating-set rating procedure"),
}
"""By kind of engine, in the words of the table; letters differ between editions."""


def exponents(engine_kind: str) -> Exponents:
    """The exponents of a kind of engine; ValueError lists the kinds."""
    try:
        return ISO_3046[engine_kind]
    except KeyError:
        raise ValueError(f"'{engine_kind}' is no kind of engine here; there are: {'; '.join(ISO_3046)}.") from None


@dataclass(frozen=True, slots=True)
class IsoCorrection:
    """k, alpha (power: P_site = alpha P_reference) and beta (consumption: b_site = beta b_reference)."""

    k: Any
    alpha: Any
    beta: Any


def iso_3046(
    engine_kind: str,
    pressure_pa: ArrayLike,
    temperature_c: ArrayLike,
    vapour_pressure_pa: ArrayLike = 0.0,
    coolant_c: ArrayLike | None = None,
    mechanical_efficiency: ArrayLike = MECHANICAL_EFFICIENCY,
    reference_vapour_pressure_pa: float = 950.6,
) -> IsoCorrection:
    """ISO 3046-1 / ISO 15550 adjustment of four-stroke engines from reference to site.

    Barometer [Pa], air [degC], vapour pressure phi p_s [Pa] at site (and at reference: 30 % at 25 degC), charge-air
    coolant at the cooler's inlet [degC]; `coolant_c` None: not read, its term is left out. An element of the coolant
    that is NaN is left out likewise. alpha above 1 is arithmetic, not permission to overload. Raises ValueError when
    alpha would not be positive. Large two-stroke crosshead engines are not covered: see `percentage_rules`.
    """
    e = exponents(engine_kind)
    p, t, pv, eta = floats(pressure_pa, temperature_c, vapour_pressure_pa, mechanical_efficiency)
    good((p > 30e3) & (p < 120e3), "The barometer must be in Pa here: 30 000 to 120 000.", p, t, pv)
    good((eta > 0) & (eta <= 1), "Mechanical efficiency lies between 0 and 1.", p, t, eta)
    k = ((p - e.a * pv) / (REFERENCE_PRESSURE_PA - e.a * reference_vapour_pressure_pa)) ** e.m * (
        (REFERENCE_TEMPERATURE_C + _K) / (t + _K)
    ) ** e.n
    if coolant_c is not None and e.s:
        coolant = np.asarray(coolant_c, float)
        factor = ((REFERENCE_COOLANT_C + _K) / (coolant + _K)) ** e.s
        k = k * np.where(np.isnan(coolant), 1.0, factor)
    alpha = k - 0.7 * (1 - k) * (1 / eta - 1)
    holds = good(alpha > 0, "These conditions leave no power at all (alpha is not above zero): check them.", p, t, eta)
    alpha = np.where(holds, alpha, np.nan)
    return IsoCorrection(shaped(k), shaped(alpha), shaped(k / alpha))


POWER_READJUSTED = (0.60, 0.20, -0.02)
NOT_READJUSTED = (0.41, 0.71, -0.05)
"""Percent for +10 K coolant, +10 K suction air, +10 mbar; with Pmax re-adjusted and without. From memory: to be
overwritten from the maker's guide."""


def percentage_rules(
    blower_c: ArrayLike,
    pressure_mbar: ArrayLike,
    coolant_c: ArrayLike | None,
    percent_coolant: float,
    percent_air: float,
    percent_barometer: float,
) -> Any:
    """Ambient factor a of a large two-stroke by its maker's percentages: 1 + d/100.

    Reference: 25 degC at the blower inlet, 1000 mbar, 25 degC scavenge-air coolant. `coolant_c` None, or an element
    that is NaN: not read, its term is left out.
    """
    t, p = floats(blower_c, pressure_mbar)
    d = percent_air * (t - 25) / 10 + percent_barometer * (p - 1000) / 10
    if coolant_c is not None:
        coolant = np.asarray(coolant_c, float)
        d = d + np.where(np.isnan(coolant), 0.0, percent_coolant * (coolant - 25) / 10)
    return shaped(1 + d / 100)


@dataclass(frozen=True, slots=True)
class OwnSensitivity:
    """An engine's own ambient sensitivity: ln(b/b_ref) = c0 + c1 (t - 25)/10 [percent]."""

    c0: float
    c1: float
    u_c1: float
    scatter: float

    @property
    def usable(self) -> bool:
        """It may be used only if u(c1) is below 0.1 % per 10 K; else it is only shown."""
        return self.u_c1 < 0.1

    def factor(self, suction_c: ArrayLike) -> Any:
        """Ambient factor a at a suction temperature [degC]."""
        (t,) = floats(suction_c)
        return shaped(np.exp(self.c1 / 100 * (t - 25) / 10))


def own_sensitivity(
    suction_c: ArrayLike, log_ratio_percent: ArrayLike, n_effective: float | None = None
) -> OwnSensitivity:
    """Least squares of 100 ln(b/b_ref) over suction temperature [degC]; u(c1) times sqrt(n/n_eff).

    Raises ValueError below 3 points or without any spread of temperature.
    """
    t, y = floats(suction_c, log_ratio_percent)
    n = t.size
    if n < 3 or np.ptp(t) == 0:
        raise ValueError("An own ambient sensitivity needs at least 3 points at different suction temperatures.")
    x = (t - 25) / 10
    design = np.column_stack([np.ones(n), x])
    coefficients, *_ = np.linalg.lstsq(design, y, rcond=None)
    residual = y - design @ coefficients
    scatter = float(np.sqrt(residual @ residual / (n - 2)))
    u = scatter / float(np.sqrt(((x - x.mean()) ** 2).sum())) * np.sqrt(n / (n_effective or n))
    return OwnSensitivity(float(coefficients[0]), float(coefficients[1]), float(u), scatter)
