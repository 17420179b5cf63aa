"""The report of one day: its work, what is overdue, what runs late, and what was left out of it."""

from __future__ import annotations

import datetime as dt
import json

import pytest

from crossplan.errors import InputError, Problem, Severity
from crossplan.logbook.day import DayReport, day_json, day_report, new_entry
from crossplan.logbook.entry import Entry, Event
from tests.bench.example_plan import example_plan


def entry(day: str, step: str, event: str, count: int | None = None, row: int = 0) -> Entry:
    return Entry(dt.date.fromisoformat(day), step, Event.read(event), count, row=row)


def report(day: str, *entries: Entry, person: str | None = None) -> DayReport:
    return day_report(example_plan(), entries, dt.date.fromisoformat(day), person, journal="journal.csv")


SET_UP = (entry("2027-02-22", "S01", "set up"), entry("2027-02-22", "S02", "set up"))
CLEARED = (entry("2027-02-26", "S01", "cleared"), entry("2027-02-26", "S02", "cleared"))


class TestWork:
    def test_the_tasks_of_the_day_in_walking_order(self) -> None:
        assert [t.id for t in report("2027-02-22").tasks] == ["S01-set-up-1", "S02-set-up-1"]
        assert report("2027-02-23").tasks == ()

    def test_those_that_the_journal_shows_are_done(self) -> None:
        found = report("2027-02-22", SET_UP[0])
        assert found.done == {"S01-set-up-1"}
        assert not found.needs_a_person

    def test_one_persons_work(self) -> None:
        found = report("2027-03-12", *SET_UP, person="Tomas")
        assert {t.person for t in (*found.tasks, *found.overdue)} == {"Tomas"}
        assert {s.step for s in found.cultures} == {"S02"}

    def test_a_person_without_work_is_refused_with_the_names_there_are(self) -> None:
        with pytest.raises(InputError, match="tomas") as caught:
            report("2027-02-22", person="tomas")
        assert "Ida, Tomas" in caught.value.hint


class TestOverdue:
    def test_nothing_while_nobody_keeps_a_journal(self) -> None:
        found = report("2027-03-20")
        assert found.overdue == ()
        assert not found.needs_a_person

    def test_earlier_tasks_without_an_entry(self) -> None:
        found = report("2027-03-01", *SET_UP, CLEARED[1])
        assert [t.id for t in found.overdue] == ["S01-clear-1"]
        assert found.needs_a_person

    def test_a_task_of_the_day_itself_is_not_yet(self) -> None:
        assert report("2027-02-26", *SET_UP).overdue == ()

    def test_food_and_assays_leave_no_entry_and_are_never_called_so(self) -> None:
        found = report("2027-05-01", SET_UP[0])
        assert {t.kind for t in found.overdue} == {"set up", "clear", "collect", "discard"}

    def test_what_moves_is_not_overdue_too(self) -> None:
        found = report("2027-03-06", *SET_UP, *CLEARED, entry("2027-03-06", "S01", "flies"))
        moved = {m.task.id for m in found.moved}
        assert {"S01-collect-1", "S01-collect-2"} <= moved
        assert {t.step for t in found.overdue} == {"S02"}
        assert not moved & {t.id for t in found.overdue}

    def test_a_culture_that_failed_is_to_do_again_not_overdue(self) -> None:
        found = report("2027-03-06", *SET_UP, entry("2027-03-04", "S01", "failed"))
        assert "S01" not in {t.step for t in found.overdue}
        assert [(s.step, s.state) for s in found.cultures] == [("S01", "failed")]
        assert "S01-set-up-1" in {m.task.id for m in found.moved}


class TestCultures:
    def test_one_that_is_collected_on_its_days_needs_nobody(self) -> None:
        found = report("2027-03-04", *SET_UP, *CLEARED, entry("2027-03-04", "S01", "flies"))
        assert [(s.step, s.state, s.days_late) for s in found.cultures] == [("S01", "collecting", 0)]
        assert not found.needs_a_person

    def test_one_that_gave_enough_is_no_longer_named(self) -> None:
        late = (entry("2027-03-06", "S01", "flies"), entry("2027-03-07", "S01", "collected", 20))
        found = report("2027-03-07", *SET_UP, *late)
        assert {m.because for m in found.moved} == {"S01"}
        assert "S01" not in {s.step for s in found.cultures}

    def test_one_that_is_late_needs_somebody(self) -> None:
        found = report("2027-03-06", *SET_UP, entry("2027-03-06", "S01", "flies"))
        assert [(s.step, s.days_late) for s in found.cultures] == [("S01", 2)]
        assert found.needs_a_person


class TestEntriesLeftOut:
    @pytest.mark.parametrize(
        ("wrong", "column", "text"),
        [
            (entry("2027-03-01", "S1", "flies", row=4), "step", "S1"),
            (entry("2028-02-22", "S01", "flies", row=4), "date", "2028-02-22"),
        ],
    )
    def test_are_named_with_their_place_and_change_nothing(self, wrong: Entry, column: str, text: str) -> None:
        found, without = report("2027-03-02", *SET_UP, wrong), report("2027-03-02", *SET_UP)
        assert [(p.path, p.line, p.column, p.text) for p in found.problems] == [("journal.csv", 4, column, text)]
        assert (found.moved, found.overdue, found.cultures) == (without.moved, without.overdue, without.cultures)
        assert found.needs_a_person

    def test_do_not_make_a_journal(self) -> None:
        assert report("2027-03-20", entry("2027-02-22", "S99", "set up")).overdue == ()

    def test_faults_of_the_file_are_handed_on(self) -> None:
        fault = Problem("journal", Severity.WARNING, "not understood", path="journal.csv", line=3)
        found = day_report(example_plan(), SET_UP, dt.date(2027, 2, 23), problems=[fault])
        assert found.problems == (fault,)


class TestNewEntry:
    def test_is_read_as_people_write(self) -> None:
        made = new_entry(example_plan(), " s03", "Set-up", dt.date(2027, 3, 8), person="Ida")
        assert made == Entry(dt.date(2027, 3, 8), "S03", Event.SET_UP, person="Ida")

    @pytest.mark.parametrize(("step", "event", "hint"), [("S99", "flies", "S01 to S05"), ("S01", "gone", "discarded")])
    def test_what_the_plan_does_not_know_is_refused(self, step: str, event: str, hint: str) -> None:
        with pytest.raises(InputError) as caught:
            new_entry(example_plan(), step, event, dt.date(2027, 3, 8))
        assert hint in caught.value.hint


def test_the_document_holds_the_whole_report() -> None:
    found = report(
        "2027-03-08", *SET_UP, *CLEARED, entry("2027-03-06", "S01", "flies"), entry("2027-03-07", "S9", "note")
    )
    document = json.loads(json.dumps(day_json(found)))
    assert list(document) == ["date", "tasks", "overdue", "cultures", "moved", "problems"]
    assert document["date"] == "2027-03-08"
    assert [t["id"] for t in document["tasks"]] == [t.id for t in found.tasks]
    assert {t["done"] for t in document["tasks"]} == {False}
    assert [t["id"] for t in document["overdue"]] == [t.id for t in found.overdue] != []
    assert {"step": "S01", "state": "collecting", "collected": 0, "needed": 20, "days_late": 2} in document["cultures"]
    assert {"task": "S01-discard-1", "from": "2027-03-12", "to": "2027-03-14", "because": "S01"} in document["moved"]
    assert document["problems"] == ["journal.csv, column step: the plan has no cross 'S9'; the row was left out"]
