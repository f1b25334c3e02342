"""Figures of a generating set or station over a period (after IEEE 762; names to be checked there)."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Availability:
    """Fractions 0..1 of one period."""

    available_h: float
    availability: float
    service_factor: float
    forced_outage_factor: float
    forced_outage_rate: float | None
    """None where the set neither served nor was forced out"""


def availability(service_h: float, reserve_h: float, planned_h: float, forced_h: float) -> Availability:
    """Availability from hours of service, reserve shutdown, planned (and maintenance) and forced outage [h].

    Raises ValueError for a negative or empty period.
    """
    period = service_h + reserve_h + planned_h + forced_h
    if min(service_h, reserve_h, planned_h, forced_h) < 0 or period <= 0:
        raise ValueError("Hours of a period are not below zero, and their sum is above zero.")
    available = service_h + reserve_h
    exposed = forced_h + service_h
    return Availability(
        available, available / period, service_h / period, forced_h / period, forced_h / exposed if exposed else None
    )


@dataclass(frozen=True, slots=True)
class Output:
    """Output figures of one period, fractions 0..1 unless the name says kW."""

    capacity_factor_gross: float
    capacity_factor_net: float
    output_factor: float
    station_service: float
    mean_power_kw: float
    load_factor: float
    mean_power_in_service_kw: float
    load_factor_in_service: float


def output(
    *,
    gross_kwh: float,
    net_kwh: float,
    peak_kw: float,
    gross_capacity_kw: float,
    net_capacity_kw: float,
    period_h: float,
    service_h: float,
) -> Output:
    """Capacity, output and load factors from energies [kWh], peak and capacities [kW], hours [h]."""
    if min(gross_kwh, peak_kw, gross_capacity_kw, net_capacity_kw, period_h, service_h) <= 0 or net_kwh > gross_kwh:
        raise ValueError("Energy, peak, capacity and hours must be above zero, and net not above gross.")
    mean, in_service = gross_kwh / period_h, gross_kwh / service_h
    return Output(
        capacity_factor_gross=gross_kwh / (period_h * gross_capacity_kw),
        capacity_factor_net=net_kwh / (period_h * net_capacity_kw),
        output_factor=gross_kwh / (service_h * gross_capacity_kw),
        station_service=(gross_kwh - net_kwh) / gross_kwh,
        mean_power_kw=mean,
        load_factor=mean / peak_kw,
        mean_power_in_service_kw=in_service,
        load_factor_in_service=in_service / peak_kw,
    )
