"""Whether the chain of the book is whole: the first and every entry that was altered, removed, inserted or moved."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from itertools import zip_longest

from logbook.book.entry import FIRST_DIGEST, Row, digest_of


@dataclass(frozen=True, slots=True)
class Break:
    """One place where the chain does not hold."""

    number: int
    what: str


def breaks(rows: Iterable[Row], seal: str = "") -> tuple[Break, ...]:
    """Every break of the chain, in order of number; empty when it is whole.

    `seal`: a digest that was printed or kept elsewhere; it must still stand in the book. What cannot be found: a tail
    after the last such seal, recomputed by somebody with the program.
    """
    found: list[Break] = []
    previous, expected, sealed = FIRST_DIGEST, 1, not seal
    for row in rows:
        number = row[0]
        if number != expected:
            missing = f"{expected}" if number == expected + 1 else f"{expected} to {number - 1}"
            found.append(Break(expected, f"entry {missing} is missing"))
        if row[14] != previous:
            found.append(Break(number, f"entry {number} does not follow the entry before it"))
        if digest_of(row) != row[15]:
            found.append(Break(number, f"entry {number} was altered"))
        sealed = sealed or row[15] == seal
        previous, expected = row[15], number + 1
    if not sealed:
        found.append(Break(expected, f"no entry carries the digest {seal}: the book was altered before that seal"))
    return tuple(found)


def differences(rows: Iterable[Row], copy: Iterable[Row]) -> list[Break]:
    """Where the book and an earlier copy of it differ; entries written after the copy are no difference."""
    found: list[Break] = []
    for row, kept in zip_longest(rows, copy):
        if kept is None:
            break
        if row is None:
            found.append(Break(kept[0], f"entry {kept[0]} stands in the copy and not in the book"))
        elif row != kept:
            found.append(Break(row[0], f"entry {row[0]} is not what the copy has"))
    return found
