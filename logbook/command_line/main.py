"""`logbook`: finds the command, runs it, turns every refusal into a sentence and an exit code.

Only the standard library is loaded here; the module of the command is imported when it is called.
"""

from __future__ import annotations

import argparse
import importlib
import sys
from collections.abc import Sequence
from typing import NoReturn

from logbook.command_line.environment import Environment, ExitCode, Refused
from logbook.version import VERSION

# name -> (module, one line for the list of commands)
COMMANDS: dict[str, tuple[str, str]] = {
    "open": ("open_panes", "the panes of a plant"),
    "new": ("new", "a plant folder with a plant.toml that explains itself"),
    "check": ("check", "what is wrong in plant.toml and book, what is missing for which figure"),
    "enter": ("enter", "one entry from the command line"),
    "note": ("note", "an event, work done, a lot, a remark ..."),
    "import": ("import_log", "readings, events or lots from CSV or XLSX"),
    "entries": ("entries", "the book in order of time"),
    "figures": ("figures", "one row of figures an entry"),
    "trend": ("trend", "the excess and its companions since the last restoration"),
    "month": ("month", "the monthly summary"),
    "verify": ("verify", "whether the chain of the book is whole"),
    "backup": ("backup", "a consistent copy of the book while others write"),
    "calc": ("calc", "one formula at the desk, with its steps and source"),
}

EPILOG = """\
Every command has --help with a worked example, e.g.  logbook figures --help
Exit codes: 0 done; 1 the answer is no; 2 the request was wrong; 3 the plant folder cannot be used; 130 interrupted.
Figures are for trend and economy. Limits, alarms, trips and settings: maker's manual, class rules, flag and local
codes only. Not an approved electronic record book; does not replace any statutory record."""


class _Parser(argparse.ArgumentParser):
    """argparse, but a wrong request ends as a `Refused` like every other."""

    def error(self, message: str) -> NoReturn:
        raise Refused(f"{message[:1].upper()}{message[1:]}. See: {self.prog} --help")


def _top_parser() -> argparse.ArgumentParser:
    width = max(map(len, COMMANDS))
    listing = "\n".join(f"  {name:<{width}}  {line}" for name, (_, line) in COMMANDS.items())
    parser = _Parser(
        prog="logbook",
        usage="logbook COMMAND ...",
        description=f"Engine logbook for ships and power stations.\n\ncommands:\n{listing}",
        epilog=EPILOG,
        formatter_class=argparse.RawDescriptionHelpFormatter,
        allow_abbrev=False,
    )
    parser.add_argument("--version", action="version", version=f"logbook {VERSION}")
    return parser


def _run(argv: Sequence[str], environment: Environment) -> ExitCode:
    if not argv or argv[0].startswith("-"):
        if not argv:
            _top_parser().print_help(environment.err)
            return ExitCode.WRONG_REQUEST
        _top_parser().parse_args(argv)
    name = argv[0]
    if name not in COMMANDS:
        import difflib

        near = difflib.get_close_matches(name, COMMANDS, n=1)
        hint = f" Did you mean '{near[0]}'?" if near else ""
        raise Refused(f"There is no command '{name}'.{hint} The list: logbook --help")
    module = importlib.import_module(f"logbook.command_line.{COMMANDS[name][0]}")
    parser = _Parser(
        prog=f"logbook {name}",
        formatter_class=argparse.RawDescriptionHelpFormatter,
        allow_abbrev=False,
    )
    module.configure(parser)
    code: ExitCode = module.run(parser.parse_args(argv[1:]), environment)
    return code


def main(argv: Sequence[str] | None = None, environment: Environment | None = None) -> int:
    """Run one command; returns the exit code. Never a traceback for what a person can mend."""
    environment = environment or Environment.of_process()
    try:
        code = _run(sys.argv[1:] if argv is None else list(argv), environment)
        environment.out.flush()
    except Refused as refusal:
        environment.complain(f"logbook: {refusal.sentence}")
        return refusal.code
    except KeyboardInterrupt:
        environment.complain("logbook: interrupted")
        return ExitCode.INTERRUPTED
    except BrokenPipeError:
        # The reader of our output (head, a pager) has left: that is its right. Python would complain once more
        # when it flushes standard output at exit, so that stream is pointed elsewhere.
        import os

        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return ExitCode.DONE
    return code
