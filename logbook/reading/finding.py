"""What is asked about a text or a value: a sentence, never an exception. Accepting is the person's act."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Finding:
    """One question. `refused`: the text cannot be understood and has no value until it is mended."""

    key: str
    sentence: str
    refused: bool = False
    offers: tuple[str, ...] = ()
    """texts that would be understood, offered and never applied unasked"""
    target: str = ""
    """`key` or `key.PLACE` of the value in a row; empty: the whole field"""
    question: str = ""
    """key under which the answer to a question about a unit is remembered with the point"""
    answers: tuple[str, ...] = ()
    """what to remember for each of the offers, in their order"""

    def concerns(self, target: str) -> bool:
        return not self.target or self.target == target


# Keys. Those that begin with looks_like_ and read_as_ come with the units.
NOT_UNDERSTOOD = "not_understood"
UNIT_UNKNOWN = "unit_unknown"
UNIT_ASKED = "unit_asked"
READ_AS = "read_as"
THOUSANDS_OR_DECIMAL = "thousands_or_decimal"
ROW_LENGTH = "row_length"
COMMAS_IN_ROW = "commas_in_row"
OUTSIDE_SPAN = "outside_span"
SAME_AS_LAST = "same_as_last"
COUNTER_STANDING = "counter_standing"
COUNTER_BACKWARD = "counter_backward"
COUNTER_PASSED_ZERO = "counter_passed_zero"
COUNTER_OVER_CEILING = "counter_over_ceiling"
COUNTER_UNDETERMINED = "counter_undetermined"
COUNTER_DIGITS = "counter_digits"
COUNTER_TENFOLD = "counter_tenfold"
