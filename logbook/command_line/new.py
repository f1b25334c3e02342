"""`logbook new`: a plant folder with a plant.toml that explains itself."""

from __future__ import annotations

import argparse
import os
from pathlib import Path

from logbook.command_line.environment import Environment, ExitCode, Refused


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = (
        "A plant folder with a plant.toml that explains itself. It opens at once; its\n"
        "numbers are examples, to be replaced by those of the maker's papers. Nothing that\n"
        "exists is overwritten."
    )
    parser.epilog = "example:\n  logbook new my_ship --kind ship"
    parser.add_argument("folder", metavar="FOLDER", type=Path, help="the folder to be made; it may exist already")
    parser.add_argument("--kind", required=True, choices=["ship", "station"], help="what the plant is")


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    import shlex

    from logbook.plant.fields import FILE_NAME
    from logbook.plant.template import template

    folder: Path = arguments.folder
    path = folder / FILE_NAME
    shown = shlex.quote(str(folder))
    text = template(arguments.kind)
    try:
        made = not folder.exists()
        folder.mkdir(mode=0o700, parents=True, exist_ok=True)
        _write_new(path, text)
    except FileExistsError as error:
        if not folder.is_dir():
            raise Refused(f"{folder} is no folder. Nothing was written; name another.") from error
        raise Refused(
            f"{path} is there already, and nothing was written. Look at it with: logbook check {shown}"
        ) from error
    except OSError as error:
        raise Refused(
            f"{path} cannot be written: {error.strerror or error}. Name a folder where you may write.",
            ExitCode.CANNOT_USE_PLANT,
        ) from error
    environment.say(f"{'Made the folder, and wrote' if made else 'Wrote'} {path}")
    environment.say("Every number in it is an example: put in those of the maker's papers. Then:")
    environment.say(f"  logbook check {shown}")
    environment.say("and when it is good:")
    environment.say(f"  logbook open {shown}")
    return ExitCode.DONE


def _write_new(path: Path, text: str) -> None:
    """Write a file that is not there yet; a file that could not be written whole is taken away again."""
    handle = os.open(path, os.O_WRONLY | os.O_CREAT | os.O_EXCL, 0o600)
    try:
        with open(handle, "w", encoding="utf-8") as file:
            file.write(text)
            file.flush()
            os.fsync(file.fileno())
    except OSError:
        path.unlink(missing_ok=True)
        raise
