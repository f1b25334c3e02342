"""A CSV or XLSX file as a sheet of text cells, just as it was written."""

from __future__ import annotations

import csv
import hashlib
import io
import zipfile
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date, datetime, time
from pathlib import Path
from typing import Any

LARGEST_FILE_BYTES = 200_000_000
LARGEST_UNPACKED_BYTES = 1_000_000_000
"""A crafted XLSX of a few kilobytes may unpack to far more than any log."""
DELIMITERS = ";,\t|"

# openpyxl lets whatever it stumbles over in a damaged file come through as it is; SyntaxError is the XML parser's.
_STUMBLES = (
    zipfile.BadZipFile, KeyError, ValueError, IndexError, AttributeError, TypeError, EOFError, OSError, SyntaxError,
)  # fmt: skip


class SheetUnusable(Exception):
    """The file cannot be read as a sheet: a sentence that says what to do."""


@dataclass(frozen=True, slots=True)
class SheetRow:
    """One row: its number as a spreadsheet shows it, its cells as text without blanks at the ends."""

    number: int
    cells: tuple[str, ...]


@dataclass(frozen=True)
class Sheet:
    """Heads and rows of one file. Rows without any content are left out."""

    file_name: str
    digest: str
    """SHA-256 of the file"""
    heads: tuple[str, ...]
    rows: tuple[SheetRow, ...]


def read_sheet(path: Path, *, sheet: str = "", head_row: int = 1, delimiter: str = "", encoding: str = "") -> Sheet:
    """Read a CSV or XLSX file.

    `sheet` names the XLSX sheet (else the first); `delimiter` and `encoding` overrule what is found in a CSV file.
    Raises SheetUnusable.
    """
    try:
        if path.stat().st_size > LARGEST_FILE_BYTES:
            raise SheetUnusable(f"{path} is larger than {LARGEST_FILE_BYTES // 10**6} MB; split it by year.")
        content = path.read_bytes()
    except OSError as error:
        raise SheetUnusable(f"{path} cannot be read: {error.strerror or error}.") from error
    numbered = (
        _xlsx_rows(path, content, sheet)
        if path.suffix.lower() in (".xlsx", ".xlsm")
        else _csv_rows(path, content, delimiter, encoding)
    )
    heads: tuple[str, ...] | None = None
    rows: list[SheetRow] = []
    for number, cells in numbered:
        if number < head_row:
            continue
        stripped = tuple(cell.strip() for cell in cells)
        if heads is None:
            heads = stripped
        elif any(stripped):
            rows.append(SheetRow(number, stripped))
    if heads is None or not any(heads):
        raise SheetUnusable(f"{path} has no line {head_row} with the heads of its columns; name the line as head_row.")
    twice = sorted({head for head in heads if head and heads.count(head) > 1})
    if twice:
        raise SheetUnusable(f"{path} has more than one column named {', '.join(twice)}; give each its own name.")
    return Sheet(path.name, hashlib.sha256(content).hexdigest(), heads, tuple(rows))


def _csv_rows(path: Path, content: bytes, delimiter: str, encoding: str) -> Iterator[tuple[int, list[str]]]:
    text = _decoded(path, content, encoding)
    if "\x00" in text:
        raise SheetUnusable(f"{path} is no text file. Save the sheet as CSV or XLSX.")
    delimiter = delimiter or _delimiter_of(text)
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=delimiter)
    while True:
        number = reader.line_num + 1
        try:
            cells = next(reader)
        except StopIteration:
            return
        except csv.Error as error:
            raise SheetUnusable(f"{path}, line {number}: {error}. Mend that line or save the sheet anew.") from error
        yield number, cells


def _decoded(path: Path, content: bytes, encoding: str) -> str:
    # Spreadsheets save either UTF-8 (with or without a byte-order mark) or the Windows code page of the office.
    for name in (encoding,) if encoding else ("utf-8-sig", "cp1252"):
        try:
            return content.decode(name)
        except UnicodeDecodeError:
            continue
        except LookupError as error:
            raise SheetUnusable(f"'{name}' is no encoding that is known; try utf-8 or cp1252.") from error
    raise SheetUnusable(f"{path} is no text in UTF-8 or cp1252; name its encoding in the column map.")


def _delimiter_of(text: str) -> str:
    first = next((line for line in text.splitlines() if line.strip()), "")
    # Outside quotation marks: a head such as "hour ending (local, UTC+3)" holds a comma of its own.
    bare = "".join(part for index, part in enumerate(first.split('"')) if index % 2 == 0)
    return max(DELIMITERS, key=bare.count)


def _xlsx_rows(path: Path, content: bytes, sheet: str) -> Iterator[tuple[int, list[str]]]:
    from openpyxl import load_workbook

    try:
        with zipfile.ZipFile(io.BytesIO(content)) as packed:
            if sum(member.file_size for member in packed.infolist()) > LARGEST_UNPACKED_BYTES:
                raise SheetUnusable(
                    f"{path} unpacks to more than {LARGEST_UNPACKED_BYTES // 10**9} GB; it was left alone."
                )
        book = load_workbook(io.BytesIO(content), read_only=True, data_only=True)
        if sheet and sheet not in book.sheetnames:
            raise SheetUnusable(f"{path} has no sheet '{sheet}'; it has: {', '.join(book.sheetnames)}.")
        page = book[sheet] if sheet else book[book.sheetnames[0]]
        for number, row in enumerate(page.iter_rows(values_only=True), start=1):
            yield number, [_cell_text(cell) for cell in row]
    except SheetUnusable:
        raise
    except _STUMBLES as error:
        raise SheetUnusable(f"{path} is no XLSX sheet that can be read ({error}). Save it anew, or as CSV.") from error


def _cell_text(cell: Any) -> str:
    """What a spreadsheet cell shows, as a person would have typed it."""
    if cell is None:
        return ""
    if isinstance(cell, datetime):
        return cell.strftime("%Y-%m-%d") if cell.time() == time() else cell.isoformat(sep=" ", timespec="minutes")
    if isinstance(cell, date):
        return cell.isoformat()
    if isinstance(cell, time):
        return cell.strftime("%H:%M")
    if isinstance(cell, float):
        # 15 digits are what a spreadsheet keeps; more is the noise of binary fractions.
        return f"{cell:.15g}"
    return str(cell)
