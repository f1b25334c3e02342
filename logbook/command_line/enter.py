"""`logbook enter`: one entry from the command line."""

from __future__ import annotations

import argparse
from typing import TYPE_CHECKING

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused

if TYPE_CHECKING:
    from logbook.plant.records import Plant


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = (
        "One reading of an engine (or of `plant`) from the command line. Keys as in the catalogue, abbreviated where"
        " unique; a cylinder row as one list in quotation marks. What is asked is said; --accept says that it is so."
    )
    parser.epilog = (
        "example:\n"
        "  logbook enter my_ship ME --at 2026-05-14T04:00+03:00 \\\n"
        "      engine_speed=98.2 shaft_power=9610 cylinder_exhaust_temperature='340 352 348 351 347 340'"
    )
    shared.plant_folder(parser)
    parser.add_argument("engine", metavar="ENGINE", help="an engine, or plant")
    parser.add_argument("values", metavar="key=value", nargs="+")
    parser.add_argument("--at", metavar="MOMENT", help="when it was read; ship time, with its offset or the plant's")
    parser.add_argument("--occasion", default="watch", help="watch, round, noon, full_set ... (watch)")
    parser.add_argument("--round", default="", help="the round it belongs to")
    parser.add_argument("--accept", action="store_true", help="accept what is asked about the values")
    shared.person(parser)


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    from logbook.book.entry import NewEntry, reading_body
    from logbook.command_line.plant_folder import opened
    from logbook.plant.walk import PLANT
    from logbook.reading.entering import Target
    from logbook.reading.round import field_for, understanding
    from logbook.reading.ship_time import TimeRefused, parse_moment
    from logbook.reading.value import OCCASIONS, Value

    if arguments.occasion not in OCCASIONS:
        raise Refused(f"'{arguments.occasion}' is no occasion; there are: {', '.join(OCCASIONS)}.")
    person = environment.person(arguments.person)
    with opened(arguments.plant, environment, person, write=True) as (plant, book):
        subjects = [*(engine.id for engine in plant.engines), PLANT]
        if arguments.engine not in subjects:
            raise Refused(f"This plant has no engine '{arguments.engine}'; there are: {', '.join(subjects)}.")
        taken, offset = environment.now().replace(microsecond=0), plant.utc_offset_min
        if arguments.at:
            try:
                taken, offset = parse_moment(arguments.at, plant.utc_offset_min)
            except TimeRefused as error:
                raise Refused(str(error)) from error
        last: dict[Target, Value] = {}
        last_at = {}
        before = book.last_reading_before(arguments.engine, taken)
        if before is not None:
            last_at[arguments.engine] = before.taken_utc
            last = {(arguments.engine, key): value for key, value in before.values().items()}
        understand = understanding(plant, last, last_at, taken)
        values: dict[Target, Value] = {}
        asked: list[str] = []
        for given in arguments.values:
            key, equals, text = given.partition("=")
            if not equals:
                raise Refused(f"'{given}' is not written as key=value.")
            item = field_for(plant, arguments.engine, _whole_key(plant, key))
            if item is None:
                raise Refused(f"{arguments.engine} has no place for '{key}'.")
            understood = understand(item, text, values)
            for finding in understood.findings:
                if finding.refused:
                    raise Refused(f"{key}: {finding.sentence}")
                asked.append(f"{key}: {finding.sentence}")
            keys = tuple(finding.key for finding in understood.findings)
            values |= {target: value.accepting(*keys) for target, value in understood.values.items()}
        for sentence in asked:
            environment.complain(sentence)
        if asked and not arguments.accept:
            raise Refused("Nothing was written. If it is so, say it again with --accept.")
        entry = book.append(
            NewEntry(
                kind="reading",
                subject=arguments.engine,
                taken_utc=taken,
                utc_offset_min=offset,
                person=person.name,
                identity_by=person.identity_by,
                round=arguments.round,
                body=reading_body(arguments.occasion, {key: value for (_, key), value in values.items()}),
            )
        )
    environment.say(f"Entry {entry.number}: {len(values)} values of {arguments.engine} at {taken:%Y-%m-%d %H:%M}Z.")
    return ExitCode.DONE


def _whole_key(plant: Plant, key: str) -> str:
    """The key that an unambiguous beginning means; the place stays."""
    import difflib

    name, dot, place = key.partition(".")
    if name in plant.points:
        return key
    matches = [known for known in plant.points if known.startswith(name)]
    if len(matches) == 1:
        return f"{matches[0]}{dot}{place}"
    if matches:
        raise Refused(f"'{name}' may be: {', '.join(matches)}.")
    near = difflib.get_close_matches(name, plant.points, n=1)
    raise Refused(f"There is no reading '{name}'.{f' Did you mean {near[0]}?' if near else ''}")
