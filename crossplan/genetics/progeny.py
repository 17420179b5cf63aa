"""A cross: every class of its progeny, with shares and look-alikes.

Chromosomes assort independently, so the zygotes of a cross are the product of one small table for each chromosome.
Shares are of all living progeny, both sexes together, and sum to 1.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from itertools import product

from crossplan.genetics.appearance import Observer
from crossplan.genetics.chromosome import FEMALE, MALE, PAIRS, Sex
from crossplan.genetics.fly import Fly, Pair, make_pair
from crossplan.genetics.meiosis import Leak, MapFunction, Share, gametes, leaks, unplaced
from crossplan.genetics.survival import cause_of_death, sex_of


@dataclass(frozen=True, slots=True)
class Member:
    """One genotype of a class and its share of all living progeny."""

    fly: Fly
    share: Share


@dataclass(frozen=True, slots=True)
class ProgenyClass:
    """Flies of one sex that look the same: what a person can separate with a brush."""

    sex: Sex
    signs: frozenset[str]
    share: Share
    members: tuple[Member, ...]

    @property
    def look_alikes(self) -> bool:
        """Whether different genotypes hide in this class."""
        return len(self.members) > 1

    @property
    def exact(self) -> Fraction | None:
        """The share as an exact fraction; None where a map distance enters."""
        return self.share if isinstance(self.share, Fraction) else None


@dataclass(frozen=True, slots=True)
class DeadZygote:
    """A genotype that does not become an adult, its share of the zygotes, and why."""

    fly: Fly
    share_of_zygotes: Share
    cause: str


@dataclass(frozen=True, slots=True)
class Progeny:
    """What a cross gives. `alive` is the share of zygotes that live; `leaks` and `unplaced` qualify the shares."""

    mother: Fly
    father: Fly
    classes: tuple[ProgenyClass, ...]
    dead: tuple[DeadZygote, ...]
    alive: Share
    leaks: tuple[Leak, ...]
    unplaced: tuple[str, ...]

    def remarks(self) -> list[str]:
        """Return what qualifies the shares, in sentences: leaky balancers, elements of unknown place."""
        found = [
            f"{leak.element} lies outside the cover of {leak.balancer}: in up to {100 * leak.rate:.1f} % of eggs it"
            " may have left its homologue (not counted in the shares)"
            for leak in self.leaks
        ]
        if self.unplaced:
            names = ", ".join(dict.fromkeys(self.unplaced))
            found.append(f"map position unknown: {names}; recombination with it is not counted")
        return found


def zygote_pairs(
    mother: Pair, father: Pair, chromosome: str, map_function: MapFunction = "haldane"
) -> dict[Pair, Share]:
    """Return the pairs that a zygote can get on one chromosome, with their shares before any death."""
    table: dict[Pair, Share] = {}
    for egg in gametes(mother, chromosome, FEMALE, map_function):
        for sperm in gametes(father, chromosome, MALE, map_function):
            pair = make_pair(egg.homologue, sperm.homologue)
            table[pair] = table.get(pair, Fraction(0)) + egg.share * sperm.share
    return table


def cross(mother: Fly, father: Fly, observer: Observer, map_function: MapFunction = "haldane") -> Progeny:
    """Return the progeny of `mother` x `father`, in classes that `observer` can tell apart.

    Args:
        mother: the female parent (virgin).
        father: the male parent.
        observer: who looks at the flies, with which means.
        map_function: how map distance becomes a recombination fraction in the mother.
    """
    tables = [zygote_pairs(mother.pair(name), father.pair(name), name, map_function) for name in PAIRS]
    living: dict[Fly, Share] = {}
    dead: list[DeadZygote] = []
    for combination in product(*(t.items() for t in tables)):
        pairs = tuple(pair for pair, _ in combination)
        share: Share = Fraction(1)
        for _, part in combination:
            share *= part
        fly = Fly(sex_of(pairs[0]), (pairs[0], pairs[1], pairs[2], pairs[3]))
        cause = cause_of_death(fly)
        if cause is None:
            living[fly] = living.get(fly, Fraction(0)) + share
        else:
            dead.append(DeadZygote(fly, share, cause))
    alive: Share = sum(living.values(), Fraction(0))
    return Progeny(
        mother,
        father,
        _classes(living, alive, observer),
        tuple(dead),
        alive,
        _leaks(mother),
        tuple(s for name in PAIRS for s in unplaced(mother.pair(name), name, FEMALE)),
    )


def _classes(living: dict[Fly, Share], alive: Share, observer: Observer) -> tuple[ProgenyClass, ...]:
    groups: dict[tuple[Sex, frozenset[str]], list[Member]] = {}
    for fly, share in living.items():
        groups.setdefault((fly.sex, observer.signs(fly)), []).append(Member(fly, share / alive))
    classes = [
        ProgenyClass(sex, signs, sum((m.share for m in members), Fraction(0)), _by_share(members))
        for (sex, signs), members in groups.items()
    ]
    return tuple(sorted(classes, key=lambda c: (c.sex, len(c.signs), sorted(c.signs))))


def _by_share(members: list[Member]) -> tuple[Member, ...]:
    return tuple(sorted(members, key=lambda m: (-m.share, [h.sort_key for _, h in m.fly.homologues()])))


def _leaks(mother: Fly) -> tuple[Leak, ...]:
    return tuple(leak for name in PAIRS for leak in leaks(mother.pair(name), name, FEMALE))
