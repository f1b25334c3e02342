"""`logbook calc`: one formula at the desk, with its steps and source."""

from __future__ import annotations

import argparse
import json
import math
import textwrap
from typing import TYPE_CHECKING, Any

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused

if TYPE_CHECKING:
    from logbook.command_line.calculations.record import Answer, Calculation, Key, Read

_WIDTH = 80


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = "One formula at the desk. Without a NAME: the list; without inputs: what that one takes."
    parser.epilog = (
        "example:\n  logbook calc bound hot=565 cold=25\n\nA value may carry a unit (temperature=208degF); lists are"
        " separated by commas."
    )
    parser.add_argument("name", metavar="NAME", nargs="?", help="the formula; logbook calc alone lists them")
    parser.add_argument("values", metavar="key=value", nargs="*", help="its inputs; logbook calc NAME names them")
    shared.as_json(parser)


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    import difflib

    from logbook.command_line.calculations import calculations
    from logbook.command_line.calculations.inputs import read

    known = calculations()
    if arguments.json and not arguments.values:
        raise Refused("--json prints a result: give a NAME and its inputs. The list: logbook calc")
    if arguments.name is None:
        for one in known.values():
            _say(environment, f"{one.name:<20} {' '.join(_short(one))}", " " * 21)
        return ExitCode.DONE
    if arguments.name not in known:
        near = difflib.get_close_matches(arguments.name, known, n=1)
        hint = f" Did you mean {near[0]}?" if near else ""
        raise Refused(f"There is no formula '{arguments.name}'.{hint} The list: logbook calc")
    one = known[arguments.name]
    if not arguments.values:
        _explain(one, environment)
        return ExitCode.DONE
    request = read(one, arguments.values)
    if request.faults:
        raise Refused(f"{'; '.join(request.faults)}. See: logbook calc {one.name}")
    answer = _worked_out(one, {name: found.value for name, found in request.inputs.items()})
    if arguments.json:
        environment.say(_as_json(one, request.inputs, answer))
    else:
        _show(one, request.inputs, answer, environment)
    return ExitCode.DONE


def _worked_out(one: Calculation, inputs: dict[str, Any]) -> Answer:
    import warnings

    from logbook.command_line.calculations.record import Answer

    try:
        with warnings.catch_warnings():
            # Numbers that overflow on the way are refused, not warned of.
            warnings.simplefilter("error", RuntimeWarning)
            found = one.work(inputs)
    except ValueError as error:
        raise Refused(f"{one.name}: {error}") from error
    except (ArithmeticError, RuntimeWarning) as error:
        raise Refused(f"{one.name}: these numbers are too large or too small to work with: check them.") from error
    results = {key: _plain(value) for key, value in found.results.items()}
    if any(isinstance(value, float) and math.isnan(value) for value in results.values()):
        raise Refused(f"{one.name}: these numbers give no result: check them.")
    return Answer(results, found.steps, (*found.cautions, *one.cautions))


def _plain(value: Any) -> Any:
    """A number as Python's own; one without bound as None, which JSON has a word for."""
    if isinstance(value, list):
        return [_plain(part) for part in value]
    if value is None or isinstance(value, str | int):
        return value
    return None if math.isinf(value) else float(value)


def _as_json(one: Calculation, inputs: dict[str, Read], answer: Answer) -> str:
    record = {
        "name": one.name,
        "inputs": {name: found.value for name, found in inputs.items()},
        "results": answer.results,
        "steps": [*answer.steps, *(f"caution: {caution}" for caution in answer.cautions)],
        "source": one.source,
    }
    return json.dumps(record, allow_nan=False)


def _show(one: Calculation, inputs: dict[str, Read], answer: Answer, environment: Environment) -> None:
    from logbook.command_line.calculations.record import shown

    units = {key.name: key.unit for key in one.keys}
    wide = max(map(len, [*inputs, *answer.results]))
    environment.say(one.name)
    for name, found in inputs.items():
        unit = units.get(name, one.many.unit if one.many else "")
        remark = f" ({found.remark})" if found.remark else ""
        _say(environment, f"  {name:<{wide}}  {shown(found.value)} {unit}".rstrip() + remark, " " * (wide + 4))
    environment.say("steps")
    for step in answer.steps:
        _say(environment, f"  {step}", "    ")
    environment.say("results")
    for name, value in answer.results.items():
        unit = "" if value is None else one.gives[name]
        _say(environment, f"  {name:<{wide}}  {shown(value)} {unit}".rstrip(), " " * (wide + 4))
    _say(environment, f"source: {one.source}", "  ")
    for caution in answer.cautions:
        _say(environment, f"caution: {caution}", "  ")


def _short(one: Calculation) -> list[str]:
    needed = [key.name for key in one.keys if key.needed]
    either = ["|".join(one.one_of)] if one.one_of else []
    together = [f"[{' '.join(one.together)}]"] if one.together else []
    apart = (*one.one_of, *one.together)
    optional = [f"[{key.name}]" for key in one.keys if not key.needed and key.name not in apart]
    return [*needed, *either, *([f"{one.many.name}.NAME"] if one.many else []), *together, *optional]


def _explain(one: Calculation, environment: Environment) -> None:
    keys = [*one.keys, *([one.many] if one.many else [])]
    names = [f"{key.name}.NAME" if key is one.many else key.name for key in keys]
    wide = max(map(len, names))
    environment.say(f"{one.name} takes")
    for key, name in zip(keys, names, strict=True):
        _say(environment, f"  {name:<{wide}}  {_takes(one, key)}", " " * (wide + 4))
    environment.say("and gives")
    _say(environment, "  " + ", ".join(f"{name} [{unit}]" if unit else name for name, unit in one.gives.items()), "  ")
    environment.say("formula")
    for line in one.formula:
        _say(environment, f"  {line}", "    ")
    _say(environment, f"source: {one.source}", "  ")
    for caution in one.cautions:
        _say(environment, f"caution: {caution}", "  ")
    environment.say(f"example:\n  logbook calc {one.example}")


def _takes(one: Calculation, key: Key) -> str:
    from logbook.command_line.calculations.inputs import expected
    from logbook.command_line.calculations.record import LIST, WORD

    if key.kind == WORD:
        what = "one of: " + "; ".join(key.choices() if key.choices else ())
    elif key.kind == LIST:
        what = f"numbers{f' in {key.unit}' if key.unit else ''}, separated by commas"
    else:
        what = expected(key)
    parts = [what, key.says]
    if key is one.many:
        parts.append("one or more, of: " + ", ".join(key.choices() if key.choices else ()))
    elif key.name in one.one_of:
        parts.append(f"one of {' and '.join(one.one_of)} is needed")
    elif key.name in one.together:
        parts.append(f"together with {' and '.join(name for name in one.together if name != key.name)}, or neither")
    elif not key.needed:
        parts.append("may be left out")
    return "; ".join(part for part in parts if part)


def _say(environment: Environment, line: str, hanging: str) -> None:
    """A line of the answer, wrapped for a terminal of 80 columns."""
    environment.say(
        textwrap.fill(
            line, _WIDTH, subsequent_indent=hanging, break_long_words=False, break_on_hyphens=False,
            replace_whitespace=False,
        )
    )  # fmt: skip
