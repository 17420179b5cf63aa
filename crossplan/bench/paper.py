"""A page that fills from top to bottom: pieces with a height, a header on every page, a footer with its
number."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Protocol

from crossplan.bench.pdf_page import ASCENT, MM_PER_POINT, Pages, line_height

MARGIN = 14.0
FOOT = 10.0
#: Edge of a box to tick, and height and width of a cell to write a number in, in mm.
TICK = 3.6
CELL_HEIGHT = 6.5
CELL_WIDTH = 13.0


class Piece(Protocol):
    """Something that is as wide as it is told to be, and knows its height."""

    def height(self, pages: Pages, width: float) -> float:
        """Return the height in mm at this width."""
        ...

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        """Draw with the top left corner at (x, y)."""
        ...


@dataclass(frozen=True, slots=True)
class Words:
    """A paragraph, with a word in bold in front of it if wanted; sizes in points."""

    text: str
    lead: str = ""
    size: float = 9.0
    bold: bool = False

    def _indent(self, pages: Pages) -> float:
        return pages.width_of(f"{self.lead}  ", self.size, bold=True) if self.lead else 0.0

    def height(self, pages: Pages, width: float) -> float:
        lines = pages.wrap(self.text, self.size, width - self._indent(pages), self.bold)
        return len(lines) * line_height(self.size)

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        indent = self._indent(pages)
        if self.lead:
            pages.text(x, y + ASCENT * self.size * MM_PER_POINT, self.lead, self.size, bold=True)
        lines = pages.wrap(self.text, self.size, width - indent, self.bold)
        pages.lines(x + indent, y, lines, self.size, self.bold)


@dataclass(frozen=True, slots=True)
class Ticks:
    """A row of boxes to tick, each with its label."""

    labels: tuple[str, ...]
    lead: str = ""
    size: float = 9.0

    def _places(self, pages: Pages, width: float) -> list[tuple[float, float]]:
        places = []
        x = start = pages.width_of(f"{self.lead}  ", self.size) if self.lead else 0.0
        y = 0.0
        for label in self.labels:
            takes = TICK + 1.0 + pages.width_of(label, self.size) + 4.0
            if x + takes > width and x > start:
                x, y = start, y + TICK + 1.6
            places.append((x, y))
            x += takes
        return places

    def height(self, pages: Pages, width: float) -> float:
        return self._places(pages, width)[-1][1] + TICK + 1.6 if self.labels else 0.0

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        base = 0.6 + TICK - 0.7
        if self.lead:
            pages.text(x, y + base, self.lead, self.size)
        for label, (dx, dy) in zip(self.labels, self._places(pages, width), strict=True):
            pages.box(x + dx, y + dy + 0.6, TICK, TICK)
            pages.text(x + dx + TICK + 1.0, y + dy + base, label, self.size)


@dataclass(frozen=True, slots=True)
class Counts:
    """Empty cells to write numbers in: one column for each of `columns`, one row for each of `rows`."""

    rows: tuple[str, ...]
    columns: tuple[str, ...]
    size: float = 8.0

    def _stub(self, pages: Pages) -> float:
        return max(pages.width_of(row, self.size) for row in self.rows) + 2.0

    def _blocks(self, pages: Pages, width: float) -> list[tuple[str, ...]]:
        most = max(1, int((width - self._stub(pages)) / CELL_WIDTH))
        return [self.columns[i : i + most] for i in range(0, len(self.columns), most)]

    def _block_height(self) -> float:
        return line_height(self.size) + CELL_HEIGHT * len(self.rows) + 1.5

    def height(self, pages: Pages, width: float) -> float:
        return len(self._blocks(pages, width)) * self._block_height()

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        stub = self._stub(pages)
        for block in self._blocks(pages, width):
            top = y + line_height(self.size)
            for at, column in enumerate(block):
                left = x + stub + at * CELL_WIDTH
                pages.text(left + CELL_WIDTH / 2, top - 0.9, column, self.size, align="middle")
                for row in range(len(self.rows)):
                    pages.box(left, top + row * CELL_HEIGHT, CELL_WIDTH, CELL_HEIGHT, 0.15)
            for row, name in enumerate(self.rows):
                pages.text(x, top + (row + 0.65) * CELL_HEIGHT, name, self.size)
            y += self._block_height()


@dataclass(frozen=True, slots=True)
class Band:
    """A heading in white on black across the page."""

    text: str
    size: float = 10.0

    def height(self, pages: Pages, width: float) -> float:
        return line_height(self.size) + 3.4

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        tall = line_height(self.size) + 0.8
        pages.box(x, y + 1.2, width, tall, black=True)
        pages.text(x + 1.5, y + 1.6 + ASCENT * self.size * MM_PER_POINT, self.text, self.size, bold=True, white=True)


@dataclass(frozen=True, slots=True)
class Gap:
    """Empty space of so many mm."""

    mm: float

    def height(self, pages: Pages, width: float) -> float:
        return self.mm

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        """Nothing is drawn."""


@dataclass(frozen=True, slots=True)
class Job:
    """A box to tick with a heading beside it, and pieces below; a thin line closes it."""

    heading: str
    pieces: tuple[Piece, ...]
    size: float = 12.0
    indent: float = 8.0

    def height(self, pages: Pages, width: float) -> float:
        inner = sum(piece.height(pages, width - self.indent) for piece in self.pieces)
        return self._heading_height(pages, width) + inner + 2.6

    def _heading_height(self, pages: Pages, width: float) -> float:
        return len(pages.wrap(self.heading, self.size, width - self.indent, bold=True)) * line_height(self.size)

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        pages.box(x + 0.5, y + 0.7, 4.6, 4.6, 0.35)
        lines = pages.wrap(self.heading, self.size, width - self.indent, bold=True)
        at = pages.lines(x + self.indent, y + 0.5, lines, self.size, bold=True)
        for piece in self.pieces:
            piece.draw(pages, x + self.indent, at, width - self.indent)
            at += piece.height(pages, width - self.indent)
        pages.rule(x, at + 1.2, x + width, at + 1.2, 0.1)


class Paper:
    """Pages that are filled piece by piece; a piece that does not fit goes to the next page, whole.

    `foot` stands at the left of every page's foot, the number of the page at its right. The last page is to
    be ended with `end_page`.
    """

    def __init__(self, pages: Pages, foot: str) -> None:
        self.pages, self.foot = pages, foot
        self.width = pages.width - 2 * MARGIN
        self.number = 0
        self.y = 0.0
        self._header: Callable[[bool], Sequence[Piece]] = lambda again: ()

    @property
    def bottom(self) -> float:
        """Where the room for pieces ends, in mm from the top."""
        return self.pages.height - MARGIN - FOOT

    def begin(self, header: Callable[[bool], Sequence[Piece]]) -> None:
        """Begin a page under `header(again)`; `again` is false here, true on the pages that follow."""
        self._header = header
        self._new_page(again=False)

    def _new_page(self, again: bool) -> None:
        self.end_page()
        self.pages.new_page()
        self.number += 1
        self.y = MARGIN
        for piece in self._header(again):
            self._put(piece)

    def end_page(self) -> None:
        """Write the foot of the page, if there is a page; last, so that it is read last."""
        if self.number:
            base = self.pages.height - MARGIN
            self.pages.rule(MARGIN, base - 5, MARGIN + self.width, base - 5, 0.1)
            self.pages.text(MARGIN, base - 1.5, self.foot, 7.5)
            self.pages.text(MARGIN + self.width, base - 1.5, f"page {self.number}", 7.5, align="right")

    def add(self, *pieces: Piece) -> None:
        """Put pieces below each other, all on one page if one page can hold them."""
        needed = sum(piece.height(self.pages, self.width) for piece in pieces)
        if self.y + needed > self.bottom:
            self._new_page(again=True)
        for piece in pieces:
            if self.y + piece.height(self.pages, self.width) > self.bottom and self.y > self.bottom / 2:
                self._new_page(again=True)
            self._put(piece)

    def _put(self, piece: Piece) -> None:
        piece.draw(self.pages, MARGIN, self.y, self.width)
        self.y += piece.height(self.pages, self.width)
