"""Where in a TOML text each key stands: tomllib reads values, but not places."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Iterator, Mapping

Path = tuple[str | int, ...]
"""e.g. ("engine", 0, "trial", 1, "sfoc_g_kwh"); arrays of tables are counted from 0"""

# What may hide a bracket or an end of line: texts of four kinds and remarks.
_TOKEN = re.compile(
    r'"""(?:\\.|[^\\])*?"{3,5}'
    r"|'''.*?'{3,5}"
    r'|"(?:\\.|[^"\\\n])*"'
    r"|'[^'\n]*'"
    r"|#[^\n]*"
    r"|[\[\]{}\n]",
    re.DOTALL,
)
_NAME = r"""(?:"(?:\\.|[^"\\\n])*"|'[^'\n]*'|[A-Za-z0-9_-]+)"""
_DOTTED = rf"{_NAME}(?:[ \t]*\.[ \t]*{_NAME})*"
_HEADER = re.compile(rf"\s*(\[\[?)[ \t]*({_DOTTED})[ \t]*\]")
_KEY = re.compile(rf"\s*({_DOTTED})[ \t]*=")
_PART = re.compile(_NAME)


def lines_of(text: str) -> dict[Path, int]:
    """Line (from 1) of every key and table that begins a statement of the text. For a text that tomllib has read."""
    found: dict[Path, int] = {}
    counts: dict[Path, int] = defaultdict(int)
    here: Path = ()
    for line, statement in _statements(text):
        header = _HEADER.match(statement)
        if header:
            here = _table(_parts(header[2]), header[1] == "[[", counts)
            found.setdefault(here, line)
            continue
        key = _KEY.match(statement)
        if key:
            found.setdefault((*here, *_parts(key[1])), line)
    return found


def _statements(text: str) -> Iterator[tuple[int, str]]:
    """Line and text of every statement: a value in brackets or of several lines belongs to the line of its key."""
    depth, start, begun, line = 0, 0, 1, 1
    for token in _TOKEN.finditer(text):
        sign = token[0]
        line += sign.count("\n")
        if sign in "[{":
            depth += 1
        elif sign in "]}":
            depth = max(depth - 1, 0)
        elif sign == "\n" and depth == 0:
            yield begun, text[start : token.start()]
            start, begun = token.end(), line
    yield begun, text[start:]


def _parts(dotted: str) -> list[str]:
    return [part.strip("\"'") for part in _PART.findall(dotted)]


def _table(parts: list[str], in_array: bool, counts: dict[Path, int]) -> Path:
    """The path of a table header; a part that is an array of tables means its latest element."""
    path: Path = ()
    for index, part in enumerate(parts):
        path = (*path, part)
        if in_array and index == len(parts) - 1:
            counts[path] += 1
        if counts.get(path):
            path = (*path, counts[path] - 1)
    return path


def line_of(lines: Mapping[Path, int], path: Path) -> int:
    """Line of a key, or of the nearest table around it; 1 when nothing of it stands in the text."""
    while path:
        for found in (path, (*path, 0)):
            if found in lines:
                return lines[found]
        path = path[:-1]
    return 1
