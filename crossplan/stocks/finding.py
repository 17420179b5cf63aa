"""What a rule of the audit sees, and what it says."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass, field
from functools import cached_property

from crossplan.errors import Severity
from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.fly import Fly, Homologue
from crossplan.genetics.survival import cause_of_death, sterile_because
from crossplan.stocks.keeping import is_kept
from crossplan.stocks.shelf import Shelf, Stock

#: a finding that concerns many stocks names so many of them in its message (all are in `stocks`)
MOST_NAMES = 8


@dataclass(frozen=True, slots=True)
class Finding:
    """One thing found: where, why it matters, and what to do about it.

    Attributes:
        code: the kind of finding; `audit_codes` has all of them.
        severity: an error must be settled before the stock is used, a warning is a risk, a note is worth knowing.
        stock, row: the first stock concerned, and its row in the spreadsheet.
        message: what was found.
        suggestion: what to do.
        why: why it matters.
        stocks: every stock concerned, the first one included.
        accepted: the reason with which somebody accepted it; empty when nobody did.
    """

    code: str
    severity: Severity
    stock: str
    row: int
    message: str
    suggestion: str = ""
    why: str = ""
    stocks: tuple[str, ...] = ()
    accepted: str = ""


@dataclass(frozen=True)
class View:
    """A shelf as the rules see it.

    Attributes:
        shelf: the stocks.
        today: the day as of which dates are judged.
        catalogue: facts about signs, sites, balancers and classes of transgene.
        wanted: symbols of elements that a screen asks for, each with the targets that do.
    """

    shelf: Shelf
    today: dt.date
    catalogue: Catalogue
    wanted: Mapping[str, tuple[str, ...]] = field(default_factory=dict)

    @cached_property
    def usable(self) -> tuple[Stock, ...]:
        """The stocks that were understood and are in use."""
        return self.shelf.usable()

    @cached_property
    def kept(self) -> tuple[Stock, ...]:
        """The stocks to which food and copies are owed, understood or not."""
        return tuple(s for s in self.shelf.stocks if is_kept(s))

    @cached_property
    def flies(self) -> tuple[tuple[Stock, Fly], ...]:
        """Each usable stock with its female, or its male where it has no female."""
        both = ((s, s.reading.female or s.reading.male) for s in self.usable)
        return tuple((s, fly) for s, fly in both if fly is not None)

    @cached_property
    def facing(self) -> tuple[tuple[Stock, Fly, str, Homologue, Homologue], ...]:
        """Every homologue that faces a different one: stock, fly, chromosome, homologue, the homologue opposite."""
        return tuple((stock, fly, *pair) for stock, fly in self.flies for pair in opposites(fly))

    @cached_property
    def lives(self) -> tuple[tuple[Stock, str | None, str | None], ...]:
        """Each usable stock with why its flies as written die, and why they are sterile; None where they are not."""
        told: list[tuple[Stock, str | None, str | None]] = []
        for stock in self.usable:
            if _is_harmless(stock):
                told.append((stock, None, None))
                continue
            flies = [f for f in (stock.reading.female, stock.reading.male) if f is not None]
            dead = next((c for f in flies if (c := cause_of_death(f))), None)
            told.append((stock, dead, dead or next((w for f in flies if (w := sterile_because(f))), None)))
        return tuple(told)

    @cached_property
    def observer(self) -> Observer:
        """A person with a dissecting scope who looks at adults and pupae."""
        return Observer(self.catalogue, Means(pupae=True))

    @cached_property
    def by_row(self) -> Mapping[int, Stock]:
        """Every stock by its row."""
        return {s.row: s for s in self.shelf.stocks}

    def targets_of(self, stock: Stock) -> tuple[str, ...]:
        """Return the targets of the screen that ask for something that this stock carries."""
        if not self.wanted:
            return ()
        found = (t for e in stock.reading.elements for t in self.wanted.get(e.symbol, ()))
        return tuple(dict.fromkeys(found))


Rule = Callable[[View], Iterator[Finding]]


def _is_harmless(stock: Stock) -> bool:
    """Return whether nothing that the stock carries kills or sterilises anybody, so that its flies need no judging."""
    for element in stock.reading.elements:
        does = element.traits
        if (
            does.lethal
            or does.male_lethal
            or does.female_sterile
            or does.male_sterile
            or does.linked_to
            or does.compound
        ):
            return False
    male = stock.reading.male
    return male is None or male.pair("X")[1].is_y


def found_in(stock: Stock, code: str, severity: Severity, message: str, suggestion: str) -> Finding:
    """Return a finding about one stock."""
    return Finding(code, severity, stock.name, stock.row, message, suggestion, stocks=(stock.name,))


def found_among(stocks: Iterable[Stock], code: str, severity: Severity, message: str, suggestion: str) -> Finding:
    """Return one finding about several stocks, placed at the first of them."""
    concerned = tuple(dict.fromkeys(s.name for s in stocks))
    first = next(iter(stocks))
    return Finding(code, severity, first.name, first.row, message, suggestion, stocks=concerned)


def listed(names: Iterable[str], most: int = MOST_NAMES) -> str:
    """Return names in a row, the first ones only where there are many."""
    given = list(dict.fromkeys(names))
    return ", ".join(given[:most]) + (f" and {len(given) - most} more" if len(given) > most else "")


def number_of(count: int, one: str = "stock", many: str = "") -> str:
    """Return a number with its noun: `1 stock`, `3 stocks`."""
    return f"{count} {one if count == 1 else many or one + 's'}"


def opposites(fly: Fly) -> Iterator[tuple[str, Homologue, Homologue]]:
    """Yield each homologue of each pair that differs, with its chromosome and the homologue opposite; no Y, no compound."""
    for name, (one, other) in zip(PAIRS, fly.pairs, strict=True):
        if one == other or one.is_y or other.is_y or one.is_compound or other.is_compound:
            continue
        yield name, one, other
        yield name, other, one


def words_of(homologue: Homologue) -> str:
    """Return the symbols of a homologue, + for wild type."""
    return " ".join(homologue.symbols) or "+"
