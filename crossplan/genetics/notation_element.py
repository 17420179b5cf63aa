"""One symbol of a genotype: which element it is, and which chromosome it speaks for.

The kinds of symbol, in the order in which they are tried: wild type, Y, an insertion that the stock list knows, genes
run together (`yw`), balancer, transposon in braces, insertion with a site in shorthand, aberration, allele in brackets or
run on, FRT, balancer with something hung on it, transgene by its component class, gene; and at last a symbol that nobody
knows, which is kept as itself, with a note.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, replace
from enum import IntEnum
from functools import lru_cache
from typing import Final

from crossplan.errors import Problem, Severity
from crossplan.genetics.catalogue import BalancerEntry, Catalogue, MarkerEntry, restored_gene
from crossplan.genetics.element import PLAIN, Element, Kind, Traits
from crossplan.genetics.fly import Y_ELEMENT
from crossplan.genetics.notation_clean import problem
from crossplan.genetics.notation_insertion import (
    OLD_BRACKETS,
    TRANSPOSON,
    Place,
    component_of,
    empty_site,
    frt,
    insertion,
    is_nested,
    is_several,
    markers_and_name,
)
from crossplan.genetics.notation_split import Item

_LABEL = re.compile(
    r"(?P<base>.+)\((?:chr(?:omosome)?\.? ?)?(?P<name>X|[1-5](?:L|R|LR)?|I|II|III|IV|V)\)", re.IGNORECASE
)
_CHROMOSOME_OF_LABEL: Final = {
    "x": "X",
    "1": "X",
    "i": "X",
    "2": "2",
    "ii": "2",
    "3": "3",
    "iii": "3",
    "4": "4",
    "iv": "4",
}
_AT = re.compile(r"(?P<name>[^@]+)@(?P<place>[^@()]*(?:\([^@()]*\)[^@()]*)*)")
_IN_PARENTHESES = re.compile(r"(?P<name>.*[^(])\((?P<place>(?:[^()]|\([^()]*\))*)\)")
_ABERRATION = re.compile(r"(?P<kind>Df|Dp|In|T|Tp|R|C|Ab)\((?P<where>[^()]*)\)(?P<name>.+)")
_ARM = re.compile(r"(?P<chromosome>[1-4XY])(?:L|R|LR|h)?")
_ALLELE = re.compile(r"(?P<gene>[^\[\]{}@]+?)\[(?P<allele>[^\[\]]*(?:\[[^\[\]]*\][^\[\]]*)*)\]")
_IN_ROUND = re.compile(r"(?P<gene>[A-Za-z]{1,5})\((?P<allele>\d{1,4}|\*)\)")
_RUN_ON = re.compile(r"(?P<gene>[A-Za-z]+?)(?P<allele>[1-9]\d{0,3}(?:[a-z]{1,2}\d{0,2})?|\*|-|\+)")
_LINE_CODE = re.compile(r"[A-Z]\d{2}[A-H]\d{2}")
_YELLOW_WHITE = re.compile(r"(?P<y>y\d{0,2}\*?)(?P<w>w(?:\d{1,4}(?:[a-z]\d{1,2})?|\*|-)?)(?P<v>[vf]\d{0,2})?")
_Y_FORMS = re.compile(
    r"(?:(?P<left>[A-Za-z]{1,3}\[[^\[\]]+\])?Y(?P<right>[A-Za-z]{1,3}\[[^\[\]]+\])?|Dp\(\d;Y\)(?P<dp>\S*))"
)
_MARKED_BALANCER = re.compile(
    r"(?P<balancer>CyO|SM5|SM6a|TM1|TM2|TM3|TM6B|TM6C|TM6)(?P<marker>Sb|Ser|Tb|Hu|Ubx|Cy|Roi|e)1?"
)
_BALANCER_START = re.compile(r"(?i)(?:C[YO0]|TM\d|FM\d|SM\d|MKR|MRK)")
_LONGEST_BALANCER: Final = 8
#: the longest real symbols known to us have some 130 characters
_LONGEST_SYMBOL: Final = 400
_MOST_REMEMBERED: Final = 20_000
_CARRIED: Final = re.compile(r"(?i)gfp|yfp|rfp|cherry|tom|gal4|lacz|flp|uas|dsred")
_STOCK_NUMBER = re.compile(r"(?:BDSC|DGRC|VDRC|DGGR)[:_# ]?\d{3,}")
_GLUED_CROSS = re.compile(r"(?i)(?:dbd|ad|gal4)x(?:\d*x?uas|uas)")
_MOST_UNDERSCORES: Final = 2
#: what cannot be the name of an element: a sign in front, a word that divides, a chromosome, a Y hung on
_NO_SYMBOL = re.compile(r"[^\w{]|(?:or|and|in|at|oder|x|X|I|II|III|IV|V)(?:\(|$)|.*\(Y\)|.*@.*@|.*@$|.*<|.*>$|(?!(?:PBac|P|Mi|M)[(\[])[^{]*=[^{]*$"
                        r"|(?:Df|Dp|In|T|Tp|R|C|Ab)\([^()]*\)$")  # fmt: skip
_LETHAL_WORD = re.compile(r"(?i)lethal\w*|\[?l(?:ethal)?\]")


class Rank(IntEnum):
    """How strongly a piece of evidence speaks for a chromosome; a lower one gives way to a higher."""

    HINT = 1
    OTHER_ROWS = 2
    STRONG = 3


@dataclass(frozen=True, slots=True)
class Evidence:
    """A chromosome, what says so, and how strongly."""

    chromosome: str
    because: str
    rank: Rank = Rank.STRONG


@dataclass(frozen=True, slots=True)
class Word:
    """What one symbol was read as; no element for wild type, and where `problems` has an error."""

    element: Element | None
    evidence: tuple[Evidence, ...] = ()
    problems: tuple[Problem, ...] = ()
    plus: bool = False

    @property
    def kind(self) -> Kind | None:
        return self.element.kind if self.element is not None else None


class WordReader:
    """Reads symbols with a catalogue and the elements that a stock list is known to hold."""

    def __init__(self, catalogue: Catalogue, known: Mapping[str, Element], text: str) -> None:
        self.catalogue = catalogue
        self.known = known
        self.text = text
        self._memory = _memory_of(catalogue)

    def read(self, item: Item, balancer: Element | None = None) -> list[Word]:
        """Return the word or words (`yw` is two) that an item is.

        Args:
            item: the symbol as written.
            balancer: the balancer that stands before it on the homologue.
        """
        if self.known:
            return self._read(item, balancer)
        key = (item.text, balancer.symbol if balancer is not None else "")
        words = self._memory.get(key)
        if words is None:
            words = self._read(item, balancer)
            if not any(w.problems for w in words):
                if len(self._memory) >= _MOST_REMEMBERED:
                    self._memory.clear()
                self._memory[key] = words
        return words

    def _read(self, item: Item, balancer: Element | None) -> list[Word]:
        if " " in item.text and "{" not in item.text:
            item = Item(item.text.replace(" ", ""), item.start, item.end)
        text = item.text
        if text == "+" or (text[0] == "+" and len(text) > 1 and text[1] in "[(" and text[-1] in "])"):
            return [Word(None, plus=True)]
        if text[0] == "Y" or "Y" in text:
            y = self._y(text)
            if y is not None:
                return [y]
        known = self.known.get(text)
        if known is not None and not known.gene and known.kind in (Kind.INSERTION, Kind.UNKNOWN):
            return [_known_word(known)]
        if len(text) > _LONGEST_SYMBOL:
            return [self._fault(item, "too-long", f"one symbol of {len(text)} characters", "look at the cell")]
        if _NO_SYMBOL.match(text):
            return [
                self._fault(item, "no-symbol", f"'{text}' is no symbol", "take it out, or write what it stands for")
            ]
        several = self._run_together(item)
        if several is not None:
            return several
        if balancer is not None:
            carried = self._carried_by(item, balancer)
            if carried is not None:
                return [carried]
        for read in (self._balancer, self._labelled, self._transposon, self._sited, self._aberration):
            word = read(item)
            if word is not None:
                return [word]
        return self._alleles(item) or self._hung_on(item) or [self._typo(item, balancer) or self._named(item)]

    # -- what is said of a word ----------------------------------------------------------------------------------

    def _say(self, item: Item, code: str, message: str, hint: str = "", severity: Severity = Severity.NOTE) -> Problem:
        return problem(code, severity, message, self.text, item.start, item.end, hint)

    def _fault(self, item: Item, code: str, message: str, hint: str) -> Word:
        return Word(None, problems=(self._say(item, code, message, hint, Severity.ERROR),))

    # -- Y -------------------------------------------------------------------------------------------------------

    def _y(self, text: str) -> Word | None:
        """Return the Y, plain or with a marker on it (`Dp(1;Y)y[+]`, `B[S]Yy[+]`)."""
        evidence = (Evidence("X", "the Y"),)
        if text == "Y":
            return Word(Y_ELEMENT, evidence)
        match = _Y_FORMS.fullmatch(text)
        if match is None:
            return None
        marks = [m for m in (match["left"], match["right"], match["dp"]) if m]
        traits = PLAIN
        for mark in marks:
            restored = restored_gene(mark)
            marker = self._marker_of(mark)
            if restored:
                traits = replace(traits, restores=traits.restores | {restored})
            elif marker is not None:
                traits = replace(traits, dominant=(*traits.dominant, *marker.traits.dominant))
        return Word(Element(text, Kind.Y, "Y", traits=traits), evidence)

    def _marker_of(self, symbol: str) -> MarkerEntry | None:
        match = _ALLELE.fullmatch(symbol)
        return self.catalogue.marker(match["gene"], match["allele"]) if match else None

    # -- balancers -----------------------------------------------------------------------------------------------

    def _balancer(self, item: Item) -> Word | None:
        entry = self.catalogue.balancer(item.text)
        return None if entry is None else self._balancer_word(entry, item)

    def _balancer_word(self, entry: BalancerEntry, item: Item) -> Word:
        notes: tuple[Problem, ...] = ()
        if item.text != entry.name:
            notes = (self._say(item, "spelling", f"{item.text} is read as {entry.name}"),)
        element = Element(entry.name, Kind.BALANCER, entry.chromosome, traits=entry.traits)
        return Word(element, (Evidence(entry.chromosome, f"the balancer {entry.name}"),), notes)

    def _carried_by(self, item: Item, balancer: Element) -> Word | None:
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

    def _hung_on(self, item: Item) -> list[Word] | None:
        """Read a balancer with a marker or a transgene hung on its name: `TM3-Sb`, `TM6BTb`, `CyO-wgGFP`."""
        text = item.text
        run_on = _MARKED_BALANCER.fullmatch(text)
        if run_on is not None:
            return self._balancer_with(item, run_on.end("balancer"), run_on.end("balancer"))
        for i, char in enumerate(text[: _LONGEST_BALANCER + 1]):
            if char in "-.:_" and i >= 2 and self.catalogue.balancer(text[:i]) is not None:
                return self._balancer_with(item, i, i + 1)
        return None

    def _balancer_with(self, item: Item, end: int, begin: int) -> list[Word] | None:
        entry = self.catalogue.balancer(item.text[:end])
        rest = item.text[begin:].strip("-.:_")
        if entry is None or not rest:
            return None
        fused = self.catalogue.balancer(f"{entry.name},{rest}")
        if fused is not None:
            return [self._balancer_word(fused, item)]
        first = self._balancer_word(entry, Item(item.text[:end], item.start, item.start + end))
        second = Item(rest, item.end - len(rest), item.end)
        if self.catalogue.balancer(rest) is not None:
            return [self._fault(item, "two-balancers", f"'{item.text}' names two balancers",
                                "put a semicolon or a slash between them")]  # fmt: skip
        carried = self._carried_by(second, first.element) if first.element is not None else None
        if carried is not None:
            return [first, carried]
        if self.catalogue.marker(rest) is not None or _CARRIED.search(rest):
            return [first, *self.read(second, first.element)]
        variant = Element(item.text, Kind.BALANCER, entry.chromosome, traits=entry.traits)
        note = self._say(item, "balancer-variant", f"{item.text} is taken for a form of {entry.name} that shows the same",
                         f"write {entry.name} and what it carries, if it shows more", Severity.WARNING)  # fmt: skip
        return [Word(variant, first.evidence, (note,))]

    def _typo(self, item: Item, balancer: Element | None) -> Word | None:
        text = item.text
        inside = self._balancer_inside(text)
        if inside:
            return self._fault(item, "balancer-inside", f"'{text}' holds the name of the balancer {inside}, but not as a"
                               " symbol by itself", "put a semicolon, a slash or a comma where it belongs")  # fmt: skip
        if balancer is not None or text in self.known or len(text) > _LONGEST_BALANCER:
            return None
        near = self.catalogue.is_balancer_like(text) if _BALANCER_START.match(text) else None
        if near is None or self.catalogue.marker(text) is not None:
            return None
        turned = (b.name for b in self.catalogue.balancers() if sorted(b.name.lower()) == sorted(text.lower()))
        near = next(turned, near)
        return self._fault(item, "balancer-typo", f"'{text}' is no balancer that the catalogue knows",
                           f"perhaps {near}; correct it, or add the balancer to the lab's catalogue")  # fmt: skip

    def _balancer_inside(self, text: str) -> str:
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
        note = self._say(
            item, "assumed-marker", f"{entry.name} is written without a marker and taken to carry {markers}"
            f" ({entry.assumed_reason})", f"write {entry.name}, {markers} if it does", Severity.WARNING,
        )  # fmt: skip
        return replace(element, traits=entry.traits_assumed), note

    # -- insertions ----------------------------------------------------------------------------------------------

    def _labelled(self, item: Item) -> Word | None:
        """Read a symbol with its chromosome behind it in parentheses: `ppk-GAL4(II)`."""
        match = _LABEL.fullmatch(item.text)
        if match is None or match["base"] in ("Df", "Dp", "In", "T", "Tp", "R", "C", "Ab", "l", "L", "M", "su"):
            return None
        base, name = match["base"], match["name"]
        if name.isdigit() and self.catalogue.marker(base) is not None:
            return None
        inner = self.read(Item(base, item.start, item.start + len(base)))
        chromosome = _CHROMOSOME_OF_LABEL.get(name.lower().rstrip("lr") or name.lower())
        if chromosome is None:
            return self._fault(item, "no-such-chromosome", f"({name}) names no chromosome of this fly",
                               "chromosomes are X (I), II, III and IV")  # fmt: skip
        if len(inner) != 1:
            return None
        said = Evidence(chromosome, f"{base} ({name})")
        kept = tuple(e for e in inner[0].evidence if e.rank is Rank.STRONG)
        return replace(inner[0], evidence=(said, *kept))

    def _transposon(self, item: Item) -> Word | None:
        text = item.text
        match = TRANSPOSON.fullmatch(text)
        notes: tuple[Problem, ...] = ()
        if match is None:
            match, notes = self._old_brackets(item)
        if match is None:
            return self._stray_braces(item)
        groups = match.groupdict()
        content = groups.get("content") or groups.get("square") or groups.get("round") or ""
        if not content.strip():
            return self._fault(item, "empty-construct", "the braces are empty: which construct is it?",
                               "write its name between the braces")  # fmt: skip
        if is_several(content):
            return self._fault(item, "run-together", "two insertions run into each other",
                               "write a blank or a comma between them")  # fmt: skip
        if is_nested(content):
            return self._fault(item, "nested-braces", "braces stand directly inside braces",
                               "write one pair, such as P{UAS-GFP}attP2")  # fmt: skip
        markers, name = markers_and_name(content)
        place = groups["place"].strip().lstrip("@")
        if not name:
            return self._fault(item, "empty-construct", "no name stands behind the = in the braces",
                               "write the name of the construct")  # fmt: skip
        standard = f"{groups['letter']}{{{content}}}{place}"
        return self._insertion(name, place, item, markers, standard, notes)

    def _old_brackets(self, item: Item) -> tuple[re.Match[str] | None, tuple[Problem, ...]]:
        match = OLD_BRACKETS.fullmatch(item.text)
        if match is None or (match["round"] and "+" not in match["round"] and "=" not in match["round"]):
            return None, ()
        note = self._say(item, "old-brackets", f"the brackets of {item.text} are read as braces",
                         f"write {match['letter']}{{...}}", Severity.WARNING)  # fmt: skip
        return match, (note,)

    def _stray_braces(self, item: Item) -> Word | None:
        text = item.text
        if "{" not in text or _ABERRATION.match(text):
            return None
        return self._fault(item, "braces", f"'{text}' has braces without the letter of a transposon before them",
                           f"perhaps P{text[text.index('{'):]}")  # fmt: skip

    def _sited(self, item: Item) -> Word | None:
        match = _AT.fullmatch(item.text)
        if match is None:
            match = _IN_PARENTHESES.fullmatch(item.text) if item.text[-1] == ")" else None
            if match is None or self.catalogue.site(match["place"]) is None:
                return self._bare_site(item)
        name, place = match["name"], match["place"]
        if "{" in item.text or name.count("(") != name.count(")") or name.count("[") != name.count("]"):
            return self._fault(item, "brackets-and-site", f"'{item.text}' mixes brackets and @",
                               "write NAME@SITE, or P{NAME}SITE")  # fmt: skip
        joined = re.match(r"(?P<site>[^_]+)_(?P<rest>.+)", place)
        if joined and self.catalogue.site(place) is None and self.catalogue.site(joined["site"]) is not None:
            return self._fault(item, "underscore", f"an underscore joins {name}@{joined['site']} to the next symbol",
                               "write a comma there")  # fmt: skip
        return self._insertion(name, place, item, (), "")

    def _bare_site(self, item: Item) -> Word | None:
        """Read the name of a landing site by itself as the empty site; a plain band (`51D`) is not one."""
        if item.text[:1].isdigit():
            return None
        site = self.catalogue.site(item.text)
        if site is None:
            return None
        note = self._say(item, "empty-site", f"{item.text} by itself is read as the empty landing site")
        return Word(empty_site(site, self.catalogue), (Evidence(site.chromosome, f"the site {site.name}"),), (note,))

    def _insertion(
        self,
        name: str,
        place: str,
        item: Item,
        markers: tuple[str, ...],
        standard: str,
        notes: tuple[Problem, ...] = (),
    ) -> Word:
        element, where = insertion(name, place, markers, standard, self.catalogue)
        known = self.known.get(element.symbol)
        if known is not None and not markers:
            return replace(_known_word(known), problems=notes)
        problems = list(notes)
        if not markers and not element.component and element.traits.restores:
            problems.append(
                self._say(
                    item,
                    "assumed-marker",
                    f"{name} is taken to carry mini-white, as most insertions do",
                    "write the standard form if it does not",
                )  # fmt: skip
            )
        if place and not where.because and "[" not in place:
            near = self.catalogue.near_sites(place)
            if near:
                problems.append(
                    self._say(
                        item,
                        "unknown-site",
                        f"the catalogue has no landing site '{place}'",
                        f"perhaps {near[0]}",
                        Severity.WARNING,
                    )  # fmt: skip
                )
        return Word(element, _evidence_of(where), tuple(problems))

    # -- aberrations ---------------------------------------------------------------------------------------------

    def _aberration(self, item: Item) -> Word | None:
        match = _ABERRATION.fullmatch(item.text)
        if match is None:
            return None
        if match["kind"] == "In":
            entry = self.catalogue.balancer(match["name"])
            if entry is not None:
                return self._balancer_word(entry, item)
        arms = [_ARM.fullmatch(part.strip()) for part in re.split(r"[;,]", match["where"])]
        names = [("X" if a["chromosome"] == "1" else a["chromosome"]) for a in arms if a is not None]
        if len(names) < len(arms) and match["where"] != "1;f":
            return self._fault(item, "no-such-chromosome", f"'{match['where']}' names no chromosome of this fly",
                               "chromosomes are X (1), Y, 2, 3 and 4")  # fmt: skip
        return self._aberration_word(item, match["kind"], names)

    def _aberration_word(self, item: Item, kind: str, names: list[str]) -> Word:
        text = item.text
        autosomes = [n for n in names if n not in ("X", "Y")]
        if kind == "C" and autosomes:
            return self._fault(item, "compound-autosome", f"{text}: compound autosomes are not handled",
                               "leave this stock out of the list that you plan with")  # fmt: skip
        if kind == "C":
            compound = Element(text, Kind.BALANCER, "X", traits=Traits(compound=True))
            return Word(compound, (Evidence("X", f"the attached-X {text}"),))
        # in T(2;3) both chromosomes carry a part; it is kept where the lower one stands
        place = names[0] if kind in ("T", "Ab") else names[-1]
        if place == "Y" and kind in ("T", "Ab"):
            place = names[-1]
        if kind == "T":
            note = self._say(item, "translocation", f"{text} ties chromosomes {' and '.join(names)}; it is read as standing"
                             " on one of them, and unbalanced gametes are not foreseen", severity=Severity.WARNING)  # fmt: skip
            return Word(Element(text, Kind.ABERRATION, place), (Evidence(place, text),), (note,))
        if kind != "Df":
            return Word(Element(text, Kind.ABERRATION, place), (Evidence("X" if place == "Y" else place, text),))
        note = self._say(item, "assumed-lethal", f"{text} is taken to be lethal over itself, as most deficiencies are")
        element = Element(text, Kind.ABERRATION, place, traits=Traits(lethal=frozenset({text})))
        return Word(element, (Evidence(place, text),), (note,))

    # -- alleles -------------------------------------------------------------------------------------------------

    def _run_together(self, item: Item) -> list[Word] | None:
        """Read `yw`, `y1w67c23`, `y1w*` as the genes that they are."""
        if item.text[0] != "y" or "w" not in item.text:
            return None
        match = _YELLOW_WHITE.fullmatch(item.text)
        if match is None:
            return self._yw122(item) if item.text == "yw122" else None
        words: list[Word] = []
        for name in ("y", "w", "v"):
            if match[name]:
                words += self._alleles(Item(match[name], item.start, item.end)) or []
        return words

    def _yw122(self, item: Item) -> list[Word]:
        note = self._say(item, "spelling", "yw122 is read as y w hsFLP122 (common practice)", "write y w hsFLP122",
                         Severity.WARNING)  # fmt: skip
        flp = replace(self._named(Item("hsFLP122", item.start, item.end)), problems=(note,))
        return [*(self._run_together(Item("yw", item.start, item.end)) or ()), flp]

    def _alleles(self, item: Item) -> list[Word] | None:
        """Read alleles in brackets, run on to the gene, or a known gene by itself."""
        text = item.text
        if text[-1] == "]":
            return self._bracketed(item)
        round_one = _IN_ROUND.fullmatch(text)
        if round_one is not None and self.catalogue.marker(round_one["gene"]) is not None:
            return [self._spelt_allele(round_one["gene"], round_one["allele"], item)]
        match = _RUN_ON.fullmatch(text)
        if match is not None and not _LINE_CODE.fullmatch(text) and self.catalogue.marker(match["gene"]) is not None:
            return [self._spelt_allele(match["gene"], match["allele"], item)]
        exact = self._known_allele(item)
        if exact is None and self.catalogue.marker(text) is not None:
            return [self._allele(text, "", item, text)]
        return exact

    def _spelt_allele(self, gene: str, allele: str, item: Item) -> Word:
        return self._allele(gene, allele, item, f"{gene}[{allele}]")

    def _known_allele(self, item: Item) -> list[Word] | None:
        """Read an allele whose superscript was lost, if the catalogue has just that one: `wa`, `snX2`."""
        for cut in range(1, min(len(item.text), 5)):
            gene, allele = item.text[:cut], item.text[cut:]
            if (gene, allele) in _exact_alleles(self.catalogue):
                return [self._spelt_allele(gene, allele, item)]
        return None

    def _bracketed(self, item: Item) -> list[Word] | None:
        text = item.text
        matches = list(_ALLELE.finditer(text))
        if not matches or "".join(m.group() for m in matches) != text:
            return None
        if len(matches) > 1 and any(self._is_stranger(m["gene"]) for m in matches):
            return None
        if len(matches) == 1 and self._is_transgene(matches[0]["gene"], matches[0]["allele"], text):
            return None
        words = []
        for match in matches:
            part = Item(match.group(), item.start + match.start(), item.start + match.end())
            if not match["allele"].strip():
                words.append(self._fault(part, "empty-allele", "the brackets are empty: which allele is it?",
                                         f"write {match['gene']}[*] for an allele that is not known"))  # fmt: skip
            else:
                words.append(self._allele(match["gene"], match["allele"], part, match.group()))
        return words

    def _is_stranger(self, gene: str) -> bool:
        return self.catalogue.marker(gene) is None and self.catalogue.locus(gene) is None

    def _is_transgene(self, gene: str, allele: str, text: str) -> bool:
        """Tell `tub-GAL80[ts]`, a construct, from an allele of a gene."""
        if self.catalogue.marker(gene, allele) is not None or self.catalogue.locus(gene) is not None:
            return False
        return "\\" not in gene and component_of(self.catalogue, text) is not None

    def _allele(self, gene: str, allele: str, item: Item, symbol: str) -> Word:
        marker = self.catalogue.marker(gene, "*" if allele == "-" else allele)
        if marker is not None:
            element = Element(symbol, Kind.ALLELE, marker.chromosome, position_cM=marker.map_cM, gene=marker.gene,
                              traits=marker.traits)  # fmt: skip
            return Word(element, _said(marker.chromosome, f"the marker {symbol}"))
        locus = self.catalogue.locus(gene)
        traits = PLAIN
        chromosome = locus.chromosome if locus else ""
        problems: tuple[Problem, ...] = ()
        if self.catalogue.lethal_by_name(gene) or allele.lower() in ("l", "lethal"):
            traits = Traits(lethal=frozenset({gene}))
            numbered = re.match(r"l\(([1-4X])\)", gene)
            if numbered:
                chromosome = "X" if numbered[1] == "1" else numbered[1]
        else:
            problems = (self._unknown(item, symbol),)
        element = Element(
            symbol, Kind.ALLELE, chromosome, position_cM=locus.cM if locus else None, gene=gene, traits=traits
        )
        return Word(element, _said(chromosome, f"the gene {gene}"), problems)

    def _unknown(self, item: Item, symbol: str) -> Problem:
        return self._say(item, "unknown-symbol", f"{symbol} is not in the catalogue; it is kept as itself",
                         "add it to the lab's catalogue if it shows, kills or covers something")  # fmt: skip

    # -- names ---------------------------------------------------------------------------------------------------

    def _named(self, item: Item) -> Word:
        text = item.text
        if self.catalogue.lethal_by_name(text) or self.catalogue.locus(text) is not None:
            return self._allele(text, "", item, text)
        flp_target = frt(text, self.catalogue)
        if flp_target is not None:
            element, where = flp_target
            return Word(element, _evidence_of(where))
        if _LETHAL_WORD.fullmatch(text):
            note = self._say(item, "unnamed-lethal", f"'{text}' is read as one recessive lethal, the same wherever it is"
                             " written so", "give it a name, such as l(2)A12", Severity.WARNING)  # fmt: skip
            return Word(Element(text, Kind.ALLELE, traits=Traits(lethal=frozenset({text.lower()}))), problems=(note,))
        fault = self._no_name(item)
        if fault is not None:
            return fault
        component = component_of(self.catalogue, text)
        if component is not None:
            traits = self.catalogue.insertion_traits((), component)
            return Word(Element(text, Kind.INSERTION, component=component.cls, traits=traits))
        return Word(Element(text, Kind.UNKNOWN), problems=(self._unknown(item, text),))

    def _no_name(self, item: Item) -> Word | None:
        """Return why a text cannot be the name of anything."""
        text = item.text
        if not re.search(r"[^\W_]", text):
            return self._fault(item, "no-symbol", f"'{text}' is no symbol", "take it out, or write what it stands for")
        if "__" in text or text.count("_") > _MOST_UNDERSCORES:
            return self._fault(item, "underscores", f"'{text}' looks like the name of a file, not of an element",
                               "write the genotype with ; / and commas")  # fmt: skip
        number = _STOCK_NUMBER.search(text)
        if number is not None and number.start() > 0:
            return self._fault(item, "stock-number", f"the stock number {number.group()} is glued to {text[: number.start()]}",
                               "take the number out")  # fmt: skip
        if _GLUED_CROSS.search(text):
            return self._fault(item, "cross", f"'{text}' looks like a cross of two genotypes",
                               "write the two genotypes by themselves")  # fmt: skip
        return None


@lru_cache(maxsize=8)
def _memory_of(catalogue: Catalogue) -> dict[tuple[str, str], list[Word]]:
    """Return the words that were read without a problem with this catalogue: symbols recur all through a list."""
    return {}


def _known_word(known: Element) -> Word:
    if not known.chromosome:
        return Word(known)
    if known.site:
        return Word(known, (Evidence(known.chromosome, f"the site {known.site}"),))
    return Word(known, (Evidence(known.chromosome, f"{known.symbol} in other rows", Rank.OTHER_ROWS),))


def _evidence_of(where: Place) -> tuple[Evidence, ...]:
    if not where.chromosome:
        return ()
    rank = Rank.HINT if where.hint_only else Rank.STRONG
    return (Evidence("X" if where.chromosome == "Y" else where.chromosome, where.because, rank),)


def _said(chromosome: str, because: str) -> tuple[Evidence, ...]:
    return (Evidence(chromosome, because),) if chromosome else ()


@lru_cache(maxsize=8)
def _exact_alleles(catalogue: Catalogue) -> frozenset[tuple[str, str]]:
    return frozenset((m.gene, m.allele) for m in catalogue.markers() if m.allele)
