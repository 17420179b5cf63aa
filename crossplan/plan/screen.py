"""What was asked for: the screen file (TOML) and its table of pairs, checked and completed with defaults.

Nothing here knows the shelf: whether a component exists is decided when targets meet stocks.
"""

from __future__ import annotations

import datetime as dt
from typing import Literal

from pydantic import BaseModel, ConfigDict, Field

DAYS = ("Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun")
DayName = Literal["Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun"]


class Section(BaseModel):
    """One table of the screen file; a key that it does not know is refused with its name."""

    model_config = ConfigDict(extra="forbid", frozen=True)


class ScreenSection(Section):
    """[screen]: name, lab, the table of pairs, effectors, and whether controls are added."""

    name: str = "screen"
    lab: str = ""
    pairs: str | None = None
    effectors: tuple[str, ...] = ()
    controls: bool = False
    #: the empty half-drivers or driver that stand in for the pair in the control with no driver, by role
    empty: tuple[str, ...] = ()
    #: the stock that stands in for the missing part in controls; no other wild type or mutant strain is used for them
    background: str | None = None


class Defaults(Section):
    """[defaults]: what a target gets when it does not say otherwise."""

    sex: Literal["female", "male"] = "female"
    flies: int = Field(default=20, ge=1, le=100_000)
    age_days: tuple[int, int] = (3, 7)
    forbid: tuple[str, ...] = ("balancers", "markers")
    due: dt.date | None = None


class TargetSection(Section):
    """[[target]]: one wanted fly."""

    target: str
    components: tuple[str, ...]
    sex: Literal["female", "male"] | None = None
    flies: int | None = Field(default=None, ge=1, le=100_000)
    age_days: tuple[int, int] | None = None
    due: dt.date | None = None
    forbid: tuple[str, ...] | None = None
    #: a self-perpetuating stock is wanted instead of flies for the rig
    stock: bool = False


class SearchSection(Section):
    """[search]: how far to look."""

    max_generations: int = Field(default=3, ge=1, le=6)


class MeansSection(Section):
    """[means]: what the lab has and what it relies on when sorting flies."""

    pupae: bool = False
    fluorescence: bool = False
    #: signs or markers that nobody here wants to rely on, such as "Hu"
    distrust: tuple[str, ...] = ()


class RearingSection(Section):
    """[rearing]: temperature in degrees C, the lab's own egg-to-adult time at 25 C in hours, vial yield."""

    temperature: float = 25.0
    hours_at_25: float | None = Field(default=None, gt=100, lt=600)
    progeny_per_vial: float = Field(default=100.0, gt=0)
    mothers_per_vial: int = Field(default=5, ge=1, le=50)
    fathers_per_vial: int = Field(default=3, ge=1, le=50)
    laying_days: int = Field(default=3, ge=1, le=10)


class CalendarSection(Section):
    """[calendar]: start, working days and hours, holidays, people, time zone."""

    start: dt.date | None = None
    working_days: tuple[DayName, ...] = ("Mon", "Tue", "Wed", "Thu", "Fri")
    holidays: tuple[dt.date, ...] = ()
    morning: str = "09:00"
    afternoon: str = "16:30"
    people: tuple[str, ...] = ()
    timezone: str = "UTC"
    #: flies that the rig tests in a day; None for no limit
    rig_flies_per_day: int | None = Field(default=None, ge=1)


class NumbersSection(Section):
    """[numbers]: probability with which every step is to give enough flies."""

    probability: float = Field(default=0.95, gt=0.0, lt=1.0)


class ScreenFile(Section):
    """The whole screen file."""

    screen: ScreenSection = ScreenSection()
    defaults: Defaults = Defaults()
    search: SearchSection = SearchSection()
    means: MeansSection = MeansSection()
    rearing: RearingSection = RearingSection()
    calendar: CalendarSection = CalendarSection()
    numbers: NumbersSection = NumbersSection()
    target: tuple[TargetSection, ...] = ()
