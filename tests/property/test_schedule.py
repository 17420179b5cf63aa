"""Random small screens and weeks: whatever they are, the calendar keeps the rules that the checker asks."""

from __future__ import annotations

import datetime as dt
from random import Random

import pytest

from crossplan.plan.model import Plan, StepRecord, TargetRecord
from crossplan.plan.screen import CalendarSection, DayName, ScreenFile
from crossplan.schedule.check import check_schedule
from tests.schedule.small_plans import PEOPLE, START, cross, on_calendar, screen_of, wanted

CASES = 200
WEEKS: tuple[tuple[DayName, ...], ...] = (
    ("Mon", "Tue", "Wed", "Thu", "Fri"),
    ("Mon", "Tue", "Wed", "Thu", "Fri", "Sat"),
    ("Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun"),
    ("Mon", "Wed", "Thu", "Fri"),
    ("Sun", "Mon", "Tue", "Wed", "Thu"),
    ("Mon", "Wed", "Fri"),
    ("Tue", "Fri"),
)
AGES = ((3, 7), (2, 6), (4, 8), (3, 10), (5, 5), (0, 3), (1, 1), (20, 30))
HOURS = (("09:00", "16:30"), ("8:30", "17:00"), ("13:00", "23:59"))


def random_steps(random: Random, number: int, temperature: float) -> list[StepRecord]:
    """Return crosses of up to three generations for one target; the last makes its flies."""
    name = f"S{number}"
    base = [
        cross(f"{name}1", "K12-AD", "double balancer", virgin=True, temperature=temperature, vials=random.randint(1, 6))
    ]
    generations = random.randint(1, 3)
    if generations > 1:
        shares = f"{name}1" if random.random() < 0.3 else ""
        if shares:
            base.append(cross(f"{name}2", "K12-AD", "double balancer", temperature=temperature, same_vials_as=shares))
        else:
            base.append(cross(f"{name}2", "double balancer", "Q07-DBD", temperature=temperature))
        base.append(cross(f"{name}3", f"{name}1", f"{name}2", generation=2, temperature=temperature))
    if generations > 2:
        base.append(cross(f"{name}4", "CsChrimson attP18", f"{name}3", generation=3, temperature=temperature))
    return base


def random_screen(seed: int) -> tuple[list[StepRecord], list[TargetRecord], ScreenFile, dt.date]:
    """Return a screen of one to three targets with its week, holidays, people, due days and rig."""
    random = Random(seed)
    start = START + dt.timedelta(days=random.randrange(14))
    temperature = random.choice([16.0, 18.0, 22.0, 25.0, 25.0, 25.0, 28.0])
    steps: list[StepRecord] = []
    targets: list[TargetRecord] = []
    for number in range(1, random.randint(1, 3) + 1):
        made = random_steps(random, number, temperature)
        due = (start + dt.timedelta(days=random.randrange(20, 100))).isoformat() if random.random() < 0.4 else None
        flies = random.choice([10, 20, 40])
        targets.append(wanted(f"line {number}", [s.id for s in made], flies, due, retinal=random.random() < 0.5))
        steps += made
    off = set(random.sample(range(70), random.randrange(5)))
    if random.random() < 0.2:
        closed = random.randrange(50)
        off |= set(range(closed, closed + random.randrange(7, 15)))
    morning, afternoon = random.choice(HOURS)
    calendar = CalendarSection(
        working_days=random.choice(WEEKS),
        holidays=tuple(start + dt.timedelta(days=d) for d in sorted(off)),
        morning=morning,
        afternoon=afternoon,
        people=PEOPLE[: random.randrange(3)],
        rig_flies_per_day=random.choice([None, None, 15, 40, 70]),
    )
    ages = {t.target: random.choice(AGES) for t in targets}
    laying = random.randint(1, 5)
    return steps, targets, screen_of(ages=ages, temperature=temperature, laying_days=laying, calendar=calendar), start


def planned(seed: int) -> tuple[Plan, ScreenFile]:
    steps, targets, screen, start = random_screen(seed)
    return on_calendar(steps, targets, screen, start), screen


@pytest.mark.parametrize("seed", range(CASES))
def test_the_calendar_keeps_every_rule(seed: int) -> None:
    plan, screen = planned(seed)
    ages = {t.target: t.age_days for t in screen.target if t.age_days}
    assert check_schedule(plan, screen, ages) == ()


@pytest.mark.parametrize("seed", range(0, CASES, 20))
def test_the_same_screen_gives_the_same_calendar(seed: int) -> None:
    assert planned(seed)[0].model_dump_json() == planned(seed)[0].model_dump_json()


def test_the_random_screens_are_worth_their_name() -> None:
    screens = [random_screen(seed) for seed in range(CASES)]
    assert len({len(steps) for steps, *_ in screens}) >= 6
    assert any(t.due for _, targets, *_ in screens for t in targets)
    assert any(s.same_vials_as for steps, *_ in screens for s in steps)
    assert any(screen.calendar.holidays for _, _, screen, _ in screens)


def test_most_of_the_random_targets_get_their_day() -> None:
    targets = [t for seed in range(0, CASES, 8) for t in planned(seed)[0].targets]
    assert sum(t.assay_date is not None for t in targets) > len(targets) / 2
