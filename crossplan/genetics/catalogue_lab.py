"""A laboratory's own entries: a TOML file that adds to the catalogue or corrects it.

Tables are `[[sign]]`, `[[marker]]`, `[[balancer]]`, `[[site]]` and `[[component]]`; the names in them are the
columns of the catalogue's own tables. An entry with the name of one that exists changes only what it writes:

    [[balancer]]
    name = "TM3"
    assumed = ["Ser[1]"]
    assumed_reason = "all our TM3 are TM3, Ser"

    [[sign]]
    sign = "swollen halteres"
    ease = "easy"

    [[site]]
    name = "attP-east"
    arm = "2R"
    band = "57F"

Lists may be written as lists; `map_cM` that is left out is worked out from the band.
"""

from __future__ import annotations

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
    "site": "landing_sites",
    "component": "components",
}
#: what a new entry cannot do without
REQUIRED: Final = {
    "signs": ("sign", "opposite", "part", "stage", "ease"),
    "markers": ("gene", "chromosome", "dominance", "sign", "homozygote"),
    "balancers": ("name", "chromosome", "lethal_groups"),
    "landing_sites": ("name", "arm"),
    "components": ("name", "class", "pattern", "carries"),
}
#: what a new entry is taken to say when it leaves a column out
DEFAULTS: Final = {"other_alleles": "same", "activation": "none", "kind": "lab"}

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
        for number, entry in reversed(list(enumerate(entries, start=1))):
            _merge(tables[table], table, entry, f"{lab_toml.name}, [[{heading}]] number {number}")
    try:
        return Catalogue(tables)
    except InputError as error:
        raise InputError(f"{lab_toml.name}: {error.message}", error.hint) from None


def _read(path: Path) -> dict[str, list[dict[str, object]]]:
    try:
        text = path.read_text(encoding="utf-8-sig")
    except FileNotFoundError:
        raise InputError(f"there is no file {path}", "check the name of the lab's catalogue file") from None
    except (OSError, UnicodeDecodeError) as error:
        raise InputError(f"{path.name} cannot be read: {error}", "it must be a text file in UTF-8") from None
    try:
        content = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise InputError(f"{path.name} is not TOML: {error}", "text goes in quotes, lists in square brackets") from None
    for heading, entries in content.items():
        if heading not in TABLES:
            raise InputError(f"{path.name}: [[{heading}]] is not known", f"write one of {_headings()}")
        if not isinstance(entries, list) or not all(isinstance(e, dict) for e in entries):
            raise InputError(f"{path.name}: {heading} must be written as [[{heading}]]", "two square brackets")
    return content


def _headings() -> str:
    return ", ".join(f"[[{name}]]" for name in TABLES)


def _merge(rows: Rows, table: str, entry: dict[str, object], where: str) -> None:
    """Change the row of `rows` that `entry` names, or add a new one in front of all others."""
    columns = list(rows[0])
    given = {name: _text(value, f"{where}, {name}") for name, value in entry.items()}
    for name, value in given.items():
        _check(name, value, columns, where)
    key = tuple(given.get(name, "") for name in KEYS[table])
    place = _place_of(key, rows, table)
    if place is None:
        rows.insert(0, _complete(_new(given, columns, table, where), table, where))
    else:
        old = rows[place]
        if "band" in given:
            old = old | {"map_cM": ""}
        changed = old | {"source": f"the lab, correcting: {old['source']}", "kind": "lab"} | given
        rows[place] = _complete(changed, table, where)


def _place_of(key: tuple[str, ...], rows: Rows, table: str) -> int | None:
    names = KEYS[table]
    exact = [i for i, row in enumerate(rows) if tuple(row[n] for n in names) == key]
    if not exact and table == "balancers" and not key[1]:
        exact = [i for i, row in enumerate(rows) if row["name"] == key[0]]
    return exact[0] if exact else None


def _text(value: object, where: str) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, int | float | str):
        return str(value)
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
