"""The book: durable, chained, never changed, refused in words."""

import os
import sqlite3
import subprocess
import sys
import threading
from dataclasses import replace
from datetime import UTC, datetime, timedelta
from pathlib import Path

import pytest
from book_helpers import START, reading
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.book import schema
from logbook.book.book import AmendmentRefused, Book, BookUnusable
from logbook.book.entry import FIRST_DIGEST, KINDS, NewEntry, canonical_json, utc_text
from logbook.book.verify import breaks
from logbook.reading.value import State, Value


def test_what_is_appended_is_read_back(tmp_path: Path) -> None:
    with Book.open(tmp_path) as book:
        written = book.append(reading(4, engine_speed=98.2))
        assert written.previous_digest == FIRST_DIGEST
    with Book.open(tmp_path, read_only=True) as book:
        (read,) = book.entries()
        assert read == written
        assert read.values()["engine_speed"].number == 98.2
        assert read.taken_ship_time.strftime("%H%M") == "0600"
        assert book.head() == (1, written.digest)


def test_entries_come_in_order_of_reading_not_of_writing(tmp_path: Path) -> None:
    with Book.open(tmp_path) as book:
        book.append(reading(8, engine_speed=1))
        book.append(reading(4, engine_speed=2))
        assert [entry.number for entry in book.entries()] == [2, 1]
        assert [entry.number for entry in book.entries(latest=1)] == [1]
        last = book.last_reading_before("ME", START + timedelta(hours=8))
        assert last is not None
        assert last.number == 2


def test_an_amendment_strikes_out_and_keeps(tmp_path: Path) -> None:
    with Book.open(tmp_path) as book:
        book.append(reading(4, engine_speed=98.2))
        book.append(replace(reading(4, engine_speed=89.2), replaces=1, reason="digits swapped"))
        assert [entry.number for entry in book.entries()] == [2]
        assert [entry.number for entry in book.entries(struck_out=True)] == [1, 2]
        assert book.replaced() == {1: 2}
        with pytest.raises(AmendmentRefused, match="amended already, by entry 2"):
            book.append(replace(reading(4, engine_speed=89.2), replaces=1, reason="again"))
        with pytest.raises(AmendmentRefused, match="needs its reason"):
            book.append(replace(reading(4, engine_speed=89.2), replaces=2, reason=" "))
        with pytest.raises(AmendmentRefused, match="no entry 9"):
            book.append(replace(reading(4, engine_speed=89.2), replaces=9, reason="why"))
        with pytest.raises(AmendmentRefused, match="cannot be replaced by a reading of AE1"):
            book.append(replace(reading(4, "AE1", engine_speed=89.2), replaces=2, reason="why"))
        assert book.count() == 2


def test_an_import_that_fails_half_way_leaves_nothing(tmp_path: Path) -> None:
    def entries() -> object:
        yield reading(4, engine_speed=1)
        yield reading(8, engine_speed=2)
        raise RuntimeError("the file ended badly")

    with Book.open(tmp_path) as book:
        with pytest.raises(RuntimeError):
            book.append_many(entries())  # type: ignore[arg-type]
        assert book.count() == 0
        assert book.append(reading(4, engine_speed=1)).number == 1


def test_sqlite_itself_refuses_to_change_or_remove(tmp_path: Path) -> None:
    with Book.open(tmp_path) as book:
        book.append(reading(4, engine_speed=98.2))
    connection = sqlite3.connect(tmp_path / "logbook.db")
    for statement in ("UPDATE entries SET person = 'x'", "DELETE FROM entries"):
        with pytest.raises(sqlite3.IntegrityError, match="never"):
            connection.execute(statement)
    connection.close()


@pytest.fixture(scope="module")
def twelve(tmp_path_factory: pytest.TempPathFactory) -> tuple[bytes, str]:
    """A book of twelve entries as bytes, and the digest of the sixth."""
    folder = tmp_path_factory.mktemp("twelve")
    with Book.open(folder) as book:
        written = [book.append(reading(4 * hour, engine_speed=90 + hour)) for hour in range(12)]
        book.backup(folder / "copy.db")
    return (folder / "copy.db").read_bytes(), written[5].digest


def tampered(twelve: tuple[bytes, str], folder: Path, *statements: str) -> tuple[int, ...]:
    """Numbers at which the chain breaks after the statements were run on a copy without its triggers."""
    (folder / "logbook.db").write_bytes(twelve[0])
    connection = sqlite3.connect(folder / "logbook.db")
    connection.execute("DROP TRIGGER entries_are_never_changed")
    connection.execute("DROP TRIGGER entries_are_never_removed")
    for statement in statements:
        connection.execute(statement)
    connection.commit()
    connection.close()
    with Book.open(folder, read_only=True) as book:
        return tuple(found.number for found in breaks(book.rows(), seal=twelve[1]))


def test_a_whole_chain_is_whole(twelve: tuple[bytes, str], tmp_path: Path) -> None:
    assert tampered(twelve, tmp_path) == ()


@pytest.mark.parametrize(
    ("statement", "at"),
    [
        ("UPDATE entries SET body = replace(body, '94', '95') WHERE number = 5", 5),
        ("UPDATE entries SET person = 'Nobody' WHERE number = 7", 7),
        ("UPDATE entries SET entered_utc = '2020-01-01T00:00:00Z' WHERE number = 1", 1),
        ("UPDATE entries SET source = 'import' WHERE number = 12", 12),
        ("UPDATE entries SET body = body || ' ' WHERE number = 3", 3),
        ("DELETE FROM entries WHERE number = 4", 4),
        ("UPDATE entries SET number = 13 WHERE number = 12", 12),
    ],
)
def test_every_alteration_is_located(twelve: tuple[bytes, str], tmp_path: Path, statement: str, at: int) -> None:
    assert tampered(twelve, tmp_path, statement)[0] == at


def test_two_entries_that_changed_places_are_found(twelve: tuple[bytes, str], tmp_path: Path) -> None:
    found = tampered(
        twelve,
        tmp_path,
        "UPDATE entries SET number = 99 WHERE number = 8",
        "UPDATE entries SET number = 8 WHERE number = 9",
        "UPDATE entries SET number = 9 WHERE number = 99",
    )
    assert {8, 9} <= set(found)


def test_a_seal_that_is_gone_is_said(twelve: tuple[bytes, str], tmp_path: Path) -> None:
    (tmp_path / "logbook.db").write_bytes(twelve[0])
    with Book.open(tmp_path, read_only=True) as book:
        assert "the book was altered before that seal" in breaks(book.rows(), seal="0" * 64)[0].what


def test_the_first_open_loads_sqlite_utils_and_the_second_does_not(tmp_path: Path) -> None:
    code = (
        "import sys; from pathlib import Path; from logbook.book.book import Book;"
        f"Book.open(Path({str(tmp_path)!r})).close(); print('sqlite_utils' in sys.modules)"
    )
    said = [
        subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True).stdout for _ in "12"
    ]
    assert said == ["True\n", "False\n"]


def test_a_newer_book_is_refused_and_left_as_it_is(tmp_path: Path) -> None:
    Book.open(tmp_path).close()
    connection = sqlite3.connect(tmp_path / "logbook.db")
    connection.execute(f"PRAGMA user_version = {schema.VERSION + 1}")
    connection.close()
    before = (tmp_path / "logbook.db").read_bytes()
    with pytest.raises(BookUnusable, match="newer version"):
        Book.open(tmp_path)
    assert (tmp_path / "logbook.db").read_bytes() == before


def test_a_strange_file_is_refused(tmp_path: Path) -> None:
    (tmp_path / "logbook.db").write_text("this is no database, but a text that somebody put here" * 40)
    with pytest.raises(BookUnusable, match="damaged or not a book"):
        Book.open(tmp_path)
    (tmp_path / "logbook.db").unlink()
    connection = sqlite3.connect(tmp_path / "logbook.db")
    connection.execute("CREATE TABLE songs (title)")
    connection.close()
    with pytest.raises(BookUnusable, match="not a book of this program"):
        Book.open(tmp_path)


def test_a_folder_that_is_not_there(tmp_path: Path) -> None:
    with pytest.raises(BookUnusable, match="logbook new"):
        Book.open(tmp_path / "nowhere")
    with pytest.raises(BookUnusable, match="no book"):
        Book.open(tmp_path, read_only=True)


def test_a_full_disk_is_said_and_nothing_half_written_stays(tmp_path: Path) -> None:
    with Book.open(tmp_path) as book:
        book.append(reading(4, engine_speed=1))
        # A page limit is how SQLite itself meets a full disk.
        pages = book._connection.execute("PRAGMA page_count").fetchone()[0]
        book._connection.execute(f"PRAGMA max_page_count = {pages + 2}")
        with pytest.raises(BookUnusable, match=r"full\. This entry was not written"):
            book.append_many(reading(8 + hour, engine_speed=hour) for hour in range(2000))
        assert book.count() == 1
        assert breaks(book.rows()) == ()


@pytest.mark.skipif(os.geteuid() == 0, reason="root may write everywhere; tried as another account end to end")
def test_a_folder_without_rights(tmp_path: Path) -> None:
    with Book.open(tmp_path) as book:
        book.append(reading(4, engine_speed=1))
    tmp_path.chmod(0o500)
    try:
        with pytest.raises(BookUnusable, match="may be written"):
            Book.open(tmp_path)
        with Book.open(tmp_path, read_only=True) as book:
            assert book.count() == 1
    finally:
        tmp_path.chmod(0o700)


def test_a_read_only_book_takes_nothing(tmp_path: Path) -> None:
    Book.open(tmp_path).close()
    with Book.open(tmp_path, read_only=True) as book, pytest.raises(BookUnusable, match="read only"):
        book.append(reading(4, engine_speed=1))


def test_the_book_is_for_its_owner_alone(tmp_path: Path) -> None:
    Book.open(tmp_path).close()
    assert (tmp_path / "logbook.db").stat().st_mode & 0o777 == 0o600


def test_eight_writers_lose_nothing(tmp_path: Path) -> None:
    Book.open(tmp_path).close()
    failed: list[Exception] = []

    def write(engine: str) -> None:
        try:
            with Book.open(tmp_path) as book:
                for hour in range(25):
                    book.append(reading(hour, engine, engine_speed=hour))
        except BookUnusable as error:
            failed.append(error)

    threads = [threading.Thread(target=write, args=(f"AE{index}",)) for index in range(8)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    with Book.open(tmp_path) as book:
        assert not failed
        assert book.count() == 200
        assert breaks(book.rows()) == ()


def test_a_change_by_another_hand_shows(tmp_path: Path) -> None:
    with Book.open(tmp_path) as mine, Book.open(tmp_path) as other:
        before = mine.change_mark()
        assert mine.change_mark() == before
        other.append(reading(4, engine_speed=1))
        assert mine.change_mark() != before


def test_a_copy_is_whole_and_never_overwrites(tmp_path: Path) -> None:
    with Book.open(tmp_path) as book:
        book.append(reading(4, engine_speed=1))
        target = tmp_path / "elsewhere"
        target.mkdir()
        book.backup(target / "logbook.db")
        with pytest.raises(BookUnusable, match="never overwrites"):
            book.backup(target / "logbook.db")
    with Book.open(target, read_only=True) as copy:
        assert copy.count() == 1
        assert breaks(copy.rows()) == ()


def test_local_time_alone_is_refused() -> None:
    with pytest.raises(ValueError, match="offset"):
        utc_text(datetime(2026, 5, 1))


@pytest.mark.parametrize("value", [Value(number=1.0), Value(word="on"), Value(state=State.NOT_READ, reason="dark")])
def test_a_value_survives_its_body(value: Value) -> None:
    assert Value.from_body(value.to_body()) == value


def test_a_value_is_one_thing() -> None:
    with pytest.raises(ValueError, match="exactly one"):
        Value(number=1.0, state=State.STOPPED)
    with pytest.raises(ValueError, match="exactly one"):
        Value()
    with pytest.raises(ValueError, match="finite"):
        Value(number=float("nan"))


BODIES = st.recursive(
    st.none()
    | st.booleans()
    | st.integers(-(10**9), 10**9)
    | st.floats(allow_nan=False, allow_infinity=False)
    | st.text(),
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(st.text(max_size=8), inner, max_size=3),
    max_leaves=8,
)


@settings(max_examples=60, deadline=None)
@given(
    st.lists(st.tuples(st.sampled_from(KINDS), st.dictionaries(st.text(max_size=6), BODIES, max_size=3)), max_size=6)
)
def test_any_content_stands_in_the_chain_as_it_was(tmp_path_factory: pytest.TempPathFactory, contents: list) -> None:
    folder = tmp_path_factory.mktemp("any")
    entries = [
        NewEntry(kind, "ME", datetime(2026, 1, 1, tzinfo=UTC), 0, "Chief engineer", body) for kind, body in contents
    ]
    with Book.open(folder) as book:
        book.append_many(entries)
        assert breaks(book.rows()) == ()
        assert [canonical_json(entry.body) for entry in book.entries()] == [
            canonical_json(dict(entry.body)) for entry in entries
        ]
