"""A comma that is not in quotes moves the cells of a row: this is said."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

from crossplan.stocks.audit import audit
from crossplan.stocks.shelf import read_stocks


def test_a_row_with_more_cells_than_columns_is_named(tmp_path: Path) -> None:
    path = tmp_path / "stocks.csv"
    path.write_text("stock,genotype,status\nA,w; Sco/CyO; TM3, Sb/TM6B, Tb,ok\nB,w; Sco/CyO; +,ok\n")
    shelf = read_stocks(path)
    assert [(p.code, p.line) for p in shelf.problems if p.code == "too-many-cells"] == [("too-many-cells", 2)]
    assert ("too-many-cells", "A") in {(f.code, f.stock) for f in audit(shelf, dt.date(2026, 12, 1))}
