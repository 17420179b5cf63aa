from __future__ import annotations

import re

from example_plan import example_plan
from markdown_it import MarkdownIt

from crossplan.bench.summary import summary_text


def section(text: str, title: str) -> str:
    """Return one section of the summary."""
    return text.split(f"## {title}\n")[1].split("\n## ")[0]


def test_it_says_what_matters() -> None:
    text = summary_text(example_plan())
    assert text.startswith("# red light, batch 1\n")
    assert text.endswith("\n")
    assert not text.endswith("\n\n")
    glance = section(text, "At a glance")
    for part in (
        "first flies ready: Thu 8 Apr 2027",
        "hands-on time: 10 h 20 min",
        "212 stocks read, 3 rows not",
    ):
        assert part in glance
    impossible = section(text, "Cannot be made")
    assert "no living stock carries DBD-M31@attP2" in impossible
    assert "would make it possible: a stock with DBD-M31@attP2" in impossible
    assert "K12-AD stands in one vial only" in section(text, "Cautions")
    assert "S03: Two copies of mini-white" in section(text, "Cautions")
    assert "biosafety committee" in section(text, "Safety")


def test_every_task_stands_under_its_day() -> None:
    plan = example_plan()
    calendar = section(summary_text(plan), "Calendar")
    assert len(re.findall(r"^- \d\d:\d\d ", calendar, re.MULTILINE)) == len(plan.tasks)
    assert re.findall(r"^### (.*)$", calendar, re.MULTILINE)[0] == "Mon 22 Feb 2027"


def test_a_plan_with_only_impossible_targets() -> None:
    plan = example_plan()
    plan = plan.model_copy(update={"targets": plan.targets[2:], "steps": [], "tasks": [], "totals": {}})
    text = summary_text(plan)
    assert "## Cannot be made" in text
    assert "## Crosses" not in text
    assert "## Calendar" not in text


def test_a_late_target_is_called_late() -> None:
    plan = example_plan()
    plan.targets[0] = plan.targets[0].model_copy(update={"due": "2027-04-01"})
    assert "LATE, was due Thu 1 Apr 2027" in summary_text(plan)


def test_names_cannot_break_the_markdown() -> None:
    plan = example_plan()
    name = "a|b *c* [d](http://x.invalid) <script>`e`_f_"
    plan.targets[0] = plan.targets[0].model_copy(update={"target": name, "components": ["P{x|`y`}z"]})
    html = MarkdownIt("commonmark").enable("table").render(summary_text(plan))
    for mark in ("<em>", "<script", "<a "):
        assert mark not in html
    (row,) = [r for r in re.findall(r"<tr>.*?</tr>", html, re.DOTALL) if "d](http" in r]
    assert row.count("<td>") == 7
