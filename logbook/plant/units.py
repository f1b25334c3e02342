"""Units as people type them: closed lists of spellings, one for each family of quantities (units.csv).

No open vocabulary is asked, because a general unit library reads trade shorthand as something else (PS as petasiemens).
Factors are plain floats; the tests prove every one of them against pint.
"""

from __future__ import annotations

import csv
import math
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache, partial
from importlib.resources import files
from types import MappingProxyType

from logbook.plant.numbers import split_number

NO_ANSWERS: Mapping[str, str] = MappingProxyType({})
BARE = "bare number"
"""Key of the answer that says in which unit numbers without a unit are typed at a point."""

_SUPERSCRIPTS = "\u00b2\u00b3\u00b9\u207b"
# Blanks, ^, points, degree signs, multiplication dots and brackets say nothing.
_DROPPED = " \t\u00a0\u2009\u202f^.\u00b0\u00ba\u02da\u00b7\u22c5()[]"
_FOLDED = str.maketrans(
    dict.fromkeys(_DROPPED)
    | dict(zip(_SUPERSCRIPTS, "231-", strict=True))
    | {"\u2103": "C", "\u2109": "F", "\u2212": "-", "_": None}
)
_METERED = ("volume", "gas volume", "mass", "energy")
_ABSOLUTE_FAMILIES = {"pressure": 1.0, "small pressure": 1000.0, "barometer": 1000.0}
"""base units in one bar"""
_REFUSALS = {
    "higher": "A higher calorific value is never mixed with lower ones: enter the lower (net) value.",
    "seconds": "Seconds (Redwood, Saybolt) need a table that is not kept here: enter cSt from the analysis.",
}
_OTHER_BASIS = {
    "gas volume": "Gas at the meter's own condition needs the meter's pressure and temperature to become Nm3 or Sm3",
    "flow": "Mass needs the density to become volume, and volume to become mass",
    "specific use": "This needs density and calorific value to become g/kWh",
    "content": "By mass and by volume are not the same",
}
_WATER_60F_KG_M3 = 999.016


@dataclass(frozen=True, slots=True)
class Choice:
    """One answer to a question about a unit."""

    answer: str
    spelling: str
    """a spelling that leaves no question open"""
    number: float | None
    """what was typed, so understood [canonical unit]; None: another question, or a refusal, follows"""


@dataclass(frozen=True, slots=True)
class Ask:
    """What a person has to say once for a point; the answer is kept with the point under `key`."""

    key: str
    finding: str
    """key of the finding this makes, e.g. `looks_like_fahrenheit`"""
    sentence: str
    choices: tuple[Choice, ...]


@dataclass(frozen=True, slots=True)
class Conversion:
    """What a number with its unit means. `number` is None where it has no meaning yet."""

    number: float | None
    """[canonical unit of the point]"""
    unit: str = ""
    """the unit understood"""
    reference: str = ""
    """gauge, absolute or differential: what the number is now; empty: not a pressure"""
    remark: str = ""
    """what has to be said about it, for brackets behind the number"""
    ask: Ask | None = None
    refusal: str = ""
    """a sentence that says what would be understood"""


@dataclass(frozen=True, slots=True)
class _Unit:
    """A row of the list: a unit, a question or a refusal."""

    name: str
    factor: float
    zero: float
    reference: str
    basis: str
    remark: str
    ask: str
    choices: tuple[tuple[str, str], ...]
    refusal: str

    def to_base(self, number: float) -> float:
        if self.name == "API":
            # Specific gravity 60/60 degF from degrees API, by their definition.
            return math.inf if number <= -131.5 else 141.5 / (number + 131.5) * _WATER_60F_KG_M3
        return (number - self.zero) * self.factor

    def from_base(self, number: float) -> float:
        if self.name == "API":
            return 141.5 * _WATER_60F_KG_M3 / number - 131.5
        return number / self.factor + self.zero


@dataclass(frozen=True, slots=True)
class _Family:
    base: str
    """the unit in which the factors are given"""
    units: Mapping[str, _Unit]
    """by normalised spelling"""
    shown: tuple[str, ...]
    """spellings as people write them, for sentences"""


def normalised(spelling: str) -> str:
    """A spelling without what does not matter: blanks, ^, points, degree signs, brackets and case."""
    return spelling.translate(_FOLDED).lower()


def _product(text: str) -> float:
    """`0.45359237*9.80665/1000` as a number: the factors of the file stand there as they are defined."""
    value = 1.0
    for term in text.split("*"):
        first, *divisors = (float(number) for number in term.split("/"))
        value *= first
        for divisor in divisors:
            value /= divisor
    return value


@cache
def _families() -> Mapping[str, _Family]:
    bases: dict[str, str] = {}
    units: dict[str, dict[str, _Unit]] = {}
    shown: dict[str, list[str]] = {}
    lines = files("logbook.plant").joinpath("units.csv").read_text(encoding="utf-8").splitlines()
    for row in csv.DictReader(lines):
        family = row["family"]
        bases.setdefault(family, row["unit"])
        unit = _Unit(
            name=row["unit"],
            factor=_product(row["factor"]) if row["factor"] else 1.0,
            zero=float(row["zero"] or 0.0),
            reference=row["reference"],
            basis=row["basis"],
            remark=row["remark"],
            ask=row["ask"],
            choices=tuple(
                (answer.strip(), spelling.strip())
                for answer, _, spelling in (choice.partition("=") for choice in row["choices"].split(";") if choice)
            ),
            refusal=_REFUSALS.get(row["refusal"], ""),
        )
        known = units.setdefault(family, {})
        spellings = [row["unit"] or row["spellings"].split()[0], *row["spellings"].split()]
        for spelling in spellings:
            known.setdefault(normalised(spelling), unit)
        # With brackets are the answers to questions; what people write first is the shorter one.
        if not unit.refusal and "(" not in spellings[0]:
            shown.setdefault(family, []).append(spellings[0])
    return {family: _Family(base, units[family], tuple(shown[family])) for family, base in bases.items()}


def spellings_of(family: str, canonical_unit: str = "") -> tuple[str, ...]:
    """The spellings that a family understands, one for each unit; the canonical unit alone where it has no list."""
    found = _families().get(_family_for(family, canonical_unit))
    return found.shown if found else ((canonical_unit,) if canonical_unit not in ("", "-") else ())


@cache
def _family_for(family: str, canonical_unit: str) -> str:
    """A meter that counts kg, Nm3 or kWh takes the spellings of what it counts, whatever its point usually counts."""
    if family in _METERED and canonical_unit:
        wanted = normalised(canonical_unit)
        for candidate in (family, *_METERED):
            if wanted in _families()[candidate].units:
                return candidate
    return family


@cache
def _find(spelling: str, family: str, canonical_unit: str) -> tuple[_Unit | None, _Unit | None]:
    """The unit that a spelling means in a family, and the family's own row of the canonical unit."""
    found = _families().get(_family_for(family, canonical_unit))
    if found is None:
        return None, None
    canonical = found.base if canonical_unit in ("", "-") else canonical_unit
    return found.units.get(normalised(spelling)), found.units.get(normalised(canonical))


def convert(
    number: float,
    spelling: str,
    family: str,
    *,
    pressure_reference: str = "",
    canonical_unit: str = "",
    answers: Mapping[str, str] = NO_ANSWERS,
    barometer_bar: float | None = None,
    span: tuple[float, float] | None = None,
) -> Conversion:
    """A typed number in the canonical unit of its point.

    `spelling` may be empty: then the number is in the canonical unit, or in the unit that `answers` names for bare
    numbers; a bare number that looks like another unit is asked about. `canonical_unit` is the base unit of the family
    if left out. `answers` holds what was answered before for this point, by key of the question. `span` holds the least
    and greatest possible number [canonical unit], to tell a degF gauge from a hot one. Nothing raises: an unknown
    spelling is a refusal that lists the known ones.
    """
    if not spelling or not normalised(spelling):
        remembered = answers.get(BARE, "")
        if not remembered:
            return _bare(number, family, canonical_unit, pressure_reference, span)
        spelling = remembered
    unit, canonical = _find(spelling, family, canonical_unit)
    if unit is None:
        if canonical_unit and normalised(spelling) == normalised(canonical_unit):
            return Conversion(number, canonical_unit, pressure_reference)
        return Conversion(None, refusal=_unknown(spelling, family, canonical_unit))
    if unit.refusal:
        return Conversion(None, unit.name, refusal=unit.refusal)
    if unit.ask:
        meaning = partial(
            convert,
            number,
            family=family,
            pressure_reference=pressure_reference,
            canonical_unit=canonical_unit,
            answers=answers,
            barometer_bar=barometer_bar,
        )
        meant = dict(unit.choices).get(answers.get(unit.ask, ""))
        if meant is not None:
            return meaning(meant)
        choices = tuple(Choice(answer, meant, meaning(meant).number) for answer, meant in unit.choices)
        return Conversion(None, ask=_question(number, spelling, unit.ask, choices, canonical_unit or _base(family)))
    if canonical is None:
        return Conversion(None, refusal=_unknown(spelling, family, canonical_unit))
    if unit.basis and canonical.basis and unit.basis != canonical.basis:
        reason = _OTHER_BASIS[_family_for(family, canonical_unit)]
        return Conversion(None, unit.name, refusal=f"{reason}: enter it in {canonical.name}.")
    value = number if unit is canonical else canonical.from_base(unit.to_base(number))
    if not math.isfinite(value):
        return Conversion(None, unit.name, refusal=f"{number:g} {spelling} is no possible number.")
    if family in _ABSOLUTE_FAMILIES:
        return _referred(value, unit, canonical, family, pressure_reference, barometer_bar)
    return Conversion(value, unit.name, remark=unit.remark)


def _referred(
    value: float, unit: _Unit, canonical: _Unit, family: str, wanted: str, barometer_bar: float | None
) -> Conversion:
    """A pressure brought to the reference of its point: gauge or absolute is part of the reading's definition."""
    typed = unit.reference
    if not typed or not wanted or typed == wanted or (wanted == "differential" and typed == "gauge"):
        return Conversion(value, unit.name, wanted or typed, unit.remark)
    if wanted == "differential":
        return Conversion(
            None, unit.name, refusal=f"A differential pressure is not absolute: enter it in {canonical.name}."
        )
    if barometer_bar is None:
        return Conversion(
            None,
            unit.name,
            refusal=f"{unit.name} is {typed} and this point is {wanted} pressure: enter the barometer first, "
            f"or {'what the gauge shows' if wanted == 'gauge' else 'the absolute pressure'} in {canonical.name}.",
        )
    barometer = barometer_bar * _ABSOLUTE_FAMILIES[family] / canonical.factor
    moved = value - barometer if typed == "absolute" else value + barometer
    return Conversion(moved, unit.name, wanted, f"{typed} to {wanted} with the barometer at {barometer_bar:g} bar")


def _base(family: str) -> str:
    found = _families().get(family)
    return found.base if found else ""


def _unknown(spelling: str, family: str, canonical_unit: str) -> str:
    known = spellings_of(family, canonical_unit)
    if not known:
        return f"'{spelling}' is not understood: this point has no unit, enter the number alone."
    return f"'{spelling}' is no unit of this point. Understood: {', '.join(known)}, or the number alone."


def _question(number: float, spelling: str, key: str, choices: tuple[Choice, ...], unit: str) -> Ask:
    meanings = " or ".join(
        choice.answer if choice.number is None else f"{choice.answer} ({choice.number:.5g} {unit})"
        for choice in choices
    )
    return Ask(key, "unit_asked", f"{number:.10g} {spelling}: {meanings}?", choices)


# What a number without a unit looks like, by family: other unit, least, greatest, key of the finding.
_LOOKS = {
    "barometer": (("mmHg", 700.0, 800.0, "looks_like_mmhg"), ("inHg", 25.0, 32.0, "looks_like_inhg")),
    "calorific value": (
        ("kcal/kg", 9_000.0, 12_500.0, "looks_like_kcal"),
        ("kJ/kg", 18_000.0, 51_000.0, "read_as_kj_kg"),
    ),
    "density": (("kg/L", 0.7, 1.1, "read_as_kg_l"),),
}
# The same, for what only shows against the span of the point.
_LOOKS_ABOVE_SPAN = {"temperature": ("degF", "looks_like_fahrenheit"), "content": ("ppm", "looks_like_ppm")}
_UNDERSTOOD = ("read_as_kj_kg", "read_as_kg_l")
"""Not to be doubted: taken as the other unit, and said."""
ASKED_WHEN_BARE = frozenset(_LOOKS)
"""Families in which a number without a unit may look like another unit, whatever the span of the point."""


def _bare(
    number: float, family: str, canonical_unit: str, reference: str, span: tuple[float, float] | None
) -> Conversion:
    """A number without a unit: in the canonical unit, with a question where it looks like another."""
    unit = canonical_unit or _base(family)
    if family not in ASKED_WHEN_BARE and (span is None or family not in _LOOKS_ABOVE_SPAN):
        return Conversion(number, unit, reference)
    looks = [(other, key) for other, least, greatest, key in _LOOKS.get(family, ()) if least <= number <= greatest]
    if family in _LOOKS_ABOVE_SPAN:
        other, key = _LOOKS_ABOVE_SPAN[family]
        inside = convert(number, other, family, canonical_unit=canonical_unit).number
        if span and inside is not None and number > span[1] >= inside >= span[0]:
            looks.append((other, key))
    if not looks:
        return Conversion(number, unit, reference)
    other, key = looks[0]
    otherwise = convert(number, other, family, canonical_unit=canonical_unit, pressure_reference=reference).number
    if key in _UNDERSTOOD:
        return Conversion(otherwise, other, remark=f"taken as {other}")
    choices = (Choice(unit, unit, number), Choice(other, other, otherwise))
    sentence = f"{number:.10g} looks like {other} ({otherwise:.5g} {unit}). Is it {unit} or {other}?"
    return Conversion(number, unit, reference, ask=Ask(BARE, key, sentence, choices))


def parse_quantity(
    text: str,
    family: str,
    *,
    pressure_reference: str = "",
    canonical_unit: str = "",
    answers: Mapping[str, str] = NO_ANSWERS,
    barometer_bar: float | None = None,
    decimal: str = ".",
) -> Conversion:
    """`208degF`, `12,5 MW` or `0.85`: number and unit split and converted, as `convert` does."""
    found = split_number(text.strip(), decimal)
    if found is None:
        known = ", ".join(spellings_of(family, canonical_unit))
        return Conversion(
            None, refusal=f"'{text}' is no number{f' with a unit of this list: {known}' if known else ''}."
        )
    number, unit = found
    if number.other is not None:
        return Conversion(
            None,
            refusal=f"'{text}' is {number.value:.10g} or {number.other:.10g}: leave out the sign that parts thousands, "
            "or write one more decimal.",
        )
    return convert(
        number.value,
        unit.strip(),
        family,
        pressure_reference=pressure_reference,
        canonical_unit=canonical_unit,
        answers=answers,
        barometer_bar=barometer_bar,
    )
