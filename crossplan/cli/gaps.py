"""`crossplan gaps`: what the shelf lacks for a screen, and the least set of stocks to obtain."""

from __future__ import annotations

from collections import Counter
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from crossplan.cli.render import NEEDS_A_PERSON, console, print_json

if TYPE_CHECKING:
    from crossplan.api import GapReport

#: how many lines of a section the terminal shows; files and --json have all of them
MOST_LINES = 8
UNMADE = ("lacking", "no scheme", "never")


def register(app: typer.Typer) -> None:
    """Add the command to the program."""
    app.command("gaps")(gaps)


def gaps(
    screen: Annotated[Path, typer.Argument(help="Screen file, or a wish list in its form.")],
    stocks: Annotated[Path, typer.Option("--stocks", help="Stock list: CSV, TSV, XLSX or ODS.")],
    offers: Annotated[Path | None, typer.Option(help="A list of stocks that can be had elsewhere.")] = None,
    quick: Annotated[bool, typer.Option("--quick", help="Look at the parts only, search no schemes.")] = False,
    sheet: Annotated[str | None, typer.Option(help="Sheet of a workbook with several.")] = None,
    settings: Annotated[
        Path | None, typer.Option(help="How to read the list (written by 'crossplan shelf --remember').")
    ] = None,
    html: Annotated[Path | None, typer.Option(help="Write a report to read in a browser.")] = None,
    table: Annotated[Path | None, typer.Option("--csv", help="Write the targets as a CSV table.")] = None,
    lab_file: Annotated[Path | None, typer.Option("--lab", help="The lab's own catalogue entries (TOML).")] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Say what the shelf can make and what it lacks, and which stocks to obtain or build."""
    from crossplan import api

    how = api.list_settings(settings, sheet=sheet)
    report = api.find_gaps(stocks, screen, offers=offers, settings=how, lab_file=lab_file, search=not quick)
    written = api.write_gaps(report, html=html, table=table)
    if as_json:
        print_json(api.gap_report_json(report))
    else:
        show_gaps(report)
        for place in written:
            console().print(f"Written: {place}", markup=False)
    if report.needs_a_person:
        raise typer.Exit(NEEDS_A_PERSON)


def show_gaps(report: GapReport) -> None:
    """Show what a shelf lacks on the terminal."""
    from crossplan import api

    document = api.gap_report_json(report)
    _targets(report.name, document["targets"], document["searched"])
    _to_obtain(document)
    _section("Base stocks to build", [
        f"{' and '.join(b['components'])} in one stock: {_shortened(b)}" for b in document["base_stocks"]
    ])  # fmt: skip
    _section("Targets that hang by one stock", [
        f"{h['stock']} ({'copies unknown' if h['copies'] is None else _counted(h['copies'], 'copy', 'copies')}) alone carries"
        f" {', '.join(h['carries'])}: {_counted(len(h['targets']), 'target')}"
        for h in document["hangs_by"]
    ])  # fmt: skip
    _section("Helper stocks that are lacking", [
        f"{h['what']}, such as {h['example']}: {h['why']}" for h in document["helpers_lacking"]
    ])  # fmt: skip


def _targets(name: str, targets: list[dict[str, object]], searched: bool) -> None:
    from rich.text import Text

    out = console()
    bad = [t for t in targets if t["status"] in UNMADE]
    words = "can be made from this shelf" if searched else "have all their parts on this shelf"
    out.print(Text.assemble((name, "bold"), f": {len(targets) - len(bad)} of {len(targets)} targets {words}"))
    made = Counter(
        t["generations"] if t["generations"] is not None else t["at_least"]
        for t in targets if t["status"] not in UNMADE
    )  # fmt: skip
    for generations, number in sorted(made.items(), key=lambda item: str(item[0])):
        told = "in stock" if generations == 0 else f"{_counted(int(str(generations)), 'generation')}"
        out.print(f"  {number:>4}  {'' if searched or generations == 0 else 'at least '}{told}")
    for target in bad:
        out.print(Text.assemble("  ", (str(target["target"]), "bold"), f": {target['reason']}"))
    for target in targets:
        cautions = target["cautions"]
        for caution in cautions if isinstance(cautions, list) else ():
            out.print(Text.assemble("  ", (str(target["target"]), "bold"), f": {caution}"))


def _to_obtain(document: dict[str, object]) -> None:
    answers = document["least_sets"]
    assert isinstance(answers, list)
    if not answers:
        return
    out = console()
    proved = "" if document["proved_least"] else ", not proved to be the least"
    out.print(f"\n[bold]To obtain[/bold]: {_counted(len(answers[0]), 'stock')} for all that can be unlocked{proved}")
    for answer in answers:
        out.print(f"  {' + '.join(answer)}", markup=False)
    if document["more_least_sets"]:
        out.print("  and other sets of that size")
    steps = document["most_targets"]
    assert isinstance(steps, list)
    if len(steps) > 1:
        _section("Most targets for so many stocks", [
            f"{_counted(s['stocks'], 'stock')}: {_counted(s['unlocked'], 'target')} ({' + '.join(s['which'])})" for s in steps
        ])  # fmt: skip
    unlocks = document["acquire"]
    assert isinstance(unlocks, list)
    _section("What each unlocks", [
        f"{u['what']} (needed for {_counted(len(u['needed_by']), 'target')}, unlocks {u['unlocks']} by itself)" for u in unlocks
    ])  # fmt: skip


def _shortened(base: dict[str, list[str]]) -> str:
    if base["tried"]:
        return f"{len(base['shorter'])} of {_counted(len(base['tried']), 'target')} tried became shorter, or possible"
    return f"may shorten {_counted(len(base['may_shorten']), 'target')}"


def _counted(number: int, one: str, many: str = "") -> str:
    return f"{number} {one if number == 1 else many or one + 's'}"


def _section(title: str, lines: list[str]) -> None:
    if not lines:
        return
    out = console()
    out.print(f"\n[bold]{title}[/bold]")
    for line in lines[:MOST_LINES]:
        out.print(f"  {line}", markup=False)
    if len(lines) > MOST_LINES:
        out.print(f"  and {len(lines) - MOST_LINES} more (see --html, --csv or --json)")
