"""A line of small bars: several under one another can be compared, since the caller gives them one scale."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence

from textual.widgets import Static

from logbook.panes.terminal.glyphs import Glyphs

Scale = tuple[float, float]
"""Lowest and highest value that is told apart."""


def shared_scale(rows: Iterable[Sequence[float | None]], least_span: float, zero: float | None = None) -> Scale:
    """One scale for all rows, in their unit. It spans at least `least_span`, above 0: noise must not look like a cliff.

    With `zero` it reaches equally far to both sides of it. Missing values are None or NaN.
    """
    values = [value for row in rows for value in _there(row)]
    if zero is not None:
        reach = max([least_span / 2, *(abs(value - zero) for value in values)])
        return zero - reach, zero + reach
    if not values:
        return -least_span / 2, least_span / 2
    low, high = min(values), max(values)
    spare = max(0.0, least_span - (high - low)) / 2
    return low - spare, high + spare


def sparkline(
    values: Sequence[float | None], width: int, scale: Scale, glyphs: Glyphs, zero: float | None = None
) -> str:
    """`values` in order of time as `width` characters, the latest at the right edge.

    More values than characters are averaged, as many to a character as evenly possible; fewer leave blanks at the left.
    A missing value (None, NaN) is a gap, and so is a character all of whose values are missing. What lies beyond the
    scale has the sign of its end. With `zero`, a bar stands on the line above it and hangs from the top below it, and
    what is within half a step of it lies level.

    Raises ValueError for a scale that spans nothing or a width below 1.
    """
    low, high = scale
    if not low < high:
        raise ValueError(f"A scale runs from a lower to a higher value, not from {low} to {high}.")
    if width < 1:
        raise ValueError(f"A sparkline is at least one character wide, not {width}.")
    cells = _averaged(values, width)
    drawn = "".join(_sign(cell, scale, glyphs, zero) for cell in cells)
    return drawn.rjust(width)


def _averaged(values: Sequence[float | None], width: int) -> list[float | None]:
    count = min(len(values), width)
    cells: list[float | None] = []
    for cell in range(count):
        there = _there(values[cell * len(values) // count : (cell + 1) * len(values) // count])
        cells.append(sum(there) / len(there) if there else None)
    return cells


def _sign(value: float | None, scale: Scale, glyphs: Glyphs, zero: float | None) -> str:
    if value is None:
        return glyphs.gap
    low, high = scale
    if zero is None:
        return glyphs.steps[_step(value - low, high - low, len(glyphs.steps))]
    if value >= zero:
        reach, signs = high - zero, glyphs.level + glyphs.steps
    else:
        reach, signs = zero - low, glyphs.level + glyphs.hanging
    if reach <= 0:
        return glyphs.level
    # The level takes half a step on either side; the last sign is reached at the end of the scale.
    return signs[min(len(signs) - 1, math.floor(abs(value - zero) / reach * (len(signs) - 1) + 0.5))]


def _step(height: float, span: float, steps: int) -> int:
    return max(0, min(steps - 1, math.floor(height / span * steps)))


def _there(values: Sequence[float | None]) -> list[float]:
    return [value for value in values if value is not None and math.isfinite(value)]


class SparklineRow(Static):
    """Label, sparkline and last value in one line."""

    DEFAULT_CSS = "SparklineRow { height: 1; }"

    def __init__(
        self, label: str, glyphs: Glyphs, *, label_width: int = 24, width: int = 40, id: str | None = None
    ) -> None:
        """Arguments: label_width, width: of the label and of the sparkline [characters]."""
        super().__init__(markup=False, id=id)
        self.label = label
        self.glyphs = glyphs
        self.label_width = label_width
        self.width = width

    def show(self, values: Sequence[float | None], scale: Scale, last: str, zero: float | None = None) -> None:
        """Draw `values` on `scale`, and `last`, the last value as text with its unit or why there is none."""
        label = self.label[: self.label_width].ljust(self.label_width)
        line = sparkline(values, self.width, scale, self.glyphs, zero)
        # The place stays: only what changed is sent.
        self.update(f"{label} {line} {last}", layout=False)
