"""`crossplan calendar PLAN`: the calendar file again, for some days or one person."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("calendar")(calendar)


def calendar(
    plan: Annotated[Path, typer.Argument(help="plan.json, or the folder that holds it.")],
    out: Annotated[Path, typer.Option("--out", help="iCalendar file to write.")] = Path("calendar.ics"),
    dates: Annotated[str | None, typer.Option("--dates", help="Only these days: DAY or FROM..TO (YYYY-MM-DD).")] = None,
    person: Annotated[str | None, typer.Option("--person", help="Only this person's work.")] = None,
    alarm: Annotated[int | None, typer.Option("--alarm", help="Remind this many minutes before.")] = None,
    instead_of: Annotated[
        Path | None, typer.Option("--instead-of", help="Earlier plan.json: its work that is gone is cancelled.")
    ] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Write the calendar of a plan (iCalendar)."""
    from crossplan import api

    size = api.write_calendar(plan, out, dates=dates, person=person, alarm_minutes=alarm, instead_of=instead_of)
    if as_json:
        print_json({"written": str(out), "bytes": size})
    else:
        console().print(f"wrote {out}")
