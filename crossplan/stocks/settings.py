"""How to read one lab's stock list: a small TOML file, written when asked, so that the answers are given once.

[list]
sheet = "living stocks"     # or: all_sheets = true
dates = "day first"         # or "month first": what 03/04/2026 means in this list

[columns]                   # our word = the heading in the list
stock = "Line no."
genotype = "Geno"
"""

from __future__ import annotations

import json
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass, field
from difflib import get_close_matches
from pathlib import Path
from typing import Any, Final

from crossplan.errors import InputError
from crossplan.stocks.columns import CHROMOSOME_NAMES, NAMES
from crossplan.stocks.dates import ORDERS, Order

#: what a column can be
KINDS_OF_COLUMN: Final = (*NAMES, *CHROMOSOME_NAMES)
_LIST_KEYS: Final = ("sheet", "all_sheets", "dates")


@dataclass(frozen=True)
class ListSettings:
    """How to read a stock list.

    Attributes:
        sheet: the sheet of a workbook; None to look for it.
        all_sheets: read every sheet that has a genotype column.
        date_order: what comes first in 03/04/2026; None to let the column itself settle it.
        columns: heading for a kind of column, where a guess would be wrong.
    """

    sheet: str | None = None
    all_sheets: bool = False
    date_order: Order | None = None
    columns: Mapping[str, str] = field(default_factory=dict)

    def __post_init__(self) -> None:
        if self.sheet is not None and self.all_sheets:
            raise InputError("one sheet is named, and all sheets are asked for too", "leave one of the two out")

    def changed(self, sheet: str | None, all_sheets: bool, columns: Mapping[str, str]) -> ListSettings:
        """Return the settings with what was said on the command line, which goes before the file."""
        if sheet is not None and all_sheets:
            return ListSettings(sheet, all_sheets)
        here = (None, True) if all_sheets else (sheet, False) if sheet is not None else (self.sheet, self.all_sheets)
        return ListSettings(*here, self.date_order, {**self.columns, **columns})


def read_settings(path: Path) -> ListSettings:
    """Return the settings that a file holds.

    Raises:
        InputError: it cannot be read, or says something that is not known; names the very word.
    """
    content = _content(path)
    _known(path, "", content, ("list", "columns"))
    about, columns = content.get("list", {}), content.get("columns", {})
    for name, table in (("list", about), ("columns", columns)):
        if not isinstance(table, dict):
            raise InputError(f"{path}: {name} is no table", f"write [{name}] on a line of its own")
    _known(path, "list", about, _LIST_KEYS)
    _known(path, "columns", columns, KINDS_OF_COLUMN)
    dates = about.get("dates")
    if dates is not None and dates not in ORDERS:
        raise InputError(f"{path}, [list] dates: '{dates}' is not known", f"write one of {', '.join(ORDERS)}")
    _of_kind(path, "list", about, {"sheet": str, "all_sheets": bool})
    _of_kind(path, "columns", columns, dict.fromkeys(columns, str))
    return ListSettings(about.get("sheet"), about.get("all_sheets", False), dates, dict(columns))


def settings_text(settings: ListSettings) -> str:
    """Return the settings as the file says them."""
    lines = ["# how crossplan reads this stock list", "[list]"]
    if settings.sheet:
        lines.append(f"sheet = {_quoted(settings.sheet)}")
    if settings.all_sheets:
        lines.append("all_sheets = true")
    if settings.date_order:
        lines.append(f"dates = {_quoted(settings.date_order)}")
    lines += ["", "[columns]"]
    lines += [f"{kind if kind.isalpha() or '_' in kind else _quoted(kind)} = {_quoted(heading)}"
              for kind, heading in settings.columns.items()]  # fmt: skip
    return "\n".join(lines) + "\n"


def column_of(text: str) -> tuple[str, str]:
    """Return the kind and the heading of `genotype=Geno`.

    Raises:
        InputError: it is not written so, or there is no such kind of column.
    """
    kind, sign, heading = text.partition("=")
    if not sign or not heading.strip():
        raise InputError(f"'{text}' does not say which column is which", "write it as genotype=HEADING")
    if kind.strip() not in KINDS_OF_COLUMN:
        raise InputError(f"'{kind.strip()}' is no kind of column", _meant(kind.strip(), KINDS_OF_COLUMN))
    return kind.strip(), heading.strip()


def _content(path: Path) -> dict[str, Any]:
    try:
        return tomllib.loads(path.read_text(encoding="utf-8-sig"))
    except FileNotFoundError:
        raise InputError(f"there is no file {path}", "check the name of the settings file") from None
    except (OSError, UnicodeDecodeError) as error:
        raise InputError(f"{path} cannot be read: {error}", "it must be a text file in UTF-8") from None
    except tomllib.TOMLDecodeError as error:
        raise InputError(f"{path} is not TOML: {error}", "text goes in quotes") from None


def _known(path: Path, table: str, found: Mapping[str, Any], allowed: tuple[str, ...]) -> None:
    for name in found:
        if name not in allowed:
            where = f", [{table}]" if table else ""
            raise InputError(f"{path}{where}: '{name}' is not known here", _meant(name, allowed))


def _of_kind(path: Path, table: str, found: Mapping[str, Any], kinds: Mapping[str, type]) -> None:
    for name, kind in kinds.items():
        if name in found and not isinstance(found[name], kind):
            expected = "true or false" if kind is bool else "text in quotes"
            raise InputError(f"{path}, [{table}] {name}: {found[name]!r} is not {expected}", "correct the line")


def _meant(name: str, allowed: tuple[str, ...]) -> str:
    near = get_close_matches(name, allowed, n=1)
    return f"did you mean {near[0]}?" if near else f"write one of {', '.join(allowed)}"


def _quoted(text: str) -> str:
    # a JSON string is a TOML string
    return json.dumps(text, ensure_ascii=False)
