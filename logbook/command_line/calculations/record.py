"""What a formula at the desk is made of."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Any

Inputs = dict[str, Any]
Results = dict[str, Any]

TEXT, LIST, NUMBER = "text", "list", "number"


@dataclass(frozen=True)
class Calculation:
    """One formula. `needs` and `takes` map each key to `text`, `list`, `number` or the family of its unit."""

    name: str
    needs: Mapping[str, str]
    gives: Mapping[str, str]
    """result -> unit"""
    work: Callable[[Inputs], Results]
    steps: tuple[str, ...]
    source: str
    example: str
    takes: Mapping[str, str] = field(default_factory=dict)
    one_of: tuple[str, ...] = ()
    """exactly one of these keys is needed"""
    many: str = ""
    """prefix of keys that may come many times: `fuel.`"""
    caution: str = ""

    def family(self, key: str) -> str | None:
        """What a key takes; None where it is no key of this formula."""
        if self.many and key.startswith(self.many):
            return NUMBER
        return {**self.needs, **self.takes}.get(key)
