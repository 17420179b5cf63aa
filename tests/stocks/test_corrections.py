"""Corrections: what is beyond doubt is proposed with its reason; the rest of the list stays as it is."""

from __future__ import annotations

import csv
import io
from pathlib import Path

import pytest

from crossplan import api
from crossplan.errors import OutputError
from crossplan.stocks.corrections import Correction

DEMO = Path(__file__).resolve().parents[2] / "demo_stocks" / "stocks.csv"


def corrections(folder: Path, *rows: str, head: str = "stock|genotype") -> tuple[Correction, ...]:
    path = folder / "stocks.csv"
    path.write_text("\n".join((head, *rows)) + "\n", encoding="utf-8")
    return api.propose_corrections(path)[0]


@pytest.mark.parametrize(
    ("rows", "head", "row", "before", "after", "words"),
    [
        (["A|w;; AD-K1@VK00005/TM6Bb, Tb"], "stock|genotype", 2, "w;; AD-K1@VK00005/TM6Bb, Tb",
         "w;; AD-K1@VK00005/TM6B, Tb", "no balancer"),
        (["A|w; UAS-Chrimson@VK00018", "B|w; UAS-Chrimson@VK00018/CyO", "C|w; UAS-Chrmison@VK00018"], "stock|genotype", 4,
         "w; UAS-Chrmison@VK00018", "w; UAS-Chrimson@VK00018", "rows 2, 3 write UAS-Chrimson"),
        (["A|w|3 Nov 2026"], "stock|genotype|last flip", 2, "3 Nov 2026", "2026-11-03", "one form"),
        (["A|w|11/03/26", "B|y|11/26/26"], "stock|genotype|last flip", 2, "11/03/26", "2026-11-03", "settled by other dates"),
        (["A|w|18 °C"], "stock|genotype|temp", 2, "18 °C", "18", "plain number"),
        (["A|w", "A|y"], "stock|genotype", 3, "A", "A (row 3)", "stands twice"),
    ],
)  # fmt: skip
def test_what_is_beyond_doubt_is_proposed(
    rows: list[str], head: str, row: int, before: str, after: str, words: str, tmp_path: Path
) -> None:
    found = corrections(tmp_path, *rows, head=head)
    (fix,) = [c for c in found if c.row == row]
    assert (fix.before, fix.after) == (before, after)
    assert words in fix.reason


@pytest.mark.parametrize(
    ("row", "head"),
    [
        ("A|w; UAS-Zap", "stock|genotype"),
        ("A|w; Sco/CyO/If", "stock|genotype"),
        ("A|w|03/11/26", "stock|genotype|last flip"),
        ("A|w|RT", "stock|genotype|temp"),
        ("A|w;; DBD-Q1@attP2/TM6B", "stock|genotype"),
        ("A|w; UAS-Zap@VK00018; +", "stock|genotype"),
    ],
)
def test_what_a_person_must_decide_is_left_alone(row: str, head: str, tmp_path: Path) -> None:
    assert corrections(tmp_path, row, head=head) == ()


def test_the_new_table_differs_in_the_listed_cells_only(tmp_path: Path) -> None:
    before = DEMO.read_bytes()
    found, (table, changes) = api.propose_corrections(DEMO, out=tmp_path / "new.csv")
    assert DEMO.read_bytes() == before
    old = list(csv.reader(io.StringIO(DEMO.read_text(encoding="utf-8"))))
    new = list(csv.reader(io.StringIO(table.read_text(encoding="utf-8"))))
    assert new[0] == old[0]
    differing = [
        (i + 1, old[0][k], a, b)
        for i, (one, other) in enumerate(zip(old, new, strict=True))
        for k, (a, b) in enumerate(zip(one, other, strict=True))
        if a.strip() != b
    ]
    assert differing == [(c.row, c.column, c.before, c.after) for c in found]
    assert len(list(csv.reader(io.StringIO(changes.read_text(encoding="utf-8"))))) == 1 + len(found)
    assert any(c.stock == "PT098" and "TM6B," in c.after for c in found)


def test_a_corrected_list_needs_no_further_correction(tmp_path: Path) -> None:
    _, (table, _) = api.propose_corrections(DEMO, out=tmp_path / "new.csv")
    assert api.propose_corrections(table)[0] == ()


def test_the_list_itself_is_never_written(tmp_path: Path) -> None:
    path = tmp_path / "stocks.csv"
    path.write_text("stock|genotype|temp\nA|w|18 C\n", encoding="utf-8")
    with pytest.raises(OutputError, match="never written to"):
        api.propose_corrections(path, out=path)
    assert path.read_text(encoding="utf-8") == "stock|genotype|temp\nA|w|18 C\n"
