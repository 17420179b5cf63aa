from __future__ import annotations

import datetime as dt

import pytest

from crossplan.plan.screen import CalendarSection, DayName
from crossplan.schedule.check import check_schedule
from tests.schedule.small_plans import (
    CONTROL,
    START,
    TARGET,
    cross,
    on_calendar,
    screen_of,
    two_generations,
    two_targets,
    wanted,
)


def day(text: str | None) -> dt.date:
    assert text is not None
    return dt.date.fromisoformat(text)


@pytest.mark.parametrize("temperature", [18.0, 21.0, 25.0])
def test_a_plan_is_put_on_the_calendar_without_a_fault(temperature: float) -> None:
    screen = screen_of(temperature=temperature)
    plan = on_calendar(two_generations(temperature), two_targets(), screen)
    assert check_schedule(plan, screen) == ()
    assert all(s.dates is not None for s in plan.steps)
    assert all(t.assay_date is not None for t in plan.targets)
    assert {t.kind for t in plan.tasks} == {
        "expand", "virgins", "set up", "clear", "collect", "discard", "food", "assay"
    }  # fmt: skip


def test_the_same_plan_twice_to_the_byte() -> None:
    first, second = (on_calendar(two_generations(), two_targets(), screen_of()) for _ in range(2))
    assert first.model_dump_json() == second.model_dump_json()


def test_a_single_cross_as_early_as_it_can_be() -> None:
    # Fresh food for the stock on Monday 1; first virgins on Wednesday 10 and Thursday 11 (day 9 and 10); set up on
    # Friday 12; first flies on Sunday 21, taken from Monday 22 on; ages of 3 to 7 days are 4 days apart.
    screen = screen_of()
    plan = on_calendar([cross("S01", "CsChrimson attP18", "empty split")], [wanted(CONTROL, ["S01"])], screen)
    days = {t.id: t.date for t in plan.tasks if t.kind in ("expand", "virgins")}
    assert days["S01-expand"] <= "2027-03-01"
    assert (days["S01-virgins-1"], days["S01-virgins-2"]) == ("2027-03-10", "2027-03-11")
    assert plan.steps[0].dates is not None
    assert plan.steps[0].dates.set_up == "2027-03-12"
    assert day(plan.targets[0].assay_date) >= dt.date(2027, 3, 26)
    assert check_schedule(plan, screen) == ()


def test_a_due_day_that_can_be_met_is_met() -> None:
    free = on_calendar(two_generations(), two_targets(), screen_of()).targets[0].assay_date
    assert free is not None
    plan = on_calendar(two_generations(), two_targets(due=free), screen_of())
    assert plan.targets[0].assay_date == free
    assert plan.targets[0].cautions == []


def test_a_due_day_that_cannot_be_met_is_named() -> None:
    plan = on_calendar(two_generations(), two_targets(due="2027-03-20"), screen_of())
    target = plan.targets[0]
    assert day(target.assay_date) > dt.date(2027, 3, 20)
    assert len(target.cautions) == 1
    assert "2027-03-20" in target.cautions[0]
    assert str(target.assay_date) in target.cautions[0]
    assert "even with nothing else to do; begin at least 20 days earlier" in target.cautions[0]
    assert check_schedule(plan, screen_of()) == ()


def test_nobody_works_on_holidays() -> None:
    usual = on_calendar(two_generations(), two_targets(), screen_of())
    busy = sorted({t.date for t in usual.tasks})
    holidays = tuple(dt.date.fromisoformat(d) for d in busy[5:20:7])
    screen = screen_of(calendar=CalendarSection(holidays=holidays))
    plan = on_calendar(two_generations(), two_targets(), screen)
    assert plan.tasks
    assert not {t.date for t in plan.tasks} & {d.isoformat() for d in holidays}
    assert check_schedule(plan, screen) == ()


def test_crosses_for_which_no_days_are_found_are_named() -> None:
    # on Mondays alone nobody can clear the parents before the sixth day
    screen = screen_of(calendar=CalendarSection(working_days=("Mon",)))
    plan = on_calendar(two_generations(), two_targets(), screen)
    assert all(s.dates is None for s in plan.steps)
    assert plan.tasks == []
    assert all("no days could be found" in t.cautions[0] for t in plan.targets)
    assert check_schedule(plan, screen) == ()


def test_one_target_without_days_does_not_cost_the_others_theirs() -> None:
    # flies of age 0 cannot be tested: a day must pass after the anaesthesia of their collection
    steps = [*two_generations(), cross("S05", "CsChrimson attP18", "K12-AD")]
    targets = [*two_targets(), wanted("too young", ["S05"], due="2027-06-01")]
    screen = screen_of(ages={"too young": (0, 0)})
    plan = on_calendar(steps, targets, screen)
    assert [t.assay_date is not None for t in plan.targets] == [True, True, False]
    assert [s.id for s in plan.steps if s.dates is None] == ["S05"]
    assert "no days could be found" in plan.targets[2].cautions[0]
    assert "2027-06-01" in plan.targets[2].cautions[1]
    assert check_schedule(plan, screen, {t.target: (3, 7) for t in plan.targets[:2]}) == ()


@pytest.mark.parametrize("days", [("Mon", "Wed", "Fri"), ("Mon", "Thu"), ("Tue", "Fri")])
def test_short_weeks_collect_less_often(days: tuple[DayName, ...]) -> None:
    # with four collections the first virgins would be too old for their cross when the last are there
    screen = screen_of(calendar=CalendarSection(working_days=days))
    plan = on_calendar(two_generations(), two_targets(), screen)
    assert all(t.assay_date is not None for t in plan.targets)
    assert sum(t.kind == "collect" and t.step == "S01" for t in plan.tasks) < 4
    assert check_schedule(plan, screen) == ()


def test_two_classes_kept_from_the_same_vials_share_their_days() -> None:
    steps = [
        cross("S01", "K12-AD", "double balancer", virgin=True),
        cross("S02", "K12-AD", "double balancer", same_vials_as="S01"),
        cross("S03", "S01", "S02", generation=2),
    ]
    plan = on_calendar(steps, [wanted(TARGET, ["S01", "S02", "S03"])], screen_of())
    assert plan.steps[0].dates == plan.steps[1].dates
    assert {t.kind for t in plan.tasks if t.step == "S02"} == {"collect"}
    assert check_schedule(plan, screen_of()) == ()


def test_the_rig_s_limit_spreads_the_assays() -> None:
    steps = [cross(f"S{i:02d}", f"line {i}", "CsChrimson attP18") for i in range(1, 5)]
    targets = [wanted(f"line {i} > CsChrimson", [f"S{i:02d}"], flies=20) for i in range(1, 5)]
    screen = screen_of(calendar=CalendarSection(rig_flies_per_day=45))
    plan = on_calendar(steps, targets, screen)
    tested = [t.assay_date for t in plan.targets]
    assert max(tested.count(d) for d in tested) == 2
    assert check_schedule(plan, screen) == ()


def test_work_is_shared_and_a_culture_stays_with_one_person() -> None:
    plan = on_calendar(two_generations(), two_targets(), screen_of())
    assert {t.person for t in plan.tasks} == {"Ida", "Tomas"}
    for step in plan.steps:
        assert {t.person for t in plan.tasks if t.step == step.id} == {step.person}


def test_nothing_to_plan() -> None:
    plan = on_calendar([], [], screen_of(), START)
    assert plan.tasks == []
