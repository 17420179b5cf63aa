"""`crossplan read GENOTYPE...`: what the program understood, chromosome by chromosome, and what it did not."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from crossplan.cli.render import NEEDS_A_PERSON, STYLE, console, print_json
from crossplan.errors import InputError

if TYPE_CHECKING:
    from crossplan.api import Reading


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("read")(read)


def read(
    genotypes: Annotated[list[str] | None, typer.Argument(help="Genotypes, each in quotes.")] = None,
    file: Annotated[Path | None, typer.Option(help="Read every genotype of this table instead.")] = None,
    column: Annotated[str, typer.Option(help="Column of the table that holds the genotypes.")] = "genotype",
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Say what was understood of each genotype, and what was not."""
    from crossplan import api

    if bool(genotypes) == bool(file):
        raise InputError("give genotypes, or --file TABLE, not both and not neither",
                         'for example: crossplan read "w; AD-K12@attP40/CyO; +/TM6B"')  # fmt: skip
    texts = genotypes or api.genotype_column(file, column)  # type: ignore[arg-type]
    readings = api.read_genotypes(texts, lab_file)
    if as_json:
        print_json({"readings": [api.reading_json(r) for r in readings]})
    else:
        for reading in readings:
            _show(reading, len(readings) > 20, lab_file)
        if len(readings) > 1:
            _summary(readings)
    if any(not r.ok or r.is_open for r in readings):
        raise typer.Exit(NEEDS_A_PERSON)


def _show(reading: Reading, only_problems: bool, lab_file: Path | None) -> None:
    from rich.text import Text

    from crossplan import api

    out = console()
    if only_problems and reading.ok and not reading.is_open:
        return
    out.print(Text(reading.text if len(reading.text) <= 300 else reading.text[:297] + "...", style="bold"))
    if reading.ok:
        _chromosomes(reading, lab_file)
    else:
        out.print("  not understood", style="bold red")
    for problem in reading.problems:
        where = f" (characters {problem.start + 1}-{problem.end})" if problem.end > problem.start else ""
        out.print(Text(f"  {problem.severity}: {problem.message}{where}", style=STYLE[problem.severity]))
        if problem.hint:
            out.print(Text(f"    -> {problem.hint}"))
    if reading.ok:
        out.print(Text(f"  written short: {api.short_form(reading)}", style="dim"))


def _chromosomes(reading: Reading, lab_file: Path | None) -> None:
    from rich.table import Table

    from crossplan import api

    table = Table(box=None, pad_edge=True, header_style="bold", padding=(0, 2, 0, 2))
    for heading in ("chromosome", "homologue", "carries", "what it is"):
        table.add_column(heading, overflow="fold")
    rows = api.reading_rows(reading, lab_file)
    for row in rows:
        table.add_row(*row[:4])
    console().print(table)
    for symbol, source in dict.fromkeys((row[2], row[4]) for row in rows if row[4]):
        console().print(f"  {symbol}: {source}", style="dim", markup=False)


def _summary(readings: list[Reading]) -> None:
    refused = sum(not r.ok for r in readings)
    is_open = sum(r.is_open for r in readings)
    assumed = sum(r.assumed for r in readings)
    understood = len(readings) - refused - assumed - is_open
    console().print(
        f"{len(readings)} genotypes: {understood} understood, {assumed} with a stated assumption, {is_open} but for a"
        f" chromosome, {refused} not"
    )
