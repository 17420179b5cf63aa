"""The checker must name every rule that a plan is made to break, and say nothing of a plan that keeps them."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable

import pytest

from crossplan.plan.model import Plan, TargetRecord, TaskRecord
from crossplan.plan.screen import CalendarSection, RearingSection, ScreenFile, ScreenSection
from crossplan.schedule.check import check_schedule
from tests.schedule.small_plans import (
    CONTROL,
    PEOPLE,
    TARGET,
    cross,
    on_calendar,
    screen_of,
    two_generations,
    two_targets,
    wanted,
)

SCREEN = screen_of(calendar=CalendarSection(people=PEOPLE, rig_flies_per_day=40))
CLEAN = on_calendar(two_generations(), two_targets(), SCREEN)


@pytest.fixture
def plan() -> Plan:
    return CLEAN.model_copy(deep=True)


def shifted(day: str, by: int) -> str:
    return (dt.date.fromisoformat(day) + dt.timedelta(days=by)).isoformat()


def tasks(plan: Plan, step: str, kind: str) -> list[TaskRecord]:
    return [t for t in plan.tasks if t.step == step and t.kind == kind]


def move(plan: Plan, step: str, kind: str, by: int) -> None:
    """Move all of a step's tasks of one kind, and the step's own date with them."""
    for task in tasks(plan, step, kind):
        task.date = shifted(task.date, by)
    dates = plan.step(step).dates
    assert dates is not None
    for name in {"set up": ["set_up"], "clear": ["clear"], "discard": ["discard"],
                 "collect": ["collect_from", "collect_to"]}.get(kind, []):  # fmt: skip
        setattr(dates, name, shifted(getattr(dates, name), by))


def move_assay(plan: Plan, target: str, by: int) -> TargetRecord:
    """Move an assay, its window and its task."""
    found = next(t for t in plan.targets if t.target == target)
    for name in ("assay_date", "assay_from", "assay_to"):
        setattr(found, name, shifted(getattr(found, name), by))
    for task in plan.tasks:
        if task.kind == "assay" and task.target == target:
            task.date = shifted(task.date, by)
    return found


def codes(plan: Plan, screen: ScreenFile = SCREEN) -> set[str]:
    return {p.code.removeprefix("schedule-") for p in check_schedule(plan, screen)}


def test_a_clean_plan_has_no_fault() -> None:
    assert check_schedule(CLEAN, SCREEN) == ()


def set_up_on_sunday(plan: Plan) -> None:
    step = plan.step("S03")
    assert step.dates is not None
    move(plan, "S03", "set up", 6 - dt.date.fromisoformat(step.dates.set_up).weekday())


def clear_too_late(plan: Plan) -> None:
    step = plan.step("S01")
    assert step.dates is not None
    by = (dt.date.fromisoformat(step.dates.set_up) - dt.date.fromisoformat(step.dates.clear)).days
    move(plan, "S01", "clear", by + 9)


def clear_at_once(plan: Plan) -> None:
    step = plan.step("S01")
    assert step.dates is not None
    by = (dt.date.fromisoformat(step.dates.set_up) - dt.date.fromisoformat(step.dates.clear)).days
    move(plan, "S01", "clear", by)


def collect_a_week_early(plan: Plan) -> None:
    move(plan, "S04", "collect", -7)


def collect_grandchildren(plan: Plan) -> None:
    move(plan, "S04", "collect", 14)


def discard_before_the_last_collection(plan: Plan) -> None:
    move(plan, "S02", "discard", -7)


def set_up_before_the_fathers_are_there(plan: Plan) -> None:
    move(plan, "S02", "collect", 7)


def mothers_too_old(plan: Plan) -> None:
    for kind in ("expand", "virgins", "set up", "clear", "collect", "discard"):
        move(plan, "S01", kind, -7)


def fathers_too_old(plan: Plan) -> None:
    for kind in ("expand", "virgins", "set up", "clear", "collect", "discard"):
        move(plan, "S02", kind, -14)


def virgins_in_the_morning(plan: Plan) -> None:
    # the flies of the weekend are in the vials then
    tasks(plan, "S01", "collect")[0].time = "09:00"


def virgins_too_late_in_the_evening(plan: Plan) -> None:
    tasks(plan, "S01", "collect")[1].time = "19:30"


def vials_not_emptied(plan: Plan) -> None:
    tasks(plan, "S01", "collect")[0].note = "collect virgins"


def stock_virgins_without_emptying(plan: Plan) -> None:
    tasks(plan, "S04", "virgins")[0].note = "collect virgins from the stock"


def stock_virgins_in_the_morning(plan: Plan) -> None:
    tasks(plan, "S04", "virgins")[0].time = "09:00"


def stock_virgins_two_weeks_old(plan: Plan) -> None:
    move(plan, "S04", "expand", -14)
    move(plan, "S04", "virgins", -14)


def stock_virgins_after_set_up(plan: Plan) -> None:
    move(plan, "S04", "virgins", 7)


def no_stock_virgins(plan: Plan) -> None:
    plan.tasks = [t for t in plan.tasks if not (t.step == "S04" and t.kind == "virgins")]


def stock_without_fresh_food(plan: Plan) -> None:
    plan.tasks = [t for t in plan.tasks if not (t.step == "S04" and t.kind == "expand")]


def stock_on_fresh_food_too_late(plan: Plan) -> None:
    move(plan, "S04", "expand", 7)


def assay_of_old_flies(plan: Plan) -> None:
    move_assay(plan, CONTROL, 7)


def assay_of_young_flies(plan: Plan) -> None:
    move_assay(plan, CONTROL, -1)


def assay_outside_its_window(plan: Plan) -> None:
    target = next(t for t in plan.targets if t.target == CONTROL)
    assert target.assay_date is not None
    target.assay_from = shifted(target.assay_date, 1)


def assay_on_the_day_of_collection(plan: Plan) -> None:
    dates = plan.step("S04").dates
    target = next(t for t in plan.targets if t.target == CONTROL)
    assert dates is not None
    assert target.assay_date is not None
    by = dt.date.fromisoformat(dates.collect_to) - dt.date.fromisoformat(target.assay_date)
    move_assay(plan, CONTROL, by.days)


def no_retinal_food(plan: Plan) -> None:
    plan.tasks = [t for t in plan.tasks if t.kind != "food"]


def retinal_food_the_day_before(plan: Plan) -> None:
    assay = next(t for t in plan.tasks if t.kind == "assay" and t.target == TARGET)
    tasks(plan, "S03", "food")[0].date = shifted(assay.date, -1)


def retinal_food_before_the_flies(plan: Plan) -> None:
    move(plan, "S03", "food", -7)


def due_day_missed_in_silence(plan: Plan) -> None:
    plan.targets[0].due = "2027-03-20"


def cross_without_days_in_silence(plan: Plan) -> None:
    plan.step("S04").dates = None
    plan.tasks = [t for t in plan.tasks if t.step != "S04"]
    plan.targets[1].assay_date = None


def rig_too_full(plan: Plan) -> None:
    plan.targets[0].flies = 41


def the_same_id_twice(plan: Plan) -> None:
    plan.tasks[3].id = plan.tasks[4].id


def no_set_up_task(plan: Plan) -> None:
    plan.tasks = [t for t in plan.tasks if not (t.step == "S02" and t.kind == "set up")]


def no_clear_task(plan: Plan) -> None:
    plan.tasks = [t for t in plan.tasks if not (t.step == "S02" and t.kind == "clear")]


def no_collect_task(plan: Plan) -> None:
    plan.tasks = [t for t in plan.tasks if not (t.step == "S02" and t.kind == "collect")]


def no_discard_task(plan: Plan) -> None:
    plan.tasks = [t for t in plan.tasks if not (t.step == "S02" and t.kind == "discard")]


def discard_task_on_another_day(plan: Plan) -> None:
    tasks(plan, "S02", "discard")[0].date = shifted(tasks(plan, "S02", "discard")[0].date, 1)


def no_assay_task(plan: Plan) -> None:
    plan.tasks = [t for t in plan.tasks if t.kind != "assay"]


def task_of_an_unknown_step(plan: Plan) -> None:
    plan.tasks.append(plan.tasks[0].model_copy(update={"id": "S09-clear", "step": "S09"}))


def task_of_an_unknown_target(plan: Plan) -> None:
    next(t for t in plan.tasks if t.kind == "food").target = "K12 x Q08 > CsChrimson"


def tasks_without_dates(plan: Plan) -> None:
    plan.step("S03").dates = None


def cross_without_its_mothers(plan: Plan) -> None:
    plan.step("S01").dates = None


def assay_task_without_a_day(plan: Plan) -> None:
    plan.targets[1].assay_date = None


def a_stranger(plan: Plan) -> None:
    plan.tasks[0].person = "Nobody"


def nobody_s_task(plan: Plan) -> None:
    plan.tasks[0].person = ""


def before_the_plan_begins(plan: Plan) -> None:
    plan.screen.start = "2027-03-09"


def one_task_in_other_hands(plan: Plan) -> None:
    task = tasks(plan, "S01", "collect")[1]
    task.person = next(p for p in PEOPLE if p != task.person)


def stock_food_a_month_old(plan: Plan) -> None:
    move(plan, "S04", "expand", -28)


def retinal_food_in_the_light(plan: Plan) -> None:
    for task in plan.tasks:
        if task.kind == "food":
            task.note = "move the flies to retinal food"


def no_date_at_all(plan: Plan) -> None:
    plan.tasks[0].date = "1.3.2027"


def no_time_at_all(plan: Plan) -> None:
    plan.tasks[0].time = "morning"


@pytest.mark.parametrize(
    ("spoil", "code"),
    [
        (set_up_on_sunday, "day-off"),
        (before_the_plan_begins, "day-off"),
        (clear_too_late, "clear"),
        (clear_at_once, "clear"),
        (collect_a_week_early, "collect"),
        (collect_grandchildren, "collect"),
        (discard_before_the_last_collection, "collect"),
        (set_up_before_the_fathers_are_there, "parents"),
        (mothers_too_old, "parents"),
        (fathers_too_old, "parents"),
        (virgins_in_the_morning, "virgins"),
        (virgins_too_late_in_the_evening, "virgins"),
        (vials_not_emptied, "virgins"),
        (stock_virgins_without_emptying, "virgins"),
        (stock_virgins_in_the_morning, "virgins"),
        (stock_virgins_two_weeks_old, "virgins"),
        (stock_virgins_after_set_up, "virgins"),
        (no_stock_virgins, "virgins"),
        (stock_without_fresh_food, "virgins"),
        (stock_on_fresh_food_too_late, "virgins"),
        (assay_of_old_flies, "age"),
        (assay_of_young_flies, "age"),
        (assay_outside_its_window, "age"),
        (assay_on_the_day_of_collection, "anaesthesia"),
        (no_retinal_food, "food"),
        (retinal_food_the_day_before, "food"),
        (retinal_food_before_the_flies, "food"),
        (due_day_missed_in_silence, "due"),
        (cross_without_days_in_silence, "due"),
        (rig_too_full, "rig"),
        (the_same_id_twice, "task"),
        (no_set_up_task, "task"),
        (no_clear_task, "task"),
        (no_collect_task, "task"),
        (no_discard_task, "task"),
        (discard_task_on_another_day, "task"),
        (no_assay_task, "task"),
        (task_of_an_unknown_step, "task"),
        (task_of_an_unknown_target, "task"),
        (tasks_without_dates, "task"),
        (a_stranger, "person"),
        (nobody_s_task, "person"),
        (one_task_in_other_hands, "person"),
        (stock_food_a_month_old, "virgins"),
        (retinal_food_in_the_light, "food"),
        (no_date_at_all, "date"),
        (no_time_at_all, "date"),
    ],
)
def test_a_broken_rule_is_named(plan: Plan, spoil: Callable[[Plan], None], code: str) -> None:
    spoil(plan)
    assert code in codes(plan)


@pytest.mark.parametrize(
    ("spoil", "words"),
    [
        (clear_too_late, "S01: parents are cleared 9 days after set-up, they must be out after 6.0 days"),
        (virgins_too_late_in_the_evening, "10.5 h after the emptying at 09:00, at 25 C 8.0 h are safe"),
        (no_discard_task, "its tasks are on no day"),
        (rig_too_full, "41 flies on"),
        (collect_grandchildren, "flies may be grandchildren from 18.1 days on"),
        (tasks_without_dates, "S03: it has tasks but no dates"),
        (tasks_without_dates, "but no dates for the cross that makes its flies"),
        (cross_without_its_mothers, "S03: its mothers come from S01, which has no dates"),
        (assay_task_without_a_day, "it has an assay task but no assay day"),
    ],
)
def test_the_message_says_what_and_how_much(plan: Plan, spoil: Callable[[Plan], None], words: str) -> None:
    spoil(plan)
    assert any(words in p.message for p in check_schedule(plan, SCREEN))


def test_a_holiday_declared_afterwards(plan: Plan) -> None:
    holiday = dt.date.fromisoformat(tasks(plan, "S03", "clear")[0].date)
    later = SCREEN.model_copy(update={"calendar": SCREEN.calendar.model_copy(update={"holidays": (holiday,)})})
    found = [p for p in check_schedule(plan, later) if p.code == "schedule-day-off"]
    assert any(p.message.startswith("S03-clear: ") and str(holiday) in p.message for p in found)


def test_a_day_at_the_edge_of_laying_and_of_clearing(plan: Plan) -> None:
    # at 25 C parents are out by day 6; one day is enough to lay
    clear_too_late(plan)
    move(plan, "S01", "clear", -2)
    assert "clear" in codes(plan)
    move(plan, "S01", "clear", -1)
    assert "clear" not in codes(plan)
    move(plan, "S01", "clear", -5)
    assert "clear" not in codes(plan)


def test_a_culture_is_discarded_before_there_are_grandchildren(plan: Plan) -> None:
    # at 25 C flies may be grandchildren from 18.1 days on; S03 is set up on 26 March
    step = plan.step("S03")
    assert step.dates is not None
    by = (dt.date.fromisoformat(step.dates.set_up) - dt.date.fromisoformat(step.dates.discard)).days
    move(plan, "S03", "discard", by + 18)
    assert "collect" not in codes(plan)
    move(plan, "S03", "discard", 1)
    assert "collect" in codes(plan)


def test_an_assay_that_has_no_day_is_named(plan: Plan) -> None:
    ages = {TARGET: (3, 7), CONTROL: (3, 7)}
    target = plan.targets[1]
    target.assay_date = target.assay_from = target.assay_to = None
    plan.tasks = [t for t in plan.tasks if t.target != CONTROL]
    found = check_schedule(plan, SCREEN, ages)
    assert [p.message for p in found] == [f"{CONTROL}: it has no assay day, and no caution says so"]
    target.cautions.append("no day could be found for its assay")
    assert check_schedule(plan, SCREEN, ages) == ()


def test_hours_written_without_a_leading_nought() -> None:
    early = screen_of(calendar=CalendarSection(people=PEOPLE, morning="9:00"))
    plan = on_calendar(two_generations(), two_targets(), early)
    assert check_schedule(plan, early) == ()
    assert {t.time for t in plan.tasks} == {"09:00", "16:30"}
    tasks(plan, "S01", "collect")[0].time = "08:30"
    assert codes(plan, early) == {"virgins"}


def test_flies_reared_hot_are_no_parents(plan: Plan) -> None:
    plan.step("S02").temperature_C = 29.0
    hot = [p.message for p in check_schedule(plan, SCREEN) if p.code == "schedule-hot"]
    assert hot == ["S03: its fathers were reared at 29 C in S02: do not breed from them"]


def test_flies_for_the_assay_alone_may_be_reared_hot(plan: Plan) -> None:
    plan.step("S03").temperature_C = 29.0
    assert "hot" not in codes(plan)


def test_a_slower_strain_makes_the_same_collections_too_early(plan: Plan) -> None:
    slow = SCREEN.model_copy(update={"rearing": RearingSection(hours_at_25=330.0)})
    assert "collect" in codes(plan, slow)


def test_a_missed_due_day_that_is_named_is_no_fault(plan: Plan) -> None:
    due_day_missed_in_silence(plan)
    plan.targets[0].cautions.append("not ready by the day it is due (2027-03-20)")
    assert "due" not in codes(plan)


def test_a_stock_that_comes_after_its_due_day_is_named(plan: Plan) -> None:
    # a stock has no assay day: it is ready when its first flies are collected
    target = plan.targets[1]
    target.assay_date = target.assay_from = target.assay_to = None
    target.due = "2027-03-20"
    plan.tasks = [t for t in plan.tasks if t.target != CONTROL]
    assert codes(plan) == {"due"}


def test_ages_that_are_handed_over_count(plan: Plan) -> None:
    assert check_schedule(plan, SCREEN, {TARGET: (3, 7), CONTROL: (3, 7)}) == ()
    found = check_schedule(plan, SCREEN, {TARGET: (10, 14), CONTROL: (3, 7)})
    assert [p.code for p in found] == ["schedule-age"]
    assert "10 to 14 are asked for" in found[0].message


def test_ages_of_a_table_of_pairs_are_not_guessed(plan: Plan) -> None:
    pairs = SCREEN.model_copy(update={"screen": ScreenSection(pairs="pairs.csv")})
    move_assay(plan, CONTROL, 7)
    assert "age" in codes(plan)
    assert "age" not in codes(plan, pairs)


def test_two_targets_on_one_day_fill_the_rig_together(plan: Plan) -> None:
    target = plan.targets[0]
    plan.targets[1].assay_date = target.assay_date
    assert "rig" not in codes(plan)
    target.flies = 21
    assert "rig" in codes(plan)


def test_steps_of_the_same_vials_have_the_same_dates() -> None:
    steps = [cross("S01", "K12-AD", "double balancer"), cross("S02", "K12-AD", "double balancer", same_vials_as="S01")]
    plan = on_calendar(steps, [wanted(TARGET, ["S01"]), wanted(CONTROL, ["S02"])], SCREEN)
    assert check_schedule(plan, SCREEN) == ()
    move(plan, "S02", "collect", 1)
    assert any("not those of S01, whose vials it shares" in p.message for p in check_schedule(plan, SCREEN))


def test_no_people_no_names(plan: Plan) -> None:
    alone = SCREEN.model_copy(update={"calendar": SCREEN.calendar.model_copy(update={"people": ()})})
    assert "person" in codes(plan, alone)
    for task in plan.tasks:
        task.person = ""
    for step in plan.steps:
        step.person = ""
    assert codes(plan, alone) == set()
