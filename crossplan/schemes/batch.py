"""A whole screen: one search for each shape of target, crosses that several targets need made once.

Targets whose shelves reduce to the same problem share one search. Of the schemes of equal generations that a search
returns, the one is taken that reuses most of the crosses already in the plan, then the one of least work.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from typing import Literal

from crossplan.genetics.appearance import Observer
from crossplan.genetics.fly import Fly
from crossplan.plan.screen_file import WantedTarget
from crossplan.schemes.explain import explain_failure
from crossplan.schemes.forms import ShelfIndex, Source, reduce_shelf, usable_sources
from crossplan.schemes.realise import Bench, Cross, NotCarriedOut, Realiser
from crossplan.schemes.search import SearchResult, Status, find_schemes
from crossplan.schemes.target import Refusal, carried_elements, make_wish, stock_already
from crossplan.schemes.wish import WantedSex, Wish

ControlKind = Literal["", "empty driver", "no effector"]


@dataclass(frozen=True)
class Asked:
    """A target of the screen, or a control that belongs to one."""

    wanted: WantedTarget
    control_of: str = ""
    control_kind: ControlKind = ""


@dataclass(frozen=True)
class Answer:
    """What became of one target: a last cross, a stock that already is it, or a reason."""

    asked: Asked
    status: Literal["planned", "impossible", "in stock"]
    wish: Wish | None
    last: Cross | None = None
    stock: str = ""
    stock_fly: Fly | None = None
    reason: str = ""
    would_unlock: tuple[str, ...] = ()
    proved_minimal: bool = False
    searched_to: int = 0


class BatchPlanner:
    """Finds schemes for many targets on one shelf.

    Args:
        sources: the stocks, best first where several are equal.
        observer: the lab's catalogue and means.
        max_generations: how far to search.
        alternatives: how many schemes of the fewest generations are compared for each target.
    """

    def __init__(
        self, sources: Sequence[Source], observer: Observer, max_generations: int, alternatives: int = 12
    ) -> None:
        self.all_sources = tuple(sources)
        self.sources = usable_sources(sources)
        self.observer = observer
        self.max_generations = max_generations
        self.alternatives = alternatives
        self.shelf = carried_elements(sources)
        self.index = ShelfIndex(self.sources, observer.means.distrust, max_generations)
        self._with_helper: dict[str, ShelfIndex] = {}
        self._any_by_name = {s.name: s for s in sources}
        self.bench = Bench({s.name: s for s in self.sources}, observer)
        self._searches: dict[object, SearchResult] = {}
        self._planned: set[tuple[object, ...]] = set()

    def answer(self, asked: Asked) -> Answer:
        """Return what becomes of one target."""
        wanted = asked.wanted
        sex: WantedSex = "both" if wanted.stock else wanted.sex
        wish = make_wish(wanted.components, sex, wanted.forbid, wanted.stock, self.shelf)
        if isinstance(wish, Refusal):
            return Answer(asked, "impossible", None, reason=wish.reason, would_unlock=wish.would_unlock)
        # a control takes the same kind of cross as what it is the control for, even where a stock would do
        wish = replace(wish, exact=bool(asked.control_kind))
        ready = None if asked.control_kind else stock_already(wish, self._carriers_of_all(wish))
        if ready is not None:
            return Answer(asked, "in stock", wish, stock=ready[0], stock_fly=ready[1], proved_minimal=True)
        last, result = self._best(wish)
        if last is None:
            refusal = explain_failure(wish, self.sources, result, self._search_only, self.observer.catalogue)
            return Answer(
                asked, "impossible", wish, reason=refusal.reason, would_unlock=refusal.would_unlock,
                searched_to=result.searched_to,
            )  # fmt: skip
        proved = result.status is Status.PROVED_MINIMAL
        return Answer(asked, "planned", wish, last, proved_minimal=proved, searched_to=result.searched_to)

    def _carriers_of_all(self, wish: Wish) -> list[Source]:
        """Return the stocks that carry everything that is wanted, in the order of the shelf."""
        names = [set(self.shelf[symbol].stocks) for symbol in wish.symbols]
        return [self._any_by_name[n] for n in self.shelf[wish.symbols[0]].stocks if all(n in some for some in names)]

    def _best(self, wish: Wish) -> tuple[Cross | None, SearchResult]:
        shelf, reducer = reduce_shelf(self.index, wish)
        result = self._search(shelf.key, lambda: find_schemes(
            shelf, self.observer, self.max_generations, self.alternatives))  # fmt: skip
        realiser = Realiser(wish, self.bench, reducer, shelf.forms)
        outlines = [realiser.outline(scheme) for scheme in result.schemes]
        new = [sum(key not in self._planned for key in outline.keys) for outline in outlines]
        for i in sorted(range(len(outlines)), key=lambda i: (new[i], i)):
            try:
                last = realiser.carry_out(result.schemes[i])
            except NotCarriedOut:
                continue
            self._planned.update(outlines[i].keys)
            return last, result
        return None, result

    def _search(self, key: object, run: Callable[[], SearchResult]) -> SearchResult:
        found = self._searches.get(key)
        if found is None:
            found = self._searches[key] = run()
        return found

    def _search_only(self, wish: Wish, sources: Sequence[Source]) -> SearchResult:
        index = self._index_of(sources)
        shelf, _ = reduce_shelf(index, wish)
        return self._search(
            (index.sources[-1].name, len(index.sources), shelf.key),
            lambda: find_schemes(shelf, self.observer, self.max_generations, 1),
        )

    def _index_of(self, sources: Sequence[Source]) -> ShelfIndex:
        """Return the shelf of the planner, or that shelf with one helper stock more."""
        if len(sources) == len(self.sources):
            return self.index
        helper = sources[-1].name
        found = self._with_helper.get(helper)
        if found is None:
            found = ShelfIndex(usable_sources(sources), self.observer.means.distrust, self.max_generations)
            self._with_helper[helper] = found
        return found
