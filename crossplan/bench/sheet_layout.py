"""The papers that labels are printed on: sheets of labels, and rolls of one label after another.

The names are sizes in millimetres. Sizes of sheets are those in common use, from memory: print on plain
paper with outlines first and hold it against the sheet.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

from crossplan.bench.pdf_page import PAPERS
from crossplan.errors import InputError

#: The smallest label (mm) on which code, cross and dates still find room; the long side is the width.
MIN_WIDTH: Final = 25.0
MIN_HEIGHT: Final = 12.7


@dataclass(frozen=True, slots=True)
class SheetLayout:
    """Where the labels lie on a page; all lengths in mm. `columns` x `rows` labels, `pitch` from one to the
    next.

    Raises InputError when a label is smaller than 25 x 12.7 mm, labels overlap, or they do not fit on the
    page.
    """

    name: str
    page_width: float
    page_height: float
    columns: int
    rows: int
    label_width: float
    label_height: float
    pitch_x: float
    pitch_y: float
    margin_left: float
    margin_top: float

    def __post_init__(self) -> None:
        size = f"{self.label_width:g} x {self.label_height:g} mm"
        if self.label_width < MIN_WIDTH or self.label_height < MIN_HEIGHT:
            raise InputError(f"a label of {size} is too small", f"Use {MIN_WIDTH:g} x {MIN_HEIGHT:g} mm or more.")
        if self.columns < 1 or self.rows < 1:
            raise InputError("a page needs at least one column and one row of labels")
        if min(self.margin_left, self.margin_top) < 0:
            raise InputError(
                f"{self.columns} x {self.rows} labels of {size} do not fit on the page",
                "Use fewer, or another page.",
            )
        apart_x = self.columns == 1 or self.pitch_x >= self.label_width
        apart_y = self.rows == 1 or self.pitch_y >= self.label_height
        if not (apart_x and apart_y):
            raise InputError(
                f"labels of {size} overlap at a pitch of {self.pitch_x:g} x {self.pitch_y:g} mm",
                "The pitch is the distance from the left edge (top) of one label to that of the next.",
            )
        right = self.margin_left + (self.columns - 1) * self.pitch_x + self.label_width
        bottom = self.margin_top + (self.rows - 1) * self.pitch_y + self.label_height
        if right > self.page_width + 0.01 or bottom > self.page_height + 0.01:
            raise InputError(
                f"the labels reach to {right:g} x {bottom:g} mm on a page of "
                f"{self.page_width:g} x {self.page_height:g} mm",
                "Check margins, pitch and the number of columns and rows.",
            )

    @property
    def per_page(self) -> int:
        """How many labels one page holds."""
        return self.columns * self.rows

    def corner(self, place: int) -> tuple[float, float]:
        """Return the top left corner (x, y in mm) of a label; places count from 0, row by row."""
        row, column = divmod(place, self.columns)
        return self.margin_left + column * self.pitch_x, self.margin_top + row * self.pitch_y


def sheet(
    page: str | tuple[float, float],
    columns: int,
    rows: int,
    label_width: float,
    label_height: float,
    *,
    pitch_x: float | None = None,
    pitch_y: float | None = None,
    margin_left: float | None = None,
    margin_top: float | None = None,
    name: str = "",
) -> SheetLayout:
    """Return a sheet of labels from its sizes in mm; the page is `A4`, `Letter` or (width, height).

    What is not given follows: labels without gaps, and the block of labels in the middle of the page.
    """
    if isinstance(page, str) and page not in PAPERS:
        raise InputError(f"there is no page size {page!r}", f"Use {', '.join(PAPERS)}, or width and height in mm.")
    width, height = PAPERS[page] if isinstance(page, str) else page
    across, down = pitch_x or label_width, pitch_y or label_height
    left = (width - (columns - 1) * across - label_width) / 2 if margin_left is None else margin_left
    top = (height - (rows - 1) * down - label_height) / 2 if margin_top is None else margin_top
    own = name or f"{columns} x {rows} labels of {label_width:g} x {label_height:g} mm"
    return SheetLayout(
        own,
        width,
        height,
        columns,
        rows,
        label_width,
        label_height,
        across,
        down,
        round(left, 3),
        round(top, 3),
    )


def roll(label_width: float, label_height: float, name: str = "") -> SheetLayout:
    """Return a roll: every label is a page of its own; sizes in mm."""
    own = name or f"roll of {label_width:g} x {label_height:g} mm"
    return SheetLayout(
        own, label_width, label_height, 1, 1, label_width, label_height, label_width, label_height, 0.0, 0.0
    )


DEFAULT_LAYOUT: Final = "a4-48x25"

LAYOUTS: Final[dict[str, SheetLayout]] = {
    layout.name: layout
    for layout in (
        sheet("A4", 4, 11, 48.5, 25.4, name="a4-48x25"),
        sheet("A4", 5, 13, 38.1, 21.2, pitch_x=40.6, name="a4-38x21"),
        sheet("A4", 3, 8, 63.5, 33.9, pitch_x=66.0, name="a4-63x34"),
        sheet("A4", 7, 21, 25.4, 13.0, pitch_x=27.0, name="a4-25x13"),
        sheet("Letter", 3, 10, 66.7, 25.4, pitch_x=69.9, name="letter-67x25"),
        sheet("Letter", 4, 20, 44.5, 12.7, pitch_x=52.3, name="letter-44x13"),
        roll(25.0, 13.0, name="roll-25x13"),
        roll(38.0, 19.0, name="roll-38x19"),
        roll(50.0, 25.0, name="roll-50x25"),
    )
}


def layout_of(text: str) -> SheetLayout:
    """Return the layout of this name, or the one that the sizes in the text make.

    `A4 4x11 48.5x25.4` is 4 columns and 11 rows of labels of 48.5 x 25.4 mm; `pitch 50x26` and `margin 8x9` (left x
    top) may follow; the page may also be `Letter` or `210x297`. `roll 38x19` is a roll.

    Raises:
        InputError: no layout has this name, or the sizes cannot be read or do not fit.
    """
    words = text.replace("×", "x").replace(",", ".").split()
    if len(words) == 1 or not words:
        return layout_named(text.strip())
    try:
        if words[0].lower() == "roll":
            return roll(*_pair(words[1]))
        page = next((name for name in PAPERS if name.lower() == words[0].lower()), None) or _pair(words[0])
        columns, rows = (int(n) for n in words[1].lower().split("x"))
        width, height = _pair(words[2])
        more = dict(zip(words[3::2], (_pair(w) for w in words[4::2]), strict=True))
        if set(more) - {"pitch", "margin"}:
            raise ValueError
    except (ValueError, IndexError):
        raise InputError(
            f"the label sheet {text!r} cannot be read",
            "Write page, columns x rows and size in mm, 'A4 4x11 48.5x25.4', with 'pitch 50x26' and 'margin 8x9' if "
            "needed; or 'roll 38x19'; or a name.",
        ) from None
    pitch, margin = more.get("pitch", (None, None)), more.get("margin", (None, None))
    return sheet(page, columns, rows, width, height, pitch_x=pitch[0], pitch_y=pitch[1],
                 margin_left=margin[0], margin_top=margin[1])  # fmt: skip


def _pair(text: str) -> tuple[float, float]:
    """Return `48.5x25.4` as two finite numbers above or at 0; ValueError if it is not that."""
    first, second = (float(n) for n in text.lower().removesuffix("mm").split("x"))
    if not (0 <= first < 10_000 and 0 <= second < 10_000):
        raise ValueError
    return first, second


def layout_named(name: str) -> SheetLayout:
    """Return the layout of this name; InputError lists the names there are."""
    if name not in LAYOUTS:
        raise InputError(f"there is no label layout {name!r}", f"Layouts: {', '.join(LAYOUTS)}; or give sizes.")
    return LAYOUTS[name]
