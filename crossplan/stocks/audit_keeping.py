"""Rules about how stocks are kept: copies, transfers, places, quarantine, sources, and stocks out of use that are wanted."""

from __future__ import annotations

import re
from collections.abc import Iterator

from crossplan.errors import Severity
from crossplan.stocks.finding import Finding, View, found_among, found_in, listed, number_of
from crossplan.stocks.keeping import (
    FEWEST_COPIES,
    OVERDUE_FACTOR,
    USUAL_TEMPERATURE,
    flip_interval_days,
    is_quarantined,
)
from crossplan.stocks.shelf import Stock

#: temperatures in degrees C between which stocks are kept (common practice, no source)
COLDEST_C, WARMEST_C = 16.0, 29.0
#: a column that at least this share of the list fills is one that the lab means to keep filled (our choice)
USUALLY_FILLED = 0.5
_WEAK = re.compile(r"(?i)\b(?:sick|weak|poor|dying|mites?|mou?ld\w*|contaminat\w*|infected|wolbachia)\b")


def check_copies(view: View) -> Iterator[Finding]:
    """Stocks that hang by one vial."""
    for stock in view.kept:
        if stock.copies is not None and stock.copies < FEWEST_COPIES:
            targets = view.targets_of(stock)
            more = (
                f"; {number_of(len(targets), 'target')} of the screen depend{'s' if len(targets) == 1 else ''} on what it carries"
                if targets
                else ""
            )
            yield found_in(stock, "single-copy", Severity.WARNING, f"one accident away from lost: only one copy{more}",
                           f"keep at least {FEWEST_COPIES} copies, staggered by half an interval")  # fmt: skip


def _depending(targets: tuple[str, ...]) -> str:
    if not targets:
        return ""
    verb = "depends" if len(targets) == 1 else "depend"
    return f"; {number_of(len(targets), 'target')} of the screen {verb} on what it carries"


def check_transfers(view: View) -> Iterator[Finding]:
    """Stocks that are overdue for new food, by their temperature."""
    for stock in view.kept:
        if stock.last_transfer is None:
            continue
        days = (view.today - stock.last_transfer).days
        temperature = stock.temperature_C if stock.temperature_C is not None else USUAL_TEMPERATURE
        interval = flip_interval_days(temperature)
        if days > OVERDUE_FACTOR * interval:
            yield found_in(
                stock, "overdue", Severity.WARNING,
                f"last put on new food {days} days ago ({stock.last_transfer.isoformat()});"
                f" at {temperature:g} C every {interval:.0f} days",
                "look today whether it lives; transfer it",
            )  # fmt: skip
        elif days < 0:
            yield found_in(stock, "date", Severity.WARNING,
                           f"the last transfer lies in the future ({stock.last_transfer})", "correct the date")  # fmt: skip


def check_dates_missing(view: View) -> Iterator[Finding]:
    """Stocks never dated, once, where the list has dates."""
    undated = [s for s in view.kept if s.last_transfer is None]
    if undated and any(s.last_transfer for s in view.shelf.stocks):
        yield found_among(undated, "never-dated", Severity.NOTE,
                          f"{len(undated)} stock(s) have no date of transfer: {listed(s.name for s in undated)}",
                          "date them at the next transfer")  # fmt: skip


def check_places(view: View) -> Iterator[Finding]:
    """Stocks without a tray, once, where the list has trays."""
    lost = [s for s in view.kept if not s.tray]
    if lost and any(s.tray for s in view.shelf.stocks):
        yield found_among(lost, "no-place", Severity.NOTE,
                          f"{len(lost)} stock(s) have no tray: {listed(s.name for s in lost)}",
                          "find them, write it down")  # fmt: skip


def check_sources(view: View) -> Iterator[Finding]:
    """Stocks of which nothing says where they came from, once, where the list mostly says it."""
    kept = view.kept
    missing = [s for s in kept if not s.source]
    if missing and len(kept) - len(missing) >= USUALLY_FILLED * len(kept):
        yield found_among(missing, "no-source", Severity.NOTE,
                          f"{number_of(len(missing), 'stock does', 'stocks do')} not say where it came from:"
                          f" {listed(s.name for s in missing)}",
                          "ask whoever keeps them, and write it down before nobody knows")  # fmt: skip


def check_temperatures(view: View) -> Iterator[Finding]:
    """Temperatures at which no stock is kept."""
    for stock in view.kept:
        kept = stock.temperature_C
        if kept is not None and not COLDEST_C <= kept <= WARMEST_C:
            yield found_in(stock, "odd-temperature", Severity.WARNING, f"kept at {kept:g} C",
                           f"stocks are kept between {COLDEST_C:g} and {WARMEST_C:g} C: correct the cell")  # fmt: skip


def check_places_shared(view: View) -> Iterator[Finding]:
    """Two stocks at one place in one tray: one of the rows is wrong."""
    first: dict[tuple[str, str], Stock] = {}
    for stock in view.shelf.stocks:
        if not (stock.tray and stock.vial and stock.in_use):
            continue
        other = first.setdefault((stock.tray, stock.vial), stock)
        if other is not stock:
            yield found_among([stock, other], "place-twice", Severity.WARNING,
                              f"stands where {other.name} stands (row {other.row}): {stock.location}",
                              "look which of them is there, and correct the other")  # fmt: skip


def check_quarantine(view: View) -> Iterator[Finding]:
    """Newcomers in quarantine: what they are, once; and those that share a tray with the others."""
    kept = [s for s in view.shelf.stocks if is_quarantined(s)]
    if not kept:
        return
    trays = {s.tray: s for s in reversed(view.shelf.stocks) if s.tray and s.in_use}
    for stock in kept:
        if stock.tray in trays:
            yield found_in(stock, "quarantine-tray", Severity.WARNING,
                           f"in quarantine, and in tray {stock.tray} beside stocks in use ({trays[stock.tray].name})",
                           "keep newcomers in a tray, and if possible a room, of their own")  # fmt: skip
    yield found_among(kept, "quarantine", Severity.NOTE,
                      f"{number_of(len(kept), 'stock is', 'stocks are')} in quarantine: {listed(s.name for s in kept)}",
                      "look for mites at each transfer; release after two clean generations, and score them first")  # fmt: skip


def check_health(view: View) -> Iterator[Finding]:
    """Stocks that the list itself calls weak or infested."""
    for stock in view.kept:
        match = _WEAK.search(stock.status)
        if match:
            targets = view.targets_of(stock)
            more = (
                f"; {number_of(len(targets), 'target')} of the screen depend{'s' if len(targets) == 1 else ''} on what it carries"
                if targets
                else ""
            )
            yield found_in(stock, "unwell", Severity.WARNING, f"the list calls it '{match[0]}'{more}",
                           "expand it, clean it, or replace it before anything depends on it")  # fmt: skip


def check_wanted_out_of_use(view: View) -> Iterator[Finding]:
    """Stocks out of use that alone carry what a screen asks for."""
    if not view.wanted:
        return
    available = {e.symbol for s in view.usable for e in s.reading.elements}
    for stock in view.shelf.stocks:
        if stock.in_use:
            continue
        for element in stock.reading.elements:
            targets = view.wanted.get(element.symbol, ())
            if targets and element.symbol not in available:
                state = stock.status or "no copies"
                yield found_in(stock, "wanted-out-of-use", Severity.ERROR,
                               f"{element.symbol} is wanted by {listed(targets, 4)}, and only this stock carries it: {state}",
                               "release it, rebuild it or obtain it again before the screen begins")  # fmt: skip
