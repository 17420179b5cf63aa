"""The demo, planned whole: what the lab of the demo would check before it began."""

from __future__ import annotations

import datetime as dt
import json
from pathlib import Path

from crossplan import api
from crossplan.plan.replay import replay

#: worked out by hand from the stock list; see demo_stocks/README.md
EXPECTED = {
    **dict.fromkeys(("cf-13", "cf-14", "cf-16", "cf-21"), 1),
    **{f"cf-{n:02d}": 2 for n in (*range(1, 13), 15, 17, 18, 19)},
    "cf-20": 3,
}


def test_generations_are_those_worked_out_by_hand(demo_plan: api.Planned) -> None:
    targets = {t.target: t for t in demo_plan.plan.targets if not t.control_kind}
    assert {n: t.generations for n, t in targets.items() if t.status == "planned"} == EXPECTED
    assert all(t.proved_minimal for t in targets.values() if t.status == "planned")


def test_the_impossible_ones_say_why(demo_plan: api.Planned) -> None:
    reasons = {t.target: t.reason for t in demo_plan.plan.targets if t.status == "impossible" and not t.control_kind}
    assert set(reasons) == {"cf-22", "cf-23", "cf-24"}
    assert "no stock on this shelf carries AD-K21@attP40" in reasons["cf-22"]
    assert "all sit at attP40" in reasons["cf-23"]
    assert "l(2)N17a" in reasons["cf-24"]


def test_controls_without_effector_carry_none(demo_plan: api.Planned) -> None:
    steps = {s.id: s for s in demo_plan.plan.steps}
    controls = [t for t in demo_plan.plan.targets if t.control_kind == "no effector" and t.status == "planned"]
    assert len(controls) > 15
    for control in controls:
        last = steps[control.scheme[-1]]
        assert all("CsChrimson" not in m.genotype for m in last.keep.members)


def test_every_task_is_on_a_working_day(demo_plan: api.Planned) -> None:
    holidays = {"2027-02-15", "2027-03-26", "2027-03-29"}
    for task in demo_plan.plan.tasks:
        assert dt.date.fromisoformat(task.date).weekday() < 5, task
        assert task.date not in holidays, task


def test_ages_are_in_the_window_on_the_assay_day(demo_plan: api.Planned) -> None:
    steps = {s.id: s for s in demo_plan.plan.steps}
    seen = 0
    for target in demo_plan.plan.targets:
        if target.assay_date is None:
            continue
        dates = steps[target.scheme[-1]].dates
        assert dates is not None
        day = dt.date.fromisoformat(target.assay_date)
        youngest = (day - dt.date.fromisoformat(dates.collect_to)).days
        oldest = (day - dt.date.fromisoformat(dates.collect_from)).days
        assert 4 <= youngest <= oldest <= 7, target.target
        seen += 1
    assert seen > 30


def test_the_plan_stands_the_replay_and_a_spoilt_one_does_not(demo_plan: api.Planned) -> None:
    from crossplan.genetics.appearance import Means, Observer
    from crossplan.genetics.catalogue import default_catalogue

    def observer_of(rearing_C: float) -> Observer:
        return Observer(default_catalogue(), Means(distrust=frozenset({"Ser"}), rearing_C=rearing_C))

    known = demo_plan.shelf.elements()
    assert replay(demo_plan.plan, observer_of, known) == ()
    spoilt = demo_plan.plan.model_copy(deep=True)
    step = next(s for s in spoilt.steps if s.generation == 2)
    step.father.fly.genotype = step.father.fly.genotype.replace("Sco", "+").replace("CyO", "+").replace("TM3, Sb", "+")
    assert replay(spoilt, observer_of, known)
    for change in ("share", "signs", "members"):
        spoilt = demo_plan.plan.model_copy(deep=True)
        keep = spoilt.steps[0].keep
        if change == "share":
            keep.share *= 1.5
        elif change == "signs":
            keep.signs = ["yellow body"]
        else:
            keep.members = [spoilt.steps[-1].keep.fly]
        assert replay(spoilt, observer_of, known), change


def test_the_same_input_gives_the_same_files(demo_plan: api.Planned, tmp_path: Path) -> None:
    first = api.write_plan(demo_plan.plan, tmp_path / "a")
    second = api.write_plan(demo_plan.plan, tmp_path / "b")
    assert [p.name for p in first] == [p.name for p in second]
    for a, b in zip(first, second, strict=True):
        assert a.read_bytes() == b.read_bytes(), a.name


def test_plan_json_reads_back(demo_plan: api.Planned, tmp_path: Path) -> None:
    api.write_plan(demo_plan.plan, tmp_path)
    assert api.load_plan(tmp_path) == demo_plan.plan
    document = json.loads((tmp_path / "plan.json").read_text(encoding="utf-8"))
    fly = document["steps"][0]["keep"]["fly"]
    assert set(fly) == {"sex", "X", "2", "3", "4", "genotype"}
    assert not [p for p in tmp_path.iterdir() if p.name.endswith(".part")]
