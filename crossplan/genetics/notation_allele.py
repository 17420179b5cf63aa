"""Alleles and genes as people write them: in brackets, run on, run together (`yw`), with a tag.

A superscript that was lost (`w1118`, `parats1`) is put back where the gene is one that the catalogue knows and what
follows has the form of an allele (common practice, no source).
"""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import replace
from functools import lru_cache
from typing import Final

from crossplan.errors import Problem, Severity
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.element import PLAIN, Element, Kind, Traits
from crossplan.genetics.notation_insertion import component_of
from crossplan.genetics.notation_split import Item
from crossplan.genetics.notation_word import Evidence, Rank, SymbolReader, Word, said

ALLELE = re.compile(r"(?P<gene>[^\[\]{}@]+?)\[(?P<allele>[^\[\]]*(?:\[[^\[\]]*\][^\[\]]*)*)\]")
_IN_ROUND = re.compile(r"(?P<gene>[A-Za-z]{1,5})\((?P<allele>\d{1,4}|\*)\)")
_RUN_ON = re.compile(r"(?P<gene>[A-Za-z]+?)(?P<allele>[1-9]\d{0,3}(?:[a-z]{1,2}\d{0,2})?|\*|-|\+)")
_LINE_CODE = re.compile(r"[A-Z]\d{2}[A-H]\d{2}")
_YELLOW_WHITE = re.compile(r"(?P<y>y\d{0,2}\*?)(?P<w>w(?:\d{1,4}(?:[a-z]\d{1,2})?|\*|-)?)(?P<v>[vf]\d{0,2})?")
#: what an allele of a mapped gene looks like when it is run on: numbers, a temperature-sensitive one, a knock-out, a stop
_RUN_ON_LOCUS = re.compile(
    r"(?:[A-Z]{0,3}\d{1,5}[A-Za-z]{0,2}\d{0,2}|[Tt][Ss]\d*|D\d*|[a-z]{1,3}\d{1,4}[a-z]?|\u0394\w{1,6}|null|KO\d*|FlpStop(?:-?N?D)?)"
    r"(?:-\d+)?"
)
_LONGEST_GENE: Final = 12
_TELLING_GENE: Final = 3
_TAGS: Final = frozenset(
    ("ha", "flag", "3xflag", "3xha", "v5", "myc", "ollas", "gfp", "egfp", "sgfp", "sfgfp", "superfoldergfp", "yfp", "venus",
     "cfp", "rfp", "tagrfp", "cherry", "mcherry", "3xmcherry", "tomato", "tdtomato", "halo", "snap")
)  # fmt: skip


class AlleleReader(SymbolReader):
    """Reads alleles; `read` reads any symbol."""

    def __init__(self, catalogue: Catalogue, text: str, read: Callable[[Item, Element | None], list[Word]]) -> None:
        super().__init__(catalogue, text)
        self._read = read

    def run_together(self, item: Item) -> list[Word] | None:
        """Read `yw`, `y1w67c23`, `y1w*` as the genes that they are."""
        if item.text[0] != "y" or "w" not in item.text:
            return None
        match = _YELLOW_WHITE.fullmatch(item.text)
        if match is None:
            return self._yw122(item) if item.text == "yw122" else None
        words: list[Word] = []
        for name in ("y", "w", "v"):
            if match[name]:
                words += self.read(Item(match[name], item.start, item.end)) or []
        return words

    def _yw122(self, item: Item) -> list[Word]:
        note = self.say(item, "spelling", "yw122 is read as y w hsFLP122 (common practice)", "write y w hsFLP122",
                         Severity.WARNING)  # fmt: skip
        (flp,) = self._read(Item("hsFLP122", item.start, item.end), None)
        return [*(self.run_together(Item("yw", item.start, item.end)) or ()), replace(flp, problems=(note,))]

    def read(self, item: Item) -> list[Word] | None:
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
            return [self.allele(text, "", item, text)]
        return exact

    def _spelt_allele(self, gene: str, allele: str, item: Item) -> Word:
        return self.allele(gene, allele, item, f"{gene}[{allele}]")

    def _known_allele(self, item: Item) -> list[Word] | None:
        """Read an allele whose superscript was lost, if the catalogue has just that one: `wa`, `snX2`."""
        for cut in range(1, min(len(item.text), 5)):
            gene, allele = item.text[:cut], item.text[cut:]
            if (gene, allele) in _exact_alleles(self.catalogue):
                return [self._spelt_allele(gene, allele, item)]
        return None

    def _bracketed(self, item: Item) -> list[Word] | None:
        text = item.text
        matches = list(ALLELE.finditer(text))
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
                words.append(self.fault(part, "empty-allele", "the brackets are empty: which allele is it?",
                                         f"write {match['gene']}[*] for an allele that is not known"))  # fmt: skip
            else:
                words.append(self.allele(match["gene"], match["allele"], part, match.group()))
        return words

    def _is_stranger(self, gene: str) -> bool:
        return self.catalogue.marker(gene) is None and self.catalogue.locus(gene) is None

    def _is_transgene(self, gene: str, allele: str, text: str) -> bool:
        """Tell `tub-GAL80[ts]`, a construct, from an allele of a gene."""
        if self.catalogue.marker(gene, allele) is not None or self.catalogue.locus(gene) is not None:
            return False
        return "\\" not in gene and component_of(self.catalogue, text) is not None

    def allele(self, gene: str, allele: str, item: Item, symbol: str) -> Word:
        """Return the word for an allele; without one (`""`) for the gene by itself."""
        marker = self.catalogue.marker(gene, "*" if allele == "-" else allele)
        if marker is not None:
            element = Element(symbol, Kind.ALLELE, marker.chromosome, position_cM=marker.map_cM, gene=marker.gene,
                              traits=marker.traits)  # fmt: skip
            return Word(element, said(marker.chromosome, f"the marker {symbol}"))
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
            problems = (self.unknown(item, symbol),)
        element = Element(
            symbol, Kind.ALLELE, chromosome, position_cM=locus.cM if locus else None, gene=gene, traits=traits
        )
        evidence = said(chromosome, f"the gene {gene}")
        if not allele and not traits.lethal:
            # the bare name of a gene without a look is often short for a driver of that gene
            evidence = tuple(replace(e, rank=Rank.HINT) for e in evidence)
        return Word(element, evidence, problems)

    def run_on_locus(self, item: Item) -> Word | None:
        """Read a mapped gene with its allele run on to it: `parats1`, `cacTS2`, `kluR51`.

        Short gene symbols begin too many other names (`d11204`, `c564`): of them the gene is only a hint.
        """
        genes = _genes(self.catalogue)
        for end in range(min(len(item.text) - 1, _LONGEST_GENE), 0, -1):
            gene, allele = item.text[:end], item.text[end:]
            if gene not in genes or not _RUN_ON_LOCUS.fullmatch(allele):
                continue
            if end >= _TELLING_GENE:
                word = self.allele(gene, allele, item, f"{gene}[{allele}]")
                note = self.say(item, "spelling", f"{item.text} is read as {gene}[{allele}]")
                return replace(word, problems=(note, *word.problems))
            return self._hint(item, gene)
        return None

    def tagged_gene(self, item: Item) -> Word | None:
        """Read a gene with a tag in it, which may stand at its own place or elsewhere: `HA-dpp`, `Sra1-GFP`."""
        parts = re.split(r"[-:.]+", item.text)
        rest = [p for p in parts if p.lower() not in _TAGS]
        if len(rest) != 1 or len(parts) < 2 or rest[0] not in _genes(self.catalogue):
            return None
        return self._hint(item, rest[0])

    def _hint(self, item: Item, gene: str) -> Word | None:
        locus = self.catalogue.locus(gene)
        if locus is None or not locus.chromosome:
            return None
        evidence = Evidence(locus.chromosome, f"the gene {gene} in its name", Rank.HINT)
        return Word(Element(item.text, Kind.UNKNOWN), (evidence,), (self.unknown(item, item.text),))


@lru_cache(maxsize=8)
def _genes(catalogue: Catalogue) -> frozenset[str]:
    """Return every gene of which the catalogue knows the chromosome."""
    return frozenset(catalogue.genes())


@lru_cache(maxsize=8)
def _exact_alleles(catalogue: Catalogue) -> frozenset[tuple[str, str]]:
    return frozenset((m.gene, m.allele) for m in catalogue.markers() if m.allele)
