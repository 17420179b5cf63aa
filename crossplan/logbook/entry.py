"""One thing that happened to one culture, as somebody wrote it down."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass, field
from enum import StrEnum

from crossplan.errors import InputError


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

    @classmethod
    def read(cls, text: str) -> Event:
        """Return the event that a text names; capitals, hyphens and underscores do not matter (`Set-up`).

        Raises:
            InputError: it names none.
        """
        words = " ".join(text.casefold().replace("-", " ").replace("_", " ").split())
        try:
            return cls(words)
        except ValueError:
            raise InputError(f"'{text}' is no event of a culture", f"one of: {', '.join(cls)}") from None


@dataclass(frozen=True, slots=True)
class Entry:
    """One line of the journal.

    Attributes:
        date: the day on which it happened.
        step: id of the cross.
        event: what happened; `pupae` and `flies` mean the first ones seen.
        count: flies collected, or vials failed (None: all of them); None where nothing is counted.
        person: who did it.
        note: anything else.
        row: row of the journal that it was read from; 0 when it was not read from one. Two entries that differ in
            nothing else are equal.
    """

    date: dt.date
    step: str
    event: Event
    count: int | None = None
    person: str = ""
    note: str = ""
    row: int = field(default=0, compare=False)
