"""Rules about the list itself: rows that are not understood, questions that stay open, cells that cannot be used."""

from __future__ import annotations

from collections.abc import Iterator

from crossplan.errors import Problem, Severity
from crossplan.genetics.element import Kind
from crossplan.stocks.finding import Finding, View, found_among, found_in, listed, number_of
from crossplan.stocks.shelf import Stock

#: questions that another rule of the audit puts better
SAID_ELSEWHERE = frozenset(("balancer-twice", "which-chromosome"))
#: assumptions that hold nearly always, so they are only worth knowing
USUAL = frozenset(("unknown-symbol", "assumed-marker"))
#: characters of the text that are shown beside a message
MOST_SHOWN = 40


def check_unreadable(view: View) -> Iterator[Finding]:
    """A genotype that is not understood, or that cannot be: wrong chromosome, three homologues, unclosed bracket."""
    for stock in view.shelf.stocks:
        for problem in stock.reading.problems:
            if problem.severity is Severity.ERROR:
                where = stock.genotype[problem.start : problem.end]
                shown = f" (at '{where}')" if 0 < len(where) <= MOST_SHOWN else ""
                yield found_in(stock, problem.code, Severity.ERROR, problem.message + shown, problem.hint)


def check_open_chromosomes(view: View) -> Iterator[Finding]:
    """Elements of which nothing says the chromosome, once for each element with the question."""
    groups: dict[str, list[tuple[Stock, Problem]]] = {}
    for stock in view.shelf.stocks:
        for problem in stock.reading.problems:
            if problem.code == "which-chromosome" and problem.severity is not Severity.ERROR:
                where = stock.genotype[problem.start : problem.end]
                groups.setdefault(where, []).append((stock, problem))
    for where, rows in groups.items():
        stocks = [stock for stock, _ in rows]
        first = rows[0][1]
        more = f" ({number_of(len(stocks))}: {listed(s.name for s in stocks)})" if len(stocks) > 1 else ""
        yield found_among(
            stocks, "which-chromosome", Severity.ERROR,
            f"nothing says which chromosome {where} is on: which is it?{more}",
            f"{first.hint}; or settle it once as an [[element]] of the lab's catalogue",
        )  # fmt: skip


def check_assumptions(view: View) -> Iterator[Finding]:
    """What was assumed, once for each question and not once for each row."""
    groups: dict[tuple[str, str, str], list[Stock]] = {}
    for stock in view.usable:
        for problem in stock.reading.problems:
            asks = problem.severity is Severity.WARNING and problem.code not in SAID_ELSEWHERE
            if asks or problem.code == "unknown-symbol":
                groups.setdefault((problem.code, problem.message, problem.hint), []).append(stock)
    for (code, message, hint), stocks in groups.items():
        more = f" ({len(stocks)} stocks)" if len(stocks) > 1 else ""
        severity = Severity.NOTE if code in USUAL else Severity.WARNING
        yield found_among(stocks, code, severity, message + more, hint)


def check_rows(view: View) -> Iterator[Finding]:
    """Names that stand twice, dates and numbers that cannot be read, cells that may have slipped."""
    genotype = view.shelf.columns.get("genotype", "genotype")
    for problem in view.shelf.problems:
        if problem.column == genotype:
            continue
        stock = view.by_row.get(problem.line)
        name = stock.name if stock is not None else ""
        yield Finding(problem.code, problem.severity, name, problem.line, problem.message, problem.hint,
                      stocks=(name,) if name else ())  # fmt: skip


def check_two_places(view: View) -> Iterator[Finding]:
    """One name on two chromosomes in different rows: two insertions under one name, or a slip of the semicolon."""
    places: dict[str, dict[str, list[Stock]]] = {}
    for stock, fly in view.flies:
        for chromosome, homologue in fly.homologues():
            for element in homologue.elements:
                if element.kind in (Kind.INSERTION, Kind.UNKNOWN) and not element.site and homologue.balancer is None:
                    places.setdefault(element.symbol, {}).setdefault(chromosome, []).append(stock)
    for symbol, by_chromosome in places.items():
        if len(by_chromosome) > 1:
            told = "; ".join(f"on {c}: {listed((s.name for s in v), 4)}" for c, v in sorted(by_chromosome.items()))
            wanted = symbol in view.wanted
            fewest = min(by_chromosome.values(), key=len)
            yield found_among(
                [*fewest, *(s for v in by_chromosome.values() for s in v)], "two-places",
                Severity.WARNING if wanted else Severity.NOTE,
                f"{symbol} stands on different chromosomes ({told})" + (", and a screen asks for it" if wanted else ""),
                "give the insertions different names if there are two; else correct the row that is wrong",
            )  # fmt: skip
