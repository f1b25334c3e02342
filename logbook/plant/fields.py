"""Taking values out of a TOML table: every fault is noted with its line, none stops the reading."""

from __future__ import annotations

import difflib
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any

from logbook.plant.toml_lines import Path, line_of


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing that is wrong in plant.toml."""

    line: int
    key: str
    found: str
    expected: str
    suggestion: str = ""

    def sentence(self) -> str:
        said = f"line {self.line}: {self.key}: found {self.found}; expected {self.expected}."
        return f"{said} {self.suggestion}" if self.suggestion else said


@dataclass
class Faults:
    """The faults of one file, in the order they were met."""

    lines: Mapping[Path, int]
    found: list[Fault] = field(default_factory=list)

    def note(self, path: Path, found: str, expected: str, suggestion: str = "") -> None:
        self.found.append(Fault(line_of(dict(self.lines), path), dotted(path), found, expected, suggestion))


def dotted(path: Path) -> str:
    """`engine[1].trial[2].sfoc_g_kwh`: arrays counted from 1, as a person counts."""
    text = ""
    for part in path:
        text += f"[{part + 1}]" if isinstance(part, int) else (f".{part}" if text else part)
    return text or "plant.toml"


def shown(value: Any) -> str:
    """A value as it may stand in a sentence."""
    text = repr(value)
    return text if len(text) <= 60 else f"{text[:57]}..."


class Table:
    """One table of the file. What is not asked for by `done()` is a key that nobody knows."""

    def __init__(self, content: Mapping[str, Any], path: Path, faults: Faults) -> None:
        self.content = content
        self.path = path
        self.faults = faults
        self.asked: set[str] = set()

    def _get(self, key: str, required: str) -> Any:
        self.asked.add(key)
        if key not in self.content:
            if required:
                self.faults.note((*self.path, key), "nothing", required)
            return None
        return self.content[key]

    def note(self, key: str, expected: str, suggestion: str = "") -> None:
        """The value of `key` is not what is expected."""
        self.faults.note((*self.path, key), shown(self.content.get(key)), expected, suggestion)

    def text(self, key: str, default: str = "", *, required: str = "") -> str:
        value = self._get(key, required)
        if value is None:
            return default
        if not isinstance(value, str) or not value.isprintable():
            self.note(key, required or "a text on one line")
            return default
        return value

    def word(self, key: str, allowed: Sequence[str], default: str = "", *, required: bool = False) -> str:
        """One of the allowed words."""
        expected = f"one of {', '.join(map(repr, allowed))}"
        value = self._get(key, expected if required else "")
        if value is None:
            return default
        if value not in allowed:
            near = difflib.get_close_matches(str(value), allowed, n=1)
            self.note(key, expected, f"Did you mean {near[0]!r}?" if near else "")
            return default
        return str(value)

    def flag(self, key: str, default: bool = False) -> bool:
        value = self._get(key, "")
        if value is None:
            return default
        if not isinstance(value, bool):
            self.note(key, "true or false")
            return default
        return value

    def number(
        self,
        key: str,
        default: float | None = None,
        *,
        least: float,
        greatest: float,
        unit: str = "",
        required: bool = False,
    ) -> float | None:
        """A number within what is possible at all (both ends included)."""
        expected = f"a number from {least:g} to {greatest:g}{f' {unit}' if unit else ''}"
        value = self._get(key, expected if required else "")
        if value is None:
            return default
        if isinstance(value, bool) or not isinstance(value, int | float) or not least <= value <= greatest:
            self.note(key, expected)
            return default
        return float(value)

    def must(self, key: str, *, least: float, greatest: float, unit: str = "") -> float:
        """A number that has to be there; NaN (and a fault) where it is not."""
        value = self.number(key, least=least, greatest=greatest, unit=unit, required=True)
        return float("nan") if value is None else value

    def whole(
        self, key: str, default: int | None = None, *, least: int, greatest: int, required: bool = False
    ) -> int | None:
        expected = f"a whole number from {least} to {greatest}"
        value = self._get(key, expected if required else "")
        if value is None:
            return default
        if isinstance(value, bool) or not isinstance(value, int) or not least <= value <= greatest:
            self.note(key, expected)
            return default
        return value

    def numbers(self, key: str, *, least: float, greatest: float, required: bool = False) -> tuple[float, ...]:
        """A list of numbers within what is possible; empty where it is not there."""
        expected = f"a list of numbers from {least:g} to {greatest:g}, e.g. [50, 75, 100]"
        value = self._get(key, expected if required else "")
        if value is None:
            return ()
        good = isinstance(value, list) and all(
            isinstance(item, int | float) and not isinstance(item, bool) and least <= item <= greatest for item in value
        )
        if not good:
            self.note(key, expected)
            return ()
        return tuple(map(float, value))

    def texts(self, key: str, *, required: str = "") -> tuple[str, ...]:
        """A list of texts; empty where it is not there."""
        value = self._get(key, required)
        if value is None:
            return ()
        if not isinstance(value, list) or not all(isinstance(item, str) and item.isprintable() for item in value):
            self.note(key, required or "a list of texts")
            return ()
        return tuple(value)

    def has(self, key: str) -> bool:
        return key in self.content

    def raw(self, key: str) -> Any:
        """The value as it is; the caller notes what is wrong with it."""
        return self._get(key, "")

    def table(self, key: str) -> Table | None:
        """A table inside this one; None where it is not there."""
        value = self._get(key, "")
        if value is None:
            return None
        if not isinstance(value, Mapping):
            self.note(key, f"a table: write [{dotted((*self.path, key))}] on a line of its own")
            return None
        return Table(value, (*self.path, key), self.faults)

    def tables(self, key: str) -> list[Table]:
        """An array of tables inside this one."""
        value = self._get(key, "")
        if value is None:
            return []
        if not isinstance(value, list) or not all(isinstance(item, Mapping) for item in value):
            self.note(key, f"tables: write [[{dotted((*self.path, key))}]] above each")
            return []
        return [Table(item, (*self.path, key, index), self.faults) for index, item in enumerate(value)]

    def done(self, also: Iterable[str] = ()) -> None:
        """Everything has been asked for: what is left is misspelt or belongs elsewhere."""
        known = sorted(self.asked | set(also))
        for key in self.content:
            if key not in known:
                near = difflib.get_close_matches(key, known, n=1, cutoff=0.6)
                self.faults.note(
                    (*self.path, key),
                    f"the key '{key}'",
                    f"one of {', '.join(known)}" if len(known) <= 12 else "a key of this table (see `logbook new`)",
                    f"Did you mean '{near[0]}'?" if near else "",
                )
