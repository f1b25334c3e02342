"""Carbon intensity indicator of a ship (IMO guidelines G1 to G4), unadjusted, for own use.

G1 MEPC.352(78), G2 353(78), G3 338(76) amended by 400(83), G4 354(78), as quoted in public secondary texts; the rating
bounds of refrigerated cargo, ro-ro cargo and cruise ships and the ro-ro passenger line are from memory. Corrections
and voyage adjustments (355(78)) are not made here.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from math import inf

from logbook.physics.fuel import REPORTING_FUELS

REDUCTION_PERCENT = {2023: 5, 2024: 7, 2025: 9, 2026: 11, 2027: 13.625, 2028: 16.25, 2029: 18.875, 2030: 21.5}
RATINGS = "ABCDE"


@dataclass(frozen=True, slots=True)
class ReferenceLine:
    """One row: capacity from `least` [t or GT] on; a C^-c; rating bounds d1..d4."""

    least: float
    fixed_capacity: float | None
    a: float
    c: float
    d: tuple[float, float, float, float]


_BULK = (0.86, 0.94, 1.06, 1.18)
_CARGO = (0.83, 0.94, 1.06, 1.19)
_LNG_SMALL = (0.78, 0.92, 1.10, 1.37)
_VEHICLE = (0.86, 0.94, 1.06, 1.16)

REFERENCE_LINES: dict[str, tuple[ReferenceLine, ...]] = {
    "bulk carrier": (
        ReferenceLine(279_000, 279_000, 4745, 0.622, _BULK),
        ReferenceLine(0, None, 4745, 0.622, _BULK),
    ),
    "gas carrier": (
        ReferenceLine(65_000, None, 14405e7, 2.071, (0.81, 0.91, 1.12, 1.44)),
        ReferenceLine(0, None, 8104, 0.639, (0.85, 0.95, 1.06, 1.25)),
    ),
    "tanker": (ReferenceLine(0, None, 5247, 0.610, (0.82, 0.93, 1.08, 1.28)),),
    "container ship": (ReferenceLine(0, None, 1984, 0.489, (0.83, 0.94, 1.07, 1.19)),),
    "general cargo": (
        ReferenceLine(20_000, None, 31948, 0.792, _CARGO),
        ReferenceLine(0, None, 588, 0.3885, _CARGO),
    ),
    "refrigerated cargo": (ReferenceLine(0, None, 4600, 0.557, (0.78, 0.91, 1.07, 1.20)),),
    "combination carrier": (ReferenceLine(0, None, 5119, 0.622, (0.87, 0.96, 1.06, 1.14)),),
    "LNG carrier": (
        ReferenceLine(100_000, None, 9.827, 0.0, (0.89, 0.98, 1.06, 1.13)),
        ReferenceLine(65_000, None, 14479e10, 2.673, _LNG_SMALL),
        ReferenceLine(0, 65_000, 14779e10, 2.673, _LNG_SMALL),
    ),
    "ro-ro vehicle": (
        ReferenceLine(57_700, 57_700, 3627, 0.590, _VEHICLE),
        ReferenceLine(30_000, None, 3627, 0.590, _VEHICLE),
        ReferenceLine(0, None, 330, 0.329, _VEHICLE),
    ),
    "ro-ro cargo": (ReferenceLine(0, None, 1967, 0.485, (0.76, 0.89, 1.08, 1.27)),),
    "ro-ro passenger": (ReferenceLine(0, None, 2023, 0.460, (0.76, 0.92, 1.14, 1.30)),),
    "cruise passenger": (ReferenceLine(0, None, 930, 0.383, (0.87, 0.95, 1.06, 1.16)),),
}


BY_GROSS_TONNAGE = frozenset({"ro-ro vehicle", "ro-ro cargo", "ro-ro passenger", "cruise passenger"})
"""Ship types whose capacity is the gross tonnage; of all others it is the deadweight."""
FROM_MEMORY = {
    "refrigerated cargo": "bounds of the ratings",
    "ro-ro cargo": "bounds of the ratings",
    "cruise passenger": "bounds of the ratings",
    "ro-ro passenger": "reference line and bounds of the ratings",
}
"""What of a ship type's row no public text was found for."""


@dataclass(frozen=True, slots=True)
class CarbonIntensity:
    """Attained and required [g/(t nm) or g/(GT nm)], their ratio, the rating and the bounds between ratings."""

    co2_t: float
    attained: float
    reference: float
    required: float
    ratio: float
    rating: str
    bounds: tuple[float, float, float, float]


def reference_line(ship_type: str, capacity: float) -> ReferenceLine:
    """The row of a ship type for a ship's own deadweight [t] or gross tonnage. ValueError: unknown, or no capacity."""
    if ship_type not in REFERENCE_LINES:
        raise ValueError(f"ship_type is one of: {', '.join(REFERENCE_LINES)}; not '{ship_type}'.")
    if not 0 < capacity < inf:
        raise ValueError("Capacity must be above zero: the deadweight in t, or the gross tonnage.")
    return next(line for line in REFERENCE_LINES[ship_type] if capacity >= line.least)


def carbon_intensity(
    ship_type: str, capacity: float, year: int, distance_nm: float, fuel_t: Mapping[str, float]
) -> CarbonIntensity:
    """Attained intensity of a year, its required value and rating.

    Capacity: the ship's own deadweight [t] or gross tonnage; the fixed one of a reference line is looked up and serves
    the line only. Fuel [t] by name of REPORTING_FUELS. Raises ValueError for a name, year or amount that cannot be.
    """
    line = reference_line(ship_type, capacity)
    if year not in REDUCTION_PERCENT:
        raise ValueError(f"Reduction factors are known for {min(REDUCTION_PERCENT)} to {max(REDUCTION_PERCENT)}.")
    unknown = [name for name in fuel_t if name not in REPORTING_FUELS]
    if unknown or not fuel_t:
        raise ValueError(f"Fuel is one of: {', '.join(REPORTING_FUELS)}; found: {', '.join(unknown) or 'none'}.")
    if not 0 < distance_nm < inf or any(not 0 <= mass < inf for mass in fuel_t.values()):
        raise ValueError("Distance must be above zero, fuel not below zero.")
    co2_t = sum(mass * REPORTING_FUELS[name].carbon_factor for name, mass in fuel_t.items())
    attained = co2_t * 1e6 / (capacity * distance_nm)
    reference = line.a * (line.fixed_capacity or capacity) ** -line.c
    required = (1 - REDUCTION_PERCENT[year] / 100) * reference
    d1, d2, d3, d4 = (required * d for d in line.d)
    rating = RATINGS[sum(attained >= bound for bound in (d1, d2, d3, d4))]
    return CarbonIntensity(co2_t, attained, reference, required, attained / required, rating, (d1, d2, d3, d4))
