"""Ship time and UTC: an instant from a date, a clock face and the offset of that moment.

Order and elapsed hours come from UTC only; neither the local date nor the local time of an engine is unique.
"""

from __future__ import annotations

import re
from datetime import UTC, date, datetime, timedelta

_OFFSET = re.compile(
    r"(?:UTC|GMT)?\s*(?:(?P<sign>[+-]?)\s*(?:(?P<hours>[0-9]{1,2})(?::(?P<minutes>[0-5][0-9]))?"
    r"|(?P<both>[0-9]{2}[0-5][0-9])))",
    re.IGNORECASE,
)
_ZERO = ("z", "utc", "gmt")
_CLOCK = re.compile(
    r"(?:(?P<hour>[0-9]{1,2}):(?P<minute>[0-5][0-9])(?::(?P<second>[0-5][0-9]))?|(?P<hours>[0-9]{1,2})"
    r"|(?P<both>[0-9]{3,4}))(?:\s*h(?:rs?)?)?",
    re.IGNORECASE,
)
_DATE = re.compile(r"([0-9]{1,4})([./-])([0-9]{1,2})\2([0-9]{4}|[0-9]{1,2})")
_WEST_MIN, _EAST_MIN = -12 * 60, 14 * 60
_YEARS = range(1900, 2200)
DATE_ORDERS = ("year first", "day first", "month first")


class TimeRefused(Exception):
    """A date, time or offset that is not understood: a sentence that says what to write."""


def parse_offset(text: str) -> int:
    """Minutes that ship time is ahead of UTC: `+2`, `+02:00`, `-3:30`, `+0545`, `Z`. Raises TimeRefused."""
    bare = text.strip().replace("\u2212", "-")
    if bare.lower() in _ZERO:
        return 0
    match = _OFFSET.fullmatch(bare)
    if match is not None:
        hours, minutes = match["hours"], match["minutes"] or "0"
        if match["both"]:
            hours, minutes = match["both"][:2], match["both"][2:]
        offset = (int(hours) * 60 + int(minutes)) * (-1 if match["sign"] == "-" else 1)
        if _WEST_MIN <= offset <= _EAST_MIN:
            return offset
    raise TimeRefused(f"'{text}' is no offset; write how far ship time is ahead of UTC: +2, +05:30, -3.")


def offset_of_zone_description(text: str) -> int:
    """Offset [min] from a zone description, which is what is added to ship time to get UTC: +5 is -05:00.

    Raises TimeRefused.
    """
    bare = re.sub(r"(?i)^\s*ZD\s*", "", text).strip().replace("\u2212", "-")
    turned = bare[1:] if bare.startswith("-") else f"-{bare.lstrip('+')}"
    return 0 if bare.lower() in _ZERO else parse_offset(turned)


def shown_offset(minutes: int) -> str:
    """`+05:30`."""
    return f"{'-' if minutes < 0 else '+'}{abs(minutes) // 60:02d}:{abs(minutes) % 60:02d}"


def parse_date(text: str, order: str = "year first") -> date:
    """A date in the order of the log, one of DATE_ORDERS. Raises TimeRefused.

    A year of four digits in front is seen whatever the order, and `14.05.2026` has its day first. `01/02/2026` is
    read only where the order of the log is said.
    """
    match = _DATE.fullmatch(text.strip())
    if match is not None:
        first, mark, second, third = match.groups()
        parts: tuple[str, str, str] | None
        if len(first) == 4:
            parts = (first, second, third)
        elif len(first) > 2 or (order == "year first" and mark != "."):
            parts = None
        elif order == "month first":
            parts = (third, first, second)
        else:
            parts = (third, second, first)
        if parts is not None:
            year, month, day = (int(part) for part in parts)
            try:
                found = date(year + (2000 if len(parts[0]) <= 2 else 0), month, day)
            except ValueError:
                found = None
            if found is not None and found.year in _YEARS:
                return found
    raise TimeRefused(f"'{text}' is no date here ({order}); write e.g. 2026-05-14 or 14.05.2026.")


def parse_clock(text: str) -> timedelta:
    """Time of day: `0400`, `400`, `04:00`, `4`, `24:00` (the end of the day). Raises TimeRefused."""
    match = _CLOCK.fullmatch(text.strip())
    if match is not None:
        if match["both"]:
            hours, minutes = int(match["both"][:-2]), int(match["both"][-2:])
        else:
            hours, minutes = int(match["hour"] or match["hours"]), int(match["minute"] or 0)
        found = timedelta(hours=hours, minutes=minutes, seconds=int(match["second"] or 0))
        if minutes < 60 and found <= timedelta(hours=24):
            return found
    raise TimeRefused(f"'{text}' is no time of day; write e.g. 0400 or 04:00.")


def instant(day: date, clock: timedelta, offset_min: int) -> datetime:
    """The UTC instant of a ship's date and time of day, the clocks being `offset_min` ahead of UTC."""
    return datetime(day.year, day.month, day.day, tzinfo=UTC) + clock - timedelta(minutes=offset_min)


def parse_moment(text: str, offset_min: int, order: str = "year first") -> tuple[datetime, int]:
    """(UTC instant, offset [min]) of a date and time in one text; an offset in the text itself goes first.

    `2025-03-01 04:00`, `2025-08-09T19:12+00:00`, `14.05.2026 0400`, `2026-05-14T04:00Z`. Raises TimeRefused.
    """
    bare = text.strip()
    try:
        found = datetime.fromisoformat(bare)
    except ValueError:
        found = None
    if found is not None and len(bare) > len("2026-05-14"):
        if found.year not in _YEARS:
            raise TimeRefused(f"'{text}' is no date of a log; write e.g. 2026-05-14 04:00.")
        if found.tzinfo is not None:
            own = found.utcoffset() or timedelta()
            return found.astimezone(UTC), round(own.total_seconds() / 60)
        return (found - timedelta(minutes=offset_min)).replace(tzinfo=UTC), offset_min
    day, _, clock = bare.replace("T", " ").partition(" ")
    if not clock.strip():
        raise TimeRefused(f"'{text}' has no time of day; write e.g. 2026-05-14 04:00.")
    return instant(parse_date(day, order), parse_clock(clock), offset_min), offset_min


def elapsed_h(earlier: datetime, later: datetime) -> float:
    """Hours between two instants, never the clock face."""
    return (later.astimezone(UTC) - earlier.astimezone(UTC)).total_seconds() / 3600


def end_of_hour(labelled: datetime, hour: str) -> datetime:
    """When an hourly line of a station ends: at its own time (`ending`), or an hour after it (`beginning`)."""
    return labelled + timedelta(hours=1) if hour == "beginning" else labelled
