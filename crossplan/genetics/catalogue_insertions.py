"""Insertions: landing sites, classes of transgene, and single elements of which it is known where they sit.

An insertion brings back the gene that its transformation marker is (mini-white: `w`). Where none is written it
carries what its class usually carries, and mini-white where the class is unknown too (common practice, no source).
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from difflib import get_close_matches
from functools import lru_cache
from typing import Final

from crossplan.errors import InputError
from crossplan.genetics.catalogue_entries import ComponentEntry, KnownElement, SiteEntry
from crossplan.genetics.catalogue_map import GeneticMap
from crossplan.genetics.catalogue_markers import Markers
from crossplan.genetics.catalogue_tables import (
    LIKENESS,
    Row,
    near_hint,
    number,
    parts,
    pattern,
    refuse_twice,
    yes,
)
from crossplan.genetics.chromosome import CHROMOSOME_OF_ARM
from crossplan.genetics.element import PLAIN, Traits

#: what an insertion of a kind that the catalogue does not know is taken to carry (common practice, no source)
USUAL_INSERTION_MARKER: Final = ("w+",)
#: names of transgenes whose class is kept in memory; a stock list of 100,000 rows has fewer
NAMES_KEPT: Final = 65536

_VK = re.compile(r"(?:attp)?vk0*(\d{1,5})")
_FLUORESCENT_MARKER = re.compile(r"(?i)3xP3|GFP|YFP|CFP|RFP|DsRed|tdTom|mCherry")
_RED = re.compile(r"(?i)RFP|DsRed|tdTom|mCherry")
_RESTORED = re.compile(r"([A-Za-z][A-Za-z0-9()-]*?)(?:\[\+[^\]]*\]|\+[^\[\]\s]*)")


class Insertions:
    """The tables `landing_sites`, `components` and `elements`, ready for questions.

    Raises:
        InputError: a row names a sign, a site or an arm that is not there, holds a number or a pattern that is none,
            or a name twice.
    """

    def __init__(
        self,
        sites: Iterable[Row],
        components: Iterable[Row],
        elements: Iterable[Row],
        markers: Markers,
        places: GeneticMap,
    ) -> None:
        self._markers = markers
        self._places = places
        self._sites: dict[str, SiteEntry] = {}
        for row in sites:
            site = _site(row)
            for name in (site.name, *site.synonyms):
                refuse_twice(name, self._sites.setdefault(_site_key(name), site).name, site.name)
        self._components = [
            (pattern(r["pattern"], f"component {r['name']}, pattern"), self._component(r)) for r in components
        ]
        self._class_of = lru_cache(maxsize=NAMES_KEPT)(self._first_that_fits)
        self._elements: dict[str, KnownElement] = {}
        self._patterns: list[tuple[re.Pattern[str], KnownElement]] = []
        for row in elements:
            self._add_element(row)

    # landing sites ------------------------------------------------------------------------------------------

    def site(self, name: str) -> SiteEntry | None:
        """Return the landing site `name` (capitals, spaces and hyphens do not matter), None when it is not
        known."""
        return self._sites.get(_site_key(name))

    def sites(self) -> tuple[SiteEntry, ...]:
        """Return all landing sites in the order of the table."""
        return tuple(dict.fromkeys(self._sites.values()))

    def near_sites(self, name: str) -> tuple[str, ...]:
        """Return up to three names of landing sites that are spelt almost like `name`, the closest first."""
        near = get_close_matches(_site_key(name), self._sites, n=6, cutoff=LIKENESS)
        return tuple(dict.fromkeys(self._sites[key].name for key in near))[:3]

    # classes of transgene -----------------------------------------------------------------------------------

    def component(self, name: str) -> ComponentEntry | None:
        """Return the class of the transgene with the short name `name`; the first pattern of the table that
        fits."""
        return self._class_of(name)

    def components(self) -> tuple[ComponentEntry, ...]:
        """Return all component classes in the order of the table, which is the order in which they are
        tried."""
        return tuple(entry for _, entry in self._components)

    def _first_that_fits(self, name: str) -> ComponentEntry | None:
        return next((entry for fits, entry in self._components if fits.search(name)), None)

    def _component(self, row: Row) -> ComponentEntry:
        where = f"component {row['name']}"
        if not row["class"]:
            raise InputError(f"{where} lacks class", "write AD, DBD, GAL4, LexA, QF, effector, reporter, ...")
        return ComponentEntry(
            name=row["name"],
            cls=row["class"],
            pattern=row["pattern"],
            activation=row["activation"],
            needs_retinal=yes(row["needs_retinal"], where),
            needs_dark=yes(row["needs_dark"], where),
            rear_max_C=number(row["rear_max_C"], where),
            rear_min_C=number(row["rear_min_C"], where),
            test_C=number(row["test_C"], where),
            carries=parts(row["carries"]),
            control_role=row["control_role"],
            caution=row["caution"],
            source=row["source"],
            kind=row["kind"],
            sign=self._markers.known_sign(row["sign"], where) if row["sign"] else "",
        )

    # single elements ----------------------------------------------------------------------------------------

    def known_element(self, symbol: str) -> KnownElement | None:
        """Return what is known of one element by its name, None when nothing is.

        Capitals, blanks, brackets, hyphens and the like do not matter; a name is tried before a pattern, the
        laboratory's entries before those of the trade.
        """
        found = self._elements.get(_element_key(symbol))
        if found is not None:
            return found
        return next((entry for fits, entry in self._patterns if fits.fullmatch(symbol)), None)

    def known_elements(self) -> tuple[KnownElement, ...]:
        """Return all known elements in the order of the table."""
        return tuple(dict.fromkeys((*self._elements.values(), *(entry for _, entry in self._patterns))))

    def _add_element(self, row: Row) -> None:
        entry = self._element(row)
        names = entry.synonyms if entry.pattern else (entry.name, *entry.synonyms)
        for name in names:
            key = _element_key(name)
            if not key:
                raise InputError(f"element '{name}': a name needs a letter or a digit", "write it as the genotype does")
            first = self._elements.setdefault(key, entry)
            # a name that the laboratory has settled stands before that of the trade
            if first.kind != "lab" or entry.kind == "lab":
                refuse_twice(name, first.name, entry.name)
        if entry.pattern:
            self._patterns.append((pattern(entry.pattern, f"element {entry.name}, pattern"), entry))

    def _element(self, row: Row) -> KnownElement:
        where = f"element {row['name']}"
        site = self._site_of(row, where)
        chromosome = self._chromosome_of(row, site, where)
        band = site.band if site is not None else row["band"]
        place = site.map_cM if site is not None else number(row["map_cM"], f"{where}, map_cM")
        if place is None and band and chromosome != "Y":
            place = self._places.band_of_chromosome(chromosome, band, f"{where}, band")
        return KnownElement(
            name=row["name"],
            synonyms=parts(row["synonyms"]),
            pattern=row["pattern"],
            chromosome=chromosome,
            site=site.name if site is not None else "",
            band=band,
            map_cM=place,
            cls=row["class"],
            carries=parts(row["carries"]) or None,
            traits=self._element_traits(row, where),
            homozygote=row["homozygote"] or "viable",
            note=row["note"],
            source=row["source"],
            kind=row["kind"],
        )

    def _site_of(self, row: Row, where: str) -> SiteEntry | None:
        if not row["site"]:
            return None
        site = self.site(row["site"])
        if site is None:
            near = ", ".join(self.near_sites(row["site"]))
            hint = f"names close to it: {near}" if near else "add it as a [[site]] of the lab's catalogue file"
            raise InputError(f"{where}, site: there is no landing site '{row['site']}'", hint)
        return site

    @staticmethod
    def _chromosome_of(row: Row, site: SiteEntry | None, where: str) -> str:
        if site is not None and row["chromosome"] not in ("", site.chromosome):
            message = f"{where}, chromosome: {row['chromosome']} is written, but {site.name} is on {site.chromosome}"
            raise InputError(message, "correct the site or the chromosome")
        chromosome = site.chromosome if site is not None else row["chromosome"]
        if not chromosome:
            raise InputError(f"{where} lacks chromosome", "write X, Y, 2, 3 or 4, or the landing site")
        return chromosome

    def _element_traits(self, row: Row, where: str) -> Traits:
        signs = (self._markers.known_sign(row["sign"], f"{where}, sign"),) if row["sign"] else ()
        group = frozenset((row["name"],))
        return Traits(
            dominant=signs,
            masks=self._markers.masks(signs),
            lethal=group if row["homozygote"] == "lethal" else frozenset(),
            female_sterile=group if row["homozygote"] == "female sterile" else frozenset(),
        )

    # what an insertion does ---------------------------------------------------------------------------------

    def traits(self, markers: Iterable[str], component: ComponentEntry | None) -> Traits:
        """Return what an insertion does.

        Args:
            markers: transformation markers as written inside the braces (`w[+mC]`, `y[+t7.7]`, `v[+t1.8]`,
                `w+`).
            component: its class. Where no marker is written it carries what such insertions carry by common
                practice, and mini-white where the class is unknown too.
        """
        written = tuple(markers) or (component.carries if component else USUAL_INSERTION_MARKER)
        restores = frozenset(gene for m in written if (gene := restored_gene(m)))
        signs = dict.fromkeys(s for m in written if (s := _fluorescence(m)))
        if component is not None and component.sign:
            signs[component.sign] = None
        if not restores and not signs:
            return PLAIN
        return Traits(dominant=tuple(signs), restores=restores, masks=self._markers.masks(signs))


def restored_gene(marker: str) -> str:
    """Return the gene of which a transformation marker brings a working copy: `w` for `w[+mC]`; empty for
    none."""
    match = _RESTORED.fullmatch(marker.strip())
    return match[1] if match else ""


def _fluorescence(marker: str) -> str:
    if not _FLUORESCENT_MARKER.search(marker):
        return ""
    return "red fluorescence" if _RED.search(marker) else "green fluorescence"


def _site(row: Row) -> SiteEntry:
    where = f"landing site {row['name']}"
    if row["arm"] not in CHROMOSOME_OF_ARM:
        raise InputError(f"{where}: '{row['arm']}' is not an arm", near_hint(row["arm"], CHROMOSOME_OF_ARM))
    return SiteEntry(
        name=row["name"],
        synonyms=parts(row["synonyms"]),
        arm=row["arm"],
        chromosome=CHROMOSOME_OF_ARM[row["arm"]],
        band=row["band"],
        map_cM=number(row["map_cM"], where),
        trouble=row["homozygous_trouble"],
        source=row["source"],
        kind=row["kind"],
        carries=parts(row["carries"]),
        note=row["note"],
    )


def _site_key(name: str) -> str:
    key = re.sub(r"[\s_-]", "", name).casefold()
    vk = _VK.fullmatch(key)
    return f"vk{int(vk[1]):05d}" if vk else key


def _element_key(name: str) -> str:
    return re.sub(r"[\W_]", "", name).casefold()
