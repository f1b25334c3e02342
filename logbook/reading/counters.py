"""What a counter counted between two readings: one rule for entry, import and figures.

A total never jumps silently. A smaller reading is taken as passed zero only when the old one stood in the top tenth
of the counter and the difference is under the ceiling; every other backward step, and every difference over the
ceiling, keeps the reading, gives no difference and leaves one question open until a person answers.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from logbook.plant.records import Counter, Engine, Meter

CEILING_FACTOR = 1.1
"""A difference may be so many times what the rated rate allows in the elapsed time."""
TOP_PART = 0.9
GENEROUS_CONSUMPTION_KG_KWH = 0.35
"""For the ceiling of a fuel meter whose greatest flow is not entered: a typing test, no judgement."""
LIGHTEST_FUEL_KG_L = 0.72
RICHEST_GAS_KWH_M3 = 6.0
"""Heat of a lean gas at least; makes the gas ceiling generous."""
CIRCULATION = 8.0
"""A supply or return meter may pass so many times the consumption."""

PASSED_ZERO, RESET, WRONG = "passed zero", "reset", "reading was wrong"
"""What a person may answer to an open question; an exchange is an entry of its own."""


@dataclass(frozen=True, slots=True)
class Exchange:
    """The counter was exchanged in between: closing reading of the old one, opening reading of the new one."""

    closing: float
    opening: float


@dataclass(frozen=True, slots=True)
class CounterDifference:
    """`used` [unit of the counter], None while a question is open."""

    used: float | None
    passed_zero: bool = False
    question: str = ""
    """why there is no difference; empty: nothing is asked"""


def difference(
    old: float,
    new: float,
    counter: Counter,
    *,
    ceiling: float,
    exchanges: Iterable[Exchange] = (),
    answer: str = "",
    times: int = 1,
) -> CounterDifference:
    """What was counted from `old` to `new`.

    All in the unit of the counter. `ceiling`: the most that can have been counted. `answer`: what a person said to the
    open question of this span, `times` how often it passed zero.
    """
    total = 0.0
    for exchange in exchanges:
        total += exchange.closing - old
        old = exchange.opening
    step = new - old
    if answer == PASSED_ZERO:
        return CounterDifference(total + step + times * counter.modulus, passed_zero=True)
    if answer in (RESET, WRONG):
        return CounterDifference(None)
    if step >= 0:
        if total + step <= ceiling:
            return CounterDifference(total + step)
        return CounterDifference(
            None, question=f"{total + step:g} more is over what can have been counted ({ceiling:g})"
        )
    over_zero = total + step + counter.modulus
    if old >= TOP_PART * counter.modulus and over_zero <= ceiling < counter.modulus:
        return CounterDifference(over_zero, passed_zero=True)
    return CounterDifference(
        None, question=f"{-step:g} less than before: passed zero, exchanged, reset, or was a reading wrong?"
    )


def rated_rate_of_meter(meter: Meter, engines: Iterable[Engine]) -> float:
    """The most a fuel or gas meter can pass in an hour [its unit/h], from its own entry or from rated power."""
    if meter.rated_rate_per_h is not None:
        return meter.rated_rate_per_h
    power_kw = sum(engine.rated_power_kw for engine in engines)
    if meter.key == "exported_energy":
        return power_kw / (1000 if meter.unit == "MWh" else 1)
    if meter.key == "gas_meter" and meter.unit != "kg":
        return power_kw / 0.25 / RICHEST_GAS_KWH_M3
    kg_h = power_kw * GENEROUS_CONSUMPTION_KG_KWH * CIRCULATION
    litres_h = kg_h / LIGHTEST_FUEL_KG_L
    return {"kg": kg_h, "t": kg_h / 1000, "L": litres_h, "m3": litres_h / 1000}[meter.unit]


def rated_rate(key: str, engine: Engine) -> float | None:
    """The most a counter of an engine can count in an hour [its unit/h]; None where nothing is known."""
    if key == "revolution_counter":
        return engine.rated_speed_rpm * 60
    if key.endswith("running_hours"):
        return 1.0 / CEILING_FACTOR
    if key == "shaft_energy":
        return engine.rated_power_kw
    if key == "generator_energy":
        return engine.rated_electrical_kw or engine.rated_power_kw
    if key == "shaft_generator_energy" and engine.shaft_generator is not None:
        return engine.shaft_generator.rated_power_kw
    return None


def ceiling(rate_per_h: float, elapsed_h: float, last_place: float = 0.0) -> float:
    """The most a counter may have counted: 1.1 times the rated rate, plus one in the last place of its display."""
    return CEILING_FACTOR * rate_per_h * elapsed_h + last_place


def pooled(before: float, after: float, counter: Counter, *, ceiling_: float) -> CounterDifference:
    """The span over a wrong reading, from the reading before it to the one after: offered, never applied unasked.

    A wrong counter reading spoils two spans with opposite errors; their sum is right.
    """
    return difference(before, after, counter, ceiling=ceiling_)


def repairs(typed: float, last: float, counter: Counter, *, ceiling_: float) -> tuple[str, ...]:
    """Readings that a slip of the finger would explain: offered, never applied unasked.

    Two digits swapped, the last digit dropped, a digit too many, only the last digits typed, the decimal drum read as
    a whole unit.
    """
    text = f"{typed:.{counter.decimals}f}"
    candidates: list[float] = []
    signs = list(text)
    for index in range(len(signs) - 1):
        if signs[index].isdigit() and signs[index + 1].isdigit() and signs[index] != signs[index + 1]:
            swapped = [*signs]
            swapped[index], swapped[index + 1] = swapped[index + 1], swapped[index]
            candidates.append(float("".join(swapped)))
    candidates += [typed * 10 + digit for digit in range(10)] + [typed / 10.0]
    kept = len(text.partition(".")[0])
    if kept < counter.digits - counter.decimals:
        scale = 10.0**kept
        base = last - last % scale
        candidates += [base + typed, base + scale + typed]
    good = [
        value
        for value in candidates
        if 0 <= value < counter.modulus and 0 < value - last <= ceiling_ and value != typed
    ]
    return tuple(dict.fromkeys(f"{value:.{counter.decimals}f}" for value in sorted(good)))[:3]
