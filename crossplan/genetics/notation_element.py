"""One word of a genotype: which element it is, and which chromosome it speaks for.

The kinds of word, in the order in which they are tried: wild type, Y, balancer, transposon in braces, insertion with a
site in shorthand, aberration, allele in brackets or run on, lethal by its name, transgene by its component class, and at
last a symbol that nobody knows, which is kept as itself.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass

from crossplan.errors import Problem, Severity
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.element import PLAIN, Element, Kind, Traits
from crossplan.genetics.fly import Y_ELEMENT
from crossplan.genetics.notation_clean import problem
from crossplan.genetics.notation_split import Item

_TRANSPOSON = re.compile(r"(?P<letter>P\+PBac|PBac|P|Mi|M|H|TI)\{(?P<content>.*)\}(?P<place>[^{}]*)", re.DOTALL)
_AT = re.compile(r"(?P<name>[^@]+)@(?P<place>.+)")
_IN_PARENTHESES = re.compile(r"(?P<name>[^()]+(?:\([^()]*\)[^()]+)*)\((?P<place>[^()]*(?:\([^()]*\)[^()]*)?)\)")
_ABERRATION = re.compile(r"(?P<kind>Df|Dp|In|T|Tp|R|C)\((?P<where>[^)]*)\)(?P<name>\S*)")
_ALLELE = re.compile(r"(?P<gene>[^\[\]{}@]+)\[(?P<allele>[^\[\]]*)\](?P<rest>.*)", re.DOTALL)
_RUN_ON = re.compile(r"(?P<gene>[A-Za-z]+?)(?P<allele>\d\w*|\*|-|\+)")
_LABEL = re.compile(r"[(\[]?(?:chr(?:omosome)?\.?\s*)?(?P<name>X|1|2|3|4|I|II|III|IV|V)[)\]]?", re.IGNORECASE)
_CHROMOSOME_LABEL = {"x": "X", "1": "X", "i": "X", "2": "2", "ii": "2", "3": "3", "iii": "3", "4": "4", "iv": "4"}
_ROMAN = re.compile(r"\((X|I|II|III|IV)\)|\[(X|I|II|III|IV)\]")
_JOINED_GENES = {"yw": ("y", "w"), "yv": ("y", "v"), "ywf": ("y", "w", "f")}


@dataclass(frozen=True)
class Word:
    """What one word of a genotype was read as.

    `evidence` is the chromosome that the word itself speaks for, `because` names the kind of evidence;
    `weak` evidence (the number of an insertion) gives way to any other.
    """

    element: Element | None
    evidence: str = ""
    because: str = ""
    weak: bool = False
    problems: tuple[Problem, ...] = ()
    floats: bool = False


class WordReader:
    """Reads words with a catalogue and the elements that a stock list is known to hold."""

    def __init__(self, catalogue: Catalogue, known: Mapping[str, Element], text: str) -> None:
        self.catalogue = catalogue
        self.known = known
        self.text = text

    def read(self, item: Item, after_balancer: bool) -> list[Word]:
        """Return the word or words (`yw` is two) that an item is."""
        text = item.text
        if text == "+" or (text.startswith("+[") and text.endswith("]")):
            return [Word(None)]
        if text == "Y":
            return [Word(Y_ELEMENT, "X", "the Y")]
        if text in _JOINED_GENES:
            return [self._allele(gene, "", item, text) for gene in _JOINED_GENES[text]]
        for read in (self._balancer, self._transposon, self._sited, self._aberration, self._bracketed, self._run_on):
            word = read(item, after_balancer)
            if word is not None:
                return [word]
        return [self._named(item)]

    def _note(self, item: Item, code: str, message: str, hint: str = "", severity: Severity = Severity.NOTE) -> Problem:
        return problem(code, severity, message, self.text, item.start, item.end, hint)

    # -- balancers -----------------------------------------------------------------------------------------------

    def _balancer(self, item: Item, after_balancer: bool) -> Word | None:
        entry = self.catalogue.balancer(item.text)
        if entry is None:
            return self._balancer_typo(item, after_balancer)
        problems = []
        if item.text != entry.name and item.text.lower() == entry.name.lower():
            problems.append(self._note(item, "spelling", f"{item.text} is read as {entry.name}"))
        element = Element(entry.name, Kind.BALANCER, entry.chromosome, traits=entry.traits)
        return Word(element, entry.chromosome, f"the balancer {entry.name}", problems=tuple(problems))

    def _balancer_typo(self, item: Item, after_balancer: bool) -> Word | None:
        if after_balancer or item.text in self.known or len(item.text) > 8:
            return None
        if not re.match(r"(?i)(?:C[YO0]|TM\d|FM\d|SM\d|MKR|MRK)", item.text):
            return None
        if self._marker(item.text) is not None:
            return None
        near = self.catalogue.is_balancer_like(item.text)
        if near is None:
            return None
        fault = self._note(
            item, "balancer-typo", f"'{item.text}' is no balancer that the catalogue knows",
            f"perhaps {near}; correct the stock list, or add the balancer to the lab's catalogue", Severity.ERROR,
        )  # fmt: skip
        return Word(None, problems=(fault,))

    def with_assumed_marker(self, element: Element, item: Item) -> tuple[Element, Problem | None]:
        """Return a balancer written without a marker with the one that it usually carries, and the note that says so."""
        entry = self.catalogue.balancer(element.symbol)
        if entry is None or not entry.assumed or entry.traits == entry.traits_assumed:
            return element, None
        markers = ", ".join(entry.assumed)
        note = self._note(
            item, "assumed-marker", f"{entry.name} is written without a marker and taken to carry {markers}"
            f" ({entry.assumed_reason})", f"write {entry.name}, {markers} if it does", Severity.WARNING,
        )  # fmt: skip
        assumed = Element(element.symbol, Kind.BALANCER, element.chromosome, traits=entry.traits_assumed)
        return assumed, note

    # -- insertions ----------------------------------------------------------------------------------------------

    def _transposon(self, item: Item, after_balancer: bool) -> Word | None:
        match = _TRANSPOSON.fullmatch(item.text)
        if match is None:
            return None
        content, place = match["content"], match["place"].strip()
        if not content.strip():
            fault = self._note(item, "empty-construct", "the braces are empty: which construct is it?",
                               "write its name between the braces", Severity.ERROR)  # fmt: skip
            return Word(None, problems=(fault,))
        markers, name = _markers_and_name(content)
        return self._insertion(name, place, item, markers, item.text)

    def _sited(self, item: Item, after_balancer: bool) -> Word | None:
        match = _AT.fullmatch(item.text)
        if match is not None:
            return self._insertion(match["name"], match["place"], item, (), "")
        match = _IN_PARENTHESES.fullmatch(item.text)
        if match is None or match["name"] in ("Df", "Dp", "In", "T", "Tp", "R", "C", "l", "su", "M"):
            return None
        label = _CHROMOSOME_LABEL.get(match["place"].lower())
        if label is not None:
            word = self._named(Item(match["name"], item.start, item.start + len(match["name"])))
            return Word(word.element, label, f"the label ({match['place']})", problems=word.problems)
        if self.catalogue.site(match["place"]) is not None:
            return self._insertion(match["name"], match["place"], item, (), "")
        return None

    def _insertion(self, name: str, place: str, item: Item, markers: tuple[str, ...], standard: str) -> Word:
        site = self.catalogue.site(place) if place else None
        component = self.catalogue.component(name)
        symbol = f"{name}@{site.name}" if site else f"{name}@{place}" if place else name
        known = self.known.get(symbol)
        if known is not None and not markers:
            return Word(known, known.chromosome if known.site else "", f"the site {known.site}" if known.site else "")
        written = (*markers, *(site.carries if site and not markers else ()))
        traits = self.catalogue.insertion_traits(written if markers else (*_usual(component), *written), component)
        problems = []
        if not markers and component is None:
            problems.append(
                self._note(
                    item,
                    "assumed-marker",
                    f"{name} is taken to carry mini-white, as most insertions do",
                    "write the standard form if it does not",
                )  # fmt: skip
            )
        chromosome, because, weak = "", "", False
        if site is not None:
            chromosome, because = site.chromosome, f"the site {site.name}"
        elif place[:1].isdigit() and place[:1] in "1234":
            chromosome, because, weak = ("X" if place[0] == "1" else place[0]), "the number of the insertion", True
        elif place and (near := self.catalogue.near_sites(place)) and "[" not in place:
            problems.append(
                self._note(
                    item,
                    "unknown-site",
                    f"the catalogue has no landing site '{place}'",
                    f"perhaps {near[0]}",
                    Severity.WARNING,
                )  # fmt: skip
            )
        element = Element(
            symbol, Kind.INSERTION, chromosome if site else "", site=site.name if site else "",
            position_cM=site.map_cM if site else None, component=component.cls if component else "",
            standard=standard, traits=traits,
        )  # fmt: skip
        return Word(element, chromosome, because, weak, tuple(problems))

    # -- aberrations and alleles ---------------------------------------------------------------------------------

    def _aberration(self, item: Item, after_balancer: bool) -> Word | None:
        match = _ABERRATION.fullmatch(item.text)
        if match is None or not match["name"]:
            return None
        where = match["where"]
        places = [p.strip()[:1] for p in re.split(r"[;,]", where) if p.strip()]
        place = places[-1] if places else ""
        chromosome = {"1": "X", "X": "X", "2": "2", "3": "3", "4": "4", "Y": "Y"}.get(place, "")
        if not chromosome:
            fault = self._note(item, "no-such-chromosome", f"'{where}' names no chromosome of this fly",
                               "chromosomes are X (1), Y, 2, 3 and 4", Severity.ERROR)  # fmt: skip
            return Word(None, problems=(fault,))
        problems = []
        traits = PLAIN
        if match["kind"] == "Df":
            traits = Traits(lethal=frozenset({item.text}))
            problems.append(
                self._note(
                    item, "assumed-lethal", f"{item.text} is taken to be lethal over itself, as most deficiencies are"
                )
            )
        element = Element(item.text, Kind.ABERRATION, chromosome, traits=traits)
        evidence = "X" if chromosome == "Y" else chromosome
        return Word(element, evidence, f"the aberration {item.text}", problems=tuple(problems))

    def _bracketed(self, item: Item, after_balancer: bool) -> Word | None:
        match = _ALLELE.fullmatch(item.text)
        if match is None or match["rest"]:
            return None
        if not match["allele"].strip():
            fault = self._note(item, "empty-allele", "the brackets are empty: which allele is it?",
                               f"write {match['gene']}[*] for an allele that is not known", Severity.ERROR)  # fmt: skip
            return Word(None, problems=(fault,))
        return self._allele(match["gene"], match["allele"], item, item.text)

    def _run_on(self, item: Item, after_balancer: bool) -> Word | None:
        if item.text in self.known or self.catalogue.component(item.text) is not None:
            return None
        match = _RUN_ON.fullmatch(item.text)
        if match is None or self.catalogue.marker(match["gene"]) is None:
            return None
        symbol = f"{match['gene']}[{match['allele']}]"
        return self._allele(match["gene"], match["allele"], item, symbol)

    def _marker(self, text: str) -> object | None:
        return self.catalogue.marker(text)

    def _allele(self, gene: str, allele: str, item: Item, symbol: str) -> Word:
        if symbol in _JOINED_GENES:
            symbol = gene
        if allele == "-":
            allele = "*"
        marker = self.catalogue.marker(gene, allele)
        if marker is not None:
            element = Element(symbol, Kind.ALLELE, marker.chromosome, position_cM=marker.map_cM, gene=marker.gene,
                              traits=marker.traits)  # fmt: skip
            return Word(element, marker.chromosome, f"the marker {gene}")
        traits = PLAIN
        chromosome = ""
        if self.catalogue.lethal_by_name(gene) or allele.lower() in ("l", "lethal"):
            traits = Traits(lethal=frozenset({gene}))
            arm = re.match(r"l\((\w+)\)", gene)
            chromosome = {"1": "X", "X": "X"}.get(arm[1][:1], arm[1][:1]) if arm else ""
        locus = self.catalogue.locus(gene)
        if locus is not None:
            chromosome = chromosome or locus.chromosome
        element = Element(
            symbol, Kind.ALLELE, chromosome, position_cM=locus.cM if locus else None, gene=gene, traits=traits
        )
        return Word(element, chromosome, f"the gene {gene}")

    def _named(self, item: Item) -> Word:
        text = item.text
        known = self.known.get(text)
        if known is not None:
            return Word(known, known.chromosome, f"other rows with {text}")
        marker = self.catalogue.marker(text)
        if marker is not None or self.catalogue.lethal_by_name(text) or self.catalogue.locus(text) is not None:
            return self._allele(text, "", item, text)
        label = _ROMAN.search(text)
        if label and label.end() == len(text) and label.start() > 0:
            name = label[1] or label[2]
            inner = self._named(Item(text[: label.start()], item.start, item.start + label.start()))
            return Word(inner.element, _CHROMOSOME_LABEL[name.lower()], f"the label ({name})", problems=inner.problems)
        component = self.catalogue.component(text)
        if component is not None:
            traits = self.catalogue.insertion_traits((), component)
            return Word(Element(text, Kind.INSERTION, component=component.cls, traits=traits))
        if not re.search(r"\w", text):
            fault = self._note(item, "no-symbol", f"'{text}' is no symbol", "take it out, or write what it stands for",
                               Severity.ERROR)  # fmt: skip
            return Word(None, problems=(fault,))
        note = self._note(item, "unknown-symbol", f"{text} is not in the catalogue; it is kept as itself",
                          "add it to the lab's catalogue if it shows, kills or covers something")  # fmt: skip
        return Word(Element(text, Kind.UNKNOWN), problems=(note,))


def _usual(component: object) -> tuple[str, ...]:
    carries = getattr(component, "carries", ("w+",))
    return tuple(carries)


def _markers_and_name(content: str) -> tuple[tuple[str, ...], str]:
    """Return the markers and the name of a construct: of `y[+t7.7] w[+mC]=AD-K12` the two and `AD-K12`."""
    depth = 0
    cut = -1
    for i, char in enumerate(content):
        depth += (char in "[{(") - (char in "]})")
        if char == "=" and depth == 0:
            cut = i
    name = content[cut + 1 :].strip()
    before = content[:cut] if cut >= 0 else ""
    return tuple(before.replace(",", " ").split()), re.sub(r"\s+", "", name)
