"""`crossplan labels PLAN`: the vial labels again, on another sheet, for some days or one person."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("labels")(labels)


def labels(
    plan: Annotated[Path, typer.Argument(help="plan.json, or the folder that holds it.")],
    out: Annotated[Path, typer.Option("--out", help="PDF to write.")] = Path("labels.pdf"),
    layout: Annotated[str, typer.Option("--sheet", help="Sheet layout by name; --sheet list shows them.")] = "",
    step: Annotated[list[str] | None, typer.Option("--step", help="Only this cross; may be given again.")] = None,
    dates: Annotated[
        str | None, typer.Option("--dates", help="Only crosses set up on these days: DAY or FROM..TO (YYYY-MM-DD).")
    ] = None,
    person: Annotated[str | None, typer.Option("--person", help="Only this person's crosses.")] = None,
    start_at: Annotated[int, typer.Option("--start-at", help="First free label of a used sheet, from 1.")] = 1,
    copies: Annotated[int, typer.Option("--copies", help="How many of each label.")] = 1,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Print vial labels from a plan."""
    from crossplan import api

    if layout == "list":
        for name, words in api.label_layouts():
            console().print(f"{name:<16} {words}")
        return
    pages = api.write_labels(
        plan, out, layout=layout or None, steps=step, dates=dates, person=person, start_at=start_at, copies=copies
    )
    if as_json:
        print_json({"written": str(out), "bytes": pages})
    else:
        console().print(f"wrote {out}")
