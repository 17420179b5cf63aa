"""Rules about what transgenes do: those that do not go together, temperatures, cautions of the catalogue, missing halves.

`clashes` is asked for stocks here and for targets of a screen in `schemes.gaps`.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from functools import cache

from crossplan.errors import Severity
from crossplan.genetics.catalogue import Catalogue, ComponentEntry
from crossplan.genetics.element import Element, Kind
from crossplan.stocks.finding import Finding, View, found_among, found_in, listed, number_of
from crossplan.stocks.shelf import Stock

#: classes of transgene whose cautions concern whoever keeps or crosses the stock; what a bare half-driver or reporter does
#: is known to everybody
CAUTIOUS_CLASSES = frozenset(("effector", "repressor", "helper"))
#: classes that hold whatever no other class takes: their caution says no more than that
CATCH_ALL = frozenset(("other UAS", "other LexAop", "other QUAS"))
_SPLIT_WORDS = re.compile(r"(?i)\bsplit[\s-]*(?:gal4|line|driver|pair)?\b")
_GAL4_IN_BALANCER = re.compile(r"(?i)(?:Kr|twi)-?GFP")
_GREEN = "green fluorescence"
_BROAD_LETHAL = re.compile(r"(?i)\belav")


@dataclass(frozen=True)
class Part:
    """An element with the class of transgene that it is, and the row of the catalogue that says more of it."""

    element: Element
    catalogue: Catalogue

    @property
    def cls(self) -> str:
        return self.element.component

    @property
    def row(self) -> str:
        """The name of the row; empty for drivers and their halves, of which the class says enough."""
        if self.cls not in CAUTIOUS_CLASSES and self.cls != "reporter":
            return ""
        entry = _entry(self.element.symbol.partition("@")[0], self.catalogue)
        return entry.name if entry is not None else ""


@dataclass(frozen=True)
class Clash:
    """Two things that do not go together in one fly.

    `one` and `other` say which parts are meant; `severity`, `message` ({one} and {other} are filled in) and `suggestion`
    are what the audit says.
    """

    code: str
    severity: Severity
    one: Callable[[Part], bool]
    other: Callable[[Part], bool]
    message: str
    suggestion: str


def _row(*names: str) -> Callable[[Part], bool]:
    return lambda part: part.row in names


def _cls(*names: str) -> Callable[[Part], bool]:
    return lambda part: part.cls in names


#: sources: `audit_codes`, under the code
CLASHES: tuple[Clash, ...] = (
    Clash(
        "repressor-of-split", Severity.WARNING, _row("GAL80", "GAL80ts"), _cls("AD"),
        "{one} does not stop the split driver with {other}: p65 and VP16 have no GAL4 activation domain to block",
        "use a killer zipper, or put the temperature control into the effector",
    ),
    Clash(
        "warmth-twice", Severity.WARNING, _row("GAL80ts"), _row("TrpA1"),
        "{one} and {other} both answer to warmth: when GAL80 goes off the channel is open already",
        "open the channel by light instead",
    ),
    Clash(
        "lethal-together", Severity.WARNING, _row("CsChrimson"), lambda p: bool(_BROAD_LETHAL.search(p.element.symbol)),
        "{one} with {other} in one fly is lethal",
        "use a narrower driver, or a weaker channel",
    ),
    Clash(
        "jumps", Severity.WARNING, _row("transposase"),
        lambda p: p.element.kind is Kind.INSERTION and p.row != "transposase",
        "{one} moves transposons, and {other} is one",
        "keep the source of transposase in a stock of its own",
    ),
    Clash(
        "cuts", Severity.WARNING, _row("Cas9"), _row("guide RNA", "guide RNA of a library"),
        "{one} and {other} in one fly cut its chromosomes in every generation",
        "keep them apart, and cross them for the experiment",
    ),
    Clash(
        "balancer-drives", Severity.WARNING, lambda p: bool(_GAL4_IN_BALANCER.search(p.element.symbol)),
        _cls("effector"),
        "{one} is made with a GAL4, which drives {other} in every fly with the balancer",
        "use a balancer whose GFP has its own promoter",
    ),
    Clash(
        "green-twice", Severity.NOTE, lambda p: _GREEN in p.element.traits.dominant,
        lambda p: p.cls == "reporter" and _GREEN not in p.element.traits.dominant
        and ("GFP" in p.element.symbol or p.row == "calcium indicator"),
        "{one} glows green, and so does {other} where it is driven",
        "sort by an adult sign, or use a balancer that glows red",
    ),
)  # fmt: skip


def clashes(elements: Iterable[Element], catalogue: Catalogue) -> Iterator[tuple[Clash, Element, Element]]:
    """Yield what does not go together among the elements of one fly, each clash once."""
    active = [e for e in dict.fromkeys(elements) if e.component or e.traits.dominant]
    if len(active) < 2:
        return
    parts = [Part(e, catalogue) for e in active]
    for clash in CLASHES:
        pair = next(((a, b) for a in parts if clash.one(a) for b in parts if b is not a and clash.other(b)), None)
        if pair is not None:
            yield clash, pair[0].element, pair[1].element


@cache
def _entry(name: str, catalogue: Catalogue) -> ComponentEntry | None:
    return catalogue.component(name)


def check_clashes(view: View) -> Iterator[Finding]:
    """Transgenes in one stock that do not go together."""
    for stock, fly in view.flies:
        for clash, one, other in clashes(fly.elements(), view.catalogue):
            message = clash.message.format(one=one.symbol, other=other.symbol)
            yield found_in(stock, clash.code, clash.severity, message, clash.suggestion)


def check_temperature(view: View) -> Iterator[Finding]:
    """A stock that is kept warmer than what it carries allows: leak, or death."""
    for stock, fly in view.flies:
        if stock.temperature_C is None:
            continue
        elements = list(dict.fromkeys(fly.elements()))
        driven = _is_driven(elements)
        for element in elements:
            if "l(3)DTS4" in element.traits.lethal and stock.temperature_C >= 29:
                yield _too_warm(stock, element, "its l(3)DTS4 kills all carriers at 29 C", 25)
            if not (element.component == "helper" or (driven and element.component in CAUTIOUS_CLASSES)):
                continue
            entry = _entry(element.symbol.partition("@")[0], view.catalogue)
            if entry is not None and entry.rear_max_C is not None and stock.temperature_C > entry.rear_max_C:
                yield _too_warm(stock, element, "it acts, or leaks, when warm", entry.rear_max_C)


def _is_driven(elements: Iterable[Element]) -> bool:
    classes = {e.component for e in elements}
    return "GAL4" in classes or {"AD", "DBD"} <= classes


def _too_warm(stock: Stock, element: Element, reason: str, limit: float) -> Finding:
    return found_in(
        stock, "too-warm", Severity.WARNING, f"{element.symbol} is kept at {stock.temperature_C:g} C: {reason}",
        f"keep the stock at {limit:g} C or cooler",
    )  # fmt: skip


def check_cautions(view: View) -> Iterator[Finding]:
    """What the catalogue warns of, once for each balancer and class of transgene."""
    carriers: dict[tuple[str, str], list[Stock]] = {}
    for stock, fly in view.flies:
        for element in dict.fromkeys(fly.elements()):
            carriers.setdefault(
                (element.symbol, element.component if not element.is_balancer else "balancer"), []
            ).append(stock)
    told: dict[tuple[str, str, str], list[Stock]] = {}
    for (symbol, kind), stocks in carriers.items():
        caution = _caution(symbol, kind, view.catalogue)
        if caution is not None:
            told.setdefault(caution, []).extend(stocks)
    for (name, words, origin), stocks in sorted(told.items()):
        yield found_among(
            stocks, "caution", Severity.NOTE,
            f"{name} in {number_of(len(set(stocks)))} ({listed(s.name for s in stocks)}): {words}",
            f"keep it in mind when you cross them ({origin})",
        )  # fmt: skip


def _caution(symbol: str, kind: str, catalogue: Catalogue) -> tuple[str, str, str] | None:
    if kind == "balancer":
        balancer = catalogue.balancer(symbol)
        return (balancer.name, balancer.caution, balancer.origin) if balancer is not None and balancer.caution else None
    entry = _entry(symbol.partition("@")[0], catalogue) if kind in CAUTIOUS_CLASSES else None
    if entry is None or not entry.caution or entry.name in CATCH_ALL:
        return None
    return entry.name, entry.caution, entry.origin


def check_missing_half(view: View) -> Iterator[Finding]:
    """A stock that is called a split driver and carries one half only: it looks normal and drives nothing."""
    for stock, fly in view.flies:
        called = _SPLIT_WORDS.search(f"{stock.name} {stock.notes}")
        halves = {e.component for e in fly.elements()} & {"AD", "DBD"}
        if called and len(halves) == 1:
            missing = ({"AD", "DBD"} - halves).pop()
            yield found_in(
                stock, "half-missing", Severity.WARNING,
                f"called '{called[0].strip()}', but the genotype has no {missing} half",
                "look at the pattern with a GFP reporter; write both halves, or correct the name",
            )  # fmt: skip
