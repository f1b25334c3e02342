"""`logbook import`: readings, events or lots from CSV or XLSX, by a column map."""

from __future__ import annotations

import argparse
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused

if TYPE_CHECKING:
    from logbook.exchange.importing import Imported

SHOWN_DOUBTS = 40


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = (
        "Readings, events or lots from a CSV or XLSX file. A column map (a small TOML file) says what each column is;"
        " --suggest drafts it from the heads. The import is one transaction; the same file twice adds nothing."
    )
    parser.epilog = (
        "example:\n"
        "  logbook import my_ship old_log.csv --suggest > old_log.toml     (read it, mend it)\n"
        "  logbook import my_ship old_log.csv --columns old_log.toml --check\n"
        "  logbook import my_ship old_log.csv --columns old_log.toml"
    )
    shared.plant_folder(parser)
    parser.add_argument("file", metavar="FILE", type=Path, help="CSV or XLSX")
    parser.add_argument("--columns", metavar="MAP", type=Path, help="the column map")
    parser.add_argument("--suggest", action="store_true", help="print a draft of the column map and stop")
    parser.add_argument(
        "--check", action="store_true", help="name every doubtful cell by row and column; write nothing"
    )
    parser.add_argument("--engine", metavar="ENGINE", help="with --suggest: the engine of the log")
    parser.add_argument("--all-doubts", action="store_true", help=f"name every doubtful cell, not only {SHOWN_DOUBTS}")
    shared.person(parser)


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    from logbook.command_line.plant_folder import opened, plant_of
    from logbook.exchange.columns import MapUnusable, parse_map
    from logbook.exchange.importing import read_log, without_known
    from logbook.exchange.sheet import SheetUnusable, read_sheet
    from logbook.exchange.suggest import suggest

    plant = plant_of(arguments.plant)
    try:
        if arguments.suggest:
            if arguments.engine and arguments.engine not in {engine.id for engine in plant.engines}:
                raise Refused(f"This plant has no engine '{arguments.engine}'.")
            environment.say(suggest(plant, read_sheet(arguments.file), arguments.engine or "").rstrip())
            return ExitCode.DONE
        if arguments.columns is None:
            raise Refused("Name the column map with --columns MAP, or draft one with --suggest.")
        columns = parse_map(_text_of(arguments.columns), str(arguments.columns))
        sheet = read_sheet(
            arguments.file, sheet=columns.sheet, head_row=columns.head_row, delimiter=columns.delimiter,
            encoding=columns.encoding,
        )  # fmt: skip
    except (SheetUnusable, MapUnusable) as error:
        raise Refused(str(error)) from error
    person = environment.person(arguments.person)
    found = read_log(
        plant, sheet, columns, person=person.name, identity_by=person.identity_by,
        progress=_bar(environment, "reading", len(sheet.rows)),
    )  # fmt: skip
    _tell_doubts(found, environment, everything=arguments.all_doubts or arguments.check)
    if found.stopped:
        raise Refused("Nothing was imported: mend the rows named above in the file, or the column map.")
    if arguments.check:
        environment.say(f"{found.rows} rows give {len(found.entries)} entries. Nothing was written (--check).")
        return ExitCode.DONE
    with opened(arguments.plant, environment, person, write=True) as (_, book):
        kinds = sorted({entry.kind for entry in found.entries})
        fresh, same, differing = without_known(
            found.entries, book.entries(kinds=kinds, struck_out=True) if kinds else []
        )
        for entry in differing[:SHOWN_DOUBTS]:
            environment.say(
                f"{entry.kind} of {entry.subject} at {entry.taken_utc:%Y-%m-%d %H:%M}Z stands in the book with other"
                " values: it was left as it is; amend it by hand if the file is right."
            )
        written = book.append_many(fresh, _bar(environment, "writing", len(fresh))) if fresh else 0
    environment.say(
        f"{sheet.file_name}: {found.rows} rows; {written} entries written, {same} in the book already,"
        f" {len(differing)} left as they are, {len(found.doubts)} doubtful cells."
    )
    return ExitCode.DONE


def _text_of(path: Path) -> str:
    try:
        return path.read_text(encoding="utf-8")
    except (OSError, UnicodeDecodeError) as error:
        raise Refused(f"The column map {path} cannot be read: {error}.") from error


def _tell_doubts(found: Imported, environment: Environment, *, everything: bool) -> None:
    stops = [doubt for doubt in found.doubts if doubt.stops]
    doubts = stops or found.doubts
    for doubt in doubts if everything else doubts[:SHOWN_DOUBTS]:
        environment.say(doubt.line())
    if len(doubts) > SHOWN_DOUBTS and not everything:
        environment.say(f"... and {len(doubts) - SHOWN_DOUBTS} more; --all-doubts names them.")
    if found.left_out_columns:
        environment.say(f"Columns that the map does not name, left out: {', '.join(found.left_out_columns)}.")


def _bar(environment: Environment, what: str, total: int) -> Callable[[int], None] | None:
    """A bar on standard error while somebody looks at it."""
    if not environment.err.isatty() or total == 0:
        return None

    def show(done: int) -> None:
        filled = 40 * done // total
        end = "\n" if done >= total else ""
        print(
            f"\r{what} [{'#' * filled}{'.' * (40 - filled)}] {done}/{total}", end=end, file=environment.err, flush=True
        )

    return show
