"""Rules about insertions: sites, what can be told by eye, and names that may be one thing."""

from __future__ import annotations

from collections.abc import Iterator

from crossplan.errors import Severity
from crossplan.genetics.appearance import WHITE
from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.element import Element, Kind
from crossplan.genetics.fly import Fly
from crossplan.stocks.finding import Finding, View, found_among, found_in, listed, number_of, opposites
from crossplan.stocks.near_names import near_pairs
from crossplan.stocks.shelf import Stock


def check_facing_insertions(view: View) -> Iterator[Finding]:
    """Two different insertions that face each other at one site."""
    for stock, fly in view.flies:
        for one, other in fly.pairs:
            here = {e.site: e.symbol for e in one.elements if e.site}
            for element in other.elements:
                if element.site in here and here[element.site] != element.symbol:
                    yield found_in(
                        stock, "same-site", Severity.WARNING,
                        f"{here[element.site]} and {element.symbol} face each other at {element.site}: they can never be"
                        " on one homologue and may act on each other",
                        "move one of them to another site before combining them",
                    )  # fmt: skip


def check_shared_site(view: View) -> Iterator[Finding]:
    """An effector at the site of half-drivers: the three parts of such a pair cannot be in one fly twice over."""
    halves: set[str] = set()
    effectors: list[tuple[Stock, Element]] = []
    for stock, fly in view.flies:
        for element in dict.fromkeys(fly.elements()):
            if element.site and element.component in ("AD", "DBD"):
                halves.add(element.site)
            elif element.site and element.component in ("effector", "reporter"):
                effectors.append((stock, element))
    by_site: dict[str, list[tuple[Stock, Element]]] = {}
    for stock, element in effectors:
        if element.site in halves:
            by_site.setdefault(element.site, []).append((stock, element))
    for site, cases in by_site.items():
        names = listed(dict.fromkeys(e.symbol for _, e in cases))
        verb = "sits" if len({e.symbol for _, e in cases}) == 1 else "sit"
        yield found_among(
            [s for s, _ in cases], "site-of-half-driver", Severity.NOTE,
            f"{names} {verb} at {site}, where half-drivers of this shelf sit too: such an effector can face one of them,"
            " never join it on one homologue",
            "for pairs with a half-driver there, use an effector at another site",
        )  # fmt: skip


def check_site_trouble(view: View) -> Iterator[Finding]:
    """Stocks homozygous at a site with known trouble, said once for each site."""
    sites: dict[str, list[Stock]] = {}
    for stock, fly in view.flies:
        for one, other in fly.pairs:
            for site in {e.site for e in one.elements if e.site} & {e.site for e in other.elements if e.site}:
                sites.setdefault(site, []).append(stock)
    for site, stocks in sorted(sites.items()):
        entry = view.catalogue.site(site)
        if entry is None or not entry.trouble:
            continue
        yield found_among(
            stocks, "site-trouble", Severity.NOTE,
            f"{number_of(len(stocks), 'stock is', 'stocks are')} homozygous at {site}: {listed(s.name for s in stocks)}."
            f" {entry.trouble}",
            "test heterozygous flies, with an empty insertion as control",
        )  # fmt: skip


def check_on_balancer(view: View) -> Iterator[Finding]:
    """An insertion that sits on a balancer: picking the flies without the balancer throws it away."""
    for stock, fly in view.flies:
        for homologue in dict.fromkeys(h for _, h in fly.homologues()):
            balancer = homologue.balancer
            if balancer is None:
                continue
            for element in homologue.elements:
                if element.kind is Kind.INSERTION and view.catalogue.marker(_base(element)) is None:
                    yield found_in(
                        stock, "insertion-on-balancer", Severity.NOTE,
                        f"{element.symbol} sits on {balancer.symbol}: flies without the balancer do not have it",
                        "check that it does not belong on the other side of the slash; if it is so, write it on the label",
                    )  # fmt: skip


def _base(element: Element) -> str:
    return element.symbol.partition("@")[0]


# -- what can be told by eye ---------------------------------------------------------------------------------------


def check_told_apart(view: View) -> Iterator[Finding]:
    """Insertions that come and go in a stock and give the same sign: by eye one cannot say which of them a fly has."""
    for stock, fly in view.flies:
        free = _free_insertions(fly)
        if not free:
            continue
        others = [e for e in dict.fromkeys(fly.elements()) if e.kind is Kind.INSERTION and WHITE in e.traits.restores]
        if len(others) > 1:
            yield found_in(
                stock, "not-told-apart", Severity.WARNING,
                f"{listed(e.symbol for e in others)} all give eye colour, and"
                f" {listed(e.symbol for e in free)} can be lost: an eye with colour does not say which of them it has",
                "keep what can be lost over a balancer, or make it homozygous; test by PCR or by a cross",
            )  # fmt: skip


def _free_insertions(fly: Fly) -> list[Element]:
    """Return insertions with mini-white on a homologue that faces another one, with no balancer in the pair."""
    free: dict[Element, None] = {}
    for _, carrier, opposite in opposites(fly):
        if carrier.balancer is None and opposite.balancer is None:
            for element in carrier.elements:
                if (
                    element.kind is Kind.INSERTION
                    and WHITE in element.traits.restores
                    and element not in opposite.elements
                ):
                    free[element] = None
    return list(free)


def check_eye_colour(view: View) -> Iterator[Finding]:
    """Insertions with mini-white beside a balancer that colours the eye itself, or whose white eyes are not white."""
    masked: dict[str, list[Stock]] = {}
    for stock, fly in view.flies:
        balancers = [e for h in dict.fromkeys(h for _, h in fly.homologues()) for e in h.elements if e.is_balancer]
        colouring = [b for b in balancers if _colours_eyes(b)]
        if not colouring:
            continue
        others = (e for _, h in fly.homologues() if h.balancer is None for e in h.elements)
        if any(e.kind is Kind.INSERTION and WHITE in e.traits.restores for e in others):
            for balancer in colouring:
                masked.setdefault(balancer.symbol, []).append(stock)
    for symbol, stocks in sorted(masked.items()):
        yield found_among(
            stocks, "eye-colour-masked", Severity.NOTE,
            f"{symbol} colours the eyes itself, so they do not tell whether a fly with it has an insertion marked with"
            f" mini-white: {listed(s.name for s in stocks)}",
            "follow the insertion by the absence of a balancer, or use one with white eyes, such as FM7h",
        )  # fmt: skip


def _colours_eyes(balancer: Element) -> bool:
    """Return whether a white-eyed fly with one copy, or a male with it as his X, has colour in its eyes."""
    if balancer.traits.compound:
        return False
    return WHITE in balancer.traits.restores or (balancer.chromosome == "X" and WHITE not in balancer.traits.null_for)


def check_unseen_marker(view: View) -> Iterator[Finding]:
    """Insertions over a balancer whose own marker cannot be seen on the background of their stock, said once."""
    unseen: list[tuple[Stock, str]] = []
    for stock, fly, _, carrier, opposite in view.facing:
        if opposite.balancer is None or carrier.balancer is not None:
            continue
        marked = [
            e for e in carrier.elements if e.kind is Kind.INSERTION and e.traits.restores and not e.traits.dominant
        ]
        mutant = _mutant_genes(fly) if marked else frozenset[str]()
        for element in marked:
            if not _shows(element, mutant):
                genes = "".join(f"{g}+" for g in sorted(element.traits.restores))
                unseen.append((stock, f"{stock.name} ({element.symbol}, {genes})"))
    if unseen:
        yield found_among(
            [stock for stock, _ in unseen], "unseen-marker", Severity.NOTE,
            f"{number_of(len(unseen), 'insertion')} with a marker that this background does not show:"
            f" {listed(text for _, text in unseen)}",
            "follow it by the balancer opposite, never by eye or body colour; cross the background in if it must be seen",
        )  # fmt: skip


def _shows(element: Element, mutant: frozenset[str]) -> bool:
    seen = element.traits.restores & mutant
    # eye pigments other than white are not seen on white eyes; y is a colour of the body
    return bool(seen) and (WHITE not in mutant or WHITE in seen or "y" in seen)


def _mutant_genes(fly: Fly) -> frozenset[str]:
    """Return the genes of which the ordinary homologues of the stock have no working copy."""
    genes: set[str] = set()
    for _, pair in zip(PAIRS, fly.pairs, strict=True):
        plain = [h for h in pair if not h.is_y and h.balancer is None]
        if not plain:
            continue
        lacking = [
            {g for e in h.elements for g in (*e.traits.null_for, *(gene for gene, _ in e.traits.recessive))}
            for h in plain
        ]
        genes |= set.intersection(*lacking)
    return frozenset(genes)


# -- names -----------------------------------------------------------------------------------------------------------


def check_near_symbols(view: View) -> Iterator[Finding]:
    """An element whose name differs by one letter from another one at the same site: most often a slip of the pen."""
    carriers: dict[str, list[Stock]] = {}
    elements: dict[str, Element] = {}
    for stock in view.usable:
        for element in stock.reading.elements:
            if element.kind in (Kind.INSERTION, Kind.UNKNOWN):
                carriers.setdefault(element.symbol, []).append(stock)
                elements.setdefault(element.symbol, element)
    capitals: list[tuple[str, str]] = []
    for one, other in near_pairs(elements):
        if elements[one].site != elements[other].site:
            continue
        rare, usual = sorted((one, other), key=lambda s: (len(carriers[s]), -carriers[s][0].row))
        if rare.lower() == usual.lower():
            capitals.append((rare, usual))
            continue
        yield found_in(
            carriers[rare][0], "near-symbol", Severity.WARNING,
            f"{rare} (row {carriers[rare][0].row}) is spelt almost like {usual} (row {carriers[usual][0].row})",
            "write both alike if they are one insertion",
        )  # fmt: skip
    if capitals:
        told = listed(f"{rare} (row {carriers[rare][0].row}) and {usual}" for rare, usual in capitals)
        yield found_among(
            [carriers[rare][0] for rare, _ in capitals], "near-symbol", Severity.WARNING,
            f"{number_of(len(capitals), 'name is', 'names are')} written with other capitals elsewhere: {told}",
            "write them alike: capitals count in a genotype, and a plan takes them for two insertions",
        )  # fmt: skip
