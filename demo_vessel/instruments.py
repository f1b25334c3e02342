"""What an instrument makes of the truth: scatter, a constant error of its own, the step to which a person reads it."""

from __future__ import annotations

import math
from itertools import cycle
from random import Random

from numpy.random import RandomState


class Counter:
    """A totaliser that passes zero."""

    def __init__(self, start: float, digits: int, decimals: int = 0, error: float = 0.0) -> None:
        self._value = start
        self._modulus = 10.0 ** (digits - decimals)
        self._decimals = decimals
        self.error = error
        """relative, constant"""

    def add(self, quantity: float) -> None:
        self._value = (self._value + quantity * (1.0 + self.error)) % self._modulus

    def text(self) -> str:
        """What the drum shows: the last place is cut off, not rounded."""
        scale = 10**self._decimals
        return f"{math.floor(self._value * scale + 1e-6) / scale:.{self._decimals}f}"

    def exchange(self, opening: float, error: float) -> tuple[int, int]:
        """A new meter in its place: closing reading of the old one, opening reading of the new one."""
        closing = math.floor(self._value)
        self._value, self.error = opening, error
        return closing, math.floor(opening)


def rounded(value: float, step: float) -> str:
    """A reading to the step of a scale: 5, 1, 0.5, 0.1 ..."""
    form = ".0f" if step >= 1 else ".1f" if step >= 0.1 else ".2f"
    return format(round(value / step) * step + 0.0, form)


class Gauges:
    """All pointers and thermometers of the ship. Every one has a constant error of its own, kept for two years."""

    def __init__(self, seed: int) -> None:
        self._seed = seed
        # Drawn all at once: two years take a few hundred thousand of them. This generator's stream is frozen.
        self._normal = cycle(RandomState(seed % 2**32).standard_normal(400_000).tolist())
        self._errors: dict[str, float] = {}

    def constant_error(self, name: str, spread: float) -> float:
        """The error of one instrument [unit of the reading]; the same whenever it is asked."""
        if name not in self._errors:
            self._errors[name] = Random(f"{self._seed}/{name}").gauss(0.0, spread)
        return self._errors[name]

    def read(self, name: str, value: float, scatter: float, step: float, spread: float = 0.0) -> str:
        """One reading as it is typed. `scatter` and `spread` in the unit of the reading."""
        error = self.constant_error(name, spread) if spread else 0.0
        return rounded(value + error + scatter * next(self._normal), step)

    def row(self, key: str, values: list[float], scatter: float, step: float, spread: float) -> dict[str, str]:
        """A row of like instruments, numbered from 1: `key.1`, `key.2` ..."""
        return {
            f"{key}.{place}": self.read(f"{key}.{place}", value, scatter, step, spread)
            for place, value in enumerate(values, 1)
        }
