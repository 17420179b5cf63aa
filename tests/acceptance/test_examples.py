"""The examples: each folder's question has the answer that its README gives."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest

from crossplan import api

EXAMPLES = Path(__file__).resolve().parents[2] / "examples"

CASES = [
    ("01-one-cross", "screen.toml", "stocks.csv", {1}),
    ("02-stable-split-stock", "screen.toml", "stocks.csv", {2, 3}),
    ("03-base-stock", "screen.toml", "before.csv", {2, 3}),
    ("03-base-stock", "screen.toml", "after.csv", {1}),
    ("03-base-stock", "base.toml", "before.csv", {2}),
    ("03-base-stock", "base.toml", "after.csv", {0}),
]


@pytest.mark.parametrize(("folder", "screen", "stocks", "generations"), CASES)
def test_generations(folder: str, screen: str, stocks: str, generations: set[int]) -> None:
    place = EXAMPLES / folder
    planned = api.plan_screen(place / screen, place / stocks, today=dt.date(2027, 1, 4), with_calendar=False)
    assert {t.generations for t in planned.plan.targets if not t.control_kind} == generations
    assert all(t.proved_minimal for t in planned.plan.targets)


def test_every_example_is_run() -> None:
    assert {folder for folder, *_ in CASES} == {p.name for p in EXAMPLES.iterdir() if p.is_dir()}
    screens = {(p.parent.name, p.name) for p in EXAMPLES.glob("*/*.toml")}
    assert screens == {(folder, screen) for folder, screen, *_ in CASES}
