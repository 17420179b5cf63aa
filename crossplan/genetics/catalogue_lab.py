"""A laboratory's own entries: a TOML file that adds to the catalogue or corrects it.

Tables are `[[element]]`, `[[balancer]]`, `[[marker]]`, `[[sign]]`, `[[site]]`, `[[component]]`, `[[gene]]`,
`[[balancer_pair]]`, `[[y_chromosome]]`, `[[inversion]]` and `[[compound]]`; the names in them are the columns of the
catalogue's own tables. An entry with the name of one that exists changes only what it writes:

    [[balancer]]
    name = "TM3"
    assumed = ["Ser[1]"]
    assumed_reason = "all our TM3 are TM3, Ser"

    [[sign]]
    sign = "swollen halteres"
    ease = "easy"
    error_rate = 0.03

    [[site]]
    name = "attP-east"
    arm = "2R"
    band = "57F"

    [[gene]]
    locus = "qx"
    chromosome = "3"
    band = "87C"

Where an insertion of the laboratory sits is settled once for all in `[[element]]`. Its name is that which the stock
list writes (capitals, blanks, brackets and hyphens do not matter); all else but the place is optional:

    [[element]]
    name = "kx-GAL4"
    chromosome = "2"            # X, Y, 2, 3 or 4; or `site`, which tells the chromosome
    band = "49D"                # optional, for map distances; or map_cM = 66.7

    [[element]]
    name = "UAS-mine"
    synonyms = ["UAS-mine(2)", "mine[UAS]"]
    site = "attP40"
    class = "effector"          # AD, DBD, GAL4, LexA, QF, effector, reporter, repressor, helper
    carries = ["w+"]            # its transformation markers
    sign = "green fluorescence" # a sign of its own
    homozygote = "lethal"       # viable (the default), lethal or female sterile

    [[element]]
    name = "third-chromosome traps"
    pattern = "tz\\\\d+-GAL4"     # all names that match whole; `name` is then only a heading
    chromosome = "3"

Lists may be written as lists; `map_cM` that is left out is worked out from the band. A name that the laboratory
settles stands before that of the catalogue.
"""

from __future__ import annotations

import json
import tomllib
from difflib import get_close_matches
from pathlib import Path
from typing import Final

from crossplan.errors import InputError
from crossplan.genetics.catalogue import ALLOWED, KEYS, Catalogue, default_catalogue, read_tables

#: table of the lab's file -> table of the catalogue
TABLES: Final = {
    "sign": "signs",
    "marker": "markers",
    "balancer": "balancers",
    "balancer_pair": "balancer_pairs",
    "y_chromosome": "y_chromosomes",
    "compound": "compounds",
    "inversion": "inversions",
    "site": "landing_sites",
    "component": "components",
    "element": "elements",
    "gene": "map",
}
#: what a new entry cannot do without
REQUIRED: Final = {
    "signs": ("sign", "opposite", "part", "stage", "ease"),
    "markers": ("gene", "chromosome", "dominance", "sign", "homozygote"),
    "balancers": ("name", "chromosome", "lethal_groups"),
    "balancer_pairs": ("one", "other", "fate", "reason"),
    "y_chromosomes": ("name",),
    "compounds": ("name", "chromosome", "attached", "outcome"),
    "inversions": ("name", "chromosome", "breakpoints"),
    "landing_sites": ("name", "arm"),
    "components": ("name", "class", "pattern", "carries"),
    "elements": ("name",),
    "map": ("locus", "chromosome"),
}
#: what a new entry is taken to say when it leaves a column out
DEFAULTS: Final = {"other_alleles": "same", "activation": "none", "kind": "lab"}
#: columns that an entry loses when the first of them is corrected: a place that was said of another place
PLACE_OF: Final = {
    "landing_sites": ("band", "map_cM"),
    "map": ("chromosome", "band", "cM"),
    "elements": ("chromosome", "site", "band", "map_cM"),
}

Rows = list[dict[str, str]]


def load_catalogue(lab_toml: Path | None) -> Catalogue:
    """Return the catalogue with the lab's own entries; without a file, the one that comes with the program.

    Raises:
        InputError: the file cannot be read, or an entry in it cannot be used; says which entry and which name
            in it.
    """
    if lab_toml is None:
        return default_catalogue()
    tables = read_tables()
    for heading, entries in _read(lab_toml).items():
        table = TABLES[heading]
        _refuse_repeats(entries, table, f"{lab_toml.name}, [[{heading}]]")
        for number, entry in reversed(list(enumerate(entries, start=1))):
            _merge(tables[table], table, entry, f"{lab_toml.name}, [[{heading}]] number {number}")
    try:
        return Catalogue(tables)
    except InputError as error:
        raise InputError(f"{lab_toml.name}: {error.message}", error.hint) from None


def blank_element(symbol: str) -> str:
    """Return the lines of a lab's catalogue file that settle where `symbol` sits, with the answer left open."""
    name = json.dumps(symbol, ensure_ascii=False)  # a JSON string is a TOML string
    return f'[[element]]\nname = {name}\nchromosome = ""    # X, Y, 2, 3 or 4; or site = "..."\n'


def _read(path: Path) -> dict[str, list[dict[str, object]]]:
    try:
        text = path.read_text(encoding="utf-8-sig")
    except FileNotFoundError:
        raise InputError(f"there is no file {path}", "check the name of the lab's catalogue file") from None
    except (OSError, UnicodeDecodeError) as error:
        raise InputError(f"{path.name} cannot be read: {error}", "it must be a text file in UTF-8") from None
    try:
        content = tomllib.loads(text)
    except (tomllib.TOMLDecodeError, RecursionError) as error:
        raise InputError(f"{path.name} is not TOML: {error}", "text goes in quotes, lists in square brackets") from None
    for heading, entries in content.items():
        if heading not in TABLES:
            raise InputError(f"{path.name}: [[{heading}]] is not known", f"write one of {_headings()}")
        if not isinstance(entries, list) or not all(isinstance(e, dict) for e in entries):
            raise InputError(f"{path.name}: {heading} must be written as [[{heading}]]", "two square brackets")
    return content


def _headings() -> str:
    return ", ".join(f"[[{name}]]" for name in TABLES)


def _refuse_repeats(entries: list[dict[str, object]], table: str, where: str) -> None:
    """Refuse two entries of one name: which of them holds would depend on their order."""
    seen: dict[tuple[str, ...], int] = {}
    for number, entry in enumerate(entries, start=1):
        key = tuple(str(entry.get(name, "")) for name in KEYS[table])
        first = seen.setdefault(key, number)
        if first != number:
            message = f"{where} number {number}: '{' '.join(k for k in key if k)}' is written in number {first} already"
            raise InputError(message, "put all that is known of it in one entry")


def _merge(rows: Rows, table: str, entry: dict[str, object], where: str) -> None:
    """Change the row of `rows` that `entry` names, or add a new one in front of all others."""
    columns = list(rows[0])
    given = {name: _text(value, f"{where}, {name}") for name, value in entry.items()}
    for name, value in given.items():
        _check(name, value, columns, where)
    key = tuple(given.get(name, "") for name in KEYS[table])
    if not any(key):
        raise InputError(f"{where} lacks {KEYS[table][0]}", "write which entry it is")
    place = _place_of(key, rows, table)
    if place is None:
        rows.insert(0, _complete(_new(given, columns, table, where), table, where))
    else:
        old = rows.pop(place)
        changed = _without_old_place(old, given, table)
        changed |= {"source": f"the lab, correcting: {old['source']}", "kind": "lab"} | given
        # in front of all others, so that a corrected pattern is tried before those of the catalogue
        rows.insert(0 if table == "elements" else place, _complete(changed, table, where))


def _without_old_place(old: dict[str, str], given: dict[str, str], table: str) -> dict[str, str]:
    columns = PLACE_OF.get(table, ())
    corrected = next((i for i, name in enumerate(columns) if name in given), len(columns))
    if table == "elements" and corrected < len(columns):
        corrected = 0  # a site tells the chromosome as well
    if table == "elements" and given.keys() & {"band", "map_cM"} and not given.keys() & {"chromosome", "site"}:
        corrected = 1
    return old | dict.fromkeys(columns[corrected:], "")


def _place_of(key: tuple[str, ...], rows: Rows, table: str) -> int | None:
    names = KEYS[table]
    exact = [i for i, row in enumerate(rows) if tuple(row[n] for n in names) == key]
    if not exact and table == "balancers" and not key[1]:
        exact = [i for i, row in enumerate(rows) if row["name"] == key[0]]
    if not exact and table == "balancer_pairs":
        exact = [i for i, row in enumerate(rows) if (row["other"], row["one"]) == key]
    return exact[0] if exact else None


def _text(value: object, where: str) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, int | float | str):
        return str(value).strip()
    if isinstance(value, list) and all(isinstance(v, int | float | str) for v in value):
        return ";".join(str(v) for v in value)
    hint = "write text, a number, true or false, or a list of texts"
    raise InputError(f"{where}: '{value}' cannot be used here", hint)


def _check(name: str, value: str, columns: list[str], where: str) -> None:
    if name not in columns:
        near = get_close_matches(name, columns, n=1)
        hint = f"did you mean {near[0]}?" if near else f"write one of {', '.join(columns)}"
        raise InputError(f"{where}: '{name}' is not known here", hint)
    if name in ALLOWED and value not in ALLOWED[name]:
        choices = ", ".join(sorted(v for v in ALLOWED[name] if v))
        raise InputError(f"{where}, {name}: '{value}' is not a word for it", f"write one of {choices}")


def _new(given: dict[str, str], columns: list[str], table: str, where: str) -> dict[str, str]:
    missing = [name for name in REQUIRED[table] if name not in given]
    if missing:
        message = f"{where} is new to the catalogue and lacks {', '.join(missing)}"
        raise InputError(message, 'write it, if only as ""')
    if table == "elements" and not (given.get("chromosome") or given.get("site")):
        raise InputError(f"{where}, chromosome: '{given['name']}' has none", "write X, Y, 2, 3 or 4, or its site")
    blank = {name: DEFAULTS.get(name, "") for name in columns}
    return blank | {"source": "the lab's own catalogue file"} | given


def _complete(row: dict[str, str], table: str, where: str) -> dict[str, str]:
    """Return a landing site with its place in cM worked out from its band where that is missing."""
    if table != "landing_sites" or not row["band"]:
        return row
    place = default_catalogue().band_to_cM(row["arm"], row["band"])
    if place is None:
        raise InputError(f"{where}: {row['band']} is not a band of {row['arm']}", "such as 68A4 on 3L")
    return row | {"map_cM": row["map_cM"] or str(place)}
