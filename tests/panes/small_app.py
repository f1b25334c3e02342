"""A small app for the tests of the driver: python small_app.py stock|changed [file for what is kept]"""

import sys
from pathlib import Path
from typing import ClassVar

from textual.app import App, ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical, VerticalScroll
from textual.screen import ModalScreen
from textual.widgets import ContentSwitcher, DataTable, Input, Label, Static

from logbook.panes.terminal.driver import ChangedCellsDriver
from logbook.panes.terminal.dropped_line import when_dropped
from logbook.panes.terminal.settings import run


class Question(ModalScreen[None]):
    DEFAULT_CSS = """
    Question { align: center middle; background: $background; }
    Question > Vertical { width: 40; height: 7; border: round $primary; background: $surface; }
    """
    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "app.pop_screen")]

    def compose(self) -> ComposeResult:
        with Vertical():
            yield Label("[b]Sign off?[/b]")
            yield Label("[i]Esc: no[/i]")


class SmallApp(App[None]):
    ENABLE_COMMAND_PALETTE = False
    CSS = """
    Input, Input:focus { border: none; height: 1; }
    #wide { background: $primary; width: 100%; }
    #rows { height: 8; }
    #sheet { border: heavy $secondary; }
    """
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("ctrl+r", "redraw", priority=True),
        Binding("ctrl+z", "suspend_process", priority=True),
        Binding("ctrl+t", "switch", priority=True),
        Binding("ctrl+o", "ask", priority=True),
        Binding("ctrl+x", "widths", priority=True),
        Binding("ctrl+d", "quit", priority=True),
    ]

    def compose(self) -> ComposeResult:
        yield Static("jacket water 82 °C ± 1  寬度測試 wide 字", id="wide")
        yield Input(placeholder="speed", id="speed")
        yield Input(placeholder="rack", id="rack")
        with ContentSwitcher(initial="rows", id="panes"):
            yield DataTable(id="rows")
            with VerticalScroll(id="sheet"):
                for number in range(40):
                    yield Label(f"[reverse]{number:02}[/] line of the [u]sheet[/u] [dim]grey[/dim] [red]red[/red]")
        yield Static("ready", id="state")

    def on_mount(self) -> None:
        for field in self.query(Input):
            field.cursor_blink = False
        table = self.query_one(DataTable)
        table.add_columns("number", "value")
        for number in range(60):
            table.add_row(str(number), f"value {number * 7 % 60}")
        self.query_one("#speed").focus()
        when_dropped(self.keep_and_leave)

    def keep_and_leave(self) -> None:
        if len(sys.argv) > 2:
            Path(sys.argv[2]).write_text(self.query_one("#speed", Input).value)
        self.exit()

    def action_switch(self) -> None:
        switcher = self.query_one(ContentSwitcher)
        self.set_focus(None)
        switcher.current = "sheet" if switcher.current == "rows" else "rows"
        switcher.query_one(f"#{switcher.current}").focus()

    def action_ask(self) -> None:
        self.push_screen(Question())

    def action_widths(self) -> None:
        self.query_one("#wide", Static).update("x字寬度 wide 字字 moved by one", layout=False)

    def action_redraw(self) -> None:
        if isinstance(self._driver, ChangedCellsDriver):
            self._driver.forget()
        self.screen.refresh(layout=True)


if __name__ == "__main__":
    run(SmallApp(), plain_driver=sys.argv[1] == "stock")
