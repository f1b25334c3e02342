"""What a round just signed off says: each engine of it, the excess first."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from datetime import datetime

from logbook.answers.headline import headline
from logbook.book.entry import Entry, utc_text
from logbook.judgement.figures import figures
from logbook.plant.records import Plant


def round_says(plant: Plant, entries: Sequence[Entry], subjects: Iterable[str], taken_utc: datetime) -> list[str]:
    """The figures of the reading of each engine at that moment, in words."""
    lines: list[str] = []
    for subject in subjects:
        if subject not in {engine.id for engine in plant.engines}:
            continue
        frame = figures(plant, entries, subject)
        rows = frame[frame["at_utc"] == utc_text(taken_utc)].to_dict("records")
        if rows:
            lines.append(f"{subject}:")
            lines += [f"  {line}" for line in headline({str(key): value for key, value in rows[-1].items()})]
    return lines or ["No engine was read in this round."]
