"""Genotype text to flies and back: the public door.

    notation_clean      noise put right with a notice, and what is refused unread
    notation_split      fields, homologues, items
    notation_shared     balancers of two chromosomes that are written together
    notation_items      what belongs to the symbol before it, and what is a remark
    notation_insertion  transgenes
    notation_element    what one symbol is; notation_balancer and notation_allele read those two kinds,
                        and notation_word says what a symbol was read as
    notation_place      which chromosome a field is, in the order of evidence
    notation_flies      the female and the male
    notation_write      writing flies down

Three results only: understood; understood with a stated assumption (`Reading.assumed`); not understood, with the
characters, the reason and the closest reading. Where nothing says the chromosome of a field (`w; kx-GAL4`), the elements are
understood and the question is asked: there is no fly until it is answered.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, replace
from functools import lru_cache
from typing import Any, Final

from crossplan.errors import GenotypeError, Problem, Severity
from crossplan.genetics.catalogue import Catalogue, default_catalogue
from crossplan.genetics.chromosome import FEMALE, MALE, Sex
from crossplan.genetics.element import Element, Kind
from crossplan.genetics.fly import Fly
from crossplan.genetics.notation_clean import MOST_SHOWN, Cleaned, clean, problem
from crossplan.genetics.notation_element import WordReader
from crossplan.genetics.notation_flies import build_flies, homologue_of
from crossplan.genetics.notation_items import Symbols, join_items
from crossplan.genetics.notation_place import Content, Placer, ReadField, ReadHalf
from crossplan.genetics.notation_shared import share_balancers
from crossplan.genetics.notation_split import Field, Half, Item, split_genotype
from crossplan.genetics.notation_word import Word, remember
from crossplan.genetics.notation_write import fly_json as fly_json
from crossplan.genetics.notation_write import format_genotype as format_genotype
from crossplan.genetics.notation_write import format_homologues

#: names of wild-type stocks, lower case, without blanks and hyphens (common practice, no source)
WILD_TYPE_NAMES: Final = frozenset(
    ("+", "wt", "wildtype", "cantons", "cs", "oregonr", "orer", "berlin", "berlink", "swedishc", "samarkand")
)

#: `kx-GAL4>UAS-kx`, said of flies and no genotype; in `kx>stop>GAL4` and `UAS>kx` the > is a part of the construct
_DRIVER_WITH_EFFECTOR: Final = re.compile(r"(?i)(?:gal4|lexa|qf2?|ad|dbd|\+[^>]+|\d)>(?!stop|frt)")


@dataclass(frozen=True)
class Reading:
    """What was understood of one genotype.

    Attributes:
        text: as it was typed.
        ok: whether it was understood, with or without a stated assumption.
        female, male: the fly of either sex; None when not understood, when no such fly exists, or when nothing says
            which chromosome the elements are on.
        canonical: the short form of what was read; empty when not understood, and no genotype when a chromosome is open.
        elements: every element once, X first.
        problems: everything to be said of it; `start` and `end` count characters of `text`.
        written_sex: the sex that the text itself names (`/Y`: male; two X: female), else None.
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
        return self.ok and not self.is_open and any(p.severity is Severity.WARNING for p in self.problems)

    @property
    def is_open(self) -> bool:
        """Whether nothing says the chromosome of some of it, so that it stands for no fly yet."""
        return self.ok and any(p.code == "which-chromosome" for p in self.problems)

    def fly(self, sex: Sex) -> Fly | None:
        """Return the fly of `sex`."""
        return self.female if sex == FEMALE else self.male

    def flies(self) -> dict[Sex, Fly]:
        """Return the flies that there are, by sex."""
        both: dict[Sex, Fly | None] = {FEMALE: self.female, MALE: self.male}
        return {sex: fly for sex, fly in both.items() if fly is not None}


def read_genotype(text: str, catalogue: Catalogue | None = None, known: Mapping[str, Element] | None = None) -> Reading:
    """Return what was understood of a genotype; never raises, whatever the text.

    Args:
        text: the genotype as typed.
        catalogue: facts to read it with; the shipped ones by default.
        known: elements of the same stock list by symbol, whose chromosome settles what the text leaves open.
    """
    return _Reader(text, catalogue or default_catalogue(), known or {}).read()


@lru_cache(maxsize=8)
def _contents_of(catalogue: Catalogue) -> dict[tuple[str, bool, bool], Content]:
    """Return the homologues that were read without a problem with this catalogue: they recur all through a list."""
    return {}


class _Reader:
    def __init__(self, text: str, catalogue: Catalogue, known: Mapping[str, Element]) -> None:
        self.text = text
        self.catalogue = catalogue
        self.cleaned: Cleaned = clean(text)
        self.words = WordReader(catalogue, known, self.cleaned.text)
        #: homologues that were read without a word to be said; what other rows know could change them
        self.contents = {} if known else _contents_of(catalogue)
        #: with places in the cleaned text; those of the cleaning itself are in the original already
        self.problems: list[Problem] = []

    def read(self) -> Reading:
        if self.cleaned.refused:
            return self._refused()
        whole = self.cleaned.text.strip()
        if whole.lower().replace(" ", "").replace("-", "") in WILD_TYPE_NAMES:
            return self._wild_type(whole)
        fields, fault = split_genotype(self.cleaned.text)
        if fault is not None:
            self.problems.append(fault)
            return self._refused()
        fields, shared = share_balancers(fields, self.catalogue, self.cleaned.text)
        self.problems += [shared] if shared is not None else []
        read = [self._field(field, i) for i, field in enumerate(fields)]
        if self._failed():
            return self._refused()
        placer = Placer(read, self.cleaned.text)
        placed = placer.place()
        self.problems += placer.problems
        if placed is not None:
            return self._flies(placed)
        return self._refused() if self._failed() else self._open(placer)

    def _wild_type(self, name: str) -> Reading:
        if name != "+":
            self.problems.append(
                problem(
                    "wild-type-stock",
                    Severity.NOTE,
                    f"{name} is read as wild type",
                    self.cleaned.text,
                    0,
                    len(self.cleaned.text),
                )  # fmt: skip
            )
        return self._flies({})

    # -- problems ------------------------------------------------------------------------------------------------

    def _failed(self) -> bool:
        return any(p.severity is Severity.ERROR for p in self.problems)

    def _refused(self) -> Reading:
        return Reading(self.text, False, problems=self._in_original())

    def _in_original(self) -> tuple[Problem, ...]:
        """Return the problems with places in the text as it was typed, the worst first."""
        at = self.cleaned.at
        shown = self.text if len(self.text) <= MOST_SHOWN else ""
        moved = list(self.cleaned.problems)
        for p in self.problems:
            start, end = p.start, p.end
            if at and end > start:
                start = at[min(start, len(at) - 1)]
                end = max(at[min(end, len(at)) - 1] + 1, start + 1)
            moved.append(replace(p, start=start, end=end, text=shown))
        moved.sort(key=lambda p: (p.severity is not Severity.ERROR, p.severity is not Severity.WARNING))
        return tuple(dict.fromkeys(moved))

    def _error(self, code: str, message: str, half: Half, hint: str) -> None:
        self.problems.append(problem(code, Severity.ERROR, message, self.cleaned.text, half.start, half.end, hint))

    # -- fields and homologues -----------------------------------------------------------------------------------

    def _field(self, field: Field, index: int) -> ReadField:
        halves: list[ReadHalf] = []
        alone = len(field.halves) == 1
        for half in field.halves:
            key = (self.cleaned.text[half.start : half.end], index == 2, alone)
            content = self.contents.get(key)
            if content is not None:
                halves.append(ReadHalf(content, half.start, half.end))
                continue
            before = len(self.problems)
            symbols = join_items(half.items, self.catalogue, self.cleaned.text)
            self.problems += symbols.problems
            read = self._half(half, symbols, index, alone)
            halves.append(read)
            if half.items and not symbols.items and not symbols.or_y:
                self._remark_only(half, alone and index > 0)
            if symbols.floating and alone:
                across = Half(symbols.floating, symbols.floating[0].start, symbols.floating[-1].end)
                halves.append(self._half(across, Symbols(list(symbols.floating)), index, False))
            if len(self.problems) == before and not self.words.known:
                remember(self.contents, key, read.content)
        return ReadField(field, tuple(halves), index)

    def _remark_only(self, half: Half, whole_field: bool) -> None:
        """A remark behind the last semicolon leaves that chromosome unwritten; beside a slash something is missing."""
        severity = Severity.NOTE if whole_field else Severity.ERROR
        self.problems.append(
            problem("remark-only", severity, "nothing but a remark stands here", self.cleaned.text, half.start, half.end,
                    "write + for a wild-type chromosome")
        )  # fmt: skip

    def _half(self, half: Half, symbols: Symbols, index: int, alone: bool) -> ReadHalf:
        words: list[Word] = []
        balancer: Element | None = None
        balancer_item: Item | None = None
        # a balancer is read first, since it says what the symbols beside it are
        for item in sorted(symbols.items, key=lambda i: self.catalogue.balancer(i.text) is None):
            for word in self.words.read(item, balancer):
                words.append(word)
                self.problems += word.problems
                if word.element is not None and word.element.is_balancer and balancer is None:
                    balancer, balancer_item = word.element, item
        if balancer is not None and balancer_item is not None:
            words = self._with_balancer(words, balancer, balancer_item, index)
        self._check(half, words, alone)
        return ReadHalf(Content(tuple(words), symbols.or_y), half.start, half.end)

    def _with_balancer(self, words: list[Word], balancer: Element, item: Item, index: int) -> list[Word]:
        """Give an unmarked balancer its usual marker, and a translocation balancer in field 3 its part there."""
        element = balancer
        if index == 2 and balancer.traits.linked_to == "3":
            element = self._third_part(balancer)
        elif not any(w.element is not None and self._is_marker(w.element) for w in words):
            element, note = self.words.balancers.with_assumed_marker(balancer, item)
            if note is not None:
                self.problems.append(note)
        if element is balancer:
            return words
        changed = []
        for word in words:
            if word.element is balancer:
                evidence = tuple(replace(e, chromosome=element.chromosome) for e in word.evidence)
                word = replace(word, element=element, evidence=evidence)
            changed.append(word)
        return changed

    def _third_part(self, balancer: Element) -> Element:
        entry = self.catalogue.balancer(balancer.symbol)
        part = self.catalogue.linked_part(entry) if entry is not None else None
        return balancer if part is None else Element(part.name, Kind.BALANCER, part.chromosome, traits=part.traits)

    def _is_marker(self, element: Element) -> bool:
        """Return whether the element is one of the dominant markers by which balancers are told, or denies one."""
        return element.kind is Kind.ALLELE and (bool(element.traits.dominant) or "[+" in element.symbol)

    def _check(self, half: Half, words: list[Word], alone: bool) -> None:
        """Find what cannot stand together on one homologue."""
        elements = [w.element for w in words if w.element is not None]
        sites = [e.site for e in elements if e.site]
        double = next((s for s in sites if sites.count(s) > 1), None)
        if double is not None:
            self._error("same-site", f"two insertions at {double} cannot stand on one homologue", half,
                        "write them on the two sides of a slash")  # fmt: skip
        if sum(e.is_balancer for e in elements) > 1:
            self._error("two-balancers", "two balancers stand on one homologue", half, "put a slash between them")
        if sum(e.kind is Kind.Y for e in elements) and len(elements) > 1:
            self._error("y-with-others", "a Y and other symbols stand on one homologue", half,
                        "put a slash before the Y; write a marked Y as one symbol, such as Dp(1;Y)y[+]")  # fmt: skip
        if elements and any(w.plus for w in words):
            self._plus(half, alone)

    def _plus(self, half: Half, alone: bool) -> None:
        """A + beside other symbols: across from a written homologue it is one wild-type gene, else a slip."""
        if alone:
            self._error("plus-with-symbols", "+ stands for a whole wild-type chromosome, but more is written on it", half,
                        "perhaps a semicolon is meant after the +; else take the + out")  # fmt: skip
        else:
            self.problems.append(
                problem(
                    "plus-left-out",
                    Severity.NOTE,
                    "the + beside other symbols is read as the wild-type form of a gene across from it",
                    self.cleaned.text,
                    half.start,
                    half.end,
                )  # fmt: skip
            )

    # -- results -------------------------------------------------------------------------------------------------

    def _flies(self, placed: Mapping[str, ReadField]) -> Reading:
        flies = build_flies(placed, self.catalogue, self.cleaned.text)
        self.problems += flies.problems
        if self._failed():
            return self._refused()
        shown = flies.male if flies.written_sex == MALE else flies.female or flies.male
        canonical = format_genotype(shown) if shown is not None else ""
        return Reading(self.text, True, flies.female, flies.male, canonical, flies.elements, self._in_original(),
                       flies.written_sex)  # fmt: skip

    def _open(self, placer: Placer) -> Reading:
        """Return what is known where the chromosome of a field stays open: elements, but no fly."""
        words = [w.element for f in placer.fields for half in f.halves for w in half.words if w.element is not None]
        pair = any(_DRIVER_WITH_EFFECTOR.search(e.symbol) for e in words)
        if len(placer.fields) == 1 and (pair or all(e.kind is Kind.UNKNOWN for e in words)):
            self.problems = [p for p in self.problems if p.code != "which-chromosome"]
            self._label(pair, placer.fields[0])
            return self._refused()
        homologues = [[homologue_of(h, n) for h in f.halves] for f, n in zip(placer.fields, placer.names, strict=True)]
        elements = tuple(dict.fromkeys(e for field in homologues for h in field for e in h.elements))
        return Reading(self.text, True, canonical="; ".join(map(format_homologues, homologues)), elements=elements,
                       problems=self._in_original())  # fmt: skip

    def _label(self, pair: bool, field: ReadField) -> None:
        """Refuse the name of something, or of a driver with its effector."""
        where = Half((), field.field.start, field.field.end)
        self._error("nothing-known", "this reads like a driver with its effector, which is no genotype" if pair else
                    "nothing in this is known, so it is not read as a genotype", where,
                    "write all fields, with + for wild type: +; ...; + for chromosome 2")  # fmt: skip


def read_fly(
    text: str, sex: Sex, catalogue: Catalogue | None = None, known: Mapping[str, Element] | None = None
) -> Fly:
    """Return the fly of `sex` that a genotype stands for.

    Raises:
        GenotypeError: the genotype is not understood, or has no fly of that sex; with the problems that were found.
    """
    reading = read_genotype(text, catalogue, known)
    fly = reading.fly(sex)
    if fly is not None:
        return fly
    grave = Severity.ERROR if not reading.ok else Severity.WARNING
    faults = tuple(p for p in reading.problems if p.severity is grave)
    shown = text if len(text) <= 120 else text[:117] + "..."
    what = (
        "is not understood" if not reading.ok
        else "leaves a chromosome open" if reading.is_open
        else f"names no {sex} fly"
    )  # fmt: skip
    raise GenotypeError(f"the genotype {what}: {shown}", faults[0].hint if faults else "", faults)


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
                "symbol": e.symbol, "kind": str(e.kind), "chromosome": e.chromosome or None, "site": e.site or None,
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
