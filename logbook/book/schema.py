"""The tables of logbook.db and the way from one version to the next.

A shipped migration is never changed. sqlite-utils is loaded only when one is due: it costs half a second, and the
panes open a book many times for every time its version changes.
"""

from __future__ import annotations

import sqlite3

VERSION = 1
"""Stands in the file as `user_version`; one more for every migration."""

APPLICATION_ID = 0x4C4F4742
"""Marks the file as a book of this program (`file` and other tools show it)."""

_ENTRIES = """
CREATE TABLE entries (
    number INTEGER PRIMARY KEY,
    schema INTEGER NOT NULL,
    kind TEXT NOT NULL CHECK (kind IN ('reading','event','work','delivery','lot','transfer','sounding','remark',
        'baseline','setting','plant_description','signature','countersignature','clock')),
    subject TEXT NOT NULL,
    round TEXT NOT NULL,
    taken_utc TEXT NOT NULL CHECK (length(taken_utc) = 20),
    utc_offset_min INTEGER NOT NULL CHECK (utc_offset_min BETWEEN -1440 AND 1440),
    entered_utc TEXT NOT NULL CHECK (length(entered_utc) = 20),
    person TEXT NOT NULL,
    identity_by TEXT NOT NULL CHECK (identity_by IN ('key','system account','as stated')),
    source TEXT NOT NULL CHECK (source IN ('hand','instrument','import','calculated')),
    replaces INTEGER REFERENCES entries(number) CHECK (replaces < number),
    reason TEXT NOT NULL,
    body TEXT NOT NULL CHECK (json_valid(body)),
    previous_digest TEXT NOT NULL CHECK (length(previous_digest) = 64),
    digest TEXT NOT NULL UNIQUE CHECK (length(digest) = 64),
    CHECK (replaces IS NULL OR reason <> '')
) STRICT;
CREATE INDEX entries_by_subject ON entries (kind, subject, taken_utc, number);
CREATE INDEX entries_by_time ON entries (taken_utc, number);
CREATE UNIQUE INDEX entries_replaced_once ON entries (replaces) WHERE replaces IS NOT NULL;
CREATE TRIGGER entries_are_never_changed BEFORE UPDATE ON entries
    BEGIN SELECT RAISE(ABORT, 'an entry of the book is never changed; amend it'); END;
CREATE TRIGGER entries_are_never_removed BEFORE DELETE ON entries
    BEGIN SELECT RAISE(ABORT, 'an entry of the book is never removed'); END;
"""


def version_of(connection: sqlite3.Connection) -> int:
    """Version of the tables in this file; 0 for a new one."""
    version: int = connection.execute("PRAGMA user_version").fetchone()[0]
    return version


def migrate(connection: sqlite3.Connection) -> None:
    """Bring the tables to VERSION. Does nothing when they are there already."""
    if version_of(connection) == VERSION:
        return
    from sqlite_utils import Database, Migrations

    migrations = Migrations("book")

    @migrations(name="1: the chained table of entries")
    def _entries(db: Database) -> None:
        for statement in _statements(_ENTRIES):
            db.execute(statement)

    @migrations(name="1: the version in the head of the file")
    def _version(db: Database) -> None:
        db.execute(f"PRAGMA user_version = {VERSION}")
        db.execute(f"PRAGMA application_id = {APPLICATION_ID}")

    migrations.apply(Database(connection))


def _statements(script: str) -> list[str]:
    """The single statements of a script: sqlite3's executescript would end the migration's transaction."""
    statements, pending = [], ""
    for line in script.splitlines(keepends=True):
        pending += line
        if sqlite3.complete_statement(pending):
            statements.append(pending)
            pending = ""
    return statements
