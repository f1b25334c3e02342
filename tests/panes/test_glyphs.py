"""The two sets of signs, the choice between them, and when a terminal is refused."""

import dataclasses

import pytest

from logbook.panes.terminal.check import refusal
from logbook.panes.terminal.glyphs import ASCII, BOX, Glyphs, chosen


@pytest.mark.parametrize(
    ("term", "encoding", "requested", "expected"),
    [
        ("xterm-256color", "utf-8", None, BOX),
        ("xterm", "UTF-8", None, BOX),
        ("tmux-256color", "utf8", None, BOX),
        ("screen", "utf-8", None, BOX),
        ("linux", "utf-8", None, ASCII),
        ("linux-16color", "utf-8", None, ASCII),
        ("vt100", "utf-8", None, ASCII),
        ("vt220", "utf-8", None, ASCII),
        ("dumb", "utf-8", None, ASCII),
        ("", "utf-8", None, ASCII),
        ("xterm", "iso8859-1", None, ASCII),
        ("xterm", "ascii", None, ASCII),
        ("xterm", "no such encoding", None, ASCII),
        ("xterm", "utf-8", "ascii", ASCII),
        ("linux", "utf-8", "box", BOX),
    ],
)
def test_choice(term: str, encoding: str, requested: str | None, expected: Glyphs) -> None:
    assert chosen(term, encoding, requested) is expected


@pytest.mark.parametrize(
    ("encoding", "requested", "words"), [("utf-8", "braille", "'braille'"), ("iso8859-1", "box", "iso8859-1")]
)
def test_a_request_that_cannot_be_met_is_said(encoding: str, requested: str, words: str) -> None:
    with pytest.raises(ValueError, match=words):
        chosen("xterm", encoding, requested)


def texts(glyphs: Glyphs) -> list[str]:
    values = dataclasses.astuple(glyphs)
    return [text for value in values for text in (value if isinstance(value, tuple) else (value,))]


def test_the_ascii_set_is_ascii() -> None:
    assert all(text.isascii() and text.isprintable() for text in texts(ASCII))


@pytest.mark.parametrize("glyphs", [BOX, ASCII], ids=lambda glyphs: glyphs.name)
def test_heights_and_depths_are_told_apart(glyphs: Glyphs) -> None:
    signs = glyphs.steps + glyphs.hanging + glyphs.level + glyphs.gap
    assert len(glyphs.steps) == 8
    assert len(set(signs)) == len(signs)


@pytest.mark.parametrize("term", ["xterm", "linux", "vt100", "tmux-256color", "screen"])
@pytest.mark.parametrize("size", [(80, 24), (200, 60), (0, 0), None])
def test_common_terminals_are_not_refused(term: str, size: tuple[int, int] | None) -> None:
    assert refusal(term, "utf-8", True, size) is None
    assert refusal(term, "iso8859-1", True, size) is None


@pytest.mark.parametrize(
    ("term", "encoding", "is_tty", "size", "words"),
    [
        ("xterm", "utf-8", False, (80, 24), "a file or a pipe"),
        ("dumb", "utf-8", True, (80, 24), "TERM is 'dumb'"),
        ("", "utf-8", True, (80, 24), "TERM is not set"),
        ("xterm", "utf-16", True, (80, 24), "utf-16"),
        ("xterm", "no such encoding", True, (80, 24), "no such encoding"),
        ("xterm", "utf-8", True, (40, 24), "40 columns"),
        ("xterm", "utf-8", True, (80, 6), "6 rows"),
    ],
)
def test_a_refusal_says_why_and_names_the_way_out(
    term: str, encoding: str, is_tty: bool, size: tuple[int, int], words: str
) -> None:
    sentence = refusal(term, encoding, is_tty, size)
    assert sentence is not None
    assert words in sentence
    for command in ("logbook enter", "logbook entries", "logbook figures"):
        assert command in sentence
