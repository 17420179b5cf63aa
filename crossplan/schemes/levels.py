"""Fewest generations by whole arrays: every fly that is worth breeding, level by level, and the last crosses that hit.

Flies are quadruples of pairs. A fly is left out when another of its sex is at least as good on every chromosome
(`crossplan.schemes.dominance`), so the levels stay small and nothing that could matter is lost. What is found here holds
chromosome by chromosome; whether chromosomes hide or share one another's signs is looked at by the caller, on the few
schemes that are found. If there is no hit here, there is no scheme of that many generations.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from itertools import product
from typing import TYPE_CHECKING

from crossplan.genetics.appearance import Observer
from crossplan.genetics.chromosome import FEMALE, MALE, PAIRS, SEXES, Sex
from crossplan.genetics.fly import Fly
from crossplan.genetics.survival import is_fertile
from crossplan.schemes.dominance import Kept, TooLarge, Universe
from crossplan.schemes.forms import ReducedShelf
from crossplan.schemes.pairs import Acting, PairBook, modes
from crossplan.schemes.work import CROSS_MINUTES, SCORE_MINUTES, VIRGIN_FROM_STEP_MINUTES, stock_minutes

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Ints = NDArray[np.int32]
    Floats = NDArray[np.float64]
    Bools = NDArray[np.bool_]

CHROMOSOMES = len(PAIRS)
#: crosses looked at in one piece, and flies compared in one piece
CHUNK = 200_000
BLOCK = 256


@dataclass(frozen=True)
class Budget:
    """What one search may take: crosses of a level, flies of a level, pairs of a chromosome."""

    crosses: int = 4_000_000
    flies: int = 20_000
    pairs: int = 600


@dataclass(frozen=True)
class Bred:
    """Flies of one sex: their pairs as places (axis 1), the work behind each in minutes, and where each comes from.

    `ident` is the number of a fly in the search's own list, -1 for one that is not in it yet. `origin` holds (-1, form, 0)
    for a fly of the shelf and (mother, father, 0) for one that was bred.
    """

    flies: Ints
    cost: Floats
    ident: Ints
    origin: Ints

    def take(self, chosen: NDArray[np.int64] | Bools) -> Bred:
        """Return some of the flies."""
        return Bred(self.flies[chosen], self.cost[chosen], self.ident[chosen], self.origin[chosen])


@dataclass(frozen=True)
class Hit:
    """A last cross: the numbers of its parents, and the work up to it in minutes."""

    mother: int
    father: int
    cost: float


class LevelSearch:
    """The levels of one shelf, from a choice of its forms."""

    def __init__(self, shelf: ReducedShelf, observer: Observer, forms: Sequence[int], budget: Budget) -> None:
        self.shelf = shelf
        self.budget = budget
        self._origin: list[tuple[int, int, int]] = []
        self._places: list[tuple[int, ...]] = []
        stocks = [(i, fly) for i in forms for fly in (shelf.forms[i].female, shelf.forms[i].male) if fly is not None]
        acting = Acting.among(fly for _, fly in stocks)
        self.modes = modes(acting)
        self.books = [PairBook(name, observer, shelf.wish, acting) for name in PAIRS]
        for k, book in enumerate(self.books):
            book.add_shelf(dict.fromkeys(h for _, fly in stocks for h in fly.pairs[k]))
        stocks = [(i, fly) for i, fly in stocks if is_fertile(fly)]
        self.universes = [
            Universe(book, list(dict.fromkeys(book.number_of(fly.pairs[k]) for _, fly in stocks)))
            for k, book in enumerate(self.books)
        ]
        self._shelf = {sex: self._shelf_flies([(i, fly) for i, fly in stocks if fly.sex == sex]) for sex in SEXES}

    def _shelf_flies(self, stocks: Sequence[tuple[int, Fly]]) -> Bred:
        import numpy as np

        flies = [
            [u.place(b.number_of(p)) for u, b, p in zip(self.universes, self.books, fly.pairs, strict=True)]
            for _, fly in stocks
        ]
        return Bred(
            np.array(flies, dtype=np.int32).reshape(-1, CHROMOSOMES),
            np.array([stock_minutes(fly) for _, fly in stocks], dtype=np.float64),
            np.full(len(stocks), -1, dtype=np.int32),
            np.array([(-1, form, 0) for form, _ in stocks], dtype=np.int32).reshape(-1, 3),
        )

    def fly(self, ident: int) -> Fly:
        """Return the fly of that number."""
        numbers = [u.places[place] for u, place in zip(self.universes, self._places[ident], strict=True)]
        a, b, c, d = (book.pair(n) for book, n in zip(self.books, numbers, strict=True))
        return Fly(self.books[0].sexes[numbers[0]], (a, b, c, d))

    def origin(self, ident: int) -> tuple[int, int, int]:
        """Return where the fly of that number comes from; see `Bred`."""
        return self._origin[ident]

    def hits(self, generations: int, most: int, cheapest: bool) -> list[Hit]:
        """Return last crosses of schemes of at most so many generations, least work first.

        Args:
            generations: of the schemes, at most.
            most: how many to return.
            cheapest: whether a fly of more work never replaces one of less, however good it is.

        Raises:
            TooLarge: the budget does not allow it; nothing is known then.
        """
        deepest = generations - 1
        for universe in self.universes:
            universe.grow(deepest, self.budget.pairs)
            if not universe.goals(deepest)[0].any():
                return []
        if deepest == 0:
            return self._last_crosses(self._numbered(self._shelf[FEMALE]), self._numbered(self._shelf[MALE]), 0, most)
        pool = {sex: self._thinned(self._shelf[sex], sex, deepest, deepest, cheapest) for sex in SEXES}
        for level in range(1, generations):
            to_come = deepest - level
            born = {sex: self._breed(pool, to_come, deepest, sex) for sex in SEXES}
            pool = {sex: self._thinned(_joined(pool[sex], born[sex]), sex, to_come, deepest, cheapest) for sex in SEXES}
        return self._last_crosses(pool[FEMALE], pool[MALE], deepest, most)

    # -- one level more --------------------------------------------------------------------------------------------

    def _breed(self, pool: Mapping[Sex, Bred], to_come: int, deepest: int, sex: Sex) -> Bred:
        """Return the useful flies of one sex that the crosses of the pool give, of equal ones that of least work."""
        mothers, fathers = pool[FEMALE], pool[MALE]
        if len(mothers.flies) * len(fathers.flies) > self.budget.crosses:
            raise TooLarge
        kept = [u.kept(to_come, deepest, sex) for u in self.universes]
        virgin = VIRGIN_FROM_STEP_MINUTES if sex == FEMALE else 0.0
        found = nobody()
        for mode in self.modes:
            for part in _children(mothers, fathers, kept, mode, virgin):
                found = _joined(found, part)
                found = found.take(_first_of_equals(found.flies, found.cost))
                if len(found.flies) > self.budget.flies:
                    raise TooLarge
        return found

    def _thinned(self, bred: Bred, sex: Sex, to_come: int, deepest: int, cheapest: bool) -> Bred:
        """Leave out flies that are of no use, and flies than which another is at least as good; number the rest."""
        import numpy as np

        orders = [u.better(to_come, deepest, sex) for u in self.universes]
        useful = np.ones(len(bred.flies), dtype=np.bool_)
        stand_ins = np.empty_like(bred.flies)
        for k, (universe, order) in enumerate(zip(self.universes, orders, strict=True)):
            useful &= universe.useful(to_come, deepest, sex)[bred.flies[:, k]]
            stand_ins[:, k] = (order & order.T).argmax(axis=1)[bred.flies[:, k]]
        bred, stand_ins = bred.take(useful), stand_ins[useful]
        first = _first_of_equals(stand_ins, bred.cost)
        bred, stand_ins = bred.take(first), stand_ins[first]
        if len(bred.flies) > self.budget.flies:
            raise TooLarge
        return self._numbered(bred.take(_best(stand_ins, bred.cost, orders, cheapest)))

    def _numbered(self, bred: Bred) -> Bred:
        ident = bred.ident.copy()
        for i in (bred.ident < 0).nonzero()[0].tolist():
            a, b, c = bred.origin[i].tolist()
            ident[i] = len(self._origin)
            self._origin.append((a, b, c))
            self._places.append(tuple(bred.flies[i].tolist()))
        return Bred(bred.flies, bred.cost, ident, bred.origin)

    # -- the last cross --------------------------------------------------------------------------------------------

    def _last_crosses(self, mothers: Bred, fathers: Bred, deepest: int, most: int) -> list[Hit]:
        import numpy as np

        goals = [u.goals(deepest) for u in self.universes]
        found: list[Hit] = []
        rows = max(1, CHUNK // max(1, len(fathers.flies)))
        for start in range(0, len(mothers.flies), rows):
            part = mothers.take(np.arange(start, min(start + rows, len(mothers.flies))))
            hit = np.zeros((len(part.flies), len(fathers.flies)), dtype=np.bool_)
            for mode in self.modes:
                here = np.ones_like(hit)
                for k, (flags, _) in enumerate(goals):
                    here &= flags[mode[k]][part.flies[:, k, None], fathers.flies[None, :, k]]
                hit |= here
            i, j = hit.nonzero()
            share = np.ones(len(i))
            for k, (_, best) in enumerate(goals):
                share *= best[part.flies[i, k], fathers.flies[j, k]]
            cost = part.cost[i] + fathers.cost[j] + CROSS_MINUTES + SCORE_MINUTES / np.maximum(share, 1e-9)
            found += [
                Hit(int(part.ident[i[n]]), int(fathers.ident[j[n]]), float(cost[n]))
                for n in np.argsort(cost, kind="stable")[:most].tolist()
            ]
        return sorted(found, key=lambda h: h.cost)[:most]


def nobody() -> Bred:
    """Return no flies at all."""
    import numpy as np

    return Bred(
        np.zeros((0, CHROMOSOMES), dtype=np.int32),
        np.zeros(0),
        np.zeros(0, dtype=np.int32),
        np.zeros((0, 3), dtype=np.int32),
    )


def _joined(one: Bred, other: Bred) -> Bred:
    import numpy as np

    return Bred(
        np.concatenate([one.flies, other.flies]),
        np.concatenate([one.cost, other.cost]),
        np.concatenate([one.ident, other.ident]),
        np.concatenate([one.origin, other.origin]),
    )


def _children(
    mothers: Bred, fathers: Bred, kept: Sequence[Kept], mode: tuple[int, ...], virgin: float
) -> Iterator[Bred]:
    """Yield the children of all crosses that can be picked in one mode, as far as chromosomes go by themselves."""
    import numpy as np

    tables = [x.child[mode[k]] for k, x in enumerate(kept)]
    possible = np.ones((len(mothers.flies), len(fathers.flies)), dtype=np.bool_)
    for k, table in enumerate(tables):
        possible &= (table[..., 0] >= 0)[mothers.flies[:, k, None], fathers.flies[None, :, k]]
    rows, columns = possible.nonzero()
    for start in range(0, len(rows), CHUNK):
        i, j = rows[start : start + CHUNK], columns[start : start + CHUNK]
        yield from _combined(mothers, fathers, kept, mode, virgin, i, j)


def _combined(
    mothers: Bred, fathers: Bred, kept: Sequence[Kept], mode: tuple[int, ...], virgin: float,
    i: NDArray[np.int64], j: NDArray[np.int64],
) -> Iterator[Bred]:  # fmt: skip
    """Yield the children of mothers `i` and fathers `j`, pair by pair of each chromosome combined."""
    import numpy as np

    child, share = [], []
    for k, x in enumerate(kept):
        at = (mode[k], mothers.flies[i, k], fathers.flies[j, k])
        child.append(x.child[at])
        share.append(x.share[at])
    for slots in product(*(range(c.shape[1]) for c in child)):
        flies = np.stack([c[:, s] for c, s in zip(child, slots, strict=True)], axis=1)
        there = (flies >= 0).all(axis=1)
        if not there.any():
            continue
        part = np.prod([x[there, s] for x, s in zip(share, slots, strict=True)], axis=0)
        cost = mothers.cost[i[there]] + fathers.cost[j[there]] + CROSS_MINUTES + SCORE_MINUTES / part + virgin
        origin = np.stack(
            [mothers.ident[i[there]], fathers.ident[j[there]], np.zeros(int(there.sum()))], axis=1
        ).astype(np.int32)
        yield Bred(flies[there], cost, np.full(len(cost), -1, dtype=np.int32), origin)


def _first_of_equals(flies: Ints, cost: Floats) -> NDArray[np.int64]:
    """Return the places of the flies that differ, of equal ones that of least work (the first of those), in order."""
    import numpy as np

    code = _row_codes(flies)
    order = np.lexsort((np.arange(len(code)), cost, code))
    code = code[order]
    first = np.ones(len(code), dtype=np.bool_)
    first[1:] = code[1:] != code[:-1]
    return np.sort(order[first])


def _row_codes(flies: Ints) -> NDArray[np.int64]:
    import numpy as np

    code = np.zeros(len(flies), dtype=np.int64)
    for column in flies.T:
        code = code * (int(column.max(initial=0)) + 1) + column
    return code


def _best(flies: Ints, cost: Floats, orders: Sequence[Bools], cheapest: bool) -> Bools:
    """Return which flies no other replaces. No two of them may be equally good on all chromosomes."""
    import numpy as np

    keep = np.ones(len(flies), dtype=np.bool_)
    for start in range(0, len(flies), BLOCK):
        block = np.arange(start, min(start + BLOCK, len(flies)))
        as_good = np.ones((len(flies), len(block)), dtype=np.bool_)
        for k, order in enumerate(orders):
            as_good &= order[flies[:, k, None], flies[None, block, k]]
        if cheapest:
            as_good &= cost[:, None] <= cost[None, block]
        as_good[block, np.arange(len(block))] = False
        keep[block] = ~as_good.any(axis=0)
    return keep
