"""`crossplan audit`: what is wrong with the shelf, at risk, or missing for a screen; `crossplan accept`: live with it."""

from __future__ import annotations

import datetime as dt
from enum import StrEnum
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from crossplan.cli.gaps import show_gaps
from crossplan.cli.render import NEEDS_A_PERSON, STYLE, console, print_json
from crossplan.errors import Severity

if TYPE_CHECKING:
    from crossplan.api import Audited, Finding


class FailOn(StrEnum):
    """From which severity on an open finding makes the exit status 1."""

    ERROR = "error"
    WARNING = "warning"
    NOTE = "note"
    NEVER = "never"


def register(app: typer.Typer) -> None:
    """Add the commands to the program."""
    app.command("audit")(audit)
    app.command("accept")(accept)


def audit(
    stocks: Annotated[Path, typer.Option("--stocks", help="Stock list: CSV, TSV, XLSX or ODS.")],
    screen: Annotated[Path | None, typer.Option("--screen", help="Screen file: what is missing for it?")] = None,
    sheet: Annotated[str | None, typer.Option(help="Sheet of a workbook with several.")] = None,
    settings: Annotated[
        Path | None, typer.Option(help="How to read the list (written by 'crossplan shelf --remember').")
    ] = None,
    today: Annotated[str | None, typer.Option(help="Judge dates as of this day (YYYY-MM-DD).")] = None,
    notes: Annotated[bool, typer.Option("--notes", help="Show notes too, not only errors and warnings.")] = False,
    accepted: Annotated[Path | None, typer.Option(help="Findings accepted before (see 'crossplan accept').")] = None,
    html: Annotated[Path | None, typer.Option(help="Write a report to read in a browser.")] = None,
    table: Annotated[Path | None, typer.Option("--csv", help="Write the findings as a CSV table.")] = None,
    quick: Annotated[
        bool, typer.Option("--quick", help="Of a screen look at the parts only, search no schemes.")
    ] = False,
    fail_on: Annotated[FailOn, typer.Option(help="Exit status 1 from this severity on.")] = FailOn.WARNING,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Check a stock list, and say which targets of a screen it cannot make."""
    from crossplan import api

    day = api.parse_day(today) if today else dt.date.today()
    how = api.list_settings(settings, sheet=sheet)
    audited = api.audit_stocks(
        stocks, screen, today=day, settings=how, lab_file=lab_file, accepted=accepted, search=not quick
    )
    written = api.write_audit(audited, html=html, table=table)
    if as_json:
        print_json(api.audit_json(audited))
    else:
        _show(audited, notes)
        for place in written:
            console().print(f"Written: {place}", markup=False)
    if audited.needs_a_person_for(fail_on):
        raise typer.Exit(NEEDS_A_PERSON)


def accept(
    code: Annotated[str, typer.Argument(help="The kind of finding, as the audit prints it: single-copy.")],
    stock: Annotated[str, typer.Argument(help="The stock, as the audit prints it.")],
    because: Annotated[str, typer.Option("--because", help="Why it can stay as it is.")],
    stocks: Annotated[Path, typer.Option("--stocks", help="Stock list: CSV, TSV, XLSX or ODS.")],
    accepted: Annotated[Path, typer.Option(help="The file of accepted findings; made if it is not there.")] = Path(
        "accepted.toml"
    ),
    sheet: Annotated[str | None, typer.Option(help="Sheet of a workbook with several.")] = None,
    settings: Annotated[
        Path | None, typer.Option(help="How to read the list (written by 'crossplan shelf --remember').")
    ] = None,
    today: Annotated[str | None, typer.Option(help="Judge dates as of this day (YYYY-MM-DD).")] = None,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
) -> None:
    """Accept a finding of the audit, with a reason, until its row changes."""
    from crossplan import api

    day = api.parse_day(today) if today else dt.date.today()
    audited = api.audit_stocks(stocks, today=day, settings=api.list_settings(settings, sheet=sheet), lab_file=lab_file)
    place = api.accept_finding(audited, accepted, code, stock, because)
    console().print(f"Accepted in {place}: {code} of {stock}, until its row changes", markup=False)


def _show(audited: Audited, notes: bool) -> None:
    out = console()
    out.print(f"{audited.shelf.path}: {len(audited.shelf.stocks)} stocks", markup=False)
    for severity in (Severity.ERROR, Severity.WARNING, Severity.NOTE):
        found = [f for f in audited.open if f.severity == severity]
        if not found:
            continue
        out.print(f"\n[{STYLE[severity]}]{len(found)} {severity}{'s' if len(found) > 1 else ''}[/]")
        if severity is Severity.NOTE and not notes:
            out.print("  (shown with --notes)", style="dim")
            continue
        _show_findings(found)
    _show_accepted(audited)
    if audited.gaps is not None:
        out.print()
        show_gaps(audited.gaps)


def _show_findings(found: list[Finding]) -> None:
    """Show findings kind by kind, with the reason once for each kind."""
    from rich.text import Text

    out = console()
    by_code: dict[str, list[Finding]] = {}
    for finding in found:
        by_code.setdefault(finding.code, []).append(finding)
    for code, findings in by_code.items():
        out.print(Text.assemble("  ", (code, "bold"), (f"  {findings[0].why}", "dim")))
        told = ""
        for i, finding in enumerate(findings):
            where = f"row {finding.row} {finding.stock}" if finding.row else finding.stock
            out.print(Text.assemble("    ", (where, "bold"), f"  {finding.message}"))
            told = finding.suggestion
            last = i + 1 == len(findings) or findings[i + 1].suggestion != told
            if told and last:
                out.print(Text(f"      -> {told}"))


def _show_accepted(audited: Audited) -> None:
    out = console()
    accepted = [f for f in audited.findings if f.accepted]
    if accepted:
        out.print(f"\n{len(accepted)} accepted", style="dim")
        for finding in accepted:
            out.print(f"  {finding.code}  {finding.stock}  ({finding.accepted})", style="dim", markup=False)
    for problem in audited.stale:
        out.print(f"note: {problem.message}; {problem.hint}", markup=False)
