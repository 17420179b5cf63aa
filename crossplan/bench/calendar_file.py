"""The tasks of a plan as a calendar file (iCalendar, RFC 5545).

One entry is one round: all that one person does at one hour of one day, in walking order, since nobody
wants forty entries at nine o'clock. Assays are entries of their own, because they are at the rig and others
need to see them. Emptying vials in the morning, for virgins later that day, is part of the morning's round.

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
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from itertools import groupby
from typing import Any
from zoneinfo import ZoneInfo

from crossplan.bench.choice import check_person, chosen_days, chosen_tasks, first_day, natural, people_of
from crossplan.bench.walk import EMPTY, ORDER, Stop, vials_for, walk_of
from crossplan.bench.words import Day, count, keep_rule, listed, parents_text, warm
from crossplan.errors import InputError
from crossplan.plan.model import Plan

#: What the identity of every entry ends with: entries of others are never touched.
OURS = ".crossplan"
#: An entry whose tasks bring no minutes with them is shown this long.
SHORTEST_MINUTES = 15
DOING = {
    EMPTY: "empty vials of",
    "clear": "clear",
    "collect": "collect from",
    "shift": "move to another temperature:",
    "food": "special food for",
    "expand": "expand",
    "virgins": "virgins from",
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

    def same_as(self, event: Any, zone: ZoneInfo | None) -> bool:
        """Whether an event of an earlier file says the same, at the same hour of the same time zone."""
        try:
            start, length = event.decoded("DTSTART"), event.decoded("DURATION")
        except (KeyError, ValueError):
            return False
        return (
            _text(event, "SUMMARY") == self.summary
            and _text(event, "DESCRIPTION") == self.description
            and isinstance(start, dt.datetime)
            and start == self.start.replace(tzinfo=zone)
            and (start.tzinfo is None) == (zone is None)
            and length == dt.timedelta(minutes=self.minutes)
        )


def calendar_ics(
    plan: Plan,
    dates: Iterable[Day] | None = None,
    person: str | None = None,
    alarm_minutes: int | Sequence[int] | None = None,
    previous: Plan | bytes | None = None,
) -> bytes:
    """Return the calendar file.

    Args:
        plan: the plan; its time zone (`plan.screen.timezone`) holds for all hours, and without one they are
        local
            times of whoever reads the file.
        dates: only these days; None for all.
        person: only this person; None for everybody.
        alarm_minutes: remind so many minutes before each entry, once or several times; None for no reminder.
        previous: what was given out before, as a plan or, better, as the very file (made for the same days
        and
            person). Entries that changed get the next sequence number, entries that are gone are cancelled; what
            stands in the file and is none of ours is left alone.
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
    return _calendar(plan, zone, events, person)


def calendars_by_person(
    plan: Plan,
    dates: Iterable[Day] | None = None,
    alarm_minutes: int | Sequence[int] | None = None,
    previous: Plan | Mapping[str, bytes] | None = None,
) -> dict[str, bytes]:
    """Return a calendar file for each person of the plan, and for those whose work of before is gone, by name.

    `previous` is the earlier plan, or the earlier files by person.

    Raises InputError for a plan that names nobody, and as `calendar_ics` does.
    """
    before = set(people_of(previous)) if isinstance(previous, Plan) else set(previous or ())
    people = sorted(before | set(people_of(plan)))
    if not people:
        raise InputError("the plan names nobody", 'Name people in the screen file: [calendar] people = ["..."].')
    days = None if dates is None else list(dates)
    found = {}
    for who in people:
        earlier = previous if isinstance(previous, Plan) or previous is None else previous.get(who)
        found[who] = calendar_ics(plan, days, who, alarm_minutes, earlier)
    return found


def entries_of(plan: Plan, dates: Iterable[Day] | None = None, person: str | None = None) -> list[Entry]:
    """Return the rounds and assays on these days (None: all) of this person (None: everybody), in order of
    time.

    Rounds are put together before they are chosen, so that an entry is the same whatever is asked for.
    """
    days = chosen_days(dates)
    tasks = sorted((t for t in chosen_tasks(plan) if person is None or t.person == person), key=lambda t: t.person)
    entries = []
    for who, theirs in groupby(tasks, key=lambda t: t.person):
        for (date, time, _), stops in groupby(sorted(walk_of(plan, theirs), key=_round), key=_round):
            if days is None or date in days:
                entries.append(_entry(plan, date, time, who, list(stops)))
    return sorted(entries, key=lambda e: (e.start, natural(e.uid)))


def _round(stop: Stop) -> tuple[str, str, str]:
    """Return what the stops of one entry have in common: day and hour, and for an assay its target."""
    task = stop.tasks[0]
    return (stop.date, stop.time, task.target or task.step if stop.kind == "assay" else "")


def _entry(plan: Plan, date: str, time: str, person: str, stops: list[Stop]) -> Entry:
    ids = sorted((t.id for s in stops if s.kind != EMPTY for t in s.tasks), key=natural)
    # a round that only empties vials is named after the first collection that it is for
    first = ids[0] if ids else min((t.id for s in stops for t in s.tasks), key=natural) + "-empty"
    ordered = sorted(stops, key=lambda s: (ORDER.index(s.kind), natural(s.place)))
    return Entry(
        uid=f"{_plain(first)}@{_plain(plan.screen.name)}{OURS}",
        start=dt.datetime.fromisoformat(f"{date}T{time}"),
        minutes=max(SHORTEST_MINUTES, sum(s.minutes for s in stops)),
        person=person,
        summary=_summary(ordered),
        description="\n".join(_description(plan, ordered, person)),
    )


def _summary(stops: list[Stop]) -> str:
    """Return `Flies: clear S01 and S02; collect from S03`; above four of a kind only how many."""
    first = stops[0]
    if first.kind == "assay":
        return f"Assay: {first.tasks[0].target or first.place}"
    parts = []
    for kind, group in groupby(stops, key=lambda s: s.kind):
        here = list(group)
        places = list(dict.fromkeys(s.place for s in here))
        many = count(
            len(places), "stock" if all(s.stock for s in here) else "cross", "" if here[0].stock else "crosses"
        )
        parts.append(f"{DOING[kind]} {listed(places) if len(places) <= 4 else many}")
    return f"Flies: {'; '.join(parts)}"


def _description(plan: Plan, stops: list[Stop], person: str) -> list[str]:
    lines = []
    for kind, group in groupby(stops, key=lambda s: s.kind):
        lines.append(kind.upper())
        lines += [_stop_line(plan, stop) for stop in group]
    if person:
        lines.append(f"Person: {person}")
    return lines


def _stop_line(plan: Plan, stop: Stop) -> str:
    step = next((s for s in plan.steps if s.id == stop.place), None)
    task, vials = stop.tasks[0], sum(vials_for(plan, stop).values())
    where = next((s.mother.location for s in plan.steps if stop.stock and s.mother.stock == stop.stock), "")
    parts = [f"{stop.place} ({where})" if where else stop.place]
    if stop.kind in (EMPTY, "expand", "virgins", "clear", "discard") and vials:
        parts.append(count(vials, "vial"))
    if stop.stock and vials:
        parts.append(f"for {', '.join(stop.steps)}")
    if stop.kind == EMPTY:
        parts.append(f"virgins at {stop.then}")
    if step and stop.kind == "set up":
        parts.append(
            f"{parents_text(step.mother, step.father)}, {count(step.vials, 'vial')}, {warm(step.temperature_C)}"
        )
    if step and stop.kind == "collect":
        parts.append(keep_rule(step.keep))
    if task.target and stop.kind != "assay":
        parts.append(task.target)
    # the notes of what is done to a stock say no more than this line and the hour of emptying
    note = "" if stop.stock and vials else stop.note
    return "- " + " – ".join(part for part in [", ".join(parts), note] if part)


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
        return {_text(event, "UID"): event for event in events if _text(event, "UID").endswith(OURS)}
    except (ValueError, KeyError, IndexError):
        raise InputError("the earlier calendar file cannot be read", "Give the file as crossplan wrote it.") from None


def _text(event: Any, name: str) -> str:
    return str(event.get(name, ""))


# --- writing ------------------------------------------------------------------------------------------------


def _event(
    entry: Entry,
    zone: ZoneInfo | None,
    stamp: dt.datetime,
    before: Any | None,
    alarm_minutes: int | Sequence[int] | None,
) -> Any:
    from icalendar import Event

    changed = before is not None and not (entry.same_as(before, zone) and _text(before, "STATUS") == "CONFIRMED")
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
    several = (alarm_minutes,) if isinstance(alarm_minutes, int) else alarm_minutes or ()
    for minutes in sorted(set(several), reverse=True):
        event.add_component(_alarm(entry, minutes))
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
        if name in before:
            event[name] = before[name]
    event.add("dtstamp", stamp + dt.timedelta(minutes=sequence))
    event.add("sequence", sequence)
    event.add("status", "CANCELLED")
    return event


def _calendar(plan: Plan, zone: ZoneInfo | None, events: list[Any], person: str | None) -> bytes:
    from icalendar import Calendar

    calendar = Calendar()
    calendar.add("version", "2.0")
    calendar.add("prodid", "-//crossplan//fly crosses//EN")
    calendar.add("method", "PUBLISH")
    calendar.add("x-wr-calname", f"Flies: {plan.screen.name}{f' ({person})' if person else ''}")
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
