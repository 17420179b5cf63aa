"""`crossplan demo FOLDER`: the demo stock list and screen, ready to plan and to edit."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("demo")(demo)


def demo(
    folder: Annotated[Path, typer.Argument(help="Folder to write into; made if it is not there.")],
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Write the demo stock list and screen into a folder."""
    from crossplan import api

    written = api.write_demo(folder)
    if as_json:
        print_json({"written": [str(p) for p in written]})
        return
    out = console()
    for path in written:
        out.print(f"wrote {path}")
    out.print(f"Next: crossplan plan {folder}/screen.toml --stocks {folder}/stocks.csv --out {folder}/plan")
