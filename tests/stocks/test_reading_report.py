from __future__ import annotations

import csv
import io
import zipfile
from pathlib import Path

import pytest

from crossplan.stocks.reading_report import ReadingReport, reading_report, report_table, report_workbook
from crossplan.stocks.shelf import read_stocks

ROWS = """stock|genotype
A|w[1118]; AD-K12@attP40/CyO
B|w; Sp/CyO; Dr/TM3
C|w; kx-GAL4
D|w; kx-GAL4, UAS-kz
E|w; TM6Bb/+; +
F|+; UAS-kq/CyO; qqx7
G|w; qqx7/CyO
"""


def report_of(tmp_path: Path) -> ReadingReport:
    path = tmp_path / "stocks.csv"
    path.write_text(ROWS)
    return reading_report(read_stocks(path))


def test_every_row_is_counted_once(tmp_path: Path) -> None:
    report = report_of(tmp_path)
    assert report.counts == {"read": 3, "assumed": 1, "chromosome open": 2, "refused": 1}


def test_a_question_is_asked_once_with_its_rows(tmp_path: Path) -> None:
    questions = {q.symbol: q for q in report_of(tmp_path).questions}
    assert questions["kx-GAL4"].rows == (4, 5)
    assert "on which chromosome" in questions["kx-GAL4"].asks
    assert 'name = "kx-GAL4"' in questions["kx-GAL4"].settles
    assert questions["qqx7"].rows == (7, 8)
    assert "what is qqx7?" in questions["qqx7"].asks


def test_the_table_holds_the_rows_that_need_an_eye(tmp_path: Path) -> None:
    rows = list(csv.DictReader(io.StringIO(report_table(report_of(tmp_path)))))
    assert {r["stock"] for r in rows} == {"B", "C", "D", "E"}
    refused = next(r for r in rows if r["stock"] == "E")
    assert refused["cell"] == "w; TM6Bb/+; +"
    assert refused["outcome"] == "refused"
    assert "TM6B" in refused["closest reading"]


def test_no_cell_begins_like_a_formula(tmp_path: Path) -> None:
    rows = list(csv.reader(io.StringIO(report_table(report_of(tmp_path), all_rows=True))))
    assert {r[2] for r in rows[1:]} == set("ABCDEFG")
    assert not any(cell[:1] in ("=", "+", "-", "@") for row in rows for cell in row if cell)


def test_the_workbook_holds_the_same_table(tmp_path: Path) -> None:
    import openpyxl

    report = report_of(tmp_path)
    sheet = openpyxl.load_workbook(io.BytesIO(report_workbook(report))).active
    assert sheet is not None
    as_text = [[str(v or "") for v in row] for row in sheet.iter_rows(values_only=True)]
    assert as_text == list(csv.reader(io.StringIO(report_table(report))))


def test_the_same_table_is_the_same_bytes(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    report = report_of(tmp_path)
    first = report_workbook(report)
    monkeypatch.setattr("time.localtime", lambda *_: (2031, 5, 5, 5, 5, 5, 0, 1, 0))
    assert report_workbook(report) == first
    assert b"1980-01-01T00:00:00Z" in zipfile.ZipFile(io.BytesIO(first)).read("docProps/core.xml")
