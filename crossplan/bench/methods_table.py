"""The genotypes of a screen for the methods section of a paper: every target and control, in full standard notation
where the stock list has it, with the stocks that they are made from and where those came from.

As CSV (brackets for superscripts, as FlyBase writes them in plain text), Markdown and LaTeX (true superscripts).
"""

from __future__ import annotations

import csv
import io
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, field

from crossplan.bench.scheme_drawing import crosses_of
from crossplan.bench.words import count, listed, pairs_of, raised_runs, warm
from crossplan.errors import InputError
from crossplan.plan.model import FlyRecord, ParentRecord, Plan, StepRecord, TargetRecord

HEAD = (
    "name",
    "role",
    "genotype",
    "sex",
    "female parent",
    "male parent",
    "generations",
    "reared at",
    "stocks",
    "needs",
)
#: Columns that hold genotypes or names of elements; only there a bracket is a superscript.
GENOTYPES = frozenset({"genotype"})
FORMATS = ("csv", "md", "tex")


@dataclass(frozen=True, slots=True)
class Notation:
    """How the stock list writes what the plan names in short: symbol to standard notation, which symbols are
    balancers, and where each stock came from. Without a list the short forms of the plan are used."""

    standard: Mapping[str, str] = field(default_factory=dict)
    balancers: frozenset[str] = frozenset()
    sources: Mapping[str, str] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Row:
    """One genotype, as the table has it; the fields are those of `HEAD`."""

    name: str
    role: str
    genotype: str
    sex: str
    mother: str
    father: str
    generations: str
    reared_at: str
    stocks: str
    needs: str

    def cells(self) -> tuple[str, ...]:
        """Return the cells in the order of `HEAD`."""
        return (self.name, self.role, self.genotype, self.sex, self.mother, self.father, self.generations,
                self.reared_at, self.stocks, self.needs)  # fmt: skip


def methods_rows(plan: Plan, notation: Notation | None = None) -> list[Row]:
    """Return a row for every target of the plan that can be made, experimental ones before their controls."""
    known = notation or Notation()
    made = [t for t in plan.targets if t.status != "impossible"]
    experimental = [t for t in made if not t.control_of]
    return [_row(plan, t, known) for t in (*experimental, *(t for t in made if t.control_of))]


def written_short(plan: Plan, notation: Notation) -> list[str]:
    """Return the insertions of the table for which the stock list has no standard notation: to be looked up by hand."""
    flies = [f for t in plan.targets for s in crosses_of(plan, t)[-1:] for f in (s.keep.fly, *s.keep.members)]
    symbols = {symbol for fly in flies for _, pair in pairs_of(fly) for homologue in pair for symbol in homologue}
    return sorted(s for s in symbols if "@" in s and notation.standard.get(s, s) == s)


def methods_table(plan: Plan, form: str, notation: Notation | None = None) -> str:
    """Return the table as `csv`, `md` or `tex`.

    Raises:
        InputError: there is no such form, or the plan makes nothing.
    """
    rows = methods_rows(plan, notation)
    if form not in FORMATS:
        raise InputError(
            f"there is no methods table as {form!r}", f"Use a file name that ends with {listed(FORMATS, 'or')}."
        )
    if not rows:
        raise InputError("there are no genotypes to list", "No target of the plan can be made.")
    return {"csv": _csv, "md": _markdown, "tex": _latex}[form](rows)


def _row(plan: Plan, target: TargetRecord, notation: Notation) -> Row:
    crosses = crosses_of(plan, target)
    last = crosses[-1] if crosses else None
    return Row(
        name=target.target,
        role=f"control of {target.control_of}: {target.control_kind}" if target.control_of else "experimental",
        genotype=_genotypes(last, notation) if last else ", ".join(target.components),
        sex=target.sex,
        mother=_parent(last.mother, crosses) if last else "",
        father=_parent(last.father, crosses) if last else "",
        generations=count(target.generations, "generation") if target.generations else "",
        reared_at=listed(dict.fromkeys(warm(step.temperature_C) for step in crosses)),
        stocks=_stocks(crosses, notation),
        needs="; ".join(target.needs),
    )


def _genotypes(step: StepRecord, notation: Notation) -> str:
    """Return every genotype of the kept class: what is kept may be of several that serve equally."""
    flies = step.keep.members or [step.keep.fly]
    return " or ".join(dict.fromkeys(standard_text(fly, notation) for fly in (step.keep.fly, *flies)))


def standard_text(fly: FlyRecord, notation: Notation) -> str:
    """Return a genotype in the notation of the stock list, a pair of equal homologues once, the 4th if it is marked."""
    if not notation.standard:
        return fly.genotype
    fields = []
    for _, pair in pairs_of(fly):
        homologues = [_homologue(elements, notation) for elements in pair]
        fields.append(homologues[0] if len(set(homologues)) == 1 else "/".join(homologues))
    return "; ".join(fields[:-1] if fields[-1] == "+" else fields)


def _homologue(elements: Sequence[str], notation: Notation) -> str:
    words = [notation.standard.get(symbol) or symbol for symbol in elements]
    if elements and elements[0] in notation.balancers and len(words) > 1:
        return f"{words[0]}, {' '.join(words[1:])}"
    return " ".join(words) or "+"


def _parent(parent: ParentRecord, crosses: Iterable[StepRecord]) -> str:
    """Return the stock, or for a cross its own parents in brackets."""
    if not parent.step:
        return parent.stock or ""
    step = next((s for s in crosses if s.id == parent.step), None)
    return f"({_parent(step.mother, crosses)} x {_parent(step.father, crosses)})" if step else parent.step


def _stocks(crosses: Iterable[StepRecord], notation: Notation) -> str:
    names = dict.fromkeys(p.stock for s in crosses for p in (s.mother, s.father) if p.stock)
    return "; ".join(f"{n} ({source})" if (source := notation.sources.get(n, "")) else n for n in names)


# --- forms --------------------------------------------------------------------------------------------------


def _csv(rows: Sequence[Row]) -> str:
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(HEAD)
    writer.writerows(row.cells() for row in rows)
    return out.getvalue()


def _markdown(rows: Sequence[Row]) -> str:
    def plain(text: str) -> str:
        for mark in "\\`*_|<>":
            text = text.replace(mark, f"\\{mark}")
        return " ".join(text.split())

    lines = [f"| {' | '.join(HEAD)} |", f"|{'---|' * len(HEAD)}"]
    lines += [f"| {' | '.join(_cells(row, plain, ('*', '*'), ('<sup>', '</sup>')))} |" for row in rows]
    return "\n".join(lines) + "\n"


_TEX = {
    "\\": r"\textbackslash{}", "{": r"\{", "}": r"\}", "$": r"\$", "&": r"\&", "#": r"\#", "%": r"\%", "_": r"\_",
    "^": r"\textasciicircum{}", "~": r"\textasciitilde{}", "<": r"\textless{}", ">": r"\textgreater{}",
    "°": r"\textdegree{}", "♀": r"female", "♂": r"male",
}  # fmt: skip


def _latex(rows: Sequence[Row]) -> str:
    def plain(text: str) -> str:
        return "".join(_TEX.get(c, c) for c in " ".join(text.split()))

    columns = "".join(
        f"p{{{width}\\linewidth}}" for width in (0.08, 0.09, 0.25, 0.05, 0.09, 0.09, 0.07, 0.05, 0.1, 0.13)
    )
    head = " & ".join(HEAD)
    lines = ["% needs \\usepackage{longtable}; wide: set it on a landscape page", f"\\begin{{longtable}}{{{columns}}}",
             f"\\hline {head} \\\\ \\hline \\endhead"]  # fmt: skip
    lines += [" & ".join(_cells(row, plain, (r"\textit{", "}"), (r"\textsuperscript{", "}"))) + r" \\" for row in rows]
    return "\n".join([*lines, "\\hline", "\\end{longtable}"]) + "\n"


def _cells(row: Row, plain: Callable[[str], str], italic: tuple[str, str], raised: tuple[str, str]) -> Iterable[str]:
    """Return the cells, genotypes in italics (genetic symbols are) with true superscripts."""
    for name, text in zip(HEAD, row.cells(), strict=True):
        if name in GENOTYPES:
            runs = (f"{raised[0]}{plain(t)}{raised[1]}" if up else _kept(plain, t) for t, up in raised_runs(text))
            yield f"{italic[0]}{''.join(runs)}{italic[1]}"
        else:
            yield plain(text)


def _kept(plain: Callable[[str], str], text: str) -> str:
    """Return a stretch of text with the blanks at its ends, where it meets a superscript."""
    return f"{' ' * text.startswith(' ')}{plain(text)}{' ' * (text.endswith(' ') and text.strip() != '')}"
