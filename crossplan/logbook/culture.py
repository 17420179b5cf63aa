"""What the entries say of one culture: whether it stands, by how much it is late, which of its tasks are done.

A culture that is over (all its vials failed, or it was discarded) and is then set up again starts anew: what was seen
of it before no longer says when its flies come. Crosses that share vials share everything but their collected flies.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Literal

from crossplan.logbook.entry import Entry, Event
from crossplan.plan.model import Plan, StepRecord, TaskRecord

State = Literal["not set up", "growing", "collecting", "enough", "short", "failed"]

#: by first flies the parents must be out, and any change of temperature is over
FLIES_ARE_OUT = frozenset((Event.FLIES, Event.COLLECTED, Event.DISCARDED))


@dataclass(frozen=True, slots=True)
class Culture:
    """One step, what was seen of its vials since they were last set up, and what was collected of it.

    Attributes:
        step: the step of the plan.
        vials: vials that its flies come from, those of another step when it shares them.
        seen: entries on these vials but collections of other steps, by day, from the last setting-up anew.
        collected: flies of its kept class collected so far, over all settings-up.
    """

    step: StepRecord
    vials: int
    seen: tuple[Entry, ...]
    collected: int

    @property
    def has_failed(self) -> bool:
        """Whether all vials failed; `failed` without a number means all."""
        failed = [e.count for e in self.seen if e.event is Event.FAILED]
        return None in failed or (bool(failed) and sum(n or 0 for n in failed) >= max(self.vials, 1))

    @property
    def is_over(self) -> bool:
        """Whether no flies will come of it any more."""
        return self.has_failed or self._has(Event.DISCARDED)

    @property
    def is_enough(self) -> bool:
        """Whether as many flies as are needed were collected."""
        return 0 < self.collected >= self.step.flies_needed

    @property
    def must_be_repeated(self) -> bool:
        """Whether it failed, or was discarded without a fly; with some flies, it is for a person to say."""
        return not self.is_enough and (self.has_failed or (self._has(Event.DISCARDED) and not self.collected))

    @property
    def is_begun(self) -> bool:
        """Whether it was set up, as far as the entries show, and need not be again."""
        return not self.must_be_repeated and any(e.event is not Event.NOTE for e in self.seen)

    def state(self, today: dt.date) -> State:
        """Return how it stands on `today`; it is short when its last day of collecting, late as it is, has passed."""
        if self.is_enough:
            return "enough"
        if self.has_failed:
            return "failed"
        if self._has(Event.DISCARDED):
            return "short"
        if not self.is_begun:
            return "not set up"
        if self.step.dates is not None:
            last = dt.date.fromisoformat(self.step.dates.collect_to) + dt.timedelta(days=max(self.days_late, 0))
            if today > last:
                return "short"
        return "collecting" if self._has(Event.FLIES, Event.COLLECTED) else "growing"

    @property
    def days_late(self) -> int:
        """By how many days it runs behind its plan (ahead: negative), by the latest sign of it.

        First flies count against the planned first collection. Before them, the setting-up counts against its planned
        day; flies collected though nobody wrote down the first ones were there on that day at the latest.
        """
        dates = self.step.dates
        if dates is None:
            return 0
        flies, set_up, collected = (self._first(e) for e in (Event.FLIES, Event.SET_UP, Event.COLLECTED))
        first_flies, planned_set_up = (dt.date.fromisoformat(d) for d in (dates.collect_from, dates.set_up))
        if flies is not None:
            return (flies - first_flies).days
        late = (set_up - planned_set_up).days if set_up is not None else 0
        return min(late, (collected - first_flies).days) if collected is not None else late

    def has_done(self, task: TaskRecord) -> bool:
        """Return whether the entries show that a task of this culture is done.

        Two collections on one day are one: entries have no hour. Food and assays leave no entry, so they never are.
        """
        if self.must_be_repeated:
            # the stock was expanded for the first time, and stands
            return task.kind == "expand"
        match task.kind:
            case "expand" | "virgins" | "set up":
                return self.is_begun
            case "clear":
                return self._has(Event.CLEARED, *FLIES_ARE_OUT)
            case "shift":
                return self._has(*FLIES_ARE_OUT)
            case "collect":
                day = dt.date.fromisoformat(task.date)
                later = any(e.event is Event.COLLECTED and e.date >= day for e in self.seen)
                return later or self.is_enough or self._has(Event.DISCARDED)
            case "discard":
                return self._has(Event.DISCARDED)
            case _:
                return False

    def _has(self, *events: Event) -> bool:
        return any(e.event in events for e in self.seen)

    def _first(self, event: Event) -> dt.date | None:
        return min((e.date for e in self.seen if e.event is event), default=None)


def cultures(plan: Plan, entries: Sequence[Entry]) -> dict[str, Culture]:
    """Return what the entries say of every step, by step id in the order of the plan."""
    host = {s.id: s.same_vials_as or s.id for s in plan.steps}
    vials = {s.id: s.vials for s in plan.steps}
    on_vials: dict[str, list[Entry]] = {}
    for entry in entries:
        if entry.step in host:
            on_vials.setdefault(host[entry.step], []).append(entry)
    return {
        s.id: culture(s, on_vials.get(host[s.id], ()), vials.get(host[s.id], s.vials))  # fmt: skip
        for s in plan.steps
    }


def culture(step: StepRecord, entries: Iterable[Entry], vials: int) -> Culture:
    """Return what the entries on its vials say of one step."""
    own = [e for e in entries if e.step == step.id or e.event is not Event.COLLECTED]
    # sorting is stable: on one day the order of the journal holds
    seen: list[Entry] = []
    for entry in sorted(own, key=lambda e: e.date):
        if entry.event is Event.SET_UP and Culture(step, vials, tuple(seen), 0).is_over:
            seen = []
        seen.append(entry)
    collected = sum(e.count or 0 for e in own if e.event is Event.COLLECTED)
    return Culture(step, vials, tuple(seen), collected)
