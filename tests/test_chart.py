"""The chart: where points, zero line, marks and gaps are in the picture."""

import math
import subprocess
import sys

import pytest

from logbook.chart import LETTERS, Mark, chart

LABELS = {"y_label": "excess [points]", "x_label": "running hours"}


def canvas(lines: list[str]) -> tuple[list[str], int, int]:
    """The rows of the drawing, their left edge, and the line of the axis."""
    axis = max(number for number, line in enumerate(lines) if line.lstrip().startswith(("└", "+")))
    edge = len(lines[axis]) - len(lines[axis].lstrip())
    return [line.ljust(78) for line in lines[1:axis]], edge + 1, axis


def points(lines: list[str], sign: str) -> set[tuple[int, int]]:
    """Column from the left edge and row from the top of every point."""
    rows, left, _ = canvas(lines)
    return {(x - left, y) for y, row in enumerate(rows) for x, cell in enumerate(row) if cell == sign and x >= left}


def zero_row(lines: list[str]) -> int:
    rows, left, _ = canvas(lines)
    return next(y for y, row in enumerate(rows) if float(row[: left - 1].strip() or "nan") == 0)


@pytest.mark.parametrize(("glyphs", "sign"), [("box", "•"), ("ascii", "*")])
def test_points_stand_where_they_belong(glyphs: str, sign: str) -> None:
    lines = chart([0, 500, 1000], [-0.4, 0.0, 0.8], least_span=1.0, glyphs=glyphs, height=12, **LABELS)
    rows, left, _ = canvas(lines)
    right = 78 - left - 1
    step_rows = zero_row(lines)
    # Nine rows for 1.2 points: 0.2 a row.
    assert len(rows) == 9
    assert points(lines, sign) == {(0, step_rows + 2), (math.floor(0.5 + right / 2), step_rows), (right, step_rows - 4)}


@pytest.mark.parametrize("glyphs", ["box", "ascii"])
def test_zero_line_goes_right_across(glyphs: str) -> None:
    lines = chart([0, 1000], [0.9, 0.7], least_span=1.0, glyphs=glyphs, **LABELS)
    rows, left, _ = canvas(lines)
    line = rows[zero_row(lines)]
    assert line[left:] == ("─" if glyphs == "box" else "-") * (78 - left)
    assert sum(row[left:] == line[left:] for row in rows) == 1


def test_zero_is_always_on_the_chart() -> None:
    lines = chart([0, 1000], [7.0, 8.0], least_span=1.0, **LABELS)
    assert zero_row(lines) > min(y for _, y in points(lines, "•"))


def test_missing_values_leave_their_columns_empty() -> None:
    hours = list(range(0, 1001, 10))
    figure = [None if 300 < hour < 450 else math.nan if 700 < hour < 800 else 0.5 for hour in hours]
    lines = chart(hours, figure, least_span=1.0, **LABELS)
    _, left, _ = canvas(lines)
    right = 78 - left - 1
    columns = {x for x, _ in points(lines, "•")}
    shown = [hour for hour in hours if not 300 < hour < 450 and not 700 < hour < 800]
    expected = {math.floor(0.5 + right * hour / 1000) for hour in shown}
    assert columns == expected
    assert not any(right * 0.31 < x < right * 0.44 for x in columns)


def test_noise_does_not_look_like_a_cliff() -> None:
    noise = [0.02, -0.02, 0.01, -0.01, 0.02]
    assert {y for _, y in points(chart(range(5), noise, least_span=1.0, **LABELS), "•")} == {
        zero_row(chart(range(5), noise, least_span=1.0, **LABELS))
    }
    assert len({y for _, y in points(chart(range(5), noise, least_span=0.04, **LABELS), "•")}) > 3


@pytest.mark.parametrize("glyphs", ["box", "ascii"])
def test_marks_are_letters_on_the_axis_under_their_place(glyphs: str) -> None:
    marks = [Mark(1000, "cooler cleaned"), Mark(250, "turbine washed"), Mark(0, "lot 7")]
    lines = chart([0, 250, 1000], [0.1, 0.2, 0.3], least_span=1.0, marks=marks, glyphs=glyphs, **LABELS)
    _, left, axis = canvas(lines)
    place = {letter: lines[axis].index(letter) - left for letter in "ABC"}
    columns = sorted(x for x, _ in points(lines, "•" if glyphs == "box" else "*"))
    assert [place["A"], place["B"], place["C"]] == columns
    assert lines[-1] == "A lot 7   B turbine washed   C cooler cleaned"


def test_marks_on_one_place_stand_side_by_side() -> None:
    marks = [Mark(500, "first"), Mark(500.1, "second"), Mark(1000, "last but one"), Mark(1000, "last")]
    lines = chart([0, 1000], [0.1, 0.2], least_span=1.0, marks=marks, **LABELS)
    axis = lines[canvas(lines)[2]]
    assert axis.index("B") == axis.index("A") + 1
    assert axis.endswith("DC")


def test_a_mark_beyond_the_readings_widens_the_axis() -> None:
    lines = chart([0, 500], [0.1, 0.2], least_span=1.0, marks=[Mark(1000, "overhaul")], **LABELS)
    _, left, axis = canvas(lines)
    assert lines[axis].index("A") == 77
    assert max(x for x, _ in points(lines, "•")) < (78 - left) * 0.6


def test_of_many_marks_the_last_are_drawn_and_the_others_counted() -> None:
    marks = [Mark(hour, f"turbocharger washed, {hour} h") for hour in range(30)]
    lines = chart([0, 30], [0.1, 0.2], least_span=1.0, marks=marks, height=14, **LABELS)
    assert "(earlier ones not drawn: 4)   A turbocharger washed, 4 h" in lines[canvas(lines)[2] + 2]
    assert lines[-1].endswith(" h ...")
    assert all(line.lstrip().startswith(tuple(LETTERS)) for line in lines[canvas(lines)[2] + 3 :])


@pytest.mark.parametrize("height", range(8, 15))
@pytest.mark.parametrize("count", [0, 1, 12])
def test_the_size_is_kept(height: int, count: int) -> None:
    marks = [Mark(hour * 80, "turbocharger washed") for hour in range(count)]
    lines = chart([0, 1000], [-0.1, 0.2], least_span=1.0, marks=marks, height=height, **LABELS)
    assert len(lines) == height
    assert max(map(len, lines)) <= 78
    assert len(canvas(lines)[0]) >= 4


@pytest.mark.parametrize("hours", [[], [700.0]])
def test_few_readings_still_give_a_chart(hours: list[float]) -> None:
    lines = chart(hours, [0.3] * len(hours), least_span=1.0, **LABELS)
    assert len(points(lines, "•")) == len(hours)
    assert 0 <= zero_row(lines) < 9


def test_ascii_is_ascii() -> None:
    text = "\n".join(chart([0, 1], [0.1, -3], least_span=1, glyphs="ascii", marks=[Mark(0, "wash")], **LABELS))
    assert text.isascii()
    assert "\x1b" not in "\n".join(chart([0, 1], [0.1, -3], least_span=1, **LABELS))


def test_labels_name_both_axes() -> None:
    assert chart([0, 1], [0, 1], least_span=1, **LABELS)[0] == "excess [points]" + "running hours".rjust(63)


@pytest.mark.parametrize(
    ("changed", "words"),
    [
        ({"y": [1.0]}, "one y for each x"),
        ({"least_span": 0.0}, "above 0"),
        ({"least_span": math.nan}, "above 0"),
        ({"height": 7}, "8 lines"),
        ({"width": 39}, "40 columns"),
        ({"glyphs": "braille"}, "'braille'"),
    ],
)
def test_what_cannot_be_drawn_is_said(changed: dict[str, object], words: str) -> None:
    arguments = {"x": [0.0, 1.0], "y": [0.0, 1.0], "least_span": 1.0} | LABELS | changed
    with pytest.raises(ValueError, match=words):
        chart(**arguments)


def test_the_picture_does_not_depend_on_the_terminal() -> None:
    code = "from logbook.chart import chart; print(chart([0, 1], [0, 1], least_span=1, y_label='a', x_label='b'))"
    pictures = {
        subprocess.run(
            [sys.executable, "-c", code],
            env={"COLUMNS": columns, "LINES": "5", "TERM": term, "PYTHONUTF8": "1"},
            capture_output=True,
            check=True,
        ).stdout
        for columns, term in (("20", "dumb"), ("200", "xterm"))
    }
    assert len(pictures) == 1
