"""`crossplan rota` and `crossplan checklist`: when to flip which stock, and what its flies must look like."""

from __future__ import annotations

import datetime as dt
from collections import Counter
from pathlib import Path
from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the commands to the program."""
    app.command("rota")(rota)
    app.command("checklist")(checklist)


def rota(
    stocks: Annotated[Path, typer.Option("--stocks", help="Stock list: CSV, TSV, XLSX or ODS.")],
    start: Annotated[str | None, typer.Option("--from", help="First day (YYYY-MM-DD); today otherwise.")] = None,
    weeks: Annotated[int, typer.Option(min=1, max=53, help="How many weeks.")] = 4,
    people: Annotated[str, typer.Option(help="Who flips, separated by commas.")] = "",
    days: Annotated[str, typer.Option(help="Working days, separated by commas.")] = "Mon,Tue,Wed,Thu,Fri",
    holidays: Annotated[str, typer.Option(help="Days off (YYYY-MM-DD), separated by commas.")] = "",
    plan: Annotated[Path | None, typer.Option(help="A plan: its expansions and collections are put in.")] = None,
    out: Annotated[Path | None, typer.Option(help="Folder for bench list, calendar and table.")] = None,
    sheet: Annotated[str | None, typer.Option(help="Sheet of a workbook with several.")] = None,
    settings: Annotated[
        Path | None, typer.Option(help="How to read the list (written by 'crossplan shelf --remember').")
    ] = None,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Plan which stocks go on new food on which day, in whose hands."""
    from crossplan import api

    first = api.parse_day(start) if start else dt.date.today()
    transfers = api.transfer_rota(
        stocks, start=first, days=7 * weeks, people=_parts(people), working_days=_parts(days),
        holidays=[api.parse_day(d) for d in _parts(holidays)], settings=api.list_settings(settings, sheet=sheet),
        lab_file=lab_file,
    )  # fmt: skip
    written: tuple[Path, ...] = ()
    if out is not None:
        written = api.write_rota(transfers, out, name=stocks.stem, day=first, days=7 * weeks, plan=plan)
    if as_json:
        print_json({"from": first.isoformat(), "days": 7 * weeks, "transfers": [
            {"date": t.day.isoformat(), "person": t.person, "stock": t.stock.name, "tray": t.stock.tray, "half": t.half,
             "vials": t.vials, "due": t.due.isoformat(), "late": t.late}
            for t in transfers
        ]})  # fmt: skip
        return
    vials = Counter[tuple[dt.date, str]]()
    for transfer in transfers:
        vials[transfer.day, transfer.person] += transfer.vials
    for (day, person), number in sorted(vials.items()):
        console().print(f"{day.strftime('%a %d %b %Y')}  {person or 'all':<12} {number:>5} vials", markup=False)
    late = [t for t in transfers if t.late]
    if late:
        console().print(f"{len(late)} overdue by the day of their transfer: look at them first", markup=False)
    for place in written:
        console().print(f"Written: {place}", markup=False)


def checklist(
    stocks: Annotated[Path, typer.Option("--stocks", help="Stock list: CSV, TSV, XLSX or ODS.")],
    out: Annotated[Path, typer.Option(help="The table to write.")] = Path("yearly_checks.csv"),
    sheet: Annotated[str | None, typer.Option(help="Sheet of a workbook with several.")] = None,
    settings: Annotated[
        Path | None, typer.Option(help="How to read the list (written by 'crossplan shelf --remember').")
    ] = None,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
) -> None:
    """Write what the flies of every stock must look like, to be checked once a year."""
    from crossplan import api

    place = api.write_yearly_checks(stocks, out, settings=api.list_settings(settings, sheet=sheet), lab_file=lab_file)
    console().print(f"Written: {place}", markup=False)


def _parts(text: str) -> list[str]:
    return [p.strip() for p in text.split(",") if p.strip()]
