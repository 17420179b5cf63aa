"""How long papers take. Run with `pytest tests/benchmarks --benchmark-enable`; without it each is made once, small."""

from __future__ import annotations

import re
from typing import Any

import pytest

from crossplan.bench.labels import labels_pdf
from crossplan.bench.report import report_html
from crossplan.bench.sheet_layout import LAYOUTS
from crossplan.plan.model import Plan
from tests.bench.example_plan import example_plan


def long_plan(crosses: int) -> Plan:
    """Return a plan of so many crosses, five vials each, whose genotypes all differ."""
    plan = example_plan()
    written = [step.model_dump_json(by_alias=True) for step in plan.steps]
    steps = []
    for n in range(crosses):
        text = written[n % len(written)].replace("K12@", f"K{n:04d}@").replace("Q07@", f"Q{n:04d}@")
        step = type(plan.steps[0]).model_validate_json(text)
        steps.append(step.model_copy(update={"id": f"S{n:04d}", "vials": 5}))
    return plan.model_copy(update={"steps": steps})


@pytest.mark.parametrize("name", ["a4-48x25", "roll-25x13"])
def test_five_thousand_labels(benchmark: Any, name: str) -> None:
    """5,000 vial labels in 30 seconds at most, memory in proportion."""
    import tracemalloc

    crosses = 4 if benchmark.disabled else 1000
    layout = LAYOUTS[name]
    pdf = benchmark.pedantic(labels_pdf, (long_plan(crosses), layout), rounds=1)
    assert pdf.startswith(b"%PDF")
    if not benchmark.disabled:
        assert benchmark.stats.stats.max <= 30
    peaks = []
    for part in (max(1, crosses // 20), crosses // 5 or 2):
        plan = long_plan(part)
        tracemalloc.start()
        labels_pdf(plan, layout)
        peaks.append(tracemalloc.get_traced_memory()[1])
        tracemalloc.stop()
    assert peaks[1] <= 6 * peaks[0]


def wide_plan(copies: int) -> Plan:
    """Return a plan with so many copies of the example, every name of a target and a cross its own."""
    plan = example_plan()
    parts: dict[str, list[Any]] = {"targets": [], "steps": [], "tasks": []}
    for n in range(copies):
        text = re.sub(r"\b(S0\d)\b", rf"\1x{n}", plan.model_dump_json(by_alias=True)).replace("CsChrimson", f"Cs{n}")
        copy = Plan.model_validate_json(text)
        for name, found in parts.items():
            found += getattr(copy, name)
    return plan.model_copy(update=parts)


def test_a_report_of_540_targets(benchmark: Any) -> None:
    """Written in a few seconds, and in proportion to the targets."""
    copies = 2 if benchmark.disabled else 180
    page = benchmark.pedantic(report_html, (wide_plan(copies),), rounds=1)
    assert page.count('<article class="item') >= 3 * copies
    benchmark.extra_info["kB"] = len(page) // 1000
    if not benchmark.disabled:
        assert len(page) < 5_000_000
