"""The tables of the catalogue as they lie on disk, and how one cell of them is read.

Each table is a CSV file in `data/`; `data/SOURCES.md` says what the rows mean. Cells are text until an entry is made.
"""

from __future__ import annotations

import csv
import re
from collections.abc import Iterable, Mapping
from difflib import get_close_matches
from importlib import resources
from typing import Final

from crossplan.errors import InputError
from crossplan.genetics.element import Cover

Row = Mapping[str, str]

#: the words that a column may hold
ALLOWED: Final[Mapping[str, frozenset[str]]] = {
    "stage": frozenset(("adult", "pupa", "larva", "fluorescence")),
    "ease": frozenset(("easy", "medium", "hard")),
    "sex": frozenset(("", "female", "male")),
    "dominance": frozenset(("dominant", "semidominant", "recessive")),
    "homozygote": frozenset(("viable", "lethal", "semilethal", "uncertain", "female sterile")),
    "hemizygous_male": frozenset(("", "viable", "lethal", "sterile")),
    "other_alleles": frozenset(("same", "unknown")),
    "chromosome": frozenset(("", "X", "Y", "2", "3", "4")),
    "arm": frozenset(("", "X", "2L", "2R", "3L", "3R", "4")),
    "class": frozenset(("", "AD", "DBD", "GAL4", "LexA", "QF", "effector", "reporter", "repressor", "helper")),
    "activation": frozenset(("none", "light", "heat")),
    "fate": frozenset(("viable", "weak", "lethal", "unknown")),
    "kind": frozenset(("published", "common practice", "memory", "derived", "lab")),
}
#: name of each table, and the columns that together name a row
KEYS: Final[Mapping[str, tuple[str, ...]]] = {
    "signs": ("sign",),
    "markers": ("gene", "allele"),
    "balancers": ("name", "chromosome"),
    "balancer_pairs": ("one", "other"),
    "y_chromosomes": ("name",),
    "compounds": ("name",),
    "inversions": ("name",),
    "landing_sites": ("name",),
    "components": ("name",),
    "elements": ("name",),
    "map": ("locus",),
    "bands": ("arm", "band"),
}
#: how like two names must be for a hint (our choice; `Cy0` must find `CyO`)
LIKENESS: Final = 0.66


def read_tables() -> dict[str, list[dict[str, str]]]:
    """Return the rows of all tables that come with the program, as text."""
    folder = resources.files("crossplan.genetics") / "data"
    tables = {}
    for name in KEYS:
        text = (folder / f"{name}.csv").read_text(encoding="utf-8")
        tables[name] = list(csv.DictReader(text.splitlines()))
    return tables


def refuse_twice(name: str, first: str, second: str) -> None:
    """Raise InputError where one name means two entries."""
    if first != second:
        raise InputError(f"'{name}' is a name of both {first} and {second}", "give one of them another synonym")


def near_hint(name: str, known: Iterable[str]) -> str:
    """Return a hint with the known names that are spelt almost like `name`."""
    near = get_close_matches(name, list(known), n=3, cutoff=LIKENESS)
    return f"names close to it: {', '.join(near)}" if near else "add it to the lab's catalogue file first"


def parts(text: str) -> tuple[str, ...]:
    """Return the parts of a list in one cell, separated by semicolons that stand outside round brackets."""
    if ";" not in text:
        return (text.strip(),) if text.strip() else ()
    return tuple(p.strip() for p in re.split(r";(?![^()]*\))", text) if p.strip())


def number(text: str, where: str) -> float | None:
    """Return the number in a cell, None for an empty one; InputError names `where` for anything else."""
    if not text:
        return None
    try:
        found = float(text)
    except ValueError:
        raise InputError(f"{where}: '{text}' is not a number", "write it with a point, such as 12.5") from None
    if found != found or found in (float("inf"), float("-inf")):
        raise InputError(f"{where}: '{text}' is not a number", "write it with a point, such as 12.5")
    return found


def share(text: str, where: str) -> float | None:
    """Return a share from 0 to 1, None for an empty cell."""
    found = number(text, where)
    if found is not None and not 0 <= found <= 1:
        raise InputError(f"{where}: {text} is not a share", "write a number from 0 to 1, such as 0.02")
    return found


def yes(text: str, where: str) -> bool:
    """Return whether a cell says yes; an empty one says no."""
    if text.lower() not in ("", "no", "yes"):
        raise InputError(f"{where}: '{text}' is neither yes nor no", "write yes or no")
    return text.lower() == "yes"


def cover(text: str, where: str) -> Cover:
    """Return a stretch in cM, written `5.1-98.9`."""
    match = re.fullmatch(r"(\d+(?:\.\d+)?)\s*-\s*(\d+(?:\.\d+)?)", text)
    if match is None or float(match[1]) >= float(match[2]):
        raise InputError(f"{where}: '{text}' is not a stretch in cM", "write start-end, such as 5.1-98.9")
    return Cover(float(match[1]), float(match[2]))


def pattern(text: str, where: str) -> re.Pattern[str]:
    """Return a regular expression, compiled."""
    try:
        return re.compile(text)
    except re.error as error:
        raise InputError(
            f"{where}: '{text}' is not a regular expression ({error})", "write the name itself, such as ^UAS-mine"
        ) from None
