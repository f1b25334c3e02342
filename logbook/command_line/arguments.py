"""Arguments that several commands share, so that they read alike everywhere."""

from __future__ import annotations

import argparse
from datetime import UTC, datetime, timedelta
from pathlib import Path

from logbook.command_line.environment import Refused


def plant_folder(parser: argparse.ArgumentParser) -> None:
    parser.add_argument("plant", metavar="PLANT", type=Path, help="the plant folder (it holds plant.toml)")


def person(parser: argparse.ArgumentParser) -> None:
    parser.add_argument("--person", metavar="NAME", help="who acts; else the one your key or account names")


def as_json(parser: argparse.ArgumentParser) -> None:
    parser.add_argument("--json", action="store_true", help="as JSON, for a program")


def span(parser: argparse.ArgumentParser) -> None:
    parser.add_argument("--from", dest="since", metavar="DATE", help="from this date or moment (UTC) on")
    parser.add_argument("--to", dest="until", metavar="DATE", help="up to the end of this date, or this moment (UTC)")


def moment(text: str | None, *, end_of_day: bool = False) -> datetime | None:
    """`2026-05-14` or `2026-05-14T04:00` (UTC unless it says otherwise) as an instant. Refused if it is neither."""
    if text is None:
        return None
    try:
        found = datetime.fromisoformat(text)
    except ValueError as error:
        raise Refused(f"'{text}' is no date; write 2026-05-14 or 2026-05-14T04:00Z.") from error
    if found.tzinfo is None:
        found = found.replace(tzinfo=UTC)
    if end_of_day and len(text) == len("2026-05-14"):
        found += timedelta(days=1) - timedelta(seconds=1)
    return found
