"""A cross, a target or a day of a plan in plain text, as wide as the terminal: what the papers say, without paper.

Weight is the only means besides the words: headings are to be set in bold, nothing is said by a colour.
"""

from __future__ import annotations

import textwrap
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from itertools import groupby

from crossplan.bench.choice import chosen_tasks, natural
from crossplan.bench.scheme_drawing import crosses_of, share_words, shown_chromosomes
from crossplan.bench.summary import assay_words, generations_words
from crossplan.bench.walk import EMPTY, HEADINGS, Stop, vials_for, walk_of
from crossplan.bench.words import (
    FEMALE_SIGN,
    MALE_SIGN,
    as_date,
    chromosome_lines,
    count,
    dates_phrases,
    fly_text,
    homologue_text,
    keep_rule,
    listed,
    long_day,
    pairs_of,
    parents_text,
    short_day,
    source_text,
    warm,
)
from crossplan.errors import InputError
from crossplan.plan.model import FlyRecord, ParentRecord, Plan, StepRecord, TargetRecord, TaskRecord

NARROWEST = 40
GAP = "   "


@dataclass(frozen=True, slots=True)
class TextLine:
    """One line of text; `strong` lines are headings."""

    text: str
    strong: bool = False


def shown(plan: Plan, what: str) -> StepRecord | TargetRecord | str:
    """Return the cross or target of this name, or the day (ISO text).

    Raises:
        InputError: the plan holds nothing of this name; close names are given.
    """
    named: dict[str, StepRecord | TargetRecord] = {t.target.casefold(): t for t in reversed(plan.targets)}
    named |= {s.id.casefold(): s for s in reversed(plan.steps)}
    wanted = what.strip().casefold()
    if wanted in named:
        return named[wanted]
    try:
        return as_date(what.strip()).isoformat()
    except ValueError:
        pass
    close = [_name(named[k]) for k in get_close_matches(wanted, named, 3, 0.6)]
    starts = [_name(v) for k, v in named.items() if wanted and k.startswith(wanted)]
    names = list(dict.fromkeys([*sorted(starts, key=natural)[:6], *close]))
    hint = (
        f"Perhaps {listed([repr(n) for n in names], 'or')}."
        if names
        else "Give a cross (S03), a target, or a day (2027-01-11)."
    )
    raise InputError(f"the plan has no cross, target or day {what!r}", hint)


def _name(record: StepRecord | TargetRecord) -> str:
    return record.id if isinstance(record, StepRecord) else record.target


def show_lines(plan: Plan, what: str, width: int = 80, person: str | None = None) -> list[TextLine]:
    """Return what the plan says of a cross, a target or a day, in lines of at most `width` characters.

    Only words longer than a line run over it. `person` narrows a day to the work of one.
    """
    width = max(NARROWEST, width)
    found = shown(plan, what)
    if isinstance(found, StepRecord):
        return _step_lines(plan, found, width)
    if isinstance(found, TargetRecord):
        return _target_lines(plan, found, width)
    return _day_lines(plan, found, width, person)


# --- pieces -------------------------------------------------------------------------------------------------


def _wrapped(text: str, width: int, lead: str = "", indent: str = "  ") -> list[TextLine]:
    """Return a paragraph, `lead` in front of its first line and as much room in front of the others."""
    head = f"{indent}{lead}{'  ' if lead else ''}"
    lines = textwrap.wrap(
        " ".join(text.split()), width, initial_indent=head, subsequent_indent=" " * len(head), break_on_hyphens=False,
        break_long_words=False,
    )  # fmt: skip
    return [TextLine(line) for line in lines]


def _title(text: str, width: int) -> list[TextLine]:
    return [TextLine(line, strong=True) for line in textwrap.wrap(text, width, break_on_hyphens=False)]


def _facts(pairs: Iterable[tuple[str, str]], width: int) -> list[TextLine]:
    """Return facts with their names in one column; empty ones are left out."""
    known = [(name, text) for name, text in pairs if text]
    column = max((len(name) for name, _ in known), default=0)
    return [line for name, text in known for line in _wrapped(text, width, name.ljust(column))]


def fly_drawing(fly: FlyRecord, chromosomes: Sequence[str], width: int) -> list[str]:
    """Return a fly with its homologues above and below a line, the name of each chromosome underneath.

    Chromosomes that do not fit beside each other go on below; one that is wider than `width` is written on one line.
    """
    pairs = dict(pairs_of(fly))
    columns = []
    for name in chromosomes:
        above, below = (homologue_text(h) for h in pairs[name])
        wide = max(len(above), len(below), 3)
        columns.append((above.center(wide), "─" * wide, below.center(wide), name.center(wide)))
    if any(len(column[1]) > width for column in columns):
        return [
            part
            for line in chromosome_lines(fly)
            for part in textwrap.wrap(
                line, width, subsequent_indent="   ", break_long_words=False, break_on_hyphens=False
            )
        ]
    lines: list[str] = []
    row: list[tuple[str, str, str, str]] = []
    for column in columns:
        if row and sum(len(c[1]) + len(GAP) for c in (*row, column)) - len(GAP) > width:
            lines += [GAP.join(part).rstrip() for part in zip(*row, strict=True)]
            row = []
        row.append(column)
    return lines + [GAP.join(part).rstrip() for part in zip(*row, strict=True)]


def _side_by_side(left: Sequence[str], right: Sequence[str], width: int) -> list[str]:
    """Return two blocks beside each other, or below each other where that is too wide."""
    column = max(map(len, left)) + 6
    if column + max(map(len, right)) > width:
        return [*left, "", *right]
    tall = max(len(left), len(right))
    both = zip([*left, *[""] * (tall - len(left))], [*right, *[""] * (tall - len(right))], strict=True)
    return [f"{a.ljust(column)}{b}".rstrip() for a, b in both]


def _parent_block(sign: str, parent: ParentRecord, chromosomes: Sequence[str], width: int) -> list[str]:
    place = f" ({parent.location})" if parent.location else ""
    pick = [f"take {parent.pick}"] if parent.pick else []
    head = textwrap.wrap(f"{sign} {source_text(parent)}{place}", width)
    return [*head, *fly_drawing(parent.fly, chromosomes, width), *(x for p in pick for x in textwrap.wrap(p, width))]


def _cross_lines(step: StepRecord, chromosomes: Sequence[str], width: int) -> list[TextLine]:
    """Return mother x father, an arrow, and the kept class with its rule."""
    room = width - 4
    mother = _parent_block(FEMALE_SIGN, step.mother, chromosomes, room)
    father = _parent_block(f"× {MALE_SIGN}", step.father, chromosomes, room)
    lines = [TextLine(f"  {line}".rstrip()) for line in _side_by_side(mother, father, room)]
    lines += [TextLine("  ↓"), TextLine(f"  keep {keep_rule(step.keep)}", strong=True)]
    if len(lines[-1].text) > width:
        lines[-1:] = [TextLine(x.text, True) for x in _wrapped(f"keep {keep_rule(step.keep)}", width)]
    return lines + [TextLine(f"  {line}") for line in fly_drawing(step.keep.fly, chromosomes, room)]


# --- a cross, a target, a day -------------------------------------------------------------------------------


def _step_lines(plan: Plan, step: StepRecord, width: int) -> list[TextLine]:
    control = "  CONTROL" if step.is_control else ""
    shared = f", in the vials of {step.same_vials_as}" if step.same_vials_as else ""
    title = f"{step.id}{control}  generation {step.generation}{shared}"
    chromosomes = shown_chromosomes([step.mother.fly, step.father.fly, step.keep.fly])
    lines = [*_title(title, width), *_cross_lines(step, chromosomes, width), TextLine("")]
    lines += _facts(_step_facts(step), width)
    tasks = chosen_tasks(plan)
    mine = [task for task in tasks if task.step == step.id]
    if mine:
        lines += [TextLine(""), TextLine("Days", strong=True)]
        lines += [line for task in mine for line in _wrapped(_task_text(task), width)]
    return lines


def _step_facts(step: StepRecord) -> list[tuple[str, str]]:
    keep = step.keep
    dates = dates_phrases(step.dates, weekdays=True) if step.dates else ()
    per_vial = f" of {step.mothers_per_vial} {FEMALE_SIGN} and {step.fathers_per_vial} {MALE_SIGN}"
    need = f"need {step.flies_needed}, expect {step.flies_expected:.0f}, look through about {step.flies_to_score}"
    return [
        ("they are", fly_text(keep.fly)),
        ("they show", listed(keep.signs)),
        ("leave", listed(keep.avoid_signs, "or")),
        *(("beware", other) for other in keep.mistaken_for),
        ("share", share_words(keep)),
        ("flies", need if step.flies_needed else ""),
        ("vials", f"{step.vials}{per_vial}, {warm(step.temperature_C)}" if step.vials else ""),
        ("days", " · ".join(dates)),
        ("person", step.person),
        ("for", listed(step.used_by or step.serves)),
        *(("caution", caution) for caution in step.cautions),
    ]


def _task_text(task: TaskRecord) -> str:
    who = f" {task.person}" if task.person else ""
    target = f" for {task.target}" if task.target else ""
    return f"{short_day(task.date)} {task.time}{who} {task.kind}{target}{f': {task.note}' if task.note else ''}"


def _target_lines(plan: Plan, target: TargetRecord, width: int) -> list[TextLine]:
    control = f"  CONTROL of {target.control_of} ({target.control_kind})" if target.control_of else ""
    lines = _title(f"{target.target}{control}", width)
    lines += _facts(
        [
            ("status", target.status),
            ("components", ", ".join(target.components)),
            ("flies", f"{target.flies} {target.sex}" if target.flies else ""),
            ("generations", generations_words(target)),
            ("searched", count(target.searched_to, "generation") if target.status == "impossible" else ""),
            ("reason", target.reason),
            ("would unlock it", listed(target.would_unlock, "or")),
            ("assay", assay_words(target)),
            ("needs", listed(target.needs)),
            *(("caution", caution) for caution in target.cautions),
        ],
        width,
    )
    crosses = crosses_of(plan, target)
    chromosomes = shown_chromosomes([f for s in crosses for f in (s.mother.fly, s.father.fly, s.keep.fly)])
    for step in crosses:
        days = f"  {' · '.join(dates_phrases(step.dates))}" if step.dates else ""
        lines += [TextLine(""), TextLine(f"{step.id}  generation {step.generation}", strong=True)]
        lines += _wrapped(days, width) if days else []
        lines += _cross_lines(step, chromosomes, width)
        lines += [line for other in step.keep.mistaken_for for line in _wrapped(other, width, "beware")]
    return lines


def _day_lines(plan: Plan, day: str, width: int, person: str | None) -> list[TextLine]:
    tasks = chosen_tasks(plan, [day], person)
    if not tasks:
        return [TextLine(long_day(day), strong=True), TextLine("  nothing is planned")]
    minutes = sum(task.minutes for task in tasks)
    about = f", about {minutes} min" if minutes else ""
    lines = _title(f"{long_day(day)}: {count(len(tasks), 'task')}{about}", width)
    for (time, kind), group in groupby(walk_of(plan, tasks), key=lambda s: (s.time, s.kind)):
        lines += [TextLine(""), *_title(f"{time} {HEADINGS[kind]}", width)]
        for stop in group:
            lines += stop_lines(plan, stop, width)
    return lines


def stop_lines(plan: Plan, stop: Stop, width: int) -> list[TextLine]:
    """Return one stop of a day's walk, its place in front."""
    who = f" [{', '.join(stop.people)}]" if stop.people else ""
    return _wrapped(stop_words(plan, stop) + who, width, stop.place)


def stop_words(plan: Plan, stop: Stop) -> str:
    """Return what is done at a stop, on one line, without its place and people."""
    return "; ".join(part for part in _stop_parts(plan, stop) if part)


def _stop_parts(plan: Plan, stop: Stop) -> list[str]:
    step = next((s for s in plan.steps if s.id == stop.place), None)
    vials = vials_for(plan, stop)
    total = count(sum(vials.values()), "vial")
    if stop.kind == EMPTY:
        return [f"{total}, virgins at {stop.then}", f"for {', '.join(stop.steps)}" if stop.stock else ""]
    if stop.stock and vials:
        return [f"{total} for {', '.join(stop.steps)}"]
    if step is None:
        return [stop.note]
    if stop.kind == "collect":
        return [f"keep {keep_rule(step.keep)}", *(f"beware: {m}" for m in step.keep.mistaken_for)]
    if stop.kind == "set up":
        return [f"{total} at {warm(step.temperature_C)}, {parents_text(step.mother, step.father)}"]
    target = stop.tasks[0].target or ""
    return [total if stop.kind in ("clear", "discard", "shift") else "", target, stop.note]
