"""The genetic catalogue: signs, markers, balancers, landing sites, component classes and the map.

The facts are the tables in `data/` (one CSV file each, see `data/SOURCES.md`); this module reads them, checks
that they fit together and answers questions about them. Every row says where it comes from (`source`) and how
good that is (`kind`: published, common practice, memory, derived; `lab` for a laboratory's own entries).

How a row becomes `Traits`:

* a dominant or semidominant marker shows its sign with one copy; a recessive one shows it where the gene has
  no working copy; a null of `w` has no sign of its own (the appearance rules know what a fly without pigment
  looks like);
* a marker whose homozygotes die is a recessive-lethal group: that of the gene where all its alleles are
  alike, else that of the allele; `semilethal` and `uncertain` are not lethal here, so that no class is
  wrongly taken for dead;
* a balancer has its own lethal group, and those of the dominant markers that it carries;
* an insertion brings back the gene that its transformation marker is (mini-white: `w`).
"""

from __future__ import annotations

import csv
import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from difflib import get_close_matches
from functools import cache
from importlib import resources
from types import MappingProxyType
from typing import Final

from crossplan.errors import InputError
from crossplan.genetics.chromosome import CHROMOSOME_OF_ARM
from crossplan.genetics.element import PLAIN, Cover, Traits

Row = Mapping[str, str]

#: the words that a column may hold
ALLOWED: Final[Mapping[str, frozenset[str]]] = {
    "stage": frozenset(("adult", "pupa", "larva", "fluorescence")),
    "ease": frozenset(("easy", "medium", "hard")),
    "dominance": frozenset(("dominant", "semidominant", "recessive")),
    "homozygote": frozenset(("viable", "lethal", "semilethal", "uncertain", "female sterile")),
    "hemizygous_male": frozenset(("", "viable", "lethal", "sterile")),
    "other_alleles": frozenset(("same", "unknown")),
    "chromosome": frozenset(("", "X", "Y", "2", "3", "4")),
    "class": frozenset(("AD", "DBD", "GAL4", "LexA", "QF", "effector", "reporter", "repressor", "helper")),
    "activation": frozenset(("none", "light", "heat")),
    "kind": frozenset(("published", "common practice", "memory", "derived", "lab")),
}
#: name of each table, and the columns that together name a row
KEYS: Final[Mapping[str, tuple[str, ...]]] = {
    "signs": ("sign",),
    "markers": ("gene", "allele"),
    "balancers": ("name", "chromosome"),
    "landing_sites": ("name",),
    "components": ("name",),
    "map": ("locus",),
    "bands": ("arm", "band"),
}
#: numbered divisions of the polytene map on each arm (Bridges 1935, J. Hered. 26:60)
DIVISIONS: Final[Mapping[str, tuple[int, int]]] = {
    "X": (1, 20),
    "2L": (21, 40),
    "2R": (41, 60),
    "3L": (61, 80),
    "3R": (81, 100),
    "4": (101, 102),
}
#: about how many bands a lettered subdivision has at most; only orders bands within a letter (our scale)
BANDS_IN_A_LETTER: Final = 15
#: what an insertion of a kind that the catalogue does not know is taken to carry (common practice, no source)
USUAL_INSERTION_MARKER: Final = ("w+",)
#: how like two names must be for a hint (our choice; `Cy0` must find `CyO`)
LIKENESS: Final = 0.66
SHORTEST_BALANCER_NAME: Final = 3

_SYMBOL = re.compile(r"(?P<gene>.+?)(?:\[(?P<allele>[^\[\]]*)\])?")
_BAND = re.compile(r"(?P<division>\d{1,3})(?:-?(?P<letter>[A-F])(?P<band>\d{1,2})?)?(?:[-;,].*)?", re.IGNORECASE)
#: chemoreceptors and odorant-binding proteins: their number is the division of the map, the small letter tells
#: genes of one division apart
_NAMED_BY_BAND = re.compile(r"(?:Or|Gr|Ir|Obp)(?P<division>\d{1,3})[a-z]")
NAMED_BY_BAND_SOURCE: Final = (
    "receptor genes are named by their band (Drosophila Odorant Receptor Nomenclature Committee 2000 Cell 102:145, "
    "from memory)"
)
_VK = re.compile(r"(?:attp)?vk0*(\d{1,5})")
_LETHAL_NAME = re.compile(r"l\([1-4]\)\S+")
_FLUORESCENT_MARKER = re.compile(r"(?i)3xP3|GFP|YFP|CFP|RFP|DsRed|tdTom|mCherry")
_RED = re.compile(r"(?i)RFP|DsRed|tdTom|mCherry")


@dataclass(frozen=True, slots=True)
class Sign:
    """One look that a person can see on a fly.

    Attributes:
        name: the departure from wild type, such as `curly wings`.
        opposite: how a fly without it looks, such as `straight wings`.
        part: part of the body.
        stage: adult, pupa, larva, or fluorescence (an adult under the fluorescence scope).
        ease: easy, medium or hard.
        unreliable_below_C: rearing temperature in degrees C below which the sign can be missing.
        hidden_by: signs that make this one unscorable on the same fly.
        source, kind: where it comes from.
    """

    name: str
    opposite: str
    part: str
    stage: str
    ease: str
    unreliable_below_C: float | None
    hidden_by: tuple[str, ...]
    source: str
    kind: str
    note: str = ""


@dataclass(frozen=True, slots=True)
class MarkerEntry:
    """An allele with a visible effect, or (allele empty) all mutant alleles of a gene.

    `map_cM` is the place on the genetic map in cM, None when unknown; `band` the place on the polytene map.
    `sign` is empty for a wild-type allele.
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
    source: str
    kind: str
    homozygote: str = "viable"
    hemizygous_male: str = ""
    other_alleles: str = "same"
    note: str = ""

    @property
    def symbol(self) -> str:
        """Gene and allele as the standard notation writes them, such as `Sb[1]`."""
        return f"{self.gene}[{self.allele}]" if self.allele else self.gene


@dataclass(frozen=True, slots=True)
class BalancerEntry:
    """A balancer, an inversion used as a partner of balancers, or an attached-X.

    Attributes:
        linked_to: chromosome that travels with this one (translocation balancers); `Catalogue.linked_part`
            has it.
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
    source: str
    kind: str
    dominant: tuple[str, ...] = ()
    recessive: tuple[str, ...] = ()
    covers_note: str = ""
    caution: str = ""


@dataclass(frozen=True, slots=True)
class SiteEntry:
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
    source: str
    kind: str
    carries: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class ComponentEntry:
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
    source: str
    kind: str
    sign: str = ""


@dataclass(frozen=True, slots=True)
class Locus:
    """A gene on the genetic map: chromosome, place in cM (None when unknown), band, and where that comes from."""

    gene: str
    chromosome: str
    cM: float | None
    source: str
    band: str = ""
    kind: str = ""


class Catalogue:
    """All tables, ready for questions. Made from rows of text, as the CSV files have them.

    Raises:
        InputError: a row names a sign or a marker that is not there, or holds a number that is none.
    """

    def __init__(self, tables: Mapping[str, Iterable[Row]]) -> None:
        rows = {name: [dict(r) for r in tables.get(name, ())] for name in KEYS}
        self.signs: Mapping[str, Sign] = MappingProxyType({r["sign"]: _sign(r) for r in rows["signs"]})
        self._check_hiding()
        self._markers: dict[tuple[str, str], MarkerEntry] = {}
        self._marker_synonyms: dict[str, MarkerEntry] = {}
        for row in rows["markers"]:
            self._add_marker(row)
        self._balancers: dict[str, BalancerEntry] = {}
        self._parts: dict[tuple[str, str], BalancerEntry] = {}
        for row in rows["balancers"]:
            self._add_balancer(row)
        self._sites: dict[str, SiteEntry] = {}
        for row in rows["landing_sites"]:
            self._add_site(_site(row))
        self._components = [(_pattern(r), self._component(r)) for r in rows["components"]]
        self._anchors = _anchors(rows["bands"])
        self._loci: dict[str, Locus] = {}
        for row in rows["map"]:
            self._add_locus(row)

    # signs ---

    def sign(self, name: str) -> Sign:
        """Return the sign `name`; KeyError when the catalogue has none such."""
        return self.signs[name]

    def _check_hiding(self) -> None:
        for sign in self.signs.values():
            for other in sign.hidden_by:
                self._known_sign(other, f"sign {sign.name}, hidden_by")

    def _known_sign(self, name: str, where: str) -> str:
        if name not in self.signs:
            raise InputError(f"{where}: there is no sign '{name}'", _near_hint(name, self.signs))
        return name

    def _masks(self, dominant: Iterable[str]) -> frozenset[str]:
        shown = set(dominant)
        return frozenset(s.name for s in self.signs.values() if shown.intersection(s.hidden_by))

    # markers -

    def marker(self, gene: str, allele: str = "") -> MarkerEntry | None:
        """Return the marker written as `gene` with `allele`, None when it is not in the catalogue.

        Case counts. A synonym (`If`) gives the entry under its full name (`Kr[If-1]`). An allele that has no
        row of its own is that of the gene, unless the alleles of the gene differ in dominance or fate. A
        wild-type allele (`+`) of a known gene does nothing.
        """
        found = self._markers.get((gene, allele))
        if found is not None:
            return found
        written = f"{gene}[{allele}]" if allele else gene
        synonym = self._marker_synonyms.get(written)
        if synonym is not None:
            return synonym
        if allele.startswith("+"):
            return self._wild_type(gene, allele)
        general = self._markers.get((gene, ""))
        if general is not None:
            return replace(general, allele=allele) if general.other_alleles == "same" else None
        return self._marker_synonyms.get(gene)

    def markers(self) -> tuple[MarkerEntry, ...]:
        """Return all markers in the order of the table."""
        return tuple(self._markers.values())

    def _wild_type(self, gene: str, allele: str) -> MarkerEntry | None:
        known = self._markers.get((gene, "")) or next((m for m in self._markers.values() if m.gene == gene), None)
        if known is None:
            return None
        return replace(
            known,
            allele=allele,
            synonyms=(),
            dominance="wild type",
            sign="",
            traits=PLAIN,
            homozygote="viable",
            hemizygous_male="",
        )

    def _add_marker(self, row: Row) -> None:
        entry = self._marker(row)
        self._markers[entry.gene, entry.allele] = entry
        for synonym in entry.synonyms:
            first = self._marker_synonyms.setdefault(synonym, entry)
            _refuse_twice(synonym, first.symbol, entry.symbol)

    def _marker(self, row: Row) -> MarkerEntry:
        where = f"marker {row['gene']}[{row['allele']}]"
        sign = self._known_sign(row["sign"], where) if row["sign"] else ""
        return MarkerEntry(
            gene=row["gene"],
            allele=row["allele"],
            synonyms=_split(row["synonyms"]),
            chromosome=row["chromosome"],
            map_cM=_number(row["map_cM"], where),
            band=row["band"],
            dominance=row["dominance"],
            sign=sign,
            traits=self._marker_traits(row),
            source=row["source"],
            kind=row["kind"],
            homozygote=row["homozygote"],
            hemizygous_male=row["hemizygous_male"],
            other_alleles=row["other_alleles"],
            note=row["note"],
        )

    def _marker_traits(self, row: Row) -> Traits:
        gene, sign, null = row["gene"], row["sign"], row["null_for"]
        group = frozenset((f"{gene}[{row['allele']}]" if row["allele"] else gene,))
        dominant = row["dominance"] in ("dominant", "semidominant") and bool(sign)
        lethal = row["homozygote"] == "lethal"
        return Traits(
            dominant=(sign,) if dominant else (),
            recessive=((gene, sign),) if row["dominance"] == "recessive" and sign and not null else (),
            null_for=frozenset(_split(null)),
            lethal=group if lethal else frozenset(),
            male_lethal=row["hemizygous_male"] == "lethal" and not lethal,
            female_sterile=group if "female sterile" in row["homozygote"] else frozenset(),
            male_sterile=group if row["hemizygous_male"] == "sterile" else frozenset(),
            masks=self._masks((sign,)) if dominant else frozenset(),
        )

    def _marker_of(self, symbol: str, where: str) -> MarkerEntry:
        match = _SYMBOL.fullmatch(symbol)
        gene, allele = (match["gene"], match["allele"] or "") if match else (symbol, "")
        found = self.marker(gene, allele)
        if found is None:
            known = sorted({m.gene for m in self._markers.values()} | set(self._marker_synonyms))
            raise InputError(f"{where}: there is no marker '{symbol}'", _near_hint(gene, known))
        return found

    # balancers ----------------------------------------------------------------------------------------------

    def balancer(self, name: str) -> BalancerEntry | None:
        """Return the balancer `name` (capitals, spaces and commas do not matter), None when it is not known.

        Of a translocation balancer this is the part on chromosome 2.
        """
        return self._balancers.get(_balancer_key(name))

    def linked_part(self, entry: BalancerEntry) -> BalancerEntry | None:
        """Return the part of a translocation balancer on the chromosome that `entry` is linked to."""
        return self._parts.get((entry.name, entry.linked_to)) if entry.linked_to else None

    def balancers(self) -> tuple[BalancerEntry, ...]:
        """Return all balancers in the order of the table, both parts of a translocation balancer."""
        return tuple(self._parts.values())

    def is_balancer_like(self, text: str) -> str | None:
        """Return the balancer whose name is closest to `text` (a likely typing error), None when none is
        close."""
        key = _balancer_key(text)
        if len(key) < SHORTEST_BALANCER_NAME:
            return None
        likely = [known for known in self._balancers if known[0] == key[0]]
        near = get_close_matches(key, likely, n=1, cutoff=LIKENESS)
        return self._balancers[near[0]].name if near else None

    def _add_balancer(self, row: Row) -> None:
        entry = self._balancer(row)
        self._parts[entry.name, entry.chromosome] = entry
        for name in (entry.name, *entry.synonyms):
            first = self._balancers.setdefault(_balancer_key(name), entry)
            _refuse_twice(name, first.name, entry.name)

    def _balancer(self, row: Row) -> BalancerEntry:
        where = f"balancer {row['name']}"
        assumed = [self._marker_of(s, f"{where}, assumed") for s in _split(row["assumed"])]
        traits = self._balancer_traits(row, where)
        return BalancerEntry(
            name=row["name"],
            synonyms=_split(row["synonyms"]),
            chromosome=row["chromosome"],
            linked_to=row["linked_to"],
            assumed=tuple(m.symbol for m in assumed),
            assumed_reason=row["assumed_reason"],
            traits=traits,
            traits_assumed=self._with_markers(traits, assumed),
            leaks=row["leaks"],
            source=row["source"],
            kind=row["kind"],
            dominant=_split(row["dominant"]),
            recessive=_split(row["recessive"]),
            covers_note=row["covers_note"],
            caution=row["caution"],
        )

    def _balancer_traits(self, row: Row, where: str) -> Traits:
        always = [self._marker_of(s, f"{where}, dominant") for s in _split(row["dominant"])]
        hidden = [self._marker_of(s, f"{where}, recessive") for s in _split(row["recessive"])]
        bare = Traits(
            recessive=tuple(pair for m in hidden for pair in m.traits.recessive),
            null_for=frozenset[str]().union(*(m.traits.null_for for m in hidden)),
            restores=frozenset(_split(row["restores"])),
            lethal=frozenset(_split(row["lethal_groups"])),
            male_lethal=_yes(row["male_lethal"], where),
            female_sterile=frozenset(_split(row["female_sterile"])),
            male_sterile=frozenset(_split(row["male_sterile"])),
            cover=tuple(_cover(part, where) for part in _split(row["cover"])),
            compound=_yes(row["compound"], where),
            linked_to=row["linked_to"],
        )
        return self._with_markers(bare, always)

    def _with_markers(self, traits: Traits, markers: Iterable[MarkerEntry]) -> Traits:
        chosen = list(markers)
        dominant = dict.fromkeys((*traits.dominant, *(s for m in chosen for s in m.traits.dominant)))
        return replace(
            traits,
            dominant=tuple(dominant),
            lethal=traits.lethal.union(*(m.traits.lethal for m in chosen)),
            masks=self._masks(dominant),
        )

    # landing sites ------------------------------------------------------------------------------------------

    def site(self, name: str) -> SiteEntry | None:
        """Return the landing site `name` (capitals, spaces and hyphens do not matter), None when it is not
        known."""
        return self._sites.get(_site_key(name))

    def sites(self) -> tuple[SiteEntry, ...]:
        """Return all landing sites in the order of the table."""
        return tuple(dict.fromkeys(self._sites.values()))

    def _add_site(self, site: SiteEntry) -> None:
        for name in (site.name, *site.synonyms):
            _refuse_twice(name, self._sites.setdefault(_site_key(name), site).name, site.name)

    def near_sites(self, name: str) -> tuple[str, ...]:
        """Return up to three names of landing sites that are spelt almost like `name`, the closest first."""
        near = get_close_matches(_site_key(name), self._sites, n=6, cutoff=LIKENESS)
        return tuple(dict.fromkeys(self._sites[key].name for key in near))[:3]

    # components ---------------------------------------------------------------------------------------------

    def component(self, name: str) -> ComponentEntry | None:
        """Return the class of the transgene with the short name `name`; the first pattern of the table that
        fits."""
        return next((entry for pattern, entry in self._components if pattern.search(name)), None)

    def components(self) -> tuple[ComponentEntry, ...]:
        """Return all component classes in the order of the table, which is the order in which they are
        tried."""
        return tuple(entry for _, entry in self._components)

    def _component(self, row: Row) -> ComponentEntry:
        where = f"component {row['name']}"
        return ComponentEntry(
            name=row["name"],
            cls=row["class"],
            pattern=row["pattern"],
            activation=row["activation"],
            needs_retinal=_yes(row["needs_retinal"], where),
            needs_dark=_yes(row["needs_dark"], where),
            rear_max_C=_number(row["rear_max_C"], where),
            rear_min_C=_number(row["rear_min_C"], where),
            test_C=_number(row["test_C"], where),
            carries=_split(row["carries"]),
            control_role=row["control_role"],
            caution=row["caution"],
            source=row["source"],
            kind=row["kind"],
            sign=self._known_sign(row["sign"], where) if row["sign"] else "",
        )

    def insertion_traits(self, markers: Iterable[str], component: ComponentEntry | None) -> Traits:
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
        return Traits(dominant=tuple(signs), restores=restores, masks=self._masks(signs))

    # the map -

    def locus(self, gene: str) -> Locus | None:
        """Return where `gene` (symbol or synonym; case counts) lies, None when the catalogue does not know.

        Genes that are named by their band, as `Or47b` is, are placed by that band.
        """
        found = self._loci.get(gene) or self._named_by_band(gene)
        if found is not None:
            return found
        marker = self.marker(gene) or next((m for m in self._markers.values() if m.gene == gene), None)
        if marker is None or marker.map_cM is None or not marker.chromosome:
            return None
        return Locus(gene, marker.chromosome, marker.map_cM, marker.source, marker.band, marker.kind)

    def genes(self) -> tuple[str, ...]:
        """Return every gene whose chromosome the catalogue knows."""
        return tuple(dict.fromkeys((*self._loci, *(m.gene for m in self._markers.values() if m.chromosome))))

    def _add_locus(self, row: Row) -> None:
        locus = _locus(row)
        if locus.cM is None and locus.band:
            locus = self._placed_by_band(locus)
        for name in (locus.gene, *_split(row["synonyms"])):
            _refuse_twice(name, self._loci.setdefault(name, locus).gene, locus.gene)

    def _placed_by_band(self, locus: Locus) -> Locus:
        arm = arm_of_band(locus.band)
        if CHROMOSOME_OF_ARM.get(arm) != locus.chromosome:
            message = f"locus {locus.gene}: {locus.band} is not a band of chromosome {locus.chromosome}"
            raise InputError(message, "see the band or the chromosome")
        source = f"{locus.source}; place in cM worked out from the band {locus.band}"
        return replace(locus, cM=self.band_to_cM(arm, locus.band), source=source)

    def _named_by_band(self, gene: str) -> Locus | None:
        match = _NAMED_BY_BAND.fullmatch(gene)
        arm = arm_of_band(match["division"]) if match else ""
        if match is None or not arm:
            return None
        named = Locus(gene, CHROMOSOME_OF_ARM[arm], None, NAMED_BY_BAND_SOURCE, match["division"], "derived")
        return self._placed_by_band(named)

    def band_to_cM(self, arm: str, band: str) -> float | None:
        """Return the place of a polytene band such as `68A4` in cM, None when it is not a band of `arm`.

        Linear between anchors of known band and map place (`bands.csv`): good to about 3 cM in mid-arm, and
        no guide to order within 1 cM.
        """
        anchors = self._anchors.get("X" if arm == "1" else arm)
        place = _band_place(arm, band)
        if not anchors or place is None:
            return None
        below = [a for a in anchors if a[0] <= place]
        above = [a for a in anchors if a[0] >= place]
        if not below or not above:
            return (anchors[0] if not below else anchors[-1])[1]
        (p, a), (q, b) = below[-1], above[0]
        return round(a if p == q else a + (b - a) * (place - p) / (q - p), 1)

    # names and sources --------------------------------------------------------------------------------------

    def lethal_by_name(self, gene: str) -> bool:
        """Return whether the name itself says recessive lethal: `l(2)gl`, `l(3)c08`."""
        return _LETHAL_NAME.fullmatch(gene) is not None

    def provenance(self, symbol: str) -> str:
        """Return where the facts about a balancer, marker, landing site, component or sign come from; else
        empty."""
        match = _SYMBOL.fullmatch(symbol)
        found = (
            self.balancer(symbol)
            or (self.marker(match["gene"], match["allele"] or "") if match else None)
            or self.site(symbol)
            or self.signs.get(symbol)
            or self.component(symbol)
        )
        return f"{found.source} ({found.kind})" if found else ""


def restored_gene(marker: str) -> str:
    """Return the gene of which a transformation marker brings a working copy: `w` for `w[+mC]`; empty for
    none."""
    match = re.fullmatch(r"([A-Za-z][A-Za-z0-9()-]*?)(?:\[\+[^\]]*\]|\+[^\[\]\s]*)", marker.strip())
    return match[1] if match else ""


def _fluorescence(marker: str) -> str:
    if not _FLUORESCENT_MARKER.search(marker):
        return ""
    return "red fluorescence" if _RED.search(marker) else "green fluorescence"


def _refuse_twice(name: str, first: str, second: str) -> None:
    if first != second:
        raise InputError(f"'{name}' is a name of both {first} and {second}", "give one of them another synonym")


def _near_hint(name: str, known: Iterable[str]) -> str:
    near = get_close_matches(name, list(known), n=3, cutoff=LIKENESS)
    return f"names close to it: {', '.join(near)}" if near else "add it to the lab's catalogue file first"


def _split(text: str) -> tuple[str, ...]:
    """Return the parts of a list in one cell, separated by semicolons that stand outside round brackets."""
    return tuple(p.strip() for p in re.split(r";(?![^()]*\))", text) if p.strip())


def _number(text: str, where: str) -> float | None:
    if not text:
        return None
    try:
        return float(text)
    except ValueError:
        raise InputError(f"{where}: '{text}' is not a number", "write it with a point, such as 12.5") from None


def _yes(text: str, where: str) -> bool:
    if text.lower() not in ("", "no", "yes"):
        raise InputError(f"{where}: '{text}' is neither yes nor no", "write yes or no")
    return text.lower() == "yes"


def _cover(text: str, where: str) -> Cover:
    match = re.fullmatch(r"(\d+(?:\.\d+)?)\s*-\s*(\d+(?:\.\d+)?)", text)
    if match is None or float(match[1]) >= float(match[2]):
        raise InputError(f"{where}: '{text}' is not a stretch in cM", "write start-end, such as 5.1-98.9")
    return Cover(float(match[1]), float(match[2]))


def _pattern(row: Row) -> re.Pattern[str]:
    try:
        return re.compile(row["pattern"])
    except re.error as error:
        raise InputError(
            f"component {row['name']}: '{row['pattern']}' is not a regular expression ({error})",
            "write the name itself, such as ^UAS-mine",
        ) from None


def _sign(row: Row) -> Sign:
    return Sign(
        name=row["sign"],
        opposite=row["opposite"],
        part=row["part"],
        stage=row["stage"],
        ease=row["ease"],
        unreliable_below_C=_number(row["unreliable_below_C"], f"sign {row['sign']}"),
        hidden_by=_split(row["hidden_by"]),
        source=row["source"],
        kind=row["kind"],
        note=row["note"],
    )


def _site(row: Row) -> SiteEntry:
    where = f"landing site {row['name']}"
    if row["arm"] not in CHROMOSOME_OF_ARM:
        raise InputError(f"{where}: '{row['arm']}' is not an arm", "write X, 2L, 2R, 3L, 3R or 4")
    return SiteEntry(
        name=row["name"],
        synonyms=_split(row["synonyms"]),
        arm=row["arm"],
        chromosome=CHROMOSOME_OF_ARM[row["arm"]],
        band=row["band"],
        map_cM=_number(row["map_cM"], where),
        trouble=row["homozygous_trouble"],
        source=row["source"],
        kind=row["kind"],
        carries=_split(row["carries"]),
    )


def _locus(row: Row) -> Locus:
    cM = _number(row["cM"], f"locus {row['locus']}")
    return Locus(row["locus"], row["chromosome"], cM, row["source"], row["band"], row["kind"])


def _anchors(rows: Iterable[Row]) -> dict[str, list[tuple[float, float]]]:
    found: dict[str, list[tuple[float, float]]] = {}
    for row in rows:
        place = _band_place(row["arm"], row["band"])
        cM = _number(row["cM"], f"band {row['band']}")
        if place is None or cM is None:
            raise InputError(f"band {row['arm']} {row['band']}: not a band with a place in cM", "see bands.csv")
        found.setdefault(row["arm"], []).append((place, cM))
    return {arm: sorted(anchors) for arm, anchors in found.items()}


def arm_of_band(band: str) -> str:
    """Return the arm of a polytene band such as `68A4`, empty when there is no such division."""
    match = _BAND.fullmatch(band.strip())
    division = int(match["division"]) if match else 0
    return next((arm for arm, (low, high) in DIVISIONS.items() if low <= division <= high), "")


def _band_place(arm: str, band: str) -> float | None:
    """Return a number that grows along the arm: division, letter, band; a letter alone is its middle."""
    match = _BAND.fullmatch(band.strip())
    limits = DIVISIONS.get("X" if arm == "1" else arm)
    if match is None or limits is None:
        return None
    division = int(match["division"])
    if not limits[0] <= division <= limits[1]:
        return None
    if match["letter"] is None:
        return division * 6 + 3.0
    letter = ord(match["letter"].upper()) - ord("A")
    if match["band"] is None:
        return division * 6 + letter + 0.5
    return division * 6 + letter + min(int(match["band"]), BANDS_IN_A_LETTER) / (BANDS_IN_A_LETTER + 1)


def _balancer_key(name: str) -> str:
    return re.sub(r"[\s,_']", "", name).casefold()


def _site_key(name: str) -> str:
    key = re.sub(r"[\s_-]", "", name).casefold()
    vk = _VK.fullmatch(key)
    return f"vk{int(vk[1]):05d}" if vk else key


def read_tables() -> dict[str, list[dict[str, str]]]:
    """Return the rows of all tables that come with the program, as text."""
    folder = resources.files("crossplan.genetics") / "data"
    tables = {}
    for name in KEYS:
        text = (folder / f"{name}.csv").read_text(encoding="utf-8")
        tables[name] = list(csv.DictReader(text.splitlines()))
    return tables


@cache
def default_catalogue() -> Catalogue:
    """Return the catalogue that comes with the program, read once."""
    return Catalogue(read_tables())
