"""Answers written into the plan: steps with their numbers, targets with their schemes."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from crossplan.genetics.appearance import Observer
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.chromosome import FEMALE, PAIRS
from crossplan.genetics.fly import Fly
from crossplan.genetics.notation import fly_json
from crossplan.genetics.progeny import ProgenyClass
from crossplan.plan.model import FlyRecord, KeepRecord, ParentRecord, StepRecord, TargetRecord
from crossplan.plan.screen import ScreenFile
from crossplan.rearing.handling import breeding_allowed
from crossplan.schemes.batch import Answer
from crossplan.schemes.numbers import Amount, Use, amounts
from crossplan.schemes.realise import Cross, StockParent, describe_class, look_alike_words
from crossplan.schemes.screen_plan import ScreenPlanner

#: rearing temperature in degrees C of parents where the lab's own is too hot to breed from
BREEDING_C = 25.0


@dataclass(frozen=True)
class Numbered:
    """The crosses of a plan in working order, with their ids."""

    crosses: tuple[Cross, ...]
    ids: Mapping[tuple[object, ...], str]

    def id_of(self, cross: Cross) -> str:
        return self.ids[cross.key]


def number_crosses(answers: Sequence[Answer]) -> Numbered:
    """Return every cross once, earlier generations first, with ids S01, S02, ..."""
    found: dict[tuple[object, ...], Cross] = {}
    for answer in answers:
        if answer.last is not None:
            for cross in answer.last.crosses():
                found.setdefault(cross.key, cross)
    ordered = sorted(found.values(), key=lambda c: c.generation)
    width = max(2, len(str(len(ordered))))
    return Numbered(tuple(ordered), {c.key: f"S{i:0{width}d}" for i, c in enumerate(ordered, start=1)})


def write_records(
    answers: Sequence[Answer], screen: ScreenFile, planner: ScreenPlanner, locations: Mapping[str, str]
) -> tuple[list[TargetRecord], list[StepRecord]]:
    """Return the targets and the steps of the plan.

    Args:
        answers: what became of every target.
        screen: the screen file, for numbers and temperatures.
        planner: who answered them.
        locations: where each stock stands, by name.
    """
    numbered = number_crosses(answers)
    position = {c.key: i for i, c in enumerate(numbered.crosses)}
    uses: dict[int, list[Use]] = {}
    for i, cross in enumerate(numbered.crosses):
        for parent, as_mother in ((cross.mother, True), (cross.father, False)):
            if isinstance(parent, Cross):
                uses.setdefault(position[parent.key], []).append(Use(i, as_mother))
    wanted: dict[int, int] = {}
    serves: dict[int, list[Answer]] = {}
    for answer in answers:
        if answer.last is not None:
            last = position[answer.last.key]
            wanted[last] = wanted.get(last, 0) + answer.asked.wanted.flies
            for cross in answer.last.crosses():
                serves.setdefault(position[cross.key], []).append(answer)
    shared = _same_parents(numbered.crosses)
    numbers = amounts(numbered.crosses, wanted, uses, shared, screen)
    write = _StepWriter(numbered, planner, screen, locations)
    steps = [
        write.step(cross, numbers[i], uses.get(i, []), serves.get(i, []), numbered.crosses[shared[i]])
        for i, cross in enumerate(numbered.crosses)
    ]
    return [_target(a, numbered, planner) for a in answers], steps


def _same_parents(crosses: Sequence[Cross]) -> list[int]:
    """Return for each cross the position of the first one with the same parents (itself, mostly)."""
    first: dict[tuple[object, ...], int] = {}
    return [first.setdefault((c.mother.key, c.father.key), i) for i, c in enumerate(crosses)]


class _StepWriter:
    def __init__(
        self, numbered: Numbered, planner: ScreenPlanner, screen: ScreenFile, locations: Mapping[str, str]
    ) -> None:
        self.numbered = numbered
        self.planner = planner
        self.screen = screen
        self.locations = locations

    def step(
        self, cross: Cross, amount: Amount, uses: Sequence[Use], serves: Sequence[Answer], vials_of: Cross
    ) -> StepRecord:
        rearing = self.screen.rearing
        # what serves several targets is reared as the coolest of them asks
        warm = min((self.planner.temperature_of(a.asked) for a in serves), default=rearing.temperature)
        if uses and not breeding_allowed(warm):
            warm = BREEDING_C
        observer = self.planner.observer_of(warm)
        used_by = [self.numbered.id_of(self.numbered.crosses[u.by]) for u in uses]
        return StepRecord(
            id=self.numbered.id_of(cross),
            generation=cross.generation,
            mother=self._parent(cross.mother, cross.mother_fly),
            father=self._parent(cross.father, cross.father_fly),
            keep=self._keep(cross, any(u.as_mother for u in uses), observer),
            serves=[a.asked.wanted.name for a in serves],
            used_by=list(dict.fromkeys(used_by)),
            vials=amount.vials,
            mothers_per_vial=rearing.mothers_per_vial,
            fathers_per_vial=rearing.fathers_per_vial,
            flies_needed=amount.flies_needed,
            flies_expected=round(amount.flies_expected, 1),
            probability=round(amount.probability, 4),
            flies_to_score=amount.flies_to_score,
            temperature_C=warm,
            same_vials_as="" if vials_of is cross else self.numbered.id_of(vials_of),
            is_control=bool(serves) and all(a.asked.control_kind for a in serves),
            cautions=_cautions(cross),
        )

    def _parent(self, parent: StockParent | Cross, fly: Fly) -> ParentRecord:
        record = fly_record(fly)
        if isinstance(parent, Cross):
            return ParentRecord(step=self.numbered.id_of(parent), fly=record, sex=fly.sex)
        return ParentRecord(
            stock=parent.stock, fly=record, sex=fly.sex, pick=parent.pick,
            location=self.locations.get(parent.stock, ""),
        )  # fmt: skip

    def _keep(self, cross: Cross, as_mothers: bool, observer: Observer) -> KeepRecord:
        kept = cross.kept[0]
        both = len(cross.kept) > 1
        virgin = as_mothers and kept.sex == FEMALE
        words = " / ".join(describe_class(c, cross.progeny, observer) for c in cross.kept)
        return KeepRecord(
            sex="both" if both else kept.sex,
            signs=sorted(kept.signs),
            avoid_signs=_signs_of_others(kept, cross.progeny.classes),
            fly=fly_record(kept.members[0].fly),
            members=[fly_record(m.fly) for c in cross.kept for m in c.members],
            share=float(sum(c.share for c in cross.kept)),
            exact=_exact(cross.kept),
            virgin=virgin,
            rule=f"virgin {words}" if virgin else words,
            mistaken_for=look_alike_words(kept, cross.progeny, observer),
        )


def fly_record(fly: Fly) -> FlyRecord:
    """Return the fly as the contract writes it."""
    return FlyRecord.model_validate(fly_json(fly))


def _exact(kept: Sequence[ProgenyClass]) -> str | None:
    shares = [c.exact for c in kept]
    if any(s is None for s in shares):
        return None
    return str(sum(s for s in shares if s is not None))


def _signs_of_others(kept: ProgenyClass, classes: Sequence[ProgenyClass]) -> list[str]:
    others = (c.signs for c in classes if c.sex == kept.sex)
    return sorted(frozenset[str]().union(*others) - kept.signs)


def _cautions(cross: Cross) -> list[str]:
    found = cross.progeny.remarks()
    for parent in (cross.mother, cross.father):
        if isinstance(parent, StockParent) and not parent.pick_is_pure:
            found.append(
                f"stock {parent.stock} throws flies that look like the parent wanted here but are not the same;"
                " test single flies, or keep the stock balanced"
            )
    return found


def _target(answer: Answer, numbered: Numbered, planner: ScreenPlanner) -> TargetRecord:
    wanted = answer.asked.wanted
    scheme = [numbered.id_of(c) for c in answer.last.crosses()] if answer.last else []
    cautions = _site_cautions(answer.last.fly, planner.catalogue) if answer.last else []
    if answer.stock:
        cautions.append(f"stock {answer.stock} already is what is wanted")
    return TargetRecord(
        target=wanted.name,
        status=answer.status,
        components=[f"2x {s}" if n > 1 else s for s, n in _resolved(answer)],
        control_of=answer.asked.control_of,
        control_kind=answer.asked.control_kind,
        sex=wanted.sex,
        flies=wanted.flies,
        generations=0 if answer.stock else answer.last.generation if answer.last else None,
        proved_minimal=answer.proved_minimal,
        searched_to=answer.searched_to,
        scheme=scheme,
        reason=answer.reason,
        would_unlock=list(answer.would_unlock),
        cautions=cautions,
        needs=list(planner.needs(answer.asked).words),
        due=wanted.due.isoformat() if wanted.due else None,
    )


def _resolved(answer: Answer) -> list[tuple[str, int]]:
    if answer.wish is not None:
        return [(symbol, copies) for symbol, _, copies in answer.wish.components]
    return list(answer.asked.wanted.components)


def _site_cautions(fly: Fly, catalogue: Catalogue) -> list[str]:
    """Return cautions on two insertions at one site, and on sites with known trouble when both homologues have one."""
    found = []
    for name in PAIRS:
        first, second = fly.pair(name)
        sites = {e.site for e in first.elements if e.site} & {e.site for e in second.elements if e.site}
        for site in sorted(sites):
            entry = catalogue.site(site)
            if entry is not None and entry.trouble:
                found.append(f"both homologues carry an insertion at {site}: {entry.trouble}")
            here = {e.symbol for h in (first, second) for e in h.elements if e.site == site}
            if len(here) > 1:
                found.append(
                    f"{' and '.join(sorted(here))} face each other at {site} and may act on each other in trans"
                    " (Mellert & Truman 2012, Genetics 191:1129)"
                )
    return found
