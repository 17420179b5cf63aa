"""Which zygotes live, and which flies can be parents.

* Two homologues that share a recessive-lethal group are dead together, unless another chromosome restores the gene.
* A male has one X: a lethal on it kills him, unless something restores the gene.
* One X and no more makes a male, two a female; none, or three, is dead (three X: mostly dead, taken as dead;
  Bridges 1921, Science 54:252, for the balance; sterility of X without Y: Bridges 1916, Genetics 1:1).
* The two parts of a translocation balancer must be present in equal number; a zygote with one part alone lacks
  one arm and has another in excess, and dies.
* Sterile flies are never parents: a female with two homologues of one female-sterile name, a male with a
  male-sterile X or two such autosomes, and an X0 male.
"""

from __future__ import annotations

from functools import cache

from crossplan.genetics.chromosome import FEMALE, MALE, PAIRS, Sex
from crossplan.genetics.fly import Fly, Homologue, Pair

NO_GENES: frozenset[str] = frozenset()


@cache
def lethal_groups(homologue: Homologue) -> frozenset[str]:
    """Return the recessive-lethal groups that the homologue carries."""
    return NO_GENES.union(*(e.traits.lethal for e in homologue.elements))


@cache
def restored_genes(homologue: Homologue) -> frozenset[str]:
    """Return the genes of which an element of this homologue brings a working copy."""
    return NO_GENES.union(*(e.traits.restores for e in homologue.elements))


@cache
def exposed_lethals(pair: Pair, chromosome: str, sex: Sex) -> frozenset[str]:
    """Return the lethal groups that nothing on this pair covers."""
    first, second = pair
    if chromosome == "X" and sex == MALE:
        return lethal_groups(first) | lethal_groups(second) | _male_lethals(pair)
    if first.is_compound or second.is_compound:
        return NO_GENES
    return lethal_groups(first) & lethal_groups(second)


def _male_lethals(pair: Pair) -> frozenset[str]:
    return frozenset(e.symbol for h in pair for e in h.elements if e.traits.male_lethal)


def x_dose(pair: Pair) -> int:
    """Return the number of X chromosomes in the pair; an attached-X counts as two."""
    return sum(0 if h.is_y else 2 if h.is_compound else 1 for h in pair)


def sex_of(pair: Pair) -> Sex:
    """Return the sex that this X pair makes (two or more X: female)."""
    return FEMALE if x_dose(pair) >= 2 else MALE


def cause_of_death(fly: Fly) -> str | None:
    """Return why the zygote dies, in a few words; None when it lives."""
    dose = x_dose(fly.pair("X"))
    if dose == 0:
        return "no X chromosome"
    if dose > 2:
        return "three X chromosomes"
    unbalanced = _unbalanced_translocation(fly)
    if unbalanced:
        return unbalanced
    exposed = NO_GENES
    for name, pair in zip(PAIRS, fly.pairs, strict=True):
        exposed |= exposed_lethals(pair, name, fly.sex)
    if exposed:
        exposed -= NO_GENES.union(*(restored_genes(h) for _, h in fly.homologues()))
    if exposed:
        groups = ", ".join(sorted(exposed))
        return f"lethal without a working copy: {groups}"
    return None


def lives(fly: Fly) -> bool:
    """Return whether the zygote becomes an adult."""
    return cause_of_death(fly) is None


def _unbalanced_translocation(fly: Fly) -> str | None:
    _, second, third, _ = fly.pairs
    if linked_part(second[0]) + linked_part(second[1]) == linked_part(third[0]) + linked_part(third[1]):
        return None
    return "one part of a translocation without the other"


@cache
def linked_part(homologue: Homologue) -> bool:
    """Return whether the homologue is one part of a translocation balancer."""
    return any(e.traits.linked_to for e in homologue.elements)


def is_fertile(fly: Fly) -> bool:
    """Return whether the fly can be a parent."""
    return sterile_because(fly) is None


def sterile_because(fly: Fly) -> str | None:
    """Return why the fly cannot be a parent; None when it can."""
    if fly.sex == MALE and not any(h.is_y for h in fly.pair("X")):
        return "a male without a Y is sterile"
    for name, pair in zip(PAIRS, fly.pairs, strict=True):
        causes = _sterile_causes(pair, name, fly.sex)
        if causes:
            return f"{fly.sex} sterile: {', '.join(sorted(causes))}"
    return None


@cache
def _sterile_causes(pair: Pair, chromosome: str, sex: Sex) -> frozenset[str]:
    first, second = (
        NO_GENES.union(*(e.traits.female_sterile if sex == FEMALE else e.traits.male_sterile for e in h.elements))
        for h in pair
    )
    if chromosome == "X" and sex == MALE:
        return first | second
    return first & second
