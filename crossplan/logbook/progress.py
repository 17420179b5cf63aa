"""Where every culture stands, and which days of the plan move because of what was seen.

A culture whose first flies (or pupae) come on another day than planned moves its own later tasks, and those of
every cross that uses its flies, by as many days; the new days are proposals, since only a new schedule knows the
working week.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

from crossplan.logbook.entry import Entry, Event
from crossplan.plan.model import Plan, StepRecord, TaskRecord

State = Literal["not set up", "growing", "collecting", "enough", "short", "failed"]


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


def progress(plan: Plan, entries: Sequence[Entry], today: dt.date) -> tuple[StepProgress, ...]:
    """Return the state of every step of the plan on `today`."""
    return tuple(_step_progress(step, [e for e in entries if e.step == step.id], today) for step in plan.steps)


def _step_progress(step: StepRecord, entries: Sequence[Entry], today: dt.date) -> StepProgress:
    collected = sum(e.count or 0 for e in entries if e.event is Event.COLLECTED)
    failed = sum(e.count or 0 for e in entries if e.event is Event.FAILED)
    events = {e.event for e in entries}
    state: State
    if collected >= step.flies_needed:
        state = "enough"
    elif failed and failed >= step.vials:
        state = "failed"
    elif step.dates is not None and today > dt.date.fromisoformat(step.dates.collect_to) and events:
        state = "short"
    elif collected or Event.FLIES in events:
        state = "collecting"
    elif events & {Event.SET_UP, Event.CLEARED, Event.PUPAE}:
        state = "growing"
    else:
        state = "not set up"
    return StepProgress(step.id, state, collected, step.flies_needed, days_late(step, entries))


def days_late(step: StepRecord, entries: Sequence[Entry]) -> int:
    """Return by how many days the culture runs behind its plan (ahead: negative), by the latest sign of it.

    First flies count against the planned first collection; before them, the day of set-up against the planned one.
    """
    if step.dates is None:
        return 0
    for event, planned in ((Event.FLIES, step.dates.collect_from), (Event.SET_UP, step.dates.set_up)):
        seen = [e.date for e in entries if e.step == step.id and e.event is event]
        if seen:
            return (min(seen) - dt.date.fromisoformat(planned)).days
    return 0


def moved_tasks(plan: Plan, entries: Sequence[Entry]) -> tuple[Moved, ...]:
    """Return the tasks not yet past that should move, in the order of their new days.

    Each task moves by the delay of its own culture, or of the slowest culture that its flies come from.
    """
    delays: dict[str, tuple[int, str]] = {}
    for step in plan.steps:
        own = days_late(step, entries)
        candidates = [(own, step.id)] if own else []
        if not _has(entries, step.id, Event.SET_UP):
            candidates += [delays[p] for p in (step.mother.step, step.father.step) if p in delays]
        late = max(candidates, key=lambda c: c[0], default=(0, step.id))
        if late[0]:
            delays[step.id] = late
    done = {(e.step, e.event) for e in entries}
    moved = [
        Moved(task, dt.date.fromisoformat(task.date) + dt.timedelta(days=delays[task.step][0]), delays[task.step][1])
        for task in plan.tasks
        if task.step in delays and not _is_done(task, done)
    ]
    return tuple(sorted(moved, key=lambda m: (m.to, m.task.time, m.task.id)))


def _has(entries: Sequence[Entry], step: str, event: Event) -> bool:
    return any(e.step == step and e.event is event for e in entries)


def _is_done(task: TaskRecord, done: set[tuple[str, Event]]) -> bool:
    events = {"set up": Event.SET_UP, "clear": Event.CLEARED, "discard": Event.DISCARDED}
    event = events.get(task.kind)
    return event is not None and (task.step, event) in done
