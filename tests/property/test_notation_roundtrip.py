"""Whatever fly is written down is read back as the same fly; whatever text is read, nothing breaks."""

from __future__ import annotations

import string

from hypothesis import given, settings
from hypothesis import strategies as st

from crossplan.errors import Severity
from crossplan.genetics.chromosome import SEXES
from crossplan.genetics.fly import WILD_TYPE, Fly, Homologue, Y, make_pair
from crossplan.genetics.notation import Reading, format_genotype, read_fly, read_genotype, reading_json

#: symbols that may stand together on one homologue of each chromosome
SYMBOLS = {
    "X": ["w[1118]", "w", "y", "y[1]", "w-", "sn[3]", "f", "UAS-k@attP18", "P{ry[+t7.2]=hsFLP}1", "l(1)k1[2]", "FRT19A",
          "Df(1)K1", "kx-GAL4", "P{y[+t7.7] v[+t1.8]=k.IR}ZH-2A"],
    "2": ["Sco", "cn", "bw[D]", "AD-K1@attP40", "P{y[+t7.7] v[+t1.8]=kx.IR}attP40", "P{w[+mC]=UAS-k}VK00018", "P{kxEP}",
          "UAS-k@su(Hw)attP5", "l(2)k5[1]", "Df(2L)K4", "FRT40A", "kx-42", "P{w[+mC]=tubP-GAL80[ts]}20", "attP16", "kx[3]",
          "PBac{3xP3-RFP=kxP}VK00037", "In(2LR)k7", "tub-GAL80[ts]"],
    "3": ["Sb[1]", "e", "st[1]", "Dr", "DBD-K1@attP2", "M{3xP3-RFP=UAS-k}ZH-86Fb", "l(3)k2[1]", "Df(3R)K6", "FRT82B",
          "P{GawB}e[k1]", "kx-GAL4", "P{w[+mC]=UAS-kx}3", "PBac{y[+mDint2]=vas-k}VK00027", "lethal"],
    "4": ["ci[D]", "ey[D]", "P{kx}4", "kx-9"],
}  # fmt: skip
BALANCERS = {
    "X": ["FM7a", "FM7c", "FM7-GFP", "Basc", "FM7c, sn[+]"],
    "2": ["CyO", "CyO-GFP", "SM6a", "CyO, Kr-GFP", "CyO, UAS-k@attP40", "In(2LR)Gla", "CyO-vKx"],
    "3": ["TM3", "TM3, Sb[1]", "TM3, Ser", "TM6B", "TM6B, Tb[1]", "TM6C, Sb[1] Tb[1]", "MKRS", "TM3, P{w[+mC]=kx}3"],
    "4": [],
}  # fmt: skip


def _homologue_from(chromosome: str, written: str) -> Homologue:
    """Return the homologue that a text stands for, read in its place, both copies alike."""
    fields = ["+", "+", "+", "+"]
    fields["X234".index(chromosome)] = written
    reading = read_genotype("; ".join(fields))
    assert reading.female is not None, reading.problems
    return reading.female.pair(chromosome)[0]


@st.composite
def homologues(draw: st.DrawFn, chromosome: str) -> Homologue:
    """One copy of a chromosome: wild type, a balancer, or up to three symbols in any order."""
    kind = draw(st.sampled_from(["wild", "symbols", "symbols", "balancer"]))
    if kind == "balancer" and BALANCERS[chromosome]:
        return _homologue_from(chromosome, draw(st.sampled_from(BALANCERS[chromosome])))
    if kind == "wild":
        return WILD_TYPE
    chosen = draw(st.lists(st.sampled_from(SYMBOLS[chromosome]), min_size=1, max_size=3, unique=True))
    parts = [_homologue_from(chromosome, text) for text in chosen]
    elements = {e.site or e.symbol: e for h in parts for e in h.elements}
    return Homologue.of(*elements.values())


@st.composite
def flies(draw: st.DrawFn) -> Fly:
    sex = draw(st.sampled_from(SEXES))
    pairs = [(draw(homologues(name)), draw(homologues(name))) for name in ("X", "2", "3", "4")]
    if sex == "male":
        pairs[0] = (pairs[0][0], Y)
    return Fly.of(sex, *pairs)


@given(flies(), st.sampled_from(["short", "standard"]))
@settings(max_examples=300, deadline=None)
def test_a_fly_that_is_written_is_read_back(fly: Fly, style: str) -> None:
    written = format_genotype(fly, style)  # type: ignore[arg-type]
    again = read_fly(written, fly.sex)
    assert again == fly, written
    assert format_genotype(again, style) == written  # type: ignore[arg-type]


@given(flies())
@settings(max_examples=100, deadline=None)
def test_spacing_of_the_dividers_does_not_matter(fly: Fly) -> None:
    written = format_genotype(fly)
    loose = written.replace("/", " / ").replace(";", " ;  ")
    assert read_fly(loose, fly.sex) == fly


@given(flies())
@settings(max_examples=100, deadline=None)
def test_the_order_of_homologues_does_not_matter(fly: Fly) -> None:
    fields = format_genotype(fly).split("; ")
    turned = "; ".join([fields[0], *("/".join(reversed(f.split("/"))) for f in fields[1:])])
    assert read_fly(turned, fly.sex) == fly


@given(homologues("2"), homologues("2"))
def test_written_pairs_are_in_one_order(first: Homologue, second: Homologue) -> None:
    assert make_pair(first, second) == make_pair(second, first)


def _sound(reading: Reading, text: str) -> None:
    assert reading.text == text
    errors = [p for p in reading.problems if p.severity is Severity.ERROR]
    assert reading.ok == (not errors)
    assert reading.ok or (reading.female is None and reading.male is None)
    for p in reading.problems:
        assert 0 <= p.start <= p.end <= len(text)
        assert p.message
    reading_json(reading)


PIECES = st.sampled_from(
    [";", "/", ",", " ", "+", "w", "y", "Y", "CyO", "TM3", "Sb", "[", "]", "{", "}", "(", ")", "P{", "attP40", "@", "UAS-a",
     "or", "x", "in", "(II)", "=", "-", "1118", "Df(2L)a", "C(1)DX", "T(2;3)SM6a-TM6B", "\u00a0", "\u200b", "(CyO)", "FlpStop",
     "<sup>", "</sup>", "^", "&Dgr;", "\n", "#NAME?", "\u2078", "TM6B", ">", "_", ".",
     "P{x}4", "P{x}1", "; ", "/", " ", "Sb[1]", "UAS-a", "w", "l(2)a", "lethal", "I", "GFP", "kx-", "[y]"]
)  # fmt: skip


@given(st.lists(PIECES, max_size=14).map("".join))
@settings(max_examples=600, deadline=None)
def test_no_heap_of_pieces_breaks_the_reader(text: str) -> None:
    reading = read_genotype(text)
    _sound(reading, text)
    for sex, fly in reading.flies().items():
        assert read_fly(format_genotype(fly), sex) == fly


@given(st.text(max_size=60))
@settings(max_examples=300, deadline=None)
def test_no_text_breaks_the_reader(text: str) -> None:
    _sound(read_genotype(text), text)


@given(st.text(alphabet=string.ascii_letters + string.digits + " ;/,+[](){}@-", max_size=60))
@settings(max_examples=300, deadline=None)
def test_what_was_understood_is_understood_again(text: str) -> None:
    reading = read_genotype(text)
    for sex, fly in reading.flies().items():
        assert read_fly(format_genotype(fly), sex) == fly
