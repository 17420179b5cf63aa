"""Crosses drawn as geneticists write them: the homologues of each chromosome above and below a line.

Targets whose schemes differ only in which components they bring have one form, and it is drawn once.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from crossplan.bench.pdf_page import MM_PER_POINT, Line, Pages, line_height
from crossplan.bench.words import (
    FEMALE_SIGN,
    MALE_SIGN,
    SIGNS,
    count,
    is_plain,
    keep_rule,
    pairs_of,
    percent,
    source_text,
)
from crossplan.plan.model import FlyRecord, KeepRecord, ParentRecord, Plan, StepRecord, TargetRecord

LARGEST, SMALLEST = 8.5, 5.0
GAP = 3.0


@dataclass(frozen=True, slots=True)
class Form:
    """One form of scheme: the target that is drawn, its steps in order, and all targets of this form."""

    example: TargetRecord
    steps: tuple[StepRecord, ...]
    targets: tuple[TargetRecord, ...]


def forms_of(plan: Plan, steps: Sequence[str] | None = None) -> list[Form]:
    """Return the distinct forms of the plan's schemes, in the order of targets; with `steps`, only those
    that have one.

    Two schemes have one form when their crosses are the same once the components of the target are replaced
    by their place in its list.
    """
    wanted = None if steps is None else set(steps)
    known = {step.id: step for step in plan.steps}
    found: dict[object, list[TargetRecord]] = {}
    for target in plan.targets:
        crosses = _crosses(target, known)
        if crosses:
            found.setdefault(_signature(target, crosses), []).append(target)
    return [
        Form(group[0], _crosses(group[0], known), tuple(group))
        for group in found.values()
        if wanted is None or any(wanted & set(target.scheme) for target in group)
    ]


def crosses_of(plan: Plan, target: TargetRecord) -> tuple[StepRecord, ...]:
    """Return the crosses of a target's scheme, generation by generation."""
    return _crosses(target, {step.id: step for step in plan.steps})


def _crosses(target: TargetRecord, known: dict[str, StepRecord]) -> tuple[StepRecord, ...]:
    crosses = [known[step] for step in target.scheme if step in known]
    place = {step: at for at, step in enumerate(target.scheme)}
    return tuple(sorted(crosses, key=lambda s: (s.generation, place[s.id])))


def _signature(target: TargetRecord, crosses: tuple[StepRecord, ...]) -> object:
    component = {c.removeprefix("2x ").strip(): f"component {at}" for at, c in enumerate(target.components)}
    place = {step.id: at for at, step in enumerate(crosses)}

    def fly(record: FlyRecord) -> object:
        return tuple(
            tuple(tuple(component.get(e, e) for e in homologue) for homologue in pair) for _, pair in pairs_of(record)
        )

    def parent(record: ParentRecord) -> object:
        return (record.sex, place.get(record.step or "", -1), fly(record.fly))

    return tuple((s.generation, parent(s.mother), parent(s.father), s.keep.sex, fly(s.keep.fly)) for s in crosses)


# --- one fly ------------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Fraction:
    """One chromosome as drawn: its name, the lines above and below the rule, and the width in mm."""

    name: str
    above: tuple[Line, ...]
    below: tuple[Line, ...]
    width: float


@dataclass(frozen=True, slots=True)
class FlyFigure:
    """A fly as drawn; size in points."""

    fractions: tuple[Fraction, ...]
    size: float

    @property
    def width(self) -> float:
        """Width in mm."""
        return sum(f.width for f in self.fractions) + GAP * (len(self.fractions) - 1)

    @property
    def _above(self) -> float:
        return max(len(f.above) for f in self.fractions) * line_height(self.size)

    @property
    def height(self) -> float:
        """Height in mm, with the names of the chromosomes below."""
        below = max(len(f.below) for f in self.fractions) * line_height(self.size)
        return self._above + below + line_height(6.0) + 1.6

    def draw(self, pages: Pages, x: float, y: float, bold: bool = False) -> None:
        """Draw with the top left corner at (x, y) in mm; the rules of all chromosomes are at one height."""
        rule = y + self._above + 0.4
        foot = y + self.height - 0.8
        for f in self.fractions:
            middle = x + f.width / 2
            top = rule - 0.4 - len(f.above) * line_height(self.size)
            for at, line in enumerate(f.above):
                base = top + at * line_height(self.size) + 0.8 * self.size * MM_PER_POINT
                pages.text(middle, base, line, self.size, bold, align="middle")
            for at, line in enumerate(f.below):
                base = rule + 0.5 + at * line_height(self.size) + 0.82 * self.size * MM_PER_POINT
                pages.text(middle, base, line, self.size, bold, align="middle")
            pages.rule(x, rule, x + f.width, rule, 0.3)
            pages.text(middle, foot, f.name, 6.0, align="middle")
            x += f.width + GAP


def fly_figure(pages: Pages, fly: FlyRecord, chromosomes: Sequence[str], room: float, bold: bool = False) -> FlyFigure:
    """Return the fly drawn within `room` mm: smaller, then one element a line, then with broken lines."""
    pairs = [(name, pair) for name, pair in pairs_of(fly) if name in chromosomes]
    sizes = [LARGEST - 0.5 * i for i in range(int((LARGEST - SMALLEST) / 0.5) + 1)]
    for stacked in (False, True):
        for size in sizes:
            figure = _figure(pages, pairs, size, stacked, None, bold)
            if figure.width <= room:
                return figure
    share = (room - GAP * (len(pairs) - 1)) / len(pairs)
    return _figure(pages, pairs, SMALLEST, True, share, bold)


def _figure(
    pages: Pages,
    pairs: list[tuple[str, list[list[str]]]],
    size: float,
    stacked: bool,
    most: float | None,
    bold: bool,
) -> FlyFigure:
    def lines(homologue: list[str]) -> tuple[Line, ...]:
        texts = (homologue if stacked else [" ".join(homologue)]) if homologue else ["+"]
        return tuple(line for text in texts for line in pages.wrap(text, size, most or 1e6, bold))

    fractions = []
    for name, pair in pairs:
        above, below = lines(pair[0]), lines(pair[1])
        wide = max(pages.width_of(line, size, bold) for line in above + below)
        fractions.append(Fraction(name, above, below, max(wide, 5.0)))
    return FlyFigure(tuple(fractions), size)


def shown_chromosomes(flies: Sequence[FlyRecord]) -> list[str]:
    """Return the chromosomes to draw: those not wild type in all of these flies; at least the X."""
    names = [name for name in ("X", "2", "3", "4") if any(not is_plain(dict(pairs_of(f))[name]) for f in flies)]
    return names or ["X"]


# --- one cross ----------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class CrossPiece:
    """One cross on a sheet: mother x father, an arrow, and the kept class in a frame with its rule."""

    step: StepRecord
    chromosomes: tuple[str, ...]

    def _parent(self, pages: Pages, parent: ParentRecord, width: float) -> FlyFigure:
        return fly_figure(pages, parent.fly, self.chromosomes, 0.47 * width - 2)

    def _kept(self, pages: Pages, width: float) -> FlyFigure:
        return fly_figure(pages, self.step.keep.fly, self.chromosomes, 0.5 * width, bold=True)

    def _rule_lines(self, pages: Pages, width: float) -> list[Line]:
        room = width - self._kept(pages, width).width - 10
        return [line for text in kept_words(self.step) for line in pages.wrap(text, 8.0, room)]

    def _parents_height(self, pages: Pages, width: float) -> float:
        figures = [self._parent(pages, p, width) for p in (self.step.mother, self.step.father)]
        return line_height(8.5) + 1 + max(f.height for f in figures)

    def _frame_height(self, pages: Pages, width: float) -> float:
        words = len(self._rule_lines(pages, width)) * line_height(8.0)
        return max(self._kept(pages, width).height, words) + 3

    def height(self, pages: Pages, width: float) -> float:
        """Return the height in mm."""
        return self._parents_height(pages, width) + 5 + self._frame_height(pages, width) + 5

    def draw(self, pages: Pages, x: float, y: float, width: float) -> None:
        """Draw with the top left corner at (x, y)."""
        for sign, parent, left in (
            (FEMALE_SIGN, self.step.mother, x + 2),
            (MALE_SIGN, self.step.father, x + 0.53 * width),
        ):
            place = f" ({parent.location})" if parent.location else ""
            title = pages.wrap(f"{sign} {source_text(parent)}{place}", 8.5, 0.46 * width, bold=True)[0]
            pages.lines(left, y, [title], 8.5, bold=True)
            self._parent(pages, parent, width).draw(pages, left, y + line_height(8.5) + 1)
        tall = self._parents_height(pages, width)
        pages.text(x + width / 2, y + tall / 2 + 2, "×", 16, align="middle")
        pages.text(x + width / 2, y + tall + 3.8, "↓", 13, align="middle")
        self._draw_kept(pages, x, y + tall + 5, width)

    def _draw_kept(self, pages: Pages, x: float, y: float, width: float) -> None:
        figure = self._kept(pages, width)
        pages.box(x, y, width, self._frame_height(pages, width), 0.5)
        figure.draw(pages, x + 2, y + 1.5, bold=True)
        pages.lines(x + figure.width + 8, y + 1.5, self._rule_lines(pages, width), 8.0)


def kept_words(step: StepRecord) -> list[str]:
    """Return what stands beside the kept class: step, rule, share, what it must be told from, others in the class,
    where it goes."""
    keep = step.keep
    lines = [f"{step.id}  {SIGNS[keep.sex]}  keep {keep_rule(keep)}", share_words(keep)]
    lines += [f"beware: {other}" for other in keep.mistaken_for]
    others = len(keep.members) - 1
    if others > 0:
        lines.append(f"{count(others, 'other genotype')} in this class look the same and serve as well")
    if step.used_by:
        lines.append(f"for {', '.join(step.used_by)}")
    return lines


def share_words(keep: KeepRecord) -> str:
    """Return the share of the kept class: `1/8 of all progeny (12.5 %)`."""
    exact = f"{keep.exact} of all progeny ({percent(keep.share)})" if keep.exact else ""
    return exact or f"{percent(keep.share)} of all progeny"
