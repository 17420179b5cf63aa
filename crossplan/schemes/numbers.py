"""How much of each cross: flies needed flow backwards from the rig to the first cross.

The flies that a target asks for, with some to spare for deaths while they age, are the need of its last cross. The vials
of that cross, each with its mothers and fathers, are the need of the crosses before it, and so on to the shelf.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from crossplan.genetics.chromosome import FEMALE
from crossplan.plan.screen import NumbersSection, RearingSection
from crossplan.rearing.counting import flies_to_score
from crossplan.rearing.yields import Yield, vials_needed
from crossplan.schemes.realise import Cross

#: share of collected adults that live to the assay (common practice, no source)
SURVIVAL_TO_ASSAY = 0.9
#: share of the virgins that eclose which two collections a day catch (see crossplan.rearing.yields for the windows)
VIRGIN_CATCH = 0.6


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
    rearing: RearingSection,
    numbers: NumbersSection,
) -> tuple[Amount, ...]:
    """Return the numbers of every cross.

    Args:
        crosses: all crosses of the plan, parents before children.
        wanted: flies that targets ask of a cross, by its position in `crosses`.
        uses: where its kept flies are parents, by position.
        rearing: vials, parents to a vial, progeny of a vial.
        numbers: the probability asked for.
    """
    found: dict[int, Amount] = {}
    for i in reversed(range(len(crosses))):
        need = math.ceil(wanted.get(i, 0) / SURVIVAL_TO_ASSAY)
        for use in uses.get(i, ()):
            each = rearing.mothers_per_vial if use.as_mother else rearing.fathers_per_vial
            need += found[use.by].vials * each
        virgins = any(use.as_mother for use in uses.get(i, ()))
        found[i] = _amount(crosses[i], max(need, 1), virgins, rearing, numbers)
    return tuple(found[i] for i in range(len(crosses)))


def _amount(
    cross: Cross, need: int, virgins: bool, rearing: RearingSection, numbers: NumbersSection
) -> Amount:
    share = min(c.share for c in cross.kept)
    catch = VIRGIN_CATCH if virgins and cross.kept[0].sex == FEMALE else 1.0
    count = vials_needed(
        float(share), need, numbers.probability, Yield(mean=rearing.progeny_per_vial), catch=catch
    )
    score = flies_to_score(share, need, numbers.probability)
    return Amount(need, count.vials, count.expected, count.probability, score.score)
