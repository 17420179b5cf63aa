"""What changed between two stock lists, in terms of flies."""

from __future__ import annotations

from pathlib import Path

import pytest

from crossplan.stocks.difference import Change, compare
from crossplan.stocks.shelf import read_stocks

HEAD = "stock|genotype|copies|tray"


def changes(folder: Path, old: list[str], new: list[str]) -> tuple[Change, ...]:
    shelves = []
    for name, rows in (("old", old), ("new", new)):
        path = folder / f"{name}.csv"
        path.write_text("\n".join((HEAD, *rows)) + "\n", encoding="utf-8")
        shelves.append(read_stocks(path))
    return compare(shelves[0], shelves[1])


@pytest.mark.parametrize(
    ("old", "new", "kind", "chromosome", "words"),
    [
        (["A|w|2|", "B|y|2|"], ["A|w|2|"], "lost", "", "B is gone: y; +; +"),
        (["A|w|2|"], ["A|w|2|", "B|y|2|"], "gained", "", "B is new: y; +; +"),
        (["A|w; Sco/CyO|2|"], ["B|w; Sco/CyO|2|"], "renamed", "", "A is now called B"),
        (["A|Canton-S|2|"], ["B|Canton-S|2|"], "renamed", "", "A is now called B"),
        (["A|w;; UAS-kx@attP2|2|"], ["A|w;; UAS-kx@attP2/TM6B, Tb|2|"], "genotype", "3", "gained TM6B, Tb"),
        (["A|w; UAS-kx@attP40|2|"], ["A|w; UAS-kq@attP40|2|"], "genotype", "2", "lost UAS-kx@attP40; gained UAS-kq@attP40"),
        (["A|w; Sco/CyO|2|"], ["A|w; If/CyO|2|"], "genotype", "2", "CyO/Sco -> "),
        (["A|w; UAS-kx@attP40|2|"], ["A|w; UAS-kx@attP40/+|2|"], "genotype", "2", "another number of copies"),
        (["A|w; UAS-kx@attP40|2|"], ["A|w; P{y[+t7.7] w[+mC]=UAS-kx}attP40; +|2|"], "spelling", "", "means the same"),
        (["A|w; Sco/CyO|2|"], ["A|w; Sco/CyO/If|2|"], "unreadable", "", "can no longer be read"),
        (["A|w; Sco/CyO/If|2|"], ["A|w; Sco/CyO|2|"], "readable", "", "can be read now"),
        (["A|w|2|"], ["A|w|3|"], "copies", "", "2 -> 3"),
        (["A|w|2|"], ["A|w|2|T4"], "tray", "", "nothing -> T4"),
    ],
)  # fmt: skip
def test_one_change(old: list[str], new: list[str], kind: str, chromosome: str, words: str, tmp_path: Path) -> None:
    (change,) = changes(tmp_path, old, new)
    assert (change.kind, change.chromosome) == (kind, chromosome)
    if "CyO/Sco" not in words:
        assert words in change.message


def test_two_stocks_of_one_genotype_are_not_one_renamed(tmp_path: Path) -> None:
    found = changes(tmp_path, ["A|w; Sco/CyO|2|", "B|w; Sco/CyO|2|"], ["C|w; Sco/CyO|2|"])
    assert [c.kind for c in found] == ["lost", "lost", "gained"]


def test_equal_lists_have_no_difference_whatever_the_order(tmp_path: Path) -> None:
    rows = ["A|w; Sco/CyO|2|T1", "B|y|2|T2"]
    assert changes(tmp_path, rows, rows[::-1]) == ()


def test_a_change_on_two_chromosomes_is_two_changes(tmp_path: Path) -> None:
    found = changes(tmp_path, ["A|w; Sco/CyO; TM3, Sb/TM6B, Tb|2|"], ["A|w; If/CyO; MKRS/TM6B, Tb|2|"])
    assert [c.chromosome for c in found] == ["2", "3"]


@pytest.mark.parametrize(
    ("source", "status", "warned"),
    [
        ("Heron lab 2026", "ok", True),
        ("Heron lab 2026", "in quarantine", False),
        ("made here", "ok", False),
        ("", "ok", False),
    ],
)
def test_a_newcomer_that_is_not_in_quarantine_is_said(source: str, status: str, warned: bool, tmp_path: Path) -> None:
    old, new = tmp_path / "a.csv", tmp_path / "b.csv"
    old.write_text("stock|genotype|source|status\nA|w||ok\n", encoding="utf-8")
    new.write_text(f"stock|genotype|source|status\nA|w||ok\nB|y|{source}|{status}\n", encoding="utf-8")
    (change,) = compare(read_stocks(old), read_stocks(new))
    assert ("not in quarantine" in change.message) is warned
