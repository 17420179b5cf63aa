"""A plan to read, in one HTML file: no network, for telephone, screen and paper, with a filter.

All text of the plan is escaped; the policy in the head of the file forbids everything but its own style and
script.
"""

from __future__ import annotations

from collections.abc import Iterable
from html import escape
from importlib.resources import files
from itertools import groupby

from crossplan.bench.choice import chosen_steps, chosen_tasks
from crossplan.bench.safety import reminders_for
from crossplan.bench.scheme_drawing import share_words, shown_chromosomes
from crossplan.bench.summary import assay_words, cautions_of, generations_words, glance
from crossplan.bench.words import (
    FEMALE_SIGN,
    MALE_SIGN,
    count,
    dates_phrases,
    keep_rule,
    listed,
    long_day,
    pairs_of,
    raised_runs,
    source_text,
    warm,
)
from crossplan.plan.model import FlyRecord, ParentRecord, Plan, StepRecord, TargetRecord, TaskRecord

STATUS = {"planned": "planned", "impossible": "cannot be made", "in stock": "in stock already"}


def report_html(plan: Plan) -> str:
    """Return the report as one self-contained HTML document."""
    sections = [
        ("glance", "At a glance", _glance(plan)),
        ("targets", "Targets", "".join(_target(t) for t in plan.targets)),
        ("crosses", "Crosses", "".join(_step(s) for s in chosen_steps(plan))),
        ("calendar", "Calendar", _calendar(plan)),
        ("cautions", "Cautions", _bullets(cautions_of(plan))),
        ("safety", "Safety", _bullets([*plan.safety, *reminders_for(plan)])),
    ]
    shown = [section for section in sections if section[2]]
    links = "".join(f'<a href="#{key}">{title}</a>' for key, title, _ in shown)
    body = "".join(
        f'<section id="{key}" aria-labelledby="{key}-h"><h2 id="{key}-h">{title}</h2>{html}</section>'
        for key, title, html in shown
    )
    return _PAGE.format(
        title=escape(plan.screen.name),
        policy="default-src 'none'; style-src 'unsafe-inline'; script-src 'unsafe-inline'",
        style=_part("report.css"), script=_part("report.js"), links=links, body=body,
    )  # fmt: skip


_PAGE = """<!DOCTYPE html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta http-equiv="Content-Security-Policy" content="{policy}">
<title>{title}: crossing plan</title>
<style>
{style}</style>
</head>
<body>
<a class="skip" href="#glance">Skip to the plan</a>
<header>
<h1>{title}</h1>
<nav aria-label="Sections">{links}</nav>
<p class="filter" hidden><label for="filter">Show only what has these words</label>
<input id="filter" type="search" autocomplete="off"> <output id="found" for="filter"
role="status"></output></p> </header>
<main>
{body}
</main>
<script>
{script}</script>
</body>
</html>
"""


def _part(name: str) -> str:
    return (files("crossplan.bench") / name).read_text(encoding="utf-8")


def _text(text: str) -> str:
    """Return escaped text, superscripts raised."""
    return "".join(f"<sup>{escape(t)}</sup>" if raised else escape(t) for t, raised in raised_runs(text))


def _bullets(texts: Iterable[str]) -> str:
    items = "".join(f'<li class="item">{_text(text)}</li>' for text in texts)
    return f"<ul>{items}</ul>" if items else ""


def _facts(facts: Iterable[tuple[str, str]]) -> str:
    """Return a list of (words, HTML) pairs; empty ones are left out."""
    return "<dl>" + "".join(f"<div><dt>{escape(w)}</dt><dd>{v}</dd></div>" for w, v in facts if v) + "</dl>"


def _glance(plan: Plan) -> str:
    return _facts((words, escape(value)) for words, value in glance(plan))


def _target(target: TargetRecord) -> str:
    crosses = ", ".join(f'<a href="#step-{_anchor(s)}">{escape(s)}</a>' for s in target.scheme)
    control = f"{target.control_of} ({target.control_kind})" if target.control_of else ""
    facts = [
        ("components", "<br>".join(_text(c) for c in target.components)),
        ("control of", escape(control)),
        ("flies", escape(f"{target.flies} {target.sex}") if target.status == "planned" else ""),
        ("generations", escape(generations_words(target))),
        ("crosses", crosses),
        ("assay", escape(assay_words(target))),
        ("needs", escape(listed(target.needs))),
        ("reason", _text(target.reason)),
        ("searched", count(target.searched_to, "generation") if target.status == "impossible" else ""),
        ("would make it possible", _text(listed(target.would_unlock))),
        ("caution", "<br>".join(_text(c) for c in target.cautions)),
    ]
    mark = f'<span class="mark">{STATUS[target.status]}</span>'
    return f'<article class="item"><h3>{escape(target.target)} {mark}</h3>{_facts(facts)}</article>'


def _anchor(step_id: str) -> str:
    """Return a step id as a name that HTML takes: letters and digits as they are, all else by number."""
    return "".join(c if c.isascii() and c.isalnum() else f"-{ord(c)}-" for c in step_id)


# --- crosses ------------------------------------------------------------------------------------------------


def _step(step: StepRecord) -> str:
    names = shown_chromosomes([step.mother.fly, step.father.fly, step.keep.fly])
    mark = ' <span class="mark">control</span>' if step.is_control else ""
    dates = dates_phrases(step.dates, weekdays=True) if step.dates else ()
    many = f"{step.vials} of {step.mothers_per_vial} {FEMALE_SIGN} and {step.fathers_per_vial} {MALE_SIGN}"
    need = f"need {step.flies_needed}, expect {step.flies_expected:.0f}; look through {step.flies_to_score}"
    facts = [
        ("look-alikes", "<br>".join(_text(m) for m in step.keep.mistaken_for)),
        ("leave", escape(listed(step.keep.avoid_signs, "or"))),
        ("share", escape(share_words(step.keep))),
        ("vials", escape(many) if step.vials else ""),
        ("flies", escape(need) if step.flies_needed else ""),
        ("temperature", escape(warm(step.temperature_C))),
        ("days", "<br>".join(escape(d) for d in dates)),
        ("person", escape(step.person)),
        ("serves", escape(listed(step.serves))),
        ("flies go to", escape(listed(step.used_by))),
        ("caution", "<br>".join(_text(c) for c in step.cautions)),
    ]
    cross = (
        f'<div class="cross">{_parent(FEMALE_SIGN, step.mother, names)}<span class="times">×</span>'
        f"{_parent(MALE_SIGN, step.father, names)}"
        f'<div class="kept"><p>keep {_text(keep_rule(step.keep))}</p>{_fly(step.keep.fly, names)}</div></div>'
    )
    return (
        f'<article class="item" id="step-{_anchor(step.id)}"><h3>{escape(step.id)} '
        f"<small>generation {step.generation}</small>{mark}</h3>{cross}{_facts(facts)}</article>"
    )


def _parent(sign: str, parent: ParentRecord, names: list[str]) -> str:
    place = f" <small>{escape(parent.location)}</small>" if parent.location else ""
    pick = f"<p><small>take {_text(parent.pick)}</small></p>" if parent.pick else ""
    return f"<div><p>{sign} {escape(source_text(parent))}{place}</p>{_fly(parent.fly, names)}{pick}</div>"


def _fly(fly: FlyRecord, names: list[str]) -> str:
    """Return the homologues of each chromosome above and below a line; read aloud it is `2: AD over CyO`."""
    pairs = dict(pairs_of(fly))
    parts = []
    for name in names:
        above, below = (_text(" ".join(h)) or "+" for h in pairs[name])
        parts.append(
            f'<span class="pair"><span>{above}</span><span class="over"> over </span>'
            f'<span class="low">{below}</span><span class="chr">{name}</span></span>'
        )
    return f'<div class="fly">{"".join(parts)}</div>'


def _calendar(plan: Plan) -> str:
    days = []
    for day, group in groupby(chosen_tasks(plan), key=lambda t: t.date):
        rows = "".join(_task(task) for task in group)
        days.append(f'<h3 class="day">{long_day(day)}</h3><table><tbody>{rows}</tbody></table>')
    return "".join(days)


def _task(task: TaskRecord) -> str:
    target = f" for {escape(task.target)}" if task.target else ""
    return (
        f'<tr class="item"><td>{escape(task.time)}</td><th scope="row">{task.kind}</th>'
        f'<td><a href="#step-{_anchor(task.step)}">{escape(task.step)}</a>{target}</td>'
        f"<td>{_text(task.note)}</td><td>{escape(task.person)}</td></tr>"
    )
