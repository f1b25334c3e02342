"""What is wrong with a text that is no TOML: where, and what to do about it."""

from __future__ import annotations

import re

from logbook.plant.fields import FILE_NAME, Fault, shown

_PLACE = re.compile(r"\s*\((?:at line (\d+), column (\d+)|at end of document)\)")
_DECIMAL_COMMA = re.compile(r"=\s*[+-]?\d+,\d+\s*(?:#|$)")
_ADVICE = (
    (r"Cannot overwrite|Duplicate", "This key or table stands there twice: keep one."),
    (r"Cannot declare", "Engines, meters, tanks, fuels and people have a table each, in double brackets: [[engine]]."),
    (r"Expected '=' after a key", 'Write key = value; put a # before what is only a remark.'),
    (r"Unclosed|at end of document|Expected '\]+'", "A bracket or quotation mark, there or above, is not closed."),
    (r"Unterminated|Illegal character", "Close the text with a quotation mark on the same line."),
    (r"Unescaped", "A backslash in a text is written twice: \\\\."),
    (r"Exceeds the limit", "No number of this file has thousands of digits."),
    (r"Invalid value", 'Put texts in "quotation marks"; numbers have a point: 0.955; yes and no are true and false.'),
)  # fmt: skip
_USUAL_ADVICE = "Write one key = value on each line, and a # before remarks."


def syntax_fault(text: str, said: str) -> Fault:
    """The fault behind what the parser said about the text; the parser stops at the first one."""
    place = _PLACE.search(said)
    lines = text.split("\n")
    if place and place[1]:
        line, where = int(place[1]), f" at column {place[2]}"
    else:
        # What is wrong at the end of the file stands on its last line that is not empty.
        line, where = max((number for number, found in enumerate(lines, 1) if found.strip()), default=1), ""
    stands = lines[line - 1].strip() if line <= len(lines) else ""
    if _DECIMAL_COMMA.search(stands):
        advice = "Write decimals with a point: 12.5, not 12,5."
    else:
        advice = next((advice for pattern, advice in _ADVICE if re.search(pattern, said)), _USUAL_ADVICE)
    what = _PLACE.sub("", said).partition(":")[0]
    found = f"{shown(stands)}, which cannot be read{where} ({what[:1].lower()}{what[1:]})"
    return Fault(line, FILE_NAME, found, "key = value, or the name of a table in brackets", advice)
