"""Working days, counted from the start of the plan: day 0 is the first day on which work can be done."""

from __future__ import annotations

import datetime as dt
from bisect import bisect_left, bisect_right
from dataclasses import dataclass
from functools import cached_property

from crossplan.errors import ScreenError
from crossplan.plan.screen import DAYS, CalendarSection

#: how many days ahead a schedule may reach
HORIZON_DAYS = 400


@dataclass(frozen=True)
class WorkWeek:
    """The lab's week: `start` is day 0; a day off is a day on which nobody works."""

    start: dt.date
    working_days: tuple[str, ...] = DAYS[:5]
    holidays: frozenset[dt.date] = frozenset()
    morning: str = "09:00"
    afternoon: str = "16:30"
    people: tuple[str, ...] = ()
    rig_flies_per_day: int | None = None

    @classmethod
    def of(cls, section: CalendarSection, start: dt.date) -> WorkWeek:
        """Return the week that the screen file describes, beginning on `start`.

        Raises:
            ScreenError: no day of the next months is a working day, or the afternoon is not after the morning.
        """
        morning, afternoon = _four_digits(section.morning), _four_digits(section.afternoon)
        if morning >= afternoon:
            raise ScreenError(
                f"[calendar] afternoon = '{section.afternoon}' is not after morning = '{section.morning}'",
                "vials are emptied in the morning and virgins collected in the afternoon of the same day",
            )
        week = cls(
            start, section.working_days, frozenset(section.holidays), morning, afternoon,
            section.people, section.rig_flies_per_day,
        )  # fmt: skip
        if not week.days:
            raise ScreenError("[calendar] leaves no working day at all", "check working_days and holidays")
        return week

    def date(self, day: int) -> dt.date:
        """Return the date of a day number."""
        return self.start + dt.timedelta(days=day)

    def works(self, day: int) -> bool:
        """Return whether somebody works on that day."""
        date = self.date(day)
        return DAYS[date.weekday()] in self.working_days and date not in self.holidays

    @cached_property
    def days(self) -> tuple[int, ...]:
        """All working days up to the horizon."""
        return tuple(d for d in range(HORIZON_DAYS) if self.works(d))

    def on_or_after(self, day: int) -> int | None:
        """Return the first working day from `day` on."""
        at = bisect_left(self.days, day)
        return self.days[at] if at < len(self.days) else None

    def between(self, first: int, last: int) -> tuple[int, ...]:
        """Return the working days from `first` to `last`, both included."""
        return self.days[bisect_left(self.days, first) : bisect_right(self.days, last)]


def _four_digits(time: str) -> str:
    """Return a time of day as HH:MM, so that times sort as texts: 9:00 is 09:00."""
    hour, minute = time.split(":")
    return f"{int(hour):02d}:{minute}"
