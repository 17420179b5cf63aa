"""The clock: how far a fly has come, along the temperatures that it sees.

The law, in hours from egg to adult at a constant temperature T in degrees C, between 12 and 30 C:

    D(T) = D(25) * (1 + exp(a - b T)) / (1 + exp(a - b 25)),   a = 4.435754, b = 0.20036

* D(25) = 220 h: the stage table of the FlyBase developmental ontology (FBdv), after Bodenstein 1950,
  Bainbridge & Bownes 1981 (J. Embryol. Exp. Morphol. 66:57-80) and Campos-Ortega & Hartenstein 1985.
  Bonnier 1926 (J. Exp. Biol. 4:186-195) measured 228 h for females and 232 h for males. A lab's own figure
  is better than any of these.
* The shape is the logistic of Davidson 1944 (J. Anim. Ecol. 13:26-38) for pupae; its parameters are those
  of the collection of published rate curves by Rebaudo, Struelens & Dangles 2018 (Methods Ecol. Evol.
  9:1144-1150). To use it for the whole development, scaled to D(25), is a combination of our own;
  laboratories differ by 5 % at one temperature.
* Shares of the stages are those at 25 C, at every temperature. That embryonic events keep their relative
  timing between 17.5 and 32.5 C is published (Kuntz & Eisen 2014, PLoS Genet. 10:e1004293); for the other
  stages it is an approximation.
* Under changing temperatures the rates are summed (rate summation), never the temperatures averaged: a
  20/30 C cycle takes longer than 25 C throughout, as Manenti et al. 2021 (Insects 12:925) report.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property
from typing import Final

from crossplan.errors import RearingError
from crossplan.rearing.course import Course

COLDEST_C: Final = 12.0
WARMEST_C: Final = 30.0
#: from here up the flies are for the assay only (see `handling.breeding_allowed`)
HOT_FROM_C: Final = 29.0
#: below this the law rests on two measured totals only (12 and 15 C)
FEW_FIGURES_BELOW_C: Final = 18.0
DEFAULT_HOURS_AT_25: Final = 220.0
LEAST_HOURS_AT_25, MOST_HOURS_AT_25 = 100.0, 600.0
LEAST_FOOD_FACTOR, MOST_FOOD_FACTOR = 0.5, 4.0

#: Hours of each stage at 25 C (FlyBase FBdv; boundaries at 24, 49, 72, 120, 132.2 and 220 h). Puparium
#: formation is the end of the third instar; pupa is from pupation to eclosion.
STAGES_AT_25: Final[tuple[tuple[str, float], ...]] = (
    ("embryo", 24.0),
    ("first instar", 25.0),
    ("second instar", 23.0),
    ("third instar", 48.0),
    ("prepupa", 12.2),
    ("pupa", 87.8),
)
LARVAL_STAGES: Final = ("first instar", "second instar", "third instar")

#: First flies at 0.93 of the development time: 8.5 days at the least (Ashburner & Thompson 1978, as quoted)
#: against 9.17 days (FlyBase) at 25 C; the ratio is our own.
FIRST_FLIES_FRACTION: Final = 0.93
#: Standard deviation of eclosion as a fraction of development time. Measured: 7 to 9 % within vials on food
#: low in yeast (open counts of the University of East Anglia on diet conditioning); 6 % on good food is our
#: own choice.
ECLOSION_SD_FRACTION: Final = 0.06
ECLOSION_SD_FRACTION_POOR_FOOD: Final = 0.09
#: All but a few flies of an egg batch have eclosed this many standard deviations after the first (own
#: choice).
ECLOSION_WINDOW_SD: Final = 4.0
#: Band on every date, in percent: the scatter between published totals (own judgement).
PLUS_MINUS_PERCENT: Final = 10

_A, _B = 4.435754, 0.20036
#: Davidson 1944, embryo: rate per hour = K / (1 + exp(a - b T)). Within 5 % of the 22 mean times from
#: laying to hatching that Powsner 1935 (Physiol. Zool. 8:474-520) measured between 14.95 and 30.8 C.
_EMBRYO_K, _EMBRYO_A, _EMBRYO_B = 0.070953, 4.4514215, 0.2071879
EMBRYO_COLDEST_C: Final = 14.95


@dataclass(frozen=True, slots=True)
class StageTime:
    """A stage: how many hours it lasts and at which hour after egg laying it ends."""

    stage: str
    hours: float
    ends_at_hours: float


@dataclass(frozen=True, slots=True)
class Eclosion:
    """When the flies of a vial come out, in hours after the first egg was laid."""

    first_hours: float
    mean_hours: float
    sd_hours: float
    last_hours: float


def check_temperature(temperature: float) -> None:
    """Refuse a temperature at which no culture can be planned.

    Raises:
        RearingError: below 12 C or above 30 C; the message says why.
    """
    if temperature > WARMEST_C:
        raise RearingError(
            f"{temperature:g} C is too warm to plan for: expected {COLDEST_C:g} to {WARMEST_C:g} C",
            "Above 30 C development slows again (eggs: 18.2 h at 32.0 C, 16.8 h at 30.05 C; Powsner 1935),"
            " most eggs die, and males are sterile. Rear at 30 C or cooler; warm the adults for the assay.",
        )
    if not temperature >= COLDEST_C:
        raise RearingError(
            f"{temperature:g} C is too cold to plan for: expected {COLDEST_C:g} to {WARMEST_C:g} C",
            "At 12 C development takes over 50 days (Ashburner & Thompson 1978, as quoted); colder, it stops."
            " Rear at 18 C to slow a culture down.",
        )


def relative_rate(temperature: float) -> float:
    """Return how fast development runs at a temperature in degrees C, with 25 C as 1.

    Raises:
        RearingError: outside 12 to 30 C.
    """
    check_temperature(temperature)
    return (1.0 + math.exp(_A - _B * 25.0)) / (1.0 + math.exp(_A - _B * temperature))


def embryo_hours(temperature: float) -> float:
    """Return the hours from laying to hatching of fresh eggs at a constant temperature (Davidson 1944).

    The stage table counts 24 h of embryo at 25 C, as the field stages do; fresh single eggs hatch in 20.4 h
    (Powsner 1935) and this law gives 20.9 h. Use it for when larvae are first seen.

    Raises:
        RearingError: outside 14.95 to 30 C, where hatching was measured.
    """
    return 1.0 / _embryo_rate(temperature)


def hatching_hours(course: Course) -> float:
    """Return the hour at which eggs laid at hour 0 hatch, along a course (rate summation of `embryo_hours`).

    Raises:
        RearingError: the course leaves 14.95 to 30 C before they hatch.
    """
    return course.hours_until(1.0, _embryo_rate)


def _embryo_rate(temperature: float) -> float:
    check_temperature(temperature)
    if temperature < EMBRYO_COLDEST_C:
        raise RearingError(
            f"{temperature:g} C is too cold to say when eggs hatch: expected {EMBRYO_COLDEST_C:g} to {WARMEST_C:g} C",
            "Hatching was not measured colder than 14.95 C (Powsner 1935).",
        )
    return _EMBRYO_K / (1.0 + math.exp(_EMBRYO_A - _EMBRYO_B * temperature))


@dataclass(frozen=True)
class Clock:
    """How fast the flies of a lab develop.

    Attributes:
        hours_at_25: hours from egg to adult at 25 C on good food. A figure measured in the lab stretches
            all stages alike.
        food_factor: how many times longer the larval instars last for want of food or room; 1 on good food.
            Only larvae feel it: on food low in yeast the total rose from about 230 h to 310 h at 25 C, the
            time from puparium to adult not at all (113 h; open East Anglia counts against Bonnier 1926),
            which is a factor of about 1.8.
    """

    hours_at_25: float = DEFAULT_HOURS_AT_25
    food_factor: float = 1.0

    def __post_init__(self) -> None:
        if not LEAST_HOURS_AT_25 <= self.hours_at_25 <= MOST_HOURS_AT_25:
            raise RearingError(
                f"{self.hours_at_25:g} h from egg to adult at 25 C: expected {LEAST_HOURS_AT_25:g} to"
                f" {MOST_HOURS_AT_25:g} h",
                "Give hours, not days; the published figure is 220 h.",
            )
        if not LEAST_FOOD_FACTOR <= self.food_factor <= MOST_FOOD_FACTOR:
            raise RearingError(
                f"food factor {self.food_factor:g}: expected {LEAST_FOOD_FACTOR:g} to {MOST_FOOD_FACTOR:g}",
                "1 is good food; about 1.8 was measured for larvae on food low in yeast.",
            )

    @cached_property
    def stage_hours_at_25(self) -> tuple[tuple[str, float], ...]:
        """The stages with their hours at 25 C on this lab's food."""
        stretch = self.hours_at_25 / sum(hours for _, hours in STAGES_AT_25)
        return tuple(
            (stage, hours * stretch * (self.food_factor if stage in LARVAL_STAGES else 1.0))
            for stage, hours in STAGES_AT_25
        )

    @cached_property
    def total_at_25(self) -> float:
        """Hours from egg to adult at 25 C on this lab's food."""
        return math.fsum(hours for _, hours in self.stage_hours_at_25)

    @property
    def source(self) -> str:
        """Where the figures come from, in a line."""
        if self.hours_at_25 == DEFAULT_HOURS_AT_25:
            base = "220 h at 25 C (FlyBase developmental ontology; Bonnier 1926)"
        else:
            base = f"{self.hours_at_25:g} h at 25 C (this lab's own figure)"
        food = "" if self.food_factor == 1.0 else f"; larval stages x {self.food_factor:g} for food"
        return (
            f"{base}{food}; temperature law of Davidson 1944 (J. Anim. Ecol. 13:26-38), scaled; rates summed"
            f" along the course; dates hold to about {PLUS_MINUS_PERCENT} %, food permitting"
        )

    def hours(self, temperature: float) -> float:
        """Return the hours from egg to adult at a constant temperature in degrees C.

        Raises:
            RearingError: outside 12 to 30 C.
        """
        return self.total_at_25 / relative_rate(temperature)

    def hour_of(self, fraction: float, course: Course, laid_at: float = 0.0) -> float:
        """Return the hour of the course at which an egg laid at hour `laid_at` has done `fraction` of its
        development.

        Fractions beyond 1 are allowed: they are the slow flies of a batch.

        Raises:
            RearingError: the course leaves 12 to 30 C before then.
        """
        return course.hours_until(fraction * self.total_at_25, relative_rate, laid_at)

    def progress(self, course: Course, hour: float, laid_at: float = 0.0) -> float:
        """Return the fraction of development done at `hour` by an egg laid at hour `laid_at` (may pass 1)."""
        return course.integral(relative_rate, laid_at, hour) / self.total_at_25

    def egg_to_adult_hours(self, course: Course) -> float:
        """Return the hours from egg to adult along a course.

        Raises:
            RearingError: the course leaves 12 to 30 C before eclosion.
        """
        return self.hour_of(1.0, course)

    def stages(self, course: Course) -> tuple[StageTime, ...]:
        """Return every stage with its length and end, in hours, along a course.

        Raises:
            RearingError: the course leaves 12 to 30 C before eclosion.
        """
        found: list[StageTime] = []
        done = 0.0
        began = 0.0
        for stage, hours in self.stage_hours_at_25:
            done += hours
            ends = course.hours_until(done, relative_rate)
            found.append(StageTime(stage, ends - began, ends))
            began = ends
        return tuple(found)

    def eclosion(self, course: Course, laying_hours: float = 0.0) -> Eclosion:
        """Return when the flies of a vial come out, with eggs laid evenly from hour 0 to `laying_hours`.

        The first come at 0.93 of the development of the first egg, the last 4 standard deviations later in
        that of the last egg. Sexes are taken together: females were 4.3 h earlier at 25 C (Bonnier 1926),
        males earlier on poor food.

        Raises:
            RearingError: the course leaves 12 to 30 C before the last flies, or laying hours are negative.
        """
        if not 0.0 <= laying_hours <= 30 * 24.0:
            raise RearingError(f"{laying_hours:g} h of egg laying: expected 0 to {30 * 24} h")
        sd = ECLOSION_SD_FRACTION if self.food_factor <= 1.0 else ECLOSION_SD_FRACTION_POOR_FOOD
        middle_egg = laying_hours / 2.0
        early = self.hour_of(1.0 - sd, course, middle_egg)
        late = self.hour_of(1.0 + sd, course, middle_egg)
        return Eclosion(
            first_hours=self.hour_of(FIRST_FLIES_FRACTION, course),
            mean_hours=self.hour_of(1.0, course, middle_egg),
            sd_hours=math.hypot((late - early) / 2.0, laying_hours / math.sqrt(12.0)),
            last_hours=self.hour_of(FIRST_FLIES_FRACTION + ECLOSION_WINDOW_SD * sd, course, laying_hours),
        )

    def warnings(self, course: Course) -> tuple[str, ...]:
        """Return what a person should know about rearing along this course, each as a sentence."""
        adult = self.egg_to_adult_hours(course)
        met = course.temperatures(0.0, adult)
        found: list[str] = []
        if max(met) >= HOT_FROM_C:
            found.append(
                f"Reared at {max(met):g} C: use these flies for the assay only, do not breed from them"
                " (from 29 C up males can be sterile and most eggs die)."
            )
        if min(met) < FEW_FIGURES_BELOW_C:
            found.append(
                f"Reared at {min(met):g} C: below 18 C few development times were measured and many genotypes do badly."
            )
        if len(met) > 1 and course.is_cycle:
            found.append("Daily cycle: the rest of the development may differ by a further 10 % (own judgement).")
        if self.food_factor > 1.0:
            found.append("Poor or crowded food: flies come later and more spread out than any temperature law says.")
        return tuple(found)
