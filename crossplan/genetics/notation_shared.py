"""Balancers of two chromosomes written together behind the last field: `...; AD-K12/+; DBD-Q01/CyO::TM6B`."""

from __future__ import annotations

import re
from collections.abc import Sequence

from crossplan.errors import Problem, Severity
from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.notation_clean import problem
from crossplan.genetics.notation_split import Field, Half, Item

_TOGETHER = re.compile(r"(?P<first>[A-Za-z0-9]+)::(?P<second>[A-Za-z0-9]+)")


def share_balancers(
    fields: Sequence[Field], catalogue: Catalogue, text: str
) -> tuple[tuple[Field, ...], Problem | None]:
    """Return the fields with each balancer on its own chromosome, and what was assumed; as they are otherwise.

    Only where the second balancer is of the chromosome of the last field, by its place, the first of the one before, and
    no homologue stands in its way there.
    """
    last = fields[-1]
    items = last.halves[-1].items
    match = _TOGETHER.fullmatch(items[0].text) if len(last.halves) == 2 and len(items) == 1 else None
    if match is None or not 2 <= len(fields) <= len(PAIRS) or len(fields[-2].halves) != 1:
        return tuple(fields), None
    first, second = (catalogue.balancer(match[name]) for name in ("first", "second"))
    places = (PAIRS[len(fields) - 2], PAIRS[len(fields) - 1])
    if first is None or second is None or (first.chromosome, second.chromosome) != places:
        return tuple(fields), None
    note = problem(
        "balancers-together", Severity.WARNING, f"{items[0].text} is read as {first.name} on chromosome {places[0]} and"
        f" {second.name} on chromosome {places[1]}", text, items[0].start, items[0].end,
        "write each balancer behind the slash of its own chromosome",
    )  # fmt: skip
    before = _with_homologue(fields[-2], _part(items[0], match, "first"))
    here = last._replace(halves=(last.halves[0], _half(_part(items[0], match, "second"))))
    return (*fields[:-2], before, here), note


def _part(item: Item, match: re.Match[str], name: str) -> Item:
    return Item(match[name], item.start + match.start(name), item.start + match.end(name))


def _half(item: Item) -> Half:
    return Half((item,), item.start, item.end)


def _with_homologue(field: Field, item: Item) -> Field:
    first = field.halves[0]
    wild = Half((Item("+", field.start, field.start),), field.start, field.start)
    return field._replace(halves=(first if first.items else wild, _half(item)))
