"""Dry air and lean combustion products as ideal-gas mixtures.

NASA seven-coefficient polynomials (200-1000 K and 1000-6000 K), from the public property file nasa_gas.yaml that is
distributed with cantera 3.2 (BSD-3; after NASA reports). Everything is per kilogram of DRY AIR that went in, unless
it says otherwise: so the mass of products is 1 + f. Mixing entropy is constant at fixed composition and drops out of
every isentrope.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import Floats, floats, good, shaped

R = 8.314462618
"""Molar gas constant [J/(mol K)]"""
DATUM_K = 298.15
"""Reference temperature of heating values and of sensible enthalpy here [K]"""
CHANGE_K = 1000.0
"""Where the low polynomials end and the high ones begin [K]"""

M_CARBON, M_HYDROGEN, M_OXYGEN = 12.011e-3, 1.008e-3, 15.999e-3
"""Atomic masses [kg/mol]"""

GASES = ("N2", "O2", "Ar", "CO2", "H2O")
MOLAR_MASS = np.array([28.014, 31.998, 39.95, 44.009, 18.015]) * 1e-3
"""[kg/mol], in the order of GASES"""

_LOW = np.array(
    [
        [3.53100528, -1.23660987e-4, -5.02999437e-7, 2.43530612e-9, -1.40881235e-12, -1046.97628, 2.96747468],
        [3.78245636, -2.99673415e-3, 9.847302e-6, -9.68129508e-9, 3.24372836e-12, -1063.94356, 3.65767573],
        [2.5, 0.0, 0.0, 0.0, 0.0, -745.375, 4.37967491],
        [2.35677352, 8.98459677e-3, -7.12356269e-6, 2.45919022e-9, -1.43699548e-13, -48371.9697, 9.90105222],
        [4.19864056, -2.0364341e-3, 6.52040211e-6, -5.48797062e-9, 1.77197817e-12, -30293.7267, -0.849032208],
    ]
)
_HIGH = np.array(
    [
        [2.95257626, 1.39690057e-3, -4.92631691e-7, 7.86010367e-11, -4.60755321e-15, -923.948645, 5.87189252],
        [3.66096083, 6.56365523e-4, -1.41149485e-7, 2.05797658e-11, -1.29913248e-15, -1215.97725, 3.41536184],
        [2.5, 0.0, 0.0, 0.0, 0.0, -745.375, 4.37967491],
        [4.63659493, 2.74131991e-3, -9.95828531e-7, 1.60373011e-10, -9.16103468e-15, -49024.9341, -1.93534855],
        [2.67703787, 2.97318329e-3, -7.7376969e-7, 9.44336689e-11, -4.26900959e-15, -29885.8938, 6.88255571],
    ]
)


def _polynomials(seven: Floats) -> Floats:
    """Coefficients of cp, h and s of each gas as polynomials in T [J/mol ...], lowest power first: (16, 5).

    The division by 2, 3, 4, 5 that integration brings is done once here, so that one Horner scheme serves all three.
    """
    a1, a2, a3, a4, a5, a6, a7 = R * seven.T
    cp = a1, a2, a3, a4, a5
    h = a6, a1, a2 / 2, a3 / 3, a4 / 4, a5 / 5
    s_without_logarithm = a7, a2, a3 / 2, a4 / 3, a5 / 4
    return np.stack([*cp, *h, *s_without_logarithm])


_CP, _H, _S = slice(0, 5), slice(5, 11), slice(11, 16)
_LOW_POLYNOMIALS, _HIGH_POLYNOMIALS = _polynomials(_LOW), _polynomials(_HIGH)

_AIR = np.array([0.78084, 0.20946, 0.00934, 0.0004, 0.0])
AIR_MOLE_FRACTIONS = _AIR / _AIR.sum()
"""Dry air by moles, normalised, in the order of GASES"""
M_AIR = float(AIR_MOLE_FRACTIONS @ MOLAR_MASS)
"""Molar mass of dry air [kg/mol]"""
X_O2 = float(AIR_MOLE_FRACTIONS[1])
"""Oxygen in dry air by moles"""

AIR_TABLE_H300 = 300.19e3
AIR_TABLE_S300 = 1702.03
"""Datum of the air table: h(300 K) [J/kg], s0(300 K) [J/(kg K)] (Moran & Shapiro, Fundamentals of Engineering
Thermodynamics, table A-22)"""


@dataclass(frozen=True, slots=True)
class Mixture:
    """A mixture by its summed coefficients: what n moles of each gas give together, per kg of dry air.

    The coefficient runs first, behind it is the shape of the mixtures.
    """

    low: Floats
    """polynomials of cp, h, s below 1000 K, summed over the gases; in J, K and kg"""
    high: Floats
    """the same from 1000 K on"""
    gas_constant: Floats
    """G = R sum n [J/K]"""
    mass: Floats
    """[kg]"""
    datum: Floats
    """enthalpy at 298.15 K [J]"""


def mixture(moles: ArrayLike) -> Mixture:
    """The mixture of `moles` [mol per kg dry air], shape (5, ...), in the order of GASES."""
    n = np.asarray(moles, float)
    low = np.tensordot(_LOW_POLYNOMIALS, n, axes=1)
    return Mixture(
        low=low,
        high=np.tensordot(_HIGH_POLYNOMIALS, n, axes=1),
        gas_constant=R * n.sum(axis=0),
        mass=np.tensordot(MOLAR_MASS, n, axes=1),
        datum=_horner(low[_H], np.asarray(DATUM_K)),
    )


def _horner(coefficients: Floats, t: Floats) -> Floats:
    """c0 + c1 t + c2 t^2 + ...; in place, for long columns are read here more often than anywhere else."""
    value: Floats = coefficients[-1] * t
    for coefficient in coefficients[-2:0:-1]:
        value += coefficient
        value *= t
    value += coefficients[0]
    return value


def _entropy(branch: Floats, t: Floats) -> Floats:
    value = _horner(branch[_S], t)
    value += branch[0] * np.log(t)
    return value


def _by_branch(polynomial: Callable[[Floats, Floats], Floats], mix: Mixture, t: Floats) -> Floats:
    """The low polynomial below 1000 K and the high one from there on, element by element."""
    hot = t >= CHANGE_K
    if not hot.any():
        return polynomial(mix.low, t)
    if hot.all():
        return polynomial(mix.high, t)
    return np.where(hot, polynomial(mix.high, t), polynomial(mix.low, t))


def heat_capacity(mix: Mixture, temperature_k: ArrayLike) -> Floats:
    """Cp of the mixture [J/K per kg dry air]; temperature [K], 200 to 6000."""
    return _by_branch(lambda branch, t: _horner(branch[_CP], t), mix, np.asarray(temperature_k, float))


def enthalpy(mix: Mixture, temperature_k: ArrayLike) -> Floats:
    """Sensible enthalpy above 298.15 K [J per kg dry air]; temperature [K], 200 to 6000."""
    return _by_branch(lambda branch, t: _horner(branch[_H], t), mix, np.asarray(temperature_k, float)) - mix.datum


def entropy(mix: Mixture, temperature_k: ArrayLike) -> Floats:
    """Standard entropy without its mixing part [J/K per kg dry air]; temperature [K], 200 to 6000."""
    return _by_branch(_entropy, mix, np.asarray(temperature_k, float))


def known_temperature(temperature_k: Floats, *others: Floats) -> Floats:
    """The temperature [K] where it is from 200 to 6000, else NaN; ValueError where it and `others` are scalars."""
    holds = good(
        (temperature_k >= 200) & (temperature_k <= 6000),
        "Enter temperatures in kelvin, from 200 to 6000: there the gas polynomials hold.",
        temperature_k,
        *others,
    )
    return np.where(holds, temperature_k, np.nan)


def enough_air(lambda_: Floats, *others: Floats) -> Floats:
    """Lambda where it is 1 or more, else NaN; ValueError where it and `others` (rest of a state) are scalars."""
    holds = good(
        lambda_ >= 1, "Enter lambda of 1 or more: below 1 there is not enough air for this model.", lambda_, *others
    )
    return np.where(holds, lambda_, np.nan)


AIR = mixture(AIR_MOLE_FRACTIONS / M_AIR)
"""One kilogram of dry air."""
AIR_GAS_CONSTANT = float(AIR.gas_constant)
"""[J/(kg K)]"""


def oxygen_need(hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Any:
    """Moles of O2 that burn one mole of CHyOz completely [mol]: 1 + y/4 - z/2; y, z not below zero, result above."""
    y, z = inputs = floats(hc_ratio, oc_ratio)
    need = 1 + y / 4 - z / 2
    holds = good(
        (y >= 0) & (z >= 0) & (need > 0), "Enter H and O atoms for each C, zero or more, of a fuel that burns.", *inputs
    )
    return shaped(np.where(holds, need, np.nan))


def fuel_molar_mass(hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Any:
    """Mass of one mole of CHyOz [kg/mol]."""
    y, z = floats(hc_ratio, oc_ratio)
    return shaped(M_CARBON + M_HYDROGEN * y + M_OXYGEN * z)


def air_fuel_ratio(hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Any:
    """Stoichiometric dry air [kg per kg of fuel CHyOz]; y, z are atoms of H and O for each C."""
    return oxygen_need(hc_ratio, oc_ratio) / X_O2 * M_AIR / fuel_molar_mass(hc_ratio, oc_ratio)


def fuel_air_ratio(lambda_: ArrayLike, hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Any:
    """Fuel for each kilogram of dry air at the excess-air ratio lambda, 1 or more [kg/kg]."""
    lam, y, z = floats(lambda_, hc_ratio, oc_ratio)
    return shaped(1.0 / (enough_air(lam, y, z) * air_fuel_ratio(y, z)))


def product_moles(lambda_: ArrayLike, hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Floats:
    """Moles of N2, O2, Ar, CO2, H2O after complete lean combustion [mol per kg dry air], shape (5, ...).

    Raises ValueError for a scalar lambda below 1 (not enough air for this model); in arrays that element is NaN.
    """
    y, z = floats(hc_ratio, oc_ratio)
    fuel = np.asarray(fuel_air_ratio(lambda_, y, z) / fuel_molar_mass(y, z))
    # Where there is no fuel figure there is no mixture at all, hence the added zero that carries the NaN.
    moles = np.stack([fraction / M_AIR + 0 * fuel for fraction in AIR_MOLE_FRACTIONS])
    moles[1] -= oxygen_need(y, z) * fuel
    moles[3] += fuel
    moles[4] += y / 2 * fuel
    return moles


def products(lambda_: ArrayLike, hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Mixture:
    """The products of CHyOz burnt with lambda times the air it needs; mass = 1 + f [kg per kg dry air]."""
    return mixture(product_moles(lambda_, hc_ratio, oc_ratio))


@dataclass(frozen=True, slots=True)
class GasState:
    """Properties per kilogram of the gas itself, SI: J/(kg K), -, J/kg, J/kg, J/(kg K)."""

    cp: Any
    k: Any
    h: Any
    u: Any
    s0: Any


def air_state(temperature_k: ArrayLike) -> GasState:
    """Dry air on the datum of the usual air tables: h(300 K) 300.19 kJ/kg, s0(300 K) 1.70203 kJ/(kg K).

    Temperature [K], 200 to 6000. Scalars outside raise ValueError.
    """
    t = known_temperature(*floats(temperature_k))
    cp = heat_capacity(AIR, t)
    h = enthalpy(AIR, t) - enthalpy(AIR, 300.0) + AIR_TABLE_H300
    s0 = entropy(AIR, t) - entropy(AIR, 300.0) + AIR_TABLE_S300
    k = cp / (cp - AIR_GAS_CONSTANT)
    return GasState(shaped(cp), shaped(k), shaped(h), shaped(h - AIR_GAS_CONSTANT * t), shaped(s0))


def product_state(
    temperature_k: ArrayLike, lambda_: ArrayLike, hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0
) -> GasState:
    """Lean products per kilogram of products; h and u both counted from 298.15 K (u = h - R_g (T - 298.15)).

    Temperature [K], 200 to 6000; lambda >= 1. Scalars outside raise ValueError.
    """
    t, lam, y, z = floats(temperature_k, lambda_, hc_ratio, oc_ratio)
    t, lam = known_temperature(t, lam, y, z), enough_air(lam, t, y, z)
    mix = products(lam, y, z)
    cp = heat_capacity(mix, t) / mix.mass
    gas_constant = mix.gas_constant / mix.mass
    h = enthalpy(mix, t) / mix.mass
    s0 = entropy(mix, t) / mix.mass
    u = h - gas_constant * (t - DATUM_K)
    return GasState(shaped(cp), shaped(cp / (cp - gas_constant)), shaped(h), shaped(u), shaped(s0))
