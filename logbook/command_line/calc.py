"""`logbook calc`: one formula at the desk, with its steps and source."""

from __future__ import annotations

import argparse
import json
import math
from typing import TYPE_CHECKING, Any

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused

if TYPE_CHECKING:
    from logbook.command_line.calculations.record import Calculation

# Canonical units of keys that carry none in their name.
_CANONICAL = {
    "temperature": "degC", "density": "kg/m3", "viscosity": "mm2/s", "calorific value": "MJ/kg", "content": "%",
    "specific use": "g/kWh", "rotation": "rpm", "power": "kW",
}  # fmt: skip


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = "One formula at the desk. Without a NAME: the list; without inputs: what that one takes."
    parser.epilog = (
        "example:\n  logbook calc bound hot=565 cold=25\n\nA value may carry a unit (temperature=208degF); lists are"
        " separated by commas."
    )
    parser.add_argument("name", metavar="NAME", nargs="?")
    parser.add_argument("values", metavar="key=value", nargs="*")
    shared.as_json(parser)


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    import difflib

    from logbook.command_line.calculations import calculations

    known = calculations()
    if arguments.name is None:
        for one in known.values():
            environment.say(f"{one.name:<20} {' '.join(_keys(one))}")
        return ExitCode.DONE
    if arguments.name not in known:
        near = difflib.get_close_matches(arguments.name, known, n=1)
        hint = f" Did you mean {near[0]}?" if near else ""
        raise Refused(f"There is no formula '{arguments.name}'.{hint} The list: logbook calc")
    one = known[arguments.name]
    if not arguments.values:
        _explain(one, environment)
        return ExitCode.DONE
    inputs = _inputs(one, arguments.values)
    try:
        results = {key: _plain(value) for key, value in one.work(inputs).items()}
    except ValueError as error:
        raise Refused(f"{one.name}: {error}") from error
    if arguments.json:
        record = {
            "name": one.name,
            "inputs": inputs,
            "results": results,
            "steps": list(one.steps),
            "source": one.source,
        }
        environment.say(json.dumps(record))
        return ExitCode.DONE
    for step in one.steps:
        environment.say(f"  {step}")
    for key, value in results.items():
        environment.say(f"{key:<22} {_shown(value)} {one.gives.get(key, '')}".rstrip())
    if one.name == "readings-needed":
        extra = 2 if int(results["per_side"]) < 6 else 1
        environment.say(f"The normal formula is a little short: read {int(results['per_side']) + extra} a side.")
    environment.say(f"source: {one.source}")
    if one.caution:
        environment.say(one.caution)
    return ExitCode.DONE


def _keys(one: Calculation) -> list[str]:
    either = ["|".join(one.one_of)] if one.one_of else []
    optional = [f"[{key}]" for key in one.takes if key not in one.one_of]
    return [*one.needs, *either, *([f"{one.many}NAME"] if one.many else []), *optional]


def _explain(one: Calculation, environment: Environment) -> None:
    environment.say(f"{one.name} takes: {' '.join(_keys(one))}")
    environment.say(f"gives: {' '.join(one.gives)}")
    for step in one.steps:
        environment.say(f"  {step}")
    environment.say(f"source: {one.source}")
    environment.say(f"example:\n  logbook calc {one.example}")


def _inputs(one: Calculation, given: list[str]) -> dict[str, Any]:
    """The values by key, all that is wrong said at once."""
    import difflib

    inputs: dict[str, Any] = {}
    faults: list[str] = []
    for text in given:
        key, equals, value = text.partition("=")
        family = one.family(key)
        if not equals or not value:
            faults.append(f"'{text}' is not written as key=value")
        elif family is None:
            near = difflib.get_close_matches(key, [*one.needs, *one.takes], n=1)
            hint = f"; did you mean {near[0]}?" if near else ""
            faults.append(f"{one.name} takes no '{key}'{hint}")
        else:
            try:
                inputs[key] = _value(key, value, family)
            except ValueError as error:
                faults.append(str(error))
    missing = [key for key in one.needs if key not in inputs and not any(text.startswith(f"{key}=") for text in given)]
    if one.one_of and not any(key in inputs for key in one.one_of):
        missing.append(" or ".join(one.one_of))
    if missing:
        faults.append(f"missing: {', '.join(missing)}")
    if faults:
        raise Refused(f"{'; '.join(faults)}. See: logbook calc {one.name}")
    return inputs


def _value(key: str, text: str, family: str) -> Any:
    from logbook.command_line.calculations.record import LIST, NUMBER, TEXT

    if family == TEXT:
        return text
    if family == LIST:
        return [_number(key, part) for part in text.split(",")]
    if family == NUMBER:
        return _number(key, text)
    from logbook.plant.units import parse_quantity

    try:
        return _number(key, text)
    except ValueError:
        found = parse_quantity(text, family, canonical_unit=_CANONICAL.get(family, ""))
        if found.number is None:
            said = found.ask.sentence if found.ask else found.refusal
            raise ValueError(f"{key}: {said}") from None
        return found.number


def _number(key: str, text: str) -> float:
    try:
        number = float(text)
    except ValueError:
        raise ValueError(f"{key}: '{text}' is no number") from None
    if not math.isfinite(number):
        raise ValueError(f"{key}: '{text}' is no finite number")
    return number


def _plain(value: Any) -> Any:
    if isinstance(value, str) or value is None:
        return value
    if isinstance(value, list):
        return [_plain(part) for part in value]
    return int(value) if isinstance(value, int) else float(value)


def _shown(value: Any) -> str:
    if isinstance(value, list):
        return " ".join(_shown(part) for part in value)
    return f"{value:.6g}" if isinstance(value, float) else str(value)
