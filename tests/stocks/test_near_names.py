"""Names that are taken for each other, and names that are not."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from crossplan.stocks.near_names import near_pairs


@pytest.mark.parametrize(
    ("one", "other"),
    [("KO1", "K01"), ("KI2", "K12"), ("Kx 7", "kx7"), ("kx-7", "kx7"), ("UAS-Chrimson", "UAS-Chrmison"),
     ("Ptarmigan", "Ptarmigans"), ("Ptarmigan", "Ptarmigen"), ("AD-walker-3", "AD-waker-3"), ("UAS-Flp", "UAS-FLP")],
)  # fmt: skip
def test_taken_for_each_other(one: str, other: str) -> None:
    assert list(near_pairs([one, other])) == [(one, other)]


@pytest.mark.parametrize(
    ("one", "other"),
    [("K12", "K13"), ("K1-1", "K11"), ("AD-K12", "AD-L12"), ("kx-GAL4", "kz-GAL4"), ("AD-walker-3", "AD-walker-4"),
     ("AD-L12", "AD-I12"), ("Ptarmigan", "Parmigian"), ("UAS-Chrimson-1", "UAS-Chrmison-2")],
)  # fmt: skip
def test_told_apart(one: str, other: str) -> None:
    assert list(near_pairs([one, other])) == []


@given(st.text("abcdefg", min_size=5, max_size=9), st.integers(0, 8), st.sampled_from("hjk"))
def test_one_letter_more_or_another_is_always_seen(word: str, at: int, letter: str) -> None:
    at = at % len(word)
    for other in (word[:at] + letter + word[at:], word[:at] + letter + word[at + 1 :]):
        assert list(near_pairs([word, other])) == [(word, other)]
