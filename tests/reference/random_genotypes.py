"""Genotypes of known structure written as stock centres, papers and labs write them.

The structure is drawn first and then spelt, so what a reader should find is known without any reader. Names of lines are
invented; the ways of writing are those of FlyBase nomenclature and of common practice.
"""

from __future__ import annotations

from dataclasses import dataclass
from random import Random
from typing import Literal

Style = Literal["stock centre", "paper", "shorthand"]
#: chromosome -> the symbols of its two homologues
Structure = dict[str, tuple[tuple[str, ...], ...]]


@dataclass(frozen=True)
class Piece:
    """One element: its symbol, its spellings by style, and whether it names its chromosome by itself."""

    symbol: str
    spellings: dict[Style, tuple[str, ...]]
    speaks: bool = True


def _same(symbol: str, *spellings: str) -> Piece:
    every = spellings or (symbol,)
    return Piece(symbol, {"stock centre": (symbol,), "paper": every, "shorthand": every})


def _insertion(name: str, site: str) -> Piece:
    symbol = f"{name}@{site}"
    return Piece(
        symbol,
        {
            "stock centre": (f"P{{y[+t7.7] w[+mC]={name}}}{site}", f"P{{{name}}}{site}"),
            "paper": (f"{name}({site})", f"{name} ({site})", f"{name} in {site}", f"{name} [{site}]", f"{name}@{site}"),
            "shorthand": (f"{name}@{site}", f"{name} {site}", f"{name}({site.lower()})", f"P{{{name}}}{site}"),
        },
    )


def _loose(name: str) -> Piece:
    return Piece(name, {"stock centre": (), "paper": (name,), "shorthand": (name,)}, speaks=False)


def _balancer(name: str, marker: str) -> tuple[Piece, ...]:
    plain = marker.partition("[")[0]
    return (
        Piece(
            f"{name} {marker}",
            {
                "stock centre": (f"{name}, {marker}",),
                "paper": (f"{name}, {plain}", f"{name}, {marker}", f"{name} {plain}"),
                "shorthand": (f"{name},{plain}", f"{name} {plain}", f"{name}-{plain}"),
            },
        ),
    )


_X = (
    _same("w[1118]", "w[1118]", "w1118", "w<sup>1118</sup>", "w^1118"), _same("w[*]", "w[*]", "w*"), _same("w[-]", "w-"),
    _same("w", "w"), _insertion("UAS-kx", "attP18"), _insertion("LexAop-q", "su(Hw)attP8"),
)  # fmt: skip
_2 = (
    *(_insertion(n, s) for n in ("AD-K12", "AD-N03", "UAS-kx") for s in ("attP40", "su(Hw)attP5", "VK00037")),
    _same("Df(2L)KX1"), _same("Sco"), _same("cn[1]", "cn1", "cn[1]"), _same("FRT40A", "FRT40A", "FRT 40A"[:3] + "40A"),
)  # fmt: skip
_3 = (
    *(_insertion(n, s) for n in ("DBD-Q01", "UAS-zap", "kz-GAL4") for s in ("attP2", "VK00005", "VK00027", "su(Hw)attP1")),
    _same("Df(3R)KX2"), _same("Dr"), _same("e[1]", "e1", "e[1]"), _same("FRT82B"),
)  # fmt: skip
_LOOSE = tuple(_loose(n) for n in ("kx-GAL4", "kq-LexA", "UAS-zip", "tubP-GAL80[ts]", "13xLexAop-kz", "UAS-zap-RNAi"))
_BALANCERS = {
    "X": (_same("FM7a", "FM7a", "Fm7a"),),
    "2": (_same("CyO", "CyO", "cyo"), _same("SM6a", "SM6a")),
    "3": (*_balancer("TM3", "Sb[1]"), *_balancer("TM6B", "Tb[1]"), *_balancer("TM6C", "Sb[1]")),
}
_PIECES = {"X": _X, "2": _2, "3": _3}
_NAMES = ("X", "2", "3")


def random_genotype(random: Random, style: Style) -> tuple[str, Structure]:
    """Return a genotype as text and its structure."""
    drawn = {name: _homologues(random, name, style) for name in _NAMES}
    if all(not h for pair in drawn.values() for h in pair):
        return random_genotype(random, style)
    structure = {
        name: tuple(
            sorted(tuple(s for p in h for s in p.symbol.split()) for h in (pair if len(pair) == 2 else pair * 2))
        )
        for name, pair in drawn.items()
    }
    fields = [_field(random, drawn[name], style) for name in _NAMES]
    if style == "stock centre":
        return "; ".join(f for f in fields if f), structure
    return _joined(random, fields, style), structure


def _homologues(random: Random, name: str, style: Style) -> tuple[tuple[Piece, ...], ...]:
    """Return one homologue (homozygous or wild type) or two."""
    kind = random.choice(("wild", "one", "one", "balanced", "plus"))
    if kind == "wild":
        return ((),)
    first = _pieces(random, name, style)
    if kind == "one":
        return (first,)
    second = (random.choice(_BALANCERS[name]),) if kind == "balanced" else ()
    return (first, second)


def _pieces(random: Random, name: str, style: Style) -> tuple[Piece, ...]:
    first = random.choice(_PIECES[name])
    if style != "stock centre" and name != "X" and random.random() < 0.4:
        first = random.choice(_LOOSE)
    if random.random() < 0.25:
        others = [
            p for p in _PIECES[name] if _place(p) != _place(first) and p.symbol.partition("[")[0] != first.symbol[:1]
        ]
        return (first, random.choice([p for p in others if not (_is_white(p) and _is_white(first))]))
    return (first,)


def _place(piece: Piece) -> str:
    return piece.symbol.partition("@")[2] or piece.symbol


def _is_white(piece: Piece) -> bool:
    return piece.symbol[0] == "w"


def _field(random: Random, homologues: tuple[tuple[Piece, ...], ...], style: Style) -> str:
    spelt = []
    for homologue in homologues:
        words = [random.choice(p.spellings[style]) for p in homologue]
        # behind a symbol with blanks in it only a comma is clear
        gap = ", " if style == "paper" or any(" " in w for w in words) else random.choice((" ", ", "))
        spelt.append((" " if style == "stock centre" else gap).join(words) or ("+" if len(homologues) == 2 else ""))
    slash = "/" if style == "stock centre" else random.choice(("/", " / ", "/ "))
    return slash.join(spelt)


def _joined(random: Random, fields: list[str], style: Style) -> str:
    """Write all three places, with + or nothing for wild type, and some of the noise of real tables."""
    if style == "paper":
        text = "; ".join(f or "+" for f in fields)
    else:
        semicolon = random.choice((";", "; ", " ; "))
        text = semicolon.join(f or random.choice(("+", "")) for f in fields)
    noise = random.random()
    if noise < 0.05:
        return text.replace(" ", "\u00a0")
    if noise < 0.1:
        return f"\u2018{text}\u2019"
    if noise < 0.15:
        return f"{text} (healthy; keep two)"
    return text
