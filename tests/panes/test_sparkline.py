"""The sparkline: heights, gaps, one scale for several rows, and a line that stands for zero."""

import math

import pytest
from textual.app import App, ComposeResult

from logbook.panes.sparkline import SparklineRow, shared_scale, sparkline
from logbook.panes.terminal.glyphs import ASCII, BOX, Glyphs

SETS = pytest.mark.parametrize("glyphs", [BOX, ASCII], ids=lambda glyphs: glyphs.name)


@SETS
def test_each_step_has_its_height(glyphs: Glyphs) -> None:
    assert sparkline([0, 1, 2, 3, 4, 5, 6, 7], 8, (0, 8), glyphs) == glyphs.steps


@SETS
def test_missing_values_are_gaps(glyphs: Glyphs) -> None:
    line = sparkline([0, None, 8, math.nan, 0], 5, (0, 8), glyphs)
    low, high, gap = glyphs.steps[0], glyphs.steps[-1], glyphs.gap
    assert line == f"{low}{gap}{high}{gap}{low}"


def test_few_values_stand_at_the_right_edge() -> None:
    assert sparkline([0, 8], 6, (0, 8), BOX) == "    ▁█"
    assert sparkline([], 3, (0, 8), BOX) == "   "


def test_many_values_are_averaged_evenly() -> None:
    # Three to a character, missing ones left out; a character without any is a gap.
    values = [0, 0, 0, 6, None, 2, None, None, None, 8, 8, 8]
    assert sparkline(values, 4, (0, 8), BOX) == "▁▅·█"
    # Seven into three: two, two and three.
    assert sparkline([0, 0, 8, 8, 0, 0, 0], 3, (0, 8), BOX) == "▁█▁"


def test_beyond_the_scale_the_ends_are_drawn() -> None:
    assert sparkline([-100, 4, 100], 3, (0, 8), BOX) == "▁▅█"


def test_rows_on_one_scale_can_be_compared() -> None:
    quiet, loud = [0.1, 0.2, 0.1], [0.0, 8.0, 0.0]
    scale = shared_scale([quiet, loud], least_span=1.0)
    assert scale == (0.0, 8.0)
    assert sparkline(quiet, 3, scale, BOX) == "▁▁▁"
    assert sparkline(loud, 3, scale, BOX) == "▁█▁"


@pytest.mark.parametrize(
    ("rows", "zero", "expected"),
    [
        ([[5.0, 5.2]], None, (4.6, 5.6)),
        ([[None, math.nan]], None, (-0.5, 0.5)),
        ([], None, (-0.5, 0.5)),
        ([[5.0, 9.0]], None, (5.0, 9.0)),
        ([[0.1, -0.2]], 0.0, (-0.5, 0.5)),
        ([[3.0], [-1.0]], 0.0, (-3.0, 3.0)),
        ([[410.0]], 400.0, (390.0, 410.0)),
    ],
)
def test_a_scale_spans_at_least_what_it_must(
    rows: list[list[float | None]], zero: float | None, expected: tuple[float, float]
) -> None:
    assert shared_scale(rows, 1.0, zero) == pytest.approx(expected)


@SETS
def test_above_below_and_on_zero_are_told_apart(glyphs: Glyphs) -> None:
    line = sparkline([8, 1, 0.4, 0, -0.4, -4, -8], 7, (-8, 8), glyphs, zero=0)
    steps, level, hanging = glyphs.steps, glyphs.level, glyphs.hanging
    assert line == f"{steps[-1]}{steps[0]}{level}{level}{level}{hanging[0]}{hanging[-1]}"


def test_noise_about_zero_lies_level() -> None:
    noise = [0.01, -0.02, 0.02, 0.0, -0.01]
    assert sparkline(noise, 5, shared_scale([noise], 1.0, zero=0.0), ASCII, zero=0.0) == "-----"


def test_beyond_the_scale_about_zero_the_ends_are_drawn() -> None:
    assert sparkline([100, -100], 2, (-1, 1), BOX, zero=0) == "█▀"
    assert sparkline([-1], 1, (0, 1), BOX, zero=0) == "─"


@pytest.mark.parametrize(
    ("width", "scale", "words"), [(3, (1.0, 1.0), "lower to a higher"), (0, (0.0, 1.0), "one character")]
)
def test_what_cannot_be_drawn_is_said(width: int, scale: tuple[float, float], words: str) -> None:
    with pytest.raises(ValueError, match=words):
        sparkline([1.0], width, scale, BOX)


class Rows(App[None]):
    def compose(self) -> ComposeResult:
        yield SparklineRow("exhaust before turbine", ASCII, label_width=12, width=5)


async def test_the_row_shows_label_line_and_last_value() -> None:
    app = Rows()
    async with app.run_test(size=(60, 5)) as pilot:
        row = app.query_one(SparklineRow)
        row.show([0, 4, None, 8], (0, 8), "[412] degC")
        await pilot.pause()
        shown = "".join(segment.text for segment in row.render_line(0))
        assert shown.rstrip() == "exhaust befo  _= # [412] degC"
        assert row.size.height == 1
