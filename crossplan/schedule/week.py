"""Working days, counted from the start of the plan: day 0 is the first day on which work can be done."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass
from functools import cached_property

from crossplan.errors import ScreenError
from crossplan.plan.screen import DAYS, CalendarSection

#: how many days ahead a schedule may reach
HORIZON_DAYS = 200


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
            ScreenError: no day of the next months is a working day.
        """
        week = cls(
            start, section.working_days, frozenset(section.holidays), section.morning, section.afternoon,
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
        return next((d for d in self.days if d >= day), None)

    def between(self, first: int, last: int) -> tuple[int, ...]:
        """Return the working days from `first` to `last`, both included."""
        return tuple(d for d in self.days if first <= d <= last)
