"""Small screens of an invented lab, put on the calendar for the tests of this room."""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping, Sequence

from crossplan.plan.model import KeepRecord, ParentRecord, Plan, ScreenRecord, StepRecord, TargetRecord
from crossplan.plan.screen import CalendarSection, RearingSection, ScreenFile, TargetSection
from crossplan.schedule.from_plan import put_on_calendar
from tests.bench.example_plan import fly

#: a Monday
START = dt.date(2027, 3, 1)
PEOPLE = ("Ida", "Tomas")
TARGET = "K12 x Q07 > CsChrimson"
CONTROL = "empty > CsChrimson"


def parent(name: str, female: bool) -> ParentRecord:
    """Return the kept class of a step when the name begins with S and a number, else flies of a stock."""
    of = fly("female" if female else "male")
    made = name[0] == "S" and name[1:].rstrip("ab").isdigit()
    return ParentRecord(step=name, fly=of, sex=of.sex) if made else ParentRecord(stock=name, fly=of, sex=of.sex)


def cross(
    name: str, mother: str, father: str, *, generation: int = 1, virgin: bool = False, temperature: float = 25.0,
    vials: int = 2, same_vials_as: str = "",
) -> StepRecord:  # fmt: skip
    """Return a cross without dates; its kept flies are all of one class, what they look like does not matter here."""
    kept = fly("female" if virgin else "male")
    return StepRecord(
        id=name,
        generation=generation,
        mother=parent(mother, True),
        father=parent(father, False),
        keep=KeepRecord(sex=kept.sex, fly=kept, members=[kept], share=0.25, exact="1/4", virgin=virgin),
        vials=0 if same_vials_as else vials,
        temperature_C=temperature,
        same_vials_as=same_vials_as,
    )


def wanted(
    name: str, scheme: Sequence[str], flies: int = 20, due: str | None = None, retinal: bool = False
) -> TargetRecord:
    """Return a target that these crosses make, without an assay day."""
    needs = ["CsChrimson: all-trans-retinal food before the assay"] if retinal else []
    return TargetRecord(
        target=name, status="planned", flies=flies, scheme=list(scheme), due=due, needs=needs, generations=1
    )


def two_generations(temperature: float = 25.0) -> list[StepRecord]:
    """Return mothers, fathers and effector flies that meet in a third cross, and a control of one generation."""
    return [
        cross("S01", "K12-AD", "double balancer", virgin=True, temperature=temperature),
        cross("S02", "double balancer", "Q07-DBD", temperature=temperature),
        cross("S03", "S01", "S02", generation=2, temperature=temperature, vials=4),
        cross("S04", "CsChrimson attP18", "empty split", temperature=temperature),
    ]


def two_targets(due: str | None = None) -> list[TargetRecord]:
    """Return the target of the two generations, fed retinal, and its control, which is not."""
    return [wanted(TARGET, ["S01", "S02", "S03"], due=due, retinal=True), wanted(CONTROL, ["S04"])]


def screen_of(
    *, ages: Mapping[str, tuple[int, int]] | None = None, temperature: float = 25.0, laying_days: int = 3,
    calendar: CalendarSection | None = None,
) -> ScreenFile:  # fmt: skip
    """Return a screen file; ages by target default to 3 to 7 days."""
    return ScreenFile(
        rearing=RearingSection(temperature=temperature, laying_days=laying_days),
        calendar=calendar or CalendarSection(people=PEOPLE),
        target=tuple(TargetSection(target=t, components=(), age_days=a) for t, a in (ages or {}).items()),
    )


def on_calendar(
    steps: list[StepRecord], targets: list[TargetRecord], screen: ScreenFile, start: dt.date = START
) -> Plan:
    """Return the plan with its days, as the calendar chooses them."""
    asked = {t.target: t.age_days for t in screen.target}
    ages = {t.target: asked.get(t.target) or screen.defaults.age_days for t in targets}
    fed = frozenset(t.target for t in targets if t.needs)
    tasks, _ = put_on_calendar(steps, targets, ages, fed, screen, start)
    return Plan(
        screen=ScreenRecord(name="red light, batch 1", start=start.isoformat()),
        targets=targets, steps=steps, tasks=tasks, totals={},
    )  # fmt: skip
