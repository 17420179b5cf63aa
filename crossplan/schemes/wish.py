"""What the final flies must be.

A wish is a condition on each chromosome pair by itself: which elements must be there, in how many copies, and what
must not be there. That it splits by chromosome is what makes the search exact and quick.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Literal

from crossplan.genetics.chromosome import FEMALE, MALE, Sex
from crossplan.genetics.element import Element, Kind
from crossplan.genetics.fly import Homologue, Pair

BALANCERS = "balancers"
MARKERS = "markers"
OTHER_INSERTIONS = "other insertions"
WantedSex = Literal["female", "male", "both"]


@dataclass(frozen=True)
class Wish:
    """One wanted fly.

    Attributes:
        components: (symbol, chromosome, copies) of every element that must be there.
        sex: of the wanted flies; "both" when either will do for a stock.
        forbid: `balancers`, `markers` (dominant visible ones), `other insertions`, and symbols of single elements.
        stock: the wanted flies are to perpetuate themselves: every pair homozygous or over a balancer, both sexes.
        exact: neither more nor fewer copies will do (a control must match what it is the control for).
    """

    components: tuple[tuple[str, str, int], ...]
    sex: WantedSex = "female"
    forbid: frozenset[str] = frozenset((BALANCERS, MARKERS))
    stock: bool = False
    exact: bool = False

    @cached_property
    def symbols(self) -> tuple[str, ...]:
        return tuple(symbol for symbol, _, _ in self.components)

    @cached_property
    def _forbidden(self) -> dict[Element, bool]:
        return {}

    def forbids(self, element: Element) -> bool:
        """Return whether the wanted flies must not carry `element`."""
        found = self._forbidden.get(element)
        if found is None:
            found = self._forbidden[element] = self._decide(element)
        return found

    def _decide(self, element: Element) -> bool:
        if element.symbol in self.forbid or element.gene in self.forbid:
            return True
        if element.symbol in self.symbols:
            return False
        if element.is_balancer:
            return BALANCERS in self.forbid
        if MARKERS in self.forbid and element.traits.dominant:
            return True
        return OTHER_INSERTIONS in self.forbid and element.kind is Kind.INSERTION

    def accepts(self, pair: Pair, chromosome: str) -> bool:
        """Return whether a wanted fly may have `pair` as its `chromosome`."""
        for symbol, place, copies in self.components:
            if place != chromosome:
                continue
            carried = sum(e.symbol == symbol for h in pair for e in h.elements)
            if carried < copies or (self.exact and carried > copies):
                return False
        if any(self.forbids(e) for h in pair for e in h.elements):
            return False
        return not self.stock or self._keeps_itself(pair)

    def _keeps_itself(self, pair: Pair) -> bool:
        first, second = pair
        if first == second or second.is_y:
            return True
        return (first.balancer is None) != (second.balancer is None)

    def wants_sex(self, sex: str) -> bool:
        """Return whether flies of `sex` will do."""
        return self.sex in (sex, "both")

    def sexes(self) -> tuple[Sex, ...]:
        """Return the sexes of which flies must come out of the last cross."""
        if self.sex == "both":
            return (FEMALE, MALE)
        return (self.sex,)

    def carried(self, homologue: Homologue) -> frozenset[str]:
        """Return the wanted elements that the homologue carries."""
        return frozenset(homologue.symbols).intersection(self.symbols)


def may_be_given(wish: Wish, chromosome: str, homologue: Homologue) -> bool:
    """Return whether a gamete with this homologue can be one half of a wanted fly."""
    if any(wish.forbids(e) for e in homologue.elements):
        return False
    doubled = {s for s, place, copies in wish.components if copies > 1 and place == chromosome}
    return doubled <= set(homologue.symbols)
