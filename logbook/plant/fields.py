"""Taking values out of a TOML table: every fault is noted with its line, none stops the reading."""

from __future__ import annotations

import difflib
import json
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from typing import Any, overload

from logbook.plant.toml_lines import Path, line_of, lines_of

FILE_NAME = "plant.toml"


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing that is wrong in plant.toml."""

    line: int
    """from 1"""
    key: str
    """`engine[1].trial[2].sfoc_g_kwh`: tables in double brackets are counted from 1"""
    found: str
    expected: str
    suggestion: str = ""
    """a whole sentence, or empty"""

    def sentence(self) -> str:
        said = f"line {self.line}: {self.key}: found {self.found}; expected {self.expected}."
        return f"{said} {self.suggestion}" if self.suggestion else said


def dotted(path: Path) -> str:
    """`engine[1].trial[2].sfoc_g_kwh`: arrays counted from 1, as a person counts."""
    text = ""
    for part in path:
        text += f"[{part + 1}]" if isinstance(part, int) else (f".{part}" if text else part)
    return printable(text) or FILE_NAME


def header(path: Path) -> str:
    """How the table of this path is written: `[plant]`, `[[engine]]`, `[engine.correction]`."""
    name = printable(".".join(part for part in path if isinstance(part, str)))
    return f"[[{name}]]" if path and isinstance(path[-1], int) else f"[{name}]"


def printable(text: str) -> str:
    """A text without signs that would not be seen, or would drive the terminal: they are written out."""
    return "".join(sign if sign.isprintable() else ascii(sign)[1:-1] for sign in text)


def shown(value: Any) -> str:
    """A value as it may stand in a sentence, written as TOML writes it."""
    try:
        text = printable(json.dumps(value, ensure_ascii=False, default=str))
    except ValueError:
        # Python does not print a whole number of thousands of digits.
        text = "a number of thousands of digits"
    return text if len(text) <= 60 else f"{text[:57]}..."


def words(allowed: Sequence[str]) -> str:
    return ", ".join(shown(word) for word in allowed)


def nearest(word: str, known: Sequence[str] | Mapping[str, Any]) -> str:
    """`Did you mean "bore_mm"?`, or empty where nothing is near."""
    near = difflib.get_close_matches(word, known, n=1)
    return f"Did you mean {shown(near[0])}?" if near else ""


@dataclass
class Faults:
    """The faults of one file, in the order they were met."""

    text: str
    found: list[Fault] = field(default_factory=list)
    read: list[Table] = field(default_factory=list)
    """tables of which everything has been asked for"""

    @cached_property
    def _lines(self) -> Mapping[Path, int]:
        # A file without faults is never searched for its lines.
        return lines_of(self.text)

    def note(self, path: Path, found: str, expected: str, suggestion: str = "") -> None:
        self.found.append(Fault(line_of(self._lines, path), dotted(path), found, expected, suggestion))

    def in_order(self) -> tuple[Fault, ...]:
        """All faults in the order of their lines; keys that nobody asked for are faults, too."""
        for table in self.read:
            for key in table.content:
                if key not in table.asked:
                    self._note_unknown(table, key)
        return tuple(sorted(self.found, key=lambda fault: fault.line))

    def _note_unknown(self, table: Table, key: str) -> None:
        known = sorted(table.asked)
        expected = f"a key of {header(table.path)}" if table.path else "a table of plant.toml"
        if len(known) <= 12:
            expected += f": {', '.join(known)}"
        suggestion = nearest(key, known)
        owner = self._owner_of(table, key)
        if owner:
            suggestion = f"{key} belongs to {owner}: write it under that line, before the next one in brackets."
        self.note((*table.path, key), f"the key {shown(key)}", expected, suggestion)

    def _owner_of(self, table: Table, key: str) -> str:
        """The header of the table that a key belongs to: one around this table, else the only one that knows it."""
        around = [header(table.path[:end]) for end in range(len(table.path))]
        owners = dict.fromkeys(header(other.path) for other in self.read if other.path and key in other.asked)
        outside = [owner for owner in owners if owner in around]
        if outside:
            return outside[-1]
        return next(iter(owners)) if len(owners) == 1 else ""


class Table:
    """One table of the file. A key that was not asked for when the file has been read is one that nobody knows."""

    def __init__(self, content: Mapping[str, Any], path: Path, faults: Faults) -> None:
        self.content = content
        self.path = path
        self.faults = faults
        self.asked: set[str] = set()
        faults.read.append(self)

    def _get(self, key: str, required: str) -> Any:
        self.asked.add(key)
        if key not in self.content:
            if required:
                self.missing(key, required)
            return None
        return self.content[key]

    def missing(self, key: str, expected: str) -> None:
        """A key that has to be there is not."""
        self.faults.note((*self.path, key), "nothing", expected)

    def note(self, key: str, expected: str, suggestion: str = "") -> None:
        """The value of `key` is not what is expected."""
        self.faults.note((*self.path, key), shown(self.content.get(key)), expected, suggestion)

    def text(self, key: str, default: str = "", *, required: str = "") -> str:
        """A text on one line; one that is required is not empty."""
        value = self._get(key, required)
        if value is None:
            return default
        if not isinstance(value, str) or not value.isprintable() or (required and not value.strip()):
            self.note(key, required or "a text on one line")
            return default
        return value

    def word(self, key: str, allowed: Sequence[str], default: str = "", *, required: bool = False) -> str:
        """One of the allowed words."""
        expected = f"one of {words(allowed)}"
        value = self._get(key, expected if required else "")
        if value is None:
            return default
        if not isinstance(value, str) or value not in allowed:
            self.note(key, expected, nearest(str(value), allowed))
            return default
        return value

    def flag(self, key: str, default: bool = False) -> bool:
        value = self._get(key, "")
        if value is None:
            return default
        if not isinstance(value, bool):
            self.note(key, "true or false", "Write it without quotation marks." if isinstance(value, str) else "")
            return default
        return value

    @overload
    def number(
        self, key: str, default: float, *, least: float, greatest: float, unit: str = "", required: bool = False
    ) -> float: ...
    @overload
    def number(
        self, key: str, default: None = None, *, least: float, greatest: float, unit: str = "", required: bool = False
    ) -> float | None: ...
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
        if not _is_number(value) or not least <= value <= greatest:
            self.note(key, expected, _without_marks(value))
            return default
        return float(value)

    def must(self, key: str, *, least: float, greatest: float, unit: str = "") -> float:
        """A number that has to be there; NaN (and a fault) where it is not."""
        return self.number(key, float("nan"), least=least, greatest=greatest, unit=unit, required=True)

    def whole(self, key: str, default: int, *, least: int, greatest: int, required: bool = False) -> int:
        expected = f"a whole number from {least} to {greatest}"
        value = self._get(key, expected if required else "")
        if value is None:
            return default
        if isinstance(value, bool) or not isinstance(value, int) or not least <= value <= greatest:
            self.note(key, expected, _without_marks(value))
            return default
        return value

    def numbers(self, key: str, *, least: float, greatest: float, required: bool = False) -> tuple[float, ...]:
        """A list of numbers within what is possible; empty where it is not there or not good."""
        expected = f"a list of numbers from {least:g} to {greatest:g}, e.g. [50, 75, 100]"
        value = self._get(key, expected if required else "")
        if value is None:
            return ()
        if not isinstance(value, list) or not value:
            self.note(key, expected)
            return ()
        for place, item in enumerate(value, 1):
            if not _is_number(item) or not least <= item <= greatest:
                found = f"{shown(item)} as number {place} of the list"
                self.faults.note((*self.path, key), found, f"numbers from {least:g} to {greatest:g}")
                return ()
        return tuple(map(float, value))

    def texts(self, key: str, *, required: str = "") -> tuple[str, ...]:
        """A list of texts; empty where it is not there or not good."""
        value = self._get(key, required)
        if value is None:
            return ()
        good = isinstance(value, list) and all(isinstance(item, str) and item.isprintable() for item in value)
        if not good or (required and not value):
            self.note(key, required or "a list of texts in quotation marks")
            return ()
        return tuple(value)

    def words(self, key: str, allowed: Sequence[str], *, what: str, required: str = "") -> tuple[str, ...]:
        """A list of words, each of them allowed and none twice; empty where it is not there or not good."""
        found = self.texts(key, required=required)
        for place, word in enumerate(found):
            if word not in allowed:
                self.faults.note((*self.path, key), shown(word), f"{what}: {words(allowed)}", nearest(word, allowed))
                return ()
            if word in found[:place]:
                self.faults.note((*self.path, key), f"{shown(word)} a second time", f"each of {what} once")
                return ()
        return found

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
        path = (*self.path, key)
        if not isinstance(value, Mapping):
            double = isinstance(value, list)
            self.note(key, f"a table: {header(path)} on a line of its own", "It has single brackets." if double else "")
            return None
        return Table(value, path, self.faults)

    def tables(self, key: str) -> list[Table]:
        """An array of tables inside this one."""
        value = self._get(key, "")
        if value is None:
            return []
        path = (*self.path, key)
        if not isinstance(value, list) or not all(isinstance(item, Mapping) for item in value):
            single = isinstance(value, Mapping)
            self.note(key, f"{header((*path, 0))} above each", "It has double brackets." if single else "")
            return []
        return [Table(item, (*path, index), self.faults) for index, item in enumerate(value)]


def _is_number(value: Any) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool)


def _without_marks(value: Any) -> str:
    text = value.strip().replace(",", ".", 1) if isinstance(value, str) else ""
    return "Write numbers without quotation marks." if text.replace(".", "", 1).isdigit() else ""
