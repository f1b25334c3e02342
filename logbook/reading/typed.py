"""Text as people type it -> a value, or what is not understood about it. Nothing is mended silently."""

from __future__ import annotations

import re
from dataclasses import dataclass

from logbook.plant.catalogue import ReadingDefinition
from logbook.plant.units import UnitRefused, convert, normal, spellings
from logbook.reading.finding import NOT_UNDERSTOOD, OTHER_UNIT, ROW_LENGTH, UNIT_NOT_UNDERSTOOD, Finding
from logbook.reading.value import State, Value

# What paper logs write where there is no number.
_STATES = {
    "n/r": State.NOT_READ, "nr": State.NOT_READ, "n/a": State.NOT_READ, "not read": State.NOT_READ,
    "-": State.NOT_FITTED, "--": State.NOT_FITTED, "not fitted": State.NOT_FITTED,
    "s": State.STOPPED, "stop": State.STOPPED, "stopped": State.STOPPED,
    "s/b": State.STAND_BY, "sb": State.STAND_BY, "stby": State.STAND_BY, "stand-by": State.STAND_BY,
    "standby": State.STAND_BY,
    "def": State.DEFECTIVE, "defective": State.DEFECTIVE, "def.": State.DEFECTIVE,
}  # fmt: skip

ENGINE_STATES = {
    "running": "running", "run": "running", "r": "running", "on": "running",
    "stopped": "stopped", "stop": "stopped", "s": "stopped", "off": "stopped",
    "stand-by": "stand-by", "s/b": "stand-by", "sb": "stand-by", "standby": "stand-by", "stby": "stand-by",
}  # fmt: skip
_ON_OFF = {"on": "on", "1": "on", "yes": "on", "open": "on", "off": "off", "0": "off", "no": "off", "shut": "off"}

# A number: blanks or apostrophes between groups of three digits, comma or point before the decimals.
_NUMBER = re.compile(
    r"(?P<sign>[+-]?)(?P<whole>\d{1,3}(?:[ ' \u202f]\d{3})+|\d+)?(?:(?P<mark>[.,])(?P<part>\d*))?"
    r"(?P<power>[eE][+-]?\d{1,2})?(?P<rest>.*)",
    re.DOTALL,
)
_HOURS_MINUTES = re.compile(r"(\d+):([0-5]\d)")
_PLAIN = re.compile(r"[+-]?\d+(?:[.,]\d+)?")


@dataclass(frozen=True, slots=True)
class Habits:
    """What the plant's people do, from plant.toml."""

    decimal_comma: bool = False
    horsepower: str = ""
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
) -> Read:
    """The value behind a text, and what is to be asked. No value where it is not understood.

    `unit`: what the text is in where it carries none (a column of an import); else the point's canonical unit.
    """
    bare = text.strip()
    if not bare:
        return None, ()
    if not bare.isprintable():
        return None, (_not_understood(bare, point, "it holds signs that cannot be printed"),)
    if point.kind == "state":
        return _read_word(bare, point, habits, source)
    state = _read_state(bare, source)
    if state is not None:
        return state, ()
    return _read_number(bare, point, habits, source, unit, barometer_bar)


def _not_understood(text: str, point: ReadingDefinition, why: str = "") -> Finding:
    kind = f"a number in {point.unit}" if point.unit != "-" else "a number"
    said = f": {why}" if why else ""
    return Finding(
        NOT_UNDERSTOOD,
        f"'{text[:40]}' is not understood{said}. Type {kind}, or N/R, stopped, S/B, -, def.",
        refused=True,
    )


def _read_state(text: str, source: str) -> Value | None:
    word, _, reason = text.partition(" ")
    whole = _STATES.get(text.lower())
    if whole is not None:
        return Value(state=whole, text=text, source=source)
    state = _STATES.get(word.lower())
    if state is None or (word == "-" and reason[:1].isdigit()):
        return None
    return Value(state=state, reason=reason.strip(), text=text, source=source)


def _read_word(text: str, point: ReadingDefinition, habits: Habits, source: str) -> Read:
    lower = text.lower()
    if lower in ("n/r", "nr", "-", "def"):
        return Value(state=_STATES[lower], text=text, source=source), ()
    if point.key == "engine_state":
        words = ENGINE_STATES
    elif point.key == "operating_mode":
        words = {mode.lower(): mode for mode in habits.operating_modes}
        words |= {str(number): mode for number, mode in enumerate(habits.operating_modes, 1)}
    elif point.key in ("auxiliary_blower_state", "exhaust_bypass_state"):
        words = _ON_OFF
    else:
        return Value(word=text, text=text, source=source), ()
    word = words.get(lower)
    if word is None and point.key == "exhaust_bypass_state" and _PLAIN.fullmatch(text):
        word = text
    if word is None:
        choice = ", ".join(dict.fromkeys(words.values()))
        return None, (
            Finding(NOT_UNDERSTOOD, f"'{text[:40]}' is not understood; type one of: {choice}.", refused=True),
        )
    return Value(word=word, text=text, source=source), ()


def _read_number(
    text: str, point: ReadingDefinition, habits: Habits, source: str, unit: str, barometer_bar: float | None
) -> Read:
    clock = _HOURS_MINUTES.fullmatch(text)
    if clock and point.family == "hours":
        # 12345:36 is hours and minutes; 12345.36 is not.
        return (
            Value(number=int(clock[1]) + int(clock[2]) / 60, text=text, digits=len(clock[1]) + 2, source=source),
            (),
        )
    match = _NUMBER.fullmatch(text)
    if match is None or (match["whole"] is None and not match["part"]):
        return None, (_not_understood(text, point),)
    whole = re.sub(r"[^\d]", "", match["whole"] or "0")
    part = match["part"] or ""
    number = float(f"{match['sign']}{whole}.{part or '0'}{match['power'] or ''}")
    rest = match["rest"].strip()
    estimated = False
    if rest == "E" or rest.endswith(" E"):
        estimated, rest = True, rest[:-1].strip()
    if match["mark"] == "," and len(part) == 3 and match["whole"] and not rest and not habits.decimal_comma:
        # 12,500 is twelve and a half here and twelve thousand five hundred there.
        return None, (
            Finding(
                NOT_UNDERSTOOD,
                f"'{text}' may be {whole}.{part} or {whole}{part}: type it with a point, or without the comma.",
                refused=True,
                offers=(f"{whole}.{part}", f"{whole}{part}"),
            ),
        )
    digits = len((whole + part).lstrip("0")) or 1
    spelling = rest or unit
    findings: tuple[Finding, ...] = ()
    if spelling:
        try:
            number = convert(
                number, spelling, point.family, point.unit,
                pressure_reference=point.pressure_reference, barometer_bar=barometer_bar, horsepower=habits.horsepower,
            )  # fmt: skip
        except UnitRefused as refusal:
            return None, (Finding(UNIT_NOT_UNDERSTOOD, f"'{text[:40]}': {refusal}", refused=True),)
    else:
        number, findings = _bare(number, text, point)
    return Value(number=number, text=text, digits=digits, estimated=estimated, source=source), findings


def _bare(number: float, text: str, point: ReadingDefinition) -> tuple[float, tuple[Finding, ...]]:
    """A number without a unit where the usual other unit would show by its size."""
    family = point.family
    if family == "density" and 0.6 <= number <= 1.1:
        return number * 1000, (_said(f"{text} is read as {number * 1000:g} kg/m3 (kg/L typed)."),)
    if family == "calorific value" and 18000 <= number <= 51000:
        return number / 1000, (_said(f"{text} is read as {number / 1000:g} MJ/kg (kJ/kg typed)."),)
    asked = None
    if family == "barometer" and 700 <= number <= 800 and not _possible(number, point):
        asked = "mmHg"
    elif family == "barometer" and 25 <= number <= 32:
        asked = "inHg"
    elif family == "calorific value" and 9000 <= number <= 12500:
        asked = "kcal/kg"
    elif family == "content" and number > 20:
        asked = "ppm"
    if asked:
        sentence = f"{text} looks like {asked}: type {text} {asked} if it is; understood are {spellings(family)}."
        return number, (Finding(OTHER_UNIT, sentence, offers=(f"{text} {asked}",)),)
    return number, ()


def _said(sentence: str) -> Finding:
    return Finding(OTHER_UNIT, sentence)


def _possible(number: float, point: ReadingDefinition) -> bool:
    bounds = [span.bounds(None) for span in point.spans.values()]
    return any(bound is not None and bound[0] <= number <= bound[1] for bound in bounds[:1])


def split_row(text: str, habits: Habits = ORDINARY) -> list[str]:
    """The values of a row typed as one list.

    Separators: blank, semicolon, slash between numbers, comma with a blank. A comma with one digit behind it and no
    blank is decimal where that is the habit; `N/R` and `S/B` keep their slash.
    """
    guarded = re.sub(r"(?i)\b(n/r|s/b|n/a)\b", lambda found: found[0].replace("/", "\0"), text.strip())
    pieces = re.split(r"\s*;\s*|\s*/\s*|,\s+|\s+", guarded)
    if not habits.decimal_comma:
        pieces = [part for piece in pieces for part in _commas(piece)]
    return [piece.replace("\0", "/").rstrip(",") for piece in pieces if piece]


def _commas(piece: str) -> list[str]:
    """`340,352,348` without blanks is a list; `34,5` is one number."""
    parts = piece.split(",")
    return parts if len(parts) > 2 or (len(parts) == 2 and len(parts[1]) > 1) else [piece]


def read_row(
    text: str,
    targets: tuple[str, ...],
    point: ReadingDefinition,
    habits: Habits = ORDINARY,
) -> tuple[dict[str, Value], tuple[Finding, ...]]:
    """One value for each place, in order; `targets` are the `key.PLACE`s. A row of another length is refused."""
    pieces = split_row(text, habits)
    if len(pieces) == 1 and _read_state(pieces[0], "hand") is not None:
        # One state for the whole row.
        pieces = pieces * len(targets)
    if len(pieces) != len(targets):
        sentence = (
            f"{len(pieces)} values for {len(targets)} places. Type one for each;"
            " - or s keeps a place, N/R was not read."
        )
        return {}, (Finding(ROW_LENGTH, sentence, refused=True),)
    values: dict[str, Value] = {}
    findings: list[Finding] = []
    for target, piece in zip(targets, pieces, strict=True):
        value, asked = read_typed(piece, point, habits)
        if value is not None:
            values[target] = value
        place = target.rpartition(".")[2]
        findings += [
            Finding(item.key, f"{place}: {item.sentence}", item.refused, item.offers, target) for item in asked
        ]
    return values, tuple(findings)


def is_known_unit(spelling: str, family: str) -> bool:
    """Whether a spelling belongs to a family at all."""
    try:
        convert(1.0, spelling, family, "", barometer_bar=1.0)
    except UnitRefused:
        return False
    return bool(normal(spelling))
