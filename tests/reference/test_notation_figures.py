"""How many genotypes are understood, and whether the structure is right: the published figures.

`pytest tests/reference/test_notation_figures.py -s` prints them. A table of real genotypes of one's own can be measured
too: name it in CROSSPLAN_CORPUS (a CSV with the columns genotype and style).
"""

from __future__ import annotations

import csv
import os
from collections import Counter
from pathlib import Path
from random import Random
from typing import get_args

import pytest

from crossplan.genetics.notation import Reading, read_genotype
from tests.reference.random_genotypes import Structure, Style, random_genotype

#: least share understood, with or without a stated assumption
LEAST = {"stock centre": 0.995, "paper": 0.995, "shorthand": 0.97}
HOW_MANY = 1500


def structure_of(reading: Reading) -> Structure:
    fly = reading.female
    assert fly is not None
    return {name: tuple(sorted(h.symbols for h in fly.pair(name))) for name in ("X", "2", "3")}


def same(found: Structure, drawn: Structure) -> bool:
    """Whether the homologues hold the same symbols, whatever their order on the map."""

    def plain(homologues: tuple[tuple[str, ...], ...]) -> list[list[str]]:
        # papers leave the number of a balancer's usual marker out
        return sorted(sorted(s.removesuffix("[1]") if s[:2] in ("Sb", "Tb") else s for s in h) for h in homologues)

    return all(plain(found[name]) == plain(drawn[name]) for name in drawn)


@pytest.mark.parametrize("style", get_args(Style))
def test_figures(style: Style) -> None:
    random = Random(f"genotypes of {style}")
    refused: list[tuple[str, str]] = []
    wrong: list[tuple[str, str]] = []
    for _ in range(HOW_MANY):
        text, drawn = random_genotype(random, style)
        reading = read_genotype(text)
        if reading.female is None:
            refused.append((text, reading.problems[0].message if reading.problems else ""))
        elif not same(structure_of(reading), drawn):
            wrong.append((text, reading.canonical))
    share = 1 - len(refused) / HOW_MANY
    print(f"\n{style}: {share:.1%} of {HOW_MANY} understood, {len(wrong)} with a wrong structure")
    for text, why in refused[:10]:
        print(f"  refused: {text}: {why}")
    assert share >= LEAST[style], refused[:5]
    assert not wrong, wrong[:5]


def test_a_corpus_of_ones_own() -> None:
    path = os.environ.get("CROSSPLAN_CORPUS")
    if not path:
        pytest.skip("no corpus is named in CROSSPLAN_CORPUS")
    with Path(path).open(encoding="utf-8", newline="") as file:
        rows = [r for r in csv.DictReader(file) if r.get("kind", "stock") not in ("label", "locus")]
    read, all_rows, why = Counter[str](), Counter[str](), Counter[str]()
    for row in rows:
        reading = read_genotype(row["genotype"])
        all_rows[row["style"]] += 1
        read[row["style"]] += reading.ok
        if not reading.ok:
            why[reading.problems[0].code] += 1
    for style, n in sorted(all_rows.items()):
        print(f"\n{style}: {read[style] / n:.1%} of {n} understood")
    print("refused:", dict(why.most_common()))
    assert sum(read.values()) >= 0.97 * len(rows)
