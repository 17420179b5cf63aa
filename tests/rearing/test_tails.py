"""The incomplete beta function and the sums that rest on it, against SciPy."""

from __future__ import annotations

import math

import pytest
from scipy import special, stats

from crossplan.rearing.tails import (
    binomial_at_least,
    incomplete_beta,
    log_binomial,
    log_negative_binomial,
    negative_binomial_at_least,
)


@pytest.mark.parametrize("a", [0.5, 1.0, 7.0, 450.0])
@pytest.mark.parametrize("b", [0.02, 1.0, 3.5, 200.0])
@pytest.mark.parametrize("x", [0.0, 1e-9, 0.1, 0.5, 0.7, 0.999, 1.0])
def test_incomplete_beta(a: float, b: float, x: float) -> None:
    assert incomplete_beta(a, b, x) == pytest.approx(float(special.betainc(a, b, x)), rel=1e-10, abs=1e-12)


@pytest.mark.parametrize(("trials", "chance"), [(10, 0.5), (300, 0.125), (100_000, 1 / 64)])
def test_binomial(trials: int, chance: float) -> None:
    for need in {0, 1, int(trials * chance), int(trials * chance) + 3, trials, trials + 1}:
        assert binomial_at_least(need, trials, chance) == pytest.approx(
            float(stats.binom.sf(need - 1, trials, chance)), abs=1e-9
        )


@pytest.mark.parametrize(("mean", "size"), [(3.0, 2.0), (100.0, 0.4), (50_000.0, 9000.0)])
def test_negative_binomial(mean: float, size: float) -> None:
    chance = size / (size + mean)
    for need in {0, 1, int(mean), int(1.1 * mean) + 2}:
        assert negative_binomial_at_least(need, mean, size) == pytest.approx(
            float(stats.nbinom.sf(need - 1, size, chance)), abs=1e-9
        )
        assert log_negative_binomial(need, mean, size) == pytest.approx(
            float(stats.nbinom.logpmf(need, size, chance)), abs=1e-6
        )


def test_nothing_comes_of_nothing() -> None:
    assert negative_binomial_at_least(1, 0.0, 2.0) == 0.0
    assert negative_binomial_at_least(0, 0.0, 0.0) == 1.0


def test_exactly_so_many() -> None:
    assert math.exp(log_binomial(3, 10, 0.25)) == pytest.approx(float(stats.binom.pmf(3, 10, 0.25)))
