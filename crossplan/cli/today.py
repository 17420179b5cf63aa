"""`crossplan today PLAN`: what to do on a day, and what no longer runs as planned."""

from __future__ import annotations

import datetime as dt
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from crossplan.cli.render import NEEDS_A_PERSON, console, print_json, report_problem

if TYPE_CHECKING:
    from crossplan.api import DayReport


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("today")(today)


def today(
    plan: Annotated[Path, typer.Argument(help="plan.json, or the folder that holds it.")],
    date: Annotated[str | None, typer.Option(help="Day (YYYY-MM-DD); today otherwise.")] = None,
    person: Annotated[str | None, typer.Option(help="Only this person's work.")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Show the work of a day, what is overdue, cultures that run late or short, and tasks that should move."""
    from crossplan import api

    report = api.day_report(plan, api.parse_day(date) if date else dt.date.today(), person)
    if as_json:
        print_json(api.day_json(report))
    else:
        _show(report)
    if report.needs_a_person:
        raise typer.Exit(NEEDS_A_PERSON)


def _show(report: DayReport) -> None:
    out = console()
    out.print(f"{report.date:%A} {report.date.day} {report.date:%B %Y}", style="bold")
    for task in report.tasks:
        who = f" {task.person}" if task.person else ""
        done = " (done)" if task.id in report.done else ""
        out.print(f"  {task.time}{who}  {task.kind} {task.step}: {task.note}{done}", markup=False)
    if not report.tasks:
        out.print("  nothing is planned")
    for task in report.overdue:
        who = f" {task.person}" if task.person else ""
        out.print(
            f"  overdue since {task.date} {task.time}{who}: {task.kind} {task.step}", style="yellow", markup=False
        )
    for culture in report.cultures:
        late = f", {culture.days_late:+d} days" if culture.days_late else ""
        out.print(
            f"  {culture.step}: {culture.state}, {culture.collected} of {culture.needed} flies{late}",
            style="yellow" if late or culture.state != "collecting" else None,
            markup=False,
        )
    for move in report.moved:
        to = "today" if move.to == report.date else f"{move.to:%a} {move.to}"
        out.print(f"  move {move.task.id} from {move.task.date} to {to} (because of {move.because})", markup=False)
    for problem in report.problems:
        report_problem(problem)
