"""The formulas of the desk, by name: what each takes and gives, and where it comes from."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from logbook.command_line.calculations.record import Calculation


def calculations() -> Mapping[str, Calculation]:
    """All of them, in the order in which they are listed. Physics is loaded when one is worked out."""
    from logbook.command_line.calculations import engine, fuel, statistics

    return {one.name: one for part in (fuel.ALL, engine.ALL, statistics.ALL) for one in part}
