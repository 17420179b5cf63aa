"""A scheme as data, in reduced terms: crosses, the class kept from each, and stocks at the leaves."""

from __future__ import annotations

from dataclasses import dataclass

from crossplan.genetics.chromosome import Sex
from crossplan.genetics.fly import Fly


@dataclass(frozen=True)
class Leaf:
    """A parent taken from the shelf: the number of its form."""

    form: int
    sex: Sex


@dataclass(frozen=True)
class Node:
    """A cross of a scheme, in reduced terms: its parents, and the class that is kept.

    `keep` is the one genotype that an intermediate class holds; None for the last cross, whose class holds every
    genotype that the wish accepts.
    """

    mother: Leaf | Node
    father: Leaf | Node
    keep: Fly | None

    @property
    def generation(self) -> int:
        """Longest run of crosses from a stock to this one, itself counted."""
        return 1 + max(p.generation if isinstance(p, Node) else 0 for p in (self.mother, self.father))

    def forms(self) -> frozenset[int]:
        """Return the numbers of the forms at its leaves."""
        return frozenset(
            form
            for parent in (self.mother, self.father)
            for form in (parent.forms() if isinstance(parent, Node) else (parent.form,))
        )
