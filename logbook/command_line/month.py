"""`logbook month`: the monthly summary as text, Markdown or CSV."""

from __future__ import annotations

import argparse

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = "The monthly performance summary with the figures that exist, as text, Markdown or CSV."
    parser.epilog = "example:\n  logbook month my_ship 2026-05 --format markdown > may.md"
    shared.plant_folder(parser)
    parser.add_argument("month", metavar="YYYY-MM", nargs="?", help="the month, by the plant's clock")
    parser.add_argument("--format", default="text", choices=["text", "markdown", "csv"], help="in which form")
    shared.span(parser)


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    from logbook.command_line.plant_folder import opened

    if (arguments.month is None) == (arguments.since is None or arguments.until is None):
        raise Refused("Name a month, e.g. 2026-05, or a span with --from and --to.")
    with opened(arguments.plant, environment, environment.person(None), write=False) as (plant, book):
        entries, head = book.entries(), book.head()
    from logbook.answers.month import month, span_of
    from logbook.month.render import FORMATS

    if arguments.month is not None:
        try:
            since, until = span_of(arguments.month, plant.utc_offset_min)
        except ValueError as error:
            raise Refused(f"'{arguments.month}' is no month; write 2026-05.") from error
        title = arguments.month
    else:
        start, end = shared.moment(arguments.since), shared.moment(arguments.until, end_of_day=True)
        assert start is not None
        assert end is not None
        if end <= start:
            raise Refused("--to must be later than --from.")
        since, until, title = start, end, f"{arguments.since} to {arguments.until}"
    environment.out.write(FORMATS[arguments.format](month(plant, entries, title, since, until, head)))
    return ExitCode.DONE
