"""The public door: everything that the commands may call, and that a script may.

    read_genotypes, genotype, reading_json ...   genotypes and what was understood of them
    cross_flies, progeny_json                    one cross
    read_stocks, list_settings, reading_report   the stock list, how to read it, and what was understood
    audit_stocks, audit_json                     the shelf
    plan_screen, plan_json, load_plan            a screen
    write_plan, write_labels, write_calendar     what people hold
    log_entry, day_report, day_json              what really happened, and what it changes
    rearing_report, count_report                 the clock and the head-counts
    write_demo                                   the demo

Functions that write do so whole or not at all. Nothing here prints or reads the clock.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any

from crossplan import __version__
from crossplan.errors import InputError, OutputError, Problem, Severity
from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue_lab import load_catalogue
from crossplan.genetics.element import Element, Kind
from crossplan.genetics.fly import Fly
from crossplan.genetics.meiosis import MapFunction
from crossplan.genetics.notation import Reading as Reading
from crossplan.genetics.notation import fly_json, format_genotype, read_fly, read_genotype
from crossplan.genetics.notation import reading_json as reading_json
from crossplan.genetics.progeny import Progeny, cross
from crossplan.genetics.progeny import ProgenyClass as ProgenyClass
from crossplan.genetics.sorting import is_hidden

if TYPE_CHECKING:
    from crossplan.bench.terminal import TextLine as TextLine
    from crossplan.genetics.catalogue import Catalogue
    from crossplan.logbook.day import DayReport as DayReport
    from crossplan.plan.model import Plan as Plan
    from crossplan.plan.model import TaskRecord
    from crossplan.plan.screen_file import ScreenRequest
    from crossplan.schemes.batch import Answer
    from crossplan.schemes.gap_report import GapReport as GapReport
    from crossplan.schemes.screen_plan import ScreenPlanner
    from crossplan.stocks.audit import Finding as Finding
    from crossplan.stocks.corrections import Correction as Correction
    from crossplan.stocks.difference import Change as Change
    from crossplan.stocks.reading_report import ReadingReport as ReadingReport
    from crossplan.stocks.rota import Transfer as Transfer
    from crossplan.stocks.settings import ListSettings as ListSettings
    from crossplan.stocks.shelf import Shelf as Shelf

Progress = Callable[[str, int, int], None]


# -- genotypes ---------------------------------------------------------------------------------------------------


def read_genotypes(texts: Iterable[str], lab_file: Path | None = None) -> list[Reading]:
    """Return what was understood of each genotype; never raises on any text."""
    catalogue = load_catalogue(lab_file)
    return [read_genotype(text, catalogue) for text in texts]


def genotype_column(table: Path, column: str) -> list[str]:
    """Return the cells of one column of a table as text.

    Raises:
        InputError: the table cannot be read, or has no such column.
    """
    from crossplan.stocks.table import read_column

    return read_column(table, column)


def genotype(fly: Fly) -> str:
    """Return the fly in short notation."""
    return format_genotype(fly)


def short_form(reading: Reading) -> str:
    """Return what was read, in short notation."""
    return reading.canonical


def reading_rows(reading: Reading, lab_file: Path | None = None) -> list[tuple[str, str, str, str, str]]:
    """Return a row for each element understood: chromosome, homologue, symbol, kind, source of its facts."""
    catalogue = load_catalogue(lab_file)
    fly = reading.female or reading.male
    if fly is None:
        return [
            (e.chromosome or "?", "", e.symbol, _what_it_is(e), catalogue.provenance(e.symbol))
            for e in reading.elements
        ]  # fmt: skip
    rows = []
    for chromosome in ("X", "2", "3", "4"):
        pair = fly.pair(chromosome)
        homologues = pair[:1] if pair[0] == pair[1] else pair
        for i, homologue in enumerate(homologues):
            which = "both" if len(homologues) == 1 else ("first", "second")[i]
            if not homologue.elements and chromosome != "4":
                rows.append((chromosome, which, "+", "wild type", ""))
            for element in homologue.elements:
                source = catalogue.provenance(element.symbol)
                rows.append((chromosome, which, element.symbol, _what_it_is(element), source))
    return rows


def _what_it_is(element: Element) -> str:
    kind = str(element.kind) + (f", {element.component}" if element.component else "")
    return "; ".join(p for p in (kind, _place_words(element)) if p)


def _place_words(element: Element) -> str:
    if element.kind in (Kind.BALANCER, Kind.Y):
        return ""
    return "map position unknown" if element.position_cM is None else f"at {element.position_cM:.1f} cM"


# -- one cross ---------------------------------------------------------------------------------------------------


@dataclass(frozen=True)
class CrossResult:
    """The progeny of a cross, with the observer who sorted them and what was assumed when the parents were read."""

    progeny: Progeny
    observer: Observer
    problems: tuple[Problem, ...]

    def looks(self, found: ProgenyClass) -> str:
        """Return what one sees on a class, in words; signs that only others show are named by their opposites."""
        sex = [c for c in self.progeny.classes if c.sex == found.sex]
        seen = frozenset[str]().union(*(c.signs for c in sex))
        signs = self.observer.catalogue.signs
        words = sorted(found.signs)
        absent = (s for s in sorted(seen - found.signs) if not is_hidden(s, found.signs, self.observer.catalogue))
        words += [signs[s].opposite for s in absent if s in signs and signs[s].opposite]
        return ", ".join(words) or "wild type"

    def causes_of_death(self) -> list[tuple[str, float]]:
        """Return each cause of death with its share of the zygotes, the largest first."""
        causes: dict[str, float] = {}
        for zygote in self.progeny.dead:
            causes[zygote.cause] = causes.get(zygote.cause, 0.0) + float(zygote.share_of_zygotes)
        return sorted(causes.items(), key=lambda item: (-item[1], item[0]))


def cross_flies(
    mother: str,
    father: str,
    *,
    stocks: Path | None = None,
    lab_file: Path | None = None,
    pupae: bool = False,
    fluorescence: bool = False,
    rearing_C: float = 25.0,
    map_function: MapFunction = "haldane",
) -> CrossResult:
    """Return the progeny of a cross of two flies, given by genotype or by the name of a stock.

    Raises:
        InputError: a genotype cannot be read, or a fly cannot be a parent.
    """
    from crossplan.genetics.survival import cause_of_death, sterile_because

    catalogue = load_catalogue(lab_file)
    shelf = None
    if stocks is not None:
        from crossplan.stocks.shelf import read_stocks as read

        shelf = read(stocks, catalogue=catalogue)
    flies: list[Fly] = []
    problems: list[Problem] = []
    for text, sex in ((mother, "female"), (father, "male")):
        stock = shelf.by_name(text) if shelf is not None else None
        known = shelf.elements() if shelf is not None else None
        written = stock.genotype if stock is not None else text
        fly = read_fly(written, "female" if sex == "female" else "male", catalogue, known)
        problems += [p for p in read_genotype(written, catalogue, known).problems if p.severity != Severity.NOTE]
        dead = cause_of_death(fly)
        if dead:
            raise InputError(f"the {sex} parent {written} cannot live: {dead}", "check the genotype")
        sterile = sterile_because(fly)
        if sterile:
            raise InputError(f"{written} cannot be a parent: {sterile}", "use its sibs, or the other sex")
        flies.append(fly)
    means = Means(pupae=pupae, fluorescence=fluorescence, rearing_C=rearing_C)
    observer = Observer(catalogue, means)
    return CrossResult(cross(flies[0], flies[1], observer, map_function), observer, tuple(problems))


def progeny_json(result: CrossResult) -> dict[str, Any]:
    """Return the progeny as the JSON contract writes them."""
    progeny = result.progeny
    return {
        "mother": fly_json(progeny.mother),
        "father": fly_json(progeny.father),
        "classes": [
            {
                "sex": c.sex,
                "signs": sorted(c.signs),
                "looks": result.looks(c),
                "share": float(c.share),
                "exact": str(c.exact) if c.exact is not None else None,
                "members": [{"fly": fly_json(m.fly), "share": float(m.share)} for m in c.members],
                "look_alikes": c.look_alikes,
            }
            for c in progeny.classes
        ],
        "dead": [
            {"fly": fly_json(d.fly), "share_of_zygotes": float(d.share_of_zygotes), "cause": d.cause}
            for d in progeny.dead
        ],
        "alive": float(progeny.alive),
        "remarks": progeny.remarks(),
    }


# -- the shelf ---------------------------------------------------------------------------------------------------


def read_stocks(path: Path, *, settings: ListSettings | None = None, lab_file: Path | None = None) -> Shelf:
    """Return the stock list with everything that was and was not understood.

    Raises:
        StockListError: the file cannot be read at all.
    """
    from crossplan.stocks.shelf import read_stocks as read

    return read(path, settings=settings, catalogue=load_catalogue(lab_file))


def list_settings(
    file: Path | None, *, sheet: str | None = None, all_sheets: bool = False, columns: Iterable[str] = ()
) -> ListSettings:
    """Return how to read a stock list: what the settings file says, and what is said beside it (`genotype=Geno`).

    Raises:
        InputError: the file cannot be used, or what is said contradicts itself.
    """
    from crossplan.stocks.settings import ListSettings, column_of, read_settings

    from_file = read_settings(file) if file is not None else ListSettings()
    return from_file.changed(sheet, all_sheets, dict(map(column_of, columns)))


def reading_report(shelf: Shelf) -> ReadingReport:
    """Return how many rows of a stock list were understood, and what they leave open, each question once."""
    from crossplan.stocks.reading_report import reading_report as report

    return report(shelf)


def reading_report_json(report: ReadingReport) -> dict[str, Any]:
    """Return the report of a reading as one JSON document."""
    return {
        "stocks": len(report.shelf.stocks),
        "counts": dict(report.counts),
        "columns": dict(report.shelf.columns),
        "sheets": list(report.shelf.sheets),
        "questions": [{"symbol": q.symbol, "asks": q.asks, "rows": list(q.rows)} for q in report.questions],
        "problems": [
            {"severity": str(p.severity), "code": p.code, "row": p.line, "column": p.column, "message": p.message,
             "hint": p.hint}
            for p in report.shelf.problems
        ],
    }  # fmt: skip


def write_reading_report(report: ReadingReport, place: Path, *, all_rows: bool = False) -> Path:
    """Write the rows that need an eye as a table (XLSX by its ending, else CSV), to correct the list by.

    Raises:
        OutputError: the file cannot be written.
    """
    from crossplan.stocks.reading_report import report_table, report_workbook

    as_workbook = place.suffix.lower() == ".xlsx"
    content = report_workbook(report, all_rows) if as_workbook else report_table(report, all_rows).encode()
    return _write_file(place, content, protect=report.shelf.path)


def remember_settings(settings: ListSettings, place: Path) -> Path:
    """Write how a stock list is read, for the next time.

    Raises:
        OutputError: the file cannot be written.
    """
    from crossplan.stocks.settings import settings_text

    return _write_file(place, settings_text(settings).encode())


def _write_file(place: Path, content: bytes, protect: str = "") -> Path:
    from crossplan.bench.plan_folder import write_files

    if protect and place.resolve() == Path(protect).resolve():
        raise OutputError(f"{place} is the stock list itself, which is never written to", "give another name")
    try:
        write_files(place.parent, {place.name: content})
    except OSError as error:
        raise OutputError(
            f"cannot write {place}: {error.strerror or error}", "check the folder and your rights"
        ) from error
    return place


@dataclass(frozen=True)
class Audited:
    """The findings of an audit, and for a screen what cannot be made and what to obtain.

    `stale` says which accepted findings are no more, or have changed.
    """

    shelf: Shelf
    findings: tuple[Finding, ...]
    day: dt.date
    gaps: GapReport | None = None
    stale: tuple[Problem, ...] = ()

    @property
    def open(self) -> tuple[Finding, ...]:
        """The findings that nobody has accepted."""
        return tuple(f for f in self.findings if not f.accepted)

    @property
    def needs_a_person(self) -> bool:
        """Whether there is an open error or warning, or a target that cannot be made."""
        return self.needs_a_person_for("warning")

    def needs_a_person_for(self, severity: str) -> bool:
        """Return whether there is an open finding of at least that severity, or a target that cannot be made."""
        rank = ("error", "warning", "note", "never")
        grave = rank[: rank.index(severity) + 1] if severity != "never" else ()
        lacking = self.gaps is not None and self.gaps.needs_a_person and severity != "never"
        return lacking or any(f.severity in grave for f in self.open)


def audit_stocks(
    stocks: Path,
    screen: Path | None = None,
    *,
    today: dt.date,
    settings: ListSettings | None = None,
    lab_file: Path | None = None,
    accepted: Path | None = None,
    search: bool = True,
) -> Audited:
    """Return what is wrong with a stock list, and for a screen which targets it cannot make and why.

    Args:
        stocks: the stock list.
        screen: the screen file.
        today: the day as of which dates are judged.
        settings: how the list is read.
        lab_file: the lab's own catalogue entries.
        accepted: the file of accepted findings.
        search: whether schemes are searched for the screen, beyond what the parts alone tell.
    """
    from crossplan.stocks.accepted import mark_accepted, read_accepted
    from crossplan.stocks.audit import audit, collector_held

    catalogue = load_catalogue(lab_file)
    with collector_held():
        shelf = read_stocks(stocks, settings=settings, lab_file=lab_file)
    gaps, wanted = (None, {}) if screen is None else _gaps_for(screen, shelf, catalogue, None, search, None)
    with collector_held():
        findings = audit(shelf, today, catalogue, wanted)
    stale: tuple[Problem, ...] = ()
    if accepted is not None:
        findings, stale = mark_accepted(findings, read_accepted(accepted), shelf, str(accepted))
    return Audited(shelf, findings, today, gaps, stale)


def _gaps_for(
    screen: Path,
    shelf: Shelf,
    catalogue: Catalogue,
    offers: Shelf | None,
    search: bool,
    progress: Callable[[int, int], None] | None,
) -> tuple[GapReport, dict[str, tuple[str, ...]]]:
    from crossplan.plan.screen_file import read_screen
    from crossplan.schemes.gap_report import gap_report, wanted_elements

    request = read_screen(screen)
    report = gap_report(request.screen.screen.name, request.targets, shelf, request.screen, catalogue, offers, search,
                        progress)  # fmt: skip
    return report, wanted_elements(report.gaps, request.targets)


def audit_json(audited: Audited) -> dict[str, Any]:
    """Return an audit as the JSON contract writes it."""
    document: dict[str, Any] = {
        "stocks": len(audited.shelf.stocks),
        "findings": [
            {
                "code": f.code, "severity": str(f.severity), "stock": f.stock, "row": f.row,
                "message": f.message, "suggestion": f.suggestion, "why": f.why, "stocks": list(f.stocks),
                "accepted": f.accepted or None,
            }
            for f in audited.findings
        ],
        "gaps": [],
        "acquire": [],
    }  # fmt: skip
    if audited.gaps is not None:
        whole = gap_report_json(audited.gaps)
        document["gaps"] = [
            {
                "target": t["target"],
                "reason": t["reason"],
                "status": t["status"],
                "missing": sorted({thing for clause in audited.gaps.needs.get(t["target"], ()) for thing in clause}),
            }
            for t in whole["targets"]
            if t["status"] in ("lacking", "no scheme", "never")
        ]
        document["acquire"] = [{"what": a["what"], "unlocks": len(a["needed_by"])} for a in whole["acquire"]]
        document["obtain"] = whole["acquire"]
        document |= {k: whole[k] for k in ("least_sets", "most_targets", "base_stocks", "hangs_by", "helpers_lacking")}
    return document  # fmt: skip


def write_audit(audited: Audited, *, html: Path | None = None, table: Path | None = None) -> tuple[Path, ...]:
    """Write an audit as an HTML report and as a CSV table, whole or not at all.

    Raises:
        OutputError: a file cannot be written.
    """
    from crossplan.bench.audit_report import audit_html, findings_csv

    written = []
    path = audited.shelf.path
    if html is not None:
        text = audit_html(path, len(audited.shelf.stocks), audited.day.isoformat(), audited.findings, audited.gaps)
        written.append(_write_file(html, text.encode(), protect=path))
    if table is not None:
        written.append(_write_file(table, findings_csv(audited.findings).encode(), protect=path))
    return tuple(written)


def accept_finding(audited: Audited, file: Path, code: str, stock: str, reason: str) -> Path:
    """Add a finding to the file of accepted ones, with the reason; it holds until its row changes.

    Raises:
        InputError: the audit has no such finding, or there is no reason.
        OutputError: the file cannot be written.
    """
    from crossplan.stocks.accepted import accept, accepted_toml, read_accepted

    entries = accept(read_accepted(file), audited.findings, audited.shelf, code, stock, reason)
    return _write_file(file, accepted_toml(entries).encode(), protect=audited.shelf.path)


def find_gaps(
    stocks: Path,
    screen: Path,
    *,
    offers: Path | None = None,
    settings: ListSettings | None = None,
    lab_file: Path | None = None,
    search: bool = True,
    progress: Callable[[int, int], None] | None = None,
) -> GapReport:
    """Return what a shelf lacks for a screen, and the least sets of stocks to obtain.

    Args:
        stocks: the stock list.
        screen: the screen file, or a list of wishes in its form.
        offers: a list of stocks that can be had elsewhere.
        settings: how the stock list is read.
        lab_file: the lab's own catalogue entries.
        search: whether schemes are searched too.
        progress: hears how many of how many searches are done.
    """
    catalogue = load_catalogue(lab_file)
    shelf = read_stocks(stocks, settings=settings, lab_file=lab_file)
    offered = read_stocks(offers, lab_file=lab_file) if offers is not None else None
    return _gaps_for(screen, shelf, catalogue, offered, search, progress)[0]


def gap_report_json(report: GapReport) -> dict[str, Any]:
    """Return what a shelf lacks as one JSON document."""
    from crossplan.schemes.gap_report import gap_json

    return gap_json(report)


def write_gaps(report: GapReport, *, html: Path | None = None, table: Path | None = None) -> tuple[Path, ...]:
    """Write what a shelf lacks as an HTML report and as a CSV table.

    Raises:
        OutputError: a file cannot be written.
    """
    from crossplan.bench.audit_report import gap_sections, gaps_csv, page

    written = []
    if html is not None:
        under = f"{len(report.gaps.targets)} targets"
        written.append(
            _write_file(html, page(f"What the shelf lacks for {report.name}", under, gap_sections(report)).encode())
        )
    if table is not None:
        written.append(_write_file(table, gaps_csv(report).encode()))
    return tuple(written)


def compare_lists(old: Path, new: Path, *, lab_file: Path | None = None) -> tuple[Change, ...]:
    """Return what changed between two versions of a stock list, in terms of flies.

    Raises:
        StockListError: one of them cannot be read.
    """
    from crossplan.stocks.difference import compare

    return compare(read_stocks(old, lab_file=lab_file), read_stocks(new, lab_file=lab_file))


def write_changes(changes: Iterable[Change], place: Path) -> Path:
    """Write the differences of two stock lists as a CSV table.

    Raises:
        OutputError: the file cannot be written.
    """
    from crossplan.bench.audit_report import changes_csv

    return _write_file(place, changes_csv(changes).encode())


def propose_corrections(
    stocks: Path, *, settings: ListSettings | None = None, lab_file: Path | None = None, out: Path | None = None
) -> tuple[tuple[Correction, ...], tuple[Path, ...]]:
    """Return proposed corrections of a stock list; with `out`, write the corrected table and the list of changes.

    The changes stand beside the table as `NAME.changes.csv`. The lab's own file is never written.

    Raises:
        OutputError: `out` is the stock list itself, or cannot be written.
    """
    from crossplan.stocks.columns import guess_columns
    from crossplan.stocks.corrections import corrected_csv, corrections_csv, propose, propose_cells
    from crossplan.stocks.table import read_table

    catalogue = load_catalogue(lab_file)
    shelf = read_stocks(stocks, settings=settings, lab_file=lab_file)
    table = read_table(stocks, [*shelf.columns.values()], settings.sheet if settings is not None else None)
    columns = guess_columns(table.headings, shelf.columns, str(stocks))
    found = sorted((*propose(shelf, catalogue), *propose_cells(table, columns, shelf)), key=lambda c: (c.row, c.column))
    written: tuple[Path, ...] = ()
    if out is not None:
        changes = out.with_name(f"{out.stem}.changes.csv")
        if stocks.resolve() in (out.resolve(), changes.resolve()):
            raise OutputError(f"{out} is the stock list itself, which is never written to", "give another name")
        written = (
            _write_file(out, corrected_csv(table, found).encode()),
            _write_file(changes, corrections_csv(found).encode()),
        )
    return tuple(found), written


def transfer_rota(
    stocks: Path,
    *,
    start: dt.date,
    days: int,
    people: Iterable[str] = (),
    working_days: Iterable[str] = ("Mon", "Tue", "Wed", "Thu", "Fri"),
    holidays: Iterable[dt.date] = (),
    settings: ListSettings | None = None,
    lab_file: Path | None = None,
) -> tuple[Transfer, ...]:
    """Return which stocks go on new food on which day, in whose hands.

    Raises:
        InputError: there is no working day, or the period is empty.
    """
    from crossplan.plan.screen import DAYS
    from crossplan.stocks.rota import Week, make_rota

    chosen = tuple(working_days)
    unknown = [d for d in chosen if d not in DAYS]
    if unknown or not chosen or days < 1:
        raise InputError(f"'{unknown[0]}' is no day of the week" if unknown else "there is no working day to plan for",
                         f"days are {', '.join(DAYS)}; the period is at least one day")  # fmt: skip
    week = Week(tuple(DAYS.index(d) for d in chosen), frozenset(holidays), tuple(people))
    return make_rota(read_stocks(stocks, settings=settings, lab_file=lab_file), start, days, week)


def write_rota(
    transfers: Sequence[Transfer],
    folder: Path,
    *,
    name: str,
    day: dt.date,
    days: int,
    plan: Path | None = None,
    page: str = "A4",
) -> tuple[Path, ...]:
    """Write the rota as a bench list (PDF), a calendar file and a CSV table; with a plan, what it asks of stocks too.

    Raises:
        OutputError: the folder cannot be written.
    """
    from crossplan.bench.plan_folder import write_files
    from crossplan.bench.rota_sheet import rota_csv, rota_ics, rota_pdf, stock_tasks

    tasks = stock_tasks(load_plan(plan), day, days) if plan is not None else ()
    files = {
        "rota.pdf": rota_pdf(f"transfers, {name}", transfers, tasks, page),
        "rota.ics": rota_ics(name, transfers, day),
        "rota.csv": rota_csv(transfers).encode(),
    }
    try:
        folder.mkdir(parents=True, exist_ok=True)
        return write_files(folder, files)
    except OSError as error:
        raise OutputError(f"cannot write into {folder}: {error.strerror or error}", "choose another folder") from error


def write_yearly_checks(
    stocks: Path, place: Path, *, settings: ListSettings | None = None, lab_file: Path | None = None
) -> Path:
    """Write the yearly check list as a CSV table: what the flies of each stock must look like, and what to test.

    Raises:
        OutputError: the file cannot be written.
    """
    from crossplan.bench.audit_report import checks_csv
    from crossplan.stocks.checklist import yearly_checks

    shelf = read_stocks(stocks, settings=settings, lab_file=lab_file)
    return _write_file(place, checks_csv(yearly_checks(shelf, load_catalogue(lab_file))).encode(), protect=str(stocks))


# -- a screen ----------------------------------------------------------------------------------------------------


@dataclass(frozen=True)
class Planned:
    """A plan, and the shelf and problems that it was made from."""

    plan: Plan
    shelf: Shelf
    problems: tuple[Problem, ...]

    @property
    def rows_assumed(self) -> int:
        """Rows that were understood with a stated assumption."""
        return sum(s.reading.ok and s.reading.assumed for s in self.shelf.stocks)

    @property
    def needs_a_person(self) -> bool:
        """Whether a target cannot be made, a date cannot be met, or a row was not understood."""
        late = any("due" in c for t in self.plan.targets for c in t.cautions)
        impossible = any(t.status == "impossible" for t in self.plan.targets)
        return (
            late
            or impossible
            or self.shelf.rows_refused > 0
            or any(p.severity == Severity.ERROR for p in self.problems)
        )


def plan_screen(
    screen: Path,
    stocks: Path,
    *,
    today: dt.date,
    start: dt.date | None = None,
    settings: ListSettings | None = None,
    lab_file: Path | None = None,
    progress: Progress | None = None,
    with_calendar: bool = True,
) -> Planned:
    """Return the plan of a screen.

    Args:
        screen: the screen file (TOML).
        stocks: the stock list.
        today: the day on which work can begin when neither `start` nor the screen file says.
        start: first day of work.
        settings: how to read the stock list.
        lab_file: the lab's own catalogue entries.
        progress: called with what is being done, how much is done, and of how much.
        with_calendar: whether days are planned too (an audit does not need them).

    Raises:
        InputError: a file cannot be used at all.
        PlanCheckError: the independent replay refuted the plan (a bug).
    """
    from crossplan.plan.screen_file import read_screen
    from crossplan.schemes.batch import Asked
    from crossplan.schemes.controls import controls_for
    from crossplan.schemes.screen_plan import ScreenPlanner, sources_of

    tell = progress or (lambda what, done, total: None)
    request = read_screen(screen)
    tell("reading stocks", 0, 0)
    shelf = read_stocks(stocks, settings=settings, lab_file=lab_file)
    catalogue = load_catalogue(lab_file)
    planner = ScreenPlanner(sources_of(shelf), request.screen, catalogue)
    answers = list(planner.answer([Asked(t) for t in request.targets], lambda n, of: tell("finding schemes", n, of)))
    remarks: tuple[str, ...] = ()
    if request.screen.screen.controls:
        made = [a.asked.wanted for a in answers if a.status != "impossible"]
        controls = controls_for(made, planner.shelf, catalogue, request.screen.screen.empty)
        answers += planner.answer(controls.asked, lambda n, of: tell("finding schemes for controls", n, of))
        remarks = controls.remarks
        background = request.screen.screen.background
        if background is not None and shelf.by_name(background) is None:
            remarks += (
                f"the background '{background}' is no stock of {shelf.path}: controls were made with any wild type",
            )
    tell("planning days", 0, 0)
    plan = _assemble(request, shelf, planner, answers, remarks, start or request.screen.calendar.start or today,
                     with_calendar)  # fmt: skip
    return Planned(plan, shelf, (*shelf.problems, *request.problems))


def _assemble(
    request: ScreenRequest,
    shelf: Shelf,
    planner: ScreenPlanner,
    answers: Sequence[Answer],
    remarks: Sequence[str],
    start: dt.date,
    with_calendar: bool,
) -> Plan:
    from crossplan.plan.totals import plan_of
    from crossplan.schedule.from_plan import put_on_calendar
    from crossplan.schemes.record import write_records

    screen = request.screen
    targets, steps = write_records(answers, screen, planner, {s.name: s.location for s in shelf.stocks})
    tasks: list[TaskRecord] = []
    status = ""
    ages: dict[str, tuple[int, int]] = {}
    if with_calendar and steps:
        ages = {a.asked.wanted.name: a.asked.wanted.age_days for a in answers if not a.asked.wanted.stock}
        fed = frozenset(a.asked.wanted.name for a in answers if planner.needs(a.asked).retinal)
        tasks, schedule = put_on_calendar(steps, targets, ages, fed, screen, start)
        status = f"{schedule.status}, gap {100 * schedule.gap:.1f} %" if schedule.gap else schedule.status
    plan = plan_of(request, shelf, targets, steps, tasks, remarks, start, status, __version__)
    _check(plan, planner, shelf, ages)
    return plan


def _check(plan: Plan, planner: ScreenPlanner, shelf: Shelf, ages: Mapping[str, tuple[int, int]]) -> None:
    """Replay the plan by genetics alone, and check its days by the rules of the trade, before it is handed out."""
    from crossplan.errors import PlanCheckError
    from crossplan.plan.replay import replay
    from crossplan.schedule.check import check_schedule

    faults = replay(plan, planner.observer_of, shelf.elements())
    if plan.tasks:
        faults += check_schedule(plan, planner.screen, ages)
    if faults:
        raise PlanCheckError(
            f"crossplan's own check refuted the plan: {faults[0].message}",
            "this is a fault of crossplan, not of your files; please report it with both files",
        )


def plan_json(plan: Plan) -> dict[str, Any]:
    """Return the plan as the JSON contract writes it."""
    return plan.model_dump(mode="json", by_alias=True)


def load_plan(path: Path) -> Plan:
    """Return the plan of a `plan.json`, given by itself or by its folder.

    Raises:
        InputError: there is no such file, or it is no plan.
    """
    from pydantic import ValidationError

    from crossplan.plan.model import Plan as Plan

    place = path / "plan.json" if path.is_dir() else path
    try:
        return Plan.model_validate_json(place.read_bytes())
    except FileNotFoundError:
        raise InputError(
            f"there is no plan at {place}", "make one: crossplan plan SCREEN --stocks TABLE --out FOLDER"
        ) from None
    except OSError as error:
        raise InputError(f"cannot read {place}: {error.strerror}") from error
    except ValidationError as error:
        first = error.errors()[0]
        where = ".".join(str(part) for part in first["loc"]) or "the file"
        raise InputError(f"{place} is no crossplan plan: {where}: {first['msg']}", "plan again") from None


# -- what people hold --------------------------------------------------------------------------------------------


def write_plan(plan: Plan, folder: Path) -> tuple[Path, ...]:
    """Write plan, summary, report, labels, bench sheets and calendar into a folder; return the files."""
    from crossplan.bench.plan_folder import write_plan_folder

    return write_plan_folder(plan, folder)


def label_layouts() -> list[tuple[str, str]]:
    """Return the label layouts by name, each with its size in words."""
    from crossplan.bench.sheet_layout import LAYOUTS

    return [
        (name, f"{x.columns} x {x.rows} labels of {x.label_width:g} x {x.label_height:g} mm")
        for name, x in sorted(LAYOUTS.items())
    ]


def write_labels(
    plan: Path,
    out: Path,
    *,
    layout: str | None = None,
    steps: Sequence[str] | None = None,
    dates: str | None = None,
    person: str | None = None,
    start_at: int = 1,
    copies: int = 1,
    vials: Sequence[int] | None = None,
    outlines: bool = False,
) -> tuple[int, tuple[str, ...]]:
    """Write the vial labels of a plan as a PDF; return its size in bytes, and the steps whose labels are shortened."""
    from crossplan.bench.labels import labels_pdf, shortened_labels
    from crossplan.bench.sheet_layout import DEFAULT_LAYOUT, layout_of

    made, sheet, days = load_plan(plan), layout_of(layout or DEFAULT_LAYOUT), parse_days(dates)
    content = labels_pdf(made, sheet, steps, days, person, start_at, copies, outlines, vials)
    return _write(out, content), shortened_labels(made, sheet, steps, days, person)


def write_stock_labels(
    shelf: Shelf,
    out: Path,
    *,
    layout: str | None = None,
    names: Sequence[str] | None = None,
    start_at: int = 1,
    copies: int = 1,
    outlines: bool = False,
) -> tuple[int, tuple[str, ...]]:
    """Write stock labels as a PDF; return its size in bytes, and the stocks whose labels are shortened."""
    from crossplan.bench.labels import shortened_stock_labels, stock_labels_pdf
    from crossplan.bench.sheet_layout import DEFAULT_LAYOUT, layout_of
    from crossplan.bench.stock_label import StockLabel

    stocks = [StockLabel(s.name, s.genotype, s.location, s.temperature_C) for s in shelf.stocks]
    sheet = layout_of(layout or DEFAULT_LAYOUT)
    content = stock_labels_pdf(stocks, sheet, names, start_at, copies, outlines)
    return _write(out, content), shortened_stock_labels(stocks, sheet, names)


def write_calendar(
    plan: Path,
    out: Path,
    *,
    dates: str | None = None,
    person: str | None = None,
    alarm_minutes: Sequence[int] | None = None,
    instead_of: Path | None = None,
) -> int:
    """Write the calendar of a plan; return its size in bytes. `instead_of` is the calendar file or plan given out before."""
    from crossplan.bench.calendar_file import calendar_ics

    previous: Plan | bytes | None = None
    if instead_of is not None:
        previous = _read(instead_of) if instead_of.suffix == ".ics" else load_plan(instead_of)
    content = calendar_ics(load_plan(plan), parse_days(dates), person, alarm_minutes, previous)
    return _write(out, content)


def write_calendars(
    plan: Path,
    folder: Path,
    *,
    dates: str | None = None,
    alarm_minutes: Sequence[int] | None = None,
    instead_of: Path | None = None,
) -> tuple[Path, ...]:
    """Write a calendar for each person into a folder, `calendar-NAME.ics`; return the files.

    `instead_of` is the plan given out before, or the folder that holds its calendars.

    Raises:
        InputError: the plan names nobody, or `instead_of` is neither.
        OutputError: the folder cannot be written.
    """
    from crossplan.bench.calendar_file import calendars_by_person
    from crossplan.bench.plan_folder import write_files

    if instead_of is not None and instead_of.suffix == ".ics":
        raise InputError(
            f"{instead_of} is one calendar file", "Give the earlier plan, or the folder with its calendars, instead."
        )
    found = sorted(instead_of.glob("calendar-*.ics")) if instead_of is not None and instead_of.is_dir() else []
    made = load_plan(plan)
    if found:
        before: Plan | dict[str, bytes] | None = {p.stem.removeprefix("calendar-"): _read(p) for p in found}
    else:
        before = load_plan(instead_of) if instead_of is not None else None
    calendars = calendars_by_person(made, parse_days(dates), alarm_minutes, before)
    files = {f"calendar-{who.replace('/', '-')}.ics": content for who, content in calendars.items()}
    try:
        folder.mkdir(parents=True, exist_ok=True)
        return write_files(folder, files)
    except OSError as error:
        raise OutputError(f"cannot write into {folder}: {error.strerror or error}", "choose another folder") from error


def write_bench_sheets(
    plan: Path, out: Path, *, dates: str | None = None, person: str | None = None, paper: str = "A4"
) -> int:
    """Write the bench sheets of a plan as a PDF; return its size in bytes."""
    from crossplan.bench.bench_sheet import bench_sheet_pdf

    return _write(out, bench_sheet_pdf(load_plan(plan), parse_days(dates), person, paper))


def write_methods(plan: Plan, out: Path, shelf: Shelf | None = None) -> tuple[int, list[str]]:
    """Write the genotypes of a plan as a table, CSV, Markdown or LaTeX by the ending of the name.

    With the shelf, genotypes are in the standard notation of the list, and stocks have their sources. Returns how many
    genotypes, and the insertions that are written short because the list has no standard notation of them.
    """
    from crossplan.bench.methods_table import Notation, methods_rows, methods_table, written_short

    notation = Notation()
    if shelf is not None:
        elements = shelf.elements().values()
        notation = Notation(
            {e.symbol: e.standard or e.symbol for e in elements},
            frozenset(e.symbol for e in elements if e.kind is Kind.BALANCER),
            {s.name: s.source for s in shelf.stocks},
        )
    _write(out, methods_table(plan, out.suffix.lower().removeprefix("."), notation).encode())
    return len(methods_rows(plan, notation)), written_short(plan, notation)


def write_drawings(
    plan: Plan, targets: Sequence[str], folder: Path, form: str = "svg", dpi: int = 300
) -> tuple[Path, ...]:
    """Write the schemes of targets into a folder as `scheme-NAME.svg` or `.png`; return the files.

    Raises:
        InputError: a target has no scheme, or there is no such form.
        OutputError: the folder cannot be written.
    """
    from crossplan.bench.figure import png, scheme_figure, svg
    from crossplan.bench.plan_folder import write_files

    if form not in ("svg", "png"):
        raise InputError(f"there is no drawing as {form!r}", "Use svg or png.")
    files: dict[str, bytes] = {}
    for target in targets:
        figure = scheme_figure(plan, target)
        name = "".join(c if c.isalnum() or c in "-_." else "-" for c in target).strip("-.") or "target"
        while f"scheme-{name}.{form}" in files:
            name += "-2"
        files[f"scheme-{name}.{form}"] = svg(figure).encode() if form == "svg" else png(figure, dpi)
    try:
        folder.mkdir(parents=True, exist_ok=True)
        return write_files(folder, files)
    except OSError as error:
        raise OutputError(f"cannot write into {folder}: {error.strerror or error}", "choose another folder") from error


def show(plan: Plan, what: str, width: int = 80, person: str | None = None) -> list[TextLine]:
    """Return what a plan says of a cross, a target or a day, in lines for a terminal.

    Raises:
        InputError: the plan holds nothing of this name, or has no work for the person.
    """
    from crossplan.bench.terminal import show_lines

    return show_lines(plan, what, width, person)


def show_json(plan: Plan, what: str, person: str | None = None) -> dict[str, Any]:
    """Return the same as one JSON document: `{"step": ...}`, `{"target": ..., "steps": [...]}` or `{"day": ..., "tasks": [...]}`."""
    from crossplan.bench.choice import chosen_tasks
    from crossplan.bench.scheme_drawing import crosses_of
    from crossplan.bench.terminal import shown
    from crossplan.plan.model import StepRecord, TargetRecord

    found = shown(plan, what)
    if isinstance(found, StepRecord):
        return {"step": found.model_dump(by_alias=True)}
    if isinstance(found, TargetRecord):
        steps = [step.model_dump(by_alias=True) for step in crosses_of(plan, found)]
        return {"target": found.model_dump(by_alias=True), "steps": steps}
    return {"day": found, "tasks": [task.model_dump() for task in chosen_tasks(plan, [found], person)]}


def _read(path: Path) -> bytes:
    try:
        return path.read_bytes()
    except OSError as error:
        raise InputError(f"cannot read {path}: {error.strerror or error}", "check the name of the file") from error


def _write(out: Path, content: bytes) -> int:
    from crossplan.bench.plan_folder import write_files
    from crossplan.errors import OutputError

    try:
        out.parent.mkdir(parents=True, exist_ok=True)
        write_files(out.parent, {out.name: content})
    except OSError as error:
        raise OutputError(
            f"cannot write {out}: {error.strerror or error}", "choose another place with --out"
        ) from error
    return len(content)


def parse_day(text: str) -> dt.date:
    """Return the day of an ISO date.

    Raises:
        InputError: it is none.
    """
    try:
        return dt.date.fromisoformat(text)
    except ValueError:
        raise InputError(f"'{text}' is not a day", "write it as 2027-01-11 (year-month-day)") from None


def parse_days(text: str | None) -> list[dt.date] | None:
    """Return the days of `DAY` or `FROM..TO`, both included; None for None.

    Raises:
        InputError: a day is none, or the range is empty or longer than ten years.
    """
    if text is None:
        return None
    first_text, _, last_text = text.partition("..")
    first = parse_day(first_text)
    last = parse_day(last_text) if last_text else first
    days = (last - first).days + 1
    if not 1 <= days <= 3660:
        raise InputError(f"'{text}' holds no day, or more than ten years of them", "write FROM..TO, FROM first")
    return [first + dt.timedelta(days=i) for i in range(days)]


# -- what really happened ----------------------------------------------------------------------------------------


def log_entry(
    plan: Path, step: str, event: str, *, day: dt.date, count: int | None = None, person: str = "", note: str = ""
) -> Path:
    """Add what happened to a culture to the journal beside its plan; return the journal.

    Raises:
        InputError: the plan has no such step, there is no such event, or a number is missing.
        OutputError: the journal has faults, or cannot be written.
    """
    from crossplan.logbook.day import new_entry
    from crossplan.logbook.journal import add_entry

    journal = _journal_of(plan)
    add_entry(journal, new_entry(load_plan(plan), step, event, day, count=count, person=person, note=note))
    return journal


def day_report(plan: Path, day: dt.date, person: str | None = None) -> DayReport:
    """Return the work of a day, what is overdue, which cultures do not run as planned, and which tasks should move.

    Raises:
        InputError: there is no such plan, the journal cannot be opened, or the plan has no work for `person`.
    """
    from crossplan.logbook.day import day_report as report
    from crossplan.logbook.journal import read_journal

    journal = _journal_of(plan)
    entries, problems = read_journal(journal)
    return report(load_plan(plan), entries, day, person, problems=problems, journal=str(journal))


def day_json(report: DayReport) -> dict[str, Any]:
    """Return the report of a day as the JSON contract writes it."""
    from crossplan.logbook.day import day_json as document

    return document(report)


def _journal_of(plan: Path) -> Path:
    return (plan if plan.is_dir() else plan.parent) / "journal.csv"


# -- clock, counts, demo -----------------------------------------------------------------------------------------

REARING_WORDS = {
    "egg_to_adult_hours": "egg to adult",
    "first_flies_hours": "first flies",
    "virgin_hours": "a newly emerged female is surely a virgin for",
    "clear_parents_by_hours": "clear the parents by",
    "stop_collecting_hours": "stop collecting by (the next generation follows)",
}


def rearing_report(temperature: str, hours_at_25: float | None = None) -> dict[str, Any]:
    """Return stages, first flies and handling windows along a temperature course, as the JSON contract writes them.

    Raises:
        RearingError: the course cannot be read, or leaves the range of the clock.
    """
    from crossplan.rearing.course import Course
    from crossplan.rearing.development import Clock
    from crossplan.rearing.report import rearing_report as report

    return report(Course.parse(temperature), Clock() if hours_at_25 is None else Clock(hours_at_25))


def count_report(share: str, need: int, probability: float, per_vial: float) -> dict[str, Any]:
    """Return flies to look through and vials to set up, as the JSON contract writes them.

    Raises:
        RearingError: the share, the number or the probability cannot be.
    """
    from crossplan.rearing.counting import parse_share
    from crossplan.rearing.report import count_report as report
    from crossplan.rearing.yields import Yield

    return report(parse_share(share), need, probability, Yield(mean=per_vial))


def write_demo(folder: Path) -> tuple[Path, ...]:
    """Write the demo stock list and screen into a folder; files of the same names that differ are not touched.

    Raises:
        OutputError: the folder cannot be written, or holds other files of these names.
    """
    from importlib import resources

    from crossplan.bench.plan_folder import write_files
    from crossplan.errors import OutputError

    packed = resources.files("crossplan") / "_demo"
    source = packed if packed.is_dir() else Path(__file__).resolve().parent.parent / "demo_stocks"
    files = {f.name: f.read_bytes() for f in sorted(source.iterdir(), key=lambda f: f.name) if f.is_file()}
    try:
        changed = [n for n, content in files.items() if (folder / n).exists() and (folder / n).read_bytes() != content]
        if changed:
            raise OutputError(
                f"{folder} already holds {', '.join(changed)}, with other contents", "choose an empty folder"
            )
        folder.mkdir(parents=True, exist_ok=True)
        return write_files(folder, files)
    except OSError as error:
        raise OutputError(f"cannot write into {folder}: {error.strerror or error}", "choose another folder") from error
