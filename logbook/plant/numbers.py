"""Numbers as people type them: decimal comma or point, thousands blanks, digits counted."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass

_BLANKS = " \u00a0\u2009\u202f'\u2019"
_NUMBER = re.compile(
    rf"(?P<sign>[+\-\u2212]?)"
    rf"(?P<body>[0-9]{{1,3}}(?:[{_BLANKS}][0-9]{{3}})+(?![0-9])(?:[.,][0-9]+)?|[0-9]+(?:[.,][0-9]+)*|[.,][0-9]+)"
    rf"(?P<exponent>[eE][+\-]?[0-9]{{1,3}}(?![0-9A-Za-z]))?"
)
_NOT_A_DIGIT = re.compile(f"[{_BLANKS}]")


@dataclass(frozen=True, slots=True)
class Number:
    """A number, and how it was typed."""

    value: float
    digits: int
    """significant digits typed: 340 has three, 0.50 two"""
    other: float | None = None
    """what it would be if its one comma or point parted thousands: 12,345 is 12.345 or 12 345"""


def split_number(text: str, decimal: str = "") -> tuple[Number, str] | None:
    """The number at the head of `text` and what follows it; None where there is none, or none that is finite.

    Comma and point are both decimal. `decimal` says which of them the writer uses, where that is known: then
    `12.345` from a writer of points is not asked about.
    """
    match = _NUMBER.match(text)
    if match is None:
        return None
    body = _NOT_A_DIGIT.sub("", match["body"])
    marks = [sign for sign in body if sign in ",."]
    groups = re.split("[.,]", body)
    parted_by_blanks = len(body) < len(match["body"])
    doubtful = False
    if len(marks) > 1:
        # 1.234.567,8 and 1,234,567: all marks but a different last one part thousands.
        last_is_decimal = marks[-1] != marks[0]
        thousands = groups[1:-1] if last_is_decimal else groups[1:]
        if len(set(marks[:-1])) > 1 or not 1 <= len(groups[0]) <= 3 or any(len(group) != 3 for group in thousands):
            return None
        whole = "".join(groups[:-1] if last_is_decimal else groups)
        part = groups[-1] if last_is_decimal else ""
    else:
        whole, part = groups[0], groups[1] if marks else ""
        doubtful = (
            len(part) == 3
            and 1 <= len(whole) <= 3
            and whole[0] != "0"
            and marks[0] != decimal
            and not parted_by_blanks
            and not match["exponent"]
        )
    sign = "-" if match["sign"] in ("-", "\u2212") and match["sign"] else ""
    value = float(f"{sign}{whole or '0'}.{part or '0'}{match['exponent'] or ''}")
    if not math.isfinite(value):
        return None
    # 0.00 has no significant digit; the places written still say how finely it was read.
    digits = len((whole + part).lstrip("0")) or len(part) + 1
    other = float(f"{sign}{whole}{part}") if doubtful else None
    return Number(value, digits, other), text[match.end() :]
