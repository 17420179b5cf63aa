"""Head-counts: ties, limits and how a share is written. Published values are in tests/reference."""

from __future__ import annotations

from fractions import Fraction

import pytest

from crossplan.errors import RearingError
from crossplan.rearing.counting import (
    exact_at_least,
    fewest,
    flies_to_score,
    flies_to_score_both,
    parse_share,
)


@pytest.mark.parametrize(
    ("text", "share"),
    [
        ("1/8", Fraction(1, 8)),
        (" 3 / 16 ", Fraction(3, 16)),
        ("0.125", Fraction(1, 8)),
        (".1", Fraction(1, 10)),
        ("0,125", Fraction(1, 8)),
        ("12.5%", Fraction(1, 8)),
        ("12,5 %", Fraction(1, 8)),
        ("100%", Fraction(1)),
        ("1", Fraction(1)),
    ],
)
def test_a_share(text: str, share: Fraction) -> None:
    assert parse_share(text) == share


@pytest.mark.parametrize("text", ["", "an eighth", "1/0", "1:8", "-1/8", "1/8%", "0.1.2", "1e-3", "nan"])
def test_not_a_share(text: str) -> None:
    with pytest.raises(RearingError) as caught:
        parse_share(text)
    assert caught.value.message == f"'{text}' is not a share: expected 1/8, 0.125 or 12.5%"


@pytest.mark.parametrize("text", ["0", "0/5", "8", "9/8", "100.1%"])
def test_a_share_outside_its_range(text: str) -> None:
    with pytest.raises(RearingError, match="expected more than 0 and at most 1"):
        parse_share(text)


@pytest.mark.parametrize(
    ("share", "need", "probability", "flies"),
    [
        (Fraction(1, 2), 1, 0.5, 1),
        (Fraction(1, 2), 1, 0.75, 2),
        (Fraction(1, 2), 1, 0.9375, 4),
        (Fraction(1, 10), 1, 0.1, 1),
        (0.1, 1, 0.1, 1),
        (0.3, 1, 0.51, 2),  # 1 - 0.7 * 0.7 = 0.51 exactly, though not in floating point
        (Fraction(1, 2), 2, 0.5, 3),
    ],
)
def test_ties_are_exact(share: Fraction | float, need: int, probability: float, flies: int) -> None:
    assert flies_to_score(share, need, probability).score == flies


def test_a_class_that_everybody_is_in() -> None:
    score = flies_to_score(Fraction(1), 30, 0.99)
    assert (score.score, score.expected, score.probability_reached) == (30, 30.0, 1.0)


@pytest.mark.parametrize(
    ("share", "need", "probability", "message"),
    [
        (0.0, 1, 0.95, "share 0.0: expected more than 0"),
        (1.5, 1, 0.95, "share 1.5: expected more than 0 and at most 1"),
        (0.1, 0, 0.95, "0 flies needed: expected 1 or more"),
        (0.1, 1, 1.0, "probability 1: expected more than 0 and less than 1"),
        (0.1, 1, 0.0, "probability 0: expected"),
        (1e-9, 1, 0.95, "more than 10000000 flies"),
        (1.0, 20_000_000, 0.95, "more than 10000000 flies"),
    ],
)
def test_what_cannot_be_meant(share: float, need: int, probability: float, message: str) -> None:
    with pytest.raises(RearingError) as caught:
        flies_to_score(share, need, probability)
    assert message in caught.value.message


def test_both_sexes() -> None:
    one_each = flies_to_score_both(Fraction(1, 2), 1, Fraction(1, 2), 1, 0.95)
    assert (one_each.score, one_each.probability_reached) == (6, pytest.approx(1 - 2 / 2**6))
    with pytest.raises(RearingError, match="add up to more than 1"):
        flies_to_score_both(0.6, 1, 0.5, 1, 0.95)


def test_exact_fractions() -> None:
    assert exact_at_least(2, 3, Fraction(1, 2)) == Fraction(1, 2)
    assert exact_at_least(4, 3, Fraction(1, 2)) == 0
    assert exact_at_least(3, 3, Fraction(1)) == 1


@pytest.mark.parametrize("guess", [1, 2, 41, 42, 43, 90, 1000, 5000])
@pytest.mark.parametrize("answer", [1, 2, 42, 999, 1000])
def test_the_search_finds_the_first_from_any_guess(guess: int, answer: int) -> None:
    assert fewest(lambda n: n >= answer, 1, guess, 1000, "too many") == answer


def test_the_search_gives_up() -> None:
    with pytest.raises(RearingError, match="too many"):
        fewest(lambda n: False, 1, 10, 1000, "too many")
