"""How many flies to look through, so that enough of a class are among them.

The number of flies of a class with share p among n is binomial, if the flies are told apart without error
and live equally well. The answer is the fewest n with P(Bin(n, p) >= need) >= probability: exact, no
rounding of an approximation.
"""

from __future__ import annotations

import math
import re
from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from statistics import NormalDist

from crossplan.errors import RearingError
from crossplan.rearing.tails import binomial_at_least, log_binomial

#: more flies than anyone looks through; a request beyond it is a mistake
MOST_FLIES = 10_000_000
#: floating point decides unless it comes this close to the probability asked for; then whole numbers do
_TIE = 1e-8
#: whole-number arithmetic up to this many bits in all (about a second), else floating point decides ties too
_MOST_BITS = 4e9

_HOW_TO_WRITE_A_SHARE = "Write a share of all progeny as 1/8, 0.125 or 12.5%."
_FRACTION = re.compile(r"(\d{1,18})\s*/\s*(\d{1,18})")
_DECIMAL = re.compile(r"((?:\d{1,18}(?:\.\d{0,30})?)|\.\d{1,30})\s*(%?)")

Share = Fraction | float


@dataclass(frozen=True, slots=True)
class Score:
    """Flies to look through, flies of the class expected among them, the probability of enough of it."""

    score: int
    expected: float
    probability_reached: float


def parse_share(text: str) -> Fraction:
    """Return the share that `text` writes, exactly: `1/8`, `0.125`, `12.5%`, with a decimal point or comma.

    Raises:
        RearingError: it is none of these, or not above 0 and at most 1.
    """
    written = text.strip().replace(",", ".")
    if (found := _FRACTION.fullmatch(written)) is not None and int(found[2]) > 0:
        share = Fraction(int(found[1]), int(found[2]))
    elif (found := _DECIMAL.fullmatch(written)) is not None:
        share = Fraction(found[1]) / (100 if found[2] else 1)
    else:
        raise RearingError(f"'{text}' is not a share: expected 1/8, 0.125 or 12.5%", _HOW_TO_WRITE_A_SHARE)
    if not 0 < share <= 1:
        raise RearingError(f"'{text}' is not a share: expected more than 0 and at most 1 (100%)", _HOW_TO_WRITE_A_SHARE)
    return share


def as_written(value: Share) -> Fraction:
    """Return a number exactly as it is written in decimals: 0.1 is one tenth, not the nearest binary
    fraction."""
    return value if isinstance(value, Fraction) else Fraction(repr(float(value)))


def check_request(share: Share, need: int, probability: float) -> None:
    """Refuse a share, a number or a probability that cannot be meant.

    Raises:
        RearingError: the share is not above 0 and at most 1, `need` is below 1, or the probability not
            between 0 and 1.
    """
    if not 0 < share <= 1:
        raise RearingError(f"share {share}: expected more than 0 and at most 1", _HOW_TO_WRITE_A_SHARE)
    if need < 1:
        raise RearingError(f"{need} flies needed: expected 1 or more")
    if not 0.0 < probability < 1.0:
        raise RearingError(
            f"probability {probability:g}: expected more than 0 and less than 1, such as 0.95",
            "No number of flies makes it certain; 95 % is written 0.95.",
        )


@lru_cache(maxsize=4096)
def flies_to_score(share: Share, need: int, probability: float) -> Score:
    """Return the fewest flies to look through for `need` of a class with the probability asked for.

    Args:
        share: share of the class among all flies looked through, above 0 and at most 1.
        need: flies of the class wanted, 1 or more.
        probability: between 0 and 1, exclusive.

    Raises:
        RearingError: an argument is out of range, or more than ten million flies would be needed.
    """
    check_request(share, need, probability)
    p, asked = as_written(share), as_written(probability)

    def enough(flies: int) -> bool:
        reached = binomial_at_least(need, flies, float(p))
        if abs(reached - probability) > _TIE or not _exact_is_quick(flies, need, p):
            return reached >= probability
        return exact_at_least(need, flies, p) >= asked

    guess = sedcole(float(p), need, probability)
    too_many = f"share {float(share):g}: more than {MOST_FLIES} flies would have to be looked through for {need}"
    if guess > MOST_FLIES:
        raise RearingError(too_many, "The class is too rare to be picked from one cross.")
    flies = fewest(enough, need, round(guess), MOST_FLIES, too_many)
    return Score(flies, flies * float(p), binomial_at_least(need, flies, float(p)))


@lru_cache(maxsize=4096)
def flies_to_score_both(
    share_female: Share, need_females: int, share_male: Share, need_males: int, probability: float
) -> Score:
    """Return the fewest flies to look through for females and males of a class at once, as for founding a
    stock.

    The two shares are of all progeny, both sexes together. `expected` counts both.

    Raises:
        RearingError: an argument is out of range, or more than ten million flies would be needed.
    """
    check_request(share_female, need_females, probability)
    check_request(share_male, need_males, probability)
    if share_female + share_male > 1 + 1e-12:
        raise RearingError(f"shares {share_female} and {share_male} add up to more than 1", _HOW_TO_WRITE_A_SHARE)
    female, male = float(share_female), float(share_male)
    either = need_females + need_males

    def reached(flies: int) -> float:
        return both_at_least(need_females, need_males, flies, female, male)

    guess = max(sedcole(female, need_females, probability), sedcole(male, need_males, probability))
    too_many = f"more than {MOST_FLIES} flies would have to be looked through"
    flies = fewest(lambda n: reached(n) >= probability, either, round(guess), MOST_FLIES, too_many)
    return Score(flies, flies * (female + male), reached(flies))


def both_at_least(need_a: int, need_b: int, flies: int, share_a: float, share_b: float) -> float:
    """Return the probability of `need_a` or more of one class and `need_b` or more of another among
    `flies`."""
    if need_a + need_b > flies:
        return 0.0
    others = min(1.0, share_a / (1.0 - share_b)) if share_b < 1.0 else 0.0
    lost = (
        math.exp(log_binomial(few, flies, share_b)) * binomial_at_least(need_a, flies - few, others)
        for few in range(need_b)
    )
    return binomial_at_least(need_a, flies, share_a) - math.fsum(lost)


def exact_at_least(need: int, trials: int, chance: Fraction) -> Fraction:
    """Return the probability of `need` or more successes as an exact fraction."""
    yes, whole = chance.numerator, chance.denominator
    no = whole - yes
    if no == 0:
        return Fraction(int(trials >= need))
    if need > trials:
        return Fraction(0)
    term = no**trials
    total = term
    for k in range(need - 1):
        term = term * ((trials - k) * yes) // ((k + 1) * no)
        total += term
    return 1 - Fraction(total, whole**trials)


def sedcole(share: float, need: int, probability: float) -> float:
    """Return the closed approximation of Sedcole 1977 (Crop Sci. 17:667) to the flies to look through.

    It comes out a little high; here it only says where the exact search begins.
    """
    z = NormalDist().inv_cdf(probability)
    miss = 1.0 - share
    a = need - 0.5
    return max((2.0 * a + z * z * miss + z * math.sqrt(z * z * miss * miss + 4.0 * miss * a)) / (2.0 * share), need)


def fewest(enough: Callable[[int], bool], least: int, guess: int, most: int, too_many: str) -> int:
    """Return the smallest number from `least` to `most` that is `enough`; once enough, every larger one is
    too.

    The search widens its steps around `guess`, then halves them.

    Raises:
        RearingError: not even `most` is enough; the message is `too_many`.
    """
    low, high = least - 1, min(max(guess, least), most)
    step = max(1, math.isqrt(high) // 4)
    if enough(high):
        while high - step > low and enough(high - step):
            high, step = high - step, 2 * step
        low = max(low, high - step)
    else:
        while True:
            if high >= most:
                raise RearingError(too_many, "Ask for fewer flies, or for a class with a larger share.")
            low, high = high, min(high + step, most)
            if enough(high):
                break
            step *= 2
    while high - low > 1:
        middle = (low + high) // 2
        low, high = (low, middle) if enough(middle) else (middle, high)
    return high


def _exact_is_quick(trials: int, need: int, chance: Fraction) -> bool:
    return trials * math.log2(chance.denominator) * need < _MOST_BITS
