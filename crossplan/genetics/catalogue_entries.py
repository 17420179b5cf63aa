"""What an entry of the catalogue is: one frozen class for each kind of fact, each with its source."""

from __future__ import annotations

from dataclasses import dataclass

from crossplan.genetics.element import Traits

#: what the word in the column `kind` means, for a reader who has no table of sources at hand
MEANING_OF_KIND = {
    "published": "published",
    "common practice": "common practice, no publication",
    "memory": "from memory, not looked up again",
    "derived": "worked out from other entries",
    "lab": "the lab's own entry",
}


@dataclass(frozen=True, slots=True, kw_only=True)
class Sourced:
    """An entry that says where it comes from.

    Attributes:
        source: the publication, `common practice, no source`, or the laboratory's file.
        kind: how good that is: published, common practice, memory, derived or lab.
    """

    source: str
    kind: str

    @property
    def origin(self) -> str:
        """Source and kind in words, as `crossplan read` prints them."""
        meaning = MEANING_OF_KIND.get(self.kind, self.kind)
        return self.source if meaning.partition(",")[0] in self.source else f"{self.source} ({meaning})"


@dataclass(frozen=True, slots=True, kw_only=True)
class Sign(Sourced):
    """One look that a person can see on a fly.

    Attributes:
        name: the departure from wild type, such as `curly wings`.
        opposite: how a fly without it looks, such as `straight wings`.
        part: part of the body.
        stage: adult, pupa, larva, or fluorescence (an adult under the fluorescence scope).
        ease: easy, medium or hard.
        sex: the sex that alone can show it; empty for both.
        unreliable_below_C: rearing temperature in degrees C below which the sign can be missing.
        error_rate: share of flies that are misjudged, 0 to 1, where a laboratory has counted it; else None.
        hidden_by: signs that make this one unscorable on the same fly.
    """

    name: str
    opposite: str
    part: str
    stage: str
    ease: str
    unreliable_below_C: float | None
    hidden_by: tuple[str, ...]
    error_rate: float | None = None
    sex: str = ""
    note: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class MarkerEntry(Sourced):
    """An allele with a visible effect, or (allele empty) all mutant alleles of a gene.

    `map_cM` is the place on the genetic map in cM, None when unknown; `band` the place on the polytene map.
    `sign` is empty for a wild-type allele. The sign is missing or weak in flies reared below `unreliable_below_C` or
    above `unreliable_above_C` (degrees C), whatever other markers with that sign do.
    """

    gene: str
    allele: str
    synonyms: tuple[str, ...]
    chromosome: str
    map_cM: float | None
    band: str
    dominance: str
    sign: str
    traits: Traits
    homozygote: str = "viable"
    hemizygous_male: str = ""
    other_alleles: str = "same"
    unreliable_below_C: float | None = None
    unreliable_above_C: float | None = None
    note: str = ""

    @property
    def symbol(self) -> str:
        """Gene and allele as the standard notation writes them, such as `Sb[1]`."""
        return f"{self.gene}[{self.allele}]" if self.allele else self.gene


@dataclass(frozen=True, slots=True, kw_only=True)
class BalancerEntry(Sourced):
    """A balancer, an inversion used as a partner of balancers, or an attached-X.

    Attributes:
        linked_to: chromosome that travels with this one (translocation balancers); `Catalogue.linked_part`
            has it.
        form_of: the balancer of which this is a form with something added (`CyO` for `CyO-GFP`), else empty.
        assumed: symbols of dominant markers that it is taken to carry when the genotype writes no marker on
            it.
        assumed_reason: why.
        traits: what it always does.
        traits_assumed: `traits` with the assumed markers added.
        leaks: where it holds badly, in words; `covers_note` says how well its extent is known.
        caution: what else to know before using it.
    """

    name: str
    synonyms: tuple[str, ...]
    chromosome: str
    linked_to: str
    assumed: tuple[str, ...]
    assumed_reason: str
    traits: Traits
    traits_assumed: Traits
    leaks: str
    form_of: str = ""
    dominant: tuple[str, ...] = ()
    recessive: tuple[str, ...] = ()
    covers_note: str = ""
    caution: str = ""

    @property
    def core(self) -> str:
        """The balancer without what was added to it."""
        return self.form_of or self.name


@dataclass(frozen=True, slots=True, kw_only=True)
class BalancerPair(Sourced):
    """Whether flies with these two balancers as homologues live.

    `fate` is viable, weak, lethal or unknown; `reason` says why, or what such flies look like.
    """

    one: str
    other: str
    fate: str
    reason: str


@dataclass(frozen=True, slots=True, kw_only=True)
class YEntry(Sourced):
    """A Y chromosome that carries something.

    `traits` has its dominant signs and the X-linked genes of which it brings a working copy; `caution` is what to know
    when it is used to tell the sexes apart.
    """

    name: str
    synonyms: tuple[str, ...]
    traits: Traits
    caution: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class CompoundEntry(Sourced):
    """Two arms or chromosomes on one centromere.

    Attributes:
        chromosome: X, 2, 3 or 4.
        attached: what is joined, such as `X;Y` or `2L;2L`.
        outcome: what a cross with flies of ordinary chromosomes gives.
    """

    name: str
    synonyms: tuple[str, ...]
    chromosome: str
    attached: str
    outcome: str


@dataclass(frozen=True, slots=True, kw_only=True)
class InversionEntry(Sourced):
    """An inversion of an ordinary chromosome, with its breakpoints on the polytene map.

    `traits` has the stretch (in cM, by the band table) inside which a fly with one copy gives no recombinants.
    """

    name: str
    synonyms: tuple[str, ...]
    chromosome: str
    breakpoints: str
    traits: Traits
    note: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class SiteEntry(Sourced):
    """A landing site.

    `map_cM` is in cM, None when unknown; `trouble` is what homozygous insertions there do; `carries` are the
    transformation markers of the site itself, which stay beside whatever is put there.
    """

    name: str
    synonyms: tuple[str, ...]
    arm: str
    chromosome: str
    band: str
    map_cM: float | None
    trouble: str
    carries: tuple[str, ...] = ()
    note: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class ComponentEntry(Sourced):
    """A class of transgene, recognised by the pattern of its short name.

    Attributes:
        name: name of the row, such as `CsChrimson`.
        cls: AD, DBD, GAL4, LexA, QF, effector, reporter, repressor or helper.
        pattern: regular expression that is searched in the short name.
        activation: light, heat or none.
        needs_retinal, needs_dark: whether its flies need all-trans retinal, and darkness while they grow.
        rear_max_C, rear_min_C: limits of the rearing temperature in degrees C.
        test_C: temperature in degrees C at which it acts.
        carries: transformation markers that such an insertion has when none is written.
        control_role: which control goes with it.
        sign: sign that it shows on its own (an ubiquitous GFP), else empty.
    """

    name: str
    cls: str
    pattern: str
    activation: str
    needs_retinal: bool
    needs_dark: bool
    rear_max_C: float | None
    rear_min_C: float | None
    test_C: float | None
    carries: tuple[str, ...]
    control_role: str
    caution: str
    sign: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class KnownElement(Sourced):
    """One insertion of which it is known where it sits: a line of the trade, or one that the laboratory has settled.

    Attributes:
        name: its usual name.
        pattern: regular expression that names of the same sort match whole; empty for a single element.
        chromosome: X, Y, 2, 3 or 4.
        site: landing site, else empty.
        band: place on the polytene map, else empty.
        map_cM: place on the genetic map in cM, None when unknown.
        cls: class of component, as in `ComponentEntry.cls`; empty to leave it to the name.
        carries: transformation markers; None to leave them to the class.
        traits: what it does besides its transformation markers: a sign of its own, death or sterility when
            homozygous.
        homozygote: viable, lethal or female sterile.
    """

    name: str
    synonyms: tuple[str, ...]
    pattern: str
    chromosome: str
    site: str
    band: str
    map_cM: float | None
    cls: str
    carries: tuple[str, ...] | None
    traits: Traits
    homozygote: str = "viable"
    note: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Locus(Sourced):
    """A gene on the genetic map: chromosome, place in cM (None when unknown), band, and where that comes from."""

    gene: str
    chromosome: str
    cM: float | None
    band: str = ""
