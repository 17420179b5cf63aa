"""Crosses whose result is published, or can be worked out on paper: classes, genotypes, shares and the dead, exactly.

The source of each case says who printed it; `elementary, derived` means that the fractions follow from Mendel's rules, the
death of homozygous balancers and the absence of exchange in males, and were worked out by hand. Alleles and names of
insertions are ours. Signs are those of the catalogue (`curly wings` is Cy).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from fractions import Fraction

import pytest

from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue import default_catalogue
from crossplan.genetics.chromosome import SEXES, Sex
from crossplan.genetics.fly import Fly
from crossplan.genetics.notation import read_fly
from crossplan.genetics.progeny import Progeny, cross

DERIVED = "elementary, derived"


@dataclass(frozen=True)
class Look:
    """A class: its sexes (f, m or fm), its signs, and each genotype with its share among the living of that sex."""

    sexes: str
    signs: tuple[str, ...]
    genotypes: dict[str, str]


@dataclass(frozen=True)
class Case:
    """A cross; `dies` is the share of zygotes that die, `females` the share of females among the living."""

    name: str
    source: str
    mother: str
    father: str
    looks: tuple[Look, ...]
    dies: str = "0"
    females: str = "1/2"


CASES = [
    # balancers
    Case("CyO/+ by CyO/+: two thirds Curly", DERIVED, "+; +/CyO; +", "+; +/CyO; +", (
        Look("fm", ("curly wings",), {"+; +/CyO; +": "2/3"}),
        Look("fm", (), {"+; +; +": "1/3"}),
    ), dies="1/4"),
    Case("two lethals that complement, both over CyO: a third straight",
         "two-generation complementation cross, protocol page (author not known); derived again",
         "+; l(2)m[1]/CyO; +", "+; l(2)n[1]/CyO; +", (
        Look("fm", ("curly wings",), {"+; l(2)m[1]/CyO; +": "1/3", "+; l(2)n[1]/CyO; +": "1/3"}),
        Look("fm", (), {"+; l(2)m[1]/l(2)n[1]; +": "1/3"}),
    ), dies="1/4"),
    Case("one lethal, both over CyO: nothing but Curly", DERIVED, "+; l(2)m[1]/CyO; +", "+; l(2)m[1]/CyO; +", (
        Look("fm", ("curly wings",), {"+; l(2)m[1]/CyO; +": "1"}),
    ), dies="1/2"),
    Case("Sb/TM3, Ser inter se: a balanced lethal", DERIVED, "+; +; Sb[1]/TM3, Ser[1]", "+; +; Sb[1]/TM3, Ser[1]", (
        Look("fm", ("stubble bristles", "notched wings"), {"+; +; Sb[1]/TM3, Ser[1]": "1"}),
    ), dies="1/2"),
    Case("two Stubble balancers never meet", DERIVED, "+; +; +/TM3, Sb[1]", "+; +; +/MKRS", (
        Look("fm", ("stubble bristles",), {"+; +; +/TM3, Sb[1]": "1/3", "+; +; +/MKRS": "1/3"}),
        Look("fm", (), {"+; +; +": "1/3"}),
    ), dies="1/4"),
    Case("balancers on 2 and 3, wild homologues, inter se: 4:2:2:1", DERIVED,
         "+; +/CyO; +/TM3, Sb[1]", "+; +/CyO; +/TM3, Sb[1]", (
        Look("fm", ("curly wings", "stubble bristles"), {"+; +/CyO; +/TM3, Sb[1]": "4/9"}),
        Look("fm", ("curly wings",), {"+; +/CyO; +": "2/9"}),
        Look("fm", ("stubble bristles",), {"+; +; +/TM3, Sb[1]": "2/9"}),
        Look("fm", (), {"+; +; +": "1/9"}),
    ), dies="7/16"),
    Case("balanced split line inter se: a ninth has neither balancer", DERIVED,
         "w[1118]; AD-K@attP40/CyO; DBD-Q@attP2/TM6B, Tb[1]", "w[1118]; AD-K@attP40/CyO; DBD-Q@attP2/TM6B, Tb[1]", (
        Look("fm", ("curly wings", "extra humeral bristles", "tubby pupae"),
             {"w[1118]; AD-K@attP40/CyO; DBD-Q@attP2/TM6B, Tb[1]": "4/9"}),
        Look("fm", ("curly wings",), {"w[1118]; AD-K@attP40/CyO; DBD-Q@attP2": "2/9"}),
        Look("fm", ("extra humeral bristles", "tubby pupae"), {"w[1118]; AD-K@attP40; DBD-Q@attP2/TM6B, Tb[1]": "2/9"}),
        Look("fm", (), {"w[1118]; AD-K@attP40; DBD-Q@attP2": "1/9"}),
    ), dies="7/16"),
    Case("an insertion on 3 by a double-balanced father", DERIVED, "w[1118]", "w[1118]; +/CyO; UAS-K@attP2/TM3, Sb[1]", (
        Look("fm", (), {"w[1118]; +; UAS-K@attP2/+": "1/4"}),
        Look("fm", ("curly wings",), {"w[1118]; +/CyO; UAS-K@attP2/+": "1/4"}),
        Look("fm", ("stubble bristles", "white eyes"), {"w[1118]; +; +/TM3, Sb[1]": "1/4"}),
        Look("fm", ("curly wings", "stubble bristles", "white eyes"), {"w[1118]; +/CyO; +/TM3, Sb[1]": "1/4"}),
    )),
    # autosomal genes
    Case("Curly over Plum, outcrossed: one or the other", "Cy L/Pm scheme for the second chromosome (author not known);"
         " derived again", "+; +; +", "+; CyO/bw[V1]; +", (
        Look("fm", ("curly wings",), {"+; +/CyO; +": "1/2"}),
        Look("fm", ("brown or ruby eyes",), {"+; bw[V1]/+; +": "1/2"}),
    )),
    Case("Star outcrossed: half Star (337 of 683 counted)", "Bridges & Morgan 1919, Carnegie Publ. 278, table 109",
         "+; S[1]/+; +", "+; +; +", (
        Look("fm", ("small rough eyes",), {"+; S[1]/+; +": "1/2"}),
        Look("fm", (), {"+; +; +": "1/2"}),
    )),
    Case("vestigial and sepia, F2: 9:3:3:1", DERIVED, "+; vg[1]/+; se[1]/+", "+; vg[1]/+; se[1]/+", (
        Look("fm", (), {"+; +; +": "1/16", "+; +; se[1]/+": "1/8", "+; vg[1]/+; +": "1/8", "+; vg[1]/+; se[1]/+": "1/4"}),
        Look("fm", ("stub wings",), {"+; vg[1]; +": "1/16", "+; vg[1]; se[1]/+": "1/8"}),
        Look("fm", ("brown or ruby eyes",), {"+; +; se[1]": "1/16", "+; vg[1]/+; se[1]": "1/8"}),
        Look("fm", ("stub wings", "brown or ruby eyes"), {"+; vg[1]; se[1]": "1/16"}),
    )),
    Case("brown and scarlet test cross: the double is white", "Lindsley & Grell 1968, Carnegie Publ. 627, bw (no pigment"
         " is left); fractions derived", "+; bw[1]; st[1]", "+; bw[1]/+; st[1]/+", (
        Look("fm", (), {"+; bw[1]/+; st[1]/+": "1/4"}),
        Look("fm", ("brown or ruby eyes",), {"+; bw[1]; st[1]/+": "1/4"}),
        Look("fm", ("bright red eyes",), {"+; bw[1]/+; st[1]": "1/4"}),
        Look("fm", ("white eyes",), {"+; bw[1]; st[1]": "1/4"}),
    )),
    Case("ci[D] inter se: chromosome 4 takes part", DERIVED, "+; +; +; ci[D]/+", "+; +; +; ci[D]/+", (
        Look("fm", ("interrupted wing veins",), {"+; +; +; ci[D]/+": "2/3"}),
        Look("fm", (), {"+; +; +; +": "1/3"}),
    ), dies="1/4"),
    # the X
    Case("white mother, red father: criss-cross", "Morgan 1916, A Critique of the Theory of Evolution, fig. 36",
         "w[1]", "+/Y", (
        Look("f", (), {"w[1]/+": "1"}),
        Look("m", ("white eyes",), {"w[1]/Y": "1"}),
    )),
    Case("red mother, white father: all red", "Morgan 1910, Science 32:120", "+; +; +", "w[1]/Y; +; +", (
        Look("f", (), {"w[1]/+": "1"}),
        Look("m", (), {"+/Y; +; +": "1"}),
    )),
    Case("red F1: a quarter of the F2 is white, all of it sons", "Morgan 1910, Science 32:120", "w[1]/+", "+/Y; +; +", (
        Look("f", (), {"+; +; +": "1/2", "w[1]/+": "1/2"}),
        Look("m", (), {"+/Y; +; +": "1/2"}),
        Look("m", ("white eyes",), {"w[1]/Y": "1/2"}),
    )),
    Case("yellow back-cross: one to one in both sexes", DERIVED, "y[1]/+", "y[1]/Y", (
        Look("f", (), {"y[1]/+": "1/2"}),
        Look("f", ("yellow body",), {"y[1]": "1/2"}),
        Look("m", (), {"+/Y; +; +": "1/2"}),
        Look("m", ("yellow body",), {"y[1]/Y": "1/2"}),
    )),
    Case("fused F2: daughters wild, half the sons fused (201:205 counted)", "Morgan & Bridges 1916, Carnegie Publ. 237,"
         " table 32", "fu[1]/+", "+/Y; +; +", (
        Look("f", (), {"+; +; +": "1/2", "fu[1]/+": "1/2"}),
        Look("m", (), {"+/Y; +; +": "1/2"}),
        Look("m", ("fused wing veins",), {"fu[1]/Y": "1/2"}),
    )),
    Case("FM7a/+ by wild male", DERIVED, "FM7a/+", "+/Y; +; +", (
        Look("f", (), {"+; +; +": "1/2"}),
        Look("f", ("bar eyes",), {"FM7a/+": "1/2"}),
        Look("m", (), {"+/Y; +; +": "1/2"}),
        Look("m", ("bar eyes", "missing bristles", "yellow body"), {"FM7a/Y": "1/2"}),
    )),
    Case("a lethal over FM7a by FM7a: no sons without it", DERIVED, "l(1)k[1]/FM7a", "FM7a/Y", (
        Look("f", ("bar eyes",), {"l(1)k[1]/FM7a": "1/2"}),
        Look("f", ("bar eyes", "missing bristles", "yellow body"), {"FM7a": "1/2"}),
        Look("m", ("bar eyes", "missing bristles", "yellow body"), {"FM7a/Y": "1"}),
    ), dies="1/4", females="2/3"),
    Case("Basc test of a lethal X: no sons but Bar", "the Basc test (standard; from memory), derived", "l(1)k[1]/Basc",
         "Basc/Y", (
        Look("f", ("bar eyes",), {"l(1)k[1]/Basc": "1/2"}),
        Look("f", ("bar eyes", "missing bristles"), {"Basc": "1/2"}),
        Look("m", ("bar eyes", "missing bristles"), {"Basc/Y": "1"}),
    ), dies="1/4", females="2/3"),
    Case("ClB over a new lethal: no sons at all", "the ClB test (Muller 1928, Genetics 13:279; from memory), derived",
         "ClB/l(1)k[1]", "+/Y; +; +", (
        Look("f", ("bar eyes",), {"ClB/+": "1/2"}),
        Look("f", (), {"l(1)k[1]/+": "1/2"}),
    ), dies="1/2", females="1"),
    Case("attached-X: sons have their father's X", "Morgan 1922, Biol. Bull. 42:267 (from memory), derived",
         "C(1)DX, y[1] f[1]/Y; +; +", "w[1]/Y; +; +", (
        Look("f", ("gnarled bristles", "yellow body"), {"C(1)DX, y[1] f[1]/Y; +; +": "1"}),
        Look("m", ("white eyes",), {"w[1]/Y": "1"}),
    ), dies="1/2"),
    # no exchange where there can be none
    Case("dumpy brown males: linked though 91 cM apart (247:242 counted)", "textbook problem (author not known); the rule:"
         " Morgan 1912, Science 36:718", "+; dp[ov1] bw[1]; +", "+; dp[ov1] bw[1]/+; +", (
        Look("fm", (), {"+; dp[ov1] bw[1]/+; +": "1/2"}),
        Look("fm", ("short wings", "brown or ruby eyes"), {"+; dp[ov1] bw[1]; +": "1/2"}),
    )),
    Case("two insertions in repulsion, in the father", DERIVED, "w[1118]; Sp/CyO; +", "w[1118]; UAS-K@VK00037/AD-K@attP40; +", (
        Look("fm", ("curly wings",), {"w[1118]; UAS-K@VK00037/CyO; +": "1/4", "w[1118]; AD-K@attP40/CyO; +": "1/4"}),
        Look("fm", ("extra sternopleural bristles",),
             {"w[1118]; UAS-K@VK00037/Sp; +": "1/4", "w[1118]; AD-K@attP40/Sp; +": "1/4"}),
    )),
    Case("two insertions over a balancer, in the mother", DERIVED,
         "w[1118]; UAS-K@VK00037 AD-K@attP40/SM6a; +", "w[1118]/Y; +; +", (
        Look("fm", (), {"w[1118]; UAS-K@VK00037 AD-K@attP40/+; +": "1/2"}),
        Look("fm", ("curly wings", "white eyes"), {"w[1118]; +/SM6a; +": "1/2"}),
    )),
    # translocation balancer
    Case("2 and 3 tied by a translocation balancer: half die, none has one part", DERIVED,
         "w[1118]; T(2;3)SM6a-TM6B/+", "w[1118]/Y; +; +", (
        Look("fm", ("white eyes",), {"w[1118]; +; +": "1/2"}),
        Look("fm", ("curly wings", "extra humeral bristles", "tubby pupae", "white eyes"),
             {"w[1118]; T(2;3)SM6a-TM6B/+": "1/2"}),
    ), dies="1/2"),
]  # fmt: skip


def progeny_of(mother: str, father: str) -> Progeny:
    observer = Observer(default_catalogue(), Means(pupae=True))
    # with interference, as flies have it; where nothing recombines it makes no difference
    return cross(read_fly(mother, "female"), read_fly(father, "male"), observer, "kosambi")


@pytest.mark.parametrize("case", CASES, ids=lambda c: c.name)
def test_classes_genotypes_and_shares(case: Case) -> None:
    progeny = progeny_of(case.mother, case.father)
    assert progeny.alive == 1 - Fraction(case.dies)
    females = Fraction(case.females)
    of_sex: dict[Sex, Fraction] = {"female": females, "male": 1 - females}
    expected: dict[tuple[Sex, frozenset[str]], dict[Fly, Fraction]] = {
        (sex, frozenset(look.signs)): {read_fly(g, sex): Fraction(s) * of_sex[sex] for g, s in look.genotypes.items()}
        for look in case.looks
        for sex in SEXES
        if sex[0] in look.sexes
    }
    found = {(c.sex, c.signs): {m.fly: m.share for m in c.members} for c in progeny.classes}
    assert found == expected
    assert all(c.exact == sum(expected[c.sex, c.signs].values()) for c in progeny.classes)


# linkage: what was counted, against the map


def tolerance(counted: float, total: int) -> float:
    """Return three standard errors of the count, and one percent point for a map that is the mean of many counts."""
    return 3 * math.sqrt(counted * (1 - counted) / total) + 0.01


@dataclass(frozen=True)
class Count:
    """A counted test cross of three linked genes, in map order: no exchange, one in either interval, one in both."""

    source: str
    genes: tuple[str, str, str]
    none: int
    left: int
    right: int
    both: int
    #: percent recombination left and right, and coincidence, worked out by hand from the counts
    worked_out: tuple[float, float, float]

    @property
    def total(self) -> int:
        return self.none + self.left + self.right + self.both


MB = "Morgan & Bridges 1916, Carnegie Publ. 237, table"
COUNTS = [
    Count(f"{MB} 18", ("v[1]", "s[1]", "B[1]"), 5772, 716, 1015, 21, (9.80, 13.77, 0.207)),
    Count(f"{MB} 36", ("v[1]", "B[1]", "fu[1]"), 5621, 1756, 175, 15, (23.40, 2.51, 0.337)),
    Count(f"{MB} 43", ("f[1]", "B[1]", "fu[1]"), 1164, 5, 32, 0, (0.42, 2.66, 0.0)),
    Count(f"{MB} 63", ("y[1]", "v[1]", "B[1]"), 200, 115, 97, 23, (31.72, 27.59, 0.604)),
]  # fmt: skip


def sons_by_interval(genes: tuple[str, str, str]) -> list[float]:
    """Return the shares among sons of a mother with all three genes on one X: none, left, right, both."""
    progeny = progeny_of(f"{' '.join(genes)}/+; +; +", "+/Y; +; +")
    shares = [0.0, 0.0, 0.0, 0.0]
    for found in progeny.classes:
        for member in found.members:
            if member.fly.sex == "male":
                a, b, c = (bool(member.fly.copies(gene)) for gene in genes)
                shares[(a != b) + 2 * (b != c)] += 2 * float(member.share)
    return shares


@pytest.mark.parametrize("count", COUNTS, ids=lambda c: c.source)
def test_counts_are_carried_over_rightly(count: Count) -> None:
    left, right = (count.left + count.both) / count.total, (count.right + count.both) / count.total
    coincidence = count.both / count.total / (left * right)
    assert (100 * left, 100 * right) == pytest.approx(count.worked_out[:2], abs=0.006)
    assert coincidence == pytest.approx(count.worked_out[2], abs=0.0006)


@pytest.mark.parametrize("count", COUNTS, ids=lambda c: c.source)
def test_three_linked_genes_recombine_as_counted(count: Count) -> None:
    none, left, right, both = sons_by_interval(count.genes)
    assert none + left + right + both == pytest.approx(1.0)
    for found, counted in ((left, count.left), (right, count.right)):
        share = (counted + count.both) / count.total
        assert found + both == pytest.approx(share, abs=tolerance(share, count.total))
    assert both == min(none, left, right, both), (
        "the rarest exchange is the double one, so the middle gene is the middle"
    )
    doubles = count.both / count.total
    assert both >= doubles - tolerance(doubles, count.total), (
        "intervals are independent here; in life doubles are rarer"
    )


#: two linked genes, recombinants, flies counted, source
PAIRS_COUNTED = [
    ("y[1]", "w[1]", 875, 81_299, f"{MB} 65"),
    ("v[1]", "m[1]", 317, 10_155, f"{MB} 65"),
    ("v[1]", "s[1]", 929, 9_209, f"{MB} 65"),
    ("m[1]", "s[1]", 125, 1_855, f"{MB} 65"),
    ("s[1]", "B[1]", 1_036, 7_524, f"{MB} 65"),
    ("v[1]", "B[1]", 5_612, 23_522, f"{MB} 65"),
    ("B[1]", "fu[1]", 222, 8_768, f"{MB} 65"),
    ("f[1]", "B[1]", 8, 1_706, f"{MB} 65"),
    (
        "pr[1]",
        "vg[1]",
        305,
        2_839,
        "Griffiths et al., Introduction to Genetic Analysis (Morgan's coupling data; memory)",
    ),
    (
        "pr[1]",
        "vg[1]",
        303,
        2_335,
        "Griffiths et al., Introduction to Genetic Analysis (Morgan's repulsion data; memory)",
    ),
]


@pytest.mark.parametrize(("one", "two", "recombinants", "total", "source"), PAIRS_COUNTED)
def test_two_linked_genes_recombine_as_counted(one: str, two: str, recombinants: int, total: int, source: str) -> None:
    field = "+; {}; +" if one == "pr[1]" else "{}; +; +"
    counted = recombinants / total
    for mother, parental in ((f"{one} {two}/+", 2), (f"{one}/{two}", 1)):
        found = 0.0
        for group in progeny_of(field.format(mother), "+/Y; +; +").classes:
            for member in group.members:
                carried = bool(member.fly.copies(one)) + bool(member.fly.copies(two))
                if member.fly.sex == "male":
                    found += 2 * float(member.share) * ((carried == 1) if parental == 2 else (carried != 1))
        assert found == pytest.approx(counted, abs=tolerance(counted, total)), source


@pytest.mark.parametrize("genes", ["y[1] w[1] v[1] f[1]", "sc[1] ec[1] cv[1] ct[1] v[1]"])
def test_a_father_of_many_linked_genes_gives_them_whole(genes: str) -> None:
    progeny = progeny_of("+; +; +", f"{genes}/Y; +; +")
    carried = {m.fly.sex: m.fly.pair("X")[0].symbols for c in progeny.classes for m in c.members}
    assert carried == {"female": tuple(genes.split()), "male": ()}


def test_fourth_chromosome_genes_do_not_part_in_either_sex() -> None:
    """No exchange between ci and ey (Comeron et al. 2012, PLoS Genet. 8:e1002905)."""
    for mother, father in (("+; +; +; ci[1] ey[D]/+", "+"), ("+", "+; +; +; ci[1] ey[D]/+")):
        members = [m for c in progeny_of(mother, father).classes for m in c.members]
        assert {m.fly.copies("ci[1]") == m.fly.copies("ey[D]") for m in members} == {True}
        assert sum(m.share for m in members if m.fly.copies("ey[D]")) == Fraction(1, 2)
