"""The work of one day: what is planned, what is overdue, which cultures do not run as planned, which days move."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from crossplan.bench.choice import chosen_tasks
from crossplan.errors import InputError, Problem, Severity
from crossplan.logbook.culture import cultures
from crossplan.logbook.entry import Entry, Event
from crossplan.logbook.progress import Moved, StepProgress, moved_tasks, progress
from crossplan.plan.model import Plan, TaskRecord

#: tasks that leave an entry when they are done, so that a missing entry says something
LEAVES_AN_ENTRY = frozenset(("virgins", "set up", "clear", "collect", "discard"))
#: states that need an eye even when nothing is late
NEEDS_AN_EYE = frozenset(("collecting", "short", "failed"))


@dataclass(frozen=True, slots=True)
class DayReport:
    """One day at the bench.

    Attributes:
        date: the day.
        tasks: what the plan has for this day, in walking order.
        done: ids of those tasks that the journal shows as done.
        overdue: tasks of earlier days that the journal does not show as done, and that do not move to this day or a
            later one. Empty while the journal is empty: then nobody keeps one.
        cultures: cultures that are late, early, being collected, short or failed.
        moved: tasks that should move to another day.
        problems: faults of the journal.
    """

    date: dt.date
    tasks: tuple[TaskRecord, ...]
    done: frozenset[str]
    overdue: tuple[TaskRecord, ...]
    cultures: tuple[StepProgress, ...]
    moved: tuple[Moved, ...]
    problems: tuple[Problem, ...]

    @property
    def needs_a_person(self) -> bool:
        """Whether anything does not run as planned; a culture that is collected on its days does."""
        astray = any(c.days_late or c.state != "collecting" for c in self.cultures)
        return bool(self.overdue or astray or self.moved or self.problems)


def new_entry(
    plan: Plan, step: str, event: str, day: dt.date, *, count: int | None = None, person: str = "", note: str = ""
) -> Entry:
    """Return an entry for the journal of a plan.

    Raises:
        InputError: the plan has no such step, or there is no such event.
    """
    ids = {s.id.casefold(): s.id for s in plan.steps}
    known = ids.get(step.strip().casefold())
    if known is None:
        steps = list(ids.values())
        raise InputError(
            f"the plan has no cross '{step}'", f"its crosses: {steps[0]} to {steps[-1]}" if steps else "it has none"
        )
    return Entry(day, known, Event.read(event), count, person, note)


def day_report(
    plan: Plan,
    entries: Sequence[Entry],
    day: dt.date,
    person: str | None = None,
    *,
    problems: Sequence[Problem] = (),
    journal: str = "",
) -> DayReport:
    """Return what `day` holds for everybody, or for one person.

    Args:
        plan: the plan.
        entries: what happened; an entry of a step that the plan lacks, or of a day after `day`, is left out and named.
        day: the day.
        person: only this person's tasks, and cultures in which this person has a task.
        problems: faults already found in the journal, handed on.
        journal: path of the journal, for the place of a fault.

    Raises:
        InputError: the plan has no work for `person`.
    """
    found = [(e, _fault(plan, e, day, journal)) for e in entries]
    good = [e for e, fault in found if fault is None]
    known = cultures(plan, good)
    moved = moved_tasks(plan, good, day)
    tasks = chosen_tasks(plan, [day], person)
    done = frozenset(t.id for t in plan.tasks if t.step in known and known[t.step].has_done(t))
    moving = {m.task.id for m in moved}
    overdue = [
        t
        for t in chosen_tasks(plan, None, person)
        if good and t.date < day.isoformat() and t.kind in LEAVES_AN_ENTRY and t.id not in done | moving
    ]
    mine = {t.step for t in plan.tasks if t.person == person} | {s.id for s in plan.steps if s.person == person}
    return DayReport(
        date=day,
        tasks=tuple(tasks),
        done=done & {t.id for t in tasks},
        overdue=tuple(overdue),
        cultures=tuple(
            s
            for s in progress(plan, good, day)
            if (s.days_late or s.state in NEEDS_AN_EYE) and s.state != "enough" and (person is None or s.step in mine)
        ),
        moved=tuple(m for m in moved if person is None or m.task.person == person),
        problems=(*problems, *(fault for _, fault in found if fault is not None)),
    )


def _fault(plan: Plan, entry: Entry, day: dt.date, journal: str) -> Problem | None:
    if all(s.id != entry.step for s in plan.steps):
        return Problem(
            "journal", Severity.WARNING, f"the plan has no cross '{entry.step}'; the row was left out",
            "correct the cross", journal, entry.row, "step", entry.step,
        )  # fmt: skip
    if entry.date > day:
        text = entry.date.isoformat()
        return Problem(
            "journal", Severity.WARNING, f"{text} is after {day.isoformat()}; the row was left out",
            "correct the day, or ask for a later one", journal, entry.row, "date", text,
        )  # fmt: skip
    return None


def day_json(report: DayReport) -> dict[str, Any]:
    """Return the report as the JSON contract writes it."""
    return {
        "date": report.date.isoformat(),
        "tasks": [{**t.model_dump(mode="json"), "done": t.id in report.done} for t in report.tasks],
        "overdue": [t.model_dump(mode="json") for t in report.overdue],
        "cultures": [
            {"step": s.step, "state": s.state, "collected": s.collected, "needed": s.needed, "days_late": s.days_late}
            for s in report.cultures
        ],
        "moved": [
            {"task": m.task.id, "from": m.task.date, "to": m.to.isoformat(), "because": m.because} for m in report.moved
        ],
        "problems": [f"{p.place()}: {p.message}" if p.place() else p.message for p in report.problems],
    }
