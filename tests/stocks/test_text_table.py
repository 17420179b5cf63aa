from __future__ import annotations

from pathlib import Path

import pytest

from crossplan.errors import Problem, StockListError
from crossplan.stocks.shelf import Shelf, read_stocks


def shelf_of(tmp_path: Path, content: bytes) -> Shelf:
    path = tmp_path / "stocks.csv"
    path.write_bytes(content)
    return read_stocks(path)


def names(shelf: Shelf) -> list[str]:
    return [s.name for s in shelf.stocks]


def coded(shelf: Shelf, code: str) -> list[Problem]:
    return [p for p in shelf.problems if p.code == code]


class TestQuotes:
    def test_a_quote_that_is_never_closed_costs_no_other_row(self, tmp_path: Path) -> None:
        shelf = shelf_of(
            tmp_path,
            b'stock,genotype,notes\nA,w[1118],"the old one\nB,w; Sp/CyO,\nC,"w; Sco/CyO; Dr/TM3, Sb",weak\nD,w[1118],\n',
        )
        assert names(shelf) == ["A", "B", "C", "D"]
        assert [s.row for s in shelf.stocks] == [2, 3, 4, 5]
        assert shelf.stocks[2].reading.canonical == "w; Sco/CyO; Dr/TM3, Sb"
        (problem,) = coded(shelf, "open-quote")
        assert problem.line == 2

    def test_a_cell_with_line_breaks_is_one_row(self, tmp_path: Path) -> None:
        shelf = shelf_of(tmp_path, b'stock,genotype,notes\nA,w[1118],"two\nlines"\nB,w; Sp/CyO,\n')
        assert [(s.name, s.row) for s in shelf.stocks] == [("A", 2), ("B", 3)]
        assert not coded(shelf, "open-quote")

    def test_quotes_in_the_middle_of_a_cell_are_kept(self, tmp_path: Path) -> None:
        shelf = shelf_of(tmp_path, b'stock,genotype,notes\nA,w[1118],called "the old one" here\nB,w,\n')
        assert shelf.stocks[0].notes == 'called "the old one" here'
        assert names(shelf) == ["A", "B"]


class TestEncodings:
    TEXT = "stock,genotype,notes\nA,w[1118],Jürgens Δ\nB,w; Sp/CyO,\n"

    @pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16", "utf-16-le", "utf-16-be"])
    def test_unicode_of_every_kind(self, tmp_path: Path, encoding: str) -> None:
        shelf = shelf_of(tmp_path, self.TEXT.encode(encoding))
        assert names(shelf) == ["A", "B"]
        assert shelf.stocks[0].notes == "Jürgens Δ"
        assert not coded(shelf, "encoding")

    @pytest.mark.parametrize(
        ("encoding", "end", "name"), [("cp1252", "\r\n", "Windows-1252"), ("mac_roman", "\r", "Mac Roman")]
    )
    def test_older_ones_are_read_and_named(self, tmp_path: Path, encoding: str, end: str, name: str) -> None:
        text = self.TEXT.replace(" Δ", "").replace("\n", end)
        shelf = shelf_of(tmp_path, text.encode(encoding))
        assert names(shelf) == ["A", "B"]
        assert shelf.stocks[0].notes == "Jürgens"
        (problem,) = coded(shelf, "encoding")
        assert name in problem.message
        assert problem.line == 2

    def test_what_is_no_text_is_refused(self, tmp_path: Path) -> None:
        with pytest.raises(StockListError, match="not a text file"):
            shelf_of(tmp_path, b"\x7fELF\x00\x01\x02" * 40)


class TestRemarks:
    def test_a_row_that_begins_with_a_hash_is_a_remark_and_counted(self, tmp_path: Path) -> None:
        shelf = shelf_of(tmp_path, b"stock,genotype\n# tray one,\nA,w[1118]\n#old,w; Sp/CyO\n")
        assert names(shelf) == ["A"]
        (problem,) = coded(shelf, "remarks")
        assert "2 rows" in problem.message

    def test_a_hash_before_a_number_is_the_number_of_a_stock(self, tmp_path: Path) -> None:
        shelf = shelf_of(tmp_path, b"#,genotype\n#12,w[1118]\n#13,w; Sp/CyO\n")
        assert names(shelf) == ["#12", "#13"]
        assert not coded(shelf, "remarks")


def test_a_very_long_cell_is_no_fault_of_the_program(tmp_path: Path) -> None:
    shelf = shelf_of(tmp_path, b"stock,genotype,notes\nA,w[1118]," + b"x" * 400_000 + b"\nB,w,\n")
    assert names(shelf) == ["A", "B"]
    with pytest.raises(StockListError, match="more than 1,000,000 characters"):
        shelf_of(tmp_path, b"stock,genotype,notes\nA,w[1118]," + b"x" * 1_500_000 + b"\nB,w,\n")
