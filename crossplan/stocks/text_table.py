"""A text file as rows of cells, whatever its encoding, line ends, delimiter and quotes."""

from __future__ import annotations

import csv
import re
from collections.abc import Iterable, Sequence
from pathlib import Path

from crossplan.errors import Problem, Severity, StockListError

DELIMITERS = ",\t;|"
LONGEST_CELL = 1_000_000
#: how far a text is looked at for its encoding and its delimiter
_SAMPLE_BYTES = 4096
_SAMPLE_LINES = 30
_LINE = re.compile(r"[^\r\n]*(?:\r\n|\r|\n)|[^\r\n]+$")

Grid = list[list[str]]


def read_text(path: Path, header_words: Iterable[str]) -> tuple[Grid, list[Problem]]:
    """Return the rows of a text file, one for each row that a spreadsheet program shows, and what was odd about it.

    Raises:
        StockListError: it is no text, or holds only blank lines.
        OSError: it cannot be read.
    """
    text, problems = _decoded(path)
    lines = _LINE.findall(text)
    filled = [line for line in lines if line.strip()]
    if not filled:
        raise StockListError(f"{path} holds only blank lines", "export the list again from the spreadsheet")
    csv.field_size_limit(LONGEST_CELL)
    try:
        delimiter = _delimiter(filled, frozenset(header_words))
    except csv.Error as error:
        raise StockListError(
            f"{path} has a cell of more than {LONGEST_CELL:,} characters in its first rows", "look at the quotes"
        ) from error
    grid = _rows(lines, delimiter, path, problems)
    return grid, problems


# -- encoding ----------------------------------------------------------------------------------------------------


def _decoded(path: Path) -> tuple[str, list[Problem]]:
    data = path.read_bytes()
    if data.startswith(b"PK"):
        raise StockListError(
            f"{path} is a workbook or an archive under a wrong ending", "name it .xlsx or .ods, or export CSV"
        )
    wide = _wide_encoding(data)
    if wide:
        return data.decode(wide, errors="replace"), []
    if b"\x00" in data[:_SAMPLE_BYTES]:
        raise StockListError(f"{path} is not a text file", "export the list as CSV, or give the XLSX or ODS file")
    try:
        return data.decode("utf-8-sig"), []
    except UnicodeDecodeError as error:
        # an old Macintosh ends its lines with CR alone
        old_mac = b"\r" in data and b"\n" not in data
        encoding, name = ("mac_roman", "Mac Roman") if old_mac else ("cp1252", "Windows-1252")
        number = data.count(b"\r" if old_mac else b"\n", 0, error.start) + 1
        note = Problem(
            "encoding", Severity.WARNING, f"the file is not UTF-8; it was read as {name}",
            "look at Greek letters and names; export as UTF-8 if they are wrong", str(path), number,
        )  # fmt: skip
        return data.decode(encoding, errors="replace"), [note]


def _wide_encoding(data: bytes) -> str:
    """Return the two-byte encoding of the data, with or without a mark in front; empty when it is none."""
    if data.startswith((b"\xff\xfe", b"\xfe\xff")):
        return "utf-16"
    sample = data[:_SAMPLE_BYTES]
    half = len(sample) // 2
    # latin letters in two bytes have a nought in each first or each second place
    if half >= 8 and sample[1::2].count(0) >= 0.9 * half and b"\x00" not in sample[0::2]:
        return "utf-16-le"
    if half >= 8 and sample[0::2].count(0) >= 0.9 * half and b"\x00" not in sample[1::2]:
        return "utf-16-be"
    return ""


# -- delimiter ---------------------------------------------------------------------------------------------------


def _delimiter(lines: Sequence[str], header_words: frozenset[str]) -> str:
    """Return the delimiter that divides the first lines most evenly (a genotype is full of `;` and `,`)."""
    head = lines[:_SAMPLE_LINES]

    def evenness(delimiter: str) -> tuple[int, int]:
        counts = [len(row) for row in csv.reader(head, delimiter=delimiter)]
        most = max(set(counts), key=lambda n: (counts.count(n) if n > 1 else 0, n))
        return (counts.count(most) if most > 1 else 0, most)

    headed = [
        d for d in DELIMITERS if header_words & {c.strip(' "\r\n').lower() for line in head for c in line.split(d)}
    ]
    candidates = headed if headed and len(headed) < len(DELIMITERS) else list(DELIMITERS)
    return max(candidates, key=lambda d: (evenness(d), -DELIMITERS.index(d)))


# -- rows --------------------------------------------------------------------------------------------------------


def _rows(lines: Sequence[str], delimiter: str, path: Path, problems: list[Problem]) -> Grid:
    """Return the rows; where the quotes of a line do not fit, that line is read by itself and named.

    A quote that is never closed would otherwise swallow the rows below it.
    """
    grid: Grid = []
    at = 0
    while at < len(lines):
        reader = csv.reader(lines[at:], delimiter=delimiter, strict=True)
        read = 0
        try:
            for row in reader:
                grid.append(row)
                read = reader.line_num
            break
        except csv.Error as error:
            at += read
            if "field larger" in str(error):
                raise StockListError(
                    f"{path}, row {len(grid) + 1}: a cell of more than {LONGEST_CELL:,} characters",
                    "look at the quotes",
                ) from error
            grid.append(_loose(lines[at], delimiter, path, len(grid) + 1, problems))
            at += 1
    return grid


def _loose(line: str, delimiter: str, path: Path, row: int, problems: list[Problem]) -> list[str]:
    """Return the cells of one line whose quotes do not fit."""
    plain = line.rstrip("\r\n")
    if plain.count('"') % 2 == 0:
        return next(csv.reader([plain], delimiter=delimiter))
    problems.append(
        Problem(
            "open-quote",
            Severity.WARNING,
            "a quotation mark is never closed; the row was read without it",
            "close it, or take it out: compare the row with the spreadsheet",
            str(path),
            row,
        )  # fmt: skip
    )
    return [cell.replace('"', "") for cell in plain.split(delimiter)]
