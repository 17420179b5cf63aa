"""Rules of the fly room: virgins, parents, collecting, stock transfers, ages, feeding; each with its source.

Figures between the temperatures of a table are read off straight lines. All temperatures are in degrees C,
12 to 30; where a rule takes `where`, that is a temperature or a `Course`, and along a course the used-up
shares of the limit are summed.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final

from crossplan.rearing.course import Course
from crossplan.rearing.development import (
    FIRST_FLIES_FRACTION,
    HOT_FROM_C,
    Clock,
    check_temperature,
)

Table = tuple[tuple[float, float], ...]

#: Longest safe gap, in hours, between clearing a vial and collecting its females. At 25 C flies do not mate
#: for 5 to 8 h after eclosion (Roote & Prokop 2013, G3 3:353, supplementary manual, number from memory;
#: handbook chapters say 8 h); 16 h at 18 C is common practice, no source; the others are 8 h scaled by
#: development and rounded down (own calculation). Teaching texts allow 10 to 12 h and accept failures. The
#: value at 30 C continues the line from 25 to 29 C.
VIRGIN_HOURS: Final[Table] = ((18.0, 16.0), (21.0, 10.0), (22.0, 9.0), (25.0, 8.0), (29.0, 5.0), (30.0, 4.25))
#: The same for crosses that one mated female would spoil (own choice).
VIRGIN_HOURS_STRICT: Final[Table] = (
    (18.0, 12.0),
    (21.0, 8.0),
    (22.0, 7.0),
    (25.0, 6.0),
    (29.0, 4.0),
    (30.0, 3.5),
)

#: Parents leave at 0.75 of development (own choice), and not later than these days: protocols of teaching
#: and research laboratories clear after 3 to 6 days and name 8 to 10 days as the limit (common practice).
CLEAR_PARENTS_FRACTION: Final = 0.75
CLEAR_PARENTS_DAYS: Final[Table] = ((18.0, 10.0), (21.0, 8.0), (22.0, 8.0), (25.0, 6.0), (29.0, 5.0))

#: Hours that the first flies of a vial take to mate and lay (own choice; fertile eggs from day 1 to 2,
#: common practice).
MATE_AND_LAY_HOURS: Final = 24.0


#: Hours before the first eclosion from which the temperature decides how the wings turn out. Duox, the gene
#: of Curly, acts on the last day of the pupa (Hurd, Liang & Lehmann 2015, PLoS Genet. 11:e1005625); two
#: days is our own margin.
WING_SIGN_HOURS: Final = 48.0


@dataclass(frozen=True, slots=True)
class AgeRange:
    """Days after eclosion: `least` is the bare minimum, `best_from` to `best_to` is what one aims for."""

    least: float
    best_from: float
    best_to: float


@dataclass(frozen=True, slots=True)
class RetinalFeeding:
    """Food with all-trans-retinal (millimolar) and days of feeding adults before the assay, in the dark."""

    adult_mM: float
    larval_mM: float
    least_days: float
    most_days: float


def read_off(table: Table, at: float) -> float:
    """Return the value of a table at `at`: straight lines between its points, level beyond its ends."""
    if at <= table[0][0]:
        return table[0][1]
    for (low, left), (high, right) in zip(table[:-1], table[1:], strict=True):
        if at <= high:
            return left + (right - left) * (at - low) / (high - low)
    return table[-1][1]


def virgin_hours(temperature: float, strict: bool = False) -> float:
    """Return the longest gap in hours between clearing and collecting in which females are surely virgin.

    Below 18 C the figure at 18 C is used, which is on the safe side.

    Raises:
        RearingError: outside 12 to 30 C.
    """
    check_temperature(temperature)
    return read_off(VIRGIN_HOURS_STRICT if strict else VIRGIN_HOURS, temperature)


def virgin_gap(where: Course | float, cleared_at: float = 0.0, strict: bool = False) -> float:
    """Return the longest safe gap in hours after a clearing at hour `cleared_at` of a course."""
    due = Course.of(where).hours_until(1.0, lambda t: 1.0 / virgin_hours(t, strict), cleared_at)
    return due - cleared_at


def clear_parents_by_hours(where: Course | float, clock: Clock) -> float:
    """Return the hour after the first egg by which the parents must be out of the vial.

    At 0.75 of the development, and never later than the custom of the table; both well before the first
    flies.
    """
    course = Course.of(where)
    before_flies = clock.hour_of(CLEAR_PARENTS_FRACTION, course)
    custom = course.hours_until(1.0, _share_per_hour(CLEAR_PARENTS_DAYS))
    return min(before_flies, custom)


def stop_collecting_hours(where: Course | float, clock: Clock) -> float:
    """Return the hour after the first egg from which flies may be grandchildren: stop collecting before.

    The first flies at 0.93 of development, a day to mate and lay, and 0.93 of development again (own
    derivation). It gives 18 days at 25 C, which is also common practice. A vial emptied every day is safer,
    but not safe.
    """
    course = Course.of(where)
    first_flies = clock.hour_of(FIRST_FLIES_FRACTION, course)
    return clock.hour_of(FIRST_FLIES_FRACTION, course, laid_at=first_flies + MATE_AND_LAY_HOURS)


def male_ready_days() -> AgeRange:
    """Return the age at which males are good fathers: 3 to 7 days, at least 1.

    Their accessory glands grow through the first 6 days and young males are poor at mating (Ruhmann et al.
    2016, abstract); the minimum of a day is our own choice.
    """
    return AgeRange(1.0, 3.0, 7.0)


def virgin_keeping_days(temperature: float) -> float:
    """Return the days that virgins may wait for their cross: 14 at 18 C, 7 at 25 C (common practice)."""
    check_temperature(temperature)
    return read_off(((18.0, 14.0), (25.0, 7.0)), temperature)


def breeding_allowed(temperature: float) -> bool:
    """Return whether flies reared at this temperature may be parents: not at 29 C or warmer.

    Of 1054 eggs by flies reared at 29.5 C no adult came after their return to 25 C (open data of the
    Stevison laboratory on heat stress, Canton-S). Males reared at 29 to 31 C are sterile, the limit
    differing by strain (from memory: Chakir et al. 2002, Genetica 114:195; David et al. 2005, J. Evol.
    Biol. 18:838). To draw the line at 29 C is our own rule.

    Raises:
        RearingError: outside 12 to 30 C.
    """
    check_temperature(temperature)
    return temperature < HOT_FROM_C


def wing_sign_reliable(where: Course | float, clock: Clock, unreliable_below_C: float) -> bool:
    """Return whether a wing sign that fades in the cold, such as Curly, can be trusted in a vial.

    True if the culture stays at `unreliable_below_C` (the catalogue of signs has it) or warmer from two
    days before the first flies to the last ones.
    """
    course = Course.of(where)
    flies = clock.eclosion(course)
    met = course.temperatures(max(0.0, flies.first_hours - WING_SIGN_HOURS), flies.last_hours)
    return min(met) >= unreliable_below_C


def behaviour_age_days() -> AgeRange:
    """Return the age for adult behaviour: 3 to 7 days, at least 1 (common practice, no source)."""
    return AgeRange(1.0, 3.0, 7.0)


def anaesthesia_gap_days() -> float:
    """Return the days that must pass between anaesthesia and a behavioural assay.

    CO2, cold and isoflurane disturb later performance (MacMillan et al. 2017, J. Insect Physiol. 101:97,
    abstract); that a day is enough is common practice, no source.
    """
    return 1.0


def retinal_feeding() -> RetinalFeeding:
    """Return how flies with a light-gated channel are fed all-trans-retinal.

    Adults 0.4 mM for 48 h before the test (Shiu et al. 2024, Nature 634:210, as summarised elsewhere), up
    to 4 days (common practice); larvae 0.5 mM from the egg on (published larval studies). In the dark
    throughout.
    """
    return RetinalFeeding(adult_mM=0.4, larval_mM=0.5, least_days=2.0, most_days=4.0)


def _share_per_hour(days: Table) -> Callable[[float], float]:
    """Return the share of a limit in days that an hour at a temperature uses up."""

    def share(temperature: float) -> float:
        check_temperature(temperature)
        return 1.0 / (24.0 * read_off(days, temperature))

    return share
