"""`crossplan shelf STOCKS`: how a stock list was read, what it leaves open, and a table to correct it by."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from crossplan.cli.render import NEEDS_A_PERSON, console, print_json, report_problem

if TYPE_CHECKING:
    from crossplan.api import ReadingReport

#: how many questions are shown before the rest is only counted
SHOWN_QUESTIONS = 20
OUTCOME_WORDS = {
    "read": "understood",
    "assumed": "understood with a stated assumption",
    "chromosome open": "understood but for a chromosome: used for nothing until the question is answered",
    "refused": "not understood",
}


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("shelf")(shelf)


def shelf(
    stocks: Annotated[Path, typer.Argument(help="Stock list: CSV, TSV, XLSX or ODS.")],
    sheet: Annotated[str | None, typer.Option(help="Sheet of a workbook with several.")] = None,
    all_sheets: Annotated[bool, typer.Option("--all-sheets", help="Read every sheet with a genotype column.")] = False,
    column: Annotated[
        list[str] | None, typer.Option(help="Which column is which, as genotype=HEADING; may be given again.")
    ] = None,
    settings: Annotated[Path | None, typer.Option(help="How to read the list, as remembered.")] = None,
    remember: Annotated[Path | None, typer.Option(help="Write how the list was read into this file.")] = None,
    report: Annotated[
        Path | None, typer.Option(help="Write the rows that need an eye into this file (CSV or XLSX).")
    ] = None,
    all_rows: Annotated[bool, typer.Option("--all-rows", help="Write all rows into it.")] = False,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Read a stock list: count what is understood, ask what it leaves open."""
    from dataclasses import replace

    from crossplan import api

    how = api.list_settings(settings, sheet=sheet, all_sheets=all_sheets, columns=column or ())
    found = api.reading_report(api.read_stocks(stocks, settings=how, lab_file=lab_file))
    written = []
    if report is not None:
        written.append(api.write_reading_report(found, report, all_rows=all_rows))
    if remember is not None:
        written.append(api.remember_settings(replace(how, columns=found.shelf.columns), remember))
    if as_json:
        print_json(api.reading_report_json(found))
    else:
        _show(found, written)
    if found.counts["refused"] or found.counts["chromosome open"]:
        raise typer.Exit(NEEDS_A_PERSON)


def _show(found: ReadingReport, written: list[Path]) -> None:
    out = console()
    sheets = f" (sheets: {', '.join(found.shelf.sheets)})" if found.shelf.sheets else ""
    out.print(f"{found.shelf.path}: {len(found.shelf.stocks)} rows read{sheets}", markup=False)
    for outcome, count in found.counts.items():
        if count:
            out.print(f"  {count:>5}  {OUTCOME_WORDS[outcome]}", markup=False)
    columns = ", ".join(f"{kind} = '{heading}'" for kind, heading in found.shelf.columns.items())
    out.print(f"Columns: {columns}", markup=False)
    # what is asked about chromosomes follows below, once for each symbol
    for problem in found.shelf.problems:
        if (
            str(problem.severity) == "error"
            and problem.code != "which-chromosome"
            or problem.column not in found.shelf.columns.values()
        ):
            report_problem(problem)
    _questions(found)
    for place in written:
        out.print(f"Written: {place}", markup=False)


def _questions(found: ReadingReport) -> None:
    if not found.questions:
        return
    out = console()
    out.print("Questions", style="bold")
    for question in found.questions[:SHOWN_QUESTIONS]:
        rows = ", ".join(map(str, question.rows[:8])) + (" ..." if len(question.rows) > 8 else "")
        out.print(f"  {question.asks} (row{'s' if len(question.rows) > 1 else ''} {rows})", markup=False)
    if len(found.questions) > SHOWN_QUESTIONS:
        out.print(f"  and {len(found.questions) - SHOWN_QUESTIONS} more: see --json")
    first = next((q for q in found.questions if q.settles), None)
    if first is not None:
        out.print(
            "  Answer in the list itself, as kx-GAL4 (II), or once for all in the lab's file (--lab):", markup=False
        )
        for line in first.settles.splitlines():
            out.print(f"    {line}", style="dim", markup=False, highlight=False)
