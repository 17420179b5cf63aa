"""One symbol of a genotype: which element it is, and which chromosome it speaks for.

The kinds of symbol, in the order in which they are tried: wild type, Y, an insertion that the stock list knows, genes
run together (`yw`), balancer, transposon in braces, insertion with a site in shorthand, aberration, allele in brackets or
run on, FRT, balancer with something hung on it, transgene by its component class, gene; and at last a symbol that nobody
knows, which is kept as itself, with a note.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import replace
from functools import lru_cache
from typing import Final

from crossplan.errors import Problem, Severity
from crossplan.genetics.catalogue import USUAL_INSERTION_MARKER, Catalogue, KnownElement, MarkerEntry, restored_gene
from crossplan.genetics.element import PLAIN, Element, Kind, Traits, with_traits
from crossplan.genetics.fly import Y_ELEMENT
from crossplan.genetics.notation_allele import ALLELE, AlleleReader
from crossplan.genetics.notation_balancer import BalancerReader
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
from crossplan.genetics.notation_word import Evidence, Rank, SymbolReader, Word, remember, said

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
_Y_FORMS = re.compile(
    r"(?:(?P<left>[A-Za-z]{1,3}\[[^\[\]]+\])?Y(?P<right>[A-Za-z]{1,3}\[[^\[\]]+\])?|Dp\(\d;Y\)(?P<dp>\S*))"
)
#: the longest real symbols known to us have some 130 characters
_LONGEST_SYMBOL: Final = 400
_STOCK_NUMBER = re.compile(r"(?:BDSC|DGRC|VDRC|DGGR)[:_# ]?\d{3,}")
_GLUED_CROSS = re.compile(r"(?i)(?:dbd|ad|gal4)x(?:\d*x?uas|uas)")
_MOST_UNDERSCORES: Final = 2
_UNDERSCORE_AFTER_SITE = re.compile(r"[^@_]+@(?P<site>[^_@]+)_(?P<rest>.+)")
#: what cannot be the name of an element: a sign in front, a word that divides, a chromosome, a Y hung on
_NO_SYMBOL = re.compile(r"[^\w{]|(?:or|and|in|at|oder|x|X|I|II|III|IV|V)(?:\(|$)|.*\(Y\)|.*@.*@|.*@$|.*<|.*>$|(?!(?:PBac|P|Mi|M)[(\[])[^{]*=[^{]*$"
                        r"|(?:Df|Dp|In|T|Tp|R|C|Ab)\([^()]*\)$")  # fmt: skip
#: a construct in a gene, named by the allele that it makes: `elav[C155]-GAL4`
_IN_GENE = re.compile(r"(?P<gene>[^\[\]{}@]+)\[[^\[\]]+\]-")
_LETHAL_WORD = re.compile(r"(?i)lethal\w*|\[?l(?:ethal)?\]")


class WordReader(SymbolReader):
    """Reads symbols with a catalogue and the elements that a stock list is known to hold."""

    def __init__(self, catalogue: Catalogue, known: Mapping[str, Element], text: str) -> None:
        super().__init__(catalogue, text)
        self.known = known
        self.balancers = BalancerReader(catalogue, text, self.read)
        self.alleles = AlleleReader(catalogue, text, self.read)
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
                remember(self._memory, key, words)
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
            return [self.fault(item, "too-long", f"one symbol of {len(text)} characters", "look at the cell")]
        joined = self._joined(item)
        if joined is not None:
            return joined
        if _NO_SYMBOL.match(text):
            return [self.fault(item, "no-symbol", f"'{text}' is no symbol", "take it out, or write what it stands for")]
        several = self.alleles.run_together(item)
        if several is not None:
            return several
        if balancer is not None:
            carried = self.balancers.carried_by(item, balancer)
            if carried is not None:
                return [carried]
        for read in (self.balancers.plain, self._labelled, self._line, self._transposon, self._sited, self._aberration):
            word = read(item)
            if word is not None:
                return [word]
        words = self.alleles.read(item) or self.balancers.hung_on(item)
        if words:
            return words
        typo = None if text in self.known else self.balancers.typo(item, balancer)
        return [typo] if typo is not None else self._named(item)

    # -- Y -------------------------------------------------------------------------------------------------------

    def _y(self, text: str) -> Word | None:
        """Return the Y, plain or with a marker on it (`Dp(1;Y)y[+]`, `B[S]Yy[+]`)."""
        evidence = (Evidence("X", "the Y"),)
        if text == "Y":
            return Word(Y_ELEMENT, evidence)
        known = self.catalogue.y_chromosome(text)
        if known is not None:
            return Word(Element(text, Kind.Y, "Y", traits=known.traits), evidence)
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
        match = ALLELE.fullmatch(symbol)
        return self.catalogue.marker(match["gene"], match["allele"]) if match else None

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
            return self.fault(item, "no-such-chromosome", f"({name}) names no chromosome of this fly",
                               "chromosomes are X (I), II, III and IV")  # fmt: skip
        if len(inner) != 1:
            return None
        said = Evidence(chromosome, f"{base} ({name})")
        kept = tuple(e for e in inner[0].evidence if e.rank is Rank.STRONG)
        return replace(inner[0], evidence=(said, *kept))

    def _line(self, item: Item) -> Word | None:
        """Read an insertion by a name that the trade or the lab knows it by: `OK107-GAL4`, `elav[C155]-GAL4`."""
        known = self.catalogue.known_element(item.text) if "{" not in item.text else None
        if known is None or self.catalogue.marker(item.text) is not None:
            return None
        component = component_of(self.catalogue, item.text)
        cls = component.cls if component is not None else ""
        traits = self.catalogue.insertion_traits((), component)
        return self._settled(Element(item.text, Kind.INSERTION, component=cls, traits=traits), known, bool(cls))

    def _line_of(self, symbol: str, place: str) -> KnownElement | None:
        """Return the known line that an insertion is, by construct and place or by a place that names it: `}OK107`."""
        named = place if re.search(r"[A-Za-z]", place) and len(place) > 2 else ""
        return self.catalogue.known_element(symbol) or (self.catalogue.known_element(named) if named else None)

    def _settled(self, element: Element, known: KnownElement, has_class: bool) -> Word:
        """Return an insertion with what is known of that line; where it sits outweighs a hint, the lab's word all else."""
        cls = known.cls or element.component
        traits = element.traits
        if known.carries is not None or not has_class:
            traits = self.catalogue.insertion_traits(known.carries or USUAL_INSERTION_MARKER, None)
        settled = replace(
            element, chromosome=known.chromosome, site=known.site, position_cM=known.map_cM, component=cls,
            traits=with_traits(traits, known.traits),
        )  # fmt: skip
        rank = Rank.STRONG if known.kind == "lab" or known.site else Rank.OTHER_ROWS
        because = f"{known.name} in the {'lab' if known.kind == 'lab' else 'catalogue'}'s list of lines"
        return Word(settled, (Evidence("X" if known.chromosome == "Y" else known.chromosome, because, rank),))

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
            return self.fault(item, "empty-construct", "the braces are empty: which construct is it?",
                               "write its name between the braces")  # fmt: skip
        if is_several(content):
            return self.fault(item, "run-together", "two insertions run into each other",
                               "write a blank or a comma between them")  # fmt: skip
        if is_nested(content):
            return self.fault(item, "nested-braces", "braces stand directly inside braces",
                               "write one pair, such as P{UAS-GFP}attP2")  # fmt: skip
        markers, name = markers_and_name(content)
        place = groups["place"].strip().lstrip("@")
        if not name:
            return self.fault(item, "empty-construct", "no name stands behind the = in the braces",
                               "write the name of the construct")  # fmt: skip
        standard = f"{groups['letter']}{{{content}}}{place}"
        return self._insertion(name, place, item, markers, standard, notes)

    def _old_brackets(self, item: Item) -> tuple[re.Match[str] | None, tuple[Problem, ...]]:
        match = OLD_BRACKETS.fullmatch(item.text)
        if match is None or (match["round"] and "+" not in match["round"] and "=" not in match["round"]):
            return None, ()
        note = self.say(item, "old-brackets", f"the brackets of {item.text} are read as braces",
                         f"write {match['letter']}{{...}}", Severity.WARNING)  # fmt: skip
        return match, (note,)

    def _stray_braces(self, item: Item) -> Word | None:
        text = item.text
        if "{" not in text or _ABERRATION.match(text):
            return None
        return self.fault(item, "braces", f"'{text}' has braces without the letter of a transposon before them",
                           f"perhaps P{text[text.index('{'):]}")  # fmt: skip

    def _sited(self, item: Item) -> Word | None:
        match = _AT.fullmatch(item.text)
        if match is None:
            match = _IN_PARENTHESES.fullmatch(item.text) if item.text[-1] == ")" else None
            if match is None or self.catalogue.site(match["place"]) is None:
                return self._bare_site(item)
        name, place = match["name"], match["place"]
        if "{" in item.text or name.count("(") != name.count(")") or name.count("[") != name.count("]"):
            return self.fault(item, "brackets-and-site", f"'{item.text}' mixes brackets and @",
                               "write NAME@SITE, or P{NAME}SITE")  # fmt: skip
        return self._insertion(name, place, item, (), "")

    def _bare_site(self, item: Item) -> Word | None:
        """Read the name of a landing site by itself as the empty site; a plain band (`51D`) is not one."""
        if item.text[:1].isdigit():
            return None
        site = self.catalogue.site(item.text)
        if site is None:
            return None
        note = self.say(item, "empty-site", f"{item.text} by itself is read as the empty landing site")
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
        line = None if element.site else self._line_of(element.symbol, place)
        if line is not None:
            return replace(self._settled(element, line, True), problems=notes)
        problems = list(notes)
        if not markers and not element.component and element.traits.restores:
            problems.append(
                self.say(
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
                    self.say(
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
                return self.balancers.word(entry, item)
        arms = [_ARM.fullmatch(part.strip()) for part in re.split(r"[;,]", match["where"])]
        names = [("X" if a["chromosome"] == "1" else a["chromosome"]) for a in arms if a is not None]
        if len(names) < len(arms) and match["where"] != "1;f":
            return self.fault(item, "no-such-chromosome", f"'{match['where']}' names no chromosome of this fly",
                               "chromosomes are X (1), Y, 2, 3 and 4")  # fmt: skip
        return self._aberration_word(item, match["kind"], names)

    def _aberration_word(self, item: Item, kind: str, names: list[str]) -> Word:
        text = item.text
        if kind == "C" and set(names) != {"X"}:
            known = self.catalogue.compound(text)
            return self.fault(item, "compound", f"{text}: compounds other than the attached-X are not handled"
                              + (f" ({known.outcome})" if known is not None else ""),
                              "leave this stock out of the list that you plan with")  # fmt: skip
        if kind == "C":
            compound = Element(text, Kind.BALANCER, "X", traits=Traits(compound=True))
            return Word(compound, (Evidence("X", f"the attached-X {text}"),))
        # in T(2;3) both chromosomes carry a part; it is kept where the lower one stands
        place = names[0] if kind in ("T", "Ab") else names[-1]
        if place == "Y" and kind in ("T", "Ab"):
            place = names[-1]
        if kind == "T":
            note = self.say(item, "translocation", f"{text} ties chromosomes {' and '.join(names)}; it is read as standing"
                             " on one of them, and unbalanced gametes are not foreseen", severity=Severity.WARNING)  # fmt: skip
            return Word(Element(text, Kind.ABERRATION, place), (Evidence(place, text),), (note,))
        if kind != "Df":
            inversion = self.catalogue.inversion(text) if kind == "In" else None
            traits = inversion.traits if inversion is not None else PLAIN
            evidence = (Evidence("X" if place == "Y" else place, text),)
            return Word(Element(text, Kind.ABERRATION, place, traits=traits), evidence)
        note = self.say(item, "assumed-lethal", f"{text} is taken to be lethal over itself, as most deficiencies are")
        element = Element(text, Kind.ABERRATION, place, traits=Traits(lethal=frozenset({text})))
        return Word(element, (Evidence(place, text),), (note,))

    # -- names ---------------------------------------------------------------------------------------------------

    def _named(self, item: Item) -> list[Word]:
        text = item.text
        if self.catalogue.lethal_by_name(text) or self.catalogue.locus(text) is not None:
            return [self.alleles.allele(text, "", item, text)]
        flp_target = frt(text, self.catalogue)
        if flp_target is not None:
            element, where = flp_target
            return [Word(element, _evidence_of(where))]
        if _LETHAL_WORD.fullmatch(text):
            note = self.say(item, "unnamed-lethal", f"'{text}' is read as one recessive lethal, the same wherever it is"
                            " written so", "give it a name, such as l(2)A12", Severity.WARNING)  # fmt: skip
            lethal = Traits(lethal=frozenset({text.lower()}))
            return [Word(Element(text, Kind.ALLELE, traits=lethal), problems=(note,))]
        fault = self._no_name(item)
        if fault is not None:
            return [fault]
        number = _STOCK_NUMBER.search(text)
        if number is not None and number.start() > 0:
            return self._before_number(item, number)
        return [self._by_class(item) or self.alleles.run_on_locus(item) or self.alleles.tagged_gene(item)
                or Word(Element(text, Kind.UNKNOWN), problems=(self.unknown(item, text),))]  # fmt: skip

    def _by_class(self, item: Item) -> Word | None:
        component = component_of(self.catalogue, item.text)
        if component is None:
            return None
        traits = self.catalogue.insertion_traits((), component)
        element = Element(item.text, Kind.INSERTION, component=component.cls, traits=traits)
        hit = _IN_GENE.match(item.text)
        locus = self.catalogue.locus(hit["gene"]) if hit is not None else None
        return Word(element, said(locus.chromosome, f"the gene {locus.gene}") if locus is not None else ())

    def _before_number(self, item: Item, number: re.Match[str]) -> list[Word]:
        """Read a symbol to which the number of a stock is glued, as a lost superscript leaves it."""
        words = self.read(Item(item.text[: number.start()], item.start, item.start + number.start()))
        note = self.say(item, "stock-number", f"{number.group()} is taken for the number of a stock, and left out",
                        "write it in another column", Severity.WARNING)  # fmt: skip
        return [replace(words[0], problems=(note, *words[0].problems)), *words[1:]]

    def _joined(self, item: Item) -> list[Word] | None:
        """Read two insertions that an underscore joins behind the site of the first."""
        match = _UNDERSCORE_AFTER_SITE.fullmatch(item.text)
        if (
            match is None
            or self.catalogue.site(match["site"]) is None
            or self.catalogue.site(match["rest"]) is not None
        ):
            return None
        middle = item.start + match.end("site")
        first = self.read(Item(item.text[: match.end("site")], item.start, middle))
        second = self.read(Item(match["rest"], middle + 1, item.end))
        note = self.say(item, "underscore", "the underscore behind the site is read as dividing two insertions",
                        "write a comma there", Severity.WARNING)  # fmt: skip
        return [replace(first[0], problems=(note, *first[0].problems)), *first[1:], *second]

    def _no_name(self, item: Item) -> Word | None:
        """Return why a text cannot be the name of anything."""
        text = item.text
        if not re.search(r"[^\W_]", text):
            return self.fault(item, "no-symbol", f"'{text}' is no symbol", "take it out, or write what it stands for")
        if "__" in text or text.count("_") > _MOST_UNDERSCORES:
            return self.fault(item, "underscores", f"'{text}' looks like the name of a file, not of an element",
                               "write the genotype with ; / and commas")  # fmt: skip
        if _GLUED_CROSS.search(text):
            return self.fault(item, "cross", f"'{text}' looks like a cross of two genotypes",
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
