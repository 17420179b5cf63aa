"""Helper stocks that a shelf lacks: balancers of each chromosome and sign, wild types, empty drivers for controls.

Which helpers a lab needs is common practice (no source): for each large chromosome a balancer over a homologue that is
told from it, for both autosomes at once a stock with all four told apart, two signs to choose from on chromosome 3 where
the driver or effector may be on it too, a wild type with red eyes and one with white, and for every landing site at which
half-drivers are used an empty half there.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass

from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.element import Kind
from crossplan.genetics.fly import Fly
from crossplan.schemes.controls import empty_parts
from crossplan.schemes.forms import Source
from crossplan.schemes.target import Carried


@dataclass(frozen=True, slots=True)
class Lacking:
    """A helper stock that the shelf lacks: what it is, a genotype that would do, and what it is for."""

    what: str
    example: str
    why: str


def lacking_helpers(
    sources: Sequence[Source], shelf: Mapping[str, Carried], wanted: Iterable[str], catalogue: Catalogue
) -> tuple[Lacking, ...]:
    """Return the helper stocks that are not there.

    Args:
        sources: the stocks.
        shelf: the elements of the stock list.
        wanted: symbols of elements that targets ask for.
        catalogue: facts about signs.
    """
    observer = Observer(catalogue, Means())
    flies = [f for s in sources if (f := s.female or s.male) is not None]
    helpers = [f for f in flies if all(e.kind is not Kind.INSERTION for e in f.elements())]
    return (*_balancers(helpers, observer), *_wild_types(helpers, observer), *_empty(shelf, wanted))


def _balancers(helpers: Sequence[Fly], observer: Observer) -> Iterator[Lacking]:
    signs = {c: _balancer_signs(helpers, c, observer) for c in ("X", "2", "3")}
    if not signs["X"]:
        yield Lacking("a balancer of the X", "FM7c/w[1118]", "keeps and follows an insertion or lethal on the X")
    if not signs["2"]:
        yield Lacking("a marked balancer of chromosome 2", "w[1118]; Sco/CyO", "follows whatever is on chromosome 2")
    if not signs["3"]:
        yield Lacking(
            "a marked balancer of chromosome 3", "w[1118];; TM3, Sb/TM6B, Tb", "follows whatever is on chromosome 3"
        )
    elif len(signs["3"]) < 2:
        yield Lacking(f"a balancer of chromosome 3 with another sign than {', '.join(sorted(signs['3']))}",
                      "w[1118];; TM3, Sb/TM6B, Tb", "two homologues of chromosome 3 can then be told apart")  # fmt: skip
    if not any(_told(f, "2", observer) and _told(f, "3", observer) for f in helpers):
        yield Lacking("a stock with marked balancers of chromosomes 2 and 3", "w[1118]; Sco/CyO; TM3, Sb/TM6B, Tb",
                      "brings an element on 2 and one on 3 together in two generations")  # fmt: skip


def _balancer_signs(helpers: Iterable[Fly], chromosome: str, observer: Observer) -> frozenset[str]:
    """Return the adult signs by which the balancers of a chromosome are seen."""
    found: set[str] = set()
    for fly in helpers:
        for homologue in fly.pair(chromosome):
            if homologue.balancer is not None and not homologue.is_compound:
                found.update(s for e in homologue.elements for s in e.traits.dominant)
    return frozenset(
        s for s in found if s in observer.catalogue.signs and observer.means.uses(observer.catalogue.signs[s])
    )


def _told(fly: Fly, chromosome: str, observer: Observer) -> bool:
    """Return whether both homologues show a sign of their own, and one is a balancer."""
    one, other = fly.pair(chromosome)
    if one.balancer is None and other.balancer is None:
        return False
    signs = [{s for e in h.elements for s in e.traits.dominant} for h in (one, other)]
    return bool(signs[0] - signs[1]) and bool(signs[1] - signs[0])


def _wild_types(helpers: Sequence[Fly], observer: Observer) -> Iterator[Lacking]:
    plain = [f for f in helpers if all(e.kind is Kind.Y or e.chromosome == "X" for e in f.elements())]
    if not any(not list(f.elements()) or all(e.kind is Kind.Y for e in f.elements()) for f in plain):
        yield Lacking(
            "a wild type with red eyes", "Canton-S", "control for behaviour, and a w[+] X for flies that must see"
        )
    white = [f for f in plain if observer.signs(f) == {"white eyes"} and all(a == b or b.is_y for a, b in f.pairs)]
    if not white:
        yield Lacking("a white-eyed strain", "w[1118]", "control for insertions marked with mini-white")


def _empty(shelf: Mapping[str, Carried], wanted: Iterable[str]) -> Iterator[Lacking]:
    """Empty half-drivers at the sites of the wanted halves, and an empty driver where whole drivers are wanted."""
    there = empty_parts(shelf, ())
    needed: dict[tuple[str, str], int] = {}
    for symbol in wanted:
        carried = shelf.get(symbol)
        if carried is not None and carried.element.component in ("AD", "DBD"):
            key = (carried.element.component, carried.element.site)
            needed[key] = needed.get(key, 0) + 1
    for (cls, site), number in sorted(needed.items()):
        if (cls, site) not in there:
            place = f" at {site}" if site else ""
            yield Lacking(f"an empty {cls} half{place}", f"{cls}-empty{'@' + site if site else ''}",
                          f"control for {number} wanted half-driver{'s' if number > 1 else ''}{place}")  # fmt: skip
