"""Random small shelves, as the plain second method sees them and as the program does."""

from __future__ import annotations

import random
from dataclasses import dataclass
from functools import cache

from crossplan.genetics.notation import read_fly
from crossplan.schemes.forms import Source
from crossplan.schemes.wish import Wish
from tests.schemes import brute_force as plain

#: how each element of the plain method is written in a genotype
TEXT = {
    "A": "AD-A@attP40", "B": "UAS-B@attP40", "C": "UAS-C@VK00037", "D": "DBD-D@attP2", "E": "UAS-E@attP2",
    "U": "UAS-U@attP18", "CyO": "CyO", "Sco": "Sco", "If": "If", "TM3": "TM3, Sb[1]", "TM6B": "TM6B", "Dr": "Dr[Mio]",
    "l2": "l(2)a[1]", "l3": "l(3)a[1]", "w": "w[1118]", "Y": "Y",
}  # fmt: skip
CHROMOSOME = {"A": "2", "B": "2", "C": "2", "D": "3", "E": "3", "U": "X"}
WHITE: plain.Chromosome = frozenset({"w"})
WITH_U: plain.Chromosome = frozenset({"w", "U"})
SECOND = [frozenset(s) for s in ((), ("CyO",), ("Sco",), ("If",), ("l2",))]
THIRD = [frozenset(s) for s in ((), ("TM3",), ("TM6B",), ("Dr",), ("l3",))]
PLAIN_PAIR = (plain.WILD, plain.WILD)


@dataclass(frozen=True)
class Case:
    """One shelf and one wish."""

    stocks: tuple[tuple[plain.Fly, plain.Fly], ...]
    wanted: tuple[tuple[str, int], ...]
    sex: str

    @property
    def flies(self) -> list[plain.Fly]:
        return [fly for stock in self.stocks for fly in stock]

    def sources(self) -> list[Source]:
        """Return the shelf as the program reads it."""
        return [
            Source(f"stock {i}", read_fly(text(female), "female"), read_fly(text(male), "male"))
            for i, (female, male) in enumerate(self.stocks)
        ]

    def wish(self) -> Wish:
        """Return the wish as the program takes it."""
        components = tuple((TEXT[name], CHROMOSOME[name], copies) for name, copies in self.wanted)
        return Wish(components, "female" if self.sex == "female" else "male")


@cache
def text(fly: plain.Fly) -> str:
    """Return the genotype of a plain fly in bench notation, all places written."""
    return "; ".join(_pair(two) for two in (fly.x, fly.second, fly.third))


def _pair(two: plain.PairOf) -> str:
    first, second = (_homologue(h) for h in two)
    return first if first == second else f"{first}/{second}"


def _homologue(homologue: plain.Chromosome) -> str:
    return " ".join(TEXT[e] for e in sorted(homologue, reverse=True)) or "+"


def _stock(x: plain.Chromosome, second: plain.PairOf, third: plain.PairOf) -> tuple[plain.Fly, plain.Fly]:
    return (
        plain.Fly("female", plain.pair(x, x), plain.pair(*second), plain.pair(*third)),
        plain.Fly("male", plain.pair(x, plain.Y), plain.pair(*second), plain.pair(*third)),
    )


def _living_pair(random_: random.Random, options: list[plain.Chromosome], insertion: str | None) -> plain.PairOf:
    while True:
        first = frozenset({insertion}) if insertion else random_.choice(options)
        second = first if insertion and random_.random() < 0.5 else random_.choice(options)
        two = plain.pair(first, second)
        if plain.alive(plain.Fly("female", (WHITE, WHITE), two, two)):
            return two


def random_case(seed: int) -> Case:
    """Return the shelf and the wish of this seed: one to four stocks, one to three components."""
    random_ = random.Random(seed)
    names = random_.sample(sorted(CHROMOSOME), random_.choice([1, 2, 2, 3]))
    wanted = dict.fromkeys(names, 1)
    doubled = random_.choice(names)
    if doubled != "U" and random_.random() < 0.35:
        wanted[doubled] = 2
    stocks = []
    for name in names:
        x = WITH_U if name == "U" else WHITE if random_.random() < 0.9 else plain.WILD
        pairs = []
        for chromosome, options in (("2", SECOND), ("3", THIRD)):
            here = name if CHROMOSOME[name] == chromosome else None
            busy = here is not None or random_.random() < 0.3
            pairs.append(_living_pair(random_, options, here) if busy else PLAIN_PAIR)
        stocks.append(_stock(x, pairs[0], pairs[1]))
    for _ in range(random_.choice([0, 1, 1])):
        stocks.append(_stock(WHITE, _living_pair(random_, SECOND, None), _living_pair(random_, THIRD, None)))
    return Case(tuple(stocks), tuple(wanted.items()), random_.choice(["female", "male"]))
