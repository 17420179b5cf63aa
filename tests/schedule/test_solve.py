from __future__ import annotations

import datetime as dt
from dataclasses import replace
from itertools import product

import pytest

from crossplan.rearing.development import Clock
from crossplan.schedule import solve as room
from crossplan.schedule.assay import Assay
from crossplan.schedule.culture import Biology, Culture, fits
from crossplan.schedule.day_model import DayTables, Work, minutes_by_day
from crossplan.schedule.solve import Schedule, solve
from crossplan.schedule.week import WorkWeek

MONDAY = dt.date(2027, 3, 1)
WEEK = WorkWeek(MONDAY)
WARM = Biology.at(25.0, Clock())
#: days off, counted from the Monday
MEETING_OFF = (28, 29, 32, 35, 49, 54, 55)


def line(number: int, vials: int = 2) -> list[Culture]:
    """Return mothers, fathers and the cross of both."""
    name = f"L{number}"
    return [
        Culture(f"{name}a", (), "K12-AD", 25.0, vials, True),
        Culture(f"{name}b", (), "double balancer", 25.0, vials, False),
        Culture(f"{name}c", ((f"{name}a", True), (f"{name}b", False)), "", 25.0, vials, False, 3),
    ]


def assay(number: int, due: dt.date | None = None, flies: int = 20) -> Assay:
    return Assay(f"line {number}", f"L{number}c", (3, 7), flies, due)


def work_of(cultures: list[Culture], assays: list[Assay], week: WorkWeek = WEEK) -> Work:
    return Work(cultures, assays, {c.step: WARM for c in cultures}, 3, week)


def solved(cultures: list[Culture], assays: list[Assay], week: WorkWeek = WEEK) -> Schedule:
    work = work_of(cultures, assays, week)
    return solve(work.cultures, work.assays, work.biologies, work.laying_days, work.week)


def batch(lines: int, due: dt.date | None = None) -> tuple[list[Culture], list[Assay]]:
    return [c for n in range(lines) for c in line(n, 2 + n % 3)], [assay(n, due) for n in range(lines)]


def earliest_by_trying_all(work: Work) -> int:
    """Return the earliest end of one line: every day of every culture is tried with every other."""
    tables = DayTables(work)
    mothers, fathers, last = (tables.options[c.step] for c in work.cultures)
    return min(
        tables.assay_days(work.assays[0], child)[0]
        for mother, father, child in product(mothers, fathers, last)
        if fits(child, mother, True, WARM) and fits(child, father, False, WARM)
    )


@pytest.mark.parametrize("start", range(7))
def test_nothing_is_earlier_than_the_earliest_end_but_for_the_slack(start: int) -> None:
    week = WorkWeek(MONDAY + dt.timedelta(days=start))
    cultures, assays = batch(1)
    found = solved(cultures, assays, week)
    earliest = earliest_by_trying_all(work_of(cultures, assays, week))
    assert earliest <= found.assay["line 0"] <= earliest + room.SLACK_DAYS
    # the same day, when it is asked for
    due = week.date(earliest)
    asked = solved(cultures, [replace(assays[0], due=due)], week)
    assert asked.assay["line 0"] == earliest
    assert asked.late == ()


def test_a_day_less_than_the_earliest_is_late_by_a_day_and_says_why() -> None:
    cultures, assays = batch(1)
    earliest = WEEK.date(earliest_by_trying_all(work_of(cultures, assays)))
    (late,) = solved(cultures, [replace(assays[0], due=earliest - dt.timedelta(days=1))]).late
    assert (late.ready, late.ready_alone) == (earliest, earliest)
    assert late.reason == f"its crosses take until {earliest} even with nothing else to do"
    assert late.remedy == "begin at least 1 day earlier, or move the due day"


def test_a_rig_that_is_full_makes_late_and_is_named() -> None:
    cultures, assays = batch(3)
    earliest = WEEK.date(earliest_by_trying_all(work_of(cultures[:3], assays[:1])))
    found = solved(cultures, [replace(a, due=earliest) for a in assays], replace(WEEK, rig_flies_per_day=20))
    assert len(found.late) == 2
    assert all(late.ready_alone == earliest < late.ready for late in found.late)
    assert all("parents and rig" in late.reason and "rig" in late.remedy for late in found.late)


def test_a_target_with_a_due_day_goes_before_one_without() -> None:
    cultures, assays = batch(3)
    earliest = earliest_by_trying_all(work_of(cultures[:3], assays[:1]))
    for first in range(3):
        asked = [replace(a, due=WEEK.date(earliest)) if n == first else a for n, a in enumerate(assays)]
        found = solved(cultures, asked, replace(WEEK, rig_flies_per_day=20))
        assert found.late == ()
        assert found.assay[f"line {first}"] == earliest
        assert len(set(found.assay.values())) == 3


def test_the_fullest_day_is_lower_than_with_everything_at_once() -> None:
    cultures, assays = batch(4)
    found = solved(cultures, assays)
    assert found.status == "optimal"
    assert found.gap == 0.0
    tables = DayTables(work_of(cultures, assays))
    at_once = {c.step: tables.options[c.step][0] for c in cultures}
    work = work_of(cultures, assays)
    low = max(minutes_by_day(work, room.Chosen(found.days, found.assay)).values())
    assert low < max(minutes_by_day(work, room.Chosen(at_once, {})).values())


def test_many_lines_that_cannot_all_be_in_time() -> None:
    cultures, assays = batch(30, dt.date(2027, 4, 9))
    found = solved(cultures, assays, replace(WEEK, rig_flies_per_day=100))
    assert found.status in ("optimal", "feasible")
    assert found.unplaced == ()
    assert len(found.assay) == 30
    assert found.late
    by_day = [list(found.assay.values()).count(d) for d in set(found.assay.values())]
    assert max(by_day) <= 5


def test_a_stage_without_effort_keeps_the_plan_at_hand(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(room, "EFFORT", (2.0, 0.0, 0.0))
    cultures, assays = batch(4)
    found = solved(cultures, assays)
    assert found.status == "feasible"
    assert found.gap > 0.0
    assert len(found.assay) == 4


def test_a_plan_is_still_looked_for_when_the_best_one_takes_too_long(monkeypatch: pytest.MonkeyPatch) -> None:
    cultures, assays = batch(4)
    monkeypatch.setattr(room, "EFFORT", (1e-6, 1.0, 0.3))
    monkeypatch.setattr(room, "ANY_PLAN", 1e7)
    found = solved(cultures, assays)
    assert found.status == "feasible"
    assert len(found.assay) == 4


def test_no_plan_within_the_effort_is_not_called_impossible(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(room, "EFFORT", (0.0, 0.0, 0.0))
    cultures, assays = batch(4)
    found = solved(cultures, assays)
    assert found.status == "limit reached"
    assert len(found.unplaced) == 12


def test_as_many_as_possible_are_planned() -> None:
    # line 1 can never be tested: a day must pass after anaesthesia, and then its flies are too old
    cultures, assays = batch(3)
    assays[1] = replace(assays[1], age_days=(0, 0))
    found = solved(cultures, assays)
    assert sorted(found.assay) == ["line 0", "line 2"]
    assert "L1c" in found.unplaced
    assert {"L0c", "L2c"} <= set(found.days)


def test_parents_that_serve_others_too_keep_their_days() -> None:
    # two last crosses of the same parents: one of them has no day for its assay
    cultures = [*line(0), Culture("L0d", (("L0a", True), ("L0b", False)), "", 25.0, 2, False, 3)]
    assays = [assay(0), Assay("never", "L0d", (0, 0), 20)]
    found = solved(cultures, assays)
    assert list(found.assay) == ["line 0"]
    assert found.unplaced == ("L0d",)


def test_nothing_can_be_planned() -> None:
    found = solved(*batch(1), WorkWeek(MONDAY, ("Mon",)))
    assert found.status == "no days found"
    assert found.unplaced == ("L0a", "L0b", "L0c")


def test_the_same_days_again() -> None:
    cultures, assays = batch(5, dt.date(2027, 4, 12))
    assert solved(cultures, assays) == solved(cultures, assays)


def test_flies_of_two_cultures_meet_when_some_are_collected_less_often() -> None:
    # on Mondays and Thursdays, less these holidays, most collections leave no day on which both parents are there
    off = frozenset(MONDAY + dt.timedelta(days=d) for d in MEETING_OFF)
    week = WorkWeek(MONDAY, ("Mon", "Thu"), off)
    cultures = [*line(0), Culture("L1c", (), "CsChrimson attP18", 25.0, 2, False, 2)]
    assays = [assay(0), replace(assay(1), age_days=(3, 5))]
    work = work_of(cultures, assays, week)
    assert room._Stages(work).run() == "impossible"
    found = solved(cultures, assays, week)
    assert sorted(found.assay) == ["line 0", "line 1"]
    assert found.unplaced == ()
    # the second look reaches as far as the first
    part = room._what_can_be_planned(work)
    assert DayTables(part).set_up_by >= DayTables(work).set_up_by > 0
    assert part.set_up_by == DayTables(work).set_up_by


def test_crosses_that_serve_only_what_was_left_out_are_left_out() -> None:
    cultures, assays = batch(2)
    stock = Culture("S", (), "K12-AD", 25.0, 2, False)
    work = work_of([*cultures, stock], assays)
    assert room._useful(work, assays[:1]) == {"L0a", "L0b", "L0c", "S"}
