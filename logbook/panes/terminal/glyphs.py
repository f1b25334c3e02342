"""The signs that are drawn: a set with line-drawing characters, a set within ASCII, and the choice between them.

The console of a Linux machine holds light lines, degree and plus-minus in its font, but one of the eight blocks of a
sparkline; an output encoding other than UTF-8 turns each sign into an escape of six letters and the page slides. There
the ASCII set is taken, without being asked.
"""

from __future__ import annotations

import codecs
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Glyphs:
    """One set of signs; each is one character unless it says otherwise."""

    name: str
    """`box` or `ascii`, as the chart takes it."""
    steps: str
    """Heights of a sparkline, lowest first."""
    hanging: str
    """Depths below a reference line, least first."""
    level: str
    """On the reference line."""
    gap: str
    """Nothing was read, or it is not compared."""
    rule: str
    """A horizontal rule, by repetition."""
    upright: str
    """A vertical rule."""
    crossing: str
    """Where a horizontal and a vertical rule meet."""
    point: str
    """A value on a scale."""
    reference: str
    """The reference on a scale."""
    spread: tuple[str, str]
    """Both ends of an uncertainty on a scale."""
    degree: str
    """Before C or K; more than one character in ASCII."""
    plus_minus: str
    """More than one character in ASCII."""
    ellipsis: str
    """Text that was cut; more than one character in ASCII."""
    border: str
    """Textual's name of a border drawn with these signs."""


BOX = Glyphs(
    name="box",
    steps="▁▂▃▄▅▆▇█",
    hanging="▔▀",
    level="─",
    gap="·",
    rule="─",
    upright="│",
    crossing="┼",
    point="●",
    reference="○",
    spread=("├", "┤"),
    degree="°",
    plus_minus="±",
    ellipsis="…",
    border="solid",
)

ASCII = Glyphs(
    name="ascii",
    steps="_.:;=+*#",
    hanging="'\"",
    level="-",
    gap=" ",
    rule="-",
    upright="|",
    crossing="+",
    point="*",
    reference="o",
    spread=("[", "]"),
    degree="deg",
    plus_minus="+-",
    ellipsis="...",
    border="ascii",
)

# Consoles and true terminals whose fonts lack the blocks; by the part of TERM before the first hyphen.
_PLAIN_TERMINALS = ("linux", "ansi", "cons25", "dumb", "vt")


def chosen(term: str, encoding: str, requested: str | None = None) -> Glyphs:
    """The set for a terminal.

    Arguments: term: TERM, may be empty. encoding: of the output. requested: `box` or `ascii` overrules the choice.
    Raises ValueError with a sentence when another set is requested, or `box` where the encoding cannot carry it.
    """
    if requested not in (None, "box", "ascii"):
        raise ValueError(f"There are two sets of signs, box and ascii, and no '{requested}'.")
    unicode_output = _is_utf8(encoding)
    if requested == "box" and not unicode_output:
        raise ValueError(f"The box signs need UTF-8 output; the encoding here is {encoding}. Ask for ascii.")
    if requested is not None:
        return BOX if requested == "box" else ASCII
    family = term.lower().partition("-")[0]
    plain = family == "" or family.startswith(_PLAIN_TERMINALS)
    return ASCII if plain or not unicode_output else BOX


def _is_utf8(encoding: str) -> bool:
    try:
        return codecs.lookup(encoding).name in ("utf-8", "utf-8-sig")
    except LookupError:
        return False
