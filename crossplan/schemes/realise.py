"""A scheme that was found, carried out on the real stocks.

The search works with representatives. Here every cross of a scheme is made again with the flies that the stock list
writes, by `crossplan.genetics.progeny`, and the class to keep is found among the real progeny, with its exact share, the
rule to pick it by, and what is easily taken for it. A scheme that does not stand this is refused.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

from crossplan.genetics.appearance import Observer
from crossplan.genetics.chromosome import FEMALE, PAIRS, Sex
from crossplan.genetics.fly import Fly, make_pair
from crossplan.genetics.progeny import Progeny, ProgenyClass, cross
from crossplan.genetics.sorting import easily_mistaken, rule_for, words_of
from crossplan.schemes.forms import Form, Reducer, Source
from crossplan.schemes.scheme import Leaf, Node
from crossplan.schemes.whole_progeny import accepted_looks
from crossplan.schemes.wish import Wish


class NotCarriedOut(Exception):
    """The real progeny do not hold the class that the scheme keeps (the reduction was too coarse here)."""


@dataclass(frozen=True)
class StockParent:
    """A parent from the shelf; `pick` says which flies of the stock to take when it throws several kinds."""

    stock: str
    fly: Fly
    pick: str = ""
    pick_is_pure: bool = True

    @property
    def key(self) -> tuple[object, ...]:
        """What makes two parents the same parent."""
        return ("stock", self.stock, self.fly.sex)


@dataclass(frozen=True)
class Cross:
    """One cross of a scheme on real stocks: its parents, its progeny, and the class or classes to keep.

    `kept` holds one class, or for a new stock the class of either sex. `fly` is the most frequent kept genotype.
    """

    mother: StockParent | Cross
    father: StockParent | Cross
    mother_fly: Fly
    father_fly: Fly
    progeny: Progeny
    kept: tuple[ProgenyClass, ...]
    is_last: bool

    @property
    def fly(self) -> Fly:
        return self.kept[0].members[0].fly

    @cached_property
    def key(self) -> tuple[object, ...]:
        """What makes two crosses one piece of work: the same parents and the same flies kept."""
        return ("cross", self.mother.key, self.father.key, self.kept[0].sex, self.kept[0].signs, len(self.kept))

    @property
    def generation(self) -> int:
        """Longest run of crosses from a stock to this one, itself counted."""
        return 1 + max(p.generation if isinstance(p, Cross) else 0 for p in (self.mother, self.father))

    def crosses(self) -> tuple[Cross, ...]:
        """Return this cross and all before it, parents first, each once."""
        found: dict[tuple[object, ...], Cross] = {}
        for parent in (self.mother, self.father):
            if isinstance(parent, Cross):
                found.update((c.key, c) for c in parent.crosses())
        found[self.key] = self
        return tuple(found.values())


class Bench:
    """Crosses of real flies on one shelf, each made once."""

    def __init__(self, sources: Mapping[str, Source], observer: Observer) -> None:
        self.sources = sources
        self.observer = observer
        self._made: dict[tuple[Fly, Fly], Progeny] = {}
        self._parents: dict[tuple[str, Sex], StockParent] = {}

    def cross(self, mother: Fly, father: Fly) -> Progeny:
        """Return the progeny of two flies."""
        found = self._made.get((mother, father))
        if found is None:
            found = self._made[mother, father] = cross(mother, father, self.observer)
        return found

    def fly(self, stock: str, sex: Sex) -> Fly:
        """Return the fly of that sex that a stock gives."""
        source = self.sources[stock]
        fly = source.female if sex == FEMALE else source.male
        assert fly is not None
        return fly

    def parent(self, stock: str, sex: Sex) -> StockParent:
        """Return the parent to take from a stock."""
        found = self._parents.get((stock, sex))
        if found is None:
            made = stock_parent(self.sources[stock], self.fly(stock, sex), self.observer)
            found = self._parents[stock, sex] = made
        return found


@dataclass(frozen=True)
class Outline:
    """A scheme on real stocks without its progeny: what is crossed with what, and the real flies that are kept.

    `key` tells the work apart from other work; `keys` are those of all crosses of the scheme.
    """

    key: tuple[object, ...]
    fly: Fly | None
    keys: tuple[tuple[object, ...], ...] = ()


class Realiser:
    """Carries out schemes on one shelf for one wish."""

    def __init__(self, wish: Wish, bench: Bench, reducer: Reducer, forms: tuple[Form, ...]) -> None:
        self.wish = wish
        self.bench = bench
        self.reducer = reducer
        self.forms = forms
        self.observer = bench.observer

    def outline(self, node: Leaf | Node) -> Outline:
        """Return what a scheme comes to on real stocks, quickly: whether it stands is for `carry_out` to say."""
        if isinstance(node, Leaf):
            stock = self.forms[node.form].stock
            return Outline((stock, node.sex), self.bench.fly(stock, node.sex))
        mother, father = self.outline(node.mother), self.outline(node.father)
        kept = None
        if node.keep is not None and mother.fly is not None and father.fly is not None:
            kept = self._real(node.keep, mother.fly, father.fly)
        key = (mother.key, father.key, kept or node.keep)
        return Outline(key, kept, (*mother.keys, *father.keys, key))

    def _real(self, keep: Fly, mother: Fly, father: Fly) -> Fly | None:
        """Return the child of whole parental homologues that is `keep` in reduced terms; None if it is a recombinant."""
        pairs = []
        for wanted, of_mother, of_father in zip(keep.pairs, mother.pairs, father.pairs, strict=True):
            made = (make_pair(m, f) for m in of_mother for f in of_father)
            found = next((p for p in made if make_pair(*map(self.reducer.homologue, p)) == wanted), None)
            if found is None:
                return None
            pairs.append(found)
        return Fly(keep.sex, (pairs[0], pairs[1], pairs[2], pairs[3]))

    def carry_out(self, scheme: Node) -> Cross:
        """Return the scheme on real stocks.

        Raises:
            NotCarriedOut: a class that the scheme keeps is not pure among the real progeny.
        """
        mother, mother_fly = self._parent(scheme.mother)
        father, father_fly = self._parent(scheme.father)
        progeny = self.bench.cross(mother_fly, father_fly)
        if scheme.keep is None:
            kept = self._last_classes(progeny)
        else:
            kept = (self._class_of(progeny, scheme.keep),)
        return Cross(mother, father, mother_fly, father_fly, progeny, kept, scheme.keep is None)

    def _parent(self, node: Leaf | Node) -> tuple[StockParent | Cross, Fly]:
        if isinstance(node, Node):
            made = self.carry_out(node)
            return made, made.fly
        stock = self.forms[node.form].stock
        return self.bench.parent(stock, node.sex), self.bench.fly(stock, node.sex)

    def _class_of(self, progeny: Progeny, keep: Fly) -> ProgenyClass:
        for found in progeny.classes:
            if found.sex == keep.sex and all(self.reducer.fly(m.fly) == keep for m in found.members):
                return found
        raise NotCarriedOut

    def _last_classes(self, progeny: Progeny) -> tuple[ProgenyClass, ...]:
        flies = [m.fly for c in progeny.classes for m in c.members]
        looks = accepted_looks(flies, self.observer, self.accepts, self.wish.sexes())
        if not looks:
            raise NotCarriedOut
        classes = {(c.sex, c.signs): c for c in progeny.classes}
        best = max(looks, key=lambda look: min(classes[s, look].share for s in self._sexes()))
        return tuple(classes[sex, best] for sex in self._sexes())

    def _sexes(self) -> tuple[Sex, ...]:
        return self.wish.sexes()

    def accepts(self, fly: Fly) -> bool:
        """Return whether a real fly satisfies the wish (its sex apart)."""
        return all(self.wish.accepts(p, name) for name, p in zip(PAIRS, fly.pairs, strict=True))


def stock_parent(source: Source, fly: Fly, observer: Observer) -> StockParent:
    """Return the parent to take from a stock, with the rule to pick it by where the stock throws other kinds too."""
    if source.female is None or source.male is None or all(a == b or b.is_y for a, b in fly.pairs):
        return StockParent(source.name, fly)
    progeny = cross(source.female, source.male, observer)
    for found in progeny.classes:
        if found.sex == fly.sex and any(m.fly == fly for m in found.members):
            words = words_of(rule_for(found, progeny.classes, observer.catalogue), observer.catalogue)
            return StockParent(source.name, fly, words, not found.look_alikes)
    return StockParent(source.name, fly, "", pick_is_pure=False)


def describe_class(found: ProgenyClass, progeny: Progeny, observer: Observer) -> str:
    """Return the rule for a class in words, such as `females with straight wings, coloured eyes`."""
    words = words_of(rule_for(found, progeny.classes, observer.catalogue), observer.catalogue)
    plural = "females" if found.sex == FEMALE else "males"
    return f"{plural}: {words}" if words else f"all {plural}"


def look_alike_words(found: ProgenyClass, progeny: Progeny, observer: Observer) -> list[str]:
    """Return what is most easily taken for the class, each with the sign that tells it apart."""
    words = []
    for other, test in easily_mistaken(found, progeny.classes, observer.catalogue):
        tell = words_of([test], observer.catalogue)
        words.append(f"sibs that differ only in this: kept flies have {tell} (sibs are {_percent(other)} of the vial)")
    return words


def _percent(found: ProgenyClass) -> str:
    return f"{100 * float(found.share):.0f} %"
