"""A page that fills from top to bottom: pieces with a height, a header on every page, a footer with its
number."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Protocol

from crossplan.bench.pdf_page import ASCENT, MM_PER_POINT, Line, Pages, line_height

MARGIN = 14.0
FOOT = 10.0
#: Edge of a box to tick, and height and width of a cell to write a number in, in mm.
TICK = 3.6
CELL_HEIGHT = 6.0
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

    def span(self, pages: Pages) -> float:
        """Return the width in mm of all of it in one row."""
        lead = pages.width_of(f"{self.lead}  ", self.size) if self.lead else 0.0
        return lead + sum(TICK + 5.0 + pages.width_of(label, self.size) for label in self.labels)

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
class Blanks:
    """Empty cells to write a number in, side by side, each with its label in front."""

    labels: tuple[str, ...]
    lead: str = ""
    size: float = 9.0

    def _places(self, pages: Pages, width: float) -> list[tuple[float, float]]:
        places = []
        x = start = pages.width_of(f"{self.lead}  ", self.size, bold=True) if self.lead else 0.0
        y = 0.0
        for label in self.labels:
            takes = pages.width_of(label, self.size) + 1.5 + CELL_WIDTH + 4.0
            if x + takes - 4.0 > width and x > start:
                x, y = start, y + CELL_HEIGHT + 1.0
            places.append((x, y))
            x += takes
        return places

    def span(self, pages: Pages) -> float:
        """Return the width in mm of all of it in one row."""
        lead = pages.width_of(f"{self.lead}  ", self.size, bold=True) if self.lead else 0.0
        return lead + sum(pages.width_of(label, self.size) + 5.5 + CELL_WIDTH for label in self.labels)

    def height(self, pages: Pages, width: float) -> float:
        return self._places(pages, width)[-1][1] + CELL_HEIGHT + 0.6 if self.labels else 0.0

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        base = 0.4 + 0.66 * CELL_HEIGHT
        if self.lead:
            pages.text(x, y + base, self.lead, self.size, bold=True)
        for label, (dx, dy) in zip(self.labels, self._places(pages, width), strict=True):
            pages.text(x + dx, y + dy + base, label, self.size)
            left = x + dx + pages.width_of(label, self.size) + 1.5
            pages.box(left, y + dy + 0.4, CELL_WIDTH, CELL_HEIGHT, 0.15)


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
class Stack:
    """Pieces that stay on one page, below each other."""

    pieces: tuple[Piece, ...]

    def height(self, pages: Pages, width: float) -> float:
        return sum(piece.height(pages, width) for piece in self.pieces)

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        for piece in self.pieces:
            piece.draw(pages, x, y, width)
            y += piece.height(pages, width)


class Row(Piece, Protocol):
    """A piece that can stand beside others in one row."""

    def span(self, pages: Pages) -> float:
        """Return the width in mm of all of it in one row."""
        ...


@dataclass(frozen=True, slots=True)
class Side:
    """Two rows side by side, below each other where there is no room for that."""

    left: Row
    right: Row

    def span(self, pages: Pages) -> float:
        """Return the width in mm of both in one row."""
        return self.left.span(pages) + self.right.span(pages)

    def _fits(self, pages: Pages, width: float) -> bool:
        return self.span(pages) <= width + 1e-6

    def height(self, pages: Pages, width: float) -> float:
        heights = (self.left.height(pages, width), self.right.height(pages, width))
        return max(heights) if self._fits(pages, width) else sum(heights)

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        lower, upper = self.right.height(pages, width), self.left.height(pages, width)
        self.left.draw(pages, x, y + max(0.0, lower - upper) / 2 if self._fits(pages, width) else y, width)
        if self._fits(pages, width):
            self.right.draw(pages, x + self.left.span(pages), y, width - self.left.span(pages))
        else:
            self.right.draw(pages, x, y + upper, width)


@dataclass(frozen=True, slots=True)
class Job:
    """A box to tick with a heading beside it, `about` in ordinary type after it, `who` at the right, and pieces
    below, the first of them (`beside`) on the line of the heading if it fits; a thin line closes it."""

    heading: str
    pieces: tuple[Piece, ...] = ()
    about: str = ""
    who: str = ""
    beside: Row | None = None
    size: float = 11.0
    indent: float = 7.5

    def height(self, pages: Pages, width: float) -> float:
        inner = sum(piece.height(pages, width - self.indent) for piece in self._below(pages, width))
        return self._top_height(pages, width) + inner + 1.8

    def _room(self, pages: Pages, width: float) -> float:
        return width - self.indent - (pages.width_of(self.who, 8.5) + 2.0 if self.who else 0.0)

    def _used(self, pages: Pages) -> float:
        """Width of heading and `about` on one line."""
        heading = pages.width_of(f"{self.heading}  ", self.size, bold=True)
        return heading + (pages.width_of(f"{self.about}   ", 9.0) if self.about else 0.0)

    def _about_beside(self, pages: Pages, width: float) -> bool:
        return self._used(pages) <= self._room(pages, width)

    def _row_beside(self, pages: Pages, width: float) -> bool:
        return self.beside is not None and self._used(pages) + self.beside.span(pages) <= self._room(pages, width)

    def _below(self, pages: Pages, width: float) -> tuple[Piece, ...]:
        lower = () if self.beside is None or self._row_beside(pages, width) else (self.beside,)
        about = () if self._about_beside(pages, width) else (Words(self.about),)
        return (*about, *lower, *self.pieces)

    def _headings(self, pages: Pages, width: float) -> list[Line]:
        return pages.wrap(self.heading, self.size, self._room(pages, width), bold=True)

    def _top_height(self, pages: Pages, width: float) -> float:
        own = len(self._headings(pages, width)) * line_height(self.size)
        if self.beside is None or not self._row_beside(pages, width):
            return own
        return max(own, self.beside.height(pages, width))

    def _drop(self, pages: Pages, width: float) -> float:
        """How far the heading stands down, to be in the middle of a higher row beside it."""
        own = len(self._headings(pages, width)) * line_height(self.size)
        return max(0.0, self._top_height(pages, width) - own - 0.6) / 2

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        top, y = y, y + self._drop(pages, width)
        pages.box(x + 0.5, y + 0.6, 4.2, 4.2, 0.35)
        pages.lines(x + self.indent, y + 0.5, self._headings(pages, width), self.size, bold=True)
        base = y + 0.5 + ASCENT * self.size * MM_PER_POINT
        if self.about and self._about_beside(pages, width):
            after = pages.width_of(f"{self.heading}  ", self.size, bold=True)
            pages.text(x + self.indent + after, base, self.about, 9.0)
        if self.beside is not None and self._row_beside(pages, width):
            self.beside.draw(pages, x + self.indent + self._used(pages), top + 0.3, self.beside.span(pages))
        if self.who:
            pages.text(x + width, base, self.who, 8.5, align="right")
        at = top + self._top_height(pages, width) + 0.4
        for piece in self._below(pages, width):
            piece.draw(pages, x + self.indent, at, width - self.indent)
            at += piece.height(pages, width - self.indent)
        pages.rule(x, at + 0.6, x + width, at + 0.6, 0.1)


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

    def go_on(self, header: Callable[[bool], Sequence[Piece]], pieces: Sequence[Piece]) -> None:
        """Put pieces below their header, on the page that is begun if they all fit there, else on a new one."""
        whole = [*header(False), *pieces]
        if self.number and self.y + sum(p.height(self.pages, self.width) for p in whole) <= self.bottom:
            self._header = header
            for piece in whole:
                self._put(piece)
        else:
            self.begin(header)
            for piece in pieces:
                self.add(piece)

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
