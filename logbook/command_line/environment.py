"""The environment of one run: streams, clock, person, terminal. One object, made once, passed down.

No other module reads `os.environ`, the clock or the standard streams.
"""

from __future__ import annotations

import enum
import getpass
import os
import sys
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from datetime import UTC, datetime
from typing import TextIO


class ExitCode(enum.IntEnum):
    """What a command tells the shell."""

    DONE = 0
    NO = 1
    WRONG_REQUEST = 2
    CANNOT_USE_PLANT = 3
    INTERRUPTED = 130


class Refused(Exception):
    """A request that cannot be done: a sentence for the person and the exit code for the shell."""

    def __init__(self, sentence: str, code: ExitCode = ExitCode.WRONG_REQUEST) -> None:
        super().__init__(sentence)
        self.sentence = sentence
        self.code = code


@dataclass(frozen=True)
class Person:
    """Who acts, and how that is known: `key` (SSH key), `system account` or `as stated`."""

    name: str
    identity_by: str


def _now_utc() -> datetime:
    return datetime.now(UTC)


@dataclass
class Environment:
    """Streams, clock, person and terminal of one run."""

    out: TextIO
    err: TextIO
    variables: Mapping[str, str]
    account: str
    now: Callable[[], datetime] = field(default=_now_utc)

    @classmethod
    def of_process(cls) -> Environment:
        """The environment of this process."""
        try:
            account = getpass.getuser()
        except (KeyError, OSError):
            # A container may run under a number that has no account.
            account = ""
        return cls(out=sys.stdout, err=sys.stderr, variables=os.environ, account=account)

    def say(self, text: str = "") -> None:
        """A line of the answer, on standard output."""
        print(text, file=self.out)

    def complain(self, text: str) -> None:
        """A line about what went wrong, on standard error."""
        print(text, file=self.err)

    def person(self, stated: str | None) -> Person:
        """Who acts: fixed by the SSH key (LOGBOOK_PERSON set by the forced command), as stated, or the account."""
        fixed = self.variables.get("LOGBOOK_PERSON")
        if fixed:
            return Person(fixed, "key")
        if stated:
            return Person(stated, "as stated")
        return Person(self.account, "system account")

    @property
    def term(self) -> str:
        return self.variables.get("TERM", "")

    @property
    def terminal_size(self) -> tuple[int, int] | None:
        """Columns and rows; None where standard output is no terminal."""
        try:
            size = os.get_terminal_size(self.out.fileno())
        except (OSError, ValueError):
            return None
        return size.columns, size.lines

    @property
    def plain_driver(self) -> bool:
        """LOGBOOK_PLAIN_DRIVER=1 switches off the driver that writes only changed cells."""
        return self.variables.get("LOGBOOK_PLAIN_DRIVER", "") not in ("", "0")

    @property
    def glyphs(self) -> str | None:
        """LOGBOOK_GLYPHS=ascii or box overrules the choice made from the terminal."""
        return self.variables.get("LOGBOOK_GLYPHS") or None
