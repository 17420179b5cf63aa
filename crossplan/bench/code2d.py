"""The square code on a vial label: what it says and its pattern.

A QR code was chosen over Data Matrix because every telephone reads it without a special program, although a
Data Matrix of the same text is smaller (24 modules a side with its white border, against 33). The pattern
is made by segno; nothing else imports it.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Any

from crossplan.bench.words import as_date

#: White border in modules, of the four that ISO/IEC 18004 asks for on every side of a QR code.
QUIET_ZONE = 4

Pattern = tuple[tuple[bool, ...], ...]


@dataclass(frozen=True, slots=True)
class VialCode:
    """What the code of a vial says; `set_up` is an ISO day, or empty."""

    step: str
    vial: int
    vials: int
    set_up: str = ""

    def text(self) -> str:
        """Return the text: `crossplan/1 S03 v2/4 2027-01-11`; the 1 is the version of this form."""
        return f"crossplan/1 {self.step} v{self.vial}/{self.vials} {self.set_up or 'undated'}"


def read_vial_code(text: str) -> VialCode | None:
    """Return what a scanned text says, or None when it is no vial code of this form."""
    match = re.fullmatch(r"crossplan/1 (?!stock: )(.+) v(\d+)/(\d+) (\d{4}-\d\d-\d\d|undated)", text.strip())
    if match is None:
        return None
    step, vial, vials, day = match.groups()
    if day != "undated":
        try:
            as_date(day)
        except ValueError:
            return None
    return VialCode(step, int(vial), int(vials), "" if day == "undated" else day)


def stock_code(name: str) -> str:
    """Return the text of the code on a stock label: `crossplan/1 stock: PT025`."""
    return f"crossplan/1 stock: {name}"


def read_stock_code(text: str) -> str | None:
    """Return the name of the stock that a scanned text says, or None when it is no stock code of this form."""
    match = re.fullmatch(r"crossplan/1 stock: (.+)", text.strip())
    return match.group(1) if match else None


def pattern(text: str, mask: int | None = None) -> Pattern:
    """Return the modules of the smallest QR code that holds `text`, without its white border; True is dark.

    Error correction is raised as far as it goes without making the code larger. `mask` (0 to 7) is the pattern laid
    over the code to break up large areas; None for the best by the score of ISO/IEC 18004. A reader takes any.
    """
    return tuple(tuple(bool(module) for module in row) for row in _code(text, mask).matrix)


def best_mask(text: str) -> int:
    """Return the mask of the best score for `text`. Finding it takes most of the time of making a code, and it is
    good for the other vials of a cross too, whose codes differ in a digit or two."""
    return int(_code(text, None).mask)


def _code(text: str, mask: int | None) -> Any:
    import segno

    return segno.make(text, error="l", micro=False, boost_error=True, mask=mask)
