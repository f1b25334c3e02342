"""`logbook backup`: a consistent copy of the book while others write."""

from __future__ import annotations

import argparse
from pathlib import Path

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = "A consistent copy of the book, made while others go on writing. Never overwrites a file."
    parser.epilog = "example:\n  logbook backup my_ship stick/logbook-2026-05-31.db"
    shared.plant_folder(parser)
    parser.add_argument("file", metavar="FILE", type=Path, help="the copy to be made")


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    from logbook.book.book import Book, BookUnusable

    try:
        with Book.open(arguments.plant, read_only=True) as book:
            number, digest = book.head()
            book.backup(arguments.file)
    except BookUnusable as error:
        raise Refused(str(error), ExitCode.CANNOT_USE_PLANT) from error
    environment.say(f"{arguments.file}: {number} entries; digest of the last:\n{digest}")
    return ExitCode.DONE
