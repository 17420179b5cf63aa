"""Fewest generations, exhaustively, for one target.

A target takes n generations when its last cross joins flies that take up to n - 1, and no scheme of fewer does. Each number of
generations is searched on the whole shelf before the next one is believed. A shelf of the wanted stocks and the handiest
helpers is tried first: a hit there is as good a proof, since everything below was searched on the whole shelf. The work of a
scheme (`crossplan.schemes.work`) decides among the hits, ties by the order of the forms.

What is searched: all crosses between stocks and kept classes, with balancers and markers. What is not: classes of
recombinants are never kept as parents (they are counted as strangers wherever they occur), females that recombine between
more than four places are not mothers, and stocks that tie chromosomes 2 and 3 together are not used. `SearchResult` says how
far the search was complete.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from enum import StrEnum

from crossplan.genetics.appearance import Observer
from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.fly import Fly
from crossplan.schemes.dominance import TooLarge
from crossplan.schemes.exhaustive import schemes_of
from crossplan.schemes.forms import Form, ReducedShelf
from crossplan.schemes.levels import Budget, Hit, LevelSearch
from crossplan.schemes.scheme import Leaf, Node
from crossplan.schemes.whole_progeny import WholeProgeny

#: helper stocks that the first look at so many generations makes do with
HANDY_HELPERS = {2: 14, 3: 9, 4: 7}
#: how many last crosses are looked at for each scheme that is asked for
LOOKED_AT = 20


class Status(StrEnum):
    """What a search found out."""

    PROVED_MINIMAL = "proved minimal"
    FOUND = "found, not proved"
    IMPOSSIBLE = "proved impossible"
    LIMIT = "limit reached"


@dataclass(frozen=True)
class SearchResult:
    """The answer for one wish: the best schemes of the fewest generations, cheapest first.

    `searched_to` is the number of generations up to which every possibility was tried without a hit below
    `generations` (or without any hit).
    """

    status: Status
    schemes: tuple[Node, ...] = ()
    generations: int | None = None
    searched_to: int = 0
    forms: tuple[Form, ...] = field(default=(), repr=False)


def find_schemes(
    shelf: ReducedShelf,
    observer: Observer,
    max_generations: int,
    kept_schemes: int = 5,
    budget: Budget | None = None,
) -> SearchResult:
    """Return the cheapest schemes of the fewest generations for the wish of `shelf`.

    Args:
        shelf: the forms and the wish, in reduced terms.
        observer: who tells flies apart, with the lab's means.
        max_generations: how far to search.
        kept_schemes: how many schemes of that number of generations to return at most.
        budget: what a search may take; a number of generations beyond it is not proved, and the result says so.
    """
    search = _Search(shelf, observer, kept_schemes, budget or Budget())
    proved = True
    for generations in range(1, max_generations + 1):
        schemes = search.handy(generations) if generations > 1 else ()
        if not schemes and proved:
            try:
                schemes = search.whole(generations)
            except TooLarge:
                proved = False
                searched_to = generations - 1
        if schemes:
            status = Status.PROVED_MINIMAL if proved else Status.FOUND
            return SearchResult(status, schemes, generations, generations if proved else searched_to, shelf.forms)
    if proved:
        return SearchResult(Status.IMPOSSIBLE, searched_to=max_generations, forms=shelf.forms)
    return SearchResult(Status.LIMIT, searched_to=searched_to, forms=shelf.forms)


class _Search:
    def __init__(self, shelf: ReducedShelf, observer: Observer, kept_schemes: int, budget: Budget) -> None:
        self.shelf = shelf
        self.observer = observer
        self.kept_schemes = kept_schemes
        self.budget = budget
        self.progeny = WholeProgeny(observer)
        self._levels: dict[tuple[int, ...], LevelSearch] = {}

    def _of(self, forms: Sequence[int]) -> LevelSearch:
        key = tuple(forms)
        found = self._levels.get(key)
        if found is None:
            found = self._levels[key] = LevelSearch(self.shelf, self.observer, key, self.budget)
        return found

    def handy(self, generations: int) -> tuple[Node, ...]:
        """Return schemes from the wanted stocks and the handiest helpers; none says nothing about the whole shelf."""
        helpers = HANDY_HELPERS[min(generations, max(HANDY_HELPERS))]
        try:
            return self._found(self._of(handiest(self.shelf, helpers)), generations, cheapest=True)
        except TooLarge:
            return ()

    def whole(self, generations: int) -> tuple[Node, ...]:
        """Return schemes from the whole shelf; none proves that there is none.

        Raises:
            TooLarge: the budget is not enough for a proof, and nothing was found.
        """
        if generations == 1:
            return self._found(self._of(self._of_last_cross()), 1, cheapest=True)
        search = self._of(range(len(self.shelf.forms)))
        if not search.hits(generations, 1, cheapest=False):
            return ()
        schemes = self._found(search, generations, cheapest=False)
        if schemes:
            chosen = set(handiest(self.shelf, HANDY_HELPERS[min(generations, max(HANDY_HELPERS))]))
            chosen.update(f for s in schemes for f in s.forms())
            try:
                return self._found(self._of(sorted(chosen)), generations, cheapest=True) or schemes
            except TooLarge:
                return schemes
        # chromosomes act on one another here: look at every fly
        slow = schemes_of(self.shelf, self.observer, generations, self.kept_schemes)
        if slow is None:
            raise TooLarge
        return tuple(slow)

    def _of_last_cross(self) -> list[int]:
        """Return the forms that can be parents of a cross of stocks: between them they carry all that is wanted."""
        wanted = frozenset(self.shelf.wish.symbols)
        carried = [self._carried(form) for form in self.shelf.forms]
        if any(c == wanted for c in carried):
            return list(range(len(carried)))
        return [i for i, c in enumerate(carried) if c]

    def _carried(self, form: Form) -> frozenset[str]:
        flies = (f for f in (form.female, form.male) if f is not None)
        return frozenset(s for fly in flies for _, h in fly.homologues() for s in self.shelf.wish.carried(h))

    def _found(self, search: LevelSearch, generations: int, cheapest: bool) -> tuple[Node, ...]:
        found: list[Node] = []
        for hit in search.hits(generations, LOOKED_AT * self.kept_schemes, cheapest):
            if self._stands(search, hit):
                found.append(Node(self._origin(search, hit.mother), self._origin(search, hit.father), None))
                if len(found) == self.kept_schemes:
                    break
        return tuple(found)

    def _stands(self, search: LevelSearch, hit: Hit) -> bool:
        """Return whether every cross behind a hit keeps a pure class, all chromosomes in view."""
        if not all(self._is_made(search, ident) for ident in (hit.mother, hit.father)):
            return False
        mother, father = search.fly(hit.mother), search.fly(hit.father)
        return self.progeny.gives(mother, father, self._accepts, self.shelf.wish.sexes())

    def _is_made(self, search: LevelSearch, ident: int) -> bool:
        mother, father, _ = search.origin(ident)
        if mother < 0:
            return True
        if not (self._is_made(search, mother) and self._is_made(search, father)):
            return False
        return self.progeny.is_pure(search.fly(mother), search.fly(father), search.fly(ident))

    def _accepts(self, fly: Fly) -> bool:
        return all(self.shelf.wish.accepts(p, name) for name, p in zip(PAIRS, fly.pairs, strict=True))

    def _origin(self, search: LevelSearch, ident: int) -> Leaf | Node:
        mother, father, _ = search.origin(ident)
        fly = search.fly(ident)
        if mother < 0:
            return Leaf(father, fly.sex)
        return Node(self._origin(search, mother), self._origin(search, father), fly)


def handiest(shelf: ReducedShelf, most: int) -> list[int]:
    """Return the numbers of the forms with wanted elements, and of the helpers with most balancers and least else."""
    wanted, helpers = [], []
    for i, form in enumerate(shelf.forms):
        fly = form.female or form.male
        assert fly is not None
        if any(shelf.wish.carried(h) for _, h in fly.homologues()):
            wanted.append(i)
            continue
        balanced = sum(any(h.balancer is not None for h in p) for p in fly.pairs)
        loads = {e for _, h in fly.homologues() for e in h.elements if not e.traits.dominant and not e.traits.null_for}
        helpers.append((len(loads), -balanced, i))
    helpers.sort()
    by_balance: dict[int, list[int]] = {}
    for _, balanced, i in helpers:
        by_balance.setdefault(balanced, []).append(i)
    chosen = list(by_balance.get(0, [])[:3])
    for balanced in sorted(by_balance):
        chosen += [i for i in by_balance[balanced] if i not in chosen][: most - len(chosen)]
    return sorted(wanted + chosen)
