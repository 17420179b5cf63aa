"""The genetic catalogue: signs, markers, balancers, landing sites, component classes, known elements and the map.

The facts are the tables in `data/` (one CSV file each, see `data/SOURCES.md`); a laboratory adds its own
(`catalogue_lab`). This is the one door to them: it puts the tables together and answers questions. Every entry says
where it comes from (`source`), how good that is (`kind`: published, common practice, memory, derived; `lab` for a
laboratory's own entries), and both in words (`origin`).
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from functools import cache
from typing import Final

from crossplan.genetics.catalogue_aberrations import Aberrations
from crossplan.genetics.catalogue_balancers import Balancers
from crossplan.genetics.catalogue_entries import (
    BalancerEntry,
    BalancerPair,
    ComponentEntry,
    CompoundEntry,
    InversionEntry,
    KnownElement,
    Locus,
    MarkerEntry,
    Sign,
    SiteEntry,
    Sourced,
    YEntry,
)
from crossplan.genetics.catalogue_insertions import USUAL_INSERTION_MARKER, Insertions, restored_gene
from crossplan.genetics.catalogue_map import DIVISIONS, GeneticMap, arm_of_band
from crossplan.genetics.catalogue_markers import Markers
from crossplan.genetics.catalogue_tables import ALLOWED, KEYS, Row, read_tables
from crossplan.genetics.element import Traits

__all__ = [
    "ALLOWED",
    "DIVISIONS",
    "KEYS",
    "USUAL_INSERTION_MARKER",
    "BalancerEntry",
    "BalancerPair",
    "Catalogue",
    "ComponentEntry",
    "CompoundEntry",
    "InversionEntry",
    "KnownElement",
    "Locus",
    "MarkerEntry",
    "Sign",
    "SiteEntry",
    "Sourced",
    "YEntry",
    "arm_of_band",
    "default_catalogue",
    "read_tables",
    "restored_gene",
]

_LETHAL_NAME: Final = re.compile(r"l\([1-4]\)\S+")


class Catalogue:
    """All tables, ready for questions. Made from rows of text, as the CSV files have them.

    Raises:
        InputError: a row names a sign, a marker or a site that is not there, or holds a number that is none.
    """

    def __init__(self, tables: Mapping[str, Iterable[Row]]) -> None:
        rows = {name: list(tables.get(name, ())) for name in KEYS}
        self._map = GeneticMap(rows["map"], rows["bands"])
        self._markers = Markers(rows["signs"], rows["markers"])
        self._balancers = Balancers(rows["balancers"], rows["balancer_pairs"], self._markers)
        self._aberrations = Aberrations(
            rows["y_chromosomes"], rows["compounds"], rows["inversions"], self._markers, self._map
        )
        self._insertions = Insertions(
            rows["landing_sites"], rows["components"], rows["elements"], self._markers, self._map
        )
        self.signs: Mapping[str, Sign] = self._markers.signs

    # signs and markers --------------------------------------------------------------------------------------

    def sign(self, name: str) -> Sign:
        """Return the sign `name`; KeyError when the catalogue has none such."""
        return self.signs[name]

    def marker(self, gene: str, allele: str = "") -> MarkerEntry | None:
        """Return the marker written as `gene` with `allele`, None when it is not in the catalogue.

        Case counts. A synonym (`If`) gives the entry under its full name (`Kr[If-1]`). An allele that has no
        row of its own is that of the gene, unless the alleles of the gene differ in dominance or fate. A
        wild-type allele (`+`) of a known gene does nothing.
        """
        return self._markers.marker(gene, allele)

    def markers(self) -> tuple[MarkerEntry, ...]:
        """Return all markers in the order of the table."""
        return self._markers.all()

    # balancers, Y chromosomes, compounds, inversions --------------------------------------------------------

    def balancer(self, name: str) -> BalancerEntry | None:
        """Return the balancer `name` (capitals, spaces and commas do not matter), None when it is not known.

        Of a translocation balancer this is the part on chromosome 2.
        """
        return self._balancers.balancer(name)

    def linked_part(self, entry: BalancerEntry) -> BalancerEntry | None:
        """Return the part of a translocation balancer on the chromosome that `entry` is linked to."""
        return self._balancers.linked_part(entry)

    def balancers(self) -> tuple[BalancerEntry, ...]:
        """Return all balancers in the order of the table, both parts of a translocation balancer."""
        return self._balancers.all()

    def is_balancer_like(self, text: str) -> str | None:
        """Return the balancer whose name is closest to `text` (a likely typing error), None when none is
        close."""
        return self._balancers.like(text)

    def balancer_pair(self, one: str, other: str) -> BalancerPair | None:
        """Return whether flies with these two balancers as homologues live, and why; None when one of them is
        not known or they are of different chromosomes."""
        return self._balancers.pair(one, other)

    def balancer_pairs(self) -> tuple[BalancerPair, ...]:
        """Return the pairs of balancers that the table tells."""
        return self._balancers.pairs_told()

    def y_chromosome(self, name: str) -> YEntry | None:
        """Return the marked Y chromosome `name` (`B[S]Y`, `Dp(1;Y)y[+]`), None when it is not known."""
        return self._aberrations.y_chromosome(name)

    def y_chromosomes(self) -> tuple[YEntry, ...]:
        """Return the marked Y chromosomes of the table."""
        return self._aberrations.y_chromosomes()

    def compound(self, name: str) -> CompoundEntry | None:
        """Return the compound `name` (`C(1;Y)`, `C(2)EN`), None when it is not known; attached-X are balancers."""
        return self._aberrations.compound(name)

    def compounds(self) -> tuple[CompoundEntry, ...]:
        """Return the compounds of the table."""
        return self._aberrations.compounds()

    def inversion(self, name: str) -> InversionEntry | None:
        """Return the inversion `name` (`In(2L)t`), None when it is not known; those that balance are balancers."""
        return self._aberrations.inversion(name)

    def inversions(self) -> tuple[InversionEntry, ...]:
        """Return the inversions of the table."""
        return self._aberrations.inversions()

    # insertions ---------------------------------------------------------------------------------------------

    def site(self, name: str) -> SiteEntry | None:
        """Return the landing site `name` (capitals, spaces and hyphens do not matter), None when it is not
        known."""
        return self._insertions.site(name)

    def sites(self) -> tuple[SiteEntry, ...]:
        """Return all landing sites in the order of the table."""
        return self._insertions.sites()

    def near_sites(self, name: str) -> tuple[str, ...]:
        """Return up to three names of landing sites that are spelt almost like `name`, the closest first."""
        return self._insertions.near_sites(name)

    def component(self, name: str) -> ComponentEntry | None:
        """Return the class of the transgene with the short name `name`; the first pattern of the table that
        fits."""
        return self._insertions.component(name)

    def components(self) -> tuple[ComponentEntry, ...]:
        """Return all component classes in the order of the table, which is the order in which they are
        tried."""
        return self._insertions.components()

    def known_element(self, symbol: str) -> KnownElement | None:
        """Return what is known of one element by its name: chromosome, site, place, class; None when nothing is.

        Capitals, blanks, brackets and hyphens do not matter. Give the name of the construct, that of the
        insertion behind the braces (`OK107`), or both joined (`tubP-GAL80[ts]@20`).
        """
        return self._insertions.known_element(symbol)

    def known_elements(self) -> tuple[KnownElement, ...]:
        """Return all known elements, those of the laboratory first."""
        return self._insertions.known_elements()

    def insertion_traits(self, markers: Iterable[str], component: ComponentEntry | None) -> Traits:
        """Return what an insertion does.

        Args:
            markers: transformation markers as written inside the braces (`w[+mC]`, `y[+t7.7]`, `v[+t1.8]`,
                `w+`).
            component: its class. Where no marker is written it carries what such insertions carry by common
                practice, and mini-white where the class is unknown too.
        """
        return self._insertions.traits(markers, component)

    # the map ------------------------------------------------------------------------------------------------

    def locus(self, gene: str) -> Locus | None:
        """Return where `gene` (symbol or synonym; case counts) lies, None when the catalogue does not know.

        Genes that are named by their band, as `Or47b` is, are placed by that band. The place in cM may be None
        where the chromosome alone is known.
        """
        found = self._map.locus(gene)
        if found is not None:
            return found
        marker = self.marker(gene) or self._markers.first_of_gene(gene)
        if marker is None or marker.map_cM is None or not marker.chromosome:
            return None
        return Locus(
            gene=gene,
            chromosome=marker.chromosome,
            cM=marker.map_cM,
            band=marker.band,
            source=marker.source,
            kind=marker.kind,
        )

    def genes(self) -> tuple[str, ...]:
        """Return every gene whose chromosome the catalogue knows."""
        return tuple(dict.fromkeys((*self._map.genes(), *(m.gene for m in self.markers() if m.chromosome))))

    def band_to_cM(self, arm: str, band: str) -> float | None:
        """Return the place of a polytene band such as `68A4` in cM, None when it is not a band of `arm`.

        Linear between anchors of known band and map place (`bands.csv`): good to about 3 cM in mid-arm, and
        no guide to order within 1 cM.
        """
        return self._map.band_to_cM(arm, band)

    # names and sources --------------------------------------------------------------------------------------

    def lethal_by_name(self, gene: str) -> bool:
        """Return whether the name itself says recessive lethal: `l(2)gl`, `l(3)c08`."""
        return _LETHAL_NAME.fullmatch(gene) is not None

    def entry_of(self, symbol: str) -> Sourced | None:
        """Return the entry that a symbol names, of whatever table; None when there is none.

        The order is that in which a genotype is read: balancer, element that the laboratory has settled, other
        aberration, marker, landing site, sign, gene, class of transgene.
        """
        return (
            self.balancer(symbol)
            or self.known_element(symbol)
            or self.y_chromosome(symbol)
            or self.compound(symbol)
            or self.inversion(symbol)
            or self._markers.of_symbol(symbol)
            or self.site(symbol)
            or self.signs.get(symbol)
            or self.locus(symbol.partition("[")[0])
            or self.component(symbol)
        )

    def provenance(self, symbol: str) -> str:
        """Return in words where the facts about a symbol come from; empty when the catalogue has none.

        Of an insertion at a site, `AD-K12@attP40`, both the construct and the site are told.
        """
        construct, at, place = symbol.rpartition("@")
        if not at or self.known_element(symbol) is not None:
            found = self.entry_of(symbol)
            return found.origin if found is not None else ""
        told = [(construct, self.entry_of(construct)), (place, self.entry_of(place))]
        return "; ".join(f"{name}: {entry.origin}" for name, entry in told if entry is not None)


@cache
def default_catalogue() -> Catalogue:
    """Return the catalogue that comes with the program, read once."""
    return Catalogue(read_tables())
