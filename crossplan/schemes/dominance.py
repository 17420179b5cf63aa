"""Which pair of a chromosome can do everything that another can: the flies that a search may leave out.

With no cross to come before the last one, pair p is at least as good as pair q if with every partner it gives the wanted
flies wherever q does. With r + 1 crosses to come, it must also be at least as good with r, and for every partner and every
child that can be kept from q there must be a child kept from p, in the same mode, that is at least as good with r to come.
A fly whose four pairs are each at least as good as those of another fly of its sex replaces it in any scheme. (This is the
largest simulation between pairs; Milner 1971, Int. Joint Conf. Artif. Intell., for the notion.)
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from crossplan.genetics.chromosome import FEMALE, SEXES, Sex
from crossplan.schemes.pairs import Outcomes, PairBook

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Ints = NDArray[np.int32]
    Floats = NDArray[np.float64]
    Bools = NDArray[np.bool_]


class TooLarge(Exception):
    """The search would take more than its budget; nothing is known of what it was asked."""


@dataclass(frozen=True)
class Kept:
    """The best children of every cross, for each condition (axis 0), mother, father and slot; -1 where there is none.

    Children are places in the universe; `share` is that of the zygotes that live.
    """

    child: Ints
    share: Floats


class Universe:
    """The pairs that flies of a search can have on one chromosome, level by level, and what they are good for.

    Places in the universe never change; a deeper level appends.
    """

    def __init__(self, book: PairBook, shelf_pairs: Sequence[int]) -> None:
        self.book = book
        self.places: list[int] = []
        self._place: dict[int, int] = {}
        self.level_size: list[int] = []
        self._append(shelf_pairs)
        self._outcomes: tuple[int, list[tuple[Outcomes, Bools]]] | None = None
        self._better: dict[tuple[int, int, Sex], Bools] = {}
        self._kept: dict[tuple[int, int, Sex], Kept] = {}
        self._goals: dict[int, tuple[Bools, Floats]] = {}

    def _append(self, numbers: Sequence[int]) -> None:
        for number in numbers:
            if number not in self._place:
                self._place[number] = len(self.places)
                self.places.append(number)
        self.level_size.append(len(self.places))

    def place(self, number: int) -> int:
        """Return the place of a pair."""
        return self._place[number]

    def grow(self, levels: int, most: int) -> None:
        """Make the levels up to `levels` known.

        Raises:
            TooLarge: one of them has more than `most` pairs.
        """
        import numpy as np

        while len(self.level_size) <= levels:
            if len(self.places) > most:
                raise TooLarge
            born: set[int] = set()
            for out, conditions in self._crosses(len(self.level_size) - 1):
                keep = conditions.any(axis=0) & np.asarray(self.book.array("keepable"), dtype=np.bool_)[out.pair]
                born.update(np.unique(out.pair[keep]).tolist())
            self._append(sorted(born))

    def _crosses(self, level: int) -> list[tuple[Outcomes, Bools]]:
        """Return the children of all crosses between pairs of levels up to `level`, with their conditions."""
        if self._outcomes is None or self._outcomes[0] != level:
            pairs = self.places[: self.level_size[level]]
            made = [(out, self.book.conditions(out)) for out in self.book.outcomes(pairs, pairs)]
            self._outcomes = (level, made)
        return self._outcomes[1]

    def goals(self, level: int) -> tuple[Bools, Floats]:
        """Return what last crosses between pairs of levels up to `level` give; see `PairBook.goals`."""
        found = self._goals.get(level)
        if found is None:
            pairs = self.places[: self.level_size[level]]
            found = self._goals[level] = self.book.goals(pairs, pairs)
        return found

    def better(self, to_come: int, deepest: int, sex: Sex) -> Bools:
        """Return whether pair p (axis 0) is at least as good as pair q (axis 1) in a parent of that sex.

        Args:
            to_come: crosses between the one that made the parent and the last one, at most.
            deepest: the level of the parents of the last cross; the pairs are those of level `deepest - to_come`.
            sex: of the parent.
        """
        key = (to_come, deepest, sex)
        found = self._better.get(key)
        if found is None:
            found = self._by_goals(deepest, sex) if to_come == 0 else self._by_children(to_come, deepest, sex)
            self._better[key] = found
        return found

    def _by_goals(self, deepest: int, sex: Sex) -> Bools:
        import numpy as np

        flags, _ = self.goals(deepest)
        rows = flags if sex == FEMALE else flags.transpose(0, 2, 1)
        table = np.concatenate(list(rows), axis=1)
        return _covers(table[:, distinct(table.T)[0]])

    def _by_children(self, to_come: int, deepest: int, sex: Sex) -> Bools:
        import numpy as np

        size = self.level_size[deepest - to_come]
        found = self.better(to_come - 1, deepest, sex)[:size, :size].copy()
        for child_sex in SEXES:
            order = self.better(to_come - 1, deepest, child_sex)
            child = self.kept(to_come - 1, deepest, child_sex).child
            ids, covers = _set_ids(child, order)
            by_parent = ids if sex == FEMALE else ids.transpose(0, 2, 1)
            table = np.concatenate(list(by_parent), axis=1)
            table = table[:, distinct(table.T)[0]]
            first, inverse = distinct(table)
            rows = table[first]
            good = np.ones((len(rows), len(rows)), dtype=np.bool_)
            for column in rows.T:
                good &= covers[column[:, None], column[None, :]]
            found &= good[inverse[:, None], inverse[None, :]]
        return found

    def kept(self, to_come: int, deepest: int, sex: Sex) -> Kept:
        """Return the children worth keeping as parents of that sex, of all crosses between pairs of the level before.

        Args:
            to_come: crosses between the one looked at and the last one.
            deepest: the level of the parents of the last cross.
            sex: of the child.
        """
        key = (to_come, deepest, sex)
        found = self._kept.get(key)
        if found is None:
            found = self._kept[key] = self._make_kept(to_come, deepest, sex)
        return found

    def _make_kept(self, to_come: int, deepest: int, sex: Sex) -> Kept:
        import numpy as np

        level = deepest - to_come - 1
        order = self.better(to_come, deepest, sex)
        place = self._places_by_number(sex, self.useful(to_come, deepest, sex))
        size = self.level_size[level]
        found: list[tuple[tuple[Ints, Ints], Ints, Floats]] = []
        for out, conditions in self._crosses(level):
            share = _share_of_pair(out)
            child = np.where(conditions, place[out.pair][None], -1)
            found.append(((out.mothers[:, None], out.fathers), *_best_of_each(child, share, order)))
        width = max((child.shape[3] for _, child, _ in found), default=1)
        shape = (self.book.conditions_count, size, size, width)
        children, shares = np.full(shape, -1, dtype=np.int32), np.zeros(shape)
        for at, child, share in found:
            children[:, *at, : child.shape[3]] = child
            shares[:, *at, : child.shape[3]] = share
        return Kept(children, shares)

    def _places_by_number(self, sex: Sex, useful: Bools) -> Ints:
        """Return the place of every pair that may be kept as a parent of that sex, by its number; -1 for the others."""
        import numpy as np

        fit = ~np.asarray(self.book.array(f"sterile_{sex}"), dtype=np.bool_)
        if self.book.is_x:
            fit &= np.asarray(self.book.array("female"), dtype=np.bool_) == (sex == FEMALE)
        found = np.full(len(fit), -1, dtype=np.int32)
        places = np.arange(len(useful), dtype=np.int32)
        numbers = np.array(self.places[: len(useful)], dtype=np.int64)
        found[numbers] = np.where(useful & fit[numbers], places, -1)
        return found

    def useful(self, to_come: int, deepest: int, sex: Sex) -> Bools:
        """Return which pairs of level `deepest - to_come` can lead to the wanted flies at all; see `better`."""
        import numpy as np

        size = self.level_size[deepest - to_come]
        flags, _ = self.goals(deepest)
        found = np.asarray(flags.any(axis=(0, 2) if sex == FEMALE else (0, 1)))[:size].copy()
        for later in range(to_come):
            for child_sex in SEXES:
                made = np.asarray((self.kept(later, deepest, child_sex).child >= 0).any(axis=(0, 3)))[:size, :size]
                found |= made.any(axis=1) if sex == FEMALE else made.any(axis=0)
        return found


def _covers(rows: Bools) -> Bools:
    """Return whether row p (axis 0) holds whatever row q (axis 1) holds."""
    import numpy as np

    have = rows.astype(np.float32)
    return np.asarray(have @ (1 - have).T == 0, dtype=np.bool_).T


def distinct(rows: NDArray[np.generic]) -> tuple[NDArray[np.int64], NDArray[np.int64]]:
    """Return the places of the rows that differ (the first of each), and for every row its number among them."""
    import numpy as np

    factors = np.arange(1, rows.shape[1] + 1, dtype=np.uint64) * np.uint64(0x9E3779B97F4A7C15)
    factors = (factors ^ (factors >> np.uint64(31))) * np.uint64(0xBF58476D1CE4E5B9) | np.uint64(1)
    code = (rows.astype(np.uint64) * factors).sum(axis=1, dtype=np.uint64)
    _, first, inverse = np.unique(code, return_index=True, return_inverse=True)
    if not (rows == rows[first][inverse]).all():  # two rows share a code: compare them in full
        _, first, inverse = np.unique(rows, axis=0, return_index=True, return_inverse=True)
    return first, inverse.ravel()


def _share_of_pair(out: Outcomes) -> Floats:
    """Return for every slot the share of all living children that have its pair."""
    import numpy as np

    living = out.weight / np.maximum(out.weight.sum(axis=2, keepdims=True), 1e-12)
    share = np.zeros(living.shape)
    for t in range(out.pair.shape[2]):
        share += np.where(out.pair == out.pair[..., t : t + 1], living[..., t : t + 1], 0.0)
    return share


def _best_of_each(child: Ints, share: Floats, order: Bools) -> tuple[Ints, Floats]:
    """Leave out children than which another in the same vial is at least as good; close the gaps."""
    import numpy as np

    child, shares = _closed_up(child, np.broadcast_to(share, child.shape))
    several = (child >= 0).sum(axis=3) > 1
    some = child[several]
    keep = some >= 0
    for s in range(some.shape[1]):
        for t in range(some.shape[1]):
            if s != t:
                as_good = (some[:, t] >= 0) & order[some[:, t], some[:, s]]
                keep[:, s] &= ~(as_good & (~order[some[:, s], some[:, t]] | (t < s)))
    child[several] = np.where(keep, some, -1)
    return _closed_up(child, shares)


def _closed_up(child: Ints, share: Floats) -> tuple[Ints, Floats]:
    """Move the children of every cross to its first slots, and drop the slots that nobody needs."""
    import numpy as np

    width = max(1, int((child >= 0).sum(axis=3).max(initial=0)))
    first = np.argsort(child < 0, axis=3, kind="stable")[..., :width]
    return np.take_along_axis(child, first, axis=3).astype(np.int32), np.take_along_axis(share, first, axis=3)


def _set_ids(child: Ints, order: Bools) -> tuple[Ints, Bools]:
    """Return a number for every set of children (last axis), and which set is at least as good as which."""
    import numpy as np

    same = order & order.T
    stand_in = np.append(same.argmax(axis=1), len(order))
    rows = np.sort(stand_in[child], axis=3).reshape(-1, child.shape[3])
    first, inverse = distinct(rows)
    sets = rows[first]
    # a slot without a child is matched by anything, and matches only such a slot
    wide = np.zeros((len(order) + 1, len(order) + 1), dtype=np.bool_)
    wide[:-1, :-1] = order
    wide[:, -1] = True
    covers = np.ones((len(sets), len(sets)), dtype=np.bool_)
    for wanted in sets.T:
        match = np.zeros_like(covers)
        for given in sets.T:
            match |= wide[given[:, None], wanted[None, :]]
        covers &= match
    return inverse.reshape(child.shape[:3]).astype(np.int32), covers
