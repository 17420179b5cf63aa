"""How results and errors look in a terminal."""

from __future__ import annotations

import json
import sys
from collections.abc import Iterable
from typing import TYPE_CHECKING, Any

import typer

from crossplan.errors import CrossplanError, GenotypeError, Problem, Severity

if TYPE_CHECKING:
    from rich.console import Console

#: exit status when the work was done and something needs a person
NEEDS_A_PERSON = 1

STYLE = {Severity.ERROR: "bold red", Severity.WARNING: "yellow", Severity.NOTE: "dim"}


def console(err: bool = False) -> Console:
    """Return a console on standard output (or standard error)."""
    from rich.console import Console

    return Console(stderr=err, highlight=False)


def print_json(document: Any) -> None:
    """Print one JSON document on standard output, and nothing else there."""
    sys.stdout.write(json.dumps(document, ensure_ascii=False, indent=2) + "\n")


def report_error(error: CrossplanError) -> None:
    """Say on standard error what is wrong and what to do."""
    typer.echo(f"crossplan: {error.message}", err=True)
    if isinstance(error, GenotypeError):
        for problem in error.problems:
            report_problem(problem)
    if error.hint:
        typer.echo(f"  -> {error.hint}", err=True)


def report_problem(problem: Problem) -> None:
    """Show one problem on standard error: place, message, the text with the characters marked, what to do."""
    place = problem.place()
    typer.echo(f"{problem.severity}: {place + ': ' if place else ''}{problem.message}", err=True)
    if problem.text and problem.end > problem.start and len(problem.text) <= 200:
        typer.echo(f"    {problem.text}", err=True)
        typer.echo(f"    {' ' * problem.start}{'^' * (problem.end - problem.start)}", err=True)
    if problem.hint:
        typer.echo(f"  -> {problem.hint}", err=True)


def problems_json(problems: Iterable[Problem]) -> list[dict[str, Any]]:
    """Return problems as the JSON contract writes them."""
    return [
        {
            "severity": str(p.severity),
            "code": p.code,
            "message": p.message,
            "hint": p.hint,
            "place": p.place(),
            "start": p.start,
            "end": p.end,
        }
        for p in problems
    ]


def percent(share: float) -> str:
    """Return a share as people write it: `12.5 %`."""
    return f"{100 * share:.3g} %"
