"""The form of a round: one widget that draws the lines and takes the keys, one after the other.

All fields are one widget, so that keys typed ahead over a slow line land in the field they were meant for: leaving a
field and typing into the next happen in the order the keys came.
"""

from __future__ import annotations

from dataclasses import dataclass

from rich.segment import Segment
from rich.style import Style
from textual import events
from textual.geometry import Region, Size
from textual.message import Message
from textual.scroll_view import ScrollView
from textual.strip import Strip

from logbook.reading.entering import Field, Round
from logbook.reading.text import printable

LABEL_WIDTH = 30
UNIT_WIDTH = 5
FIELD_WIDTH = 25
MARK_WIDTH = 2

# One key in an empty field of a single point; in a row the letters keep a place instead.
SINGLE_KEYS = {"n": "N/R", "s": "stopped", "b": "S/B", "f": "-", "d": "def"}


@dataclass(frozen=True, slots=True)
class _Line:
    """A line of the form: a heading of the walk, or a field."""

    heading: str = ""
    index: int = -1


class RoundForm(ScrollView, can_focus=True):
    """Draws a `Round` and edits its current field."""

    DEFAULT_CSS = "RoundForm { height: 1fr; scrollbar-size: 0 0; }"

    COMPONENT_CLASSES = {"form--heading", "form--aside", "form--field", "form--current", "form--asked"}  # noqa: RUF012

    class Left(Message):
        """A field was left: its text is to be kept in the draft, findings to be shown."""

        def __init__(self, name: str) -> None:
            super().__init__()
            self.name = name

    class Typed(Message):
        """The text of the current field changed, or another field became current."""

    class Finished(Message):
        """Enter was pressed in the last field."""

    class LeaveRequested(Message):
        """Escape: out of the fields, to the keys of the pane."""

    def __init__(self, entering: Round, id: str | None = None) -> None:
        super().__init__(id=id)
        self.entering = entering
        self.cursor = len(entering.text)
        self._lines: list[_Line] = []
        group = None
        for index, item in enumerate(entering.fields):
            if item.group != group:
                group = item.group
                self._lines.append(_Line(heading=group))
            self._lines.append(_Line(index=index))
        self.virtual_size = Size(LABEL_WIDTH + UNIT_WIDTH + FIELD_WIDTH + 20, len(self._lines))

    # Drawing

    def render_line(self, y: int) -> Strip:
        width = self.size.width
        number = y + int(self.scroll_offset.y)
        if number >= len(self._lines):
            return Strip.blank(width, self.rich_style)
        line = self._lines[number]
        if line.heading:
            style = self.get_component_rich_style("form--heading")
            return Strip([Segment(f" {line.heading}".ljust(width), style)]).crop(0, width)
        return self._field_strip(line.index).crop(0, width).extend_cell_length(width, self.rich_style)

    def _field_strip(self, index: int) -> Strip:
        entering = self.entering
        item = entering.fields[index]
        current = index == entering.position
        base = self.rich_style
        aside = self.get_component_rich_style("form--aside")
        text = entering.text if current else entering.texts.get(item.name, "")
        mark = "?" if entering.is_open(item.name) else ("!" if entering.accepted.get(item.name) else " ")
        segments = [
            Segment(">" if current else " ", base),
            Segment(printable(item.label)[: LABEL_WIDTH - 2].ljust(LABEL_WIDTH - 1), base),
            Segment(item.unit[: UNIT_WIDTH - 1].ljust(UNIT_WIDTH), aside),
            *self._text_segments(text, current),
            Segment(f" {mark}".ljust(MARK_WIDTH + 1), self.get_component_rich_style("form--asked")),
            Segment(printable(self.aside(item)), aside),
        ]
        return Strip(segments)

    def _text_segments(self, text: str, current: bool) -> list[Segment]:
        shown = printable(text)
        if not current:
            if len(shown) > FIELD_WIDTH:
                shown = shown[: FIELD_WIDTH - 2] + ".."
            return [Segment(shown.ljust(FIELD_WIDTH), self.get_component_rich_style("form--field"))]
        style = self.get_component_rich_style("form--current")
        start = max(0, self.cursor - FIELD_WIDTH + 1)
        visible = shown[start : start + FIELD_WIDTH].ljust(FIELD_WIDTH)
        at = self.cursor - start
        if not self.has_focus:
            return [Segment(visible, style)]
        return [
            Segment(visible[:at], style),
            Segment(visible[at], style + Style(reverse=True)),
            Segment(visible[at + 1 :], style),
        ]

    def aside(self, item: Field) -> str:
        """What stands beside the field: the values of the last reading, and how far this one is from them."""
        last = [self.entering.last.get(target) for target in item.targets]
        if not any(last):
            return ""
        shown = " ".join(value.shown() if value else "." for value in last)
        if item.is_row:
            return shown
        now = self.entering.values().get(item.targets[0])
        before = last[0]
        if now is None or before is None or now.number is None or before.number is None:
            return shown
        return f"{shown} {_difference(now.number - before.number)}"

    # Keys

    async def _on_key(self, event: events.Key) -> None:
        handler = _KEYS.get(event.key)
        if handler is not None:
            event.stop()
            event.prevent_default()
            getattr(self, handler)()
        elif event.is_printable and event.character:
            event.stop()
            event.prevent_default()
            self._type(event.character)

    def _on_paste(self, event: events.Paste) -> None:
        # A whole watch may come as one text: each line goes into the next field, as if it were typed.
        event.stop()
        lines = event.text.replace("\r\n", "\n").replace("\r", "\n").split("\n")
        for number, line in enumerate(lines):
            for sign in printable(line.expandtabs(1)):
                self._insert(sign)
            if number < len(lines) - 1:
                self.enter()
        self._changed()

    def _type(self, sign: str) -> None:
        entering = self.entering
        single = SINGLE_KEYS.get(sign)
        if single and not entering.text and not entering.current.is_row and entering.current.definition.kind != "state":
            entering.text = single
            self.cursor = len(single)
            self.enter()
            return
        self._insert(sign)
        self._changed()

    def _insert(self, sign: str) -> None:
        text = self.entering.text
        self.entering.text = text[: self.cursor] + sign + text[self.cursor :]
        self.cursor += 1

    def enter(self) -> None:
        """Leave the field; go on if nothing is asked."""
        at_end = self.entering.position == len(self.entering.fields) - 1
        asked = self.entering.leave()
        self.post_message(self.Left(self.entering.current.name))
        if asked:
            self._changed()
        elif at_end:
            self._changed()
            self.post_message(self.Finished())
        else:
            self._go(self.entering.position + 1)

    def previous(self) -> None:
        self._move(-1)

    def next(self) -> None:
        self._move(1)

    def page_up(self) -> None:
        self._move(-self.size.height)

    def page_down(self) -> None:
        self._move(self.size.height)

    def _move(self, by: int) -> None:
        # Walking past a field keeps its text but accepts nothing.
        self.entering.leave(accept=False)
        self.post_message(self.Left(self.entering.current.name))
        self._go(self.entering.position + by)

    def _go(self, position: int) -> None:
        before = self._line_of(self.entering.position)
        self.entering.go(position)
        self.cursor = len(self.entering.text)
        after = self._line_of(self.entering.position)
        self._refresh_line(before)
        self._refresh_line(after)
        self._show(after)
        self.post_message(self.Typed())

    def show_position(self) -> None:
        """The round moved to another field by itself: draw it, cursor at the end of its text."""
        self.cursor = len(self.entering.text)
        self._show(self._line_of(self.entering.position))
        self.refresh()

    def _show(self, line: int) -> None:
        height = max(self.size.height, 1)
        top = int(self.scroll_offset.y)
        if not top <= line < top + height:
            # Half a page at a time: on a slow line one large repaint is cheaper than twenty small ones.
            self.scroll_to(y=max(0, line - height // 2), animate=False, force=True)

    def left(self) -> None:
        self.cursor = max(0, self.cursor - 1)
        self._changed()

    def right(self) -> None:
        self.cursor = min(len(self.entering.text), self.cursor + 1)
        self._changed()

    def home(self) -> None:
        self.cursor = 0
        self._changed()

    def end(self) -> None:
        self.cursor = len(self.entering.text)
        self._changed()

    def backspace(self) -> None:
        if self.cursor:
            text = self.entering.text
            self.entering.text = text[: self.cursor - 1] + text[self.cursor :]
            self.cursor -= 1
            self._changed()

    def delete(self) -> None:
        text = self.entering.text
        self.entering.text = text[: self.cursor] + text[self.cursor + 1 :]
        self._changed()

    def clear_field(self) -> None:
        self.entering.text = ""
        self.cursor = 0
        self._changed()

    def escape(self) -> None:
        self.entering.leave(accept=False)
        self.post_message(self.Left(self.entering.current.name))
        self.post_message(self.LeaveRequested())

    def _changed(self) -> None:
        self._refresh_line(self._line_of(self.entering.position))
        self.post_message(self.Typed())

    def _line_of(self, position: int) -> int:
        return next(number for number, line in enumerate(self._lines) if line.index == position)

    def _refresh_line(self, line: int) -> None:
        self.refresh(Region(0, line - int(self.scroll_offset.y), self.size.width, 1))

    def on_resize(self) -> None:
        self._show(self._line_of(self.entering.position))


_KEYS = {
    "enter": "enter",
    "tab": "next",
    "shift+tab": "previous",
    "down": "next",
    "up": "previous",
    "pagedown": "page_down",
    "pageup": "page_up",
    "left": "left",
    "right": "right",
    "home": "home",
    "end": "end",
    "backspace": "backspace",
    "delete": "delete",
    "ctrl+u": "clear_field",
    "escape": "escape",
}


def _difference(by: float) -> str:
    return f"({by:+.4g})"
