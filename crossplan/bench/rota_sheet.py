"""The transfer rota as people hold it: a bench list to tick (PDF), a calendar file, and a table."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable, Iterable, Iterator, Sequence
from itertools import groupby

from crossplan.bench.audit_report import csv_text
from crossplan.bench.paper import Gap, Paper, Piece, Ticks, Words
from crossplan.bench.pdf_page import PAPERS, Pages
from crossplan.bench.words import count, long_day
from crossplan.plan.model import Plan, TaskRecord
from crossplan.stocks.rota import Transfer

#: minutes that one vial takes to flip, labels included (common practice, no source)
MINUTES_PER_VIAL = 1.0
#: tasks of a plan that concern whole stocks, and so belong on the list of who keeps them
OF_STOCKS = ("expand", "virgins")


def stock_tasks(plan: Plan, start: dt.date, days: int) -> tuple[TaskRecord, ...]:
    """Return what a plan asks to be done to stocks in a period: expansions ahead of collections, and the collections."""
    last = start + dt.timedelta(days=days - 1)
    return tuple(t for t in plan.tasks if t.kind in OF_STOCKS and start.isoformat() <= t.date <= last.isoformat())


def rota_csv(transfers: Iterable[Transfer]) -> str:
    """Return the rota as a CSV table, one transfer a row."""
    rows = (
        (
            t.day.isoformat(), t.person, t.stock.tray, t.stock.vial, t.stock.name, t.half, str(t.vials), t.due.isoformat(),
            "late" if t.late else "", "",
        )
        for t in transfers
    )  # fmt: skip
    return csv_text(("date", "person", "tray", "vial", "stock", "half", "vials", "due", "remark", "done"), rows)


def rota_pdf(title: str, transfers: Sequence[Transfer], tasks: Sequence[TaskRecord] = (), page: str = "A4") -> bytes:
    """Return bench lists as a PDF file: a page or more for each day and person, in walking order, with boxes to tick.

    Args:
        title: what stands at the foot of every page.
        transfers: the rota.
        tasks: what a plan asks to be done to stocks on those days.
        page: `A4` or `Letter`.
    """
    by_day = {day: list(group) for day, group in groupby(transfers, key=lambda t: t.day)}
    asked: dict[dt.date, list[TaskRecord]] = {}
    for task in tasks:
        asked.setdefault(dt.date.fromisoformat(task.date), []).append(task)
    days = sorted({*by_day, *asked})
    with Pages(title, *PAPERS[page], days[0] if days else None) as pages:
        paper = Paper(pages, title)
        for day in days:
            _day(paper, day, by_day.get(day, []), asked.get(day, []))
        if not days:
            paper.begin(lambda again: (Words("Nothing to do in these days.", size=12),))
        paper.end_page()
        return pages.finish()


def _day(paper: Paper, day: dt.date, transfers: Sequence[Transfer], tasks: Sequence[TaskRecord]) -> None:
    for person, group in groupby(transfers, key=lambda t: t.person):
        mine = list(group)
        vials = sum(t.vials for t in mine)
        head = f"{long_day(day.isoformat())}{': ' + person if person else ''}"
        under = f"{count(vials, 'vial')} of {count(len({t.stock.name for t in mine}), 'stock')} to flip"
        paper.begin(_header(head, under))
        for tray, in_tray in groupby(mine, key=lambda t: t.stock.tray):
            lines = [*_tray(tray, list(in_tray))]
            paper.add(*lines[:2])
            for piece in lines[2:]:
                paper.add(piece)
    if tasks:
        paper.begin(_header(long_day(day.isoformat()), "for crosses of the plan"))
        for task in tasks:
            paper.add(Ticks((f"{task.time} {task.note}",)), Gap(1.0))


def _header(head: str, under: str) -> Callable[[bool], Sequence[Piece]]:
    def pieces(again: bool) -> Sequence[Piece]:
        return (Words(head + (" (continued)" if again else ""), size=14, bold=True), Words(under, size=9), Gap(2.0))

    return pieces


def _tray(tray: str, transfers: Sequence[Transfer]) -> Iterator[Piece]:
    yield Words(f"tray {tray}" if tray else "without a tray", size=11, bold=True)
    for transfer in transfers:
        place = f"{transfer.stock.vial}  " if transfer.stock.vial else ""
        half = f", half {transfer.half}" if transfer.half != "all" else ""
        late = "  OVERDUE: look whether it lives" if transfer.late else ""
        yield Ticks((f"{place}{transfer.stock.name}: {count(transfer.vials, 'vial')}{half}{late}",))


def rota_ics(name: str, transfers: Sequence[Transfer], stamp: dt.date) -> bytes:
    """Return the rota as a calendar file: one entry a day and person, all day long.

    Args:
        name: of the stock list.
        transfers: the rota.
        stamp: the day on which it was made.
    """
    from icalendar import Calendar, Event

    calendar = Calendar()
    calendar.add("prodid", "-//crossplan//transfer rota//EN")
    calendar.add("version", "2.0")
    for (day, person), group in groupby(transfers, key=lambda t: (t.day, t.person)):
        mine = list(group)
        event = Event()
        trays = ", ".join(dict.fromkeys(t.stock.tray or "without a tray" for t in mine))
        vials = sum(t.vials for t in mine)
        event.add("uid", f"rota-{day.isoformat()}-{person or 'all'}@crossplan".replace(" ", "-"))
        event.add("dtstamp", dt.datetime.combine(stamp, dt.time(), dt.UTC))
        event.add("dtstart", day)
        event.add("dtend", day + dt.timedelta(days=1))
        event.add("summary", f"{person + ': ' if person else ''}flip {count(vials, 'vial')} ({trays})")
        minutes = round(MINUTES_PER_VIAL * vials)
        lines = [f"about {minutes} minutes", *(f"{t.stock.location} {t.stock.name}: {t.vials}" for t in mine)]
        event.add("description", f"{name}\n" + "\n".join(lines))
        calendar.add_component(event)
    return bytes(calendar.to_ical())
