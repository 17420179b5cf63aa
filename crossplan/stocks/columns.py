"""Which column of a stock list is which.

The names that people use, most usual first. What is not recognised is left alone; what is recognised is shown.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from difflib import get_close_matches

from crossplan.errors import StockListError
from crossplan.stocks.table import missing_column

NAMES: Mapping[str, tuple[str, ...]] = {
    "stock": ("stock", "stock id", "stock no", "stock number", "stock #", "id", "name", "line", "stock name", "no", "#"),
    "genotype": ("genotype", "geno", "full genotype", "genotypes"),
    "tray": ("tray", "rack", "box", "shelf"),
    "vial": ("vial", "position", "pos", "slot", "place", "location"),
    "copies": ("copies", "n copies", "vials", "number of vials"),
    "temperature": ("temp", "temperature", "temp (c)", "degrees"),
    "last_transfer": (
        "last flip", "last flipped", "flipped", "last transfer", "transferred", "last transferred", "flip date",
    ),
    "who": ("who", "person", "owner", "keeper", "responsible"),
    "source": ("received from", "source", "from", "origin", "provenance"),
    "status": ("status", "state"),
    "notes": ("notes", "note", "comments", "comment", "remarks"),
}  # fmt: skip
#: columns that hold one chromosome each, where a lab divides the genotype
CHROMOSOME_NAMES: Mapping[str, tuple[str, ...]] = {
    "X": ("x", "x/y", "chr x", "chr 1", "chromosome x", "chromosome 1", "i", "1"),
    "2": ("2", "ii", "chr 2", "chr ii", "chromosome 2", "second"),
    "3": ("3", "iii", "chr 3", "chr iii", "chromosome 3", "third"),
    "4": ("4", "iv", "chr 4", "chr iv", "chromosome 4", "fourth"),
}


def guess_columns(
    headings: Sequence[str], given: Mapping[str, str] | None = None, path: str = "the table"
) -> dict[str, str]:
    """Return the heading for each kind of column that was recognised; `given` goes before any guess.

    Chromosome columns are returned under `X`, `2`, `3`, `4`, and only when there is no genotype column.

    Raises:
        StockListError: a given heading is not there, or neither a genotype nor chromosome columns are.
    """
    by_lower = {h.lower(): h for h in headings}
    found: dict[str, str] = {}
    for kind, heading in (given or {}).items():
        if heading.lower() not in by_lower:
            raise missing_column(path, heading, headings)
        found[kind] = by_lower[heading.lower()]
    for kind, names in NAMES.items():
        heading = next((by_lower[n] for n in names if n in by_lower and by_lower[n] not in found.values()), "")
        if heading:
            found.setdefault(kind, heading)
    if "genotype" not in found:
        found |= _chromosomes(by_lower)
        if not {"X", "2", "3"} & set(found):
            raise _no_genotype(path, headings)
    return found


def _chromosomes(by_lower: Mapping[str, str]) -> dict[str, str]:
    found = {}
    for chromosome, names in CHROMOSOME_NAMES.items():
        heading = next((by_lower[n] for n in names if n in by_lower), "")
        if heading:
            found[chromosome] = heading
    return found if len(found) > 1 else {}


def _no_genotype(path: str, headings: Sequence[str]) -> StockListError:
    near = get_close_matches("genotype", [h.lower() for h in headings], n=1, cutoff=0.75)
    hint = (
        f"'{next(h for h in headings if h.lower() == near[0])}' may be it: rename it 'genotype'"
        if near
        else ("name the column that holds the genotypes 'genotype'")
    )
    return StockListError(f"{path} has no column 'genotype'; its columns are {', '.join(headings)}", hint)
