"""Homologues, pairs of homologues, and the fly.

All values are frozen, and written in one canonical order, so that equal flies are equal and hash alike.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field
from functools import cached_property

from crossplan.genetics.chromosome import FEMALE, PAIRS, Sex
from crossplan.genetics.element import Element, Kind


def _map_order(element: Element) -> tuple[bool, float, str]:
    unknown = element.position_cM is None
    return (unknown, 0.0 if element.position_cM is None else element.position_cM, element.symbol)


@dataclass(frozen=True)
class Homologue:
    """One copy of a chromosome: a backbone (ordinary, or a named balancer) and its elements in map order.

    The balancer, if there is one, stands first; the other elements follow in map order, those of unknown place last.
    Wild type is a homologue without elements. Make one with `Homologue.of`.
    """

    elements: tuple[Element, ...] = ()
    _hash: int = field(init=False, repr=False, compare=False, default=0)

    def __post_init__(self) -> None:
        object.__setattr__(self, "_hash", hash(self.elements))

    def __hash__(self) -> int:
        return self._hash

    @classmethod
    def of(cls, *elements: Element) -> Homologue:
        """Return the homologue that carries `elements`, put into canonical order."""
        backbone = tuple(e for e in elements if e.is_balancer or e.kind is Kind.Y)
        others = sorted((e for e in elements if not (e.is_balancer or e.kind is Kind.Y)), key=_map_order)
        return cls(backbone + tuple(others))

    @cached_property
    def symbols(self) -> tuple[str, ...]:
        return tuple(e.symbol for e in self.elements)

    @cached_property
    def balancer(self) -> Element | None:
        return next((e for e in self.elements if e.is_balancer), None)

    @cached_property
    def is_y(self) -> bool:
        return any(e.kind is Kind.Y for e in self.elements)

    @cached_property
    def is_compound(self) -> bool:
        """Whether it is two X chromosomes on one centromere."""
        return any(e.traits.compound for e in self.elements)

    @cached_property
    def sort_key(self) -> tuple[bool, bool, bool, tuple[str, ...]]:
        """Order of writing within a pair: ordinary before balancer, carriers before wild type, Y last."""
        return (self.is_y, self.balancer is not None, not self.elements, self.symbols)


WILD_TYPE = Homologue()
Y_ELEMENT = Element("Y", Kind.Y, chromosome="Y")
Y = Homologue((Y_ELEMENT,))

Pair = tuple[Homologue, Homologue]


def make_pair(first: Homologue, second: Homologue) -> Pair:
    """Return the two homologues in the order in which they are written."""
    return (first, second) if first.sort_key <= second.sort_key else (second, first)


@dataclass(frozen=True)
class Fly:
    """A sex and a pair of homologues for X, 2, 3 and 4. The X pair of an ordinary male is (X, Y).

    Make one with `Fly.of`, which puts each pair into canonical order.
    """

    sex: Sex
    pairs: tuple[Pair, Pair, Pair, Pair]

    @classmethod
    def of(cls, sex: Sex, x: Pair, second: Pair, third: Pair, fourth: Pair = (WILD_TYPE, WILD_TYPE)) -> Fly:
        """Return the fly with these pairs of X, 2, 3 and 4."""
        return cls(sex, (make_pair(*x), make_pair(*second), make_pair(*third), make_pair(*fourth)))

    def pair(self, chromosome: str) -> Pair:
        """Return the pair of `chromosome` (X, 2, 3 or 4)."""
        return self.pairs[PAIRS.index(chromosome)]

    @property
    def is_female(self) -> bool:
        return self.sex == FEMALE

    def homologues(self) -> Iterator[tuple[str, Homologue]]:
        """Yield every homologue with the name of its chromosome, X first."""
        for name, pair in zip(PAIRS, self.pairs, strict=True):
            for homologue in pair:
                yield name, homologue

    def elements(self) -> Iterator[Element]:
        """Yield every element, once for each copy."""
        for _, homologue in self.homologues():
            yield from homologue.elements

    def copies(self, symbol: str) -> int:
        """Return how many copies of the element `symbol` the fly carries."""
        return sum(e.symbol == symbol for e in self.elements())
