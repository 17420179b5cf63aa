"""Signs and markers: which look each allele has, when it shows, and whether its carrier lives.

How a row becomes `Traits`:

* a dominant or semidominant marker shows its sign with one copy; a recessive one shows it where the gene has
  no working copy; a null of `w` has no sign of its own (the appearance rules know what a fly without pigment
  looks like);
* a marker whose homozygotes die is a recessive-lethal group: that of the gene where all its alleles are
  alike, else that of the allele; `semilethal` and `uncertain` are not lethal here, so that no class is
  wrongly taken for dead;
* a Minute is known by its name: slender bristles with one copy, dead with two (Lindsley & Zimm 1992, from memory).
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import replace
from types import MappingProxyType
from typing import Final

from crossplan.errors import InputError
from crossplan.genetics.catalogue_entries import MarkerEntry, Sign
from crossplan.genetics.catalogue_tables import Row, near_hint, number, parts, refuse_twice, share
from crossplan.genetics.element import PLAIN, Traits

_SYMBOL = re.compile(r"(?P<gene>.+?)(?:\[(?P<allele>[^\[\]]*)\])?")
_MINUTE = re.compile(r"M\((?P<chromosome>[1-4])\)\S+")
MINUTE_SIGN: Final = "slender bristles"
MINUTE_SOURCE: Final = "Minutes by their name: Lindsley & Zimm 1992 The Genome of Drosophila melanogaster; from memory"


class Markers:
    """The tables `signs` and `markers`, ready for questions.

    Raises:
        InputError: a row names a sign that is not there, holds a number that is none, or a name twice.
    """

    def __init__(self, signs: Iterable[Row], markers: Iterable[Row]) -> None:
        self.signs: Mapping[str, Sign] = MappingProxyType({r["sign"]: _sign(r) for r in signs})
        for sign in self.signs.values():
            for other in sign.hidden_by:
                self.known_sign(other, f"sign {sign.name}, hidden_by")
        self._markers: dict[tuple[str, str], MarkerEntry] = {}
        self._synonyms: dict[str, MarkerEntry] = {}
        self._first_of_gene: dict[str, MarkerEntry] = {}
        for row in markers:
            self._add(row)

    def known_sign(self, name: str, where: str) -> str:
        """Return `name` if it is a sign; InputError naming `where` if not."""
        if name not in self.signs:
            raise InputError(f"{where}: there is no sign '{name}'", near_hint(name, self.signs))
        return name

    def masks(self, dominant: Iterable[str]) -> frozenset[str]:
        """Return the signs that cannot be scored on a fly that shows `dominant`."""
        shown = set(dominant)
        return frozenset(s.name for s in self.signs.values() if shown.intersection(s.hidden_by))

    def all(self) -> tuple[MarkerEntry, ...]:
        """Return all markers in the order of the table."""
        return tuple(self._markers.values())

    def marker(self, gene: str, allele: str = "") -> MarkerEntry | None:
        """Return the marker written as `gene` with `allele`, None when it is not in the catalogue.

        Case counts. A synonym (`If`) gives the entry under its full name (`Kr[If-1]`). An allele that has no
        row of its own is that of the gene, unless the alleles of the gene differ in dominance or fate. A
        wild-type allele (`+`) of a known gene does nothing.
        """
        found = self._markers.get((gene, allele))
        if found is not None:
            return found
        written = f"{gene}[{allele}]" if allele else gene
        synonym = self._synonyms.get(written)
        if synonym is not None:
            return synonym
        if allele.startswith("+"):
            return self._wild_type(gene, allele)
        general = self._markers.get((gene, ""))
        if general is not None:
            return replace(general, allele=allele) if general.other_alleles == "same" else None
        return self._synonyms.get(gene) or self._minute(gene, allele)

    def first_of_gene(self, gene: str) -> MarkerEntry | None:
        """Return the first allele of `gene` in the table."""
        return self._first_of_gene.get(gene)

    def of_symbol(self, symbol: str) -> MarkerEntry | None:
        """Return the marker that is written as one symbol, such as `Sb[1]`."""
        match = _SYMBOL.fullmatch(symbol)
        return self.marker(match["gene"], match["allele"] or "") if match else None

    def required(self, symbol: str, where: str) -> MarkerEntry:
        """Return the marker `symbol`; InputError naming `where` when there is none."""
        found = self.of_symbol(symbol)
        if found is None:
            known = sorted({m.gene for m in self._markers.values()} | set(self._synonyms))
            raise InputError(f"{where}: there is no marker '{symbol}'", near_hint(symbol.partition("[")[0], known))
        return found

    def _wild_type(self, gene: str, allele: str) -> MarkerEntry | None:
        known = self._markers.get((gene, "")) or self.first_of_gene(gene)
        if known is None:
            return None
        return replace(
            known,
            allele=allele,
            synonyms=(),
            dominance="wild type",
            sign="",
            traits=PLAIN,
            homozygote="viable",
            hemizygous_male="",
        )

    def _minute(self, gene: str, allele: str) -> MarkerEntry | None:
        match = _MINUTE.fullmatch(gene)
        if match is None or MINUTE_SIGN not in self.signs:
            return None
        chromosome = "X" if match["chromosome"] == "1" else match["chromosome"]
        traits = Traits(dominant=(MINUTE_SIGN,), lethal=frozenset((gene,)), masks=self.masks((MINUTE_SIGN,)))
        return MarkerEntry(
            gene=gene,
            allele=allele,
            synonyms=(),
            chromosome=chromosome,
            map_cM=None,
            band="",
            dominance="dominant",
            sign=MINUTE_SIGN,
            traits=traits,
            source=MINUTE_SOURCE,
            kind="memory",
            homozygote="lethal",
            hemizygous_male="lethal" if chromosome == "X" else "",
        )

    def _add(self, row: Row) -> None:
        entry = self._entry(row)
        self._markers[entry.gene, entry.allele] = entry
        self._first_of_gene.setdefault(entry.gene, entry)
        for synonym in entry.synonyms:
            refuse_twice(synonym, self._synonyms.setdefault(synonym, entry).symbol, entry.symbol)

    def _entry(self, row: Row) -> MarkerEntry:
        where = f"marker {row['gene']}[{row['allele']}]"
        sign = self.known_sign(row["sign"], where) if row["sign"] else ""
        return MarkerEntry(
            gene=row["gene"],
            allele=row["allele"],
            synonyms=parts(row["synonyms"]),
            chromosome=row["chromosome"],
            map_cM=number(row["map_cM"], where),
            band=row["band"],
            dominance=row["dominance"],
            sign=sign,
            traits=self._traits(row),
            source=row["source"],
            kind=row["kind"],
            homozygote=row["homozygote"],
            hemizygous_male=row["hemizygous_male"],
            other_alleles=row["other_alleles"],
            unreliable_below_C=number(row["unreliable_below_C"], where),
            unreliable_above_C=number(row["unreliable_above_C"], where),
            note=row["note"],
        )

    def _traits(self, row: Row) -> Traits:
        gene, sign, null = row["gene"], row["sign"], row["null_for"]
        group = frozenset((f"{gene}[{row['allele']}]" if row["allele"] else gene,))
        dominant = row["dominance"] in ("dominant", "semidominant") and bool(sign)
        lethal = row["homozygote"] == "lethal"
        return Traits(
            dominant=(sign,) if dominant else (),
            recessive=((gene, sign),) if row["dominance"] == "recessive" and sign and not null else (),
            null_for=frozenset(parts(null)),
            lethal=group if lethal else frozenset(),
            male_lethal=row["hemizygous_male"] == "lethal" and not lethal,
            female_sterile=group if "female sterile" in row["homozygote"] else frozenset(),
            male_sterile=group if row["hemizygous_male"] == "sterile" else frozenset(),
            masks=self.masks((sign,)) if dominant else frozenset(),
        )


def with_markers(traits: Traits, markers: Iterable[MarkerEntry], known: Markers) -> Traits:
    """Return `traits` with the dominant signs and the lethals of `markers` added."""
    chosen = list(markers)
    dominant = dict.fromkeys((*traits.dominant, *(s for m in chosen for s in m.traits.dominant)))
    return replace(
        traits,
        dominant=tuple(dominant),
        lethal=traits.lethal.union(*(m.traits.lethal for m in chosen)),
        masks=known.masks(dominant),
    )


def _sign(row: Row) -> Sign:
    where = f"sign {row['sign']}"
    return Sign(
        name=row["sign"],
        opposite=row["opposite"],
        part=row["part"],
        stage=row["stage"],
        ease=row["ease"],
        sex=row["sex"],
        unreliable_below_C=number(row["unreliable_below_C"], where),
        error_rate=share(row["error_rate"], f"{where}, error_rate"),
        hidden_by=parts(row["hidden_by"]),
        source=row["source"],
        kind=row["kind"],
        note=row["note"],
    )
