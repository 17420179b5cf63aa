"""`crossplan labels`: vial labels of a plan, or stock labels of a stock list, on any sheet or roll."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import console, print_json

#: how many shortened labels are named before the rest is only counted
SHOWN = 20


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("labels")(labels)


def labels(
    plan: Annotated[Path | None, typer.Argument(help="plan.json, or the folder that holds it.")] = None,
    out: Annotated[Path, typer.Option("--out", help="PDF to write.")] = Path("labels.pdf"),
    layout: Annotated[
        str,
        typer.Option("--sheet", help="'list' shows the names; or sizes in mm: 'A4 4x11 48.5x25.4', 'roll 38x19'."),
    ] = "",
    step: Annotated[list[str] | None, typer.Option("--step", help="Only this cross; may be given again.")] = None,
    vial: Annotated[list[int] | None, typer.Option("--vial", help="Only the vial of this number, to reprint.")] = None,
    dates: Annotated[
        str | None, typer.Option("--dates", help="Only crosses set up on these days: DAY or FROM..TO (YYYY-MM-DD).")
    ] = None,
    person: Annotated[str | None, typer.Option("--person", help="Only this person's crosses.")] = None,
    stocks: Annotated[
        Path | None, typer.Option("--stocks", help="Stock list: print labels of its stocks instead.")
    ] = None,
    stock: Annotated[list[str] | None, typer.Option("--stock", help="Only this stock; may be given again.")] = None,
    start_at: Annotated[int, typer.Option("--start-at", help="First free label of a used sheet, from 1.")] = 1,
    copies: Annotated[int, typer.Option("--copies", help="How many of each label.")] = 1,
    outlines: Annotated[bool, typer.Option("--outlines", help="Draw the edges, for a trial on plain paper.")] = False,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Print vial labels of a plan, or stock labels of a list."""
    from crossplan import api
    from crossplan.errors import InputError

    if layout == "list":
        _list_layouts(as_json)
        return
    if (plan is None) == (stocks is None):
        raise InputError("say what to label", "Give a plan, or --stocks with a stock list; not both.")
    if plan is not None:
        if stock:
            raise InputError("--stock is for labels from a stock list", "Use --stocks TABLE --stock NAME.")
        size, short = api.write_labels(plan, out, layout=layout or None, steps=step, dates=dates, person=person,
                                       start_at=start_at, copies=copies, vials=vial, outlines=outlines)  # fmt: skip
    elif stocks is not None:
        shelf = api.read_stocks(stocks)
        size, short = api.write_stock_labels(shelf, out, layout=layout or None, names=stock, start_at=start_at,
                                             copies=copies, outlines=outlines)  # fmt: skip
    if as_json:
        print_json({"written": str(out), "bytes": size, "shortened": list(short)})
        return
    console().print(f"wrote {out}", markup=False)
    if short:
        more = f" and {len(short) - SHOWN} more (--json names all)" if len(short) > SHOWN else ""
        console().print(f"shortened, marked on the label: {', '.join(short[:SHOWN])}{more}", markup=False)


def _list_layouts(as_json: bool) -> None:
    from crossplan import api

    if as_json:
        print_json({"sheets": [{"name": name, "labels": words} for name, words in api.label_layouts()]})
        return
    for name, words in api.label_layouts():
        console().print(f"{name:<16} {words}", markup=False)
