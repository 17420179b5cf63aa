"""`crossplan audit`: what is wrong with the shelf, at risk, or missing for a screen."""

from __future__ import annotations

import datetime as dt
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from crossplan.cli.render import NEEDS_A_PERSON, STYLE, console, print_json
from crossplan.errors import Severity

if TYPE_CHECKING:
    from crossplan.api import Audited


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("audit")(audit)


def audit(
    stocks: Annotated[Path, typer.Option("--stocks", help="Stock list: CSV, TSV, XLSX or ODS.")],
    screen: Annotated[Path | None, typer.Option("--screen", help="Screen file: what is missing for it?")] = None,
    sheet: Annotated[str | None, typer.Option(help="Sheet of a workbook with several.")] = None,
    settings: Annotated[Path | None, typer.Option(help="How to read the list (written by 'crossplan read').")] = None,
    today: Annotated[str | None, typer.Option(help="Judge dates as of this day (YYYY-MM-DD).")] = None,
    notes: Annotated[bool, typer.Option("--notes", help="Show notes too, not only errors and warnings.")] = False,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Check a stock list, and say which targets of a screen it cannot make."""
    from crossplan import api

    day = api.parse_day(today) if today else dt.date.today()
    audited = api.audit_stocks(
        stocks, screen, today=day, settings=api.list_settings(settings, sheet=sheet), lab_file=lab_file
    )
    if as_json:
        print_json(api.audit_json(audited))
    else:
        _show(audited, notes)
    if audited.needs_a_person:
        raise typer.Exit(NEEDS_A_PERSON)


def _show(audited: Audited, notes: bool) -> None:
    from rich.text import Text

    out = console()
    out.print(f"{audited.shelf.path}: {len(audited.shelf.stocks)} stocks")
    for severity in (Severity.ERROR, Severity.WARNING, Severity.NOTE):
        found = [f for f in audited.findings if f.severity == severity]
        if not found:
            continue
        out.print(f"\n[{STYLE[severity]}]{len(found)} {severity}{'s' if len(found) > 1 else ''}[/]")
        if severity is Severity.NOTE and not notes:
            out.print("  (shown with --notes)", style="dim")
            continue
        for finding in found:
            where = f"row {finding.row} {finding.stock}" if finding.row else finding.stock
            out.print(Text.assemble("  ", (finding.code, "dim"), "  ", (where, "bold"), f"  {finding.message}"))
            if finding.suggestion:
                out.print(Text(f"      -> {finding.suggestion}"))
    _show_gaps(audited)


def _show_gaps(audited: Audited) -> None:
    from rich.text import Text

    if audited.plan is None:
        return
    out = console()
    gaps = [t for t in audited.plan.targets if t.status == "impossible"]
    out.print(
        f"\n[bold]{audited.plan.screen.name}[/bold]: {len(audited.plan.targets) - len(gaps)} of"
        f" {len(audited.plan.targets)} targets can be made from this shelf"
    )
    for target in gaps:
        out.print(Text.assemble("  ", (target.target, "bold"), f": {target.reason}"))
    for what, unlocks in audited.acquire:
        out.print(f"  to obtain: [bold]{what}[/bold] (needed for {unlocks} target{'s' if unlocks > 1 else ''})")
