"""Crosses whose result is published, or can be worked out on paper: classes, genotypes, shares and the dead, exactly.

`SOURCE` of each case says who printed it; `elementary, derived` means that the fractions follow from Mendel's rules, the death
of homozygous balancers and the absence of exchange in males, and were worked out by hand. Alleles and names of insertions
are ours. Signs are those of the catalogue (`curly wings` is Cy).
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

import pytest

from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue import default_catalogue
from crossplan.genetics.chromosome import Sex
from crossplan.genetics.fly import Fly
from crossplan.genetics.meiosis import haldane, kosambi
from crossplan.genetics.notation import read_fly
from crossplan.genetics.progeny import Progeny, cross

BOTH: tuple[Sex, ...] = ("female", "male")
DAUGHTERS: tuple[Sex, ...] = ("female",)
SONS: tuple[Sex, ...] = ("male",)
DERIVED = "elementary, derived"


@dataclass(frozen=True)
class Look:
    """A class: in which sexes, its signs, and each genotype with its share among the living of that sex."""

    sexes: tuple[Sex, ...]
    signs: frozenset[str]
    genotypes: dict[str, str]


@dataclass(frozen=True)
class Case:
    name: str
    source: str
    mother: str
    father: str
    looks: tuple[Look, ...]
    dies: str = "0"
    females: str = "1/2"


def look(sexes: tuple[Sex, ...], signs: str, **genotypes: str) -> Look:
    raise NotImplementedError
