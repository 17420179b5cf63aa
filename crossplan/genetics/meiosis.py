"""Which gametes a fly makes.

Rules, each once:

* A male's homologues never recombine: his gametes carry whole parental chromosomes (Morgan 1912, Science 36:718;
  Morgan & Bridges 1916, Carnegie Publ. 237, p. 7).
* Chromosome 4 does not recombine in ordinary females (Comeron et al. 2012, PLoS Genet. 8:e1002905, no exchange seen).
* In a female two homologues recombine by map distance unless one of them is a balancer. Where a balancer leaves
  the tip of an arm uncovered, an element there can leave its homologue: `leaks` says which and how often at most.
* X and Y do not recombine. An attached-X is one homologue and moves as one.
* Elements at one place (same landing site, same gene, same map position) are alleles: never on one gamete together.
* An element whose place nobody knows has no map distance to anything: it is taken to stay on its homologue as written,
  with the nearest element whose place is known (a stated assumption; `unplaced` lists such elements, so that plans
  carry the caution).

Shares are `Fraction` as long as no map distance enters, `float` otherwise.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from functools import cache
from typing import Literal

from crossplan.genetics.chromosome import FEMALE
from crossplan.genetics.element import Element
from crossplan.genetics.fly import Homologue, Pair

Share = Fraction | float
MapFunction = Literal["haldane", "kosambi"]

HALF = Fraction(1, 2)


@dataclass(frozen=True, slots=True)
class Gamete:
    """A homologue and the share of the parent's gametes (of this chromosome) that carry it."""

    homologue: Homologue
    share: Share


@dataclass(frozen=True, slots=True)
class Leak:
    """An element that its balancer does not hold: `rate` is the largest share of gametes in which it may have moved."""

    element: str
    balancer: str
    rate: float


def haldane(distance_cM: float) -> float:
    """Return the recombination fraction over `distance_cM`, no interference (Haldane 1919, J. Genet. 8:299)."""
    return (1.0 - math.exp(-2.0 * distance_cM / 100.0)) / 2.0


def kosambi(distance_cM: float) -> float:
    """Return the recombination fraction over `distance_cM` with Kosambi's interference (1944, Ann. Eugen. 12:172)."""
    return math.tanh(2.0 * distance_cM / 100.0) / 2.0


MAP_FUNCTIONS: dict[MapFunction, Callable[[float], float]] = {"haldane": haldane, "kosambi": kosambi}


@dataclass(frozen=True, slots=True)
class _Locus:
    """One place at which the two homologues differ: what each of them carries there."""

    position_cM: float | None
    first: tuple[Element, ...]
    second: tuple[Element, ...]


def _place(element: Element) -> object:
    """Return what makes two elements allelic: the landing site, the map position, the gene, else the symbol."""
    if element.site:
        return ("site", element.site)
    if element.gene:
        return ("gene", element.gene)
    if element.position_cM is not None:
        return ("cM", element.position_cM)
    return ("symbol", element.symbol)


def differing_loci(pair: Pair) -> tuple[_Locus, ...]:
    """Return the places at which the two homologues differ, in map order, those of unknown place last."""
    first, second = pair
    only_first = [e for e in first.elements if e not in second.elements]
    only_second = [e for e in second.elements if e not in first.elements]
    places: dict[object, tuple[list[Element], list[Element]]] = {}
    for side, elements in enumerate((only_first, only_second)):
        for element in elements:
            places.setdefault(_place(element), ([], []))[side].append(element)
    loci = [_Locus((here[0] or here[1])[0].position_cM, tuple(here[0]), tuple(here[1])) for here in places.values()]
    loci.sort(key=lambda locus: (locus.position_cM is None, locus.position_cM or 0.0))
    return tuple(_merge_same_position(loci))


def _merge_same_position(loci: list[_Locus]) -> list[_Locus]:
    merged: list[_Locus] = []
    for locus in loci:
        last = merged[-1] if merged else None
        if last is not None and locus.position_cM is not None and last.position_cM == locus.position_cM:
            merged[-1] = _Locus(last.position_cM, last.first + locus.first, last.second + locus.second)
        else:
            merged.append(locus)
    return merged


def recombines(pair: Pair, chromosome: str, sex: str) -> bool:
    """Return whether a parent of `sex` makes recombinant gametes of this pair."""
    first, second = pair
    if sex != FEMALE or chromosome == "4" or first == second:
        return False
    if any(h.balancer is not None or h.is_y or h.is_compound for h in pair):
        return False
    return sum(locus.position_cM is not None for locus in differing_loci(pair)) > 1


@cache
def gametes(pair: Pair, chromosome: str, sex: str, map_function: MapFunction = "haldane") -> tuple[Gamete, ...]:
    """Return the gametes of one chromosome pair with their shares, which sum to 1.

    Args:
        pair: the two homologues.
        chromosome: X, 2, 3 or 4.
        sex: of the parent, "female" or "male".
        map_function: how map distance becomes a recombination fraction.
    """
    first, second = pair
    if first == second:
        return (Gamete(first, Fraction(1)),)
    if not recombines(pair, chromosome, sex):
        return (Gamete(first, HALF), Gamete(second, HALF))
    return _recombinant_gametes(pair, MAP_FUNCTIONS[map_function])


def _recombinant_gametes(pair: Pair, to_fraction: Callable[[float], float]) -> tuple[Gamete, ...]:
    loci = _placed(differing_loci(pair))
    shared = [e for e in pair[0].elements if e in pair[1].elements]
    fractions = [_between(a, b, to_fraction) for a, b in zip(loci, loci[1:], strict=False)]
    # walk along the chromosome: for each locus, the gametes so far that end on the first or the second homologue
    paths: list[tuple[int, tuple[Element, ...], Share]] = [(0, loci[0].first, HALF), (1, loci[0].second, HALF)]
    for locus, r in zip(loci[1:], fractions, strict=True):
        step: list[tuple[int, tuple[Element, ...], Share]] = []
        for side, carried, share in paths:
            for to in (0, 1):
                factor: Share = 1 - r if to == side else r
                step.append((to, carried + (locus.second if to else locus.first), share * factor))
        paths = step
    found: dict[Homologue, Share] = {}
    for _, carried, share in paths:
        homologue = Homologue.of(*shared, *carried)
        found[homologue] = found.get(homologue, Fraction(0)) + share
    ordered = sorted(found.items(), key=lambda item: item[0].sort_key)
    return tuple(Gamete(homologue, share) for homologue, share in ordered if share)


def _placed(loci: tuple[_Locus, ...]) -> tuple[_Locus, ...]:
    """Return the loci of known place; what has none goes with the first of them."""
    known = [locus for locus in loci if locus.position_cM is not None]
    lost = [locus for locus in loci if locus.position_cM is None]
    first = known[0]
    with_lost = _Locus(
        first.position_cM,
        first.first + tuple(e for locus in lost for e in locus.first),
        first.second + tuple(e for locus in lost for e in locus.second),
    )
    return (with_lost, *known[1:])


def _between(a: _Locus, b: _Locus, to_fraction: Callable[[float], float]) -> Share:
    assert a.position_cM is not None
    assert b.position_cM is not None
    return to_fraction(abs(b.position_cM - a.position_cM))


def unplaced(pair: Pair, chromosome: str, sex: str) -> tuple[str, ...]:
    """Return the symbols of elements of unknown place that might recombine here, were their place known."""
    if sex != FEMALE or chromosome == "4" or any(h.balancer is not None or h.is_y or h.is_compound for h in pair):
        return ()
    loci = differing_loci(pair)
    if len(loci) < 2:
        return ()
    return tuple(e.symbol for locus in loci if locus.position_cM is None for e in locus.first + locus.second)


def leaks(pair: Pair, chromosome: str, sex: str) -> tuple[Leak, ...]:
    """Return the elements of a balanced pair that lie outside the balancer's cover, with their largest rate of escape.

    The rate is Haldane's fraction over the distance to the nearest covered stretch; exchange is rarer still close to a
    breakpoint (Miller et al. 2016, G3 6:1959), so this is an upper bound.
    """
    if sex != FEMALE or chromosome == "4":
        return ()
    found: list[Leak] = []
    for one, other in (pair, pair[::-1]):
        if one.balancer is None or other.balancer is not None or not one.balancer.traits.cover:
            continue
        for element in other.elements:
            distance = _distance_to_cover(element, one.balancer)
            if distance:
                found.append(Leak(element.symbol, one.balancer.symbol, haldane(distance)))
    return tuple(found)


def _distance_to_cover(element: Element, balancer: Element) -> float:
    place = element.position_cM
    if place is None:
        return 0.0
    return min(max(c.start - place, place - c.end, 0.0) for c in balancer.traits.cover)
