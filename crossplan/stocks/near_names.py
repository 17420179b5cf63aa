"""Names that a tired eye takes for each other.

Two kinds: names that are equal but for capitals, blanks and hyphens, or but for O and 0, I, l and 1; and names that differ by one letter (put in, left out, changed, or two swapped) inside a word of at least five letters.
Names that differ in a number are numbered, not mistyped, and are left alone; so are short words (our choice).
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator

FEWEST_LETTERS = 5
_WORD = re.compile(r"[^\W\d_]+|\d+")
#: between two digits a stroke is part of the number: K1-1 is not K11
_STROKES = re.compile(r"(?<!\d)[\s_.-]+|[\s_.-]+(?!\d)")
_LOOK_ALIKE = str.maketrans("OIl", "011")


def folded(name: str) -> tuple[str, str]:
    """Return the name as a tired eye sees it: without capitals, and with letters that look like digits as digits."""
    plain = _STROKES.sub("", name)
    return plain.lower(), plain.translate(_LOOK_ALIKE)


def near_pairs(names: Iterable[str]) -> Iterator[tuple[str, str]]:
    """Yield pairs of names that are easily taken for each other, each pair once, in the order of the names."""
    given = list(dict.fromkeys(names))
    found: dict[tuple[str, str], None] = {}
    first: dict[tuple[int, str], str] = {}
    for name in given:
        for key in enumerate(folded(name)):
            earlier = first.setdefault(key, name)
            if earlier != name:
                found[earlier, name] = None
    for pair in _one_letter_apart(given):
        found.setdefault(pair)
    yield from found


def _one_letter_apart(names: list[str]) -> Iterator[tuple[str, str]]:
    """Yield names whose words agree but for one, which differs by one letter.

    Each long word of a name is left out in turn and replaced by its variants with one letter less; two names meet in a
    variant when they are within one letter of each other.
    """
    meeting: dict[tuple[str, ...], list[tuple[str, str]]] = {}
    for name in names:
        words = _WORD.findall(name.lower())
        for i, word in enumerate(words):
            if len(word) < FEWEST_LETTERS or word.isdigit():
                continue
            rest = (*words[:i], str(i), *words[i + 1 :])
            for variant in dict.fromkeys((word, *(word[:k] + word[k + 1 :] for k in range(len(word))))):
                meeting.setdefault((*rest, variant), []).append((name, word))
    for group in meeting.values():
        for k, (one, word) in enumerate(group):
            for other, second in group[k + 1 :]:
                if word != second and _one_step(word, second):
                    yield one, other


def _one_step(one: str, other: str) -> bool:
    """Return whether one letter put in, left out or changed, or two neighbours swapped, makes `other` of `one`."""
    if len(one) > len(other):
        one, other = other, one
    if len(other) - len(one) > 1:
        return False
    at = next((i for i, (a, b) in enumerate(zip(one, other, strict=False)) if a != b), len(one))
    if len(one) < len(other):
        return one[at:] == other[at + 1 :]
    swapped = one[:at] + one[at + 1 : at + 2] + one[at : at + 1] + one[at + 2 :]
    return one[at + 1 :] == other[at + 1 :] or swapped == other
