"""Marked Y chromosomes, compounds, and inversions of ordinary chromosomes.

* A Y that carries a piece of the X is written as a duplication, `Dp(1;Y)y[+]`: it brings a working copy of the genes
  that its name lists (common practice of the notation).
* Compounds join two arms or chromosomes on one centromere; they are known here so that a genotype can be refused, or
  its outcome told, in words. The attached-X is among the balancers, since it moves as one homologue.
* Inside an inversion that is on one homologue only, a female gives no recombinants to speak of (Sturtevant 1921,
  Proc. Natl. Acad. Sci. 7:235, from memory); its extent here is that between its breakpoints, by the band table.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from typing import Final

from crossplan.errors import InputError
from crossplan.genetics.catalogue_entries import CompoundEntry, InversionEntry, YEntry
from crossplan.genetics.catalogue_map import GeneticMap, arm_of_band
from crossplan.genetics.catalogue_markers import Markers, with_markers
from crossplan.genetics.catalogue_tables import Row, parts, refuse_twice
from crossplan.genetics.element import Cover, Traits

_DUPLICATED_ON_Y = re.compile(r"Dp\((?P<from>[1-4]);Y\)(?P<genes>(?:[A-Za-z][A-Za-z0-9-]*\[\+[^\]]*\])+).*")
_CARRIED = re.compile(r"([A-Za-z][A-Za-z0-9-]*)\[\+[^\]]*\]")
_SORT_OF_COMPOUND = re.compile(r"c\([^()]*\)")
Y_BY_NAME: Final = "a duplication on the Y brings the genes that its name lists (common practice, no source)"


class Aberrations:
    """The tables `y_chromosomes`, `compounds` and `inversions`, ready for questions.

    Raises:
        InputError: a row names a marker or a band that is none, or a name twice.
    """

    def __init__(
        self,
        ys: Iterable[Row],
        compounds: Iterable[Row],
        inversions: Iterable[Row],
        markers: Markers,
        places: GeneticMap,
    ) -> None:
        self._markers = markers
        self._places = places
        self._ys: dict[str, YEntry] = {}
        for row in ys:
            y = self._y(row)
            for name in (y.name, *y.synonyms):
                refuse_twice(name, self._ys.setdefault(_key(name), y).name, y.name)
        self._compounds: dict[str, CompoundEntry] = {}
        for row in compounds:
            compound = _compound(row)
            for name in (compound.name, *compound.synonyms):
                refuse_twice(name, self._compounds.setdefault(_key(name), compound).name, compound.name)
        self._inversions: dict[str, InversionEntry] = {}
        for row in inversions:
            inversion = self._inversion(row)
            for name in (inversion.name, *inversion.synonyms):
                refuse_twice(name, self._inversions.setdefault(_key(name), inversion).name, inversion.name)

    def y_chromosome(self, name: str) -> YEntry | None:
        """Return the marked Y `name`, None when it is not known; `Dp(1;Y)v[+]...` is known by its name."""
        return self._ys.get(_key(name)) or _by_name(name)

    def y_chromosomes(self) -> tuple[YEntry, ...]:
        """Return the marked Y chromosomes of the table."""
        return tuple(dict.fromkeys(self._ys.values()))

    def compound(self, name: str) -> CompoundEntry | None:
        """Return the compound `name`, None when it is not known; attached-X are balancers.

        What follows the bracket (`C(2L)RM4`, `C(1;Y)3`) tells forms apart that do alike.
        """
        found = self._compounds.get(_key(name))
        if found is None:
            sort = _SORT_OF_COMPOUND.match(_key(name))
            found = self._compounds.get(sort.group()) if sort is not None else None
        return found

    def compounds(self) -> tuple[CompoundEntry, ...]:
        """Return the compounds of the table."""
        return tuple(dict.fromkeys(self._compounds.values()))

    def inversion(self, name: str) -> InversionEntry | None:
        """Return the inversion `name`, None when it is not known; inversions that balance are balancers."""
        return self._inversions.get(_key(name))

    def inversions(self) -> tuple[InversionEntry, ...]:
        """Return the inversions of the table."""
        return tuple(dict.fromkeys(self._inversions.values()))

    def _y(self, row: Row) -> YEntry:
        where = f"Y chromosome {row['name']}"
        dominant = [self._markers.required(s, f"{where}, dominant") for s in parts(row["dominant"])]
        traits = with_markers(Traits(restores=frozenset(parts(row["restores"]))), dominant, self._markers)
        return YEntry(
            name=row["name"],
            synonyms=parts(row["synonyms"]),
            traits=traits,
            caution=row["caution"],
            source=row["source"],
            kind=row["kind"],
        )

    def _inversion(self, row: Row) -> InversionEntry:
        where = f"inversion {row['name']}"
        ends = [self._end(band, row["chromosome"], where) for band in parts(row["breakpoints"])]
        if len(ends) != 2:
            raise InputError(f"{where}: '{row['breakpoints']}' is not two breakpoints", "write two bands, 22D3;34A8")
        return InversionEntry(
            name=row["name"],
            synonyms=parts(row["synonyms"]),
            chromosome=row["chromosome"],
            breakpoints=row["breakpoints"],
            traits=Traits(lethal=frozenset(parts(row["lethal_groups"])), cover=(Cover(min(ends), max(ends)),)),
            note=row["note"],
            source=row["source"],
            kind=row["kind"],
        )

    def _end(self, band: str, chromosome: str, where: str) -> float:
        place = self._places.band_of_chromosome(chromosome, band, where)
        if place is None:
            raise InputError(f"{where}: no place is known for {band} on {arm_of_band(band)}", "see bands.csv")
        return place


def _by_name(name: str) -> YEntry | None:
    match = _DUPLICATED_ON_Y.fullmatch(name.strip())
    if match is None:
        return None
    genes = frozenset(_CARRIED.findall(match["genes"]))
    return YEntry(name=name.strip(), synonyms=(), traits=Traits(restores=genes), source=Y_BY_NAME, kind="derived")


def _compound(row: Row) -> CompoundEntry:
    return CompoundEntry(
        name=row["name"],
        synonyms=parts(row["synonyms"]),
        chromosome=row["chromosome"],
        attached=row["attached"],
        outcome=row["outcome"],
        source=row["source"],
        kind=row["kind"],
    )


def _key(name: str) -> str:
    return re.sub(r"[\s,_]", "", name).casefold()
