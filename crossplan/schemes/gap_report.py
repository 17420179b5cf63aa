"""A screen against a shelf: what can be made and in how many generations, what to obtain, and what hangs by one vial.

First what follows from the parts alone (`gaps`), then, if wanted, the search for every target whose parts are there. What
the search finds impossible although the parts are there is put among the lacking with the stocks that would unlock it.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace

from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.notation import read_genotype
from crossplan.plan.screen import ScreenFile
from crossplan.plan.screen_file import WantedTarget
from crossplan.schemes.acquire import LeastSets, Needs, least_sets, unlocked_by
from crossplan.schemes.batch import Answer, Asked
from crossplan.schemes.forms import Source
from crossplan.schemes.gaps import BaseStock, Gaps, TargetGap, find_gaps
from crossplan.schemes.helpers_lacking import Lacking, lacking_helpers
from crossplan.schemes.screen_plan import ScreenPlanner, sources_of
from crossplan.schemes.target import carried_elements
from crossplan.stocks.shelf import Shelf

#: how many base stocks are tried by search, and for how many of their targets each
MOST_TRIED, TARGETS_TRIED = 3, 5


@dataclass(frozen=True)
class Made:
    """What the search says of one target: generations (0: in stock; None: no scheme), whether proved, and why not."""

    generations: int | None
    proved_minimal: bool
    searched_to: int
    reason: str = ""


@dataclass(frozen=True)
class Unlocks:
    """A thing or stock to obtain: targets that it unlocks by itself, and targets that need it."""

    what: str
    alone: int
    needed_by: tuple[str, ...]
    brings: tuple[str, ...] = ()


@dataclass(frozen=True)
class TriedBase:
    """A base stock that was put on the shelf and tried: targets tried, and those that it shortened or made possible."""

    base: BaseStock
    tried: tuple[str, ...]
    shorter: tuple[str, ...]


@dataclass(frozen=True)
class GapReport:
    """Everything about what a shelf lacks for a list of targets."""

    name: str
    gaps: Gaps
    made: Mapping[str, Made]
    needs: Mapping[str, Needs]
    least: LeastSets
    unlocks: tuple[Unlocks, ...]
    bases: tuple[TriedBase, ...]
    helpers: tuple[Lacking, ...]
    copies: Mapping[str, int | None]

    @property
    def needs_a_person(self) -> bool:
        """Whether a target cannot be made."""
        lacking = any(t.status in ("lacking", "never") for t in self.gaps.targets)
        return lacking or any(m.generations is None for m in self.made.values())


def gap_report(
    name: str,
    targets: Sequence[WantedTarget],
    shelf: Shelf,
    screen: ScreenFile,
    catalogue: Catalogue,
    offers: Shelf | None = None,
    search: bool = True,
    progress: Callable[[int, int], None] | None = None,
) -> GapReport:
    """Return what the shelf lacks.

    Args:
        name: of the screen or wish list.
        targets: what is wanted.
        shelf: the stocks.
        screen: means, temperatures and how far to search.
        catalogue: facts.
        offers: stocks that can be had elsewhere; without them each thing that is lacking counts as one stock.
        search: whether schemes are searched for the targets whose parts are there.
        progress: hears how many of how many searches are done.
    """
    sources = sources_of(shelf)
    gaps = find_gaps(targets, sources, catalogue)
    made: dict[str, Made] = {}
    needs = dict(gaps.needs)
    bases: tuple[TriedBase, ...] = tuple(TriedBase(b, (), ()) for b in gaps.base_stocks)
    if search:
        planner = ScreenPlanner(sources, screen, catalogue)
        there = {t.target for t in gaps.targets if t.status in ("parts there", "in stock")}
        answers = planner.answer([Asked(t) for t in targets if t.name in there], progress)
        made = {a.asked.wanted.name: _made(a) for a in answers}
        needs |= {a.asked.wanted.name: (frozenset(a.would_unlock),) for a in answers if a.would_unlock}
        bases = _tried(gaps, targets, sources, screen, catalogue, made)
    candidates = _candidates(needs, offers)
    return GapReport(
        name, gaps, made, needs, least_sets(needs, candidates), _unlocks(needs, candidates), bases,
        lacking_helpers(sources, carried_elements(sources), {s for t in gaps.targets for s in t.components}, catalogue),
        {s.name: s.copies for s in shelf.stocks},
    )  # fmt: skip


def _made(answer: Answer) -> Made:
    if answer.stock:
        return Made(0, True, 0)
    if answer.last is None:
        return Made(None, False, answer.searched_to, answer.reason)
    return Made(answer.last.generation, answer.proved_minimal, answer.searched_to)


def _candidates(needs: Mapping[str, Needs], offers: Shelf | None) -> dict[str, frozenset[str]]:
    """Return what can be had and what each of it brings."""
    things = {thing for clauses in needs.values() for clause in clauses for thing in clause}
    if offers is None:
        return {thing: frozenset((thing,)) for thing in sorted(things)}
    names: dict[str, set[str]] = {}
    for thing in things:
        plain, _, site = thing.partition(" at another site than ")
        names.setdefault(plain, set()).add(thing)
        if site:
            names.setdefault(f"{plain}@", set()).add(f"{thing}\0{site}")
    candidates = {}
    for stock in offers.usable():
        brings: set[str] = set()
        for element in stock.reading.elements:
            base = element.symbol.partition("@")[0]
            brings |= names.get(element.symbol, set()) | {
                t for t in names.get(base, set()) if " at another site" not in t
            }
            for entry in names.get(f"{base}@", ()):
                thing, _, site = entry.partition("\0")
                if element.site != site:
                    brings.add(thing)
        if brings:
            candidates[stock.name] = frozenset(brings)
    return candidates


def _unlocks(needs: Mapping[str, Needs], candidates: Mapping[str, frozenset[str]]) -> tuple[Unlocks, ...]:
    """Return each candidate with the targets that it unlocks by itself and those that need it, the most useful first."""
    wanted_by: dict[str, dict[str, None]] = {}
    for target, clauses in needs.items():
        for thing in sorted(frozenset().union(*clauses)):
            wanted_by.setdefault(thing, {})[target] = None
    found = []
    for name, brings in candidates.items():
        targets = dict.fromkeys(t for thing in sorted(brings) for t in wanted_by.get(thing, ()))
        alone = unlocked_by([name], {t: needs[t] for t in targets}, candidates)
        found.append(Unlocks(name, alone, tuple(targets), tuple(sorted(brings))))
    return tuple(sorted(found, key=lambda u: (-u.alone, -len(u.needed_by), u.what)))


def _tried(
    gaps: Gaps,
    targets: Sequence[WantedTarget],
    sources: tuple[Source, ...],
    screen: ScreenFile,
    catalogue: Catalogue,
    made: Mapping[str, Made],
) -> tuple[TriedBase, ...]:
    """Put the most promising base stocks on the shelf one at a time, and search again for the targets they may shorten."""
    by_name = {t.name: t for t in targets}
    symbols = carried_elements(sources)
    tried = []
    for rank, base in enumerate(gaps.base_stocks):
        names = [t for t in base.shortens if (m := made.get(t)) is not None and (m.generations or 0) > 1][
            :TARGETS_TRIED
        ]
        source = _homozygous(base.components, {s: c.chromosomes[0] for s, c in symbols.items()}, catalogue)
        if rank >= MOST_TRIED or not names or source is None:
            tried.append(TriedBase(base, (), ()))
            continue
        planner = ScreenPlanner((*sources, source), screen, catalogue)
        answers = [_made(a) for a in planner.answer([Asked(by_name[n]) for n in names])]
        shorter = tuple(
            n for n, a in zip(names, answers, strict=True)
            if a.generations is not None and ((before := made[n].generations) is None or a.generations < before)
        )  # fmt: skip
        tried.append(TriedBase(base, tuple(names), shorter))
    return tuple(tried)


def _homozygous(components: Sequence[str], chromosomes: Mapping[str, str], catalogue: Catalogue) -> Source | None:
    """Return a white-eyed stock homozygous for the components; None when they cannot stand in one."""
    fields = {"X": ["w[1118]"], "2": [], "3": [], "4": []}
    for symbol in components:
        fields[chromosomes[symbol]].append(symbol)
    text = "; ".join(" ".join(f) or "+" for f in fields.values())
    reading = read_genotype(text, catalogue)
    return Source(f"base stock {text}", reading.female, reading.male) if reading.ok and reading.female else None


def wanted_elements(gaps: Gaps, targets: Sequence[WantedTarget]) -> dict[str, tuple[str, ...]]:
    """Return the symbols that targets ask for, each with the targets: what the audit needs to know of a screen."""
    found: dict[str, dict[str, None]] = {}
    for gap, target in zip(gaps.targets, targets, strict=True):
        for symbol in (*gap.components, *(name for name, _ in target.components)):
            found.setdefault(symbol, {})[target.name] = None
    return {symbol: tuple(names) for symbol, names in found.items()}


def with_search(gap: TargetGap, made: Made | None) -> TargetGap:
    """Return a target with what the search adds: one whose parts are there may be impossible all the same."""
    if made is None or made.generations is not None:
        return gap
    return replace(gap, status="no scheme", reason=made.reason)


def gap_json(report: GapReport) -> dict[str, object]:
    """Return the report as one JSON document."""
    return {
        "screen": report.name,
        "searched": bool(report.made),
        "targets": [_target_json(t, report.made.get(t.target)) for t in report.gaps.targets],
        "least_sets": [list(a) for a in report.least.answers],
        "least_size": len(report.least.answers[0]) if report.least.answers else 0,
        "more_least_sets": report.least.more,
        "proved_least": report.least.proved,
        "out_of_reach": list(report.least.out_of_reach),
        "most_targets": [{"stocks": n, "unlocked": met, "which": list(which)} for n, met, which in report.least.steps],
        "acquire": [
            {"what": u.what, "unlocks": u.alone, "needed_by": list(u.needed_by), "brings": list(u.brings)}
            for u in report.unlocks
        ],
        "base_stocks": [
            {"components": list(b.base.components), "may_shorten": list(b.base.shortens), "tried": list(b.tried),
             "shorter": list(b.shorter)}
            for b in report.bases
        ],
        "hangs_by": [
            {"stock": h.stock, "copies": report.copies.get(h.stock), "carries": list(h.carries), "targets": list(h.targets)}
            for h in report.gaps.hangs_by
        ],
        "helpers_lacking": [{"what": h.what, "example": h.example, "why": h.why} for h in report.helpers],
    }  # fmt: skip


def _target_json(gap: TargetGap, made: Made | None) -> dict[str, object]:
    whole = with_search(gap, made)
    return {
        "target": gap.target, "status": whole.status, "components": list(gap.components), "at_least": gap.at_least,
        "generations": made.generations if made else (0 if gap.status == "in stock" else None),
        "proved_minimal": made.proved_minimal if made else gap.status == "in stock",
        "missing": [sorted(clause) for clause in gap.needs], "reason": whole.reason, "cautions": list(gap.cautions),
        "stock": gap.stock,
    }  # fmt: skip
