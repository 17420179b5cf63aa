"""`crossplan sheets PLAN`: the bench sheets again, for some days, one person, on another paper."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("sheets")(sheets)


def sheets(
    plan: Annotated[Path, typer.Argument(help="plan.json, or the folder that holds it.")],
    out: Annotated[Path, typer.Option("--out", help="PDF to write.")] = Path("bench_sheet.pdf"),
    dates: Annotated[str | None, typer.Option("--dates", help="Only these days: DAY or FROM..TO (YYYY-MM-DD).")] = None,
    person: Annotated[str | None, typer.Option("--person", help="Only this person's work.")] = None,
    paper: Annotated[str, typer.Option("--paper", help="A4 or Letter.")] = "A4",
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Print bench sheets: a page for each day, and a drawing of each scheme."""
    from crossplan import api

    size = api.write_bench_sheets(plan, out, dates=dates, person=person, paper=paper)
    if as_json:
        print_json({"written": str(out), "bytes": size})
    else:
        console().print(f"wrote {out}", markup=False, soft_wrap=True)
