"""Propeller and hull: speed of the shaft for a power, speed of the ship for that of the shaft."""

from __future__ import annotations

import math

RATED_KW = 14070.0
RATED_RPM = 99.0
PITCH_M = 5.20
_DESIGN_LINE = 0.92
"""Power of the clean, loaded ship in calm water at rated speed, of rated power: the propeller runs light."""
NM_M = 1852.0


def heaviness(loaded: bool, beaufort: float, hull: float) -> float:
    """Power against the design line at the same speed of the shaft."""
    return (1.0 if loaded else 0.965) * (1.0 + 0.011 * max(0.0, beaufort - 3.5)) * hull


def speed_rpm(shaft_kw: float, heavy: float) -> float:
    """Speed of the shaft at which the propeller takes a power."""
    return RATED_RPM * math.pow(max(shaft_kw, 1.0) / (RATED_KW * _DESIGN_LINE * heavy), 1.0 / 3.0)


def apparent_slip(loaded: bool, beaufort: float, hull: float) -> float:
    """Share of the propeller's advance that the ship does not make."""
    return (0.045 if loaded else 0.02) + 0.012 * max(0.0, beaufort - 3.5) + 0.55 * (hull - 1.0)


def speed_kn(rpm: float, loaded: bool, beaufort: float, hull: float) -> float:
    """Speed of the ship through the water [kn]."""
    return PITCH_M * rpm * 60.0 / NM_M * (1.0 - apparent_slip(loaded, beaufort, hull))
