"""The sheets of a workbook as rows of text, as the spreadsheet program shows them: XLSX and ODS.

A cell that is merged downwards counts for all its rows. Numbers with leading noughts by their format keep them.
"""

from __future__ import annotations

import datetime as dt
import re
import zipfile
from pathlib import Path
from typing import Any

from crossplan.errors import StockListError
from crossplan.stocks.text_table import Grid

KINDS = {".xlsx": "xlsx", ".xlsm": "xlsx", ".ods": "ods"}
#: a number format that only pads with noughts
_PADDED = re.compile(r"0+")
#: ODS files repeat an empty row or cell to the end of the sheet by one mark
_MOST_REPEATS = 100_000


def read_sheets(path: Path, kind: str) -> dict[str, Grid]:
    """Return every sheet by name, in the order of the workbook.

    Raises:
        StockListError: it is no readable workbook.
    """
    try:
        return _xlsx(path) if kind == "xlsx" else _ods(path)
    except (zipfile.BadZipFile, KeyError, ValueError, EOFError, TypeError) as error:
        raise StockListError(
            f"{path} is no readable workbook ({error})", "open it and save it again, or export CSV"
        ) from error


def cell_text(value: object, number_format: str = "") -> str:
    """Return a cell as text: dates in ISO form, whole numbers without a point, noughts that the format adds."""
    if value is None or value != value:
        return ""
    if isinstance(value, bool):
        return "TRUE" if value else "FALSE"
    if isinstance(value, dt.datetime):
        return value.date().isoformat()
    if isinstance(value, float) and value.is_integer():
        value = int(value)
    if isinstance(value, int) and _PADDED.fullmatch(number_format):
        return str(value).zfill(len(number_format))
    return str(value)


# -- XLSX --------------------------------------------------------------------------------------------------------


def _xlsx(path: Path) -> dict[str, Grid]:
    import openpyxl

    book = openpyxl.load_workbook(path)
    values: Any = None
    grids = {}
    for sheet in book.worksheets:
        formulas = [(c.row, c.column) for row in sheet.iter_rows() for c in row if c.data_type == "f"]
        if formulas and values is None:
            values = openpyxl.load_workbook(path, data_only=True)
        grids[sheet.title] = _xlsx_grid(sheet, {at: values[sheet.title].cell(*at).value for at in formulas})
    return grids


def _xlsx_grid(sheet: Any, results: dict[tuple[int, int], object]) -> Grid:
    """Return the cells of a sheet; a formula stands for its result, or for itself where none was saved."""
    grid = [[cell_text(c.value, c.number_format or "") for c in row] for row in sheet.iter_rows()]
    for (row, column), result in results.items():
        if result is not None:
            grid[row - 1][column - 1] = cell_text(result, sheet.cell(row, column).number_format or "")
    for merged in sheet.merged_cells.ranges:
        _spread(grid, merged.min_row - 1, merged.max_row - 1, merged.min_col - 1)
    return grid


def _spread(grid: Grid, first: int, last: int, column: int) -> None:
    """Write a cell that is merged downwards into each of its rows."""
    for row in range(first + 1, min(last, len(grid) - 1) + 1):
        if column < len(grid[row]) and not grid[row][column]:
            grid[row][column] = grid[first][column]


# -- ODS ---------------------------------------------------------------------------------------------------------


def _ods(path: Path) -> dict[str, Grid]:
    from odf import opendocument
    from odf.table import Table

    content = opendocument.load(str(path)).spreadsheet
    if content is None:
        raise ValueError("it holds no sheets")
    return {str(table.getAttribute("name")): _ods_grid(table) for table in content.getElementsByType(Table)}


def _ods_grid(table: Any) -> Grid:
    from odf.table import TableRow

    grid: Grid = []
    spans: list[tuple[int, int, int]] = []
    for row in table.getElementsByType(TableRow):
        cells, here = _ods_row(row)
        spans += [(len(grid), len(grid) + rows - 1, column) for column, rows in here]
        repeats = int(row.getAttribute("numberrowsrepeated") or 1)
        if any(cells) or repeats < _MOST_REPEATS:
            grid += [list(cells) for _ in range(repeats)]
    while grid and not any(grid[-1]):
        grid.pop()
    width = max((len(r) for r in grid), default=0)
    grid = [r + [""] * (width - len(r)) for r in grid]
    for first, last, column in spans:
        _spread(grid, first, last, column)
    return grid


def _ods_row(row: Any) -> tuple[list[str], list[tuple[int, int]]]:
    """Return the cells of a row, and the column and height of each that is merged downwards."""
    cells: list[str] = []
    merged: list[tuple[int, int]] = []
    for node in row.childNodes:
        kind = node.qname[1]
        if kind not in ("table-cell", "covered-table-cell"):
            continue
        rows = int(node.getAttribute("numberrowsspanned") or 1) if kind == "table-cell" else 1
        if rows > 1:
            merged.append((len(cells), rows))
        repeats = int(node.getAttribute("numbercolumnsrepeated") or 1)
        text = _ods_text(node)
        cells += [text] * (repeats if text or repeats < 1000 else 1)
    while cells and not cells[-1]:
        cells.pop()
    return cells, merged


def _ods_text(node: Any) -> str:
    from odf import teletype

    if node.getAttribute("valuetype") == "date":
        return str(node.getAttribute("datevalue"))[:10]
    # remarks pinned to a cell are children of another kind
    return "\n".join(teletype.extractText(p) for p in node.childNodes if p.qname[1] == "p")
