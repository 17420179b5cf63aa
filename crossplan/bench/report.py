"""A plan to read, in one HTML file: no network, for telephone, screen and paper, with search and filters.

All text of the plan is escaped; the policy in the head of the file forbids everything but its own style and
script. Without script everything is there to read, only search and filters are not.
"""

from __future__ import annotations

from collections.abc import Iterable
from html import escape
from importlib.resources import files
from itertools import groupby

from crossplan.bench.choice import chosen_steps, chosen_tasks, people_of
from crossplan.bench.report_chart import anchor, chart_html, work_html
from crossplan.bench.safety import reminders_for
from crossplan.bench.scheme_drawing import share_words, shown_chromosomes
from crossplan.bench.summary import assay_words, cautions_of, generations_words, glance
from crossplan.bench.terminal import stop_words
from crossplan.bench.walk import Stop, walk_of
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
from crossplan.plan.model import FlyRecord, ParentRecord, Plan, StepRecord, TargetRecord

STATUS = {"planned": "planned", "impossible": "cannot be made", "in stock": "in stock already"}
#: What is shown large at the top, of what `glance` returns.
LARGE = ("targets planned", "targets that cannot be made", "crosses", "vials", "first flies ready", "last flies ready",
         "hands-on time")  # fmt: skip


def report_html(plan: Plan) -> str:
    """Return the report as one self-contained HTML document."""
    lost = [t for t in plan.targets if t.status == "impossible"]
    sections = [
        ("glance", "At a glance", _glance(plan)),
        ("impossible", "Cannot be made", "".join(_target(t) for t in lost)),
        ("cautions", "Cautions", _bullets(cautions_of(plan))),
        ("work", "Work of each day", work_html(plan)),
        ("chart", "Calendar chart", chart_html(plan)),
        ("targets", "Targets", "".join(_target(t) for t in plan.targets if t not in lost)),
        ("crosses", "Crosses", "".join(_step(s) for s in chosen_steps(plan))),
        ("days", "Day by day", _calendar(plan)),
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
        style=_part("report.css"), script=_part("report.js"), links=links, body=body, filters=_filters(plan),
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
<div id="filters" class="filters" role="search" hidden>
<p><label for="filter">Search targets, crosses and days: all of these words</label>
<input id="filter" type="search" autocomplete="off"></p>
{filters}
<p><button id="all" type="button">Show all</button></p>
<output id="found" for="filter" role="status"></output>
</div>
</header>
<main>
{body}
</main>
<script>
{script}</script>
</body>
</html>
"""


def _filters(plan: Plan) -> str:
    """Return a choice for each thing that is not the same throughout the plan."""
    states = [(s, STATUS[s]) for s in STATUS if any(t.status == s for t in plan.targets)]
    generations = sorted({s.generation for s in plan.steps} | {t.generations for t in plan.targets if t.generations})
    choices = [
        ("status", "Status of targets", states),
        ("generation", "Generation", [(str(g), str(g)) for g in generations]),
        ("control", "Controls", [("no", "without controls"), ("yes", "only controls")]),
        ("person", "Person", [(who, who) for who in people_of(plan)]),
    ]
    return "\n".join(_choice(*choice) for choice in choices if len(choice[2]) > 1)


def _choice(name: str, label: str, options: list[tuple[str, str]]) -> str:
    inner = "".join(f'<option value="{escape(value)}">{escape(words)}</option>' for value, words in options)
    return (
        f'<p><label for="by-{name}">{label}</label><select id="by-{name}" name="{name}">'
        f'<option value="">all</option>{inner}</select></p>'
    )


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
    facts = glance(plan)
    large = [(words, escape(value)) for words, value in facts if words in LARGE]
    rest = [(words, escape(value)) for words, value in facts if words not in LARGE]
    return _facts(large).replace("<dl>", '<dl class="big">', 1) + _facts(rest)


def _target(target: TargetRecord) -> str:
    control = f"{target.control_of} ({target.control_kind})" if target.control_of else ""
    facts = [
        ("components", "<br>".join(_text(c) for c in target.components)),
        ("control of", escape(control)),
        ("flies", escape(f"{target.flies} {target.sex}") if target.status == "planned" else ""),
        ("generations", escape(generations_words(target))),
        ("assay", escape(assay_words(target))),
        ("needs", escape(listed(target.needs))),
        ("reason", _text(target.reason)),
        ("searched", count(target.searched_to, "generation") if target.status == "impossible" else ""),
        ("would make it possible", _text(listed(target.would_unlock, "or"))),
        ("caution", "<br>".join(_text(c) for c in target.cautions)),
    ]
    lost = " needs-you" if target.status == "impossible" else ""
    mark = f'<span class="mark">{STATUS[target.status]}</span>'
    if control:
        mark += ' <span class="mark">control</span>'
    made = f' data-generation="{target.generations}"' if target.generations else ""
    data = f'data-status="{target.status}" data-control="{"yes" if control else "no"}"{made}'
    return (
        f'<article class="item{lost}" {data}><h3>{escape(target.target)} {mark}</h3>'
        f"{_facts(facts)}{_scheme(target)}</article>"
    )


def _scheme(target: TargetRecord) -> str:
    """Return links to the crosses of a scheme; opened, they are drawn below each other."""
    if not target.scheme:
        return ""
    links = "".join(f'<p><a href="#{anchor(s)}">{escape(s)}</a></p>' for s in target.scheme)
    return f'<details class="scheme"><summary>Scheme: {escape(", ".join(target.scheme))}</summary>{links}</details>'


# --- crosses ------------------------------------------------------------------------------------------------


def _step(step: StepRecord) -> str:
    names = shown_chromosomes([step.mother.fly, step.father.fly, step.keep.fly])
    mark = ' <span class="mark">control</span>' if step.is_control else ""
    dates = dates_phrases(step.dates, weekdays=True) if step.dates else ()
    many = f"{step.vials} of {step.mothers_per_vial} {FEMALE_SIGN} and {step.fathers_per_vial} {MALE_SIGN}"
    need = f"need {step.flies_needed}, expect {step.flies_expected:.0f}; look through {step.flies_to_score}"
    facts = [
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
    beware = "".join(f'<p class="beware">Beware: {_text(m)}</p>' for m in step.keep.mistaken_for)
    cross = (
        f'<div class="cross">{_parent(FEMALE_SIGN, step.mother, names)}<span class="times">×</span>'
        f'{_parent(MALE_SIGN, step.father, names)}<span class="down" aria-hidden="true">↓</span>'
        f'<div class="kept"><p>keep {_text(keep_rule(step.keep))}</p>{_fly(step.keep.fly, names)}{beware}</div></div>'
    )
    data = f'data-generation="{step.generation}" data-control="{"yes" if step.is_control else "no"}"'
    if step.person:
        data += f' data-person="{escape(step.person)}"'
    return (
        f'<article class="item" id="{anchor(step.id)}" {data}><h3>{escape(step.id)} '
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
        rows = "".join(_stop(plan, stop) for stop in walk_of(plan, group))
        days.append(
            f'<div class="day" id="day-{day}"><h3>{long_day(day)}</h3>'
            f'<table class="tasks"><tbody>{rows}</tbody></table></div>'
        )
    return "".join(days)


def _stop(plan: Plan, stop: Stop) -> str:
    people = "|".join(stop.people)
    data = f' data-person="{escape(people)}"' if people else ""
    known = {step.id for step in plan.steps}
    place = f'<a href="#{anchor(stop.place)}">{escape(stop.place)}</a>' if stop.place in known else escape(stop.place)
    return (
        f'<tr class="item"{data}><td>{escape(stop.time)}</td><th scope="row">{stop.kind}</th><td>{place}</td>'
        f"<td>{_text(stop_words(plan, stop))}</td><td>{escape(', '.join(stop.people))}</td></tr>"
    )
