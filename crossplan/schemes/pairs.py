"""One chromosome of a search in numbers: its homologues, its pairs, and what every cross of two pairs gives.

What a pair looks like and whether it lives is asked of `crossplan.genetics`, once for each pair; the crosses themselves
are then comparisons of whole arrays. `crossplan.schemes.segregation` states the three rules by which a child can be picked;
here they are six *modes*, each a condition on every chromosome by itself:

* mode 0: every pair strict;
* mode 1: every pair plain (brings no pigment) and loose: the child is picked as a white-eyed one;
* mode 2 + k: the pair of chromosome k is loose and brings the only pigment, all others are strict and plain.

A child that shows a sign that hides the eye colour is picked by mode 0 only. An insertion that restores a gene (y+ beside
mini-white) is seen only on flies whose pair of some chromosome exposes the gene, and only where no other insertion restores
it as well: each mode comes once without a look at such genes, and again for children that expose one, with no insertion that
restores it, or with one. What is rescued by another chromosome counts as a possible child,
and not as a stranger. So a child that passes no mode is never pure; one that passes a mode is pure unless chromosomes act on
one another's signs, which the search looks at afterwards with the whole progeny in view.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from crossplan.genetics.appearance import WHITE, WHITE_EYES, Contribution, Observer
from crossplan.genetics.chromosome import FEMALE, MALE, PAIRS, Sex
from crossplan.genetics.fly import WILD_TYPE, Fly, Homologue, Pair, Y, make_pair
from crossplan.genetics.meiosis import differing_loci, gametes, recombines
from crossplan.genetics.survival import exposed_lethals, is_fertile, restored_genes, sex_of, x_dose
from crossplan.schemes.wish import Wish, may_be_given

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Ints = NDArray[np.int32]
    Floats = NDArray[np.float64]
    Bools = NDArray[np.bool_]

#: conditions on one chromosome from which the modes are made
STRICT, STRICT_PLAIN, LOOSE_PLAIN, LOOSE_PIGMENT = range(4)
CONDITIONS = 4
PLAIN_MODES = 6
#: a female that recombines between more places than this is not used as a mother: nobody sorts such progeny
MOST_LOCI = 4


@dataclass(frozen=True)
class Acting:
    """What may act from one chromosome on another in a search.

    Attributes:
        restored: genes of which some insertion brings a working copy.
        coverable: those of them, white apart, of which some homologue has no working copy and shows it.
        main: the one of these that most insertions restore, if homologues without it stand on one chromosome only: the
            levels follow it exactly. Where other genes are restored is taken for seen, and looked at afterwards.
        exposing: the number of that chromosome.
    """

    restored: frozenset[str] = frozenset()
    coverable: frozenset[str] = frozenset()
    main: str = ""
    exposing: int = 0

    @classmethod
    def among(cls, flies: Iterable[Fly]) -> Acting:
        """Return what may act among these flies and all that is bred from them."""
        elements = {(k, e) for fly in flies for k, pair in enumerate(fly.pairs) for h in pair for e in h.elements}
        restoring = Counter(g for _, e in elements for g in e.traits.restores)
        places: dict[str, set[int]] = {}
        for k, e in elements:
            for gene, _ in e.traits.recessive:
                if gene in restoring and gene != WHITE:
                    places.setdefault(gene, set()).add(k)
        main = min(places, key=lambda g: (len(places[g]) > 1, -restoring[g], g), default="")
        if not main or len(places[main]) > 1:
            return cls(frozenset(restoring), frozenset(places))
        return cls(frozenset(restoring), frozenset(places), main, min(places[main]))


@dataclass(frozen=True)
class Variant:
    """How a gene that insertions restore enters the looks on one chromosome.

    Attributes:
        looks: `look` with what is exposed here and without what is restored here, `full_look` with both, `bare_look`
            with neither.
        restores: whether the child's own pair must restore the gene (True) or must not (False); None: no matter.
        exposes: the same for leaving the fly without the gene.
    """

    looks: Literal["look", "full_look", "bare_look"]
    restores: bool | None = None
    exposes: bool | None = None


def variants(acting: Acting) -> list[tuple[Variant, ...]]:
    """Return every way in which a restored gene may enter, as the variant of each chromosome.

    Exposed and nowhere restored: the child shows it, and would not with any insertion. Not exposed, and nowhere else
    restored: seen on sibs that expose it. Exposed and restored by one insertion: that one is seen. Otherwise none is.
    """
    everything = range(len(PAIRS))
    if not acting.main:
        return [(Variant("look"),) * len(PAIRS)]
    x = acting.exposing
    shown = tuple(Variant("look", False, True) if k == x else Variant("full_look", False) for k in everything)
    hidden = tuple(Variant("look", None, False) if k == x else Variant("look", False) for k in everything)
    unseen = tuple(Variant("bare_look") if k == x else Variant("look") for k in everything)
    by_one = [
        tuple(
            Variant("bare_look", False, True) if k == x
            else Variant("full_look", True) if k == j else Variant("look", False)
            for k in everything
        )
        for j in everything if j != x
    ]  # fmt: skip
    return [unseen, hidden, shown, *by_one]


def modes(acting: Acting) -> list[tuple[int, ...]]:
    """Return all modes, each as the number of its condition on every chromosome; see `PairBook.conditions`."""
    found = []
    for way in variants(acting):
        numbers = [_variants_of(acting, k).index(v) for k, v in enumerate(way)]
        found += [
            tuple(n * CONDITIONS + _condition_of(mode, k) for k, n in enumerate(numbers)) for mode in range(PLAIN_MODES)
        ]
    return found


def _variants_of(acting: Acting, chromosome: int) -> list[Variant]:
    return list(dict.fromkeys(way[chromosome] for way in variants(acting)))


def _condition_of(mode: int, chromosome: int) -> int:
    if mode < 2:
        return (STRICT, LOOSE_PLAIN)[mode]
    return LOOSE_PIGMENT if mode - 2 == chromosome else STRICT_PLAIN


@dataclass(frozen=True, slots=True)
class _Facts:
    """What is known of one pair."""

    look: int
    full_look: int
    bare_look: int
    restores: bool
    exposes: bool
    alive: bool
    rescued: bool
    pigment: bool
    hides: bool
    female: bool
    accepted: bool
    keepable: bool
    sterile_female: bool
    sterile_male: bool


@dataclass(frozen=True)
class Outcomes:
    """Children of every mother (axis 0) and father (axis 1), slot by slot (axis 2).

    `pair` holds numbers of pairs; `weight` the share of the zygotes; 0 where a slot holds no living child. `mothers` and
    `fathers` say which of those that were asked for stand on the axes.
    """

    mothers: Ints
    fathers: Ints
    pair: Ints
    weight: Floats


class PairBook:
    """All pairs of one chromosome that a search meets, numbered, and the facts of each as arrays."""

    def __init__(self, chromosome: str, observer: Observer, wish: Wish, acting: Acting) -> None:
        self.chromosome = chromosome
        self.is_x = chromosome == "X"
        self.observer = observer
        self.wish = wish
        self.acting = acting
        self.variants = _variants_of(acting, PAIRS.index(chromosome))
        self.homologues: list[Homologue] = []
        self.pairs: list[tuple[int, int]] = []
        self.sexes: list[Sex] = []
        self._facts: list[_Facts] = []
        self._id: dict[Homologue, int] = {}
        self._number: dict[tuple[int, int], int] = {}
        self._looks: dict[object, int] = {}
        self._gametes: dict[tuple[int, bool], tuple[tuple[int, float], ...]] = {}
        self._halves: dict[int, bool] = {}
        self._shelf = 0
        self._may_be_sterile = True
        self._arrays: dict[str, NDArray[np.generic]] = {}
        white = observer.catalogue.signs.get(WHITE_EYES)
        self.white_usable = white is None or observer.means.uses(white)
        self._hiders = frozenset(white.hidden_by) if white is not None else frozenset()

    def add_shelf(self, homologues: Iterable[Homologue]) -> None:
        """Say which homologues stand on the shelf; all others are recombinants, and never kept. Call once, first."""
        for homologue in homologues:
            self._homologue(homologue)
        self._shelf = len(self.homologues)
        traits = [e.traits for h in self.homologues for e in h.elements]
        self._may_be_sterile = any(t.female_sterile or t.male_sterile for t in traits)

    def _homologue(self, homologue: Homologue) -> int:
        found = self._id.get(homologue)
        if found is None:
            found = self._id[homologue] = len(self.homologues)
            self.homologues.append(homologue)
        return found

    def number(self, first: int, second: int) -> int:
        """Return the number of the pair of two homologues, given by theirs."""
        key = (first, second) if first <= second else (second, first)
        found = self._number.get(key)
        if found is None:
            found = self._number[key] = len(self.pairs)
            self.pairs.append(key)
            self._facts.append(self._make_facts(*key))
        return found

    def number_of(self, pair: Pair) -> int:
        """Return the number of a pair of homologues."""
        return self.number(self._homologue(pair[0]), self._homologue(pair[1]))

    def pair(self, number: int) -> Pair:
        """Return the pair of that number."""
        first, second = self.pairs[number]
        return make_pair(self.homologues[first], self.homologues[second])

    def _make_facts(self, first: int, second: int) -> _Facts:
        pair = make_pair(self.homologues[first], self.homologues[second])
        dose_is_right = not self.is_x or 1 <= x_dose(pair) <= 2
        sex: Sex = sex_of(pair) if self.is_x else FEMALE
        self.sexes.append(sex)
        part = self.observer.contribution(pair, self.chromosome, sex)
        exposed = exposed_lethals(pair, self.chromosome, sex) - restored_genes(pair[0]) - restored_genes(pair[1])
        look, seen, shown = self._look(part)
        restored = self.acting.main in part.restores
        return _Facts(
            look=self._looks.setdefault((look, seen), len(self._looks)),
            full_look=self._looks.setdefault((look, seen, restored), len(self._looks)),
            bare_look=self._looks.setdefault(look, len(self._looks)),
            restores=restored,
            exposes=not restored and any(g == self.acting.main for g, _ in part.exposed),
            alive=dose_is_right and exposed <= self.acting.restored,
            rescued=bool(exposed),
            pigment=WHITE in part.restores or (self.is_x and (WHITE, "") not in part.exposed),
            hides=bool(shown & self._hiders),
            female=sex == FEMALE,
            accepted=self.wish.accepts(pair, self.chromosome),
            keepable=max(first, second) < self._shelf,
            sterile_female=self._may_be_sterile and not _leaves_fertile(pair, self.chromosome, FEMALE),
            sterile_male=self._is_sterile_male(pair, sex),
        )

    def _is_sterile_male(self, pair: Pair, sex: Sex) -> bool:
        if self.is_x and (sex == FEMALE or not any(h.is_y for h in pair)):
            return True
        return self._may_be_sterile and not _leaves_fertile(pair, self.chromosome, MALE)

    def _look(self, part: Contribution) -> tuple[object, object, frozenset[str]]:
        """Return what is seen here for certain, what is seen unless an insertion elsewhere restores it, and the first in signs.

        What the lab does not score is left out of the first two: it may still hide what it scores.
        """
        means, signs = self.observer.means, self.observer.catalogue.signs
        dominant = frozenset(s for s in part.dominant if s not in signs or means.uses(signs[s]))
        shown = [(g, s) for g, s in part.exposed if s and g not in part.restores]
        exposed = frozenset((g, s) for g, s in shown if s not in signs or means.uses(signs[s]))
        seen = frozenset((g, s) for g, s in exposed if g == self.acting.main)
        others = part.restores & self.acting.coverable - {self.acting.main}
        certain = part.dominant | {s for g, s in shown if g not in self.acting.restored}
        return (dominant, exposed - seen, others), seen, certain

    def array(self, name: str) -> NDArray[np.generic]:
        """Return one fact (a field of `_Facts`) of all pairs as an array."""
        import numpy as np

        found = self._arrays.get(name)
        if found is None or len(found) != len(self._facts):
            kind = np.int32 if name.endswith("look") else np.bool_
            found = self._arrays[name] = np.array([getattr(f, name) for f in self._facts], dtype=kind)
        return found

    def made_by(self, number: int, sex: Sex) -> tuple[tuple[int, float], ...]:
        """Return the homologues that a parent with this pair gives, with their shares."""
        key = (number, sex == FEMALE)
        found = self._gametes.get(key)
        if found is None:
            made = gametes(self.pair(number), self.chromosome, sex)
            found = self._gametes[key] = tuple((self._homologue(g.homologue), float(g.share)) for g in made)
        return found

    @property
    def conditions_count(self) -> int:
        """Return how many conditions a child of this chromosome can meet."""
        return CONDITIONS * len(self.variants)

    def _is_sortable(self, mother: int) -> bool:
        if self.is_x and self.sexes[mother] != FEMALE:
            return False
        pair = self.pair(mother)
        loci = sum(locus.position_cM is not None for locus in differing_loci(pair))
        return loci <= MOST_LOCI or not recombines(pair, self.chromosome, FEMALE)

    def outcomes(self, mothers: Sequence[int], fathers: Sequence[int]) -> Iterator[Outcomes]:
        """Yield the children of all these crosses, mothers with equally many gametes together."""
        import numpy as np

        males = [i for i, f in enumerate(fathers) if not self.is_x or self.sexes[f] == MALE]
        sperm = [_padded(self.made_by(fathers[i], MALE), 2) for i in males]
        groups: dict[int, list[int]] = {}
        for place, mother in enumerate(mothers):
            if self._is_sortable(mother):
                groups.setdefault(max(2, len(self.made_by(mother, FEMALE))), []).append(place)
        if not males:
            return
        for width, places in groups.items():
            eggs = [_padded(self.made_by(mothers[p], FEMALE), width) for p in places]
            egg, egg_share = _split(eggs)
            seed, seed_share = _split(sperm)
            pair = self._numbers(egg[:, None, :, None], seed[None, :, None, :])
            weight = egg_share[:, None, :, None] * seed_share[None, :, None, :]
            shape = (len(places), len(males), width * 2)
            alive = np.asarray(self.array("alive"), dtype=np.bool_)[pair]
            yield Outcomes(
                np.array(places, dtype=np.int32),
                np.array(males, dtype=np.int32),
                pair.reshape(shape),
                np.where(alive, weight, 0.0).reshape(shape),
            )

    def _numbers(self, first: Ints, second: Ints) -> Ints:
        """Return the numbers of the pairs of two arrays of homologues (broadcast against each other)."""
        import numpy as np

        low, high = np.minimum(first, second).astype(np.int64), np.maximum(first, second)
        codes = low * len(self.homologues) + high
        unique, inverse = np.unique(codes, return_inverse=True)
        numbers = [self.number(*divmod(code, len(self.homologues))) for code in unique.tolist()]
        return np.array(numbers, dtype=np.int32)[inverse].reshape(codes.shape)

    def conditions(self, out: Outcomes) -> Bools:
        """Return for every slot which conditions its child meets (axis 0), whether it may be kept or not."""
        import numpy as np

        return np.concatenate([
            self._conditions(out, v.looks) & self._meets(out, v)[None] for v in self.variants
        ])  # fmt: skip

    def _meets(self, out: Outcomes, variant: Variant) -> Bools:
        import numpy as np

        met = np.ones(out.pair.shape, dtype=np.bool_)
        for name, wanted in (("restores", variant.restores), ("exposes", variant.exposes)):
            if wanted is not None:
                met &= self.array(name)[out.pair] == wanted
        return met

    def _conditions(self, out: Outcomes, looks: str) -> Bools:
        import numpy as np

        look, pigment, hides, rescued, female = (
            self.array(n)[out.pair] for n in (looks, "pigment", "hides", "rescued", "female")
        )
        alive = out.weight > 0
        strict, loose = alive.copy(), alive.copy()
        for t in range(out.pair.shape[2]):
            # the stranger in slot t, against the child in every slot
            other = alive[..., t : t + 1] & ~np.asarray(rescued[..., t : t + 1], dtype=np.bool_)
            alike = other & (out.pair != out.pair[..., t : t + 1]) & (look == look[..., t : t + 1])
            alike &= female == female[..., t : t + 1]
            strict &= ~alike
            loose &= ~(alike & (pigment == pigment[..., t : t + 1]))
        if not self.white_usable:
            loose = strict
        seen = ~np.asarray(hides, dtype=np.bool_)
        coloured = np.asarray(pigment, dtype=np.bool_)
        return np.stack([strict, strict & ~coloured & seen, loose & ~coloured & seen, loose & coloured & seen])

    def goals(self, mothers: Sequence[int], fathers: Sequence[int]) -> tuple[Bools, Floats]:
        """Return for every last cross which conditions a look of wanted flies meets (axis 0), and its largest share."""
        import numpy as np

        shape = (len(mothers), len(fathers))
        flags = np.zeros((self.conditions_count, *shape), dtype=np.bool_)
        share = np.zeros(shape)
        rows = np.array([i for i, m in enumerate(mothers) if self._gives_half(m, FEMALE)], dtype=np.int32)
        columns = np.array([i for i, f in enumerate(fathers) if self._gives_half(f, MALE)], dtype=np.int32)
        if not rows.size or not columns.size:
            return flags, share
        for out in self.outcomes([mothers[i] for i in rows], [fathers[i] for i in columns]):
            here, best = self._goals_of(out)
            at = rows[out.mothers][:, None], columns[out.fathers]
            flags[:, *at] = here
            share[at] = best
        return flags, share

    def _gives_half(self, number: int, sex: Sex) -> bool:
        """Return whether a parent with this pair gives a homologue that can be one half of a wanted pair."""
        if self.is_x and self.sexes[number] != sex:
            return False
        # what a mother's recombinants may be is looked at by their elements
        pair = self.pair(number)
        if sex == FEMALE and recombines(pair, self.chromosome, FEMALE):
            return True
        return any(self._is_half(h) for h in self.pairs[number])

    def _is_half(self, homologue: int) -> bool:
        found = self._halves.get(homologue)
        if found is None:
            here = self.homologues[homologue]
            found = self._halves[homologue] = may_be_given(self.wish, self.chromosome, here)
        return found

    def _goals_of(self, out: Outcomes) -> tuple[Bools, Floats]:
        import numpy as np

        both = self.is_x and self.wish.sex == "both"
        found: list[Bools] = []
        shares: list[Floats] = []
        sexes = self.wish.sexes() if self.is_x else (FEMALE,)
        for sex in sexes if both else sexes[:1]:
            flags, share = self._goals_of_sex(out, sex)
            found.append(flags)
            shares.append(share)
        return np.logical_and.reduce(found), np.minimum.reduce(shares)

    def _goals_of_sex(self, out: Outcomes, sex: Sex) -> tuple[Bools, Floats]:
        import numpy as np

        flags, shares = [], []
        for variant in self.variants:
            slots, share = self._good_slots(out, sex, variant.looks)
            flags.append((slots & self._meets(out, variant)[None]).any(axis=3))
            shares.append(share)
        return np.concatenate(flags), np.maximum.reduce(shares)

    def _good_slots(self, out: Outcomes, sex: Sex, looks: str) -> tuple[Bools, Floats]:
        """Return for every slot which of the four conditions its look meets among wanted flies, and the largest share."""
        import numpy as np

        look, pigment, hides, rescued, accepted = (
            self.array(n)[out.pair] for n in (looks, "pigment", "hides", "rescued", "accepted")
        )
        alive = out.weight > 0
        if self.is_x:
            alive = alive & (self.array("female")[out.pair] == (sex == FEMALE))
        good = alive & np.asarray(accepted, dtype=np.bool_)
        any_look, any_plain, any_coloured = good.copy(), good.copy(), good.copy()
        coloured = np.asarray(pigment, dtype=np.bool_)
        plain_only, share = good.copy(), np.zeros(out.weight.shape)
        for t in range(out.pair.shape[2]):
            alike = alive & alive[..., t : t + 1] & (look == look[..., t : t + 1])
            share += np.where(alike & good[..., t : t + 1], out.weight[..., t : t + 1], 0.0)
            wrong = alike & ~good[..., t : t + 1] & ~np.asarray(rescued[..., t : t + 1], dtype=np.bool_)
            any_look &= ~wrong
            any_plain &= ~(wrong & ~coloured[..., t : t + 1])
            any_coloured &= ~(wrong & coloured[..., t : t + 1])
            certain = alike & coloured[..., t : t + 1] & ~np.asarray(rescued[..., t : t + 1], dtype=np.bool_)
            plain_only &= ~certain
        seen = ~np.asarray(hides, dtype=np.bool_)
        usable = np.bool_(self.white_usable)
        slots = np.stack([
            any_look,
            any_look & plain_only & seen,
            any_plain & ~coloured & seen & usable,
            any_coloured & coloured & seen & usable,
        ])  # fmt: skip
        total = np.maximum(out.weight.sum(axis=2), 1e-12)
        best = np.where(good, share, 0.0).max(axis=2) / total
        return slots, best


def _leaves_fertile(pair: Pair, chromosome: str, sex: Sex) -> bool:
    """Return whether a fly of this sex with this pair, and nothing else, can be a parent."""
    plain = dict.fromkeys(PAIRS, (WILD_TYPE, WILD_TYPE)) | {"X": (WILD_TYPE, WILD_TYPE if sex == FEMALE else Y)}
    pairs = plain | {chromosome: pair}
    return is_fertile(Fly(sex, (pairs["X"], pairs["2"], pairs["3"], pairs["4"])))


def _padded(made: tuple[tuple[int, float], ...], width: int) -> tuple[tuple[int, float], ...]:
    """Return so many gametes; a parent that makes one kind makes it twice at half the share."""
    if len(made) == 1:
        return tuple((made[0][0], made[0][1] / width) for _ in range(width))
    return made + ((made[0][0], 0.0),) * (width - len(made))


def _split(rows: Sequence[tuple[tuple[int, float], ...]]) -> tuple[Ints, Floats]:
    import numpy as np

    return (
        np.array([[h for h, _ in row] for row in rows], dtype=np.int32),
        np.array([[share for _, share in row] for row in rows], dtype=np.float64),
    )
