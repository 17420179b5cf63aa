from __future__ import annotations

import pytest
from example_plan import example_plan, fly, long_plan, virgins_plan

from crossplan.bench.terminal import fly_drawing, show_lines
from crossplan.errors import InputError


def text(what: str, width: int = 80) -> str:
    return "\n".join(line.text for line in show_lines(virgins_plan(), what, width))


@pytest.mark.parametrize("width", [60, 80, 160])
def test_no_line_is_wider_than_the_terminal(width: int) -> None:
    plan = virgins_plan()
    names = [*(s.id for s in plan.steps), *(t.target for t in plan.targets), *{t.date for t in plan.tasks}]
    for name in names:
        assert max(len(line.text) for line in show_lines(plan, name, width)) <= width, name


def test_homologues_stand_above_and_below_a_line() -> None:
    pair = fly("female", [["AD-K12@attP40"], ["CyO"]], [[], ["TM6B", "Tb[1]"]])
    assert fly_drawing(pair, ["X", "2", "3"], 80) == [
        "w[1118]   AD-K12@attP40       +",
        "───────   ─────────────   ──────────",
        "w[1118]        CyO        TM6B Tb[1]",
        "   X            2             3",
    ]


def test_a_narrow_terminal_takes_chromosomes_below_each_other_and_then_on_lines() -> None:
    pair = fly("female", [["AD-K12@attP40"], ["CyO"]])
    assert len(fly_drawing(pair, ["X", "2"], 20)) == 8
    assert fly_drawing(pair, ["X", "2"], 12) == ["X: w[1118]", "2:", "   AD-K12@attP40/CyO"]


def test_a_wide_terminal_has_mother_and_father_side_by_side() -> None:
    assert "♀ S01" in text("S03", 160)
    line = next(x for x in text("S03", 160).splitlines() if "♀ S01" in x)
    assert "× ♂ S02" in line
    assert "× ♂" not in next(x for x in text("S03", 60).splitlines() if "♀ S01" in x)


def test_a_cross_says_what_to_keep_beware_of_and_when() -> None:
    words = text("s01")
    for part in ("keep virgin females: curly wings", "beware", "1/8 of all progeny", "Mon 22 Feb 16:30 Ida set up"):
        assert part in words


def test_a_target_shows_its_scheme_or_the_reason() -> None:
    words = text("k12 X q07 > csChrimson")
    assert [words.index(f"\n{step}  generation") for step in ("S01", "S02", "S03", "S04")] == sorted(
        words.index(f"\n{step}  generation") for step in ("S01", "S02", "S03", "S04")
    )
    lost = text("M31 > CsChrimson")
    assert "no living stock carries DBD-M31@attP2" in lost
    assert "would unlock it  a stock with DBD-M31@attP2" in lost


def test_a_day_is_told_as_one_walks() -> None:
    words = text("2027-03-17")
    assert words.index("08:30 EMPTY") < words.index("08:30 EXPAND") < words.index("15:00 VIRGINS")
    assert "CsChrimson attP18  11 vials, virgins at 15:00; for S04, S05, S06 [Tomas, Ida]" in words
    assert "nothing is planned" in text("2030-01-01")


@pytest.mark.parametrize(("what", "words"), [("S3", "'S03'"), ("", "2027-01-11"), ("M31", "M31 > CsChrimson")])
def test_an_unknown_name_is_answered_with_close_ones(what: str, words: str) -> None:
    with pytest.raises(InputError) as caught:
        show_lines(example_plan(), what)
    assert words in caught.value.hint


def test_a_long_genotype_is_written_out() -> None:
    words = "".join("".join(line.text for line in show_lines(long_plan(), "S04", 80)).split())
    assert "made-up-07-GAL4.DBD}VK00007" in words
