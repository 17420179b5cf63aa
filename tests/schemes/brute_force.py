"""A second, plain method for the fewest generations: breed everything, look at everything.

It shares no code with the program. A homologue is a set of element names, what each element does stands in the small
table below, and every cross of every fly that can be had is made in full, generation by generation, until one of them
gives the wanted flies as a class of their own.
"""

from __future__ import annotations

from collections.abc import Iterable
from functools import cache
from itertools import product
from typing import NamedTuple

Chromosome = frozenset[str]
PairOf = tuple[Chromosome, Chromosome]


class Fly(NamedTuple):
    sex: str
    x: PairOf
    second: PairOf
    third: PairOf


WILD: Chromosome = frozenset()
Y: Chromosome = frozenset({"Y"})

#: what one copy shows; what is lethal with another copy of the same group; whether exchange is stopped; pigment
SHOWS = {
    "CyO": "curly",
    "Sco": "few scutellars",
    "TM3": "stubble",
    "TM6B": "humerals",
    "Dr": "tiny eyes",
    "If": "small eyes",
}
LETHAL = {"CyO": "CyO", "Sco": "Sco", "TM3": "TM3", "TM6B": "TM6B", "Dr": "Dr", "l2": "l2", "l3": "l3"}
BALANCERS = {"CyO", "TM3", "TM6B"}
MARKERS = {"Sco", "Dr", "If"}
#: insertions with mini-white, and the place of each; two at one place are never on one homologue
PLACE = {"A": "attP40", "B": "attP40", "C": "VK37", "D": "attP2", "E": "attP2", "U": "attP18"}
#: elements whose place on the map nobody knows: they stay on their homologue
UNPLACED = frozenset({"l2", "l3"})
#: signs that hide eye pigment on the fly that shows them
HIDES_PIGMENT = {"tiny eyes"}


def pair(a: Chromosome, b: Chromosome) -> PairOf:
    """Return the two in one fixed order, a Y second."""
    if Y in (a, b):
        return (a, b) if b == Y else (b, a)
    return (a, b) if sorted(a) <= sorted(b) else (b, a)


@cache
def eggs_or_sperm(two: PairOf, female: bool) -> frozenset[Chromosome]:
    """Return every kind of gamete; in females exchange makes all mixtures that the places allow."""
    a, b = two
    if not female or (a | b) & BALANCERS:
        return frozenset(two)
    same = a & b
    if len({PLACE.get(e, e) for e in (a | b) - same - UNPLACED}) < 2:
        return frozenset(two)
    loose = sorted((a | b) - same)
    made = set()
    for taken in product((False, True), repeat=len(loose)):
        chosen = frozenset(e for e, t in zip(loose, taken, strict=True) if t)
        if possible(a, b, chosen, loose):
            made.add(same | chosen)
    return frozenset(made)


def possible(a: Chromosome, b: Chromosome, chosen: Chromosome, loose: list[str]) -> bool:
    """Return whether a gamete may hold `chosen`: at one place it takes what one of the two homologues has there."""
    by_place: dict[str, list[str]] = {}
    for element in loose:
        by_place.setdefault(PLACE.get(element, element), []).append(element)
    for elements in by_place.values():
        here = {e for e in elements if e in chosen}
        if here not in ({e for e in elements if e in a}, {e for e in elements if e in b}):
            return False
    return True


def alive(fly: Fly) -> bool:
    if Y in fly.x and fly.x[0] == Y:
        return False
    for a, b in (fly.second, fly.third):
        if {LETHAL[e] for e in a if e in LETHAL} & {LETHAL[e] for e in b if e in LETHAL}:
            return False
    return True


@cache
def look(fly: Fly) -> frozenset[str]:
    elements = [e for two in (fly.x, fly.second, fly.third) for h in two for e in h]
    seen = {SHOWS[e] for e in elements if e in SHOWS}
    white_gene = any("w" not in h for h in fly.x if h != Y)
    pigment = white_gene or any(e in PLACE for e in elements)
    if not pigment and not seen & HIDES_PIGMENT:
        seen.add("white")
    return frozenset(seen)


@cache
def children(mother: Fly, father: Fly) -> tuple[Fly, ...]:
    parts = [
        {pair(e, s) for e in eggs_or_sperm(m, True) for s in eggs_or_sperm(f, False)}
        for m, f in ((mother.x, father.x), (mother.second, father.second), (mother.third, father.third))
    ]
    born = []
    for x, second, third in product(*parts):
        fly = Fly("male" if Y in x else "female", x, second, third)
        if alive(fly):
            born.append(fly)
    return tuple(born)


def classes(flies: Iterable[Fly]) -> dict[tuple[str, frozenset[str]], list[Fly]]:
    found: dict[tuple[str, frozenset[str]], list[Fly]] = {}
    for fly in flies:
        found.setdefault((fly.sex, look(fly)), []).append(fly)
    return found


def will_do(fly: Fly, wanted: dict[str, int], sex: str) -> bool:
    elements = [e for two in (fly.x, fly.second, fly.third) for h in two for e in h]
    if fly.sex != sex or any(e in BALANCERS | MARKERS for e in elements):
        return False
    return all(elements.count(e) >= n for e, n in wanted.items())


def fewest_generations(stocks: list[Fly], wanted: dict[str, int], sex: str, most: int) -> int | None:
    """Return the fewest generations to a pure class of wanted flies; None if there is none up to `most`.

    Classes that are kept on the way hold one genotype and no homologue that is not on the shelf.
    """
    shelf = [{h for fly in stocks for h in fly[k]} | {Y} for k in (1, 2, 3)]
    have = dict.fromkeys(stocks)
    bred: set[tuple[Fly, Fly]] = set()
    for generation in range(1, most + 1):
        new: dict[Fly, None] = {}
        mothers = [f for f in have if f.sex == "female"]
        fathers = [f for f in have if f.sex == "male"]
        for mother in mothers:
            for father in fathers:
                if (mother, father) in bred:
                    continue
                bred.add((mother, father))
                for members in classes(children(mother, father)).values():
                    if all(will_do(f, wanted, sex) for f in members):
                        return generation
                    if len(members) == 1 and all(h in shelf[k - 1] for k in (1, 2, 3) for h in members[0][k]):
                        new[members[0]] = None
        have.update(new)
    return None
