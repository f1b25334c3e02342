"""`logbook trend`: the excess since the last restoration, in words first."""

from __future__ import annotations

import argparse
import json

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = (
        "The excess of an engine over its own reference, in segments between restorations: the call in words, a robust"
        " slope with its interval, excess fuel so far."
    )
    parser.epilog = "example:\n  logbook trend my_ship ME"
    shared.plant_folder(parser)
    parser.add_argument("engine", metavar="ENGINE")
    shared.as_json(parser)


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    from logbook.answers.cautions import CAUTIONS, STATUS
    from logbook.command_line.plant_folder import opened

    with opened(arguments.plant, environment, environment.person(None), write=False) as (plant, book):
        entries = book.entries()
    if arguments.engine not in {engine.id for engine in plant.engines}:
        raise Refused(f"This plant has no engine '{arguments.engine}'.")
    from logbook.answers.trend import as_record, segment_line, trend

    answer = trend(plant, entries, arguments.engine)
    if arguments.json:
        environment.say(json.dumps(as_record(answer), default=str))
        return ExitCode.DONE
    for sentence in answer.sentences:
        environment.say(sentence)
    if answer.segments:
        environment.say("\nSegments (slope in points of efficiency per 1,000 running hours):")
        for segment in answer.segments:
            environment.say(f"  {segment_line(segment)}")
    environment.say(f"\n{CAUTIONS[0]} {CAUTIONS[11]} {STATUS}")
    return ExitCode.DONE if answer.segments else ExitCode.NO
