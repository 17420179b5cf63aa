"""How often a stock is put on new food."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from crossplan.stocks.keeping import flip_interval_days


@pytest.mark.parametrize(
    ("temperature", "days"),
    [(18.0, 28.0), (21.5, 21.0), (25.0, 14.0), (19.75, 24.5), (23.25, 17.5), (15.0, 28.0), (29.0, 14.0)],
)
def test_intervals_by_temperature(temperature: float, days: float) -> None:
    assert flip_interval_days(temperature) == pytest.approx(days)


@given(st.floats(10, 32), st.floats(10, 32))
def test_a_warmer_stock_is_never_flipped_later(one: float, other: float) -> None:
    cool, warm = sorted((one, other))
    assert flip_interval_days(cool) >= flip_interval_days(warm)
