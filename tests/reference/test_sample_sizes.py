"""Head-counts against SciPy, against published formulas, and against worked values."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest
from scipy import stats

from crossplan.rearing.counting import both_at_least, flies_to_score, flies_to_score_both, sedcole
from crossplan.rearing.yields import Yield, chance_of_enough, vials_needed

#: share, need, probability, fewest flies, probability reached; recomputed by exact summation
WORKED = (
    ("1/2", 1, 0.99, 7, 0.992188),
    ("1/3", 10, 0.95, 44, 0.954786),
    ("1/4", 1, 0.95, 11, 0.957765),  # some course pages print 10, which gives 0.944 only
    ("1/4", 1, 0.99, 17, 0.992483),  # some print 16
    ("1/64", 1, 0.95, 191, 0.950606),  # some print about 190
    ("1/4", 20, 0.99, 121, 0.990526),
    ("1/6", 5, 0.95, 53, 0.954046),
    ("1/8", 10, 0.95, 123, 0.952530),
    ("1/9", 5, 0.95, 80, 0.950913),
    ("1/16", 1, 0.95, 47, 0.951844),
    ("1/16", 1, 0.99, 72, 0.990407),
    ("1/20", 1, 0.95, 59, 0.951505),  # recombinant over a balancer, r = 1/5, of all flies
    ("1/100", 1, 0.95, 299, 0.950464),
    ("1/1000", 2, 0.95, 4742, 0.950000),
    ("3/40", 1, 0.95, 39, 0.952189),
    (
        "153/3850",
        1,
        0.95,
        74,
        0.950253,
    ),  # split lines that worked, Meissner et al. 2025, eLife 98405: 3060 of 77 000
    ("31/200", 1, 0.95, 18, 0.951759),
    ("1/16", 1, 0.996655493, 89, 0.996798),  # one of three selections that shall succeed with 0.99 together
)


@pytest.mark.parametrize(("share", "need", "probability", "flies", "reached"), WORKED)
def test_worked_values(share: str, need: int, probability: float, flies: int, reached: float) -> None:
    score = flies_to_score(Fraction(share), need, probability)
    assert score.score == flies
    assert score.probability_reached == pytest.approx(reached, abs=1e-6)
    assert score.expected == pytest.approx(flies * float(Fraction(share)))


@pytest.mark.parametrize("share", [Fraction(1, 2), Fraction(3, 16), Fraction(1, 8), Fraction(1, 64), Fraction(1, 500)])
@pytest.mark.parametrize("probability", [0.5, 0.9, 0.99])
def test_one_fly_is_the_logarithm_formula(share: Fraction, probability: float) -> None:
    """n = ceil(ln(1 - g) / ln(1 - p)) for one fly; at a tie logarithms may round up, counting does not."""
    logarithms = math.log(1.0 - probability) / math.log(1.0 - float(share))
    assert flies_to_score(share, 1, probability).score == math.ceil(logarithms - 1e-12)


@pytest.mark.parametrize("share", [0.5, 1 / 3, 0.125, 1 / 16, 0.0123])
@pytest.mark.parametrize("need", [1, 2, 7, 40, 333])
@pytest.mark.parametrize("probability", [0.1, 0.8, 0.95, 0.999])
def test_scipy_agrees(share: float, need: int, probability: float) -> None:
    """Fewest n = need + quantile of the failures before the need-th success."""
    expected = need + int(stats.nbinom.ppf(probability, need, share))
    assert flies_to_score(share, need, probability).score == expected


@pytest.mark.parametrize(
    ("need", "share"), [(5000, Fraction(1, 64)), (20_000, Fraction(1, 8)), (1, Fraction(1, 90_000))]
)
def test_large_numbers_against_scipy(need: int, share: Fraction) -> None:
    flies = flies_to_score(share, need, 0.95).score
    assert stats.binom.sf(need - 1, flies, float(share)) >= 0.95
    assert stats.binom.sf(need - 1, flies - 1, float(share)) < 0.95


@pytest.mark.parametrize(
    ("need", "share", "probability", "closed", "exact"),
    [
        (5, 1 / 4, 0.95, 34.8, 34),
        (5, 1 / 16, 0.95, 150.0, 144),
        (10, 1 / 9, 0.99, 171.7, 165),
        (10, 1 / 4, 0.95, 60.1, 60),
    ],
)
def test_sedcole_comes_out_high(need: int, share: float, probability: float, closed: float, exact: int) -> None:
    """Sedcole 1977, Crop Sci. 17:667 (formula from memory)."""
    assert sedcole(share, need, probability) == pytest.approx(closed, abs=0.05)
    assert flies_to_score(share, need, probability).score == exact


def test_females_and_males_at_once() -> None:
    """Five females and three males of a class of 1/16, half of it each sex."""
    score = flies_to_score_both(Fraction(1, 32), 5, Fraction(1, 32), 3, 0.95)
    assert (score.score, score.probability_reached) == (296, pytest.approx(0.950843, abs=1e-6))
    assert both_at_least(5, 3, 295, 1 / 32, 1 / 32) == pytest.approx(0.949835, abs=1e-6)


def test_females_and_males_by_direct_sum() -> None:
    n, a, b, p, q = 40, 3, 4, 0.2, 0.1
    direct = sum(
        stats.multinomial.pmf([i, j, n - i - j], n, [p, q, 1 - p - q])
        for i in range(a, n + 1) for j in range(b, n - i + 1)
    )  # fmt: skip
    assert both_at_least(a, b, n, p, q) == pytest.approx(direct, abs=1e-12)


def test_two_selections_multiply() -> None:
    """1/16, then 1/9: 0.95 each is 0.9025 together; 0.95 together takes sqrt(0.95) each, 57 + 32 flies."""
    first, second = Fraction(1, 16), Fraction(1, 9)
    each = math.sqrt(0.95)
    assert [flies_to_score(p, 1, 0.95).score for p in (first, second)] == [47, 26]
    assert [flies_to_score(p, 1, each).score for p in (first, second)] == [57, 32]


# -- vials -----------------------------------------------------------------------------------------


def convolved(vials: int, share: float, yield_: Yield, most: int) -> list[float]:
    """The plain method: one vial's counts, thinned fly by fly, convolved vial by vial."""
    top = 2500
    progeny = stats.nbinom.pmf(range(top), yield_.k, yield_.k / (yield_.k + yield_.mean))
    one = [
        (1 - yield_.fail) * float((progeny * stats.binom.pmf(i, range(top), share)).sum())
        + (yield_.fail if i == 0 else 0)
        for i in range(most)
    ]
    total = [1.0] + [0.0] * (most - 1)
    for _ in range(vials):
        total = [math.fsum(total[j] * one[i - j] for j in range(i + 1)) for i in range(most)]
    return total


@pytest.mark.parametrize(("share", "need", "catch"), [(1 / 8, 20, 1.0), (1 / 16, 5, 0.6), (1 / 2, 60, 1.0)])
def test_vials_against_convolution(share: float, need: int, catch: float) -> None:
    for vials in range(1, 6):
        short = math.fsum(convolved(vials, share * catch, Yield(), need))
        assert chance_of_enough(vials, share, need, Yield(), catch) == pytest.approx(1.0 - short, abs=1e-10)
    count = vials_needed(share, need, 0.95, Yield(), catch)
    assert chance_of_enough(count.vials, share, need, Yield(), catch) == count.probability >= 0.95
    assert chance_of_enough(count.vials - 1, share, need, Yield(), catch) < 0.95


def test_steps_over_working_vials_change_nothing() -> None:
    """2000 vials: the sum over every number of working vials, by SciPy, against the sum in steps."""
    vials, yield_, need = 2000, Yield(mean=3.0, k=2.0, fail=0.1), 5300
    working = range(1, vials + 1)
    whole = math.fsum(stats.binom.pmf(w, vials, 0.9) * stats.nbinom.sf(need - 1, w * 2.0, 2.0 / 5.0) for w in working)
    assert 0.1 < whole < 0.9999
    assert chance_of_enough(vials, 1.0, need, yield_) == pytest.approx(whole, abs=1e-10)


def test_even_vials_without_failures_are_poisson() -> None:
    """With k without bound and no failed vial a count is Poisson."""
    even = Yield(mean=40.0, k=1e6, fail=0.0)
    assert chance_of_enough(3, 0.25, 25, even) == pytest.approx(stats.poisson.sf(24, 30.0), abs=1e-4)
