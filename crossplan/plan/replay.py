"""Every step of a plan done again by genetics alone.

This check sees nothing of the search that made the plan: it reads the genotypes of the plan as a person would, crosses
them, and asks of every step whether the kept class exists, whether all who look like it are the flies that the plan names,
whether its share is the one stated, whether its parents are flies that the plan really has at that point, and of every
last step whether its flies are what the target asked for.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

from crossplan.errors import Problem, Severity
from crossplan.genetics.appearance import Observer
from crossplan.genetics.element import Element
from crossplan.genetics.fly import Fly
from crossplan.genetics.notation import read_fly
from crossplan.genetics.progeny import ProgenyClass, cross
from crossplan.genetics.survival import sterile_because
from crossplan.plan.model import FlyRecord, ParentRecord, Plan, StepRecord, TargetRecord

#: shares are stated as floats; anything beyond rounding is a fault
SHARE_TOLERANCE = 1e-9


def replay(plan: Plan, observer_of: Callable[[float], Observer], known: Mapping[str, Element]) -> tuple[Problem, ...]:
    """Return every fault of the plan; an empty result means that each step does what the plan says.

    Args:
        plan: the plan.
        observer_of: gives who looks at flies reared at a temperature in degrees C, with the lab's catalogue and means.
        known: elements of the stock list by symbol, so that genotypes mean what they mean there.
    """
    check = _Replay(plan, observer_of, known)
    faults = check.order()
    if faults:
        return tuple(faults)
    for step in plan.steps:
        faults += check.step(step)
    for target in plan.targets:
        if target.status == "planned":
            faults += check.target(target)
    return tuple(faults)


class _Replay:
    def __init__(self, plan: Plan, observer_of: Callable[[float], Observer], known: Mapping[str, Element]) -> None:
        self.plan = plan
        self.observer_of = observer_of
        self.known = known
        self.steps = {s.id: s for s in plan.steps}

    def _fly(self, record: FlyRecord) -> Fly:
        return read_fly(record.genotype, record.sex, self.observer_of(25.0).catalogue, self.known)

    def order(self) -> list[Problem]:
        """Check that no cross comes from itself, and that each generation is the longest run of crosses from a stock."""
        import networkx

        graph: Any = networkx.DiGraph()
        graph.add_nodes_from(self.steps)
        for step in self.plan.steps:
            graph.add_edges_from((p.step, step.id) for p in (step.mother, step.father) if p.step in self.steps)
        if not networkx.is_directed_acyclic_graph(graph):
            return [Problem("plan-step", Severity.ERROR, "some crosses come from each other in a circle")]
        longest: dict[str, int] = {}
        for step_id in networkx.topological_sort(graph):
            longest[step_id] = 1 + max((longest[p] for p in graph.predecessors(step_id)), default=0)
        return [
            _fault(s, f"it is generation {longest[s.id]}, not {s.generation}")
            for s in self.plan.steps
            if longest[s.id] != s.generation
        ]

    def step(self, step: StepRecord) -> list[Problem]:
        mother, father = self._fly(step.mother.fly), self._fly(step.father.fly)
        faults = [_fault(step, f"{p.sex} parent: {why}") for p in (mother, father) if (why := sterile_because(p))]
        if (mother.sex, father.sex) != ("female", "male"):
            faults.append(_fault(step, "the mother must be female and the father male"))
        for parent in (step.mother, step.father):
            faults += self._origin(step, parent)
        progeny = cross(mother, father, self.observer_of(step.temperature_C))
        kept = self._fly(step.keep.fly)
        sexes = ("female", "male") if step.keep.sex == "both" else (step.keep.sex,)
        for sex in sexes:
            classes = [c for c in progeny.classes if c.sex == sex and sorted(c.signs) == sorted(step.keep.signs)]
            if not classes:
                faults.append(_fault(step, f"no {sex} of this cross looks like the class to keep"))
                continue
            faults += self._class(step, classes[0], kept)
        return faults

    def _class(self, step: StepRecord, found: ProgenyClass, kept: Fly) -> list[Problem]:
        faults = []
        named = {self._fly(m) for m in step.keep.members}
        strangers = [m.fly for m in found.members if m.fly not in named]
        if strangers:
            faults.append(_fault(step, f"{len(strangers)} other genotype(s) look like the class to keep"))
        if found.sex == kept.sex and kept not in [m.fly for m in found.members]:
            faults.append(_fault(step, "the kept genotype does not occur among the flies that look like it"))
        if step.keep.sex != "both" and abs(float(found.share) - step.keep.share) > SHARE_TOLERANCE:
            faults.append(_fault(step, f"the share is {float(found.share):.6g}, not {step.keep.share:.6g}"))
        return faults

    def _origin(self, step: StepRecord, parent: ParentRecord) -> list[Problem]:
        if parent.step is None:
            return [] if parent.stock else [_fault(step, "a parent comes from nowhere")]
        made = self.steps.get(parent.step)
        if made is None:
            return [_fault(step, f"a parent comes from {parent.step}, which is not in the plan")]
        if made.generation >= step.generation:
            return [_fault(step, f"a parent comes from {parent.step}, which is not an earlier generation")]
        if self._fly(parent.fly) not in {self._fly(m) for m in made.keep.members}:
            return [_fault(step, f"{parent.step} does not keep the flies that are used here as a parent")]
        return []

    def target(self, target: TargetRecord) -> list[Problem]:
        last = self.steps.get(target.scheme[-1]) if target.scheme else None
        if last is None:
            return [_target_fault(target, "its scheme names no step of the plan")]
        faults = []
        for member in last.keep.members:
            fly = self._fly(member)
            missing = [c for c in target.components if fly.copies(c.removeprefix("2x ").strip()) < _copies(c)]
            if missing:
                faults.append(_target_fault(target, f"{member.genotype} lacks {', '.join(missing)}"))
        if target.sex != last.keep.sex and last.keep.sex != "both":
            faults.append(_target_fault(target, f"{target.sex}s are wanted, {last.keep.sex}s are kept"))
        if target.generations != last.generation:
            faults.append(_target_fault(target, "the number of generations is not that of its last step"))
        return faults


def _copies(component: str) -> int:
    return 2 if component.startswith("2x ") else 1


def _fault(step: StepRecord, message: str) -> Problem:
    return Problem("plan-step", Severity.ERROR, f"{step.id}: {message}")


def _target_fault(target: TargetRecord, message: str) -> Problem:
    return Problem("plan-target", Severity.ERROR, f"{target.target}: {message}")
