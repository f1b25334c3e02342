"""Text as people type it -> a value, or what is not understood about it. Nothing is mended silently, nothing raises."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

from logbook.plant.catalogue import ReadingDefinition
from logbook.plant.numbers import Number, split_number
from logbook.plant.records import Counter
from logbook.plant.units import ASKED_WHEN_BARE, BARE, NO_ANSWERS, Ask, convert
from logbook.reading.finding import (
    COMMAS_IN_ROW,
    NOT_UNDERSTOOD,
    READ_AS,
    ROW_LENGTH,
    THOUSANDS_OR_DECIMAL,
    UNIT_UNKNOWN,
    Finding,
)
from logbook.reading.value import State, Value

# What paper logs write where there is no number.
_STATES = {
    "n/r": State.NOT_READ, "nr": State.NOT_READ, "n/a": State.NOT_READ, "not read": State.NOT_READ,
    "-": State.NOT_FITTED, "--": State.NOT_FITTED, "\u2013": State.NOT_FITTED, "not fitted": State.NOT_FITTED,
    "s": State.STOPPED, "stop": State.STOPPED, "stopped": State.STOPPED,
    "s/b": State.STAND_BY, "sb": State.STAND_BY, "stby": State.STAND_BY, "stand-by": State.STAND_BY,
    "standby": State.STAND_BY, "stand by": State.STAND_BY,
    "def": State.DEFECTIVE, "def.": State.DEFECTIVE, "defect": State.DEFECTIVE, "defective": State.DEFECTIVE,
}  # fmt: skip
_STATE_WORDS = "|".join(sorted(map(re.escape, _STATES), key=len, reverse=True))
_STATE_AND_REASON = re.compile(rf"({_STATE_WORDS})(?:\s*[:,(]\s*|\s+)([^\s\d].*?)\)?", re.IGNORECASE)

_ENGINE_STATES = {
    "running": "running", "run": "running", "r": "running", "on": "running",
    "stopped": "stopped", "stop": "stopped", "s": "stopped", "off": "stopped",
    "stand-by": "stand-by", "s/b": "stand-by", "sb": "stand-by", "standby": "stand-by", "stby": "stand-by",
}  # fmt: skip
_ON_OFF = {"on": "on", "1": "on", "yes": "on", "off": "off", "0": "off", "no": "off"}
_OPEN_SHUT = {"open": "open", "shut": "shut", "closed": "shut"}

_PLAIN = re.compile(r"-?[0-9]+(?:[.,](?:[0-9]{1,2}|[0-9]{4,}))?")
_HOURS_MINUTES = re.compile(r"([0-9]{1,7}):([0-5][0-9])")
_ESTIMATE = re.compile(r"(.*?)(?:(?<=[0-9])|\s+)E", re.DOTALL)
_BLANKS = str.maketrans("\t\u00a0\u2009\u202f", "    ")

# Rows.
_SLASHED = re.compile(r"(?i)(?<![a-z0-9])(n/r|s/b|n/a)(?![a-z0-9])")
_KEPT_SLASH = "\0"
_SEPARATOR = re.compile(r"\s*[;/]\s*|,\s+|\s+")
_TIGHT_COMMA = re.compile(r",")
_DECIMAL_COMMA = re.compile(r"(?<=[0-9]),(?=[0-9](?![0-9]))")
_BETWEEN_DIGITS = re.compile(r"(?<=[0-9]),(?=[0-9])")
_NUMBER_LIKE = re.compile(r"[-+.,0-9]*[0-9].*", re.DOTALL)


@dataclass(frozen=True, slots=True)
class Habits:
    """What the plant's people do, from plant.toml."""

    decimal_comma: bool = False
    horsepower: str = ""
    """what `hp` means: metric or mechanical; empty: ask"""
    operating_modes: tuple[str, ...] = ()


ORDINARY = Habits()
Read = tuple[Value | None, tuple[Finding, ...]]


def read_typed(
    text: str,
    point: ReadingDefinition,
    habits: Habits = ORDINARY,
    *,
    source: str = "hand",
    unit: str = "",
    barometer_bar: float | None = None,
    answers: Mapping[str, str] = NO_ANSWERS,
    counter: Counter | None = None,
) -> Read:
    """The value behind a text, and what is to be asked. No value where it is not understood; none for an empty text.

    `unit`: what the text is in where it carries none (a column of an import); else the point's canonical unit.
    `answers`: what was answered before at this point about its units. `counter`: how this counter counts; a number
    without a unit is in its counts, so many units each.
    """
    bare = text.strip()
    if not bare:
        return None, ()
    # The usual case by far: a bare number at a point that asks nothing.
    if (
        not (unit or answers or counter)
        and point.family != "state"
        and point.family not in ASKED_WHEN_BARE
        and len(bare) < 40
        and _PLAIN.fullmatch(bare)
    ):
        plain = bare.replace(",", ".")
        digits = len(plain.lstrip("-0.").replace(".", "")) or len(plain.partition(".")[2]) + 1
        return Value(float(plain), "", None, "", bare, digits, False, source), ()
    if not _is_printable(bare):
        return None, (_not_understood(bare, point, "it holds signs that cannot be printed"),)
    if point.family == "state":
        return _read_word(bare, point, habits, source)
    state = read_state(bare, source)
    if state is not None:
        return state, ()
    estimate = _ESTIMATE.fullmatch(bare)
    known = dict(answers)
    if habits.horsepower:
        known.setdefault("hp", habits.horsepower)
    if unit:
        known[BARE] = unit
    return _read_number(
        estimate[1].strip() if estimate else bare,
        point,
        "," if habits.decimal_comma else ".",
        known,
        barometer_bar,
        counter,
        estimated=estimate is not None,
        source=source,
    )


def _is_printable(text: str) -> bool:
    return text.translate(_BLANKS).isprintable()


def _not_understood(text: str, point: ReadingDefinition, why: str = "") -> Finding:
    kind = f"a number in {point.unit}" if point.unit not in ("-", "") else "a number"
    said = f": {why}" if why else ""
    return Finding(
        NOT_UNDERSTOOD,
        f"'{text[:40]}' is not understood{said}. Type {kind}, or N/R, stopped, S/B, -, def.",
        refused=True,
    )


def read_state(text: str, source: str = "hand") -> Value | None:
    """A state, with its reason behind it (`def probe broken`); None where the text is no state."""
    state = _STATES.get(text.lower())
    if state is not None:
        return Value(state=state, text=text, source=source)
    match = _STATE_AND_REASON.fullmatch(text)
    if match is None:
        return None
    return Value(state=_STATES[match[1].lower()], reason=match[2].strip(), text=text, source=source)


def _read_word(text: str, point: ReadingDefinition, habits: Habits, source: str) -> Read:
    """A word of a state point: engine, blowers, mode, bypass (which may also be a number), or a point of the plant."""
    lower = text.lower()
    numbers = point.unit not in ("-", "")
    if point.key == "engine_state":
        words = _ENGINE_STATES
    elif point.key == "operating_mode":
        words = {str(number): mode for number, mode in enumerate(habits.operating_modes, 1)}
        words |= {mode.lower(): mode for mode in habits.operating_modes}
    elif point.key == "auxiliary_blower_state":
        words = _ON_OFF
    elif numbers:
        words = _OPEN_SHUT
    else:
        words = {}
    word = words.get(lower)
    if word is not None:
        return Value(word=word, text=text, source=source), ()
    state = read_state(text, source)
    if state is not None:
        return state, ()
    if not words:
        return Value(word=text, text=text, source=source), ()
    if numbers and text[:1] in "-.,0123456789":
        return _read_number(
            text, point, "," if habits.decimal_comma else ".", NO_ANSWERS, None, None, estimated=False, source=source
        )
    choice = ", ".join(dict.fromkeys(words.values()))
    number = f", a number in {point.unit}" if numbers else ""
    sentence = f"'{text[:40]}' is not understood; type one of: {choice}{number}, N/R, -, def."
    return None, (Finding(NOT_UNDERSTOOD, sentence, refused=True),)


def _read_number(
    text: str,
    point: ReadingDefinition,
    decimal: str,
    answers: Mapping[str, str],
    barometer_bar: float | None,
    counter: Counter | None,
    *,
    estimated: bool,
    source: str,
) -> Read:
    if point.family == "hours" and (clock := _HOURS_MINUTES.fullmatch(text)):
        # 12345:36 is hours and minutes; 12345.36 is not.
        found = Number(int(clock[1]) + int(clock[2]) / 60, len(clock[1].lstrip("0")) + 2)
        rest = ""
    else:
        apart = split_number(text, decimal)
        if apart is None:
            return None, (_not_understood(text, point),)
        found, rest = apart[0], apart[1].strip()
    value = found.value
    asked: tuple[Finding, ...] = ()
    if found.other is not None:
        span = _widest_span(point)
        fits = [number for number in (value, found.other) if span and span[0] <= number <= span[1]]
        if len(fits) != 1:
            return None, (_thousands(text, value, found.other, rest, decimal),)
        value = fits[0]
        if value == found.other:
            sentence = f"'{text}' is read as {value:.10g}: with a decimal it is impossible here."
            asked = (Finding(THOUSANDS_OR_DECIMAL, sentence),)
    converted = convert(
        value,
        rest,
        point.family,
        pressure_reference=point.pressure_reference,
        canonical_unit=point.unit,
        answers=answers,
        barometer_bar=barometer_bar,
    )
    if converted.ask is not None:
        asked += (_asked(text, rest, converted.ask, refused=converted.number is None),)
    if converted.refusal:
        return None, (*asked, Finding(UNIT_UNKNOWN, f"'{text[:40]}': {converted.refusal}", refused=True))
    if converted.number is None:
        return None, asked
    if converted.remark:
        shown = f"{converted.number:.6g} {point.unit} {converted.reference}".rstrip()
        asked += (Finding(READ_AS, f"'{text}' is read as {shown} ({converted.remark})."),)
    number = converted.number
    if counter is not None and not rest and BARE not in answers:
        number *= counter.multiplier
    return Value(number=number, text=text, digits=found.digits, estimated=estimated, source=source), asked


def _thousands(text: str, part: float, whole: float, rest: str, decimal: str) -> Finding:
    """12,500 is twelve and a half here and twelve thousand five hundred there."""
    offers = (f"{part:.3f} {rest}".rstrip().replace(".", decimal), f"{whole:.0f} {rest}".rstrip())
    sentence = f"'{text[:40]}' may part thousands or decimals: type {offers[0]} or {offers[1]}."
    return Finding(THOUSANDS_OR_DECIMAL, sentence, refused=True, offers=offers)


def _asked(text: str, rest: str, ask: Ask, *, refused: bool) -> Finding:
    number = text[: len(text) - len(rest)].strip()
    offers = tuple(f"{number} {choice.spelling}" for choice in ask.choices)
    sentence = ask.sentence if not refused else f"{ask.sentence} Type {' or '.join(offers)}."
    return Finding(
        ask.finding, sentence, refused=refused, offers=offers,
        question=ask.key, answers=tuple(choice.answer for choice in ask.choices),
    )  # fmt: skip


def _widest_span(point: ReadingDefinition) -> tuple[float, float] | None:
    """What is possible on any kind of engine; None where it depends on the rating or nothing is said."""
    bounds = [span.bounds(None) for span in point.spans.values()]
    known = [bound for bound in bounds if bound is not None]
    if not known or len(known) < len(bounds):
        return None
    return min(least for least, _ in known), max(greatest for _, greatest in known)


@dataclass(frozen=True, slots=True)
class _Split:
    pieces: tuple[str, ...]
    mixed: bool
    """commas part values although something else does too, or although other commas are decimal"""


def _split(text: str, decimal: re.Pattern[str] | None) -> _Split:
    """The pieces of a row. Commas that `decimal` finds stay inside their number; all others part values."""
    guarded = _SLASHED.sub(lambda found: found[0].replace("/", _KEPT_SLASH), text.strip())
    chunks = _SEPARATOR.split(guarded.rstrip(",;/ \t"))
    pieces: list[str] = []
    decimals = tight = 0
    for chunk in chunks:
        marked = decimal.sub("\1", chunk) if decimal else chunk
        parts = _TIGHT_COMMA.split(marked)
        decimals += marked.count("\1")
        tight += len(parts) - 1
        pieces += [part.replace("\1", ",").replace(_KEPT_SLASH, "/") for part in parts]
    return _Split(tuple(pieces), tight > 0 and (decimals > 0 or len(chunks) > 1))


def split_row(text: str, habits: Habits = ORDINARY) -> list[str]:
    """The values of a row typed as one list; an empty text where a separator has nothing before it.

    Separators: blank, semicolon, slash, comma. A comma with just one digit behind it is decimal where that is the
    habit. `N/R` and `S/B` keep their slash.
    """
    return list(_split(text, _DECIMAL_COMMA if habits.decimal_comma else None).pieces)


def read_row(
    text: str,
    targets: Sequence[str],
    point: ReadingDefinition,
    habits: Habits = ORDINARY,
    *,
    answers: Mapping[str, str] = NO_ANSWERS,
) -> tuple[dict[str, Value], tuple[Finding, ...]]:
    """One value for each place, in order; `targets` are the `key.PLACE`s. A row of another length is refused.

    A unit may follow the last value and is then that of all; a state that stands alone is that of all. `E` behind a
    value marks it as estimated.
    """
    if not text.strip():
        return {}, ()
    if not _is_printable(text.strip()):
        return {}, (_not_understood(text.strip(), point, "it holds signs that cannot be printed"),)
    split = _split(text, _DECIMAL_COMMA if habits.decimal_comma else None)
    pieces = _for_places(split.pieces, len(targets))
    if len(pieces) != len(targets) or "" in pieces:
        return {}, (_wrong_length(text, pieces, targets),)
    findings: list[Finding] = []
    if split.mixed:
        shown = " ; ".join(pieces)
        findings.append(Finding(COMMAS_IN_ROW, f"Commas part values here: {shown}. With decimals, type points."))
    values: dict[str, Value] = {}
    for target, piece in zip(targets, pieces, strict=True):
        value, asked = read_typed(piece, point, habits, answers=answers)
        if value is not None:
            values[target] = value
        place = _place(target)
        findings += [replace(item, sentence=f"{place}: {item.sentence}", target=target) for item in asked]
    return values, tuple(findings)


def _place(target: str) -> str:
    return target.partition(".")[2] or target


def _for_places(pieces: Sequence[str], places: int) -> list[str]:
    """The pieces with marks and a unit put to their values, and one state for all given to each."""
    joined: list[str] = []
    for piece in pieces:
        if piece == "E" and joined:
            joined[-1] += " E"
        else:
            joined.append(piece)
    last = joined[-1]
    if len(joined) == places + 1 and last and not _NUMBER_LIKE.fullmatch(last) and read_state(last) is None:
        return [_with_unit(piece, last) for piece in joined[:-1]]
    if len(joined) == 1 and read_state(last) is not None:
        return joined * places
    return joined


def _with_unit(piece: str, unit: str) -> str:
    if not _NUMBER_LIKE.fullmatch(piece):
        return piece
    estimate = _ESTIMATE.fullmatch(piece)
    return f"{estimate[1]} {unit} E" if estimate else f"{piece} {unit}"


def _wrong_length(text: str, pieces: Sequence[str], targets: Sequence[str]) -> Finding:
    empty = [_place(target) for target, piece in zip(targets, pieces, strict=False) if not piece]
    count = sum(1 for piece in pieces if piece)
    sentence = f"{count} values for {len(targets)} places"
    if empty and len(pieces) == len(targets):
        sentence += f": {', '.join(empty)} has none"
    sentence += ". Type one for each; - or s keeps a place, N/R was not read."
    # The other reading of the commas, where that one fits.
    offers: tuple[str, ...] = ()
    if "," in text:
        for pattern in (_BETWEEN_DIGITS, None):
            other = _for_places(_split(text, pattern).pieces, len(targets))
            if len(other) == len(targets) and "" not in other and list(other) != list(pieces):
                offers = (" ".join(piece.replace(",", ".") for piece in other),)
                sentence += f" Perhaps {offers[0]}?"
                break
    return Finding(ROW_LENGTH, sentence, refused=True, offers=offers)
