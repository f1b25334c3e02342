"""What every pane is: one view of the plant, with its own keys."""

from __future__ import annotations

from collections.abc import Sequence

from textual.widget import Widget


class Pane(Widget):
    """One view. Attributes go down, messages come up."""

    DEFAULT_CSS = "Pane { height: 1fr; width: 1fr; }"

    def shown(self) -> None:
        """The pane has come to the front: take the focus, look whether the book has changed."""

    def keys_line(self) -> str:
        """At most seven keys, for the bottom line."""
        return ""

    def help_lines(self) -> Sequence[str]:
        """Every key of the pane, for the help."""
        return ()

    def reason_to_stay(self) -> str:
        """Why leaving the program now would be a mistake; empty when it would not."""
        return ""
