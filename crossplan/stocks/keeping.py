"""How often a stock is put on new food.

Every 14 days at 25 C, 21 days at 21-22 C, 28 days at 18 C, in between by straight line; a stock is overdue at one and
a half times that (common practice; stock centres and laboratory manuals give 14 to 35 days at 18 C, 20 to 30 days at
room temperature). At least two copies, so that one accident does not end a stock (Ashburner & Roote, Maintenance of
a Drosophila laboratory, from memory).
"""

from __future__ import annotations

import re

from crossplan.stocks.shelf import Stock

INTERVALS = ((18.0, 28.0), (21.5, 21.0), (25.0, 14.0))
OVERDUE_FACTOR = 1.5
FEWEST_COPIES = 2
#: temperature in degrees C that is taken where the list does not say (the warmest: the shortest interval would alarm most,
#: so the middle one is used; our choice)
USUAL_TEMPERATURE = 21.5


def flip_interval_days(temperature_C: float) -> float:
    """Return the days between transfers at a temperature in degrees C."""
    (t0, d0), *_, (t2, d2) = INTERVALS
    if temperature_C <= t0:
        return d0
    if temperature_C >= t2:
        return d2
    for (a, days_a), (b, days_b) in zip(INTERVALS, INTERVALS[1:], strict=False):
        if a <= temperature_C <= b:
            return days_a + (days_b - days_a) * (temperature_C - a) / (b - a)
    raise AssertionError("intervals do not cover the temperature")


def is_quarantined(stock: Stock) -> bool:
    """Return whether the list says that the stock stands apart, until it is known to be clean."""
    return re.search(r"(?i)\bquarantine", stock.status) is not None


def is_kept(stock: Stock) -> bool:
    """Return whether food and copies are owed to it: it is in use, or in quarantine (where flies are fed, but not used)."""
    return stock.in_use or (is_quarantined(stock) and stock.copies != 0)
