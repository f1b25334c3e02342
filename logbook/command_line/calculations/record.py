"""What a formula at the desk is made of."""

from __future__ import annotations

from collections.abc import Callable, Collection, Mapping
from dataclasses import dataclass, field
from typing import Any

Inputs = dict[str, Any]

NUMBER, WHOLE, WORD, LIST = "number", "whole number", "word", "list"
FRACTION = "fraction"
"""Family of numbers 0..1 that may also be typed in percent."""


@dataclass(frozen=True)
class Key:
    """One input: what it takes, and in which unit `work` gets it."""

    name: str
    unit: str = ""
    """of a number without one; empty: the number carries none"""
    family: str = ""
    """list of spellings that its unit is understood by; empty: the number alone"""
    kind: str = NUMBER
    needed: bool = True
    says: str = ""
    choices: Callable[[], Collection[str]] | None = None
    absolute: bool = False
    """a pressure that must be absolute"""


@dataclass(frozen=True)
class Answer:
    """What a formula gives for one set of inputs."""

    results: dict[str, Any]
    steps: tuple[str, ...]
    """the formula with the numbers in it, in the order of working"""
    cautions: tuple[str, ...] = ()
    """what these inputs call for beside the cautions of the formula"""


@dataclass(frozen=True)
class Calculation:
    """One formula by name."""

    name: str
    keys: tuple[Key, ...]
    gives: Mapping[str, str]
    """result -> unit; `-` is a ratio"""
    work: Callable[[Inputs], Answer]
    formula: tuple[str, ...]
    source: str
    example: str
    cautions: tuple[str, ...] = ()
    one_of: tuple[str, ...] = ()
    """exactly one of these keys is given"""
    together: tuple[str, ...] = ()
    """these keys are given all or none"""
    many: Key | None = None
    """a key that comes once or more, each time with a word of its choices behind: `fuel.NAME`"""

    @property
    def names(self) -> tuple[str, ...]:
        return tuple(key.name for key in self.keys)


@dataclass(frozen=True)
class Read:
    """One input as understood."""

    value: Any
    """number in the key's unit, word, or list of numbers"""
    remark: str = ""
    """how it was typed, where that differs from what was understood"""


@dataclass
class Request:
    """What was typed: inputs understood, and all that is wrong with the rest."""

    inputs: dict[str, Read] = field(default_factory=dict)
    faults: list[str] = field(default_factory=list)


def shown(value: Any) -> str:
    """A value for the eye: six significant digits."""
    if isinstance(value, list):
        return " ".join(shown(part) for part in value)
    if value is None:
        return "none"
    return f"{value:.6g}" if isinstance(value, float) else str(value)
