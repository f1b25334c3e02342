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
POOREST_GAS_KWH_M3 = 6.0
"""Heat of a lean gas, and the least efficiency a running engine has: both make the gas ceiling generous."""
LEAST_EFFICIENCY = 0.25
CIRCULATION = 8.0
"""A supply or return meter may pass so many times the consumption."""

PASSED_ZERO, RESET, WRONG = "passed zero", "reset", "reading was wrong"
"""What a person may answer to an open question; an exchange is an entry of its own."""


@dataclass(frozen=True, slots=True)
class Exchange:
    """The counter was exchanged in between: closing reading of the old one, opening reading of the new one."""

    closing: float
    opening: float
    new: Counter | None = None
    """how the new one counts; None: as the old one did"""


@dataclass(frozen=True, slots=True)
class CounterDifference:
    """`used` [unit of the counter], None while a question is open or where a person answered that it is not known."""

    used: float | None
    marks: tuple[str, ...] = ()
    """keys of the flags that go with it: passed_zero, meter_exchanged, pooled_span, counter_open_question"""
    question: str = ""
    """why there is no difference; empty: nothing is asked"""

    @property
    def passed_zero(self) -> bool:
        return "passed_zero" in self.marks


def difference(
    old: float,
    new: float,
    counter: Counter,
    *,
    ceiling: float | None,
    exchanges: Iterable[Exchange] = (),
    answer: str = "",
    times: int = 1,
) -> CounterDifference:
    """What was counted from `old` to `new`, all in the unit of the counter.

    `ceiling`: the most that can have been counted; None where no rate is known (then nothing but a forward step or an
    answer gives a difference). `answer`: what a person said to the open question of this span; `times`: how often it
    passed zero in it, 0 where the person says that it did not.
    """
    if answer in (RESET, WRONG):
        return CounterDifference(None)
    marks: list[str] = []
    total = 0.0
    for exchange in exchanges:
        if "meter_exchanged" not in marks:
            marks.append("meter_exchanged")
        part = _step(old, exchange.closing, counter, ceiling)
        if part.used is None:
            return _open(f"up to the closing reading {exchange.closing:.10g}: {part.question}")
        total += part.used
        marks += part.marks
        old, counter = exchange.opening, exchange.new or counter
    if answer == PASSED_ZERO:
        used = total + new - old + times * counter.modulus
        return CounterDifference(used, _unique([*marks, *(["passed_zero"] if times else [])]))
    last = _step(old, new, counter, ceiling)
    if last.used is None:
        return last
    total += last.used
    if ceiling is not None and total > ceiling:
        return _open(_too_much(total, ceiling))
    return CounterDifference(total, _unique([*marks, *last.marks]))


def _unique(marks: list[str]) -> tuple[str, ...]:
    return tuple(dict.fromkeys(marks))


def _open(question: str) -> CounterDifference:
    return CounterDifference(None, ("counter_open_question",), question)


def _too_much(used: float, ceiling: float) -> str:
    return f"{used:.10g} more is over what can have been counted ({ceiling:.6g})"


def _step(old: float, new: float, counter: Counter, ceiling: float | None) -> CounterDifference:
    """One forward step, or one over zero, of one counter."""
    step = new - old
    if ceiling is not None and ceiling >= counter.modulus:
        return _open(f"the span is so long that it may have passed zero ({counter.modulus:.10g}) more than once")
    if step >= 0:
        if ceiling is None or step <= ceiling:
            return CounterDifference(step)
        return _open(_too_much(step, ceiling))
    over_zero = step + counter.modulus
    if old >= TOP_PART * counter.modulus and ceiling is not None and over_zero <= ceiling:
        return CounterDifference(over_zero, ("passed_zero",))
    return _open(f"{-step:.10g} less than before: passed zero, exchanged, reset, or was a reading wrong?")


def pooled(
    before: float,
    doubtful: float,
    after: float,
    counter: Counter,
    *,
    ceiling_before: float,
    ceiling_after: float,
) -> CounterDifference | None:
    """The span over a doubtful reading, from the one before it to the one after: offered, never applied unasked.

    A wrong counter reading spoils two spans with opposite errors; their sum is right. None where neither of the two
    has a question, or the sum has one too.
    """
    alone = (
        difference(before, doubtful, counter, ceiling=ceiling_before),
        difference(doubtful, after, counter, ceiling=ceiling_after),
    )
    together = difference(before, after, counter, ceiling=ceiling_before + ceiling_after)
    if together.used is None or not any(span.question for span in alone):
        return None
    return CounterDifference(together.used, ("pooled_span", *together.marks))


def rated_rate_of_meter(meter: Meter, engines: Iterable[Engine]) -> float:
    """The most a fuel, gas or energy meter can pass in an hour [its unit/h]: its own entry, or from rated power."""
    if meter.rated_rate_per_h is not None:
        return meter.rated_rate_per_h
    power_kw = sum(engine.rated_power_kw for engine in engines)
    if meter.unit in ("kWh", "MWh"):
        return power_kw / (1000 if meter.unit == "MWh" else 1)
    if meter.key == "gas_meter" and meter.unit not in ("kg", "t"):
        return power_kw / LEAST_EFFICIENCY / POOREST_GAS_KWH_M3
    kg_h = power_kw * GENEROUS_CONSUMPTION_KG_KWH * CIRCULATION
    litres_h = kg_h / LIGHTEST_FUEL_KG_L
    return {"kg": kg_h, "t": kg_h / 1000, "m3": litres_h / 1000}.get(meter.unit, litres_h)


def rated_rate(key: str, engine: Engine) -> float | None:
    """The most a counter of an engine can count in an hour [its unit/h]; None where nothing is known."""
    if key == "revolution_counter":
        return engine.rated_speed_rpm * 60
    if key.endswith("running_hours"):
        # Hours never exceed the elapsed time: no tenth on top.
        return 1.0 / CEILING_FACTOR
    if key == "shaft_energy":
        return engine.rated_power_kw
    if key == "generator_energy":
        return engine.rated_electrical_kw or engine.rated_power_kw
    if key == "shaft_generator_energy" and engine.shaft_generator is not None:
        return engine.shaft_generator.rated_power_kw
    return None


def last_place(counter: Counter) -> float:
    """One in the last place of the display [unit of the counter]: two readings of it are off by up to this much."""
    return counter.multiplier * 10.0**-counter.decimals


def ceiling(rate_per_h: float, elapsed_h: float, allowance: float = 0.0) -> float:
    """The most a counter may have counted: 1.1 times the rated rate, plus an allowance for the last place shown."""
    return CEILING_FACTOR * rate_per_h * elapsed_h + allowance


_DROPPED = "a last digit was left out, and the one put here is a guess"


@dataclass(frozen=True, slots=True)
class Repair:
    """A reading that a slip of the finger would explain: offered, never applied unasked."""

    text: str
    """as it would be typed: counts of the display, in the counter's own places"""
    slip: str


def repairs(
    typed: float, last: float, counter: Counter, *, ceiling_: float, typed_digits: int = 0
) -> tuple[Repair, ...]:
    """What was perhaps meant by a reading that cannot follow the last one; all in the unit of the counter.

    `typed_digits`: how many digits were typed, leading noughts and all; 0: as many as the number has.
    """
    scale = 10.0**counter.decimals / counter.multiplier
    counts, last_counts, most = round(typed * scale), round(last * scale), ceiling_ * scale
    digits = str(counts)
    found: list[tuple[int, str]] = [
        (int(digits[:index] + digits[index + 1] + digits[index] + digits[index + 2 :]), "two digits swapped")
        for index in range(len(digits) - 1)
    ]
    found += _completed(counts, last_counts, typed_digits or len(digits), counter.digits)
    if counter.decimals:
        found.append((counts // 10**counter.decimals, "the red drum is a decimal"))
    # Which digit was dropped nobody knows: the middle one, and the mark of an estimate with it.
    found.append((counts * 10 + 5, _DROPPED))
    kept: dict[int, str] = {}
    for value, slip in found:
        if value != counts and 0 <= value < 10**counter.digits and 0 < value - last_counts <= most:
            kept.setdefault(value, slip)
    return tuple(
        Repair(_as_shown(value, counter) + (" E" if slip == _DROPPED else ""), slip) for value, slip in kept.items()
    )


def _as_shown(counts: int, counter: Counter) -> str:
    """Counts as the display shows them, exact however many digits it has."""
    if not counter.decimals:
        return str(counts)
    text = str(counts).zfill(counter.decimals + 1)
    return f"{text[: -counter.decimals]}.{text[-counter.decimals :]}"


def _completed(counts: int, last_counts: int, typed_digits: int, digits: int) -> list[tuple[int, str]]:
    """Only the last digits typed: the leading ones of the last reading, or one more of them."""
    if typed_digits >= digits:
        return []
    place = 10**typed_digits
    base = last_counts - last_counts % place
    return [(base + counts, "leading digits left out"), (base + place + counts, "leading digits left out")]
