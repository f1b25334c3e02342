"""Whether a terminal can carry the panes; a sentence with the way out where it cannot."""

from __future__ import annotations

SMALLEST = (60, 12)
"""Columns and rows under which a pane shows too little to be of use. The panes are made for 80 x 24."""

_WAY_OUT = "The same from the command line: logbook enter, logbook entries, logbook figures."


def refusal(term: str, encoding: str, is_tty: bool, size: tuple[int, int] | None) -> str | None:
    """Why the panes cannot be drawn here, or None when they can.

    Arguments: term: TERM, empty when unset. encoding: of the output. is_tty: whether input and output are a terminal.
    size: columns and rows; None or 0 where the terminal does not tell, which is no reason to refuse.
    """
    if not is_tty:
        return f"The panes need a terminal for input and output, and here one of them is a file or a pipe. {_WAY_OUT}"
    if term in ("", "dumb", "unknown"):
        what = f"is '{term}'" if term else "is not set"
        return (
            f"TERM {what}: this terminal does not say that it can place text on the screen."
            f" Set TERM to what it is, often xterm or vt100. {_WAY_OUT}"
        )
    if not _carries_ascii(encoding):
        return f"The output encoding {encoding} cannot drive a terminal; UTF-8 or ASCII can (LANG). {_WAY_OUT}"
    columns, rows = size or (0, 0)
    if 0 < columns < SMALLEST[0] or 0 < rows < SMALLEST[1]:
        return (
            f"The window has {columns} columns and {rows} rows; the panes need {SMALLEST[0]} x {SMALLEST[1]} at least"
            f" and are made for 80 x 24. Make it larger. {_WAY_OUT}"
        )
    return None


def _carries_ascii(encoding: str) -> bool:
    """Whether a control sequence comes out of the encoding as it went in."""
    sequence = "\x1b[1;1H"
    try:
        return sequence.encode(encoding) == sequence.encode("ascii")
    except LookupError:
        return False
