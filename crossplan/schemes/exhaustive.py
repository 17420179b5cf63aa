"""Every fly that can be had, level by level: slow, and sees everything.

Used where chromosomes act on one another's signs, so that looking at one chromosome at a time (`crossplan.schemes.levels`)
finds schemes that do not stand the look at the whole progeny: then the level is searched again here before it is given up.

Level 0 holds the flies of the shelf; level k + 1 adds every fly that a cross of flies of the levels before gives as a
pure class of one genotype. The join of the last cross is done with one boolean table for each chromosome instead of pair by
pair; every hit is then looked at again with the whole progeny in view before it counts.
"""

from __future__ import annotations

import heapq
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from itertools import product
from typing import TYPE_CHECKING

from crossplan.genetics.appearance import WHITE, Observer
from crossplan.genetics.chromosome import FEMALE, MALE, PAIRS
from crossplan.genetics.fly import Fly
from crossplan.genetics.meiosis import gametes
from crossplan.genetics.survival import NO_GENES, cause_of_death, is_fertile, sex_of
from crossplan.schemes.forms import ReducedShelf
from crossplan.schemes.scheme import Leaf, Node
from crossplan.schemes.segregation import (
    Child,
    ChromosomeTable,
    Goal,
    chromosomes_are_independent,
    pickable,
    reachable_goal,
    total_share,
)
from crossplan.schemes.whole_progeny import accepted_looks
from crossplan.schemes.wish import may_be_given
from crossplan.schemes.work import CROSS_MINUTES, SCORE_MINUTES, VIRGIN_FROM_STEP_MINUTES, stock_minutes

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

State = tuple[int, int, int, int]


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
        self._offer(state, _Found(0, stock_minutes(fly), Leaf(form, fly.sex)))

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


def schemes_of(
    shelf: ReducedShelf, observer: Observer, generations: int, kept_schemes: int, budget: int = 400_000
) -> list[Node] | None:
    """Return the cheapest schemes of so many generations, every cross between all flies made; None beyond the budget.

    Args:
        shelf: the forms and the wish, in reduced terms.
        observer: who tells flies apart, with the lab's means.
        generations: of the schemes; fewer are known not to do.
        kept_schemes: how many to return at most.
        budget: largest number of crosses that one level may try.
    """
    search = _Search(shelf, observer, kept_schemes, budget, range(len(shelf.forms)))
    for level in range(1, generations - 1):
        if not search.breed(level, last=False):
            return None
    if generations > 1:
        for done in search.breed_last(generations - 1):
            if not done:
                return None
    return [search.scheme(mother, father) for _, mother, father in search.last_crosses(generations - 1)]
