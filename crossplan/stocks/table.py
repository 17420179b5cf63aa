"""A spreadsheet as rows of text, whatever the file: CSV and its kin in any delimiter and encoding, XLSX, ODS.

The file is read, never written. Row numbers are those that the spreadsheet program shows, from 1. Title rows above the
header, blank rows, rows that begin with `#` and repeated headers are left out.
"""

from __future__ import annotations

import csv
import datetime as dt
import io
import zipfile
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from pathlib import Path
from typing import Literal

from crossplan.errors import Problem, Severity, StockListError

WORKBOOKS = {".xlsx": "xlsx", ".xlsm": "xlsx", ".ods": "ods"}
DELIMITERS = ",\t;|"
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
    """A sheet: headings in order, the rows under them, and what was odd about the file."""

    path: str
    headings: tuple[str, ...]
    rows: tuple[Row, ...]
    problems: tuple[Problem, ...] = ()


def read_table(path: Path, needed: Sequence[str] = (), sheet: str | None = None) -> Table:
    """Return the table of a file.

    Args:
        path: the file.
        needed: headings of which at least one marks the header row.
        sheet: the sheet of a workbook; the first one that holds something otherwise.

    Raises:
        StockListError: the file is missing, is no table, or holds no rows.
    """
    if path.is_dir():
        raise StockListError(f"{path} is a folder, not a stock list", "give the file inside it")
    if not path.exists():
        near = _near_files(path)
        raise StockListError(
            f"there is no file {path}", f"in that folder there is: {near}" if near else "check the name"
        )
    if path.stat().st_size == 0:
        raise StockListError(f"{path} is empty", "export the list again from the spreadsheet")
    problems: list[Problem] = []
    try:
        kind = WORKBOOKS.get(path.suffix.lower())
        if kind is not None:
            grid = _read_workbook(path, kind, sheet)
        else:
            grid, problems = _read_text(path)
    except OSError as error:
        raise StockListError(
            f"cannot read {path}: {error.strerror or error}", "check your rights to the file"
        ) from error
    return _as_table(path, grid, problems, needed)


def _near_files(path: Path) -> str:
    if not path.parent.is_dir():
        return ""
    names = [p.name for p in path.parent.iterdir() if p.is_file()]
    return ", ".join(get_close_matches(path.name, sorted(names), n=3, cutoff=0.5))


# -- text files --------------------------------------------------------------------------------------------------


def _read_text(path: Path) -> tuple[list[list[str]], list[Problem]]:
    text, problems = _decoded(path)
    lines = [line for line in io.StringIO(text, newline=None) if line.strip()]
    if not lines:
        raise StockListError(f"{path} holds only blank lines", "export the list again from the spreadsheet")
    delimiter = _delimiter(lines)
    csv.field_size_limit(1_000_000)
    # only CR and LF end a row; a cell with line breaks is one row, as the spreadsheet program numbers it
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=delimiter)
    try:
        grid = list(reader)
    except csv.Error as error:
        raise StockListError(f"{path}, line {reader.line_num}: {error}", "check the quotes on that line") from error
    return grid, problems


def _decoded(path: Path) -> tuple[str, list[Problem]]:
    data = path.read_bytes()
    if data.startswith((b"\xff\xfe", b"\xfe\xff")):
        return data.decode("utf-16", errors="replace"), []
    if data.startswith(b"PK"):
        raise StockListError(
            f"{path} is a workbook or an archive under a wrong ending", "name it .xlsx or .ods, or export CSV"
        )
    if b"\x00" in data[:4096]:
        raise StockListError(f"{path} is not a text file", "export the list as CSV, or give the XLSX or ODS file")
    try:
        return data.decode("utf-8-sig"), []
    except UnicodeDecodeError as error:
        number = data.count(b"\n", 0, error.start) + 1
        note = Problem(
            "encoding", Severity.WARNING, "the file is not UTF-8; it was read as Windows-1252",
            "look at Greek letters and names; export as UTF-8 if they are wrong", str(path), number,
        )  # fmt: skip
        return data.decode("cp1252", errors="replace"), [note]


def _delimiter(lines: Sequence[str]) -> str:
    """Return the delimiter that divides the first lines most evenly (a genotype is full of `;` and `,`)."""
    head = lines[:30]

    def evenness(delimiter: str) -> tuple[int, int]:
        counts = [len(row) for row in csv.reader(head, delimiter=delimiter)]
        most = max(set(counts), key=lambda n: (counts.count(n) if n > 1 else 0, n))
        return (counts.count(most) if most > 1 else 0, most)

    headed = [d for d in DELIMITERS if HEADER_WORDS & {c.strip().lower() for line in head for c in line.split(d)}]
    candidates = headed if headed and len(headed) < len(DELIMITERS) else list(DELIMITERS)
    return max(candidates, key=lambda d: (evenness(d), -DELIMITERS.index(d)))


# -- workbooks ---------------------------------------------------------------------------------------------------


def _read_workbook(path: Path, kind: str, sheet: str | None) -> list[list[str]]:
    import pandas

    engine: Literal["openpyxl", "odf"] = "openpyxl" if kind == "xlsx" else "odf"
    try:
        frames = pandas.read_excel(path, sheet_name=None, header=None, dtype=object, na_filter=False, engine=engine)
    except (zipfile.BadZipFile, KeyError, ValueError, EOFError) as error:
        raise StockListError(
            f"{path} is no readable workbook ({error})", "open it and save it again, or export CSV"
        ) from error
    sheets = {str(name): [[_cell(v) for v in row] for row in frame.to_numpy()] for name, frame in frames.items()}
    if sheet is not None:
        if sheet not in sheets:
            raise StockListError(f"{path} has no sheet '{sheet}'", f"its sheets: {', '.join(sheets)}")
        return sheets[sheet]
    filled = [grid for grid in sheets.values() if any(any(row) for row in grid)]
    if not filled:
        raise StockListError(f"{path} holds no filled sheet", "check that the list was saved")
    return filled[0]


def _cell(value: object) -> str:
    """Return a cell as text: dates in ISO form, whole numbers without a point."""
    if value is None or value != value:
        return ""
    if isinstance(value, dt.datetime):
        return value.date().isoformat()
    if isinstance(value, float) and value.is_integer():
        return str(int(value))
    return str(value)


# -- rows under their headings -----------------------------------------------------------------------------------


def _as_table(path: Path, grid: list[list[str]], problems: list[Problem], needed: Sequence[str]) -> Table:
    at = _header_row(grid, {n.lower() for n in needed} | HEADER_WORDS)
    if at is None:
        raise StockListError(f"{path} holds no rows", "the first filled row must hold the column names")
    headings = _headings(grid[at])
    rows = []
    for i, cells in enumerate(grid[at + 1 :], start=at + 2):
        texts = [c.strip() for c in cells]
        if not any(texts) or _is_comment(texts) or _same(texts, grid[at]):
            continue
        if any(texts[len(headings) :]):
            problems.append(_too_many_cells(path, i, len(headings)))
        rows.append(Row(i, dict(zip(headings, texts + [""] * (len(headings) - len(texts)), strict=False))))
    return Table(str(path), headings, tuple(rows), tuple(problems))


def _is_comment(cells: Sequence[str]) -> bool:
    """Whether a row is a remark; `#` alone is a usual heading for the number of a stock."""
    first = cells[0].strip()
    return first.startswith("#") and first != "#"


def _too_many_cells(path: Path, row: int, columns: int) -> Problem:
    """Return the warning for a row that runs beyond the last column: most often a comma that should be in quotes."""
    return Problem(
        "too-many-cells",
        Severity.WARNING,
        f"the row has more cells than the {columns} columns, so cells may have slipped",
        'put a cell that holds the delimiter in quotes, such as "w; Sco/CyO; TM3, Sb/TM6B"',
        str(path),
        row,
    )


def _header_row(grid: list[list[str]], words: set[str]) -> int | None:
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
