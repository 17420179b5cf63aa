"""Workbooks: the same list as XLSX and as ODS reads like the CSV file."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest

from crossplan.errors import StockListError
from crossplan.stocks.settings import ListSettings
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
        read_stocks(tmp_path / "list.xlsx", settings=ListSettings("other"))


def test_a_cell_that_is_merged_downwards_counts_for_its_rows(tmp_path: Path) -> None:
    import openpyxl

    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    for row in (["tray", "stock", "genotype"], ["T1", "A", "w"], [None, "B", "w"], [None, "C", "w"], ["T2", "D", "w"]):
        sheet.append(row)
    sheet.merge_cells("A2:A4")
    book.save(tmp_path / "list.xlsx")
    assert [s.tray for s in read_stocks(tmp_path / "list.xlsx").stocks] == ["T1", "T1", "T1", "T2"]


def test_noughts_that_only_the_number_format_shows_are_kept(tmp_path: Path) -> None:
    import openpyxl

    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.append(["stock", "genotype"])
    sheet.append([7, "w"])
    sheet["A2"].number_format = "0000"
    book.save(tmp_path / "list.xlsx")
    assert [s.name for s in read_stocks(tmp_path / "list.xlsx").stocks] == ["0007"]


def write_three_sheets(path: Path) -> None:
    import openpyxl

    book = openpyxl.Workbook()
    first = book.active
    assert first is not None
    first.title = "people"
    first.append(["who", "telephone"])
    first.append(["Ida", 12])
    for title, names in (("cold room", "AB"), ("warm room", "CA")):
        sheet = book.create_sheet(title)
        sheet.append(["stock", "genotype"])
        for name in names:
            sheet.append([name, "w; Sp/CyO"])
    book.save(path)


def test_the_sheet_with_genotypes_is_found_and_the_others_are_named(tmp_path: Path) -> None:
    write_three_sheets(tmp_path / "list.xlsx")
    shelf = read_stocks(tmp_path / "list.xlsx")
    assert shelf.sheets == ("cold room",)
    (note,) = [p for p in shelf.problems if p.code == "other-sheets"]
    assert "people, warm room" in note.message


def test_all_sheets_are_one_shelf(tmp_path: Path) -> None:
    write_three_sheets(tmp_path / "list.xlsx")
    shelf = read_stocks(tmp_path / "list.xlsx", settings=ListSettings(all_sheets=True))
    assert shelf.sheets == ("cold room", "warm room")
    assert [(s.sheet, s.name) for s in shelf.stocks][:3] == [("cold room", "A"), ("cold room", "B"), ("warm room", "C")]
    assert shelf.stocks[3].name == "A (row 3)"
    (twice,) = [p for p in shelf.problems if p.code == "name-twice"]
    assert "sheet warm room" in twice.path


def test_a_formula_without_a_saved_result_is_not_taken_for_wild_type(tmp_path: Path) -> None:
    import openpyxl

    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    for row in (["stock", "genotype"], ["A", "=B9"], ["B", "w"]):
        sheet.append(row)
    book.save(tmp_path / "list.xlsx")
    first, second = read_stocks(tmp_path / "list.xlsx").stocks
    assert [p.code for p in first.reading.problems] == ["formula"]
    assert second.reading.ok


def test_a_row_without_any_chromosome_is_not_wild_type(tmp_path: Path) -> None:
    (tmp_path / "list.csv").write_text("stock,X,2,3\nA,w,,\nB,,,\n")
    first, second = read_stocks(tmp_path / "list.csv").stocks
    assert first.reading.canonical == "w; +; +"
    assert [p.code for p in second.reading.problems] == ["empty"]
