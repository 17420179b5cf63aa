"""What must hold of the clock and the counts, whatever the numbers."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from crossplan.rearing.counting import exact_at_least, flies_to_score, parse_share
from crossplan.rearing.course import Course, Span
from crossplan.rearing.development import Clock, embryo_hours
from crossplan.rearing.handling import clear_parents_by_hours, stop_collecting_hours, virgin_gap, virgin_hours
from crossplan.rearing.yields import Yield, chance_of_enough, vials_needed, virgin_catch

temperatures = st.floats(12.0, 30.0)
hours = st.floats(0.5, 200.0)
spans = st.builds(Span, hours, temperatures)
courses = st.builds(
    Course,
    st.lists(spans, max_size=4).map(tuple),
    st.lists(spans, min_size=1, max_size=3).map(tuple),
)
clocks = st.builds(Clock, st.floats(150.0, 350.0), st.floats(0.8, 2.0))
shares = st.fractions(Fraction(1, 200), Fraction(1), max_denominator=200)
probabilities = st.sampled_from([0.05, 0.5, 0.8, 0.95, 0.99])
yields = st.builds(Yield, st.floats(5.0, 300.0), st.floats(0.5, 20.0), st.floats(0.0, 0.6))


@settings(deadline=None)
@given(clocks, temperatures, temperatures)
def test_warmer_is_faster(clock: Clock, a: float, b: float) -> None:
    cold, warm = min(a, b), max(a, b)
    assert clock.hours(warm) <= clock.hours(cold)
    assert virgin_hours(warm) <= virgin_hours(cold)
    if cold >= 14.95:
        assert embryo_hours(warm) <= embryo_hours(cold)


@settings(deadline=None)
@given(clocks, courses)
def test_stages_add_up_to_the_whole(clock: Clock, course: Course) -> None:
    stages = clock.stages(course)
    assert stages[-1].ends_at_hours == pytest.approx(clock.egg_to_adult_hours(course), rel=1e-9)
    assert sum(s.hours for s in stages) == pytest.approx(stages[-1].ends_at_hours, rel=1e-9)
    assert all(s.hours > 0 for s in stages)


@settings(deadline=None)
@given(clocks, courses, st.floats(0.0, 1.0))
def test_progress_adds_up(clock: Clock, course: Course, part: float) -> None:
    """Rate summation: what is done until an hour and from there on makes one whole."""
    adult = clock.egg_to_adult_hours(course)
    middle = part * adult
    until, after = clock.progress(course, middle), clock.progress(course, adult, laid_at=middle)
    assert until + after == pytest.approx(1.0, rel=1e-9)
    assert clock.hour_of(until, course) == pytest.approx(middle, rel=1e-9, abs=1e-9)


@settings(deadline=None)
@given(clocks, courses)
def test_between_the_coldest_and_the_warmest(clock: Clock, course: Course) -> None:
    adult = clock.egg_to_adult_hours(course)
    met = course.temperatures(0.0, adult)
    assert clock.hours(max(met)) * (1 - 1e-9) <= adult <= clock.hours(min(met)) * (1 + 1e-9)


@settings(deadline=None)
@given(clocks, st.lists(spans, min_size=1, max_size=4), temperatures, st.floats(0.3, 0.7))
def test_cutting_a_stretch_in_two_changes_nothing(clock: Clock, lead: list[Span], end: float, cut: float) -> None:
    whole = Course(tuple(lead), (Span(24.0, end),))
    halves = [Span(s.hours * f, s.temperature) for s in lead for f in (cut, 1.0 - cut)]
    if all(s.hours >= 0.15 for s in halves):
        split = Course(tuple(halves), (Span(11.0, end), Span(3.0, end)))
        assert clock.egg_to_adult_hours(split) == pytest.approx(clock.egg_to_adult_hours(whole), rel=1e-9)
        assert virgin_gap(split, 5.0) == pytest.approx(virgin_gap(whole, 5.0), rel=1e-9)


@settings(deadline=None)
@given(clocks, courses, st.floats(0.0, 96.0))
def test_deadlines_come_in_order(clock: Clock, course: Course, laying: float) -> None:
    flies = clock.eclosion(course, laying)
    assert clear_parents_by_hours(course, clock) < flies.first_hours < flies.last_hours
    assert flies.first_hours < flies.mean_hours < flies.last_hours
    assert flies.first_hours + 24.0 < stop_collecting_hours(course, clock)
    assert clock.eclosion(course, laying + 1.0).last_hours > flies.last_hours


@settings(deadline=None)
@given(shares, st.integers(1, 12), probabilities)
def test_fewest_flies_by_exact_fractions(share: Fraction, need: int, probability: float) -> None:
    score = flies_to_score(share, need, probability).score
    asked = Fraction(str(probability))
    assert exact_at_least(need, score, share) >= asked
    assert score == need or exact_at_least(need, score - 1, share) < asked


@settings(deadline=None)
@given(shares, shares, st.integers(1, 300), st.integers(1, 300), probabilities, probabilities)
def test_more_asked_means_more_flies(
    p: Fraction, q: Fraction, need: int, other: int, sure: float, surer: float
) -> None:
    fewest = flies_to_score(max(p, q), min(need, other), min(sure, surer)).score
    assert fewest <= flies_to_score(min(p, q), max(need, other), max(sure, surer)).score


@settings(deadline=None)
@given(yields, shares, shares, st.integers(1, 60), st.integers(1, 60), probabilities, probabilities)
def test_more_asked_means_more_vials(
    each: Yield, p: Fraction, q: Fraction, need: int, other: int, sure: float, surer: float
) -> None:
    least = vials_needed(max(p, q), min(need, other), min(sure, surer), each)
    most = vials_needed(min(p, q), max(need, other), max(sure, surer), each)
    assert least.vials <= most.vials
    for count, share, wanted, asked in (
        (least, max(p, q), min(need, other), min(sure, surer)),
        (most, min(p, q), max(need, other), max(sure, surer)),
    ):
        assert count.probability >= asked
        assert chance_of_enough(count.vials - 1, share, wanted, each) < asked


@settings(deadline=None)
@given(st.lists(st.floats(0.0, 23.9), min_size=1, max_size=6), temperatures, st.floats(0.0, 23.0))
def test_a_catch_is_a_share(visits: list[float], temperature: float, lights_on: float) -> None:
    caught = virgin_catch(visits, temperature, lights_on=lights_on)
    assert -1e-12 <= caught <= 1.0
    assert virgin_catch(visits, temperature, lights_on=lights_on, strict=True) <= caught + 1e-12


@settings(deadline=None)
@given(shares)
def test_a_share_is_read_as_it_is_written(share: Fraction) -> None:
    assert parse_share(f" {share.numerator} / {share.denominator}") == share
    assert parse_share(str(share)) == share
