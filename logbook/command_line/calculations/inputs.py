"""`key=value` as typed -> numbers in the units that a formula takes. All that is wrong is said at once."""

from __future__ import annotations

import difflib
from collections.abc import Collection, Sequence
from dataclasses import replace

from logbook.command_line.calculations.record import FRACTION, LIST, WHOLE, WORD, Calculation, Key, Read, Request


def read(one: Calculation, given: Sequence[str]) -> Request:
    """The inputs of a formula; `faults` is empty where they can be worked with."""
    request = Request()
    typed: set[str] = set()
    for text in given:
        name, equals, value = text.partition("=")
        name, value = name.strip(), value.strip()
        if not equals or not name or not value:
            request.faults.append(f"'{text}' is not written as key=value")
            continue
        key = _key(one, name)
        if isinstance(key, str):
            request.faults.append(key)
            continue
        if name in typed:
            request.faults.append(f"{name} is given twice")
        typed.add(name)
        try:
            request.inputs[name] = _read(key, value)
        except ValueError as error:
            request.faults.append(f"{name}: {error}")
    request.faults += _missing_and_clashing(one, typed)
    return request


def _key(one: Calculation, name: str) -> Key | str:
    """The key of that name, or what is wrong with the name."""
    for key in one.keys:
        if key.name == name:
            return key
    if one.many and name.startswith(f"{one.many.name}."):
        word = name.removeprefix(f"{one.many.name}.")
        choices = one.many.choices() if one.many.choices else ()
        if word in choices:
            return replace(one.many, name=name)
        return f"{one.many.name}: '{word}' is none of: {'; '.join(choices)}{_near(word, choices)}"
    names = [*one.names, *([f"{one.many.name}.NAME"] if one.many else [])]
    return f"{one.name} takes no '{name}'{_near(name, names)}"


def _missing_and_clashing(one: Calculation, typed: Collection[str]) -> list[str]:
    faults = []
    missing = [key.name for key in one.keys if key.needed and key.name not in typed]
    chosen = [name for name in one.one_of if name in typed]
    if one.one_of and not chosen:
        missing.append(" or ".join(one.one_of))
    if one.many and not any(name.startswith(f"{one.many.name}.") for name in typed):
        missing.append(f"{one.many.name}.NAME, one or more")
    part = [name for name in one.together if name not in typed]
    if part and len(part) < len(one.together):
        faults.append(f"{' and '.join(one.together)} go together")
        missing += part
    if missing:
        faults.append(f"missing: {', '.join(missing)}")
    if len(chosen) > 1:
        faults.append(f"{' and '.join(chosen)} exclude each other: give one of them")
    return faults


def _near(word: str, known: Collection[str]) -> str:
    near = difflib.get_close_matches(word, known, n=1, cutoff=0.5)
    return f"; did you mean {near[0]}?" if near else ""


def _read(key: Key, text: str) -> Read:
    if key.kind == WORD:
        choices = key.choices() if key.choices else (text,)
        if text not in choices:
            raise ValueError(f"'{text}' is none of: {'; '.join(choices)}{_near(text, choices)}")
        return Read(text)
    if key.kind == LIST:
        return Read([_number(key, part.strip()).value for part in text.split(",")])
    found = _number(key, text)
    if key.kind == WHOLE:
        if found.value != int(found.value):
            raise ValueError(f"'{text}' is no whole number")
        return Read(int(found.value), found.remark)
    return found


def expected(key: Key) -> str:
    """What a key takes, in words."""
    from logbook.plant.units import spellings_of

    if key.family == FRACTION:
        return "a fraction from 0 to 1, or a number with %"
    if not key.family:
        number = WHOLE if key.kind == WHOLE else "number"
        return f"a {number} in {key.unit}" if key.unit else f"a {number}"
    others = [spelling for spelling in spellings_of(key.family, key.unit) if spelling != key.unit]
    return ", or with its unit: ".join([f"a number in {key.unit}", *([", ".join(others)] if others else [])])


def _number(key: Key, text: str) -> Read:
    """One number in the key's unit. Comma and point are both decimal; where a comma may part thousands, ask."""
    from logbook.plant.numbers import split_number
    from logbook.plant.units import convert

    found = split_number(text, ".")
    if found is None:
        raise ValueError(f"'{text}' is no number; expected {expected(key)}")
    number, unit = found[0], found[1].strip()
    if number.other is not None:
        raise ValueError(f"'{text}' is {number.value:.10g} or {number.other:.10g}: write it without the comma")
    if not unit:
        return Read(number.value)
    if not key.family:
        if key.unit and unit == key.unit:
            return Read(number.value)
        raise ValueError(f"'{unit}' is not understood; expected {expected(key)}")
    family, canonical = ("share", "%") if key.family == FRACTION else (key.family, key.unit)
    meant = convert(
        number.value, unit, family, canonical_unit=canonical, pressure_reference="absolute" if key.absolute else ""
    )
    if meant.ask:
        ways = " or ".join(f"{text.removesuffix(unit).strip()}{choice.spelling}" for choice in meant.ask.choices)
        raise ValueError(f"{meant.ask.sentence} Write {ways}")
    if meant.number is None:
        raise ValueError(meant.refusal.rstrip("."))
    value = meant.number / 100 if key.family == FRACTION else meant.number
    said = [] if value == number.value else [text]
    return Read(value, ", ".join([*said, *([meant.remark] if meant.remark else [])]))
