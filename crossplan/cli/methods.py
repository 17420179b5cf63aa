"""`crossplan methods PLAN`: the genotypes of a screen for the methods section of a paper."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("methods")(methods)


def methods(
    plan: Annotated[Path, typer.Argument(help="plan.json, or the folder that holds it.")],
    out: Annotated[Path, typer.Option("--out", help="File to write; its ending says how: .csv, .md or .tex.")] = Path(
        "methods.csv"
    ),
    stocks: Annotated[
        Path | None, typer.Option("--stocks", help="Stock list, for full standard notation and sources.")
    ] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Write a table of every experimental and control genotype, with sources."""
    from crossplan import api

    rows, short = api.write_methods(api.load_plan(plan), out, api.read_stocks(stocks) if stocks else None)
    if as_json:
        print_json({"written": str(out), "genotypes": rows, "short": short})
        return
    console().print(f"wrote {out}", markup=False, soft_wrap=True)
    if stocks is None:
        console().print("in the short notation of the plan; --stocks gives full notation and sources", markup=False)
    elif short:
        console().print(f"the list writes in short, to be completed by hand: {', '.join(short)}", markup=False)
