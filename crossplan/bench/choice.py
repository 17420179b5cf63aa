"""Which tasks and steps of a plan are printed: by day, by person, by step."""

from __future__ import annotations

import datetime as dt
import re
from collections.abc import Iterable

from crossplan.bench.words import WALKING_ORDER, Day, as_date
from crossplan.errors import InputError
from crossplan.plan.model import Plan, StepRecord, TaskRecord

TaskOrder = tuple[str, str, int, tuple[tuple[str, int, str], ...], str]


def natural(text: str) -> tuple[tuple[str, int, str], ...]:
    """Return a key that sorts S2 before S10."""
    return tuple((w.lower(), int(n or 0), n) for w, n in re.findall(r"(\D*)(\d*)", text))


def walking_key(task: TaskRecord) -> TaskOrder:
    """Return the key that puts tasks in walking order: day, hour, kind, step."""
    return (task.date, task.time, WALKING_ORDER.index(task.kind), natural(task.step), task.id)


def chosen_days(dates: Iterable[Day] | None) -> frozenset[str] | None:
    """Return the days asked for as ISO text; None means all. InputError if one is no date."""
    if dates is None:
        return None
    if isinstance(dates, (str, dt.date)):
        dates = [dates]
    days = set()
    for day in dates:
        try:
            days.add(as_date(day).isoformat())
        except ValueError:
            raise InputError(f"{day!r} is not a date", "Write days as YYYY-MM-DD, such as 2027-01-11.") from None
    return frozenset(days)


def first_day(plan: Plan) -> dt.date | None:
    """Return the day on which the plan starts: its own word, or its first task; None when it has neither.

    It stands in for the day of writing in the files that are made, so that the clock does not enter them.
    """
    days = [plan.screen.start] if plan.screen.start else sorted(t.date for t in plan.tasks)
    return as_date(days[0]) if days else None


def people_of(plan: Plan) -> tuple[str, ...]:
    """Return everybody to whom the plan gives work, in alphabetical order."""
    return tuple(sorted({t.person for t in plan.tasks if t.person} | {s.person for s in plan.steps if s.person}))


def check_person(plan: Plan, person: str | None) -> None:
    """Raise InputError when the plan has no work for `person`."""
    people = people_of(plan)
    if person is not None and person not in people:
        known = f"People in this plan: {', '.join(people)}." if people else "This plan names nobody."
        raise InputError(f"the plan has no work for {person!r}", known)


def chosen_tasks(plan: Plan, dates: Iterable[Day] | None = None, person: str | None = None) -> list[TaskRecord]:
    """Return the tasks on these days (None: all) of this person (None: everybody), in walking order."""
    check_person(plan, person)
    days = chosen_days(dates)
    tasks = [t for t in plan.tasks if (days is None or t.date in days) and (person is None or t.person == person)]
    return sorted(tasks, key=walking_key)


def chosen_steps(
    plan: Plan,
    steps: Iterable[str] | None = None,
    dates: Iterable[Day] | None = None,
    person: str | None = None,
) -> list[StepRecord]:
    """Return the steps with these ids that are set up on these days by this person, in the order of setting
    up.

    None means all. A step's person is its own, or else whoever has its task of setting up.
    """
    check_person(plan, person)
    days = chosen_days(dates)
    wanted = None if steps is None else {steps} if isinstance(steps, str) else set(steps)
    unknown = sorted((wanted or set()) - {s.id for s in plan.steps}, key=natural)
    if unknown:
        raise InputError(f"the plan has no step {', '.join(unknown)}", f"Its steps: {_some(plan)}.")
    hands = {t.step: t.person for t in plan.tasks if t.kind == "set up"}

    def is_chosen(step: StepRecord) -> bool:
        day = step.dates.set_up if step.dates else ""
        mine = person is None or (step.person or hands.get(step.id, "")) == person
        return mine and (wanted is None or step.id in wanted) and (days is None or day in days)

    def order(step: StepRecord) -> tuple[str, int, tuple[tuple[str, int, str], ...]]:
        return (step.dates.set_up if step.dates else "9999", step.generation, natural(step.id))

    return sorted(filter(is_chosen, plan.steps), key=order)


def _some(plan: Plan, most: int = 12) -> str:
    ids = sorted((s.id for s in plan.steps), key=natural)
    return ", ".join(ids[:most]) + (f" and {len(ids) - most} more" if len(ids) > most else "") if ids else "none"
