"""What is asked about a text or a value: a sentence, never an exception. Accepting is the person's act."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Finding:
    """One question. `refused`: the text cannot be understood at all and has no value until it is mended."""

    key: str
    sentence: str
    refused: bool = False
    offers: tuple[str, ...] = ()
    """texts that would be understood, offered and never applied unasked"""
    target: str = ""
    """`key` or `key.PLACE` of the value in a row; empty: the whole field"""

    def concerns(self, target: str) -> bool:
        return not self.target or self.target == target


NOT_UNDERSTOOD = "not_understood"
UNIT_NOT_UNDERSTOOD = "unit_not_understood"
ROW_LENGTH = "row_length"
OUTSIDE_SPAN = "outside_span"
OTHER_UNIT = "other_unit"
SAME_AS_LAST = "same_as_last"
COUNTER_BACKWARD = "counter_backward"
COUNTER_OVER_CEILING = "counter_over_ceiling"
COUNTER_DIGITS = "counter_digits"
