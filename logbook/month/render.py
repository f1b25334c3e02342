"""The monthly summary as plain text, Markdown and CSV."""

from __future__ import annotations

import csv
import io
import textwrap
from collections.abc import Callable

from logbook.answers.month import Month, Table

WIDTH = 100
# A cell that begins like this would be worked out as a formula by a spreadsheet.
_FORMULA_STARTS = ("=", "+", "-", "@", "\t", "\r")


def _title(month: Month) -> str:
    return f"{month.plant}: monthly performance summary, {month.title}"


def _span(month: Month) -> str:
    return f"From {month.from_utc:%Y-%m-%d %H:%M}Z to {month.to_utc:%Y-%m-%d %H:%M}Z."


def as_text(month: Month) -> str:
    """Plain text, wrapped."""
    lines = [_title(month), "=" * len(_title(month)), _span(month)]
    for number, section in enumerate(month.sections, 1):
        lines += ["", f"{number} {section.title}", "-" * (len(section.title) + 2)]
        for sentence in section.sentences:
            lines += textwrap.wrap(sentence, WIDTH, subsequent_indent="  ", break_long_words=False) or [""]
        for table in section.tables:
            lines += _text_table(table)
    return "\n".join(lines) + "\n"


def _text_table(table: Table) -> list[str]:
    if not table.rows:
        return ["(none)"]
    widths = [max(len(row[index]) for row in [table.heads, *table.rows]) for index in range(len(table.heads))]

    def set_row(row: tuple[str, ...]) -> str:
        return "  ".join(cell.ljust(width) for cell, width in zip(row, widths, strict=True)).rstrip()

    return [set_row(table.heads), set_row(tuple("-" * width for width in widths)), *map(set_row, table.rows)]


def as_markdown(month: Month) -> str:
    """Markdown with pipe tables."""
    lines = [f"# {_title(month)}", "", _span(month)]
    for number, section in enumerate(month.sections, 1):
        lines += ["", f"## {number} {section.title}", ""]
        lines += [f"* {_escaped(sentence)}" for sentence in section.sentences]
        for table in section.tables:
            lines += ["", _pipe(table.heads), _pipe(tuple("---" for _ in table.heads)), *map(_pipe, table.rows)]
    return "\n".join(lines) + "\n"


def _escaped(text: str) -> str:
    for sign in ("\\", "|", "*", "_", "<", "`", "["):
        text = text.replace(sign, f"\\{sign}")
    return text


def _pipe(cells: tuple[str, ...]) -> str:
    return f"| {' | '.join(cell if set(cell) == {'-'} else _escaped(cell) for cell in cells)} |"


def as_csv(month: Month) -> str:
    """Every line with its section: section, table, row, head, value."""
    stream = io.StringIO()
    writer = csv.writer(stream, lineterminator="\n")
    writer.writerow(("section", "table", "row", "head", "value"))
    writer.writerow(("", "", "", "title", _harmless(_title(month))))
    writer.writerow(("", "", "", "span", _span(month)))
    for section in month.sections:
        for number, sentence in enumerate(section.sentences, 1):
            writer.writerow((section.title, "", number, "sentence", _harmless(sentence)))
        for table_number, table in enumerate(section.tables, 1):
            for row_number, row in enumerate(table.rows, 1):
                for head, cell in zip(table.heads, row, strict=True):
                    writer.writerow((section.title, table_number, row_number, head, _harmless(cell)))
    return stream.getvalue()


def _harmless(cell: str) -> str:
    """A text that a spreadsheet shows and never works out; numbers stay numbers."""
    if not cell.startswith(_FORMULA_STARTS):
        return cell
    try:
        float(cell)
    except ValueError:
        return f"'{cell}"
    return cell


FORMATS: dict[str, Callable[[Month], str]] = {"text": as_text, "markdown": as_markdown, "csv": as_csv}
