"""Ladder: where the fuel's energy goes, on one vertical scale; now, by the reference, over the last month."""

from __future__ import annotations

from collections.abc import Sequence
from math import isfinite

from logbook.answers.ladder import LadderAnswer, ladder
from logbook.book.entry import Entry
from logbook.panes.engine_pane import EnginePane

SCALE_ROWS = 11
"""100 % at the top, 0 % at the bottom, one row for every ten."""


class LadderPane(EnginePane):
    def ask(self, engine: str, entries: Sequence[Entry]) -> tuple[str, LadderAnswer | None]:
        return engine, ladder(self.session.plant, entries, engine)

    def lines(self, answer: tuple[str, LadderAnswer | None]) -> Sequence[str]:
        engine, found = answer
        if found is None:
            return [f"{engine}: no reading can be compared yet; `logbook check` says what is missing for which figure."]
        rule = self.session.glyphs.upright
        return [
            f"{engine}, last comparable reading {found.at_utc[:16].replace('T', ' ')}Z",
            *found.headline[:2],
            "",
            *_scale(found, rule),
            "",
            f"{'between the rungs':<52}{'now':>9}{'month':>9}   points",
            *(f"{name:<52}{_points(now)}{_points(month)}" for name, now, month in found.widths),
            f"{'sum':<52}{_points(sum(now for _, now, _ in found.widths))}"
            f"{_points(sum(month for _, _, month in found.widths))}",
            "",
            *found.headline[2:],
            *found.notes,
        ]


def _points(value: float) -> str:
    return f"{100 * value:9.1f}" if isfinite(value) else f"{'-':>9}"


def _scale(found: LadderAnswer, rule: str) -> list[str]:
    """Rungs of three columns on one scale: each stands in the row of its height, with its figure beside it."""
    rows = [f"{100 - 10 * row:>4} % {rule}" for row in range(SCALE_ROWS)]
    cells: list[list[list[str]]] = [[[] for _ in range(3)] for _ in range(SCALE_ROWS)]
    for rung in found.rungs:
        for column, value in enumerate((rung.now, rung.reference, rung.month)):
            if isfinite(value):
                row = min(SCALE_ROWS - 1, max(0, round((1 - value) * 10)))
                short = rung.name.split(" (")[0]
                cells[row][column].append(f"{short} {100 * value:.1f}")
    heads = ("now", "reference", "last month")
    lines = ["        " + "".join(f" {head:<22}" for head in heads).rstrip()]
    for row, head in enumerate(rows):
        depth = max(1, *(len(column) for column in cells[row]))
        for line in range(depth):
            texts = [column[line] if line < len(column) else "" for column in cells[row]]
            lead = head if line == 0 else f"       {rule}"
            lines.append((lead + "".join(f" {text:<21}{rule}" for text in texts)).rstrip())
    for rung in found.rungs:
        if rung.note:
            lines.append(f"  {rung.name}: {rung.note}")
    return lines
