"""Book: the entries in order of time, amendments struck out, one in full beside the list."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, ClassVar

from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.widgets import DataTable, Static

from logbook.answers import entries as answer
from logbook.book.entry import Entry
from logbook.panes.pane import Pane

if TYPE_CHECKING:
    from logbook.panes.app import LogbookApp, Session

WINDOW = 200
"""Entries loaded at a time: a table of fifty thousand rows would take seconds to fill."""


class BookPane(Pane):
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("enter", "open", "in full", id="book.open"),
        Binding("e", "engine", "next engine", id="book.engine"),
        Binding("left_square_bracket,comma", "older", "older", id="book.older"),
        Binding("right_square_bracket,full_stop", "newer", "newer", id="book.newer"),
        Binding("escape", "close", "back to the list", id="book.close"),
    ]

    def __init__(self, session: Session) -> None:
        super().__init__()
        self.session = session
        self._subject: str | None = None
        self._until: list[int] = []
        """how many of the latest entries lie beyond the window, one for each page turned back"""
        self._shown: list[Entry] = []
        self._mark: tuple[int, int] | None = None

    def compose(self) -> ComposeResult:
        table: DataTable[str] = DataTable(id="book-table", cursor_type="row", zebra_stripes=False)
        table.cell_padding = 0
        yield table
        yield Static(id="book-entry")

    def on_mount(self) -> None:
        table = self.query_one("#book-table", DataTable)
        for name, width in (("", 7), ("ship time", 23), ("what", 11), ("of", 7), ("content", 54), ("by", 18)):
            table.add_column(name, width=width)
        self.query_one("#book-entry").display = False

    def shown(self) -> None:
        self.screen.set_focus(self.query_one("#book-table", DataTable))
        mark = self.session.book.change_mark()
        if mark != self._mark:
            self._mark = mark
            self._fill()

    def _fill(self) -> None:
        book = self.session.book
        beyond = self._until[-1] if self._until else 0
        found = book.entries(subject=self._subject, struck_out=True, latest=beyond + WINDOW)
        self._shown = found[: len(found) - beyond]
        replaced = book.replaced()
        lines = answer.lines(self.session.plant, self._shown, replaced)
        table = self.query_one("#book-table", DataTable)
        with self.app.batch_update():
            table.clear()
            for line in lines:
                content = f"[{line.marks}] {line.content}" if line.marks else line.content
                table.add_row(
                    f"{'~' if line.struck_out else ' '}{line.number}",
                    line.ship_time,
                    line.kind,
                    line.subject,
                    content.replace("[", r"\["),
                    line.person,
                )
            if lines:
                table.move_cursor(row=len(lines) - 1, animate=False)
        of = self._subject or "all"
        head = book.head()
        self._app.say(f"{of}: {len(lines)} entries shown; head of the book: entry {head[0]}, digest {head[1][:16]}...")

    @property
    def _app(self) -> LogbookApp:
        return self.app  # type: ignore[return-value]

    def on_data_table_row_selected(self) -> None:
        self.action_open()

    def action_open(self) -> None:
        table = self.query_one("#book-table", DataTable)
        if not self._shown:
            return
        entry = self._shown[table.cursor_row]
        text = "\n".join(answer.in_full(self.session.plant, entry, self.session.book.replaced()))
        detail = self.query_one("#book-entry", Static)
        detail.update(text.replace("[", r"\["))
        detail.display = True

    def action_close(self) -> None:
        self.query_one("#book-entry").display = False
        self.screen.set_focus(self.query_one("#book-table", DataTable))

    def action_engine(self) -> None:
        subjects = [None, *(engine.id for engine in self.session.plant.engines), "plant"]
        self._subject = subjects[(subjects.index(self._subject) + 1) % len(subjects)]
        self._until = []
        self._fill()

    def action_older(self) -> None:
        if len(self._shown) == WINDOW:
            self._until.append((self._until[-1] if self._until else 0) + WINDOW)
            self._fill()
        else:
            self._app.say("The book begins here.")

    def action_newer(self) -> None:
        if self._until:
            self._until.pop()
            self._fill()
        else:
            self._app.say("These are the latest entries.")

    def keys_line(self) -> str:
        return "Enter in full  Esc list  e next engine  , older  . newer  ? keys and cautions  q leave"

    def help_lines(self) -> Sequence[str]:
        return (
            "Up, Down      an entry back or on",
            "Enter         the entry in full; Esc back to the list",
            "e             entries of the next engine, of the plant, of all",
            ",  .          two hundred entries older, newer",
            "~             struck out: an amendment stands in its place",
        )
