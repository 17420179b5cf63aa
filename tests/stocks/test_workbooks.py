"""Workbooks: the same list as XLSX and as ODS reads like the CSV file."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest

from crossplan.errors import StockListError
from crossplan.stocks.shelf import read_stocks

ROWS = [
    ["stock", "genotype", "last flip", "copies"],
    ["007", "w[1118]; AD-K12@attP40/CyO", dt.datetime(2026, 11, 3), 2],
    ["8", "w[1118]; +; DBD-Q07@attP2", dt.datetime(2026, 10, 4), 3],
]


def write_xlsx(path: Path) -> None:
    import openpyxl

    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.append(["Stocks of the cold room"])
    for row in ROWS:
        sheet.append(row)
    book.save(path)


def write_ods(path: Path) -> None:
    from odf.opendocument import OpenDocumentSpreadsheet
    from odf.table import Table, TableCell, TableRow
    from odf.text import P

    document = OpenDocumentSpreadsheet()
    table = Table(name="stocks")
    for row in ROWS:
        line = TableRow()
        for value in row:
            if isinstance(value, dt.datetime):
                cell = TableCell(valuetype="date", datevalue=value.date().isoformat())
            elif isinstance(value, int):
                cell = TableCell(valuetype="float", value=str(value))
            else:
                cell = TableCell(valuetype="string")
            cell.addElement(P(text=str(value)))
            line.addElement(cell)
        table.addElement(line)
    document.spreadsheet.addElement(table)
    document.save(str(path))


@pytest.mark.parametrize(("name", "write"), [("list.xlsx", write_xlsx), ("list.ods", write_ods)])
def test_a_workbook_reads_like_a_text_file(name: str, write: object, tmp_path: Path) -> None:
    path = tmp_path / name
    write(path)  # type: ignore[operator]
    shelf = read_stocks(path)
    assert [s.name for s in shelf.stocks] == ["007", "8"]
    assert [s.last_transfer for s in shelf.stocks] == [dt.date(2026, 11, 3), dt.date(2026, 10, 4)]
    assert [s.copies for s in shelf.stocks] == [2, 3]
    assert all(s.reading.ok for s in shelf.stocks)


def test_rows_have_the_numbers_that_the_spreadsheet_shows(tmp_path: Path) -> None:
    write_xlsx(tmp_path / "list.xlsx")
    assert [s.row for s in read_stocks(tmp_path / "list.xlsx").stocks] == [3, 4]


def test_a_broken_workbook_is_refused(tmp_path: Path) -> None:
    (tmp_path / "list.xlsx").write_bytes(b"PK\x03\x04 cut short")
    with pytest.raises(StockListError, match="no readable workbook"):
        read_stocks(tmp_path / "list.xlsx")


def test_a_sheet_that_is_not_there_is_refused(tmp_path: Path) -> None:
    write_xlsx(tmp_path / "list.xlsx")
    with pytest.raises(StockListError, match="has no sheet 'other'"):
        read_stocks(tmp_path / "list.xlsx", sheet="other")
