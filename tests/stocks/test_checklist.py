"""The yearly check list: what every fly of a stock must show."""

from __future__ import annotations

from pathlib import Path

import pytest

from crossplan.genetics.catalogue import default_catalogue
from crossplan.stocks.checklist import Check, check_words, yearly_checks
from crossplan.stocks.shelf import read_stocks


def check_of(folder: Path, genotype: str) -> Check:
    path = folder / "stocks.csv"
    path.write_text(f"stock|genotype\nA|{genotype}\n", encoding="utf-8")
    (check,) = yearly_checks(read_stocks(path), default_catalogue())
    return check


@pytest.mark.parametrize(
    ("genotype", "always", "sometimes", "test"),
    [
        ("Canton-S", "wild type", "wild type", ""),
        ("w[1118]; Sco/CyO", "curly wings, missing bristles, white eyes", "wild type", "no flies without CyO"),
        ("w; UAS-kx@VK00018/CyO", "wild type", "curly wings", "note the share of flies without CyO"),
        ("w;; MKRS/TM6B, Tb", "extra humeral bristles, stubble bristles, tubby pupae, white eyes", "wild type", "pupae for Tb"),
        ("w; AD-K1@attP40; DBD-Q1@attP2", "wild type", "wild type", "a line with one half looks normal"),
        ("w; AD-K1@attP40", "wild type", "wild type", "known DBD half"),
    ],
)  # fmt: skip
def test_what_is_seen_and_tested(genotype: str, always: str, sometimes: str, test: str, tmp_path: Path) -> None:
    check = check_of(tmp_path, genotype)
    assert check_words(check.must_show) == always
    assert check_words(check.may_show) == sometimes
    assert test in "; ".join(check.tests)
