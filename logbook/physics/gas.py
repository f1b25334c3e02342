"""Dry air and lean combustion products as ideal-gas mixtures.

NASA seven-coefficient polynomials (200-1000 K and 1000-6000 K), from the public property file nasa_gas.yaml that is
distributed with cantera 3.2 (BSD-3; after NASA reports). Everything is per kilogram of DRY AIR that went in, unless
it says otherwise: so the mass of products is 1 + f. Mixing entropy is constant at fixed composition and drops out of
every isentrope.
"""

from __future__ import annotations

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

_AIR = np.array([0.78084, 0.20946, 0.00934, 0.0004, 0.0])
AIR_MOLE_FRACTIONS = _AIR / _AIR.sum()
"""Dry air by moles, normalised, in the order of GASES"""
M_AIR = float(AIR_MOLE_FRACTIONS @ MOLAR_MASS)
"""Molar mass of dry air [kg/mol]"""
X_O2 = float(AIR_MOLE_FRACTIONS[1])

AIR_TABLE_H300 = 300.19e3
AIR_TABLE_S300 = 1702.03
"""Datum of the air table: h(300 K) [J/kg], s0(300 K) [J/(kg K)] (Moran & Shapiro, Fundamentals of Engineering
Thermodynamics, table A-22)"""


@dataclass(frozen=True, slots=True)
class Mixture:
    """A mixture by its summed coefficients: what n moles of each gas give together.

    `low` and `high` have the coefficient first (7, ...) and the shape of the states behind it; times R they are in
    J/K and so on. `gas_constant` = R sum n [J/K], `mass` [kg]; both per kg of dry air.
    """

    low: Floats
    high: Floats
    gas_constant: Floats
    mass: Floats
    datum: Floats
    """enthalpy at 298.15 K [J]"""


def mixture(moles: ArrayLike) -> Mixture:
    """The mixture of `moles` [mol per kg dry air], shape (5, ...), in the order of GASES."""
    n = np.asarray(moles, float)
    low = R * np.tensordot(_LOW.T, n, axes=1)
    high = R * np.tensordot(_HIGH.T, n, axes=1)
    return Mixture(
        low=low,
        high=high,
        gas_constant=R * n.sum(axis=0),
        mass=np.tensordot(MOLAR_MASS, n, axes=1),
        datum=_enthalpy(low, np.asarray(DATUM_K)),
    )


def _enthalpy(a: Floats, t: Floats) -> Floats:
    result: Floats = t * (a[0] + t * (a[1] / 2 + t * (a[2] / 3 + t * (a[3] / 4 + t * (a[4] / 5))))) + a[5]
    return result


def _heat_capacity(a: Floats, t: Floats) -> Floats:
    result: Floats = a[0] + t * (a[1] + t * (a[2] + t * (a[3] + t * a[4])))
    return result


def _entropy(a: Floats, t: Floats) -> Floats:
    result: Floats = a[0] * np.log(t) + t * (a[1] + t * (a[2] / 2 + t * (a[3] / 3 + t * (a[4] / 4)))) + a[6]
    return result


def _branch(mix: Mixture, t: Floats) -> Floats:
    """Coefficients element by element: low below 1000 K, high from there on."""
    if np.all(t < CHANGE_K):
        return mix.low
    if np.all(t >= CHANGE_K):
        return mix.high
    chosen: Floats = np.where(t < CHANGE_K, *np.broadcast_arrays(_fit(mix.low, t), _fit(mix.high, t)))
    return chosen


def _fit(a: Floats, t: Floats) -> Floats:
    # A mixture of scalars meets an array of temperatures: its coefficients get as many empty axes.
    return a.reshape(a.shape + (1,) * (t.ndim - (a.ndim - 1)))


def heat_capacity(mix: Mixture, temperature_k: Floats) -> Floats:
    """Cp of the mixture [J/K per kg dry air]; temperature [K]."""
    t = np.asarray(temperature_k, float)
    return _heat_capacity(_branch(mix, t), t)


def enthalpy(mix: Mixture, temperature_k: Floats) -> Floats:
    """Sensible enthalpy above 298.15 K [J per kg dry air]; temperature [K]."""
    t = np.asarray(temperature_k, float)
    return _enthalpy(_branch(mix, t), t) - mix.datum


def entropy(mix: Mixture, temperature_k: Floats) -> Floats:
    """Standard entropy without its mixing part [J/K per kg dry air]; temperature [K]."""
    t = np.asarray(temperature_k, float)
    return _entropy(_branch(mix, t), t)


AIR = mixture(AIR_MOLE_FRACTIONS / M_AIR)
"""One kilogram of dry air."""
AIR_GAS_CONSTANT = float(AIR.gas_constant)
"""[J/(kg K)]"""


def oxygen_need(hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Any:
    """Moles of O2 that burn one mole of CHyOz completely [mol]: 1 + y/4 - z/2."""
    y, z = floats(hc_ratio, oc_ratio)
    return shaped(1 + y / 4 - z / 2)


def fuel_molar_mass(hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Any:
    """Mass of one mole of CHyOz [kg/mol]."""
    y, z = floats(hc_ratio, oc_ratio)
    return shaped(M_CARBON + M_HYDROGEN * y + M_OXYGEN * z)


def air_fuel_ratio(hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Any:
    """Stoichiometric dry air [kg per kg of fuel CHyOz]; y, z are atoms of H and O for each C."""
    need = np.asarray(oxygen_need(hc_ratio, oc_ratio))
    return shaped(need / X_O2 * M_AIR / fuel_molar_mass(hc_ratio, oc_ratio))


def fuel_air_ratio(lambda_: ArrayLike, hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Any:
    """Fuel for each kilogram of dry air at the excess-air ratio lambda [kg/kg]."""
    return shaped(1.0 / (np.asarray(lambda_, float) * air_fuel_ratio(hc_ratio, oc_ratio)))


def product_moles(lambda_: ArrayLike, hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0) -> Floats:
    """Moles of N2, O2, Ar, CO2, H2O after complete lean combustion [mol per kg dry air], shape (5, ...).

    Raises ValueError for a scalar lambda below 1 (not enough air for this model); in arrays that element is NaN.
    """
    lam, y, z = floats(lambda_, hc_ratio, oc_ratio)
    holds = good(lam >= 1, "Lambda is below 1: not enough air for a model of complete combustion.", lam, y, z)
    fuel = np.asarray(fuel_air_ratio(np.where(holds, lam, np.nan), y, z)) / fuel_molar_mass(y, z)
    moles = np.stack(np.broadcast_arrays(*(fraction / M_AIR + 0 * fuel for fraction in AIR_MOLE_FRACTIONS)))
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
    (t,) = floats(temperature_k)
    holds = good((t >= 200) & (t <= 6000), "The gas polynomials hold from 200 to 6000 K.", t)
    t = np.where(holds, t, np.nan)
    cp = heat_capacity(AIR, t)
    h = enthalpy(AIR, t) - enthalpy(AIR, np.asarray(300.0)) + AIR_TABLE_H300
    s0 = entropy(AIR, t) - entropy(AIR, np.asarray(300.0)) + AIR_TABLE_S300
    k = cp / (cp - AIR_GAS_CONSTANT)
    return GasState(shaped(cp), shaped(k), shaped(h), shaped(h - AIR_GAS_CONSTANT * t), shaped(s0))


def product_state(
    temperature_k: ArrayLike, lambda_: ArrayLike, hc_ratio: ArrayLike, oc_ratio: ArrayLike = 0.0
) -> GasState:
    """Lean products per kilogram of products; h and u both counted from 298.15 K (u = h - R_g (T - 298.15)).

    Temperature [K], 200 to 6000; lambda >= 1. Scalars outside raise ValueError.
    """
    t, lam, y, z = floats(temperature_k, lambda_, hc_ratio, oc_ratio)
    holds = good((t >= 200) & (t <= 6000), "The gas polynomials hold from 200 to 6000 K.", t, lam, y, z)
    t = np.where(holds, t, np.nan)
    mix = products(lam, y, z)
    cp = heat_capacity(mix, t) / mix.mass
    gas_constant = mix.gas_constant / mix.mass
    h = enthalpy(mix, t) / mix.mass
    s0 = entropy(mix, t) / mix.mass
    u = h - gas_constant * (t - DATUM_K)
    return GasState(shaped(cp), shaped(cp / (cp - gas_constant)), shaped(h), shaped(u), shaped(s0))
