"""`crossplan plan SCREEN`: from a stock list and a screen file to a folder that can be worked from."""

from __future__ import annotations

import datetime as dt
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from crossplan.cli.render import NEEDS_A_PERSON, console, print_json, report_problem

if TYPE_CHECKING:
    from crossplan.api import Plan, Planned

#: how many problems of a stock list are shown in full before the rest is only counted
SHOWN_PROBLEMS = 8


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("plan")(plan)


def plan(
    screen: Annotated[Path, typer.Argument(help="Screen file (TOML).")],
    stocks: Annotated[Path, typer.Option("--stocks", help="Stock list: CSV, TSV, XLSX or ODS.")],
    out: Annotated[Path | None, typer.Option("--out", help="Folder for the plan; made if it is not there.")] = None,
    start: Annotated[
        str | None, typer.Option(help="First day of work (YYYY-MM-DD); the screen file's start, or today, otherwise.")
    ] = None,
    sheet: Annotated[str | None, typer.Option(help="Sheet of a workbook with several.")] = None,
    settings: Annotated[
        Path | None, typer.Option(help="How to read the list (written by 'crossplan shelf --remember').")
    ] = None,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print the plan as one JSON document.")] = False,
) -> None:
    """Plan the crosses of a screen: schemes, numbers, calendar, labels and bench sheets."""
    from crossplan import api

    first_day = api.parse_day(start) if start else None
    with _progress(quiet=as_json) as report:
        planned = api.plan_screen(
            screen,
            stocks,
            today=dt.date.today(),
            start=first_day,
            settings=api.list_settings(settings, sheet=sheet),
            lab_file=lab_file,
            progress=report,
        )
        written = api.write_plan(planned.plan, out) if out is not None else ()
    if as_json:
        print_json(api.plan_json(planned.plan))
    else:
        _show(planned, written)
    if planned.needs_a_person:
        raise typer.Exit(NEEDS_A_PERSON)


class _progress:
    """A progress line on standard error while the work goes on; nothing when quiet or not a terminal."""

    def __init__(self, quiet: bool) -> None:
        from rich.progress import BarColumn, Progress, TextColumn

        self._bar = Progress(
            TextColumn("{task.description}"), BarColumn(), TextColumn("{task.completed}/{task.total}"),
            console=console(err=True), transient=True, disable=quiet or not console(err=True).is_terminal,
        )  # fmt: skip
        self._task = self._bar.add_task("reading", total=None)

    def __enter__(self) -> _progress:
        self._bar.start()
        return self

    def __exit__(self, *_: object) -> None:
        self._bar.stop()

    def __call__(self, what: str, done: int, total: int) -> None:
        self._bar.update(self._task, description=what, completed=done, total=total or None)


def _show(planned: Planned, written: tuple[Path, ...]) -> None:
    plan = planned.plan
    _show_reading(planned)
    out = console()
    out.print(f"\n[bold]{plan.screen.name}[/bold]")
    _show_targets(plan)
    _show_impossible(plan)
    _show_dates(plan)
    for caution in plan.cautions:
        out.print(f"[yellow]![/yellow] {caution}", highlight=False)
    if written:
        out.print("\n[bold]Written[/bold]")
        for path in written:
            out.print(f"  {path}")
    else:
        out.print("\nNothing was written (no --out).", style="dim")


def _show_reading(planned: Planned) -> None:
    shelf = planned.shelf
    out = console()
    out.print(
        f"{shelf.path}: {shelf.rows_read} rows read, {shelf.rows_refused} not understood,"
        f" {planned.rows_assumed} with an assumption"
    )
    errors = [p for p in planned.problems if p.severity == "error"]
    for problem in errors[:SHOWN_PROBLEMS]:
        report_problem(problem)
    if len(errors) > SHOWN_PROBLEMS:
        out.print(f"  ... and {len(errors) - SHOWN_PROBLEMS} more")
    if planned.rows_assumed or errors:
        out.print(f"  more on the list: crossplan audit --stocks {shelf.path}", style="dim")


def _show_targets(plan: Plan) -> None:
    from rich.table import Table

    groups: dict[tuple[str, int | None, bool], int] = {}
    for target in plan.targets:
        if target.status != "impossible":
            key = ("control" if target.control_kind else "target", target.generations, target.proved_minimal)
            groups[key] = groups.get(key, 0) + 1
    table = Table(box=None, pad_edge=True, header_style="bold")
    for heading in ("", "generations", "fewest possible"):
        table.add_column(heading)
    for (kind, generations, proved), n in sorted(groups.items(), key=lambda i: (i[0][0] != "target", i[0][1] or 0)):
        table.add_row(
            f"{n} {kind}{'s' if n > 1 else ''}", str(generations or "in stock"), "proved" if proved else "not proved"
        )
    console().print(table)


def _show_impossible(plan: Plan) -> None:
    from rich.text import Text

    impossible = [t for t in plan.targets if t.status == "impossible"]
    if not impossible:
        return
    out = console()
    out.print(f"[bold red]{len(impossible)} cannot be made from this shelf[/bold red]")
    for target in impossible:
        out.print(Text.assemble("  ", (target.target, "bold"), f": {target.reason}"))
        if target.would_unlock:
            out.print(Text("    would unlock it: " + ", ".join(target.would_unlock)))


def _show_dates(plan: Plan) -> None:
    totals = plan.totals
    out = console()
    if not plan.steps:
        return
    out.print(
        f"{totals['steps']} crosses, {totals['vials']} vials, {totals['tasks']} tasks on {totals['working_days']} days"
    )
    out.print(
        f"First flies ready [bold]{_day(totals['first_ready'])}[/bold],"
        f" last [bold]{_day(totals['last_ready'])}[/bold];"
        f" fullest day {_day(totals['busiest_day'])} ({totals['busiest_day_minutes']} minutes of work)"
    )


def _day(text: str | None) -> str:
    """Return an ISO date as `Wed 10 Feb 2027`."""
    return f"{dt.date.fromisoformat(text):%a %-d %b %Y}" if text else "never"
