"""`logbook check`: what is wrong in plant.toml and book, and what is missing for which figure."""

from __future__ import annotations

import argparse
import json
from collections.abc import Iterable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING, Any

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode

if TYPE_CHECKING:
    from logbook.book.entry import Row
    from logbook.plant.missing import Missing
    from logbook.plant.records import Plant

_WIDTH = 79


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = (
        "Every fault of plant.toml with its line; then what plant.toml leaves out, and\n"
        "which figures go without it; then whether the book, where there is one, is whole."
    )
    parser.epilog = (
        "example:\n  logbook check my_ship\n\n"
        "Ends with 3 if the plant cannot be used, 1 if the book is not whole, else 0:\n"
        "nothing that is missing hinders."
    )
    shared.plant_folder(parser)
    shared.as_json(parser)


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    from logbook.plant.description import PlantUnusable, read_plant
    from logbook.plant.missing import missing

    folder: Path = arguments.plant
    try:
        plant = read_plant(folder)
    except PlantUnusable as error:
        if arguments.json:
            faults = [_record(fault) | {"sentence": fault.sentence()} for fault in error.faults]
            environment.say(json.dumps({"usable": False, "sentence": error.sentence, "faults": faults}))
        else:
            environment.say(error.sentence)
            for fault in error.faults:
                environment.say(_wrapped(fault.sentence()))
        return ExitCode.CANNOT_USE_PLANT
    found = missing(plant)
    code, book = _book(folder, plant)
    if arguments.json:
        report = {"usable": True, "faults": [], "missing": [_record(item) for item in found], "book": book}
        environment.say(json.dumps(report))
        return code
    engines = ", ".join(engine.id for engine in plant.engines)
    environment.say(_wrapped(f"plant.toml is good: {plant.name}, {plant.kind}, engines {engines}."))
    if found:
        environment.say("\nWhat it leaves out, and which figures go without it:\n")
    for line in _lines(found):
        environment.say(line)
    for line in _said(book):
        environment.say(line)
    return code


def _record(item: Any) -> dict[str, Any]:
    return {name: getattr(item, name) for name in item.__slots__}


def _wrapped(text: str, first: str = "", others: str = "  ") -> str:
    import textwrap

    return textwrap.fill(
        text, _WIDTH, initial_indent=first, subsequent_indent=others, break_long_words=False, break_on_hyphens=False
    )


def _lines(found: Iterable[Missing]) -> Iterator[str]:
    """A paragraph for each thing that is missing, comparisons first; what sister engines share stands once."""
    together: dict[tuple[object, ...], list[Missing]] = {}
    for item in found:
        together.setdefault((item.figures, item.sentence, item.add, item.flag), []).append(item)
    for items in sorted(together.values(), key=lambda items: not items[0].flag):
        first = items[0]
        marked = f" ({first.flag})" if first.flag else ""
        yield _wrapped(f"{', '.join(item.subject for item in items)}: {first.sentence}")
        yield _wrapped(", ".join(first.figures) + marked, "  figures  ", " " * 11)
        yield _wrapped(first.add, "  add      ", " " * 11)


def _book(folder: Path, plant: Plant) -> tuple[ExitCode, dict[str, Any] | None]:
    """What is to be said of the book; None where there is none yet."""
    from logbook.answers.questions import open_questions
    from logbook.book.book import FILE_NAME, Book, BookUnusable
    from logbook.book.verify import breaks

    if not (folder / FILE_NAME).exists():
        return ExitCode.DONE, None
    subjects: set[str] = set()

    def noted(rows: Iterable[Row]) -> Iterator[Row]:
        for row in rows:
            if row[2] == "reading":
                subjects.add(str(row[3]))
            yield row

    try:
        with Book.open(folder, read_only=True) as book:
            number, digest = book.head()
            broken = [place.what for place in breaks(noted(book.rows()))]
            questions = open_questions(plant, book.entries())
    except BookUnusable as error:
        return ExitCode.CANNOT_USE_PLANT, {"usable": False, "sentence": str(error)}
    known = {"plant", *(engine.id for engine in plant.engines), *(tank.id for tank in plant.tanks)}
    return ExitCode.NO if broken else ExitCode.DONE, {
        "usable": True,
        "entries": number,
        "digest": digest,
        "breaks": broken,
        "not_in_plant": sorted(subjects - known),
        "open_questions": [line for question in questions for line in question.lines()],
    }


def _said(book: dict[str, Any] | None) -> Iterator[str]:
    yield ""
    if book is None:
        yield "There is no book yet: the first entry makes it."
    elif not book["usable"]:
        yield _wrapped(book["sentence"])
    else:
        yield from book["breaks"]
        count = len(book["breaks"])
        if count:
            yield f"The book is NOT whole: {count} break{'s' if count > 1 else ''} of the chain."
        else:
            yield f"The book is whole: {book['entries']} entries; digest of the last:\n{book['digest']}"
        if book["open_questions"]:
            yield ""
            yield "Counter questions that are open (their spans have no difference until one is answered):"
            yield from book["open_questions"]
        if book["not_in_plant"]:
            yield _wrapped(
                f"The book has readings of {', '.join(book['not_in_plant'])}, which plant.toml does not have: "
                "an id must stay what it was."
            )
