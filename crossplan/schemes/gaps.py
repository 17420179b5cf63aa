"""What a shelf lacks for a list of targets, without searching for schemes.

Every sentence here follows from what the stocks carry: which components nobody has, which cannot stand in one fly, how many
stocks a target must be drawn from, and so how many generations it needs at the least. Whether a scheme of so many
generations exists is for the search to say.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from itertools import combinations
from typing import Literal

from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.notation import read_genotype
from crossplan.plan.screen_file import FORBID_WORDS, WantedTarget
from crossplan.schemes.acquire import Needs
from crossplan.schemes.forms import Source
from crossplan.schemes.target import (
    Carried,
    Refusal,
    base_name,
    carried_elements,
    find_component,
    make_wish,
    stock_already,
)
from crossplan.schemes.wish import WantedSex, Wish
from crossplan.stocks.audit_components import clashes

Status = Literal["in stock", "parts there", "lacking", "no scheme", "never"]


@dataclass(frozen=True)
class TargetGap:
    """What one target needs of the shelf.

    Attributes:
        target: its name.
        status: `in stock`; `parts there` (every component is on the shelf); `lacking` (something must be obtained);
            `no scheme` (a search found none, see `gap_report`); `never` (no stock would help: the wish contradicts itself, or the flies would die).
        components: symbols of the elements, as far as the shelf has them.
        at_least: generations that it takes at the least, the experimental cross counted; 0 when in stock, None when
            something is lacking.
        needs: what must be obtained: all of these, each by any one of its things.
        reason: why it cannot be made from the shelf as it is.
        cautions: components that do not go together in one fly.
        stock: the stock that it is already.
    """

    target: str
    status: Status
    components: tuple[str, ...] = ()
    at_least: int | None = None
    needs: Needs = ()
    reason: str = ""
    cautions: tuple[str, ...] = ()
    stock: str = ""


@dataclass(frozen=True)
class BaseStock:
    """Two components that no stock carries together, and the targets whose least generations would fall if one did."""

    components: tuple[str, str]
    shortens: tuple[str, ...]


@dataclass(frozen=True)
class HangsBy:
    """A stock without which targets cannot be made: what it alone carries, the targets, and how many copies there are."""

    stock: str
    carries: tuple[str, ...]
    targets: tuple[str, ...]


@dataclass(frozen=True)
class Gaps:
    """What a shelf lacks for a list of targets."""

    targets: tuple[TargetGap, ...]
    base_stocks: tuple[BaseStock, ...]
    hangs_by: tuple[HangsBy, ...]
    helpers: tuple[str, ...] = field(default=())

    @property
    def needs(self) -> dict[str, Needs]:
        """What each target lacks, for those that something can be done about."""
        return {t.target: t.needs for t in self.targets if t.status == "lacking" and t.needs}


def find_gaps(targets: Sequence[WantedTarget], sources: Sequence[Source], catalogue: Catalogue) -> Gaps:
    """Return what the shelf lacks for the targets.

    Args:
        targets: what is wanted.
        sources: the stocks, best first.
        catalogue: reads the components that are not on the shelf, and tells which transgenes clash.
    """
    finder = _Finder(sources, catalogue)
    found = tuple(finder.gap(t) for t in targets)
    return Gaps(found, finder.base_stocks(found), finder.hangs_by(found))


class _Finder:
    def __init__(self, sources: Sequence[Source], catalogue: Catalogue) -> None:
        self.sources = tuple(sources)
        self.catalogue = catalogue
        self.shelf = carried_elements(sources)
        self.by_name = {s.name: s for s in sources}
        #: elements by every name under which a component may mean them, and by those names with one letter less
        self._near: dict[str, dict[str, Carried]] = {}
        for symbol, carried in self.shelf.items():
            for name in dict.fromkeys((symbol, base_name(symbol), carried.element.standard)):
                for key in _one_less(name) if name else ():
                    self._near.setdefault(key, {})[symbol] = carried
        self._found: dict[str, Carried | Refusal] = {}
        self._brought: dict[str, Source | None] = {}

    def find(self, name: str) -> Carried | Refusal:
        """Return the element that a component names; looked up once for each name, among those spelt almost like it."""
        found = self._found.get(name)
        if found is None:
            near = {symbol: c for key in _one_less(name) for symbol, c in self._near.get(key, {}).items()}
            found = self._found[name] = find_component(name, near)
        return found

    def gap(self, target: WantedTarget) -> TargetGap:
        found = [(name, self.find(name)) for name, _ in target.components]
        carried = {c.element.symbol: c for _, c in found if isinstance(c, Carried)}
        wish = self._wish(target, carried)
        cautions = tuple(
            clash.message.format(one=a.symbol, other=b.symbol)
            for clash, a, b in clashes((c.element for c in carried.values()), self.catalogue)
        )
        if isinstance(wish, Wish):
            return self._reachable(target.name, wish, cautions)
        needs, reason = self._lacking(target, found, wish)
        status: Status = "lacking" if needs else "never"
        return TargetGap(target.name, status, tuple(carried), None, needs, reason, cautions)

    def _wish(self, target: WantedTarget, shelf: Mapping[str, Carried]) -> Wish | Refusal:
        sex: WantedSex = "both" if target.stock else target.sex
        # the few elements that the target names are enough, and a wish is made of them in no time
        forbidden = (self.find(word) for word in target.forbid if word not in FORBID_WORDS)
        named = {c.element.symbol: c for c in forbidden if isinstance(c, Carried)}
        return make_wish(target.components, sex, target.forbid, target.stock, {**named, **shelf})

    def _reachable(self, name: str, wish: Wish, cautions: tuple[str, ...]) -> TargetGap:
        carriers = [self.shelf[symbol].stocks for symbol in wish.symbols]
        all_in_one = [
            self.by_name[s] for s in carriers[0] if all(s in others for others in map(frozenset, carriers[1:]))
        ]
        ready = stock_already(wish, all_in_one)
        if ready is not None:
            return TargetGap(name, "in stock", wish.symbols, 0, cautions=cautions, stock=ready[0])
        return TargetGap(name, "parts there", wish.symbols, least_generations(_masks(carriers)), cautions=cautions)

    def _lacking(
        self, target: WantedTarget, found: Sequence[tuple[str, Carried | Refusal]], refused: Refusal
    ) -> tuple[Needs, str]:
        """Return what to obtain, and the reason; a target that stays impossible when it is there needs nothing."""
        absent = {name: c for name, c in found if isinstance(c, Refusal)}
        if not absent:
            return ((frozenset(refused.would_unlock),) if refused.would_unlock else ()), refused.reason
        missing, reason = tuple(absent), "; ".join(c.reason for c in absent.values())
        if any(not c.would_unlock for c in absent.values()):
            return (), reason
        clauses = [frozenset((name,)) for name in missing]
        brought = [b for name in missing if (b := self._bring(name)) is not None]
        extended = {**{c.element.symbol: c for _, c in found if isinstance(c, Carried)}, **carried_elements(brought)}
        if len(brought) == len(missing):
            then = self._wish(target, extended)
            if isinstance(then, Refusal):
                reason += f"; and then: {then.reason}"
                if not then.would_unlock:
                    return (), reason
                clauses.append(frozenset(then.would_unlock))
        return tuple(clauses), reason

    def _bring(self, name: str) -> Source | None:
        """Return a stock that is homozygous for a component that nobody has; None when its chromosome is not known."""
        if name not in self._brought:
            reading = read_genotype(name, self.catalogue)
            sound = reading.ok and (reading.female is not None or reading.male is not None)
            self._brought[name] = Source(name, reading.female, reading.male) if sound else None
        return self._brought[name]

    # -- what would help most, and what hangs by one stock ---------------------------------------------------------

    def base_stocks(self, gaps: Iterable[TargetGap]) -> tuple[BaseStock, ...]:
        """Return pairs of components that would shorten targets if one stock carried both, those that shorten most first."""
        shortened: dict[tuple[str, str], list[str]] = {}
        for gap in gaps:
            if gap.status != "parts there" or gap.at_least is None or gap.at_least < 2:
                continue
            carriers = [self.shelf[s].stocks for s in gap.components]
            masks = _masks(carriers)
            for i, j in combinations(range(len(carriers)), 2):
                if least_generations(masks | {(1 << i) | (1 << j)}) < gap.at_least:
                    one, other = sorted((gap.components[i], gap.components[j]))
                    shortened.setdefault((one, other), []).append(gap.target)
        ordered = sorted(shortened.items(), key=lambda item: (-len(item[1]), item[0]))
        return tuple(BaseStock(pair, tuple(targets)) for pair, targets in ordered)

    def hangs_by(self, gaps: Iterable[TargetGap]) -> tuple[HangsBy, ...]:
        """Return stocks that alone carry a component of targets that can be made, those with the most targets first."""
        alone: dict[str, tuple[dict[str, None], dict[str, None]]] = {}
        for gap in gaps:
            if gap.status not in ("in stock", "parts there"):
                continue
            for symbol in gap.components:
                stocks = self.shelf[symbol].stocks
                if len(stocks) == 1:
                    carries, targets = alone.setdefault(stocks[0], ({}, {}))
                    carries[symbol] = None
                    targets[gap.target] = None
        ordered = sorted(alone.items(), key=lambda item: (-len(item[1][1]), item[0]))
        return tuple(HangsBy(stock, tuple(carries), tuple(targets)) for stock, (carries, targets) in ordered)


def _one_less(name: str) -> tuple[str, ...]:
    """Return the name, and the name with one letter left out: names within one letter of each other share one of these."""
    return (name, *(name[:i] + name[i + 1 :] for i in range(len(name))))


def _masks(carriers: Sequence[Sequence[str]]) -> set[int]:
    """Return which components (bits) some stock carries together."""
    by_stock: dict[str, int] = {}
    for bit, stocks in enumerate(carriers):
        for stock in stocks:
            by_stock[stock] = by_stock.get(stock, 0) | 1 << bit
    return set(by_stock.values())


def fewest_stocks(masks: Iterable[int]) -> int:
    """Return how many stocks it takes at the least to have all components (bits) that occur."""
    masks = set(masks)
    everything = 0
    for mask in masks:
        everything |= mask
    reached = {0}
    for number in range(1, everything.bit_count() + 1):
        reached = {r | m for r in reached for m in masks}
        if everything in reached:
            return number
    return 0


def least_generations(masks: Iterable[int]) -> int:
    """Return a lower bound of generations: each cross joins two flies, so n stocks need log2 n of them, and at least one."""
    return max(1, (fewest_stocks(masks) - 1).bit_length())
