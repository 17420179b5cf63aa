"""Balancers as people write them: by name, with a marker or a transgene hung on, and spelt wrongly."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import replace
from typing import Final

from crossplan.errors import Problem, Severity
from crossplan.genetics.catalogue import BalancerEntry, Catalogue
from crossplan.genetics.element import Element, Kind, Traits
from crossplan.genetics.notation_split import Item
from crossplan.genetics.notation_word import Evidence, SymbolReader, Word

_MARKED_BALANCER = re.compile(
    r"(?P<balancer>CyO|SM5|SM6a|TM1|TM2|TM3|TM6B|TM6C|TM6)(?P<marker>Sb|Ser|Tb|Hu|Ubx|Cy|Roi|e)1?"
)
_BALANCER_START = re.compile(r"(?i)(?:C[YO0]|TM\d|FM\d|SM\d|MKR|MRK)")
_LONGEST_BALANCER: Final = 8
_CARRIED: Final = re.compile(r"(?i)gfp|yfp|rfp|cherry|tom|gal4|lacz|flp|uas|dsred")


class BalancerReader(SymbolReader):
    """Reads balancers; `read` reads what is hung on one."""

    def __init__(self, catalogue: Catalogue, text: str, read: Callable[[Item, Element | None], list[Word]]) -> None:
        super().__init__(catalogue, text)
        self._read = read

    def plain(self, item: Item) -> Word | None:
        """Read the name of a balancer."""
        entry = self.catalogue.balancer(item.text)
        return None if entry is None else self.word(entry, item)

    def word(self, entry: BalancerEntry, item: Item) -> Word:
        """Return the word for a balancer of the catalogue."""
        notes: tuple[Problem, ...] = ()
        if item.text != entry.name:
            notes = (self.say(item, "spelling", f"{item.text} is read as {entry.name}"),)
        element = Element(entry.name, Kind.BALANCER, entry.chromosome, traits=entry.traits)
        return Word(element, (Evidence(entry.chromosome, f"the balancer {entry.name}"),), notes)

    def carried_by(self, item: Item, balancer: Element) -> Word | None:
        """Return the transgene of a balancer that the catalogue knows as one thing: the `Kr-GFP` of `CyO, Kr-GFP`."""
        if not _CARRIED.search(item.text) or "{" in item.text:
            return None
        entry = self.catalogue.balancer(f"{balancer.symbol},{item.text}")
        if entry is None or entry.chromosome != balancer.chromosome or entry.name == balancer.symbol:
            return None
        dominant = tuple(s for s in entry.traits.dominant if s not in balancer.traits.dominant)
        masks = entry.traits.masks - balancer.traits.masks
        restores = entry.traits.restores - balancer.traits.restores
        traits = Traits(dominant=dominant, restores=restores, masks=masks)
        return Word(Element(item.text, Kind.INSERTION, balancer.chromosome, traits=traits))

    def hung_on(self, item: Item) -> list[Word] | None:
        """Read a balancer with a marker or a transgene hung on its name: `TM3-Sb`, `TM6BTb`, `CyO-wgGFP`."""
        text = item.text
        run_on = _MARKED_BALANCER.fullmatch(text)
        if run_on is not None:
            return self._with(item, run_on.end("balancer"), run_on.end("balancer"))
        for i, char in enumerate(text[: _LONGEST_BALANCER + 1]):
            if char in "-.:_" and i >= 2 and self.catalogue.balancer(text[:i]) is not None:
                return self._with(item, i, i + 1)
        return None

    def _with(self, item: Item, end: int, begin: int) -> list[Word] | None:
        entry = self.catalogue.balancer(item.text[:end])
        rest = item.text[begin:].strip("-.:_")
        if entry is None or not rest:
            return None
        fused = self.catalogue.balancer(f"{entry.name},{rest}")
        if fused is not None:
            return [self.word(fused, item)]
        first = self.word(entry, Item(item.text[:end], item.start, item.start + end))
        second = Item(rest, item.end - len(rest), item.end)
        if self.catalogue.balancer(rest) is not None:
            return [self.fault(item, "two-balancers", f"'{item.text}' names two balancers",
                                "put a semicolon or a slash between them")]  # fmt: skip
        carried = self.carried_by(second, first.element) if first.element is not None else None
        if carried is not None:
            return [first, carried]
        if self.catalogue.marker(rest) is not None or _CARRIED.search(rest):
            return [first, *self._read(second, first.element)]
        variant = Element(item.text, Kind.BALANCER, entry.chromosome, traits=entry.traits)
        note = self.say(item, "balancer-variant", f"{item.text} is taken for a form of {entry.name} that shows the same",
                         f"write {entry.name} and what it carries, if it shows more", Severity.WARNING)  # fmt: skip
        return [Word(variant, first.evidence, (note,))]

    def typo(self, item: Item, balancer: Element | None) -> Word | None:
        """Return why a symbol seems to be a balancer spelt wrongly; `balancer` is one that stands before it."""
        text = item.text
        inside = self._inside(text)
        if inside:
            return self.fault(item, "balancer-inside", f"'{text}' holds the name of the balancer {inside}, but not as a"
                               " symbol by itself", "put a semicolon, a slash or a comma where it belongs")  # fmt: skip
        if balancer is not None or len(text) > _LONGEST_BALANCER:
            return None
        near = self.catalogue.is_balancer_like(text) if _BALANCER_START.match(text) else None
        if near is None or self.catalogue.marker(text) is not None:
            return None
        turned = (b.name for b in self.catalogue.balancers() if sorted(b.name.lower()) == sorted(text.lower()))
        near = next(turned, near)
        return self.fault(item, "balancer-typo", f"'{text}' is no balancer that the catalogue knows",
                           f"perhaps {near}; correct it, or add the balancer to the lab's catalogue")  # fmt: skip

    def _inside(self, text: str) -> str:
        """Return the balancer that stands inside a longer symbol, divided from the rest by a sign."""
        if text.isalnum() or "{" in text:
            return ""
        for token in re.split(r"[^A-Za-z0-9]+", text):
            if len(token) >= 3 and token != text and re.match(r"(?i)cyo|[tsf]m\d", token):
                entry = self.catalogue.balancer(token)
                if entry is not None:
                    return entry.name
        return ""

    def with_assumed_marker(self, element: Element, item: Item) -> tuple[Element, Problem | None]:
        """Return a balancer written without a marker with the one that it usually carries, and what to say of it."""
        entry = self.catalogue.balancer(element.symbol)
        if entry is None or not entry.assumed or entry.traits == entry.traits_assumed:
            return element, None
        markers = ", ".join(entry.assumed)
        note = self.say(
            item, "assumed-marker", f"{entry.name} is written without a marker and taken to carry {markers}"
            f" ({entry.assumed_reason})", f"write {entry.name}, {markers} if it does", Severity.WARNING,
        )  # fmt: skip
        return replace(element, traits=entry.traits_assumed), note
