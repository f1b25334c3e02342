"""Correction of consumption to reference conditions: ISO 3046-1, makers' percentage rules, an own sensitivity.

The ambient factor a multiplies the reference consumption; b/a is the consumption at reference conditions.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from logbook.physics.checks import Floats, floats, good, shaped
from logbook.physics.humidity import vapour_pressure

REFERENCE_PRESSURE_PA, REFERENCE_TEMPERATURE_C, REFERENCE_COOLANT_C, REFERENCE_HUMIDITY = 100e3, 25.0, 25.0, 0.30
"""100 kPa, 298 K, coolant 298 K, 30 % humidity (Mathur & Sharma, Internal Combustion Engine, ch. 27)"""
REFERENCE_VAPOUR_PRESSURE_PA: float = vapour_pressure(REFERENCE_TEMPERATURE_C, REFERENCE_HUMIDITY)
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
    vapour_pressure_pa: ArrayLike | None = None,
    coolant_c: ArrayLike | None = None,
    mechanical_efficiency: ArrayLike = MECHANICAL_EFFICIENCY,
    reference_vapour_pressure_pa: float = REFERENCE_VAPOUR_PRESSURE_PA,
) -> IsoCorrection:
    """ISO 3046-1 / ISO 15550 adjustment of four-stroke engines from reference to site.

    Barometer [Pa], air [degC], vapour pressure phi p_s [Pa] at site (and at reference: 30 % at 25 degC), charge-air
    coolant at the cooler's inlet [degC]. The vapour pressure counts only for kinds with a = 1 and is asked for there;
    `coolant_c` None: not read, its term is left out. An element of the coolant that is NaN is left out likewise.
    Large two-stroke crosshead engines are not covered: see `percentage_rules`. Raises ValueError for states that cannot
    be, and when alpha would not be positive.
    """
    e = exponents(engine_kind)
    if e.a and vapour_pressure_pa is None:
        raise ValueError("Humidity counts for this kind of engine: enter it.")
    vapour = vapour_pressure_pa if e.a and vapour_pressure_pa is not None else 0.0
    coolant = _coolant(coolant_c if e.s else None)
    p, t, pv, eta = floats(pressure_pa, temperature_c, vapour, mechanical_efficiency)
    inputs = (p, t, pv, eta, coolant)
    holds = (
        _known_temperatures(t, coolant, *inputs)
        & good((p > 30e3) & (p < 120e3), "The barometer must be in Pa here: 30 000 to 120 000.", *inputs)
        & good((pv >= 0) & (pv < p), "The pressure of the vapour is a part of the barometer's.", *inputs)
    )
    p, t, coolant = (np.where(holds, value, np.nan) for value in (p, t, coolant))
    k = (
        ((p - e.a * pv) / (REFERENCE_PRESSURE_PA - e.a * reference_vapour_pressure_pa)) ** e.m
        * ((REFERENCE_TEMPERATURE_C + _K) / (t + _K)) ** e.n
        * ((REFERENCE_COOLANT_C + _K) / (coolant + _K)) ** e.s
    )
    return power_and_consumption(k, eta)


def power_and_consumption(k: ArrayLike, mechanical_efficiency: ArrayLike = MECHANICAL_EFFICIENCY) -> IsoCorrection:
    """alpha and beta of a power ratio k: alpha = k - 0.7 (1 - k)(1/eta_m - 1), beta = k/alpha.

    Raises ValueError when alpha would not be positive, which is at k = c/(1 + c) and below, c = 0.7 (1/eta_m - 1).
    alpha above 1 is arithmetic, not permission to overload.
    """
    k, eta = floats(k, mechanical_efficiency)
    possible = good((eta > 0) & (eta <= 1), "Mechanical efficiency lies between 0 and 1.", k, eta)
    alpha = k - 0.7 * (1 - k) * (1 / np.where(possible, eta, np.nan) - 1)
    left = good(alpha > 0, "These conditions leave no power at all (alpha is not above zero): check them.", k, eta)
    alpha = np.where(left, alpha, np.nan)
    return IsoCorrection(shaped(k), shaped(alpha), shaped(k / alpha))


def _coolant(coolant_c: ArrayLike | None) -> Floats:
    """Coolant temperature [degC]; where it was not read that of the reference, which leaves its term out."""
    coolant = np.asarray(np.nan if coolant_c is None else coolant_c, float)
    return np.where(np.isnan(coolant), REFERENCE_COOLANT_C, coolant)


def _known_temperatures(air: Floats, coolant: Floats, *inputs: Floats) -> NDArray[np.bool_]:
    """Whether both can be degC: 298 is kelvin."""
    return good((air >= -60) & (air <= 100), "The temperature of the air must be in degC, -60 to 100.", *inputs) & good(
        (coolant >= -10) & (coolant <= 100), "The temperature of the coolant must be in degC, -10 to 100.", *inputs
    )


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
    coolant = _coolant(coolant_c)
    holds = _known_temperatures(t, coolant, t, p, coolant) & good(
        (p > 300) & (p < 1200), "The barometer must be in mbar here: 300 to 1200.", t, p, coolant
    )
    d = (
        percent_coolant * (coolant - REFERENCE_COOLANT_C)
        + percent_air * (t - REFERENCE_TEMPERATURE_C)
        + percent_barometer * (p - REFERENCE_PRESSURE_PA / 100)
    ) / 10
    return shaped(np.where(holds, 1 + d / 100, np.nan))


@dataclass(frozen=True, slots=True)
class OwnSensitivity:
    """An engine's own ambient sensitivity: 100 ln(b/b_ref) = c0 + c1 (t - 25)/10 + c2 h/1000."""

    c0: float
    c1: float
    """[% per 10 K]"""
    c2: float
    """[% per 1000 running hours]; 0 over a span too short to tell"""
    u_c1: float
    scatter: float
    """of one point about the fit [%]"""

    @property
    def usable(self) -> bool:
        """It may be used only if u(c1) is below 0.1 % per 10 K; else it is only shown."""
        return self.u_c1 < 0.1

    def factor(self, suction_c: ArrayLike) -> Any:
        """Ambient factor a at a suction temperature [degC]."""
        (t,) = floats(suction_c)
        return shaped(np.exp(self.c1 / 100 * (t - REFERENCE_TEMPERATURE_C) / 10))

    def relative_u(self, suction_c: ArrayLike) -> Any:
        """Relative standard uncertainty of the factor: u(ln a) = u(c1)/100 |t - 25|/10."""
        (t,) = floats(suction_c)
        return shaped(self.u_c1 / 100 * np.abs(t - REFERENCE_TEMPERATURE_C) / 10)


SPAN_WITH_WEAR_H = 500.0
"""Over a longer span the engine's own change is fitted beside the ambient's."""


def own_sensitivity(
    suction_c: ArrayLike,
    log_ratio_percent: ArrayLike,
    running_h: ArrayLike | None = None,
    n_effective: float | None = None,
) -> OwnSensitivity:
    """Least squares of 100 ln(b/b_ref) over suction temperature [degC]; u(c1) times sqrt(n/n_eff).

    Arrays (n,). `running_h` of the points [h]: where they span more than 500 hours, a change with running hours is
    fitted beside. Raises ValueError where temperatures do not spread, or the points are too few for the fit.
    """
    t, y = floats(suction_c, log_ratio_percent)
    n = t.size
    columns = [np.ones(n), (t - REFERENCE_TEMPERATURE_C) / 10]
    if running_h is not None and np.ptp(running_h) > SPAN_WITH_WEAR_H:
        columns.append(np.asarray(running_h, float) / 1000)
    design = np.column_stack(columns)
    if n <= len(columns) or np.linalg.matrix_rank(design) < len(columns):
        raise ValueError("An own ambient sensitivity needs at least 3 points at different suction temperatures.")
    found, *_ = np.linalg.lstsq(design, y, rcond=None)
    residual = y - design @ found
    scatter = float(np.sqrt(residual @ residual / (n - len(columns))))
    u = scatter * float(np.sqrt(np.linalg.inv(design.T @ design)[1, 1] * n / (n_effective or n)))
    c2 = float(found[2]) if len(columns) == 3 else 0.0
    return OwnSensitivity(float(found[0]), float(found[1]), c2, u, scatter)
