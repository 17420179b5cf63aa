"""Proposed corrections: a new table beside the lab's own, with every changed cell and the reason.

Nothing is proposed that a person would have to decide. A genotype is changed only where its reader names one likely
reading, and the changed text is read without an error; a construct spelt one way in one row and another way in several
is written as in those; dates, temperatures and names are written in one form. The lab's file is never touched.
"""

from __future__ import annotations

import csv
import io
import re
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass

from crossplan.errors import Severity
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.element import Kind
from crossplan.genetics.notation import Reading, read_genotype
from crossplan.stocks.dates import possible_days
from crossplan.stocks.near_names import near_pairs
from crossplan.stocks.shelf import Shelf, Stock
from crossplan.stocks.table import Table

#: a spelling that so many rows share is taken for the right one
USUAL_ROWS = 2
#: at most so many slips are mended in one genotype
MOST_SLIPS = 4
_PERHAPS = re.compile(r"perhaps (?P<text>\S(?:[^;]*?\S)?)(?:; .*|, or .*)?")
_TEMPERATURE = re.compile(r"(\d{1,2})(?:[.,](\d))?\s*°?\s*[Cc]?")


@dataclass(frozen=True, slots=True)
class Correction:
    """One cell that would change: row and column of the spreadsheet, the stock, both texts, and why."""

    row: int
    column: str
    stock: str
    before: str
    after: str
    reason: str


def propose(shelf: Shelf, catalogue: Catalogue) -> tuple[Correction, ...]:
    """Return the proposed corrections in the order of the rows.

    Args:
        shelf: the list as it was read, from one sheet.
        catalogue: facts with which changed genotypes are read again.
    """
    proposed = [*_genotypes(shelf, catalogue), *_spellings(shelf, catalogue), *_names(shelf)]
    return tuple(sorted(proposed, key=lambda c: (c.row, c.column)))


def propose_cells(table: Table, columns: Mapping[str, str], shelf: Shelf) -> tuple[Correction, ...]:
    """Return cells of dates and temperatures that would be written in one form."""
    return (*_dates(table, columns, shelf), *_temperatures(table, columns))


def _genotypes(shelf: Shelf, catalogue: Catalogue) -> Iterator[Correction]:
    column = shelf.columns.get("genotype")
    if column is None:
        return
    known = shelf.elements()
    for stock in shelf.stocks:
        if stock.reading.ok:
            continue
        text, reasons = stock.genotype, []
        reading = stock.reading
        for _ in range(MOST_SLIPS):
            mended = _mended(text, reading)
            if mended is None:
                break
            text, reason = mended
            reasons.append(reason)
            reading = read_genotype(text, catalogue, known)
            if reading.ok:
                yield Correction(stock.row, column, stock.name, stock.genotype, text, "; ".join(reasons))
                break


def _mended(text: str, reading: Reading) -> tuple[str, str] | None:
    """Return the text with its first slip mended as the reader proposes, and what the reader said."""
    for problem in reading.problems:
        match = _PERHAPS.fullmatch(problem.hint)
        if problem.severity is not Severity.ERROR or match is None or problem.end <= problem.start:
            continue
        wrong = text[problem.start : problem.end]
        right = match["text"].strip("'")
        if right != wrong and not (set(right) & set(" ") and " " not in wrong):
            return text[: problem.start] + right + text[problem.end :], problem.message
    return None


def _spellings(shelf: Shelf, catalogue: Catalogue) -> Iterator[Correction]:
    """A construct that one row spells by a letter otherwise than several rows do."""
    column = shelf.columns.get("genotype")
    if column is None:
        return
    carriers: dict[str, list[Stock]] = {}
    sites: dict[str, str] = {}
    for stock in shelf.usable():
        for element in stock.reading.elements:
            if element.kind in (Kind.INSERTION, Kind.UNKNOWN):
                carriers.setdefault(element.symbol, []).append(stock)
                sites[element.symbol] = element.site
    for pair in near_pairs(carriers):
        rare, usual = sorted(pair, key=lambda s: len(carriers[s]))
        if sites[rare] != sites[usual] or len(carriers[rare]) > 1 or len(carriers[usual]) < USUAL_ROWS:
            continue
        stock = carriers[rare][0]
        wrong, right = rare.partition("@")[0], usual.partition("@")[0]
        text = stock.genotype.replace(wrong, right)
        if text != stock.genotype and read_genotype(text, catalogue, shelf.elements()).ok:
            rows = ", ".join(str(s.row) for s in carriers[usual][:4])
            yield Correction(stock.row, column, stock.name, stock.genotype, text, f"rows {rows} write {right}")


def _names(shelf: Shelf) -> Iterator[Correction]:
    column = shelf.columns.get("stock")
    if column is None:
        return
    twice = {p.line for p in shelf.problems if p.code == "name-twice"}
    for stock in shelf.stocks:
        if stock.row in twice:
            before = stock.name.removesuffix(f" (row {stock.row})")
            yield Correction(stock.row, column, before, before, stock.name, "the name stands twice in the list")


def _dates(table: Table, columns: Mapping[str, str], shelf: Shelf) -> Iterator[Correction]:
    column = columns.get("last_transfer")
    if column is None:
        return
    dated = {s.row: s for s in shelf.stocks if s.last_transfer is not None}
    for row in table.rows:
        text, stock = row.cells.get(column, ""), dated.get(row.number)
        if stock is None or stock.last_transfer is None or text == stock.last_transfer.isoformat():
            continue
        settled = "" if len(possible_days(text)) == 1 else "; day and month are settled by other dates of the column"
        yield Correction(row.number, column, stock.name, text, stock.last_transfer.isoformat(),
                         f"all dates in one form{settled}")  # fmt: skip


def _temperatures(table: Table, columns: Mapping[str, str]) -> Iterator[Correction]:
    column = columns.get("temperature")
    if column is None:
        return
    for row in table.rows:
        text = row.cells.get(column, "")
        match = _TEMPERATURE.fullmatch(text)
        if match:
            plain = match[1] + (f".{match[2]}" if match[2] not in (None, "0") else "")
            if plain != text:
                name = row.cells.get(columns.get("stock", ""), "")
                yield Correction(row.number, column, name, text, plain, "degrees C as a plain number")


def corrected_csv(table: Table, corrections: Iterable[Correction]) -> str:
    """Return the table as CSV with the corrections made; headings, order and every other cell as they are."""
    changed = {(c.row, c.column): c.after for c in corrections}
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(table.headings)
    for row in table.rows:
        writer.writerow([changed.get((row.number, h), row.cells.get(h, "")) for h in table.headings])
    return out.getvalue()


def corrections_csv(corrections: Iterable[Correction]) -> str:
    """Return the list of changed cells as CSV."""
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(("row", "column", "stock", "before", "after", "reason"))
    writer.writerows((c.row, c.column, c.stock, c.before, c.after, c.reason) for c in corrections)
    return out.getvalue()
