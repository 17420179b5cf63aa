from __future__ import annotations

from example_plan import example_plan, virgins_plan
from reading_back import texts

from crossplan.bench.bench_sheet import bench_sheet_pdf
from crossplan.bench.choice import chosen_tasks
from crossplan.bench.walk import Stop, emptied_at, vials_for, walk_of
from crossplan.bench.words import WALKING_ORDER
from crossplan.plan.model import Plan
from tests.schedule.small_plans import on_calendar, screen_of, two_generations, two_targets

DAY = "2027-03-17"


def stops(plan: Plan, kind: str, person: str | None = None) -> list[Stop]:
    return [s for s in walk_of(plan, chosen_tasks(plan, [DAY], person)) if s.kind == kind]


def test_one_stop_for_a_stock_and_hour() -> None:
    plan = virgins_plan()
    (expand,) = stops(plan, "expand")
    assert (expand.stock, expand.steps, expand.minutes) == ("CsChrimson attP18", ("S04", "S05", "S06"), 30)
    assert vials_for(plan, expand) == {"S04": 6, "S05": 2, "S06": 3}
    assert expand.people == ("Tomas", "Ida")
    (mine,) = stops(plan, "expand", "Ida")
    assert mine.steps == ("S06",)


def test_emptying_is_a_stop_of_its_own_and_comes_first() -> None:
    plan = virgins_plan()
    stock, cross = stops(plan, "empty")
    assert (stock.time, stock.then, stock.stock, stock.minutes) == ("08:30", "15:00", "CsChrimson attP18", 0)
    assert (cross.place, cross.stock, cross.steps) == ("S01", "", ("S01",))
    walk = walk_of(plan, chosen_tasks(plan, [DAY]))
    assert [s.kind for s in walk][:3] == ["empty", "empty", "expand"]


def test_vials_that_two_crosses_share_are_emptied_once() -> None:
    plan = virgins_plan()
    twin = plan.steps[0].model_copy(update={"id": "S07", "same_vials_as": "S01", "vials": 0})
    plan.steps.append(twin)
    task = next(t for t in plan.tasks if t.step == "S01" and t.date == DAY)
    plan.tasks.append(task.model_copy(update={"id": "S07-collect-1", "step": "S07"}))
    crosses = [s for s in stops(plan, "empty") if not s.stock]
    assert [(s.place, s.steps) for s in crosses] == [("S01", ("S01", "S07"))]


def test_other_stops_are_one_for_a_task() -> None:
    plan = example_plan()
    walk = walk_of(plan, plan.tasks)
    assert len(walk) == len(plan.tasks)
    order = [(s.date, s.time, WALKING_ORDER.index(s.kind)) for s in walk]
    assert order == sorted(order)


def test_the_notes_that_the_schedule_writes_are_understood() -> None:
    """If the schedule worded them otherwise, emptying would fall off every sheet unseen."""
    tasks = on_calendar(two_generations(), two_targets(), screen_of()).tasks
    hours = {kind: {emptied_at(t) for t in tasks if t.kind == kind} for kind in ("virgins", "collect", "set up")}
    assert hours == {"virgins": {"09:00"}, "collect": {"09:00", ""}, "set up": {""}}


def test_the_sheet_gives_total_vials_and_virgins_and_the_hour() -> None:
    page = texts(bench_sheet_pdf(virgins_plan(), dates=[DAY]))[0]
    assert page.index("08:30 EMPTY") < page.index("08:30 EXPAND") < page.index("15:00 COLLECT")
    assert "11 vials; virgins at 15:00 for S04, S05, S06" in page
    assert "11 vials of fresh food for virgins of S04 (6), S05 (2), S06 (3)" in page
    assert "55 ♀: S04 30 S05 10 S06 15" in page
