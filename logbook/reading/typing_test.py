"""The typing test: is this number possible at all? Not whether it is good: that is the condition test, elsewhere.

A finding warns once and is accepted with a second Enter. No plausible number is refused.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from logbook.plant.catalogue import ReadingDefinition
from logbook.plant.records import Counter, Engine
from logbook.reading import counters
from logbook.reading.finding import (
    COUNTER_BACKWARD,
    COUNTER_DIGITS,
    COUNTER_OVER_CEILING,
    OTHER_UNIT,
    OUTSIDE_SPAN,
    SAME_AS_LAST,
    Finding,
)
from logbook.reading.value import Value


@dataclass(frozen=True, slots=True)
class CounterContext:
    """What a counter reading is tested against."""

    counter: Counter
    last: float
    rate_per_h: float
    elapsed_h: float


def rated_for(point: ReadingDefinition, engine: Engine | None) -> float | None:
    """The rated value that a span `*rated` refers to."""
    if engine is None:
        return None
    if point.key == "shaft_torque":
        return engine.rated_power_kw * 60 / (2 * 3.141592653589793 * engine.rated_speed_rpm)
    if point.key == "generator_power":
        return engine.rated_electrical_kw or engine.rated_power_kw
    return engine.rated_power_kw


def span_findings(
    value: Value, point: ReadingDefinition, engine: Engine | None, *, running: bool
) -> tuple[Finding, ...]:
    """Outside the span of this point on a running engine. A stopped machine has no span."""
    if value.number is None or not running:
        return ()
    kind = "two-stroke"
    if engine is not None:
        kind = "gas" if engine.fuel == "gas" else engine.cycle
    span = point.spans.get(kind)
    bounds = span.bounds(rated_for(point, engine)) if span else None
    if bounds is None or bounds[0] <= value.number <= bounds[1]:
        return ()
    least, greatest = bounds
    unit = "" if point.unit == "-" else f" {point.unit}"
    if point.family == "temperature" and value.number > greatest and least <= (value.number - 32) / 1.8 <= greatest:
        return (
            Finding(
                OTHER_UNIT, f"{value.text} looks like degF: type {value.text} F if it is.", offers=(f"{value.text} F",)
            ),
        )
    return (
        Finding(OUTSIDE_SPAN, f"{value.number:g}{unit} is outside {least:g} to {greatest:g}{unit} for {point.label}."),
    )


def counter_findings(value: Value, context: CounterContext) -> tuple[Finding, ...]:
    """A counter that went backward or further than it can, or has more digits than its display."""
    if value.number is None:
        return ()
    counter = context.counter
    if value.number >= counter.modulus:
        return (
            Finding(
                COUNTER_DIGITS, f"{value.text} has more digits than this counter ({counter.digits}). Read it again."
            ),
        )
    most = counters.ceiling(context.rate_per_h, context.elapsed_h, 2 * counter.multiplier * 10.0**-counter.decimals)
    found = counters.difference(context.last, value.number, counter, ceiling=most)
    if not found.question:
        if found.passed_zero:
            return (Finding(COUNTER_BACKWARD, f"Passed zero: {found.used:g} counted since the last reading."),)
        return ()
    offers = counters.repairs(value.number, context.last, counter, ceiling_=most)
    key = COUNTER_BACKWARD if value.number < context.last else COUNTER_OVER_CEILING
    hint = f" Perhaps {' or '.join(offers)}?" if offers else ""
    return (Finding(key, f"Last reading {context.last:g}: {found.question}.{hint}", offers=offers),)


def row_findings(values: Mapping[str, Value], last: Mapping[str, Value]) -> tuple[Finding, ...]:
    """A whole row equal to the last one in every digit is asked about once."""
    typed = {key: value.text for key, value in values.items() if value.number is not None}
    if len(typed) < 3 or set(typed) - set(last):
        return ()
    if all(last[key].text == text for key, text in typed.items()):
        return (Finding(SAME_AS_LAST, "Every value is the same as at the last reading. Was it read?"),)
    return ()
