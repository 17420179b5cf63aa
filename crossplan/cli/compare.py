"""`crossplan compare` and `crossplan correct`: what changed between two stock lists, and a corrected list beside the old."""

from __future__ import annotations

from collections import Counter
from dataclasses import asdict
from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import NEEDS_A_PERSON, console, print_json


def register(app: typer.Typer) -> None:
    """Add the commands to the program."""
    app.command("compare")(compare)
    app.command("correct")(correct)


def compare(
    old: Annotated[Path, typer.Argument(help="The older stock list.")],
    new: Annotated[Path, typer.Argument(help="The newer stock list.")],
    every: Annotated[bool, typer.Option("--all", help="Show changes of dates, places and notes too.")] = False,
    table: Annotated[Path | None, typer.Option("--csv", help="Write all changes as a CSV table.")] = None,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Say what changed between two versions of a stock list: stocks gained and lost, genotypes by chromosome."""
    from crossplan import api

    changes = api.compare_lists(old, new, lab_file=lab_file)
    if table is not None:
        api.write_changes(changes, table)
    if as_json:
        print_json({"changes": [asdict(c) for c in changes]})
        return
    flies = ("lost", "gained", "renamed", "genotype", "unreadable", "readable")
    out = console()
    for change in changes:
        if every or change.kind in flies:
            out.print(change.message, markup=False)
    others = Counter(c.kind for c in changes if c.kind not in flies)
    if others and not every:
        out.print(f"also changed (--all): {', '.join(f'{kind} {n}' for kind, n in others.items())}", markup=False)
    if not changes:
        out.print("The two lists say the same.")


def correct(
    stocks: Annotated[Path, typer.Argument(help="Stock list: CSV, TSV, XLSX or ODS.")],
    out: Annotated[
        Path | None, typer.Option(help="Write the corrected table here (CSV), and the changes beside it.")
    ] = None,
    sheet: Annotated[str | None, typer.Option(help="Sheet of a workbook with several.")] = None,
    settings: Annotated[
        Path | None, typer.Option(help="How to read the list (written by 'crossplan shelf --remember').")
    ] = None,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Propose corrections of a stock list, each with its reason; the list itself is never changed."""
    from crossplan import api

    how = api.list_settings(settings, sheet=sheet)
    found, written = api.propose_corrections(stocks, settings=how, lab_file=lab_file, out=out)
    if as_json:
        print_json({"corrections": [asdict(c) for c in found]})
    else:
        for c in found:
            console().print(f"row {c.row}, {c.column}: '{c.before}' -> '{c.after}'  ({c.reason})", markup=False)
        for place in written:
            console().print(f"Written: {place}", markup=False)
        if not found:
            console().print("Nothing to correct that is beyond doubt.")
    if found:
        raise typer.Exit(NEEDS_A_PERSON)
