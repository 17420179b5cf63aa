"""Whatever is crossed: shares that add up, fair homologues, roles that may be swapped, no dead fly, and rules that hold."""

from __future__ import annotations

from fractions import Fraction
from functools import cache

import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue import default_catalogue
from crossplan.genetics.chromosome import FEMALE, MALE, PAIRS, Sex
from crossplan.genetics.fly import WILD_TYPE, Fly, Homologue, Pair, Y, make_pair
from crossplan.genetics.meiosis import recombines
from crossplan.genetics.notation import read_fly
from crossplan.genetics.progeny import Progeny, cross
from crossplan.genetics.sorting import MOST_SIGNS, rule_for
from crossplan.genetics.survival import lives

#: homologues of each chromosome as they are written, with every kind of thing that the rules of progeny know
POOL = {
    "X": ["+", "w[1118]", "w[1118] f[1]", "y[1] w[1118]", "y[1] v[1]", "w[a]", "w[1118] UAS-k@attP18", "FM7a", "FM7c",
          "Basc", "l(1)k1[2]", "w[1118] B[1]"],
    "2": ["+", "CyO", "SM6a", "Sco", "Sp", "In(2LR)Gla", "AD-K1@attP40", "UAS-k@VK00037", "UAS-k@attP40", "b[1] pr[1]",
          "cn[1] bw[1]", "l(2)k5[1]", "l(2)k5[1] UAS-k@attP40", "Df(2L)K4", "vg[1]", "CyO, Kr-GFP", "kx-42"],
    "3": ["+", "TM3, Sb[1]", "TM3, Ser[1]", "TM6B, Tb[1]", "TM2", "MKRS", "Sb[1]", "Dr[Mio]", "e[1]", "st[1] e[1]",
          "DBD-K1@attP2", "UAS-k@VK00005", "l(3)k2[1]", "Df(3R)K6", "FRT82B"],
    "4": ["+", "+", "ci[D]", "ey[D]", "kx-9@4"],
}  # fmt: skip
EVERYTHING_SEEN = Means(pupae=True, fluorescence=True)
MEANS = (Means(), EVERYTHING_SEEN, Means(rearing_C=18.0), Means(distrust=frozenset({"Sb"})))


@cache
def homologue(chromosome: str, written: str) -> Homologue:
    """Return the homologue as it is read on its chromosome, across from a wild-type one."""
    fields = ["+"] * 4
    fields[PAIRS.index(chromosome)] = "+" if written == "+" else f"{written}/+"
    pair = read_fly("; ".join(fields), FEMALE).pair(chromosome)
    return next((h for h in pair if h.elements), WILD_TYPE)


@cache
def observer(means: Means) -> Observer:
    return Observer(default_catalogue(), means)


@st.composite
def pairs(draw: st.DrawFn, chromosome: str) -> Pair:
    one, two = (draw(st.sampled_from(POOL[chromosome])) for _ in range(2))
    return make_pair(homologue(chromosome, one), homologue(chromosome, two))


@st.composite
def living(draw: st.DrawFn, sex: Sex) -> Fly:
    """A living fly; now and then a rarer thing: an attached-X, or a translocation balancer on 2 and 3."""
    x, second, third, fourth = (draw(pairs(name)) for name in PAIRS)
    if sex == MALE:
        x = (x[0], Y)
    elif draw(st.integers(0, 9)) == 0:
        x = read_fly("C(1)DX, y[1] f[1]/Y", FEMALE).pair("X")
    if draw(st.integers(0, 9)) == 0:
        tied = read_fly("+; T(2;3)SM6a-TM6B/+", FEMALE)
        second, third = tied.pair("2"), tied.pair("3")
    fly = Fly.of(sex, x, second, third, fourth)
    assume(lives(fly))
    return fly


@st.composite
def crosses(draw: st.DrawFn) -> Progeny:
    return cross(draw(living(FEMALE)), draw(living(MALE)), observer(draw(st.sampled_from(MEANS))))


def total(progeny: Progeny) -> Fraction | float:
    return sum((c.share for c in progeny.classes), Fraction(0))


def maps_enter(*flies: Fly) -> bool:
    """Return whether a map distance enters when these flies are mothers."""
    return any(recombines(fly.pair(name), name, fly.sex) for fly in flies for name in PAIRS)


@given(crosses())
@settings(max_examples=150, deadline=None)
def test_shares_add_up(progeny: Progeny) -> None:
    assume(progeny.alive)
    dead = sum((d.share_of_zygotes for d in progeny.dead), Fraction(0))
    if maps_enter(progeny.mother):
        assert float(total(progeny)) == pytest.approx(1.0)
        assert float(progeny.alive + dead) == pytest.approx(1.0)
    else:
        assert total(progeny) == 1
        assert progeny.alive + dead == 1
        assert all(c.exact is not None for c in progeny.classes)
    for found in progeny.classes:
        assert float(sum(m.share for m in found.members)) == pytest.approx(float(found.share))
        assert all(m.share > 0 for m in found.members)


@given(crosses(), st.sampled_from(MEANS))
@settings(max_examples=150, deadline=None)
def test_a_class_is_one_look_and_every_look_is_one_class(progeny: Progeny, means: Means) -> None:
    again = cross(progeny.mother, progeny.father, observer(means))
    looks = [(c.sex, c.signs) for c in again.classes]
    assert len(set(looks)) == len(looks)
    flies = [m.fly for c in again.classes for m in c.members]
    assert len(set(flies)) == len(flies)
    for found in again.classes:
        assert all((m.fly.sex, observer(means).signs(m.fly)) == (found.sex, found.signs) for m in found.members)
    assert set(flies) == {m.fly for c in progeny.classes for m in c.members}, "who lives does not depend on who looks"


@given(living(FEMALE), living(MALE), st.sampled_from(["2", "3"]), st.data())
@settings(max_examples=150, deadline=None)
def test_homologues_of_an_untouched_autosome_come_out_even(
    mother: Fly, father: Fly, chromosome: str, data: st.DataObject
) -> None:
    """Opposite a wild-type pair nothing that is recessive matters, so each of two homologues goes to half of the living."""
    pair = data.draw(pairs(chromosome))
    heterozygous = data.draw(st.sampled_from([FEMALE, MALE]))
    parents = []
    for fly in (mother, father):
        assume(not any(h.balancer and h.balancer.traits.linked_to for _, h in fly.homologues()))
        four = list(fly.pairs)
        four[PAIRS.index(chromosome)] = pair if fly.sex == heterozygous else (WILD_TYPE, WILD_TYPE)
        parents.append(Fly.of(fly.sex, *four))
    progeny = cross(parents[0], parents[1], observer(EVERYTHING_SEEN))
    assume(progeny.alive)
    members = [m for c in progeny.classes for m in c.members]
    first, second = pair
    for element in {*first.elements} ^ {*second.elements}:
        carried = sum(m.share for m in members if any(element in h.elements for h in m.fly.pair(chromosome)))
        assert float(carried) == pytest.approx(0.5), element.symbol
    if not maps_enter(*parents) and first != second:
        for one in pair:
            assert sum(m.share for m in members if _given(m.fly.pair(chromosome)) == one) == Fraction(1, 2)


def _given(pair: Pair) -> Homologue:
    """Return what the heterozygous parent gave, where the other one gave a wild-type homologue."""
    return min(pair, key=lambda h: not h.elements)


def _with_sex(fly: Fly, sex: Sex) -> Fly:
    x = fly.pair("X")[0]
    return Fly.of(sex, (x, x) if sex == FEMALE else (x, Y), *fly.pairs[1:])


@given(living(MALE), living(MALE), st.sampled_from(POOL["X"]))
@settings(max_examples=200, deadline=None)
def test_roles_of_the_parents_do_not_matter_on_autosomes(one: Fly, two: Fly, x: str) -> None:
    same_x = homologue("X", x)
    males = [Fly.of(MALE, (same_x, Y), *fly.pairs[1:]) for fly in (one, two)]
    females = [_with_sex(fly, FEMALE) for fly in males]
    assume(not maps_enter(*females))
    here, there = (cross(females[i], males[1 - i], observer(EVERYTHING_SEEN)) for i in (0, 1))
    assert here.classes == there.classes
    assert here.alive == there.alive


@given(crosses())
@settings(max_examples=150, deadline=None)
def test_nothing_dead_is_among_the_members(progeny: Progeny) -> None:
    """Death is told here from the traits themselves, one homologue at a time."""
    for found in progeny.classes:
        for member in found.members:
            fly = member.fly
            restored = {gene for e in fly.elements() for gene in e.traits.restores}
            for name, (first, second) in zip(PAIRS, fly.pairs, strict=True):
                one, two = ({g for e in h.elements for g in e.traits.lethal} for h in (first, second))
                if name == "X" and fly.sex == MALE:
                    assert not (one | two) - restored
                    assert not any(e.traits.male_lethal for e in (*first.elements, *second.elements))
                elif not (first.is_compound or second.is_compound):
                    assert not (one & two) - restored
            tied = [sum(bool(e.traits.linked_to) for h in fly.pair(name) for e in h.elements) for name in ("2", "3")]
            assert tied[0] == tied[1], "a translocation balancer goes whole or not at all"
            xs = sum(2 if h.is_compound else 0 if h.is_y else 1 for h in fly.pair("X"))
            assert xs == (2 if fly.sex == FEMALE else 1)
    assert all(d.cause for d in progeny.dead)


@given(crosses())
@settings(max_examples=150, deadline=None)
def test_every_rule_keeps_the_wanted_class_and_nothing_else(progeny: Progeny) -> None:
    for wanted in progeny.classes:
        same_sex = [c for c in progeny.classes if c.sex == wanted.sex]
        rule = rule_for(wanted, progeny.classes, default_catalogue())
        assert [c for c in same_sex if all(t.passes(c.signs) for t in rule)] == [wanted]
        if len(rule) > MOST_SIGNS:
            continue
        for left_out in rule:
            rest = [t for t in rule if t is not left_out]
            kept = [c for c in same_sex if all(t.passes(c.signs) for t in rest)]
            assert len(kept) > 1, "no test of a rule may be idle"


@given(living(FEMALE), living(MALE))
@settings(max_examples=100, deadline=None)
def test_a_father_gives_whole_chromosomes(mother: Fly, father: Fly) -> None:
    progeny = cross(mother, father, observer(EVERYTHING_SEEN))
    for found in progeny.classes:
        for member in found.members:
            for name in ("2", "3", "4"):
                assert set(father.pair(name)) & set(member.fly.pair(name)), name
