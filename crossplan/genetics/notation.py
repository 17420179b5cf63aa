"""Genotype text to flies and back.

What a genotype says about its chromosomes is taken in this order of evidence: a symbol that names its chromosome
(`Df(2L)...`, `l(3)...`), a balancer, a landing site, a stated label `(II)`, a marker gene, what other rows of the same list
say of the symbol, the number of an insertion, and last the place between semicolons. The place counts only
where the genotype is written in places: three or four fields, an empty or `+` field, or lab shorthand throughout. Two
pieces of evidence that disagree are an error, not a guess.

Three results only: understood; understood with a stated assumption (`Reading.assumed`); not understood, with the
characters, the reason and the closest reading.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from crossplan.errors import GenotypeError, Problem, Severity
from crossplan.genetics.catalogue import Catalogue, default_catalogue
from crossplan.genetics.chromosome import FEMALE, MALE, PAIRS, Sex
from crossplan.genetics.element import Element, Kind
from crossplan.genetics.fly import WILD_TYPE, Fly, Homologue, Pair, Y
from crossplan.genetics.notation_clean import Cleaned, clean, problem
from crossplan.genetics.notation_element import Word, WordReader
from crossplan.genetics.notation_split import Field, Half, Item, split_genotype
from crossplan.genetics.notation_write import fly_json as fly_json
from crossplan.genetics.notation_write import format_genotype as format_genotype

#: names of wild-type stocks, lower case (common practice, no source)
WILD_TYPE_NAMES = frozenset(
    ("+", "wt", "wild type", "wildtype", "wild-type", "canton-s", "canton s", "cantons", "cs", "oregon-r", "oregon r", "ore-r",
     "orer", "berlin", "berlin-k", "swedish-c")
)  # fmt: skip
_CHOICES = frozenset(("or", "and", "&", "oder"))


@dataclass(frozen=True)
class Reading:
    """What was understood of one genotype.

    Attributes:
        text: as it was typed.
        ok: whether it was understood, with or without a stated assumption.
        female, male: the fly of either sex; None when not understood, or when no such fly exists.
        canonical: the short form of what was read; empty when not understood.
        elements: every element once, in the order of writing.
        problems: everything to be said of it; `start` and `end` count characters of `text`.
        written_sex: the sex that the text itself names (`/Y`: male), else None.
    """

    text: str
    ok: bool
    female: Fly | None = None
    male: Fly | None = None
    canonical: str = ""
    elements: tuple[Element, ...] = ()
    problems: tuple[Problem, ...] = ()
    written_sex: Sex | None = None

    @property
    def assumed(self) -> bool:
        """Whether something was assumed that a person may want to confirm."""
        return self.ok and any(p.severity is Severity.WARNING for p in self.problems)

    def fly(self, sex: Sex) -> Fly | None:
        """Return the fly of `sex`."""
        return self.female if sex == FEMALE else self.male


@dataclass(frozen=True)
class _Part:
    """A field with its homologues read."""

    field: Field
    homologues: tuple[Homologue, ...]
    words: tuple[tuple[Word, ...], ...]

    def evidence(self, weak: bool) -> dict[str, str]:
        """Return the chromosomes that the words speak for, with the reason."""
        found: dict[str, str] = {}
        for words in self.words:
            balanced = any(w.element is not None and w.element.is_balancer for w in words)
            for word in words:
                marker = word.element is not None and word.element.kind is Kind.ALLELE
                if word.evidence and word.weak == weak and not (balanced and marker):
                    found.setdefault(word.evidence, word.because)
        return found


def read_genotype(text: str, catalogue: Catalogue | None = None, known: Mapping[str, Element] | None = None) -> Reading:
    """Return what was understood of a genotype; never raises, whatever the text.

    Args:
        text: the genotype as typed.
        catalogue: facts to read it with; the shipped ones by default.
        known: elements of the same stock list by symbol, whose chromosome settles what the text leaves open.
    """
    return _Reader(text, catalogue or default_catalogue(), known or {}).read()


class _Reader:
    def __init__(self, text: str, catalogue: Catalogue, known: Mapping[str, Element]) -> None:
        self.text = text
        self.catalogue = catalogue
        self.known = known
        self.problems: list[Problem] = []
        self.cleaned: Cleaned = clean(text)

    def read(self) -> Reading:
        self.problems += self.cleaned.problems
        if self.cleaned.refused:
            return self._refused()
        if self.cleaned.text.strip().lower() in WILD_TYPE_NAMES:
            self._add(
                "wild-type-stock", Severity.NOTE, f"{self.text.strip()} is read as wild type", 0, len(self.cleaned.text)
            )
            return self._build({})
        fields, fault = split_genotype(self.cleaned.text)
        if fault is not None:
            return self._fail(fault)
        parts = [self._third_part(self._part(f)) if i == 2 else self._part(f) for i, f in enumerate(fields)]
        if self._failed():
            return self._refused()
        placed = self._place(parts)
        if placed is None:
            return self._refused()
        return self._build(placed)

    # -- problems ------------------------------------------------------------------------------------------------

    def _add(self, code: str, severity: Severity, message: str, start: int, end: int, hint: str = "") -> None:
        self.problems.append(problem(code, severity, message, self.cleaned.text, start, end, hint))

    def _error(self, code: str, message: str, where: Field | Half | Item, hint: str = "") -> None:
        self._add(code, Severity.ERROR, message, where.start, where.end, hint)

    def _failed(self) -> bool:
        return any(p.severity is Severity.ERROR for p in self.problems)

    def _fail(self, fault: Problem) -> Reading:
        self.problems.append(fault)
        return self._refused()

    def _refused(self) -> Reading:
        return Reading(self.text, False, problems=self._in_original())

    def _in_original(self) -> tuple[Problem, ...]:
        """Return the problems with places in the text as it was typed."""
        at = self.cleaned.at
        shown = self.text if len(self.text) <= 300 else ""
        moved = []
        for p in self.problems:
            if at and p.end > p.start:
                start = at[min(p.start, len(at) - 1)]
                end = at[min(p.end, len(at)) - 1] + 1
                p = replace(p, start=start, end=max(end, start + 1))
            moved.append(replace(p, text=shown))
        return tuple(dict.fromkeys(moved))

    # -- fields and homologues -----------------------------------------------------------------------------------

    def _part(self, field: Field) -> _Part:
        homologues: list[Homologue] = []
        words: list[tuple[Word, ...]] = []
        for half in field.halves:
            read = self._words(half)
            words.append(tuple(read))
            homologues.append(self._homologue(half, read))
        return _Part(field, tuple(homologues), tuple(words))

    def _third_part(self, part: _Part) -> _Part:
        """Read a translocation balancer that is written on chromosome 3 too as its part there."""
        homologues, words = [], []
        for homologue, row in zip(part.homologues, part.words, strict=True):
            swapped = tuple(self._linked_word(w) for w in row)
            words.append(swapped)
            same = swapped == row
            homologues.append(homologue if same else Homologue.of(*(w.element for w in swapped if w.element)))
        return _Part(part.field, tuple(homologues), tuple(words))

    def _linked_word(self, word: Word) -> Word:
        element = word.element
        if element is None or not element.is_balancer or element.traits.linked_to != "3":
            return word
        entry = self.catalogue.balancer(element.symbol)
        part = self.catalogue.linked_part(entry) if entry is not None else None
        if part is None:
            return word
        third = Element(part.name, Kind.BALANCER, "3", traits=part.traits)
        return replace(word, element=third, evidence="3")

    def _words(self, half: Half) -> list[Word]:
        reader = WordReader(self.catalogue, self.known, self.cleaned.text)
        words: list[Word] = []
        balanced = False
        for item in self._joined(half.items):
            if item.text.lower() in _CHOICES:
                self._error("choice", f"'{item.text}' leaves open which genotype is meant", item,
                            "write one row for each genotype")  # fmt: skip
                continue
            for word in reader.read(item, balanced):
                words.append(word)
                self.problems += word.problems
                balanced = balanced or (word.element is not None and word.element.is_balancer)
        return self._assume_markers(reader, words, half)

    def _assume_markers(self, reader: WordReader, words: list[Word], half: Half) -> list[Word]:
        marked = any(w.element is not None and w.element.kind is Kind.ALLELE for w in words)
        if marked:
            return words
        out = []
        for word in words:
            if word.element is not None and word.element.is_balancer:
                item = next((i for i in half.items), Item("", half.start, half.end))
                element, note = reader.with_assumed_marker(word.element, item)
                word = replace(word, element=element)
                if note is not None:
                    self.problems.append(note)
            out.append(word)
        return out

    def _joined(self, items: Sequence[Item]) -> list[Item]:
        """Put a site, a label or a remark that stands by itself to the symbol before it."""
        joined: list[Item] = []
        skip = False
        for i, item in enumerate(items):
            if skip:
                skip = False
                continue
            before = joined[-1] if joined else None
            if item.text in ("in", "at", "@") and i + 1 < len(items) and before is not None:
                joined[-1] = Item(f"{before.text}@{items[i + 1].text.strip('()[]')}", before.start, items[i + 1].end)
                skip = True
            elif item.text.startswith("(") and item.text.endswith(")"):
                self._parenthesis(item, joined)
            elif before is not None and self._is_site_of(before, item):
                joined[-1] = Item(f"{before.text}@{item.text}", before.start, item.end)
            else:
                joined.append(item)
        return joined

    def _is_site_of(self, before: Item, item: Item) -> bool:
        if self.catalogue.site(item.text) is None or "@" in before.text or "}" in before.text:
            return False
        return self.catalogue.balancer(before.text) is None and self.catalogue.marker(before.text) is None

    def _parenthesis(self, item: Item, joined: list[Item]) -> None:
        inner = item.text[1:-1].strip()
        if joined and self.catalogue.site(inner) is not None and "@" not in joined[-1].text:
            joined[-1] = Item(f"{joined[-1].text}@{inner}", joined[-1].start, item.end)
        elif joined and inner.lower() in ("i", "ii", "iii", "iv", "x", "1", "2", "3", "4"):
            joined[-1] = Item(f"{joined[-1].text}({inner})", joined[-1].start, item.end)
        elif self.catalogue.balancer(inner) is not None:
            self._add("floating-balancer", Severity.WARNING, f"{inner} in parentheses is read as present in these flies;"
                      " in the stock some will lack it", item.start, item.end)  # fmt: skip
            joined.append(Item(inner, item.start + 1, item.end - 1))
        else:
            self._add("remark", Severity.NOTE, f"'{item.text}' is taken for a remark", item.start, item.end)

    def _homologue(self, half: Half, words: Sequence[Word]) -> Homologue:
        elements = [w.element for w in words if w.element is not None]
        sites = [e.site for e in elements if e.site]
        double = next((s for s in sites if sites.count(s) > 1), None)
        if double is not None:
            self._error("same-site", f"two insertions at {double} cannot stand on one homologue", half,
                        "write them on the two sides of a slash")  # fmt: skip
        if sum(e.is_balancer for e in elements) > 1:
            self._error("two-balancers", "two balancers stand on one homologue", half, "put a slash between them")
        return Homologue.of(*dict.fromkeys(elements))

    # -- which chromosome ----------------------------------------------------------------------------------------

    def _place(self, parts: list[_Part]) -> dict[str, _Part] | None:
        while len(parts) > 1 and parts[-1].field.is_empty:
            parts = parts[:-1]
        if len(parts) > len(PAIRS):
            self._error("five-fields", f"{len(parts)} fields are written; the fly has four pairs (X, 2, 3, 4)",
                        parts[len(PAIRS)].field, "take one semicolon out")  # fmt: skip
            return None
        speaks = [self._spoken(part) for part in parts]
        if self._failed():
            return None
        in_places = self._in_places(parts, speaks)
        placed: dict[str, _Part] = {}
        for i, (part, chromosome) in enumerate(zip(parts, speaks, strict=True)):
            name = self._chromosome_of(i, part, chromosome, in_places, parts, speaks)
            if name is None:
                return None
            if name in placed:
                self._error("twice", f"chromosome {name} is written twice", part.field,
                            "homologues of one chromosome are divided by a slash")  # fmt: skip
                return None
            placed[name] = part
        return placed

    def _spoken(self, part: _Part) -> str:
        """Return the chromosome that the words of a field speak for; empty when none does."""
        if len(part.homologues) > 2 and not self._attached_x(part):
            self._error("three-homologues", f"{len(part.homologues)} homologues of one chromosome; a fly has two",
                        part.field, "write one row for each genotype, or a semicolon in place of a slash")  # fmt: skip
            return ""
        strong = part.evidence(weak=False)
        if len(strong) > 1:
            words = " but ".join(f"{because} is on chromosome {name}" for name, because in strong.items())
            self._error("chromosomes-disagree", f"these cannot be homologues: {words}", part.field,
                        "check which of them is on this chromosome")  # fmt: skip
            return ""
        if strong:
            return next(iter(strong))
        weak = part.evidence(weak=True)
        return next(iter(weak)) if len(weak) == 1 else ""

    def _attached_x(self, part: _Part) -> bool:
        return len(part.homologues) == 3 and any(h.is_compound for h in part.homologues)

    def _in_places(self, parts: Sequence[_Part], speaks: Sequence[str]) -> bool:
        """Return whether the place between semicolons says the chromosome."""
        if len(parts) >= 3 or any(self._is_plus(p) for p in parts):
            return True
        return not any("{" in self.cleaned.text[p.field.start : p.field.end] for p in parts)

    def _is_plus(self, part: _Part) -> bool:
        return part.field.is_empty or all(not h.elements for h in part.homologues)

    def _chromosome_of(
        self, i: int, part: _Part, spoken: str, in_places: bool, parts: Sequence[_Part], speaks: Sequence[str]
    ) -> str | None:
        by_place = PAIRS[i]
        if spoken:
            later = all(not s or PAIRS.index(s) > PAIRS.index(spoken) for s in speaks[i + 1 :])
            earlier = all(not s or PAIRS.index(s) < PAIRS.index(spoken) for s in speaks[:i])
            strict_places = len(parts) >= 3 or any(self._is_plus(p) for p in parts)
            if spoken == by_place or (not strict_places and later and earlier):
                return spoken
            because = (part.evidence(weak=False) or part.evidence(weak=True))[spoken]
            self._error(
                "wrong-place", f"{because} is on chromosome {spoken}, but stands in the field of chromosome {by_place}",
                part.field, "count the semicolons; write + for a wild-type chromosome",
            )  # fmt: skip
            return None
        if part.field.is_empty or self._is_plus(part) or len(parts) >= 3:
            return by_place
        return self._open(i, part, in_places, parts, speaks)

    def _open(self, i: int, part: _Part, in_places: bool, parts: Sequence[_Part], speaks: Sequence[str]) -> str | None:
        """Place a field that nothing speaks for: by its place in lab shorthand, else ask."""
        words = self.cleaned.text[part.field.start : part.field.end].strip()
        taken = {s for s in speaks if s}
        by_place = PAIRS[i]
        if in_places and len(parts) == 2 and by_place not in taken:
            self._add("assumed-place", Severity.WARNING, f"nothing but its place says that {words} is on chromosome"
                      f" {by_place}", part.field.start, part.field.end,
                      f"write all fields, such as w; {words}; +, or add a label such as ({'I' * int(by_place)})"
                      if by_place.isdigit() else "write all fields")  # fmt: skip
            return by_place
        self._error("which-chromosome", f"which chromosome is {words} on? Nothing in the genotype says", part.field,
                    "write all fields with + for wild type, or a label such as (II)")  # fmt: skip
        return None

    # -- flies ---------------------------------------------------------------------------------------------------

    def _build(self, placed: Mapping[str, _Part]) -> Reading:
        pairs: dict[str, tuple[Homologue, ...]] = {}
        for name in PAIRS:
            part = placed.get(name)
            homologues = part.homologues if part is not None and part.homologues else (WILD_TYPE,)
            pairs[name] = tuple(self._located(h, name) for h in homologues)
            if name != "X" and part is not None and any(h.is_y for h in homologues):
                self._error("y-on-autosome", f"a Y stands on chromosome {name}", part.field,
                            "the Y is the partner of the X: w/Y; ...")  # fmt: skip
        linked = self._link(pairs)
        females, males, sex = self._x_pairs(linked["X"], placed.get("X"))
        if self._failed():
            return self._refused()
        autosomes = [(linked[n][0], linked[n][-1]) for n in ("2", "3", "4")]
        self._doubled_balancers(autosomes, placed)
        female = Fly.of(FEMALE, females, *autosomes) if females is not None else None
        male = Fly.of(MALE, males, *autosomes) if males is not None else None
        shown = male if sex == MALE and male is not None else female or male
        elements = dict.fromkeys(e for h in linked.values() for one in h for e in one.elements if e.kind is not Kind.Y)
        canonical = format_genotype(shown) if shown is not None else ""
        return Reading(self.text, True, female, male, canonical, tuple(elements), self._in_original(), sex)

    def _doubled_balancers(self, autosomes: Sequence[Pair], placed: Mapping[str, _Part]) -> None:
        for name, (first, second) in zip(PAIRS[1:], autosomes, strict=True):
            if first == second and first.balancer is not None and first.balancer.traits.lethal:
                where = placed[name].field
                self._add("balancer-twice", Severity.WARNING, f"flies with two copies of {first.balancer.symbol} die",
                          where.start, where.end, f"write {first.balancer.symbol}/+ if one copy is meant")  # fmt: skip

    def _located(self, homologue: Homologue, name: str) -> Homologue:
        """Return the homologue with elements of unknown chromosome placed on this one."""
        if all(e.chromosome for e in homologue.elements):
            return homologue
        return Homologue.of(
            *(e if e.chromosome or e.kind is Kind.Y else replace(e, chromosome=name) for e in homologue.elements)
        )

    def _link(self, pairs: Mapping[str, tuple[Homologue, ...]]) -> dict[str, tuple[Homologue, ...]]:
        """Give chromosome 3 its part of a translocation balancer that was written on 2."""
        out = dict(pairs)
        for i, homologue in enumerate(pairs["2"]):
            balancer = homologue.balancer
            if balancer is None or balancer.traits.linked_to != "3":
                continue
            entry = self.catalogue.balancer(balancer.symbol)
            part = self.catalogue.linked_part(entry) if entry is not None else None
            if part is None or any(h.balancer and h.balancer.traits.linked_to for h in out["3"]):
                continue
            third = Homologue.of(Element(part.name, Kind.BALANCER, "3", traits=part.traits))
            other = [h for h in out["3"] if h.elements] or [WILD_TYPE]
            out["3"] = (third, other[0]) if i else (other[0], third)
        return out

    def _x_pairs(
        self, homologues: tuple[Homologue, ...], part: _Part | None
    ) -> tuple[Pair | None, Pair | None, Sex | None]:
        """Return the X pair of the female and of the male, and the sex that the text names."""
        xs = [h for h in homologues if not h.is_y]
        ys = [h for h in homologues if h.is_y]
        compound = next((h for h in xs if h.is_compound), None)
        y = ys[0] if ys else Y
        if compound is not None:
            others = [h for h in xs if h is not compound]
            if not others:
                self._add("attached-x-males", Severity.NOTE, "the males of an attached-X stock are taken to carry a"
                          " wild-type X", 0, 0)  # fmt: skip
            return (compound, y), (others[0] if others else WILD_TYPE, y), FEMALE
        if not xs or len(ys) > 1:
            assert part is not None
            self._error("sex-chromosomes", "no X is written" if not xs else "two Y are written", part.field,
                        "a female is X/X, a male X/Y")  # fmt: skip
            return None, None, None
        if ys:
            return (xs[0], xs[0]), (xs[0], y), MALE
        first, second = xs[0], xs[-1]
        if first == second:
            return (first, first), (first, Y), None
        of_males = next((h for h in (first, second) if h.balancer is None), first)
        if part is not None:
            self._add("males-of-stock", Severity.NOTE, f"males are taken to carry {' '.join(of_males.symbols) or '+'}",
                      part.field.start, part.field.end)  # fmt: skip
        return (first, second), (of_males, Y), FEMALE


def read_fly(
    text: str,
    sex: Sex,
    catalogue: Catalogue | None = None,
    known: Mapping[str, Element] | None = None,
) -> Fly:
    """Return the fly of `sex` that a genotype stands for.

    Raises:
        GenotypeError: the genotype is not understood, or has no fly of that sex; with the problems that were found.
    """
    reading = read_genotype(text, catalogue, known)
    fly = reading.fly(sex)
    if fly is not None:
        return fly
    faults = tuple(p for p in reading.problems if p.severity is Severity.ERROR)
    shown = text if len(text) <= 120 else text[:117] + "..."
    raise GenotypeError(f"the genotype is not understood: {shown}", faults[0].hint if faults else "", faults)


def reading_json(reading: Reading) -> dict[str, Any]:
    """Return one entry of `readings` as the JSON contract writes it."""
    return {
        "text": reading.text,
        "ok": reading.ok,
        "flies": {
            "female": fly_json(reading.female) if reading.female else None,
            "male": fly_json(reading.male) if reading.male else None,
        },
        "canonical": reading.canonical,
        "elements": [
            {
                "symbol": e.symbol,
                "kind": str(e.kind),
                "chromosome": e.chromosome,
                "site": e.site or None,
                "position_cM": e.position_cM,
            }
            for e in reading.elements
        ],
        "problems": [
            {
                "severity": str(p.severity), "code": p.code, "message": p.message, "hint": p.hint,
                "start": p.start, "end": p.end,
            }
            for p in reading.problems
        ],
    }  # fmt: skip
