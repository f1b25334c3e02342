"""What happens when the line drops: the callback runs, and the program ends of itself."""

import signal
import sys
from collections.abc import Callable
from pathlib import Path

import pytest
from terminal_screen import TerminalScreen

APP = str(Path(__file__).with_name("small_app.py"))


@pytest.mark.parametrize(
    "drop",
    [lambda screen: screen.signal(signal.SIGTERM), lambda screen: screen.hang_up()],
    ids=["asked to end", "terminal gone"],
)
def test_what_was_typed_is_kept(tmp_path: Path, drop: Callable[[TerminalScreen], None]) -> None:
    kept = tmp_path / "kept"
    with TerminalScreen([sys.executable, APP, "changed", str(kept)]) as screen:
        screen.wait_for("ready")
        screen.wait_quiet()
        screen.send("714")
        screen.wait_for("714")
        drop(screen)
        assert screen.wait_exit() == 0
    assert kept.read_text() == "714"
