from __future__ import annotations

import datetime as dt

import pytest
from example_plan import X_UAS, fly
from hypothesis import given
from hypothesis import strategies as st

from crossplan.bench.words import (
    chromosome_lines,
    count,
    day_range,
    fly_text,
    listed,
    long_day,
    pair_text,
    percent,
    raised_runs,
    short_genotypes,
    with_sex_sign,
)


def test_days() -> None:
    assert long_day("2027-01-11") == "Mon 11 Jan 2027"
    assert long_day(dt.date(2028, 2, 29)) == "Tue 29 Feb 2028"


@pytest.mark.parametrize(
    ("first", "last", "words"),
    [
        ("2027-01-21", "2027-01-25", "21–25 Jan"),
        ("2027-01-29", "2027-02-02", "29 Jan–2 Feb"),
        ("2027-01-21", "2027-01-21", "21 Jan"),
        ("2027-01-21", "2028-01-25", "21 Jan–25 Jan"),
    ],
)
def test_ranges_of_days(first: str, last: str, words: str) -> None:
    assert day_range(first, last) == words


def test_counts_lists_and_shares() -> None:
    assert (count(1, "vial"), count(2, "fly", "flies"), count(0, "vial")) == ("1 vial", "2 flies", "0 vials")
    assert (listed([]), listed(["a"]), listed(["a", "b", "c"])) == ("", "a", "a, b and c")
    assert (percent(0.125), percent(1 / 3), percent(1.0)) == ("12.5 %", "33.3 %", "100 %")


def test_chromosomes_are_kept_apart() -> None:
    male = fly("male", [["AD-K12@attP40"], ["CyO"]], [[], ["TM6B", "Tb[1]"]])
    assert chromosome_lines(male) == ("X: w[1118]/Y", "2: AD-K12@attP40/CyO", "3: +/TM6B Tb[1]")
    assert chromosome_lines(fly("male", x=[[], ["Y"]])) == ("+",)
    assert pair_text(X_UAS) == "w[1118] UAS-CsChrimson@attP18"
    assert pair_text([[], []]) == "+"


def test_the_plan_s_own_spelling_comes_first() -> None:
    one = fly("female").model_copy(update={"genotype": "as written"})
    assert fly_text(one) == "as written"
    assert fly_text(one.model_copy(update={"genotype": ""})) == "w[1118]; +; +; +"


@pytest.mark.parametrize(
    ("text", "runs"),
    [
        ("w[1118]", (("w", False), ("1118", True))),
        (
            "P{y[+t7.7] w[+mC]=A}b",
            (("P{y", False), ("+t7.7", True), (" w", False), ("+mC", True), ("=A}b", False)),
        ),
        ("a[b[1]]c", (("a", False), ("b[1]", True), ("c", False))),
        ("[1118]", (("[1118]", False),)),
        ("see [note]", (("see [note]", False),)),
        ("w[1118", (("w[1118", False),)),
        ("w[]", (("w[]", False),)),
        ("", ()),
    ],
)
def test_superscripts(text: str, runs: tuple[tuple[str, bool], ...]) -> None:
    assert raised_runs(text) == runs


@given(st.text(alphabet="aw1[]{} /+;", max_size=40))
def test_no_character_is_lost(text: str) -> None:
    rebuilt = "".join(f"[{part}]" if raised else part for part, raised in raised_runs(text))
    assert rebuilt == text


@pytest.mark.parametrize(
    ("rule", "short"),
    [
        ("virgin females: curly wings", "virgin ♀: curly wings"),
        ("males: no females' signs", "♂: no females' signs"),
        ("all females", "all ♀"),
        ("both sexes: red eyes", "♀♂: red eyes"),
        ("curly females", "curly females"),
    ],
)
def test_the_sex_at_the_head_of_a_rule_as_a_sign(rule: str, short: str) -> None:
    assert with_sex_sign(rule) == short


def test_short_genotypes_drop_white_then_sites_and_what_stands_around_a_name() -> None:
    kept = fly("male", [["AD-K12@attP40"], ["CyO"]], [["P{y[+t7.7] w[+mC]=UAS-Kx}VK00005"], []])
    assert short_genotypes(kept) == (
        "2: AD-K12@attP40/CyO; 3: P{y[+t7.7] w[+mC]=UAS-Kx}VK00005/+",
        "2: AD-K12/CyO; 3: UAS-Kx/+",
    )
    assert short_genotypes(fly("female"))[1] == "X: w[1118]"
    marked = fly("male", [["Sp"], ["CyO"]], x=[["FM7a"], ["Y"]])
    assert short_genotypes(marked)[1] == "X: FM7a/Y; 2: Sp/CyO"
