"""A screen on a shelf: targets and controls to answers, one planner for each rearing temperature.

Flies whose effector is silent only in the cool are reared in the cool, and what a person can tell on flies reared in the
cool is less (Curly wings uncurl): their schemes are searched with that in view.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import replace

from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.survival import sterile_because
from crossplan.plan.screen import ScreenFile
from crossplan.schemes.batch import Answer, Asked, BatchPlanner
from crossplan.schemes.effects import needs_of
from crossplan.schemes.forms import Source
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


def means_of(screen: ScreenFile) -> Means:
    """Return the means of the lab that the screen file describes."""
    return Means(
        pupae=screen.means.pupae,
        fluorescence=screen.means.fluorescence,
        distrust=frozenset(screen.means.distrust),
        rearing_C=screen.rearing.temperature,
    )


def answer_targets(
    asked: Sequence[Asked],
    sources: Sequence[Source],
    screen: ScreenFile,
    catalogue: Catalogue,
    progress: Callable[[int, int], None] | None = None,
) -> tuple[tuple[Answer, ...], Mapping[str, float]]:
    """Return an answer for every target in order, and the rearing temperature of each by name."""
    means = means_of(screen)
    planners: dict[float, BatchPlanner] = {}
    temperatures = {a.wanted.name: _temperature(a, screen, catalogue) for a in asked}
    answers = []
    for done, one in enumerate(asked, start=1):
        warm = temperatures[one.wanted.name]
        if warm not in planners:
            observer = Observer(catalogue, replace(means, rearing_C=warm))
            planners[warm] = BatchPlanner(sources, observer, screen.search.max_generations)
        answers += planners[warm].plan([one])
        if progress is not None:
            progress(done, len(asked))
    return tuple(answers), temperatures


def _temperature(asked: Asked, screen: ScreenFile, catalogue: Catalogue) -> float:
    names: Iterable[str] = (name for name, _ in asked.wanted.components)
    limit = needs_of(names, catalogue).rear_max_C
    return screen.rearing.temperature if limit is None else min(limit, screen.rearing.temperature)
