"""The shelf: stocks with what was understood of them.

A list is read in two passes. Elements whose chromosome some row settles (by site, balancer or all its fields) are known
afterwards, and settle rows that leave it open.
"""

from __future__ import annotations

import datetime as dt
import gc
import re
from collections.abc import Iterator, Mapping, Sequence
from contextlib import contextmanager
from dataclasses import dataclass, field, replace
from functools import cached_property
from pathlib import Path

from crossplan.errors import Problem, Severity, StockListError
from crossplan.genetics.catalogue import Catalogue, default_catalogue
from crossplan.genetics.element import Element
from crossplan.genetics.notation import Reading, read_genotype
from crossplan.stocks.columns import NAMES, guess_columns
from crossplan.stocks.dates import Order, order_of, possible_days, read_day
from crossplan.stocks.settings import ListSettings
from crossplan.stocks.table import Row, Table, read_all_tables, read_table

#: words in the status column that take a stock out of use
OUT_OF_USE = ("dead", "lost", "retired", "discarded", "gone", "quarantine")


@dataclass(frozen=True)
class Stock:
    """One row of the list: a culture that perpetuates itself, and what is known of it.

    `name` is unique; a second stock of the same name is called `NAME (row N)`.
    """

    name: str
    genotype: str
    reading: Reading
    row: int
    tray: str = ""
    vial: str = ""
    copies: int | None = None
    temperature_C: float | None = None
    last_transfer: dt.date | None = None
    who: str = ""
    source: str = ""
    status: str = ""
    notes: str = ""
    sheet: str = ""

    @property
    def location(self) -> str:
        """Where the stock stands, as the list says: `T01/3`."""
        return "/".join(p for p in (self.tray, self.vial) if p)

    @property
    def in_use(self) -> bool:
        """Whether flies can be taken from it."""
        status = self.status.lower()
        return self.copies != 0 and not any(re.search(rf"\b{word}\b", status) for word in OUT_OF_USE)


@dataclass(frozen=True)
class Shelf:
    """A whole stock list. `columns` says which heading was taken for what, `sheets` which sheets of a workbook were read."""

    path: str
    stocks: tuple[Stock, ...]
    problems: tuple[Problem, ...]
    columns: Mapping[str, str] = field(default_factory=dict)
    sheets: tuple[str, ...] = ()

    @property
    def rows_read(self) -> int:
        return len(self.stocks)

    @property
    def rows_refused(self) -> int:
        """Rows whose genotype was not understood, or leaves a chromosome open: nothing can be planned with them."""
        return sum(not s.reading.ok or s.reading.is_open for s in self.stocks)

    def usable(self) -> tuple[Stock, ...]:
        """Return the stocks that were understood, chromosomes and all, and are in use."""
        return tuple(s for s in self.stocks if s.reading.ok and not s.reading.is_open and s.in_use)

    @cached_property
    def _by_name(self) -> dict[str, Stock]:
        return {s.name: s for s in reversed(self.stocks)}

    def by_name(self, name: str) -> Stock | None:
        """Return the stock of that name."""
        return self._by_name.get(name)

    @cached_property
    def _elements(self) -> dict[str, Element]:
        return {e.symbol: e for s in reversed(self.stocks) for e in s.reading.elements}

    def elements(self) -> Mapping[str, Element]:
        """Return every element of the list by symbol, as the first row that has it reads it."""
        return self._elements


def read_stocks(path: Path, *, settings: ListSettings | None = None, catalogue: Catalogue | None = None) -> Shelf:
    """Return the shelf that a stock list describes; rows that cannot be read are kept with their problems.

    Args:
        path: CSV, TSV, XLSX or ODS.
        settings: sheet, order of dates, and headings where a guess would be wrong.
        catalogue: facts to read genotypes with; the shipped ones by default.

    Raises:
        StockListError: the file cannot be read at all.
    """
    how = settings or ListSettings()
    needed = [*how.columns.values()] if "genotype" in how.columns else [*NAMES["genotype"], *how.columns.values()]
    tables = read_all_tables(path, needed) if how.all_sheets else (read_table(path, needed, how.sheet),)
    sheets = [(table, guess_columns(table.headings, how.columns, table.path)) for table in tables]
    if not any(table.rows for table in tables):
        raise StockListError(f"{path} has column names but no stocks under them", "check that the list was saved")
    return _ShelfReader(str(path), sheets, how.date_order, catalogue or default_catalogue()).read()


#: what other rows of the list may settle
_QUESTIONS_OF_PLACE = frozenset(("assumed-place", "assumed-chromosome", "which-chromosome"))


class _ShelfReader:
    def __init__(
        self, path: str, sheets: Sequence[tuple[Table, dict[str, str]]], order: Order | None, catalogue: Catalogue
    ) -> None:
        self.path = path
        self.sheets = sheets
        self.given_order = order
        self.catalogue = catalogue
        self.problems: list[Problem] = [p for table, _ in sheets for p in table.problems]
        self._readings: dict[str, Reading] = {}
        self.table, self.columns = sheets[0]
        self._names = {_cell(row, columns, "stock") for table, columns in sheets for row in table.rows}

    def read(self) -> Shelf:
        with _no_search_for_cycles():
            return self._read()

    def _read(self) -> Shelf:
        texts = [[_genotype(row, columns) for row in table.rows] for table, columns in self.sheets]
        for text in dict.fromkeys(t for sheet in texts for t in sheet):
            self._readings[text] = read_genotype(text, self.catalogue)
        self._second_pass()
        stocks: list[Stock] = []
        seen: dict[str, int] = {}
        for (table, columns), of_sheet in zip(self.sheets, texts, strict=True):
            self.table, self.columns = table, columns
            order = self.given_order or order_of([self._cell(row, "last_transfer") for row in table.rows])
            for row, text in zip(table.rows, of_sheet, strict=True):
                stocks.append(self._stock(row, text, order, seen))
        return Shelf(
            self.path, tuple(stocks), tuple(self.problems), dict(self.sheets[0][1]),
            tuple(t.sheet for t, _ in self.sheets if t.sheet),
        )  # fmt: skip

    def _second_pass(self) -> None:
        known: dict[str, Element] = {}
        for reading in self._readings.values():
            if reading.ok and not reading.is_open and not any(p.code == "assumed-place" for p in reading.problems):
                for element in reading.elements:
                    if element.chromosome and not element.is_balancer:
                        known.setdefault(element.symbol, element)
        for text, reading in self._readings.items():
            # other assumptions are no question of place; such a row would only be settled by itself
            if not reading.ok or any(p.code in _QUESTIONS_OF_PLACE for p in reading.problems):
                again = read_genotype(text, self.catalogue, known)
                if again.ok and not again.is_open:
                    self._readings[text] = again

    def _cell(self, row: Row, kind: str) -> str:
        return _cell(row, self.columns, kind)

    def _stock(self, row: Row, text: str, order: Order | None, seen: dict[str, int]) -> Stock:
        reading = self._readings[text]
        for p in reading.problems:
            self.problems.append(
                replace(
                    p,
                    path=self.table.path,
                    line=row.number,
                    column=self.columns.get("genotype", "genotype"),
                    severity=Severity.ERROR if p.code == "which-chromosome" else p.severity,
                )  # fmt: skip
            )
        name = self._cell(row, "stock") or f"row {row.number}"
        if name in seen:
            self._problem(
                row, "stock", "name-twice", f"stock '{name}' stands in row {seen[name]} too", "give it another name"
            )
            while name in seen or name in self._names:
                name = f"{name} (row {row.number})"
        seen.setdefault(name, row.number)
        return Stock(
            name, text, reading, row.number,
            tray=self._cell(row, "tray"), vial=self._cell(row, "vial"),
            copies=self._number(row, "copies"), temperature_C=self._temperature(row),
            last_transfer=self._date(row, order), sheet=self.table.sheet, who=self._cell(row, "who"), source=self._cell(row, "source"),
            status=self._cell(row, "status"), notes=self._cell(row, "notes"),
        )  # fmt: skip

    def _problem(self, row: Row, kind: str, code: str, message: str, hint: str) -> None:
        self.problems.append(
            Problem(code, Severity.WARNING, message, hint, self.table.path, row.number, self.columns.get(kind, kind))
        )

    def _number(self, row: Row, kind: str) -> int | None:
        text = self._cell(row, kind)
        if not text:
            return None
        if text.isdecimal():
            return int(text)
        self._problem(row, kind, "not-a-number", f"'{text}' is no number of copies", "write a whole number")
        return None

    def _temperature(self, row: Row) -> float | None:
        text = self._cell(row, "temperature")
        match = re.fullmatch(r"(\d{1,2}(?:[.,]\d)?)\s*(?:°?\s*C)?", text) if text else None
        if match:
            return float(match[1].replace(",", "."))
        if text and text.upper() not in ("RT", "ROOM"):
            self._problem(
                row, "temperature", "not-a-temperature", f"'{text}' is no temperature", "write degrees C, such as 18"
            )
        return 22.0 if text.upper() in ("RT", "ROOM") else None

    def _date(self, row: Row, order: Order | None) -> dt.date | None:
        text = self._cell(row, "last_transfer")
        if not text:
            return None
        day = read_day(text, order)
        if day is None:
            two = possible_days(text)
            meant = " or ".join(d.isoformat() for d in two)
            self._problem(
                row, "last_transfer", "date", f"'{text}' could be {meant}" if two else f"'{text}' is no date",
                "write it as 2026-11-03 (year-month-day)",
            )  # fmt: skip
        return day


@contextmanager
def _no_search_for_cycles() -> Iterator[None]:
    """Let Python not look for cycles meanwhile: a long list makes many values and no cycle, and looking costs a third."""
    looked = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if looked:
            gc.enable()


def _cell(row: Row, columns: Mapping[str, str], kind: str) -> str:
    heading = columns.get(kind)
    return row.cells.get(heading, "") if heading else ""


def _genotype(row: Row, columns: Mapping[str, str]) -> str:
    """Return the genotype of a row, put together where each chromosome has a column of its own."""
    if "genotype" in columns:
        return _cell(row, columns, "genotype")
    written = [_cell(row, columns, c) for c in ("X", "2", "3", "4")]
    if not any(written):
        return ""
    fields = [text or "+" for text in written]
    return "; ".join(fields if fields[3] != "+" else fields[:3])
