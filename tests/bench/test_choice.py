from __future__ import annotations

import datetime as dt

import pytest
from example_plan import example_plan

from crossplan.bench.choice import chosen_days, chosen_steps, chosen_tasks, first_day, natural, people_of
from crossplan.bench.words import WALKING_ORDER
from crossplan.errors import InputError
from crossplan.plan.model import TaskRecord


def test_numbers_in_names_are_sorted_as_numbers() -> None:
    assert sorted(["S10", "S2", "S2b", "s1"], key=natural) == ["s1", "S2", "S2b", "S10"]


def test_every_kind_of_task_has_its_place_in_the_round() -> None:
    kinds = TaskRecord.model_fields["kind"].annotation
    assert set(WALKING_ORDER) == set(kinds.__args__)  # type: ignore[union-attr]


def test_tasks_come_by_day_hour_and_kind() -> None:
    tasks = chosen_tasks(example_plan())
    keys = [(t.date, t.time, WALKING_ORDER.index(t.kind)) for t in tasks]
    assert keys == sorted(keys)
    assert len(tasks) == len(example_plan().tasks)


def test_days_may_be_text_or_dates_or_one_of_either() -> None:
    day = dt.date(2027, 3, 4)
    assert chosen_days(["2027-03-04"]) == chosen_days([day]) == chosen_days(day) == chosen_days("2027-03-04")
    assert chosen_days(None) is None
    with pytest.raises(InputError, match="not a date"):
        chosen_days(["4 March"])


def test_a_step_without_a_person_belongs_to_whoever_sets_it_up() -> None:
    plan = example_plan()
    plan.steps[0] = plan.steps[0].model_copy(update={"person": ""})
    assert [s.id for s in chosen_steps(plan, person="Ida")] == ["S01", "S03"]


def test_people_and_first_day_come_from_the_plan() -> None:
    plan = example_plan()
    assert people_of(plan) == ("Ida", "Tomas")
    assert first_day(plan) == dt.date(2027, 2, 22)
    bare = plan.model_copy(update={"screen": plan.screen.model_copy(update={"start": ""})})
    assert first_day(bare) == dt.date(2027, 2, 22)
    assert first_day(bare.model_copy(update={"tasks": []})) is None


def test_an_empty_plan_names_nobody() -> None:
    plan = example_plan().model_copy(update={"steps": [], "tasks": []})
    with pytest.raises(InputError, match="no work"):
        chosen_tasks(plan, person="Ida")
    with pytest.raises(InputError) as caught:
        chosen_steps(plan, steps=["S01"])
    assert "none" in caught.value.hint
