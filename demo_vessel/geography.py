"""Ports, routes and the climate along them. Places are real; what the ship does there is invented."""

from __future__ import annotations

import math
from dataclasses import dataclass

EARTH_RADIUS_NM = 3440.065
CANAL = "canal"
"""stands between two waypoints of a route where a canal is passed under pilot"""


@dataclass(frozen=True, slots=True)
class Port:
    name: str
    latitude: float
    longitude: float
    utc_offset_min: int


PORTS = {
    port.name: port
    for port in (
        Port("Durban", -29.9, 31.1, 120),
        Port("Singapore", 1.2, 103.8, 480),
        Port("Qingdao", 36.0, 120.4, 480),
        Port("Callao", -12.0, -77.2, -300),
        Port("Newcastle", -32.9, 151.9, 600),
        Port("Kwinana", -32.2, 115.7, 480),
        Port("Kandla", 22.9, 70.2, 330),
        Port("Fujairah", 25.2, 56.4, 240),
        Port("Rotterdam", 52.0, 4.0, 60),
        Port("Santos", -24.0, -46.3, -180),
    )
}

Waypoint = tuple[float, float] | str
_VIA: dict[tuple[str, str], list[Waypoint]] = {
    ("Durban", "Singapore"): [(-25.0, 52.0), (-6.8, 104.5), (-3.0, 107.0)],
    ("Singapore", "Qingdao"): [(5.0, 106.0), (13.0, 112.0), (22.0, 118.0), (30.0, 123.0)],
    ("Qingdao", "Callao"): [(31.0, 131.0), (34.0, 150.0), (32.0, 180.0), (18.0, -140.0), (-2.0, -100.0)],
    ("Callao", "Newcastle"): [(-20.0, -100.0), (-28.0, -140.0), (-32.0, 180.0)],
    ("Newcastle", "Kwinana"): [(-39.3, 149.0), (-39.3, 144.0), (-36.0, 118.0), (-34.6, 114.8)],
    ("Kwinana", "Kandla"): [(-15.0, 96.0), (5.0, 78.0), (12.0, 72.5)],
    ("Kandla", "Fujairah"): [(22.0, 67.0), (24.3, 60.0)],
    ("Fujairah", "Rotterdam"): [
        (22.5, 60.2), (14.0, 52.0), (12.0, 45.0), (12.6, 43.3), (20.0, 38.5), (27.0, 34.5), (29.8, 32.5), CANAL,
        (31.6, 32.3), (34.0, 23.0), (37.4, 11.0), (36.0, -5.5), (36.5, -9.2), (43.5, -9.9), (48.7, -5.9),
        (50.2, -1.0), (51.0, 1.5),
    ],
    ("Rotterdam", "Santos"): [
        (51.0, 1.5), (50.2, -1.0), (48.7, -5.9), (28.0, -17.0), (15.0, -25.0), (-7.0, -33.8), (-23.3, -41.0),
    ],
    ("Santos", "Durban"): [(-30.0, -20.0), (-36.0, 15.0), (-35.2, 21.0)],
    ("Durban", "Kandla"): [(-20.0, 41.0), (-11.0, 43.8), (0.0, 52.0), (15.0, 65.0)],
    ("Kandla", "Singapore"): [(12.0, 72.5), (5.7, 80.0), (6.0, 94.0), (3.0, 100.5)],
    ("Singapore", "Newcastle"): [(-3.0, 107.0), (-9.5, 120.0), (-10.5, 142.0), (-17.0, 147.5), (-25.0, 153.8)],
    ("Newcastle", "Qingdao"): [(-25.0, 154.5), (-6.0, 153.5), (15.0, 142.0), (30.0, 127.0)],
    ("Singapore", "Fujairah"): [(3.0, 100.5), (6.0, 94.0), (5.7, 80.0), (10.0, 73.0), (22.5, 60.2)],
    ("Fujairah", "Durban"): [(22.5, 60.2), (0.0, 52.0), (-11.0, 43.8), (-20.0, 41.0)],
    ("Rotterdam", "Durban"): [
        (51.0, 1.5), (50.2, -1.0), (48.7, -5.9), (28.0, -17.0), (15.0, -19.0), (0.0, -10.0), (-20.0, 5.0),
        (-35.0, 17.5), (-35.3, 22.0),
    ],
    ("Kwinana", "Durban"): [(-33.5, 90.0), (-33.0, 60.0)],
    ("Santos", "Singapore"): [
        (-30.0, -20.0), (-36.5, 15.0), (-37.0, 30.0), (-32.0, 60.0), (-20.0, 85.0), (-6.8, 104.5), (-3.0, 107.0),
    ],
}  # fmt: skip


def route(start: str, end: str) -> list[list[tuple[float, float]]]:
    """Waypoints from port to port; two lists where a canal lies between. Longitudes run on without a jump."""
    via = _VIA.get((start, end)) or list(reversed(_VIA[(end, start)]))
    first, last = PORTS[start], PORTS[end]
    parts: list[list[tuple[float, float]]] = [[(first.latitude, first.longitude)]]
    for point in [*via, (last.latitude, last.longitude)]:
        if isinstance(point, str):
            parts.append([])
            continue
        before = (parts[-1] or parts[-2])[-1][1]
        # The short way round: from 170 east on to 190, not back to -170.
        longitude = before + (point[1] - before + 180.0) % 360.0 - 180.0
        parts[-1].append((point[0], longitude))
    return parts


def distance_nm(start: tuple[float, float], end: tuple[float, float]) -> float:
    """Great-circle distance [nm] of two positions in degrees."""
    first, second = math.radians(start[0]), math.radians(end[0])
    turn = math.radians(end[1] - start[1])
    half = math.sin((second - first) / 2) ** 2 + math.cos(first) * math.cos(second) * math.sin(turn / 2) ** 2
    return 2 * EARTH_RADIUS_NM * math.asin(math.sqrt(half))


def sea_temperature_c(latitude: float, day_of_year: float) -> float:
    """A plain climate: warmest where the sun stood two months ago, 0.5 K colder each degree away from there."""
    sun = 9.0 * math.sin(2 * math.pi * (day_of_year - 140.0) / 365.25)
    return max(2.0, 29.3 - 0.47 * max(0.0, abs(latitude - sun) - 8.0))


def zone_min(longitude: float) -> int:
    """Offset from UTC [min] of the time zone at sea of a longitude."""
    hours = round(((longitude + 180.0) % 360.0 - 180.0) / 15.0)
    return 720 if hours == -12 else hours * 60
