"""Days of one culture, worked out by hand.

At 25 C the first flies come after 0.93 x 220 h = 204.6 h = 8.5 days, so on day 9; parents are out by day 6 of the table;
grandchildren may come from 2 x 204.6 h + 24 h = 433.2 h on, so day 18 is the last. At 18 C (463.1 h from egg to adult) the
same sums give 430.7 h: day 18; the table's day 10; and 885.4 h: day 36. Day 0 is a Monday.
"""

from __future__ import annotations

import datetime as dt

import pytest

from crossplan.plan.screen import DAYS
from crossplan.rearing.development import Clock
from crossplan.schedule.culture import Biology, Culture, Days, days_of, fits
from crossplan.schedule.week import WorkWeek

MONDAY = dt.date(2027, 3, 1)
WEEK = WorkWeek(MONDAY)
EVERY_DAY = WorkWeek(MONDAY, DAYS)
WARM = Biology(first_flies=9, clear_by=6, stop_collecting=18, keep_virgins=7)
COLD = Biology(first_flies=18, clear_by=10, stop_collecting=36, keep_virgins=14)


def culture(stock: str = "", age_span: int | None = None) -> Culture:
    return Culture("S01", (), stock, 25.0, 2, False, age_span)


def test_whole_days_at_25_and_18_C() -> None:
    assert Biology.at(25.0, Clock()) == WARM
    assert Biology.at(18.0, Clock()) == COLD


def test_a_slower_strain_is_later() -> None:
    # 0.93 x 240 h = 223.2 h = 9.3 days; 2 x 223.2 + 24 = 470.4 h = 19.6 days
    slow = Biology.at(25.0, Clock(240.0))
    assert (slow.first_flies, slow.clear_by, slow.stop_collecting) == (10, 6, 19)


@pytest.mark.parametrize(
    ("set_up", "clear", "collect"),
    [
        (0, 3, (9, 10, 11, 14)),  # Monday: cleared Thursday, flies on Wednesday of next week
        (1, 4, (10, 11, 14, 15)),
        (2, 7, (11, 14, 15, 16)),  # Wednesday: three days on is Saturday, so Monday
        (3, 7, (14, 15, 16, 17)),  # Thursday: first flies on Saturday, taken on Monday
        (4, 7, (14, 15, 16, 17)),
    ],
)
def test_a_week_at_25_C(set_up: int, clear: int, collect: tuple[int, ...]) -> None:
    assert days_of(culture(), set_up, WARM, 3, WEEK) == Days(set_up, clear, collect, collect[-1], set_up + 9)


@pytest.mark.parametrize(
    ("set_up", "clear", "collect"),
    [(0, 3, (18, 21, 22, 23)), (1, 4, (21, 22, 23, 24)), (4, 7, (22, 23, 24, 25))],
)
def test_a_week_at_18_C(set_up: int, clear: int, collect: tuple[int, ...]) -> None:
    assert days_of(culture(), set_up, COLD, 3, WEEK) == Days(
        set_up, clear, collect, collect[-1], set_up + COLD.first_flies
    )


def test_parents_never_stay_longer_than_the_table() -> None:
    days = days_of(culture(), 0, WARM, 10, EVERY_DAY)
    assert days is not None
    assert days.clear == 6


def test_no_set_up_when_nobody_can_clear_in_time() -> None:
    # set up on Friday, the whole next week off: Monday is day 10 after set-up, children are there by then
    off = frozenset(MONDAY + dt.timedelta(days=d) for d in range(7, 12))
    assert days_of(culture(), 4, WARM, 3, WorkWeek(MONDAY, holidays=off)) is None


def test_no_set_up_when_the_first_flies_would_wait_too_long() -> None:
    # first flies on day 9 (Wednesday), nobody there until Monday, day 14: most flies are missed
    off = frozenset(MONDAY + dt.timedelta(days=d) for d in range(9, 12))
    assert days_of(culture(), 0, WARM, 3, WorkWeek(MONDAY, holidays=off)) is None


def test_flies_of_one_age_group_are_collected_close_together() -> None:
    one = days_of(culture(age_span=1), 0, WARM, 3, WEEK)
    assert one is not None
    assert one.collect == (9, 10)
    assert days_of(culture(age_span=1), 2, WARM, 3, WEEK) is None  # Friday and Monday are too far apart
    same_day = days_of(culture(age_span=0), 2, WARM, 3, WEEK)
    assert same_day is not None
    assert same_day.collect == (11,)


def test_virgins_from_a_stock_need_a_generation_on_fresh_food() -> None:
    # set up on Monday, day 14: virgins of Thursday and Friday; fresh food 9 days before Thursday, a Tuesday
    days = days_of(culture("K12-AD"), 14, WARM, 3, WEEK)
    assert days is not None
    assert days.stock_collect == (10, 11)
    assert days.expand == 1
    assert days_of(culture("K12-AD"), 9, WARM, 3, WEEK) is None  # fresh food would have been before the start


def test_a_child_waits_for_its_last_parent_and_not_too_long() -> None:
    parent = Days(0, 3, (9, 10, 11, 14), 14, 9)
    assert not fits(Days(14, 17, (23,), 23, 23), parent, True, WARM)
    assert fits(Days(15, 18, (24,), 24, 24), parent, True, WARM)
    assert fits(Days(16, 19, (25,), 25, 25), parent, True, WARM)
    assert not fits(Days(17, 20, (26,), 26, 26), parent, True, WARM)  # the first virgins are 8 days old
    assert fits(Days(23, 26, (32,), 32, 32), parent, False, WARM)  # fathers keep for two weeks
    assert not fits(Days(24, 27, (33,), 33, 33), parent, False, WARM)
