"""The dates that people type. What could be two days is not guessed, unless the rest of the column settles it."""

from __future__ import annotations

import datetime as dt
import re
from collections.abc import Iterable, Sequence
from typing import Literal

Order = Literal["day first", "month first"]
ORDERS: tuple[Order, ...] = ("day first", "month first")

_ISO = re.compile(r"(\d{4})[-/.](\d{1,2})[-/.](\d{1,2})")
_NAMED = re.compile(r"(\d{1,2})[\s.-]*([A-Za-z]{3,9})[\s.,-]*(\d{4}|\d{2})")
_NAMED_FIRST = re.compile(r"([A-Za-z]{3,9})[\s.]*(\d{1,2})[\s,]+(\d{4}|\d{2})")
_NUMBERS = re.compile(r"(\d{1,2})[-/.](\d{1,2})[-/.](\d{4}|\d{2})")
_MONTHS = ("jan", "feb", "mar", "apr", "may", "jun", "jul", "aug", "sep", "oct", "nov", "dec")


def possible_days(text: str) -> tuple[dt.date, ...]:
    """Return the days that a text can mean: none, one, or two when day and month could be either way round."""
    text = text.strip()
    if match := _ISO.fullmatch(text):
        return _days([(match[1], match[2], match[3])])
    if match := _NAMED.fullmatch(text):
        return _days([(match[3], _month(match[2]), match[1])])
    if match := _NAMED_FIRST.fullmatch(text):
        return _days([(match[3], _month(match[1]), match[2])])
    if match := _NUMBERS.fullmatch(text):
        return _days([(match[3], match[2], match[1]), (match[3], match[1], match[2])])
    return ()


def _month(name: str) -> str:
    short = name[:3].lower()
    return str(_MONTHS.index(short) + 1) if short in _MONTHS else "0"


def _days(parts: Iterable[tuple[str, str, str]]) -> tuple[dt.date, ...]:
    found: dict[dt.date, None] = {}
    for year, month, day in parts:
        full = int(year) + 2000 if len(year) == 2 else int(year)
        try:
            found[dt.date(full, int(month), int(day))] = None
        except ValueError:
            continue
    return tuple(found)


def order_of(texts: Sequence[str]) -> Order | None:
    """Return the order of day and month that the unmistakable dates of a column agree on; None when they do not."""
    orders: set[Order] = set()
    for text in texts:
        match = _NUMBERS.fullmatch(text.strip())
        if match and len(possible_days(text)) == 1:
            if int(match[1]) > 12:
                orders.add("day first")
            elif int(match[2]) > 12:
                orders.add("month first")
    return orders.pop() if len(orders) == 1 else None


def read_day(text: str, order: Order | None) -> dt.date | None:
    """Return the day that a text means; None when it means none, or two and `order` does not settle it."""
    days = possible_days(text)
    if len(days) == 2:
        return None if order is None else days[0] if order == "day first" else days[1]
    return days[0] if days else None
