"""How much of each cross: flies needed flow backwards from the rig to the first cross.

The flies that a target asks for, with some to spare for deaths while they age, are the need of its last cross. The vials
of that cross, each with its mothers and fathers, are the need of the crosses before it, and so on to the shelf.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from crossplan.genetics.chromosome import FEMALE
from crossplan.plan.screen import ScreenFile
from crossplan.rearing.counting import flies_to_score
from crossplan.rearing.yields import Yield, vials_needed, virgin_catch
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
    screen: ScreenFile,
) -> tuple[Amount, ...]:
    """Return the numbers of every cross.

    Args:
        crosses: all crosses of the plan, parents before children.
        wanted: flies that targets ask of a cross, by its position in `crosses`.
        uses: where its kept flies are parents, by position.
        screen: parents to a vial, progeny of a vial, hours of collection, the probability asked for.
    """
    found: dict[int, Amount] = {}
    rearing = screen.rearing
    for i in reversed(range(len(crosses))):
        need = math.ceil(wanted.get(i, 0) / SURVIVAL_TO_ASSAY)
        for use in uses.get(i, ()):
            each = rearing.mothers_per_vial if use.as_mother else rearing.fathers_per_vial
            need += found[use.by].vials * each
        virgins = any(use.as_mother for use in uses.get(i, ()))
        found[i] = _amount(crosses[i], max(need, 1), virgins, screen)
    return tuple(found[i] for i in range(len(crosses)))


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
