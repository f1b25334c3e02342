"""Text that people type or import, made safe to show."""

from __future__ import annotations

import unicodedata


def printable(text: str) -> str:
    """The text without what a terminal would obey: control, format and lone surrogate characters become a blank.

    What was typed stays in the book as it was; this is for screens and exports.
    """
    if text.isascii() and text.isprintable():
        return text
    return "".join(" " if unicodedata.category(sign) in ("Cc", "Cf", "Cs", "Zl", "Zp") else sign for sign in text)
