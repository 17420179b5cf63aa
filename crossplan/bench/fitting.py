"""Making a text fit a box without losing any of it unseen: shrink, then wrap, then run on, then shorten
with a mark."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from crossplan.bench.pdf_page import LEADING, Line, Pages, line_height

#: What a shortened text ends with; the short mark where the long one would take more than a fifth of the
#: room.
CUT_MARK = "… see sheet"
SHORT_CUT_MARK = "…"
STEP = 0.25


@dataclass(frozen=True, slots=True)
class Fitted:
    """Text as it will stand: size in points, lines, whether all of it is there, and whether every word is unbroken."""

    size: float
    lines: tuple[Line, ...]
    whole: bool
    leading: float = LEADING
    unbroken: bool = True

    @property
    def height(self) -> float:
        """Height in mm of all lines."""
        return len(self.lines) * line_height(self.size, self.leading)

    def draw(self, pages: Pages, x: float, top: float, bold: bool = False) -> float:
        """Write the lines with their top left corner at (x, top); return the y of the bottom in mm."""
        return pages.lines(x, top, self.lines, self.size, bold, self.leading)


def fit(
    pages: Pages,
    paragraphs: Sequence[str],
    width: float,
    height: float,
    largest: float,
    smallest: float,
    bold: bool = False,
    run_on: str = "",
    leading: float = LEADING,
    prose: bool = False,
    first: float | None = None,
) -> Fitted:
    """Fit paragraphs into a box of `width` x `height` mm, in type of `largest` down to `smallest` points.

    First choice is one line a paragraph, in the largest type that does it; then lines are broken, again in
    the largest type that does it; then the paragraphs run on, as `run_on` if that is given; at last the
    text is cut at the end and ends with a mark. `prose` is one text without lines of its own; its first line may be
    narrower, `first` mm. A box without room for one line of the smallest type still
    gets that line.
    """
    sizes = [largest - STEP * i for i in range(int((largest - smallest) / STEP) + 1)]
    # widths grow with the size of the type, so they are measured once
    ones = [pages.width_of(p, 1.0, bold) for p in paragraphs]
    for size in [] if prose else sizes:
        one_each = max(ones) * size <= width
        if one_each and len(paragraphs) * line_height(size, leading) <= height + 1e-6:
            return Fitted(size, tuple(pages.wrap(p, size, width, bold)[0] for p in paragraphs), True, leading)
    flowing = run_on or " ".join(paragraphs)
    ways = [(list(paragraphs), sum(ones)), ([flowing], pages.width_of(flowing, 1.0, bold))]
    longest = [max(pages.longest_word(t, 1.0, bold) for t in texts) for texts, _ in ways]
    blank = pages.width_of(" ", 1.0, bold)
    for whole_words in (True, False):
        for (texts, total), word in zip(ways, longest, strict=True):
            for size in sizes:
                room = int((height + 1e-6) / line_height(size, leading))
                # a blank at the end of each line takes no room
                if (whole_words and word * size > width) or (total - room * blank) * size > room * width:
                    continue
                lines = [line for text in texts for line in pages.wrap(text, size, width, bold, first)]
                if len(lines) <= room:
                    return Fitted(size, tuple(lines), True, leading, whole_words)
    return _cut(pages, flowing, width, height, sizes[-1], bold, leading, first)


def _cut(
    pages: Pages, text: str, width: float, height: float, size: float, bold: bool, leading: float, first: float | None
) -> Fitted:
    """Keep as many characters as leave room for the mark; the kept part is found by halving."""
    room = max(1, int((height + 1e-6) / line_height(size, leading)))
    takes = pages.width_of(CUT_MARK, size, bold)
    mark = CUT_MARK if takes <= min(width, 0.2 * width * room) else SHORT_CUT_MARK

    def lines(kept: int) -> list[Line]:
        return pages.wrap(_open_ended(text[:kept]) + mark, size, width, bold, first)

    low, high = 0, len(text)
    while high - low > 1:
        middle = (low + high) // 2
        low, high = (middle, high) if len(lines(middle)) <= room else (low, middle)
    return Fitted(size, tuple(lines(low)), False, leading, False)


def _open_ended(text: str) -> str:
    """Do not leave a bracket open that would have made the end of the text a superscript."""
    opened = text.rfind("[")
    return text.rstrip() if opened <= text.rfind("]") else text[:opened].rstrip()
