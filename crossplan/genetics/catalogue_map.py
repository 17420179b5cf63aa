"""The genetic map: where genes lie, and how a band of the polytene chromosomes becomes a place in cM."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from typing import Final

from crossplan.errors import InputError
from crossplan.genetics.catalogue_entries import Locus
from crossplan.genetics.catalogue_tables import Row, number, parts, refuse_twice
from crossplan.genetics.chromosome import CHROMOSOME_OF_ARM

#: numbered divisions of the polytene map on each arm (Bridges 1935, J. Hered. 26:60)
DIVISIONS: Final[Mapping[str, tuple[int, int]]] = {
    "X": (1, 20),
    "2L": (21, 40),
    "2R": (41, 60),
    "3L": (61, 80),
    "3R": (81, 100),
    "4": (101, 102),
}
#: about how many bands a lettered subdivision has at most; only orders bands within a letter (our scale)
BANDS_IN_A_LETTER: Final = 15
#: chemoreceptors and odorant-binding proteins: their number is the division of the map, the small letter tells
#: genes of one division apart
_NAMED_BY_BAND = re.compile(r"(?:Or|Gr|Ir|Obp)(?P<division>\d{1,3})[a-z]")
NAMED_BY_BAND_SOURCE: Final = (
    "receptor genes are named by their band (Drosophila Odorant Receptor Nomenclature Committee 2000 Cell 102:145, "
    "from memory)"
)
_BAND = re.compile(r"(?P<division>\d{1,3})(?:-?(?P<letter>[A-F])(?P<band>\d{1,2})?)?(?:[-;,].*)?", re.IGNORECASE)
_LETTERS: Final = 6


class GeneticMap:
    """The tables `map` and `bands`, ready for questions.

    Raises:
        InputError: a row holds no number where one belongs, a band of another chromosome, or a name twice.
    """

    def __init__(self, loci: Iterable[Row], bands: Iterable[Row]) -> None:
        self._anchors = _anchors(bands)
        self._loci: dict[str, Locus] = {}
        for row in loci:
            self._add(row)

    def locus(self, gene: str) -> Locus | None:
        """Return where `gene` (symbol or synonym; case counts) lies, None when the map does not have it.

        Genes that are named by their band, as `Or47b` is, are placed by that band.
        """
        return self._loci.get(gene) or self._named_by_band(gene)

    def genes(self) -> tuple[str, ...]:
        """Return every symbol and synonym of the table, in its order."""
        return tuple(self._loci)

    def band_to_cM(self, arm: str, band: str) -> float | None:
        """Return the place of a polytene band such as `68A4` in cM, None when it is not a band of `arm`.

        Linear between anchors of known band and map place (`bands.csv`): good to about 3 cM in mid-arm, and
        no guide to order within 1 cM.
        """
        anchors = self._anchors.get("X" if arm == "1" else arm)
        place = _place_of_band(arm, band)
        if not anchors or place is None:
            return None
        below = [a for a in anchors if a[0] <= place]
        above = [a for a in anchors if a[0] >= place]
        if not below or not above:
            return (anchors[0] if not below else anchors[-1])[1]
        (p, a), (q, b) = below[-1], above[0]
        return round(a if p == q else a + (b - a) * (place - p) / (q - p), 1)

    def band_of_chromosome(self, chromosome: str, band: str, where: str) -> float | None:
        """Return the place of `band` in cM; InputError when it is no band of `chromosome`."""
        arm = arm_of_band(band)
        if not arm or CHROMOSOME_OF_ARM[arm] != chromosome:
            raise InputError(f"{where}: {band} is not a band of chromosome {chromosome}", "such as 68A4 on 3")
        return self.band_to_cM(arm, band)

    def _add(self, row: Row) -> None:
        where = f"locus {row['locus']}"
        locus = self._locus(row["locus"], row, number(row["cM"], where), where)
        for name in (locus.gene, *parts(row["synonyms"])):
            refuse_twice(name, self._loci.setdefault(name, locus).gene, locus.gene)

    def _locus(self, gene: str, row: Row, cM: float | None, where: str) -> Locus:
        """Return the locus of a row, placed by its band where it has no place in cM."""
        band, source = row["band"], row["source"]
        if cM is None and band:
            cM = self.band_of_chromosome(row["chromosome"], band, where)
            source = f"{source}; place in cM worked out from the band {band}"
        return Locus(gene=gene, chromosome=row["chromosome"], cM=cM, band=band, source=source, kind=row["kind"])

    def _named_by_band(self, gene: str) -> Locus | None:
        match = _NAMED_BY_BAND.fullmatch(gene)
        arm = arm_of_band(match["division"]) if match else ""
        if match is None or not arm:
            return None
        row = {"chromosome": CHROMOSOME_OF_ARM[arm], "band": match["division"], "source": NAMED_BY_BAND_SOURCE}
        return self._locus(gene, row | {"kind": "derived"}, None, f"locus {gene}")


def arm_of_band(band: str) -> str:
    """Return the arm of a polytene band such as `68A4`, empty when there is no such division."""
    match = _BAND.fullmatch(band.strip())
    division = int(match["division"]) if match else 0
    return next((arm for arm, (low, high) in DIVISIONS.items() if low <= division <= high), "")


def _anchors(rows: Iterable[Row]) -> dict[str, list[tuple[float, float]]]:
    found: dict[str, list[tuple[float, float]]] = {}
    for row in rows:
        place = _place_of_band(row["arm"], row["band"])
        cM = number(row["cM"], f"band {row['band']}")
        if place is None or cM is None:
            raise InputError(f"band {row['arm']} {row['band']}: not a band with a place in cM", "see bands.csv")
        found.setdefault(row["arm"], []).append((place, cM))
    return {arm: sorted(anchors) for arm, anchors in found.items()}


def _place_of_band(arm: str, band: str) -> float | None:
    """Return a number that grows along the arm: division, letter, band; a letter alone is its middle."""
    match = _BAND.fullmatch(band.strip())
    limits = DIVISIONS.get("X" if arm == "1" else arm)
    if match is None or limits is None:
        return None
    division = int(match["division"])
    if not limits[0] <= division <= limits[1]:
        return None
    if match["letter"] is None:
        return (division + 0.5) * _LETTERS
    letter = division * _LETTERS + ord(match["letter"].upper()) - ord("A")
    if match["band"] is None:
        return letter + 0.5
    return letter + min(int(match["band"]), BANDS_IN_A_LETTER) / (BANDS_IN_A_LETTER + 1)
