"""`crossplan draw PLAN TARGET`: schemes as pictures for a notebook, a talk or a paper."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("draw")(draw)


def draw(
    plan: Annotated[Path, typer.Argument(help="plan.json, or the folder that holds it.")],
    target: Annotated[list[str], typer.Argument(help="Target whose scheme is drawn; several too.")],
    out: Annotated[Path, typer.Option("--out", help="Folder for the pictures.")] = Path(),
    form: Annotated[str, typer.Option("--format", help="svg or png.")] = "svg",
    dpi: Annotated[int, typer.Option("--dpi", help="Dots an inch of a PNG.")] = 300,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Draw the schemes of targets: female x male, homologues above and below the line, the kept class framed."""
    from crossplan import api

    written = api.write_drawings(api.load_plan(plan), target, out, form, dpi)
    if as_json:
        print_json({"written": [str(path) for path in written]})
        return
    for path in written:
        console().print(f"wrote {path}", markup=False, soft_wrap=True)
