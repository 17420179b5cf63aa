"""One stock label: the name of the stock large, where it stands, its genotype as the list writes it, a square code.

Room to write the day of the last transfer is left at the foot, since a label outlives many transfers.
"""

from __future__ import annotations

from dataclasses import dataclass

from crossplan.bench.code2d import QUIET_ZONE, Pattern, best_mask, pattern, stock_code
from crossplan.bench.fitting import Fitted, fit
from crossplan.bench.label_face import MODULE_SIZES, ONE_LINE, QUIET_ABOVE, SMALLEST_TYPE
from crossplan.bench.pdf_page import TIGHT, Pages
from crossplan.bench.words import warm


@dataclass(frozen=True, slots=True)
class StockLabel:
    """What a stock label says; `genotype` is the text of the list, temperature in degrees C or None."""

    name: str
    genotype: str
    location: str = ""
    temperature_C: float | None = None


class StockFace:
    """The face of the label of one stock, `width` x `height` mm."""

    def __init__(self, pages: Pages, stock: StockLabel, width: float, height: float) -> None:
        self.pages, self.stock = pages, stock
        self.width, self.height = width, height
        self.edge = 0.6 if height < 16 else 1.2
        self._place_code()
        self._place_text()

    @property
    def is_whole(self) -> bool:
        """Whether nothing on the label is shortened, and the code found room."""
        return bool(self.code) and all(part.whole for part in (self.name, self.genotype, self.place))

    def _place_code(self) -> None:
        """Take the largest modules that leave room for text; a name too long for any has no code."""
        text = stock_code(self.stock.name)
        self.code: Pattern = pattern(text, best_mask(text))
        modules = len(self.code) + 2 * QUIET_ZONE
        room = min(0.66 * self.height, 0.34 * self.width)
        self.module = next((m for m in MODULE_SIZES if m * modules <= room), MODULE_SIZES[-1])
        if self.module * modules > min(self.height, 0.5 * self.width):
            self.code = ()
        self.text_width = self.width - 2 * self.edge - (self.module * modules - self.edge if self.code else 0.0)

    def _place_text(self) -> None:
        across = self.width - 2 * self.edge
        self.name = self._fit(self.stock.name, self.text_width, 0.34 * self.height, min(18.0, 0.55 * self.height), True)
        warmth = "" if self.stock.temperature_C is None else warm(self.stock.temperature_C)
        place = " · ".join(part for part in (self.stock.location, warmth, "flipped ________") if part)
        self.place = self._fit(place, across, ONE_LINE if self.height < 16 else 2 * ONE_LINE, 8.0)
        top = self.edge + self.name.height
        self.place_top = self.height - self.edge - self.place.height
        beside = self._fit(self.stock.genotype, self.text_width, self.place_top - top, 9.0)
        below = self._fit(self.stock.genotype, across, self.place_top - max(top, self._code_bottom), 9.0)
        self.below = (below.whole, below.unbroken, below.size) > (beside.whole, beside.unbroken, beside.size)
        self.genotype = below if self.below else beside
        self.genotype_top = self.place_top - below.height if self.below else top

    @property
    def _code_bottom(self) -> float:
        return self.module * (len(self.code) + 2 * QUIET_ABOVE) if self.code else 0.0

    def _fit(self, text: str, width: float, height: float, largest: float, bold: bool = False) -> Fitted:
        return fit(self.pages, [text], width, max(ONE_LINE, height), largest, SMALLEST_TYPE, bold, leading=TIGHT)

    def draw(self, x: float, y: float) -> None:
        """Draw with the top left corner at (x, y), in mm."""
        left = x + self.edge
        self.name.draw(self.pages, left, y + self.edge, bold=True)
        self.genotype.draw(self.pages, left, y + self.genotype_top)
        self.place.draw(self.pages, left, y + self.place_top)
        if self.code:
            side = self.module * (len(self.code) + QUIET_ZONE)
            self.pages.modules(x + self.width - side, y + QUIET_ABOVE * self.module, self.code, self.module)
