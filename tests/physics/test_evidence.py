"""Evidence of deviations against signatures; checks calculated independently with numpy."""

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.physics import evidence
from logbook.physics.uncertainty import effective_number

Z = [2.4, -1.9, -2.2, 0.3, 1.6]
FIRST, SECOND, THIRD = [1, -1, -2, 0, 2], [1, 0, -1, 2, 1], [1, 0, 0, 0, 1]
FIRST_WITH_A_BLANK = [1, -1, -2, np.nan, 2]


def test_standardised() -> None:
    """Mean 11.0 K now (s 4.0, n 24, rho 0.2) against 3.0 K clean (s 4.0, n_eff 40), u_shape 2.0."""
    found = evidence.standardised(11.0, 3.0, 4.0, effective_number(24, 0.2), 4.0, 40, u_shape=2.0)
    assert found == pytest.approx(3.4427, abs=1e-4)


def test_another_lot_takes_certainty_away() -> None:
    plain = evidence.standardised(2.0, 0.0, 3.0, 9, 3.0, 9)
    with_lots = evidence.standardised(2.0, 0.0, 3.0, 9, 3.0, 9, u_lots=np.sqrt(2.0))
    assert plain == pytest.approx(np.sqrt(2.0))
    assert with_lots == pytest.approx(1.0)


@pytest.mark.parametrize(("now", "expected"), [(1e6, 4.0), (-1e6, -4.0)])
def test_standardised_is_clipped(now: float, expected: float) -> None:
    assert evidence.standardised(now, 0, 1, 10, 1, 10) == expected


@pytest.mark.parametrize(
    ("signature", "weight", "cosine"),
    [(FIRST, 3.7631, 0.9165), (SECOND, 2.5702, 0.6259), (THIRD, 2.8284, 0.6888), (FIRST_WITH_A_BLANK, 3.7631, 0.9189)],
)
def test_evidence_and_likeness(signature: list[float], weight: float, cosine: float) -> None:
    assert evidence.evidence(Z, signature) == pytest.approx(weight, abs=1e-4)
    assert evidence.likeness(Z, signature) == pytest.approx(cosine, abs=1e-4)


def test_cosine_of_two_signatures() -> None:
    assert evidence.cosine(FIRST, SECOND) == pytest.approx(0.5976, abs=1e-4)


def test_a_symptom_that_was_not_read_is_left_out() -> None:
    unread = [2.4, -1.9, -2.2, np.nan, 1.6]
    assert evidence.likeness(unread, FIRST) == pytest.approx(evidence.likeness(Z, FIRST_WITH_A_BLANK))


CODES = st.lists(st.integers(-2, 2), min_size=5, max_size=5).filter(any)
READ = st.lists(st.floats(-4, 4).filter(lambda z: abs(z) > 1e-3), min_size=5, max_size=5)


@settings(max_examples=40)
@given(READ, CODES)
def test_likeness_is_a_cosine_and_evidence_its_length(z: list[float], signature: list[int]) -> None:
    likeness = evidence.likeness(z, signature)
    assert -1 - 1e-12 <= likeness <= 1 + 1e-12
    assert evidence.evidence(z, signature) == pytest.approx(likeness * np.linalg.norm(z))
    assert evidence.likeness(z, z) == pytest.approx(1.0)


def test_evidence_is_standard_normal_when_nothing_is_wrong() -> None:
    rng = np.random.default_rng(2)
    found = [evidence.evidence(z, FIRST) for z in rng.normal(size=(4000, 5))]
    assert np.mean(found) == pytest.approx(0.0, abs=0.06)
    assert np.std(found) == pytest.approx(1.0, abs=0.05)


def test_nothing_that_moved_is_like_nothing() -> None:
    assert evidence.likeness([0, 0, 0, 0, 0], FIRST) == 0.0
    assert evidence.evidence([0, 0, 0, 0, 0], FIRST) == 0.0


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: evidence.evidence([1, np.nan], [np.nan, 1]), "was read"),
        (lambda: evidence.likeness([1, 2], [0, 0]), "was read"),
        (lambda: evidence.cosine([1, np.nan], [np.nan, 1]), "was read"),
        (lambda: evidence.evidence([1, 2], [1]), "a code or a blank for every symptom"),
        (lambda: evidence.standardised(1, 0, 1, 0, 1, 10), "points now and in the clean span"),
        (lambda: evidence.standardised(1, 0, 0, 10, 0, 10), "scatter above zero"),
    ],
)
def test_what_cannot_be_is_refused_with_what_to_do(call: Callable[[], object], sentence: str) -> None:
    with pytest.raises(ValueError, match=sentence):
        call()
