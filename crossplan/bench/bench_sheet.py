"""Bench sheets: the pages for each working day in walking order, then the schemes they belong to.

Each day begins a page: empty, clear, collect, set up, assay, discard, with boxes to tick and cells for counts.
What is done to one stock for several crosses stands in one line. Schemes follow each other on a page as they fit.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from itertools import groupby

from crossplan.bench.choice import chosen_tasks, first_day, natural
from crossplan.bench.fitting import CUT_MARK, SHORT_CUT_MARK
from crossplan.bench.paper import Band, Blanks, Gap, Job, Paper, Piece, Row, Side, Stack, Ticks, Words
from crossplan.bench.pdf_page import PAPERS, Pages
from crossplan.bench.safety import reminders_for
from crossplan.bench.scheme_drawing import CrossPiece, Form, forms_of, share_words, shown_chromosomes
from crossplan.bench.walk import EMPTY, HEADINGS, Stop, emptied_at, shared_note, vials_for, walk_of
from crossplan.bench.words import (
    FEMALE_SIGN,
    MALE_SIGN,
    Day,
    count,
    day_range,
    fly_text,
    keep_rule,
    listed,
    long_day,
    parents_text,
    source_text,
    warm,
)
from crossplan.errors import InputError
from crossplan.plan.model import ParentRecord, Plan, StepRecord, TaskRecord


def bench_sheet_pdf(
    plan: Plan, dates: Iterable[Day] | None = None, person: str | None = None, page: str = "A4"
) -> bytes:
    """Return a PDF file of bench sheets, with a page or more for each day that has tasks, and the scheme
    pages.

    Args:
        plan: the plan; nothing in it is decided or changed.
        dates: only these days; None for all.
        person: only the tasks of this person; None for everybody, with names beside the tasks.
        page: `A4` or `Letter`.

    Raises InputError when day, person or page is unknown, or no task is left.
    """
    if page not in PAPERS:
        raise InputError(f"there is no page size {page!r}", f"Use {', '.join(PAPERS)}.")
    tasks = chosen_tasks(plan, dates, person)
    if not tasks:
        raise InputError("there is no bench sheet to print", "The plan has no task on these days for this person.")
    title = f"Bench sheets: {plan.screen.name}"
    foot = " · ".join(part for part in (plan.screen.name, plan.screen.lab, person or "") if part)
    with Pages(title, *PAPERS[page], first_day(plan)) as pages:
        paper = Paper(pages, foot)
        for day, group in groupby(tasks, key=lambda t: t.date):
            _day_page(paper, plan, day, list(group), with_names=person is None)
        for number, form in enumerate(forms_of(plan, [t.step for t in tasks])):
            _scheme(paper, form, first=number == 0)
        _closing_page(paper, plan)
        paper.end_page()
        return pages.finish()


def _day_page(paper: Paper, plan: Plan, day: str, tasks: list[TaskRecord], with_names: bool) -> None:
    def header(again: bool) -> Sequence[Piece]:
        title = Words(long_day(day) + (" (continued)" if again else ""), size=18, bold=True)
        if again:
            return [title, Gap(2)]
        return [title, Words(f"{plan.screen.name}: {_work(tasks, with_names)}"), Gap(2)]

    paper.begin(header)
    seen: set[str] = set()
    for (time, kind), group in groupby(walk_of(plan, tasks), key=lambda stop: (stop.time, stop.kind)):
        section = list(group)
        said = _said_once(section)
        lines: list[Piece] = [Words(said)] if said else []
        jobs: list[Piece] = []
        for stop in section:
            jobs.append(_job(plan, stop, "" if said else stop.note, with_names, stop.steps[0] in seen))
            seen |= set(stop.steps) if kind == "collect" else set()
        paper.add(Band(f"{time}  {HEADINGS[kind]}"), *lines, jobs[0])
        for job in jobs[1:]:
            paper.add(job)


def _said_once(stops: Sequence[Stop]) -> str:
    """Return what holds for a whole section: the note of all its stops, or when the vials were emptied."""
    hours = {emptied_at(stop.tasks[0]) for stop in stops}
    if stops[0].kind == "virgins" and len(hours) == 1 and "" not in hours:
        return f"Vials emptied at {hours.pop()}; the numbers are for all days of collecting together."
    said = shared_note(stops)
    return "" if HEADINGS[stops[0].kind].endswith(f": {said}") else said


def _work(tasks: Sequence[TaskRecord], with_names: bool) -> str:
    """Return how much work it is: `26 tasks, about 387 min (Maren 200, Tovi 187)`."""
    minutes = sum(t.minutes for t in tasks)
    people = sorted({t.person for t in tasks if t.person}) if with_names else []
    each = ", ".join(f"{who} {sum(t.minutes for t in tasks if t.person == who)}" for who in people)
    shares = f" ({each})" if len(people) > 1 and minutes else ""
    return count(len(tasks), "task") + (f", about {minutes} min{shares}" if minutes else "")


def _job(plan: Plan, stop: Stop, note: str, with_names: bool, again: bool) -> Job:
    """Return one stop as on the sheet; `again` when the cross was collected from earlier that day."""
    who = ", ".join(stop.people) if with_names else ""
    step = next((s for s in plan.steps if s.id == stop.steps[0]), None)
    if step is None or stop.stock or stop.kind == EMPTY:
        return _stock_job(plan, stop, note, who)
    control = f"{step.id}{'  CONTROL' if step.is_control else ''}"
    task = stop.tasks[0]
    said = [Words(note)] if note and not _repeats(note, step) else []
    if task.kind == "collect":
        return Job(control, (*said, *_collect(step, again), _count_cells(step)), _crossed(step), who)
    if task.kind == "set up":
        return Job(control, (*_set_up(step), *said), f"{count(step.vials, 'vial')} at {warm(step.temperature_C)}", who)
    if task.kind == "assay":
        return Job(f"{task.target or step.id}{'  CONTROL' if step.is_control else ''}",
                   (*said, *_assay(plan, task, step)), "", who)  # fmt: skip
    target = f" · for {task.target}" if task.target else ""
    return Job(control, tuple(said), _crossed(step) + target, who, _vials(step, task.kind))


def _repeats(note: str, step: StepRecord) -> bool:
    """Whether a note says only what the sheet says already: how many vials are set up and how warm, what to do."""
    own = f"set up {step.vials} vials at {step.temperature_C:g} C"
    return note == own or any(heading.endswith(f": {note}") for heading in HEADINGS.values())


def _crossed(step: StepRecord) -> str:
    shared = f"  in the vials of {step.same_vials_as}" if step.same_vials_as else ""
    return f"{parents_text(step.mother, step.father)}{shared}"


def _stock_job(plan: Plan, stop: Stop, note: str, who: str) -> Job:
    """Return a stop at a stock, or an emptying: vials in all, and for which crosses."""
    vials = vials_for(plan, stop)
    parent = next((s.mother for s in plan.steps if stop.stock and s.mother.stock == stop.stock), None)
    if parent is None and not vials:
        return Job(stop.place, (Words(note),) if note else (), "", who)
    place = f"{parent.location}" if parent and parent.location else ""
    if stop.kind == "virgins" and parent:
        pick = f"; take {parent.pick}" if parent.pick else ""
        about = " · ".join(part for part in (place, f"♀ {fly_text(parent.fly)}{pick}") if part)
        return Job(stop.place, tuple(Words(n) for n in [note] if n and not emptied_at(stop.tasks[0])), about, who,
                   _virgins_wanted(plan, stop))  # fmt: skip
    per = ", ".join(f"{step} ({n})" for step, n in vials.items())
    total = count(sum(vials.values()), "vial")
    if stop.kind == EMPTY:
        what = f"{total}; virgins at {stop.then}" + (f" for {', '.join(vials)}" if stop.stock else "")
        return Job(stop.place, (), " · ".join(p for p in (place, what) if p), who, Blanks(("emptied at",)))
    what = f"{total} of fresh food for virgins of {per}" if stop.kind == "expand" else f"{total} for {per}"
    return Job(stop.place, (), " · ".join(p for p in (place, what) if p), who)


def _virgins_wanted(plan: Plan, stop: Stop) -> Blanks:
    known = {step.id: step for step in plan.steps}
    wanted = {s: known[s].mothers_per_vial * known[s].vials for s in stop.steps if s in known}
    total = f"{sum(wanted.values())} ♀:" if len(wanted) > 1 else ""
    return Blanks(tuple(f"{step} {n} ♀" if not total else f"{step} {n}" for step, n in wanted.items()), total)


def _numbers(step: StepRecord) -> tuple[str, ...]:
    return tuple(str(n) for n in range(1, max(1, step.vials) + 1))


def _vials(step: StepRecord, kind: str) -> Row | None:
    """Return the boxes to tick of a culture that is handled vial by vial; None for other tasks."""
    ticks = Ticks(_numbers(step), "vials") if kind in ("clear", "discard", "shift") else None
    if ticks and kind == "clear" and step.keep.virgin:
        return Side(ticks, Blanks(("cleared at",)))
    return ticks


def _collect(step: StepRecord, again: bool) -> list[Piece]:
    keep = step.keep
    rule = keep_rule(keep)
    pieces: list[Piece] = [Words(rule, "KEEP", 10, True)]
    if not all(sign in rule for sign in keep.signs):
        pieces.append(Words(listed(keep.signs), "they show"))
    if keep.avoid_signs:
        pieces.append(Words(listed(keep.avoid_signs, "or"), "LEAVE"))
    pieces += [Words(other, "BEWARE") for other in keep.mistaken_for]
    if again:
        return pieces
    pieces.append(Words(_how_many(step)))
    goes_to = f"   for {', '.join(step.used_by or step.serves)}" if step.used_by or step.serves else ""
    pieces.append(Words(f"{fly_text(keep.fly)}{goes_to}", "these are", 8))
    return pieces + [Words(caution, "CAUTION", 8) for caution in step.cautions]


def _count_cells(step: StepRecord) -> Side:
    cells = ("kept", "looked through", "at (hour)") if step.keep.virgin else ("kept", "looked through")
    return Side(Ticks(_numbers(step), "vials"), Blanks(cells))


def _how_many(step: StepRecord) -> str:
    parts = []
    if step.flies_needed:
        parts.append(f"need {step.flies_needed}")
    if step.flies_expected:
        parts.append(f"expect {step.flies_expected:.0f} in all from {count(step.vials, 'vial')}")
    parts.append(share_words(step.keep))
    if step.flies_to_score:
        parts.append(f"look through about {count(step.flies_to_score, 'fly', 'flies')}")
    if step.dates:
        parts.append(f"collected {day_range(step.dates.collect_from, step.dates.collect_to)}")
    return " · ".join(parts)


def _set_up(step: StepRecord) -> list[Piece]:
    pieces: list[Piece] = [
        _parent(step.mother, FEMALE_SIGN, step.mothers_per_vial, step.vials),
        _parent(step.father, MALE_SIGN, step.fathers_per_vial, step.vials),
    ]
    pieces += [Words(caution, "CAUTION", 8) for caution in step.cautions]
    return [*pieces, Ticks(_numbers(step), "label and fill")]


def _parent(parent: ParentRecord, sign: str, per_vial: int, vials: int) -> Words:
    many = f"{per_vial} a vial ({per_vial * vials} in all) " if per_vial else ""
    place = f", {parent.location}" if parent.location else ""
    pick = f"; take {parent.pick}" if parent.pick else ""
    return Words(f"{many}from {source_text(parent)}{place}: {fly_text(parent.fly)}{pick}", sign)


def _assay(plan: Plan, task: TaskRecord, step: StepRecord) -> list[Piece]:
    target = next((t for t in plan.targets if t.target == task.target), None)
    pieces: list[Piece] = [Words(fly_text(step.keep.fly), size=8)]
    if target:
        many = count(target.flies, target.sex)
        control = f" · control of {target.control_of} ({target.control_kind})" if target.control_of else ""
        pieces.append(Words(f"{many} from {step.id}{control}"))
        pieces += [Words(listed(target.needs), "NEEDS")] if target.needs else []
        pieces += [Words(caution, "CAUTION", 8) for caution in target.cautions]
    return [*pieces, Blanks(("taken", "tested", "left out"))]


def _scheme(paper: Paper, form: Form, first: bool) -> None:
    """Put one scheme on the page that is begun, if it fits there whole; the first one begins a page."""
    example = form.example

    def header(again: bool) -> Sequence[Piece]:
        title = Words(f"Scheme: {example.target}{' (continued)' if again else ''}", size=15, bold=True)
        return [title, Gap(2)] if again else [title, Words(_proof(form)), *_others(form), Gap(2)]

    flies = [fly for s in form.steps for fly in (s.mother.fly, s.father.fly, s.keep.fly)]
    chromosomes = tuple(shown_chromosomes(flies))
    pieces: list[Piece] = []
    for generation, group in groupby(form.steps, key=lambda s: s.generation):
        crosses = [CrossPiece(step, chromosomes) for step in group]
        pieces += [Stack((Band(f"Generation {generation}"), crosses[0])), *crosses[1:]]
    if first:
        paper.begin(header)
        for piece in pieces:
            paper.add(piece)
    else:
        paper.go_on(header, pieces)


def _proof(form: Form) -> str:
    target = form.example
    many = count(target.generations or len(form.steps), "generation")
    proof = ", proved to be the fewest" if target.proved_minimal else ""
    return f"{many}{proof}, {count(len(form.steps), 'cross', 'crosses')}"


def _others(form: Form) -> list[Piece]:
    """Say which targets have this form, with their steps, when there is more than the one drawn."""
    if len(form.targets) == 1:
        return []
    return [
        Words("The same scheme serves:"),
        *(Words(f"{t.target}: {', '.join(sorted(t.scheme, key=natural))}", "–", 8) for t in form.targets),
    ]


def _closing_page(paper: Paper, plan: Plan) -> None:
    paper.begin(lambda again: [Words("Notes for these sheets", size=15, bold=True), Gap(2)])
    paper.add(
        Words(
            f"A label that ends with “{CUT_MARK}” or “{SHORT_CUT_MARK}” had no room for the rest; the whole "
            f"stands on "
            "the day sheet and the scheme. CONTROL marks a control cross."
        )
    )
    for title, texts in (("Cautions", plan.cautions), ("Safety", [*plan.safety, *reminders_for(plan)])):
        if texts:
            paper.add(Gap(2), Words(title, size=11, bold=True))
        for text in texts:
            paper.add(Words(text, "–"))
