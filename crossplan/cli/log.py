"""`crossplan log PLAN STEP EVENT`: write down what happened to a culture."""

from __future__ import annotations

import datetime as dt
from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("log")(log)


def log(
    plan: Annotated[Path, typer.Argument(help="plan.json, or the folder that holds it.")],
    step: Annotated[str, typer.Argument(help="Cross, such as S03.")],
    event: Annotated[
        str, typer.Argument(help="set up, cleared, pupae, flies (the first seen), collected, failed, discarded, note.")
    ],
    count: Annotated[int | None, typer.Option(help="Flies collected, or vials failed (all without it).", min=0)] = None,
    date: Annotated[str | None, typer.Option(help="Day (YYYY-MM-DD); today otherwise.")] = None,
    person: Annotated[str, typer.Option(help="Who.")] = "",
    note: Annotated[str, typer.Option(help="Anything else.")] = "",
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Write down what happened to a culture, in journal.csv beside the plan."""
    from crossplan import api

    day = api.parse_day(date) if date else dt.date.today()
    journal = api.log_entry(plan, step, event, day=day, count=count, person=person, note=note)
    if day > dt.date.today():
        typer.echo(f"warning: {day} is not yet here; the entry counts from that day on", err=True)
    if as_json:
        print_json({"written": str(journal)})
    else:
        console().print(f"wrote {journal}", markup=False)
