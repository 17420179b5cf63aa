"""From the words of a screen to a wish: which element of the shelf a component names, and wishes that no fly can meet.

A component that names its site is that element. One that names no site is the element of that name if the shelf has one
such element, and ambiguous if it has several.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from difflib import get_close_matches

from crossplan.genetics.chromosome import MALE, PAIRS
from crossplan.genetics.element import Element, Kind
from crossplan.genetics.fly import Fly
from crossplan.schemes.forms import Source
from crossplan.schemes.wish import BALANCERS, MARKERS, OTHER_INSERTIONS, WantedSex, Wish


@dataclass(frozen=True)
class Refusal:
    """Why a wish cannot be met by any number of crosses, and which stocks would change that."""

    reason: str
    would_unlock: tuple[str, ...] = ()


@dataclass(frozen=True)
class Carried:
    """An element of the shelf, the chromosomes that it stands on, and the stocks that carry it."""

    element: Element
    chromosomes: tuple[str, ...]
    stocks: tuple[str, ...]


def carried_elements(sources: Iterable[Source]) -> dict[str, Carried]:
    """Return every element of the shelf by symbol, with its chromosomes and stocks in the order of the list."""
    places: dict[str, tuple[Element, dict[str, None], dict[str, None]]] = {}
    for source in sources:
        for fly in (source.female, source.male):
            if fly is None:
                continue
            for chromosome, homologue in fly.homologues():
                for element in homologue.elements:
                    entry = places.setdefault(element.symbol, (element, {}, {}))
                    entry[1][chromosome] = None
                    entry[2][source.name] = None
    return {
        symbol: Carried(element, tuple(chromosomes), tuple(stocks))
        for symbol, (element, chromosomes, stocks) in places.items()
    }


def base_name(symbol: str) -> str:
    """Return the name of an element without its site: `AD-K12` of `AD-K12@attP40`."""
    return symbol.split("@", 1)[0]


def find_component(name: str, shelf: Mapping[str, Carried]) -> Carried | Refusal:
    """Return the element that a component of a screen names, or why there is none such."""
    exact = shelf.get(name)
    if exact is not None:
        return exact
    same = [c for symbol, c in shelf.items() if base_name(symbol) == name or c.element.standard == name]
    if len(same) == 1:
        return same[0]
    if same:
        choices = " or ".join(sorted(c.element.symbol for c in same))
        return Refusal(f"{name} is ambiguous: the stock list has {choices}; write the one you mean")
    return Refusal(f"no stock on this shelf carries {name}{_did_you_mean(name, shelf)}", (name,))


def _did_you_mean(name: str, shelf: Mapping[str, Carried]) -> str:
    insertions = [s for s, c in shelf.items() if c.element.kind is Kind.INSERTION or c.element.site]
    names = sorted({base_name(s) for s in insertions} | set(insertions))
    near = get_close_matches(name, names, n=3, cutoff=0.75)
    return f" (names close to it: {', '.join(near)})" if near else ""


def make_wish(
    components: Iterable[tuple[str, int]],
    sex: WantedSex,
    forbid: Iterable[str],
    stock: bool,
    shelf: Mapping[str, Carried],
) -> Wish | Refusal:
    """Return the wish for these components, or the first reason why no fly can satisfy it.

    Args:
        components: (name, copies) as the screen writes them.
        sex: of the wanted flies.
        forbid: what they must not carry: `balancers`, `markers`, `other insertions`, or single symbols.
        stock: whether a self-perpetuating stock is wanted.
        shelf: what `carried_elements` found.
    """
    resolved: list[tuple[Carried, int]] = []
    missing: list[Refusal] = []
    for name, copies in components:
        found = find_component(name, shelf)
        if isinstance(found, Refusal):
            missing.append(found)
        else:
            resolved.append((found, copies))
    if missing:
        return Refusal(
            "; ".join(m.reason for m in missing), tuple(unlock for m in missing for unlock in m.would_unlock)
        )
    for carried, _ in resolved:
        if len(carried.chromosomes) > 1:
            where = " and ".join(carried.chromosomes)
            return Refusal(
                f"{carried.element.symbol} is written on chromosomes {where} by different stocks"
                f" ({', '.join(carried.stocks[:4])}); settle in the stock list which is right"
            )
    wish = Wish(
        tuple((c.element.symbol, c.chromosomes[0], copies) for c, copies in resolved),
        sex,
        frozenset(_forbidden(forbid, shelf)),
        stock,
    )
    return _contradiction(wish, resolved) or wish


def _forbidden(forbid: Iterable[str], shelf: Mapping[str, Carried]) -> Iterable[str]:
    for word in forbid:
        if word in (BALANCERS, MARKERS, OTHER_INSERTIONS):
            yield word
            continue
        found = find_component(word, shelf)
        yield found.element.symbol if isinstance(found, Carried) else word


def _contradiction(wish: Wish, resolved: list[tuple[Carried, int]]) -> Refusal | None:
    both = sorted(set(wish.symbols) & wish.forbid)
    if both:
        return Refusal(f"{', '.join(both)} must be carried and must not be carried at the same time")
    return _too_many_at_one_place(wish, resolved) or _lethal_twice(wish, resolved)


def _too_many_at_one_place(wish: Wish, resolved: list[tuple[Carried, int]]) -> Refusal | None:
    """A homologue holds one thing at one site, and a fly has two homologues (a male one X)."""
    places: dict[tuple[str, str], list[tuple[str, int]]] = {}
    for carried, copies in resolved:
        site = carried.element.site
        if site:
            places.setdefault((carried.chromosomes[0], site), []).append((carried.element.symbol, copies))
    for (chromosome, site), wanted in places.items():
        room = 1 if chromosome == "X" and wish.sex == MALE else 2
        if sum(copies for _, copies in wanted) > room:
            names = ", ".join(f"{n} x {symbol}" if n > 1 else symbol for symbol, n in wanted)
            fly = "a male has one X" if room == 1 else f"a fly has two copies of chromosome {chromosome}"
            return Refusal(
                f"{names} all sit at {site}, and {fly}: no more than {room} of them fit into one fly,"
                " whatever the crosses; one of them is needed at another site",
                tuple(f"{base_name(symbol)} at another site than {site}" for symbol, _ in wanted),
            )
    return None


def _lethal_twice(wish: Wish, resolved: list[tuple[Carried, int]]) -> Refusal | None:
    for carried, copies in resolved:
        if copies > 1 and carried.element.traits.lethal:
            groups = ", ".join(sorted(carried.element.traits.lethal))
            return Refusal(f"two copies of {carried.element.symbol} are lethal ({groups})")
    return None


def stock_already(wish: Wish, sources: Iterable[Source]) -> tuple[str, Fly] | None:
    """Return the first stock whose flies, as written, satisfy the wish, with the fly; None if there is none."""
    for source in sources:
        for fly in (source.female, source.male):
            if fly is None or not wish.wants_sex(fly.sex):
                continue
            if all(wish.accepts(pair, name) for name, pair in zip(PAIRS, fly.pairs, strict=True)):
                return source.name, fly
    return None
