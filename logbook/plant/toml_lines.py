"""Where in a TOML text each key stands: tomllib reads values, but not places."""

from __future__ import annotations

import re
from collections import defaultdict

Path = tuple[str | int, ...]
"""e.g. ("engine", 0, "trial", 1, "sfoc_g_kwh"); arrays of tables are counted from 0"""

_HEADER = re.compile(r"^\s*(\[\[?)\s*([^\]]+?)\s*\]\]?\s*(?:#.*)?$")
_KEY = re.compile(r"""^\s*((?:"[^"]*"|'[^']*'|[A-Za-z0-9_-]+)(?:\s*\.\s*(?:"[^"]*"|'[^']*'|[A-Za-z0-9_-]+))*)\s*=""")
_PART = re.compile(r""""[^"]*"|'[^']*'|[A-Za-z0-9_-]+""")


def _parts(dotted: str) -> list[str]:
    return [part.strip("\"'") for part in _PART.findall(dotted)]


def lines_of(text: str) -> dict[Path, int]:
    """Line (from 1) of every key and table that begins a line of the text. Made for a text that tomllib has read."""
    found: dict[Path, int] = {}
    counts: dict[Path, int] = defaultdict(int)
    here: Path = ()
    inside = ""
    for number, line in enumerate(text.splitlines(), 1):
        if inside:
            # Within a text of several lines nothing is a key.
            inside = "" if inside in line else inside
            continue
        header = _HEADER.match(line)
        if header:
            here = _table(_parts(header[2]), header[1] == "[[", counts)
            found.setdefault(here, number)
            continue
        key = _KEY.match(line)
        if key:
            found.setdefault((*here, *_parts(key[1])), number)
            rest = line[key.end() :]
            for quotes in ('"""', "'''"):
                if rest.count(quotes) == 1:
                    inside = quotes
    return found


def _table(parts: list[str], in_array: bool, counts: dict[Path, int]) -> Path:
    """The path of a table header; a part that is an array of tables means its latest element."""
    path: Path = ()
    for index, part in enumerate(parts):
        path = (*path, part)
        last = index == len(parts) - 1
        if last and in_array:
            counts[path] += 1
        if counts.get(path):
            path = (*path, counts[path] - 1)
    return path


def line_of(lines: dict[Path, int], path: Path) -> int:
    """Line of a key, or of the nearest table around it; 1 when nothing of it stands in the text."""
    while path:
        if path in lines:
            return lines[path]
        path = path[:-1]
    return 1
