"""The skeleton of a genotype: fields by semicolon, homologues by slash, items by comma or blank.

A sign inside brackets belongs to a symbol and divides nothing. One pass, no recursion, so the time grows with the length.
"""

from __future__ import annotations

from dataclasses import dataclass

from crossplan.errors import Problem, Severity
from crossplan.genetics.notation_clean import MOST_DEPTH, problem

_CLOSES = {"]": "[", "}": "{", ")": "("}


@dataclass(frozen=True, slots=True)
class Item:
    """One word of a genotype and where it stands in the cleaned text."""

    text: str
    start: int
    end: int


@dataclass(frozen=True, slots=True)
class Half:
    """The items of one homologue as written; `start` and `end` enclose it."""

    items: tuple[Item, ...]
    start: int
    end: int


@dataclass(frozen=True, slots=True)
class Field:
    """What stands between two semicolons: one homologue, or two."""

    halves: tuple[Half, ...]
    start: int
    end: int

    @property
    def is_empty(self) -> bool:
        return not any(h.items for h in self.halves)


def split_genotype(text: str) -> tuple[tuple[Field, ...], Problem | None]:
    """Return the fields of a cleaned genotype, or the first fault of its brackets or slashes."""
    depth_fault = _brackets(text)
    if depth_fault is not None:
        return (), depth_fault
    fields: list[Field] = []
    for start, end in _parts(text, 0, len(text), ";"):
        halves = [Half(tuple(_items(text, a, b)), a, b) for a, b in _parts(text, start, end, "/")]
        if len(halves) > 1 and any(not h.items for h in halves):
            bad = next(h for h in halves if not h.items)
            return (), problem(
                "empty-homologue", Severity.ERROR, "a homologue is missing beside the slash", text, bad.start,
                max(bad.end, bad.start + 1), "write + for a wild-type homologue",
            )  # fmt: skip
        fields.append(Field(tuple(halves), start, end))
    return tuple(fields), None


def _brackets(text: str) -> Problem | None:
    open_at: list[int] = []
    for i, char in enumerate(text):
        if char in "[{(":
            open_at.append(i)
            if len(open_at) > MOST_DEPTH:
                return problem(
                    "too-deep", Severity.ERROR, "brackets are nested deeper than any genotype", text, i, i + 1
                )
        elif char in _CLOSES:
            if not open_at or text[open_at[-1]] != _CLOSES[char]:
                return problem(
                    "bracket", Severity.ERROR, f"'{char}' closes no bracket that was opened before it", text, i, i + 1,
                    _repair(text, open_at, char),
                )  # fmt: skip
            open_at.pop()
    if open_at:
        i = open_at[-1]
        return problem(
            "bracket", Severity.ERROR, f"'{text[i]}' is never closed, so where the symbol ends is unknown", text, i, i + 1,
            f"close it; perhaps {text[i:].split(' ')[0]}{_closing(text[i])}",
        )  # fmt: skip
    return None


def _closing(bracket: str) -> str:
    return {"[": "]", "{": "}", "(": ")"}[bracket]


def _repair(text: str, open_at: list[int], char: str) -> str:
    if open_at:
        return f"the last open bracket is '{text[open_at[-1]]}'; perhaps it should close with '{_closing(text[open_at[-1]])}'"
    return f"take the '{char}' out, or write the bracket that it closes"


def _parts(text: str, start: int, end: int, divider: str) -> list[tuple[int, int]]:
    parts = []
    depth = 0
    begin = start
    for i in range(start, end):
        char = text[i]
        if char in "[{(":
            depth += 1
        elif char in "]})":
            depth -= 1
        elif char == divider and depth == 0:
            parts.append((begin, i))
            begin = i + 1
    parts.append((begin, end))
    return parts


def _items(text: str, start: int, end: int) -> list[Item]:
    items: list[Item] = []
    depth = 0
    begin: int | None = None
    for i in range(start, end):
        char = text[i]
        if char in "[{(":
            depth += 1
        elif char in "]})":
            depth -= 1
        if depth == 0 and char in ", " and char not in "]})":
            if begin is not None:
                items.append(Item(text[begin:i], begin, i))
            begin = None
        elif begin is None:
            begin = i
    if begin is not None:
        items.append(Item(text[begin:end], begin, end))
    return items
