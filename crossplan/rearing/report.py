"""What the clock and the counts say, as plain dictionaries ready for JSON. Hours to 4 decimals,
probabilities to 6."""

from __future__ import annotations

from typing import Any

from crossplan.rearing.counting import Share, as_written, flies_to_score
from crossplan.rearing.course import Course
from crossplan.rearing.development import PLUS_MINUS_PERCENT, Clock
from crossplan.rearing.handling import clear_parents_by_hours, stop_collecting_hours, virgin_hours
from crossplan.rearing.yields import DEFAULT_YIELD, Yield, vials_needed


def rearing_report(course: Course, clock: Clock) -> dict[str, Any]:
    """Return stages and deadlines of a culture along a course, all in hours after the first egg.

    `virgin_hours` is a length: the longest safe gap between clearing and collecting at the warmest
    temperature met while flies come out.

    Raises:
        RearingError: the course leaves 12 to 30 C before the work with the culture is done.
    """
    flies = clock.eclosion(course)
    while_eclosing = course.temperatures(flies.first_hours, flies.last_hours)
    return {
        "stages": [
            {"stage": s.stage, "hours": round(s.hours, 4), "ends_at_hours": round(s.ends_at_hours, 4)}
            for s in clock.stages(course)
        ],
        "egg_to_adult_hours": round(clock.egg_to_adult_hours(course), 4),
        "first_flies_hours": round(flies.first_hours, 4),
        "last_flies_hours": round(flies.last_hours, 4),
        "eclosion_sd_hours": round(flies.sd_hours, 4),
        "virgin_hours": round(virgin_hours(max(while_eclosing)), 4),
        "clear_parents_by_hours": round(clear_parents_by_hours(course, clock), 4),
        "stop_collecting_hours": round(stop_collecting_hours(course, clock), 4),
        "plus_minus_percent": PLUS_MINUS_PERCENT,
        "source": clock.source,
        "warnings": list(clock.warnings(course)),
    }


def count_report(
    share: Share, need: int, probability: float, yield_: Yield = DEFAULT_YIELD, catch: float = 1.0
) -> dict[str, Any]:
    """Return flies to look through and vials to set up for `need` flies of a class.

    `probability` is the one asked for; `probability_reached` and `vials_probability` are what the numbers
    give.

    Raises:
        RearingError: an argument is out of range, or the class is too rare.
    """
    flies = flies_to_score(share, need, probability)
    vials = vials_needed(share, need, probability, yield_, catch)
    return {
        "share": float(share),
        "exact": str(as_written(share)),
        "need": need,
        "probability": probability,
        "score": flies.score,
        "expected": round(flies.expected, 6),
        "probability_reached": round(flies.probability_reached, 6),
        "vials": vials.vials,
        "vials_expected": round(vials.expected, 6),
        "vials_probability": round(vials.probability, 6),
        "progeny_per_vial": yield_.mean,
        "failed_vials": yield_.fail,
    }
