"""Unfinished rounds, kept field by field as they are typed, so that a dropped line loses nothing.

A draft is one small JSON file, written anew and forced to the disk each time a field is left. Its key is the person
and the round. It is removed only after the book has acknowledged the entries made from it.
"""

from __future__ import annotations

import fcntl
import hashlib
import json
import os
from collections.abc import Mapping
from dataclasses import asdict, dataclass, field
from datetime import datetime
from pathlib import Path
from typing import IO, Any

from logbook.book.entry import utc_moment, utc_text

FOLDER_NAME = "drafts"


class DraftUnusable(Exception):
    """The draft cannot be kept: a sentence that says what to do. What was typed is still on the screen."""


@dataclass(frozen=True, slots=True)
class Typed:
    """One field as it was left: the text, and the findings that were accepted with it."""

    text: str
    accepted: tuple[str, ...] = ()


@dataclass
class Draft:
    """One unfinished round of one person."""

    person: str
    round: str
    subjects: tuple[str, ...]
    """the engines of the round, in order of the walk"""
    occasion: str
    taken_utc: datetime
    utc_offset_min: int
    fields: dict[str, Typed] = field(default_factory=dict)
    """by field name, e.g. `ME/cylinder_exhaust_temperature`"""
    position: str = ""
    """the field in which the person was"""

    @property
    def file_name(self) -> str:
        """Person and round in one safe word: neither can lead out of the folder."""
        return hashlib.sha256(f"{self.person}\n{self.round}".encode()).hexdigest()[:20] + ".json"


class Drafts:
    """The drafts of one plant folder."""

    def __init__(self, plant_folder: Path) -> None:
        self.folder = plant_folder / FOLDER_NAME
        self._claims: dict[str, IO[str]] = {}

    def keep(self, draft: Draft) -> None:
        """Write the draft; when this returns, it is on the disk. Raises DraftUnusable."""
        content = asdict(draft)
        content["taken_utc"] = utc_text(draft.taken_utc)
        path = self.folder / draft.file_name
        fresh = path.with_suffix(f".{os.getpid()}.new")
        try:
            self.folder.mkdir(mode=0o700, exist_ok=True)
            with open(os.open(fresh, os.O_CREAT | os.O_WRONLY | os.O_TRUNC, 0o600), "w", encoding="utf-8") as stream:
                json.dump(content, stream, ensure_ascii=False)
                stream.flush()
                os.fsync(stream.fileno())
            os.replace(fresh, path)
            _sync_folder(self.folder)
        except OSError as error:
            raise DraftUnusable(
                f"The draft could not be kept in {self.folder}: {error.strerror}. Make room or ask for rights;"
                " what you typed is still on this screen."
            ) from error

    def unfinished(self, person: str) -> tuple[list[Draft], list[str]]:
        """This person's drafts, the latest round first, and a sentence for each file that could not be read."""
        drafts: list[Draft] = []
        unreadable: list[str] = []
        for path in sorted(self.folder.glob("*.json")):
            try:
                draft = _draft_of(json.loads(path.read_text(encoding="utf-8")))
            except (OSError, ValueError, KeyError, TypeError, AttributeError) as error:
                unreadable.append(f"The draft {path.name} cannot be read ({error}); it was left where it is.")
                continue
            if draft.person == person:
                drafts.append(draft)
        drafts.sort(key=lambda draft: draft.taken_utc, reverse=True)
        return drafts, unreadable

    def claim(self, draft: Draft) -> bool:
        """Take the draft for this session; False if another live session has it. Ends with the process."""
        if draft.file_name in self._claims:
            return True
        try:
            self.folder.mkdir(mode=0o700, exist_ok=True)
            path = (self.folder / draft.file_name).with_suffix(".claim")
            stream = open(os.open(path, os.O_CREAT | os.O_WRONLY, 0o600), "w", encoding="utf-8")  # noqa: SIM115
        except OSError as error:
            raise DraftUnusable(f"No draft can be kept in {self.folder}: {error.strerror}. Ask for rights.") from error
        try:
            fcntl.flock(stream, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except BlockingIOError:
            stream.close()
            return False
        self._claims[draft.file_name] = stream
        return True

    def finish(self, draft: Draft) -> None:
        """Remove the draft: only after the book has acknowledged its entries, or when its person drops it."""
        path = self.folder / draft.file_name
        path.unlink(missing_ok=True)
        path.with_suffix(".claim").unlink(missing_ok=True)
        claim = self._claims.pop(draft.file_name, None)
        if claim is not None:
            claim.close()


def _draft_of(content: Mapping[str, Any]) -> Draft:
    fields = {
        str(name): Typed(str(typed["text"]), tuple(map(str, typed["accepted"])))
        for name, typed in content["fields"].items()
    }
    return Draft(
        person=str(content["person"]),
        round=str(content["round"]),
        subjects=tuple(map(str, content["subjects"])),
        occasion=str(content["occasion"]),
        taken_utc=utc_moment(content["taken_utc"]),
        utc_offset_min=int(content["utc_offset_min"]),
        fields=fields,
        position=str(content["position"]),
    )


def _sync_folder(folder: Path) -> None:
    # The name of a new file is on the disk only when its folder is.
    handle = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)
