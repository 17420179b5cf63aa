"""Rules about whether a stock can keep itself: flies that die, sterile flies, lethals and insertions that nothing keeps."""

from __future__ import annotations

from collections.abc import Iterator

from crossplan.errors import Severity
from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.element import Element, Kind
from crossplan.genetics.fly import Fly, Homologue, Pair
from crossplan.genetics.survival import exposed_lethals, lethal_groups, sterile_because
from crossplan.stocks.finding import Finding, View, found_among, found_in, listed, number_of, words_of
from crossplan.stocks.shelf import Stock

#: how far in cM an element must lie outside the stretch that a balancer holds before it is said: places worked out from
#: bands are good to about a cM near their anchors (our choice)
CLEARLY_OUTSIDE_CM = 1.0
#: a balancer that holds less than this of its chromosome, in cM, holds only the neighbourhood of its own markers (our choice)
PARTIAL_CM = 30.0


def check_dead(view: View) -> Iterator[Finding]:
    """A genotype that cannot live: one balancer twice, two balancers or two lethals that die together."""
    for stock, cause, _ in view.lives:
        if cause is None:
            continue
        flies = [f for f in (stock.reading.female, stock.reading.male) if f is not None]
        twice = next((b.symbol for f in flies for a, c in f.pairs if a == c and (b := a.balancer) is not None), None)
        code = "balancer-twice" if twice else "cannot-live"
        yield found_in(stock, code, Severity.ERROR, f"flies as written die: {cause}",
                       f"write {twice}/+ or the homologue opposite" if twice else "look at the flies, then correct the row")  # fmt: skip


def check_sterile(view: View) -> Iterator[Finding]:
    """Flies as written that are sterile: the stock cannot be kept by them."""
    for stock, dead, why in view.lives:
        if why and not dead:
            yield found_in(stock, "sterile", Severity.ERROR, f"flies as written are sterile ({why})",
                           "write the balancer or the fertile homologue opposite that keeps the stock")  # fmt: skip


def check_unbalanced_lethal(view: View) -> Iterator[Finding]:
    """A recessive lethal opposite a homologue that does not balance it: it is lost when nobody selects."""
    for stock, fly, name, carrier, opposite in view.facing:
        groups = lethal_groups(carrier)
        if not groups or carrier.balancer is not None or opposite.balancer is not None:
            continue
        if lethal_groups(opposite) - groups or exposed_lethals((carrier, opposite), name, fly.sex):
            continue
        yield found_in(
            stock, "unbalanced-lethal", Severity.ERROR,
            f"{words_of(carrier)} is lethal with itself and stands over {words_of(opposite)}:"
            " nothing keeps it in the stock",
            f"cross to a balancer of chromosome {name} and keep the balanced flies",
        )  # fmt: skip


def check_no_balancer(view: View) -> Iterator[Finding]:
    """Two lethals face each other without a balancer: both are kept, until an exchange makes a homologue with neither."""
    for stock, fly in view.flies:
        for name, (one, other) in zip(PAIRS, fly.pairs, strict=True):
            if name == "4" or one == other or one.balancer is not None or other.balancer is not None:
                continue
            here, there = lethal_groups(one), lethal_groups(other)
            if here - there and there - here and not here & there and not _held(one) and not _held(other):
                yield found_in(
                    stock, "no-balancer", Severity.WARNING,
                    f"{words_of(one)} over {words_of(other)}: two lethals keep each other, and nothing stops exchange"
                    " between them",
                    f"keep each over a balancer of chromosome {name}",
                )  # fmt: skip


def _held(homologue: Homologue) -> bool:
    return any(e.traits.cover for e in homologue.elements)


def check_not_fixed(view: View) -> Iterator[Finding]:
    """Two viable homologues that differ, and no balancer: the stock drifts to one of them."""
    for stock, fly in view.flies:
        loose = [(name, pair) for name, pair in zip(PAIRS, fly.pairs, strict=True) if _drifts(*pair)]
        if not loose:
            continue
        told = []
        for _, (one, other) in loose:
            first, second = (one, other) if one.elements else (other, one)
            told.append(f"{words_of(first)} over {words_of(second)}")
        where = " and ".join(name for name, _ in loose)
        yield found_in(
            stock, "not-fixed", Severity.WARNING,
            f"{'; '.join(told)}, without a balancer: the stock does not breed true and loses one or the other",
            f"make it homozygous, or keep it over a balancer of chromosome {where}",
        )  # fmt: skip


def _drifts(one: Homologue, other: Homologue) -> bool:
    if one == other or any(h.balancer is not None or h.is_y or h.is_compound or lethal_groups(h) for h in (one, other)):
        return False
    differing = set(one.elements) ^ set(other.elements)
    genes = [{e.gene for e in h.elements if e in differing and e.gene} for h in (one, other)]
    # w[1118] over w[*]: two alleles of one gene, which look alike, are no question of keeping
    return not (genes[0] == genes[1] and all(e.gene for e in differing))


def check_floating_balancer(view: View) -> Iterator[Finding]:
    """Balancers over a homologue that can be homozygous: lost unless somebody selects them. Said once for the list."""
    floating: list[tuple[Stock, str]] = []
    for stock, _, _, one, other in view.facing:
        if one.balancer is None and other.balancer is not None and not lethal_groups(one) and one.elements:
            floating.append((stock, f"{stock.name} ({other.balancer.symbol})"))
    if floating:
        yield found_among(
            [stock for stock, _ in floating], "floating-balancer", Severity.NOTE,
            f"{number_of(len(floating), 'balancer stands', 'balancers stand')} over a homologue that may live without"
            f" them, so the stock drifts to homozygous flies: {listed(text for _, text in floating)}",
            "expect both kinds of fly in the vial; select at each transfer if the balancer is wanted, and note how many"
            " flies show it",
        )  # fmt: skip


def check_balancer_takes_over(view: View) -> Iterator[Finding]:
    """A lethal over a balancer whose own homozygotes live and breed: the balancer can replace it."""
    for stock, _, name, carrier, opposite in view.facing:
        balancer = opposite.balancer
        if balancer is None or not lethal_groups(carrier) or carrier.balancer is not None:
            continue
        if lethal_groups(opposite) or _sterile_twice(opposite, name):
            continue
        yield found_in(
            stock, "balancer-takes-over", Severity.NOTE,
            f"{words_of(opposite)} lives and breeds when homozygous, so it can replace {words_of(carrier)}",
            f"at each transfer take mothers with one copy of {balancer.symbol}; or change to a balancer that is lethal"
            " or sterile when homozygous",
        )  # fmt: skip


def _sterile_twice(homologue: Homologue, chromosome: str) -> bool:
    plain = Homologue()
    pairs: list[Pair] = [(homologue, homologue) if n == chromosome else (plain, plain) for n in PAIRS]
    return sterile_because(Fly("female", (pairs[0], pairs[1], pairs[2], pairs[3]))) is not None


def check_cover(view: View) -> Iterator[Finding]:
    """What lies outside the stretch that its balancer holds: it can be exchanged onto the balancer, or be lost."""
    loose: dict[str, list[tuple[Stock, Element]]] = {}
    for stock, _, _, carrier, opposite in view.facing:
        balancer = opposite.balancer
        if balancer is None or carrier.balancer is not None or not balancer.traits.cover:
            continue
        for element in carrier.elements:
            if not _outside(element, balancer):
                continue
            if element.traits.lethal:
                yield _lethal_outside(stock, element, balancer)
            elif element.kind is Kind.INSERTION:
                loose.setdefault(balancer.symbol, []).append((stock, element))
    for symbol, cases in sorted(loose.items()):
        told = listed(f"{stock.name} ({element.symbol})" for stock, element in cases)
        yield found_among(
            [stock for stock, _ in cases], "outside-cover", Severity.NOTE,
            f"{number_of(len(cases), 'insertion')} over {symbol} outside the stretch that it holds: {told}",
            "check now and then that the flies with the balancer do not carry the insertion too",
        )  # fmt: skip


def _lethal_outside(stock: Stock, element: Element, balancer: Element) -> Finding:
    return found_in(
        stock, "outside-cover", Severity.WARNING,
        f"{element.symbol} lies outside the stretch of its chromosome that {balancer.symbol} holds: exchange loses it",
        "test that the lethal is still there; use a balancer that covers the place",
    )  # fmt: skip


def _outside(element: Element, balancer: Element) -> bool:
    place = element.position_cM
    if place is None or not (element.kind is Kind.INSERTION or element.traits.lethal):
        return False
    return all(not c.start - CLEARLY_OUTSIDE_CM <= place <= c.end + CLEARLY_OUTSIDE_CM for c in balancer.traits.cover)


def check_partial_balancer(view: View) -> Iterator[Finding]:
    """Something kept over a balancer that holds only a part of the chromosome, at a place that is not known."""
    for stock, _, name, carrier, opposite in view.facing:
        balancer = opposite.balancer
        if balancer is None or carrier.balancer is not None or not balancer.traits.cover:
            continue
        held = sum(c.end - c.start for c in balancer.traits.cover)
        unplaced = [e for e in carrier.elements if e.position_cM is None and e.traits.lethal]
        if held < PARTIAL_CM and unplaced:
            yield found_in(
                stock, "partial-balancer", Severity.WARNING,
                f"{balancer.symbol} holds only a part of chromosome {name}, and where"
                f" {' '.join(e.symbol for e in unplaced)} lies is not known",
                "move it over a full balancer",
            )  # fmt: skip
