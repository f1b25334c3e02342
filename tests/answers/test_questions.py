"""Open questions of counters: the pooled span is offered beside the repair, and nothing is applied."""

from datetime import timedelta
from pathlib import Path

from book_helpers import START, reading

from logbook.answers.questions import open_questions
from logbook.book.book import Book
from logbook.book.entry import NewEntry
from logbook.plant.description import read_plant

PLANT = read_plant(Path(__file__).parents[1] / "fixtures" / "ship_handkept")
KEY = "fuel_meter_supply.ME_in"


def book_with(folder: Path, *readings: float) -> Book:
    book = Book.open(folder)
    for number, value in enumerate(readings):
        book.append(reading(4 * number, **{KEY: value}))
    return book


def test_the_pooled_span_is_offered(tmp_path: Path) -> None:
    """Readings 100 000, 104 150, 107 600 (should be 108 500), 112 600: pooled over the last two 8450; arithmetic.

    Under the ceiling no question is asked; a backward slip asks, and offers the two spans together."""
    with book_with(tmp_path, 100_000, 104_150, 101_850, 112_600) as book:
        (question,) = open_questions(PLANT, book.entries())
    assert question.entry == 3
    assert question.pooled == 8450
    assert "pooled span" in "\n".join(question.lines())
    assert "less than before" in question.sentence


def test_an_answer_or_an_exchange_closes_it(tmp_path: Path) -> None:
    with book_with(tmp_path, 100_000, 104_150, 101_850, 112_600) as book:
        answer = {"event": "counter_answer", "instrument": KEY, "entry": 3, "answer": "reading was wrong"}
        at = START + timedelta(hours=20)
        book.append(NewEntry("event", "ME", at, 0, "Chief engineer", answer))
        assert open_questions(PLANT, book.entries()) == []


def test_an_ordinary_counter_asks_nothing(tmp_path: Path) -> None:
    with book_with(tmp_path, 100_000, 104_150, 108_500, 112_600) as book:
        assert open_questions(PLANT, book.entries()) == []
