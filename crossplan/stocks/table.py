"""A spreadsheet as rows of text, whatever the file: CSV and its kin in any delimiter and encoding, XLSX, ODS.

The file is read, never written. Row numbers are those that the spreadsheet program shows, from 1. Title rows above the
header, blank rows, remarks (rows that begin with `#`, unless a number follows at once, as in the stock #12) and repeated
headers are left out; how many remarks there were is said.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from pathlib import Path

from crossplan.errors import Problem, Severity, StockListError
from crossplan.stocks.text_table import Grid, read_text
from crossplan.stocks.workbook import KINDS, read_sheets

#: how far down the header may stand
DEEPEST_HEADER = 20
#: words by which a header row is known (see columns.py for the full list of names)
HEADER_WORDS = frozenset(("stock", "genotype", "target", "components", "geno", "name", "id", "stock id", "stock no"))


@dataclass(frozen=True, slots=True)
class Row:
    """One row: its number in the spreadsheet, and its cells by column heading."""

    number: int
    cells: dict[str, str]


@dataclass(frozen=True)
class Table:
    """A sheet: headings in order, the rows under them, and what was odd about the file.

    `sheet` is its name in a workbook, empty for a text file; `path` names the sheet too where several are read.
    """

    path: str
    headings: tuple[str, ...]
    rows: tuple[Row, ...]
    problems: tuple[Problem, ...] = ()
    sheet: str = ""


def read_table(path: Path, needed: Sequence[str] = (), sheet: str | None = None) -> Table:
    """Return the table of a file.

    Args:
        path: the file.
        needed: headings of which at least one marks the header row.
        sheet: the sheet of a workbook; otherwise the first that has one of the needed headings, or else the first filled.

    Raises:
        StockListError: the file is missing, is no table, or holds no rows.
    """
    sheets, problems = _grids(path)
    words = {n.lower() for n in needed} | HEADER_WORDS
    name = sheet if sheet is not None else _likeliest(sheets, {n.lower() for n in needed}, words)
    if name not in sheets:
        raise StockListError(f"{path} has no sheet '{name}'", f"its sheets: {', '.join(sheets)}")
    others = [n for n, grid in sheets.items() if n != name and any(map(any, grid))]
    if others and sheet is None:
        problems.append(
            Problem(
                "other-sheets",
                Severity.NOTE,
                f"only the sheet '{name}' was read, not {', '.join(others)}",
                "name the sheet, or ask for all of them",
                str(path),
            )  # fmt: skip
        )
    return _as_table(str(path), sheets[name], problems, words, name)


def read_all_tables(path: Path, needed: Sequence[str]) -> tuple[Table, ...]:
    """Return a table for each sheet that has one of the needed headings; sheets without are named in a note.

    Raises:
        StockListError: the file cannot be read, or no sheet has such a heading.
    """
    sheets, problems = _grids(path)
    needed_words = {n.lower() for n in needed}
    words = needed_words | HEADER_WORDS
    wanted = [n for n, grid in sheets.items() if _has_heading(grid, needed_words, words)]
    if not wanted:
        return (read_table(path, needed),)
    left = [n for n, grid in sheets.items() if n not in wanted and any(map(any, grid))]
    if left:
        problems.append(
            Problem("other-sheets", Severity.NOTE, f"without such a column, and not read: {', '.join(left)}", "",
                    str(path))
        )  # fmt: skip
    several = len(wanted) > 1
    return tuple(
        _as_table(f"{path}, sheet {n}" if several else str(path), sheets[n], problems if i == 0 else [], words, n)
        for i, n in enumerate(wanted)
    )


def _grids(path: Path) -> tuple[dict[str, Grid], list[Problem]]:
    """Return the sheets of a file by name (one without a name for a text file), and what was odd about it."""
    if path.is_dir():
        raise StockListError(f"{path} is a folder, not a stock list", "give the file inside it")
    if not path.exists():
        near = _near_files(path)
        raise StockListError(
            f"there is no file {path}", f"in that folder there is: {near}" if near else "check the name"
        )
    if path.stat().st_size == 0:
        raise StockListError(f"{path} is empty", "export the list again from the spreadsheet")
    kind = KINDS.get(path.suffix.lower())
    try:
        if kind is None:
            grid, problems = read_text(path, HEADER_WORDS)
            return {"": grid}, problems
        sheets = read_sheets(path, kind)
    except OSError as error:
        raise StockListError(
            f"cannot read {path}: {error.strerror or error}", "check your rights to the file"
        ) from error
    if not any(any(map(any, grid)) for grid in sheets.values()):
        raise StockListError(f"{path} holds no filled sheet", "check that the list was saved")
    return sheets, []


def _has_heading(grid: Grid, needed: set[str], words: set[str]) -> bool:
    at = _header_row(grid, words)
    return at is not None and bool(needed & {c.strip().lower() for c in grid[at]})


def _likeliest(sheets: dict[str, Grid], needed: set[str], words: set[str]) -> str:
    filled = [n for n, grid in sheets.items() if any(map(any, grid))]
    return next((n for n in filled if _has_heading(sheets[n], needed, words)), filled[0] if filled else "")


def _near_files(path: Path) -> str:
    if not path.parent.is_dir():
        return ""
    names = [p.name for p in path.parent.iterdir() if p.is_file()]
    return ", ".join(get_close_matches(path.name, sorted(names), n=3, cutoff=0.5))


# -- rows under their headings -----------------------------------------------------------------------------------


def _as_table(path: str, grid: Grid, problems: list[Problem], words: set[str], sheet: str) -> Table:
    at = _header_row(grid, words)
    if at is None:
        raise StockListError(f"{path} holds no rows", "the first filled row must hold the column names")
    headings = _headings(grid[at])
    rows, remarks = [], 0
    for i, cells in enumerate(grid[at + 1 :], start=at + 2):
        texts = [c.strip() for c in cells]
        if _is_comment(texts):
            remarks += 1
            continue
        if not any(texts) or _same(texts, grid[at]):
            continue
        if any(texts[len(headings) :]):
            problems.append(_too_many_cells(path, i, len(headings)))
        rows.append(Row(i, dict(zip(headings, texts + [""] * (len(headings) - len(texts)), strict=False))))
    if remarks:
        problems.append(
            Problem("remarks", Severity.NOTE, f"{remarks} {'row begins' if remarks == 1 else 'rows begin'} with # and"
                    " were left out as remarks", "take the # away where a row is a stock", path)
        )  # fmt: skip
    return Table(path, headings, tuple(rows), tuple(problems), sheet)


def _is_comment(cells: Sequence[str]) -> bool:
    """Whether a row is a remark; `#` alone is a usual heading for the number of a stock, and `#12` is such a number."""
    return bool(cells) and re.match(r"#(?=\S)(?!\d)|#\s+\S", cells[0].strip()) is not None


def _too_many_cells(path: str, row: int, columns: int) -> Problem:
    """Return the warning for a row that runs beyond the last column: most often a comma that should be in quotes."""
    return Problem(
        "too-many-cells",
        Severity.WARNING,
        f"the row has more cells than the {columns} columns, so cells may have slipped",
        'put a cell that holds the delimiter in quotes, such as "w; Sco/CyO; TM3, Sb/TM6B"',
        path,
        row,
    )


def _header_row(grid: Grid, words: set[str]) -> int | None:
    filled = [i for i, row in enumerate(grid) if any(c.strip() for c in row) and not _is_comment(row)]
    for i in filled[:DEEPEST_HEADER]:
        if words & {c.strip().lower() for c in grid[i]}:
            return i
    return filled[0] if filled else None


def _headings(cells: Iterable[str]) -> tuple[str, ...]:
    """Return headings without repeats: an empty one is named by its place, a second `note` is `note (2)`."""
    seen: dict[str, int] = {}
    names = []
    for i, cell in enumerate(cells, start=1):
        name = " ".join(cell.split()) or f"column {i}"
        seen[name] = seen.get(name, 0) + 1
        names.append(name if seen[name] == 1 else f"{name} ({seen[name]})")
    return tuple(names)


def _same(texts: list[str], header: list[str]) -> bool:
    return [t for t in texts if t] == [c.strip() for c in header if c.strip()]


def read_column(path: Path, column: str) -> list[str]:
    """Return the filled cells of one column.

    Raises:
        StockListError: the table cannot be read, or has no such column.
    """
    table = read_table(path, [column])
    by_lower = {h.lower(): h for h in table.headings}
    if column.lower() not in by_lower:
        raise missing_column(path, column, table.headings)
    return [r.cells[by_lower[column.lower()]] for r in table.rows if r.cells[by_lower[column.lower()]]]


def missing_column(path: Path | str, column: str, headings: Sequence[str]) -> StockListError:
    """Return the error for a column that is not there, with the closest ones."""
    near = get_close_matches(column.lower(), [h.lower() for h in headings], n=1, cutoff=0.6)
    hint = (
        f"perhaps '{next(h for h in headings if h.lower() == near[0])}' is meant: rename it"
        if near
        else "name one of them so"
    )
    return StockListError(f"{path} has no column '{column}'; its columns are {', '.join(headings)}", hint)
