"""The reference curve over load."""

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.physics.curve import curve

LOAD = [0.25, 0.50, 0.75, 0.90, 1.00]
CONSUMPTION = [182.0, 173.5, 169.0, 170.2, 172.1]
SCAVENGE = [0.28, 0.90, 1.78, 2.45, 2.92]


@pytest.mark.parametrize(
    ("loads", "values", "at", "expected"),
    [
        (LOAD, CONSUMPTION, [30, 60, 68, 82, 95], [179.96031, 171.06862, 169.52866, 169.33845, 171.00217]),
        # The lowest point with blowers on is of another curve.
        (LOAD[1:], CONSUMPTION[1:], [60, 68, 82, 95], [170.68300, 169.37750, 169.33845, 171.00217]),
        (LOAD, SCAVENGE, [40, 60, 68, 82, 95], [0.62404, 1.21908, 1.50842, 2.08079, 2.68244]),
    ],
)
def test_between_the_points(loads: list[float], values: list[float], at: list[float], expected: list[float]) -> None:
    """Calculated independently with scipy's PchipInterpolator."""
    assert curve(loads, values)(np.array(at) / 100) == pytest.approx(expected, abs=1e-5)


def _fritsch_carlson(x: list[float], y: list[float], at: float) -> float:
    """Written out from the definition: harmonic inner slopes, three-point ends, Hermite between."""
    h, d = np.diff(x), np.diff(y) / np.diff(x)

    def end(h0: float, h1: float, d0: float, d1: float) -> float:
        slope = ((2 * h0 + h1) * d0 - h0 * d1) / (h0 + h1)
        if slope * d0 <= 0:
            return 0.0
        return 3 * d0 if d0 * d1 < 0 and abs(slope) > abs(3 * d0) else slope

    m = [end(h[0], h[1], d[0], d[1])]
    for k in range(1, len(h)):
        w1, w2 = 2 * h[k] + h[k - 1], h[k] + 2 * h[k - 1]
        m.append(0.0 if d[k - 1] * d[k] <= 0 else (w1 + w2) / (w1 / d[k - 1] + w2 / d[k]))
    m.append(end(h[-1], h[-2], d[-1], d[-2]))
    i = min(int(np.searchsorted(x, at, "right")) - 1, len(h) - 1)
    t = (at - x[i]) / h[i]
    return float(
        (2 * t**3 - 3 * t**2 + 1) * y[i] + (t**3 - 2 * t**2 + t) * h[i] * m[i]
        + (3 * t**2 - 2 * t**3) * y[i + 1] + (t**3 - t**2) * h[i] * m[i + 1]
    )  # fmt: skip


@settings(max_examples=40)
@given(st.floats(0.25, 1.0), st.lists(st.floats(150, 250), min_size=5, max_size=5))
def test_follows_fritsch_and_carlson(at: float, values: list[float]) -> None:
    assert curve(LOAD, values)(at) == pytest.approx(_fritsch_carlson(LOAD, values, at), rel=1e-9)


@settings(max_examples=40)
@given(st.lists(st.floats(150, 250), min_size=3, max_size=8))
def test_passes_its_points_without_overshoot(values: list[float]) -> None:
    loads = np.linspace(0.25, 1.0, len(values))
    found = curve(loads, values)
    assert found(loads) == pytest.approx(values)
    for left, right, a, b in zip(loads, loads[1:], values, values[1:], strict=False):
        between = found(np.linspace(left, right, 21)[1:-1])
        assert between.min() >= min(a, b) - 1e-9
        assert between.max() <= max(a, b) + 1e-9


@pytest.mark.parametrize("outside", [0.2499, 1.0001])
@pytest.mark.parametrize("points", [5, 2])
def test_has_no_value_outside_its_range(outside: float, points: int) -> None:
    found = curve(np.linspace(0.25, 1.0, points), np.linspace(180, 170, points))
    assert np.isnan(found(outside))
    assert not np.isnan(found(0.25))
    assert not np.isnan(found(1.0))


def test_curve_without_the_point_with_blowers_on_says_nothing_below() -> None:
    assert np.isnan(curve(LOAD[1:], CONSUMPTION[1:])(0.30))


@pytest.mark.parametrize("points", [1, 2, 5])
def test_scalars_give_floats_arrays_arrays_and_an_unknown_load_no_value(points: int) -> None:
    found = curve(np.linspace(0.75, 1.0, points), np.linspace(180, 170, points))
    assert isinstance(found(0.75), float)
    assert found(np.full((2, 3), 0.75)) == pytest.approx(np.full((2, 3), 180.0))
    assert np.isnan(found([0.75, np.nan, 0.2])).tolist() == [False, True, True]


def test_two_points_make_a_straight_line() -> None:
    assert curve([0.5, 1.0], [174.0, 170.0])(0.625) == pytest.approx(173.0)


@pytest.mark.parametrize(("load", "holds"), [(0.73, True), (0.77, True), (0.729, False), (0.771, False)])
def test_one_point_holds_within_two_percent_of_rated_power(load: float, holds: bool) -> None:
    assert np.isnan(curve([0.75], [169.0])(load)) != holds


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: curve([0.5, 0.5], [170, 171]), "must rise"),
        (lambda: curve([0.75, 0.5], [170, 171]), "must rise"),
        (lambda: curve([0.5, 0.75], [170]), "as many values as loads"),
        (lambda: curve([], []), "at least one"),
        (lambda: curve([0.25, 0.5, 0.75], [182, np.nan, 169]), "leave out the points that were not read"),
        (lambda: curve([0.25, np.nan, 0.75], [182, 173, 169]), "leave out the points that were not read"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()
