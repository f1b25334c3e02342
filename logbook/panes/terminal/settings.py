"""Settings of Textual for a slow line: nothing moves or ticks, few colours, only what changed is sent."""

from __future__ import annotations

import sys
from typing import TypeVar

from rich.console import ColorSystem
from textual.app import App

Result = TypeVar("Result")


def run(app: App[Result], *, plain_driver: bool = False) -> Result | None:
    """Run the app on the terminal of this process, without mouse; returns what the app returns.

    Arguments: plain_driver: Textual's own driver instead of the one that writes only changed cells.
    """
    app.animation_level = "none"
    app.use_command_palette = False
    # Rich offers no way to set it later, and Textual makes the console. A colour of the sixteen costs 2 bytes, one of
    # sixteen million up to 16, and every terminal has the sixteen, with the person's own choice for glare or dark.
    app.console._color_system = ColorSystem.STANDARD
    # Textual has no other driver where there are no Unix terminals.
    if not plain_driver and sys.platform != "win32":
        from logbook.panes.terminal.driver import ChangedCellsDriver

        app.driver_class = ChangedCellsDriver
    return app.run(mouse=False)
