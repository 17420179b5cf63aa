"""The shelf reduced to what one wish can use.

A stock list holds thousands of elements, and a wish for three of them cannot tell most of the others apart. Every
element is replaced by one representative of its role (what it shows, covers, restores and kills, whether the wish
asks for it or forbids it, and whether it stands at a place that a wanted element needs); elements without any role are
left out. Stocks that become equal are one *form*. Wanted elements are renamed by their number in the wish, so that two
targets that ask for the same thing of equal shelves are one problem.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.element import Element, Kind, Traits
from crossplan.genetics.fly import Fly, Homologue, make_pair
from crossplan.schemes.wish import Wish

Role = tuple[object, ...]

#: stands for a lethal group that a single element of the shelf carries
PRIVATE = "private"
#: how many lethals that differ in nothing but their group are told apart; a scheme has no use for more of them
LETHALS_OF_A_ROLE = 4


@dataclass(frozen=True)
class Source:
    """A stock as the search sees it: its name, and the fly of either sex that can be taken from it."""

    name: str
    female: Fly | None
    male: Fly | None


@dataclass(frozen=True)
class Form:
    """A kind of stock: what its females and males are once reduced, and the best stock of that kind."""

    female: Fly | None
    male: Fly | None
    stock: str


@dataclass(frozen=True)
class ReducedShelf:
    """All forms of a shelf for one wish, and the wish in their terms."""

    forms: tuple[Form, ...]
    wish: Wish

    @property
    def key(self) -> tuple[object, ...]:
        """What two searches with the same answer have in common (names of stocks left out)."""
        return (tuple((f.female, f.male) for f in self.forms), self.wish)


def usable_sources(sources: Iterable[Source]) -> tuple[Source, ...]:
    """Leave out stocks that tie chromosomes 2 and 3 together: the search does not use translocation balancers."""
    return tuple(s for s in sources if not any(_is_linked(f) for f in (s.female, s.male) if f is not None))


def _is_linked(fly: Fly) -> bool:
    return any(e.traits.linked_to for e in fly.elements())


class Reducer:
    """Replaces elements by the representatives of their roles, for one wish and one shelf."""

    def __init__(self, sources: Sequence[Source], wish: Wish) -> None:
        self.wish = wish
        self._number = {symbol: i for i, symbol in enumerate(wish.symbols)}
        elements = {e for s in sources for fly in (s.female, s.male) if fly is not None for e in fly.elements()}
        self._places = {p for e in elements if e.symbol in self._number and (p := _place(e)) is not None}
        self._private = _private_groups(elements) - {
            group for e in elements if e.symbol in self._number for group in e.traits.lethal
        }
        self._representative: dict[Role, Element] = {}
        self._lethals: dict[Role, int] = {}
        self._reduced: dict[Element, Element | None] = {}
        for element in sorted(elements, key=lambda e: (e.symbol, e.site, repr(e.traits))):
            self._reduced[element] = self._reduce(element)

    def _reduce(self, element: Element) -> Element | None:
        number = self._number.get(element.symbol)
        if number is not None:
            return replace(element, symbol=f"wanted {number + 1}", standard="")
        forbidden = self.wish.forbids(element)
        traits = self._traits(element)
        if traits == Traits() and not forbidden and not element.is_balancer and element.kind is not Kind.Y:
            return None
        place = _place(element)
        role: Role = (
            element.kind if element.kind in (Kind.BALANCER, Kind.Y) else None,
            element.chromosome,
            traits,
            forbidden,
            place if place in self._places else None,
        )
        if PRIVATE in traits.lethal:
            # lethals that complement each other must stay apart: the first few of a role are kept as themselves
            self._lethals[role] = min(self._lethals.get(role, 0) + 1, LETHALS_OF_A_ROLE)
            role = (*role, self._lethals[role])
        if role not in self._representative:
            name = f"role {len(self._representative) + 1}" if element.kind is not Kind.Y else element.symbol
            named = replace(traits, lethal=frozenset(name if g == PRIVATE else g for g in traits.lethal))
            self._representative[role] = replace(element, symbol=name, standard="", component="", traits=named)
        return self._representative[role]

    def _traits(self, element: Element) -> Traits:
        traits = element.traits
        lethal = frozenset(PRIVATE if g in self._private else g for g in traits.lethal)
        return replace(traits, lethal=lethal)

    def homologue(self, homologue: Homologue) -> Homologue:
        """Return the homologue in terms of representatives."""
        kept = (self._reduced[e] for e in homologue.elements)
        return Homologue.of(*dict.fromkeys(e for e in kept if e is not None))

    def fly(self, fly: Fly) -> Fly:
        """Return the fly in terms of representatives."""
        pairs = [make_pair(self.homologue(a), self.homologue(b)) for a, b in fly.pairs]
        return Fly(fly.sex, (pairs[0], pairs[1], pairs[2], pairs[3]))

    def reduced_wish(self) -> Wish:
        """Return the wish in terms of representatives."""
        forbidden = {new.symbol for old, new in self._reduced.items() if new is not None and self.wish.forbids(old)}
        components = tuple(
            (f"wanted {i + 1}", place, copies) for i, (_, place, copies) in enumerate(self.wish.components)
        )
        return replace(self.wish, components=components, forbid=frozenset(forbidden))


def _place(element: Element) -> tuple[str, object] | None:
    if element.site:
        return ("site", element.site)
    if element.position_cM is not None:
        return ("cM", element.position_cM)
    return None


def _private_groups(elements: Iterable[Element]) -> frozenset[str]:
    """Return the lethal groups that only one element of the shelf carries: they differ in nothing but the name."""
    carriers: dict[str, set[str]] = {}
    for element in elements:
        for group in element.traits.lethal:
            carriers.setdefault(group, set()).add(element.symbol)
    return frozenset(group for group, symbols in carriers.items() if len(symbols) == 1)


def reduce_shelf(sources: Sequence[Source], wish: Wish) -> tuple[ReducedShelf, Reducer]:
    """Return the forms of the shelf for `wish`; of equal stocks the first in `sources` represents its form."""
    reducer = Reducer(sources, wish)
    found: dict[tuple[Fly | None, Fly | None], str] = {}
    for source in sources:
        female = reducer.fly(source.female) if source.female is not None else None
        male = reducer.fly(source.male) if source.male is not None else None
        found.setdefault((female, male), source.name)
    forms = [Form(female, male, stock) for (female, male), stock in found.items()]
    forms.sort(key=_form_order)
    return ReducedShelf(tuple(forms), reducer.reduced_wish()), reducer


def _form_order(form: Form) -> tuple[object, ...]:
    fly = form.female or form.male
    assert fly is not None, "a source without flies"
    return tuple(h.symbols for name in PAIRS for h in fly.pair(name))
