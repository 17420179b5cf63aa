"""What one symbol of a genotype was read as, and how strongly it speaks for a chromosome."""

from __future__ import annotations

from dataclasses import dataclass
from enum import IntEnum
from typing import Final, TypeVar

from crossplan.errors import Problem, Severity
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.element import Element, Kind
from crossplan.genetics.notation_clean import problem
from crossplan.genetics.notation_split import Item


class Rank(IntEnum):
    """How strongly a piece of evidence speaks for a chromosome; a lower one gives way to a higher."""

    HINT = 1
    OTHER_ROWS = 2
    STRONG = 3


@dataclass(frozen=True, slots=True)
class Evidence:
    """A chromosome, what says so, and how strongly."""

    chromosome: str
    because: str
    rank: Rank = Rank.STRONG


@dataclass(frozen=True, slots=True)
class Word:
    """What one symbol was read as; no element for wild type, and where `problems` has an error."""

    element: Element | None
    evidence: tuple[Evidence, ...] = ()
    problems: tuple[Problem, ...] = ()
    plus: bool = False

    @property
    def kind(self) -> Kind | None:
        return self.element.kind if self.element is not None else None


def said(chromosome: str, because: str) -> tuple[Evidence, ...]:
    """Return strong evidence for a chromosome; none where it is not known."""
    return (Evidence(chromosome, because),) if chromosome else ()


#: how many readings of one kind are kept at most
_MOST_REMEMBERED: Final = 20_000
_Key = TypeVar("_Key")
_Read = TypeVar("_Read")


def remember(memory: dict[_Key, _Read], key: _Key, read: _Read) -> None:
    """Keep a reading for the next time; a memory that is full is emptied first."""
    if len(memory) >= _MOST_REMEMBERED:
        memory.clear()
    memory[key] = read


class SymbolReader:
    """What all readers of symbols share: the catalogue, and the text that problems point into."""

    def __init__(self, catalogue: Catalogue, text: str) -> None:
        self.catalogue = catalogue
        self.text = text

    def say(self, item: Item, code: str, message: str, hint: str = "", severity: Severity = Severity.NOTE) -> Problem:
        """Return a problem at the place of a symbol."""
        return problem(code, severity, message, self.text, item.start, item.end, hint)

    def fault(self, item: Item, code: str, message: str, hint: str) -> Word:
        """Return the word for a symbol that cannot be read."""
        return Word(None, problems=(self.say(item, code, message, hint, Severity.ERROR),))

    def unknown(self, item: Item, symbol: str) -> Problem:
        """Return the note for a symbol that the catalogue does not have."""
        return self.say(item, "unknown-symbol", f"{symbol} is not in the catalogue; it is kept as itself",
                        "add it to the lab's catalogue if it shows, kills or covers something")  # fmt: skip
