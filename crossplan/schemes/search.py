"""Fewest generations, exhaustively.

Level 0 holds the flies of the shelf; level k + 1 adds every fly that a cross of flies of the levels before gives as a
pure class of one genotype. A target takes n generations when its last cross joins flies of level n - 1 and no cross
of earlier levels will do. Levels are searched in order, and each completely before a deeper one is believed, so the
number of generations is minimal. From two generations on a shelf of the wanted stocks and the handiest helpers is
tried first: a hit there is as good a proof, since everything below was searched on the whole shelf. The work of a scheme
(sum over its crosses) decides among the hits of one level, ties by the order of the forms.

What is searched: all crosses between stocks and kept classes, with balancers and markers. What is not: classes of
recombinants are never kept as parents (they are counted as strangers wherever they occur), and stocks that tie
chromosomes 2 and 3 together are not used. `SearchResult` says how far the search was complete.

The join of the last cross is done with one boolean table for each chromosome instead of pair by pair; every hit is
then looked at again with the whole progeny in view before it counts.
"""

from __future__ import annotations

import heapq
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass, field
from enum import StrEnum
from itertools import product
from typing import TYPE_CHECKING

from crossplan.genetics.appearance import WHITE, Observer
from crossplan.genetics.chromosome import FEMALE, MALE, PAIRS, Sex
from crossplan.genetics.fly import Fly, Homologue, make_pair
from crossplan.genetics.meiosis import gametes
from crossplan.genetics.survival import NO_GENES, cause_of_death, is_fertile, sex_of, x_dose
from crossplan.schemes.forms import Form, ReducedShelf
from crossplan.schemes.segregation import (
    Child,
    ChromosomeTable,
    Goal,
    chromosomes_are_independent,
    pickable,
    reachable_goal,
    total_share,
)
from crossplan.schemes.wish import Wish

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

State = tuple[int, int, int, int]

#: hands-on work of one cross, in minutes: setting up and clearing, and looking through flies for one parent of a given
#: share; virgins from a kept class cost more than virgins from a stock that can be bulked up (our weights; issue of
#: taste, the order of schemes of equal generations is all that they decide)
CROSS_MINUTES = 20.0
SCORE_MINUTES = 1.5
VIRGIN_FROM_STEP_MINUTES = 10.0
STOCK_VIRGIN_MINUTES = 5.0
BALANCED_STOCK_VIRGIN_MINUTES = 8.0


class Status(StrEnum):
    """What a search found out."""

    PROVED_MINIMAL = "proved minimal"
    FOUND = "found, not proved"
    IMPOSSIBLE = "proved impossible"
    LIMIT = "limit reached"


@dataclass(frozen=True)
class Leaf:
    """A parent taken from the shelf: the number of its form."""

    form: int
    sex: Sex


@dataclass(frozen=True)
class Node:
    """A cross of a scheme, in reduced terms: its parents, and the class that is kept.

    `keep` is the one genotype that an intermediate class holds; None for the last cross, whose class holds every
    genotype that the wish accepts.
    """

    mother: Leaf | Node
    father: Leaf | Node
    keep: Fly | None

    @property
    def generation(self) -> int:
        """Longest run of crosses from a stock to this one, itself counted."""
        return 1 + max(p.generation if isinstance(p, Node) else 0 for p in (self.mother, self.father))


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


@dataclass
class _Found:
    """The cheapest way so far to one state."""

    level: int
    cost: float
    source: Leaf | tuple[State, State]


class _Search:
    def __init__(
        self, shelf: ReducedShelf, observer: Observer, kept_schemes: int, budget: int, forms: Iterable[int]
    ) -> None:
        self.shelf = shelf
        self.wish = shelf.wish
        self.observer = observer
        self.kept_schemes = kept_schemes
        self.budget = budget
        traits = {e.traits for f in shelf.forms for fly in (f.female, f.male) if fly for e in fly.elements()}
        restored = frozenset(g for t in traits for g in t.restores)
        self._coverable = (restored - {WHITE}) & frozenset(g for t in traits for g, _ in t.recessive)
        self.tables = [ChromosomeTable(name, observer, self.wish, restored) for name in PAIRS]
        self.found: dict[State, _Found] = {}
        self._covered: dict[tuple[int, int], frozenset[str]] = {}
        self._content: dict[tuple[int, int], frozenset[str]] = {}
        self._hidden_by = {name: sign.hidden_by for name, sign in observer.catalogue.signs.items()}
        self._kept: dict[tuple[int, int, int, bool, frozenset[str]], tuple[Child, ...]] = {}
        for i in forms:
            for fly in (shelf.forms[i].female, shelf.forms[i].male):
                if fly is not None:
                    self._add_stock(i, fly)

    def _add_stock(self, form: int, fly: Fly) -> None:
        for table, (_, homologue) in ((t, h) for t, p in zip(self.tables, fly.pairs, strict=True) for h in
                                      ((t.chromosome, p[0]), (t.chromosome, p[1]))):  # fmt: skip
            table.add_parental(homologue)
        if not is_fertile(fly):
            return
        state = self._state(fly)
        cost = 0.0
        if fly.sex == FEMALE:
            pure = all(a == b for a, b in fly.pairs)
            cost = STOCK_VIRGIN_MINUTES if pure else BALANCED_STOCK_VIRGIN_MINUTES
        self._offer(state, _Found(0, cost, Leaf(form, fly.sex)))

    def _state(self, fly: Fly) -> State:
        a, b, c, d = (t.number(p, fly.sex) for t, p in zip(self.tables, fly.pairs, strict=True))
        return (a, b, c, d)

    def fly(self, state: State) -> Fly:
        pairs = [t.pairs[i] for t, i in zip(self.tables, state, strict=True)]
        return Fly(self.tables[0].sexes[state[0]], (pairs[0], pairs[1], pairs[2], pairs[3]))

    def _offer(self, state: State, found: _Found) -> None:
        known = self.found.get(state)
        if known is None or (found.level, found.cost) < (known.level, known.cost):
            self.found[state] = found

    def content(self, state: State) -> frozenset[str]:
        """Return the wanted elements that a fly carries."""
        wanted: frozenset[str] = frozenset()
        for k, (table, number) in enumerate(zip(self.tables, state, strict=True)):
            part = self._content.get((k, number))
            if part is None:
                first, second = table.pairs[number]
                part = self._content[k, number] = self.wish.carried(first) | self.wish.carried(second)
            wanted |= part
        return wanted

    def coverable(self, mother: State, father: State) -> frozenset[str]:
        """Return the genes that progeny of the cross may lack, and that an insertion on another chromosome may restore."""
        if not self._coverable:
            return NO_GENES
        return self._mutant(mother) & self._mutant(father)

    def _mutant(self, state: State) -> frozenset[str]:
        found: frozenset[str] = NO_GENES
        for k, (table, number) in enumerate(zip(self.tables, state, strict=True)):
            part = self._covered.get((k, number))
            if part is None:
                elements = (e for h in table.pairs[number] for e in h.elements)
                genes = frozenset(g for e in elements for g, _ in e.traits.recessive)
                part = self._covered[k, number] = genes & self._coverable
            found |= part
        return found

    # -- breeding one more level ---------------------------------------------------------------------------------

    def parents(self, below: int) -> tuple[list[State], list[State]]:
        """Return the females and the males of the levels up to `below`, in a fixed order."""
        sexes = self.tables[0].sexes
        states = [s for s, f in self.found.items() if f.level <= below]
        return [s for s in states if sexes[s[0]] == FEMALE], [s for s in states if sexes[s[0]] == MALE]

    def breed(self, level: int, last: bool, carried: range | None = None) -> bool:
        """Add every fly of `level` to what was found; return False when the budget does not allow it.

        With `last`, the flies are bred to be parents of the last cross only, and those that no last cross can
        use are left out: a parent must give, on each chromosome, a gamete that the wanted flies may carry.
        With `carried`, only crosses whose parents carry that many of the wanted elements between them are made.
        """
        mothers, fathers = self.parents(level - 1)
        crosses = [
            (m, f)
            for m in mothers
            for f in fathers
            if carried is None or len(self.content(m) | self.content(f)) in carried
        ]
        if len(crosses) > self.budget:
            return False
        for mother, father in crosses:
            self._breed_pair(mother, father, level, last)
        return True

    def breed_last(self, level: int) -> Iterator[bool]:
        """Breed the parents of a last cross in parts, the promising one first; yield whether each was done.

        A parent made in two generations is most likely to pay when it joins two wanted elements.
        """
        most = len(self.wish.components) + 1
        parts = (range(1, most), range(1)) if level == 1 else (range(2, most), range(1, 2), range(1))
        for carried in parts:
            yield self.breed(level, last=True, carried=carried)

    def _breed_pair(self, mother: State, father: State, level: int, last: bool) -> None:
        options = []
        coverable = self.coverable(mother, father)
        for k, (m, f) in enumerate(zip(mother, father, strict=True)):
            children = self._kept_children(k, m, f, last, coverable)
            if not children:
                return
            options.append(children)
        base = self.found[mother].cost + self.found[father].cost + CROSS_MINUTES
        for combination in product(*options):
            if not pickable(combination):
                continue
            child: State = (combination[0].pair, combination[1].pair, combination[2].pair, combination[3].pair)
            cost = base + self._keep_cost(child, combination)
            known = self.found.get(child)
            if known is not None and (known.level, known.cost) <= (level, cost):
                continue
            if self._is_pure(mother, father, child):
                self._offer(child, _Found(level, cost, (mother, father)))

    def _kept_children(
        self, k: int, mother: int, father: int, last: bool, coverable: frozenset[str]
    ) -> tuple[Child, ...]:
        """Return the pairs of chromosome number `k` that may be kept; with `last`, those that a last cross can use."""
        key = (k, mother, father, last, coverable)
        found = self._kept.get(key)
        if found is None:
            table = self.tables[k]
            found = tuple(
                c
                for c in table.children(mother, father, coverable)
                if c.keepable and (not last or self._useful(k, c.pair))
            )
            self._kept[key] = found
        return found

    def _useful(self, k: int, number: int) -> bool:
        """Return whether a parent with this pair can give a gamete that the wanted flies may carry."""
        table = self.tables[k]
        made = gametes(table.pairs[number], table.chromosome, FEMALE)
        return any(may_be_given(self.wish, table.chromosome, g.homologue) for g in made)

    def _keep_cost(self, child: State, parts: tuple[Child, ...]) -> float:
        share = total_share(tuple(c.share for c in parts))
        virgin = VIRGIN_FROM_STEP_MINUTES if self.tables[0].sexes[child[0]] == FEMALE else 0.0
        return SCORE_MINUTES / share + virgin

    def _is_pure(self, mother: State, father: State, child: State) -> bool:
        """Return whether the child lives, is fertile, and nobody else of the progeny looks like it."""
        fly = self.fly(child)
        if cause_of_death(fly) is not None or not is_fertile(fly):
            return False
        if self._independent(mother, father):
            return True
        looks = self.observer.signs(fly)
        return all(
            other == fly or other.sex != fly.sex or self.observer.signs(other) != looks
            for other in self._progeny(mother, father)
        )

    def _progeny(self, mother: State, father: State) -> Iterator[Fly]:
        options = [t.alternatives(m, f) for t, m, f in zip(self.tables, mother, father, strict=True)]
        for a, b, c, d in product(*options):
            pairs = tuple(t.pairs[x.pair] for t, x in zip(self.tables, (a, b, c, d), strict=True))
            fly = Fly(sex_of(pairs[0]), (pairs[0], pairs[1], pairs[2], pairs[3]))
            if cause_of_death(fly) is None:
                yield fly

    # -- one chromosome alone ------------------------------------------------------------------------------------

    def some_chromosome_forbids(self) -> bool:
        """Return whether the wish fails on one chromosome alone, whatever the number of generations.

        Every living pair of homologues of the shelf is taken as had, recognisable or not; if even so no last cross gives a
        wanted pair, no scheme does.
        """
        return any(not self._chromosome_allows(table) for table in self.tables)

    def _chromosome_allows(self, table: ChromosomeTable) -> bool:
        wanted = {s: copies for s, place, copies in self.wish.components if place == table.chromosome}
        females, males = self._all_pairs(table)
        for (mother, of_mother), (father, of_father) in product(females, males):
            if any((s in of_mother) + (s in of_father) < copies for s, copies in wanted.items()):
                continue
            goal = table.goal(mother, father)
            if goal.strict or goal.white or goal.pigmented:
                return True
        return False

    def _all_pairs(
        self, table: ChromosomeTable
    ) -> tuple[list[tuple[int, frozenset[str]]], list[tuple[int, frozenset[str]]]]:
        """Return the living pairs of shelf homologues by sex, each with the wanted elements that it carries."""
        shelf = sorted(table.parental, key=lambda h: h.sort_key)
        females, males = [], []
        for i, one in enumerate(shelf):
            for other in shelf[i:]:
                pair = make_pair(one, other)
                is_x = table.chromosome == "X"
                if is_x and not 1 <= x_dose(pair) <= 2:
                    continue
                sex = sex_of(pair) if is_x else FEMALE
                if not table.is_living(pair, sex):
                    continue
                entry = (table.number(pair, sex), self.wish.carried(one) | self.wish.carried(other))
                if not is_x or sex == FEMALE:
                    females.append(entry)
                if not is_x or sex == MALE:
                    males.append(entry)
        return females, males

    # -- the last cross ------------------------------------------------------------------------------------------

    def last_crosses(self, below: int) -> list[tuple[float, State, State]]:
        """Return the cheapest last crosses between flies of the levels up to `below`, cheapest first."""
        import numpy as np

        females, males = self.parents(below)
        candidates: list[tuple[float, State, State]] = []
        for mothers, fathers, coverable in self._by_content(females, males):
            m, f = np.array(mothers), np.array(fathers)
            rows, columns = self._goal_hits(m, f, coverable)
            costs = np.array([self.found[s].cost for s in mothers])[rows]
            costs = costs + np.array([self.found[s].cost for s in fathers])[columns]
            for i in np.argsort(costs, kind="stable")[: 50 * self.kept_schemes]:
                mother, father = mothers[rows[i]], fathers[columns[i]]
                candidates.append((self._last_cost(mother, father, float(costs[i])), mother, father))
        heapq.heapify(candidates)
        hits: list[tuple[float, State, State]] = []
        while candidates and len(hits) < self.kept_schemes:
            cost, mother, father = heapq.heappop(candidates)
            if self._gives_wish(mother, father):
                hits.append((cost, mother, father))
        return hits

    def _last_cost(self, mother: State, father: State, cost: float) -> float:
        shares = tuple(g.share for g in self._goals(mother, father))
        return cost + CROSS_MINUTES + SCORE_MINUTES / max(total_share(shares), 1e-9)

    def _goals(self, mother: State, father: State) -> tuple[Goal, ...]:
        coverable = self.coverable(mother, father)
        return tuple(t.goal(m, f, coverable) for t, m, f in zip(self.tables, mother, father, strict=True))

    def _independent(self, mother: State, father: State) -> bool:
        couplings = [t.coupling(m, f) for t, m, f in zip(self.tables, mother, father, strict=True)]
        return chromosomes_are_independent(couplings, self._hidden_by)

    def _by_content(
        self, females: list[State], males: list[State]
    ) -> Iterator[tuple[list[State], list[State], frozenset[str]]]:
        """Yield groups of mothers and fathers that carry all wanted elements between them.

        With each group go the genes that its progeny may lack (see `coverable`), the same for the whole group.
        """
        wanted = frozenset(self.wish.symbols)
        by_mother: dict[tuple[frozenset[str], frozenset[str]], list[State]] = {}
        by_father: dict[tuple[frozenset[str], frozenset[str]], list[State]] = {}
        for group, states in ((by_mother, females), (by_father, males)):
            for state in states:
                group.setdefault((self.content(state), self._mutant(state)), []).append(state)
        for (of_mother, lack_m), mothers in sorted(by_mother.items(), key=_group_order):
            for (of_father, lack_f), fathers in sorted(by_father.items(), key=_group_order):
                if of_mother | of_father == wanted:
                    yield mothers, fathers, lack_m & lack_f

    def _goal_hits(
        self, m: NDArray[np.int64], f: NDArray[np.int64], coverable: frozenset[str]
    ) -> tuple[NDArray[np.int64], NDArray[np.int64]]:
        """Return the places in `m` and `f` of the mothers and fathers whose cross can give the wish.

        Chromosomes with wanted elements are looked at first; parents that have no partner left are dropped at once.
        """
        import numpy as np

        rows, columns = np.arange(len(m)), np.arange(len(f))
        busy = {place for _, place, _ in self.wish.components}
        order = sorted(range(len(self.tables)), key=lambda k: self.tables[k].chromosome not in busy)
        flags: dict[int, NDArray[np.bool_]] = {}
        for k in order:
            here = self._goal_flags(k, m[rows, k], f[columns, k], coverable)
            some = here[0] | here[2] | here[3]
            keep_rows, keep_columns = some.any(axis=1), some.any(axis=0)
            rows, columns = rows[keep_rows], columns[keep_columns]
            flags = {j: x[:, keep_rows][:, :, keep_columns] for j, x in flags.items()}
            flags[k] = here[:, keep_rows][:, :, keep_columns]
            if not rows.size or not columns.size:
                return rows, columns
        good = np.logical_and.reduce([x[0] for x in flags.values()]) | np.logical_and.reduce(
            [x[2] for x in flags.values()]
        )
        for k in flags:
            others = [x[1] for j, x in flags.items() if j != k]
            good |= flags[k][3] & np.logical_and.reduce(others)
        i, j = np.nonzero(good)
        return rows[i], columns[j]

    def _goal_flags(
        self, k: int, m: NDArray[np.int64], f: NDArray[np.int64], coverable: frozenset[str]
    ) -> NDArray[np.bool_]:
        """Return the four flags of `Goal` (first axis) for every mother and father, on one chromosome."""
        import numpy as np

        table = self.tables[k]
        of_m, m_index = np.unique(m, return_inverse=True)
        of_f, f_index = np.unique(f, return_inverse=True)
        small = np.zeros((4, len(of_m), len(of_f)), dtype=bool)
        for i, a in enumerate(of_m.tolist()):
            for j, b in enumerate(of_f.tolist()):
                g = table.goal(a, b, coverable)
                small[:, i, j] = g.strict, g.strict_plain, g.white, g.pigmented
        return np.asarray(small[:, m_index][:, :, f_index], dtype=np.bool_)

    def _gives_wish(self, mother: State, father: State) -> bool:
        """Look at the whole progeny of the last cross: a look whose bearers all satisfy the wish exists."""
        if not reachable_goal(self._goals(mother, father)):
            return False
        if self._independent(mother, father):
            return True
        progeny = list(self._progeny(mother, father))
        return bool(accepted_looks(progeny, self.observer, self.accepts, self.wish.sexes()))

    def accepts(self, fly: Fly) -> bool:
        return all(self.wish.accepts(p, name) for name, p in zip(PAIRS, fly.pairs, strict=True))

    # -- schemes -------------------------------------------------------------------------------------------------

    def scheme(self, mother: State, father: State) -> Node:
        return Node(self._origin(mother), self._origin(father), None)

    def _origin(self, state: State) -> Leaf | Node:
        source = self.found[state].source
        if isinstance(source, Leaf):
            return source
        mother, father = source
        return Node(self._origin(mother), self._origin(father), self.fly(state))


def _group_order(group: tuple[tuple[frozenset[str], frozenset[str]], list[State]]) -> tuple[list[str], list[str]]:
    (content, lacks), _ = group
    return sorted(content), sorted(lacks)


def accepted_looks(
    progeny: Iterable[Fly], observer: Observer, wish_accepts: Callable[[Fly], bool], sexes: tuple[Sex, ...]
) -> list[frozenset[str]]:
    """Return the looks that the wish can be picked by: in every wanted sex there are bearers, and all will do.

    Args:
        progeny: every living genotype of the cross.
        observer: who looks at them.
        wish_accepts: whether a fly will do.
        sexes: the sexes that are wanted; with both, one look must serve both.
    """
    groups: dict[tuple[str, frozenset[str]], bool] = {}
    for fly in progeny:
        key = (fly.sex, observer.signs(fly))
        groups[key] = groups.get(key, True) and wish_accepts(fly)
    looks = {look for _, look in groups}
    good = [look for look in looks if all(groups.get((sex, look), False) for sex in sexes)]
    return sorted(good, key=lambda look: (len(look), sorted(look)))


def find_schemes(
    shelf: ReducedShelf,
    observer: Observer,
    max_generations: int,
    kept_schemes: int = 5,
    budget: int = 400_000,
) -> SearchResult:
    """Return the cheapest schemes of the fewest generations for the wish of `shelf`.

    Args:
        shelf: the forms and the wish, in reduced terms.
        observer: who tells flies apart, with the lab's means.
        max_generations: how far to search.
        kept_schemes: how many schemes of that number of generations to return at most.
        budget: largest number of crosses that one level may try; a level beyond it is not searched, and the result
            says so.
    """
    whole = _Search(shelf, observer, kept_schemes, budget, range(len(shelf.forms)))
    hits = whole.last_crosses(0)
    if hits:
        return _hit(whole, hits, 1)
    if max_generations == 1:
        return SearchResult(Status.IMPOSSIBLE, searched_to=1, forms=shelf.forms)
    handy = _Search(shelf, observer, kept_schemes, budget, _handiest(whole, HANDY_HELPERS[2]))
    for search in (handy, whole):
        for done in search.breed_last(1):
            if not done:
                return SearchResult(Status.LIMIT, searched_to=1, forms=shelf.forms)
            hits = search.last_crosses(1)
            if hits:
                return _hit(search, hits, 2)
    if max_generations < 3 or whole.some_chromosome_forbids():
        return SearchResult(Status.IMPOSSIBLE, searched_to=max_generations, forms=shelf.forms)
    return _deeper(whole, max_generations)


def _hit(search: _Search, hits: list[tuple[float, State, State]], generations: int) -> SearchResult:
    schemes = tuple(search.scheme(mother, father) for _, mother, father in hits)
    return SearchResult(Status.PROVED_MINIMAL, schemes, generations, generations, search.shelf.forms)


def _deeper(whole: _Search, max_generations: int) -> SearchResult:
    """Search from three generations on, where two are known not to do.

    A small shelf of the handiest helpers is tried first: a hit there is minimal, since everything below was searched on
    the whole shelf. Only if it gives none is the whole shelf bred, as far as the budget allows.
    """
    small = _Search(whole.shelf, whole.observer, whole.kept_schemes, whole.budget, _handiest(whole, HANDY_HELPERS[3]))
    for search in (small, whole):
        result = _search_levels(search, max_generations)
        if result.schemes and (search is whole or result.generations == FIRST_DEEP_LEVEL):
            return result
    return result


#: the fewest generations that `_deeper` looks for
FIRST_DEEP_LEVEL = 3


def _search_levels(search: _Search, max_generations: int) -> SearchResult:
    forms = search.shelf.forms
    for generations in range(FIRST_DEEP_LEVEL, max_generations + 1):
        short_of_budget = SearchResult(Status.LIMIT, searched_to=generations - 1, forms=forms)
        if not search.breed(generations - 2, last=False):
            return short_of_budget
        for done in search.breed_last(generations - 1):
            if not done:
                return short_of_budget
            hits = search.last_crosses(generations - 1)
            if hits:
                return _hit(search, hits, generations)
    return SearchResult(Status.IMPOSSIBLE, searched_to=max_generations, forms=forms)


#: helper stocks that the first look at so many generations makes do with
HANDY_HELPERS = {2: 14, 3: 7}


def _handiest(search: _Search, most: int) -> list[int]:
    """Return the numbers of the forms with wanted elements, and of the helpers with most balancers and least else."""
    wanted, helpers = [], []
    for i, form in enumerate(search.shelf.forms):
        fly = form.female or form.male
        assert fly is not None
        if any(search.wish.carried(h) for _, h in fly.homologues()):
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


def may_be_given(wish: Wish, chromosome: str, homologue: Homologue) -> bool:
    """Return whether a gamete with this homologue can be one half of a wanted fly."""
    if any(wish.forbids(e) for e in homologue.elements):
        return False
    doubled = {s for s, place, copies in wish.components if copies > 1 and place == chromosome}
    return doubled <= set(homologue.symbols)
