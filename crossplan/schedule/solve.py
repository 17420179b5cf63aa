"""The best set-up days for all cultures at once.

A constraint solver chooses among the days that every culture can have (day_model.py), so that parents are there when they
are needed and every target is tested in its window. Objectives, in order: nothing late; the last assay within a few days
of the earliest possible; as little work as possible on the fullest day; everything as early as it goes.

The solver is OR-Tools CP-SAT with one worker, a fixed seed and deterministic limits, so the same input gives the same days.
A stage that reaches its limit without anything better leaves the plan of the stage before. Where not everything can be
planned, as many assays as possible are, and the rest is named.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Literal

from crossplan.schedule.assay import Assay
from crossplan.schedule.culture import Biology, Culture, Days
from crossplan.schedule.day_model import Chosen, DayModel, DayTables, Work, minutes_by_day
from crossplan.schedule.week import WorkWeek

#: deterministic effort for each objective, in the solver's own units (about seconds on a usual machine), for a screen of
#: `EFFORT_FOR` possible days; more for larger ones
EFFORT = (2.0, 1.0, 0.3)
EFFORT_FOR = 2500
#: how many times the first effort is spent to find any plan at all when none was found on the way to the best
ANY_PLAN = 10.0
#: how many days after the earliest possible end the last assay may be, to keep the fullest day low
SLACK_DAYS = 5

Ended = Literal["optimal", "feasible", "impossible", "limit"]
Status = Literal["optimal", "feasible", "nothing to plan", "no days found", "limit reached"]


@dataclass(frozen=True)
class Late:
    """A target whose due day cannot be met: the day that can be had, what makes it late, and what would help."""

    target: str
    due: dt.date
    ready: dt.date
    #: first day possible with the fly room and the rig to itself
    ready_alone: dt.date
    reason: str
    remedy: str


@dataclass(frozen=True)
class Schedule:
    """The days that were chosen.

    Attributes:
        status: optimal if the lateness, the end and the fullest day are proved best; feasible if one of them is not; no days
            found if it is proved that nothing can be planned; limit reached if no plan was found within the effort.
        gap: how far the fullest day may be from the best possible, as a share of it (0: proved best).
        days: of each culture, by step.
        assay: day of each target.
        windows: first and last day on which the flies of each target will do.
        late: targets after their due day.
        unplaced: steps without days.
    """

    status: Status
    gap: float
    days: Mapping[str, Days]
    assay: Mapping[str, int]
    windows: Mapping[str, tuple[int, int]]
    late: tuple[Late, ...] = ()
    unplaced: tuple[str, ...] = ()


def solve(
    cultures: Sequence[Culture],
    assays: Sequence[Assay],
    biologies: Mapping[str, Biology],
    laying_days: int,
    week: WorkWeek,
) -> Schedule:
    """Return the set-up days of all cultures and the assay day of every target.

    Args:
        cultures: parents before children.
        assays: the targets.
        biologies: whole-day biology for each culture, by step.
        laying_days: days for which parents lay.
        week: the working days.
    """
    if not cultures:
        return Schedule("nothing to plan", 0.0, {}, {}, {})
    work = Work(cultures, assays, biologies, laying_days, week)
    found = _Stages(work).run()
    if found == "impossible":
        work = _what_can_be_planned(work)
        found = _Stages(work).run() if work.cultures else found
    if isinstance(found, str):
        status: Status = "no days found" if found == "impossible" else "limit reached"
        return Schedule(status, 0.0, {}, {}, {}, (), tuple(c.step for c in cultures))
    chosen, proved, gap = found
    windows = {a.target: a.window(chosen.days[a.vials_of]) for a in work.assays if a.target in chosen.assay}
    unplaced = tuple(c.step for c in cultures if c.step not in chosen.days)
    return Schedule(
        "optimal" if proved else "feasible", gap, chosen.days, chosen.assay, windows, _late(work, chosen), unplaced
    )


class _Stages:
    """The objectives one after the other, each within what the ones before have reached."""

    def __init__(self, work: Work) -> None:
        self.work = work
        self.days = DayModel(work)
        self.effort = max(1.0, self.days.size / EFFORT_FOR)

    def run(self) -> tuple[Chosen, bool, float] | Literal["impossible", "limit"]:
        """Return the best plan, whether it is proved best, and the gap of its fullest day; or why there is none."""
        if not self.days.picks:
            return "impossible"
        model, late, end, peak = self.days.model, self.days.late_days(), self.days.end, self.days.peak
        model.minimize((self.work.week.days[-1] + 1) * late + end)
        status, chosen, _ = _solved(self.days, EFFORT[0] * self.effort)
        proved = status == "optimal"
        if status == "limit":
            model.clear_objective()  # type: ignore[no-untyped-call]
            status, chosen, _ = _solved(self.days, ANY_PLAN * EFFORT[0] * self.effort)
        if chosen is None:
            return "impossible" if status == "impossible" else "limit"
        model.add(late <= _late_days(self.work, chosen))
        model.add(end <= max(chosen.assay.values(), default=0) + SLACK_DAYS)
        model.minimize(peak)
        status, chosen, bound = self._improve(chosen, EFFORT[1])
        fullest = max(minutes_by_day(self.work, chosen).values())
        proved = proved and status == "optimal"
        gap = 0.0 if status == "optimal" else round((fullest - max(bound, 0.0)) / max(fullest, 1), 4)
        model.add(peak <= fullest)
        model.minimize(self.days.all_days())
        _, chosen, _ = self._improve(chosen, EFFORT[2])
        return chosen, proved, gap

    def _improve(self, chosen: Chosen, effort: float) -> tuple[Ended, Chosen, float]:
        """Return a plan at least as good as the one at hand: that one itself if the limit comes first."""
        self.days.hint(chosen)
        status, better, bound = _solved(self.days, effort * self.effort)
        return status, better or chosen, bound


def _solved(days: DayModel, effort: float) -> tuple[Ended, Chosen | None, float]:
    """Return how the solver ended, the plan that it found if any, and the bound that it proved."""
    from ortools.sat.python import cp_model

    solver = cp_model.CpSolver()
    solver.parameters.num_workers = 1
    solver.parameters.random_seed = 1
    solver.parameters.linearization_level = 2
    solver.parameters.max_deterministic_time = effort
    status = solver.solve(days.model)
    if status in (cp_model.OPTIMAL, cp_model.FEASIBLE):
        ended: Ended = "optimal" if status == cp_model.OPTIMAL else "feasible"
        return ended, days.read(solver.value), solver.best_objective_bound
    return ("impossible" if status == cp_model.INFEASIBLE else "limit"), None, 0.0


def _what_can_be_planned(work: Work) -> Work:
    """Return the part of the work for which days can be found: as many assays as possible, then as many collections.

    Fewer days of collection than usual may be needed for flies of several cultures to be there together.
    """
    days = DayModel(work, optional=True)
    if not days.picks:
        return replace(work, cultures=(), assays=())
    days.model.maximize(days.placed_work())
    _, chosen, _ = _solved(days, EFFORT[0] * max(1.0, days.size / EFFORT_FOR))
    if chosen is None:
        return replace(work, cultures=(), assays=())
    assays = [a for a in work.assays if a.target in chosen.assay]
    useful = _useful(work, assays)
    cultures = [c for c in work.cultures if c.step in chosen.days and c.step in useful]
    limits = {c.step: len(chosen.days[c.step].collect) for c in cultures}
    return replace(work, cultures=cultures, assays=assays, limits=limits, set_up_by=days.tables.set_up_by)


def _useful(work: Work, kept: Sequence[Assay]) -> set[str]:
    """Return the cultures that still serve something: not those all of whose assays were left out."""
    below: dict[str, set[str]] = {c.step: set() for c in work.cultures}
    for assay in work.assays:
        below.setdefault(assay.vials_of, set()).add(assay.target)
    for culture in reversed(work.cultures):
        for parent, _ in culture.parents:
            below[parent] |= below[culture.step]
    targets = {a.target for a in kept}
    return {step for step, served in below.items() if not served or served & targets}


def _late_days(work: Work, chosen: Chosen) -> int:
    """Return the days by which the assays of a plan are late, added up."""
    return sum(
        max(0, chosen.assay[a.target] - (a.due - work.week.start).days)
        for a in work.assays
        if a.due is not None and a.target in chosen.assay
    )


def _late(work: Work, chosen: Chosen) -> tuple[Late, ...]:
    late = [
        (a.target, a.due, work.week.date(chosen.assay[a.target]))
        for a in work.assays
        if a.due is not None and a.target in chosen.assay and work.week.date(chosen.assay[a.target]) > a.due
    ]
    if not late:
        return ()
    alone = DayTables(work).ready_alone()
    rig = work.week.rig_flies_per_day is not None
    return tuple(_explained(target, due, ready, work.week.date(alone[target]), rig) for target, due, ready in late)


def _explained(target: str, due: dt.date, ready: dt.date, alone: dt.date, rig_is_limited: bool) -> Late:
    """Say whether development or the other targets make it late, and what would help."""
    if alone > due:
        days = (alone - due).days
        return Late(
            target, due, ready, alone,
            f"its crosses take until {alone.isoformat()} even with nothing else to do",
            f"begin at least {days} {'day' if days == 1 else 'days'} earlier, or move the due day",
        )  # fmt: skip
    shared = "parents and rig" if rig_is_limited else "parents"
    return Late(
        target, due, ready, alone,
        f"it could be ready on {alone.isoformat()} if it did not share {shared} with other targets",
        "plan it by itself, or move the due day" + (", or give the rig more flies a day" if rig_is_limited else ""),
    )  # fmt: skip
