"""The calendar chart and the work of each day, for the report: lines, ticks and lengths in one colour, all named in words."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable, Sequence
from html import escape
from itertools import groupby

from crossplan.bench.choice import chosen_steps, chosen_tasks
from crossplan.bench.words import as_date, bare_day, count, dates_phrases, long_day
from crossplan.plan.model import Plan, StepDates, StepRecord

#: Sizes in pixels: a row of the chart, the column of names, the width of all days, and the space for dates on top.
ROW, NAMES, DAYS_WIDTH, TOP = 15, 58, 840, 20
#: Crosses in one picture: a picture that is longer than a page is cut through when it is printed.
ROWS_A_PICTURE = 50

LEGEND = (
    "One line a cross, from the day of setting up (tall tick) to the day of discarding (end of the line); "
    "short tick: the parents are cleared; thick: flies are collected. The same days stand with each cross."
)


def anchor(step_id: str) -> str:
    """Return a step id as a name that HTML takes: letters and digits as they are, all else by number."""
    return "step-" + "".join(c if c.isascii() and c.isalnum() else f"-{ord(c)}-" for c in step_id)


def chart_html(plan: Plan) -> str:
    """Return the calendar chart: crosses in the order of setting up; empty when no cross has days."""
    rows = [(s, s.dates) for s in chosen_steps(plan) if s.dates]
    if not rows:
        return ""
    first = min(as_date(d.set_up) for _, d in rows)
    last = max(as_date(d.discard) for _, d in rows)
    parts = [rows[at : at + ROWS_A_PICTURE] for at in range(0, len(rows), ROWS_A_PICTURE)]
    pictures = "".join(_picture(part, first, last) for part in parts)
    return f'<p>{escape(LEGEND)}</p><div class="wide">{pictures}</div>'


def _picture(rows: Sequence[tuple[StepRecord, StepDates]], first: dt.date, last: dt.date) -> str:
    days = (last - first).days + 1
    step = DAYS_WIDTH / days
    width, height = NAMES + DAYS_WIDTH + 4, TOP + ROW * len(rows) + 4

    def x(day: str, end: bool = False) -> float:
        return round(NAMES + ((as_date(day) - first).days + end) * step, 1)

    weeks = "".join(_week(first + dt.timedelta(days=n), NAMES + n * step, height) for n in _mondays(first, days))
    lines = "".join(_row(s, d, x, TOP + ROW * at) for at, (s, d) in enumerate(rows))
    about = f"Calendar chart of {rows[0][0].id} to {rows[-1][0].id}, {long_day(first)} to {long_day(last)}"
    return (
        f'<svg class="chart" viewBox="0 0 {width} {height}" width="{width}" height="{height}" role="group" '
        f'aria-label="{escape(about)}">{weeks}{lines}</svg>'
    )


def _mondays(first: dt.date, days: int) -> list[int]:
    """Return the Mondays as numbers of days, not so many that their dates would run into each other."""
    found = list(range(-first.weekday() % 7, days, 7))
    return found[:: max(1, -(-len(found) // 16))]


def _week(day: dt.date, x: float, height: float) -> str:
    return (
        f'<path class="week" d="M{x:.1f} {TOP - 4}V{height - 2}"/><text x="{x + 2:.1f}" y="11">{bare_day(day)}</text>'
    )


def _row(step: StepRecord, dates: StepDates, x: Callable[..., float], y: float) -> str:
    middle = y + ROW / 2
    start, end = x(dates.set_up), x(dates.discard, True)
    told = f"{step.id}: {' · '.join(dates_phrases(dates, weekdays=True))}"
    return (
        f'<a href="#{anchor(step.id)}" aria-label="{escape(told)}"><title>{escape(told)}</title>'
        f'<text x="0" y="{middle + 4:g}">{escape(step.id)}</text>'
        f'<path d="M{start} {middle - 5:g}v10M{start} {middle:g}H{end}M{x(dates.clear)} {middle - 3:g}v6"/>'
        f'<rect x="{x(dates.collect_from)}" y="{middle - 4:g}" '
        f'width="{round(x(dates.collect_to, True) - x(dates.collect_from), 1)}" height="8"/></a>'
    )


def work_html(plan: Plan) -> str:
    """Return a table of the work of each day, with its length drawn beside it; empty when there is no work."""
    days = [(day, list(group)) for day, group in groupby(chosen_tasks(plan), key=lambda t: t.date)]
    most = max((sum(t.minutes for t in tasks) for _, tasks in days), default=0)
    people = sorted({t.person for _, tasks in days for t in tasks if t.person})
    if not most:
        return ""
    head = "".join(f'<th scope="col">{escape(who)}</th>' for who in people if len(people) > 1)
    rows = []
    for day, tasks in days:
        minutes = sum(t.minutes for t in tasks)
        each = "".join(
            f'<td class="number">{sum(t.minutes for t in tasks if t.person == who)}</td>'
            for who in people
            if len(people) > 1
        )
        rows.append(
            f'<tr><th scope="row"><a href="#day-{day}">{long_day(day)}</a></th><td class="number">{len(tasks)}</td>'
            f'<td class="number">{minutes}</td>{each}'
            f'<td class="length"><span style="width:{100 * minutes / most:.0f}%"></span></td></tr>'
        )
    return (
        f'<div class="wide"><table class="work"><caption>Minutes of work, {count(len(days), "day")}; '
        f'the fullest has {most}</caption><thead><tr><th scope="col">day</th><th scope="col">tasks</th>'
        f'<th scope="col">minutes</th>{head}<td></td></tr></thead><tbody>{"".join(rows)}</tbody></table></div>'
    )
