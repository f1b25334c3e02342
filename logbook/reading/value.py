"""A value of the log: a number with its text, a word, or a state with its reason. Never 0 or null for a state."""

from __future__ import annotations

import enum
import math
from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Any


class State(enum.StrEnum):
    """Why there is no number."""

    NOT_READ = "not read"
    NOT_FITTED = "not fitted"
    STOPPED = "stopped"
    STAND_BY = "stand-by"
    DEFECTIVE = "defective"


STATE_SIGNS = {
    State.NOT_READ: "N/R",
    State.NOT_FITTED: "-",
    State.STOPPED: "stopped",
    State.STAND_BY: "S/B",
    State.DEFECTIVE: "def",
}
"""As paper logs write them; also what is shown and exported."""

SOURCES = ("hand", "instrument", "import", "calculated")

OCCASIONS = (
    "watch", "round", "noon", "event", "change_over", "full_set", "before_work", "after_work", "shift", "midnight",
)  # fmt: skip


@dataclass(frozen=True, slots=True)
class Value:
    """One value. Exactly one of `number`, `word` and `state` is filled.

    `number` is in the canonical unit of the point; `text` is what was typed, unit and all; `digits` counts the
    significant digits typed (they give the resolution).
    """

    number: float | None = None
    word: str = ""
    state: State | None = None
    reason: str = ""
    text: str = ""
    digits: int = 0
    estimated: bool = False
    source: str = "hand"
    findings: tuple[str, ...] = ()
    """what was asked and accepted, e.g. `outside its typing span`"""

    def __post_init__(self) -> None:
        filled = (self.number is not None) + bool(self.word) + (self.state is not None)
        if filled != 1:
            raise ValueError("A value is a number, a word or a state: exactly one of them.")
        if self.number is not None and not math.isfinite(self.number):
            raise ValueError("A number must be finite; write N/R where it was not read.")

    def shown(self) -> str:
        """The value as the log shows it: text as typed, sign of the state, E for an estimate."""
        if self.state is not None:
            return STATE_SIGNS[self.state]
        shown = self.word or self.text or f"{self.number:g}"
        return f"{shown} E" if self.estimated else shown

    def accepting(self, *findings: str) -> Value:
        """The same value with findings that a person has accepted."""
        return replace(self, findings=self.findings + findings)

    def to_body(self) -> dict[str, Any]:
        """As it stands in the book: only what differs from the ordinary case."""
        body: dict[str, Any] = {}
        if self.number is not None:
            body["number"] = self.number
        if self.word:
            body["word"] = self.word
        if self.state is not None:
            body["state"] = self.state.value
        if self.reason:
            body["reason"] = self.reason
        if self.text:
            body["text"] = self.text
        if self.digits:
            body["digits"] = self.digits
        if self.estimated:
            body["mark"] = "E"
        if self.source != "hand":
            body["source"] = self.source
        if self.findings:
            body["findings"] = list(self.findings)
        return body

    @classmethod
    def from_body(cls, body: Mapping[str, Any]) -> Value:
        """The value that `to_body` wrote."""
        return cls(
            number=body.get("number"),
            word=body.get("word", ""),
            state=State(body["state"]) if "state" in body else None,
            reason=body.get("reason", ""),
            text=body.get("text", ""),
            digits=body.get("digits", 0),
            estimated=body.get("mark") == "E",
            source=body.get("source", "hand"),
            findings=tuple(body.get("findings", ())),
        )
