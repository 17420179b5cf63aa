"""`crossplan today PLAN`: what to do on a day, and what no longer runs as planned."""

from __future__ import annotations

import datetime as dt
from pathlib import Path
from typing import Annotated, Any

import typer

from crossplan.cli.render import NEEDS_A_PERSON, console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("today")(today)


def today(
    plan: Annotated[Path, typer.Argument(help="plan.json, or the folder that holds it.")],
    date: Annotated[str | None, typer.Option(help="Day (YYYY-MM-DD); today otherwise.")] = None,
    person: Annotated[str | None, typer.Option(help="Only this person's work.")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Show the work of a day, cultures that run late or short, and tasks that should move."""
    from crossplan import api

    report = api.day_report(plan, api.parse_day(date) if date else dt.date.today(), person)
    if as_json:
        print_json(report)
    else:
        _show(report)
    if report["cultures"] or report["moved"] or report["problems"]:
        raise typer.Exit(NEEDS_A_PERSON)


def _show(report: dict[str, Any]) -> None:
    out = console()
    out.print(f"[bold]{dt.date.fromisoformat(report['date']):%A %-d %B %Y}[/bold]")
    for task in report["tasks"]:
        who = f" {task['person']}" if task["person"] else ""
        out.print(f"  {task['time']}{who}  {task['kind']} {task['step']}: {task['note']}", markup=False)
    if not report["tasks"]:
        out.print("  nothing is planned")
    for culture in report["cultures"]:
        late = f", {culture['days_late']:+d} days" if culture["days_late"] else ""
        out.print(
            f"  {culture['step']}: {culture['state']}, {culture['collected']} of {culture['needed']} flies{late}",
            style="yellow",
        )
    for move in report["moved"]:
        out.print(f"  move {move['task']} from {move['from']} to {move['to']} (because of {move['because']})")
    for problem in report["problems"]:
        out.print(f"  {problem}", style="yellow", markup=False)
