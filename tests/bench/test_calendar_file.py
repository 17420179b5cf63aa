from __future__ import annotations

import datetime as dt
import re

import ics
import pytest
from example_plan import example_plan, virgins_plan
from hypothesis import given
from hypothesis import strategies as st

from crossplan.bench.calendar_file import calendar_ics, calendars_by_person, entries_of
from crossplan.errors import InputError
from crossplan.plan.model import Plan


def events(data: bytes) -> dict[str, ics.Event]:
    """Read a calendar file with another library."""
    return {event.uid: event for event in ics.Calendar(data.decode()).events}


def properties(data: bytes, name: str) -> list[str]:
    """Return the values of a property in the order of the file, lines unfolded."""
    lines = data.decode().replace("\r\n ", "").split("\r\n")
    return [line.split(":", 1)[1] for line in lines if re.match(rf"{name}[:;]", line)]


def moved(plan: Plan, task_id: str, day: str) -> Plan:
    """Return the plan with one task on another day."""
    tasks = [t.model_copy(update={"date": day}) if t.id == task_id else t for t in plan.tasks]
    return plan.model_copy(update={"tasks": tasks})


def without(plan: Plan, *task_ids: str) -> Plan:
    """Return the plan without these tasks."""
    return plan.model_copy(update={"tasks": [t for t in plan.tasks if t.id not in task_ids]})


def test_the_form_is_that_of_rfc_5545() -> None:
    data = calendar_ics(example_plan(), alarm_minutes=30)
    assert data.endswith(b"END:VCALENDAR\r\n")
    assert data.count(b"\n") == data.count(b"\r\n") == data.count(b"\r")
    for line in data.split(b"\r\n"):
        assert len(line) <= 75
        line.decode()  # a fold inside a character would fail here
    for line in data.decode().replace("\r\n ", "").split("\r\n")[:-1]:
        assert re.match(r"[A-Z-]+(;[A-Z-]+=[^:;]+)*:", line), line
    count = data.count(b"BEGIN:VEVENT")
    assert count == len(events(data)) == len(properties(data, "UID")) == data.count(b"BEGIN:VALARM")
    assert len(properties(data, "DTSTAMP")) == count


def test_all_tasks_are_there_and_each_once() -> None:
    plan = example_plan()
    text = "\n".join(e.description for e in entries_of(plan))
    assert len(re.findall(r"^- ", text, re.MULTILINE)) == len(plan.tasks)


def test_one_entry_holds_a_round_and_an_assay_stands_alone() -> None:
    found = events(calendar_ics(example_plan(), dates=["2027-03-26"]))
    assert {e.name for e in found.values()} == {
        "Flies: clear S04 and S05",
        "Flies: discard S03",
    }
    assays = events(calendar_ics(example_plan(), dates=["2027-04-08"]))
    assert sorted(e.name for e in assays.values()) == [
        "Assay: K12 x Q07 > CsChrimson",
        "Assay: empty > CsChrimson",
    ]


def test_a_round_lists_its_tasks_in_walking_order_and_adds_up_the_minutes() -> None:
    plan = example_plan()
    tasks = [
        t.model_copy(update={"date": "2027-03-08", "time": "09:00", "person": "Ida", "minutes": 10})
        for t in plan.tasks
        if t.id in ("S01-discard-1", "S02-clear-1", "S03-collect-1", "S03-set-up-1")
    ]
    (entry,) = entries_of(plan.model_copy(update={"tasks": tasks}))
    assert re.findall(r"^[A-Z ]+$", entry.description, re.MULTILINE) == [
        "CLEAR",
        "COLLECT",
        "SET UP",
        "DISCARD",
    ]
    assert entry.minutes == 40


def test_text_is_escaped_and_comes_back_as_it_was() -> None:
    plan = example_plan()
    note = 'a; b, c \\ d: "e"\nBEGIN:VEVENT ♀ × ♂'
    plan.tasks[0] = plan.tasks[0].model_copy(update={"note": note})
    data = calendar_ics(plan)
    assert any(note in (e.description or "") for e in events(data).values())
    assert data.count(b"\nBEGIN:VEVENT") == calendar_ics(example_plan()).count(b"\nBEGIN:VEVENT")


@given(st.text(max_size=300))
def test_no_note_breaks_the_file(note: str) -> None:
    plan = example_plan()
    plan = plan.model_copy(update={"tasks": [plan.tasks[0].model_copy(update={"note": note})]})
    data = calendar_ics(plan)
    assert len(properties(data, "UID")) == 1
    assert all(len(line) <= 75 for line in data.split(b"\r\n"))


# --- time ---------------------------------------------------------------------------------------------------


def test_hours_are_local_before_and_after_the_clocks_change() -> None:
    """Vienna goes from UTC+1 to UTC+2 on 28 Mar 2027 at 01:00 UTC."""
    found = events(calendar_ics(example_plan(), person="Tomas"))
    winter = found["S04-clear-1@red-light-batch-1.crossplan"].begin
    summer = found["S04-collect-1@red-light-batch-1.crossplan"].begin
    assert winter.isoformat() == "2027-03-26T09:00:00+01:00"
    assert summer.isoformat() == "2027-04-01T09:00:00+02:00"


def test_the_time_zone_says_when_the_clocks_change() -> None:
    """RFC 5545, 3.6.5: the start of an observance is the local time by the offset before the change."""
    lines = calendar_ics(example_plan()).decode().split("\r\n")
    at = lines.index("BEGIN:DAYLIGHT")
    assert lines[at + 1 : at + 5] == [
        "DTSTART:20270328T020000",
        "TZNAME:CEST",
        "TZOFFSETFROM:+0100",
        "TZOFFSETTO:+0200",
    ]


@pytest.mark.parametrize(
    ("zone", "change", "before", "after"),
    [
        ("America/New_York", "20270314T020000", "-0500", "-0400"),
        ("Australia/Lord_Howe", "20270404T020000", "+1100", "+1030"),
    ],
)
def test_other_time_zones(zone: str, change: str, before: str, after: str) -> None:
    plan = example_plan()
    plan = plan.model_copy(update={"screen": plan.screen.model_copy(update={"timezone": zone})})
    data = calendar_ics(plan).decode()
    assert f"DTSTART:{change}" in data
    part = data.split(f"DTSTART:{change}\r\n")[1]
    assert f"TZOFFSETFROM:{before}\r\nTZOFFSETTO:{after}\r\n" in part[:80]


@pytest.mark.parametrize(("zone", "start"), [("UTC", ":20270222T163000Z"), ("", ":20270222T163000")])
def test_utc_and_no_time_zone(zone: str, start: str) -> None:
    plan = example_plan()
    plan = plan.model_copy(update={"screen": plan.screen.model_copy(update={"timezone": zone})})
    data = calendar_ics(plan)
    assert b"VTIMEZONE" not in data
    assert f"DTSTART{start}\r\n".encode() in data


@pytest.mark.parametrize("zone", ["Nowhere/Land", "../etc", "Europe/"])
def test_an_unknown_time_zone_is_refused(zone: str) -> None:
    plan = example_plan()
    plan = plan.model_copy(update={"screen": plan.screen.model_copy(update={"timezone": zone})})
    with pytest.raises(InputError, match="time zone"):
        calendar_ics(plan)


# --- made again ---------------------------------------------------------------------------------------------


def test_same_plan_same_bytes_and_no_clock() -> None:
    data = calendar_ics(example_plan())
    assert data == calendar_ics(example_plan())
    assert set(properties(data, "DTSTAMP")) == {"20270222T000000Z"}


def test_an_entry_that_moves_keeps_its_identity_and_counts_up() -> None:
    first = calendar_ics(example_plan())
    plan = moved(example_plan(), "S03-discard-1", "2027-03-29")
    second = calendar_ics(plan, previous=first)
    uid = "S03-discard-1@red-light-batch-1.crossplan"
    assert set(events(first)) == set(events(second))
    assert events(second)[uid].begin.date() == dt.date(2027, 3, 29)
    sequence = dict(zip(properties(second, "UID"), properties(second, "SEQUENCE"), strict=True))
    assert sequence.pop(uid) == "1"
    assert set(sequence.values()) == {"0"}
    third = calendar_ics(moved(plan, "S03-discard-1", "2027-03-30"), previous=second)
    assert dict(zip(properties(third, "UID"), properties(third, "SEQUENCE"), strict=True))[uid] == "2"
    assert calendar_ics(plan, previous=second) == second


def test_an_earlier_plan_does_as_well_as_its_file() -> None:
    plan = without(moved(example_plan(), "S03-discard-1", "2027-03-29"), "S01-discard-1")
    assert calendar_ics(plan, previous=example_plan()) == calendar_ics(plan, previous=calendar_ics(example_plan()))


def test_an_entry_that_is_gone_is_cancelled_once() -> None:
    first = calendar_ics(example_plan())
    plan = without(example_plan(), "S01-discard-1")
    second = calendar_ics(plan, previous=first)
    part = second.decode().split("UID:S01-discard-1@")[1].split("END:VEVENT")[0]
    assert "STATUS:CANCELLED" in part
    assert "SEQUENCE:1" in part
    assert second.count(b"STATUS:CANCELLED") == 1
    assert calendar_ics(plan, previous=second) == second
    back = calendar_ics(example_plan(), previous=second)
    part = back.decode().split("UID:S01-discard-1@")[1].split("END:VEVENT")[0]
    assert "STATUS:CONFIRMED" in part
    assert "SEQUENCE:2" in part


def test_work_given_to_somebody_else_is_cancelled_in_the_first_calendar() -> None:
    plan = example_plan()
    tasks = [t.model_copy(update={"person": "Tomas"}) for t in plan.tasks]
    plan = plan.model_copy(update={"tasks": tasks})
    mine = calendar_ics(plan, person="Ida", previous=calendar_ics(example_plan(), person="Ida"))
    assert mine.count(b"STATUS:CANCELLED") == mine.count(b"BEGIN:VEVENT") > 0


def test_an_entry_that_moves_out_of_the_days_asked_for_is_moved_not_cancelled() -> None:
    plan = moved(example_plan(), "S03-discard-1", "2027-03-30")
    week = calendar_ics(plan, dates=["2027-03-26"], previous=calendar_ics(example_plan(), dates=["2027-03-26"]))
    assert b"STATUS:CANCELLED" not in week
    assert events(week)["S03-discard-1@red-light-batch-1.crossplan"].begin.date() == dt.date(2027, 3, 30)


def test_another_time_zone_is_a_change() -> None:
    first = calendar_ics(example_plan())
    plan = example_plan()
    moved_lab = plan.model_copy(update={"screen": plan.screen.model_copy(update={"timezone": "Asia/Tokyo"})})
    second = calendar_ics(moved_lab, previous=first)
    assert set(properties(second, "SEQUENCE")) == {"1"}
    assert calendar_ics(moved_lab, previous=second) == second


# --- choice and refusals ------------------------------------------------------------------------------------


def test_choice_by_person_and_day() -> None:
    ida = events(calendar_ics(example_plan(), person="Ida"))
    tomas = events(calendar_ics(example_plan(), person="Tomas"))
    assert ida
    assert not set(ida) & set(tomas)
    assert set(ida) | set(tomas) == set(events(calendar_ics(example_plan())))
    assert events(calendar_ics(example_plan(), dates=["2027-01-01"])) == {}


def test_reminders_come_before_the_entry() -> None:
    assert set(properties(calendar_ics(example_plan(), alarm_minutes=45), "TRIGGER")) == {"-PT45M"}
    assert b"VALARM" not in calendar_ics(example_plan())


def test_several_reminders() -> None:
    data = calendar_ics(example_plan(), alarm_minutes=[10, 1440, 10])
    assert sorted(set(properties(data, "TRIGGER"))) == ["-P1D", "-PT10M"]
    assert data.count(b"BEGIN:VALARM") == 2 * data.count(b"BEGIN:VEVENT")


def test_emptying_for_virgins_stands_in_the_morning() -> None:
    found = {e.start.strftime("%H:%M"): e for e in entries_of(virgins_plan(), ["2027-03-17"], "Tomas")}
    morning = found["08:30"]
    assert morning.summary == "Flies: empty vials of CsChrimson attP18; expand CsChrimson attP18"
    assert "- CsChrimson attP18 (tray 7, vial 1), 8 vials, for S04, S05, virgins at 15:00" in morning.description
    assert found["15:00"].summary == "Flies: virgins from CsChrimson attP18"
    (ida,) = [e for e in entries_of(virgins_plan(), ["2027-03-17"], "Ida") if e.start.hour == 8]
    assert ida.summary.startswith("Flies: empty vials of CsChrimson attP18 and S01")


def test_a_round_that_only_empties_has_an_identity_of_its_own() -> None:
    plan = virgins_plan()
    plan.tasks[:] = [t for t in plan.tasks if t.kind != "expand"]
    data = calendar_ics(plan, dates=["2027-03-17"], person="Tomas")
    assert sorted(events(data)) == [
        "S04-virgins-1-empty@red-light-batch-1.crossplan",
        "S04-virgins-1@red-light-batch-1.crossplan",
    ]


def test_two_libraries_read_the_same_hours_on_both_sides_of_the_change() -> None:
    import icalendar

    data = calendar_ics(example_plan(), alarm_minutes=15)
    ours = {str(e["UID"]): e.decoded("DTSTART").timestamp() for e in icalendar.Calendar.from_ical(data).walk("VEVENT")}
    theirs = {uid: e.begin.timestamp() for uid, e in events(data).items()}
    assert ours == theirs
    assert len({dt.datetime.fromtimestamp(t, dt.UTC).hour for t in ours.values()}) > 2


def test_a_file_for_each_person_and_for_who_has_left() -> None:
    before = calendars_by_person(example_plan())
    assert before == {who: calendar_ics(example_plan(), person=who) for who in ("Ida", "Tomas")}
    plan = example_plan()
    alone = plan.model_copy(update={"tasks": [t.model_copy(update={"person": "Ida"}) for t in plan.tasks],
                                    "steps": [s.model_copy(update={"person": "Ida"}) for s in plan.steps]})  # fmt: skip
    after = calendars_by_person(alone, previous=before)
    assert set(properties(after["Tomas"], "STATUS")) == {"CANCELLED"}
    assert after["Tomas"].count(b"BEGIN:VEVENT") == before["Tomas"].count(b"BEGIN:VEVENT")
    assert calendars_by_person(alone, previous=example_plan()) == after
    nobody = plan.model_copy(update={"tasks": [], "steps": []})
    with pytest.raises(InputError, match="nobody"):
        calendars_by_person(nobody)


def test_entries_of_others_in_the_earlier_file_are_left_alone() -> None:
    other = b"BEGIN:VEVENT\r\nUID:dentist@elsewhere\r\nDTSTART;VALUE=DATE:20270308\r\nSUMMARY:Dentist\r\nEND:VEVENT\r\n"
    first = calendar_ics(example_plan())
    mixed = first.replace(b"BEGIN:VEVENT", other + b"BEGIN:VEVENT", 1)
    assert calendar_ics(example_plan(), previous=mixed) == first


@pytest.mark.parametrize(
    ("options", "words"),
    [
        ({"person": "Nobody"}, "Nobody"),
        ({"dates": ["soon"]}, "soon"),
        ({"alarm_minutes": -5}, "reminder"),
        ({"previous": b"not a calendar"}, "earlier calendar"),
    ],
)
def test_what_cannot_be_used_is_refused_in_words(options: dict[str, object], words: str) -> None:
    with pytest.raises(InputError, match=words):
        calendar_ics(example_plan(), **options)  # type: ignore[arg-type]
