"""What can be written down, and how its name is read."""

from __future__ import annotations

import datetime as dt

import pytest

from crossplan.errors import InputError
from crossplan.logbook.entry import Entry, Event


@pytest.mark.parametrize("text", ["set up", "Set up", "SET-UP", "set_up", "  set   up "])
def test_an_event_is_read_however_it_is_written(text: str) -> None:
    assert Event.read(text) is Event.SET_UP


@pytest.mark.parametrize("text", ["", "setup", "flew away", "flies!"])
def test_another_word_is_refused_with_the_words_there_are(text: str) -> None:
    with pytest.raises(InputError) as caught:
        Event.read(text)
    assert f"'{text}'" in caught.value.message
    assert all(event in caught.value.hint for event in Event)


def test_the_row_does_not_tell_entries_apart() -> None:
    day = dt.date(2027, 3, 4)
    assert Entry(day, "S01", Event.FLIES, row=2) == Entry(day, "S01", Event.FLIES, row=7)
    assert Entry(day, "S01", Event.FLIES) != Entry(day, "S01", Event.PUPAE)
