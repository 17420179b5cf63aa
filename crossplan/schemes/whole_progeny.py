"""The whole progeny of one cross in view: is the class to keep really pure, chromosomes acting together included.

The level search looks at one chromosome at a time. Signs that two chromosomes share, that hide one another, or genes that
an insertion elsewhere restores are seen here: every living genotype of the cross is looked at.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from itertools import product

from crossplan.genetics.appearance import Observer
from crossplan.genetics.chromosome import PAIRS, Sex
from crossplan.genetics.fly import Fly
from crossplan.genetics.progeny import zygote_pairs
from crossplan.genetics.survival import cause_of_death, is_fertile, sex_of

Looks = dict[tuple[Sex, frozenset[str]], list[Fly]]


class WholeProgeny:
    """Looks at crosses for one observer; what was seen is remembered."""

    def __init__(self, observer: Observer) -> None:
        self.observer = observer
        self._seen: dict[tuple[Fly, Fly], Looks] = {}

    def looks(self, mother: Fly, father: Fly) -> Looks:
        """Return the living genotypes of the cross by sex and signs."""
        found = self._seen.get((mother, father))
        if found is None:
            found = self._seen[mother, father] = self._make(mother, father)
        return found

    def _make(self, mother: Fly, father: Fly) -> Looks:
        tables = [list(zygote_pairs(mother.pair(name), father.pair(name), name)) for name in PAIRS]
        found: Looks = {}
        for x, second, third, fourth in product(*tables):
            fly = Fly(sex_of(x), (x, second, third, fourth))
            if cause_of_death(fly) is None:
                found.setdefault((fly.sex, self.observer.signs(fly)), []).append(fly)
        return found

    def is_pure(self, mother: Fly, father: Fly, child: Fly) -> bool:
        """Return whether the child lives, is fertile, and nobody else of its sex looks like it."""
        if cause_of_death(child) is not None or not is_fertile(child):
            return False
        return self.looks(mother, father).get((child.sex, self.observer.signs(child))) == [child]

    def gives(self, mother: Fly, father: Fly, accepts: Callable[[Fly], bool], sexes: tuple[Sex, ...]) -> bool:
        """Return whether some look of the progeny is borne, in all these sexes, by flies of which all will do."""
        looks = self.looks(mother, father)
        signs = dict.fromkeys(look for _, look in looks)
        return any(all(_all_will_do(looks.get((sex, look)), accepts) for sex in sexes) for look in signs)


def _all_will_do(flies: list[Fly] | None, accepts: Callable[[Fly], bool]) -> bool:
    return bool(flies) and all(accepts(fly) for fly in flies or ())


def accepted_looks(
    progeny: Iterable[Fly], observer: Observer, wish_accepts: Callable[[Fly], bool], sexes: tuple[Sex, ...]
) -> list[frozenset[str]]:
    """Return the looks that the wish can be picked by: in every wanted sex there are bearers, and all will do.

    Args:
        progeny: every living genotype of the cross.
        observer: who looks at them.
        wish_accepts: whether a fly will do.
        sexes: the sexes that are wanted; with both, one look must serve both.
    """
    groups: dict[tuple[Sex, frozenset[str]], list[Fly]] = {}
    for fly in progeny:
        groups.setdefault((fly.sex, observer.signs(fly)), []).append(fly)
    looks = {look for _, look in groups}
    good = [look for look in looks if all(_all_will_do(groups.get((sex, look)), wish_accepts) for sex in sexes)]
    return sorted(good, key=lambda look: (len(look), sorted(look)))
