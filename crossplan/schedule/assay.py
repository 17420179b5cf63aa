"""A target on the rig: when its flies can be tested."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass

from crossplan.schedule.culture import Days


@dataclass(frozen=True)
class Assay:
    """A target on the rig: the culture that makes its flies, the ages that will do, and a due day if there is one.

    `feed_days` is how long before the assay the flies go on special food; 0 for none.
    """

    target: str
    step: str
    age_days: tuple[int, int]
    flies: int
    due: dt.date | None = None
    feed_days: int = 0
    #: no anaesthesia so many days before
    rest_days: int = 1
    #: the culture in whose vials these flies grow; the step itself unless it shares them
    culture: str = ""

    @property
    def vials_of(self) -> str:
        """Return the step whose culture makes the flies."""
        return self.culture or self.step

    def window(self, made: Days) -> tuple[int, int]:
        """Return the first and the last day on which flies of that culture are of the age asked for, rested and fed."""
        low, high = self.age_days
        return made.last + max(low, self.feed_days, self.rest_days), made.born_from + high
