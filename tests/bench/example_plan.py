"""A plan of an invented lab for the tests of what is printed: three targets, five crosses, six weeks.

Written by hand; no search and no clock made it. Genotypes are of a plausible form, numbers are round.
"""

from __future__ import annotations

from crossplan.plan.model import (
    FlyRecord,
    KeepRecord,
    ParentRecord,
    Plan,
    ScreenRecord,
    Sex,
    StepDates,
    StepRecord,
    TargetRecord,
    TaskRecord,
)

W = "w[1118]"
AD = "AD-K12@attP40"
DBD = "DBD-Q07@attP2"
UAS = "UAS-CsChrimson@attP18"
Pair = list[list[str]]
WILD: Pair = [[], []]


def fly(sex: Sex, second: Pair = WILD, third: Pair = WILD, x: Pair | None = None) -> FlyRecord:
    """Return a fly; without `x` its X is w[1118]."""
    if x is None:
        x = [[W], [W]] if sex == "female" else [[W], ["Y"]]
    texts = []
    for pair in (x, second, third):
        both = [" ".join(h) or "+" for h in pair]
        texts.append(both[0] if both[0] == both[1] else "/".join(both))
    return FlyRecord(sex=sex, X=x, **{"2": second, "3": third, "4": WILD}, genotype="; ".join(texts))


def stock(name: str, of: FlyRecord, location: str = "", pick: str = "") -> ParentRecord:
    """Return a parent from the shelf."""
    return ParentRecord(stock=name, fly=of, sex=of.sex, location=location, pick=pick)


def made(step: str, of: FlyRecord) -> ParentRecord:
    """Return a parent from an earlier step."""
    return ParentRecord(step=step, fly=of, sex=of.sex)


def dates(set_up: str, clear: str, first: str, last: str, discard: str) -> StepDates:
    """Return the days of a culture."""
    return StepDates(set_up=set_up, clear=clear, collect_from=first, collect_to=last, discard=discard)


G1 = dates("2027-02-22", "2027-02-26", "2027-03-04", "2027-03-08", "2027-03-12")
G2 = dates("2027-03-08", "2027-03-12", "2027-03-18", "2027-03-22", "2027-03-26")
G3 = dates("2027-03-22", "2027-03-26", "2027-04-01", "2027-04-05", "2027-04-12")
X_UAS: Pair = [[W, UAS], [W, UAS]]


def steps() -> list[StepRecord]:
    """Return the five crosses."""
    double: Pair = [["Sp"], ["CyO"]]
    thirds: Pair = [["TM2"], ["TM6B", "Tb[1]"]]
    balancer_male = fly("male", double, thirds)
    s01_fly = fly("female", [[AD], ["CyO"]], [[], ["TM6B", "Tb[1]"]])
    s02_fly = fly("male", [[], ["CyO"]], [[DBD], ["TM6B", "Tb[1]"]])
    s03_fly = fly("male", [[AD], ["CyO"]], [[DBD], ["TM6B", "Tb[1]"]])
    s04_fly = fly("female", [[AD], []], [[DBD], []], [[W, UAS], [W]])
    s05_fly = fly("female", [["empty-AD@attP40"], []], [["empty-DBD@attP2"], []], [[W, UAS], [W]])
    empty_male = fly("male", [["empty-AD@attP40"]] * 2, [["empty-DBD@attP2"]] * 2)
    return [
        StepRecord(
            id="S01",
            generation=1,
            mother=stock("K12-AD", fly("female", [[AD], [AD]]), "tray 3, vial 12"),
            father=stock("double balancer", balancer_male, "tray 1, vial 2"),
            keep=KeepRecord(
                sex="female",
                virgin=True,
                signs=["curly wings", "humeral bristles"],
                avoid_signs=["straight wings", "large halteres"],
                fly=s01_fly,
                members=[s01_fly],
                share=0.125,
                exact="1/8",
                rule="virgin females: curly wings, extra humeral bristles",
                mistaken_for=["curly wings, large halteres: carries TM2, not TM6B"],
            ),
            serves=["K12 x Q07 > CsChrimson"],
            used_by=["S03"],
            vials=4,
            mothers_per_vial=5,
            fathers_per_vial=3,
            flies_needed=20,
            flies_expected=46.0,
            probability=0.98,
            flies_to_score=230,
            dates=G1,
            person="Ida",
        ),
        StepRecord(
            id="S02",
            generation=1,
            mother=stock("double balancer", fly("female", double, thirds), "tray 1, vial 2", "virgins"),
            father=stock("Q07-DBD", fly("male", [[], []], [[DBD], [DBD]]), "tray 3, vial 40"),
            keep=KeepRecord(
                sex="male",
                signs=["curly wings", "humeral bristles"],
                avoid_signs=["Sternopleural bristles"],
                fly=s02_fly,
                members=[s02_fly],
                share=0.125,
                exact="1/8",
                rule="males: curly wings, extra humeral bristles",
            ),
            serves=["K12 x Q07 > CsChrimson"],
            used_by=["S03"],
            vials=2,
            mothers_per_vial=5,
            fathers_per_vial=3,
            flies_needed=12,
            flies_expected=23.0,
            probability=0.97,
            flies_to_score=150,
            dates=G1,
            person="Tomas",
        ),
        StepRecord(
            id="S03",
            generation=2,
            mother=made("S01", s01_fly),
            father=made("S02", s02_fly),
            keep=KeepRecord(
                sex="male",
                signs=["curly wings", "coloured eyes", "humeral bristles"],
                avoid_signs=["straight wings"],
                fly=s03_fly,
                members=[s03_fly],
                share=1 / 9,
                exact="1/9",
                rule="males: curly wings, dark orange eyes, extra humeral bristles",
                mistaken_for=[
                    "light orange eyes: carries AD or DBD alone",
                    "no humeral bristles: TM6B is absent",
                ],
            ),
            serves=["K12 x Q07 > CsChrimson"],
            used_by=["S04"],
            vials=4,
            mothers_per_vial=5,
            fathers_per_vial=3,
            flies_needed=18,
            flies_expected=41.0,
            probability=0.96,
            flies_to_score=260,
            dates=G2,
            person="Ida",
            temperature_C=25.0,
            cautions=["Two copies of mini-white cannot be told from one with certainty."],
        ),
        StepRecord(
            id="S04",
            generation=3,
            mother=stock("CsChrimson attP18", fly("female", x=X_UAS), "tray 7, vial 1"),
            father=made("S03", s03_fly),
            keep=KeepRecord(
                sex="female",
                signs=["straight wings", "no humeral bristles"],
                avoid_signs=["curly wings", "humeral bristles"],
                fly=s04_fly,
                members=[s04_fly],
                share=0.125,
                exact="1/8",
                rule="females: straight wings, normal number of humeral bristles",
                mistaken_for=["curly wings held flat when reared cold"],
            ),
            serves=["K12 x Q07 > CsChrimson"],
            vials=6,
            mothers_per_vial=5,
            fathers_per_vial=3,
            flies_needed=40,
            flies_expected=72.0,
            probability=0.98,
            flies_to_score=420,
            dates=G3,
            person="Tomas",
            cautions=["Food with all-trans-retinal from eclosion; keep in the dark."],
        ),
        StepRecord(
            id="S05",
            generation=1,
            is_control=True,
            mother=stock("CsChrimson attP18", fly("female", x=X_UAS), "tray 7, vial 1"),
            father=stock("empty split", empty_male, "tray 2, vial 30"),
            keep=KeepRecord(sex="female", fly=s05_fly, members=[s05_fly], share=0.5, exact="1/2", rule="all females"),
            serves=["empty > CsChrimson"],
            vials=2,
            mothers_per_vial=5,
            fathers_per_vial=3,
            flies_needed=40,
            flies_expected=95.0,
            probability=0.99,
            flies_to_score=105,
            dates=G3,
            person="Tomas",
        ),
    ]


def tasks(crosses: list[StepRecord]) -> list[TaskRecord]:
    """Return set-up, clearing, two collections a day, assays and discarding of the crosses."""
    found = []
    for s in crosses:
        assert s.dates is not None
        one: list[tuple[str, str, str, str]] = [
            (
                "set up",
                s.dates.set_up,
                "16:30",
                f"Set up {s.vials} vials of {s.mothers_per_vial} x {s.fathers_per_vial}.",
            ),
            ("clear", s.dates.clear, "09:00", "Move the parents out; keep the vials."),
            ("collect", s.dates.collect_from, "09:00", "First collection."),
            ("collect", s.dates.collect_from, "16:30", "Second collection, virgins."),
            ("collect", s.dates.collect_to, "09:00", "Last collection."),
            ("discard", s.dates.discard, "16:30", "Freeze, then bin."),
        ]
        seen: dict[str, int] = {}
        for kind, day, hour, note in one:
            seen[kind] = seen.get(kind, 0) + 1
            found.append(
                TaskRecord(
                    id=f"{s.id}-{kind.replace(' ', '-')}-{seen[kind]}",
                    date=day,
                    time=hour,
                    kind=kind,  # type: ignore[arg-type]
                    step=s.id,
                    note=note,
                    person=s.person,
                    minutes=5 * s.vials,
                )
            )
    for step, target in (("S04", "K12 x Q07 > CsChrimson"), ("S05", "empty > CsChrimson")):
        found += [
            TaskRecord(
                id=f"{step}-food-1",
                date="2027-03-31",
                time="16:30",
                kind="food",
                step=step,
                target=target,
                note="Food with all-trans-retinal, in the dark.",
                person="Tomas",
                minutes=20,
            ),
            TaskRecord(
                id=f"{step}-assay-1",
                date="2027-04-08",
                time="10:00",
                kind="assay",
                step=step,
                target=target,
                note="40 females, 3 to 7 days old; red light.",
                person="Ida",
                minutes=60,
            ),
        ]
    return sorted(found, key=lambda t: (t.date, t.time, t.id))


def targets() -> list[TargetRecord]:
    """Return one target with its control, and one that cannot be made."""
    needs = ["food with all-trans-retinal", "darkness", "rearing at 25 C"]
    return [
        TargetRecord(
            target="K12 x Q07 > CsChrimson",
            status="planned",
            components=[AD, DBD, UAS],
            flies=40,
            generations=3,
            proved_minimal=True,
            searched_to=3,
            scheme=["S01", "S02", "S03", "S04"],
            assay_date="2027-04-08",
            assay_from="2027-04-06",
            assay_to="2027-04-10",
            due="2027-04-09",
            needs=needs,
            cautions=["AD-K12@attP40 is not used homozygous on the rig."],
        ),
        TargetRecord(
            target="empty > CsChrimson",
            status="planned",
            components=["empty-AD@attP40", "empty-DBD@attP2", UAS],
            control_of="K12 x Q07 > CsChrimson",
            control_kind="no driver",
            flies=40,
            generations=1,
            proved_minimal=True,
            searched_to=3,
            scheme=["S05"],
            assay_date="2027-04-08",
            needs=needs,
        ),
        TargetRecord(
            target="M31 > CsChrimson",
            status="impossible",
            components=["AD-M31@attP40", "DBD-M31@attP2", UAS],
            flies=40,
            searched_to=3,
            reason="no living stock carries DBD-M31@attP2",
            would_unlock=["a stock with DBD-M31@attP2"],
        ),
    ]


def example_plan() -> Plan:
    """Return the whole plan."""
    crosses = steps()
    return Plan(
        screen=ScreenRecord(
            name="red light, batch 1",
            lab="Harbour fly room",
            screen_file="red_light.toml",
            stock_file="shelf.csv",
            stocks_read=212,
            rows_refused=3,
            start="2027-02-22",
            timezone="Europe/Vienna",
            crossplan="0.1.0",
        ),
        targets=targets(),
        steps=crosses,
        tasks=tasks(crosses),
        totals={
            "targets_planned": 2,
            "targets_impossible": 1,
            "steps": 5,
            "vials": 18,
            "virgins": 90,
            "first_ready": "2027-04-08",
            "last_ready": "2027-04-08",
            "busiest_day": "2027-03-22",
            "busiest_day_tasks": 7,
            "minutes": 620,
        },
        cautions=["K12-AD stands in one vial only: expand it first."],
        safety=["Transgenic flies: follow the rules of your biosafety committee."],
    )


def virgins_plan() -> Plan:
    """Return the plan with virgins from one stock for three crosses on one day, for two people, and an expansion."""
    plan = example_plan()
    last = plan.steps[4]
    plan.steps.append(last.model_copy(update={"id": "S06", "vials": 3, "person": "Ida"}))
    note = "from stock CsChrimson attP18: empty its vials at 08:30, collect at 15:00; safe for 8 h"

    def add(step: str, kind: str, time: str, note: str, person: str) -> None:
        task_id = f"{step}-{kind}-1"
        plan.tasks.append(
            TaskRecord(id=task_id, date="2027-03-17", time=time, kind=kind, step=step, note=note, person=person,
                       minutes=10)  # type: ignore[arg-type]
        )  # fmt: skip

    for step, person in (("S04", "Tomas"), ("S05", "Tomas"), ("S06", "Ida")):
        add(step, "virgins", "15:00", note, person)
        add(step, "expand", "08:30", f"put stock CsChrimson attP18 on fresh food, for virgins of {step}", person)
    again = "empty the vials at 08:30; females that emerge from then on are virgins at 15:00 (safe for 8 h)"
    add("S01", "collect", "15:00", again, "Ida")
    return plan


LONG_SYMBOLS = [f"P{{y[+t7.7] w[+mC]=made-up-{n:02d}-GAL4.DBD}}VK{n:05d}" for n in range(1, 8)]


def long_plan() -> Plan:
    """Return the plan with one cross whose kept fly has a genotype of far more than 200 characters."""
    plan = example_plan()
    step = plan.steps[3]
    long = fly("female", [LONG_SYMBOLS[:3], ["CyO", "P{invented-twi-2xEGFP}AH2.3"]], [LONG_SYMBOLS[3:], ["TM6B"]])
    keep = step.keep.model_copy(update={"fly": long, "members": [long]})
    plan.steps[3] = step.model_copy(update={"keep": keep})
    return plan
