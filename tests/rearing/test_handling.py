"""The rules of the fly room: at the temperatures of their tables, between them, and along a course."""

from __future__ import annotations

import pytest

from crossplan.errors import RearingError
from crossplan.rearing import handling
from crossplan.rearing.course import Course
from crossplan.rearing.development import Clock

CLOCK = Clock()


@pytest.mark.parametrize(
    ("temperature", "usual", "strict"),
    [
        (18, 16, 12),
        (21, 10, 8),
        (22, 9, 7),
        (25, 8, 6),
        (29, 5, 4),
        (19.5, 13, 10),
        (14, 16, 12),
        (30, 4.25, 3.5),
    ],
)
def test_virgin_hours(temperature: float, usual: float, strict: float) -> None:
    assert handling.virgin_hours(temperature) == pytest.approx(usual)
    assert handling.virgin_hours(temperature, strict=True) == pytest.approx(strict)


def test_virgin_gap_over_a_change() -> None:
    """4 h at 25 C use up half of the gap; the other half is 8 h at 18 C."""
    assert handling.virgin_gap(Course.parse("25:4h,18")) == pytest.approx(12.0)
    assert handling.virgin_gap(25.0, cleared_at=300.0) == pytest.approx(8.0)


@pytest.mark.parametrize(("temperature", "days"), [(18, 10), (21, 8), (22, 8), (25, 6), (29, 5)])
def test_clear_parents(temperature: float, days: float) -> None:
    assert handling.clear_parents_by_hours(temperature, CLOCK) / 24 == pytest.approx(days)


def test_fast_flies_need_their_parents_out_sooner() -> None:
    assert handling.clear_parents_by_hours(25.0, Clock(hours_at_25=160.0)) == pytest.approx(120.0)


def test_clear_parents_along_a_course() -> None:
    """5 of 10 days at 18 C, then half of 6 days at 25 C."""
    assert handling.clear_parents_by_hours(Course.parse("18:5d,25"), CLOCK) / 24 == pytest.approx(8.0)


@pytest.mark.parametrize(("temperature", "day"), [(18, 36), (21, 25), (22, 23), (25, 18), (29, 14)])
def test_stop_collecting(temperature: float, day: int) -> None:
    assert int(handling.stop_collecting_hours(temperature, CLOCK) / 24) == day


def test_breeding() -> None:
    assert handling.breeding_allowed(28.9)
    assert not handling.breeding_allowed(29.0)


def test_wing_signs_depend_on_the_last_days_only() -> None:
    """Eclosion from hour 267.6 to 320.4 on this course: the cold must be over by hour 219.6."""
    assert not handling.wing_sign_reliable(18.0, CLOCK, 20.0)
    assert handling.wing_sign_reliable(25.0, CLOCK, 20.0)
    assert handling.wing_sign_reliable(Course.parse("18:5d,25"), CLOCK, 20.0)
    assert not handling.wing_sign_reliable(Course.parse("25:9d,18"), CLOCK, 20.0)
    assert not handling.wing_sign_reliable(Course.parse("18:16d,25"), CLOCK, 20.0)


def test_ages_and_feeding() -> None:
    assert handling.male_ready_days() == handling.AgeRange(1.0, 3.0, 7.0)
    assert handling.behaviour_age_days().best_from >= handling.anaesthesia_gap_days()
    feeding = handling.retinal_feeding()
    assert 2.0 <= feeding.least_days <= feeding.most_days
    assert [handling.virgin_keeping_days(t) for t in (18, 25)] == [14, 7]


@pytest.mark.parametrize(
    "rule",
    [
        handling.virgin_hours,
        handling.breeding_allowed,
        handling.virgin_keeping_days,
    ],
)
def test_rules_refuse_what_the_clock_refuses(rule: object) -> None:
    for temperature in (10.0, 31.0):
        with pytest.raises(RearingError, match="to plan for"):
            rule(temperature)  # type: ignore[operator]


def test_reading_off_a_table() -> None:
    table = ((10.0, 1.0), (20.0, 3.0))
    assert [handling.read_off(table, at) for at in (0, 10, 15, 20, 99)] == [1.0, 1.0, 2.0, 3.0, 3.0]
