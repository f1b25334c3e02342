"""The typing test: is this number possible at all? Not whether it is good: that is the condition test, elsewhere.

A finding warns once and is accepted with a second Enter. No plausible number is refused.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

from logbook.plant.catalogue import ReadingDefinition
from logbook.plant.numbers import split_number
from logbook.plant.records import Counter, Engine
from logbook.plant.units import convert
from logbook.reading import counters
from logbook.reading.finding import (
    COUNTER_BACKWARD,
    COUNTER_DIGITS,
    COUNTER_OVER_CEILING,
    COUNTER_PASSED_ZERO,
    COUNTER_STANDING,
    COUNTER_TENFOLD,
    COUNTER_UNDETERMINED,
    OUTSIDE_SPAN,
    SAME_AS_LAST,
    Finding,
)
from logbook.reading.value import Value

_ALWAYS = ("plant", "ship", "lot", "tank")
"""points of these have their spans whether an engine runs or not"""
_ROW_LEAST = 3
"""two equal values of a pair are nothing odd"""
_STANDING_PART = 0.3
"""of what the rated rate allows: a counter that shows less than its last place after that may stand"""
_TENFOLD_TOLERANCE = 0.2


@dataclass(frozen=True, slots=True)
class CounterContext:
    """What a counter reading is tested against; all in the unit of the counter."""

    counter: Counter
    last: float
    rate_per_h: float
    elapsed_h: float
    running: bool = False
    """it ran from the last reading to this one: then a standing counter is asked about"""
    expected: float | None = None
    """what another instrument says was counted, e.g. tachometer x minutes"""


def rated_for(point: ReadingDefinition, engine: Engine | None) -> float | None:
    """The rated value that a span `*rated` refers to [unit of the point]; None where it is not known."""
    if engine is None:
        return None
    if point.key == "shaft_torque":
        return engine.rated_power_kw * 60 / (2 * math.pi * engine.rated_speed_rpm)
    if point.key == "generator_power":
        return engine.rated_electrical_kw or engine.rated_power_kw
    return engine.rated_power_kw


def span_for(point: ReadingDefinition, engine: Engine | None) -> tuple[float, float] | None:
    """Least and greatest number that is possible at a point of this engine [unit of the point]; None: nothing is said.

    Without an engine (points of the plant): possible on any kind. An engine that burns both has the spans of both.
    """
    if engine is None:
        kinds = tuple(point.spans)
    elif engine.cycle == "two-stroke":
        # The gas column is that of four-stroke gas engines; a two-stroke falls back on it where its own says nothing.
        kinds = ("two-stroke",) if "two-stroke" in point.spans else ("gas",)
    else:
        kinds = {"gas": ("gas",), "both": ("four-stroke", "gas")}.get(engine.fuel, ("four-stroke",))
    rated = rated_for(point, engine)
    bounds = [point.spans[kind].bounds(rated) for kind in kinds if kind in point.spans]
    known = [bound for bound in bounds if bound is not None]
    if not known:
        return None
    return min(least for least, _ in known), max(greatest for _, greatest in known)


def span_findings(
    value: Value, point: ReadingDefinition, engine: Engine | None, *, running: bool
) -> tuple[Finding, ...]:
    """Outside the span of this point. The points of a stopped engine have none."""
    if value.number is None or not (running or point.per in _ALWAYS):
        return ()
    span = span_for(point, engine)
    if span is None or span[0] <= value.number <= span[1]:
        return ()
    typed = split_number(value.text)
    if typed is not None and not typed[1]:
        asked = convert(value.number, "", point.family, canonical_unit=point.unit, span=span).ask
        if asked is not None:
            offers = tuple(f"{value.text} {choice.spelling}" for choice in asked.choices)
            answers = tuple(choice.answer for choice in asked.choices)
            return (Finding(asked.finding, asked.sentence, offers=offers, question=asked.key, answers=answers),)
    unit = "" if point.unit == "-" else f" {point.unit}"
    sentence = f"{value.number:.10g}{unit} is outside {span[0]:g} to {span[1]:g}{unit} for {point.label}. Read right?"
    return (Finding(OUTSIDE_SPAN, sentence),)


def counter_findings(value: Value, context: CounterContext) -> tuple[Finding, ...]:
    """A counter that went backward or further than it can, stands, or has more digits than its display.

    Slips of the finger that would explain it are offered as texts, never applied.
    """
    if value.number is None:
        return ()
    counter, last = context.counter, context.last
    most = counters.ceiling(context.rate_per_h, context.elapsed_h, counters.last_place(counter))
    if value.number >= counter.modulus:
        sentence = f"{value.text} has more digits than this counter shows ({counter.digits})."
        return (_with_repairs(COUNTER_DIGITS, sentence, value, context, most),)
    found = counters.difference(last, value.number, counter, ceiling=most)
    if found.used is None:
        if most >= counter.modulus:
            return (Finding(COUNTER_UNDETERMINED, f"Last reading {last:.10g}: {found.question}."),)
        key = COUNTER_BACKWARD if value.number < last else COUNTER_OVER_CEILING
        return (_with_repairs(key, f"Last reading {last:.10g}: {found.question}.", value, context, most),)
    if found.passed_zero:
        return (Finding(COUNTER_PASSED_ZERO, f"Passed zero: {found.used:.10g} counted since the last reading."),)
    if found.used == 0 and context.running:
        possible = _STANDING_PART * context.rate_per_h * context.elapsed_h
        if possible > counters.last_place(counter):
            return (Finding(COUNTER_STANDING, f"{value.text} is the last reading: was it read, or does it stand?"),)
    return _tenfold(found.used, context)


def _tenfold(used: float, context: CounterContext) -> tuple[Finding, ...]:
    if not context.expected or used <= 0:
        return ()
    for factor, said in ((10.0, "a tenth of"), (0.1, "ten times")):
        if abs(used * factor / context.expected - 1.0) <= _TENFOLD_TOLERANCE:
            sentence = (
                f"{used:.10g} counted is {said} what the other instrument says ({context.expected:.5g}):"
                " is the counter's x10 left out or put twice?"
            )
            return (Finding(COUNTER_TENFOLD, sentence),)
    return ()


def _with_repairs(key: str, sentence: str, value: Value, context: CounterContext, most: float) -> Finding:
    number = value.number or 0.0
    digits = sum(sign.isdigit() for sign in value.text)
    slips = counters.repairs(number, context.last, context.counter, ceiling_=most, typed_digits=digits)
    hint = "".join(f" {slip.text}: {slip.slip}." for slip in slips)
    return Finding(key, f"{sentence}{f' Perhaps{hint}' if hint else ''}", offers=tuple(slip.text for slip in slips))


def row_findings(values: Mapping[str, Value], last: Mapping[str, Value]) -> tuple[Finding, ...]:
    """A whole row equal to the last one in every digit is asked about once."""
    typed = {key: value for key, value in values.items() if value.number is not None}
    if len(typed) < _ROW_LEAST or set(typed) - set(last):
        return ()
    if all((value.number, value.digits) == (last[key].number, last[key].digits) for key, value in typed.items()):
        return (Finding(SAME_AS_LAST, "Every value is the same as at the last reading. Was it read?"),)
    return ()
