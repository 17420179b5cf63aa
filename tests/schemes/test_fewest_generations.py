"""The search against the plain second method, on random small shelves."""

from __future__ import annotations

import pytest

from crossplan.genetics.appearance import Observer
from crossplan.genetics.catalogue import default_catalogue
from crossplan.schemes.forms import ShelfIndex, reduce_shelf
from crossplan.schemes.scheme import Node
from crossplan.schemes.search import Status, find_schemes
from tests.schemes import brute_force
from tests.schemes.random_shelves import random_case

CASES = 240
BATCH = 20
#: the plain method is slow: four stocks are tried to two generations, fewer to three
MOST_OF_FOUR_STOCKS = 2
MOST = 3


@pytest.fixture(scope="module")
def observer() -> Observer:
    return Observer(default_catalogue())


@pytest.mark.parametrize("first", range(0, CASES, BATCH))
def test_same_fewest_generations_as_the_plain_method(first: int, observer: Observer) -> None:
    for seed in range(first, first + BATCH):
        case = random_case(seed)
        most = MOST_OF_FOUR_STOCKS if len(case.stocks) > 3 else MOST
        expected = brute_force.fewest_generations(case.flies, dict(case.wanted), case.sex, most)
        shelf, _ = reduce_shelf(ShelfIndex(case.sources(), generations=most), case.wish())
        result = find_schemes(shelf, observer, most)
        assert result.generations == expected, f"seed {seed}: {case}"
        assert result.status is (Status.PROVED_MINIMAL if expected else Status.IMPOSSIBLE)
        assert all(isinstance(s, Node) and s.generation == expected for s in result.schemes)


def test_the_cases_are_not_all_alike() -> None:
    """The comparison is worth something only if the shelves give every answer from one to three generations, and none."""
    seen = set()
    for seed in range(CASES):
        case = random_case(seed)
        most = MOST_OF_FOUR_STOCKS if len(case.stocks) > 3 else MOST
        seen.add(brute_force.fewest_generations(case.flies, dict(case.wanted), case.sex, most))
        if seen == {None, 1, 2, 3}:
            return
    raise AssertionError(f"only {seen}")
