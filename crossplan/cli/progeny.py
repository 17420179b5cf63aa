"""`crossplan progeny MOTHER FATHER`: every class of offspring of a cross."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from crossplan.cli.render import console, percent, print_json, report_problem

if TYPE_CHECKING:
    from crossplan.api import CrossResult, ProgenyClass


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("progeny")(progeny)


def progeny(
    mother: Annotated[str, typer.Argument(help="Genotype of the mother, or the name of a stock (with --stocks).")],
    father: Annotated[str, typer.Argument(help="Genotype of the father, or the name of a stock (with --stocks).")],
    stocks: Annotated[Path | None, typer.Option(help="Stock list in which names are looked up.")] = None,
    pupae: Annotated[bool, typer.Option("--pupae", help="Pupae are scored too (Tubby).")] = False,
    fluorescence: Annotated[
        bool, typer.Option("--fluorescence", help="There is a fluorescence dissecting scope.")
    ] = False,
    temperature: Annotated[float, typer.Option(help="Rearing temperature of the progeny, degrees C.")] = 25.0,
    kosambi: Annotated[bool, typer.Option("--kosambi", help="Kosambi's map function instead of Haldane's.")] = False,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Show every class of offspring: sex, what one sees, share, and which genotypes look alike."""
    from crossplan import api

    result = api.cross_flies(
        mother, father, stocks=stocks, lab_file=lab_file, pupae=pupae, fluorescence=fluorescence,
        rearing_C=temperature, map_function="kosambi" if kosambi else "haldane",
    )  # fmt: skip
    for problem in result.problems:
        report_problem(problem)
    if as_json:
        print_json(api.progeny_json(result))
        return
    _show(result)


def _show(result: CrossResult) -> None:
    from rich.table import Table
    from rich.text import Text

    from crossplan import api

    out = console()
    progeny = result.progeny
    out.print(Text.assemble(("♀ ", "bold"), api.genotype(progeny.mother)))
    out.print(Text.assemble(("♂ ", "bold"), api.genotype(progeny.father)))
    table = Table(box=None, pad_edge=False, header_style="bold", show_edge=False)
    for heading in ("", "looks", "share", "genotype"):
        table.add_column(heading, overflow="fold", no_wrap=heading in ("", "share"))
    for found in progeny.classes:
        genotypes = "\n".join(
            api.genotype(m.fly) + (f"  {percent(float(m.share))}" if found.look_alikes else "") for m in found.members
        )
        table.add_row("♀" if found.sex == "female" else "♂", result.looks(found), _share(found), Text(genotypes))
    out.print(table)
    _remarks(result)


def _share(found: ProgenyClass) -> str:
    exact = found.exact
    return f"{exact} ({percent(float(exact))})" if exact is not None else percent(float(found.share))


def _remarks(result: CrossResult) -> None:
    progeny = result.progeny
    out = console()
    alike = sum(c.look_alikes for c in progeny.classes)
    if alike:
        out.print(f"{alike} of {len(progeny.classes)} classes hold genotypes that look alike: listed together above.")
    if progeny.dead:
        out.print(f"{percent(1 - float(progeny.alive))} of the zygotes die:")
        for cause, share in result.causes_of_death():
            out.print(f"  {percent(share)}  {cause}")
    for remark in progeny.remarks():
        out.print(remark, style="yellow")
