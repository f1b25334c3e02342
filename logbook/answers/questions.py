"""Open questions of counters: what stands against the step, what would explain it, what the pooled span says.

Nothing here is applied. A person answers with an entry; until then the span has no difference.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime

from logbook.book.entry import Entry
from logbook.plant.records import Counter, Plant
from logbook.reading import counters
from logbook.reading.round import counter_of


@dataclass(frozen=True, slots=True)
class OpenQuestion:
    """One counter reading that cannot follow the one before."""

    entry: int
    subject: str
    instrument: str
    sentence: str
    repairs: tuple[str, ...]
    pooled: float | None
    """what was counted over both spans together [unit of the counter]; None where that has a question too"""

    def lines(self) -> list[str]:
        """The question, what is offered, and how to answer."""
        found = [f"Entry {self.entry}, {self.subject}, {self.instrument}: {self.sentence}"]
        if self.repairs:
            found.append(f"  perhaps meant: {', '.join(self.repairs)} (amend the entry if it was)")
        if self.pooled is not None:
            found.append(f"  over this span and the next together: {self.pooled:.10g} were counted (pooled span)")
        found.append(
            f"  to answer: logbook note PLANT event event=counter_answer instrument={self.instrument}"
            f" entry={self.entry} answer='passed zero' (or reset, or 'reading was wrong') --of {self.subject}"
        )
        return found


def open_questions(plant: Plant, entries: Sequence[Entry]) -> list[OpenQuestion]:
    """Every open question of the book, in order of time. `entries`: the valid ones."""
    answered = {
        (str(entry.body.get("instrument")), entry.body.get("entry"))
        for entry in entries
        if entry.kind == "event" and entry.body.get("event") == "counter_answer"
    }
    subjects = {"plant", *(engine.id for engine in plant.engines)}
    exchanges = [entry for entry in entries if entry.body.get("event") == "instrument_exchanged"]
    series: dict[tuple[str, str], list[tuple[datetime, int, float]]] = {}
    for entry in entries:
        if entry.kind != "reading" or entry.subject not in subjects:
            continue
        for key, value in entry.body.get("values", {}).items():
            number = value.get("number")
            point = plant.points.get(key.partition(".")[0])
            if number is not None and point is not None and point.kind == "counter":
                series.setdefault((entry.subject, key), []).append((entry.taken_utc, entry.number, number))
    found = []
    for (subject, key), read in series.items():
        known = counter_of(plant, subject, key)
        if known is not None:
            changed = [entry.taken_utc for entry in exchanges if entry.body.get("instrument") == key]
            found += _of_counter(subject, key, read, known[0], known[1], changed, answered)
    return sorted(found, key=lambda question: question.entry)


def _of_counter(
    subject: str,
    key: str,
    read: list[tuple[datetime, int, float]],
    counter: Counter,
    rate_per_h: float,
    changed: list[datetime],
    answered: set[tuple[str, object]],
) -> list[OpenQuestion]:
    def most(earlier: datetime, later: datetime) -> float:
        hours = (later - earlier).total_seconds() / 3600
        return counters.ceiling(rate_per_h, hours, counters.last_place(counter))

    found = []
    for index in range(1, len(read)):
        (before_at, _, before), (at, entry, now) = read[index - 1], read[index]
        if (key, entry) in answered or any(before_at < moment <= at for moment in changed):
            continue
        step = counters.difference(before, now, counter, ceiling=most(before_at, at))
        if not step.question:
            continue
        pooled = None
        if index + 1 < len(read):
            after_at, _, after = read[index + 1]
            pooled = counters.pooled(
                before, now, after, counter, ceiling_before=most(before_at, at), ceiling_after=most(at, after_at)
            )
        repairs = counters.repairs(now, before, counter, ceiling_=most(before_at, at))
        found.append(
            OpenQuestion(
                entry,
                subject,
                key,
                f"{now:.10g} after {before:.10g}: {step.question}",
                tuple(f"{repair.text} ({repair.slip})" for repair in repairs),
                None if pooled is None else pooled.used,
            )
        )
    return found
