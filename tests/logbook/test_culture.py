"""One culture by its entries: how it stands, how late it is, which tasks are done."""

from __future__ import annotations

import datetime as dt

import pytest

from crossplan.logbook.culture import Culture, cultures
from crossplan.logbook.entry import Entry, Event
from crossplan.plan.model import Plan
from tests.bench.example_plan import example_plan

# S01: 4 vials, 20 flies needed; set up 22 Feb, cleared 26 Feb, collected 4 to 8 March, discarded 12 March 2027


def entry(day: str, event: str, count: int | None = None, step: str = "S01") -> Entry:
    return Entry(dt.date.fromisoformat(day), step, Event.read(event), count)


def first(*entries: Entry, plan: Plan | None = None, step: str = "S01") -> Culture:
    return cultures(plan or example_plan(), entries)[step]


SET_UP = entry("2027-02-22", "set up")


class TestState:
    @pytest.mark.parametrize(
        ("entries", "today", "state"),
        [
            ([], "2027-03-20", "not set up"),
            ([entry("2027-02-22", "note")], "2027-03-20", "not set up"),
            ([SET_UP], "2027-03-08", "growing"),
            ([SET_UP], "2027-03-09", "short"),
            ([SET_UP, entry("2027-03-04", "flies")], "2027-03-08", "collecting"),
            ([SET_UP, entry("2027-03-07", "flies")], "2027-03-09", "collecting"),
            ([SET_UP, entry("2027-03-07", "flies")], "2027-03-12", "short"),
            ([entry("2027-03-04", "collected", 0)], "2027-03-08", "collecting"),
            ([entry("2027-03-04", "collected", 19)], "2027-03-08", "collecting"),
            ([entry("2027-03-04", "collected", 19), entry("2027-03-05", "collected", 1)], "2027-03-08", "enough"),
            ([entry("2027-03-04", "collected", 20), entry("2027-03-05", "failed")], "2027-03-08", "enough"),
            ([SET_UP, entry("2027-03-01", "failed", 3)], "2027-03-08", "growing"),
            ([SET_UP, entry("2027-03-01", "failed", 3), entry("2027-03-02", "failed", 1)], "2027-03-08", "failed"),
            ([SET_UP, entry("2027-03-01", "failed")], "2027-03-08", "failed"),
            ([SET_UP, entry("2027-03-01", "failed", 0)], "2027-03-08", "growing"),
            ([SET_UP, entry("2027-03-05", "discarded")], "2027-03-06", "short"),
            ([SET_UP, entry("2027-03-01", "failed"), entry("2027-03-03", "set up")], "2027-03-08", "growing"),
        ],
    )
    def test_follows_the_entries(self, entries: list[Entry], today: str, state: str) -> None:
        assert first(*entries).state(dt.date.fromisoformat(today)) == state

    def test_nothing_needed_is_not_enough_before_a_fly_is_seen(self) -> None:
        plan = example_plan()
        plan.steps[0] = plan.steps[0].model_copy(update={"flies_needed": 0})
        assert first(plan=plan).state(dt.date(2027, 3, 4)) == "not set up"

    def test_no_failed_vial_is_no_failure_where_the_plan_counts_no_vials(self) -> None:
        plan = example_plan()
        plan.steps[0] = plan.steps[0].model_copy(update={"vials": 0})
        assert not first(SET_UP, entry("2027-03-01", "failed", 0), plan=plan).has_failed
        assert first(SET_UP, entry("2027-03-01", "failed", 1), plan=plan).has_failed

    def test_the_order_of_the_journal_does_not_matter_between_days(self) -> None:
        again = [entry("2027-03-03", "set up"), entry("2027-03-01", "failed"), SET_UP]
        assert first(*again) == first(*reversed(again))
        assert first(*again).state(dt.date(2027, 3, 8)) == "growing"


class TestDaysLate:
    @pytest.mark.parametrize(
        ("entries", "days"),
        [
            ([], 0),
            ([SET_UP], 0),
            ([entry("2027-02-25", "set up")], 3),
            ([entry("2027-02-21", "set up")], -1),
            ([entry("2027-02-25", "set up"), entry("2027-03-05", "flies")], 1),
            ([SET_UP, entry("2027-03-07", "flies"), entry("2027-03-06", "flies")], 2),
            # collected on the last day says nothing of the first flies; collected early does
            ([SET_UP, entry("2027-03-08", "collected", 5)], 0),
            ([SET_UP, entry("2027-03-03", "collected", 5)], -1),
            ([entry("2027-02-25", "set up"), entry("2027-03-05", "collected", 5)], 1),
            # set up anew: the first go no longer counts
            ([SET_UP, entry("2027-03-02", "failed"), entry("2027-03-04", "set up")], 10),
            ([SET_UP, entry("2027-03-02", "discarded"), entry("2027-03-04", "set up")], 10),
            # one vial of four made good is no new culture
            ([SET_UP, entry("2027-03-02", "failed", 1), entry("2027-03-04", "set up")], 0),
        ],
    )
    def test_by_the_latest_sign(self, entries: list[Entry], days: int) -> None:
        assert first(*entries).days_late == days

    def test_a_step_without_dates_is_never_late(self) -> None:
        plan = example_plan()
        plan.steps[0] = plan.steps[0].model_copy(update={"dates": None})
        assert first(entry("2028-01-01", "flies"), plan=plan).days_late == 0


class TestSharedVials:
    """S02 takes its flies from the four vials of S01."""

    @pytest.fixture
    def plan(self) -> Plan:
        plan = example_plan()
        plan.steps[1] = plan.steps[1].model_copy(update={"same_vials_as": "S01", "vials": 0})
        return plan

    def test_what_happens_to_the_vials_happens_to_both(self, plan: Plan) -> None:
        late = entry("2027-03-06", "flies")
        assert first(SET_UP, late, plan=plan, step="S02").days_late == 2
        assert first(SET_UP, late, plan=plan, step="S02").state(dt.date(2027, 3, 6)) == "collecting"

    def test_one_failed_vial_of_the_four_is_no_failure(self, plan: Plan) -> None:
        assert not first(SET_UP, entry("2027-03-01", "failed", 1), plan=plan, step="S02").has_failed
        assert first(SET_UP, entry("2027-03-01", "failed", 4), plan=plan, step="S02").has_failed

    def test_flies_collected_are_each_steps_own(self, plan: Plan) -> None:
        entries = [SET_UP, entry("2027-03-04", "collected", 20), entry("2027-03-04", "collected", 3, step="S02")]
        assert first(*entries, plan=plan).collected == 20
        assert first(*entries, plan=plan, step="S02").collected == 3


class TestDone:
    def done(self, *entries: Entry) -> set[str]:
        plan = example_plan()
        found = first(*entries, plan=plan)
        return {t.id.removeprefix("S01-") for t in plan.tasks if t.step == "S01" and found.has_done(t)}

    def test_nothing_without_entries(self) -> None:
        assert self.done() == set()
        assert self.done(entry("2027-02-22", "note")) == set()

    def test_a_later_sign_shows_that_the_earlier_tasks_are_done(self) -> None:
        assert self.done(SET_UP) == {"set-up-1"}
        assert self.done(entry("2027-02-28", "pupae")) == {"set-up-1"}
        assert self.done(entry("2027-03-04", "flies")) == {"set-up-1", "clear-1"}

    def test_a_collection_is_done_by_one_on_its_day_or_later(self) -> None:
        both = {"set-up-1", "clear-1", "collect-1", "collect-2"}
        assert self.done(entry("2027-03-04", "collected", 5)) == both
        assert self.done(entry("2027-03-08", "collected", 5)) == both | {"collect-3"}
        assert self.done(entry("2027-03-03", "collected", 5)) == {"set-up-1", "clear-1"}
        assert self.done(entry("2027-03-04", "collected", 20)) == both | {"collect-3"}

    def test_a_culture_that_failed_is_all_to_do_again(self) -> None:
        assert self.done(SET_UP, entry("2027-02-26", "cleared"), entry("2027-03-01", "failed")) == set()
        assert self.done(SET_UP, entry("2027-03-01", "discarded")) == set()

    def test_a_culture_discarded_with_some_flies_is_over(self) -> None:
        assert len(self.done(entry("2027-03-04", "collected", 5), entry("2027-03-05", "discarded"))) == 6
