"""The catalogue of readings: every point that an engine log usually has, as data (catalogue.csv).

A plant picks from it, reorders it and adds points of its own. Spans serve the typing test only ("is this number
possible at all?"); none of them is a limit.
"""

from __future__ import annotations

import csv
import re
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from importlib.resources import files

WALK_GROUPS = (
    "panel", "top", "turbo", "middle", "bottom", "board", "aux", "tanks", "counters", "bridge", "site", "desk",
)  # fmt: skip
"""Order of the walk: what comes by telephone and from papers stands last."""

_SPAN = re.compile(r"(-?[\d.]+)(\*rated)?\.\.(-?[\d.]+)(\*rated)?")


@dataclass(frozen=True, slots=True)
class Span:
    """Least and greatest number that is possible while running; `of_rated` = times the rated value."""

    least: float
    greatest: float
    of_rated: bool = False

    def bounds(self, rated: float | None) -> tuple[float, float] | None:
        """The two bounds [canonical unit], or None where a rated value is needed and not known."""
        if not self.of_rated:
            return self.least, self.greatest
        return None if rated is None else (self.least * rated, self.greatest * rated)


@dataclass(frozen=True, slots=True)
class ReadingDefinition:
    """One point of the log. `unit` is the canonical unit, `family` the closed list of spellings it is typed in."""

    key: str
    label: str
    label_four_stroke: str
    abbreviation: str
    abbreviation_four_stroke: str
    unit: str
    family: str
    per: str
    """engine, cylinder, turbocharger, cooler, bearing, generator, tank, meter, plant, ship or lot"""
    kind: str
    """gauge, counter, state, level or lot"""
    pressure_reference: str
    """gauge, absolute, differential, or empty: not a pressure"""
    spans: Mapping[str, Span]
    """by `two-stroke`, `four-stroke`, `gas`"""
    uncertainty: str
    walk: str
    safety: bool = False
    """a doubtful reading of this point is treated as true until disproved"""

    def label_for(self, cycle: str) -> str:
        """The trade's word for this point on this kind of engine."""
        return self.label_four_stroke if cycle == "four-stroke" and self.label_four_stroke else self.label

    def abbreviation_for(self, cycle: str) -> str:
        return (
            self.abbreviation_four_stroke
            if cycle == "four-stroke" and self.abbreviation_four_stroke
            else self.abbreviation
        )


def parse_span(text: str) -> Span | None:
    """`0..1.2*rated` or `15..250` as a span; None for an empty text.

    Raises ValueError when the text is neither.
    """
    if not text:
        return None
    match = _SPAN.fullmatch(text)
    if match is None:
        raise ValueError(f"A span is written like 15..250 or 0..1.2*rated; '{text}' is not.")
    # A zero bound needs no `*rated` beside it.
    return Span(float(match[1]), float(match[3]), bool(match[2] or match[4]))


@cache
def catalogue() -> Mapping[str, ReadingDefinition]:
    """All points of the package, by key, in the order of the file."""
    points: dict[str, ReadingDefinition] = {}
    lines = files("logbook.plant").joinpath("catalogue.csv").read_text(encoding="utf-8").splitlines()
    for row in csv.DictReader(lines):
        spans = {
            kind: span
            for kind, column in (
                ("two-stroke", "span_two_stroke"),
                ("four-stroke", "span_four_stroke"),
                ("gas", "span_gas"),
            )
            if (span := parse_span(row.pop(column)))
        }
        safety = row.pop("safety") == "yes"
        points[row["key"]] = ReadingDefinition(spans=spans, safety=safety, **row)
    return points
