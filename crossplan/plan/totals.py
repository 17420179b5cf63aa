"""The plan put together: its parts, what they come to, and what holds for the whole of it."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from typing import Any

from crossplan.plan.model import Plan, ScreenRecord, StepRecord, TargetRecord, TaskRecord
from crossplan.plan.screen_file import ScreenRequest
from crossplan.stocks.shelf import Shelf


def plan_of(
    request: ScreenRequest,
    shelf: Shelf,
    targets: Sequence[TargetRecord],
    steps: Sequence[StepRecord],
    tasks: Sequence[TaskRecord],
    remarks: Sequence[str],
    start: dt.date,
    calendar_status: str,
    version: str,
) -> Plan:
    """Return the plan with its totals.

    Args:
        request: what was asked for.
        shelf: the stocks that it was made from.
        targets, steps, tasks: its parts.
        remarks: what could not be added.
        start: first day of work.
        calendar_status: what the scheduler said of its days.
        version: of crossplan.
    """
    screen = request.screen
    record = ScreenRecord(
        name=screen.screen.name, lab=screen.screen.lab, screen_file=request.path, stock_file=shelf.path,
        stocks_read=shelf.rows_read, rows_refused=shelf.rows_refused, start=start.isoformat(),
        temperature_C=screen.rearing.temperature, timezone=screen.calendar.timezone,
        probability=screen.numbers.probability, crossplan=version,
    )  # fmt: skip
    return Plan(
        screen=record, targets=list(targets), steps=list(steps), tasks=list(tasks),
        totals=totals_of(targets, steps, tasks, calendar_status), cautions=list(remarks),
    )  # fmt: skip


def totals_of(
    targets: Sequence[TargetRecord], steps: Sequence[StepRecord], tasks: Sequence[TaskRecord], calendar_status: str
) -> dict[str, Any]:
    """Return counts, dates and the fullest day of a plan."""
    minutes: dict[str, int] = {}
    for task in tasks:
        minutes[task.date] = minutes.get(task.date, 0) + task.minutes
    ready = sorted(t.assay_date for t in targets if t.assay_date)
    busiest = max(minutes, key=lambda d: (minutes[d], d), default=None)
    return {
        "targets_planned": sum(t.status == "planned" and not t.control_kind for t in targets),
        "controls_planned": sum(t.status == "planned" and bool(t.control_kind) for t in targets),
        "targets_in_stock": sum(t.status == "in stock" for t in targets),
        "targets_impossible": sum(t.status == "impossible" for t in targets),
        "steps": len(steps),
        "vials": sum(s.vials for s in steps),
        "virgins": sum(s.vials * s.mothers_per_vial for s in steps),
        "tasks": len(tasks),
        "working_days": len(minutes),
        "minutes": sum(minutes.values()),
        "first_ready": ready[0] if ready else None,
        "last_ready": ready[-1] if ready else None,
        "busiest_day": busiest,
        "busiest_day_minutes": minutes[busiest] if busiest else 0,
        "calendar": calendar_status,
    }
