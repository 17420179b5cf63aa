"""The tasks of a plan as a calendar file (iCalendar, RFC 5545).

One entry is one round: all that one person does at one hour of one day, in walking order, since nobody
wants forty entries at nine o'clock. Assays are entries of their own, because they are at the rig and others
need to see them.

An entry is named after the first of its tasks (by task id) and the screen, so that it keeps its identity
when the plan is made again and the round moves to another day or hour. The time stamp comes from the plan,
not from the clock.

The library (icalendar) is used here only. Its own time zone tables start daylight saving at the local time
after the change where RFC 5545 (3.6.5) asks for the time before it, so the tables are made here from the
zone data.
"""

from __future__ import annotations

import datetime as dt
import re
from collections.abc import Iterable
from dataclasses import dataclass
from itertools import groupby
from typing import Any
from zoneinfo import ZoneInfo

from crossplan.bench.choice import check_person, chosen_days, chosen_tasks, first_day, natural
from crossplan.bench.words import WALKING_ORDER, Day, count, keep_rule, listed, parents_text, warm
from crossplan.errors import InputError
from crossplan.plan.model import Plan, StepRecord, TaskRecord

#: An entry whose tasks bring no minutes with them is shown this long.
SHORTEST_MINUTES = 15
DOING = {
    "clear": "clear",
    "collect": "collect from",
    "shift": "move to another temperature:",
    "food": "special food for",
    "expand": "expand stock for",
    "virgins": "virgins from stock for",
    "set up": "set up",
    "assay": "assay",
    "discard": "discard",
}


@dataclass(frozen=True)
class Entry:
    """One entry: its identity, hour, length in minutes, person, and what it says."""

    uid: str
    start: dt.datetime
    minutes: int
    person: str
    summary: str
    description: str

    def same_as(self, event: Any) -> bool:
        """Whether an event of an earlier file says the same."""
        return (
            _text(event, "SUMMARY") == self.summary
            and _text(event, "DESCRIPTION") == self.description
            and event.decoded("DTSTART").replace(tzinfo=None) == self.start
            and event.decoded("DURATION") == dt.timedelta(minutes=self.minutes)
        )


def calendar_ics(
    plan: Plan,
    dates: Iterable[Day] | None = None,
    person: str | None = None,
    alarm_minutes: int | None = None,
    previous: Plan | bytes | None = None,
) -> bytes:
    """Return the calendar file.

    Args:
        plan: the plan; its time zone (`plan.screen.timezone`) holds for all hours, and without one they are
        local
            times of whoever reads the file.
        dates: only these days; None for all.
        person: only this person; None for everybody.
        alarm_minutes: remind so many minutes before each entry; None for no reminder.
        previous: what was given out before, as a plan or, better, as the very file (made for the same days
        and
            person). Entries that changed get the next sequence number, entries that are gone are cancelled.
            A plan counts as given out once; only the file knows of more than one change.

    Raises InputError for an unknown person, day or time zone, or a previous file that cannot be read.
    """
    if previous is None:
        check_person(plan, person)
    zone = _zone(plan.screen.timezone)
    known = _previous_events(previous, dates, person)
    all_entries = {entry.uid: entry for entry in entries_of(plan, None, person)}
    wanted = {entry.uid for entry in entries_of(plan, dates, person)}
    moved_away = {uid for uid in known if uid in all_entries}
    events = [
        _event(all_entries[uid], zone, _stamp(plan), known.get(uid), alarm_minutes)
        for uid in sorted(wanted | moved_away, key=lambda u: (all_entries[u].start, natural(u)))
    ]
    events += [_cancelled(known[uid], _stamp(plan)) for uid in sorted(known, key=natural) if uid not in all_entries]
    return _calendar(plan, zone, events)


def entries_of(plan: Plan, dates: Iterable[Day] | None = None, person: str | None = None) -> list[Entry]:
    """Return the rounds and assays on these days (None: all) of this person (None: everybody), in order of
    time.

    Rounds are put together before they are chosen, so that an entry is the same whatever is asked for.
    """
    days = chosen_days(dates)
    tasks = [t for t in chosen_tasks(plan) if person is None or t.person == person]

    def round_of(task: TaskRecord) -> tuple[str, str, str, str]:
        return (task.date, task.time, task.person, task.target or task.step if task.kind == "assay" else "")

    rounds = [list(group) for _, group in groupby(sorted(tasks, key=round_of), key=round_of)]
    entries = [_entry(plan, tasks) for tasks in rounds if days is None or tasks[0].date in days]
    return sorted(entries, key=lambda e: (e.start, natural(e.uid)))


def _entry(plan: Plan, tasks: list[TaskRecord]) -> Entry:
    first = min(tasks, key=lambda t: natural(t.id))
    ordered = sorted(tasks, key=lambda t: (WALKING_ORDER.index(t.kind), natural(t.step), natural(t.id)))
    return Entry(
        uid=f"{_plain(first.id)}@{_plain(plan.screen.name)}.crossplan",
        start=dt.datetime.fromisoformat(f"{first.date}T{first.time}"),
        minutes=max(SHORTEST_MINUTES, sum(t.minutes for t in tasks)),
        person=first.person,
        summary=_summary(ordered),
        description="\n".join(_description(plan, ordered)),
    )


def _summary(tasks: list[TaskRecord]) -> str:
    """Return `Flies: clear S01 and S02; collect from S03`; above four steps of a kind only how many."""
    if tasks[0].kind == "assay":
        return f"Assay: {tasks[0].target or tasks[0].step}"
    parts = []
    for kind, group in groupby(tasks, key=lambda t: t.kind):
        steps = list(dict.fromkeys(t.step for t in group))
        parts.append(f"{DOING[kind]} {listed(steps) if len(steps) <= 4 else count(len(steps), 'cross', 'crosses')}")
    return f"Flies: {'; '.join(parts)}"


def _description(plan: Plan, tasks: list[TaskRecord]) -> list[str]:
    steps = {step.id: step for step in plan.steps}
    lines = []
    for kind, group in groupby(tasks, key=lambda t: t.kind):
        lines.append(kind.upper())
        lines += [_task_line(task, steps.get(task.step)) for task in group]
    if tasks[0].person:
        lines.append(f"Person: {tasks[0].person}")
    return lines


def _task_line(task: TaskRecord, step: StepRecord | None) -> str:
    parts = [task.step]
    if step and task.kind == "set up":
        parts.append(
            f"{parents_text(step.mother, step.father)}, {count(step.vials, 'vial')}, {warm(step.temperature_C)}"
        )
    if step and task.kind == "collect":
        parts.append(keep_rule(step.keep))
    if step and task.kind in ("clear", "discard"):
        parts.append(count(step.vials, "vial"))
    if task.target and task.kind != "assay":
        parts.append(task.target)
    return "- " + " – ".join(part for part in [", ".join(parts), task.note] if part)


def _plain(text: str) -> str:
    """Return a text with only letters, digits, dots and hyphens, as an identifier wants it."""
    return re.sub(r"[^\w.-]+", "-", text).strip("-") or "screen"


def _zone(name: str) -> ZoneInfo | None:
    if not name:
        return None
    try:
        return ZoneInfo(name)
    except (ValueError, OSError, KeyError):  # ZoneInfoNotFoundError is a KeyError
        raise InputError(
            f"there is no time zone {name!r}",
            "Write it as in Europe/Vienna or America/New_York; UTC is one too.",
        ) from None


def _stamp(plan: Plan) -> dt.datetime:
    day = first_day(plan) or dt.date(2000, 1, 1)
    return dt.datetime(day.year, day.month, day.day, tzinfo=dt.UTC)


def _previous_events(previous: Plan | bytes | None, dates: Iterable[Day] | None, person: str | None) -> dict[str, Any]:
    """Return the events that were given out before, by identity."""
    from icalendar import Calendar

    if previous is None:
        return {}
    if isinstance(previous, Plan):
        known_person = person if any(t.person == person for t in previous.tasks) else None
        if person is not None and known_person is None:
            return {}
        previous = calendar_ics(previous, dates, person)
    try:
        events = Calendar.from_ical(previous).walk("VEVENT")
        return {_text(event, "UID"): event for event in events}
    except (ValueError, KeyError, IndexError):
        raise InputError("the earlier calendar file cannot be read", "Give the file as crossplan wrote it.") from None


def _text(event: Any, name: str) -> str:
    return str(event.get(name, ""))


# --- writing ------------------------------------------------------------------------------------------------


def _event(
    entry: Entry, zone: ZoneInfo | None, stamp: dt.datetime, before: Any | None, alarm_minutes: int | None
) -> Any:
    from icalendar import Event

    changed = before is not None and not (entry.same_as(before) and _text(before, "STATUS") == "CONFIRMED")
    sequence = (int(before.get("SEQUENCE", 0)) if before is not None else 0) + changed
    event = Event()
    event.add("uid", entry.uid)
    event.add("dtstamp", stamp + dt.timedelta(minutes=sequence))
    event.add("dtstart", entry.start.replace(tzinfo=zone))
    event.add("duration", dt.timedelta(minutes=entry.minutes))
    event.add("summary", entry.summary)
    event.add("description", entry.description)
    event.add("sequence", sequence)
    event.add("status", "CONFIRMED")
    if alarm_minutes is not None:
        event.add_component(_alarm(entry, alarm_minutes))
    return event


def _alarm(entry: Entry, minutes: int) -> Any:
    from icalendar import Alarm

    if minutes < 0:
        raise InputError("a reminder cannot come after its entry", "Give minutes before the entry, 0 or more.")
    alarm = Alarm()
    alarm.add("action", "DISPLAY")
    alarm.add("description", entry.summary)
    alarm.add("trigger", -dt.timedelta(minutes=minutes))
    return alarm


def _cancelled(before: Any, stamp: dt.datetime) -> Any:
    """Return the cancellation of an event; one that was cancelled before stays as it is."""
    from icalendar import Event

    fresh = _text(before, "STATUS") != "CANCELLED"
    sequence = int(before.get("SEQUENCE", 0)) + fresh
    event = Event()
    for name in ("UID", "DTSTART", "DURATION", "SUMMARY", "DESCRIPTION"):
        event[name] = before[name]
    event.add("dtstamp", stamp + dt.timedelta(minutes=sequence))
    event.add("sequence", sequence)
    event.add("status", "CANCELLED")
    return event


def _calendar(plan: Plan, zone: ZoneInfo | None, events: list[Any]) -> bytes:
    from icalendar import Calendar

    calendar = Calendar()
    calendar.add("version", "2.0")
    calendar.add("prodid", "-//crossplan//fly crosses//EN")
    calendar.add("method", "PUBLISH")
    calendar.add("x-wr-calname", f"Flies: {plan.screen.name}")
    starts = [event.decoded("DTSTART").date() for event in events]
    if zone is not None and zone.key != "UTC" and starts:
        calendar.add("x-wr-timezone", zone.key)
        calendar.add_component(_timezone(zone, min(starts), max(starts)))
    for event in events:
        calendar.add_component(event)
    return bytes(calendar.to_ical())


@dataclass(frozen=True, slots=True)
class _Change:
    """A change of local time: the moment in UTC, and the offsets before and after it."""

    at: dt.datetime
    before: dt.timedelta
    after: dt.timedelta


def _timezone(zone: ZoneInfo, first: dt.date, last: dt.date) -> Any:
    """Return the time zone for the days from `first` to `last`, one observance a change of the clocks."""
    from icalendar import Timezone

    component = Timezone()
    component.add("tzid", zone.key)
    begin = dt.datetime(first.year, 1, 1, tzinfo=dt.UTC) - dt.timedelta(days=2)
    offset = _offset(zone, begin)
    component.add_component(_observance(zone, _Change(begin, offset, offset)))
    for change in _changes(zone, begin, dt.datetime(last.year, 12, 31, tzinfo=dt.UTC)):
        component.add_component(_observance(zone, change))
    return component


def _observance(zone: ZoneInfo, change: _Change) -> Any:
    """Return STANDARD or DAYLIGHT; it starts at the local time before the change (RFC 5545, 3.6.5)."""
    from icalendar import TimezoneDaylight, TimezoneStandard

    local = change.at.astimezone(zone)
    part = TimezoneDaylight() if local.dst() else TimezoneStandard()
    part.add("dtstart", (change.at + change.before).replace(tzinfo=None))
    part.add("tzoffsetfrom", change.before)
    part.add("tzoffsetto", change.after)
    part.add("tzname", local.tzname())
    return part


def _changes(zone: ZoneInfo, begin: dt.datetime, end: dt.datetime) -> list[_Change]:
    changes = []
    while begin < end:
        after = begin + dt.timedelta(days=1)
        if _offset(zone, begin) != _offset(zone, after):
            changes.append(_Change(_moment(zone, begin, after), _offset(zone, begin), _offset(zone, after)))
        begin = after
    return changes


def _moment(zone: ZoneInfo, low: dt.datetime, high: dt.datetime) -> dt.datetime:
    """Return the first minute of the new offset, found by halving."""
    old = _offset(zone, low)
    while high - low > dt.timedelta(minutes=1):
        middle = low + dt.timedelta(minutes=(high - low) // dt.timedelta(minutes=2))
        low, high = (middle, high) if _offset(zone, middle) == old else (low, middle)
    return high


def _offset(zone: ZoneInfo, moment: dt.datetime) -> dt.timedelta:
    return moment.astimezone(zone).utcoffset() or dt.timedelta(0)
