"""What a person can see on a fly with the means that the lab has.

Appearance is computed from what the fly carries, never looked up:

* a dominant sign shows with one copy; a recessive one when no homologue covers it and no insertion brings a working
  copy of the gene;
* a fly without a working white gene has white eyes, unless a mini-white insertion gives pigment back. How many
  mini-white copies it has cannot be told by eye with certainty (Levis et al. 1985, Science 229:558: the colour
  depends on the place of insertion), so pigment is a yes or a no and nothing more;
* the eye has a brown and a red pigment: a fly without the brown one (v, cn, st) and without the red one (bw) is
  white too (Lindsley & Grell 1968, Carnegie Publ. 627, bw);
* where pigment comes from mini-white, other eye-colour markers are not scored (common practice, no source);
* some signs hide others (the catalogue says which): white eyes hide every other eye colour, a tiny or glazed eye
  hides its pigment;
* a sign counts only if the lab can use it: adults only unless pupae are scored, fluorescence only with the scope for
  it, nothing that is hard to see, nothing the lab distrusts, nothing that the rearing temperature makes unsure.

A sign is a departure from wild type; a fly with no signs looks wild type. The sex of an adult is always seen.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property

from crossplan.genetics.catalogue import Catalogue, Sign
from crossplan.genetics.chromosome import PAIRS, Sex
from crossplan.genetics.fly import Fly, Homologue, Pair
from crossplan.genetics.survival import restored_genes

WHITE = "w"
WHITE_EYES = "white eyes"
#: genes without which an eye has no brown pigment, and no red pigment
NO_BROWN_PIGMENT = frozenset(("v", "cn", "st"))
NO_RED_PIGMENT = frozenset(("bw",))


@dataclass(frozen=True)
class Means:
    """What the lab has and relies on when it sorts flies.

    Attributes:
        pupae: whether pupae are scored too.
        fluorescence: whether there is a fluorescence dissecting scope.
        distrust: signs or marker symbols that nobody wants to rely on.
        rearing_C: temperature in degrees C at which the scored flies grow up.
    """

    pupae: bool = False
    fluorescence: bool = False
    distrust: frozenset[str] = frozenset()
    rearing_C: float = 25.0

    def uses(self, sign: Sign) -> bool:
        """Return whether the lab can and will score `sign`."""
        if sign.ease == "hard" or sign.name in self.distrust:
            return False
        if sign.unreliable_below_C is not None and self.rearing_C < sign.unreliable_below_C:
            return False
        if sign.stage == "adult":
            return True
        return (sign.stage == "pupa" and self.pupae) or (sign.stage == "fluorescence" and self.fluorescence)


@dataclass(frozen=True, slots=True)
class Contribution:
    """What one pair of homologues adds to the looks of the whole fly.

    Attributes:
        dominant: signs that show whatever the other pairs carry.
        exposed: (gene, sign) that show unless another pair restores the gene; the sign is empty for a plain null.
        restores: genes of which this pair brings a working copy by an insertion.
    """

    dominant: frozenset[str]
    exposed: frozenset[tuple[str, str]]
    restores: frozenset[str]


class Observer:
    """A person with a catalogue and the lab's means, who says what a fly looks like."""

    def __init__(self, catalogue: Catalogue, means: Means | None = None) -> None:
        self.catalogue = catalogue
        self.means = means or Means()
        self._contributions: dict[tuple[Pair, str, Sex], Contribution] = {}
        self._combined: dict[frozenset[Contribution], frozenset[str]] = {}

    @cached_property
    def _usable(self) -> dict[str, bool]:
        return {name: self.means.uses(sign) for name, sign in self.catalogue.signs.items()}

    def signs(self, fly: Fly) -> frozenset[str]:
        """Return the signs that can be scored on the fly."""
        return self.combine(self.contribution(pair, name, fly.sex) for name, pair in zip(PAIRS, fly.pairs, strict=True))

    def contribution(self, pair: Pair, chromosome: str, sex: Sex) -> Contribution:
        """Return what this pair adds to the looks of a fly of `sex`."""
        key = (pair, chromosome, sex)
        found = self._contributions.get(key)
        if found is None:
            found = self._contributions[key] = _contribution(pair, chromosome, sex, self.means.distrust)
        return found

    def combine(self, parts: Iterable[Contribution]) -> frozenset[str]:
        """Return the signs of a fly whose pairs contribute `parts`."""
        key = frozenset(parts)
        found = self._combined.get(key)
        if found is None:
            found = self._combined[key] = self._combine(key)
        return found

    def _combine(self, parts: frozenset[Contribution]) -> frozenset[str]:
        present: set[str] = set().union(*(p.dominant for p in parts))
        exposed: set[tuple[str, str]] = set().union(*(p.exposed for p in parts))
        restored: set[str] = set().union(*(p.restores for p in parts))
        white_gone = any(gene == WHITE and not sign for gene, sign in exposed)
        present |= {sign for gene, sign in exposed if sign and gene not in restored}
        mutant = {gene for gene, _ in exposed} - restored
        if white_gone:
            present = {s for s in present if WHITE_EYES not in self._hidden_by(s)}
        if (white_gone and WHITE not in restored) or (mutant & NO_BROWN_PIGMENT and mutant & NO_RED_PIGMENT):
            present.add(WHITE_EYES)
        return frozenset(s for s in present if self._scorable(s, present))

    def _hidden_by(self, sign: str) -> tuple[str, ...]:
        known = self.catalogue.signs.get(sign)
        return known.hidden_by if known else ()

    def _scorable(self, sign: str, present: set[str]) -> bool:
        return self._usable.get(sign, True) and not any(s in present for s in self._hidden_by(sign))


def _mutant_genes(homologue: Homologue) -> dict[str, set[str]]:
    """Return the genes of which the homologue has no fully working copy, with the signs of its alleles."""
    genes: dict[str, set[str]] = {}
    for element in homologue.elements:
        for gene, sign in element.traits.recessive:
            genes.setdefault(gene, set()).add(sign)
        for gene in element.traits.null_for:
            genes.setdefault(gene, set())
    return genes


def _contribution(pair: Pair, chromosome: str, sex: Sex, distrust: frozenset[str]) -> Contribution:
    elements = [e for h in pair for e in h.elements if e.symbol not in distrust and e.gene not in distrust]
    dominant = frozenset(sign for e in elements for sign in e.traits.dominant)
    if chromosome == "X":
        # a male has one X, and a female with an attached-X carries all that she shows on it
        bearers = [h for h in pair if not h.is_y]
    else:
        bearers = list(pair)
    exposed: set[tuple[str, str]] = set()
    if bearers:
        mutant = [_mutant_genes(h) for h in bearers]
        for gene in set(mutant[0]).intersection(*mutant[1:]):
            exposed |= {(gene, sign) for sign in _shown(gene, [m[gene] for m in mutant])}
    restores = frozenset[str]().union(*(restored_genes(h) for h in pair))
    return Contribution(dominant, frozenset(exposed), restores)


def _shown(gene: str, signs_by_homologue: list[set[str]]) -> set[str]:
    """Return the signs of a gene that is mutant on every homologue.

    An allele with a sign of its own shows over a plain null; two plain nulls show as the null (an empty sign).
    """
    signs = set().union(*signs_by_homologue)
    return signs or {""}
