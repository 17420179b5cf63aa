"""Worked mating schemes: the program needs no more generations than the source, and its own steps are pure.

Genotypes are the sources' own, in this project's notation; a lethal or an insertion that a source leaves unnamed has a
short name here. Where a source does not say where an insertion sits, none is given, and so no map distance either. `kind` says what the source is: published, memory (a source believed to have it, not seen), derived.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import pytest

from crossplan.genetics.appearance import Observer
from crossplan.genetics.catalogue import default_catalogue
from crossplan.genetics.notation import read_genotype
from crossplan.plan.screen_file import WantedTarget
from crossplan.schemes.batch import Asked, BatchPlanner
from crossplan.schemes.forms import Source


@dataclass(frozen=True)
class Scheme:
    """A published task: the stocks, what is wanted, and the generations that the source needs (None: cannot be)."""

    name: str
    source: str
    stocks: tuple[str, ...]
    components: tuple[tuple[str, int], ...]
    generations: int | None
    sex: Literal["female", "male"] = "female"
    forbid: tuple[str, ...] = ("balancers", "markers")
    stock: bool = False


DOUBLE = "w[1118]; Sp/CyO; Dr[Mio]/TM6B, Tb[1]"
SCHEMES = [
    Scheme(
        "two lethals that complement, both over CyO",
        "published: two-generation complementation cross, protocol page; a third of the living are straight",
        ("+; l(2)m[1]/CyO", "+; l(2)n[1]/CyO"), (("l(2)m[1]", 1), ("l(2)n[1]", 1)), 1,
    ),
    Scheme(
        "insertions on 2 and 3 into one balanced stock",
        "published: student notes on a fly crossover (2021), completed by derivation",
        ("w[1118]; UAS-Gal; +", "w[1118]; +; UAS-Red", DOUBLE), (("UAS-Gal", 1), ("UAS-Red", 1)), 2,
        forbid=(), stock=True,
    ),
    Scheme(
        "rescue on 2 and lethal on 3 as a stable stock",
        "memory: routine task of the training package of Roote & Prokop 2013, G3 3:353",
        ("w[1118]; UAS-Px; +", "w[1118]; +; l(3)m[1]/TM6B, Tb[1]", DOUBLE),
        (("UAS-Px", 1), ("l(3)m[1]", 1)), 2, forbid=(), stock=True,
    ),
    Scheme(
        "double-balance a lethal on 2",
        "memory: Greenspan, Fly Pushing, chapter on mating schemes",
        ("w[1118]; l(2)m[1]/CyO", DOUBLE), (("l(2)m[1]", 1), ("CyO", 1), ("Dr[Mio]", 1), ("TM6B", 1)), 2, forbid=(),
    ),
    Scheme(
        "AD by DBD", "derived: first cross of a split-GAL4 test",
        ("w[1118]; AD-K; +", "w[1118]; +; DBD-Q"), (("AD-K", 1), ("DBD-Q", 1)), 1,
    ),
    Scheme(
        "homozygous split stock", "derived: AD and DBD homozygous, by a double balancer",
        ("w[1118]; AD-K; +", "w[1118]; +; DBD-Q", DOUBLE), (("AD-K", 2), ("DBD-Q", 2)), 3,
        forbid=(), stock=True,
    ),
    Scheme(
        "balanced split line by balanced effector over the same balancer", "derived",
        ("w[1118]; AD-K/CyO; DBD-Q/TM6B, Tb[1]", "w[1118]; UAS-Ex/CyO"),
        (("AD-K", 1), ("DBD-Q", 1), ("UAS-Ex", 1)), 1,
    ),
    Scheme(
        "X-linked effector in sons as well", "derived: the effector comes from the mother",
        ("w[1118]; AD-K; DBD-Q", "w[1118] UAS-E@attP18"),
        (("AD-K", 1), ("DBD-Q", 1), ("UAS-E@attP18", 1)), 1, sex="male",
    ),
    Scheme(
        "a new pair from two balanced split lines, by a double balancer", "derived",
        ("w[1118]; AD-K/CyO; DBD-Q/TM6B, Tb[1]", "w[1118]; AD-L/CyO; DBD-R/TM6B, Tb[1]", DOUBLE),
        (("AD-K", 1), ("DBD-R", 1), ("CyO", 1), ("TM6B", 1)), 2,
        forbid=("AD-L", "DBD-Q"),
    ),
    Scheme(
        "homozygote from a balanced insert", "derived", ("w[1118]; UAS-Px/CyO",), (("UAS-Px", 2),), 1,
    ),
    Scheme(
        "driver on X over FM7 by effector on 3", "derived",
        ("GAL4-D@attP18 w[1118]/FM7a", "w[1118]; +; UAS-E@attP2"), (("GAL4-D@attP18", 1), ("UAS-E@attP2", 1)), 1,
    ),
    Scheme(
        "lethal on 2 and lethal on 3 in one stock", "derived: right pair of balancers",
        ("w[1118]; l(2)a[1]/CyO", "w[1118]; +; l(3)b[1]/TM6B, Tb[1]", DOUBLE), (("l(2)a[1]", 1), ("l(3)b[1]", 1)), 2,
        forbid=(), stock=True,
    ),
    Scheme(
        "swap TM6B for TM3, Ser under a lethal", "derived",
        ("w[1118]; +; l(3)k[1]/TM6B, Tb[1]", "w[1118]; +; Dr[Mio]/TM3, Ser[1]"), (("l(3)k[1]", 1), ("Ser[1]", 1)), 1,
        forbid=("Dr[Mio]", "TM6B"),
    ),
    Scheme(
        "homozygote of a recessive lethal: cannot be", "derived",
        ("w[1118]; l(2)a[1]/CyO", DOUBLE), (("l(2)a[1]", 2),), None,
    ),
    Scheme(
        "three different second chromosomes in one fly: cannot be", "derived",
        ("w[1118]; AD-K@attP40", "w[1118]; DBD-Q@attP40", "w[1118]; UAS-E@attP40", DOUBLE),
        (("AD-K@attP40", 1), ("DBD-Q@attP40", 1), ("UAS-E@attP40", 1)), None,
    ),
]  # fmt: skip


def planner_for(stocks: tuple[str, ...]) -> BatchPlanner:
    readings = [read_genotype(text) for text in stocks]
    assert all(r.ok for r in readings), [r.problems for r in readings if not r.ok]
    sources = [Source(f"stock {i}", r.female, r.male) for i, r in enumerate(readings, start=1)]
    return BatchPlanner(sources, Observer(default_catalogue()), 3)


@pytest.mark.parametrize("scheme", SCHEMES, ids=lambda s: s.name)
def test_no_more_generations_than_the_source(scheme: Scheme) -> None:
    wanted = WantedTarget("t", scheme.components, scheme.sex, 10, (3, 7), None, scheme.forbid, scheme.stock)
    answer = planner_for(scheme.stocks).answer(Asked(wanted))
    if scheme.generations is None:
        assert answer.status == "impossible"
        assert answer.reason
        return
    assert answer.status == "planned", answer.reason
    assert answer.last is not None
    assert answer.last.generation <= scheme.generations
    assert answer.proved_minimal
