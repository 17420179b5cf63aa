"""Which days move: by how much, for whom, and for whom not."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence

from hypothesis import given
from hypothesis import strategies as st

from crossplan.logbook.entry import Entry, Event
from crossplan.logbook.progress import days_late, moved_tasks, progress
from crossplan.plan.model import Plan
from tests.bench.example_plan import example_plan

# S01 and S02 make the parents of S03, S03 a parent of S04; S05 is a control with both parents from the shelf


def entry(day: str, step: str, event: str, count: int | None = None) -> Entry:
    return Entry(dt.date.fromisoformat(day), step, Event.read(event), count)


def moves(entries: Sequence[Entry], today: str | None = None, plan: Plan | None = None) -> dict[str, set[int]]:
    """Return for each step that moves by how many days its tasks do."""
    found: dict[str, set[int]] = {}
    for m in moved_tasks(plan or example_plan(), entries, dt.date.fromisoformat(today) if today else None):
        found.setdefault(m.task.step, set()).add((m.to - dt.date.fromisoformat(m.task.date)).days)
    return found


def test_a_late_parent_moves_all_that_come_of_it() -> None:
    late = [entry("2027-03-06", "S01", "flies")]
    assert moves(late) == {"S01": {2}, "S03": {2}, "S04": {2}}
    assert {m.because for m in moved_tasks(example_plan(), late)} == {"S01"}


def test_the_later_parent_decides() -> None:
    both = [entry("2027-03-06", "S01", "flies"), entry("2027-03-09", "S02", "flies")]
    assert moves(both) == {"S01": {2}, "S02": {5}, "S03": {5}, "S04": {5}}


def test_one_early_parent_does_not_hurry_the_cross() -> None:
    assert moves([entry("2027-03-03", "S01", "flies"), entry("2027-03-04", "S02", "flies")]) == {"S01": {-1}}
    early = [entry("2027-03-03", "S01", "flies"), entry("2027-03-02", "S02", "flies")]
    assert moves(early) == {"S01": {-1}, "S02": {-2}, "S03": {-1}, "S04": {-1}}


def test_a_cross_that_is_set_up_no_longer_waits_for_its_parents() -> None:
    entries = [entry("2027-03-06", "S01", "flies"), entry("2027-03-09", "S03", "set up")]
    assert moves(entries) == {"S01": {2}, "S03": {1}, "S04": {1}}
    assert moves([entries[0], entry("2027-03-08", "S03", "set up")]) == {"S01": {2}}


def test_the_order_of_steps_in_the_plan_does_not_matter() -> None:
    plan = example_plan()
    plan.steps.reverse()
    assert moves([entry("2027-03-06", "S01", "flies")], plan=plan) == {"S01": {2}, "S03": {2}, "S04": {2}}


def test_a_late_culture_that_gave_enough_and_is_discarded_still_holds_up_what_follows() -> None:
    entries = [
        entry("2027-03-07", "S01", "flies"),
        entry("2027-03-09", "S01", "collected", 20),
        entry("2027-03-10", "S01", "discarded"),
    ]
    assert moves(entries) == {"S03": {3}, "S04": {3}}


def test_a_culture_that_failed_can_be_set_up_again_today() -> None:
    entries = [entry("2027-02-22", "S01", "set up"), entry("2027-03-04", "S01", "failed")]
    assert moves(entries, "2027-03-05") == {"S01": {11}, "S03": {11}, "S04": {11}}
    first = moved_tasks(example_plan(), entries, dt.date(2027, 3, 5))[0]
    assert (first.task.kind, first.to) == ("set up", dt.date(2027, 3, 5))


def test_one_failed_vial_of_four_moves_nothing() -> None:
    assert moves([entry("2027-02-22", "S01", "set up"), entry("2027-03-04", "S01", "failed", 1)], "2027-03-05") == {}


def test_what_is_done_or_past_does_not_move() -> None:
    plan, entries = example_plan(), [entry("2027-03-06", "S01", "flies"), entry("2027-03-06", "S01", "collected", 20)]
    assert {m.task.id for m in moved_tasks(plan, entries) if m.task.step == "S01"} == {"S01-discard-1"}
    assert {m.task.step for m in moved_tasks(plan, entries, dt.date(2027, 3, 15))} == {"S03", "S04"}


def test_nothing_moves_to_a_day_before_today() -> None:
    early = [entry("2027-03-01", "S01", "flies")]
    moved = {m.task.id: m.to for m in moved_tasks(example_plan(), early, dt.date(2027, 3, 2))}
    assert moved["S01-collect-1"] == dt.date(2027, 3, 2)
    assert moved["S01-collect-3"] == dt.date(2027, 3, 5)


def test_an_unknown_step_changes_nothing() -> None:
    plan, day = example_plan(), dt.date(2027, 3, 9)
    assert progress(plan, [entry("2027-03-09", "S99", "flies")], day) == progress(plan, [], day)
    assert moves([entry("2027-03-09", "S99", "flies")]) == {}


def test_days_late_of_one_step_sees_its_own_entries_only() -> None:
    step = example_plan().step("S01")
    entries = [entry("2027-03-06", "S01", "flies"), entry("2027-03-01", "S02", "flies")]
    assert days_late(step, entries) == 2


ENTRIES = st.lists(
    st.builds(
        Entry,
        date=st.dates(dt.date(2027, 2, 20), dt.date(2027, 4, 15)),
        step=st.sampled_from(["S01", "S02", "S03", "S04", "S05", "S99"]),
        event=st.sampled_from(Event),
        count=st.one_of(st.none(), st.integers(0, 30)),
    ),
    max_size=8,
)


@given(ENTRIES, st.dates(dt.date(2027, 2, 20), dt.date(2027, 4, 20)))
def test_whatever_was_written_every_step_has_a_state_and_moves_lead_forward(
    entries: list[Entry], today: dt.date
) -> None:
    plan = example_plan()
    assert [s.step for s in progress(plan, entries, today)] == [s.id for s in plan.steps]
    moved = moved_tasks(plan, entries, today)
    assert all(m.to >= today and m.to.isoformat() != m.task.date for m in moved)
    assert list(moved) == sorted(moved, key=lambda m: (m.to, m.task.time, m.task.id))
    assert len({m.task.id for m in moved}) == len(moved)
