"""Cultures and assays as a constraint model: one yes-or-no variable for each day on which a culture can be set up.

What happens on every later day of a culture follows from its day of set-up (culture.py), so a table of possible days is
made for each, and the model chooses among them. Nothing is ever planned for a day off: such days are not in the tables.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any

from crossplan.schedule.assay import Assay
from crossplan.schedule.culture import (
    FEWEST_COLLECTIONS,
    MOST_COLLECTIONS,
    Biology,
    Culture,
    Days,
    days_of,
    fits,
    latest_use,
)
from crossplan.schedule.week import HORIZON_DAYS, WorkWeek

#: minutes of work: our own estimates, common practice, no source
MINUTES_PER_VIAL = {"set up": 4, "clear": 1, "collect": 5, "virgins": 4, "discard": 0.5, "expand": 3}
MINUTES_PER_ASSAY_FLY = 0.5
#: days beyond the earliest plan that every culture may be set up later
LATER_DAYS = 21
#: days that a culture set up at the horizon would need
TAIL_DAYS = 45


@dataclass(frozen=True)
class Work:
    """What there is to plan: cultures (parents before children), assays, the biology of each step, and the week.

    `limits` holds, by step, the most working days of collection where that is less than usual; cultures may be set up until
    `set_up_by`, or later where the earliest plan leaves little slack before it.
    """

    cultures: Sequence[Culture]
    assays: Sequence[Assay]
    biologies: Mapping[str, Biology]
    laying_days: int
    week: WorkWeek
    limits: Mapping[str, int] = field(default_factory=dict)
    set_up_by: int = 0


@dataclass(frozen=True)
class Chosen:
    """One plan: the days of every culture, and the assay day of every target."""

    days: Mapping[str, Days]
    assay: Mapping[str, int]


def tasks_by_day(days: Days) -> list[tuple[int, str]]:
    """Return the days of a culture with the kind of work on each."""
    found = [(days.set_up, "set up"), (days.clear, "clear"), (days.discard, "discard")]
    found += [(d, "collect") for d in days.collect] + [(d, "virgins") for d in days.stock_collect]
    if days.expand is not None:
        found.append((days.expand, "expand"))
    return found


def minutes_by_day(work: Work, chosen: Chosen) -> dict[int, int]:
    """Return the minutes of work on each day of a plan, as the model counts them."""
    minutes: dict[int, int] = {}
    for culture in work.cultures:
        for day, kind in tasks_by_day(chosen.days[culture.step]) if culture.step in chosen.days else ():
            minutes[day] = minutes.get(day, 0) + round(MINUTES_PER_VIAL[kind] * culture.vials)
    for assay in work.assays:
        if assay.target in chosen.assay:
            day = chosen.assay[assay.target]
            minutes[day] = minutes.get(day, 0) + round(MINUTES_PER_ASSAY_FLY * assay.flies)
    return minutes


class DayTables:
    """The days that each culture can have. `placed` are the cultures that can have any, seen one at a time."""

    def __init__(self, work: Work, every_number: bool = False) -> None:
        self.work = work
        self.assays_of: dict[str, list[Assay]] = {c.step: [] for c in work.cultures}
        for assay in work.assays:
            self.assays_of.get(assay.vials_of, []).append(assay)
        self.uses: dict[str, set[bool]] = {c.step: set() for c in work.cultures}
        for culture in work.cultures:
            for parent, as_mother in culture.parents:
                self.uses[parent].add(as_mother)
        earliest = self._earliest()
        usual = max((d.set_up for d in earliest.values()), default=0) + LATER_DAYS + self._rig_days()
        self.set_up_by = max(usual, work.set_up_by)
        self.placed = [c for c in work.cultures if c.step in earliest]
        self.options = {
            c.step: list(self._options(c, earliest[c.step].set_up, self.set_up_by, every_number)) for c in self.placed
        }

    def _options(self, culture: Culture, first: int, last: int, every_number: bool) -> Iterator[Days]:
        """Yield the possible days: with the most collections that will do or, if asked, with every number of them."""
        for set_up in self.work.week.between(first, last):
            seen: set[int] = set()
            for most in range(self.work.limits.get(culture.step, MOST_COLLECTIONS), 0, -1):
                made = self._days(culture, set_up, most)
                if made is None or len(made.collect) in seen:
                    continue
                seen.add(len(made.collect))
                yield made
                if not every_number or most <= FEWEST_COLLECTIONS:
                    break

    def _days(self, culture: Culture, set_up: int, most: int) -> Days | None:
        """Return the days of a culture if every assay and every cross that uses its flies still has a day after them."""
        biology = self.work.biologies[culture.step]
        made = days_of(culture, set_up, biology, self.work.laying_days, self.work.week, most)
        if made is None or not all(self.assay_days(a, made) for a in self.assays_of[culture.step]):
            return None
        last = (latest_use(made, as_mother, biology) for as_mother in self.uses[culture.step])
        return made if all(self.work.week.between(made.last + 1, day) for day in last) else None

    def assay_days(self, assay: Assay, made: Days) -> tuple[int, ...]:
        """Return the working days on which flies of that culture are of the age asked for, rested and fed."""
        return self.work.week.between(*assay.window(made))

    def _earliest(self) -> dict[str, Days]:
        """Return the earliest days of each culture, one after the other; those that find none are left out."""
        found: dict[str, Days] = {}
        for culture in self.work.cultures:
            if any(p not in found for p, _ in culture.parents):
                continue
            after = max((found[p].last for p, _ in culture.parents), default=-1)
            first = next(self._options(culture, after + 1, self.work.week.days[-1] - TAIL_DAYS, False), None)
            if first is not None:
                found[culture.step] = first
        return found

    def _rig_days(self) -> int:
        """Return how many days the rig needs for all flies, days off included."""
        limit = self.work.week.rig_flies_per_day
        if limit is None:
            return 0
        full = -(-2 * sum(min(a.flies, limit) for a in self.work.assays) // limit)
        return -(-full * HORIZON_DAYS // max(len(self.work.week.days), 1))

    def ready_alone(self) -> dict[str, int]:
        """Return for each target the first assay day that it could have with the fly room and the rig to itself.

        No plan can be earlier: work of others and the need to share parents are left out.
        """
        left: dict[str, list[Days]] = {}
        for culture in self.placed:
            options = self.options[culture.step]
            for parent, as_mother in culture.parents:
                biology = self.work.biologies[parent]
                options = [o for o in options if any(fits(o, p, as_mother, biology) for p in left[parent])]
            left[culture.step] = options
        days = {a.target: [self.assay_days(a, o)[0] for o in left.get(a.vials_of, ())] for a in self.work.assays}
        return {target: min(found) for target, found in days.items() if found}


class DayModel:
    """The model of the solver. With `optional`, cultures and assays may be left out, to see how many find a day."""

    def __init__(self, work: Work, optional: bool = False) -> None:
        from ortools.sat.python import cp_model

        self.work = work
        self.optional = optional
        self.tables = DayTables(work, every_number=optional)
        self.model = cp_model.CpModel()
        self.picks: dict[str, list[tuple[Days, Any]]] = {}
        self.assay_picks: dict[str, list[tuple[int, Any]]] = {}
        self._load: dict[int, list[Any]] = {}
        for culture in self.tables.placed:
            self._add_culture(culture)
        for assay in work.assays:
            if assay.vials_of in self.picks:
                self._add_assay(assay)
        self._limit_rig()
        self.end = self.model.new_int_var(0, work.week.days[-1], "end")
        for picks in self.assay_picks.values():
            self.model.add(self.end >= sum(day * pick for day, pick in picks))
        self.peak = self.model.new_int_var(0, 10_000_000, "peak")
        for terms in self._load.values():
            self.model.add(sum(terms) <= self.peak)

    @property
    def size(self) -> int:
        """Return how many days there are to choose from, all cultures together."""
        return sum(len(picks) for picks in self.picks.values())

    def late_days(self) -> Any:
        """Return the days by which assays are late, added up."""
        return sum(
            (day - by) * pick
            for assay in self.work.assays
            if (by := self._due(assay)) is not None
            for day, pick in self.assay_picks.get(assay.target, ())
            if day > by
        )

    def all_days(self) -> Any:
        """Return the days of all set-ups and assays, added up."""
        return sum(o.set_up * p for picks in self.picks.values() for o, p in picks) + sum(
            day * p for picks in self.assay_picks.values() for day, p in picks
        )

    def placed_work(self) -> Any:
        """Return a measure of how much is planned: more assays first, then more cultures, then more collections."""
        cultures = len(self.picks) * MOST_COLLECTIONS + 1
        assays = cultures * (len(self.picks) + 1)
        return sum((cultures + len(o.collect)) * p for picks in self.picks.values() for o, p in picks) + sum(
            assays * p for picks in self.assay_picks.values() for _, p in picks
        )

    def read(self, value: Any) -> Chosen:
        """Return the plan that the solver found; `value` gives the value of a variable."""
        days = {step: o for step, picks in self.picks.items() for o, p in picks if value(p)}
        assay = {target: day for target, picks in self.assay_picks.items() for day, p in picks if value(p)}
        return Chosen(days, assay)

    def hint(self, chosen: Chosen) -> None:
        """Let the solver begin from a plan that is known."""
        self.model.clear_hints()  # type: ignore[no-untyped-call]
        for step, picks in self.picks.items():
            for option, pick in picks:
                self.model.add_hint(pick, option == chosen.days[step])
        for target, days in self.assay_picks.items():
            for day, pick in days:
                self.model.add_hint(pick, day == chosen.assay[target])
        self.model.add_hint(self.end, max(chosen.assay.values(), default=0))
        self.model.add_hint(self.peak, max(minutes_by_day(self.work, chosen).values(), default=0))

    def _due(self, assay: Assay) -> int | None:
        return None if assay.due is None else (assay.due - self.work.week.start).days

    def _add_culture(self, culture: Culture) -> None:
        options = self.tables.options[culture.step]
        picks = [(o, self.model.new_bool_var(f"{culture.step} {o.set_up}")) for o in options]
        self.picks[culture.step] = picks
        if self.optional:
            self.model.add_at_most_one([p for _, p in picks])
        else:
            self.model.add_exactly_one([p for _, p in picks])
        for parent, as_mother in culture.parents:
            biology = self.work.biologies[parent]
            for option, pick in picks:
                good = [p for o, p in self.picks[parent] if fits(option, o, as_mother, biology)]
                self.model.add_bool_or([*good, pick.negated()])
        for option, pick in picks:
            for day, kind in tasks_by_day(option):
                self._load.setdefault(day, []).append(round(MINUTES_PER_VIAL[kind] * culture.vials) * pick)

    def _add_assay(self, assay: Assay) -> None:
        """Add the days of an assay: each is possible only with those set-ups whose flies are then of the age.

        That every set-up needs one of its assay days follows; saying so lets the solver see more at once.
        """
        fitting: dict[int, list[Any]] = {}
        for option, pick in self.picks[assay.vials_of]:
            for day in self.tables.assay_days(assay, option):
                fitting.setdefault(day, []).append(pick)
        picks = [(day, self.model.new_bool_var(f"{assay.target} on {day}")) for day in sorted(fitting)]
        for day, pick in picks:
            self.model.add_bool_or([*fitting[day], pick.negated()])
            self._load.setdefault(day, []).append(round(MINUTES_PER_ASSAY_FLY * assay.flies) * pick)
        if self.optional:
            self.model.add_at_most_one([p for _, p in picks])
        else:
            self.model.add_exactly_one([p for _, p in picks])
            by_day = dict(picks)
            for option, pick in self.picks[assay.vials_of]:
                allowed = [by_day[day] for day in self.tables.assay_days(assay, option)]
                self.model.add_bool_or([*allowed, pick.negated()])
        self.assay_picks[assay.target] = picks

    def _limit_rig(self) -> None:
        limit = self.work.week.rig_flies_per_day
        if limit is None:
            return
        by_day: dict[int, list[Any]] = {}
        for assay in self.work.assays:
            for day, pick in self.assay_picks.get(assay.target, ()):
                by_day.setdefault(day, []).append(min(assay.flies, limit) * pick)
        for terms in by_day.values():
            self.model.add(sum(terms) <= limit)
