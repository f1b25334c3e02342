"""Settings of Textual for a slow line and for terminals that are nothing special."""

from __future__ import annotations

import codecs
import dataclasses
import functools
import sys
from typing import TypeVar

from rich.color import ColorSystem
from textual.app import App
from textual.scrollbar import ScrollBar, ScrollBarRender
from textual.theme import BUILTIN_THEMES

Result = TypeVar("Result")


_TERMINALS_OWN = BUILTIN_THEMES["ansi-dark"]
THEME = dataclasses.replace(
    _TERMINALS_OWN, name="logbook", variables={**_TERMINALS_OWN.variables, "text-muted": "ansi_bright_black"}
)
"""The terminal's own sixteen colours on its own background: the person's choice for glare or for the dark holds, and
a blank costs nothing, where a painted background makes four times as many bytes of a page. Only the grey of what is
said aside is added, which Textual leaves as the text."""


class PlainScrollBar(ScrollBarRender):
    """A scroll bar of whole cells: its half cells are blocks that few fonts hold, sent again at each step."""

    VERTICAL_BARS = [" "] * 8
    HORIZONTAL_BARS = [" "] * 8


def run(app: App[Result], *, plain_driver: bool = False) -> Result | None:
    """Run the app on the terminal of this process, without mouse; returns what the app returns.

    Nothing moves: no animation, no command palette. A pane that holds Inputs gives them `cursor_blink=False`.

    Arguments: plain_driver: Textual's own driver instead of the one that writes only changed cells.
    """
    app.animation_level = "none"
    app.use_command_palette = False
    app.register_theme(THEME)
    app.theme = THEME.name
    # For what is coloured beside the theme. Textual makes the console and Rich has no way to set this later. A colour
    # of the sixteen costs two or three bytes, one of sixteen million up to sixteen.
    app.console._color_system = ColorSystem.STANDARD
    ScrollBar.renderer = PlainScrollBar
    # Textual has no other driver where there are no Unix terminals.
    if sys.platform != "win32":
        from textual.drivers import linux_driver

        from logbook.panes.terminal.driver import ChangedCellsDriver

        # Noise on the line, or a terminal set to Latin-1, sends bytes that are no UTF-8: they are to be shown as
        # unreadable, and not to end the program.
        linux_driver.getincrementaldecoder = _forgiving_decoder  # type: ignore[attr-defined,assignment]
        if not plain_driver:
            app.driver_class = ChangedCellsDriver
    return app.run(mouse=False)


def _forgiving_decoder(encoding: str) -> functools.partial[codecs.IncrementalDecoder]:
    return functools.partial(codecs.getincrementaldecoder(encoding), errors="replace")
