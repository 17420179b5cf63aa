"""The best set-up days for all cultures at once.

Every culture has a table of what happens when it is set up on each working day (culture.py). A constraint solver chooses
one day for each, so that parents are there when they are needed and every target is tested in its window. Objectives, in
order: nothing late; the last assay within a few days of the earliest possible; as little work as possible on the fullest
day. Nothing is ever
planned for a day off: such days are not in the tables.

The solver is OR-Tools CP-SAT with one worker, a fixed seed and deterministic limits, so the same input gives the same days.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any, Literal

from crossplan.schedule.culture import MOST_COLLECTIONS, Biology, Culture, Days, days_of, fits
from crossplan.schedule.week import HORIZON_DAYS, WorkWeek

#: deterministic effort for each objective, in the solver's own units (about seconds on a usual machine)
EFFORT = (1.0, 2.0, 0.5)
#: how many days after the earliest possible end the last assay may be, to keep the fullest day low
SLACK_DAYS = 5
#: minutes of work: our own estimates, common practice, no source
MINUTES_PER_VIAL = {"set up": 4, "clear": 1, "collect": 5, "virgins": 4, "discard": 0.5, "expand": 3}
MINUTES_PER_ASSAY_FLY = 0.5


@dataclass(frozen=True)
class Assay:
    """A target on the rig: the culture that makes its flies, the ages that will do, and a due day if there is one.

    `feed_days` is how long before the assay the flies go on special food; 0 for none.
    """

    target: str
    step: str
    age_days: tuple[int, int]
    flies: int
    due: dt.date | None = None
    feed_days: int = 0
    #: no anaesthesia so many days before
    rest_days: int = 1
    #: the culture in whose vials these flies grow; the step itself unless it shares them
    culture: str = ""

    @property
    def vials_of(self) -> str:
        """Return the step whose culture makes the flies."""
        return self.culture or self.step


@dataclass(frozen=True)
class Late:
    """A target whose due day cannot be met: the day that can be had, and what makes it late."""

    target: str
    due: dt.date
    ready: dt.date


@dataclass(frozen=True)
class Schedule:
    """The days that were chosen. `gap` is how far the fullest day may be from the best possible (0: proved best)."""

    status: Literal["optimal", "feasible", "nothing to plan", "no days found"]
    gap: float
    days: Mapping[str, Days]
    assay: Mapping[str, int]
    windows: Mapping[str, tuple[int, int]]
    late: tuple[Late, ...] = ()
    unplaced: tuple[str, ...] = ()


@dataclass
class _Choice:
    """The tables and solver variables of one culture."""

    culture: Culture
    options: list[Days]
    picks: list[Any]
    set_up: Any = None


def solve(
    cultures: Sequence[Culture],
    assays: Sequence[Assay],
    biologies: Mapping[str, Biology],
    laying_days: int,
    week: WorkWeek,
) -> Schedule:
    """Return the set-up days of all cultures and the assay day of every target.

    Args:
        cultures: parents before children.
        assays: the targets.
        biologies: whole-day biology for each culture, by step.
        laying_days: days for which parents lay.
        week: the working days.
    """
    if not cultures:
        return Schedule("nothing to plan", 0.0, {}, {}, {})
    return _Solver(cultures, assays, biologies, laying_days, week).run()


class _Solver:
    def __init__(
        self, cultures: Sequence[Culture], assays: Sequence[Assay], biologies: Mapping[str, Biology],
        laying_days: int, week: WorkWeek,
    ) -> None:  # fmt: skip
        from ortools.sat.python import cp_model

        self.cp = cp_model
        self.model = cp_model.CpModel()
        self.week = week
        self.assays = assays
        self.biologies = biologies
        self.laying_days = laying_days
        self.cultures = {c.step: c for c in cultures}
        self.earliest = self._earliest(cultures)
        self.unplaced = tuple(c.step for c in cultures if c.step not in self.earliest)
        self.last_day = self._last_day()
        self.choices = {c.step: self._choice(c) for c in cultures if c.step in self.earliest}
        self.load: dict[int, list[Any]] = {}
        self.assay_picks: dict[str, list[tuple[int, Any]]] = {}

    def _options(self, culture: Culture, first: int, last: int) -> list[Days]:
        made = (self._days(culture, d) for d in self.week.between(first, last))
        return [d for d in made if d is not None]

    def _days(self, culture: Culture, set_up: int) -> Days | None:
        """Return the days with the most collections after which every assay still has a day."""
        assays = [a for a in self.assays if a.vials_of == culture.step]
        for most in range(MOST_COLLECTIONS, 0, -1):
            made = days_of(culture, set_up, self.biologies[culture.step], self.laying_days, self.week, most)
            if made is not None and all(self._assay_days(a, made) for a in assays):
                return made
        return None

    def _assay_days(self, assay: Assay, made: Days) -> tuple[int, ...]:
        """Return the working days on which flies of that culture are of the age asked for, rested and fed."""
        low, high = assay.age_days
        return self.week.between(made.last + max(low, assay.feed_days, assay.rest_days), made.born_from + high)

    def _earliest(self, cultures: Sequence[Culture]) -> dict[str, Days]:
        """Return the earliest days of each culture, one after the other; those that find none are left out."""
        found: dict[str, Days] = {}
        for culture in cultures:
            if any(p not in found for p, _ in culture.parents):
                continue
            after = max((found[p].last for p, _ in culture.parents), default=-1)
            options = self._options(culture, after + 1, self.week.days[-1] - 45)
            if options:
                found[culture.step] = options[0]
        return found

    def _last_day(self) -> int:
        """Return the last day on which anything need be set up: some weeks of slack beyond the earliest plan."""
        return max((d.set_up for d in self.earliest.values()), default=0) + 21 + self._rig_days()

    def _rig_days(self) -> int:
        """Return how many days the rig needs for all flies, days off included."""
        limit = self.week.rig_flies_per_day
        if limit is None:
            return 0
        full = -(-2 * sum(min(a.flies, limit) for a in self.assays) // limit)
        return -(-full * HORIZON_DAYS // max(len(self.week.days), 1))

    def _choice(self, culture: Culture) -> _Choice:
        options = self._options(culture, self.earliest[culture.step].set_up, self.last_day)
        picks = [self.model.new_bool_var(f"{culture.step} {o.set_up}") for o in options]
        self.model.add_exactly_one(picks)
        return _Choice(culture, options, picks)

    def run(self) -> Schedule:
        for choice in self.choices.values():
            self._link_to_parents(choice)
            self._add_load(choice)
        lateness, finishes = [], []
        for assay in self.assays:
            if assay.vials_of in self.choices:
                late, finish = self._add_assay(assay)
                finishes.append(finish)
                lateness += late
        self._limit_rig()
        end = self.model.new_int_var(0, self.week.days[-1], "end")
        for finish in finishes:
            self.model.add(end >= finish)
        peak = self._peak()
        solver = self.cp.CpSolver()
        solver.parameters.num_workers = 1
        solver.parameters.random_seed = 1
        first = 100 * sum(lateness) + end
        solver.parameters.max_deterministic_time = EFFORT[0]
        self.model.minimize(first)
        status = solver.solve(self.model)
        if status not in (self.cp.OPTIMAL, self.cp.FEASIBLE):
            return Schedule("no days found", 0.0, {}, {}, {}, (), tuple(self.cultures))
        proved = status == self.cp.OPTIMAL
        self.model.add(first <= round(solver.objective_value) + SLACK_DAYS)
        self._hint(solver)
        solver.parameters.max_deterministic_time = EFFORT[1]
        solver.parameters.linearization_level = 2
        self.model.minimize(peak)
        status = solver.solve(self.model)
        best = max(solver.best_objective_bound, 0.0)
        gap = (solver.objective_value - best) / max(solver.objective_value, 1.0)
        proved = proved and status == self.cp.OPTIMAL
        self._as_early_as_can_be(solver, peak)
        return self._schedule(solver, "optimal" if proved else "feasible", 0.0 if proved else gap)

    def _as_early_as_can_be(self, solver: Any, peak: Any) -> None:
        """Among plans with this fullest day, move everything as early as a little more effort finds."""
        self.model.add(peak <= round(solver.value(peak)))
        self._hint(solver)
        solver.parameters.max_deterministic_time = EFFORT[2]
        self.model.minimize(
            sum(o.set_up * p for c in self.choices.values() for o, p in zip(c.options, c.picks, strict=True))
        )
        status = solver.solve(self.model)
        assert status in (self.cp.OPTIMAL, self.cp.FEASIBLE), "the plan at hand is one"

    def _link_to_parents(self, choice: _Choice) -> None:
        for parent, as_mother in choice.culture.parents:
            options = self.choices[parent].options
            picks = self.choices[parent].picks
            biology = self.biologies[parent]
            for option, pick in zip(choice.options, choice.picks, strict=True):
                good = [p for o, p in zip(options, picks, strict=True) if fits(option, o, as_mother, biology)]
                self.model.add_bool_or([*good, pick.negated()])

    def _add_load(self, choice: _Choice) -> None:
        vials = choice.culture.vials
        for option, pick in zip(choice.options, choice.picks, strict=True):
            for day, kind in tasks_by_day(option):
                self.load.setdefault(day, []).append(round(MINUTES_PER_VIAL[kind] * vials) * pick)

    def _add_assay(self, assay: Assay) -> tuple[list[Any], Any]:
        choice = self.choices[assay.vials_of]
        picks: dict[int, Any] = {}
        for option, pick in zip(choice.options, choice.picks, strict=True):
            days = self._assay_days(assay, option)
            allowed = []
            for day in days:
                if day not in picks:
                    picks[day] = self.model.new_bool_var(f"{assay.target} on {day}")
                allowed.append(picks[day])
            self.model.add_bool_or([*allowed, pick.negated()])
        self.model.add_exactly_one(picks.values())
        self.assay_picks[assay.target] = sorted(picks.items(), key=lambda item: item[0])
        finish = sum(day * pick for day, pick in picks.items())
        for day, pick in picks.items():
            self.load.setdefault(day, []).append(round(MINUTES_PER_ASSAY_FLY * assay.flies) * pick)
        late = []
        if assay.due is not None:
            by = (assay.due - self.week.start).days
            late = [(day - by) * pick for day, pick in picks.items() if day > by]
        return late, finish

    def _limit_rig(self) -> None:
        limit = self.week.rig_flies_per_day
        if limit is None:
            return
        by_day: dict[int, list[Any]] = {}
        for assay in self.assays:
            for day, pick in self.assay_picks.get(assay.target, ()):
                by_day.setdefault(day, []).append(min(assay.flies, limit) * pick)
        for terms in by_day.values():
            self.model.add(sum(terms) <= limit)

    def _peak(self) -> Any:
        peak = self.model.new_int_var(0, 1_000_000, "peak")
        for terms in self.load.values():
            self.model.add(sum(terms) <= peak)
        return peak

    def _hint(self, solver: Any) -> None:
        self.model.clear_hints()  # type: ignore[no-untyped-call]
        for choice in self.choices.values():
            for pick in choice.picks:
                self.model.add_hint(pick, solver.value(pick))
        for picks in self.assay_picks.values():
            for _, pick in picks:
                self.model.add_hint(pick, solver.value(pick))

    def _schedule(self, solver: Any, status: Literal["optimal", "feasible"], gap: float) -> Schedule:
        days = {
            step: next(o for o, p in zip(c.options, c.picks, strict=True) if solver.value(p))
            for step, c in self.choices.items()
        }
        assay_days: dict[str, int] = {}
        windows: dict[str, tuple[int, int]] = {}
        late = []
        for assay in self.assays:
            if assay.vials_of not in days:
                continue
            day = next(d for d, p in self.assay_picks[assay.target] if solver.value(p))
            low, high = assay.age_days
            made = days[assay.vials_of]
            assay_days[assay.target] = day
            windows[assay.target] = (made.last + max(low, assay.feed_days, assay.rest_days), made.born_from + high)
            if assay.due is not None and self.week.date(day) > assay.due:
                late.append(Late(assay.target, assay.due, self.week.date(day)))
        return Schedule(status, round(gap, 4), days, assay_days, windows, tuple(late), self.unplaced)


def tasks_by_day(days: Days) -> list[tuple[int, str]]:
    """Return the days of a culture with the kind of work on each."""
    found = [(days.set_up, "set up"), (days.clear, "clear"), (days.discard, "discard")]
    found += [(d, "collect") for d in days.collect] + [(d, "virgins") for d in days.stock_collect]
    if days.expand is not None:
        found.append((days.expand, "expand"))
    return found
