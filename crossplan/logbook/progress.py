"""Where every culture stands, and which days of the plan move because of what was seen.

A culture that is set up, or whose first flies come, on another day than planned moves its own later tasks, and those
of every cross that uses its flies, by as many days; one that failed moves them to when it can be set up again. The new
days are proposals: a delay is handed on whole, though the plan may have had days to spare, and only a new schedule
knows the working week.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from crossplan.logbook.culture import Culture, State, culture, cultures
from crossplan.logbook.entry import Entry
from crossplan.plan.model import Plan, StepRecord, TaskRecord


@dataclass(frozen=True, slots=True)
class StepProgress:
    """One culture: its state, flies collected of those needed, and by how many days it runs late (early: negative)."""

    step: str
    state: State
    collected: int
    needed: int
    days_late: int


@dataclass(frozen=True, slots=True)
class Moved:
    """A task that should move: from its day to `to`, because of `because` (a step)."""

    task: TaskRecord
    to: dt.date
    because: str


@dataclass(frozen=True, slots=True)
class _Delay:
    """By how many days the tasks of a step move, and the step that this comes from."""

    days: int
    because: str


def progress(plan: Plan, entries: Sequence[Entry], today: dt.date) -> tuple[StepProgress, ...]:
    """Return the state of every step of the plan on `today`."""
    return tuple(
        StepProgress(c.step.id, c.state(today), c.collected, c.step.flies_needed, c.days_late)
        for c in cultures(plan, entries).values()
    )


def days_late(step: StepRecord, entries: Sequence[Entry]) -> int:
    """Return by how many days a culture with vials of its own runs behind its plan (ahead: negative)."""
    return culture(step, [e for e in entries if e.step == step.id], step.vials).days_late


def moved_tasks(plan: Plan, entries: Sequence[Entry], today: dt.date | None = None) -> tuple[Moved, ...]:
    """Return the tasks that should move, in the order of their new days.

    A culture that is set up moves by its own delay; one that is not, by that of the slowest culture that its flies
    come from, so one early parent does not hurry a cross whose other parent is on time. Tasks that are done, and tasks
    whose old and new day are both past on `today`, do not move; none moves to a day before `today`.
    """
    known = cultures(plan, entries)
    delays = _delays(plan, known, today)
    moved = []
    for task in plan.tasks:
        delay = delays.get(task.step)
        if delay is None or not delay.days or known[task.step].has_done(task):
            continue
        planned = dt.date.fromisoformat(task.date)
        to = planned + dt.timedelta(days=delay.days)
        if today is not None and to < today:
            if planned < today:
                continue
            to = today
        if to != planned:
            moved.append(Moved(task, to, delay.because))
    return tuple(sorted(moved, key=lambda m: (m.to, m.task.time, m.task.id)))


def _delays(plan: Plan, known: Mapping[str, Culture], today: dt.date | None) -> dict[str, _Delay]:
    delays: dict[str, _Delay] = {}
    for step in sorted(plan.steps, key=lambda s: s.generation):
        here = known[step.id]
        if here.is_begun:
            delays[step.id] = _Delay(here.days_late, step.id)
            continue
        candidates = [delays[p] for p in (step.mother.step, step.father.step) if p in delays]
        if here.must_be_repeated and today is not None:
            candidates.append(_Delay(_days_until_again(plan, here, today), step.id))
        delays[step.id] = max(candidates, key=lambda d: d.days, default=_Delay(0, step.id))
    return delays


def _days_until_again(plan: Plan, lost: Culture, today: dt.date) -> int:
    """Return by how many days a lost culture moves so that the first task of doing it again falls on today."""
    host = lost.step.same_vials_as or lost.step.id
    again = [t.date for t in plan.tasks if t.step == host and t.kind in ("virgins", "set up")]
    return max((today - dt.date.fromisoformat(min(again))).days, 0) if again else 0
