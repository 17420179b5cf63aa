"""Drawing on PDF pages, in millimetres from the top left corner; the only file that knows the PDF library
(fpdf2).

Nothing in the file that is made depends on the clock or on chance: the same calls give the same bytes.
"""

from __future__ import annotations

import datetime as dt
import re
from collections.abc import Hashable, Sequence
from importlib.resources import files
from typing import Any, Self

from crossplan.bench.words import Run, raised_runs

MM_PER_POINT = 25.4 / 72
#: A superscript is this part of the size of its line, and stands this part of the size above the base line.
RAISED_SIZE = 0.7
RAISED_BY = 0.32
#: Distance of base lines (ordinary; on labels), and of the base line from the top of its line, in sizes.
LEADING = 1.16
TIGHT = 1.04
ASCENT = 0.82
#: Printed in place of a character that the fonts lack.
MISSING = "□"

#: A space at which no line is broken; it is printed as an ordinary one.
NO_BREAK = "\u00a0"

#: Characters after which a line may be broken.
BREAK_AFTER = " /;,"

#: Sheets of paper by name: width and height in mm (ISO 216; ANSI/ASME Y14.1).
PAPERS = {"A4": (210.0, 297.0), "Letter": (215.9, 279.4)}

Line = tuple[Run, ...]


def line_height(size: float, leading: float = LEADING) -> float:
    """Return the height in mm of one line of text of `size` points."""
    return size * leading * MM_PER_POINT


class Pages:
    """A PDF file in the making, to be used in a `with`. Sizes of type are in points, all else in mm."""

    def __init__(self, title: str, width: float, height: float, created: dt.date | None = None) -> None:
        """Begin a file of pages of one size; it bears the date `created` (default 1 Jan 2000)."""
        from fpdf import FPDF

        self.width, self.height = width, height
        self._pdf: Any = FPDF(unit="mm", format=(width, height))
        self._pdf.set_auto_page_break(False)
        self._pdf.set_margin(0)
        # fpdf2 keeps cell padding even where no cell is used; positions here are exact.
        self._pdf.c_margin = 0
        day = created or dt.date(2000, 1, 1)
        self._pdf.set_creation_date(dt.datetime(day.year, day.month, day.day, tzinfo=dt.UTC))
        self._pdf.set_title(title)
        self._pdf.set_creator("crossplan")
        self._pdf.set_producer("crossplan")
        self._pdf.set_lang("en-GB")
        for style, name in (("", "DejaVuSansCondensed.ttf"), ("B", "DejaVuSansCondensed-Bold.ttf")):
            self._pdf.add_font("bench", style, str(files("crossplan.bench") / "fonts" / name))
        fonts: Any = self._pdf.fonts
        self._known = frozenset(fonts["bench"].cmap)
        self._widths: dict[tuple[str, bool], float] = {}
        #: what was laid out already, by all that it was laid out from: labels of a batch have much in common
        self.laid_out: dict[Hashable, Any] = {}

    def __enter__(self) -> Self:
        return self

    def __exit__(self, *_: object) -> None:
        """Close the font files, which the library keeps open."""
        fonts: Any = self._pdf.fonts
        for font in fonts.values():
            font.close()

    # --- measuring ------------------------------------------------------------------------------------------

    def _char_width(self, char: str, bold: bool) -> float:
        """Return the width in mm of one character at 1 point (no kerning is used, so that widths add up)."""
        key = (char, bold)
        if key not in self._widths:
            self._pdf.set_font("bench", "B" if bold else "", 100)
            self._widths[key] = self._pdf.get_string_width(self._shown(char)) / 100
        return self._widths[key]

    def _shown(self, text: str) -> str:
        return "".join(c if ord(c) in self._known else MISSING for c in text)

    def width_of(self, text: str | Line, size: float, bold: bool = False) -> float:
        """Return the width in mm of one line of text."""
        widths = self._widths
        total = 0.0
        for part, raised in _line(text):
            for c in part:
                width = widths.get((c, bold))
                total += (self._char_width(c, bold) if width is None else width) * (RAISED_SIZE if raised else 1.0)
        return total * size

    def wrap(self, text: str, size: float, width: float, bold: bool = False, first: float | None = None) -> list[Line]:
        """Break a text into lines of at most `width` mm, the first of at most `first` mm if that is given: after a
        space, `/`, `;` or `,`, else anywhere."""
        chars = [(c, raised) for part, raised in raised_runs(re.sub(r"[ \t\r\n]+", " ", text.strip())) for c in part]
        lines: list[Line] = []
        start = 0
        while start < len(chars):
            room = width if first is None or lines else first
            end = self._line_end(chars, start, size, room, bold)
            lines.append(_joined(chars[start:end]))
            start = end
            while start < len(chars) and chars[start][0] == " ":
                start += 1
        return lines or [()]

    def longest_word(self, text: str, size: float, bold: bool = False) -> float:
        """Return the width in mm of the longest stretch in which `wrap` would rather not break a line."""
        widest = used = 0.0
        for part, raised in raised_runs(text):
            for char in part:
                used += self._char_width(char, bold) * size * (RAISED_SIZE if raised else 1.0)
                widest = max(widest, used if char != " " else 0.0)
                used = 0.0 if char in BREAK_AFTER else used
        return widest

    def _line_end(self, chars: list[Run], start: int, size: float, width: float, bold: bool) -> int:
        used, best = 0.0, 0
        for at in range(start, len(chars)):
            char, raised = chars[at]
            used += self._char_width(char, bold) * size * (RAISED_SIZE if raised else 1.0)
            if used > width + 1e-6 and char != " ":
                return best or max(at, start + 1)
            if char in BREAK_AFTER:
                best = at + 1
        return len(chars)

    # --- drawing --------------------------------------------------------------------------------------------

    def new_page(self) -> None:
        """Begin a page."""
        self._pdf.add_page()

    def text(
        self,
        x: float,
        y: float,
        text: str | Line,
        size: float,
        bold: bool = False,
        white: bool = False,
        align: str = "left",
    ) -> None:
        """Write one line, base line at `y`; `x` is its left, middle or right, as `align` says."""
        runs = tuple((part.replace(NO_BREAK, " "), raised) for part, raised in _line(text))
        if align != "left":
            x -= self.width_of(runs, size, bold) * (0.5 if align == "middle" else 1.0)
        self._pdf.set_text_color(255 if white else 0)
        for part, raised in runs:
            shown = size * (RAISED_SIZE if raised else 1.0)
            self._pdf.set_font("bench", "B" if bold else "", shown)
            self._pdf.text(x, y - (RAISED_BY * size * MM_PER_POINT if raised else 0.0), self._shown(part))
            x += sum(self._char_width(c, bold) for c in part) * shown

    def lines(
        self,
        x: float,
        top: float,
        lines: Sequence[str | Line],
        size: float,
        bold: bool = False,
        leading: float = LEADING,
    ) -> float:
        """Write lines below each other, the first one's top at `top`; return the y of the bottom in mm."""
        for line in lines:
            self.text(x, top + ASCENT * size * MM_PER_POINT, line, size, bold)
            top += line_height(size, leading)
        return top

    def rule(self, x1: float, y1: float, x2: float, y2: float, thick: float = 0.2) -> None:
        """Draw a straight line, `thick` mm wide."""
        self._pdf.set_draw_color(0)
        self._pdf.set_line_width(thick)
        self._pdf.line(x1, y1, x2, y2)

    def box(self, x: float, y: float, width: float, height: float, thick: float = 0.2, black: bool = False) -> None:
        """Draw a rectangle, empty or black."""
        if black:
            self._pdf.set_fill_color(0)
            self._pdf.rect(x, y, width, height, style="F")
        else:
            self._pdf.set_draw_color(0)
            self._pdf.set_line_width(thick)
            self._pdf.rect(x, y, width, height)

    def modules(self, x: float, y: float, pattern: Sequence[Sequence[bool]], size: float) -> None:
        """Draw a square code with modules of `size` mm, its own top left corner at (x, y); no border.

        All modules are one shape: single rectangles are rounded to whole dots one by one by some programs,
        which spoils a code of small modules, and leave seams in others.
        """
        # the library has no quick way to draw many rectangles; in the co-ordinates of the modules the numbers are whole
        k = 1 / MM_PER_POINT
        place = f"{size * k:.5g} 0 0 {-size * k:.5g} {x * k:.4f} {(self.height - y) * k:.4f} cm"
        dark = " ".join(
            f"{start} {row} {end - start} 1 re"
            for row, modules in enumerate(pattern)
            for start, end in _dark_stretches(modules)
        )
        self._pdf._out(f"q 0 g {place} {dark} f Q")

    def finish(self) -> bytes:
        """Return the file."""
        return bytes(self._pdf.output())


def _line(text: str | Line) -> Line:
    return raised_runs(text) if isinstance(text, str) else text


def _joined(chars: Sequence[Run]) -> Line:
    """Join single characters into runs, without blanks at the end."""
    runs: list[Run] = []
    for char, raised in chars:
        if runs and runs[-1][1] == raised:
            runs[-1] = (runs[-1][0] + char, raised)
        else:
            runs.append((char, raised))
    if runs:
        runs[-1] = (runs[-1][0].rstrip(), runs[-1][1])
    return tuple(run for run in runs if run[0])


def _dark_stretches(row: Sequence[bool]) -> list[tuple[int, int]]:
    """Return start and end of each run of dark modules."""
    stretches: list[tuple[int, int]] = []
    for at, dark in enumerate(row):
        if dark and stretches and stretches[-1][1] == at:
            stretches[-1] = (stretches[-1][0], at + 1)
        elif dark:
            stretches.append((at, at + 1))
    return stretches
