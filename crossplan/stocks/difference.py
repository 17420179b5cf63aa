"""What changed between two versions of a stock list, in terms of flies: stocks gained and lost, genotypes by chromosome.

Stocks are matched by name. A stock that is gone and one that is new with the same genotype are one stock renamed. A
genotype that is only spelt otherwise is no change.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.fly import Fly, Pair
from crossplan.stocks.shelf import Shelf, Stock

#: fields of the row that are compared beside the genotype, with the words for them
FIELDS = {
    "copies": "copies",
    "temperature_C": "temperature",
    "last_transfer": "last transfer",
    "status": "status",
    "source": "source",
    "tray": "tray",
    "vial": "vial",
    "who": "keeper",
    "notes": "notes",
}

#: characters of a genotype that a message shows
MOST_SHOWN = 200


@dataclass(frozen=True, slots=True)
class Change:
    """One change.

    Attributes:
        kind: gained, lost, renamed, genotype, spelling, unreadable, readable, or the name of a field.
        stock: its name in the newer list (in the older, when it is lost).
        message: what changed, in words.
        chromosome: X, 2, 3 or 4 where a genotype changed, else empty.
        before, after: the two states.
    """

    kind: str
    stock: str
    message: str
    chromosome: str = ""
    before: str = ""
    after: str = ""


def compare(old: Shelf, new: Shelf) -> tuple[Change, ...]:
    """Return every change from `old` to `new`: lost, gained and renamed stocks first, then row by row."""
    before, after = ({s.name: s for s in shelf.stocks} for shelf in (old, new))
    lost = [s for name, s in before.items() if name not in after]
    gained = [s for name, s in after.items() if name not in before]
    renamed = dict(_renamed(lost, gained))
    changes = [
        Change("lost", s.name, f"{s.name} is gone: {_genotype(s)}", before=_genotype(s))
        for s in lost
        if s.name not in renamed
    ]
    new_names = set(renamed.values())
    changes += [
        Change("gained", s.name, f"{s.name} is new: {_genotype(s)}{_newcomer(s)}", after=_genotype(s))
        for s in gained
        if s.name not in new_names
    ]
    changes += [Change("renamed", b, f"{a} is now called {b}", before=a, after=b) for a, b in renamed.items()]
    pairs = [(before[a], after[b]) for a, b in renamed.items()]
    pairs += [(before[name], s) for name, s in after.items() if name in before]
    for one, other in sorted(pairs, key=lambda p: p[1].row):
        changes += _changes(one, other)
    return tuple(changes)


def _newcomer(stock: Stock) -> str:
    """Return a word of warning for a stock that came from elsewhere and is not in quarantine."""
    made_here = any(word in stock.source.lower() for word in ("here", "injected", "this lab"))
    return "" if not stock.source or made_here or "quarantine" in stock.status.lower() else " (not in quarantine)"


def _genotype(stock: Stock) -> str:
    text = stock.reading.canonical or stock.genotype
    return text if len(text) <= MOST_SHOWN else text[: MOST_SHOWN - 3] + "..."


def _renamed(lost: Iterable[Stock], gained: Iterable[Stock]) -> Iterator[tuple[str, str]]:
    """Yield lost and gained stocks of one genotype, where it is the only one lost and the only one gained with it."""
    groups: dict[object, tuple[list[Stock], list[Stock]]] = {}
    for i, stocks in enumerate((lost, gained)):
        for stock in stocks:
            # wild types differ in what no genotype says: they are one only where the words are the same
            if stock.reading.ok:
                words = "" if stock.reading.elements else stock.genotype
                key = (stock.reading.canonical, stock.reading.female, stock.reading.male, words)
                groups.setdefault(key, ([], []))[i].append(stock)
    for gone, new in groups.values():
        if len(gone) == 1 and len(new) == 1:
            yield gone[0].name, new[0].name


def _changes(one: Stock, other: Stock) -> Iterator[Change]:
    name = other.name
    if one.genotype != other.genotype:
        yield from _genotype_changes(one, other)
    for field, words in FIELDS.items():
        before, after = getattr(one, field), getattr(other, field)
        if before != after:
            shown = [str(v) if v not in (None, "") else "nothing" for v in (before, after)]
            yield Change(words, name, f"{words} of {name}: {shown[0]} -> {shown[1]}", "", *shown)


def _genotype_changes(one: Stock, other: Stock) -> Iterator[Change]:
    name = other.name
    if not other.reading.ok or not one.reading.ok:
        kind = "unreadable" if one.reading.ok else "readable" if other.reading.ok else "genotype"
        words = {"unreadable": "can no longer be read", "readable": "can be read now", "genotype": "was changed"}[kind]
        yield Change(kind, name, f"genotype of {name} {words}: '{one.genotype}' -> '{other.genotype}'", "",
                     one.genotype, other.genotype)  # fmt: skip
        return
    flies = [(s.reading.female or s.reading.male) for s in (one, other)]
    is_open = flies[0] is None or flies[1] is None
    if is_open and (one.reading.canonical != other.reading.canonical or flies[0] is not flies[1]):
        yield Change("genotype", name, f"genotype of {name}: {_genotype(one)} -> {_genotype(other)}", "",
                     _genotype(one), _genotype(other))  # fmt: skip
        return
    changed = list(_by_chromosome(name, flies[0], flies[1])) if flies[0] and flies[1] else []
    if changed:
        yield from changed
    else:
        yield Change("spelling", name, f"genotype of {name} is spelt otherwise, and means the same", "",
                     one.genotype, other.genotype)  # fmt: skip


def _by_chromosome(name: str, one: Fly, other: Fly) -> Iterator[Change]:
    for chromosome, before, after in zip(PAIRS, one.pairs, other.pairs, strict=True):
        if before == after:
            continue
        had, has = _symbols(before), _symbols(after)
        words = []
        if gone := sorted(had - has):
            words.append(f"lost {', '.join(gone)}")
        if new := sorted(has - had):
            words.append(f"gained {', '.join(new)}")
        if not words:
            words.append("the same elements stand on other homologues, or in another number of copies")
        yield Change("genotype", name, f"{name}, chromosome {chromosome}: {_pair(before)} -> {_pair(after)}"
                     f" ({'; '.join(words)})", chromosome, _pair(before), _pair(after))  # fmt: skip


def _symbols(pair: Pair) -> set[str]:
    return {symbol for homologue in pair for symbol in homologue.symbols}


def _pair(pair: Pair) -> str:
    one, other = (" ".join(h.symbols) or "+" for h in pair)
    return one if pair[0] == pair[1] else f"{one}/{other}"
