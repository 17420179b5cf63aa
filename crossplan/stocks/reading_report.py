"""What was understood of a stock list, for a person who sits at her own spreadsheet with it.

Rows are counted as read, read with an assumption, without a known chromosome, and refused. Questions are asked once for each
symbol, with all the rows in which it stands.
"""

from __future__ import annotations

import csv
import io
import re
import zipfile
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from typing import Literal

from crossplan.errors import Problem, Severity
from crossplan.genetics.catalogue_lab import blank_element
from crossplan.genetics.notation import Reading
from crossplan.stocks.shelf import Shelf, Stock

Outcome = Literal["read", "assumed", "chromosome open", "refused"]
OUTCOMES: tuple[Outcome, ...] = ("read", "assumed", "chromosome open", "refused")
COLUMNS = ("sheet", "row", "stock", "cell", "outcome", "understood as", "remark", "closest reading")
#: signs that a spreadsheet takes for the beginning of a formula
_FORMULA_SIGNS = ("=", "+", "-", "@")


@dataclass(frozen=True)
class Question:
    """What one symbol leaves open: the question, the rows in which it stands, and what settles it."""

    symbol: str
    asks: str
    rows: tuple[int, ...]
    settles: str


@dataclass(frozen=True)
class ReadingReport:
    """The report of one stock list."""

    shelf: Shelf
    counts: dict[Outcome, int]
    questions: tuple[Question, ...]


def outcome_of(reading: Reading) -> Outcome:
    """Return how much of a genotype was understood."""
    if not reading.ok:
        return "refused"
    if reading.is_open:
        return "chromosome open"
    return "assumed" if reading.assumed else "read"


def reading_report(shelf: Shelf) -> ReadingReport:
    """Return what was understood of a shelf."""
    counts: dict[Outcome, int] = dict.fromkeys(OUTCOMES, 0)
    for stock in shelf.stocks:
        counts[outcome_of(stock.reading)] += 1
    return ReadingReport(shelf, counts, tuple(_questions(shelf)))


def _questions(shelf: Shelf) -> Iterator[Question]:
    open_rows: dict[str, list[int]] = {}
    unknown_rows: dict[str, list[int]] = {}
    for stock in shelf.stocks:
        if stock.reading.is_open:
            for element in stock.reading.elements:
                if not element.chromosome:
                    open_rows.setdefault(element.symbol, []).append(stock.row)
        for problem in stock.reading.problems:
            if problem.code == "unknown-symbol":
                symbol = problem.message.partition(" ")[0]
                unknown_rows.setdefault(symbol, []).append(stock.row)
    for symbol, rows in open_rows.items():
        yield Question(symbol, f"on which chromosome is {symbol}?", _in_order(rows), blank_element(symbol))
    for symbol, rows in unknown_rows.items():
        if symbol not in open_rows:
            yield Question(
                symbol, f"what is {symbol}? It is kept as itself, and taken to show, kill and cover nothing",
                _in_order(rows), "",
            )  # fmt: skip


def _in_order(rows: Iterable[int]) -> tuple[int, ...]:
    return tuple(sorted(set(rows)))


def report_table(report: ReadingReport, all_rows: bool = False) -> str:
    """Return the report as CSV: the rows that need an eye, or all of them."""
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(COLUMNS)
    writer.writerows(_rows(report, all_rows))
    return text.getvalue()


def report_workbook(report: ReadingReport, all_rows: bool = False) -> bytes:
    """Return the same table as an XLSX workbook."""
    import pandas

    content = io.BytesIO()
    table = pandas.DataFrame(list(_rows(report, all_rows)), columns=list(COLUMNS))
    table.to_excel(content, index=False, sheet_name="reading", engine="openpyxl")
    return _without_clock(content.getvalue())


def _without_clock(workbook: bytes) -> bytes:
    """Return a workbook without the hour at which it was made, so that the same table is the same bytes."""
    content = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(workbook)) as old, zipfile.ZipFile(content, "w", zipfile.ZIP_DEFLATED) as new:
        for name in old.namelist():
            part = old.read(name)
            if name == "docProps/core.xml":
                part = re.sub(rb"\d{4}-\d\d-\d\dT\d\d:\d\d:\d\dZ", b"1980-01-01T00:00:00Z", part)
            new.writestr(zipfile.ZipInfo(name), part, zipfile.ZIP_DEFLATED)
    return content.getvalue()


def _rows(report: ReadingReport, all_rows: bool) -> Iterator[tuple[str, ...]]:
    """Yield the rows; a cell that a spreadsheet would take for a formula begins with a blank."""
    for stock in report.shelf.stocks:
        if all_rows or outcome_of(stock.reading) != "read":
            for line in _lines(stock):
                yield tuple(f" {c}" if c.startswith(_FORMULA_SIGNS) else c for c in line)


def _lines(stock: Stock) -> Iterator[tuple[str, ...]]:
    """Yield a line for each remark on a stock; one without a remark where there is none."""
    reading = stock.reading
    head = (stock.sheet, str(stock.row), stock.name, stock.genotype, outcome_of(reading), reading.canonical)
    telling = [p for p in reading.problems if p.severity is not Severity.NOTE]
    if not telling:
        yield (*head, "", "")
    for problem in telling:
        yield (*head, _remark(problem, stock.genotype), problem.hint)


def _remark(problem: Problem, cell: str) -> str:
    where = cell[problem.start : problem.end]
    return f"{problem.message} (at '{where}')" if 0 < len(where) < len(cell) and len(where) <= 60 else problem.message
