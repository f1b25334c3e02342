"""The plant.toml that a new plant folder begins with: it opens at once and explains itself."""

from __future__ import annotations

from importlib.resources import files

KINDS = ("ship", "station")


def template(kind: str) -> str:
    """The text of a new plant.toml for a `ship` or a `station`; ValueError for any other kind."""
    if kind not in KINDS:
        raise ValueError(f"'{kind}' is no kind of plant; there are {' and '.join(KINDS)}.")
    return files("logbook.plant").joinpath(f"template_{kind}.toml").read_text(encoding="utf-8")
