"""What Ladder and Trend share: one engine at a time, worked out beside the screen, shown when it is there."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any, ClassVar

from textual import work
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.widgets import Static

from logbook.book.entry import Entry
from logbook.panes.answering import answered
from logbook.panes.pane import Pane

if TYPE_CHECKING:
    from logbook.panes.app import LogbookApp, Session


class EnginePane(Pane):
    """A pane that shows one answer about one engine."""

    BINDINGS: ClassVar[list[BindingType]] = [Binding("e", "engine", "next engine", id="engine.next")]

    def __init__(self, session: Session) -> None:
        super().__init__()
        self.session = session
        self._engine = 0
        self._mark: tuple[object, ...] | None = None

    def compose(self) -> ComposeResult:
        with VerticalScroll(classes="answer"):
            yield Static(classes="answer-text", markup=False)

    @property
    def _app(self) -> LogbookApp:
        return self.app  # type: ignore[return-value]

    @property
    def engine(self) -> str:
        return self.session.plant.engines[self._engine].id

    def shown(self) -> None:
        self.screen.set_focus(self.query_one(VerticalScroll))
        mark = (self.engine, *self.session.book.change_mark())
        if mark != self._mark:
            self._mark = mark
            self._app.say(f"{self.engine}: working out the figures ...")
            self._work(self.engine)

    def action_engine(self) -> None:
        self._engine = (self._engine + 1) % len(self.session.plant.engines)
        self.shown()

    @work(thread=True, exclusive=True, exit_on_error=False)
    def _work(self, engine: str) -> None:
        try:
            answer = answered(self.session.folder, lambda entries: self.ask(engine, entries))
            lines = list(self.lines(answer))
        except Exception as error:  # whatever went wrong is said; the other panes go on
            lines = [f"{engine}: this could not be worked out: {error}"]
        self.app.call_from_thread(self._show, engine, lines)

    def _show(self, engine: str, lines: list[str]) -> None:
        if engine == self.engine:
            self.query_one(".answer-text", Static).update("\n".join(lines))
            self._app.say("")

    def ask(self, engine: str, entries: Sequence[Entry]) -> Any:
        """The answer; in the worker thread."""
        raise NotImplementedError

    def lines(self, answer: Any) -> Sequence[str]:
        """The answer as lines of text, 78 wide; in the worker thread."""
        raise NotImplementedError

    def keys_line(self) -> str:
        return "e next engine  Up Down scroll  w Watch  b Book  ? keys and cautions  q leave"

    def help_lines(self) -> Sequence[str]:
        return ("e             the next engine", "Up, Down      scroll")
