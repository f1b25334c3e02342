"""Every key and the cautions, on one page that scrolls."""

from __future__ import annotations

from collections.abc import Sequence
from typing import ClassVar

from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.screen import ModalScreen
from textual.widgets import Static

from logbook.answers.cautions import CAUTIONS, STATUS

COMMON = (
    "w l t b       Watch, Ladder, Trend, Book",
    "?             this page",
    "ctrl+r        draw the screen anew (after a disturbed line)",
    "q             leave; an unfinished round is kept and offered again",
)


class HelpScreen(ModalScreen[None]):
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape,question_mark,q,enter", "dismiss", "back", id="help.back"),
    ]

    def __init__(self, lines: Sequence[str]) -> None:
        super().__init__()
        self.lines = lines

    def compose(self) -> ComposeResult:
        text = ["Keys of this pane", *self.lines, "", "Everywhere", *COMMON, "", "Cautions", STATUS, ""]
        text += [f"{number:>2}  {caution}" for number, caution in enumerate(CAUTIONS, 1)]
        text += ["", "Up and Down scroll; Escape goes back."]
        with VerticalScroll(id="help"):
            yield Static("\n".join(text).replace("[", r"\["))
