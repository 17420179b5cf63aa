"""What one culture does when it is set up on a given day.

Rules of the trade that are kept here, with the biology asked of crossplan.rearing:

* parents lay for some days and are cleared on a working day, before their children can eclose;
* the first flies come at 0.93 of the development time after the first egg; collection is on working days only, and stops
  before the next generation can appear;
* virgins count on a day only if the culture was emptied that morning: flies that emerged on days off are no virgins;
* a stock that gives virgins is put on fresh food one generation ahead, and gives them on the working days before.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from crossplan.rearing.course import Course
from crossplan.rearing.development import Clock
from crossplan.rearing.handling import clear_parents_by_hours, stop_collecting_hours, virgin_keeping_days
from crossplan.schedule.week import WorkWeek

#: males keep for parents; after two weeks they are tired (common practice, no source)
MALE_KEEPING_DAYS = 14
#: fewest working days of collection that a culture must have, and most that are used
FEWEST_COLLECTIONS = 2
MOST_COLLECTIONS = 4
#: working days on which virgins are taken from a stock before they are used
STOCK_COLLECTIONS = 2


@dataclass(frozen=True)
class Culture:
    """One cross to be put on the calendar.

    Attributes:
        step: its id.
        parents: steps whose kept flies it needs, with whether as mothers.
        mother_stock: the stock that gives its virgins; empty when a step does.
        temperature_C: rearing temperature.
        vials: how many.
        keeps_virgins: whether the kept flies are mothers of a later cross.
        also: steps that keep another class from the same vials.
        age_span: for flies that go to an assay the days between the youngest and the oldest age; else None.
    """

    step: str
    parents: tuple[tuple[str, bool], ...]
    mother_stock: str
    temperature_C: float
    vials: int
    keeps_virgins: bool
    age_span: int | None = None
    also: tuple[str, ...] = ()


@dataclass(frozen=True)
class Days:
    """The days of one culture: all are numbers of working days."""

    set_up: int
    clear: int
    collect: tuple[int, ...]
    discard: int
    #: day of the first flies: the oldest ones collected may have emerged then
    born_from: int
    expand: int | None = None
    stock_collect: tuple[int, ...] = ()

    @property
    def first(self) -> int:
        return self.collect[0]

    @property
    def last(self) -> int:
        return self.collect[-1]


@dataclass(frozen=True)
class Biology:
    """Whole days of one temperature, counted from the day of set-up.

    First day with flies; last day for clearing the parents; last day without grandchildren; days that virgins keep.
    """

    first_flies: int
    clear_by: int
    stop_collecting: int
    keep_virgins: int

    @classmethod
    def at(cls, temperature_C: float, clock: Clock) -> Biology:
        """Return the days at a constant temperature in degrees C."""
        course = Course.constant(temperature_C)
        first = clock.eclosion(course).first_hours
        return cls(
            math.ceil(first / 24.0),
            math.floor(min(clear_parents_by_hours(course, clock), first) / 24.0),
            math.ceil(stop_collecting_hours(course, clock) / 24.0) - 1,
            math.floor(virgin_keeping_days(temperature_C)),
        )


def days_of(
    culture: Culture, set_up: int, biology: Biology, laying_days: int, week: WorkWeek, most: int = MOST_COLLECTIONS
) -> Days | None:
    """Return the days of a culture set up on that day; None when a rule of the trade cannot be kept.

    Args:
        culture: the cross.
        set_up: number of a working day.
        biology: of its temperature.
        laying_days: days for which the parents lay.
        week: the working days.
        most: working days of collection at most.
    """
    clear = week.on_or_after(set_up + min(laying_days, biology.clear_by))
    if clear is None or clear > set_up + biology.clear_by:
        return None
    first = set_up + biology.first_flies
    stop = set_up + biology.stop_collecting
    if culture.age_span is not None:
        most = min(most, culture.age_span + 1)
    collect = _collections(week, first, stop, most, culture.age_span)
    if collect is None:
        return None
    discard = week.on_or_after(collect[-1])
    if discard is None:
        return None
    expand: int | None = None
    stock_days: tuple[int, ...] = ()
    if culture.mother_stock:
        found = _from_stock(set_up, biology, week)
        if found is None:
            return None
        expand, stock_days = found
    return Days(set_up, clear, collect, discard, first, expand, stock_days)


def _collections(week: WorkWeek, first: int, stop: int, most: int, age_span: int | None) -> tuple[int, ...] | None:
    """Return the working days of collection: the first ones after the first flies, close enough for one age group."""
    days = week.between(first, stop)[:most]
    if age_span is not None and days:
        days = tuple(d for d in days if d - first <= age_span)
    # flies come over several days: a window that opens long after the first flies misses most of them
    if len(days) < min(FEWEST_COLLECTIONS, most) or days[0] - first > 3:
        return None
    return days


def _from_stock(set_up: int, biology: Biology, week: WorkWeek) -> tuple[int, tuple[int, ...]] | None:
    days = week.between(set_up - biology.keep_virgins, set_up - 1)[-STOCK_COLLECTIONS:]
    if not days:
        return None
    latest = days[0] - biology.first_flies
    earlier = week.between(max(latest - 6, days[0] - biology.stop_collecting), latest)
    return (earlier[-1], days) if earlier else None


def latest_use(parent: Days, as_mother: bool, biology: Biology) -> int:
    """Return the last day on which the kept flies of `parent` are fresh enough to be mothers or fathers."""
    return parent.first + (biology.keep_virgins if as_mother else MALE_KEEPING_DAYS)


def fits(child: Days, parent: Days, as_mother: bool, biology: Biology) -> bool:
    """Return whether the kept flies of `parent` are there, and fresh enough, when `child` is set up."""
    return parent.last < child.set_up <= latest_use(parent, as_mother, biology)
