"""One vial label: what stands on it, and where.

All is black on white, without colours or grey, so that a label reads the same from a cheap printer and in
red light.

From top to bottom: the step in large type with the number of the vial; mother x father; the flies to keep,
one line a chromosome; what to keep, in a few words; the days on which the vial is handled. To the right the
code, and the temperature below it where there is room. A control cross has CONTROL in white on black beside
its step.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from crossplan.bench.code2d import QUIET_ZONE, VialCode, best_mask, pattern
from crossplan.bench.fitting import SHORT_CUT_MARK, Fitted, fit
from crossplan.bench.pdf_page import ASCENT, MM_PER_POINT, NO_BREAK, TIGHT, Pages, line_height
from crossplan.bench.words import (
    FEMALE_SIGN,
    MALE_SIGN,
    chromosome_lines,
    dates_phrases,
    fly_text,
    keep_rule,
    short_genotypes,
    source_text,
    warm,
    with_sex_sign,
)
from crossplan.plan.model import StepRecord

#: Smallest type on a label, in points; from a printer of 203 dots an inch a small letter is then 6 dots high.
SMALLEST_TYPE = 4.0
#: Sizes of a module of the code in mm. A printer of 203 dots an inch has 8 dots to the mm: all are whole
#: dots there.
MODULE_SIZES = (0.5, 0.375, 0.25)
#: White modules above and below the code; a side less than the standard asks for, where every tenth of a mm
#: is text.
QUIET_ABOVE = 3
ONE_LINE = line_height(SMALLEST_TYPE, TIGHT)
UNDATED = ("set up ____ · clear ____", "collect ____ · discard ____")


@dataclass(frozen=True, slots=True)
class Vial:
    """One vial: its step and which of how many it is."""

    step: StepRecord
    number: int

    def code(self) -> VialCode:
        """Return what the code on its label says."""
        day = self.step.dates.set_up if self.step.dates else ""
        return VialCode(self.step.id, self.number, vials_of(self.step), day)


def vials_of(step: StepRecord) -> int:
    """Return how many vials a step has; a plan without head-counts gets one label a step."""
    return max(1, step.vials)


class LabelFace:
    """The face of the labels of one step, `width` x `height` mm, laid out once for all its vials."""

    def __init__(self, pages: Pages, step: StepRecord, width: float, height: float) -> None:
        self.pages, self.step = pages, step
        self.width, self.height = width, height
        self.edge = 0.6 if height < 16 else 1.2
        self.largest = min(9.0, max(4.5, height * 0.3))
        self._place_code()
        self._place_header()
        self._place_dates()
        self._place_middle()

    @property
    def is_whole(self) -> bool:
        """Whether nothing on the label is shortened."""
        return all(part.whole for part in (self.parents, self.genotype, self.keep, self.dates))

    def _fit(
        self,
        texts: Sequence[str],
        width: float,
        height: float,
        largest: float,
        bold: bool = False,
        run_on: str = "",
        prose: bool = False,
        first: float | None = None,
    ) -> Fitted:
        asked = (tuple(texts), width, height, largest, bold, run_on, prose, first)
        known: Fitted | None = self.pages.laid_out.get(asked)
        if known is None:
            known = fit(self.pages, texts, width, height, largest, SMALLEST_TYPE, bold, run_on, TIGHT, prose, first)
            self.pages.laid_out[asked] = known
        return known

    def _place_code(self) -> None:
        """Take the largest modules with which the code has at most 66 % of the height, 34 % of the width."""
        longest = Vial(self.step, vials_of(self.step)).code().text()
        self.mask = best_mask(longest)
        self.code_size = len(pattern(longest, self.mask))
        modules = self.code_size + 2 * QUIET_ZONE
        room = min(0.66 * self.height, 0.34 * self.width)
        self.module = next((m for m in MODULE_SIZES if m * modules <= room), MODULE_SIZES[-1])
        #: the white border of the code also keeps the text away from it
        self.text_width = self.width - self.module * modules - self.edge
        self.code_left = self.width - self.module * (modules - QUIET_ZONE)
        self.code_top = QUIET_ABOVE * self.module
        self.code_bottom = self.module * (self.code_size + 2 * QUIET_ABOVE)

    def _place_header(self) -> None:
        self.id_size = min(20.0, max(8.0, self.height * 0.62))
        while self.pages.width_of(self.step.id, self.id_size, bold=True) > 0.6 * self.text_width:
            self.id_size *= 0.9
        self.header_height = max(self.id_size, 8.0) * MM_PER_POINT * 0.95

    def _place_dates(self) -> None:
        """Put the days at the foot: with weekdays if they fit in type that is not too small, else without."""
        width = self.width - 2 * self.edge
        room = max(2 * line_height(SMALLEST_TYPE, TIGHT), 0.2 * self.height)
        self.below_code = self.height - self.edge - room - self.code_bottom
        self.temperature_below = self.below_code >= line_height(5.5, TIGHT)
        self.dates = self._fit(self._dates_text(weekdays=True), width, room, 0.85 * self.largest)
        if not self.dates.whole or self.dates.size < 1.1 * SMALLEST_TYPE:
            self.dates = self._fit(self._dates_text(weekdays=False), width, room, 0.85 * self.largest)
        self.dates_top = self.height - self.edge - self.dates.height
        self.below_code = self.dates_top - self.code_bottom

    def _dates_text(self, weekdays: bool) -> tuple[str, str]:
        dates = self.step.dates
        first, second = dates_phrases(dates, weekdays) if dates else UNDATED
        return (first, second) if self.temperature_below else (f"{warm(self.step.temperature_C)} · {first}", second)

    def _place_middle(self) -> None:
        """Share out what is left: the rule as little as lets it stand whole, the genotype the rest.

        If both cannot stand whole, the genotype is given in a short form that ends with a mark; if that is too long
        too, the rule goes first, since nobody can sort flies by half a rule.
        """
        middle = self.dates_top - self.edge - self.header_height
        self.parents = self._fit_parents(max(ONE_LINE, 0.25 * middle))
        room = middle - self.parents.height
        forms = (None, *short_genotypes(self.step.keep.fly))
        if not any(self._share(room, short) for short in forms):
            self.keep = self._fit_keep(max(ONE_LINE, room - ONE_LINE))
            self.genotype = self._fit_genotype(room - self.keep.height, forms[-1])

    def _share(self, room: float, short: str | None) -> bool:
        """Share out `room` between the rule and this form of the genotype; return whether both are there whole."""
        for keep_room in (0.4 * room, 0.5 * room, 0.6 * room, 0.0):
            self.keep = self._fit_keep(max(ONE_LINE, keep_room))
            self.genotype = self._fit_genotype(room - (self.keep.height if keep_room else ONE_LINE), short)
            if self._all_there:
                self.keep = self._fit_keep(room - self.genotype.height)
                if self.keep.whole and self.keep.height <= room - self.genotype.height + 1e-6:
                    return True
        return False

    def _fit_parents(self, room: float) -> Fitted:
        """Fit mother x father; without room for both names shorten the longer one, so that both show."""
        names = [source_text(self.step.mother), source_text(self.step.father)]
        left = [len(name) for name in names]
        while True:
            shown = [n if k == len(n) else n[:k].rstrip() + SHORT_CUT_MARK for n, k in zip(names, left, strict=True)]
            text = f"{FEMALE_SIGN}{NO_BREAK}{shown[0]} × {MALE_SIGN}{NO_BREAK}{shown[1]}"
            fitted = self._fit([text], self.text_width, room, self.largest)
            if fitted.whole or max(left) <= 1:
                return replace(fitted, whole=fitted.whole and shown == names)
            left[left.index(max(left))] -= 1

    def _fit_keep(self, room: float) -> Fitted:
        """Fit what to keep, with a sign for the sex where the word has no room."""
        rule = keep_rule(self.step.keep)
        for text in (f"keep {rule}", f"keep {with_sex_sign(rule)}"):
            fitted = self._fit_rule(text, room)
            if fitted.whole:
                break
        return fitted

    def _fit_rule(self, text: str, room: float) -> Fitted:
        """Fit the rule beside the code, or below it in the whole width, or both, the first line beside it.

        Where the temperature stands below the code there is room beside it only.
        """
        largest, whole_width = 0.9 * self.largest, self.width - 2 * self.edge
        if self.temperature_below or self.below_code < ONE_LINE:
            return self._fit([text], self.text_width, room, largest, prose=True)
        below = min(room, self.below_code)
        across = self._fit([text], whole_width, below, largest, prose=True)
        if across.whole or room < 2 * ONE_LINE:
            return across
        both = self._fit([text], whole_width, min(room, below + ONE_LINE), largest, prose=True, first=self.text_width)
        return both if both.whole else self._fit([text], self.text_width, room, largest, prose=True)

    def _fit_genotype(self, room: float, short: str | None = None) -> Fitted:
        """Fit the genotype of the kept flies, or its short form and a mark, in bold if it can stand whole so."""
        lines = [line.replace(": ", f":{NO_BREAK}", 1) for line in chromosome_lines(self.step.keep.fly)]
        texts, run_on = (lines, fly_text(self.step.keep.fly)) if short is None else ([f"{short} {SHORT_CUT_MARK}"], "")
        for self.bold_genotype in (True, False):
            fitted = self._fit(texts, self.text_width, room, self.largest, self.bold_genotype, run_on)
            if fitted.whole:
                break
        self._all_there = fitted.whole and fitted.height <= room + 1e-6
        return replace(fitted, whole=fitted.whole and short is None)

    def draw(self, vial: Vial, x: float, y: float) -> None:
        """Draw the label of one vial with its top left corner at (x, y), in mm."""
        left, top = x + self.edge, y + self.edge
        self._draw_header(vial, left, top)
        self.pages.modules(x + self.code_left, y + self.code_top, pattern(vial.code().text(), self.mask), self.module)
        if self.temperature_below:
            wide = self.code_size * self.module / self.pages.width_of(warm(self.step.temperature_C), 1.0, bold=True)
            size = min(9.0, self.below_code / line_height(1.0, TIGHT), wide)
            middle = x + self.code_left + self.code_size * self.module / 2
            base = y + self.code_bottom + ASCENT * size * MM_PER_POINT
            self.pages.text(middle, base, warm(self.step.temperature_C), size, bold=True, align="middle")
        bottom = self.parents.draw(self.pages, left, top + self.header_height)
        self.genotype.draw(self.pages, left, bottom, bold=self.bold_genotype)
        self.keep.draw(self.pages, left, y + self.dates_top - self.keep.height)
        self.dates.draw(self.pages, left, y + self.dates_top)

    def _draw_header(self, vial: Vial, left: float, top: float) -> None:
        base = top + 0.74 * self.id_size * MM_PER_POINT
        self.pages.text(left, base, self.step.id, self.id_size, bold=True)
        at = left + self.pages.width_of(self.step.id, self.id_size, bold=True) + 0.12 * self.id_size * MM_PER_POINT
        number, size = f"{vial.number}/{vials_of(self.step)}", 0.62 * self.id_size
        self.pages.text(at, base, number, size)
        if self.step.is_control:
            self._draw_control(at + self.pages.width_of(number, size), left + self.text_width, base)

    def _draw_control(self, left: float, right: float, base: float) -> None:
        """Draw the mark of a control cross between `left` and `right`, in full or shortened."""
        size = max(SMALLEST_TYPE, 0.45 * self.id_size)
        rim = 0.15 * size * MM_PER_POINT
        room = right - left - 4 * rim
        word = next((w for w in ("CONTROL", "CTRL", "C") if self.pages.width_of(w, size, bold=True) <= room), "C")
        width, height = (
            self.pages.width_of(word, size, bold=True) + 2 * rim,
            0.74 * size * MM_PER_POINT + 2 * rim,
        )
        self.pages.box(right - width, base - height + rim, width, height, black=True)
        self.pages.text(right - width + rim, base, word, size, bold=True, white=True)
