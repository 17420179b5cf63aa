"""A screen on a shelf: targets and controls to answers, one planner for each rearing temperature.

Flies whose effector is silent only in the cool are reared in the cool, and what a person can tell on flies reared in the
cool is less (Curly wings uncurl): their schemes are searched with that in view.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import replace

from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.element import Kind
from crossplan.genetics.survival import sterile_because
from crossplan.plan.screen import ScreenFile
from crossplan.schemes.batch import Answer, Asked, BatchPlanner
from crossplan.schemes.effects import Needs, needs_of
from crossplan.schemes.forms import Source
from crossplan.schemes.target import carried_elements
from crossplan.stocks.shelf import Shelf, Stock


def sources_of(shelf: Shelf) -> tuple[Source, ...]:
    """Return the usable stocks, those with more copies and of simpler genotype first (they represent their kind)."""
    stocks = [s for s in shelf.usable() if s.reading.female is not None or s.reading.male is not None]
    ordered = sorted(stocks, key=_convenience)
    return tuple(Source(s.name, s.reading.female, s.reading.male) for s in ordered)


def _convenience(stock: Stock) -> tuple[object, ...]:
    fly = stock.reading.female or stock.reading.male
    assert fly is not None
    fertile = sterile_because(fly) is None
    heterozygous = sum(a != b for a, b in fly.pairs)
    return (not fertile, heterozygous, -(stock.copies or 0), stock.row)


def _is_strain(source: Source) -> bool:
    """Return whether the stock carries nothing but alleles: a wild type or a mutant strain."""
    flies = [f for f in (source.female, source.male) if f is not None]
    return all(e.kind in (Kind.ALLELE, Kind.Y) for f in flies for e in f.elements())


def means_of(screen: ScreenFile) -> Means:
    """Return the means of the lab that the screen file describes."""
    return Means(
        pupae=screen.means.pupae,
        fluorescence=screen.means.fluorescence,
        distrust=frozenset(screen.means.distrust),
        rearing_C=screen.rearing.temperature,
    )


class ScreenPlanner:
    """Answers the targets of one screen on one shelf."""

    def __init__(self, sources: Sequence[Source], screen: ScreenFile, catalogue: Catalogue) -> None:
        self.sources = tuple(sources)
        self.screen = screen
        self.catalogue = catalogue
        self.shelf = carried_elements(sources)
        self._planners: dict[tuple[float, bool], BatchPlanner] = {}

    def needs(self, asked: Asked) -> Needs:
        """Return what the components of a target ask of the bench."""
        return needs_of((name for name, _ in asked.wanted.components), self.catalogue)

    def temperature_of(self, asked: Asked) -> float:
        """Return the rearing temperature of a target in degrees C: that of the lab, or cooler where an effector asks so."""
        limit = self.needs(asked).rear_max_C
        usual = self.screen.rearing.temperature
        return usual if limit is None else min(limit, usual)

    def observer_of(self, rearing_C: float) -> Observer:
        """Return who looks at flies reared at that temperature."""
        return self._planner(rearing_C, control=False).observer

    def _planner(self, rearing_C: float, control: bool) -> BatchPlanner:
        found = self._planners.get((rearing_C, control))
        if found is None:
            observer = Observer(self.catalogue, replace(means_of(self.screen), rearing_C=rearing_C))
            sources = self._control_sources() if control else self.sources
            found = BatchPlanner(sources, observer, self.screen.search.max_generations)
            self._planners[rearing_C, control] = found
        return found

    def _control_sources(self) -> tuple[Source, ...]:
        """Return the stocks for controls: where the screen names a background, no other wild type or mutant strain."""
        background = self.screen.screen.background
        if background is None or background not in {s.name for s in self.sources}:
            return self.sources
        return tuple(s for s in self.sources if s.name == background or not _is_strain(s))

    def answer(self, asked: Sequence[Asked], progress: Callable[[int, int], None] | None = None) -> list[Answer]:
        """Return an answer for every target in order; `progress` hears how many of how many are done."""
        answers = []
        for done, one in enumerate(asked, start=1):
            planner = self._planner(self.temperature_of(one), control=bool(one.control_kind))
            answers.append(planner.answer(one))
            if progress is not None:
                progress(done, len(asked))
        return answers
