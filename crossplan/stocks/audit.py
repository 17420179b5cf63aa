"""What is wrong with a shelf, at risk, or worth a look: one function a rule, and the list of all rules.

A rule yields findings; it decides nothing about other rules. Severity: an error must be settled before the stock is used,
a warning is a risk, a note is worth knowing.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass

from crossplan.errors import Severity
from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue import Catalogue, default_catalogue
from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.element import Element
from crossplan.genetics.fly import Fly
from crossplan.genetics.notation import format_genotype
from crossplan.genetics.survival import cause_of_death, exposed_lethals, lethal_groups, sterile_because
from crossplan.stocks.keeping import FEWEST_COPIES, OVERDUE_FACTOR, USUAL_TEMPERATURE, flip_interval_days
from crossplan.stocks.shelf import Shelf, Stock


@dataclass(frozen=True, slots=True)
class Finding:
    """One thing found: where, why it matters, and what to do about it."""

    code: str
    severity: Severity
    stock: str
    row: int
    message: str
    suggestion: str = ""


Rule = Callable[[Shelf, dt.date, Catalogue], Iterator[Finding]]


def audit(shelf: Shelf, today: dt.date, catalogue: Catalogue | None = None) -> tuple[Finding, ...]:
    """Return all findings, errors first, then by row.

    Args:
        shelf: the stocks.
        today: the day as of which dates are judged.
        catalogue: facts about sites; the shipped ones by default.
    """
    facts = catalogue or default_catalogue()
    found = [finding for rule in RULES for finding in rule(shelf, today, facts)]
    rank = {Severity.ERROR: 0, Severity.WARNING: 1, Severity.NOTE: 2}
    return tuple(sorted(dict.fromkeys(found), key=lambda f: (rank[f.severity], f.row, f.code)))


def _of(stock: Stock, code: str, severity: Severity, message: str, suggestion: str) -> Finding:
    return Finding(code, severity, stock.name, stock.row, message, suggestion)


def _flies(shelf: Shelf) -> Iterator[tuple[Stock, Fly]]:
    """Yield each usable stock with its female, or its male where it has no female."""
    for stock in shelf.usable():
        fly = stock.reading.female or stock.reading.male
        if fly is not None:
            yield stock, fly


# -- what the list says ------------------------------------------------------------------------------------------


def check_unreadable(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """A genotype that is not understood, or that cannot be: wrong chromosome, three homologues, unclosed bracket."""
    for stock in shelf.stocks:
        for problem in stock.reading.problems:
            if problem.severity is Severity.ERROR or problem.code == "which-chromosome":
                where = stock.genotype[problem.start : problem.end]
                shown = f" (at '{where}')" if 0 < len(where) <= 40 else ""
                yield _of(stock, problem.code, Severity.ERROR, problem.message + shown, problem.hint)


def check_assumptions(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """What was assumed, once for each question and not once for each row."""
    groups: dict[tuple[str, str], list[Stock]] = {}
    for stock in shelf.usable():
        for problem in stock.reading.problems:
            asks = problem.severity is Severity.WARNING and problem.code not in ("balancer-twice",)
            if asks or problem.code == "unknown-symbol":
                groups.setdefault((problem.code, problem.message + "|" + problem.hint), []).append(stock)
    for (code, words), stocks in groups.items():
        message, _, hint = words.partition("|")
        more = f" ({len(stocks)} stocks)" if len(stocks) > 1 else ""
        severity = Severity.NOTE if code == "unknown-symbol" else Severity.WARNING
        if code == "assumed-marker":
            severity = Severity.NOTE
        yield _of(stocks[0], code, severity, message + more, hint)


def check_rows(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """Names that stand twice, dates and numbers that cannot be read."""
    for problem in shelf.problems:
        if problem.code in ("name-twice", "date", "not-a-number", "not-a-temperature", "encoding", "too-many-cells"):
            name = next((s.name for s in shelf.stocks if s.row == problem.line), "")
            yield Finding(problem.code, problem.severity, name, problem.line, problem.message, problem.hint)


# -- whether the stock can keep itself ---------------------------------------------------------------------------


def check_dead(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """A genotype that cannot live: one balancer twice, two balancers or two lethals that die together."""
    for stock, fly in _flies(shelf):
        cause = cause_of_death(fly)
        if cause:
            twice = next((b.symbol for a, c in fly.pairs if a == c and (b := a.balancer) is not None), None)
            code = "balancer-twice" if twice else "cannot-live"
            yield _of(stock, code, Severity.ERROR, f"flies as written die: {cause}",
                      f"write {twice}/+ or the homologue opposite" if twice else "look at the flies, then correct the row")  # fmt: skip


def check_sterile(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """Flies as written that are sterile: the stock lives by others than these."""
    for stock, fly in _flies(shelf):
        why = sterile_because(fly)
        if why and cause_of_death(fly) is None:
            yield _of(stock, "sterile", Severity.NOTE, f"flies as written are sterile ({why})",
                      "never used as parents here; keep their heterozygous sibs")  # fmt: skip


def check_unbalanced_lethal(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """A recessive lethal opposite a homologue that does not balance it: it is lost when nobody selects."""
    for stock, fly in _flies(shelf):
        for name in PAIRS:
            one, other = fly.pair(name)
            for carrier, opposite in ((one, other), (other, one)):
                groups = lethal_groups(carrier)
                if not groups or carrier.balancer is not None or opposite.is_y or opposite == carrier:
                    continue
                keeps = opposite.balancer is not None or lethal_groups(opposite) - groups
                if not keeps and not exposed_lethals((one, other), name, fly.sex):
                    yield _of(
                        stock, "unbalanced-lethal", Severity.ERROR,
                        f"{' '.join(carrier.symbols)} is lethal with itself and stands over {' '.join(opposite.symbols) or '+'}:"
                        " nothing keeps it in the stock",
                        f"cross to a balancer of chromosome {name} and keep the balanced flies",
                    )  # fmt: skip


def check_floating_balancer(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """Balancers over a homologue that can be homozygous: lost unless somebody selects them. Said once for the list."""
    floating: list[tuple[Stock, str]] = []
    for stock, fly in _flies(shelf):
        for name in ("2", "3"):
            one, other = fly.pair(name)
            if one.balancer is None and other.balancer is not None and not lethal_groups(one) and one.elements:
                floating.append((stock, f"{stock.name} ({other.balancer.symbol})"))
    if floating:
        yield _of(
            floating[0][0], "floating-balancer", Severity.NOTE,
            f"{len(floating)} balancer(s) stand over a homologue that may live without them, so the stock drifts to"
            f" homozygous flies: {_names(text for _, text in floating)}",
            "expect both kinds of fly in the vial; select at each transfer if the balancer is wanted",
        )  # fmt: skip


def _names(names: Iterable[str], most: int = 8) -> str:
    listed = list(names)
    return ", ".join(listed[:most]) + (f" and {len(listed) - most} more" if len(listed) > most else "")


# -- insertions --------------------------------------------------------------------------------------------------


def check_facing_insertions(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """Two different insertions that face each other at one site."""
    for stock, fly in _flies(shelf):
        for name in PAIRS:
            one, other = fly.pair(name)
            here = {e.site: e.symbol for e in one.elements if e.site}
            for element in other.elements:
                if element.site in here and here[element.site] != element.symbol:
                    yield _of(
                        stock, "same-site", Severity.WARNING,
                        f"{here[element.site]} and {element.symbol} face each other at {element.site}: they can never be"
                        " on one homologue and may act on each other (Mellert & Truman 2012)",
                        "move one of them to another site before combining them",
                    )  # fmt: skip


def check_shared_site(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """An effector at the site of half-drivers: the three parts of such a pair cannot be in one fly twice over."""
    halves: dict[str, Stock] = {}
    effectors: list[tuple[Stock, Element]] = []
    for stock, fly in _flies(shelf):
        for element in dict.fromkeys(fly.elements()):
            if element.site and element.component in ("AD", "DBD"):
                halves.setdefault(element.site, stock)
            elif element.site and element.component in ("effector", "reporter"):
                effectors.append((stock, element))
    for stock, element in effectors:
        if element.site in halves:
            yield _of(
                stock, "site-of-half-driver", Severity.NOTE,
                f"{element.symbol} sits at {element.site}, where half-drivers of this shelf sit too: it can face one of"
                " them, never join it on one homologue",
                "for pairs with a half-driver there, use an effector at another site",
            )  # fmt: skip


def check_site_trouble(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """Stocks homozygous at a site with known trouble, said once for each site."""
    sites: dict[str, list[Stock]] = {}
    for stock, fly in _flies(shelf):
        for one, other in fly.pairs:
            for site in {e.site for e in one.elements if e.site} & {e.site for e in other.elements if e.site}:
                entry = catalogue.site(site)
                if entry is not None and entry.trouble:
                    sites.setdefault(site, []).append(stock)
    for site, stocks in sorted(sites.items()):
        entry = catalogue.site(site)
        trouble = entry.trouble if entry is not None else ""
        yield _of(
            stocks[0], "site-trouble", Severity.NOTE,
            f"{len(stocks)} stock(s) are homozygous at {site}: {_names(s.name for s in stocks)}. {trouble}",
            "test heterozygous flies, with an empty insertion as control",
        )  # fmt: skip


# -- stocks beside each other ------------------------------------------------------------------------------------


def check_duplicates(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """Two stocks of one genotype."""
    first: dict[tuple[Fly | None, Fly | None], Stock] = {}
    for stock in shelf.usable():
        key = (stock.reading.female, stock.reading.male)
        if not stock.reading.elements:
            continue  # wild types differ in what no genotype says
        if key in first:
            twin = first[key]
            yield _of(
                stock, "duplicate", Severity.WARNING, f"the same genotype as {twin.name} (row {twin.row}):"
                f" {stock.reading.canonical}", "keep one as the copy of the other, or write what tells them apart",
            )  # fmt: skip
        else:
            first[key] = stock


def check_neighbours(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """Two balancer stocks in one tray that differ in genotype and show the same dominant signs: a swap goes unseen."""
    observer = Observer(catalogue, Means(pupae=True))
    trays: dict[tuple[str, frozenset[str]], list[tuple[Stock, Fly]]] = {}
    for stock, fly in _flies(shelf):
        balanced = sum(any(h.balancer is not None for h in pair) for pair in fly.pairs)
        if stock.tray and balanced > 1:
            dominant = frozenset(sign for e in fly.elements() for sign in e.traits.dominant)
            trays.setdefault((stock.tray, observer.signs(fly) & dominant), []).append((stock, fly))
    for (tray, _), stocks in trays.items():
        (first, fly), *others = stocks
        for other, other_fly in others:
            if other_fly != fly:
                yield _of(
                    other, "look-alike", Severity.WARNING,
                    f"looks the same as {first.name} in the same tray ({tray}): {format_genotype(other_fly)} and"
                    f" {format_genotype(fly)}",
                    "keep them in different trays; test by crossing when in doubt",
                )  # fmt: skip


# -- keeping -----------------------------------------------------------------------------------------------------


def check_copies(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """Stocks that hang by one vial."""
    for stock in shelf.usable():
        if stock.copies is not None and stock.copies < FEWEST_COPIES:
            yield _of(stock, "single-copy", Severity.WARNING, "one accident away from lost: only one copy",
                      f"keep at least {FEWEST_COPIES} copies, staggered by half an interval")  # fmt: skip


def check_transfers(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """Stocks that are overdue for new food, by their temperature; stocks never dated, once."""
    undated = []
    dated = any(s.last_transfer for s in shelf.stocks)
    for stock in shelf.usable():
        if stock.last_transfer is None:
            undated.append(stock)
            continue
        days = (today - stock.last_transfer).days
        interval = flip_interval_days(stock.temperature_C or USUAL_TEMPERATURE)
        if days > OVERDUE_FACTOR * interval:
            yield _of(
                stock, "overdue", Severity.WARNING,
                f"last put on new food {days} days ago ({stock.last_transfer.isoformat()});"
                f" at {stock.temperature_C or USUAL_TEMPERATURE:g} C every {interval:.0f} days",
                "look today whether it lives; transfer it",
            )  # fmt: skip
        elif days < 0:
            yield _of(stock, "date", Severity.WARNING, f"the last transfer lies in the future ({stock.last_transfer})",
                      "correct the date")  # fmt: skip
    if undated and dated:
        names = ", ".join(s.name for s in undated[:6]) + (" ..." if len(undated) > 6 else "")
        yield _of(undated[0], "never-dated", Severity.NOTE, f"{len(undated)} stock(s) have no date of transfer: {names}",
                  "date them at the next transfer")  # fmt: skip


def check_places(shelf: Shelf, today: dt.date, catalogue: Catalogue) -> Iterator[Finding]:
    """Stocks without a tray, once, where the list has trays."""
    lost = [s for s in shelf.usable() if not s.tray]
    if lost and any(s.tray for s in shelf.stocks):
        names = ", ".join(s.name for s in lost[:6]) + (" ..." if len(lost) > 6 else "")
        yield _of(
            lost[0],
            "no-place",
            Severity.NOTE,
            f"{len(lost)} stock(s) have no tray: {names}",
            "find them, write it down",
        )


RULES: tuple[Rule, ...] = (
    check_unreadable, check_assumptions, check_rows, check_dead, check_sterile, check_unbalanced_lethal,
    check_floating_balancer, check_facing_insertions, check_shared_site, check_site_trouble, check_duplicates, check_neighbours, check_copies, check_transfers,
    check_places,
)  # fmt: skip
