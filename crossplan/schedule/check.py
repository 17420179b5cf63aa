"""An independent check of a plan's calendar: every rule of the fly room asked again of the finished dates.

It shares no code with what chose the days: it reads only the plan as it is written down, the screen file, and the rules of
crossplan.rearing. Ages of collected flies are counted from the day of their collection, and days from date to date.
"""

from __future__ import annotations

import datetime as dt
from collections import Counter, defaultdict
from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from crossplan.errors import Problem, Severity
from crossplan.plan.model import ParentRecord, Plan, StepRecord, TargetRecord, TaskRecord
from crossplan.plan.screen import DAYS, ScreenFile
from crossplan.rearing.course import Course
from crossplan.rearing.development import Clock
from crossplan.rearing.handling import (
    anaesthesia_gap_days,
    breeding_allowed,
    clear_parents_by_hours,
    retinal_feeding,
    stop_collecting_hours,
    virgin_hours,
    virgin_keeping_days,
)

#: days for which collected males are good fathers (common practice, no source)
FATHERS_KEEP_DAYS = 14
#: parents lay for a day at the very least, or the vial stays empty (common practice, no source)
LEAST_LAYING_DAYS = 1


@dataclass(frozen=True)
class _Dates:
    """The dates of one step, read."""

    set_up: dt.date
    clear: dt.date
    first: dt.date
    last: dt.date
    discard: dt.date


def check_schedule(
    plan: Plan, screen: ScreenFile, ages: Mapping[str, tuple[int, int]] | None = None
) -> tuple[Problem, ...]:
    """Return what is wrong with the calendar of a plan; nothing if every rule is kept.

    Args:
        plan: with dates; steps without any are those for which no days were found.
        screen: the screen file it was made from.
        ages: youngest and oldest age in days by target. Without it the screen file is asked; it does not know the ages that a
            table of pairs gives, and those targets are held to the window that the plan itself names.

    Codes of the problems, all of them errors: schedule-date (cannot be read), -day-off, -clear, -collect, -parents,
    -virgins, -hot, -age, -anaesthesia, -food, -due, -rig, -task, -person.
    """
    unreadable = tuple(_unreadable(plan))
    if unreadable:
        return unreadable
    return tuple(_Check(plan, screen, ages or {}).run())


def _problem(rule: str, about: str, message: str) -> Problem:
    return Problem(f"schedule-{rule}", Severity.ERROR, f"{about}: {message}")


def _unreadable(plan: Plan) -> Iterator[Problem]:
    texts = [(t.id, t.date) for t in plan.tasks]
    texts += [(s.id, text) for s in plan.steps if s.dates for text in s.dates.model_dump().values()]
    for t in plan.targets:
        texts += [(t.target, text) for text in (t.due, t.assay_date, t.assay_from, t.assay_to) if text is not None]
    for about, text in texts:
        try:
            dt.date.fromisoformat(text)
        except ValueError:
            yield _problem("date", about, f"'{text}' is no date (expected YYYY-MM-DD)")
    for task in plan.tasks:
        try:
            dt.time.fromisoformat(task.time)
        except ValueError:
            yield _problem("date", task.id, f"'{task.time}' is no time of day (expected HH:MM)")


def _day(task: TaskRecord) -> dt.date:
    return dt.date.fromisoformat(task.date)


def _clock_hours(time: str) -> float:
    hour, minute = time.split(":")
    return int(hour) + int(minute) / 60.0


class _Check:
    def __init__(self, plan: Plan, screen: ScreenFile, ages: Mapping[str, tuple[int, int]]) -> None:
        self.plan = plan
        self.screen = screen
        self.ages = ages
        hours = screen.rearing.hours_at_25
        self.clock = Clock() if hours is None else Clock(hours)
        self.steps = {s.id: s for s in plan.steps}
        self.dates = {
            s.id: _Dates(*(dt.date.fromisoformat(x) for x in (
                s.dates.set_up, s.dates.clear, s.dates.collect_from, s.dates.collect_to, s.dates.discard
            )))
            for s in plan.steps
            if s.dates is not None
        }  # fmt: skip
        self.tasks: dict[tuple[str, str], list[TaskRecord]] = defaultdict(list)
        for task in plan.tasks:
            self.tasks[task.step, task.kind].append(task)
        self.targets = {t.target: t for t in plan.targets}

    def run(self) -> Iterator[Problem]:
        yield from self._days_off()
        yield from self._ids_and_persons()
        for step in self.plan.steps:
            yield from self._tasks_match(step)
            if step.id in self.dates:
                yield from self._culture(step, self.dates[step.id])
                yield from self._parents(step, self.dates[step.id])
        for target in self.plan.targets:
            if target.status == "planned":
                yield from self._due(target)
                yield from self._assay(target)
        yield from self._rig()

    # -- days and hands ----------------------------------------------------------------------------------------

    def _works(self, day: dt.date) -> bool:
        calendar = self.screen.calendar
        return DAYS[day.weekday()] in calendar.working_days and day not in calendar.holidays

    def _days_off(self) -> Iterator[Problem]:
        start = dt.date.fromisoformat(self.plan.screen.start) if self.plan.screen.start else dt.date.min
        for task in self.plan.tasks:
            day = _day(task)
            if not self._works(day):
                yield _problem("day-off", task.id, f"{DAYS[day.weekday()]} {day} is a day off")
            if day < start:
                yield _problem("day-off", task.id, f"{day} is before the plan begins ({start})")

    def _ids_and_persons(self) -> Iterator[Problem]:
        for name, times in Counter(t.id for t in self.plan.tasks).items():
            if times > 1:
                yield _problem("task", name, f"{times} tasks have this id")
        people = self.screen.calendar.people
        known = set(people) if people else {""}
        named = [(t.id, t.person) for t in self.plan.tasks] + [(s, self.steps[s].person) for s in self.dates]
        for about, person in named:
            if person not in known:
                yield _problem("person", about, f"nobody called '{person}' is in [calendar] people")
        for task in self.plan.tasks:
            if task.step in self.dates and task.person != self.steps[task.step].person:
                yield _problem(
                    "person", task.id,
                    f"given to '{task.person}', but {task.step} is looked after by '{self.steps[task.step].person}'",
                )  # fmt: skip
            if task.step not in self.steps:
                yield _problem("task", task.id, f"there is no step {task.step}")
            if task.target is not None and task.target not in self.targets:
                yield _problem("task", task.id, f"there is no target {task.target}")

    def _tasks_match(self, step: StepRecord) -> Iterator[Problem]:
        kinds = {kind for (name, kind), found in self.tasks.items() if name == step.id and found}
        dates = self.dates.get(step.id)
        if dates is None:
            if kinds:
                yield _problem("task", step.id, "it has tasks but no dates")
            return
        host = self.dates.get(step.same_vials_as) if step.same_vials_as else None
        if step.same_vials_as and dates != host:
            yield _problem("task", step.id, f"its dates are not those of {step.same_vials_as}, whose vials it shares")
        if not step.same_vials_as:
            once = (("set up", dates.set_up), ("clear", dates.clear), ("discard", dates.discard))
            for kind, day in once:
                found = [_day(t) for t in self.tasks[step.id, kind]]
                if found != [day]:
                    shown = ", ".join(map(str, found)) or "no day"
                    yield _problem("task", step.id, f"{kind} is on {day}, its tasks are on {shown}")
        collected = sorted(_day(t) for t in self.tasks[step.id, "collect"])
        if not collected or (collected[0], collected[-1]) != (dates.first, dates.last):
            shown = f"{collected[0]} to {collected[-1]}" if collected else "no day"
            yield _problem("task", step.id, f"collect is from {dates.first} to {dates.last}, its tasks are on {shown}")

    # -- one culture -------------------------------------------------------------------------------------------

    def _temperature(self, step: StepRecord) -> float:
        """Return the coolest temperature of the steps that share these vials, in degrees C."""
        host = step.same_vials_as or step.id
        return min(s.temperature_C for s in self.plan.steps if (s.same_vials_as or s.id) == host)

    def _culture(self, step: StepRecord, dates: _Dates) -> Iterator[Problem]:
        course = Course.constant(self._temperature(step))
        first_hours = self.clock.eclosion(course).first_hours
        stop_hours = stop_collecting_hours(course, self.clock)
        kept = (dates.clear, dates.first, dates.last, dates.discard)
        clear, first, last, discard = ((d - dates.set_up).days for d in kept)
        if clear < LEAST_LAYING_DAYS:
            yield _problem("clear", step.id, f"parents are cleared {clear} days after set-up: they have not laid")
        clear_hours = clear_parents_by_hours(course, self.clock)
        if clear * 24.0 > clear_hours:
            yield _problem(
                "clear", step.id,
                f"parents are cleared {clear} days after set-up, they must be out after {clear_hours / 24:.1f} days;"
                f" their children emerge from {first_hours / 24:.1f} days on",
            )  # fmt: skip
        if first * 24.0 < first_hours:
            yield _problem(
                "collect", step.id,
                f"collection begins {first} days after set-up, the first flies come after {first_hours / 24:.1f} days",
            )  # fmt: skip
        if last * 24.0 >= stop_hours:
            yield _problem(
                "collect", step.id,
                f"collection goes on to {last} days after set-up, flies may be grandchildren from {stop_hours / 24:.1f} days on",
            )  # fmt: skip
        elif discard * 24.0 >= stop_hours:
            yield _problem(
                "collect", step.id,
                f"discarded {discard} days after set-up, when grandchildren may be about ({stop_hours / 24:.1f} days)",
            )  # fmt: skip
        if not dates.first <= dates.last <= dates.discard:
            yield _problem("collect", step.id, "first collection, last collection and discarding are not in this order")

    # -- parents -----------------------------------------------------------------------------------------------

    def _parents(self, step: StepRecord, dates: _Dates) -> Iterator[Problem]:
        for parent, as_mother in ((step.mother, True), (step.father, False)):
            if parent.step is not None:
                yield from self._made_parent(step, dates, parent, as_mother)
        if step.mother.step is None and not step.same_vials_as:
            yield from self._stock_virgins(step, dates)

    def _made_parent(self, step: StepRecord, dates: _Dates, parent: ParentRecord, as_mother: bool) -> Iterator[Problem]:
        who = "mothers" if as_mother else "fathers"
        made = self.steps.get(parent.step or "")
        if made is None or made.id not in self.dates:
            yield _problem("parents", step.id, f"its {who} come from {parent.step}, which has no dates")
            return
        origin = self.dates[made.id]
        temperature = self._temperature(made)
        warmest = max(
            s.temperature_C for s in self.plan.steps if (s.same_vials_as or s.id) == (made.same_vials_as or made.id)
        )
        if not breeding_allowed(warmest):
            yield _problem(
                "hot", step.id, f"its {who} were reared at {warmest:g} C in {made.id}: do not breed from them"
            )
        if origin.last >= dates.set_up:
            yield _problem(
                "parents", step.id,
                f"set up on {dates.set_up}, but the last collection of its {who} in {made.id} is on {origin.last}",
            )  # fmt: skip
        keep = virgin_keeping_days(temperature) if as_mother else float(FATHERS_KEEP_DAYS)
        oldest = (dates.set_up - origin.first).days
        if oldest > keep:
            yield _problem(
                "parents", step.id, f"its oldest {who} are {oldest} days old at set-up, they keep for {keep:g} days"
            )
        if as_mother:
            for task in self.tasks[made.id, "collect"]:
                yield from self._emptied(task, temperature)

    def _stock_virgins(self, step: StepRecord, dates: _Dates) -> Iterator[Problem]:
        temperature = self._temperature(step)
        taken = self.tasks[step.id, "virgins"]
        if not taken:
            yield _problem("virgins", step.id, f"no task takes virgins from stock {step.mother.stock}")
            return
        for task in taken:
            age = (dates.set_up - _day(task)).days
            if age < 1:
                yield _problem("virgins", task.id, f"{task.date} is not before the set-up on {dates.set_up}")
            if age > virgin_keeping_days(temperature):
                yield _problem(
                    "virgins", task.id,
                    f"the virgins are {age} days old at set-up, they keep for {virgin_keeping_days(temperature):g} days",
                )  # fmt: skip
            yield from self._emptied(task, temperature)
        yield from self._fresh_food(step, temperature, min(map(_day, taken)))

    def _fresh_food(self, step: StepRecord, temperature: float, first: dt.date) -> Iterator[Problem]:
        """The stock goes on fresh food early enough for new flies to be there, and not so early that they have bred."""
        course = Course.constant(temperature)
        first_hours = self.clock.eclosion(course).first_hours
        stop_hours = stop_collecting_hours(course, self.clock)
        expanded = [_day(t) for t in self.tasks[step.id, "expand"]]
        if not any(first_hours <= (first - day).days * 24.0 < stop_hours for day in expanded):
            yield _problem(
                "virgins", step.id,
                f"stock {step.mother.stock} is not put on fresh food {first_hours / 24:.1f} to {stop_hours / 24:.1f} days"
                f" before its virgins are first taken on {first}",
            )  # fmt: skip

    def _emptied(self, task: TaskRecord, temperature: float) -> Iterator[Problem]:
        """Females are virgins if the vials were emptied the same morning, few enough hours before."""
        morning = self.screen.calendar.morning
        gap = _clock_hours(task.time) - _clock_hours(morning)
        safe = virgin_hours(temperature)
        if gap <= 0:
            yield _problem(
                "virgins", task.id, f"virgins are collected at {task.time}, not after the emptying at {morning}"
            )
        elif gap > safe:
            yield _problem(
                "virgins", task.id,
                f"virgins are collected {gap:.1f} h after the emptying at {morning}, at {temperature:g} C {safe:.1f} h are safe",
            )  # fmt: skip
        if "empty" not in task.note or morning.rjust(5, "0") not in task.note:
            yield _problem("virgins", task.id, f"its note does not say to empty the vials at {morning}")

    # -- targets -----------------------------------------------------------------------------------------------

    def _undated(self, target: TargetRecord) -> list[str]:
        return [s for s in target.scheme if s not in self.dates]

    def _due(self, target: TargetRecord) -> Iterator[Problem]:
        missing = self._undated(target)
        if missing and not target.cautions:
            yield _problem("due", target.target, f"{missing[0]} has no dates, and no caution says so")
        if target.due is None or missing or not target.scheme:
            return
        ready = dt.date.fromisoformat(target.assay_date) if target.assay_date else self.dates[target.scheme[-1]].first
        if ready > dt.date.fromisoformat(target.due) and not any(target.due in c for c in target.cautions):
            yield _problem("due", target.target, f"ready on {ready}, due on {target.due}, and no caution says so")

    def _asked_ages(self, target: TargetRecord) -> tuple[int, int] | None:
        for name in (target.target, target.control_of):
            if name in self.ages:
                return self.ages[name]
            for section in self.screen.target:
                if section.target == name:
                    return section.age_days or self.screen.defaults.age_days
        return None if self.screen.screen.pairs else self.screen.defaults.age_days

    def _assay(self, target: TargetRecord) -> Iterator[Problem]:
        tasks = [t for t in self.plan.tasks if t.kind == "assay" and t.target == target.target]
        days = [t.date for t in tasks]
        if target.assay_date is None:
            if tasks:
                yield _problem("task", target.target, "it has an assay task but no assay day")
            elif target.target in self.ages and not any("no day" in c for c in target.cautions):
                yield _problem("task", target.target, "it has no assay day, and no caution says so")
            return
        if days != [target.assay_date]:
            yield _problem(
                "task", target.target, f"assay is on {target.assay_date}, its tasks are on {', '.join(days)}"
            )
        if not target.scheme or target.scheme[-1] not in self.dates:
            yield _problem(
                "task", target.target, "it has an assay day, but no dates for the cross that makes its flies"
            )
            return
        made = self.dates[target.scheme[-1]]
        day = dt.date.fromisoformat(target.assay_date)
        yield from self._age(target, made, day)
        rest = (day - made.last).days
        if rest < anaesthesia_gap_days():
            yield _problem(
                "anaesthesia", target.target,
                f"the assay is {rest} days after the last collection, {anaesthesia_gap_days():g} must pass after anaesthesia",
            )  # fmt: skip
        yield from self._food(target, made, day)

    def _age(self, target: TargetRecord, made: _Dates, day: dt.date) -> Iterator[Problem]:
        asked = self._asked_ages(target)
        youngest, oldest = (day - made.last).days, (day - made.first).days
        if asked is not None and not asked[0] <= youngest <= oldest <= asked[1]:
            yield _problem(
                "age", target.target,
                f"flies are {youngest} to {oldest} days old at the assay on {day}, {asked[0]} to {asked[1]} are asked for",
            )  # fmt: skip
        low, high = target.assay_from or str(day), target.assay_to or str(day)
        if not low <= str(day) <= high:
            yield _problem("age", target.target, f"the assay on {day} is outside its own window, {low} to {high}")

    def _food(self, target: TargetRecord, made: _Dates, day: dt.date) -> Iterator[Problem]:
        tasks = [t for t in self.plan.tasks if t.kind == "food" and t.target == target.target]
        if any("retinal" in need for need in target.needs) and not tasks:
            yield _problem("food", target.target, "it needs retinal, and no task puts its flies on retinal food")
        least = retinal_feeding().least_days
        for task in tasks:
            fed = (day - _day(task)).days
            if fed < least:
                yield _problem(
                    "food", task.id, f"retinal food is given {fed} days before the assay, {least:g} are needed"
                )
            if "dark" not in task.note:
                yield _problem("food", task.id, "its note does not say to keep the flies in the dark")
            if _day(task) < made.last:
                yield _problem("food", task.id, f"on {task.date} its flies are not collected yet (last on {made.last})")

    def _rig(self) -> Iterator[Problem]:
        limit = self.screen.calendar.rig_flies_per_day
        if limit is None:
            return
        by_day: dict[str, list[TargetRecord]] = defaultdict(list)
        for target in self.plan.targets:
            if target.assay_date is not None:
                by_day[target.assay_date].append(target)
        for day, targets in sorted(by_day.items()):
            flies = sum(t.flies for t in targets)
            told = len(targets) == 1 and any("rig" in c.split() for c in targets[0].cautions)
            if flies > limit and not told:
                yield _problem("rig", targets[0].target, f"{flies} flies on {day}, the rig tests {limit} a day")
