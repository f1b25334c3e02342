"""When the line drops: the kernel says so once, by a signal, and gives a moment."""

from __future__ import annotations

import asyncio
import signal
import sys
from collections.abc import Callable


def when_dropped(callback: Callable[[], None]) -> None:
    """Have `callback` run on the running loop when the terminal hangs up or the program is asked to end.

    Second line of defence: what was typed is kept as each field is left, since a line that freezes sends no signal,
    and the loop cannot answer one while it waits for the line. Without it Textual ends on either signal at once, with
    nothing unmounted. The callback has to end the app, after keeping what it must.
    """
    # The event loop of Windows takes no signal handlers, and its terminals send none of these.
    if sys.platform != "win32":
        loop = asyncio.get_running_loop()
        for number in (signal.SIGHUP, signal.SIGTERM):
            loop.add_signal_handler(number, callback)
