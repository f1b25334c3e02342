"""Every command of the README is run, on a copy of the demonstration vessel and a plant made by the tour itself."""

import os
import re
import shlex
import shutil
import subprocess
import sys
from pathlib import Path

import pytest
from terminal_screen import TerminalScreen

ROOT = Path(__file__).parents[1]
README = (ROOT / "README.md").read_text(encoding="utf-8")
BLOCKS = re.findall(r"```sh\n(.*?)```", README, flags=re.DOTALL)


def commands() -> list[str]:
    return [line for block in BLOCKS for line in block.splitlines() if line.startswith("logbook ")]


@pytest.fixture(scope="module")
def tour(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A folder with the vessel's book in it and an old log; the commands run here in their order."""
    folder = tmp_path_factory.mktemp("tour")
    made = subprocess.run(
        [sys.executable, "-m", "demo_vessel", "--build-only", "--folder", str(folder / "demo_vessel")],
        cwd=ROOT, capture_output=True, text=True, check=False,
    )  # fmt: skip
    assert made.returncode == 0, made.stderr
    (folder / "old_log.csv").write_text(
        "Date;Time;RPM;Shaft kW\n14.05.2026;0400;98,2;6610\n14.05.2026;0800;98,0;6580\n"
    )
    return folder


def test_the_tour(tour: Path) -> None:
    assert len(commands()) >= 16
    (tour / "bin").mkdir()
    wrapper = tour / "bin" / "logbook"
    wrapper.write_text(f'#!/bin/sh\nexec {shlex.quote(sys.executable)} -m logbook "$@"\n')
    wrapper.chmod(0o755)
    environment = os.environ | {"PATH": f"{tour / 'bin'}:{os.environ['PATH']}"}
    for command in commands():
        done = subprocess.run(
            command, shell=True, cwd=tour, env=environment, capture_output=True, text=True, check=False
        )
        assert done.returncode == 0, f"{command}\n{done.stdout[-800:]}\n{done.stderr[-800:]}"
        assert "Traceback" not in done.stderr
    shown = subprocess.run(
        "logbook entries my_ship", shell=True, cwd=tour, env=environment, capture_output=True, text=True, check=True
    )
    assert shown.stdout.count("watch") == 3


def test_the_first_command_opens_the_vessel(tour: Path) -> None:
    """What the README's first command runs after its own set-up; the set-up is the test command's too."""
    command = next(line for block in BLOCKS for line in block.splitlines() if line.endswith("-m demo_vessel"))
    assert command.startswith("python3 -m venv .venv && .venv/bin/pip install --quiet --editable . && ")
    shutil.copy(ROOT / "demo_vessel" / "plant.toml", tour / "demo_vessel" / "plant.toml")
    run = [sys.executable, "-m", "demo_vessel", "--folder", str(tour / "demo_vessel")]
    with TerminalScreen(run, folder=ROOT) as screen:
        screen.wait_for("[Watch]", within=60)
        screen.send("l")
        screen.wait_for("reversible bound", within=60)
        assert "Excess" in screen.text
        screen.send("t")
        screen.wait_for("running hours", within=60)
        screen.send("b")
        screen.wait_for("head of the book", within=30)
        screen.send("?")
        screen.wait_for("Cautions", within=30)
        screen.send("escape")
        screen.wait_for("head of the book", within=30)
        screen.send("q")
        assert screen.wait_exit() == 0


def test_pictures_are_there() -> None:
    for picture in re.findall(r"\]\((demo_vessel/pictures/\w+\.svg)\)", README):
        text = (ROOT / picture).read_text(encoding="utf-8")
        assert text.startswith("<svg")
        # A picture must not fetch a font from the net.
        assert "@font-face" not in text
