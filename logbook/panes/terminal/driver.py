"""The driver that writes only the cells that changed.

Textual paints regions: a pane, a line of a table, again and again with the same content, tens of kilobytes for a change
of pane. Over a satellite line that is seconds. This driver reads what Textual writes into a grid of cells, compares it
with the grid of what the terminal shows, and sends the difference.

It leans on private habits of one minor version of Textual (the packaging pins it): a frame comes in one `write` and
begins with a cursor position; a mode or a query comes in a `write` of its own; styles are always set from plain and
reset after the text.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Any

from rich.cells import split_graphemes
from textual._ansi_sequences import SYNC_END, SYNC_START
from textual.drivers.linux_driver import LinuxDriver

if TYPE_CHECKING:
    from textual.app import App

Cell = tuple[str, str]
"""The character(s) of a cell and the parameters of its style; no character in the second half of a wide one."""

BLANK: Cell = (" ", "")

# Text; a sequence with parameters and final character; an operating system command; any other control or escape.
_TOKEN = re.compile(
    r"([^\x00-\x1f\x7f]+)|\x1b\[([0-?]*)[ -/]*([@-~])|(\x1b\].*?(?:\x07|\x1b\\))|\x1b?[\x00-\x7f]", re.S
)

# Reset, and the terminal's own colours, in the spellings that Rich has for them.
_PLAIN = frozenset({"", "0", "39", "49", "39;49"})

# Asked for by Textual and not passed on. The kitty keyboard (>, <), the report of focus (1004) and that of the size
# (2048; a signal tells it as well) would stay on in the person's terminal when the line drops, and fill the next
# command line with codes; old consoles print them.
_NOT_ASKED_FOR = ("\x1b[>", "\x1b[<", "\x1b[?1004", "\x1b[?2048")

# A link (8) is not drawn and costs its address; the shape of the pointer (22) is for a mouse.
_NOT_NEEDED = ("\x1b]8;", "\x1b]22;")

# ASCII in the terminal's first character set, plain style, no wrapping, no cursor, an empty screen: whatever a
# disturbed line or another program left behind.
_ANEW = "\x1b(B\x0f\x1b[m\x1b[?7l\x1b[?25l\x1b[2J"


class ChangedCellsDriver(LinuxDriver):
    """Textual's driver for Unix terminals, sending only what differs from what the terminal shows."""

    def __init__(
        self, app: App[Any], *, debug: bool = False, mouse: bool = False, size: tuple[int, int] | None = None
    ) -> None:
        super().__init__(app, debug=debug, mouse=mouse, size=size)
        self._wanted: list[list[Cell]] = []
        self._shown: list[list[Cell]] = []
        self._x = self._y = 0
        self._style = ""
        self._forgotten = True
        self._synchronised = False

    def forget(self) -> None:
        """Hold nothing for shown: the whole screen is drawn anew with the next frame.

        For a size that changed, a terminal that another program wrote on, a session taken over by another terminal.
        """
        self._forgotten = True

    def write(self, data: str) -> None:
        """Send a mode as it is, and of a frame what changed."""
        if data in (SYNC_START, SYNC_END):
            # Textual writes these only where the terminal understands them; they are sent around what is sent.
            self._synchronised = True
        elif data.startswith(_NOT_ASKED_FOR):
            return
        elif data.startswith("\x1b[?"):
            if data.startswith("\x1b[?1049"):
                self._forgotten = True
            super().write(data)
        else:
            changes = self._take(data) + self._changes()
            if changes:
                # A letter that the encoding lacks is one "?": an escape of six letters would move all behind it.
                assert self._file is not None
                encoding = self._file.encoding
                changes = changes.encode(encoding, "replace").decode(encoding)
                super().write(f"{SYNC_START}{changes}{SYNC_END}" if self._synchronised else changes)

    def resume_application_mode(self) -> None:
        super().resume_application_mode()
        # The terminal's other screen begins empty, and Textual does not always draw all of it again.
        self.write("")

    def _get_terminal_size(self) -> tuple[int, int]:
        # Asked at the start and whenever the window changed: a terminal may have cut or moved what it showed.
        self._forgotten = True
        return super()._get_terminal_size()

    def _take(self, frame: str) -> str:
        """Put a frame into the grid of wanted cells; returns what is no drawing and is passed on as it is."""
        self._fit()
        passed_on = []
        for token in _TOKEN.finditer(frame):
            text, parameters, final, command = token.groups()
            if text is not None:
                self._put(text)
            elif final == "H":
                row, _, column = parameters.partition(";")
                self._x, self._y = int(column or 1) - 1, int(row or 1) - 1
            elif final == "m":
                plain = parameters in _PLAIN
                self._style = "" if plain else f"{self._style};{parameters}".lstrip(";")
            elif token.group() == "\n":
                self._x, self._y = 0, self._y + 1
            elif command is None or not command.startswith(_NOT_NEEDED):
                # The bell, the clipboard, a title.
                passed_on.append(token.group())
        return "".join(passed_on)

    def _fit(self) -> None:
        """Give the grids the size of the screen Textual draws on, keeping what there is."""
        width, height = self._app.size
        if len(self._wanted) == height and all(len(row) == width for row in self._wanted):
            return
        rows = [row[:width] + [BLANK] * (width - len(row)) for row in self._wanted[:height]]
        self._wanted = rows + [[BLANK] * width for _ in range(height - len(rows))]
        self._forgotten = True

    def _put(self, text: str) -> None:
        """Write text into the wanted cells at the cursor; what would stand beyond the edge is cut off."""
        if not 0 <= self._y < len(self._wanted):
            return
        row = self._wanted[self._y]
        spans = [(i, i + 1, 1) for i in range(len(text))] if text.isascii() else split_graphemes(text)[0]
        for start, end, cells in spans:
            x = self._x
            self._x += cells
            if cells == 0 or self._x > len(row):
                continue
            # Half of a wide character cannot stay.
            if row[x][0] == "":
                row[x - 1] = (" ", row[x - 1][1])
            if self._x < len(row) and row[self._x][0] == "":
                row[self._x] = (" ", row[self._x][1])
            row[x] = (text[start:end], self._style)
            if cells == 2:
                row[x + 1] = ("", self._style)

    def _changes(self) -> str:
        """What makes the terminal show the wanted cells, and its cursor where the frame left it."""
        sent = []
        if self._forgotten:
            self._forgotten = False
            self._shown = [[BLANK] * len(row) for row in self._wanted]
            sent.append(_ANEW)
        style = ""
        for y, (row, shown) in enumerate(zip(self._wanted, self._shown, strict=True)):
            if row == shown:
                continue
            at = -1  # the terminal's column in this row where it is known
            for x, cell in enumerate(row):
                characters, cell_style = cell
                wide = x + 1 < len(row) and row[x + 1][0] == ""
                if characters == "" or (cell == shown[x] and not (wide and row[x + 1] != shown[x + 1])):
                    continue
                if at < 0:
                    sent.append(f"\x1b[{y + 1};{x + 1}H")
                elif at < x:
                    sent.append(f"\x1b[{x - at}C" if x - at > 1 else "\x1b[C")
                if cell_style != style:
                    sent.append(f"\x1b[{'0;' if style and cell_style else ''}{cell_style}m")
                    style = cell_style
                sent.append(characters)
                # Terminals do not agree on the width of everything: after such a one the place is named again.
                at = -1 if wide or len(characters) > 1 else x + 1
            shown[:] = row
        if style:
            sent.append("\x1b[m")
        if sent:
            sent.append(f"\x1b[{self._y + 1};{self._x + 1}H")
        return "".join(sent)
