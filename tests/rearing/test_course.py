"""Temperature courses: how they are written, and what they say."""

from __future__ import annotations

import math

import pytest

from crossplan.errors import RearingError
from crossplan.rearing.course import Course, Piece, Span


def test_one_temperature() -> None:
    course = Course.parse(" 25 ")
    assert course == Course.constant(25)
    assert course.is_constant
    assert not course.is_cycle
    assert list(course.pieces(3.0)) == [Piece(3.0, math.inf, 25.0)]


@pytest.mark.parametrize("text", ["25C", "25 C", "25 °C", "25.0"])
def test_a_unit_may_stand(text: str) -> None:
    assert Course.parse(text) == Course.constant(25.0)


def test_a_change() -> None:
    course = Course.parse("18:5d, 25")
    assert list(course.pieces()) == [Piece(0.0, 120.0, 18.0), Piece(120.0, math.inf, 25.0)]
    assert [course.temperature_at(h) for h in (0.0, 119.9, 120.0, 1e6)] == [18.0, 18.0, 25.0, 25.0]
    assert course == Course.of_starts([(0, 18), (120, 25)])
    assert not course.is_constant


def test_a_daily_cycle() -> None:
    course = Course.parse("12h20/12h30")
    assert course.is_cycle
    assert [course.temperature_at(h) for h in (0.0, 12.0, 24.0, 37.0)] == [20.0, 30.0, 20.0, 30.0]


def test_a_cycle_for_some_days_is_cut_at_its_end() -> None:
    course = Course.parse("16h25/8h18:2.25d,29")
    pieces = [(p.start_hour, p.temperature) for p in course.pieces()]
    assert pieces == [(0.0, 25.0), (16.0, 18.0), (24.0, 25.0), (40.0, 18.0), (48.0, 25.0), (54.0, 29.0)]


def test_temperatures_met() -> None:
    course = Course.parse("18:2d,25:1d,29")
    assert course.temperatures(0.0, 48.0) == (18.0,)
    assert course.temperatures(47.0, 73.0) == (18.0, 25.0, 29.0)


def test_integral_and_its_inverse() -> None:
    course = Course.parse("10:10h,20")
    assert course.integral(lambda t: t, 4.0, 16.0) == pytest.approx(6 * 10 + 6 * 20)
    assert course.hours_until(180.0, lambda t: t, start=4.0) == pytest.approx(16.0)
    assert course.hours_until(0.0, lambda t: t, start=4.0) == 4.0


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("warm", "'warm' is not a temperature (expected degrees C, such as 25)"),
        ("", "'' is not a temperature"),
        ("-5", "'-5' is not a temperature"),
        ("18:5,25", "'5' is not a duration (expected days or hours: 5d, 12h)"),
        ("18,25", "'18' does not say how long (expected '18:5d' or '18:12h'"),
        ("18:5d", "the last part '18:5d' has a duration"),
        ("12h20", "the cycle '12h20' has only one temperature"),
        ("12h20/30", "'30' is not a piece of a cycle (expected hours, then the temperature: 12h20)"),
        ("12h20/12hwarm", "'warm' is not a temperature"),
        ("18:0h,25", "0 h at 18 C: a piece of a course lasts between 0.1 h and 366 days"),
        ("18:400d,25", "9600 h at 18 C"),
        ("12h20/12h30:900d,25", "21600 h at 20 C"),
    ],
)
def test_what_is_wrong_is_said(text: str, message: str) -> None:
    with pytest.raises(RearingError) as caught:
        Course.parse(text)
    assert message in caught.value.message
    assert "12h20/12h30" in caught.value.hint


def test_a_course_has_a_beginning_and_an_end() -> None:
    with pytest.raises(RearingError, match="must begin at hour 0"):
        Course.of_starts([(5, 18)])
    with pytest.raises(RearingError, match="what holds at its end"):
        Course((Span(5.0, 18.0),), ())
    with pytest.raises(RearingError, match="nan is not a temperature"):
        Course.constant(math.nan)
    with pytest.raises(RearingError, match="-48 h at 18 C"):
        Course.of_starts([(0, 25), (72, 18), (24, 25)])
