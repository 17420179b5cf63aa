"""A stock list becomes a shelf; a row that cannot be read keeps its place and its problem."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest

from crossplan.errors import Severity, StockListError
from crossplan.stocks.settings import ListSettings
from crossplan.stocks.shelf import Shelf, read_stocks


def shelf(folder: Path, *rows: str, head: str = "stock|genotype") -> Shelf:
    path = folder / "stocks.csv"
    path.write_text("\n".join((head, *rows)) + "\n", encoding="utf-8")
    return read_stocks(path)


def canonical(stocks: Shelf, name: str) -> str:
    stock = stocks.by_name(name)
    assert stock is not None
    return stock.reading.canonical


def codes(stocks: Shelf, row: int) -> list[str]:
    return [p.code for p in stocks.problems if p.line == row]


def test_every_column_that_is_known_is_read(tmp_path: Path) -> None:
    stocks = shelf(
        tmp_path,
        "T01|3|007|w[1118]; Sco/CyO|2|18|2026-11-03|Ann|Heron lab|ok|small vials",
        head="tray|vial|stock|genotype|copies|temp|last flip|who|received from|status|notes",
    )
    (stock,) = stocks.stocks
    assert (stock.name, stock.genotype, stock.row) == ("007", "w[1118]; Sco/CyO", 2)
    assert (stock.location, stock.copies, stock.temperature_C) == ("T01/3", 2, 18.0)
    assert (stock.last_transfer, stock.who, stock.source) == (dt.date(2026, 11, 3), "Ann", "Heron lab")
    assert (stock.status, stock.notes) == ("ok", "small vials")
    assert stocks.columns["source"] == "received from"
    assert stocks.problems == ()


def test_chromosome_columns_are_joined(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A|w[1118]|Sco/CyO|", "B|||TM3, Sb/TM6B, Tb", head="stock|X|2|3")
    assert [s.genotype for s in stocks.stocks] == ["w[1118]; Sco/CyO; +", "+; +; TM3, Sb/TM6B, Tb"]
    assert all(s.reading.ok for s in stocks.stocks)


def test_a_fourth_chromosome_is_joined_only_where_it_is_written(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A|w|||ci[1]", "B|w|||", head="stock|Chr 1|II|III|IV")
    assert [s.genotype for s in stocks.stocks] == ["w; +; +; ci[1]", "w; +; +"]


def test_a_row_that_is_not_understood_stays_with_its_problem_and_the_others_go_on(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A|w[1118; Sco/CyO", "B|w[1118]; Sco/CyO")
    assert (stocks.rows_read, stocks.rows_refused) == (2, 1)
    assert [s.name for s in stocks.usable()] == ["B"]
    (problem,) = stocks.problems
    assert (problem.code, problem.severity, problem.line, problem.column) == ("bracket", Severity.ERROR, 2, "genotype")
    assert problem.path.endswith("stocks.csv")


def test_a_name_that_stands_twice_gets_its_row(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A|w", "B|y", "A|f")
    assert [s.name for s in stocks.stocks] == ["A", "B", "A (row 4)"]
    (problem,) = stocks.problems
    assert (problem.code, problem.line, problem.column) == ("name-twice", 4, "stock")
    assert "row 2" in problem.message
    assert canonical(stocks, "A") == "w; +; +"


def test_names_stay_unique_even_if_the_list_has_such_a_name_already(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A (row 4)|w", "A|y", "A|f")
    assert len({s.name for s in stocks.stocks}) == 3


def test_a_stock_without_a_name_is_called_by_its_row(tmp_path: Path) -> None:
    assert [s.name for s in shelf(tmp_path, "|w", "B|y").stocks] == ["row 2", "B"]


def test_the_path_and_the_row_say_where(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A|w", "A|y")
    assert stocks.problems[0].place() == f"{tmp_path / 'stocks.csv'}, row 3, column stock"


# -- two passes --------------------------------------------------------------------------------------------------


def test_a_row_settles_the_chromosome_for_another_that_leaves_it_open(tmp_path: Path) -> None:
    alone = shelf(tmp_path, "A|w; UAS-Zap")
    assert codes(alone, 2) == ["which-chromosome"]
    assert alone.rows_refused == 1
    together = shelf(tmp_path, "A|w; UAS-Zap", "B|w; UAS-Zap/CyO; +")
    assert canonical(together, "A") == "w; UAS-Zap; +"
    assert codes(together, 2) == ["assumed-chromosome"]
    assert codes(together, 3) == []
    assert together.rows_refused == 0


def test_a_row_may_settle_it_for_rows_above_and_below(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A|UAS-Zip", "B|w; +; UAS-Zip/TM3, Sb[1]", "C|UAS-Zip")
    assert canonical(stocks, "A") == canonical(stocks, "C") == "+; +; UAS-Zip"


def test_a_row_that_only_assumes_settles_nothing(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A|UAS-Zap; Sco/CyO", "B|w; UAS-Zap")
    assert codes(stocks, 2) == ["assumed-place"]
    assert codes(stocks, 3) == ["which-chromosome"]


def test_the_elements_of_the_list_by_symbol(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A|w[1118]; AD-K12@attP40/CyO", "B|w[1118]; +; DBD-Q07@attP2")
    elements = stocks.elements()
    assert {"w[1118]", "AD-K12@attP40", "CyO", "DBD-Q07@attP2"} <= set(elements)
    assert (elements["AD-K12@attP40"].chromosome, elements["DBD-Q07@attP2"].chromosome) == ("2", "3")


# -- cells that are not the genotype -----------------------------------------------------------------------------


def test_dates_are_read_by_the_order_that_the_column_settles(tmp_path: Path) -> None:
    open_dates = shelf(tmp_path, "A|w|03/11/26", "B|y|04/11/26", head="stock|genotype|last flip")
    assert [s.last_transfer for s in open_dates.stocks] == [None, None]
    assert codes(open_dates, 2) == ["date"]
    assert "2026-11-03 or 2026-03-11" in open_dates.problems[0].message
    settled = shelf(tmp_path, "A|w|03/11/26", "B|y|11/13/26", head="stock|genotype|last flip")
    assert [s.last_transfer for s in settled.stocks] == [dt.date(2026, 3, 11), dt.date(2026, 11, 13)]
    assert settled.problems == ()


def test_a_cell_that_is_no_date_number_or_temperature_is_said_and_the_stock_stays(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A|w|two|hot|soon", head="stock|genotype|copies|temp|last flip")
    (stock,) = stocks.usable()
    assert (stock.copies, stock.temperature_C, stock.last_transfer) == (None, None, None)
    found = {p.code: (p.column, p.message) for p in stocks.problems}
    assert set(found) == {"not-a-number", "not-a-temperature", "date"}
    assert found["not-a-number"] == ("copies", "'two' is no number of copies")
    assert found["not-a-temperature"] == ("temp", "'hot' is no temperature")
    assert found["date"] == ("last flip", "'soon' is no date")


def test_a_raised_digit_is_no_number_of_copies(tmp_path: Path) -> None:
    stocks = shelf(tmp_path, "A|w|²", head="stock|genotype|copies")
    assert codes(stocks, 2) == ["not-a-number"]


@pytest.mark.parametrize(
    ("text", "degrees"),
    [("18", 18.0), ("25 C", 25.0), ("18°C", 18.0), ("21,5", 21.5), ("RT", 22.0), ("room", 22.0), ("", None)],
)
def test_temperatures(text: str, degrees: float | None, tmp_path: Path) -> None:
    stocks = shelf(tmp_path, f"A|w|{text}", head="stock|genotype|temp")
    assert stocks.stocks[0].temperature_C == degrees
    assert stocks.problems == ()


@pytest.mark.parametrize(
    ("status", "copies", "used"),
    [("ok", "2", True), ("dead", "2", False), ("Lost 2024", "2", False), ("deadly slow", "2", True), ("", "0", False),
     ("in quarantine", "3", False), ("backup", "", True)],
)  # fmt: skip
def test_what_is_out_of_use_is_not_usable(status: str, copies: str, used: bool, tmp_path: Path) -> None:
    stocks = shelf(tmp_path, f"A|w|{status}|{copies}", head="stock|genotype|status|copies")
    assert [s.name for s in stocks.usable()] == (["A"] if used else [])


# -- refused -----------------------------------------------------------------------------------------------------


def test_headings_without_stocks_are_refused(tmp_path: Path) -> None:
    with pytest.raises(StockListError, match="column names but no stocks under them"):
        shelf(tmp_path)


def test_a_list_without_genotypes_is_refused_with_its_columns(tmp_path: Path) -> None:
    with pytest.raises(StockListError, match="no column 'genotype'; its columns are stock, tray, notes"):
        shelf(tmp_path, "A|T1|x", head="stock|tray|notes")


def test_a_given_column_is_used(tmp_path: Path) -> None:
    path = tmp_path / "stocks.csv"
    path.write_text("code|flies inside\nA|w; Sco/CyO\n", encoding="utf-8")
    stocks = read_stocks(path, settings=ListSettings(columns={"genotype": "flies inside", "stock": "code"}))
    assert [(s.name, s.genotype) for s in stocks.stocks] == [("A", "w; Sco/CyO")]
