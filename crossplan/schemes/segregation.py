"""One chromosome of one cross: what comes out, and what can be told apart.

The looks of a fly are the sum of what its pairs contribute, and eye pigment is the only sign to which any pair can
contribute. So whether a child can be picked is decided pair by pair, by three rules (`Outcome` holds what they need):

* all pairs *strict*: on every chromosome the child's pair differs from all other living pairs by a sign that is not
  eye pigment;
* the child is white: on every chromosome its pair brings no pigment, and differs from all other pairs that bring none;
* one pair is the child's only pigment: that pair differs from all others that bring pigment, and every other
  pair of the child is strict and brings none.

No other case is pure (take the pair at fault, leave the others as they are: the fly looks the same). Where signs are
shared or hidden between chromosomes these rules are necessary only, and the search looks at all the progeny as well.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from crossplan.genetics.appearance import (
    NO_BROWN_PIGMENT,
    NO_RED_PIGMENT,
    WHITE,
    WHITE_EYES,
    Contribution,
    Observer,
)
from crossplan.genetics.chromosome import FEMALE, Sex
from crossplan.genetics.fly import Homologue, Pair
from crossplan.genetics.meiosis import gametes, recombines
from crossplan.genetics.progeny import zygote_pairs
from crossplan.genetics.survival import NO_GENES, exposed_lethals, restored_genes, sex_of, x_dose
from crossplan.schemes.wish import Wish

_Key = tuple[int, int, frozenset[str]]
Look = tuple[frozenset[str], frozenset[tuple[str, str]], frozenset[str]]


@dataclass(frozen=True, slots=True)
class Child:
    """One pair that a living child can have on this chromosome.

    Attributes:
        pair: number of the pair in its chromosome's table.
        share: of the zygotes that live as far as this chromosome goes.
        strict, loose: the child's pair differs from all other living pairs (strict), or from all others that are
            alike in bringing pigment or not (loose), by signs other than pigment.
        pigment: whether the pair brings eye pigment.
        keepable: whether it may be kept at all (a recombinant of helper elements is not).
    """

    pair: int
    share: float
    strict: bool
    loose: bool
    pigment: bool
    keepable: bool


@dataclass(frozen=True, slots=True)
class Goal:
    """What the last cross of a scheme gives on this chromosome; see the three rules above.

    Attributes:
        strict: there is a look of which all bearers will do.
        strict_plain: the same, and none of them brings pigment.
        white: there is a look whose bearers without pigment will all do.
        pigmented: there is a look whose bearers with pigment will all do.
        share: largest share of zygotes that such a look has.
    """

    strict: bool
    strict_plain: bool
    white: bool
    pigmented: bool
    share: float


@dataclass(frozen=True, slots=True)
class Coupling:
    """What of this chromosome can act on the looks or the life of a fly together with another chromosome.

    Attributes:
        signs: all signs that any living pair shows.
        restores: genes other than white of which an insertion brings a working copy.
        exposed: genes that some pair leaves without a working copy.
        rescued: whether some pair lives only if another chromosome restores a gene.
    """

    signs: frozenset[str]
    restores: frozenset[str]
    exposed: frozenset[str]
    rescued: bool


@dataclass(frozen=True, slots=True)
class _Alternative:
    pair: int
    share: float
    sex: Sex
    look: Look
    pigment: bool
    recombinant: bool


class ChromosomeTable:
    """All pairs of one chromosome that a search meets, numbered, with the outcomes of crosses between them."""

    def __init__(self, chromosome: str, observer: Observer, wish: Wish, rescuable: frozenset[str]) -> None:
        self.chromosome = chromosome
        self.observer = observer
        self.wish = wish
        self.rescuable = rescuable
        self.pairs: list[Pair] = []
        self.sexes: list[Sex] = []
        self._number: dict[tuple[Pair, Sex], int] = {}
        self.parental: set[Homologue] = set()
        self._outcomes: dict[_Key, tuple[_Alternative, ...]] = {}
        self._children: dict[_Key, tuple[Child, ...]] = {}
        self._goals: dict[_Key, Goal] = {}
        self._couplings: dict[_Key, Coupling] = {}
        self._white_usable = self._sign_usable(WHITE_EYES)

    def _sign_usable(self, name: str) -> bool:
        sign = self.observer.catalogue.signs.get(name)
        return sign is None or self.observer.means.uses(sign)

    def number(self, pair: Pair, sex: Sex) -> int:
        """Return the number of the pair; on autosomes both sexes share one number."""
        key = (pair, sex if self.chromosome == "X" else FEMALE)
        found = self._number.get(key)
        if found is None:
            found = self._number[key] = len(self.pairs)
            self.pairs.append(pair)
            self.sexes.append(key[1])
        return found

    def add_parental(self, homologue: Homologue) -> None:
        """Say that the homologue stands on the shelf (anything else is a recombinant)."""
        self.parental.add(homologue)

    def brings_pigment(self, number: int) -> bool:
        """Return whether the pair gives the eye pigment."""
        return self._pigment(self.observer.contribution(self.pairs[number], self.chromosome, self.sexes[number]))

    def is_living(self, pair: Pair, sex: Sex) -> bool:
        """Return whether a fly with this pair lives, as far as this chromosome goes."""
        if self.chromosome == "X" and not 1 <= x_dose(pair) <= 2:
            return False
        exposed = exposed_lethals(pair, self.chromosome, sex)
        restored = restored_genes(pair[0]) | restored_genes(pair[1])
        return not (exposed - restored - self.rescuable)

    def _look(self, part: Contribution, coverable: frozenset[str]) -> Look:
        usable = self.observer.means
        signs = self.observer.catalogue.signs
        dominant = frozenset(s for s in part.dominant if s not in signs or usable.uses(signs[s]))
        exposed = frozenset(
            (gene, sign) for gene, sign in part.exposed if sign and (sign not in signs or usable.uses(signs[sign]))
        )
        return dominant, exposed, part.restores & coverable

    def _pigment(self, part: Contribution) -> bool:
        if WHITE in part.restores:
            return True
        return self.chromosome == "X" and (WHITE, "") not in part.exposed

    def alternatives(self, mother: int, father: int, coverable: frozenset[str] = NO_GENES) -> tuple[_Alternative, ...]:
        """Return the living pairs of the cross of two pairs, with shares of the zygotes that live on this chromosome.

        `coverable` are the genes that another chromosome may leave without a working copy, so that it may show
        whether this one brings one.
        """
        key = (mother, father, coverable)
        found = self._outcomes.get(key)
        if found is None:
            found = self._outcomes[key] = self._make_alternatives(self.pairs[mother], self.pairs[father], coverable)
        return found

    def _make_alternatives(self, mother: Pair, father: Pair, coverable: frozenset[str]) -> tuple[_Alternative, ...]:
        new = set()
        if recombines(mother, self.chromosome, FEMALE):
            new = {g.homologue for g in gametes(mother, self.chromosome, FEMALE)} - set(mother)
        found: list[_Alternative] = []
        alive = 0.0
        for pair, share in zygote_pairs(mother, father, self.chromosome).items():
            sex = sex_of(pair) if self.chromosome == "X" else FEMALE
            if not self.is_living(pair, sex):
                continue
            alive += float(share)
            # an autosomal pair looks the same in both sexes
            part = self.observer.contribution(pair, self.chromosome, sex)
            recombinant = any(h in new and h not in self.parental for h in pair)
            found.append(
                _Alternative(
                    self.number(pair, sex),
                    float(share),
                    sex,
                    self._look(part, coverable),
                    self._pigment(part),
                    recombinant,
                )
            )
        return tuple(_Alternative(a.pair, a.share / alive, a.sex, a.look, a.pigment, a.recombinant) for a in found)

    def coupling(self, mother: int, father: int, coverable: frozenset[str] = NO_GENES) -> Coupling:
        """Return what of this chromosome may act together with others among the progeny of the cross."""
        key = (mother, father, coverable)
        found = self._couplings.get(key)
        if found is None:
            living = self.alternatives(mother, father, coverable)
            looks = [a.look for a in living]
            found = self._couplings[key] = Coupling(
                frozenset(s for dominant, exposed, _ in looks for s in (*dominant, *(sign for _, sign in exposed))),
                frozenset(g for a in living for h in self.pairs[a.pair] for g in restored_genes(h)) - {WHITE},
                frozenset(g for _, exposed, _ in looks for g, _ in exposed),
                any(exposed_lethals(self.pairs[a.pair], self.chromosome, a.sex) for a in living),
            )
        return found

    def children(self, mother: int, father: int, coverable: frozenset[str] = NO_GENES) -> tuple[Child, ...]:
        """Return the children of the cross that could be picked, as far as this chromosome goes."""
        key = (mother, father, coverable)
        found = self._children.get(key)
        if found is None:
            found = self._children[key] = tuple(self._make_children(self.alternatives(mother, father, coverable)))
        return found

    def _make_children(self, living: tuple[_Alternative, ...]) -> list[Child]:
        children = []
        for child in living:
            alike = [a for a in living if a.pair != child.pair and a.sex == child.sex and a.look == child.look]
            strict = not alike
            loose = strict or (self._white_usable and all(a.pigment != child.pigment for a in alike))
            if loose:
                children.append(Child(child.pair, child.share, strict, loose, child.pigment, not child.recombinant))
        return children

    def goal(self, mother: int, father: int, coverable: frozenset[str] = NO_GENES) -> Goal:
        """Return which looks of this cross satisfy the wish on this chromosome."""
        key = (mother, father, coverable)
        found = self._goals.get(key)
        if found is None:
            found = self._goals[key] = self._make_goal(self.alternatives(mother, father, coverable))
        return found

    def _make_goal(self, living: tuple[_Alternative, ...]) -> Goal:
        sexes = self.wish.sexes() if self.chromosome == "X" else (FEMALE,)
        goals = [self._goal_of_sex([a for a in living if a.sex == sex]) for sex in sexes]
        return Goal(
            all(g.strict for g in goals),
            all(g.strict_plain for g in goals),
            all(g.white for g in goals),
            all(g.pigmented for g in goals),
            min(g.share for g in goals),
        )

    def _goal_of_sex(self, living: list[_Alternative]) -> Goal:
        strict = strict_plain = white = pigmented = False
        best = 0.0
        looks: dict[Look, list[_Alternative]] = {}
        for a in living:
            looks.setdefault(a.look, []).append(a)
        for bearers in looks.values():
            good = [self.wish.accepts(self.pairs[a.pair], self.chromosome) for a in bearers]
            if not any(good):
                continue
            coloured = [ok for a, ok in zip(bearers, good, strict=True) if a.pigment]
            plain = [ok for a, ok in zip(bearers, good, strict=True) if not a.pigment]
            all_good = all(good)
            strict |= all_good
            strict_plain |= all_good and not coloured
            if self._white_usable:
                white |= bool(plain) and all(plain)
                pigmented |= bool(coloured) and all(coloured)
            best = max(best, sum(a.share for a, ok in zip(bearers, good, strict=True) if ok))
        return Goal(strict, strict_plain, white, pigmented, best)


def pickable(children: tuple[Child, ...]) -> bool:
    """Return whether a child with these pairs (one for each chromosome) passes one of the three rules."""
    if all(c.strict for c in children):
        return True
    sources = [c for c in children if c.pigment]
    if not sources:
        return all(c.loose for c in children)
    if len(sources) > 1:
        return False
    return all(c.strict or c is sources[0] for c in children) and sources[0].loose


def reachable_goal(goals: tuple[Goal, ...]) -> bool:
    """Return whether the last cross can give the wanted flies as a pure class, by the same three rules."""
    if all(g.strict for g in goals) or all(g.white for g in goals):
        return True
    return any(
        g.pigmented and all(other.strict_plain for k, other in enumerate(goals) if k != i) for i, g in enumerate(goals)
    )


def chromosomes_are_independent(couplings: Sequence[Coupling], hidden_by: Mapping[str, tuple[str, ...]]) -> bool:
    """Return whether the three rules are exact for a cross: no sign shared, hidden or covered between chromosomes.

    Args:
        couplings: of every chromosome of the cross.
        hidden_by: for every sign of the catalogue the signs that hide it.
    """
    seen: set[str] = set()
    for c in couplings:
        if c.rescued or seen & c.signs:
            return False
        seen |= c.signs
    exposed = frozenset().union(*(c.exposed for c in couplings))
    if exposed & frozenset().union(*(c.restores for c in couplings)):
        return False
    if exposed & NO_RED_PIGMENT and exposed & NO_BROWN_PIGMENT:
        return False
    return not any(h in seen for s in (*seen, WHITE_EYES) for h in hidden_by.get(s, ()))


def total_share(parts: tuple[float, ...]) -> float:
    """Return the share of a child whose pairs have these shares."""
    product = 1.0
    for part in parts:
        product *= part
    return product
