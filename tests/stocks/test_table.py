"""Tables as people keep them: delimiters, encodings, title rows, and what is refused."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from crossplan.errors import Severity, StockListError
from crossplan.stocks.table import Table, read_column, read_table


def written(folder: Path, content: str | bytes, name: str = "list.csv") -> Path:
    path = folder / name
    path.write_bytes(content.encode("utf-8") if isinstance(content, str) else content)
    return path


def numbered(table: Table, column: str = "stock") -> list[tuple[int, str]]:
    return [(row.number, row.cells[column]) for row in table.rows]


# -- text files --------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "genotypes"),
    [
        ('stock,genotype\nA,"w; TM3, Sb/TM6B, Tb"\nB,y\n', ["w; TM3, Sb/TM6B, Tb", "y"]),
        ('stock;genotype\nA;"w[1118]; Sco/CyO"\nB;"y; If/CyO"\n', ["w[1118]; Sco/CyO", "y; If/CyO"]),
        ("stock\tgenotype\nA\tw; Sco/CyO; TM3, Sb/TM6B\nB\ty, w\n", ["w; Sco/CyO; TM3, Sb/TM6B", "y, w"]),
        ("stock|genotype\nA|w; TM3, Sb/TM6B, Tb\nB|y; +; +\n", ["w; TM3, Sb/TM6B, Tb", "y; +; +"]),
    ],
    ids=["comma", "semicolon", "tab", "bar"],
)
def test_the_delimiter_is_found_although_genotypes_are_full_of_others(
    text: str, genotypes: list[str], tmp_path: Path
) -> None:
    table = read_table(written(tmp_path, text))
    assert table.headings == ("stock", "genotype")
    assert [row.cells["genotype"] for row in table.rows] == genotypes


def test_titles_blanks_comments_and_repeated_headers_are_left_out_and_rows_keep_their_numbers(tmp_path: Path) -> None:
    text = (
        "Stocks of the cold room\n"  # 1
        "\n"
        "# counted in spring\n"  # 3
        "stock,genotype\n"
        "A,w\n"  # 5
        "\n"
        ",\n"  # 7
        "# gone,y\n"
        "stock,genotype\n"  # 9
        "B,y\n"
    )
    table = read_table(written(tmp_path, text))
    assert table.headings == ("stock", "genotype")
    assert numbered(table) == [(5, "A"), (10, "B")]


def test_a_cell_keeps_its_line_breaks(tmp_path: Path) -> None:
    table = read_table(written(tmp_path, 'stock,genotype,notes\nA,w,"one\ntwo"\nB,y,\n'))
    assert [row.cells["notes"] for row in table.rows] == ["one\ntwo", ""]
    assert [row.cells["stock"] for row in table.rows] == ["A", "B"]


def test_a_row_under_a_cell_with_line_breaks_has_the_number_that_the_spreadsheet_shows(tmp_path: Path) -> None:
    text = 'stock,genotype,notes\nA,w,"one\ntwo\nthree"\nB,y,\n\nC,v,\n'
    assert numbered(read_table(written(tmp_path, text))) == [(2, "A"), (3, "B"), (5, "C")]


@pytest.mark.parametrize("sign", ["\x0b", "\x0c", "\u2028"], ids=["vertical tab", "form feed", "line separator"])
def test_an_unusual_line_sign_inside_a_cell_does_not_end_the_row(sign: str, tmp_path: Path) -> None:
    table = read_table(written(tmp_path, f"stock,genotype,notes\nA,w,one{sign}two\nB,y,\n"))
    assert numbered(table) == [(2, "A"), (3, "B")]


def test_a_column_of_stock_numbers_may_be_headed_by_a_number_sign(tmp_path: Path) -> None:
    table = read_table(written(tmp_path, "#,genotype\n1,w\n2,y\n"))
    assert table.headings == ("#", "genotype")
    assert numbered(table, "#") == [(2, "1"), (3, "2")]


@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"], ids=["LF", "CRLF", "CR"])
def test_any_line_end_will_do(end: str, tmp_path: Path) -> None:
    table = read_table(written(tmp_path, end.join(["stock,genotype", "A,w", "B,y", ""])))
    assert numbered(table) == [(2, "A"), (3, "B")]


@pytest.mark.parametrize(
    ("content", "name"),
    [
        ("\ufeffstock,genotype\nJörg's,w\n".encode(), "Jörg's"),
        ("stock\tgenotype\r\nJörg's\tw; Sco/CyO\r\n".encode("utf-16"), "Jörg's"),
        (b"\xfe\xff" + "stock\tgenotype\r\nβ-line\tw\r\n".encode("utf-16-be"), "β-line"),
    ],
    ids=["UTF-8 with mark", "UTF-16", "UTF-16 big end first"],
)
def test_unicode_files_are_read_without_a_word(content: bytes, name: str, tmp_path: Path) -> None:
    table = read_table(written(tmp_path, content))
    assert table.headings == ("stock", "genotype")
    assert numbered(table) == [(2, name)]
    assert table.problems == ()


def test_an_old_encoding_is_read_and_said_with_its_row(tmp_path: Path) -> None:
    table = read_table(written(tmp_path, "stock,genotype,who\nA,w,Ann\nB,y,Jörg\n".encode("cp1252")))
    assert table.rows[1].cells["who"] == "Jörg"
    (problem,) = table.problems
    assert (problem.code, problem.severity, problem.line) == ("encoding", Severity.WARNING, 3)
    assert "Windows-1252" in problem.message


def test_leading_zeros_stay(tmp_path: Path) -> None:
    assert numbered(read_table(written(tmp_path, "stock,genotype\n007,w\n0070,y\n"))) == [(2, "007"), (3, "0070")]


def test_headings_without_a_name_or_with_the_same_one_are_told_apart(tmp_path: Path) -> None:
    table = read_table(written(tmp_path, "stock,genotype,note,note,\nA,w,first,second,third\n"))
    assert table.headings == ("stock", "genotype", "note", "note (2)", "column 5")
    assert list(table.rows[0].cells.values()) == ["A", "w", "first", "second", "third"]


def test_a_short_row_has_empty_cells_at_its_end(tmp_path: Path) -> None:
    table = read_table(written(tmp_path, "stock,genotype,notes\nA\nB,y,fine\n"))
    assert table.rows[0].cells == {"stock": "A", "genotype": "", "notes": ""}


def test_a_needed_heading_marks_the_header_under_a_title(tmp_path: Path) -> None:
    path = written(tmp_path, "Our list,2026\nsymbol,where\nX,T1\n")
    assert read_table(path, ["symbol"]).headings == ("symbol", "where")
    assert read_table(path).headings == ("Our list", "2026")


# -- refused -----------------------------------------------------------------------------------------------------


def test_a_missing_file_is_refused_with_the_near_names(tmp_path: Path) -> None:
    written(tmp_path, "stock,genotype\nA,w\n", "stocks.csv")
    written(tmp_path, "x", "photograph.txt")
    with pytest.raises(StockListError, match="there is no file .*stoks.csv") as caught:
        read_table(tmp_path / "stoks.csv")
    assert "stocks.csv" in caught.value.hint
    assert "photograph" not in caught.value.hint


def test_a_missing_folder_is_refused(tmp_path: Path) -> None:
    with pytest.raises(StockListError, match="there is no file") as caught:
        read_table(tmp_path / "nowhere" / "stocks.csv")
    assert caught.value.hint == "check the name"


def test_a_folder_is_refused(tmp_path: Path) -> None:
    with pytest.raises(StockListError, match="is a folder, not a stock list"):
        read_table(tmp_path)


@pytest.mark.parametrize(
    ("content", "words"),
    [
        (b"", r"list\.csv is empty"),
        (b"\n  \n\n", "holds only blank lines"),
        (b" , \n,\n", "holds no rows"),
        (b"# nothing but a comment\n", "holds no rows"),
        (b"\x89PNG\r\n\x1a\n\x00\x00\x00\x0d", "is not a text file"),
        (b"PK\x03\x04 a workbook", "a workbook or an archive under a wrong ending"),
    ],
    ids=["empty", "blank", "only delimiters", "only comments", "binary", "workbook as csv"],
)
def test_what_is_no_table_is_refused(content: bytes, words: str, tmp_path: Path) -> None:
    with pytest.raises(StockListError, match=words) as caught:
        read_table(written(tmp_path, content))
    assert caught.value.hint


# -- one column --------------------------------------------------------------------------------------------------


def test_a_column_is_read_without_its_empty_cells(tmp_path: Path) -> None:
    path = written(tmp_path, "line,Geno\nA,w\nB,\nC,y\n")
    assert read_column(path, "geno") == ["w", "y"]


def test_a_column_that_is_not_there_is_refused_with_the_closest(tmp_path: Path) -> None:
    path = written(tmp_path, "stock,genotypes,notes\nA,w,x\n")
    with pytest.raises(StockListError, match="no column 'genotype'; its columns are stock, genotypes, notes") as caught:
        read_column(path, "genotype")
    assert "'genotypes'" in caught.value.hint


# -- workbooks ---------------------------------------------------------------------------------------------------

Grid = list[list[str | int | None]]


def write_xlsx(path: Path, sheets: dict[str, Grid]) -> None:
    import openpyxl

    book = openpyxl.Workbook()
    book.remove(book.worksheets[0])
    for title, grid in sheets.items():
        sheet = book.create_sheet(title)
        for r, row in enumerate(grid, start=1):
            for c, value in enumerate(row, start=1):
                if value is not None:
                    sheet.cell(r, c, value)
    book.save(path)


def write_ods(path: Path, sheets: dict[str, Grid]) -> None:
    from odf.opendocument import OpenDocumentSpreadsheet
    from odf.table import Table as Sheet
    from odf.table import TableCell, TableRow
    from odf.text import P

    document = OpenDocumentSpreadsheet()
    for title, grid in sheets.items():
        sheet = Sheet(name=title)
        for row in grid:
            line = TableRow()
            for value in row or [None]:
                if value is None:
                    line.addElement(TableCell())
                    continue
                number = isinstance(value, int)
                cell = TableCell(valuetype="float", value=str(value)) if number else TableCell(valuetype="string")
                for part in str(value).split("\n"):
                    cell.addElement(P(text=part))
                line.addElement(cell)
            sheet.addElement(line)
        document.spreadsheet.addElement(sheet)
    document.save(str(path))


Write = Callable[[Path, dict[str, Grid]], None]
BOTH = pytest.mark.parametrize(("ending", "write"), [("xlsx", write_xlsx), ("ods", write_ods)], ids=["xlsx", "ods"])


@BOTH
def test_a_workbook_keeps_zeros_words_and_line_breaks(ending: str, write: Write, tmp_path: Path) -> None:
    path = tmp_path / f"list.{ending}"
    write(path, {"stocks": [["stock", "genotype", "notes"], ["007", "w", "one\ntwo"], ["NA", "y", None], [12, "v", 3]]})
    table = read_table(path)
    assert table.headings == ("stock", "genotype", "notes")
    assert numbered(table) == [(2, "007"), (3, "NA"), (4, "12")]
    assert [row.cells["notes"] for row in table.rows] == ["one\ntwo", "", "3"]


@BOTH
def test_a_workbook_has_titles_blanks_and_comments_left_out(ending: str, write: Write, tmp_path: Path) -> None:
    path = tmp_path / f"list.{ending}"
    grid: Grid = [
        ["Cold room"],
        [],
        ["stock", "genotype"],
        ["A", "w"],
        [],
        ["# gone", "f"],
        ["stock", "genotype"],
        ["B", "y"],
    ]
    write(path, {"stocks": grid})
    assert numbered(read_table(path)) == [(4, "A"), (8, "B")]


@BOTH
def test_the_first_filled_sheet_is_taken_unless_one_is_named(ending: str, write: Write, tmp_path: Path) -> None:
    path = tmp_path / f"list.{ending}"
    head: list[str | int | None] = ["stock", "genotype"]
    write(path, {"cover": [], "cold": [head, ["A", "w"]], "warm": [head, ["B", "y"]]})
    assert numbered(read_table(path)) == [(2, "A")]
    assert numbered(read_table(path, sheet="warm")) == [(2, "B")]


@BOTH
def test_a_workbook_without_a_filled_sheet_is_refused(ending: str, write: Write, tmp_path: Path) -> None:
    path = tmp_path / f"list.{ending}"
    write(path, {"one": [], "two": []})
    with pytest.raises(StockListError, match="holds no filled sheet"):
        read_table(path)
