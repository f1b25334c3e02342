"""A program in a pseudo-terminal, seen through a terminal emulator: for tests of what really reaches a screen.

    with TerminalScreen([sys.executable, "-m", "logbook", "open", str(folder)], columns=80, rows=24) as screen:
        screen.wait_for("Watch")
        screen.send("w")
        screen.wait_for(lambda text: "kW" in text)
        assert "cyl 1" in screen.lines[4]

Waits are for a named condition with a time limit, never for a fixed time.
"""

from __future__ import annotations

import errno
import fcntl
import os
import pty
import re
import select
import signal
import struct
import sys
import termios
import time
from collections.abc import Callable, Mapping, Sequence
from pathlib import Path
from types import TracebackType

import pyte

Cell = tuple[str, str, str, bool, bool, bool, bool, bool]
"""Character, foreground, background, bold, italics, underscore, strikethrough, reverse."""

KEYS = {
    "enter": "\r",
    "tab": "\t",
    "shift+tab": "\x1b[Z",
    "escape": "\x1b",
    "backspace": "\x7f",
    "up": "\x1b[A",
    "down": "\x1b[B",
    "right": "\x1b[C",
    "left": "\x1b[D",
    "home": "\x1b[H",
    "end": "\x1b[F",
    "ctrl+home": "\x1b[1;5H",
    "ctrl+end": "\x1b[1;5F",
    "pageup": "\x1b[5~",
    "pagedown": "\x1b[6~",
    "ctrl+c": "\x03",
    "ctrl+d": "\x04",
    "ctrl+r": "\x12",
    "ctrl+u": "\x15",
    "ctrl+z": "\x1a",
}

# The emulator takes the '<' or '=' of these for the end of the sequence and would draw the rest as text.
_UNKNOWN_TO_THE_EMULATOR = re.compile(rb"\x1b\[[<=][0-9;]*[a-zA-Z]")
# A sequence that goes on in what arrives next.
_UNFINISHED = re.compile(rb"\x1b(\[[<=>?0-9;]*\$?)?\Z")


class _Screen(pyte.Screen):
    def scroll_up(self, count: int = 1) -> None:
        """CSI S, which tmux clears the screen with and the emulator lacks."""
        row, column = self.cursor.y, self.cursor.x
        self.cursor.y = self.margins.top if self.margins else 0
        self.delete_lines(count)
        self.cursor.y, self.cursor.x = row, column


class _Stream(pyte.ByteStream):
    csi = pyte.ByteStream.csi | {"S": "scroll_up"}


class TerminalScreen:
    """A command running in a pseudo-terminal of its own."""

    def __init__(
        self,
        command: Sequence[str],
        *,
        columns: int = 80,
        rows: int = 24,
        variables: Mapping[str, str | None] | None = None,
        folder: Path | None = None,
        replies: Mapping[bytes, bytes] | None = None,
    ) -> None:
        """Start `command`; `variables` are laid over the environment, None takes one away.

        `replies`: what the terminal answers, by the query it is asked; by itself it answers nothing.
        """
        self._replies = dict(replies or {})
        self._screen = _Screen(columns, rows)
        self._stream = _Stream(self._screen)
        self.output = bytearray()
        """Every byte received, in order."""
        self._pending = b""
        self._status: int | None = None
        environment = os.environ | {"TERM": "xterm-256color", "LANG": "C.UTF-8", "LC_ALL": "C.UTF-8"}
        for name, value in (variables or {}).items():
            if value is None:
                environment.pop(name, None)
            else:
                environment[name] = value
        self.pid, self._file = pty.fork()
        if self.pid == 0:
            # The child is a copy of the whole test run: nothing may return from here.
            try:
                _set_size(0, columns, rows)
                if folder is not None:
                    os.chdir(folder)
                os.execvpe(command[0], list(command), environment)
            except BaseException as error:
                print(f"{command[0]}: {error}", file=sys.__stderr__, flush=True)
            finally:
                os._exit(127)

    def __enter__(self) -> TerminalScreen:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        self.close()

    @property
    def received(self) -> int:
        """Bytes received so far."""
        return len(self.output)

    @property
    def columns(self) -> int:
        return int(self._screen.columns)

    @property
    def rows(self) -> int:
        return int(self._screen.lines)

    @property
    def lines(self) -> list[str]:
        """The rows of the screen, blanks at the end taken off."""
        return [line.rstrip() for line in self._screen.display]

    @property
    def text(self) -> str:
        return "\n".join(self.lines)

    @property
    def cursor(self) -> tuple[int, int]:
        """Column and row of the cursor, from 0."""
        return self._screen.cursor.x, self._screen.cursor.y

    @property
    def modes(self) -> set[int]:
        """Modes set, as the emulator numbers them: a private mode times 32, so 25 * 32 for a cursor that shows."""
        return set(self._screen.mode)

    @property
    def picture(self) -> list[list[Cell]]:
        """Characters and attributes of every cell, row by row."""
        return [
            [
                (
                    cell.data, cell.fg, cell.bg, cell.bold, cell.italics,
                    cell.underscore, cell.strikethrough, cell.reverse,
                )
                for cell in (self._screen.buffer[row][column] for column in range(self.columns))
            ]
            for row in range(self.rows)
        ]  # fmt: skip

    def send(self, *keys: str) -> None:
        """Type: names of `KEYS`, or text as it stands."""
        self.send_bytes("".join(KEYS.get(key, key) for key in keys).encode())

    def send_bytes(self, data: bytes) -> None:
        os.write(self._file, data)

    def draw(self, data: bytes) -> None:
        """What another program, or a disturbed line, puts on the screen."""
        self._stream.feed(data)

    def resize(self, columns: int, rows: int) -> None:
        """Give the window another size, as a terminal does: the program is told by a signal."""
        self._screen.resize(rows, columns)
        _set_size(self._file, columns, rows)

    def signal(self, number: signal.Signals) -> None:
        os.kill(self.pid, number)

    def hang_up(self) -> None:
        """Drop the line: the program's terminal is gone."""
        os.close(self._file)
        self._file = -1

    def wait_for(self, expected: str | Callable[[str], bool], within: float = 15.0) -> str:
        """Wait until the text is on the screen or the condition on its text holds; returns the screen's text."""
        deadline = time.monotonic() + within
        while True:
            text = self.text
            if expected in text if isinstance(expected, str) else expected(text):
                return text
            if not self._read(max(0.0, deadline - time.monotonic())):
                wanted = repr(expected) if isinstance(expected, str) else expected.__qualname__
                ended = "" if self.poll() is None else f", the program has ended with {self.poll()}"
                raise AssertionError(f"{wanted} did not appear within {within} s{ended}; the screen:\n{text}")

    def wait_quiet(self, quiet: float = 0.3, within: float = 15.0) -> str:
        """Wait until nothing has arrived for `quiet` seconds; returns the screen's text."""
        deadline = time.monotonic() + within
        while self._read(quiet):
            if time.monotonic() > deadline:
                raise AssertionError(f"the program did not fall silent within {within} s; the screen:\n{self.text}")
        return self.text

    def bytes_of(self, *keys: str, until: str | Callable[[str], bool]) -> int:
        """Bytes received from typing `keys` until the screen shows `until` and is quiet again."""
        before = self.received
        self.send(*keys)
        self.wait_for(until)
        self.wait_quiet()
        return self.received - before

    def poll(self) -> int | None:
        """Exit code when the program has ended (minus the signal that ended it), else None."""
        if self._status is None:
            pid, status = os.waitpid(self.pid, os.WNOHANG)
            if pid:
                self._status = os.waitstatus_to_exitcode(status)
        return self._status

    def wait_stopped(self, within: float = 15.0) -> None:
        """Wait until the program is stopped, as by Ctrl-Z; what it drew until then is read."""
        deadline = time.monotonic() + within
        while time.monotonic() < deadline:
            self._read(0.02)
            pid, status = os.waitpid(self.pid, os.WNOHANG | os.WUNTRACED)
            if pid and os.WIFSTOPPED(status):
                self.wait_quiet(0.05)
                return
        raise AssertionError(f"the program did not stop within {within} s; the screen:\n{self.text}")

    def wait_exit(self, within: float = 15.0) -> int:
        """Wait for the end of the program, reading what it still writes; returns its exit code."""
        deadline = time.monotonic() + within
        while self.poll() is None:
            if time.monotonic() > deadline:
                raise AssertionError(f"the program did not end within {within} s; the screen:\n{self.text}")
            if self._file < 0 or not self._read(0.05):
                time.sleep(0.01)
        while self._file >= 0 and self._read(0.05):
            pass
        code = self.poll()
        assert code is not None
        return code

    def close(self) -> None:
        """End the program and give the terminal back."""
        if self.poll() is None:
            # A stopped program sees a signal only when it goes on; this one is not to be argued with.
            os.kill(self.pid, signal.SIGKILL)
            self._status = os.waitstatus_to_exitcode(os.waitpid(self.pid, 0)[1])
        if self._file >= 0:
            os.close(self._file)
            self._file = -1

    def _read(self, seconds: float) -> bool:
        """Take in what arrives within the time; False when nothing did."""
        if self._file < 0 or not select.select([self._file], [], [], seconds)[0]:
            return False
        try:
            data = os.read(self._file, 65536)
        except OSError as error:
            if error.errno == errno.EIO:  # the other end of a pseudo-terminal is closed
                return False
            raise
        if not data:
            return False
        self.output += data
        data = self._pending + data
        unfinished = _UNFINISHED.search(data)
        self._pending = unfinished.group() if unfinished else b""
        data = data[: len(data) - len(self._pending)]
        for query, reply in self._replies.items():
            if query in data:
                os.write(self._file, reply)
        self._stream.feed(_UNKNOWN_TO_THE_EMULATOR.sub(b"", data))
        return True


def _set_size(file: int, columns: int, rows: int) -> None:
    fcntl.ioctl(file, termios.TIOCSWINSZ, struct.pack("HHHH", rows, columns, 0, 0))
