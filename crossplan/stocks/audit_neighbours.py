"""Rules about stocks beside each other: the same stock twice, stocks that look alike, names that look alike."""

from __future__ import annotations

import re
from collections.abc import Iterator

from crossplan.errors import Severity
from crossplan.genetics.element import Kind
from crossplan.genetics.fly import Fly
from crossplan.genetics.notation import format_genotype
from crossplan.stocks.finding import Finding, View, found_among
from crossplan.stocks.near_names import near_pairs
from crossplan.stocks.shelf import Stock

#: words that say that a second stock of one genotype is meant
_MEANT = re.compile(
    r"(?i)\b(?:back-?up|copy|copies|duplicate|same as|second|replicate|isolate|sub-?line|re-?injected)\b"
)


def check_duplicates(view: View) -> Iterator[Finding]:
    """Two stocks of one genotype that nobody calls copies of each other."""
    first: dict[tuple[Fly | None, Fly | None], Stock] = {}
    for stock in view.usable:
        if not stock.reading.elements:
            continue  # wild types differ in what no genotype says
        twin = first.setdefault((stock.reading.female, stock.reading.male), stock)
        if twin is stock or any(_MEANT.search(s.notes) for s in (stock, twin)):
            continue
        yield Finding(
            "duplicate", Severity.WARNING, stock.name, stock.row,
            f"the same genotype as {twin.name} (row {twin.row}): {stock.reading.canonical}",
            "keep one as the copy of the other and call it so in the notes, or write what tells them apart",
            stocks=(stock.name, twin.name),
        )  # fmt: skip


def check_neighbours(view: View) -> Iterator[Finding]:
    """Two helper stocks in one tray that differ in genotype and show the same dominant signs: a swap goes unseen.

    Lines that differ in their insertions look alike in every tray, which is no news; helper stocks (balancers and markers
    alone) are taken by their looks, and are told.
    """
    trays: dict[tuple[str, frozenset[str]], list[tuple[Stock, Fly]]] = {}
    for stock, fly in view.flies:
        if stock.tray and _is_helper(fly):
            dominant = frozenset(sign for e in fly.elements() for sign in e.traits.dominant)
            trays.setdefault((stock.tray, view.observer.signs(fly) & dominant), []).append((stock, fly))
    for (tray, signs), stocks in trays.items():
        (first, fly), *others = stocks
        for other, other_fly in others:
            if signs and other_fly != fly:
                yield found_among(
                    [other, first], "look-alike", Severity.WARNING,
                    f"looks the same as {first.name} in the same tray ({tray}): {format_genotype(other_fly)} and"
                    f" {format_genotype(fly)}",
                    "keep them in different trays; test by crossing when in doubt",
                )  # fmt: skip


def _is_helper(fly: Fly) -> bool:
    """Return whether the autosomes carry balancers and dominant markers, and nothing that anybody studies."""
    autosomes = [e for name, h in fly.homologues() if name != "X" for e in h.elements]
    return (
        any(e.is_balancer for e in autosomes)
        and all(e.is_balancer or e.traits.dominant for e in autosomes)
        and all(e.kind is not Kind.INSERTION for e in fly.elements())
    )


def check_near_names(view: View) -> Iterator[Finding]:
    """Stocks whose names are taken for each other on a label."""
    by_name = {s.name: s for s in view.shelf.stocks if s.in_use}
    for one, other in near_pairs(by_name):
        yield found_among(
            [by_name[other], by_name[one]], "near-name", Severity.WARNING,
            f"the name is easily taken for '{one}' (row {by_name[one].row})",
            "give one of them another name, or a number",
        )  # fmt: skip
