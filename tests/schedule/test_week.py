from __future__ import annotations

import datetime as dt

import pytest

from crossplan.errors import ScreenError
from crossplan.plan.screen import CalendarSection
from crossplan.schedule.week import HORIZON_DAYS, WorkWeek

MONDAY = dt.date(2027, 3, 1)


def test_days_are_counted_from_the_start() -> None:
    week = WorkWeek(MONDAY)
    assert week.date(0) == MONDAY
    assert week.date(4) == dt.date(2027, 3, 5)
    assert week.date(31) == dt.date(2027, 4, 1)


def test_monday_to_friday_from_a_wednesday() -> None:
    week = WorkWeek(dt.date(2027, 3, 3))
    # Wed Thu Fri, then Mon 8 March is day 5
    assert week.days[:6] == (0, 1, 2, 5, 6, 7)
    assert week.on_or_after(3) == 5
    assert week.on_or_after(5) == 5
    assert week.between(1, 6) == (1, 2, 5, 6)
    assert week.between(3, 4) == ()


def test_a_holiday_is_a_day_off() -> None:
    section = CalendarSection(holidays=(dt.date(2027, 3, 2), dt.date(2027, 3, 6)))
    week = WorkWeek.of(section, MONDAY)
    assert not week.works(1)
    assert week.between(0, 7) == (0, 2, 3, 4, 7)


def test_a_week_of_other_days() -> None:
    section = CalendarSection(working_days=("Sun", "Wed"))
    assert WorkWeek.of(section, MONDAY).days[:4] == (2, 6, 9, 13)


def test_nothing_beyond_the_horizon() -> None:
    week = WorkWeek(MONDAY)
    assert week.days[-1] < HORIZON_DAYS
    assert week.on_or_after(HORIZON_DAYS) is None


def test_a_calendar_without_any_working_day_is_refused() -> None:
    with pytest.raises(ScreenError, match="no working day"):
        WorkWeek.of(CalendarSection(working_days=()), MONDAY)


def test_the_screen_file_s_hours_people_and_rig_are_taken_over() -> None:
    section = CalendarSection(morning="08:00", afternoon="15:00", people=("Ida",), rig_flies_per_day=40)
    week = WorkWeek.of(section, MONDAY)
    assert (week.morning, week.afternoon, week.people, week.rig_flies_per_day) == ("08:00", "15:00", ("Ida",), 40)


def test_hours_are_written_with_four_digits_so_that_they_sort() -> None:
    week = WorkWeek.of(CalendarSection(morning="9:00", afternoon="16:30"), MONDAY)
    assert week.morning == "09:00"
    assert sorted([week.afternoon, week.morning]) == ["09:00", "16:30"]


@pytest.mark.parametrize("afternoon", ["08:00", "9:00", "09:00"])
def test_an_afternoon_that_is_not_after_the_morning_is_refused(afternoon: str) -> None:
    with pytest.raises(ScreenError, match=f"afternoon = '{afternoon}' is not after morning = '09:00'"):
        WorkWeek.of(CalendarSection(afternoon=afternoon), MONDAY)
