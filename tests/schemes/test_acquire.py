"""Least sets of stocks to obtain, against every subset tried one by one."""

from __future__ import annotations

import random
from collections.abc import Mapping
from itertools import combinations

import pytest

from crossplan.schemes.acquire import Needs, least_sets, unlocked_by


def brute_force(
    needs: Mapping[str, Needs], candidates: Mapping[str, frozenset[str]]
) -> tuple[int, set[tuple[str, ...]], list[int]]:
    """Return the least size, all sets of that size, and the most targets for each smaller size."""
    names = sorted(candidates)
    best = [
        max(unlocked_by(list(chosen), needs, candidates) for chosen in combinations(names, size))
        for size in range(len(names) + 1)
    ]
    most = max(best)
    size = best.index(most)
    sets = {c for c in combinations(names, size) if unlocked_by(list(c), needs, candidates) == most}
    return size, sets, best


def random_case(seed: int) -> tuple[dict[str, Needs], dict[str, frozenset[str]]]:
    chance = random.Random(seed)
    things = [f"part {i}" for i in range(chance.randint(3, 7))]
    candidates = {
        f"stock {i}": frozenset(chance.sample(things, chance.randint(1, min(3, len(things)))))
        for i in range(chance.randint(3, 8))
    }
    needs: dict[str, Needs] = {}
    for t in range(chance.randint(1, 8)):
        clauses = [frozenset(chance.sample(things, chance.choice([1, 1, 1, 2]))) for _ in range(chance.randint(1, 3))]
        needs[f"target {t}"] = tuple(clauses)
    return needs, candidates


@pytest.mark.parametrize("seed", range(60))
def test_the_least_sets_are_those_of_brute_force(seed: int) -> None:
    needs, candidates = random_case(seed)
    found = least_sets(needs, candidates, most_answers=1000, most_steps=20)
    size, sets, best = brute_force(needs, candidates)
    assert found.proved
    assert not found.more
    assert len(found.unlocked) == best[size]
    assert set(found.answers) == (sets if best[size] else set())
    assert [met for _, met, _ in found.steps] == best[1 : size + 1]
    for _, met, which in found.steps:
        assert unlocked_by(which, needs, candidates) == met
    assert set(found.unlocked) | set(found.out_of_reach) == set(needs)


def test_further_answers_are_said_to_be_there() -> None:
    needs: dict[str, Needs] = {"t": (frozenset("abcdef"),)}
    candidates = {letter: frozenset(letter) for letter in "abcdef"}
    found = least_sets(needs, candidates, most_answers=3)
    assert len(found.answers) == 3
    assert found.more


def test_nothing_to_obtain_where_nothing_helps() -> None:
    found = least_sets({"t": (frozenset(("x",)),)}, {"stock": frozenset(("y",))})
    assert found.answers == ()
    assert found.out_of_reach == ("t",)


def test_one_stock_with_two_parts_goes_before_two_stocks() -> None:
    needs: dict[str, Needs] = {"t": (frozenset("a"), frozenset("b")), "u": (frozenset("b"),)}
    candidates = {"only a": frozenset("a"), "only b": frozenset("b"), "both": frozenset("ab")}
    assert least_sets(needs, candidates).answers == (("both",),)


def test_the_answer_is_the_same_every_time() -> None:
    needs, candidates = random_case(7)
    assert least_sets(needs, candidates) == least_sets(needs, dict(reversed(list(candidates.items()))))
