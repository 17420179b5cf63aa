"""From placed homologues to the female and the male that a genotype stands for.

* A homologue written alone is homozygous; an unwritten chromosome is wild type.
* A genotype without a Y serves both sexes. Where the X is heterozygous the males of such a stock are of two kinds; the
  one taken is the first X as written that is no balancer and does not kill a male, and a note says so.
* `C(1)DX, y f/Y` is the female of an attached-X stock; her sons have their father's X, which is the other X if one is
  written, else taken as wild type (Morgan 1922, Biol. Bull. 42:267).
* A translocation balancer of 2 and 3 stands on both.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

from crossplan.errors import Problem, Severity
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.chromosome import FEMALE, MALE, PAIRS, Sex
from crossplan.genetics.element import Element, Kind
from crossplan.genetics.fly import WILD_TYPE, Fly, Homologue, Pair, Y
from crossplan.genetics.notation_clean import problem
from crossplan.genetics.notation_place import ReadField, ReadHalf
from crossplan.genetics.survival import lethal_groups

_Homologues = tuple[Homologue, ...]


@dataclass(frozen=True)
class Flies:
    """The flies of one genotype, the sex that it names, and what is to be said of them."""

    female: Fly | None
    male: Fly | None
    written_sex: Sex | None
    elements: tuple[Element, ...]
    problems: tuple[Problem, ...]


def homologue_of(half: ReadHalf, name: str = "") -> Homologue:
    """Return the homologue that was read, with its elements on chromosome `name`."""
    made = half.content.homologues.get(name)
    if made is None:
        elements = [w.element for w in half.words if w.element is not None]
        made = Homologue.of(*dict.fromkeys(_on(e, name) for e in elements)) if elements else WILD_TYPE
        half.content.homologues[name] = made
    return made


def _on(element: Element, name: str) -> Element:
    """Return the element as it is on chromosome `name`; a gene elsewhere than at home has no place on the map."""
    if not name or element.kind is Kind.Y or element.chromosome == name:
        return element
    if element.chromosome:
        return replace(element, chromosome=name, position_cM=None)
    return replace(element, chromosome=name)


def build_flies(placed: Mapping[str, ReadField], catalogue: Catalogue, text: str) -> Flies:
    """Return the flies of the placed fields; both None when they contradict a fly, with the error."""
    return _Builder(placed, catalogue, text).run()


class _Builder:
    def __init__(self, placed: Mapping[str, ReadField], catalogue: Catalogue, text: str) -> None:
        self.placed = placed
        self.catalogue = catalogue
        self.text = text
        self.problems: list[Problem] = []

    def run(self) -> Flies:
        written = {name: self._homologues(name) for name in PAIRS}
        linked = self._link(written)
        female_x, male_x, sex = self._x_pairs(linked["X"])
        elements = self._in_order(linked)
        if any(p.severity is Severity.ERROR for p in self.problems):
            return Flies(None, None, sex, elements, tuple(self.problems))
        autosomes = [(linked[n][0], linked[n][-1]) for n in PAIRS[1:]]
        self._doubled_balancers(autosomes)
        female = Fly.of(FEMALE, female_x, *autosomes) if female_x is not None else None
        male = Fly.of(MALE, male_x, *autosomes) if male_x is not None else None
        return Flies(female, male, sex, elements, tuple(self.problems))

    def _say(self, code: str, severity: Severity, message: str, name: str, hint: str = "") -> None:
        field = self.placed.get(name)
        start, end = (field.field.start, field.field.end) if field is not None else (0, len(self.text))
        self.problems.append(problem(code, severity, message, self.text, start, end, hint))

    def _homologues(self, name: str) -> _Homologues:
        field = self.placed.get(name)
        if field is None or not field.halves:
            return (WILD_TYPE,)
        return tuple(homologue_of(h, name) for h in field.halves)

    def _in_order(self, homologues: Mapping[str, _Homologues]) -> tuple[Element, ...]:
        found = dict.fromkeys(e for name in PAIRS for h in homologues[name] for e in h.elements)
        return tuple(e for e in found if e.symbol != "Y")

    # -- translocation balancers ---------------------------------------------------------------------------------

    def _third_part(self, second: Homologue) -> Homologue | None:
        """Return what a translocation balancer on chromosome 2 has on chromosome 3."""
        balancer = second.balancer
        if balancer is None or balancer.traits.linked_to != "3":
            return None
        entry = self.catalogue.balancer(balancer.symbol)
        part = self.catalogue.linked_part(entry) if entry is not None else None
        return Homologue.of(Element(part.name, Kind.BALANCER, "3", traits=part.traits)) if part is not None else None

    def _link(self, written: Mapping[str, _Homologues]) -> dict[str, _Homologues]:
        """Give chromosome 3 its part of each translocation balancer that is written on 2."""
        out = dict(written)
        parts = [self._third_part(h) for h in out["2"]]
        if not any(parts):
            if any(h.balancer and h.balancer.traits.linked_to for h in out["3"]):
                self._say("linked", Severity.ERROR, "a translocation balancer stands on chromosome 3 but not on 2", "3",
                          "write it in both fields")  # fmt: skip
            return out
        on_three = [self._is_linked(h) for h in out["3"]]
        if any(on_three):
            if sum(on_three) * len(out["2"]) != sum(p is not None for p in parts) * len(out["3"]):
                self._say("linked", Severity.ERROR, "the translocation balancer is not on the same number of homologues"
                          " of 2 and 3", "3", "write it in both fields")  # fmt: skip
            return out
        self._complete(out, parts)
        return out

    def _is_linked(self, homologue: Homologue) -> bool:
        return homologue.balancer is not None and bool(homologue.balancer.traits.linked_to)

    def _complete(self, out: dict[str, _Homologues], parts: Sequence[Homologue | None]) -> None:
        partner = next((h for h, p in zip(out["2"], parts, strict=True) if p is None and h.elements), None)
        third = next(p for p in parts if p is not None)
        name = third.symbols[0]
        if partner is not None and "3" not in self.placed:
            self._say("linked", Severity.ERROR, f"{name} takes one homologue of chromosome 3 too, and nothing says what"
                      " stands opposite there", "2", f"write the field of chromosome 3, such as +/{name}")  # fmt: skip
            return
        others = [h for h in out["3"] if h.elements]
        if len(parts) == 1 or None not in parts:
            out["3"] = (third,)
            fits = not others
        else:
            out["3"] = (others[0] if others else WILD_TYPE, third)
            fits = len(others) <= 1 and (not others or len(self.placed["3"].halves) == 1)
        if not fits:
            self._say("linked", Severity.ERROR, f"{name} takes one homologue of chromosome 3 too, which is not written"
                      " there", "3", f"write it on both chromosomes, such as +/{name}")  # fmt: skip
        else:
            self._say("linked-part", Severity.NOTE, f"{name} is put on chromosome 3 too", "2")

    # -- autosomes -----------------------------------------------------------------------------------------------

    def _doubled_balancers(self, autosomes: Sequence[Pair]) -> None:
        for name, (first, second) in zip(PAIRS[1:], autosomes, strict=True):
            if first == second and first.balancer is not None and first.balancer.traits.lethal:
                self._say("balancer-twice", Severity.WARNING, f"flies with two copies of {first.balancer.symbol} die",
                          name, f"write {first.balancer.symbol}/+ if one copy is meant")  # fmt: skip
            elif lethal_groups(first) & lethal_groups(second):
                groups = ", ".join(sorted(lethal_groups(first) & lethal_groups(second)))
                self._say("dead-fly", Severity.NOTE, f"flies of this genotype die: no working copy of {groups}", name,
                          "write the other homologue if the fly has one")  # fmt: skip

    # -- the X pair ----------------------------------------------------------------------------------------------

    def _x_pairs(self, homologues: _Homologues) -> tuple[Pair | None, Pair | None, Sex | None]:
        """Return the X pair of the female and of the male, and the sex that the text names."""
        field = self.placed.get("X")
        xs = [h for h in homologues if not h.is_y]
        ys = [h for h in homologues if h.is_y]
        compounds = [h for h in xs if h.is_compound]
        compound = compounds[0] if compounds else None
        if not xs or len(ys) > 1 or len(compounds) > 1 or (compound is None and len(homologues) > 2):
            what = "no X is written" if not xs else "two Y are written" if len(ys) > 1 else "too many X are written"
            self._say("sex-chromosomes", Severity.ERROR, what, "X", "a female is X/X, a male X/Y")
            return None, None, None
        y = ys[0] if ys else Y
        if compound is not None:
            return self._attached_x(compound, xs, y)
        if ys:
            return (xs[0], xs[0]), (xs[0], y), MALE
        first, second = xs[0], xs[-1]
        if field is not None and any(h.content.or_y for h in field.halves):
            self._say("or-y", Severity.NOTE, "read as two flies: a female with both X, a male with the first", "X")
            return (first, second), (first, Y), None
        if len(xs) == 2 and field is not None:
            self._careless_y(field)
        if first == second:
            return (first, first), (first, Y), None if len(xs) == 1 else FEMALE
        return (first, second), (self._male_x(first, second), Y), FEMALE

    def _attached_x(self, compound: Homologue, xs: Sequence[Homologue], y: Homologue) -> tuple[Pair, Pair, Sex]:
        others = [h for h in xs if h is not compound]
        if not others:
            self._say("attached-x-males", Severity.NOTE, "the males of this attached-X stock are taken to have a"
                      " wild-type X, since none is written", "X")  # fmt: skip
        return (compound, y), (others[0] if others else WILD_TYPE, y), FEMALE

    def _male_x(self, first: Homologue, second: Homologue) -> Homologue:
        candidates = sorted((first, second), key=lambda h: (_kills_males(h), h.balancer is not None))
        chosen = candidates[0]
        self._say("males-of-stock", Severity.NOTE, "males of two kinds are possible; those meant are taken to carry"
                  f" {' '.join(chosen.symbols) or '+'}", "X", "write .../Y for a male")  # fmt: skip
        return chosen

    def _careless_y(self, field: ReadField) -> None:
        """Doubt a small y beside the slash: yellow, or a Y?"""
        first, second = field.halves[0], field.halves[-1]
        word = second.words[0] if second.words else None
        if word is None or word.element is None or word.element.symbol != "y":
            return
        if any(w.element is not None and w.element.gene == "y" for w in first.words):
            return
        alone = len(second.words) == 1
        if alone or "y," in self.text[second.start : second.end].replace(" ", ""):
            self._say("y-or-yellow", Severity.ERROR, "a small y after the slash: the gene yellow, or a Y?", "X",
                      "write y[1] for yellow, or Y for a male")  # fmt: skip


def _kills_males(homologue: Homologue) -> bool:
    return any(e.traits.lethal or e.traits.male_lethal for e in homologue.elements)
