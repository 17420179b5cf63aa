"""How much hands-on work a cross is, in minutes: what decides among schemes of equally many generations.

Setting up and clearing, looking through flies for one parent of a given share, and collecting virgins, which takes more from
a kept class than from a stock that can be bulked up (our weights; common practice, no source).
"""

from __future__ import annotations

from crossplan.genetics.chromosome import FEMALE
from crossplan.genetics.fly import Fly

CROSS_MINUTES = 20.0
SCORE_MINUTES = 1.5
VIRGIN_FROM_STEP_MINUTES = 10.0
STOCK_VIRGIN_MINUTES = 5.0
BALANCED_STOCK_VIRGIN_MINUTES = 8.0


def stock_minutes(fly: Fly) -> float:
    """Return the work of taking a parent from the shelf: virgins are collected, males are there."""
    if fly.sex != FEMALE:
        return 0.0
    pure = all(a == b for a, b in fly.pairs)
    return STOCK_VIRGIN_MINUTES if pure else BALANCED_STOCK_VIRGIN_MINUTES
