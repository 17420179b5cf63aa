"""A table of genotypes of our own, each with the reading that a fly worker would give it.

The forms follow FlyBase nomenclature and common practice at the bench; all names of lines are invented.
"""

from __future__ import annotations

import pytest

from crossplan.genetics.notation import read_genotype

#: text, and the short form of the fly that it stands for; understood without doubt (notes are allowed)
UNDERSTOOD = [
    # one chromosome, and the evidence that names it
    ("w[1118]", "w[1118]; +; +"),
    ("w1118", "w[1118]; +; +"),
    ("w*", "w[*]; +; +"),
    ("w-", "w[-]; +; +"),
    ("yw", "y w; +; +"),
    ("y1w67c23", "y[1] w[67c23]; +; +"),
    ("y w f", "y w f; +; +"),
    ("y, w", "y w; +; +"),
    ("cn bw", "+; cn bw; +"),
    ("e", "+; +; e"),
    ("bw; st", "+; bw; st"),
    ("ru1 st1 e1", "+; +; ru[1] st[1] e[1]"),
    ("Canton-S", "+; +; +"),
    ("+", "+; +; +"),
    ("Df(2L)KX1/CyO", "+; Df(2L)KX1/CyO; +"),
    ("Df(3R)KX2, e[1]/TM6C, Sb[1]", "+; +; e[1] Df(3R)KX2/TM6C, Sb[1]"),
    ("In(2LR)Gla/CyO", "+; CyO/In(2LR)Gla; +"),
    ("l(2)kx5[1]/CyO", "+; l(2)kx5[1]/CyO; +"),
    # landing sites, in all their spellings
    ("P{y[+t7.7] w[+mC]=AD-K12}attP40", "+; AD-K12@attP40; +"),
    ("AD-K12@attP40", "+; AD-K12@attP40; +"),
    ("AD-K12(attP40)", "+; AD-K12@attP40; +"),
    ("AD-K12 (attP40)", "+; AD-K12@attP40; +"),
    ("AD-K12 [attP40]", "+; AD-K12@attP40; +"),
    ("AD-K12 in attP40", "+; AD-K12@attP40; +"),
    ("AD-K12 attP40", "+; AD-K12@attP40; +"),
    ("UAS-kx in su(Hw)attP5", "+; UAS-kx@su(Hw)attP5; +"),
    ("UAS-kx (su(Hw)attP5)", "+; UAS-kx@su(Hw)attP5; +"),
    ("UAS-kx(VK5)", "+; +; UAS-kx@VK00005"),
    ("PBac{UAS-kx}VK00037", "+; UAS-kx@VK00037; +"),
    ("UAS(FRT.stop)kx@VK00018", "+; UAS(FRT.stop)kx@VK00018; +"),
    # the style of stock centres: no empty field for an unwritten chromosome
    ("w[1118]; P{y[+t7.7] w[+mC]=DBD-Q01}attP2", "w[1118]; +; DBD-Q01@attP2"),
    ("AD-K12@attP40; DBD-Q01@attP2", "+; AD-K12@attP40; DBD-Q01@attP2"),
    ("w; TM3, Sb[1]/TM6B, Tb[1]", "w; +; TM3, Sb[1]/TM6B, Tb[1]"),
    ("w[*]; P{lacW}e[kx1]", "w[*]; +; lacW@e[kx1]"),
    ("w; FRT40A", "w; FRT40A; +"),
    ("w; P{ry[+t7.2]=neoFRT}82B", "w; +; P{ry[+t7.2]=neoFRT}82B"),
    ("w; P{FRT(w[hs])}2A", "w; +; FRT(w[hs])@2A"),
    ("w; eg[kx1]-GAL4", "w; +; eg[kx1]-GAL4"),
    ("w; UAS-kx @attP40", "w; UAS-kx@attP40; +"),
    ("K-123: w; Sp/CyO", "w; Sp/CyO; +"),
    ("y[1] w[1118] P{hsFLP}1", "y[1] w[1118] hsFLP@1; +; +"),
    # written in places
    ("w; AD-K12@attP40/CyO; +/TM6B, Tb", "w; AD-K12@attP40/CyO; +/TM6B, Tb"),
    ("w;; UAS-kx", "w; +; UAS-kx"),
    ("w; ; UAS-kx/TM3, Ser", "w; +; UAS-kx/TM3, Ser"),
    (";;kx-GAL4/TM6C, Sb", "+; +; kx-GAL4/TM6C, Sb"),
    ("w; UAS-kx;;", "w; UAS-kx; +"),
    ("w; kx-GAL4; UAS-kx", "w; kx-GAL4; UAS-kx"),
    ("+; +; +; ey[D]/ci[D]", "+; +; +; ci[D]/ey[D]"),
    ("w/w; Sco/Sco; +", "w; Sco; +"),
    ("w; UAS-kx/ + ; + /+", "w; UAS-kx/+; +"),
    # stated chromosomes
    ("w; kx-GAL4 (II)", "w; kx-GAL4; +"),
    ("w; kx-GAL4 (III)", "w; +; kx-GAL4"),
    ("kx-GAL4 (X); UAS-kx (II)", "kx-GAL4; UAS-kx; +"),
    ("kx-GAL4 III", "+; +; kx-GAL4"),
    # balancers
    ("w; Sp/CyO", "w; Sp/CyO; +"),
    ("w; CyO/Sp", "w; Sp/CyO; +"),
    ("w; +/cyo", "w; +/CyO; +"),
    ("w; +; TM3 Sb/TM6B Tb", "w; +; TM3, Sb/TM6B, Tb"),
    ("w;; TM3,Sb/+", "w; +; +/TM3, Sb"),
    ("w;; TM3-Sb/+", "w; +; +/TM3, Sb"),
    ("w;; TM6BTb/+", "w; +; +/TM6B, Tb"),
    ("w;; +/TM6C, Sb[1] Tb[1]", "w; +; +/TM6C, Sb[1] Tb[1]"),
    ("w; +/CyO-ActGFP", "w; +/CyO-GFP; +"),
    ("w; +/CyO, Kr-GFP", "w; +/CyO, Kr-GFP; +"),
    ("FM7a/w[1118]", "w[1118]/FM7a; +; +"),
    # a superscript that was lost behind a mapped gene
    ("w; nubK51/+", "w; nub[K51]/+; +"),
    # sex
    ("w[1118]/Y; UAS-kx@attP40", "w[1118]/Y; UAS-kx@attP40; +"),
    ("w/Dp(1;Y)y[+]; +; +", "w/Dp(1;Y)y[+]; +; +"),
    ("C(1)DX, y[1] f[1]/Y", "C(1)DX, y[1] f[1]/Y; +; +"),
    ("y w/w or Y; +; +", "y w/w; +; +"),
    ("w(Y); UAS-kx@attP40", "w; UAS-kx@attP40; +"),
    # noise
    ("\ufeffw; Sp/CyO", "w; Sp/CyO; +"),
    ("w\u00a0; Sp/CyO", "w; Sp/CyO; +"),
    ("\u2018w; Sp/CyO\u2019", "w; Sp/CyO; +"),
    ("w \uff1b UAS-kx@attP40 \uff0f CyO", "w; UAS-kx@attP40/CyO; +"),
    ("w<sup>1118</sup>; Sp/CyO", "w[1118]; Sp/CyO; +"),
    ("w^1118; Sp/CyO", "w[1118]; Sp/CyO; +"),
    ("w\u00b9\u00b9\u00b9\u2078; Sp/CyO", "w[1118]; Sp/CyO; +"),
    ("w; P{ w[ + mC] = UAS-kx }attP40", "w; UAS-kx@attP40; +"),
    ("w; UAS-kx@attP40 (homozygous; healthy)", "w; UAS-kx@attP40; +"),
    ("Control: w; Sp/CyO", "w; Sp/CyO; +"),
    ("w; sc&Dgr;9/CyO", "w; sc\u03949/CyO; +"),
    ("w; kx > stop > GAL4/CyO", "w; kx>stop>GAL4/CyO; +"),
]

#: understood, but something was assumed that a person should confirm: text, short form, code of the warning
ASSUMED = [
    ("w; +; +/TM3", "w; +; +/TM3", "assumed-marker"),
    ("w; +; Dr/TM6B", "w; +; Dr/TM6B", "assumed-marker"),
    ("w[*]; P{w[+mC]=UAS-kx}3", "w[*]; +; UAS-kx@3", "assumed-chromosome"),
    ("UAS-kx; Sp/CyO", "UAS-kx; Sp/CyO; +", "assumed-place"),
    ("w; CyO/CyO; +", "w; CyO; +", "balancer-twice"),
    ("w; Cy\u200bO/+", "w; +/CyO; +", "invisible"),
    ("w; \u0421yO/+", "w; +/CyO; +", "look-alike-letters"),
    ("w;; kx-GAL4 / (TM6B, Tb)", "w; +; kx-GAL4/TM6B, Tb", "floating-balancer"),
    ("w; UAS-kx@attP400/CyO", "w; UAS-kx@attP400/CyO; +", "unknown-site"),
    ("w; CyO-vKx/+", "w; +/CyO-vKx; +", "balancer-variant"),
    ("PBac(w[+mC]=UAS-kx)VK00037", "+; UAS-kx@VK00037; +", "old-brackets"),
    ("AD-K1@VK00027; DBD-Q1@attP2", "+; +; DBD-Q1@attP2 AD-K1@VK00027", "one-homologue"),
    ("w; UAS-kx@attP40 (/CyO); +", "w; UAS-kx@attP40/CyO; +", "floating-balancer"),
    ("w; AD-K1@attP40; DBD-Q1@attP2/CyO::TM6B", "w; AD-K1@attP40/CyO; DBD-Q1@attP2/TM6B", "balancers-together"),
    ("w; +; +/CyO::TM6B", "w; +/CyO; +/TM6B", "balancers-together"),
    ("w; kx-GAL4BDSC:12345; +", "w; kx-GAL4; +", "stock-number"),
    ("w; +; UAS-kx in VK00005_UAS-q in attP2/TM6B, Tb", "w; +; UAS-q@attP2 UAS-kx@VK00005/TM6B, Tb", "underscore"),
    ("w; kx-GAL4 (or q-GAL4); +", "w; kx-GAL4; +", "choice"),
    # lines of the trade of which it is known where they sit; the place between semicolons counts more
    ("w[*]; P{w[+mW.hs]=GawB}OK107", "w[*]; +; +; GawB@OK107", "assumed-chromosome"),
    ("w; tubP-GAL80[ts]@20", "w; tubP-GAL80[ts]@20; +", "assumed-chromosome"),
    ("HA-nub/+", "+; HA-nub/+; +", "assumed-chromosome"),
    ("egts2/+", "+; +; egts2/+", "assumed-chromosome"),
]

#: read, but for the chromosome, which is a question to a person; there is no fly until it is answered
OPEN = [
    ("P{lacW}kxg[k1]", "lacW@kxg[k1]"),
    ("kxg[1]/+", "kxg[1]/+"),
    ("w; UAS-kx", "w; UAS-kx"),
    ("UAS-kx/+; kx-GAL4/+", "UAS-kx/+; kx-GAL4/+"),
    ("UAS-kx", "UAS-kx"),
]

#: not understood: text, code of the error, and the characters that it points at (empty: not checked)
REFUSED = [
    ("", "empty", ""),
    ("  ", "empty", ""),
    (";;", "empty", ""),
    ("w; Sp/CyO; +; +; +", "five-fields", "+"),
    ("w; A/B/C; +", "three-homologues", "A/B/C"),
    ("w; Sp/TM3, Sb; +", "chromosomes-disagree", ""),
    ("w; +; Dr/SM6a", "chromosomes-disagree", "Dr/SM6a"),
    ("w; FM7c/+; +", "wrong-place", "FM7c/+"),
    ("w; DBD-Q1@attP2; AD-K1@attP40", "wrong-place", "DBD-Q1@attP2"),
    ("DBD-Q1@attP2; AD-K1@attP40", "wrong-order", ""),
    ("w; DBD-Q1@attP2/AD-K1@attP40; +", "chromosomes-disagree", ""),
    ("w; AD-K1@attP40 UAS-kx@attP40/CyO", "same-site", ""),
    ("w; kx-GAL4 (III)/CyO", "chromosomes-disagree", ""),
    ("w; +; UAS-kx/Y", "y-on-autosome", ""),
    ("C(1;Y)1, y w; +; +", "compound", "C(1;Y)1"),
    ("w; C(2)EN, bw; +", "compound", "C(2)EN"),
    ("Y/Y; +; +", "sex-chromosomes", ""),
    ("w/Y/Y", "three-homologues", ""),
    ("w/y; +; +", "y-or-yellow", ""),
    ("w; TM6Bb/+; +", "balancer-typo", "TM6Bb"),
    ("w; Cy0/+", "balancer-typo", "Cy0"),
    ("w; +; TM3, Sb/CyO::TM6B, Tb", "two-balancers", ""),
    ("w; CyO::TM6B; +", "two-balancers", "CyO::TM6B"),
    ("w; T(2;3)SM6a-TM6B/Sp", "linked", ""),
    ("P{UAS-kx", "bracket", "{"),
    ("w[1118]]; +", "bracket", "]"),
    ("P{w[+mC]=UAS-kx)attP40", "bracket", ""),
    ("w; P{w[+mC; UAS-kx}", "bracket", ""),
    ("P{P{UAS-kx}}attP2", "nested-braces", ""),
    ("w; P{}attP2; +", "empty-construct", "P{}attP2"),
    ("w[]; +; +", "empty-allele", "w[]"),
    ("w//+; +", "empty-homologue", ""),
    ("/CyO; +", "empty-homologue", ""),
    ("w; CyO/; +", "empty-homologue", ""),
    ("Df(5L)KX/CyO", "no-such-chromosome", ""),
    ("UAS-kx (V)", "no-such-chromosome", ""),
    ("w; Sp or CyO; +", "choice", "or"),
    ("UAS-kx@attP40 x w[1118]", "cross", "x"),
    ("w; Sp/CyO\nw; +; Dr/TM3", "two-genotypes", ""),
    ("=1+1", "formula", ""),
    ("@SUM(1)", "formula", ""),
    ("#NAME?; +; +", "spreadsheet-error", "#NAME?"),
    ("w; 1-Mar/CyO", "date", "1-Mar"),
    ("w; 4.50E+11", "number", "4.50E+11"),
    ("w; Cy\x00O/+", "control-character", "\x00"),
    ("w\u202e; OyC", "control-character", "\u202e"),
    ("w; +, UAS-kx", "plus-with-symbols", ""),
    ("w;; UAS-kx/+; kx-GAL4/+", "one-too-many", "kx-GAL4/+"),
    ("kx_UAS-a__b_Df", "underscores", ""),
    ("w; {UAS-kx}attP40/CyO", "braces", ""),
    ("kx-GAL4>UAS-kx", "nothing-known", ""),
    ("w; (kept at 18 C)/CyO", "remark-only", ""),
]


@pytest.mark.parametrize(("text", "short"), UNDERSTOOD)
def test_understood(text: str, short: str) -> None:
    reading = read_genotype(text)
    assert reading.ok, reading.problems
    assert reading.canonical == short
    assert not reading.assumed, reading.problems


@pytest.mark.parametrize(("text", "short", "code"), ASSUMED)
def test_understood_with_a_stated_assumption(text: str, short: str, code: str) -> None:
    reading = read_genotype(text)
    assert reading.ok, reading.problems
    assert reading.assumed
    assert reading.canonical == short
    assert code in {p.code for p in reading.problems if p.severity == "warning"}


@pytest.mark.parametrize(("text", "short"), OPEN)
def test_understood_but_for_a_chromosome(text: str, short: str) -> None:
    reading = read_genotype(text)
    assert reading.ok
    assert reading.is_open
    assert not reading.assumed
    assert not reading.flies()
    assert reading.canonical == short


@pytest.mark.parametrize(("text", "code", "characters"), REFUSED)
def test_not_understood_and_why(text: str, code: str, characters: str) -> None:
    reading = read_genotype(text)
    assert not reading.ok
    assert reading.female is None
    assert reading.male is None
    first = reading.problems[0]
    assert first.code == code
    if characters:
        assert text[first.start : first.end] == characters
