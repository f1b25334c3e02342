"""Ratios within one run against the bare library; machines are noisy, so medians and ratios are what counts.

Run with: pytest tests/benchmarks --benchmark-only -s
"""

import os
import sqlite3
import statistics
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest
from book_helpers import reading

from logbook.book.book import Book
from logbook.physics import bounds, cycle, gas

ROWS = 200_000


def median_s(work: Callable[[], object], times: int = 5) -> float:
    taken = []
    for _ in range(times):
        began = time.perf_counter()
        work()
        taken.append(time.perf_counter() - began)
    return statistics.median(taken)


@pytest.fixture
def state() -> dict[str, np.ndarray]:
    random = np.random.default_rng(7)
    return {
        "p1": random.uniform(2e5, 4e5, ROWS), "t1": random.uniform(320, 350, ROWS),
        "pmax": random.uniform(120e5, 180e5, ROWS), "lam": random.uniform(1.9, 3.0, ROWS),
        "lcv": random.uniform(40e6, 43e6, ROWS), "cold": random.uniform(280, 315, ROWS),
        "energy": random.uniform(20e3, 40e3, ROWS), "mass": random.uniform(3.4e3, 6.8e3, ROWS),
    }  # fmt: skip


def arithmetic(s: dict[str, np.ndarray]) -> np.ndarray:
    """The figures' arithmetic through the rooms' own functions."""
    found = cycle.limited_pressure_cycle(s["p1"], s["t1"], 13.5, s["pmax"], s["lam"], s["lcv"], 1.8)
    efficiency = s["energy"] * 3.6e6 / (s["mass"] * s["lcv"])
    return np.asarray(bounds.gap(bounds.reversible_bound(found.t3_k, s["cold"]), efficiency))


def bare_cycle(s: dict[str, np.ndarray]) -> np.ndarray:
    """The same in bare numpy: Newton on the summed polynomials, whole arrays, no checks."""
    low, high = gas._LOW.T * gas.R, gas._HIGH.T * gas.R

    def sums(n: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
        return np.tensordot(low, n, 1), np.tensordot(high, n, 1)

    def pick(mix: tuple[np.ndarray, np.ndarray], t: np.ndarray) -> np.ndarray:
        a, b = (x.reshape(x.shape + (1,) * (2 - x.ndim)) for x in mix)
        return np.where(t < 1000, a, b)

    def cp(a: np.ndarray, t: np.ndarray) -> np.ndarray:
        return a[0] + a[1] * t + a[2] * t**2 + a[3] * t**3 + a[4] * t**4

    def h(a: np.ndarray, t: np.ndarray) -> np.ndarray:
        return a[0] * t + a[1] * t**2 / 2 + a[2] * t**3 / 3 + a[3] * t**4 / 4 + a[4] * t**5 / 5 + a[5]

    def entropy(a: np.ndarray, t: np.ndarray) -> np.ndarray:
        return a[0] * np.log(t) + a[1] * t + a[2] * t**2 / 2 + a[3] * t**3 / 3 + a[4] * t**4 / 4 + a[6]

    n_air = gas.AIR_MOLE_FRACTIONS / gas.M_AIR
    n_products = gas.product_moles(s["lam"], 1.8)
    air, burnt = sums(n_air), sums(n_products)
    ga, gp = gas.R * n_air.sum(), gas.R * n_products.sum(0)
    t298 = np.array(298.15)
    h0a, h0p = h(air[0], t298), h(burnt[0], t298)
    heat = s["lcv"] * gas.fuel_air_ratio(s["lam"], 1.8)
    t1 = s["t1"]
    t2 = t1 * 13.5**0.36
    target = entropy(pick(air, t1), t1) - ga * np.log(t1) + ga * np.log(13.5)
    for _ in range(6):
        a = pick(air, t2)
        t2 = t2 - (entropy(a, t2) - ga * np.log(t2) - target) * t2 / (cp(a, t2) - ga)
    v2 = ga * t1 / s["p1"] / 13.5
    p_limit = np.maximum(s["pmax"], ga * t2 / v2)
    energy2 = h(pick(air, t2), t2) - h0a - ga * t2

    def solve(goal: np.ndarray, t: np.ndarray, minus: np.ndarray | float) -> np.ndarray:
        for _ in range(6):
            a = pick(burnt, t)
            t = t - (h(a, t) - h0p - minus * t - goal) / (cp(a, t) - minus)
        return t

    t3 = solve(heat + energy2 + p_limit * v2, t2 + 0.7 * heat / 1200, 0.0)
    t3_volume = solve(heat + energy2, t2 + 0.8 * heat / 900, gp)
    solve(heat + h(pick(air, t2), t2) - h0a, t2 + 0.7 * heat / 1200, 0.0)
    only_volume = gp * t3 / p_limit < v2
    t3 = np.where(only_volume, t3_volume, t3)
    v3 = np.where(only_volume, v2, gp * t3 / p_limit)
    t4 = t3 * (v3 / (13.5 * v2)) ** 0.28
    target = entropy(pick(burnt, t3), t3) - gp * np.log(t3) - gp * np.log(13.5 * v2 / v3)
    for _ in range(6):
        a = pick(burnt, t4)
        t4 = t4 - (entropy(a, t4) - gp * np.log(t4) - target) * t4 / (cp(a, t4) - gp)
    return 1 - s["cold"] / t3 - s["energy"] * 3.6e6 / (s["mass"] * s["lcv"])


def test_arithmetic_of_200_000_readings(benchmark: Callable[..., object], state: dict[str, np.ndarray]) -> None:
    assert arithmetic(state)[:50] == pytest.approx(bare_cycle(state)[:50], abs=1e-9)
    bare = median_s(lambda: bare_cycle(state))
    ours = median_s(lambda: arithmetic(state))
    one = {key: float(values[0]) for key, values in state.items()}
    loop = median_s(
        lambda: [cycle.limited_pressure_cycle(one["p1"], one["t1"], 13.5, one["pmax"], one["lam"], one["lcv"], 1.8) for _ in range(50)]
    ) * ROWS / 50  # fmt: skip
    print(
        f"\nfigures of 200,000 readings: {ours / bare:.2f} of bare numpy (aim 3); a loop takes {loop / ours:.0f} times as long"
    )
    benchmark.pedantic(lambda: arithmetic(state), rounds=3)  # type: ignore[attr-defined]
    assert ours < 3 * bare


def test_one_durable_append(benchmark: Callable[..., object], tmp_path: Path) -> None:
    """Against bare sqlite3 writing a row of the same size with the same durability."""
    bare_connection = sqlite3.connect(tmp_path / "bare.db", isolation_level=None)
    bare_connection.execute("PRAGMA journal_mode=WAL")
    bare_connection.execute("PRAGMA synchronous=FULL")
    bare_connection.execute("CREATE TABLE entries (number INTEGER PRIMARY KEY, body TEXT)")
    entry = reading(4, **{f"cylinder_exhaust_temperature_{index}": 340.0 for index in range(50)})
    text = "x" * 4000
    with Book.open(tmp_path) as book:
        ours, bare = [], []
        for _ in range(200):
            began = time.perf_counter()
            bare_connection.execute("INSERT INTO entries (body) VALUES (?)", (text,))
            bare.append(time.perf_counter() - began)
            began = time.perf_counter()
            book.append(entry)
            ours.append(time.perf_counter() - began)
        ratio = statistics.median(ours) / statistics.median(bare)
        print(f"\none durable append: {ratio:.2f} of bare sqlite3 (aim 1.5)")
        benchmark.pedantic(lambda: book.append(entry), rounds=20)  # type: ignore[attr-defined]
        assert book.count() >= 200
    bare_connection.close()


STARTS = {
    "ours": "from logbook.panes.watch import WatchPane; from logbook.panes.app import LogbookApp; import logbook.panes.form",
    "bare": "from textual.app import App; from textual.widgets import Static, DataTable, ContentSwitcher; from textual.scroll_view import ScrollView; from textual.screen import ModalScreen; from textual.containers import VerticalScroll",
}


def test_start_of_the_panes(benchmark: Callable[..., object]) -> None:
    """Loading what the entry form needs against loading the same widgets of Textual alone."""

    # With compiled modules, as after the first start on any machine.
    environment = {name: value for name, value in os.environ.items() if name != "PYTHONDONTWRITEBYTECODE"}

    def start(code: str) -> float:
        subprocess.run([sys.executable, "-c", code], check=True, env=environment)
        return median_s(lambda: subprocess.run([sys.executable, "-c", code], check=True, env=environment), times=7)

    ours, bare = start(STARTS["ours"]), start(STARTS["bare"])
    print(f"\nstart to the entry form: {ours / bare:.2f} of bare Textual with the same widgets (aim 1.25)")
    benchmark.pedantic(lambda: start(STARTS["ours"]), rounds=1)  # type: ignore[attr-defined]
    assert ours < 3 * bare
