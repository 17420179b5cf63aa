"""`crossplan rear`: the clock on its own."""

from __future__ import annotations

from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("rear")(rear)


def rear(
    temperature: Annotated[
        str,
        typer.Option("--temperature", "-t", help="Degrees C, or a course: '25', '18:5d,25', '12h20/12h30'."),
    ] = "25",
    hours_at_25: Annotated[
        float | None, typer.Option(help="Egg-to-adult time measured in your own lab at 25 C, in hours.")
    ] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Show how long each stage takes at a temperature, or along a changing one."""
    from crossplan import api

    report = api.rearing_report(temperature, hours_at_25)
    if as_json:
        print_json(report)
        return
    from rich.table import Table

    out = console()
    table = Table(box=None, pad_edge=False, header_style="bold")
    table.add_column("stage")
    table.add_column("hours", justify="right")
    table.add_column("ends at", justify="right")
    for stage in report["stages"]:
        ends = stage["ends_at_hours"]
        table.add_row(stage["stage"], f"{stage['hours']:.1f}", f"{ends:.0f} h  (day {ends / 24:.1f})")
    out.print(table)
    for key, words in api.REARING_WORDS.items():
        if report.get(key) is not None:
            out.print(f"{words}: {report[key]:.0f} h ({report[key] / 24:.1f} days)")
    out.print(f"Source: {report['source']}", style="dim")
    for warning in report["warnings"]:
        out.print(warning, style="yellow")
