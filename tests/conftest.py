"""Shared fixtures: the demo planned once for all tests that look at it."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest

from crossplan import api

ROOT = Path(__file__).resolve().parent.parent
TODAY = dt.date(2026, 12, 1)


@pytest.fixture(scope="session")
def demo_plan() -> api.Planned:
    """The demo screen on the demo shelf."""
    return api.plan_screen(ROOT / "demo_stocks" / "screen.toml", ROOT / "demo_stocks" / "stocks.csv", today=TODAY)
