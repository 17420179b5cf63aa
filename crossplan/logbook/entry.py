"""One thing that happened to one culture, as somebody wrote it down."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass
from enum import StrEnum


class Event(StrEnum):
    """What can happen to a culture."""

    SET_UP = "set up"
    CLEARED = "cleared"
    PUPAE = "pupae"
    FLIES = "flies"
    COLLECTED = "collected"
    FAILED = "failed"
    DISCARDED = "discarded"
    NOTE = "note"


@dataclass(frozen=True, slots=True)
class Entry:
    """One line of the journal.

    Attributes:
        date: the day on which it happened.
        step: id of the cross.
        event: what happened; `pupae` and `flies` mean the first ones seen, `failed` means that many vials.
        count: flies collected or vials failed; None where nothing is counted.
        person: who did it.
        note: anything else.
    """

    date: dt.date
    step: str
    event: Event
    count: int | None = None
    person: str = ""
    note: str = ""
