"""How many vials to set up, and how many of the virgins that eclose a day's visits catch.

Progeny of vials vary far more than chance alone (a Poisson count) would have it. Measured: 779 vials of 5
to 13 females, two days of laying: mean 122, standard deviation 90, negative binomial k between 1.6 and 2.7
by diet, 15 % of the vials empty (open data of the Stevison laboratory on diet and recombination). The
default of 100 progeny, k = 2 and 10 % failed vials for an unknown cross is our own reading of these and of
teaching practice.

How it is computed: the flies of a class in a working vial are a thinned negative binomial, which is a
negative binomial of the same k with its mean times the share; w working vials together have mean and k
times w; how many of v vials work is binomial. So P(enough) is a sum over w of closed forms, with no
convolution and no approximation. Where the standard deviation of w is large (hundreds of vials) the sum
runs over every s-th w, s a quarter of that deviation, each standing for s of them: for so smooth a summand
that differs from the full sum by less than 1e-10 (the tests compare them).
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from statistics import NormalDist
from typing import Final

from crossplan.errors import RearingError
from crossplan.rearing.counting import Share, check_request, fewest
from crossplan.rearing.development import check_temperature
from crossplan.rearing.handling import Table, read_off, virgin_hours
from crossplan.rearing.tails import log_binomial, log_negative_binomial, negative_binomial_at_least

#: a request beyond this is a mistake
MOST_VIALS: Final = 100_000

#: Eggs of a female in a day, days 3 to 8, in a shared vial. 25 C: 20 to 36 measured (open data of the
#: Stevison laboratory on heat stress). Half of it at 18 C and 0.8 of it at 29 C are guesses; that both are
#: lower is published (Gandara & Drummond-Barbosa 2022, Development 149:dev200149, abstract).
EGGS_PER_DAY: Final[Table] = ((18.0, 12.5), (25.0, 25.0), (29.0, 20.0))
#: Adults per egg: 0.8 on good food up to 28 C, none above 31 C (Hoffmann 2010 and Cavieres et al. 2018, as
#: quoted; 0.8 and the value at 29 C are our own choice).
VIABILITY: Final[Table] = ((28.0, 0.8), (29.0, 0.6), (31.0, 0.0))

#: Time of day at which flies come out, in hours from lights-on, in 12 h light and 12 h dark: most between
#: 2 h before and 4 h after, the peak in between (from memory: Konopka & Benzer 1971, Qiu & Hardin 1996; that
#: there is a gate near dawn is published, Harker 1965, J. Exp. Biol. 43:411). Written as a triangle that
#: holds 0.8 of the flies, the rest spread evenly over the day: the 0.8 is our own choice for "most".
GATE_OPENS: Final = -2.0
GATE_PEAKS: Final = 1.0
GATE_CLOSES: Final = 4.0
GATE_SHARE: Final = 0.8


@dataclass(frozen=True, slots=True)
class Yield:
    """What one vial gives.

    Attributes:
        mean: living progeny of a vial that works, all classes, both sexes.
        k: size of the negative binomial; small is uneven, infinity would be Poisson.
        fail: share of vials that give nothing.
    """

    mean: float = 100.0
    k: float = 2.0
    fail: float = 0.10

    def __post_init__(self) -> None:
        if not 0.0 < self.mean <= 100_000.0:
            raise RearingError(f"{self.mean:g} progeny per vial: expected more than 0, such as 100")
        if not 0.01 <= self.k <= 1e6:
            raise RearingError(f"k = {self.k:g}: expected 0.01 (very uneven vials) to 1000000 (even); 2 is usual")
        if not 0.0 <= self.fail < 1.0:
            raise RearingError(f"{self.fail:g} of vials fail: expected 0 or more and less than 1, such as 0.1")

    def at(self, temperature: float) -> Yield:
        """Return the yield of vials whose parents and offspring live at `temperature` degrees C.

        In the cold fewer eggs a day are laid, but parents stay longer: the same in the end, later. Warmer
        than 25 C there are fewer eggs and fewer live. Takes the mean to be that at 25 C.

        Raises:
            RearingError: outside 12 to 30 C.
        """
        eggs = min(1.0, eggs_per_day(temperature) / eggs_per_day(25.0)) if temperature > 25.0 else 1.0
        return replace(self, mean=self.mean * eggs * viability(temperature) / viability(25.0))


@dataclass(frozen=True, slots=True)
class VialCount:
    """Vials to set up, flies of the class expected from them, and the probability that they are enough."""

    vials: int
    expected: float
    probability: float


def eggs_per_day(temperature: float) -> float:
    """Return the eggs that a female lays in a day at a temperature in degrees C (below 18 C as at 18 C).

    Raises:
        RearingError: outside 12 to 30 C.
    """
    check_temperature(temperature)
    return read_off(EGGS_PER_DAY, temperature)


def viability(temperature: float) -> float:
    """Return the share of eggs that become adults at a temperature in degrees C, on good food.

    Raises:
        RearingError: outside 12 to 30 C.
    """
    check_temperature(temperature)
    return read_off(VIABILITY, temperature)


DEFAULT_YIELD: Final = Yield()


def chance_of_enough(vials: int, share: Share, need: int, yield_: Yield = DEFAULT_YIELD, catch: float = 1.0) -> float:
    """Return the probability that `vials` vials give at least `need` flies of a class with that share.

    `catch` is the share of the class that is really collected (see `virgin_catch`).
    """
    each = yield_.mean * float(share) * catch

    def enough(working: int) -> float:
        return negative_binomial_at_least(need, working * each, working * yield_.k)

    return math.fsum(weight * enough(working) for working, weight in _working(vials, yield_.fail))


@lru_cache(maxsize=4096)
def vials_needed(
    share: Share, need: int, probability: float, yield_: Yield = DEFAULT_YIELD, catch: float = 1.0
) -> VialCount:
    """Return the fewest vials that give `need` flies of a class with the probability asked for.

    Args:
        share: share of the class among all living progeny, both sexes together.
        need: flies of the class wanted, 1 or more.
        probability: between 0 and 1, exclusive.
        yield_: what one vial gives.
        catch: share of the class that is really collected, above 0 and at most 1.

    Raises:
        RearingError: an argument is out of range, or more than 100 000 vials would be needed.
    """
    check_request(share, need, probability)
    if not 0.0 < catch <= 1.0:
        raise RearingError(f"{catch:g} of the class collected: expected more than 0 and at most 1")
    mean = (1.0 - yield_.fail) * yield_.mean * float(share) * catch
    vials = fewest(
        lambda v: chance_of_enough(v, share, need, yield_, catch) >= probability,
        1,
        _guess(mean, _variance(yield_, float(share) * catch), need, probability),
        MOST_VIALS,
        f"share {float(share):g}: more than {MOST_VIALS} vials would have to be set up for {need}",
    )
    return VialCount(vials, vials * mean, chance_of_enough(vials, share, need, yield_, catch))


def progeny_distribution(
    most: int, vials: int = 1, share: Share = 1.0, yield_: Yield = DEFAULT_YIELD
) -> tuple[float, ...]:
    """Return the probabilities of 0, 1, ... `most` flies of a class with that share from all vials."""
    chances = [0.0] * (most + 1)
    for working, weight in _working(vials, yield_.fail):
        if working == 0:
            chances[0] += weight
            continue
        size, mean = working * yield_.k, working * yield_.mean * float(share)
        for count in range(most + 1):
            chances[count] += weight * math.exp(log_negative_binomial(count, mean, size))
    return tuple(chances)


def virgin_catch(
    visits: Sequence[float],
    temperature: float,
    night_temperature: float | None = None,
    lights_on: float = 8.0,
    strict: bool = False,
) -> float:
    """Return the share of a day's eclosing females that are collected as sure virgins.

    Every visit empties the vial. What has come out since the last visit counts if that was no longer ago
    than the safe gap (`handling.virgin_hours`), else none of it does: an early male may have mated with any
    of them.

    Args:
        visits: times of day of the visits, in hours (9.0, 16.5), each at least 0 and below 24.
        temperature: degrees C at which the vials stand.
        night_temperature: degrees C from the last visit of a day to the first of the next, if it is another.
        lights_on: time of day at which the light goes on; flies come out around it.
        strict: use the shorter, strict gaps.

    Raises:
        RearingError: no visit, a time outside the day, or a temperature outside 12 to 30 C.
    """
    times = sorted(set(visits))
    if not times or not all(0.0 <= time < 24.0 for time in times):
        raise RearingError(
            f"visits at {list(visits)}: expected hours of the day from 0 to below 24, such as 9 and 16.5"
        )
    gaps = [(before, after, temperature) for before, after in zip(times[:-1], times[1:], strict=True)]
    gaps.append((times[-1], times[0] + 24.0, temperature if night_temperature is None else night_temperature))
    caught = math.fsum(
        _eclosed_by(after - lights_on) - _eclosed_by(before - lights_on)
        for before, after, warmth in gaps
        if after - before <= virgin_hours(warmth, strict) + 1e-9
    )
    return min(1.0, caught)


def _eclosed_by(hours_from_lights_on: float) -> float:
    """Return the flies out by then, counted from the gate of day 0; a day's flies are 1, days add up."""
    day, hour = divmod(hours_from_lights_on - GATE_OPENS, 24.0)
    rise, width = GATE_PEAKS - GATE_OPENS, GATE_CLOSES - GATE_OPENS
    fall = width - rise
    if hour <= rise:
        gated = hour * hour / (rise * width)
    else:
        gated = 1.0 - max(0.0, width - hour) ** 2 / (fall * width)
    return day + GATE_SHARE * gated + (1.0 - GATE_SHARE) * hour / 24.0


def _working(vials: int, fail: float) -> list[tuple[int, float]]:
    """Return numbers of working vials with their weights, which sum to 1 (see above for the steps)."""
    works = 1.0 - fail
    if works == 1.0:
        return [(vials, 1.0)]
    deviation = math.sqrt(vials * works * fail)
    step = max(1, int(deviation / 4.0))
    middle = round(vials * works)
    reach = int(10.0 * deviation) + 50
    first = middle - min(middle, reach) // step * step
    numbers = range(first, min(vials, middle + reach) + 1, step)
    weights = [math.exp(log_binomial(number, vials, works)) for number in numbers]
    total = math.fsum(weights)
    return [(number, weight / total) for number, weight in zip(numbers, weights, strict=True)]


def _variance(yield_: Yield, kept: float) -> float:
    """Return the variance of the flies of a class from one vial."""
    mean = yield_.mean * kept
    works = 1.0 - yield_.fail
    return works * (mean + mean * mean / yield_.k) + works * yield_.fail * mean * mean


def _guess(mean: float, variance: float, need: int, probability: float) -> int:
    """Return about how many vials it takes, by the normal distribution: where the search begins."""
    z = NormalDist().inv_cdf(probability)
    spread = z * math.sqrt(variance)
    root = (spread + math.sqrt(spread * spread + 4.0 * mean * need)) / (2.0 * mean)
    return math.ceil(min(root * root, float(MOST_VIALS)))
