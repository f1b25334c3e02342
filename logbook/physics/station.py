"""Figures of a generating set or station over a period (after IEEE 762; names to be checked there)."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from logbook.physics.checks import floats, good, shaped


@dataclass(frozen=True, slots=True)
class Availability:
    """Fractions 0..1 of one period."""

    available_h: Any
    availability: Any
    service_factor: Any
    forced_outage_factor: Any
    forced_outage_rate: Any
    """NaN where the set neither served nor was forced out: there is no rate"""


def availability(service_h: ArrayLike, reserve_h: ArrayLike, planned_h: ArrayLike, forced_h: ArrayLike) -> Availability:
    """Availability from hours of service, reserve shutdown, planned (and maintenance) and forced outage [h].

    Raises ValueError for a negative or empty period.
    """
    service, reserve, planned, forced = inputs = floats(service_h, reserve_h, planned_h, forced_h)
    least = np.minimum(np.minimum(service, reserve), np.minimum(planned, forced))
    period = service + reserve + planned + forced
    holds = good(
        (least >= 0) & (period > 0), "Hours of a period are not below zero, and their sum is above zero.", *inputs
    )
    period = np.where(holds, period, np.nan)
    available, exposed = service + reserve, np.where(holds & (forced + service > 0), forced + service, np.nan)
    return Availability(
        available_h=shaped(np.where(holds, available, np.nan)),
        availability=shaped(available / period),
        service_factor=shaped(service / period),
        forced_outage_factor=shaped(forced / period),
        forced_outage_rate=shaped(forced / exposed),
    )


@dataclass(frozen=True, slots=True)
class Output:
    """Output figures of one period, fractions 0..1 unless the name says kW."""

    capacity_factor_gross: Any
    capacity_factor_net: Any
    output_factor: Any
    station_service: Any
    mean_power_kw: Any
    load_factor: Any
    mean_power_in_service_kw: Any
    load_factor_in_service: Any


def output(
    *,
    gross_kwh: ArrayLike,
    net_kwh: ArrayLike,
    peak_kw: ArrayLike,
    gross_capacity_kw: ArrayLike,
    net_capacity_kw: ArrayLike,
    period_h: ArrayLike,
    service_h: ArrayLike,
) -> Output:
    """Capacity, output and load factors from energies [kWh], peak and capacities [kW], hours [h].

    Raises ValueError for amounts that are not above zero, more net than gross, or more service than the period has.
    """
    gross, net, peak, of_gross, of_net, period, service = inputs = floats(
        gross_kwh, net_kwh, peak_kw, gross_capacity_kw, net_capacity_kw, period_h, service_h
    )
    holds = good(
        (gross > 0) & (peak > 0) & (of_gross > 0) & (of_net > 0) & (period > 0) & (service > 0) & (net <= gross),
        "Energy, peak, capacity and hours must be above zero, and net not above gross.",
        *inputs,
    ) & good(service <= period * (1 + 1e-9), "Hours of service cannot be more than those of the period.", *inputs)
    gross = np.where(holds, gross, np.nan)
    peak, of_gross, of_net, period, service = (
        np.where(holds, value, np.nan) for value in (peak, of_gross, of_net, period, service)
    )
    mean, in_service = gross / period, gross / service
    return Output(
        capacity_factor_gross=shaped(gross / (period * of_gross)),
        capacity_factor_net=shaped(net / (period * of_net)),
        output_factor=shaped(gross / (service * of_gross)),
        station_service=shaped((gross - net) / gross),
        mean_power_kw=shaped(mean),
        load_factor=shaped(mean / peak),
        mean_power_in_service_kw=shaped(in_service),
        load_factor_in_service=shaped(in_service / peak),
    )
