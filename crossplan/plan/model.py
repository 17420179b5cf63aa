"""The plan as data: the JSON contract that every output and every other command reads.

Names here are stable. New fields may be added; none is renamed or removed.
"""

from __future__ import annotations

from typing import Any, Literal

from pydantic import BaseModel, ConfigDict, Field

Sex = Literal["female", "male"]


class Record(BaseModel):
    """Base of every record: unknown fields are refused, values are not coerced behind the reader's back."""

    model_config = ConfigDict(extra="forbid", populate_by_name=True)


class FlyRecord(Record):
    """A fly: for every chromosome two homologues, each a list of element symbols in map order."""

    sex: Sex
    x: list[list[str]] = Field(alias="X")
    second: list[list[str]] = Field(alias="2")
    third: list[list[str]] = Field(alias="3")
    fourth: list[list[str]] = Field(alias="4")
    genotype: str


class ParentRecord(Record):
    """Where one parent of a cross comes from: a stock of the shelf, or the kept class of an earlier step."""

    stock: str | None = None
    step: str | None = None
    fly: FlyRecord
    sex: Sex
    #: where the stock stands, as the stock list says (tray, vial); empty when it does not say
    location: str = ""
    #: what to take when the stock throws more than one kind of fly ("curly-winged flies")
    pick: str = ""


class KeepRecord(Record):
    """The class that is kept: what to look for, what to leave, what these flies are, and their share."""

    sex: Sex | Literal["both"]
    signs: list[str] = []
    avoid_signs: list[str] = []
    fly: FlyRecord
    members: list[FlyRecord] = []
    #: share of all living progeny, both sexes together
    share: float
    #: the same as an exact fraction, "1/8"; null where a map distance enters
    exact: str | None = None
    virgin: bool = False
    #: the rule in a few words: "virgin females: straight wings, coloured eyes"
    rule: str = ""
    #: classes of the same vial that are most easily taken for the kept one, each in a few words
    mistaken_for: list[str] = []


class StepDates(Record):
    """When a culture is handled; ISO dates (YYYY-MM-DD)."""

    set_up: str
    clear: str
    collect_from: str
    collect_to: str
    discard: str


class StepRecord(Record):
    """One cross: parents, class kept, what it serves, how much of it, and when."""

    id: str
    generation: int
    mother: ParentRecord
    father: ParentRecord
    keep: KeepRecord
    serves: list[str] = []
    #: steps whose parents are taken from the flies kept here
    used_by: list[str] = []
    vials: int = 0
    mothers_per_vial: int = 0
    fathers_per_vial: int = 0
    #: flies of the kept class that are needed, and how many of them are expected from the vials set up
    flies_needed: int = 0
    flies_expected: float = 0.0
    #: probability that the vials give at least `flies_needed`
    probability: float = 0.0
    #: living progeny, all classes, to look through for that many
    flies_to_score: int = 0
    temperature_C: float = 25.0
    dates: StepDates | None = None
    person: str = ""
    is_control: bool = False
    #: another step with the same parents, from whose vials these flies are taken too; `vials` is 0 then
    same_vials_as: str = ""
    cautions: list[str] = []


class TargetRecord(Record):
    """What was asked for and what became of it."""

    target: str
    status: Literal["planned", "impossible", "in stock"]
    components: list[str] = []
    control_of: str = ""
    control_kind: str = ""
    sex: Sex = "female"
    flies: int = 0
    generations: int | None = None
    proved_minimal: bool = False
    searched_to: int = 0
    scheme: list[str] = []
    reason: str = ""
    would_unlock: list[str] = []
    cautions: list[str] = []
    due: str | None = None
    #: day on which the flies are in the age asked for; first and last possible assay day
    assay_date: str | None = None
    assay_from: str | None = None
    assay_to: str | None = None
    #: what the effector and the assay ask for (retinal food, darkness, rearing and test temperature)
    needs: list[str] = []


class TaskRecord(Record):
    """One thing that somebody does on one day."""

    #: stable over replanning as long as step and kind are the same: "S03-collect-2"
    id: str
    date: str
    #: local time of day, HH:MM
    time: str
    kind: Literal["set up", "clear", "collect", "virgins", "assay", "discard", "food", "shift", "expand"]
    #: step id; for an assay or special food the step that makes the flies
    step: str
    target: str | None = None
    note: str
    person: str = ""
    minutes: int = 0


class ScreenRecord(Record):
    """What the plan was made from."""

    name: str
    lab: str = ""
    screen_file: str = ""
    stock_file: str = ""
    stocks_read: int = 0
    rows_refused: int = 0
    start: str = ""
    temperature_C: float = 25.0
    timezone: str = ""
    probability: float = 0.95
    crossplan: str = ""


class Plan(Record):
    """A whole plan; what `plan.json` holds."""

    screen: ScreenRecord
    targets: list[TargetRecord]
    steps: list[StepRecord]
    tasks: list[TaskRecord]
    #: counts and dates over the whole plan: targets_planned, targets_impossible, steps, vials, virgins,
    #: first_ready, last_ready, busiest_day, busiest_day_tasks, minutes, ...
    totals: dict[str, Any]
    cautions: list[str] = []
    #: general safety reminders that apply to this plan
    safety: list[str] = []

    def step(self, step_id: str) -> StepRecord:
        """Return the step called `step_id`; raise KeyError if there is none."""
        for step in self.steps:
            if step.id == step_id:
                return step
        raise KeyError(step_id)
