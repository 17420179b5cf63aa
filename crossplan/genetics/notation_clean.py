"""Noise in typed genotypes: what is put right, always with a notice, and what is refused before reading.

Putting right keeps count of the original characters, so that every problem can point at what was typed. Everything
here is one pass over the text, and no longer than `MOST_CHARACTERS` is looked at.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Final

from crossplan.errors import Problem, Severity

#: longest genotype that is read; the longest real ones known to us have some 600 characters
MOST_CHARACTERS: Final = 4000
#: longest text that is kept in a problem
MOST_SHOWN: Final = 300

_BLANKS: Final = dict.fromkeys("\u00a0\u2007\u2009\u202f\u3000\t\v\f\n\r", " ")
_DASHES: Final = dict.fromkeys("\u2010\u2011\u2012\u2013\u2014\u2212\ufe63", "-")
_QUOTES: Final = {"\u2018": "'", "\u2019": "'", "\u201c": '"', "\u201d": '"', "\u00ab": '"', "\u00bb": '"'}
_SLASHES: Final = {"\u2215": "/", "\u2044": "/", "\u037e": ";", "\u2236": ":"}
#: the no-break space of one old character set read as another
_MOJIBAKE: Final = {"\u00ca": " "}
_WIDE: Final = {chr(code + 0xFEE0): chr(code) for code in range(0x21, 0x7F)}
_CYRILLIC: Final = dict(zip("АВЕКМНОРСТХУЅІЈаеорсухѕіј", "ABEKMHOPCTXYSIJaeopcyxsij", strict=True))
_SUPERSCRIPT: Final = dict(zip("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻", "0123456789+-", strict=True))
_REPLACED: Final[tuple[tuple[dict[str, str], str], ...]] = (
    (_BLANKS, "unusual blanks or line breaks"),
    (_DASHES, "long dashes"),
    (_QUOTES, "curly quotation marks"),
    (_SLASHES, "unusual slashes"),
    (_MOJIBAKE, "damaged no-break spaces"),
    (_WIDE, "full-width characters"),
)
_WORD_OF: Final = {char: words for table, words in _REPLACED for char in table}
_PLAIN_OF: Final = {char: plain for table, _ in _REPLACED for char, plain in table.items()}
_DIRECTION: Final = frozenset("\u200e\u200f\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069")

#: Greek letters as publishers' entities write them (`&Dgr;`, `&bgr;`)
_GREEK: Final = dict(
    zip(
        ["agr", "bgr", "ggr", "dgr", "egr", "zgr", "eegr", "thgr", "igr", "kgr", "lgr", "mgr", "ngr", "xgr", "ogr", "pgr", "rgr", "sgr", "tgr", "ugr", "phgr", "khgr", "psgr", "ohgr"],
        "αβγδεζηθικλμνξοπρστυφχψω", strict=True,
    )
)  # fmt: skip

_FORMULA = re.compile(r"\s*(?:[=@]|[+-]\s*\w+\s*[|(]|[+-]\d)")
_ERROR_VALUE = re.compile(r"#(?:NAME\?|REF!|VALUE!|N/A|DIV/0!|NULL!|NUM!|####)")
_MONTH = "(?:Jan|Feb|Mar|Apr|May|Jun|Jul|Aug|Sep|Sept|Oct|Nov|Dec)"
_DATE = re.compile(
    rf"(?<![\w.\-])(?:\d{{1,2}}-{_MONTH}(?:-\d{{2,4}})?|{_MONTH}-\d{{2}}|\d{{1,2}}/\d{{1,2}}/\d{{2,4}}"
    r"|\d{4}-\d{2}-\d{2}(?: \d{2}:\d{2}:\d{2})?)(?![\w.\-])",
    re.IGNORECASE,
)
_SCIENTIFIC = re.compile(r"(?<![\w.\-])\d+(?:\.\d+)?E\+\d+(?![\w.])")
_SECOND_GENOTYPE = re.compile(r"[;/][^\r\n]*[\r\n]+[^\r\n]*[;/]")

_Piece = str | int


@dataclass(frozen=True)
class Cleaned:
    """A text put right: `at[i]` is the place of character i in the original; `refused` when reading must stop."""

    text: str
    at: Sequence[int]
    problems: tuple[Problem, ...]
    refused: bool


def problem(code: str, severity: Severity, message: str, text: str, start: int, end: int, hint: str = "") -> Problem:
    """Return a problem of a genotype; the text is kept only when it is short enough to show."""
    return Problem(code, severity, message, hint, text=text if len(text) <= MOST_SHOWN else "", start=start, end=end)


def clean(text: str) -> Cleaned:
    """Return the text put right, with what was found; never raises."""
    stop = _refusal(text)
    if stop is not None:
        return Cleaned("", (), (stop,), True)
    editor = _Editor(text)
    if not text.isascii() or _BLANK_CONTROL.search(text):
        editor.characters()
    for signal, pattern, pieces, words in _EDITS:
        if signal in editor.text:
            editor.replace(pattern, pieces, words)
    return Cleaned(editor.text, editor.at, editor.problems(), False)


_BLANK_CONTROL = re.compile(r"[\t\v\f\n\r]")


class _Editor:
    """A text under repair, with the place of every character in the original, and what was done."""

    def __init__(self, text: str) -> None:
        self.original = text
        self.text = text
        self.at: Sequence[int] = range(len(text))
        self.done: dict[str, tuple[int, int]] = {}
        self.doubts: list[Problem] = []

    def problems(self) -> tuple[Problem, ...]:
        found = list(self.doubts)
        if self.done:
            start, end = next(iter(self.done.values()))
            found.append(
                problem(
                    "tidied",
                    Severity.NOTE,
                    f"put right before reading: {'; '.join(self.done)}",
                    self.original,
                    start,
                    end,
                )  # fmt: skip
            )
        return tuple(found)

    def characters(self) -> None:
        """Put single characters right: blanks, dashes, full-width and look-alike letters, superscripts."""
        out: list[str] = []
        at: list[int] = []
        raised = False
        for i, char in enumerate(self.original):
            digit = _SUPERSCRIPT.get(char)
            if (digit is not None) != raised:
                raised = not raised
                out.append("[" if raised else "]")
                at.append(i if raised else i - 1)
            if digit is not None:
                self.done.setdefault("superscript digits", (i, i + 1))
                out.append(digit)
                at.append(i)
            elif (plain := self._plain(char, i)) is not None:
                out.append(plain)
                at.append(i)
        if raised:
            out.append("]")
            at.append(len(self.original) - 1)
        self.text = "".join(out)
        self.at = at

    def _plain(self, char: str, i: int) -> str | None:
        """Return the character to read; None to leave it out."""
        if char.isascii() and char >= " ":
            return char
        if char in _PLAIN_OF:
            self.done.setdefault(_WORD_OF[char], (i, i + 1))
            return _PLAIN_OF[char]
        if char in _CYRILLIC:
            self._doubt("look-alike-letters", f"'{char}' is a Cyrillic letter; it is read as the Latin"
                        f" {_CYRILLIC[char]}", i, "type the symbol again")  # fmt: skip
            return _CYRILLIC[char]
        if unicodedata.category(char) == "Cf":
            if i == 0 and char == "\ufeff":
                self.done.setdefault("a byte-order mark", (0, 1))
            else:
                self._doubt("invisible", "an invisible character was left out", i, "type the symbol again")
            return None
        return char

    def _doubt(self, code: str, message: str, i: int, hint: str) -> None:
        if not any(p.code == code for p in self.doubts):
            self.doubts.append(problem(code, Severity.WARNING, message, self.original, i, i + 1, hint))

    def replace(self, pattern: re.Pattern[str], pieces: _Pieces, words: str) -> None:
        """Put `pieces` for every match; a number stands for that group of the match."""
        out: list[str] = []
        at: list[int] = []
        last = 0
        for match in pattern.finditer(self.text):
            chosen = pieces(match) if callable(pieces) else pieces
            if chosen is None:
                continue
            start, end = match.span()
            self.done.setdefault(words, (self.at[start], self.at[end - 1] + 1))
            out.append(self.text[last:start])
            at += self.at[last:start]
            for piece in chosen:
                if isinstance(piece, int):
                    out.append(match[piece])
                    at += self.at[slice(*match.span(piece))]
                else:
                    out.append(piece)
                    at += [self.at[start]] * len(piece)
            last = end
        if last:
            out.append(self.text[last:])
            at += self.at[last:]
            self.text = "".join(out)
            self.at = at


_Pieces = Sequence[_Piece] | Callable[[re.Match[str]], Sequence[_Piece] | None]


def _greek(match: re.Match[str]) -> Sequence[_Piece] | None:
    letter = _GREEK.get(match[1].lower())
    if letter is None:
        return None
    return (letter.upper() if match[1][0].isupper() else letter,)


def _without_blanks(match: re.Match[str]) -> Sequence[_Piece] | None:
    inside = match[0]
    if " " not in inside or any(sign in inside for sign in ";/,"):
        return None
    return (inside.replace(" ", ""),)


def _whole_in_brackets(match: re.Match[str]) -> Sequence[_Piece] | None:
    """Take the brackets off if they enclose the whole text, and it is more than a symbol."""
    inside = match[1]
    if any(sign in inside for sign in "[]") or not any(sign in inside for sign in " ;/"):
        return None
    return (1,)


#: a character without which the pattern cannot match; the pattern; what to put; what it is called
_EDITS: Final[tuple[tuple[str, re.Pattern[str], _Pieces, str], ...]] = (
    ("<", re.compile(r"<(?:sup|up)>(.*?)</(?:sup|up)>", re.IGNORECASE), ("[", 1, "]"), "superscripts"),
    ("<", re.compile(r"<(?:sub|down)>(.*?)</(?:sub|down)>", re.IGNORECASE), ("[[", 1, "]]"), "subscripts"),
    ("<", re.compile(r"</?(?:i|b|em|strong|span)>", re.IGNORECASE), (), "type-setting marks"),
    ("&", re.compile(r"&([A-Za-z]{2,5});"), _greek, "Greek letters"),
    ("^", re.compile(r"\^\{([^{}]*)\}"), ("[", 1, "]"), "superscripts"),
    ("^", re.compile(r"\^([\w+*-]+)"), ("[", 1, "]"), "superscripts"),
    ('"', re.compile(r'^\s*"([^"]*)"\s*$'), (1,), "quotation marks"),
    ("'", re.compile(r"^\s*'([^']*)'\s*$"), (1,), "quotation marks"),
    ("[", re.compile(r"^\s*\[(.*)\]\s*$", re.DOTALL), _whole_in_brackets, "brackets round the whole genotype"),
    ("\\", re.compile(r"\\[nrt](?![A-Za-z])|^\s*\\[nrt]"), (" ",), "line breaks written out"),
    (
        "(",
        re.compile(r"^\s*\(((?:[^()]|\([^()]*\))*[;/](?:[^()]|\([^()]*\))*)\)\s*$"),
        (1,),
        "brackets round the whole genotype",
    ),
    ("e.g.", re.compile(r"^\s*e\.g\.,?\s*"), (), "a label in front"),
    (": ", re.compile(r"^\s*[A-Za-z0-9#][\w#. -]{1,40}: +(?=\S)"), (), "a label in front"),
    (" and", re.compile(r"\s+and\s*$"), (), "a word at the end"),
    ("[", re.compile(r"(?<=\S)\[[^\[\]]*\]"), _without_blanks, "blanks inside brackets"),
    (" ", re.compile(r"(?<=[(\[{]) +| +(?=[)\]}])"), (), "blanks inside brackets"),
    (" ", re.compile(r"(?<=[\w\]+]) += *(?=[\w(])|(?<=[\w\]+])= +(?=[\w(])"), ("=",), "blanks round ="),
    (" ", re.compile(r"(?<=[\w)\]]) +>+ *(?=[\w(])|(?<=[\w)\]])>+ +(?=[\w(])"), (">",), "blanks round >"),
    (" {", re.compile(r"\b(P|PBac|Mi|M|H|TI) +\{"), (1, "{"), "a blank before {"),
    ("FlpStop", re.compile(r"(FlpStop) +(N?D)\b"), (1, "-", 2), "a blank inside a name"),
)


def _refusal(text: str) -> Problem | None:
    """Return why the text is not looked at any further; None when it is read."""

    def refuse(code: str, message: str, start: int, end: int, hint: str) -> Problem:
        return problem(code, Severity.ERROR, message, text, start, end, hint)

    if len(text) > MOST_CHARACTERS:
        return refuse(
            "too-long", f"{len(text)} characters are no genotype (the longest that is read has {MOST_CHARACTERS})",
            0, 0, "look at the cell",
        )  # fmt: skip
    hidden = _hidden(text)
    if hidden is not None:
        return refuse(
            "control-character", "a control character hides here, so what is seen is not what is written",
            hidden, hidden + 1, "type the genotype again",
        )  # fmt: skip
    if not any(c.isprintable() and not c.isspace() for c in text):
        return refuse(
            "empty", "nothing is written here; an empty cell is not wild type", 0, len(text), "write + for wild type"
        )
    error = _ERROR_VALUE.search(text)
    if error:
        return refuse(
            "spreadsheet-error", f"{error.group()} is what a spreadsheet left in place of the text", *error.span(),
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
    two = _SECOND_GENOTYPE.search(text.strip())
    if two:
        return refuse(
            "two-genotypes", "two genotypes stand in one cell, divided by a line break", 0, len(text),
            "write one row for each genotype",
        )  # fmt: skip
    return None


def _hidden(text: str) -> int | None:
    """Return the place of the first control or direction character; line breaks and tabs are blanks."""
    if text.isprintable():
        return None
    for i, char in enumerate(text):
        if char in _DIRECTION or (unicodedata.category(char) in ("Cc", "Cs") and char not in "\t\n\r\v\f"):
            return i
    return None
