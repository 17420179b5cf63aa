"""Noise in typed genotypes: what is put right in silence or with a note, and what is refused before reading.

Putting right keeps count of the original characters, so that every problem can point at what was typed.
"""

from __future__ import annotations

import re
import unicodedata
from dataclasses import dataclass

from crossplan.errors import Problem, Severity

#: longest genotype that is read; the longest real ones known to us have some 600 characters
MOST_CHARACTERS = 4000
#: deepest nesting of brackets that is read
MOST_DEPTH = 12

_SAME = str.maketrans(
    {
        "\u00a0": " ", "\u2007": " ", "\u202f": " ", "\t": " ", "\n": " ", "\r": " ", "\u2013": "-", "\u2014": "-", "\u2212": "-",
        "\u2010": "-", "\u2011": "-", "\uff1b": ";", "\uff0f": "/", "\uff0c": ",", "\uff5b": "{", "\uff5d": "}", "\uff08": "(",
        "\uff09": ")", "\uff3b": "[", "\uff3d": "]", "\u2018": "'", "\u2019": "'", "\u201c": '"', "\u201d": '"', "\u2215": "/",
        "\u2044": "/", "\uff1d": "=", "\uff0b": "+",
    }
)  # fmt: skip
_SUPERSCRIPT = dict(zip("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻", "0123456789+-", strict=True))
_REMOVED = frozenset("\ufeff\u200b\u200c\u200d\u2060\u00ad")
_DIRECTION = frozenset("\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069")
_CYRILLIC = str.maketrans("АВЕКМНОРСТХУаеорсухв", "ABEKMHOPCTXYaeopcyxB")
_FORMULA = re.compile(r"\s*(?:[=@]|[+-]\s*\w+\s*[|(]|[+-]\d)")
_ERROR_VALUE = re.compile(r"#(?:NAME\?|REF!|VALUE!|N/A|DIV/0!|NULL!|NUM!)")
_DATE = re.compile(
    r"(?<![\w.])(?:\d{1,2}-(?:Jan|Feb|Mar|Apr|May|Jun|Jul|Aug|Sep|Oct|Nov|Dec)|\d{1,2}/\d{1,2}/\d{2,4})(?![\w.])"
)
_SCIENTIFIC = re.compile(r"(?<![\w.])\d+\.\d+E\+\d+(?![\w.])")
_TAGS = re.compile(r"<(?:sup|up)>(.*?)</(?:sup|up)>", re.IGNORECASE)
_CARET = re.compile(r"\^\{([^{}]*)\}|\^([\w+*-]+)")


@dataclass(frozen=True)
class Cleaned:
    """A text put right: `at[i]` is the place of character i in the original; `refused` when reading must stop."""

    text: str
    at: tuple[int, ...]
    problems: tuple[Problem, ...]
    refused: bool


def problem(code: str, severity: Severity, message: str, text: str, start: int, end: int, hint: str = "") -> Problem:
    """Return a problem of a genotype; the text is kept only when it is short enough to show."""
    return Problem(code, severity, message, hint, text=text if len(text) <= 300 else "", start=start, end=end)


def clean(text: str) -> Cleaned:
    """Return the text put right, with what was found; never raises."""
    stop = _refusal(text)
    if stop is not None:
        return Cleaned("", (), (stop,), True)
    characters: list[str] = []
    at: list[int] = []
    removed = False
    superscript = False
    for i, char in enumerate(text):
        if char in _REMOVED:
            removed = removed or char != "\ufeff"
            continue
        plain = char.translate(_SAME)
        digit = _SUPERSCRIPT.get(char)
        if digit is not None and not superscript:
            characters.append("[")
            at.append(i)
        if digit is None and superscript:
            characters.append("]")
            at.append(i)
        superscript = digit is not None
        characters.append(digit or plain)
        at.append(i)
    if superscript:
        characters.append("]")
        at.append(len(text) - 1)
    cleaned, places = _rewrite("".join(characters), at)
    problems = _notes(text, cleaned, removed)
    latin = cleaned.translate(_CYRILLIC)
    return Cleaned(latin, tuple(places), tuple(problems), False)


def _rewrite(text: str, at: list[int]) -> tuple[str, list[int]]:
    """Turn tags and carets into brackets, keeping places."""
    for pattern in (_TAGS, _CARET):
        out: list[str] = []
        places: list[int] = []
        last = 0
        for match in pattern.finditer(text):
            group = next(k for k in range(1, (pattern.groups or 1) + 1) if match.group(k) is not None)
            start, end = match.span(group)
            out.append(text[last : match.start()] + "[" + text[start:end] + "]")
            places += at[last : match.start()] + [at[match.start()]] + at[start:end] + [at[match.end() - 1]]
            last = match.end()
        out.append(text[last:])
        places += at[last:]
        text, at = "".join(out), places
    return text, at


def _refusal(text: str) -> Problem | None:
    def refuse(code: str, message: str, start: int, end: int, hint: str) -> Problem:
        return problem(code, Severity.ERROR, message, text, start, end, hint)

    if len(text) > MOST_CHARACTERS:
        return refuse("too-long", f"{len(text)} characters are no genotype", 0, 0, "check the cell")
    for i, char in enumerate(text):
        if char in _DIRECTION or (unicodedata.category(char) == "Cc" and char not in "\t\n\r"):
            return refuse(
                "control-character", "a control character hides here, so what is seen is not what is written",
                i, i + 1, "type the genotype again",
            )  # fmt: skip
    if not text.strip(" \t\n\r\u00a0\ufeff\u200b"):
        return refuse(
            "empty", "nothing is written here; an empty cell is not wild type", 0, len(text), "write + for wild type"
        )
    error = _ERROR_VALUE.search(text)
    if error:
        return refuse(
            "spreadsheet-error", f"{error.group()} is what a spreadsheet left instead of the text", *error.span(),
            "look the genotype up in an older copy of the list",
        )  # fmt: skip
    if _FORMULA.match(text):
        return refuse(
            "formula", "this is a spreadsheet formula, not a genotype", 0, len(text), "format the column as text"
        )
    for pattern, code, was in ((_DATE, "date", "a date"), (_SCIENTIFIC, "number", "a number")):
        found = pattern.search(text)
        if found:
            return refuse(
                code, f"'{found.group()}' looks like a name that the spreadsheet turned into {was}", *found.span(),
                "type the name again in a column formatted as text",
            )  # fmt: skip
    return None


def _notes(text: str, cleaned: str, removed: bool) -> list[Problem]:
    notes = []
    if removed:
        notes.append(problem("invisible", Severity.WARNING, "invisible characters were left out", text, 0, 0))
    foreign = next((i for i, c in enumerate(cleaned) if "\u0400" <= c <= "\u04ff"), None)
    if foreign is not None:
        notes.append(
            problem(
                "look-alike-letters",
                Severity.WARNING,
                "Cyrillic letters were read as the Latin ones they look like",
                text,
                0,
                0,
                "type the symbol again",
            )  # fmt: skip
        )
    if any("\uff00" <= c <= "\uff5e" for c in text):
        notes.append(problem("full-width", Severity.NOTE, "full-width signs were read as ordinary ones", text, 0, 0))
    return notes
