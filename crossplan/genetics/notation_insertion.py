"""Transgenes: `P{y[+t7.7] w[+mC]=AD-K12}attP40` and its shorthand `AD-K12@attP40` as one element.

An insertion carries the transformation markers that are written in its braces; where none is written, those that
its kind carries by common practice (the catalogue says which). Those of the landing site stay beside them in either
case. What follows the braces is a landing site, the allele of a gene that was hit (`Plp[s2172]`), a polytene band
(`86E`), or a number that often but not always is the chromosome (common practice, no source).
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Final

from crossplan.genetics.catalogue import DIVISIONS, USUAL_INSERTION_MARKER, Catalogue, ComponentEntry, SiteEntry
from crossplan.genetics.chromosome import CHROMOSOME_OF_ARM
from crossplan.genetics.element import Element, Kind, Traits

TRANSPOSON = re.compile(r"(?P<letter>P\+PBac|PBac|P|Mi|M|H|TI)\{(?P<content>.*)\}(?P<place>[^{}=<>]*)", re.DOTALL)
#: older ways of writing the braces: `P[esc+]`, `PBac(y[+mDint2]=vas-Cas9)VK00027`
OLD_BRACKETS = re.compile(
    r"(?P<letter>PBac|P|Mi|M)(?:\[(?P<square>[^{}\[\]]*(?:\[[^\[\]]*\][^{}\[\]]*)*)\]"
    r"|\((?P<round>[^{}()]*(?:\([^()]*\)[^{}()]*)*)\))(?P<place>[^{}\[\]()]*)"
)
_NESTED = re.compile(r"(?:P\+PBac|PBac|P|Mi|M|H|TI)\{")
_GENE_HIT = re.compile(r"(?P<gene>[^\[\]{}]+?)\[[^\[\]]*\].*")
_BAND_NAME = re.compile(r"(?P<division>\d{2,3})(?P<letter>[A-F])\d{0,2}[a-z]?")
_NUMBER_NAME = re.compile(r"(?P<number>[1-4])(?:[A-Za-z]{0,2}|w-)")
_FRT = re.compile(r"(?:neo)?FRT(?:\(?w\[?hs\]?\)?|neo)?[-_ ]?(?P<name>G13|2A|9-2|18A|19A|40A?|42[BD]|79D?|80B?|82B?|101)",
                  re.IGNORECASE)  # fmt: skip
#: the construct of the FRT insertions; in braces their name stands behind: P{neoFRT}82B
_FRT_CONSTRUCT = re.compile(r"(?:neo)?FRT(?:\(w\[?hs\]?\))?", re.IGNORECASE)
#: arm and band of the FRT insertions that are in use (Xu & Rubin 1993, Development 117:1223; Chou & Perrimon 1996,
#: Genetics 144:1673; 2A and 79D from memory)
FRT_PLACES: Final = {
    "101": ("X", "14A"), "9-2": ("X", "18E"), "18A": ("X", "18A"), "19A": ("X", "19A"), "40": ("2L", "40A"),
    "40A": ("2L", "40A"), "G13": ("2R", "42B"), "42B": ("2R", "42B"), "42D": ("2R", "42D"), "2A": ("3L", "79D"),
    "79": ("3L", "79D"), "79D": ("3L", "79D"), "80": ("3L", "80B"), "80B": ("3L", "80B"), "82": ("3R", "82B"),
    "82B": ("3R", "82B"),
}  # fmt: skip
#: constructs that are an empty landing site
_EMPTY_SITE: Final = frozenset(("CaryP", "CaryIP", "y[+]-attP-3B", "y[+]-attP-9A", "y+-attP-3B", "y+-attP-9A"))


@dataclass(frozen=True, slots=True)
class Place:
    """Where an insertion sits: what its name says of the chromosome, and whether that is only a hint."""

    chromosome: str = ""
    cM: float | None = None
    because: str = ""
    hint_only: bool = False


@lru_cache(maxsize=8192)
def component_of(catalogue: Catalogue, name: str) -> ComponentEntry | None:
    """Return the class of a transgene by its short name; names recur all through a stock list."""
    return catalogue.component(name)


def markers_and_name(content: str) -> tuple[tuple[str, ...], str]:
    """Return the markers and the name of a construct: of `y[+t7.7] w[+mC]=AD-K12` the two and `AD-K12`."""
    depth = 0
    cut = -1
    for i, char in enumerate(content):
        if char in "[{(":
            depth += 1
        elif char in "]})":
            depth -= 1
        elif char == "=" and depth == 0:
            cut = i
    name = re.sub(r"\s+", "", content[cut + 1 :])
    before = content[:cut] if cut >= 0 else ""
    return tuple(before.replace(",", " ").split()), name


def is_nested(content: str) -> bool:
    """Return whether the braces hold nothing but another pair of braces."""
    return _NESTED.match(content) is not None


def is_several(content: str) -> bool:
    """Return whether a brace closes before the last one: `a}1 P{b` is the inside of two insertions run together."""
    depth = 0
    for char in content:
        depth += (char == "{") - (char == "}")
        if depth < 0:
            return True
    return False


def insertion(
    name: str, place: str, markers: Sequence[str], standard: str, catalogue: Catalogue
) -> tuple[Element, Place]:
    """Return the insertion of the construct `name` at `place`, and what its place says.

    Args:
        name: short name of the construct.
        place: what follows the braces or the @; may be empty.
        markers: transformation markers as written; empty where none is.
        standard: the standard notation as written, empty for shorthand.
        catalogue: for sites, component classes and the map.
    """
    site = catalogue.site(place) if place else None
    component = component_of(catalogue, name)
    where = _frt_place(place, catalogue) if _FRT_CONSTRUCT.fullmatch(name) else None
    where = where or place_of(place, site, catalogue)
    symbol = _short(name, site.name if site else place, standard)
    element = Element(
        symbol, Kind.INSERTION, "" if where.hint_only else where.chromosome, site=site.name if site else "",
        position_cM=where.cM, component=component.cls if component else "", standard=standard,
        traits=insertion_traits(name, markers, site, component, catalogue),
    )  # fmt: skip
    return element, where


def _short(name: str, place: str, standard: str) -> str:
    """Return the short symbol: `AD-K12@attP40`; a name that holds a divider keeps its braces."""
    if any(sign in name for sign in ";/,@ "):
        return f"{standard.partition('{')[0] or 'P'}{{{name}}}{place}"
    return f"{name}@{place}" if place else name


def insertion_traits(
    name: str,
    markers: Sequence[str],
    site: SiteEntry | None,
    component: ComponentEntry | None,
    catalogue: Catalogue,
) -> Traits:
    """Return what an insertion does: its markers, written or usual, and those of the landing site."""
    carried = tuple(markers)
    if not carried and not (site is not None and name in _EMPTY_SITE):
        carried = component.carries if component is not None else USUAL_INSERTION_MARKER
    of_site = site.carries if site is not None else ()
    if not carried and not of_site and component is None:
        return Traits()
    return _traits_of(catalogue, (*carried, *of_site), component)


@lru_cache(maxsize=1024)
def _traits_of(catalogue: Catalogue, markers: tuple[str, ...], component: ComponentEntry | None) -> Traits:
    return catalogue.insertion_traits(markers, component)


def empty_site(site: SiteEntry, catalogue: Catalogue) -> Element:
    """Return the landing site with nothing in it, as an element under the name of the site."""
    traits = catalogue.insertion_traits(site.carries, None) if site.carries else Traits()
    return Element(site.name, Kind.INSERTION, site.chromosome, site=site.name, position_cM=site.map_cM, traits=traits)


def place_of(place: str, site: SiteEntry | None, catalogue: Catalogue) -> Place:
    """Return what the name of an insertion says of its place."""
    if site is not None:
        return Place(site.chromosome, site.map_cM, f"the site {site.name}")
    hit = _GENE_HIT.fullmatch(place)
    if hit is not None:
        locus = catalogue.locus(hit["gene"])
        return Place(locus.chromosome, locus.cM, f"the gene {hit['gene']}") if locus else Place()
    band = _BAND_NAME.fullmatch(place)
    if band is not None:
        arm = next((a for a, (low, high) in DIVISIONS.items() if low <= int(band["division"]) <= high), "")
        if arm:
            return Place(CHROMOSOME_OF_ARM[arm], None, f"the band {place}", hint_only=True)
    number = _NUMBER_NAME.fullmatch(place)
    if number is not None:
        name = "X" if number["number"] == "1" else number["number"]
        return Place(name, None, f"the number {place} of the insertion", hint_only=True)
    return Place()


def frt(text: str, catalogue: Catalogue) -> tuple[Element, Place] | None:
    """Return the FRT insertion that the text names, such as FRT40A or neoFRT82B; None for anything else."""
    match = _FRT.fullmatch(text)
    if match is None:
        return None
    where = _frt_place(match["name"], catalogue)
    if where is None:
        return None
    component = component_of(catalogue, text)
    traits = catalogue.insertion_traits((), component) if component is not None else Traits()
    element = Element(text, Kind.INSERTION, where.chromosome, position_cM=where.cM, component=component.cls if component else "",
                      traits=traits)  # fmt: skip
    return element, where


def _frt_place(name: str, catalogue: Catalogue) -> Place | None:
    """Return where the FRT insertion of that name is, such as 82B; None for a name that is not in use."""
    found = FRT_PLACES.get(name.upper())
    if found is None:
        return None
    arm, band = found
    return Place(CHROMOSOME_OF_ARM[arm], catalogue.band_to_cM(arm, band), f"FRT{name} in {band}")
