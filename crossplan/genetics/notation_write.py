"""Flies written down: the short form of a lab, the standard form, and the JSON contract.

The short form is never ambiguous: all places are written (`w[1118]; AD-K12@attP40/CyO; +/TM6B`), the 4th only if it is not
wild type, and an insertion whose markers are not those that its short name implies is written in its braces.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import lru_cache
from typing import Any, Literal

from crossplan.genetics.catalogue import default_catalogue
from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.element import Element
from crossplan.genetics.fly import Fly, Homologue, Pair
from crossplan.genetics.notation_element import WordReader
from crossplan.genetics.notation_split import Item

Style = Literal["short", "standard"]


def format_genotype(fly: Fly, style: Style = "short") -> str:
    """Return the genotype of a fly as text.

    Args:
        fly: the fly; a male has /Y on the X, and a homozygous pair is written once.
        style: `short` writes insertions as `AD-K12@attP40`; `standard` as they were read in braces, where they were.
    """
    fields = [_pair(fly.pair(name), style) for name in PAIRS]
    if fields[-1] == "+":
        fields.pop()
    return "; ".join(fields)


def format_homologues(homologues: Sequence[Homologue]) -> str:
    """Return homologues of an unknown chromosome as text."""
    return "/".join(_homologue(h, "short") for h in homologues)


def _pair(pair: Pair, style: Style) -> str:
    first, second = pair
    if first == second:
        return _homologue(first, style)
    if _small_y(second) and not _small_y(first):
        # a y right after the slash could be taken for a Y
        first, second = second, first
    return f"{_homologue(first, style)}/{_homologue(second, style)}"


def _small_y(homologue: Homologue) -> bool:
    return homologue.symbols[:1] == ("y",)


def _homologue(homologue: Homologue, style: Style) -> str:
    if not homologue.elements:
        return "+"
    words = [_element(e, style) for e in homologue.elements]
    if any(e.site == e.symbol or e.symbol[-1] == "-" for e in homologue.elements):
        # the name of an empty landing site, and what follows a hyphen, would run into the symbol before
        return ", ".join(words)
    if homologue.balancer is not None and len(words) > 1:
        return f"{words[0]}, {' '.join(words[1:])}"
    return " ".join(words)


def _element(element: Element, style: Style) -> str:
    if element.standard and (style == "standard" or not _implied(element)):
        return element.standard
    return element.symbol


@lru_cache(maxsize=4096)
def _reads_as(symbol: str) -> Element | None:
    words = WordReader(default_catalogue(), {}, symbol).read(Item(symbol, 0, len(symbol)))
    return words[0].element if len(words) == 1 else None


def _implied(element: Element) -> bool:
    """Return whether the short name alone is read as this very element."""
    return _reads_as(element.symbol) == element


def fly_json(fly: Fly) -> dict[str, Any]:
    """Return the fly as the JSON contract writes it."""
    record: dict[str, Any] = {"sex": fly.sex}
    for name, pair in zip(PAIRS, fly.pairs, strict=True):
        record[name] = [list(h.symbols) for h in pair]
    record["genotype"] = format_genotype(fly)
    return record
