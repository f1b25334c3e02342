"""`logbook verify`: whether the chain of the book is whole."""

from __future__ import annotations

import argparse
from pathlib import Path

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = "Whether every entry of the book still is what was written, in the order it was written."
    parser.epilog = (
        "example:\n  logbook verify my_ship --seal 4f0c...e1\n\n"
        "Found: any alteration that does not recompute the chain, and anything before a seal kept elsewhere.\n"
        "Not found: a tail recomputed since the last such seal. Keep the printed digest of each month ashore."
    )
    shared.plant_folder(parser)
    parser.add_argument("--seal", default="", metavar="DIGEST", help="a printed digest that must stand in the book")
    parser.add_argument("--against", type=Path, metavar="COPY", help="a copy of the book; its entries must be the same")


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    from logbook.book.book import FILE_NAME, Book, BookUnusable, rows_of_file
    from logbook.book.verify import breaks, differences

    if arguments.seal and len(arguments.seal) != 64:
        raise Refused(f"A digest has 64 signs; '{arguments.seal}' has {len(arguments.seal)}. Copy it whole.")
    try:
        with Book.open(arguments.plant, read_only=True) as book:
            number, digest = book.head()
            found = list(breaks(book.rows(), seal=arguments.seal))
            if arguments.against is not None:
                found += differences(book.rows(), rows_of_file(arguments.against))
    except BookUnusable as error:
        raise Refused(str(error), ExitCode.CANNOT_USE_PLANT) from error
    for place in found:
        environment.say(place.what)
    if found:
        environment.say(f"{FILE_NAME} is NOT whole: {len(found)} break{'s' if len(found) > 1 else ''} of the chain.")
        return ExitCode.NO
    environment.say(f"{FILE_NAME} is whole: {number} entries; digest of the last:\n{digest}")
    return ExitCode.DONE
