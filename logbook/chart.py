"""The chart of a figure over running hours or days, as lines of text. The one module that knows plotext.

plotext has two majors that share nothing but the name. 5.3.2, the last in pure Python, is taken rather than the rewrite
6.1.0 with its compiled kernel: it is one wheel of 64 kB for every machine, where 6.1.0 has none for Windows on ARM or
for Linux with musl, which numpy, scipy and pandas do have; it is imported in 100 ms instead of 140; a fault in it is an
exception, and not the end of a process in which somebody is typing; and a closed line draws the same picture for good.
The price is that nobody mends it: what is used here is points, a line and two axes, and the tests hold the picture.
"""

from __future__ import annotations

import math
import textwrap
import threading
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

LETTERS = "ABCDEFGHIJKLMNOPQRSTUVWXYZ"
FEWEST_ROWS = 4
"""Rows of the drawing itself that a chart has at least; the legend of the marks is cut before they are."""

_POINT = {"box": "•", "ascii": "*"}
_TO_ASCII = str.maketrans("─│┌┐└┘├┤┬┴┼", "-|+++++++++")

# plotext draws on one figure for the whole process.
_one_at_a_time = threading.Lock()


@dataclass(frozen=True, slots=True)
class Mark:
    """An event on the axis: it gets a letter, and its text a place in the legend."""

    x: float
    text: str


def chart(
    x: Sequence[float],
    y: Sequence[float | None],
    *,
    least_span: float,
    y_label: str,
    x_label: str,
    marks: Sequence[Mark] = (),
    glyphs: str = "box",
    width: int = 78,
    height: int = 12,
) -> list[str]:
    """Points over time with a zero line, events as letters on the axis, and their legend.

    Each row of the drawing is a round step of `y`, and zero always lies on a row. Points that fall on one cell are one
    point; where there is nothing to show, the column stays empty.

    Arguments: x: running hours or days, in any order. y: the figure, None or NaN where there is none. least_span: what
    the y axis spans however quiet the figure is, in the unit of y, above 0, so that noise does not look like a cliff.
    y_label, x_label: names with units. marks: events; of more than 26 the last. glyphs: `box` or `ascii`. width,
    height: of the whole text [characters, lines], at least 40 and 8.
    Returns `height` lines without blanks at their ends. Raises ValueError for arguments outside these.
    """
    if len(x) != len(y):
        raise ValueError(f"A chart needs one y for each x, not {len(y)} for {len(x)}.")
    if not least_span > 0 or not math.isfinite(least_span):
        raise ValueError(f"The least span of a chart is a number above 0, not {least_span}.")
    if width < 40 or height < 8:
        raise ValueError(f"A chart needs 40 columns and 8 lines at least, not {width} and {height}.")
    if glyphs not in _POINT:
        raise ValueError(f"A chart is drawn with box or ascii signs, not '{glyphs}'.")
    points = [(at, value) for at, value in zip(x, y, strict=True) if value is not None and math.isfinite(value)]
    lettered = list(zip(LETTERS, sorted(marks, key=lambda mark: mark.x)[-len(LETTERS) :], strict=False))
    legend = _legend(lettered, len(marks) - len(lettered), width, height - 3 - FEWEST_ROWS)
    first, last = _extent([*x, *(mark.x for _, mark in lettered)])
    rows = height - 3 - len(legend)
    step, lowest = _rows_of(points, least_span, rows)
    drawn = _draw(points, first, last, step, lowest, rows, width, _POINT[glyphs])
    drawn[rows] = _with_letters(drawn[rows], lettered, first, last, width)
    if glyphs == "ascii":
        drawn = [line.translate(_TO_ASCII) for line in drawn]
    head = f"{y_label}{x_label:>{max(len(x_label) + 2, width - len(y_label))}}"
    return [line.rstrip() for line in (head, *drawn, *legend)]


def _rows_of(points: Sequence[tuple[float, float]], least_span: float, rows: int) -> tuple[float, int]:
    """The round step of a row and the lowest row, counted in steps from zero, that hold zero and every point."""
    values = [0.0, *(y for _, y in points)]
    lowest, highest = min(values), max(values)
    step = _round_up(max(highest - lowest, least_span) / (rows - 1))
    while True:
        below, above = math.ceil(round(-lowest / step, 9)), math.ceil(round(highest / step, 9))
        if below + above <= rows - 1:
            # What is left over goes to both sides, half each.
            return step, -(below + (rows - 1 - below - above) // 2)
        step = _round_up(step * 1.01)


def _round_up(step: float) -> float:
    """The next of 1, 2, 2.5 and 5 times a power of ten."""
    power = 10.0 ** math.floor(math.log10(step))
    return next(factor * power for factor in (1, 2, 2.5, 5, 10) if factor * power >= step * (1 - 1e-9))


def _extent(values: Sequence[float]) -> tuple[float, float]:
    first, last = (min(values), max(values)) if values else (0.0, 1.0)
    return (first, last) if first < last else (first - 0.5, last + 0.5)


def _draw(
    points: Sequence[tuple[float, float]],
    first: float,
    last: float,
    step: float,
    lowest: int,
    rows: int,
    width: int,
    sign: str,
) -> list[str]:
    """The drawing: `rows` rows, the axis under them, its numbers under that."""
    import plotext

    figure: Any = plotext  # it has no type hints
    every = 2 if rows > 6 else 1
    levels = [number for number in range(lowest, lowest + rows) if number % every == 0]
    across = _round_up((last - first) / 6)
    stops = [number * across for number in range(math.ceil(first / across), math.floor(last / across) + 1)]
    with _one_at_a_time:
        figure.clear_figure()
        figure.limit_size(False, False)
        figure.plot_size(width, rows + 2)
        figure.theme("clear")
        figure.xaxes(True, False)
        figure.yaxes(True, False)
        figure.xlim(first, last)
        figure.ylim(lowest * step, (lowest + rows - 1) * step)
        figure.xticks(stops, [_number(stop, across) for stop in stops])
        figure.yticks([level * step for level in levels], [_number(level * step, step) for level in levels])
        figure.horizontal_line(0)
        figure.scatter([x for x, _ in points], [y for _, y in points], marker=sign)
        text: str = figure.uncolorize(figure.build())
    return text.splitlines()


def _number(value: float, step: float) -> str:
    """As many decimals as the step needs to be told from the next."""
    decimals = max(0, -math.floor(math.log10(step) + 1e-9))
    if round(step * 10**decimals, 6) % 1:
        decimals += 1
    return f"{value:.{decimals}f}"


def _with_letters(axis: str, lettered: Sequence[tuple[str, Mark]], first: float, last: float, width: int) -> str:
    """The line of the axis with the letters of the marks on it; of two on one place the later moves on."""
    cells = list(axis.ljust(width))
    left = axis.index("└") + 1
    places: dict[int, str] = {}
    for letter, mark in lettered:
        place = left + math.floor(0.5 + (width - left - 1) * (mark.x - first) / (last - first))
        free = [*range(place, width), *range(place - 1, left - 1, -1)]
        places[next(cell for cell in free if cell not in places)] = letter
    for place, letter in places.items():
        cells[place] = letter
    return "".join(cells)


def _legend(lettered: Sequence[tuple[str, Mark]], left_out: int, width: int, lines: int) -> list[str]:
    """Letter and text of each mark, in at most `lines` lines."""
    items = [f"{letter} {mark.text}" for letter, mark in lettered]
    if left_out:
        items.insert(0, f"(earlier ones not drawn: {left_out})")
    # A letter is not to be parted from its text: the wrapping breaks at no such blank.
    together = [item.replace(" ", "\N{NO-BREAK SPACE}") for item in items]
    wrapped = textwrap.wrap("   ".join(together), width, max_lines=lines, placeholder=" ...")
    return [line.replace("\N{NO-BREAK SPACE}", " ") for line in wrapped]
