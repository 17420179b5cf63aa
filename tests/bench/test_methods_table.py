from __future__ import annotations

import csv
import io

import pytest
from example_plan import example_plan

from crossplan.bench.methods_table import Notation, methods_rows, methods_table, written_short
from crossplan.errors import InputError

FULL = Notation(
    {"AD-K12@attP40": "P{y[+t7.7] w[+mC]=AD-K12}attP40", "w[1118]": "w[1118]", "TM6B": "TM6B"},
    frozenset({"TM6B"}),
    {"K12-AD": "Harbour injections, 2024"},
)


def test_every_genotype_that_is_made_experimental_ones_first() -> None:
    rows = methods_rows(example_plan())
    assert [(r.name, r.role) for r in rows] == [
        ("K12 x Q07 > CsChrimson", "experimental"),
        ("empty > CsChrimson", "control of K12 x Q07 > CsChrimson: no driver"),
    ]
    assert rows[0].genotype == "w[1118] UAS-CsChrimson@attP18/w[1118]; AD-K12@attP40/+; DBD-Q07@attP2/+"
    assert rows[0].father == "((K12-AD x double balancer) x (double balancer x Q07-DBD))"


def test_the_notation_of_the_list_and_its_sources() -> None:
    row = methods_rows(example_plan(), FULL)[0]
    assert row.genotype.split("; ")[1] == "P{y[+t7.7] w[+mC]=AD-K12}attP40/+"
    assert "K12-AD (Harbour injections, 2024)" in row.stocks


def test_a_marker_on_a_balancer_follows_a_comma_and_a_marked_fourth_is_written() -> None:
    plan = example_plan()
    fly = plan.steps[4].keep.fly.model_copy(update={"third": [[], ["TM6B", "Tb[1]"]], "fourth": [["ci[D]"], []]})
    keep = plan.steps[4].keep.model_copy(update={"fly": fly, "members": [fly]})
    plan.steps[4] = plan.steps[4].model_copy(update={"keep": keep})
    assert methods_rows(plan, FULL)[1].genotype.endswith("; +/TM6B, Tb[1]; ci[D]/+")


def test_all_genotypes_of_a_kept_class_are_given() -> None:
    plan = example_plan()
    one = plan.steps[4].keep.fly
    other = one.model_copy(update={"genotype": "w[1118]; another"})
    keep = plan.steps[4].keep.model_copy(update={"members": [one, other]})
    plan.steps[4] = plan.steps[4].model_copy(update={"keep": keep})
    assert methods_rows(plan)[1].genotype == f"{one.genotype} or w[1118]; another"


def test_csv_comes_back_as_it_was() -> None:
    table = methods_table(example_plan(), "csv", FULL)
    rows = list(csv.reader(io.StringIO(table)))
    assert rows[1:] == [list(r.cells()) for r in methods_rows(example_plan(), FULL)]
    assert rows[0][2] == "genotype"


def test_markdown_has_superscripts_and_no_broken_cells() -> None:
    lines = methods_table(example_plan(), "md", FULL).splitlines()
    assert len({line.replace("\\|", "").count("|") for line in lines}) == 1
    assert (
        "w<sup>1118</sup> UAS-CsChrimson@attP18/w<sup>1118</sup>; P{y<sup>+t7.7</sup> w<sup>+mC</sup>=AD-K12}"
        in lines[2]
    )


def test_latex_escapes_what_it_would_take_for_commands() -> None:
    text = methods_table(example_plan(), "tex", FULL)
    assert r"\textit{w\textsuperscript{1118} UAS-CsChrimson@attP18/w\textsuperscript{1118}; P\{y" in text
    assert text.count("{") - 2 * text.count(r"\{") == text.count("}") - 2 * text.count(r"\}")
    assert r"K12 x Q07 \textgreater{} CsChrimson" in text
    rows = [line for line in text.splitlines() if line.endswith(r" \\")]
    assert {row.replace(r"\&", "").count("&") for row in rows} == {9}


@pytest.mark.parametrize("form", ["docx", ""])
def test_another_form_is_refused(form: str) -> None:
    with pytest.raises(InputError, match="no methods table"):
        methods_table(example_plan(), form)


def test_a_plan_that_makes_nothing_is_refused() -> None:
    plan = example_plan()
    plan.targets[:] = plan.targets[2:]
    with pytest.raises(InputError, match="no genotypes"):
        methods_table(plan, "csv")


def test_insertions_that_the_list_has_only_in_short_are_named() -> None:
    short = written_short(example_plan(), FULL)
    assert "AD-K12@attP40" not in short
    assert "DBD-Q07@attP2" in short
