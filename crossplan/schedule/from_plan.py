"""The plan's steps as cultures, and the chosen days back into the plan."""

from __future__ import annotations

import datetime as dt
import math
from collections.abc import Mapping, Sequence
from dataclasses import replace

from crossplan.plan.model import StepRecord, TargetRecord, TaskRecord
from crossplan.plan.screen import ScreenFile
from crossplan.rearing.development import Clock
from crossplan.rearing.handling import anaesthesia_gap_days, retinal_feeding
from crossplan.schedule.assay import Assay
from crossplan.schedule.culture import Biology, Culture
from crossplan.schedule.solve import Late, Schedule, solve
from crossplan.schedule.tasks import share_out, step_dates, write_tasks
from crossplan.schedule.week import WorkWeek


def put_on_calendar(
    steps: Sequence[StepRecord],
    targets: Sequence[TargetRecord],
    ages: Mapping[str, tuple[int, int]],
    fed: frozenset[str],
    screen: ScreenFile,
    start: dt.date,
) -> tuple[list[TaskRecord], Schedule]:
    """Give every step its dates and every target its assay day; return the tasks and the schedule.

    Args:
        steps: of the plan, parents before children; their dates and persons are filled in.
        targets: of the plan; their assay days are filled in.
        ages: youngest and oldest age in days for each target.
        fed: targets whose flies are fed retinal before the assay.
        screen: the screen file.
        start: first day on which work can be done.
    """
    week = WorkWeek.of(screen.calendar, start)
    clock = Clock() if screen.rearing.hours_at_25 is None else Clock(screen.rearing.hours_at_25)
    in_vials_of = {s.id: s.same_vials_as or s.id for s in steps}
    assays = _assays(targets, ages, fed)
    cultures = _cultures(steps, assays)
    assays = [replace(a, culture=in_vials_of[a.step]) for a in assays]
    biologies = {c.step: Biology.at(c.temperature_C, clock) for c in cultures}
    schedule = solve(cultures, assays, biologies, screen.rearing.laying_days, week)
    placed = [c for c in cultures if c.step in schedule.days]
    person = share_out(placed, schedule, screen.calendar.people)
    for step in steps:
        culture = in_vials_of[step.id]
        if culture in schedule.days:
            step.dates = step_dates(schedule.days[culture], week)
            step.person = person.get(culture, "")
    _fill_targets(targets, assays, schedule, week, in_vials_of)
    return write_tasks(placed, assays, schedule, week, person), schedule


def _assays(targets: Sequence[TargetRecord], ages: Mapping[str, tuple[int, int]], fed: frozenset[str]) -> list[Assay]:
    # food is changed in the afternoon and flies are tested in the morning: a whole day more than the least
    feed = math.floor(retinal_feeding().least_days) + 1
    rest = math.ceil(anaesthesia_gap_days())
    return [
        Assay(
            t.target,
            t.scheme[-1],
            ages[t.target],
            t.flies,
            dt.date.fromisoformat(t.due) if t.due else None,
            feed if t.target in fed else 0,
            rest,
        )  # fmt: skip
        for t in targets
        if t.status == "planned" and t.target in ages
    ]


def _cultures(steps: Sequence[StepRecord], assays: Sequence[Assay]) -> list[Culture]:
    spans: dict[str, int] = {}
    for assay in assays:
        low, high = assay.age_days
        span = high - max(low, assay.feed_days, assay.rest_days)
        spans[assay.step] = min(span, spans.get(assay.step, span))
    in_vials_of = {s.id: s.same_vials_as or s.id for s in steps}
    cultures: list[Culture] = []
    for step in steps:
        if step.same_vials_as:
            continue
        parents = [(in_vials_of[p.step], p is step.mother) for p in (step.mother, step.father) if p.step is not None]
        here = [s for s in steps if in_vials_of[s.id] == step.id]
        age_spans = [max(spans[s.id], 0) for s in here if s.id in spans]
        cultures.append(
            Culture(
                step.id,
                tuple(parents),
                step.mother.stock or "",
                min(s.temperature_C for s in here),
                step.vials,
                any(s.keep.virgin for s in here),
                min(age_spans, default=None),
                tuple(s.id for s in here if s is not step),
            )
        )
    return cultures


def _fill_targets(
    targets: Sequence[TargetRecord],
    assays: Sequence[Assay],
    schedule: Schedule,
    week: WorkWeek,
    in_vials_of: Mapping[str, str],
) -> None:
    late = {item.target: item for item in schedule.late}
    tested = {a.target for a in assays}
    for target in targets:
        if target.status != "planned":
            continue
        if target.target in schedule.assay:
            _fill_assay(target, schedule, week)
        elif {in_vials_of[s] for s in target.scheme} & set(schedule.unplaced):
            target.cautions.append(_why_no_days(schedule))
        elif target.target in tested:
            target.cautions.append("no day could be found for its assay: check ages, working days and rig limit")
        if target.target not in schedule.assay and target.due is not None:
            target.cautions.append(f"no day could be given to it, so whether it is due in time ({target.due}) is open")
        if target.target in late:
            target.cautions.append(_late_words(late[target.target]))


def _fill_assay(target: TargetRecord, schedule: Schedule, week: WorkWeek) -> None:
    first, last = schedule.windows[target.target]
    target.assay_date = week.date(schedule.assay[target.target]).isoformat()
    target.assay_from, target.assay_to = week.date(first).isoformat(), week.date(last).isoformat()
    limit = week.rig_flies_per_day
    if limit is not None and target.flies > limit:
        target.cautions.append(f"{target.flies} flies are more than the rig tests in a day ({limit}): spread them")


def _why_no_days(schedule: Schedule) -> str:
    if schedule.status == "limit reached":
        return "no days were found for its crosses before the search was stopped: plan fewer targets at a time"
    return "no days could be found for its crosses: check ages, working days, temperature and rig limit"


def _late_words(late: Late) -> str:
    return (
        f"not ready by the day it is due ({late.due.isoformat()}): {late.ready.isoformat()} is the earliest found;"
        f" {late.reason}; {late.remedy}"
    )
