"""The tasks of a day as stops of one walk: what is done to one stock for several crosses is one stop.

Emptying vials in the morning, so that the females found later that day are virgins, is a stop of its own at its
own hour. The plan says so in the note of the collection that it belongs to, and it is read from there.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from itertools import groupby

from crossplan.bench.choice import natural
from crossplan.bench.words import WALKING_ORDER
from crossplan.plan.model import Plan, StepRecord, TaskRecord

EMPTY = "empty"
#: Kinds of task that are done to the mother stock of a cross, not to its vials.
AT_THE_STOCK = ("expand", "virgins")
#: What sets the clock for the virgins comes first of all. Common practice, no source.
ORDER = (EMPTY, *WALKING_ORDER)
_EMPTYING = re.compile(r"\bempty (?:its|the) vials at (\d\d:\d\d)\b")

HEADINGS = {
    EMPTY: "EMPTY: shake all adults out, so that females found later today are virgins",
    "clear": "CLEAR: take the parents out",
    "virgins": "VIRGINS: females from stocks",
    "collect": "COLLECT: sort and keep",
    "shift": "SHIFT: move to another temperature",
    "food": "FOOD: special food",
    "expand": "EXPAND: more of a stock",
    "set up": "SET UP: new crosses",
    "assay": "ASSAY: flies for the rig",
    "discard": "DISCARD: kill and throw away",
}


@dataclass(frozen=True, slots=True)
class Stop:
    """One stop: day, hour, kind (a kind of task, or `empty`), the stock or the cross where, and its tasks.

    `stock` is empty where the stop is at the vials of a cross; `place` is then the step. `then` is the hour at
    which the virgins are collected, for an emptying.
    """

    date: str
    time: str
    kind: str
    place: str
    stock: str
    tasks: tuple[TaskRecord, ...]
    then: str = ""

    @property
    def steps(self) -> tuple[str, ...]:
        """The crosses that it is for, each once."""
        return tuple(dict.fromkeys(t.step for t in self.tasks))

    @property
    def people(self) -> tuple[str, ...]:
        """Who does it, each once, in the order of the crosses."""
        return tuple(dict.fromkeys(t.person for t in self.tasks if t.person))

    @property
    def minutes(self) -> int:
        """Minutes of all its tasks; an emptying is counted with its collection."""
        return 0 if self.kind == EMPTY else sum(t.minutes for t in self.tasks)

    @property
    def note(self) -> str:
        """The notes of its tasks, each once; none where the stop itself says it all."""
        if self.kind == EMPTY:
            return ""
        return " ".join(dict.fromkeys(t.note for t in self.tasks if t.note))


def walk_of(plan: Plan, tasks: Iterable[TaskRecord]) -> list[Stop]:
    """Return the stops of these tasks in walking order: day, hour, kind, place."""
    steps = {step.id: step for step in plan.steps}
    given = list(tasks)
    placed: list[tuple[str, str, str, str, TaskRecord]] = [(_place(steps, t), t.kind, t.time, "", t) for t in given]
    placed += [(_vials_at(steps, t), EMPTY, hour, t.time, t) for t in given if (hour := emptied_at(t))]
    order = sorted(placed, key=lambda p: (p[4].date, p[2], ORDER.index(p[1]), natural(p[0]), natural(p[4].id)))
    stops = []
    for (date, time, kind, place), group in groupby(order, key=lambda p: (p[4].date, p[2], p[1], p[0])):
        members = list(group)
        is_shared = kind in (*AT_THE_STOCK, EMPTY)
        for one in [members] if is_shared else [[member] for member in members]:
            then = min(p[3] for p in one)
            tasks_here = tuple(p[4] for p in one)
            stops.append(Stop(date, time, kind, place, "" if place in steps else place, tasks_here, then))
    return stops


def emptied_at(task: TaskRecord) -> str:
    """Return the hour at which the vials of a collection are emptied before, `09:00`; empty if they are not."""
    found = _EMPTYING.search(task.note) if task.kind in ("collect", "virgins") else None
    return found.group(1) if found else ""


def _place(steps: dict[str, StepRecord], task: TaskRecord) -> str:
    step = steps.get(task.step)
    return step.mother.stock or task.step if step and task.kind in AT_THE_STOCK else task.step


def _vials_at(steps: dict[str, StepRecord], task: TaskRecord) -> str:
    """Return whose vials are emptied for a collection: a stock, or the cross that owns the vials."""
    step = steps.get(task.step)
    return step.same_vials_as if step and task.kind == "collect" and step.same_vials_as else _place(steps, task)


def vials_for(plan: Plan, stop: Stop) -> dict[str, int]:
    """Return how many vials the stop has for each of its crosses; a step that the plan does not hold has none."""
    known = {step.id: step for step in plan.steps}
    found = {step: known[step].vials for step in stop.steps if step in known}
    if stop.place in known and stop.place not in found:
        found = {stop.place: known[stop.place].vials}
    return found


def shared_note(stops: Sequence[Stop]) -> str:
    """Return the note that several stops have in common, to be said once; empty if they differ."""
    notes = {stop.note for stop in stops}
    return notes.pop() if len(notes) == 1 and len(stops) > 1 else ""
