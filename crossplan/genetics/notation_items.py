"""From the items of a homologue to symbols: what belongs to the symbol before it, and what is only a remark.

`AD-K12 in attP40`, `AD-K12 (attP40)` and `AD-K12 attP40` become `AD-K12@attP40`; `ppk-GAL4 (II)` and `ppk-GAL4 II`
become `ppk-GAL4(II)`. A parenthesis that stands by itself is, in this order of test: a landing site, a chromosome, a
balancer that only some flies have, an alternative, a remark (common practice, no source).
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Final

from crossplan.errors import Problem, Severity
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.notation_clean import problem
from crossplan.genetics.notation_split import Item

LABEL = re.compile(r"(?:chr(?:omosome)?\.? ?)?(X|Y|[1-5](?:L|R|LR)?|I|II|III|IV|V)", re.IGNORECASE)
_ROMAN: Final = frozenset(("I", "II", "III", "IV", "V"))
_NAMELESS_ABERRATION = re.compile(r"(?:Df|Dp|In|T|Tp|R|C|Ab)\([^()]*\)")
#: one pair of brackets round all of it; others may stand inside, one deep
_ROUND = re.compile(r"\((?:[^()]|\([^()]*\))*\)")
_SQUARE = re.compile(r"\[(?:[^\[\]]|\[[^\[\]]*\])*\]")
_NULL_ALLELE = re.compile(r"[a-z]{1,3}-")
_ALLELE_OF = re.compile(r"[^\[\]{}]+\[([^\[\]]+)\]")
_CHOICES: Final = frozenset(("or", "and", "&", "oder", "and/or"))
_CROSSES: Final = frozenset(("x", "\u00d7"))


@dataclass
class Symbols:
    """The symbols of one homologue; `or_y`: it says `or Y`; `floating`: a balancer that only some flies have."""

    items: list[Item] = field(default_factory=list)
    problems: list[Problem] = field(default_factory=list)
    or_y: bool = False
    floating: tuple[Item, ...] = ()


def join_items(items: Sequence[Item], catalogue: Catalogue, text: str) -> Symbols:
    """Return the symbols that the items of one homologue make up."""
    return _Joiner(items, catalogue, text).run()


class _Joiner:
    def __init__(self, items: Sequence[Item], catalogue: Catalogue, text: str) -> None:
        self.rest = items
        self.catalogue = catalogue
        self.text = text
        self.out = Symbols()

    def run(self) -> Symbols:
        i = 0
        while i < len(self.rest):
            i += self._take(i)
        return self.out

    def _take(self, i: int) -> int:
        """Deal with item i; return how many items that used up."""
        item = self.rest[i]
        text = item.text
        after = self.rest[i + 1] if i + 1 < len(self.rest) else None
        before = self.out.items[-1] if self.out.items else None
        if text in _CHOICES or text in _CROSSES or (text == "X" and before and after):
            return self._choice_or_cross(item, before, after)
        if before is None:
            self._first(item)
        elif text in ("in", "at", "@") and after is not None:
            self._extend(before, f"@{_bare(after.text)}", after)
            return 2
        elif text[0] == "@" and len(text) > 1 and "@" not in before.text:
            self._extend(before, text, item)
        elif _ROUND.fullmatch(text):
            self._parenthesis(item, before)
        elif _SQUARE.fullmatch(text):
            self._square(item, before)
        elif text in _ROMAN or text == "X":
            self._extend(before, f"({text})", item)
        elif not self._belongs(item, before):
            self.out.items.append(item)
        return 1

    def _first(self, item: Item) -> None:
        text = item.text
        if _ROUND.fullmatch(text):
            self._parenthesis(item, None)
        elif text.endswith("(Y)") and len(text) > len("(Y)"):
            self.out.or_y = True
            self.out.items.append(Item(text[: -len("(Y)")], item.start, item.end - len("(Y)")))
        else:
            self.out.items.append(item)

    def _choice_or_cross(self, item: Item, before: Item | None, after: Item | None) -> int:
        if item.text == "or" and after is not None and after.text == "Y":
            self.out.or_y = True
            return 2
        if item.text in _CHOICES:
            self._error("choice", f"'{item.text}' leaves open which genotype is meant", item,
                        "write one row for each genotype")  # fmt: skip
        elif before is not None or after is not None:
            self._error("cross", f"'{item.text}' makes this a cross of two genotypes", item,
                        "write the two genotypes by themselves")  # fmt: skip
        else:
            self.out.items.append(item)
        return 1

    def _belongs(self, item: Item, before: Item) -> bool:
        """Join the item to the symbol before it if it is a part of that."""
        if "," in self.text[before.end : item.start]:
            return False
        if self._is_site_of(before, item):
            self._extend(before, f"@{item.text}", item)
        elif before.text[-1] == "-" and not _NULL_ALLELE.fullmatch(before.text) and item.text[0].isalnum():
            self._extend(before, item.text, item)
            self._note("blank-in-name", f"{self.out.items[-1].text} is read as one name", self.out.items[-1])
        elif _NAMELESS_ABERRATION.fullmatch(before.text) and item.text[0].isalnum():
            self._extend(before, item.text, item)
        elif self._second_gene(before, item):
            self._note("two-genes", f"{item.text} is read as the same insertion, which hits two genes", item)
        else:
            return False
        return True

    def _second_gene(self, before: Item, item: Item) -> bool:
        """`Mi{ET1}Pi3K68D[MB08286] CG14131[MB08286]` is one insertion with an allele name in each gene."""
        if "}" not in before.text:
            return False
        first = _ALLELE_OF.fullmatch(before.text.rpartition("}")[2])
        second = _ALLELE_OF.fullmatch(item.text)
        return first is not None and second is not None and first[1] == second[1]

    def _extend(self, before: Item, more: str, item: Item) -> None:
        self.out.items[-1] = Item(before.text + more, before.start, item.end)

    def _is_site_of(self, before: Item, item: Item) -> bool:
        if self.catalogue.site(item.text) is None or "@" in before.text or before.text == "+":
            return False
        if "}" in before.text:
            return before.text.endswith("}")
        return self.catalogue.balancer(before.text) is None and self.catalogue.marker(before.text) is None

    def _parenthesis(self, item: Item, before: Item | None) -> None:
        inner = item.text[1:-1].strip()
        if before is not None and self.catalogue.site(inner) is not None and "@" not in before.text:
            self._extend(before, f"@{inner}", item)
        elif before is not None and LABEL.fullmatch(inner) and inner != "Y" and before.text != "+":
            self._extend(before, f"({inner})", item)
        elif inner == "Y":
            self.out.or_y = True
        elif self._starts_with_balancer(inner):
            self._floating(item, before)
        elif inner.lower().startswith("or "):
            self._problem("choice", Severity.WARNING, f"'{item.text}' is an alternative; what stands before it is read", item,
                          "write one row for each genotype")  # fmt: skip
        else:
            self._note("remark", f"'{item.text}' is taken for a remark", item)

    def _starts_with_balancer(self, inner: str) -> bool:
        words = inner.lstrip("/ ").replace(",", " ").split()
        return bool(words) and self.catalogue.balancer(words[0]) is not None

    def _floating(self, item: Item, before: Item | None) -> None:
        """Take `(/CyO)` or `(TM6B, Tb)` for the other homologue of some of the flies."""
        begin = item.start + len(item.text) - len(item.text[1:].lstrip("/ "))
        words = [
            Item(match.group(), begin + match.start(), begin + match.end())
            for match in re.finditer(r"[^ ,]+", self.text[begin : item.end - 1])
        ]
        self._problem("floating-balancer", Severity.WARNING, f"{words[0].text} in parentheses is read as present in"
                      " these flies; others of the stock lack it", item,
                      "write the genotype of the flies that you use")  # fmt: skip
        if before is None:
            self.out.items += words
        else:
            self.out.floating = tuple(words)

    def _square(self, item: Item, before: Item) -> None:
        inner = item.text[1:-1].strip()
        if self.catalogue.site(inner) is not None and "@" not in before.text:
            self._extend(before, f"@{inner}", item)
        elif before.text == "+":
            self._note("background", f"{item.text} names the wild-type background; it is left out", item)
        else:
            self._note("remark", f"'{item.text}' is taken for a remark", item)

    def _note(self, code: str, message: str, item: Item) -> None:
        self._problem(code, Severity.NOTE, message, item)

    def _error(self, code: str, message: str, item: Item, hint: str) -> None:
        self._problem(code, Severity.ERROR, message, item, hint)

    def _problem(self, code: str, severity: Severity, message: str, item: Item, hint: str = "") -> None:
        self.out.problems.append(problem(code, severity, message, self.text, item.start, item.end, hint))


def _bare(text: str) -> str:
    """Return a text without one pair of brackets round all of it."""
    return text[1:-1] if _ROUND.fullmatch(text) or _SQUARE.fullmatch(text) else text
