"""Vials and virgins: worked by hand. The plain second method for vials is in tests/reference."""

from __future__ import annotations

import math

import pytest

from crossplan.errors import RearingError
from crossplan.rearing.yields import (
    Yield,
    chance_of_enough,
    eggs_per_day,
    progeny_distribution,
    viability,
    vials_needed,
    virgin_catch,
)


def test_one_fly_from_one_vial_by_hand() -> None:
    """A working vial misses a class of mean m with (k / (k + m)) ** k."""
    missed = (2.0 / (2.0 + 100 / 16)) ** 2
    assert chance_of_enough(1, 1 / 16, 1) == pytest.approx(0.9 * (1 - missed))
    assert chance_of_enough(3, 1 / 16, 1) == pytest.approx(1 - (1 - 0.9 * (1 - missed)) ** 3)


def test_nothing_needed_or_nothing_set_up() -> None:
    assert chance_of_enough(2, 0.5, 0) == pytest.approx(1.0)
    assert chance_of_enough(0, 0.5, 1) == 0.0


def test_failures_alone_ask_for_a_second_vial() -> None:
    assert vials_needed(1.0, 1, 0.95).vials == 2
    assert vials_needed(1.0, 1, 0.95, Yield(fail=0.0)).vials == 1


def test_expected_counts_failed_vials() -> None:
    count = vials_needed(0.125, 20, 0.95, Yield(mean=80.0), catch=0.5)
    assert count.expected == pytest.approx(count.vials * 0.9 * 80 * 0.125 * 0.5)


def test_uneven_vials_cost_more_than_a_plain_mean() -> None:
    uneven, even = vials_needed(0.125, 50, 0.95), vials_needed(0.125, 50, 0.95, Yield(k=1e6, fail=0.0))
    assert uneven.vials > even.vials >= math.ceil(50 / 12.5)


def test_tens_of_thousands_of_flies() -> None:
    count = vials_needed(1 / 64, 50_000, 0.95)
    assert 50_000 < count.expected < 52_000
    assert chance_of_enough(count.vials - 1, 1 / 64, 50_000) < 0.95 <= count.probability


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        ((0.0, 5, 0.95), "share 0.0"),
        ((0.1, 0, 0.95), "0 flies needed"),
        ((0.1, 5, 1.0), "probability 1"),
        ((1e-9, 5, 0.95), "more than 100000 vials"),
        ((0.1, 5, 0.95, Yield(), 0.0), "0 of the class collected"),
        ((0.1, 5, 0.95, Yield(), 1.2), "1.2 of the class collected"),
    ],
)
def test_what_cannot_be_meant(arguments: tuple[float, int, float], message: str) -> None:
    with pytest.raises(RearingError) as caught:
        vials_needed(*arguments)
    assert message in caught.value.message


@pytest.mark.parametrize(
    ("fields", "message"),
    [({"mean": 0.0}, "progeny per vial"), ({"k": 0.0}, "k = 0"), ({"fail": 1.0}, "1 of vials fail")],
)
def test_a_yield_is_checked(fields: dict[str, float], message: str) -> None:
    with pytest.raises(RearingError, match=message):
        Yield(**fields)


@pytest.mark.parametrize(("vials", "share"), [(1, 1.0), (2, 0.25), (150, 0.01)])
def test_distribution_has_the_mean_and_the_tail(vials: int, share: float) -> None:
    chances = progeny_distribution(4000, vials, share)
    assert math.fsum(chances) == pytest.approx(1.0, abs=1e-9)
    assert math.fsum(i * c for i, c in enumerate(chances)) == pytest.approx(vials * 90 * share, rel=1e-6)
    assert math.fsum(chances[20:]) == pytest.approx(chance_of_enough(vials, share, 20), abs=1e-9)


def test_spread_of_a_vial_is_the_one_measured() -> None:
    """All vials, failed ones too: deviation near 0.74 of the mean (90 of 122), 90 % give up to about 200."""
    chances = progeny_distribution(3000)
    mean = math.fsum(i * c for i, c in enumerate(chances))
    deviation = math.sqrt(math.fsum((i - mean) ** 2 * c for i, c in enumerate(chances)))
    assert 0.65 < deviation / mean < 0.9
    assert math.fsum(chances[:201]) == pytest.approx(0.9, abs=0.05)


@pytest.mark.parametrize(("temperature", "mean"), [(15, 100), (18, 100), (25, 100), (29, 60), (30, 30)])
def test_yield_at_a_temperature(temperature: float, mean: float) -> None:
    assert Yield().at(temperature).mean == pytest.approx(mean)


def test_eggs_and_viability() -> None:
    assert [eggs_per_day(t) for t in (18, 25, 29)] == [12.5, 25, 20]
    assert [viability(t) for t in (18, 28, 29)] == [0.8, 0.8, 0.6]
    with pytest.raises(RearingError, match="too warm"):
        viability(31.0)


# -- virgins ---------------------------------------------------------------------------------------


def test_three_even_visits_catch_all() -> None:
    assert virgin_catch([0.0, 8.0, 16.0], 25.0) == pytest.approx(1.0)


def test_the_night_is_lost_at_25() -> None:
    """Light from 8: of the gate, 6 to 12 with its peak at 9, half is left after 9; of the rest 8 h of 24."""
    assert virgin_catch([9.0, 17.0], 25.0) == pytest.approx(0.8 * 0.5 + 0.2 * 8 / 24)


def test_a_cool_night_saves_it() -> None:
    assert virgin_catch([9.0, 17.0], 25.0, night_temperature=18.0) == pytest.approx(1.0)
    assert virgin_catch([9.0, 17.0], 25.0, night_temperature=18.0, strict=True) == 0.0


def test_one_visit_catches_none() -> None:
    assert virgin_catch([9.0], 18.0) == 0.0


def test_the_dark_hours_give_little() -> None:
    """From 14 to 20 h the gate is shut."""
    assert virgin_catch([14.0, 20.0], 25.0) == pytest.approx(0.2 * 6 / 24)


def test_lights_on_moves_the_gate() -> None:
    assert virgin_catch([6.0, 12.0], 25.0, lights_on=8.0) == pytest.approx(0.8 + 0.2 * 6 / 24)
    assert virgin_catch([18.0, 23.5], 25.0, lights_on=20.0) == pytest.approx(
        virgin_catch([6.0, 11.5], 25.0, lights_on=8.0)
    )


@pytest.mark.parametrize("visits", [[], [24.0], [-1.0, 8.0]])
def test_visits_are_hours_of_the_day(visits: list[float]) -> None:
    with pytest.raises(RearingError, match="expected hours of the day from 0 to below 24"):
        virgin_catch(visits, 25.0)
