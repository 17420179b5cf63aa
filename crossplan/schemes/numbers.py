"""How much of each cross: flies needed flow backwards from the rig to the first cross.

The flies that a target asks for, with some to spare for deaths while they age, are the need of its last cross. The vials
of that cross, each with its mothers and fathers, are the need of the crosses before it, and so on to the shelf.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

from crossplan.genetics.chromosome import FEMALE
from crossplan.plan.screen import ScreenFile
from crossplan.rearing.counting import flies_to_score
from crossplan.rearing.yields import Yield, chance_of_enough, vials_needed, virgin_catch
from crossplan.schemes.realise import Cross

#: share of collected adults that live to the assay (common practice, no source)
SURVIVAL_TO_ASSAY = 0.9


@dataclass(frozen=True)
class Amount:
    """Numbers of one cross: flies of the kept class needed and expected, vials, and flies to look through."""

    flies_needed: int
    vials: int
    flies_expected: float
    probability: float
    flies_to_score: int


@dataclass(frozen=True)
class Use:
    """One use of the kept flies: as mothers or fathers of the cross numbered `by`."""

    by: int
    as_mother: bool


def amounts(
    crosses: Sequence[Cross],
    wanted: Mapping[int, int],
    uses: Mapping[int, Sequence[Use]],
    shared: Sequence[int],
    screen: ScreenFile,
) -> tuple[Amount, ...]:
    """Return the numbers of every cross.

    Args:
        crosses: all crosses of the plan, parents before children.
        wanted: flies that targets ask of a cross, by its position in `crosses`.
        uses: where its kept flies are parents, by position.
        shared: for each cross the position of the first one with the same parents: they share their vials, and the
            largest need among them decides how many.
        screen: parents to a vial, progeny of a vial, hours of collection, the probability asked for.
    """
    rearing = screen.rearing
    found: dict[int, Amount] = {}
    vials: dict[int, int] = {}
    for i in reversed(range(len(crosses))):
        need = math.ceil(wanted.get(i, 0) / SURVIVAL_TO_ASSAY)
        for by, as_mother in {(shared[use.by], use.as_mother) for use in uses.get(i, ())}:
            need += vials[by] * (rearing.mothers_per_vial if as_mother else rearing.fathers_per_vial)
        virgins = any(use.as_mother for use in uses.get(i, ()))
        found[i] = _amount(crosses[i], max(need, 1), virgins, screen)
        vials[shared[i]] = max(vials.get(shared[i], 0), found[i].vials)
    return tuple(
        _with_vials(crosses[i], found[i], vials[shared[i]], shared[i] == i, screen) for i in range(len(crosses))
    )


def _with_vials(cross: Cross, amount: Amount, vials: int, has_vials: bool, screen: ScreenFile) -> Amount:
    """Return the amount with what the vials that are really set up give."""
    if vials == amount.vials and has_vials:
        return amount
    share = float(min(c.share for c in cross.kept))
    vial = Yield(mean=screen.rearing.progeny_per_vial)
    caught = amount.flies_expected / (amount.vials * share * vial.mean * (1 - vial.fail)) if amount.vials else 1.0
    reached = chance_of_enough(vials, share, amount.flies_needed, vial, min(caught, 1.0))
    return replace(
        amount,
        vials=vials if has_vials else 0,
        flies_expected=amount.flies_expected * vials / max(amount.vials, 1),
        probability=reached,
    )


def _amount(cross: Cross, need: int, virgins: bool, screen: ScreenFile) -> Amount:
    share = min(c.share for c in cross.kept)
    caught = caught_virgins(screen) if virgins and cross.kept[0].sex == FEMALE else 1.0
    probability = screen.numbers.probability
    vial = Yield(mean=screen.rearing.progeny_per_vial)
    count = vials_needed(share, need, probability, vial, catch=caught)
    score = flies_to_score(share, need, probability)
    return Amount(need, count.vials, count.expected, count.probability, score.score)


def caught_virgins(screen: ScreenFile) -> float:
    """Return the share of emerging females that the two collections of a working day catch as sure virgins."""
    hours = [_hour(screen.calendar.morning), _hour(screen.calendar.afternoon)]
    return virgin_catch(hours, screen.rearing.temperature)


def _hour(clock_time: str) -> float:
    hours, _, minutes = clock_time.partition(":")
    return int(hours) + int(minutes or 0) / 60
