"""The dates that people type."""

from __future__ import annotations

import datetime as dt

import pytest

from crossplan.stocks.dates import Order, order_of, possible_days, read_day

DAY = dt.date(2026, 11, 3)


@pytest.mark.parametrize(
    "text",
    ["2026-11-03", "2026/11/3", "2026.11.03", " 2026-11-03 ", "3 Nov 2026", "3-Nov-26", "03.Nov.2026", "3 November 2026",
     "Nov 3, 2026", "November 3 26"],
)  # fmt: skip
def test_dates_with_one_meaning(text: str) -> None:
    assert possible_days(text) == (DAY,)


@pytest.mark.parametrize(
    ("text", "days"),
    [
        ("03/11/2026", (dt.date(2026, 11, 3), dt.date(2026, 3, 11))),
        ("3.11.26", (dt.date(2026, 11, 3), dt.date(2026, 3, 11))),
        ("13/11/26", (dt.date(2026, 11, 13),)),
        ("11/13/26", (dt.date(2026, 11, 13),)),
        ("5/5/2026", (dt.date(2026, 5, 5),)),
    ],
)
def test_numbers_may_mean_two_days(text: str, days: tuple[dt.date, ...]) -> None:
    assert possible_days(text) == days


@pytest.mark.parametrize("text", ["", "soon", "31/02/2026", "2026-13-01", "3 Foo 2026", "13/13/26", "Nov 2026"])
def test_what_is_no_day(text: str) -> None:
    assert possible_days(text) == ()
    assert read_day(text, "day first") is None


def test_a_leap_day_is_a_day_only_in_a_leap_year() -> None:
    assert possible_days("29/02/2028") == (dt.date(2028, 2, 29),)
    assert possible_days("29/02/2026") == ()


@pytest.mark.parametrize(
    ("texts", "order"),
    [
        (["03/11/26", "13/11/26"], "day first"),
        (["03/11/26", "11/13/26"], "month first"),
        (["13/11/26", "11/13/26"], None),
        (["03/11/26", "04/11/26"], None),
        (["2026-11-13", "13 Nov 2026", "5/5/26", ""], None),
        ([], None),
    ],
    ids=["day first", "month first", "at odds", "all open", "nothing to learn from", "none"],
)
def test_the_unmistakable_dates_of_a_column_settle_the_order(texts: list[str], order: Order | None) -> None:
    assert order_of(texts) == order


@pytest.mark.parametrize(
    ("order", "day"), [("day first", dt.date(2026, 11, 3)), ("month first", dt.date(2026, 3, 11)), (None, None)]
)
def test_a_date_that_could_be_two_days_is_read_by_the_order_or_not_at_all(
    order: Order | None, day: dt.date | None
) -> None:
    assert read_day("03/11/2026", order) == day


@pytest.mark.parametrize("order", ["day first", "month first", None])
def test_the_order_does_not_touch_what_is_certain(order: Order | None) -> None:
    assert read_day("2026-11-03", order) == DAY
    assert read_day("11/13/26", order) == dt.date(2026, 11, 13)
