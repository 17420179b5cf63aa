"""Flies written down: the short form of a lab, the standard form, and the JSON contract."""

from __future__ import annotations

from typing import Any, Literal

from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.element import Element
from crossplan.genetics.fly import Fly, Homologue, Pair

Style = Literal["short", "standard"]


def format_genotype(fly: Fly, style: Style = "short") -> str:
    """Return the genotype, all places written (`w[1118]; AD-K12@attP40/CyO; +/TM6B`), the 4th only if not wild type.

    A homozygous pair is written once. The standard style writes each insertion as it was read in braces, where it was.
    """
    fields = [_pair(fly.pair(name), style) for name in PAIRS]
    if fields[-1] == "+":
        fields.pop()
    return "; ".join(fields)


def _pair(pair: Pair, style: Style) -> str:
    first, second = pair
    if first == second:
        return _homologue(first, style)
    return f"{_homologue(first, style)}/{_homologue(second, style)}"


def _homologue(homologue: Homologue, style: Style) -> str:
    if not homologue.elements:
        return "+"
    words = [_element(e, style) for e in homologue.elements]
    if homologue.balancer is not None and len(words) > 1:
        return f"{words[0]}, {' '.join(words[1:])}"
    return " ".join(words)


def _element(element: Element, style: Style) -> str:
    return element.standard if style == "standard" and element.standard else element.symbol


def fly_json(fly: Fly) -> dict[str, Any]:
    """Return the fly as the JSON contract writes it."""
    record: dict[str, Any] = {"sex": fly.sex}
    for name, pair in zip(PAIRS, fly.pairs, strict=True):
        record[name] = [list(h.symbols) for h in pair]
    record["genotype"] = format_genotype(fly)
    return record
