"""The clock against published development times; each value stands with its citation.

Tolerances cover the spread between sources, which is about 5 % at one temperature.
"""

from __future__ import annotations

import pytest

from crossplan.errors import RearingError
from crossplan.rearing.course import Course
from crossplan.rearing.development import Clock, embryo_hours, hatching_hours

DAY = 24.0

#: Powsner 1935, Physiol. Zool. 8:474-520, table of embryos as reprinted in McCullagh & Nelder 1989,
#: Generalized Linear Models, 2nd ed.: temperature in degrees C, mean hours from laying to hatching
POWSNER = (
    (14.95, 67.5), (16.16, 57.1), (16.19, 56.0), (17.15, 48.4), (18.20, 41.2), (19.08, 37.8), (20.07, 33.33),
    (22.14, 26.5), (23.27, 24.24), (24.09, 22.44), (24.81, 21.13), (24.84, 21.05), (25.06, 20.39),
    (25.06, 20.41), (25.80, 19.45), (26.92, 18.77), (27.68, 17.79), (28.89, 17.38), (28.96, 17.26),
    (29.00, 17.18),
)  # fmt: skip


def stage(name: str, temperature: float) -> float:
    return next(s.hours for s in Clock().stages(Course.constant(temperature)) if s.stage == name)


def puparium_to_adult(temperature: float) -> float:
    return stage("prepupa", temperature) + stage("pupa", temperature)


def egg_to_puparium(temperature: float) -> float:
    return next(s.ends_at_hours for s in Clock().stages(Course.constant(temperature)) if s.stage == "third instar")


# -- the twelve check values -----------------------------------------------------------------------


@pytest.mark.parametrize(
    ("temperature", "hours", "tolerance"),
    [
        (25.06, 20.4, 0.05),  # 1: Powsner 1935, two batches, n = 121
        (18.20, 41.2, 0.06),  # 2: Powsner 1935, n = 64
        (29.00, 17.18, 0.05),  # 3: Powsner 1935, n = 232
    ],
)
def test_embryo(temperature: float, hours: float, tolerance: float) -> None:
    assert embryo_hours(temperature) == pytest.approx(hours, rel=tolerance)


def test_4_no_speeding_up_above_30() -> None:
    """Eggs took 18.20 h at 32.00 C, 16.81 h at 30.05 C (Powsner 1935): a logistic is wrong there; refuse."""
    with pytest.raises(RearingError, match="too warm to plan for: expected 12 to 30 C") as caught:
        Clock().hours(30.05)
    assert "Powsner 1935" in caught.value.hint
    with pytest.raises(RearingError, match="32 C is too warm"):
        embryo_hours(32.0)


def test_5_puparium_to_adult_at_25() -> None:
    """FlyBase FBdv 100 h; Bonnier 1926 (J. Exp. Biol. 4:186) 111.4 h females, 115.5 h males."""
    assert 95.0 <= puparium_to_adult(25.0) <= 120.0


@pytest.mark.parametrize("hours", [120.0, 116.6, 116.8])  # 6: FlyBase FBdv; Bonnier 1926 females, males
def test_egg_to_puparium_at_25(hours: float) -> None:
    assert egg_to_puparium(25.0) == pytest.approx(hours, rel=0.06)


@pytest.mark.parametrize(
    ("temperature", "hours", "tolerance"),
    [
        (25.0, 220.0, 0.07),  # 7: FlyBase FBdv
        (25.0, 227.98, 0.07),  # 7: Bonnier 1926, females
        (25.0, 232.24, 0.07),  # 7: Bonnier 1926, males
        (25.0, 216.0, 0.07),  # 7: Bloomington Drosophila Stock Center, stockkeeping page, 9 days
        (18.0, 19 * DAY, 0.07),  # 8: Bloomington; Ashburner & Thompson 1978, as quoted
        (22.0, 11 * DAY, 0.12),  # 9: Bloomington, rounded to days
        (29.0, 7 * DAY, 0.12),  # 9: Bloomington, rounded to days
        (30.0, 178.10, 0.12),  # 10: Bonnier 1926, females
        (30.0, 187.63, 0.12),  # 10: Bonnier 1926, males
        (20.0, 15 * DAY, 0.08),  # Ward's Science, Working with Drosophila, p. 4
    ],
)
def test_egg_to_adult(temperature: float, hours: float, tolerance: float) -> None:
    assert Clock().hours(temperature) == pytest.approx(hours, rel=tolerance)
    assert Clock().egg_to_adult_hours(Course.constant(temperature)) == pytest.approx(hours, rel=tolerance)


def test_11_at_12_degrees() -> None:
    """Over 50 days (Ashburner & Thompson 1978, as quoted)."""
    assert Clock().hours(12.0) >= 1150.0


def test_12_cycles_around_25_are_slower() -> None:
    """20/30 C and 22.5/27.5 C against 25 C (Manenti et al. 2021, Insects 12:925; order from the curve)."""
    wide = Clock().egg_to_adult_hours(Course.parse("12h20/12h30"))
    narrow = Clock().egg_to_adult_hours(Course.parse("12h22.5/12h27.5"))
    assert wide > narrow > Clock().hours(25.0)


# -- more of the same ------------------------------------------------------------------------------


@pytest.mark.parametrize(("temperature", "hours"), POWSNER)
def test_embryo_within_5_percent_of_every_batch(temperature: float, hours: float) -> None:
    assert embryo_hours(temperature) == pytest.approx(hours, rel=0.05)


def test_stage_boundaries_at_25() -> None:
    """FlyBase FBdv: hours after egg laying."""
    ends = [s.ends_at_hours for s in Clock().stages(Course.constant(25.0))]
    assert ends == pytest.approx([24.0, 49.0, 72.0, 120.0, 132.2, 220.0], abs=1e-9)


def test_prepupa_at_25() -> None:
    """Robertson 1936 (J. Morphol. 59:351) 11.5 h; Bainbridge & Bownes 1981 12.5 h."""
    assert 11.5 <= stage("prepupa", 25.0) <= 12.5


def test_egg_to_puparium_at_20() -> None:
    """8 days (Ward's Science, Working with Drosophila, p. 4)."""
    assert egg_to_puparium(20.0) == pytest.approx(8 * DAY, rel=0.08)


@pytest.mark.parametrize(("temperature", "hours"), [(18.0, 214.9), (25.0, 102.1), (29.0, 81.8)])
def test_shape_is_davidsons_pupal_law(temperature: float, hours: float) -> None:
    """Davidson 1944 (J. Anim. Ecol. 13:26), pupa: its ratio to 25 C is used for the whole development."""
    assert Clock().hours(temperature) / Clock().hours(25.0) == pytest.approx(hours / 102.1, rel=1e-3)


def test_poor_food_reaches_the_measured_total() -> None:
    """25 C, food low in yeast: 307.5 h males, 310.8 h females (open counts, University of East Anglia)."""
    assert 295.0 <= Clock(food_factor=1.8).hours(25.0) <= 320.0


def test_first_flies_at_25() -> None:
    """8.5 days at the least (Ashburner & Thompson 1978, as quoted)."""
    assert Clock().eclosion(Course.constant(25.0)).first_hours / DAY == pytest.approx(8.5, abs=0.1)


@pytest.mark.parametrize("text", ["25", "18", "25:10h,18", "6h18/6h25"])
def test_rates_summed_in_small_steps_agree(text: str) -> None:
    """A plain second method: march along the course in steps of six minutes."""
    course = Course.parse(text)
    for of, hours in (
        (Clock().hours, Clock().egg_to_adult_hours(course)),
        (embryo_hours, hatching_hours(course)),
    ):
        done, steps = 0.0, 0
        while done < 1.0:
            done += 0.1 / of(course.temperature_at(steps * 0.1 + 0.05))
            steps += 1
        assert hours == pytest.approx(steps * 0.1, abs=0.11)
