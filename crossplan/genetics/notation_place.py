"""Which chromosome a field of a genotype is.

The order of evidence: a symbol that names its chromosome (`Df(2L)...`, `l(3)...`), a balancer, a landing site, a stated
label `(II)`, a marker or another mapped gene; then what other rows of the same stock list say of the symbol; then the
number or the band in the name of an insertion, which is only a hint; and last the place between semicolons. The place
counts only where the genotype is written in places: three or four fields, or an empty or `+` field. In the style of
stock centres an unwritten chromosome leaves no empty field, so there the place says nothing
(`w[1118]; P{...}attP2` is X and 3). Two pieces of strong evidence that disagree are an error, not a guess.

Where nothing else speaks, a field before one of chromosome 2 can only be the X, and a field after one of chromosome 3
only the 4th; that is stated as an assumption. A field of which nothing says the chromosome stays open, with the question.
"""

from __future__ import annotations

import dataclasses
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Final

from crossplan.errors import Problem, Severity
from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.element import Kind
from crossplan.genetics.fly import Homologue
from crossplan.genetics.notation_clean import problem
from crossplan.genetics.notation_split import Field
from crossplan.genetics.notation_word import Rank, Word

_ROMAN: Final = {"X": "I", "2": "II", "3": "III", "4": "IV"}
_FOURTH: Final = 4


@dataclass(frozen=True, eq=False)
class Content:
    """What one homologue holds, wherever it stands: its words, in the order of writing; `or_y`: it says `or Y`.

    Lists repeat the same homologues in row after row, so what follows from the words is worked out once: `homologues` keeps
    those that were made of it, by chromosome.
    """

    words: tuple[Word, ...]
    or_y: bool = False
    homologues: dict[str, Homologue] = dataclasses.field(default_factory=dict)

    @cached_property
    def has_y(self) -> bool:
        return any(w.kind is Kind.Y for w in self.words)

    @cached_property
    def is_wild_type(self) -> bool:
        return all(w.element is None for w in self.words)

    @cached_property
    def evidence(self) -> Mapping[Rank, Mapping[str, str]]:
        """Return for each rank the chromosomes that the words speak for, and what says so.

        Markers on a balancer do not count: `CyO` may carry Tb, which lies on chromosome 3 elsewhere.
        """
        balanced = any(w.kind is Kind.BALANCER for w in self.words)
        found: dict[Rank, dict[str, str]] = {rank: {} for rank in Rank}
        for word in self.words:
            if balanced and word.kind not in (Kind.BALANCER, Kind.ABERRATION) and not _sited(word):
                continue
            for one in word.evidence:
                found[one.rank].setdefault(one.chromosome, one.because)
        return found


@dataclass(frozen=True, slots=True)
class ReadHalf:
    """One homologue as it was read, and where it stands."""

    content: Content
    start: int
    end: int

    @property
    def words(self) -> tuple[Word, ...]:
        return self.content.words


@dataclass(frozen=True)
class ReadField:
    """What stands between two semicolons, read; `index` is its place, from 0."""

    field: Field
    halves: tuple[ReadHalf, ...]
    index: int

    @property
    def is_plus(self) -> bool:
        return all(h.content.is_wild_type for h in self.halves)

    @property
    def has_y(self) -> bool:
        return any(h.content.has_y or h.content.or_y for h in self.halves)

    def evidence(self, rank: Rank) -> Mapping[str, str]:
        """Return the chromosomes that the words speak for with this rank, and what says so."""
        if len(self.halves) == 1:
            return self.halves[0].content.evidence[rank]
        found: dict[str, str] = {}
        for half in self.halves:
            for chromosome, because in half.content.evidence[rank].items():
                found.setdefault(chromosome, because)
        return found

    def symbols(self) -> str:
        """Return the field as written, shortened for a message."""
        return " / ".join(
            " ".join(w.element.symbol for w in h.words if w.element is not None) or "+" for h in self.halves
        )


def _sited(word: Word) -> bool:
    return word.element is not None and bool(word.element.site)


class Placer:
    """Finds the chromosome of every field of one genotype."""

    def __init__(self, fields: Sequence[ReadField], text: str) -> None:
        self.fields = _without_empty_end(fields)
        self.written = len(fields)
        self.text = text
        self.problems: list[Problem] = []
        #: the chromosome of each field; empty where nothing says it
        self.names: list[str] = [""] * len(self.fields)
        self.in_places = len(fields) >= 3 or (len(fields) > 1 and any(f.is_plus for f in fields))

    def place(self) -> Mapping[str, ReadField] | None:
        """Return the fields by chromosome; None where that is an error, or where the chromosome of a field stays open.

        An open field leaves no error in `problems`; `names` says which fields are known.
        """
        if not self._counts_fit():
            return None
        spoken = [self._spoken(f) for f in self.fields]
        if self._failed():
            return None
        names = self._by_place(spoken) if self.in_places else self._by_evidence(spoken)
        if names is None or self._failed():
            return None
        return dict(zip(names, self.fields, strict=True))

    def _failed(self) -> bool:
        return any(p.severity is Severity.ERROR for p in self.problems)

    def _say(self, code: str, severity: Severity, message: str, where: ReadField, hint: str = "") -> None:
        self.problems.append(problem(code, severity, message, self.text, where.field.start, where.field.end, hint))

    def _error(self, code: str, message: str, where: ReadField, hint: str) -> None:
        self._say(code, Severity.ERROR, message, where, hint)

    # -- does it fit a fly ---------------------------------------------------------------------------------------

    def _counts_fit(self) -> bool:
        if not self.fields:
            self.problems.append(
                problem(
                    "empty",
                    Severity.ERROR,
                    "nothing but semicolons is written here",
                    self.text,
                    0,
                    len(self.text),
                    "write + for a wild-type chromosome",
                )  # fmt: skip
            )
        elif len(self.fields) > len(PAIRS):
            self._error("five-fields", f"{len(self.fields)} fields are written; the fly has four pairs (X, 2, 3, 4)",
                        self.fields[len(PAIRS)], "take one semicolon out")  # fmt: skip
        for field in self.fields:
            self._check_halves(field)
        return not self._failed()

    def _check_halves(self, field: ReadField) -> None:
        attached = any(w.element is not None and w.element.traits.compound for h in field.halves for w in h.words)
        if len(field.halves) > (3 if attached else 2):
            self._error("three-homologues", f"{len(field.halves)} homologues of one chromosome; a fly has two",
                        field, "write one row for each genotype, or a semicolon in place of a slash")  # fmt: skip
        if field.index > 0 and field.has_y:
            self._error("y-on-autosome", f"a Y stands beside {field.symbols()} in field {field.index + 1}; it is the"
                        " partner of the X", field, "write w/Y; ... for a male")  # fmt: skip

    def _spoken(self, field: ReadField) -> str:
        """Return the chromosome for which there is strong evidence in the field; empty when there is none."""
        strong = field.evidence(Rank.STRONG)
        if len(strong) > 1:
            words = ", but ".join(f"{because} is on chromosome {name}" for name, because in strong.items())
            self._error("chromosomes-disagree", f"these cannot be homologues: {words}", field,
                        "check which of them is on this chromosome")  # fmt: skip
            return ""
        return next(iter(strong), "")

    # -- written in places ---------------------------------------------------------------------------------------

    def _by_place(self, spoken: Sequence[str]) -> list[str] | None:
        for field, name in zip(self.fields, spoken, strict=True):
            place = PAIRS[field.index]
            if name and name != place:
                because = field.evidence(Rank.STRONG)[name]
                self._error("wrong-place", f"{because} is on chromosome {name}, but stands in the field of chromosome"
                            f" {place}", field, self._shifted(spoken))  # fmt: skip
            elif not name and not field.is_plus:
                self._compare_weak(field, place)
        self._fourth(spoken)
        return [PAIRS[f.index] for f in self.fields]

    def _shifted(self, spoken: Sequence[str]) -> str:
        steps = {PAIRS.index(n) - f.index for f, n in zip(self.fields, spoken, strict=True) if n}
        if len(steps) == 1 and steps != {0}:
            return "all fields seem to be shifted: count the semicolons, and write + for a wild-type chromosome"
        return "count the semicolons, and write + for a wild-type chromosome"

    def _compare_weak(self, field: ReadField, place: str) -> None:
        for name, because in field.evidence(Rank.OTHER_ROWS).items():
            if name != place:
                self._say("other-rows", Severity.WARNING, f"{because} is on chromosome {name}; here it stands in the"
                          f" field of chromosome {place}, which is what counts", field,
                          "count the semicolons, or give the two insertions different names")  # fmt: skip
        for name, because in field.evidence(Rank.HINT).items():
            if name != place:
                self._say("number", Severity.NOTE, f"{because} hints at chromosome {name}; its place says {place},"
                          " which is what counts", field)  # fmt: skip

    def _fourth(self, spoken: Sequence[str]) -> None:
        """Doubt four fields with an empty one, where nothing says that the last is the tiny fourth chromosome."""
        if len(self.fields) < _FOURTH or spoken[-1] or self.fields[-1].is_plus:
            return
        empty = [f for f in self.fields if f.field.is_empty]
        if empty and not self.fields[2].is_plus:
            self._error("one-too-many", f"{self.fields[-1].symbols()} would be on chromosome 4; perhaps there is one"
                        " semicolon too many", self.fields[-1],
                        "take one out, or write + for each wild-type chromosome")  # fmt: skip
        else:
            self._say("fourth", Severity.NOTE, f"{self.fields[-1].symbols()} is read as being on chromosome 4",
                      self.fields[-1])  # fmt: skip

    # -- by evidence ---------------------------------------------------------------------------------------------

    def _by_evidence(self, spoken: Sequence[str]) -> list[str] | None:
        names = self.names = [n or self._weakly(f) for f, n in zip(self.fields, spoken, strict=True)]
        if len(names) == 2:
            if self._one_homologue(names):
                return names[:1]
            self._order(names)
            if self._failed():
                return None
            self._fill(names)
        if all(names):
            return names
        for field, name in zip(self.fields, names, strict=True):
            if not name:
                self._ask(field, names)
        return None

    def _weakly(self, field: ReadField) -> str:
        """Return the chromosome that other rows or the name of an insertion hint at."""
        if field.has_y:
            return "X"
        for rank in (Rank.OTHER_ROWS, Rank.HINT):
            found = field.evidence(rank)
            if len(found) == 1:
                name, because = next(iter(found.items()))
                if not self._possible(field, name):
                    continue
                self._say("assumed-chromosome", Severity.WARNING, f"{field.symbols()} is taken to be on chromosome {name}, by"
                          f" {because}", field, f"write ({_ROMAN[name]}) behind it, or all fields")  # fmt: skip
                return name
        return ""

    def _possible(self, field: ReadField, name: str) -> bool:
        """Return whether the field can be that chromosome, by the strong evidence of the others."""
        for other in self.fields:
            strong = other.evidence(Rank.STRONG)
            if other is not field and strong:
                theirs = PAIRS.index(next(iter(strong)))
                ours = PAIRS.index(name)
                if theirs == ours or (theirs < ours) != (other.index < field.index):
                    return False
        return True

    def _order(self, names: Sequence[str]) -> None:
        first, second = names
        if first and first == second:
            one, two = (next(iter(f.evidence(Rank.STRONG).values()), f.symbols()) for f in self.fields)
            self._error("twice", f"{one} and {two} are both on chromosome {first}, but a semicolon divides them",
                        self.fields[1], "homologues are divided by a slash, symbols of one homologue by a comma")  # fmt: skip
        elif first and second and PAIRS.index(first) > PAIRS.index(second):
            self._error("wrong-order", f"a field of chromosome {first} stands before one of chromosome {second}",
                        self.fields[0], "write the chromosomes in the order X; 2; 3; 4")  # fmt: skip

    def _one_homologue(self, names: Sequence[str]) -> bool:
        """Read two insertions at landing sites of one chromosome, divided by a semicolon, as one homologue.

        Tables of split drivers join the two halves so, whatever chromosome they are on (common practice, no source).
        """
        first, second = self.fields
        if names[0] != names[1] or not names[0] or len(first.halves) + len(second.halves) > 2:
            return False
        words = (*first.halves[0].words, *second.halves[0].words)
        sites = [w.element.site for w in words if w.element is not None]
        if not all(sites) or len(set(sites)) < len(sites) or len(sites) != len(words):
            return False
        self._say("one-homologue", Severity.WARNING, f"the sites {' and '.join(sites)} are both on chromosome {names[0]};"
                  " the insertions are read as standing on one homologue", second,
                  "write a comma between them, or a slash if they stand on different homologues")  # fmt: skip
        half = ReadHalf(Content(words), first.halves[0].start, second.halves[0].end)
        self.fields = [ReadField(first.field, (half,), 0)]
        return True

    def _fill(self, names: list[str]) -> None:
        """Name the field for which one chromosome only is left."""
        if not names[0] and names[1] == "2":
            names[0] = "X"
            self._say("assumed-place", Severity.WARNING, f"{self.fields[0].symbols()} stands before chromosome 2 and is"
                      " taken to be on the X", self.fields[0], "write (X) behind it, or all fields")  # fmt: skip
        if not names[1] and names[0] == "3":
            names[1] = "4"
            self._say("assumed-place", Severity.WARNING, f"{self.fields[1].symbols()} stands after chromosome 3 and is"
                      " taken to be on chromosome 4", self.fields[1], "write all fields")  # fmt: skip

    def _ask(self, field: ReadField, names: Sequence[str]) -> None:
        """Say that the chromosome of a field is open, and how to write each possibility."""
        before = [PAIRS.index(n) for n in names[: field.index] if n]
        after = [PAIRS.index(n) for n in names[field.index + 1 :] if n]
        low = max(before, default=-1) + 1 + (field.index if not before else 0)
        open_to = [n for n in PAIRS[low : min(after, default=3)] if n != "4"] or ["4"]
        written = self.text[field.field.start : field.field.end].strip()
        ways = "; ".join(f"for {n} write {self._way(field, n, names)}" for n in open_to)
        self._say("which-chromosome", Severity.WARNING, f"nothing says which chromosome {field.symbols()} is on", field,
                  ways if len(written) <= 60 else "write all fields, with + for wild type, or a label such as (II)")  # fmt: skip

    def _way(self, field: ReadField, chromosome: str, names: Sequence[str]) -> str:
        """Return the genotype written so that the field is surely that chromosome."""
        places = ["+"] * _FOURTH
        for one, name in zip(self.fields, names, strict=True):
            where = chromosome if one is field else name
            written = self.text[one.field.start : one.field.end].strip()
            if where:
                places[PAIRS.index(where)] = written
            elif one.index == 0:
                places[0] = "..."
        return f"'{'; '.join(places if places[-1] != '+' else places[:-1])}'"


def _without_empty_end(fields: Sequence[ReadField]) -> list[ReadField]:
    kept = list(fields)
    while kept and kept[-1].field.is_empty:
        kept.pop()
    return kept
