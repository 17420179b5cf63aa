"""The yearly check: what the flies of every stock must look like, and what else to test.

Balancers break down, markers are lost, insertions go unseen: a stock list is right only as long as somebody looks. Once a
year is common practice (no source).
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.element import Kind
from crossplan.genetics.fly import Fly
from crossplan.genetics.survival import lethal_groups
from crossplan.stocks.finding import opposites
from crossplan.stocks.shelf import Shelf, Stock


@dataclass(frozen=True, slots=True)
class Check:
    """What to look for in one stock.

    Attributes:
        stock: the stock.
        must_show: signs that every fly must show, in words; `wild type` when there are none.
        may_show: signs that only some of its flies show.
        tests: what looking alone does not tell.
    """

    stock: Stock
    must_show: tuple[str, ...]
    may_show: tuple[str, ...]
    tests: tuple[str, ...]


def yearly_checks(shelf: Shelf, catalogue: Catalogue, means: Means | None = None) -> tuple[Check, ...]:
    """Return the check of every stock in use that was understood, in the order of the list.

    Args:
        shelf: the stocks.
        catalogue: facts about signs and transgenes.
        means: what the lab can see; a dissecting scope and pupae by default.
    """
    observer = Observer(catalogue, means or Means(pupae=True))
    checks = []
    for stock in shelf.usable():
        flies = [f for f in (stock.reading.female, stock.reading.male) if f is not None]
        if flies:
            checks.append(_check(stock, flies, observer))
    return tuple(checks)


def _check(stock: Stock, flies: list[Fly], observer: Observer) -> Check:
    kinds = [observer.signs(kind) for fly in flies for kind in (fly, *viable_homozygotes(fly))]
    always = frozenset.intersection(*kinds)
    sometimes = frozenset[str]().union(*kinds) - always
    return Check(stock, tuple(sorted(always)), tuple(sorted(sometimes)), tuple(dict.fromkeys(_tests(flies[0]))))


def viable_homozygotes(fly: Fly) -> Iterator[Fly]:
    """Yield the flies of a stock that are homozygous for one homologue of one pair, where such flies live."""
    for i, (one, other) in enumerate(fly.pairs):
        if one == other or one.is_y or other.is_y or one.is_compound or other.is_compound:
            continue
        for homologue in (one, other):
            if not lethal_groups(homologue):
                pairs = tuple((homologue, homologue) if k == i else p for k, p in enumerate(fly.pairs))
                yield Fly(fly.sex, (pairs[0], pairs[1], pairs[2], pairs[3]))


def _tests(fly: Fly) -> Iterator[str]:
    elements = list(dict.fromkeys(fly.elements()))
    halves = {e.component for e in elements} & {"AD", "DBD"}
    if halves == {"AD", "DBD"}:
        yield "cross to a GFP reporter and look at the pattern: a line with one half looks normal"
    for half in sorted(halves) if len(halves) == 1 else ():
        yield f"cross to a known {'DBD' if half == 'AD' else 'AD'} half with a GFP reporter"
    for _, carrier, opposite in opposites(fly):
        if opposite.balancer is not None and carrier.balancer is None:
            if lethal_groups(carrier):
                yield f"no flies without {opposite.balancer.symbol}: if there are, {' '.join(carrier.symbols)} is lost"
            elif carrier.elements:
                yield f"note the share of flies without {opposite.balancer.symbol}"
    for element in elements:
        if "tubby pupae" in element.traits.dominant:
            yield "look at pupae for Tb: it is lost without notice"
        if element.symbol.startswith("FM7") and element.traits.female_sterile:
            yield "homozygous FM7 females must be sterile; many copies have lost the singed allele"
        if element.component in ("effector", "repressor") and element.kind is Kind.INSERTION:
            yield f"test that {element.symbol.partition('@')[0]} works: cross to a driver whose effect is known"


def check_words(signs: Iterable[str]) -> str:
    """Return signs in words; wild type when there are none."""
    return ", ".join(signs) or "wild type"
