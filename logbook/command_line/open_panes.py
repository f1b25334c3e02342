"""`logbook open`: the panes of a plant."""

from __future__ import annotations

import argparse
import sys

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = "The panes of a plant: Watch, Ladder, Trend, Book. Works at 80x24, by keyboard alone."
    parser.epilog = (
        "example:\n  logbook open my_ship\n\n"
        "LOGBOOK_GLYPHS=ascii draws without line-drawing characters; LOGBOOK_PLAIN_DRIVER=1 repaints whole regions."
    )
    shared.plant_folder(parser)
    shared.person(parser)
    parser.add_argument("--read-only", action="store_true", help="look, write nothing")
    parser.add_argument("--pane", default="Watch", choices=["Watch", "Ladder", "Trend", "Book"], help="the first pane")


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    from logbook.panes.terminal.check import refusal
    from logbook.panes.terminal.glyphs import chosen

    encoding = getattr(environment.out, "encoding", None) or "ascii"
    # The panes are drawn on standard error and typed on standard input.
    is_terminal = sys.stdin.isatty() and environment.out.isatty() and environment.err.isatty()
    sentence = refusal(environment.term, encoding, is_terminal, environment.terminal_size)
    if sentence is not None:
        raise Refused(sentence)
    try:
        glyphs = chosen(environment.term, encoding, environment.glyphs)
    except ValueError as error:
        raise Refused(str(error)) from error
    from logbook.command_line.plant_folder import opened

    person = environment.person(arguments.person)
    with opened(arguments.plant, environment, person, write=not arguments.read_only) as (plant, book):
        from logbook.panes.start import show

        show(
            plant,
            arguments.plant,
            book,
            person=person.name,
            identity_by=person.identity_by,
            read_only=arguments.read_only,
            first=arguments.pane,
            glyphs=glyphs,
            plain_driver=environment.plain_driver,
            now=environment.now,
        )
    return ExitCode.DONE
