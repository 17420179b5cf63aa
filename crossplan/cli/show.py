"""`crossplan show STEP|TARGET|DAY`: what a plan says of a cross, a target or a day, in the terminal."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("show")(show)


def show(
    what: Annotated[list[str], typer.Argument(help="A cross (S03), a target, or a day (YYYY-MM-DD); several too.")],
    plan: Annotated[Path, typer.Option("--plan", help="plan.json, or the folder that holds it.")] = Path(),
    person: Annotated[str | None, typer.Option("--person", help="Of a day only this person's work.")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Show a cross with its drawing, the scheme of a target, or the work of a day."""
    from crossplan import api

    if len(what) > 1 and Path(what[0]).exists():
        # as the other commands take it: the plan first
        plan, what = Path(what[0]), what[1:]
    held = api.load_plan(plan)
    if as_json:
        found = [api.show_json(held, name, person) for name in what]
        print_json(found[0] if len(found) == 1 else {"shown": found})
        return
    out = console()
    for at, name in enumerate(what):
        if at:
            out.print()
        for line in api.show(held, name, out.width, person):
            out.print(line.text, style="bold" if line.strong else None, markup=False, soft_wrap=True)
