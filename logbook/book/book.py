"""The book: append, read in order, the head of the chain, copies. Acknowledged means on the disk.

Nothing here changes or removes an entry. An amendment is a new entry that names the one it replaces.
"""

from __future__ import annotations

import os
import sqlite3
from collections.abc import Callable, Iterable, Iterator, Sequence
from contextlib import contextmanager
from dataclasses import dataclass
from datetime import UTC, datetime, timedelta
from pathlib import Path
from types import TracebackType
from typing import Self

from logbook.book import schema
from logbook.book.entry import COLUMNS, FIRST_DIGEST, Entry, NewEntry, Row, entry_of, row_of, utc_text

FILE_NAME = "logbook.db"
BUSY_TIMEOUT_S = 5.0

_SELECT = f"SELECT {', '.join(COLUMNS)} FROM entries"
_INSERT = f"INSERT INTO entries ({', '.join(COLUMNS)}) VALUES ({', '.join('?' * len(COLUMNS))})"


class BookUnusable(Exception):
    """The book cannot be opened, read or written: a sentence that says what to do."""


class AmendmentRefused(Exception):
    """The entry to be amended is not there, or was amended already: a sentence that says what to do."""


@dataclass(frozen=True)
class Amended:
    """An entry that was struck out, and the number of the one that stands in its place."""

    entry: Entry
    replaced_by: int


def _now() -> datetime:
    return datetime.now(UTC)


class Book:
    """One logbook.db. Use as a context manager, in the thread that opened it."""

    def __init__(
        self, connection: sqlite3.Connection, path: Path, read_only: bool, now: Callable[[], datetime]
    ) -> None:
        self._connection = connection
        self._now = now
        self.path = path
        self.read_only = read_only

    @classmethod
    def open(cls, folder: Path, *, read_only: bool = False, now: Callable[[], datetime] = _now) -> Self:
        """Open the book of a plant folder; made on first use unless `read_only`.

        Raises BookUnusable: no rights, no book, not a book, a newer version, a full disk.
        """
        path = folder / FILE_NAME
        if not folder.is_dir():
            raise BookUnusable(f"There is no plant folder {folder}. Make one with: logbook new {folder} --kind ship")
        if read_only and not path.exists():
            raise BookUnusable(f"There is no book in {folder} yet, and nothing may be written. Make the first entry.")
        try:
            connection = _connect_to_read(path) if read_only else _connect_to_write(path)
            with _in_words(path):
                _check_version(connection, path)
                if not read_only:
                    schema.migrate(connection)
        except BaseException:
            if "connection" in locals():
                connection.close()
            raise
        return cls(connection, path, read_only, now)

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        self.close()

    def close(self) -> None:
        self._connection.close()

    # Writing

    def append(self, entry: NewEntry) -> Entry:
        """Write one entry; when this returns, it is on the disk. Raises BookUnusable, AmendmentRefused."""
        (row,) = self._append([entry], None)
        return entry_of(row, entry.body)

    def append_many(self, entries: Iterable[NewEntry], progress: Callable[[int], None] | None = None) -> int:
        """Write many entries in one transaction: all or none. Returns how many.

        `progress` is called with the number written so far, now and then.
        """
        return sum(1 for _ in self._append(entries, progress))

    def _append(self, entries: Iterable[NewEntry], progress: Callable[[int], None] | None) -> list[Row]:
        if self.read_only:
            raise BookUnusable(f"The book {self.path} was opened to be read only.")
        rows: list[Row] = []
        with _in_words(self.path), self._write():
            number, previous = self._head()
            entered = self._now()
            for entry in entries:
                if entry.replaces is not None:
                    self._check_amendment(entry)
                number += 1
                row = row_of(entry, number, entered, previous)
                self._connection.execute(_INSERT, row)
                previous = row[15]
                rows.append(row)
                if progress is not None and len(rows) % 200 == 0:
                    progress(len(rows))
        if progress is not None:
            progress(len(rows))
        return rows

    def _check_amendment(self, entry: NewEntry) -> None:
        if not entry.reason.strip():
            raise AmendmentRefused("An amendment needs its reason.")
        found = self._connection.execute(
            "SELECT kind, subject, (SELECT number FROM entries r WHERE r.replaces = e.number) FROM entries e"
            " WHERE number = ?",
            (entry.replaces,),
        ).fetchone()
        if found is None:
            raise AmendmentRefused(f"There is no entry {entry.replaces} to amend.")
        kind, subject, replaced_by = found
        if (kind, subject) != (entry.kind, entry.subject):
            raise AmendmentRefused(
                f"Entry {entry.replaces} is a {kind} of {subject}; it cannot be replaced by a {entry.kind} of"
                f" {entry.subject}."
            )
        if replaced_by is not None:
            raise AmendmentRefused(
                f"Entry {entry.replaces} was amended already, by entry {replaced_by}: amend that one."
            )

    @contextmanager
    def _write(self) -> Iterator[None]:
        # BEGIN IMMEDIATE: a transaction that begins by reading and then writes would fail at once when another
        # writer is busy; this one waits for its turn.
        self._connection.execute("BEGIN IMMEDIATE")
        try:
            yield
        except BaseException:
            if self._connection.in_transaction:
                self._connection.execute("ROLLBACK")
            raise
        self._connection.execute("COMMIT")

    def _head(self) -> tuple[int, str]:
        found = self._connection.execute("SELECT number, digest FROM entries ORDER BY number DESC LIMIT 1").fetchone()
        return (0, FIRST_DIGEST) if found is None else (found[0], found[1])

    # Reading

    def head(self) -> tuple[int, str]:
        """Number and digest of the last entry: what a countersignature seals and every export prints."""
        with _in_words(self.path):
            return self._head()

    def entries(
        self,
        *,
        kinds: Iterable[str] = (),
        subject: str | None = None,
        since_utc: datetime | None = None,
        until_utc: datetime | None = None,
        struck_out: bool = False,
        latest: int | None = None,
    ) -> list[Entry]:
        """Entries in order of the time they were taken at (then of number).

        `kinds` empty: all. `until_utc` is included. `struck_out`: also those that an amendment replaced.
        `latest`: only so many of the last ones, still in order of time.
        """
        where, values = ["1"], []
        kinds = tuple(kinds)
        if kinds:
            where.append(f"kind IN ({', '.join('?' * len(kinds))})")
            values += list(kinds)
        if subject is not None:
            where.append("subject = ?")
            values.append(subject)
        if since_utc is not None:
            where.append("taken_utc >= ?")
            values.append(utc_text(since_utc))
        if until_utc is not None:
            where.append("taken_utc <= ?")
            values.append(utc_text(until_utc))
        if not struck_out:
            where.append("number NOT IN (SELECT replaces FROM entries WHERE replaces IS NOT NULL)")
        query = f"{_SELECT} WHERE {' AND '.join(where)} ORDER BY taken_utc {{0}}, number {{0}}"
        if latest is None:
            return self._read(query.format(""), values)
        return self._read(query.format("DESC") + f" LIMIT {int(latest)}", values)[::-1]

    def entry(self, number: int) -> Entry | None:
        """The entry of that number, struck out or not."""
        return next(iter(self._read(f"{_SELECT} WHERE number = ?", [number])), None)

    def replaced(self) -> dict[int, int]:
        """Number of every entry that was struck out -> number of the amendment in its place."""
        with _in_words(self.path):
            return dict(self._connection.execute("SELECT replaces, number FROM entries WHERE replaces IS NOT NULL"))

    def last_reading_before(self, engine: str, moment: datetime) -> Entry | None:
        """The last valid reading of an engine (or of the plant) taken before that moment."""
        found = self.entries(kinds=["reading"], subject=engine, until_utc=moment - timedelta(seconds=1), latest=1)
        return found[0] if found else None

    def rows(self) -> Iterator[Row]:
        """Every row as it stands, in order of number: for `verify` and copies."""
        with _in_words(self.path):
            yield from self._connection.execute(f"{_SELECT} ORDER BY number")

    def count(self) -> int:
        with _in_words(self.path):
            number: int = self._connection.execute("SELECT count(*) FROM entries").fetchone()[0]
        return number

    def change_mark(self) -> tuple[int, int]:
        """Differs as soon as anyone has written since it was last asked."""
        with _in_words(self.path):
            version: int = self._connection.execute("PRAGMA data_version").fetchone()[0]
            return version, self._head()[0]

    def _read(self, query: str, values: Sequence[object]) -> list[Entry]:
        with _in_words(self.path):
            return [entry_of(row) for row in self._connection.execute(query, values)]

    def backup(self, target: Path) -> None:
        """A consistent copy while others write. Raises BookUnusable; never overwrites a file."""
        if target.exists():
            raise BookUnusable(f"{target} exists already; a copy never overwrites. Name another file.")
        with _in_words(target):
            copy = sqlite3.connect(target)
            try:
                self._connection.backup(copy)
                copy.execute("PRAGMA journal_mode=DELETE")
            finally:
                copy.close()
            os.chmod(target, 0o600)


def _connect_to_write(path: Path) -> sqlite3.Connection:
    if path.exists() and not os.access(path, os.W_OK):
        raise BookUnusable(f"The book {path} may not be written by this account. Open it with --read-only.")
    if not os.access(path.parent, os.W_OK):
        raise BookUnusable(f"Nothing may be written in {path.parent} by this account. Open it with --read-only.")
    if not path.exists():
        # Made here, so that it never exists with wider rights than these.
        os.close(os.open(path, os.O_CREAT | os.O_RDWR, 0o600))
    with _in_words(path):
        connection = sqlite3.connect(path, isolation_level=None, timeout=BUSY_TIMEOUT_S)
        try:
            connection.execute("PRAGMA journal_mode=WAL")
            connection.execute("PRAGMA synchronous=FULL")
            connection.execute("PRAGMA foreign_keys=ON")
        except BaseException:
            connection.close()
            raise
        return connection


def _connect_to_read(path: Path) -> sqlite3.Connection:
    with _in_words(path):
        for options in ("mode=ro", "mode=ro&immutable=1"):
            # A folder that may not be written holds no -shm file: then nobody else writes either, and the file
            # can be read as it stands.
            connection = sqlite3.connect(
                f"{path.absolute().as_uri()}?{options}", uri=True, isolation_level=None, timeout=BUSY_TIMEOUT_S
            )
            try:
                connection.execute("SELECT count(*) FROM sqlite_master").fetchone()
            except sqlite3.OperationalError:
                connection.close()
                if options == "mode=ro":
                    continue
                raise
            return connection
    raise BookUnusable(f"The book {path} cannot be opened to be read.")


def _check_version(connection: sqlite3.Connection, path: Path) -> None:
    version = schema.version_of(connection)
    tables = connection.execute("SELECT count(*) FROM sqlite_master WHERE type = 'table'").fetchone()[0]
    if version == 0 and tables:
        raise BookUnusable(f"{path} is a database, but not a book of this program. It was left as it is.")
    if version > schema.VERSION:
        raise BookUnusable(
            f"The book {path} was written by a newer version of this program (form {version}; this one knows"
            f" {schema.VERSION}). Nothing was changed. Install the newer version to open it."
        )


@contextmanager
def _in_words(path: Path) -> Iterator[None]:
    """Turn what SQLite and the system report into a sentence that says what to do."""
    try:
        yield
    except sqlite3.DatabaseError as error:
        text = str(error)
        if "locked" in text or "busy" in text:
            sentence = f"Another program keeps the book {path} busy. Nothing was written; try again."
        elif "full" in text:
            sentence = f"The disk that holds {path} is full. This entry was not written; make room and try again."
        elif "not a database" in text or "malformed" in text:
            sentence = f"{path} is damaged or not a book. Keep it, and restore the last copy made with: logbook backup"
        elif "readonly" in text or "unable to open" in text:
            sentence = f"The book {path} may not be written by this account. Open it with --read-only."
        else:
            sentence = f"The book {path} could not be used: {text}."
        raise BookUnusable(sentence) from error
    except OSError as error:
        raise BookUnusable(f"{path} could not be used: {error.strerror or error}.") from error


def rows_of_file(path: Path) -> list[Row]:
    """Every row of a copy made by `backup`. Raises BookUnusable."""
    if not path.is_file():
        raise BookUnusable(f"There is no file {path}.")
    connection = _connect_to_read(path)
    try:
        with _in_words(path):
            _check_version(connection, path)
            return list(connection.execute(f"{_SELECT} ORDER BY number"))
    finally:
        connection.close()
