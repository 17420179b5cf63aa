"""The journal: a small table beside the plan, one row for each thing that happened.

It is a CSV file that people may edit in a spreadsheet. A row that cannot be read is a problem with its place, and the
others count. Columns that people added, their order and the delimiter (comma, semicolon or tab) stay as they are.
"""

from __future__ import annotations

import csv
import datetime as dt
import io
import os
import re
import time
from collections.abc import Iterator, Sequence
from contextlib import contextmanager, suppress
from dataclasses import dataclass
from pathlib import Path

from crossplan.bench.plan_folder import write_files
from crossplan.errors import InputError, OutputError, Problem, Severity
from crossplan.logbook.entry import Entry, Event

COLUMNS = ("date", "step", "event", "count", "person", "note")
#: without these a row says nothing
NEEDED = ("date", "step", "event")
DELIMITERS = ",;\t"
BYTE_ORDER_MARK = "\ufeff"
#: how often, and after how many seconds, an entry is tried again while somebody else writes theirs
TRIES, PAUSE_SECONDS = 40, 0.05


@dataclass(frozen=True, slots=True)
class _Sheet:
    """The cells of the file as they stand; `header` is the place of the column names among `rows` (None: no rows)."""

    rows: tuple[tuple[str, ...], ...]
    header: int | None
    delimiter: str = ","
    mark: str = ""
    problems: tuple[Problem, ...] = ()

    def places(self) -> dict[str, int]:
        """Return for each column that we know its place in a row."""
        names = [] if self.header is None else [c.strip().casefold() for c in self.rows[self.header]]
        return {name: names.index(name) for name in COLUMNS if name in names}


def read_journal(path: Path) -> tuple[tuple[Entry, ...], tuple[Problem, ...]]:
    """Return the entries of a journal in the order of the file, and its faults; a missing file is an empty journal.

    Rows are counted as the spreadsheet shows them: a cell with line breaks is in one row, and blank rows count.

    Raises:
        InputError: it is there and cannot be opened (a folder, or no rights).
    """
    return _entries(_read_sheet(path), str(path))


def _read_sheet(path: Path) -> _Sheet:
    try:
        data = path.read_bytes()
    except FileNotFoundError:
        return _Sheet((), None)
    except IsADirectoryError:
        raise InputError(f"{path} is a folder, not a journal", "rename or move it: the journal is a file") from None
    except OSError as error:
        raise InputError(
            f"cannot read {path}: {error.strerror or error}", "close it in other programs, and check your rights to it"
        ) from error
    text, problems = _decoded(data, str(path))
    mark = BYTE_ORDER_MARK if text.startswith(BYTE_ORDER_MARK) else ""
    text = text.removeprefix(BYTE_ORDER_MARK)
    delimiter = _delimiter(text)
    rows: list[tuple[str, ...]] = []
    try:
        # strict: a quote that is never closed would otherwise swallow all rows after it without a word
        rows.extend(
            tuple(cells) for cells in csv.reader(io.StringIO(text, newline=""), delimiter=delimiter, strict=True)
        )
    except csv.Error:
        problems.append(_problem(
            str(path), len(rows) + 1, "", "", "the quotes of this row do not close, so it and the rows after it were"
            " left out", "close the quotes; a quote inside a cell is written twice",
        ))  # fmt: skip
    header = next((i for i, cells in enumerate(rows) if any(c.strip() for c in cells)), None)
    return _Sheet(tuple(rows), header, delimiter, mark, tuple(problems))


def _decoded(data: bytes, path: str) -> tuple[str, list[Problem]]:
    try:
        return data.decode("utf-8"), []
    except UnicodeDecodeError as error:
        wide = data.startswith((b"\xff\xfe", b"\xfe\xff"))
        encoding, name = ("utf-16", "UTF-16") if wide else ("cp1252", "Windows-1252")
        line = data.count(b"\n", 0, error.start) + 1
        before = "" if wide else f" (the first such letter is on line {line})"
        return data.decode(encoding, errors="replace"), [
            _problem(path, 0, "", "", f"the file is not UTF-8; it was read as {name}{before}",
                     "look at the names, and save it as CSV in UTF-8")
        ]  # fmt: skip


def _delimiter(text: str) -> str:
    """Return the delimiter that finds most of our column names in the first line that is not blank."""
    first = next((line for line in text.splitlines() if line.strip()), "")

    def found(delimiter: str) -> int:
        return len({c.strip(' "').casefold() for c in first.split(delimiter)} & set(COLUMNS))

    return max(DELIMITERS, key=found)


def _entries(sheet: _Sheet, path: str) -> tuple[tuple[Entry, ...], tuple[Problem, ...]]:
    entries: list[Entry] = []
    problems = list(sheet.problems)
    if sheet.header is None:
        return (), tuple(problems)
    places = sheet.places()
    missing = [name for name in NEEDED if name not in places]
    if missing:
        text = sheet.delimiter.join(sheet.rows[sheet.header])
        problems.append(_problem(
            path, sheet.header + 1, "", text, f"no column {' and no column '.join(missing)}, so no row was read",
            f"name the columns in this row: {', '.join(COLUMNS)}",
        ))  # fmt: skip
        return (), tuple(problems)
    width = len(sheet.rows[sheet.header])
    for i, cells in enumerate(sheet.rows[sheet.header + 1 :], start=sheet.header + 2):
        if not any(c.strip() for c in cells):
            continue
        made = _too_wide(cells, width, path, i) or _entry(
            {name: cells[at].strip() if at < len(cells) else "" for name, at in places.items()}, path, i
        )
        if isinstance(made, Entry):
            entries.append(made)
        else:
            problems.append(made)
    return tuple(entries), tuple(problems)


def _too_wide(cells: Sequence[str], width: int, path: str, row: int) -> Problem | None:
    beyond = [c for c in cells[width:] if c.strip()]
    if not beyond:
        return None
    return _problem(path, row, "", beyond[0], f"'{beyond[0]}' stands beyond the last column; the row was left out",
                    "put a note that holds the delimiter in double quotes")  # fmt: skip


def _entry(cells: dict[str, str], path: str, row: int) -> Entry | Problem:
    """Return the entry that stripped cells make, or the first fault among them."""

    def wrong(column: str, expected: str) -> Problem:
        text = cells.get(column, "")
        message = f"'{text}' is not understood" if text else f"{column} is empty"
        return _problem(
            path, row, column, text, f"{message}; expected {expected}", "correct the cell; the row was left out"
        )

    try:
        date = dt.date.fromisoformat(cells["date"])
    except ValueError:
        return wrong("date", "a day such as 2027-01-11")
    if not cells["step"]:
        return wrong("step", "a cross such as S03")
    try:
        event = Event.read(cells["event"])
    except InputError:
        return wrong("event", " or ".join(Event))
    count = cells.get("count", "")
    if count and not re.fullmatch(r"[0-9]{1,6}", count):
        return wrong("count", "a whole number below a million, or nothing")
    if event is Event.COLLECTED and not count:
        return wrong("count", "how many flies were collected")
    number = int(count) if count else None
    return Entry(date, cells["step"], event, number, cells.get("person", ""), cells.get("note", ""), row)


def _problem(path: str, row: int, column: str, text: str, message: str, hint: str) -> Problem:
    return Problem("journal", Severity.WARNING, message, hint, path, row, column, text)


# -- adding ------------------------------------------------------------------------------------------------------


def add_entry(path: Path, entry: Entry) -> None:
    """Add one entry below the others; the old journal stays whole until the new one is written.

    What people wrote stays as it is, in columns of their own too; a column of ours that is missing is added at the
    right. The folder is held by a lock file meanwhile, so that two who write at once do not lose an entry.

    Raises:
        InputError: the entry could not be read back (`collected` without a number), or the journal cannot be opened.
        OutputError: the journal has faults, or cannot be written.
    """
    cells = _cells(entry)
    checked = _entry(cells, "", 0)
    if isinstance(checked, Problem):
        what = f"{checked.column} {checked.message}" if checked.text else checked.message
        raise InputError(what, "nothing was written")
    # a journal that is a link to a shared one stays a link
    place = path.resolve()
    try:
        with _held(place):
            sheet = _read_sheet(path)
            _, problems = _entries(sheet, str(path))
            if problems:
                raise OutputError(
                    f"{path} has {len(problems)} fault(s) and cannot be read in full, so nothing was added",
                    f"{problems[0].place()}: {problems[0].message}; {problems[0].hint.partition(';')[0]}",
                )
            rights = place.stat().st_mode if place.exists() else None
            write_files(place.parent, {place.name: _with_row(sheet, cells).encode()})
            if rights is not None:
                # not being the owner is no fault: the entry stands
                with suppress(PermissionError):
                    place.chmod(rights)
    except OSError as error:
        raise OutputError(
            f"cannot write {path}: {error.strerror or error}",
            "close it in other programs, and check your rights to the folder",
        ) from error


def _cells(entry: Entry) -> dict[str, str]:
    count = "" if entry.count is None else str(entry.count)
    texts = (entry.date.isoformat(), entry.step, str(entry.event), count, entry.person, entry.note)
    return {n: t.replace("\r\n", "\n").replace("\r", "\n").strip() for n, t in zip(COLUMNS, texts, strict=True)}


def _with_row(sheet: _Sheet, cells: dict[str, str]) -> str:
    """Return the text of the sheet with one row more."""
    rows = [list(row) for row in sheet.rows]
    if sheet.header is None:
        rows = [list(COLUMNS)]
    else:
        rows[sheet.header] += [name for name in COLUMNS if name not in sheet.places()]
    header = [c.strip().casefold() for c in rows[sheet.header or 0]]
    # of two columns of the same name the first is ours
    rows.append([cells.get(name, "") if header.index(name) == i else "" for i, name in enumerate(header)])
    text = io.StringIO()
    text.write(sheet.mark)
    csv.writer(text, delimiter=sheet.delimiter, lineterminator="\n").writerows(rows)
    return text.getvalue()


@contextmanager
def _held(place: Path) -> Iterator[None]:
    """Hold the journal for one writer; whoever finds it held waits a little, and then is told."""
    lock = place.with_name(f".{place.name}.lock")
    for attempt in range(TRIES):
        try:
            os.close(os.open(lock, os.O_CREAT | os.O_EXCL | os.O_WRONLY))
            break
        except FileExistsError:
            if attempt == TRIES - 1:
                raise OutputError(
                    f"somebody else is writing {place}", f"try again; if nobody is, delete {lock}"
                ) from None
            time.sleep(PAUSE_SECONDS)
    try:
        yield
    finally:
        lock.unlink(missing_ok=True)
