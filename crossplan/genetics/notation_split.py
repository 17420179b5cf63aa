"""The skeleton of a genotype: fields by semicolon, homologues by slash, items by comma or blank.

A sign inside brackets belongs to a symbol and divides nothing. One or two passes without recursion, so the time grows with
the length; depth and number of parts are limited.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from typing import Final, NamedTuple

from crossplan.errors import Problem, Severity
from crossplan.genetics.notation_clean import problem

#: deepest nesting of brackets that is read, most fields and most homologues in one (real ones: 4, 4 and 3)
MOST_DEPTH: Final = 12
MOST_FIELDS: Final = 12
MOST_HOMOLOGUES: Final = 12

_CLOSES: Final = {"]": "[", "}": "{", ")": "("}
_CLOSING: Final = {"[": "]", "{": "}", "(": ")"}
#: a divider, or a symbol whose brackets are closed and at most two deep; deeper ones are walked through sign by sign
_WHOLE = re.compile(
    r"[;/]|[, ]+|(?:[^\[\]{}();/, ]+|\[[^\[\]{}()]*\]|\([^\[\]{}()]*\)"
    r"|\{(?:[^\[\]{}()]|\[[^\[\]{}()]*\]|\([^\[\]{}()]*\))*\})+"
)
_SIGN = re.compile(r"[\[\]{}();/, ]")


class Item(NamedTuple):
    """One word of a genotype and where it stands in the cleaned text."""

    text: str
    start: int
    end: int


class Half(NamedTuple):
    """The items of one homologue as written; `start` and `end` enclose them, or the gap where there are none."""

    items: tuple[Item, ...]
    start: int
    end: int


class Field(NamedTuple):
    """What stands between two semicolons: one homologue, or more with slashes between them."""

    halves: tuple[Half, ...]
    start: int
    end: int

    @property
    def is_empty(self) -> bool:
        return not any(h.items for h in self.halves)


def split_genotype(text: str) -> tuple[tuple[Field, ...], Problem | None]:
    """Return the fields of a cleaned genotype, or the first fault of its brackets or slashes."""
    splitter = _Splitter(text)
    fault = splitter.run()
    return (() if fault else tuple(splitter.fields)), fault


class _Splitter:
    def __init__(self, text: str) -> None:
        self.text = text
        self.fields: list[Field] = []
        self.halves: list[Half] = []
        self.items: list[Item] = []
        self.open_at: list[int] = []
        self.field_start = self.half_start = self.item_start = 0

    def run(self) -> Problem | None:
        parts = _WHOLE.findall(self.text)
        if sum(map(len, parts)) == len(self.text):
            self._all_closed(parts)
        else:
            fault = self._sign_by_sign()
            if fault is not None:
                return fault
        self._end_field(len(self.text))
        if len(self.fields) > MOST_FIELDS or any(len(f.halves) > MOST_HOMOLOGUES for f in self.fields):
            return self._error("five-fields", "more parts than any fly has chromosomes", 0, len(self.text))
        return self._bare_slash()

    def _all_closed(self, parts: Sequence[str]) -> None:
        i = 0
        for part in parts:
            end = i + len(part)
            sign = part[0]
            if sign == ";":
                self._end_field(i)
            elif sign == "/":
                self._end_half(i)
            elif sign not in ", ":
                self.items.append(Item(part, i, end))
            i = end

    def _sign_by_sign(self) -> Problem | None:
        for match in _SIGN.finditer(self.text):
            i, sign = match.start(), match.group()
            fault = self._bracket(sign, i) if sign in "[]{}()" else self._divide(sign, i)
            if fault is not None:
                return fault
        if self.open_at:
            return self._unclosed()
        self._end_item(len(self.text))
        return None

    def _divide(self, sign: str, i: int) -> Problem | None:
        if self.open_at:
            return None
        self._end_item(i)
        if sign == ";":
            self._end_field(i)
        elif sign == "/":
            self._end_half(i)
        if len(self.fields) > MOST_FIELDS or len(self.halves) > MOST_HOMOLOGUES:
            return self._error("five-fields", "more parts than any fly has chromosomes", i, i + 1)
        return None

    def _end_item(self, i: int) -> None:
        if i > self.item_start:
            self.items.append(Item(self.text[self.item_start : i], self.item_start, i))
        self.item_start = i + 1

    def _end_half(self, i: int) -> None:
        items = self.items
        start, end = (items[0].start, items[-1].end) if items else (self.half_start, i)
        self.halves.append(Half(tuple(items), start, end))
        self.items = []
        self.half_start = i + 1

    def _end_field(self, i: int) -> None:
        self._end_half(i)
        first, last = self.halves[0], self.halves[-1]
        start = first.start if first.items else self.field_start
        self.fields.append(Field(tuple(self.halves), start, last.end if last.items else i))
        self.halves = []
        self.field_start = i + 1

    def _bracket(self, sign: str, i: int) -> Problem | None:
        if sign in "[{(":
            self.open_at.append(i)
            if len(self.open_at) > MOST_DEPTH:
                return self._error("too-deep", "brackets are nested deeper than in any genotype", i, i + 1)
            return None
        if not self.open_at:
            return self._error(
                "bracket", f"'{sign}' closes no bracket that was opened before it", i, i + 1,
                f"take it out, or write the '{_CLOSES[sign]}' that is missing",
            )  # fmt: skip
        opened = self.open_at.pop()
        if self.text[opened] == _CLOSES[sign]:
            return None
        right = _CLOSING[self.text[opened]]
        return self._error(
            "bracket", f"'{self.text[opened]}' is closed by '{sign}'", opened, i + 1,
            f"perhaps {_short(self.text[opened:i] + right)}, or a '{right}' is missing before the '{sign}'",
        )  # fmt: skip

    def _unclosed(self) -> Problem:
        i = self.open_at[-1]
        word = re.match(r"[^ ;/,]*", self.text[i:])
        written = word.group() if word else self.text[i]
        return self._error(
            "bracket", f"'{self.text[i]}' is never closed, so where the symbol ends is unknown", i, i + 1,
            f"close it; perhaps {_short(written)}{_CLOSING[self.text[i]]}",
        )  # fmt: skip

    def _bare_slash(self) -> Problem | None:
        for field in self.fields:
            for i, half in enumerate(field.halves):
                if len(field.halves) > 1 and not half.items:
                    start = half.end if i == 0 else half.start - 1
                    return self._error(
                        "empty-homologue", "a homologue is missing beside the slash", start, start + 1,
                        "write + for a wild-type homologue",
                    )  # fmt: skip
        return None

    def _error(self, code: str, message: str, start: int, end: int, hint: str = "") -> Problem:
        return problem(code, Severity.ERROR, message, self.text, start, end, hint)


def _short(text: str) -> str:
    return text if len(text) <= 40 else f"{text[:18]}...{text[-18:]}"
