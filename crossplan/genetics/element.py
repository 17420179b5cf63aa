"""What is written on a homologue, and what it does there.

An element is an allele of a gene, an insertion, an aberration or a balancer. What it does to its carrier is held in
its `Traits`, which the catalogue fills in when the genotype is read; nothing later looks a symbol up again.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from enum import StrEnum


class Kind(StrEnum):
    """What sort of thing an element is."""

    ALLELE = "allele"
    INSERTION = "insertion"
    ABERRATION = "aberration"
    BALANCER = "balancer"
    Y = "Y"
    UNKNOWN = "unknown"


@dataclass(frozen=True, slots=True)
class Cover:
    """A stretch of a chromosome, from `start` to `end` in cM, in which a balancer or inversion stops recombination."""

    start: float
    end: float


@dataclass(frozen=True, slots=True)
class Traits:
    """What one element does. All names of genes and signs are those of the catalogue.

    Attributes:
        dominant: signs that one copy shows, such as `curly wings`.
        recessive: (gene, sign) pairs: the sign shows when no homologue carries a working copy of the gene.
        null_for: genes of which this homologue has no working copy although no sign is known (`w` for eye pigment).
        restores: genes of which this element brings a working copy (`w` for mini-white, `v` or `y` for rescue).
        lethal: recessive-lethal groups; two homologues that share one are dead together, as is a hemizygous male
            where the group is X-linked.
        male_lethal: a hemizygous male (X) dies even without a listed group.
        female_sterile: females in which both homologues carry one common name in this set are sterile.
        male_sterile: as above; for an X-linked element the hemizygous male.
        cover: where a balancer or inversion stops recombination.
        compound: two copies of the chromosome on one centromere (attached-X), inherited as one.
        linked_to: the chromosome that travels with this one (`3` for the 2-part of a translocation balancer).
        masks: signs that cannot be scored on a fly that shows this element's dominant signs.
    """

    dominant: tuple[str, ...] = ()
    recessive: tuple[tuple[str, str], ...] = ()
    null_for: frozenset[str] = frozenset()
    restores: frozenset[str] = frozenset()
    lethal: frozenset[str] = frozenset()
    male_lethal: bool = False
    female_sterile: frozenset[str] = frozenset()
    male_sterile: frozenset[str] = frozenset()
    cover: tuple[Cover, ...] = ()
    compound: bool = False
    linked_to: str = ""
    masks: frozenset[str] = frozenset()


PLAIN: Traits = Traits()


def with_traits(one: Traits, other: Traits) -> Traits:
    """Return what an element does that does both."""
    if other == PLAIN:
        return one
    return Traits(
        dominant=tuple(dict.fromkeys((*one.dominant, *other.dominant))),
        recessive=tuple(dict.fromkeys((*one.recessive, *other.recessive))),
        null_for=one.null_for | other.null_for,
        restores=one.restores | other.restores,
        lethal=one.lethal | other.lethal,
        male_lethal=one.male_lethal or other.male_lethal,
        female_sterile=one.female_sterile | other.female_sterile,
        male_sterile=one.male_sterile | other.male_sterile,
        cover=(*one.cover, *other.cover),
        compound=one.compound or other.compound,
        linked_to=one.linked_to or other.linked_to,
        masks=one.masks | other.masks,
    )


@dataclass(frozen=True, slots=True, eq=False)
class Element:
    """One thing written on a homologue.

    Attributes:
        symbol: the short form, unique in a stock list: `AD-K12@attP40`, `Sb[1]`, `w[1118]`, `TM6B`.
        kind: what sort of thing it is.
        chromosome: X, Y, 2, 3 or 4; empty when nothing says so.
        site: landing site of an insertion (`attP40`), else empty.
        position_cM: place on the genetic map in cM; None when unknown.
        gene: the gene of an allele (`Sb`), else empty.
        component: class of the component in the catalogue (`AD`, `DBD`, `effector`, ...), else empty.
        standard: the standard notation as it was written; empty where `symbol` is the only form.
        traits: what it does.

    Two elements are the same when symbol, site and traits are; how they were spelt does not matter.
    """

    symbol: str
    kind: Kind
    chromosome: str = ""
    site: str = ""
    position_cM: float | None = None
    gene: str = ""
    component: str = ""
    standard: str = ""
    traits: Traits = field(default=PLAIN)

    def __eq__(self, other: object) -> bool:
        if self is other:
            return True
        if not isinstance(other, Element):
            return NotImplemented
        return self.symbol == other.symbol and self.site == other.site and self.traits == other.traits

    def __hash__(self) -> int:
        return hash(self.symbol)

    @property
    def is_balancer(self) -> bool:
        return self.kind is Kind.BALANCER
