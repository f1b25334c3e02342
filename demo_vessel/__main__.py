"""`python -m demo_vessel`: make the book of the demonstration vessel if it is not there yet, and open the panes."""

from __future__ import annotations

import argparse
import sys
from collections.abc import Sequence
from pathlib import Path
from typing import TextIO

from demo_vessel.generate import generate
from demo_vessel.writing import write
from logbook.book.book import Book, BookUnusable
from logbook.plant.description import PlantUnusable, read_plant
from logbook.plant.fields import FILE_NAME

HERE = Path(__file__).parent
CANNOT_USE_FOLDER, INTERRUPTED = 3, 130
_WIDTH = 40


class Unusable(Exception):
    """The folder cannot take the book: a sentence that says what to do."""


class Bar:
    """One line on standard error. On anything but a terminal only its beginning and its end are written."""

    def __init__(self, stream: TextIO) -> None:
        self._stream = stream
        self._alive = stream.isatty()
        self._shown = -1

    def show(self, share: float) -> None:
        percent = int(100 * share)
        if percent == self._shown or not (self._alive or percent in (0, 100)):
            return
        self._shown = percent
        done = "#" * (percent * _WIDTH // 100)
        line = f"two years of readings [{done:<{_WIDTH}}] {percent:3d} %"
        self._stream.write(f"\r{line}" if self._alive else f"{line}\n")
        if self._alive and percent == 100:
            self._stream.write("\n")
        self._stream.flush()


def prepare(folder: Path) -> None:
    """The folder with the vessel's plant.toml in it. Raises Unusable."""
    text = (HERE / FILE_NAME).read_text(encoding="utf-8")
    described = folder / FILE_NAME
    try:
        folder.mkdir(parents=True, exist_ok=True)
        if not described.exists():
            described.write_text(text, encoding="utf-8")
        elif described.read_text(encoding="utf-8") != text:
            raise Unusable(f"{described} describes another plant; nothing was written. Name an empty folder.")
    except OSError as error:
        raise Unusable(f"{folder} cannot be used: {error.strerror}. Name a folder that you may write in.") from error


def build(folder: Path, stream: TextIO) -> int:
    """Write the book if it holds no readings yet; returns the number of entries written.

    One transaction: a build that is broken off leaves a book without entries. Raises BookUnusable, PlantUnusable.
    """
    plant = read_plant(folder)
    try:
        with Book.open(folder, read_only=True) as book:
            if book.entries(kinds=["reading"], latest=1):
                return 0
    except BookUnusable:
        # No book yet, or one that this account cannot use: opening it to write says which.
        pass
    with Book.open(folder) as book:
        bar = Bar(stream)
        bar.show(0.0)
        history = generate(progress=lambda share: bar.show(0.5 * share))
        total = len(history.records) + 1
        written = write(book, plant, history, lambda count: bar.show(0.5 + 0.5 * min(1.0, count / total) * 0.99))
        bar.show(1.0)
    return written


def main(argv: Sequence[str] | None = None) -> int:
    """Build, then open. Returns the exit code: 0 done, 3 the folder cannot be used, 130 interrupted."""
    parser = argparse.ArgumentParser(
        prog="python -m demo_vessel",
        description="The demonstration vessel: two years of an invented ship. Makes her book, then opens the panes.",
    )
    parser.add_argument("--build-only", action="store_true", help="make the book, open nothing")
    parser.add_argument("--folder", type=Path, default=HERE, help="make it there instead of beside this program")
    arguments = parser.parse_args(argv)
    try:
        prepare(arguments.folder)
        build(arguments.folder, sys.stderr)
    except (Unusable, BookUnusable, PlantUnusable) as error:
        print(f"demo_vessel: {error}", file=sys.stderr)
        return CANNOT_USE_FOLDER
    except KeyboardInterrupt:
        print("\ndemo_vessel: interrupted; nothing was written.", file=sys.stderr)
        return INTERRUPTED
    if arguments.build_only:
        return 0
    from logbook.command_line.main import main as logbook

    return logbook(["open", str(arguments.folder)])


if __name__ == "__main__":
    sys.exit(main())
