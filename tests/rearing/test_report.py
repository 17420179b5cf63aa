"""The dictionaries behind `--json`: names, types, and that they can be written as JSON."""

from __future__ import annotations

import json
from fractions import Fraction

import pytest

from crossplan.errors import RearingError
from crossplan.rearing.counting import flies_to_score
from crossplan.rearing.course import Course
from crossplan.rearing.development import Clock
from crossplan.rearing.report import count_report, rearing_report
from crossplan.rearing.yields import Yield, vials_needed


def test_rearing_at_25() -> None:
    report = json.loads(json.dumps(rearing_report(Course.constant(25), Clock())))
    assert report.pop("stages")[3] == {"stage": "third instar", "hours": 48.0, "ends_at_hours": 120.0}
    assert report.pop("source") == Clock().source
    assert report == {
        "egg_to_adult_hours": 220.0,
        "first_flies_hours": 204.6,
        "last_flies_hours": 257.4,
        "eclosion_sd_hours": 13.2,
        "virgin_hours": 8.0,
        "clear_parents_by_hours": 144.0,
        "stop_collecting_hours": 433.2,
        "plus_minus_percent": 10,
        "warnings": [],
    }


def test_rearing_along_a_cycle_takes_the_warmest_for_virgins() -> None:
    report = rearing_report(Course.parse("12h18/12h29"), Clock())
    assert report["virgin_hours"] == 5.0
    assert len(report["warnings"]) == 2
    assert report["stages"][-1]["ends_at_hours"] == report["egg_to_adult_hours"]


def test_rearing_too_warm() -> None:
    with pytest.raises(RearingError, match="31 C is too warm"):
        rearing_report(Course.constant(31), Clock())


@pytest.mark.parametrize("share", [Fraction(1, 8), 0.125])
def test_counts(share: Fraction | float) -> None:
    report = json.loads(json.dumps(count_report(share, 20, 0.95, Yield(mean=60.0))))
    flies, vials = flies_to_score(share, 20, 0.95), vials_needed(share, 20, 0.95, Yield(mean=60.0))
    assert report == {
        "share": 0.125,
        "exact": "1/8",
        "need": 20,
        "probability": 0.95,
        "score": flies.score,
        "expected": flies.score / 8,
        "probability_reached": round(flies.probability_reached, 6),
        "vials": vials.vials,
        "vials_expected": vials.vials * 0.9 * 60 / 8,
        "vials_probability": round(vials.probability, 6),
        "progeny_per_vial": 60.0,
        "failed_vials": 0.1,
    }
