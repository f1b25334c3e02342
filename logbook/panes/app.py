"""The app: opens the book, holds keys and theme, switches panes. What a pane shows is the pane's own business."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from datetime import datetime
from pathlib import Path
from typing import ClassVar

from textual import events
from textual.app import App, ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Container
from textual.widgets import ContentSwitcher, Static

from logbook.book.book import Book
from logbook.book.drafts import Drafts
from logbook.panes.pane import Pane
from logbook.panes.terminal.dropped_line import when_dropped
from logbook.panes.terminal.glyphs import Glyphs
from logbook.plant.records import Plant

CAUTION = (
    "For trend and economy only; limits and settings: maker's manual, class rules, local codes."
    " Not an approved record book."
)


@dataclass(frozen=True)
class Session:
    """Who sits before the panes, with which plant and book."""

    plant: Plant
    folder: Path
    book: Book
    drafts: Drafts
    person: str
    identity_by: str
    read_only: bool
    glyphs: Glyphs
    now: Callable[[], datetime]


@dataclass(frozen=True)
class PaneKind:
    """A pane as the app knows it before it is first shown: it is imported and built only then."""

    key: str
    name: str
    build: Callable[[Session], Pane]


def _watch(session: Session) -> Pane:
    from logbook.panes.watch import WatchPane

    return WatchPane(session)


def _ladder(session: Session) -> Pane:
    from logbook.panes.ladder import LadderPane

    return LadderPane(session)


def _trend(session: Session) -> Pane:
    from logbook.panes.trend import TrendPane

    return TrendPane(session)


def _book(session: Session) -> Pane:
    from logbook.panes.book import BookPane

    return BookPane(session)


PANES = (
    PaneKind("w", "Watch", _watch),
    PaneKind("l", "Ladder", _ladder),
    PaneKind("t", "Trend", _trend),
    PaneKind("b", "Book", _book),
)


class LogbookApp(App[None]):
    """One person before the panes of one plant."""

    CSS_PATH = "panes.tcss"
    ENABLE_COMMAND_PALETTE = False
    BINDINGS: ClassVar[list[BindingType]] = [
        *[Binding(kind.key, f"pane('{kind.name}')", kind.name, id=f"pane.{kind.name.lower()}") for kind in PANES],
        Binding("question_mark", "help", "keys and cautions", id="help"),
        Binding("ctrl+r", "redraw", "draw the screen anew", id="redraw"),
        Binding("q", "leave", "leave", id="leave"),
    ]

    def __init__(self, session: Session, first: str = "Watch") -> None:
        super().__init__()
        self.session = session
        self.first = first

    def compose(self) -> ComposeResult:
        yield Static(id="head")
        with Container(id="middle"):
            yield ContentSwitcher(id="panes")
        yield Static(id="message")
        yield Static(id="keys")

    async def on_mount(self) -> None:
        when_dropped(self.exit)
        await self.show(self.first)

    @property
    def pane(self) -> Pane | None:
        """The pane that is shown."""
        switcher = self.query_one("#panes", ContentSwitcher)
        return switcher.query_one(f"#{switcher.current}", Pane) if switcher.current else None

    async def show(self, name: str) -> None:
        """Bring a pane to the front; built the first time."""
        switcher = self.query_one("#panes", ContentSwitcher)
        identity = f"pane-{name.lower()}"
        # A pane that is hidden while one of its widgets holds the focus would take the focus back.
        self.set_focus(None)
        if not switcher.query(f"#{identity}"):
            pane = next(kind for kind in PANES if kind.name == name).build(self.session)
            pane.id = identity
            await switcher.mount(pane)
        switcher.current = identity
        self._show_head(name)
        self.say("")
        pane = switcher.query_one(f"#{identity}", Pane)
        pane.shown()
        self.show_keys(pane)

    async def action_pane(self, name: str) -> None:
        await self.show(name)

    def _show_head(self, current: str) -> None:
        names = " ".join(f"[{kind.name}]" if kind.name == current else f" {kind.name} " for kind in PANES)
        session = self.session
        who = f"{session.person}{' (reading only)' if session.read_only else ''}"
        room = max(1, self.size.width - len(names) - len(who) - 2)
        plant = session.plant.name[:room].ljust(room)
        self.query_one("#head", Static).update(f"{plant} {names} {who}".replace("[", r"\["), layout=False)

    def say(self, text: str) -> None:
        """One sentence on the line above the keys."""
        self.query_one("#message", Static).update(text.replace("[", r"\["), layout=False)

    def show_keys(self, pane: Pane) -> None:
        """The few keys that matter now; the help key lists all."""
        self.query_one("#keys", Static).update(pane.keys_line().replace("[", r"\["), layout=False)

    def action_help(self) -> None:
        from logbook.panes.help import HelpScreen

        pane = self.pane
        self.push_screen(HelpScreen(pane.help_lines() if pane else ()))

    def action_redraw(self) -> None:
        """Draw everything anew: after a disturbed line, or when another terminal took the session over."""
        forget = getattr(self._driver, "forget", None)
        if forget is not None:
            forget()
        self.screen.refresh(layout=True)

    def action_leave(self) -> None:
        pane = self.pane
        reason = pane.reason_to_stay() if pane else ""
        if reason:
            self.say(reason)
        else:
            self.exit()

    def on_resize(self, event: events.Resize) -> None:
        switcher = self.query_one("#panes", ContentSwitcher)
        if switcher.current:
            self._show_head(next(kind.name for kind in PANES if f"pane-{kind.name.lower()}" == switcher.current))
