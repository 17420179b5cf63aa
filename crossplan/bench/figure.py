"""The scheme of a target as a picture for a notebook, a talk or a paper: SVG and PNG, black on white.

It is laid out by the same pieces as the page of a bench sheet, on a canvas that takes down what is drawn.
"""

from __future__ import annotations

import io
from collections.abc import Sequence
from dataclasses import dataclass
from html import escape
from importlib.resources import files
from itertools import groupby
from typing import Any

from crossplan.bench.paper import Gap, Piece, Words
from crossplan.bench.pdf_page import MM_PER_POINT, NO_BREAK, RAISED_BY, RAISED_SIZE, Line, Pages
from crossplan.bench.scheme_drawing import CrossPiece, crosses_of, shown_chromosomes
from crossplan.bench.words import chromosome_lines, keep_rule, parents_text, raised_runs
from crossplan.errors import InputError
from crossplan.plan.model import Plan, StepRecord, TargetRecord

#: Width and margin of a figure in mm; 170 mm is two columns of a printed page.
WIDTH, MARGIN = 170.0, 4.0
FONT = "'DejaVu Sans Condensed','DejaVu Sans',Arial,sans-serif"
#: Dots an inch above which a picture of a scheme is of no use to anybody, and larger than memory likes.
LARGEST_DPI = 1200


@dataclass(frozen=True, slots=True)
class Letters:
    """A stretch of text: left end of its base line in mm, size in points, width in mm."""

    x: float
    y: float
    text: str
    size: float
    width: float
    bold: bool


@dataclass(frozen=True, slots=True)
class Stroke:
    """A straight line or, with `is_box`, the outline of a rectangle from one corner to the other; in mm."""

    x1: float
    y1: float
    x2: float
    y2: float
    thick: float
    is_box: bool = False


class Sketch(Pages):
    """A canvas that measures like a page and takes down what is drawn on it."""

    def __init__(self) -> None:
        super().__init__("", WIDTH, WIDTH)
        self.marks: list[Letters | Stroke] = []

    def text(
        self, x: float, y: float, text: str | Line, size: float, bold: bool = False, white: bool = False,
        align: str = "left",
    ) -> None:  # fmt: skip
        """Take down one line, as `Pages.text` writes it; figures have no white text."""
        runs = raised_runs(text) if isinstance(text, str) else text
        if align != "left":
            x -= self.width_of(runs, size, bold) * (0.5 if align == "middle" else 1.0)
        for part, raised in runs:
            shown = size * (RAISED_SIZE if raised else 1.0)
            width = self.width_of(((part, False),), shown, bold)
            lifted = RAISED_BY * size * MM_PER_POINT if raised else 0.0
            self.marks.append(Letters(x, y - lifted, part.replace(NO_BREAK, " "), shown, width, bold))
            x += width

    def rule(self, x1: float, y1: float, x2: float, y2: float, thick: float = 0.2) -> None:
        """Take down a straight line."""
        self.marks.append(Stroke(x1, y1, x2, y2, thick))

    def box(self, x: float, y: float, width: float, height: float, thick: float = 0.2, black: bool = False) -> None:
        """Take down a rectangle; figures have no filled ones."""
        self.marks.append(Stroke(x, y, x + width, y + height, thick, is_box=True))


@dataclass(frozen=True, slots=True)
class Figure:
    """A picture: height in mm, what is on it, and what it shows in words, for who cannot see it."""

    height: float
    marks: tuple[Letters | Stroke, ...]
    title: str
    told: str


def scheme_figure(plan: Plan, target_name: str) -> Figure:
    """Return the scheme of a target, generation by generation.

    Raises:
        InputError: the plan has no such target, or no cross for it.
    """
    target = next((t for t in plan.targets if t.target == target_name), None)
    if target is None:
        raise InputError(f"the plan has no target {target_name!r}", "Write its name as in the plan.")
    steps = crosses_of(plan, target)
    if not steps:
        raise InputError(f"there is no scheme to draw for {target_name}", f"Its status is: {target.status}.")
    with Sketch() as sketch:
        y = MARGIN
        for piece in _pieces(target, steps):
            piece.draw(sketch, MARGIN, y, WIDTH - 2 * MARGIN)
            y += piece.height(sketch, WIDTH - 2 * MARGIN)
        return Figure(y + MARGIN, tuple(sketch.marks), f"Scheme of {target.target}", _in_words(steps))


def _pieces(target: TargetRecord, steps: Sequence[StepRecord]) -> list[Piece]:
    chromosomes = tuple(shown_chromosomes([f for s in steps for f in (s.mother.fly, s.father.fly, s.keep.fly)]))
    pieces: list[Piece] = [Words(target.target, size=12, bold=True), Gap(2)]
    for generation, group in groupby(steps, key=lambda s: s.generation):
        pieces += [Words(f"Generation {generation}", size=9.5, bold=True), Gap(1)]
        pieces += [CrossPiece(step, chromosomes) for step in group]
    return pieces


def _in_words(steps: Sequence[StepRecord]) -> str:
    """Return the scheme in words, for the description that goes with the picture."""
    return " ".join(
        f"Generation {s.generation}, {s.id}: {parents_text(s.mother, s.father)}; keep {keep_rule(s.keep)} "
        f"({'; '.join(chromosome_lines(s.keep.fly))})."
        for s in steps
    )


# --- SVG ----------------------------------------------------------------------------------------------------


def svg(figure: Figure) -> str:
    """Return the figure as SVG, in mm; every stretch of text keeps its width whatever font it is shown in."""
    marks = "\n".join(_svg_mark(mark) for mark in figure.marks)
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" width="{WIDTH:g}mm" height="{figure.height:.2f}mm" '
        f'viewBox="0 0 {WIDTH:g} {figure.height:.2f}" role="img" font-family="{FONT}">\n'
        f"<title>{_clean(figure.title)}</title>\n<desc>{_clean(figure.told)}</desc>\n"
        f'<rect width="100%" height="100%" fill="#fff"/>\n{marks}\n</svg>\n'
    )


def _svg_mark(mark: Letters | Stroke) -> str:
    if isinstance(mark, Letters):
        weight = ' font-weight="bold"' if mark.bold else ""
        return (
            f'<text x="{mark.x:.2f}" y="{mark.y:.2f}" font-size="{mark.size * MM_PER_POINT:.3f}"{weight} '
            f'textLength="{mark.width:.2f}" lengthAdjust="spacingAndGlyphs" xml:space="preserve">{_clean(mark.text)}</text>'
        )
    d = f"M{mark.x1:.2f} {mark.y1:.2f}"
    d += f"H{mark.x2:.2f}V{mark.y2:.2f}H{mark.x1:.2f}Z" if mark.is_box else f"L{mark.x2:.2f} {mark.y2:.2f}"
    return f'<path d="{d}" fill="none" stroke="#000" stroke-width="{mark.thick:g}"/>'


def _clean(text: str) -> str:
    """Return escaped text without the control characters that XML forbids."""
    return escape("".join(c if c.isprintable() else "\ufffd" for c in text))


# --- PNG ----------------------------------------------------------------------------------------------------


def png(figure: Figure, dpi: int = 300) -> bytes:
    """Return the figure as PNG at `dpi` dots an inch.

    Raises:
        InputError: `dpi` is below 72 or above 1200.
    """
    from PIL import Image, ImageDraw

    if not 72 <= dpi <= LARGEST_DPI:
        raise InputError(f"{dpi} dots an inch cannot be drawn", f"Use 72 to {LARGEST_DPI}; 300 is common in print.")
    scale = dpi / 25.4
    picture = Image.new("L", (round(WIDTH * scale), round(figure.height * scale)), 255)
    canvas = ImageDraw.Draw(picture)
    fonts: dict[tuple[float, bool], Any] = {}
    for mark in figure.marks:
        if isinstance(mark, Letters):
            _png_text(canvas, mark, scale, fonts)
        else:
            _png_stroke(canvas, mark, scale)
    out = io.BytesIO()
    picture.save(out, "PNG", dpi=(dpi, dpi))
    return out.getvalue()


def _png_text(canvas: Any, mark: Letters, scale: float, fonts: dict[tuple[float, bool], Any]) -> None:
    from PIL import ImageFont

    key = (mark.size, mark.bold)
    if key not in fonts:
        name = "DejaVuSansCondensed-Bold.ttf" if mark.bold else "DejaVuSansCondensed.ttf"
        path = files("crossplan.bench") / "fonts" / name
        fonts[key] = ImageFont.truetype(
            str(path), mark.size * MM_PER_POINT * scale, layout_engine=ImageFont.Layout.BASIC
        )
    canvas.text((mark.x * scale, mark.y * scale), mark.text, fill=0, font=fonts[key], anchor="ls")


def _png_stroke(canvas: Any, mark: Stroke, scale: float) -> None:
    ends = [round(v * scale) for v in (mark.x1, mark.y1, mark.x2, mark.y2)]
    thick = max(1, round(mark.thick * scale))
    if mark.is_box:
        canvas.rectangle(ends, outline=0, width=thick)
    else:
        canvas.line(ends, fill=0, width=thick)
