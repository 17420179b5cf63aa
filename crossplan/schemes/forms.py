"""The shelf reduced to what one wish can use.

A stock list holds thousands of elements, and a wish for three of them cannot tell most of the others apart. Every
element is replaced by one representative of its role (what it shows, covers, restores and kills, whether the wish
asks for it or forbids it, whether its place is known, and whether it stands at a place that a wanted element needs); elements
without any role are left out. Stocks that become equal are one *form*. Wanted elements are renamed by their number in the
wish, so that two targets that ask for the same thing of equal shelves are one problem.

What the bulk of a shelf is to a wish depends only on what the wish forbids and on the places of its elements, so it is
reduced once (`Background`); for each wish only the stocks that carry its elements are looked at again.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.element import Element, Kind, Traits
from crossplan.genetics.fly import Fly, Homologue, make_pair
from crossplan.schemes.wish import Wish

Role = tuple[object, ...]
Place = tuple[str, object]


def lethals_told_apart(generations: int) -> int:
    """Return how many lethals of one kind a scheme of so many generations can need.

    Two lethals must differ where one fly holds both; a scheme has 2^n - 1 bred flies, and that many pairs keep no more than k
    lethals apart from each other with k (k - 1) / 2 pairs. Where two need not differ, one will do for both.
    """
    pairs = 2**generations - 1
    most = 1
    while (most + 1) * most // 2 <= pairs:
        most += 1
    return most


@dataclass(frozen=True)
class Source:
    """A stock as the search sees it: its name, and the fly of either sex that can be taken from it."""

    name: str
    female: Fly | None
    male: Fly | None

    @property
    def flies(self) -> tuple[Fly, ...]:
        return tuple(f for f in (self.female, self.male) if f is not None)


@dataclass(frozen=True)
class Form:
    """A kind of stock: what its females and males are once reduced, and the best stock of that kind."""

    female: Fly | None
    male: Fly | None
    stock: str


@dataclass(frozen=True)
class ReducedShelf:
    """All forms of a shelf for one wish, and the wish in their terms.

    `key` is what two searches with the same answer have in common (names of stocks left out).
    """

    forms: tuple[Form, ...]
    wish: Wish
    key: tuple[object, ...]


def usable_sources(sources: Iterable[Source]) -> tuple[Source, ...]:
    """Leave out stocks that tie chromosomes 2 and 3 together: the search does not use translocation balancers."""
    return tuple(s for s in sources if not any(_is_linked(f) for f in s.flies))


def _is_linked(fly: Fly) -> bool:
    return any(e.traits.linked_to for e in fly.elements())


class ShelfIndex:
    """A shelf looked at once: its elements, who carries them, and what it is to wishes of one kind."""

    def __init__(self, sources: Sequence[Source], distrust: frozenset[str] = frozenset(), generations: int = 4) -> None:
        """Look at a shelf.

        Args:
            sources: the stocks, best first where several are equal.
            distrust: markers and signs that the lab does not rely on.
            generations: how far it will be searched.
        """
        self.sources = tuple(sources)
        self.distrust = distrust
        self.lethals_of_a_kind = lethals_told_apart(generations)
        self.carriers: dict[Element, list[int]] = {}
        self.by_symbol: dict[str, list[Element]] = {}
        for i, source in enumerate(self.sources):
            for element in dict.fromkeys(e for fly in source.flies for e in fly.elements()):
                self.carriers.setdefault(element, []).append(i)
        for element in self.carriers:
            self.by_symbol.setdefault(element.symbol, []).append(element)
        self.private = _private_groups(self.carriers)
        self._backgrounds: dict[tuple[frozenset[str], frozenset[Place]], Background] = {}

    def background(self, wish: Wish, places: frozenset[Place]) -> Background:
        """Return the whole shelf as wishes see it that forbid the same and stand at these places."""
        key = (wish.forbid, places)
        found = self._backgrounds.get(key)
        if found is None:
            found = self._backgrounds[key] = Background(self, wish, places, len(self._backgrounds))
        return found

    def only_lethal(self, stock: int) -> Element | None:
        """Return the one element with a lethal of its own that a stock carries (balancers apart) and no other stock does."""
        elements = dict.fromkeys(e for fly in self.sources[stock].flies for e in fly.elements())
        own = [e for e in elements if self.has_own_lethal(e) and not e.is_balancer]
        return own[0] if len(own) == 1 and len(self.carriers[own[0]]) == 1 else None

    def has_own_lethal(self, element: Element) -> bool:
        """Return whether the element carries a lethal that no other element of the shelf carries."""
        return not self.private.isdisjoint(element.traits.lethal)


class Background:
    """A shelf without regard to which elements a wish asks for: every stock in terms of representatives."""

    def __init__(self, shelf: ShelfIndex, wish: Wish, places: frozenset[Place], number: int) -> None:
        self.shelf = shelf
        self.wish = replace(wish, components=())
        self.places = places
        self.number = number
        self._representative: dict[Role, Element] = {}
        self._reduced: dict[Element, Element | None] = {}
        for element in sorted(shelf.carriers, key=lambda e: (e.symbol, e.site, repr(e.traits))):
            self._reduced[element] = self._reduce(element)
        self.homologues: dict[Homologue, Homologue] = {}
        kinds: dict[tuple[Fly | None, Fly | None], list[int]] = {}
        lethals = self._told_apart()
        for i, source in enumerate(shelf.sources):
            if lethals[i]:
                flies = tuple(self.fly(f) if f is not None else None for f in (source.female, source.male))
                kinds.setdefault((flies[0], flies[1]), []).append(i)
        ordered = sorted(kinds.items(), key=lambda item: _form_order(item[0]))
        self.forms = tuple(Form(f, m, shelf.sources[stocks[0]].name) for (f, m), stocks in ordered)
        self.stocks = [stocks for _, stocks in ordered]
        self.forbidden = frozenset(
            new.symbol for old, new in self._reduced.items() if new is not None and self.wish.forbids(old)
        )
        self.form_of = {i: n for n, stocks in enumerate(self.stocks) for i in stocks}

    def _told_apart(self) -> list[bool]:
        """Return for each stock whether it is needed: of stocks alike but for one lethal of their own, the first few are."""
        seen: dict[object, int] = {}
        needed = []
        for i, source in enumerate(self.shelf.sources):
            own = self.shelf.only_lethal(i)
            if own is None:
                needed.append(True)
                continue
            kind = tuple(
                (name, tuple(sorted(self._anonymous(e, own) for e in h.elements)))
                for fly in source.flies
                for name, h in fly.homologues()
            )
            seen[kind] = seen.get(kind, 0) + 1
            needed.append(seen[kind] <= self.shelf.lethals_of_a_kind)
        return needed

    def _anonymous(self, element: Element, own: Element) -> str:
        """Return the role of an element, without the name of the lethal that only this stock carries."""
        reduced = self._reduced[element]
        if reduced is None or element != own:
            return reduced.symbol if reduced is not None else ""
        place = _place(element)
        traits = replace(element.traits, lethal=element.traits.lethal - self.shelf.private)
        return f"own lethal {element.kind} {traits} {place is None} {place if place in self.places else None}"

    def _reduce(self, element: Element) -> Element | None:
        forbidden = self.wish.forbids(element)
        traits = self.seen_traits(element)
        if traits == Traits() and not forbidden and not element.is_balancer and element.kind is not Kind.Y:
            return None
        place = _place(element)
        role: Role = (
            element.kind if element.kind in (Kind.BALANCER, Kind.Y) else None,
            element.chromosome,
            traits,
            forbidden,
            place is None,
            place if place in self.places else None,
        )
        if self.shelf.has_own_lethal(element):
            role = (*role, element.symbol)
        if role not in self._representative:
            name = f"role {len(self._representative) + 1}" if element.kind is not Kind.Y else element.symbol
            self._representative[role] = replace(element, symbol=name, standard="", component="", traits=traits)
        return self._representative[role]

    def seen_traits(self, element: Element) -> Traits:
        """Return what the element does, without the looks of a marker that nobody here relies on."""
        if element.symbol in self.shelf.distrust or element.gene in self.shelf.distrust:
            return replace(element.traits, dominant=(), recessive=())
        return element.traits

    def reduced(self, element: Element) -> Element | None:
        """Return the representative of an element; None for one without a role."""
        return self._reduced[element]

    def homologue(self, homologue: Homologue) -> Homologue:
        """Return the homologue in terms of representatives."""
        found = self.homologues.get(homologue)
        if found is None:
            kept = (self._reduced[e] for e in homologue.elements)
            found = self.homologues[homologue] = Homologue.of(*dict.fromkeys(e for e in kept if e is not None))
        return found

    def fly(self, fly: Fly) -> Fly:
        """Return the fly in terms of representatives."""
        pairs = [make_pair(self.homologue(a), self.homologue(b)) for a, b in fly.pairs]
        return Fly(fly.sex, (pairs[0], pairs[1], pairs[2], pairs[3]))


class Reducer:
    """Replaces elements by the representatives of their roles, for one wish and one shelf."""

    def __init__(self, shelf: ShelfIndex, wish: Wish) -> None:
        self.wish = wish
        self._number = {symbol: i for i, symbol in enumerate(wish.symbols)}
        wanted = [e for symbol in self._number for e in shelf.by_symbol.get(symbol, ())]
        self.background = shelf.background(wish, frozenset(p for e in wanted if (p := _place(e)) is not None))
        #: stocks that are looked at again: carriers of wanted elements
        self.special: list[int] = sorted({i for e in wanted for i in shelf.carriers[e]})
        self._own: dict[Element, Element] = {}
        self._renamed: dict[Element, Element] = {e: self._as_wanted(e, shelf) for e in wanted}
        self._name_lethals(shelf)
        self._homologues: dict[Homologue, Homologue] = {}

    def _as_wanted(self, element: Element, shelf: ShelfIndex) -> Element:
        return self._named(element, f"wanted {self._number[element.symbol] + 1}", shelf)

    def _named(self, element: Element, name: str, shelf: ShelfIndex) -> Element:
        """Return the element under another name; lethals that only it carries are named after it."""
        traits = self.background.seen_traits(element)
        lethal = frozenset(name if group in shelf.private else group for group in traits.lethal)
        return replace(element, symbol=name, standard="", component="", traits=replace(traits, lethal=lethal))

    def _name_lethals(self, shelf: ShelfIndex) -> None:
        """Name the lethals that only the carriers of wanted elements carry by their order, whatever they are called."""
        special = set(self.special)
        for i in self.special:
            for element in dict.fromkeys(e for fly in shelf.sources[i].flies for e in fly.elements()):
                if element in self._renamed or element.is_balancer or not shelf.has_own_lethal(element):
                    continue
                if special.issuperset(shelf.carriers[element]):
                    named = self._named(element, f"own {len(self._own) + 1}", shelf)
                    self._own[element] = self._renamed[element] = named

    def homologue(self, homologue: Homologue) -> Homologue:
        """Return the homologue in terms of representatives."""
        found = self._homologues.get(homologue)
        if found is None:
            if self._renamed.keys().isdisjoint(homologue.elements):
                return self.background.homologue(homologue)
            kept = (self._renamed.get(e) or self.background.reduced(e) for e in homologue.elements)
            found = self._homologues[homologue] = Homologue.of(*dict.fromkeys(e for e in kept if e is not None))
        return found

    def fly(self, fly: Fly) -> Fly:
        """Return the fly in terms of representatives."""
        pairs = [make_pair(self.homologue(a), self.homologue(b)) for a, b in fly.pairs]
        return Fly(fly.sex, (pairs[0], pairs[1], pairs[2], pairs[3]))

    def reduced_wish(self) -> Wish:
        """Return the wish in terms of representatives."""
        own = frozenset(new.symbol for old, new in self._own.items() if self.background.wish.forbids(old))
        components = tuple(
            (f"wanted {i + 1}", place, copies) for i, (_, place, copies) in enumerate(self.wish.components)
        )
        return replace(self.wish, components=components, forbid=self.background.forbidden | own)


def _place(element: Element) -> Place | None:
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


def reduce_shelf(shelf: ShelfIndex, wish: Wish) -> tuple[ReducedShelf, Reducer]:
    """Return the forms of the shelf for `wish`; of equal stocks the first on the shelf represents its form."""
    reducer = Reducer(shelf, wish)
    special = set(reducer.special)
    found: dict[tuple[Fly | None, Fly | None], str] = {}
    for i in reducer.special:
        source = shelf.sources[i]
        female = reducer.fly(source.female) if source.female is not None else None
        male = reducer.fly(source.male) if source.male is not None else None
        found.setdefault((female, male), source.name)
    own = [Form(female, male, stock) for (female, male), stock in found.items()]
    own.sort(key=lambda f: _form_order((f.female, f.male)))
    rest, changed = _without(reducer.background, special)
    wished = reducer.reduced_wish()
    key = (reducer.background.number, changed, tuple((f.female, f.male) for f in own), wished)
    return ReducedShelf((*own, *rest), wished, key), reducer


def _without(background: Background, special: set[int]) -> tuple[tuple[Form, ...], tuple[int, ...]]:
    """Return the forms of the background without these stocks, and the numbers of those that vanish."""
    touched = {background.form_of[i] for i in special if i in background.form_of}
    forms = list(background.forms)
    gone = []
    for n in sorted(touched):
        left = [i for i in background.stocks[n] if i not in special]
        if left:
            forms[n] = replace(forms[n], stock=background.shelf.sources[left[0]].name)
        else:
            gone.append(n)
    for n in reversed(gone):
        del forms[n]
    return tuple(forms), tuple(gone)


def _form_order(flies: tuple[Fly | None, Fly | None]) -> tuple[object, ...]:
    fly = flies[0] or flies[1]
    assert fly is not None, "a source without flies"
    return tuple(h.symbols for name in PAIRS for h in fly.pair(name))
