"""Everything that can go wrong, in one place.

Two kinds. A fault in somebody's *data* is a value, `Problem`: reading goes on and all of them are shown together.
A request that cannot be carried out is an exception, and ends the command:

    CrossplanError                 the one that commands catch; message, then what to do
    |-- InputError                 a file or an option that cannot be used            (exit status 2)
    |   |-- StockListError         the stock list cannot be read at all
    |   |-- GenotypeError          a genotype that was asked about cannot be read
    |   |-- ScreenError            the screen file contradicts itself or names what nobody has
    |   `-- RearingError           a temperature or a number outside what the biology allows
    |-- OutputError                a file or folder that cannot be written            (exit status 2)
    `-- PlanCheckError             an independent check refuted our own plan: a bug   (exit status 70)

This module imports nothing of crossplan.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum


class Severity(StrEnum):
    """How much a problem matters: an error stops the row, a warning needs an eye, a note is for information."""

    ERROR = "error"
    WARNING = "warning"
    NOTE = "note"


@dataclass(frozen=True, slots=True)
class Problem:
    """One fault in the data, with its place, in words for the person at the bench.

    `path`, `line` and `column` say where (line counts from 1, as the spreadsheet shows it; 0 means no line);
    `start` and `end` are character offsets into the text concerned; `text` holds the very characters.
    """

    code: str
    severity: Severity
    message: str
    hint: str = ""
    path: str = ""
    line: int = 0
    column: str = ""
    text: str = ""
    start: int = 0
    end: int = 0

    def place(self) -> str:
        """Return where it is, such as `stocks.csv, row 12, column genotype`; empty when it has no place."""
        parts = [self.path] if self.path else []
        if self.line:
            parts.append(f"row {self.line}")
        if self.column:
            parts.append(f"column {self.column}")
        return ", ".join(parts)


class CrossplanError(Exception):
    """Base of all: a message, and a hint that says what to do next."""

    exit_status = 2

    def __init__(self, message: str, hint: str = "") -> None:
        super().__init__(message)
        self.message = message
        self.hint = hint


class InputError(CrossplanError):
    """A file or an option that cannot be used."""


class StockListError(InputError):
    """The stock list cannot be read at all (missing, wrong kind of file, no genotype column, no row)."""


class GenotypeError(InputError):
    """A genotype that was asked about cannot be read; carries the problems that were found."""

    def __init__(self, message: str, hint: str = "", problems: tuple[Problem, ...] = ()) -> None:
        super().__init__(message, hint)
        self.problems = problems


class ScreenError(InputError):
    """The screen file cannot be used."""


class RearingError(InputError):
    """A temperature, a share or a number that the biology does not allow."""


class OutputError(CrossplanError):
    """A file or folder that cannot be written."""


class PlanCheckError(CrossplanError):
    """An independent check refuted a plan that crossplan made itself: a bug, please report it."""

    exit_status = 70
