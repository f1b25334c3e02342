"""`logbook entries`: the book in order of time, amendments struck out."""

from __future__ import annotations

import argparse
import json

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = "The book in order of time. Entries that an amendment replaced are shown struck out (~)."
    parser.epilog = "example:\n  logbook entries my_ship ME --from 2026-05-01 --to 2026-05-31"
    shared.plant_folder(parser)
    parser.add_argument("engine", metavar="ENGINE", nargs="?", help="only of this engine (or plant, tank, lot)")
    parser.add_argument("--entry", type=int, metavar="NUMBER", help="one entry in full")
    parser.add_argument("--kind", action="append", default=[], metavar="KIND", help="only this kind; may be repeated")
    parser.add_argument("--last", type=int, metavar="COUNT", help="only the last ones")
    shared.span(parser)
    shared.as_json(parser)


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    from logbook.answers import entries as answer
    from logbook.book.entry import KINDS, utc_text
    from logbook.command_line.plant_folder import opened

    for kind in arguments.kind:
        if kind not in KINDS:
            raise Refused(f"There is no kind of entry '{kind}'; there are: {', '.join(KINDS)}.")
    if arguments.last is not None and arguments.last < 1:
        raise Refused("--last takes a number of entries, 1 or more.")
    person = environment.person(None)
    with opened(arguments.plant, environment, person, write=False) as (plant, book):
        replaced = book.replaced()
        if arguments.entry is not None:
            entry = book.entry(arguments.entry)
            if entry is None:
                raise Refused(f"There is no entry {arguments.entry}; the last one is {book.head()[0]}.")
            found = [entry]
        else:
            found = book.entries(
                kinds=arguments.kind,
                subject=arguments.engine,
                since_utc=shared.moment(arguments.since),
                until_utc=shared.moment(arguments.until, end_of_day=True),
                struck_out=True,
                latest=arguments.last,
            )
        head = book.head()
    if arguments.json:
        for entry in found:
            record = {name: getattr(entry, name) for name in entry.__slots__}
            record["taken_utc"], record["entered_utc"] = utc_text(entry.taken_utc), utc_text(entry.entered_utc)
            record["replaced_by"] = replaced.get(entry.number)
            environment.say(json.dumps(record, ensure_ascii=True))
        return ExitCode.DONE
    if arguments.entry is not None:
        for text in answer.in_full(plant, found[0], replaced):
            environment.say(text)
        return ExitCode.DONE
    for line in answer.lines(plant, found, replaced):
        mark = "~" if line.struck_out else " "
        tail = f"  [{line.marks}]" if line.marks else ""
        environment.say(
            f"{mark}{line.number:>6}  {line.ship_time}  {line.kind:<12} {line.subject:<6} {line.content}"
            f"  {line.person}{tail}"
        )
    environment.say(f"{len(found)} entries. Head of the book: entry {head[0]}, digest {head[1]}")
    return ExitCode.DONE
