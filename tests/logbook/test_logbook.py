"""The journal, and what it changes: progress of cultures, and tasks that move."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest

from crossplan import api
from crossplan.errors import OutputError
from crossplan.logbook.entry import Entry, Event
from crossplan.logbook.journal import add_entry, read_journal
from crossplan.logbook.progress import days_late, moved_tasks, progress

DAY = dt.date(2027, 1, 22)


class TestJournal:
    def test_entries_come_back_in_order(self, tmp_path: Path) -> None:
        path = tmp_path / "journal.csv"
        entries = [
            Entry(DAY, "S01", Event.SET_UP, person="Maren"),
            Entry(DAY, "S02", Event.FAILED, count=2, note='dry food, "old" batch\nsecond line'),
        ]
        for entry in entries:
            add_entry(path, entry)
        assert read_journal(path) == (tuple(entries), ())
        assert [p.name for p in tmp_path.iterdir()] == ["journal.csv"]

    def test_a_missing_journal_is_empty(self, tmp_path: Path) -> None:
        assert read_journal(tmp_path / "none.csv") == ((), ())

    def test_a_bad_line_is_named_and_stops_no_other(self, tmp_path: Path) -> None:
        path = tmp_path / "journal.csv"
        path.write_text("date,step,event,count\n2027-01-22,S01,set up,\nyesterday,S01,flies,\n2027-02-01,S01,flies,x\n")
        entries, problems = read_journal(path)
        assert [e.event for e in entries] == [Event.SET_UP]
        assert [(p.line, p.column, p.text) for p in problems] == [(3, "date", "yesterday"), (4, "count", "x")]
        with pytest.raises(OutputError, match="cannot be read"):
            add_entry(path, Entry(DAY, "S01", Event.NOTE))


class TestProgress:
    def test_states_follow_the_entries(self, demo_plan: api.Planned) -> None:
        plan = demo_plan.plan
        step = plan.steps[0]
        assert step.dates is not None
        day = dt.date.fromisoformat(step.dates.set_up)
        assert progress(plan, [], day)[0].state == "not set up"
        set_up = Entry(day, step.id, Event.SET_UP)
        assert progress(plan, [set_up], day)[0].state == "growing"
        some = Entry(day, step.id, Event.COLLECTED, count=step.flies_needed - 1)
        assert progress(plan, [set_up, some], day)[0].state == "collecting"
        last = Entry(day, step.id, Event.COLLECTED, count=1)
        assert progress(plan, [set_up, some, last], day)[0].state == "enough"
        failed = Entry(day, step.id, Event.FAILED, count=step.vials)
        assert progress(plan, [set_up, failed], day)[0].state == "failed"

    def test_late_flies_move_what_depends_on_them(self, demo_plan: api.Planned) -> None:
        plan = demo_plan.plan
        child = next(s for s in plan.steps if s.father.step is not None)
        parent = plan.step(child.father.step or "")
        assert parent.dates is not None
        seen = dt.date.fromisoformat(parent.dates.collect_from) + dt.timedelta(days=2)
        entry = Entry(seen, parent.id, Event.FLIES)
        assert days_late(parent, [entry]) == 2
        moved = {m.task.id: m for m in moved_tasks(plan, [entry])}
        set_up = moved[f"{child.id}-set-up"]
        assert set_up.because == parent.id
        assert (set_up.to - dt.date.fromisoformat(set_up.task.date)).days == 2
        others = {m.task.step for m in moved.values()}
        assert not others & {s.id for s in plan.steps if s.generation == 1 and s.id != parent.id}

    def test_nothing_moves_when_all_is_on_time(self, demo_plan: api.Planned) -> None:
        assert moved_tasks(demo_plan.plan, []) == ()
