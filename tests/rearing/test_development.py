"""The clock: arithmetic, limits and warnings. Published values are in tests/reference."""

from __future__ import annotations

import math

import pytest

from crossplan.errors import RearingError
from crossplan.rearing.course import Course
from crossplan.rearing.development import Clock, embryo_hours, hatching_hours


def test_stage_names_in_order() -> None:
    stages = [s.stage for s in Clock().stages(Course.constant(25))]
    assert stages == ["embryo", "first instar", "second instar", "third instar", "prepupa", "pupa"]


@pytest.mark.parametrize(
    ("text", "hours"),
    [("25:5d,18", 120 + (1 - 120 / 220) * 463.1114), ("18:3d,29", 72 + (1 - 72 / 463.1114) * 176.2764)],
)
def test_one_shift_by_hand(text: str, hours: float) -> None:
    assert Clock().egg_to_adult_hours(Course.parse(text)) == pytest.approx(hours, abs=1e-3)


def test_a_shift_during_a_stage_counts_both_parts() -> None:
    """12 h of the embryo's 24 h at 25 C, the other half at 18 C."""
    embryo = Clock().stages(Course.parse("25:12h,18"))[0]
    assert embryo.hours == pytest.approx(12 + 0.5 * 24 * 463.1114 / 220, abs=1e-3)


def test_the_labs_own_figure_stretches_all_stages() -> None:
    own = Clock(hours_at_25=242.0).stages(Course.constant(22))
    usual = Clock().stages(Course.constant(22))
    assert [s.hours for s in own] == pytest.approx([1.1 * s.hours for s in usual])


def test_food_stretches_larvae_only() -> None:
    poor = {s.stage: s.hours for s in Clock(food_factor=1.5).stages(Course.constant(25))}
    assert poor == pytest.approx(
        {
            "embryo": 24,
            "first instar": 37.5,
            "second instar": 34.5,
            "third instar": 72,
            "prepupa": 12.2,
            "pupa": 87.8,
        }
    )
    assert Clock(food_factor=1.5).hours(25) == pytest.approx(220 + 48)


def test_what_comes_after_eclosion_does_not_matter() -> None:
    assert Clock().egg_to_adult_hours(Course.parse("25:12d,35")) == pytest.approx(220.0)
    with pytest.raises(RearingError, match="35 C is too warm"):
        Clock().egg_to_adult_hours(Course.parse("25:9d,35"))


@pytest.mark.parametrize("temperature", [12.0, 30.0])
def test_limits_are_inside(temperature: float) -> None:
    assert Clock().hours(temperature) > 0


@pytest.mark.parametrize(
    ("temperature", "message"),
    [(11.9, "too cold"), (30.1, "too warm"), (-3.0, "too cold"), (math.nan, "too cold")],
)
def test_outside_the_limits(temperature: float, message: str) -> None:
    with pytest.raises(RearingError, match=f"{message} to plan for: expected 12 to 30 C"):
        Clock().hours(temperature)


def test_hatching_is_not_said_where_it_was_not_measured() -> None:
    with pytest.raises(RearingError, match="13 C is too cold to say when eggs hatch: expected 14.95 to 30 C"):
        embryo_hours(13.0)


def test_hatching_along_a_course() -> None:
    assert hatching_hours(Course.constant(25)) == pytest.approx(embryo_hours(25.0))
    half = embryo_hours(25.0) / 2
    expected = half + embryo_hours(18.0) / 2
    assert hatching_hours(Course.of_starts([(0, 25), (half, 18)])) == pytest.approx(expected)


def test_eclosion_at_one_temperature() -> None:
    flies = Clock().eclosion(Course.constant(25))
    found = (flies.first_hours, flies.mean_hours, flies.sd_hours, flies.last_hours)
    assert found == pytest.approx((0.93 * 220, 220, 0.06 * 220, 0.93 * 220 + 4 * 0.06 * 220))


def test_laying_days_widen_eclosion() -> None:
    flies = Clock().eclosion(Course.constant(25), laying_hours=72.0)
    assert flies.first_hours == pytest.approx(204.6)
    assert flies.mean_hours == pytest.approx(220 + 36)
    assert flies.sd_hours == pytest.approx(math.hypot(13.2, 72 / math.sqrt(12)))
    assert flies.last_hours == pytest.approx(257.4 + 72)
    with pytest.raises(RearingError, match="-1 h of egg laying"):
        Clock().eclosion(Course.constant(25), laying_hours=-1.0)


def test_poor_food_spreads_eclosion() -> None:
    poor = Clock(food_factor=1.2)
    assert poor.eclosion(Course.constant(25)).sd_hours == pytest.approx(0.09 * poor.hours(25))


@pytest.mark.parametrize("hours", [9.0, 700.0, math.nan])
def test_hours_at_25_are_checked(hours: float) -> None:
    with pytest.raises(RearingError, match="expected 100 to 600 h") as caught:
        Clock(hours_at_25=hours)
    assert "not days" in caught.value.hint


def test_food_factor_is_checked() -> None:
    with pytest.raises(RearingError, match="food factor 9: expected 0.5 to 4"):
        Clock(food_factor=9.0)


def test_source_says_whose_figure_it_is() -> None:
    assert "FlyBase" in Clock().source
    assert "Davidson 1944" in Clock().source
    own = Clock(hours_at_25=235.0, food_factor=1.3).source
    assert own.startswith("235 h at 25 C (this lab's own figure); larval stages x 1.3 for food")


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("25", []),
        ("18", []),
        ("29", ["do not breed from them"]),
        ("16", ["below 18 C"]),
        ("12h20/12h25", ["Daily cycle"]),
        ("12h16/12h30", ["Reared at 30 C", "Reared at 16 C", "Daily cycle"]),
        ("25:12d,29", []),
    ],
)
def test_warnings(text: str, words: list[str]) -> None:
    warnings = Clock().warnings(Course.parse(text))
    assert len(warnings) == len(words)
    assert all(word in warning for word, warning in zip(words, warnings, strict=True))


def test_poor_food_is_warned_of() -> None:
    assert "Poor or crowded food" in Clock(food_factor=1.4).warnings(Course.constant(25))[0]
