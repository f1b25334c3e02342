"""The four ways to a combustion temperature T_H, each a named choice.

Peak combustion temperature is no reading: it is set or worked out, and B is as good as that. Every bound carries the
name of its method; a trend or a difference never mixes them, and nothing falls back from one to another. All four
describe the mean gas: local flames near the stoichiometric mixture are far hotter. `cycle` lies some 40 to 200 K above
`flame` where part of the heat is taken in at constant volume; at constant pressure throughout they are equal.

What they ask of a state: p1 absolute [Pa] and T1 [K] at the start of compression, effective compression
ratio, trapped lambda, lower calorific value [J/kg], fuel CHyOz. Errors as for the cycle.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.bounds import SET_COMBUSTION_TEMPERATURE_K, maximum_pressure_from_curve
from logbook.physics.checks import floats, good, shaped
from logbook.physics.cycle import compressed_temperature, flame_temperature, limited_pressure_cycle


def by_cycle_with_curve(
    curve_maximum_pressure_pa: ArrayLike,
    curve_charge_pressure_pa: ArrayLike,
    pressure_pa: ArrayLike,
    temperature_k: ArrayLike,
    compression_ratio: ArrayLike,
    lambda_: ArrayLike,
    lower_calorific_value_j_kg: ArrayLike,
    hc_ratio: ArrayLike = 1.8,
    oc_ratio: ArrayLike = 0.0,
) -> Any:
    """`cycle, pressure from curve`: T3 with Pmax of the trial curve at this brake power, times p1/p1_curve [K].

    Curve values absolute [Pa]. Blind to late or weak combustion, for Pmax is not measured.
    """
    pmax = maximum_pressure_from_curve(curve_maximum_pressure_pa, curve_charge_pressure_pa, pressure_pa)
    return by_cycle(
        pmax, pressure_pa, temperature_k, compression_ratio, lambda_, lower_calorific_value_j_kg, hc_ratio, oc_ratio
    )


def by_setting(set_temperature_k: ArrayLike = SET_COMBUSTION_TEMPERATURE_K) -> Any:
    """`set`: one value for each engine, kept [K]; the bound then moves with ambient temperature only.

    Above 300 K and up to 6000, else ValueError, or NaN in arrays.
    """
    (hot,) = floats(set_temperature_k)
    holds = good((hot > 300) & (hot <= 6000), "Enter the combustion temperature in kelvin, e.g. 1850.", hot)
    return shaped(np.where(holds, hot, np.nan))


def by_cycle(
    maximum_pressure_pa: ArrayLike,
    pressure_pa: ArrayLike,
    temperature_k: ArrayLike,
    compression_ratio: ArrayLike,
    lambda_: ArrayLike,
    lower_calorific_value_j_kg: ArrayLike,
    hc_ratio: ArrayLike = 1.8,
    oc_ratio: ArrayLike = 0.0,
) -> Any:
    """`cycle`: T3 of the limited-pressure cycle with measured Pmax, mean of the cylinders, absolute [Pa] -> [K]."""
    return limited_pressure_cycle(
        pressure_pa,
        temperature_k,
        compression_ratio,
        maximum_pressure_pa,
        lambda_,
        lower_calorific_value_j_kg,
        hc_ratio,
        oc_ratio,
    ).t3_k


def by_flame(
    temperature_k: ArrayLike,
    compression_ratio: ArrayLike,
    lambda_: ArrayLike,
    lower_calorific_value_j_kg: ArrayLike,
    hc_ratio: ArrayLike = 1.8,
    oc_ratio: ArrayLike = 0.0,
) -> Any:
    """`flame`: adiabatic flame at constant pressure from the compressed state T2, complete combustion [K].

    The charge pressure is felt through lambda alone.
    """
    t2 = compressed_temperature(temperature_k, compression_ratio)
    return flame_temperature(t2, lambda_, hc_ratio, lower_calorific_value_j_kg, oc_ratio)
