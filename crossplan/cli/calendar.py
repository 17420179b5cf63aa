"""`crossplan calendar PLAN`: the calendar file again, for some days, one person, or a file for each person."""

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
    out: Annotated[
        Path | None, typer.Option("--out", help="iCalendar file to write; with --per-person the folder.")
    ] = None,
    dates: Annotated[str | None, typer.Option("--dates", help="Only these days: DAY or FROM..TO (YYYY-MM-DD).")] = None,
    person: Annotated[str | None, typer.Option("--person", help="Only this person's work.")] = None,
    per_person: Annotated[bool, typer.Option("--per-person", help="A file for each person.")] = False,
    alarm: Annotated[
        list[int] | None, typer.Option("--alarm", help="Remind this many minutes before; may be given again.")
    ] = None,
    instead_of: Annotated[
        Path | None,
        typer.Option("--instead-of", help="Earlier calendar or plan.json: its work that is gone is cancelled."),
    ] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Write the calendar of a plan (iCalendar)."""
    from crossplan import api
    from crossplan.errors import InputError

    if per_person:
        if person is not None:
            raise InputError("--person and --per-person contradict each other", "Give one of them.")
        written = api.write_calendars(plan, out or Path(), dates=dates, alarm_minutes=alarm, instead_of=instead_of)
    else:
        place = out or Path("calendar.ics")
        api.write_calendar(plan, place, dates=dates, person=person, alarm_minutes=alarm, instead_of=instead_of)
        written = (place,)
    if as_json and not per_person:
        print_json({"written": str(written[0]), "bytes": written[0].stat().st_size})
    elif as_json:
        print_json({"written": [str(p) for p in written], "bytes": sum(p.stat().st_size for p in written)})
    else:
        for path in written:
            console().print(f"wrote {path}", markup=False, soft_wrap=True)
