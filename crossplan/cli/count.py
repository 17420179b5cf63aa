"""`crossplan count`: the head-counts on their own."""

from __future__ import annotations

from typing import Annotated

import typer

from crossplan.cli.render import console, print_json


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("count")(count)


def count(
    share: Annotated[str, typer.Option(help="Share of the wanted class: 1/8, 0.125 or 12.5%.")],
    need: Annotated[int, typer.Option(help="Flies of that class that are needed.")] = 1,
    probability: Annotated[float, typer.Option(help="Probability with which that many are found.")] = 0.95,
    per_vial: Annotated[float, typer.Option(help="Living progeny expected of one vial.")] = 100.0,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Say how many flies to look through, and how many vials to set up, to find enough of a class."""
    from crossplan import api

    report = api.count_report(share, need, probability, per_vial)
    if as_json:
        print_json(report)
        return
    out = console()
    out.print(
        f"Look through [bold]{report['score']}[/bold] flies: then at least {need} of share {share} are among them"
        f" with probability {report['probability_reached']:.3f}"
        f" (expected {report['expected']:.1f})."
    )
    out.print(
        f"Set up [bold]{report['vials']}[/bold] vials of {per_vial:g} progeny each, uneven as vials are and some"
        f" failing: enough with probability {report['vials_probability']:.3f}."
    )
