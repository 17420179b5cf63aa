"""A plan to read, as Markdown: at a glance, targets, what cannot be made and why, crosses, calendar,
cautions."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable
from itertools import groupby

from crossplan.bench.choice import chosen_steps, chosen_tasks
from crossplan.bench.safety import reminders_for
from crossplan.bench.words import (
    as_date,
    count,
    dates_phrases,
    fly_text,
    keep_rule,
    listed,
    long_day,
    parents_text,
    warm,
)
from crossplan.plan.model import Plan, StepRecord, TargetRecord

#: Totals by the name in the plan, with the words in which they are given; others are left to the JSON.
TOTALS: dict[str, str] = {
    "targets_planned": "targets planned",
    "targets_in_stock": "targets in stock already",
    "targets_impossible": "targets that cannot be made",
    "steps": "crosses",
    "vials": "vials",
    "virgins": "virgin females to collect",
    "flies_to_score": "flies to look through",
    "first_ready": "first flies ready",
    "last_ready": "last flies ready",
    "busiest_day": "busiest day",
    "busiest_day_tasks": "tasks on that day",
    "minutes": "hands-on time",
}


def summary_text(plan: Plan) -> str:
    """Return the summary in Markdown; it ends with one line feed."""
    parts: list[Callable[[Plan], list[str]]] = [
        _glance,
        _planned,
        _impossible,
        _in_stock,
        _steps,
        _calendar,
        _cautions,
        _safety,
    ]
    lines = [f"# {_plain(plan.screen.name)}", ""]
    for part in parts:
        lines += part(plan)
    return "\n".join(lines).rstrip() + "\n"


def glance(plan: Plan) -> list[tuple[str, str]]:
    """Return what the plan comes to, as (words, value) pairs: what it was made from, then the totals."""
    screen = plan.screen
    read = f"{count(screen.stocks_read, 'stock')} read, {count(screen.rows_refused, 'row')} not understood"
    facts = [
        ("lab", screen.lab),
        ("screen file", screen.screen_file),
        ("stock list", f"{screen.stock_file} ({read})" if screen.stock_file else ""),
        ("starts", long_day(screen.start) if screen.start else ""),
        ("temperature", warm(screen.temperature_C)),
        ("each cross gives enough with probability", f"{screen.probability:g}"),
        ("made by", f"crossplan {screen.crossplan}" if screen.crossplan else ""),
    ]
    facts += [(words, _total(name, plan.totals[name])) for name, words in TOTALS.items() if name in plan.totals]
    return [(words, value) for words, value in facts if value]


def _total(name: str, value: object) -> str:
    if value is None:
        return ""
    if name == "minutes" and isinstance(value, (int, float)):
        hours, minutes = divmod(round(value), 60)
        return f"{hours} h {minutes} min" if hours else f"{minutes} min"
    if isinstance(value, str) and re.fullmatch(r"\d{4}-\d\d-\d\d", value):
        return long_day(value)
    return f"{value:g}" if isinstance(value, float) else str(value)


def assay_words(target: TargetRecord) -> str:
    """Return when a target's flies are tested: `Thu 8 Apr 2027 (possible Tue 6 to Sat 10 Apr, due ...)`."""
    if not target.assay_date:
        return ""
    extra = []
    if target.assay_from and target.assay_to:
        extra.append(f"possible {long_day(target.assay_from)} to {long_day(target.assay_to)}")
    if target.due:
        late = as_date(target.assay_date) > as_date(target.due)
        extra.append(f"{'LATE, was' if late else ''} due {long_day(target.due)}".strip())
    return long_day(target.assay_date) + (f" ({'; '.join(extra)})" if extra else "")


def generations_words(target: TargetRecord) -> str:
    """Return how many generations, and how sure it is that there is no shorter way."""
    if target.generations is None:
        return ""
    proof = (
        "fewest possible, proved" if target.proved_minimal else f"searched to {target.searched_to}, not proved fewest"
    )
    return f"{target.generations} ({proof})"


# --- sections -----------------------------------------------------------------------------------------------


def _glance(plan: Plan) -> list[str]:
    return ["## At a glance", "", *(f"- {words}: {_plain(value)}" for words, value in glance(plan)), ""]


def _planned(plan: Plan) -> list[str]:
    targets = [t for t in plan.targets if t.status == "planned"]
    if not targets:
        return []
    head = ["target", "flies", "components", "generations", "crosses", "assay", "needs"]
    rows = []
    for t in targets:
        control = f" (control of {t.control_of}: {t.control_kind})" if t.control_of else ""
        rows.append(
            [
                _plain(t.target + control),
                f"{t.flies} {t.sex}",
                _codes(t.components),
                generations_words(t),
                ", ".join(t.scheme),
                assay_words(t),
                _plain(listed(t.needs)),
            ]
        )
    return ["## Targets planned", "", *_table(head, rows), ""]


def _impossible(plan: Plan) -> list[str]:
    lines = []
    for t in (t for t in plan.targets if t.status == "impossible"):
        lines += [
            f"- **{_plain(t.target)}** ({_codes(t.components)})",
            f"  - reason: {_plain(t.reason or 'not given')}",
        ]
        lines.append(f"  - searched to {count(t.searched_to, 'generation')}")
        if t.would_unlock:
            lines.append(f"  - would make it possible: {_plain(listed(t.would_unlock))}")
    return ["## Cannot be made", "", *lines, ""] if lines else []


def _in_stock(plan: Plan) -> list[str]:
    lines = [f"- {_plain(t.target)}" for t in plan.targets if t.status == "in stock"]
    return ["## In stock already", "", *lines, ""] if lines else []


def _steps(plan: Plan) -> list[str]:
    if not plan.steps:
        return []
    head = ["cross", "gen.", "mother x father", "keep", "flies kept", "vials", "flies", "at", "days"]
    return ["## Crosses", "", *_table(head, [_step_row(step) for step in chosen_steps(plan)]), ""]


def _step_row(step: StepRecord) -> list[str]:
    control = " (control)" if step.is_control else ""
    need = f"need {step.flies_needed}, expect {step.flies_expected:.0f}" if step.flies_needed else ""
    per_vial = f"{step.vials} of {step.mothers_per_vial} x {step.fathers_per_vial}" if step.vials else ""
    days = " · ".join(dates_phrases(step.dates)) if step.dates else ""
    return [
        _plain(step.id + control),
        str(step.generation),
        _plain(parents_text(step.mother, step.father)),
        _plain(keep_rule(step.keep)),
        _codes([fly_text(step.keep.fly)]),
        per_vial,
        need,
        warm(step.temperature_C),
        days,
    ]


def _calendar(plan: Plan) -> list[str]:
    lines = []
    for day, tasks in groupby(chosen_tasks(plan), key=lambda t: t.date):
        lines += [f"### {long_day(day)}", ""]
        for task in tasks:
            who = f" ({task.person})" if task.person else ""
            what = f"{task.time} {task.kind} {task.step}"
            target = f" for {task.target}" if task.target else ""
            lines.append(f"- {_plain(what + target + who)}" + (f": {_plain(task.note)}" if task.note else ""))
        lines.append("")
    return ["## Calendar", "", *lines] if lines else []


def cautions_of(plan: Plan) -> list[str]:
    """Return all cautions: of the plan, then of targets and crosses with their names in front, each once."""
    named = [f"{t.target}: {c}" for t in plan.targets for c in t.cautions]
    named += [f"{s.id}: {c}" for s in plan.steps for c in s.cautions]
    return list(dict.fromkeys([*plan.cautions, *named]))


def _cautions(plan: Plan) -> list[str]:
    cautions = cautions_of(plan)
    return ["## Cautions", "", *(f"- {_plain(c)}" for c in cautions), ""] if cautions else []


def _safety(plan: Plan) -> list[str]:
    return ["## Safety", "", *(f"- {_plain(c)}" for c in (*plan.safety, *reminders_for(plan))), ""]


# --- Markdown -----------------------------------------------------------------------------------------------


def _plain(text: str) -> str:
    """Return a text that Markdown shows as it is, on one line; only what would be a mark is escaped."""
    return re.sub(r"([\\`*<|]|(?<!\w)_|_(?!\w)|(?<=\])\()", r"\\\1", " ".join(text.split()))


def _codes(texts: Iterable[str]) -> str:
    """Return genotypes as code, so that brackets and stars stand as they are."""
    return ", ".join(f"`{' '.join(t.split()).replace('`', chr(39)).replace('|', '¦')}`" for t in texts)


def _table(head: list[str], rows: list[list[str]]) -> list[str]:
    return [f"| {' | '.join(head)} |", f"|{'---|' * len(head)}", *(f"| {' | '.join(row)} |" for row in rows)]
