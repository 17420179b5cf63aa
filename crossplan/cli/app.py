"""The command line: which commands there are, and what happens to errors.

Every command lives in a file of its own and imports the library inside its body, so that `--help` stays quick.
"""

from __future__ import annotations

import os
import sys
from typing import Annotated

import typer

from crossplan import __version__
from crossplan.cli import (
    audit,
    calendar,
    compare,
    count,
    demo,
    draw,
    gaps,
    keep,
    labels,
    log,
    methods,
    plan,
    progeny,
    read,
    rear,
    sheets,
    shelf,
    show,
    today,
)
from crossplan.cli.render import report_error
from crossplan.errors import CrossplanError, PlanCheckError

app = typer.Typer(
    name="crossplan",
    help="Plan fly crosses from the stocks on your shelf to the flies on your rig.",
    no_args_is_help=True,
    add_completion=False,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    context_settings={"help_option_names": ["-h", "--help"]},
)

for module in (
    plan,
    progeny,
    read,
    shelf,
    audit,
    gaps,
    keep,
    compare,
    labels,
    sheets,
    calendar,
    show,
    draw,
    methods,
    today,
    log,
    rear,
    count,
    demo,
):
    module.register(app)

#: what the shell expects of a program that was stopped with Ctrl-C
INTERRUPTED = 130


def _version(wanted: bool) -> None:
    if wanted:
        typer.echo(f"crossplan {__version__}")
        raise typer.Exit


@app.callback()
def _options(
    version: Annotated[
        bool, typer.Option("--version", callback=_version, is_eager=True, help="Show the version and leave.")
    ] = False,
) -> None:
    """Plan fly crosses from the stocks on your shelf to the flies on your rig."""


def main() -> None:
    """Run the command line; turn every expected error into a message and an exit status."""
    try:
        app()
    except CrossplanError as error:
        report_error(error)
        sys.exit(error.exit_status)
    except KeyboardInterrupt:
        typer.echo("\nStopped. Nothing was half written.", err=True)
        sys.exit(INTERRUPTED)
    except BrokenPipeError:
        sys.stderr.close()
        sys.exit(0)
    except Exception as error:
        if os.environ.get("CROSSPLAN_DEBUG"):
            raise
        typer.echo(f"crossplan stopped on a fault of its own ({type(error).__name__}: {error}).", err=True)
        typer.echo(
            "  -> Nothing was half written. Please report it, with CROSSPLAN_DEBUG=1 set for the details.", err=True
        )
        sys.exit(PlanCheckError.exit_status)
