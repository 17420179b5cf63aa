"""The chosen days written down as tasks, and shared among people.

A culture stays with one person, who has the least work so far when the culture is given out.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from crossplan.plan.model import StepDates, TaskRecord
from crossplan.rearing.handling import virgin_hours
from crossplan.schedule.assay import Assay
from crossplan.schedule.culture import Culture, Days
from crossplan.schedule.day_model import MINUTES_PER_ASSAY_FLY, MINUTES_PER_VIAL, tasks_by_day
from crossplan.schedule.solve import Schedule
from crossplan.schedule.week import WorkWeek


def virgin_time(week: WorkWeek, hours: float) -> str:
    """Return when virgins are collected: in the afternoon, or earlier if they are surely virgins only until then."""
    hour, minute = map(int, week.morning.split(":"))
    latest = 60 * hour + minute + int(60 * hours)
    return min(week.afternoon, f"{latest // 60:02d}:{latest % 60:02d}")


def step_dates(days: Days, week: WorkWeek) -> StepDates:
    """Return the dates of a culture as the contract writes them."""
    return StepDates(
        set_up=week.date(days.set_up).isoformat(),
        clear=week.date(days.clear).isoformat(),
        collect_from=week.date(days.first).isoformat(),
        collect_to=week.date(days.last).isoformat(),
        discard=week.date(days.discard).isoformat(),
    )


def share_out(cultures: Sequence[Culture], schedule: Schedule, people: Sequence[str]) -> dict[str, str]:
    """Return who looks after each culture."""
    if not people:
        return {}
    minutes = dict.fromkeys(people, 0.0)
    person: dict[str, str] = {}
    for culture in sorted(cultures, key=lambda c: (schedule.days[c.step].set_up, c.step)):
        who = min(people, key=lambda p: (minutes[p], people.index(p)))
        person[culture.step] = who
        minutes[who] += sum(
            MINUTES_PER_VIAL[kind] * culture.vials for _, kind in tasks_by_day(schedule.days[culture.step])
        )
    return person


def write_tasks(
    cultures: Sequence[Culture],
    assays: Sequence[Assay],
    schedule: Schedule,
    week: WorkWeek,
    person: Mapping[str, str],
) -> list[TaskRecord]:
    """Return every task in the order of days and hours; ids stay the same as long as step and kind do."""
    tasks: list[TaskRecord] = []
    for culture in cultures:
        days = schedule.days.get(culture.step)
        if days is not None:
            tasks += _culture_tasks(culture, days, week, person.get(culture.step, ""))
    for assay in assays:
        if assay.target in schedule.assay:
            tasks += _assay_tasks(assay, schedule, week, person.get(assay.vials_of, ""))
    return sorted(_with_distinct_ids(tasks), key=lambda t: (t.date, t.time, t.step, t.id))


def _with_distinct_ids(tasks: Sequence[TaskRecord]) -> list[TaskRecord]:
    """Number the ids of targets whose names differ only in blanks and hyphens."""
    seen: dict[str, int] = {}
    distinct = []
    for task in tasks:
        seen[task.id] = seen.get(task.id, 0) + 1
        again = seen[task.id]
        distinct.append(task if again == 1 else task.model_copy(update={"id": f"{task.id}-{again}"}))
    return distinct


def _culture_tasks(culture: Culture, days: Days, week: WorkWeek, person: str) -> list[TaskRecord]:
    hours = virgin_hours(culture.temperature_C)
    virgins_at = virgin_time(week, hours)
    made: list[TaskRecord] = []

    def add(kind: str, number: int, day: int, time: str, note: str, step: str = culture.step) -> None:
        suffix = f"-{number}" if number else ""
        made.append(
            TaskRecord.model_validate(
                {
                    "id": f"{step}-{kind.replace(' ', '-')}{suffix}",
                    "date": week.date(day).isoformat(),
                    "time": time,
                    "kind": kind,
                    "step": step,
                    "note": note,
                    "person": person,
                    "minutes": round(MINUTES_PER_VIAL[kind] * culture.vials) if step == culture.step else 0,
                }
            )  # fmt: skip
        )

    if days.expand is not None:
        add("expand", 0, days.expand, week.morning,
            f"put stock {culture.mother_stock} on fresh food, {culture.vials} vials, for virgins of {culture.step}")  # fmt: skip
    for i, day in enumerate(days.stock_collect, start=1):
        add("virgins", i, day, virgins_at,
            f"from stock {culture.mother_stock}: empty its vials at {week.morning}, collect at {virgins_at};"
            f" safe for {hours:.0f} h")  # fmt: skip
    add("set up", 0, days.set_up, week.morning, f"set up {culture.vials} vials at {culture.temperature_C:g} C")
    add("clear", 0, days.clear, week.morning, "take the parents out")
    for step in (culture.step, *culture.also):
        for i, day in enumerate(days.collect, start=1):
            if culture.keeps_virgins:
                note = (
                    f"empty the vials at {week.morning}; females that emerge from then on are virgins at {virgins_at}"
                )
                add("collect", i, day, virgins_at, f"{note} (safe for {hours:.0f} h)", step)
            else:
                add("collect", i, day, week.morning, "collect the kept class", step)
    add("discard", 0, days.discard, week.afternoon, "last collection done: kill and discard the culture")
    return made


def _assay_tasks(assay: Assay, schedule: Schedule, week: WorkWeek, person: str) -> list[TaskRecord]:
    day = schedule.assay[assay.target]
    name = assay.target.replace(" ", "-")
    tasks = [
        TaskRecord(
            id=f"{assay.step}-assay-{name}",
            date=week.date(day).isoformat(),
            time=week.morning,
            kind="assay",
            step=assay.step,
            target=assay.target,
            person=person,
            minutes=round(MINUTES_PER_ASSAY_FLY * assay.flies),
            note=f"{assay.flies} flies, {_ages(assay, schedule, day)} days old; no anaesthesia since the day before",
        )  # fmt: skip
    ]
    if assay.feed_days:
        last = schedule.days[assay.vials_of].last
        feed = max((d for d in week.days if last <= d <= day - assay.feed_days), default=last)
        tasks.append(
            TaskRecord(
                id=f"{assay.step}-food-{name}",
                date=week.date(feed).isoformat(),
                time=week.afternoon,
                kind="food",
                step=assay.step,
                target=assay.target,
                person=person,
                minutes=5,
                note=f"move the flies to retinal food, in the dark, until {week.date(day).isoformat()}",
            )  # fmt: skip
        )
    return tasks


def _ages(assay: Assay, schedule: Schedule, day: int) -> str:
    made = schedule.days[assay.vials_of]
    youngest, oldest = day - made.last, day - made.born_from
    return str(youngest) if youngest == oldest else f"{youngest}-{oldest}"
