"""The square code on a vial label: what it says and its pattern.

A QR code was chosen over Data Matrix because every telephone reads it without a special program, although a
Data Matrix of the same text is smaller (24 modules a side with its white border, against 33). The pattern
is made by segno; nothing else imports it.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

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
    match = re.fullmatch(r"crossplan/1 (.+) v(\d+)/(\d+) (\d{4}-\d\d-\d\d|undated)", text.strip())
    if match is None:
        return None
    step, vial, vials, day = match.groups()
    if day != "undated":
        try:
            as_date(day)
        except ValueError:
            return None
    return VialCode(step, int(vial), int(vials), "" if day == "undated" else day)


def pattern(text: str) -> Pattern:
    """Return the modules of the smallest QR code that holds `text`, without its white border; True is dark.

    Error correction is raised as far as it goes without making the code larger.
    """
    import segno

    code = segno.make(text, error="l", micro=False, boost_error=True)
    return tuple(tuple(bool(module) for module in row) for row in code.matrix)
