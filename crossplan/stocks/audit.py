"""What is wrong with a shelf, at risk, or worth a look: the list of all rules, and the audit that asks them.

A rule is a function in one of the `audit_*` files. It yields findings; it decides nothing about other rules. Why a kind of
finding matters stands in `audit_codes`.
"""

from __future__ import annotations

import datetime as dt
import gc
from collections.abc import Iterable, Iterator, Mapping
from contextlib import contextmanager
from dataclasses import replace

from crossplan.errors import Severity
from crossplan.genetics.catalogue import Catalogue, default_catalogue
from crossplan.stocks import (
    audit_components,
    audit_insertions,
    audit_keeping,
    audit_looks,
    audit_neighbours,
    audit_reading,
    audit_survival,
)
from crossplan.stocks.audit_codes import why_of
from crossplan.stocks.finding import Finding, Rule, View
from crossplan.stocks.shelf import Shelf

__all__ = ["FAMILIES", "RULES", "Finding", "Rule", "View", "audit", "collector_held"]

#: the files of rules, in the order in which they are asked
FAMILIES = (
    audit_reading,
    audit_survival,
    audit_insertions,
    audit_components,
    audit_looks,
    audit_neighbours,
    audit_keeping,
)
RULES: tuple[Rule, ...] = tuple(
    rule for family in FAMILIES for name, rule in vars(family).items() if name.startswith("check_")
)
_RANK = {Severity.ERROR: 0, Severity.WARNING: 1, Severity.NOTE: 2}


@contextmanager
def collector_held() -> Iterator[None]:
    """Hold Python's collector of cyclic garbage.

    A long list makes millions of values, none of them cyclic, and the collector would walk through all of them again and
    again.
    """
    was_on = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if was_on:
            gc.enable()


def audit(
    shelf: Shelf,
    today: dt.date,
    catalogue: Catalogue | None = None,
    wanted: Mapping[str, tuple[str, ...]] | None = None,
) -> tuple[Finding, ...]:
    """Return all findings, errors first, then by row.

    Args:
        shelf: the stocks.
        today: the day as of which dates are judged.
        catalogue: facts about signs, sites, balancers and transgenes; the shipped ones by default.
        wanted: symbols of elements that a screen asks for, each with the targets that do.
    """
    view = View(shelf, today, catalogue or default_catalogue(), wanted or {})
    return in_order(finding for rule in RULES for finding in rule(view))


def in_order(findings: Iterable[Finding]) -> tuple[Finding, ...]:
    """Return findings without repeats, each with why it matters: errors first, then by row and code."""
    told = (replace(f, why=f.why or why_of(f.code)) for f in dict.fromkeys(findings))
    return tuple(sorted(told, key=lambda f: (_RANK[f.severity], f.row, f.code)))
