"""`logbook figures`: one row of figures a reading."""

from __future__ import annotations

import argparse
import csv
import json

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = (
        "One row of figures for each reading of an engine, as CSV: fractions are 0 to 1, a figure that cannot be had is"
        " empty, and `flags` says why."
    )
    parser.epilog = (
        "example:\n"
        "  logbook figures my_ship ME --from 2026-05-01 --to 2026-05-31 > may.csv\n"
        "  logbook figures my_ship ME --explain 1042.excess_gap"
    )
    shared.plant_folder(parser)
    parser.add_argument("engine", metavar="ENGINE", nargs="?", help="only this engine, or the common meter of a group")
    parser.add_argument("--explain", metavar="ENTRY.FIGURE", help="unfold one figure to formula, readings and source")
    parser.add_argument("--last", type=int, metavar="COUNT", help="only the last ones")
    shared.span(parser)
    shared.as_json(parser)


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    from logbook.answers.cautions import CAUTIONS, STATUS
    from logbook.book.entry import utc_text
    from logbook.command_line.plant_folder import opened

    with opened(arguments.plant, environment, environment.person(None), write=False) as (plant, book):
        entries = book.entries()
    from logbook.answers import figures as answer

    engines = [*(engine.id for engine in plant.engines), *answer.groups(plant)]
    if arguments.engine is not None and arguments.engine not in engines:
        raise Refused(f"This plant has no engine '{arguments.engine}'; it has: {', '.join(engines)}.")
    since, until = shared.moment(arguments.since), shared.moment(arguments.until, end_of_day=True)
    rows = []
    for engine in [arguments.engine] if arguments.engine else engines:
        found = [
            row
            for row in answer.records(answer.figures(plant, entries, engine))
            if (since is None or row["at_utc"] >= utc_text(since))
            and (until is None or row["at_utc"] <= utc_text(until))
        ]
        rows += found[-arguments.last :] if arguments.last else found
    if arguments.explain:
        number, _, figure = arguments.explain.partition(".")
        row = next((row for row in rows if str(row["entry"]) == number), None)
        if row is None:
            raise Refused(f"There is no reading {number} among these; `logbook entries` lists the numbers.")
        if figure not in answer.explainable():
            raise Refused(f"'{figure}' cannot be unfolded; these can: {', '.join(answer.explainable())}.")
        for line in answer.explain(plant, entries, row, figure):
            environment.say(line)
        return ExitCode.DONE
    if arguments.json:
        for row in rows:
            environment.say(json.dumps(row, ensure_ascii=True, default=str))
        return ExitCode.DONE
    writer = csv.DictWriter(environment.out, answer.COLUMNS, lineterminator="\n")
    writer.writeheader()
    writer.writerows(rows)
    environment.complain(f"{len(rows)} rows. {CAUTIONS[0]} {STATUS}")
    return ExitCode.DONE
