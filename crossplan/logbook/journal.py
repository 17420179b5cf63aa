"""The journal: a small table beside the plan, one line for each thing that happened.

It is a CSV file that people may edit. A line that cannot be read is a problem with its place, and the others count.
"""

from __future__ import annotations

import csv
import datetime as dt
import io
from collections.abc import Iterable
from pathlib import Path

from crossplan.bench.plan_folder import write_files
from crossplan.errors import OutputError, Problem, Severity
from crossplan.logbook.entry import Entry, Event

COLUMNS = ("date", "step", "event", "count", "person", "note")


def read_journal(path: Path) -> tuple[tuple[Entry, ...], tuple[Problem, ...]]:
    """Return the entries of a journal in the order of the file, and its faults; a missing file is an empty journal."""
    if not path.exists():
        return (), ()
    entries: list[Entry] = []
    problems: list[Problem] = []
    with path.open(encoding="utf-8-sig", newline="") as file:
        for row in csv.DictReader(file):
            line = len(entries) + len(problems) + 2
            made = _entry(row, str(path), line)
            if isinstance(made, Entry):
                entries.append(made)
            else:
                problems.append(made)
    return tuple(entries), tuple(problems)


def _entry(row: dict[str, str | None], path: str, line: int) -> Entry | Problem:
    cells = {name: (row.get(name) or "").strip() for name in COLUMNS}
    try:
        date = dt.date.fromisoformat(cells["date"])
    except ValueError:
        return _problem(path, line, "date", cells["date"], "a day such as 2027-01-11")
    if cells["event"] not in set(Event):
        return _problem(path, line, "event", cells["event"], " or ".join(Event))
    count = cells["count"]
    if count and not count.isdigit():
        return _problem(path, line, "count", count, "a whole number, or nothing")
    return Entry(
        date, cells["step"], Event(cells["event"]), int(count) if count else None, cells["person"], cells["note"]
    )


def _problem(path: str, line: int, column: str, text: str, expected: str) -> Problem:
    return Problem(
        "journal-line", Severity.WARNING, f"'{text}' is not understood; expected {expected}",
        "correct the cell; the line was left out", path, line, column, text,
    )  # fmt: skip


def add_entry(path: Path, entry: Entry) -> None:
    """Append one entry; the old journal stays whole until the new one is written.

    Raises:
        OutputError: the file cannot be written.
    """
    entries, problems = read_journal(path)
    if problems:
        raise OutputError(f"{path} has {len(problems)} line(s) that cannot be read, so nothing was added",
                          problems[0].place() + ": " + problems[0].message)  # fmt: skip
    write_journal(path, (*entries, entry))


def write_journal(path: Path, entries: Iterable[Entry]) -> None:
    """Write the whole journal, beside the old one first, then in its place.

    Raises:
        OutputError: the file cannot be written.
    """
    text = io.StringIO()
    rows = csv.writer(text, lineterminator="\n")
    rows.writerow(COLUMNS)
    for e in entries:
        rows.writerow((e.date.isoformat(), e.step, e.event, "" if e.count is None else e.count, e.person, e.note))
    try:
        write_files(path.parent, {path.name: text.getvalue().encode()})
    except OSError as error:
        raise OutputError(f"cannot write {path}: {error.strerror}", "check the folder and your rights") from error
