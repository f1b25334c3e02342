"""The driver that writes only changed cells: the same picture as the stock driver, and how few bytes."""

import random
import re
import shutil
import signal
import sys
import time
from collections.abc import Callable, Iterator
from pathlib import Path
from types import SimpleNamespace

import pyte
import pytest
from terminal_screen import TerminalScreen
from textual.drivers.linux_driver import LinuxDriver
from textual.geometry import Size

from logbook.panes.terminal.driver import ChangedCellsDriver

APP = str(Path(__file__).with_name("small_app.py"))
SWITCH, ASK, WIDTHS = "\x14", "\x0f", "\x18"
SYNCHRONISED = {b"\x1b[?2026$p": b"\x1b[?2026;2$y"}


def started(
    driver: str, *, columns: int = 80, rows: int = 24, replies: dict[bytes, bytes] | None = None
) -> TerminalScreen:
    screen = TerminalScreen([sys.executable, APP, driver], columns=columns, rows=rows, replies=replies)
    screen.wait_for("ready")
    screen.wait_quiet()
    return screen


@pytest.fixture(scope="module")
def pair() -> Iterator[tuple[TerminalScreen, TerminalScreen]]:
    """The small app twice, on terminals that know synchronised output: under the stock driver and under ours."""
    with started("stock", replies=SYNCHRONISED) as stock, started("changed", replies=SYNCHRONISED) as changed:
        yield stock, changed


def same(
    pair: tuple[TerminalScreen, TerminalScreen],
    shows: str | Callable[[str], bool],
    act: Callable[[TerminalScreen], object],
) -> None:
    """Do the same before both, wait for what it shows, and compare every character and attribute."""
    for screen in pair:
        act(screen)
    for screen in pair:
        screen.wait_for(shows)
    for screen in pair:
        screen.wait_quiet(0.1)
    stock, changed = pair
    for number, (expected, found) in enumerate(zip(stock.picture, changed.picture, strict=True)):
        assert found == expected, f"line {number} differs: {stock.lines[number]!r}, {changed.lines[number]!r}"
    assert changed.cursor == stock.cursor


def typed(*keys: str) -> Callable[[TerminalScreen], None]:
    return lambda screen: screen.send(*keys)


def test_same_picture_through_a_session(pair: tuple[TerminalScreen, TerminalScreen]) -> None:
    assert b"\x1b[?2026h" in pair[1].output
    assert pair[1].received < 3000
    assert not re.search(rb"[34]8;[25];", pair[1].output), "sixteen colours"
    same(pair, "712,5", typed("712,5"))
    same(pair, "rack", typed("tab"))
    same(pair, "64", typed("64"))
    same(pair, "moved by one", typed(WIDTHS))
    same(pair, "value 0", typed("tab"))
    same(pair, "value 24", typed(*["down"] * 12))
    same(pair, "value 53", typed("ctrl+end"))
    same(pair, "Esc: no", typed(ASK))
    same(pair, lambda text: "Esc: no" not in text, typed("escape"))
    same(pair, "03 line of the", typed(SWITCH))
    same(pair, "20 line of the", typed("pagedown"))
    same(pair, "value 53", typed(SWITCH))


def test_same_picture_after_the_window_changed_its_size(pair: tuple[TerminalScreen, TerminalScreen]) -> None:
    for columns, rows in ((100, 30), (61, 20), (80, 24)):
        same(pair, "ready", lambda screen, size=(columns, rows): screen.resize(*size))
        same(pair, "ready", typed("up"))


def test_all_is_drawn_again_after_ctrl_z_and_resume(pair: tuple[TerminalScreen, TerminalScreen]) -> None:
    # The stock driver draws only part of it.
    screen = pair[1]
    before = screen.picture
    screen.send("ctrl+z")
    screen.wait_stopped()
    assert 25 * 32 in screen.modes, "the shell must have its cursor"
    screen.draw(b"\x1b[2J\x1b[H[1]+  Stopped    logbook\r\n$ fg\r\n")
    screen.signal(signal.SIGCONT)
    screen.wait_for(lambda _: screen.picture == before)
    assert 25 * 32 not in screen.modes
    screen.send("end", "home")
    screen.wait_quiet()
    assert screen.picture == before


def test_a_size_that_changed_there_and_back_is_drawn_anew(pair: tuple[TerminalScreen, TerminalScreen]) -> None:
    # The program finds its size as it was, and the terminal has lost the columns in between: the stock driver
    # leaves them lost.
    screen = pair[1]
    screen.send("home")
    screen.wait_quiet()
    before = screen.picture
    screen.resize(60, 24)
    screen.resize(80, 24)
    assert screen.picture != before
    screen.send("down", "up")
    screen.wait_for(lambda _: screen.picture == before)


def test_the_redraw_key_takes_away_what_another_program_wrote(pair: tuple[TerminalScreen, TerminalScreen]) -> None:
    screen = pair[1]
    before = screen.picture
    screen.draw(b"\x1b[?7h\x1b[12;30H\x1b[1;31mBroadcast message: \r\n\r\nthe mess closes at eight\x1b[2;3H")
    assert "Broadcast" in screen.text
    screen.send("ctrl+r")
    screen.wait_for(lambda _: screen.picture == before)


def test_bytes_on_the_wire(pair: tuple[TerminalScreen, TerminalScreen]) -> None:
    # With the sixteen bytes of the marks of synchronised output around each.
    screen = pair[1]
    screen.send("ctrl+r", "shift+tab", "ctrl+u")
    screen.wait_quiet()
    assert screen.bytes_of("7", until="7") < 120
    assert screen.bytes_of("tab", until="value") < 250
    assert screen.bytes_of(SWITCH, until="sheet") < 8000
    assert screen.bytes_of("ctrl+r", until="sheet") < 8000
    assert screen.bytes_of(SWITCH, until="value") < 8000


def test_an_idle_screen_sends_nothing(pair: tuple[TerminalScreen, TerminalScreen]) -> None:
    screen = pair[1]
    screen.wait_quiet()
    before = screen.received
    time.sleep(1.2)
    screen.wait_quiet(0.05)
    assert screen.received == before


@pytest.mark.skipif(shutil.which("tmux") is None, reason="needs tmux")
def test_a_session_is_taken_over_by_another_terminal(tmp_path: Path) -> None:
    tmux = ["tmux", "-S", str(tmp_path / "socket"), "-f", "/dev/null"]
    with TerminalScreen([*tmux, "new-session", f"{sys.executable} {APP} changed"]) as first:
        first.wait_for("ready")
        first.send("71")
        first.wait_for("71")
        first.wait_quiet()
        expected = first.picture[:23]
        first.send("\x02", "d")
        first.wait_exit()
    with TerminalScreen([*tmux, "attach"], columns=70, rows=20) as narrow:
        narrow.wait_for("71")
        narrow.send("\x02", "d")
        narrow.wait_exit()
    with TerminalScreen([*tmux, "attach"]) as second:
        second.wait_for(lambda _: second.picture[:23] == expected)
        second.send("ctrl+d")
        assert second.wait_exit() == 0


def test_the_terminal_is_left_clean() -> None:
    with started("changed", replies=SYNCHRONISED) as screen:
        assert b"\x1b[?1000h" not in screen.output, "no mouse unless asked for"
        screen.send("ctrl+d")
        assert screen.wait_exit() == 0
        assert 25 * 32 in screen.modes, "the cursor shows"
        assert 7 * 32 in screen.modes, "lines wrap"
        for mode in (b"1049", b"2004"):
            assert screen.output.rindex(b"\x1b[?" + mode + b"l") > screen.output.rindex(b"\x1b[?" + mode + b"h")
        # What a dropped line would leave on in the terminal, to spoil the next command line.
        for mode in (b"\x1b[?1004", b"\x1b[?2048", b"\x1b[>", b"\x1b[<"):
            assert mode not in screen.output
        assert screen.output.count(b"\x1b[?2026h") == screen.output.count(b"\x1b[?2026l")


def test_a_byte_that_is_no_utf8_does_not_end_the_app(pair: tuple[TerminalScreen, TerminalScreen]) -> None:
    # As a terminal set to Latin-1 sends a letter with an accent.
    for screen in pair:
        screen.send("shift+tab", "ctrl+u")
        screen.wait_quiet(0.1)
        screen.send_bytes(b"1\xe92")
        screen.wait_for("1\ufffd2")


@pytest.fixture
def driver(monkeypatch: pytest.MonkeyPatch) -> tuple[ChangedCellsDriver, pyte.Screen]:
    """The driver by itself: what it sends goes into an emulator of 24 x 6 cells."""
    screen = pyte.Screen(24, 6)
    stream = pyte.Stream(screen)
    monkeypatch.setattr(LinuxDriver, "write", lambda self, data: stream.feed(data))

    def begin(self: LinuxDriver, app: object, **_: object) -> None:
        self._app, self._file = app, SimpleNamespace(encoding="utf-8")  # type: ignore[assignment]

    monkeypatch.setattr(LinuxDriver, "__init__", begin)
    app = SimpleNamespace(size=Size(24, 6))
    return ChangedCellsDriver(app), screen  # type: ignore[arg-type]


def random_frame(chance: random.Random, letters: str) -> str:
    styles = ["", "1", "4;31", "7;33;44", "38;5;39;48;5;49", "97;100", "39;49"]
    runs = []
    for _ in range(chance.randrange(1, 6)):
        text = "".join(chance.choices(letters, k=chance.randrange(1, 10)))
        style = chance.choice(styles)
        x, y = chance.randrange(24), chance.randrange(6)
        runs.append(f"\x1b[{y + 1};{x + 1}H" + (f"\x1b[{style}m{text}\x1b[0m" if style else text))
    return "".join(runs)


@pytest.mark.parametrize("seed", range(5))
def test_random_frames_end_in_the_same_picture(driver: tuple[ChangedCellsDriver, pyte.Screen], seed: int) -> None:
    ours, found = driver
    expected = pyte.Screen(24, 6)
    stream = pyte.Stream(expected)
    expected.reset_mode(7, private=True)
    chance = random.Random(seed)
    for _ in range(60):
        frame = random_frame(chance, "abc ± ─")
        stream.feed(frame)
        ours.write(frame)
        # A terminal that does not wrap writes on in its last column; the driver cuts at the edge.
        for y in range(6):
            for x in range(23):
                assert found.buffer[y][x] == expected.buffer[y][x]


@pytest.mark.parametrize("seed", range(5))
def test_the_terminal_shows_the_wanted_cells_with_wide_characters(
    driver: tuple[ChangedCellsDriver, pyte.Screen], seed: int
) -> None:
    ours, found = driver
    chance = random.Random(seed)
    for number in range(80):
        if number % 20 == 19:
            found.reset()
            ours.forget()
        ours.write(random_frame(chance, "ab寬字é"))
        assert [[found.buffer[y][x].data for x in range(24)] for y in range(6)] == [
            [characters for characters, _ in row] for row in ours._wanted
        ]


@pytest.mark.parametrize(
    ("encoding", "expected"), [("ascii", "82 ?C ? a"), ("iso8859-1", "82 °C ? a"), ("utf-8", "82 °C ─ a")]
)
def test_a_letter_that_the_encoding_lacks_does_not_move_the_others(
    driver: tuple[ChangedCellsDriver, pyte.Screen], encoding: str, expected: str
) -> None:
    ours, found = driver
    ours._file.encoding = encoding  # type: ignore[misc]
    ours.write("\x1b[1;1H82 °C ─ a")
    assert found.display[0].rstrip() == expected


def test_all_is_sent_on_resume_even_if_the_app_draws_nothing(
    driver: tuple[ChangedCellsDriver, pyte.Screen], monkeypatch: pytest.MonkeyPatch
) -> None:
    ours, found = driver
    ours.write("\x1b[2;3Hload")
    found.reset()
    monkeypatch.setattr(LinuxDriver, "resume_application_mode", lambda self: self.write("\x1b[?1049h"))
    ours.resume_application_mode()
    assert found.display[1].strip() == "load"


def test_an_unchanged_frame_sends_nothing(driver: tuple[ChangedCellsDriver, pyte.Screen]) -> None:
    ours, _ = driver
    sent: list[str] = []
    ours.write("\x1b[2;3H\x1b[1mload\x1b[0m")
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(LinuxDriver, "write", lambda self, data: sent.append(data))
        ours.write("\x1b[2;3H\x1b[1mload\x1b[0m")
        assert sent == []
        ours.write("\x1b[2;3H\x1b[1mlead\x1b[0m")
    assert sent == ["\x1b[2;4H\x1b[1me\x1b[m\x1b[2;7H"]


def test_what_is_no_drawing_is_passed_on(driver: tuple[ChangedCellsDriver, pyte.Screen]) -> None:
    ours, _ = driver
    ours.write("\x1b[1;1Ha")
    sent: list[str] = []
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(LinuxDriver, "write", lambda self, data: sent.append(data))
        ours.write("\x07")
        ours.write("\x1b]52;c;YQ==\x07")
        ours.write("\x1b[?2004l")
        ours.write("\x1b]22;default\x07")
        ours.write("\x1b[>25u")
        ours.write("\x1b[1;1H\x1b]8;id=1;https://example.org\x1b\\a\x1b]8;;\x1b\\")
    assert sent == ["\x07", "\x1b]52;c;YQ==\x07", "\x1b[?2004l"]
