"""Bench sheets: the pages for each working day in walking order, then the schemes they belong to.

Each day begins a page: clear, collect, set up, assay, discard, with boxes to tick and cells for counts.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from itertools import groupby

from crossplan.bench.choice import chosen_tasks, first_day, natural
from crossplan.bench.fitting import CUT_MARK, SHORT_CUT_MARK
from crossplan.bench.paper import Band, Counts, Gap, Job, Paper, Piece, Ticks, Words
from crossplan.bench.pdf_page import PAPERS, Pages
from crossplan.bench.safety import reminders_for
from crossplan.bench.scheme_drawing import CrossPiece, Form, forms_of, share_words, shown_chromosomes
from crossplan.bench.words import (
    FEMALE_SIGN,
    MALE_SIGN,
    WALKING_ORDER,
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

HEADINGS = {
    "clear": "CLEAR: take all adult flies out",
    "virgins": "VIRGINS: females from stocks",
    "collect": "COLLECT: sort and keep",
    "shift": "SHIFT: move to another temperature",
    "food": "FOOD: special food",
    "expand": "EXPAND: more of a stock",
    "set up": "SET UP: new crosses",
    "assay": "ASSAY: flies for the rig",
    "discard": "DISCARD: kill and throw away",
}


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
        for form in forms_of(plan, [t.step for t in tasks]):
            _scheme_page(paper, form)
        _closing_page(paper, plan)
        paper.end_page()
        return pages.finish()


def _day_page(paper: Paper, plan: Plan, day: str, tasks: list[TaskRecord], with_names: bool) -> None:
    minutes = sum(t.minutes for t in tasks)
    about = f", about {minutes} min" if minutes else ""

    def header(again: bool) -> Sequence[Piece]:
        title = Words(long_day(day) + (" (continued)" if again else ""), size=18, bold=True)
        if again:
            return [title, Gap(2)]
        return [title, Words(f"{plan.screen.name}: {count(len(tasks), 'task')}{about}"), Gap(2)]

    paper.begin(header)
    steps = {step.id: step for step in plan.steps}
    collected: set[str] = set()
    for _, group in groupby(tasks, key=lambda t: (t.time, WALKING_ORDER.index(t.kind))):
        section = list(group)
        jobs = [_job(plan, task, steps.get(task.step), with_names, task.step in collected) for task in section]
        collected |= {task.step for task in section if task.kind == "collect"}
        paper.add(Band(f"{section[0].time}  {HEADINGS[section[0].kind]}"), jobs[0])
        for job in jobs[1:]:
            paper.add(job)


def _job(plan: Plan, task: TaskRecord, step: StepRecord | None, with_names: bool, again: bool) -> Job:
    """Return one task as on the sheet; `again` when the step was collected from earlier that day."""
    name = f"  ·  {task.person}" if with_names and task.person else ""
    heading = f"{task.step}{'  CONTROL' if step and step.is_control else ''}{name}"
    note = [Words(task.note)] if task.note else []
    if step is None:
        return Job(heading, tuple(note))
    if task.kind == "collect":
        return Job(heading, (*_collect(step, again), *note, Gap(0.8), _count_cells(step)))
    if task.kind == "set up":
        return Job(heading, (*_set_up(step), *note))
    if task.kind == "virgins":
        return Job(heading, (_parent(step.mother, "♀", step.mothers_per_vial, step.vials), *note))
    if task.kind == "assay":
        return Job(heading, (*_assay(plan, task, step), *note))
    target = [Words(task.target, "for")] if task.target else []
    return Job(heading, (*_vials(step, task.kind), *target, *note))


def _numbers(step: StepRecord) -> tuple[str, ...]:
    return tuple(str(n) for n in range(1, max(1, step.vials) + 1))


def _vials(step: StepRecord, kind: str) -> list[Piece]:
    pieces: list[Piece] = [Words(parents_text(step.mother, step.father))]
    if kind in ("clear", "discard", "shift"):
        pieces.append(Ticks(_numbers(step), "vials"))
    if kind == "clear":
        pieces.append(
            Words("cleared at ____ : ____   (virgins are counted from this hour)" if step.keep.virgin else "")
        )
    return [p for p in pieces if not isinstance(p, Words) or p.text]


def _collect(step: StepRecord, again: bool) -> list[Piece]:
    keep = step.keep
    rule = keep_rule(keep)
    pieces: list[Piece] = [Words(rule, "KEEP", 10, True)]
    if not all(sign in rule for sign in keep.signs):
        pieces.append(Words(listed(keep.signs), "signs"))
    if keep.avoid_signs:
        pieces.append(Words(listed(keep.avoid_signs, "or"), "LEAVE"))
    pieces += [Words(other, "BEWARE") for other in keep.mistaken_for]
    if again:
        return pieces
    pieces.append(Words(_how_many(step)))
    if step.used_by or step.serves:
        pieces.append(Words(", ".join(step.used_by or step.serves), "for"))
    pieces.append(Words(fly_text(keep.fly), "these are", 8))
    return pieces + [Words(caution, "CAUTION") for caution in step.cautions]


def _count_cells(step: StepRecord) -> Counts:
    return Counts(("kept", "looked through"), (*_numbers(step), "sum"))


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
        Words(f"{count(step.vials, 'vial')} at {warm(step.temperature_C)}", size=10, bold=True),
        _parent(step.mother, FEMALE_SIGN, step.mothers_per_vial, step.vials),
        _parent(step.father, MALE_SIGN, step.fathers_per_vial, step.vials),
    ]
    pieces += [Words(caution, "CAUTION") for caution in step.cautions]
    return [*pieces, Ticks(_numbers(step), "labelled and filled")]


def _parent(parent: ParentRecord, sign: str, per_vial: int, vials: int) -> Words:
    many = f"{per_vial} a vial ({per_vial * vials} in all) " if per_vial else ""
    place = f", {parent.location}" if parent.location else ""
    pick = f"; take {parent.pick}" if parent.pick else ""
    return Words(f"{many}from {source_text(parent)}{place}: {fly_text(parent.fly)}{pick}", sign)


def _assay(plan: Plan, task: TaskRecord, step: StepRecord) -> list[Piece]:
    target = next((t for t in plan.targets if t.target == task.target), None)
    pieces: list[Piece] = [
        Words(task.target or step.id, size=10, bold=True),
        Words(fly_text(step.keep.fly), size=8),
    ]
    if target:
        many = count(target.flies, target.sex)
        control = f" · control of {target.control_of} ({target.control_kind})" if target.control_of else ""
        pieces.append(Words(f"{many} from {step.id}{control}"))
        pieces += [Words(listed(target.needs), "NEEDS")] if target.needs else []
        pieces += [Words(caution, "CAUTION") for caution in target.cautions]
    return [*pieces, Counts(("flies",), ("taken", "tested", "left out"))]


def _scheme_page(paper: Paper, form: Form) -> None:
    example = form.example

    def header(again: bool) -> Sequence[Piece]:
        title = Words(f"Scheme: {example.target}{' (continued)' if again else ''}", size=15, bold=True)
        return [title, Gap(2)] if again else [title, Words(_proof(form)), *_others(form), Gap(2)]

    paper.begin(header)
    flies = [fly for s in form.steps for fly in (s.mother.fly, s.father.fly, s.keep.fly)]
    chromosomes = tuple(shown_chromosomes(flies))
    for generation, group in groupby(form.steps, key=lambda s: s.generation):
        crosses = [CrossPiece(step, chromosomes) for step in group]
        paper.add(Band(f"Generation {generation}"), crosses[0])
        for cross in crosses[1:]:
            paper.add(cross)


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
