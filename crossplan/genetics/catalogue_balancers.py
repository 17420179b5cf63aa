"""Balancers, and which of them live together.

A balancer has its own lethal group, and those of the dominant markers that it carries; two homologues that share a
group are dead together. `balancer_pairs.csv` adds what the groups cannot say: pairs that live but poorly, pairs that
are kept as stocks everywhere, and pairs of which nobody has said.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import replace
from difflib import get_close_matches
from typing import Final

from crossplan.errors import InputError
from crossplan.genetics.catalogue_entries import BalancerEntry, BalancerPair
from crossplan.genetics.catalogue_markers import Markers, with_markers
from crossplan.genetics.catalogue_tables import LIKENESS, Row, cover, near_hint, parts, refuse_twice, yes
from crossplan.genetics.element import Traits

SHORTEST_BALANCER_NAME: Final = 3
PAIR_BY_GROUPS: Final = "worked out from the lethals of the two balancers"


class Balancers:
    """The tables `balancers` and `balancer_pairs`, ready for questions.

    Raises:
        InputError: a row names a marker, a balancer or a number that is none, or a name twice.
    """

    def __init__(self, balancers: Iterable[Row], pairs: Iterable[Row], markers: Markers) -> None:
        self._known = markers
        self._by_key: dict[str, BalancerEntry] = {}
        self._parts: dict[tuple[str, str], BalancerEntry] = {}
        for row in balancers:
            self._add(row)
        self._pairs: dict[frozenset[str], BalancerPair] = {}
        for row in pairs:
            self._add_pair(row)

    def balancer(self, name: str) -> BalancerEntry | None:
        """Return the balancer `name` (capitals, spaces and commas do not matter), None when it is not known.

        Of a translocation balancer this is the part on chromosome 2.
        """
        return self._by_key.get(_key(name))

    def linked_part(self, entry: BalancerEntry) -> BalancerEntry | None:
        """Return the part of a translocation balancer on the chromosome that `entry` is linked to."""
        return self._parts.get((entry.name, entry.linked_to)) if entry.linked_to else None

    def all(self) -> tuple[BalancerEntry, ...]:
        """Return all balancers in the order of the table, both parts of a translocation balancer."""
        return tuple(self._parts.values())

    def like(self, text: str) -> str | None:
        """Return the balancer whose name is closest to `text` (a likely typing error), None when none is
        close."""
        key = _key(text)
        if len(key) < SHORTEST_BALANCER_NAME:
            return None
        likely = [known for known in self._by_key if known[0] == key[0]]
        near = get_close_matches(key, likely, n=1, cutoff=LIKENESS)
        return self._by_key[near[0]].name if near else None

    def pair(self, one: str, other: str) -> BalancerPair | None:
        """Return whether flies with these two balancers as homologues live; None when one of them is not known or
        they are of different chromosomes.

        Usual dominant markers (`assumed`) count as carried.
        """
        first, second = self.balancer(one), self.balancer(other)
        if first is None or second is None or first.chromosome != second.chromosome:
            return None
        shared = sorted(first.traits_assumed.lethal & second.traits_assumed.lethal)
        if shared:
            reason = f"both carry the lethal {', '.join(shared)}"
            return BalancerPair(
                one=first.name, other=second.name, fate="lethal", reason=reason, source=PAIR_BY_GROUPS, kind="derived"
            )
        told = self._pairs.get(frozenset((first.core, second.core)))
        if told is not None:
            return replace(told, one=first.name, other=second.name)
        return BalancerPair(
            one=first.name,
            other=second.name,
            fate="viable",
            reason="no lethal is known to be in both",
            source=PAIR_BY_GROUPS,
            kind="derived",
        )

    def pairs_told(self) -> tuple[BalancerPair, ...]:
        """Return the pairs of the table."""
        return tuple(self._pairs.values())

    def _add_pair(self, row: Row) -> None:
        where = f"balancer pair {row['one']}/{row['other']}"
        for name in (row["one"], row["other"]):
            if self.balancer(name) is None:
                raise InputError(f"{where}: there is no balancer '{name}'", near_hint(_key(name), self._by_key))
        pair = BalancerPair(
            one=row["one"],
            other=row["other"],
            fate=row["fate"],
            reason=row["reason"],
            source=row["source"],
            kind=row["kind"],
        )
        self._pairs[frozenset((pair.one, pair.other))] = pair

    def _add(self, row: Row) -> None:
        entry = self._entry(row)
        self._parts[entry.name, entry.chromosome] = entry
        for name in (entry.name, *entry.synonyms):
            refuse_twice(name, self._by_key.setdefault(_key(name), entry).name, entry.name)

    def _entry(self, row: Row) -> BalancerEntry:
        where = f"balancer {row['name']}"
        assumed = [self._known.required(s, f"{where}, assumed") for s in parts(row["assumed"])]
        traits = self._traits(row, where)
        return BalancerEntry(
            name=row["name"],
            synonyms=parts(row["synonyms"]),
            chromosome=row["chromosome"],
            linked_to=row["linked_to"],
            form_of=row["form_of"],
            assumed=tuple(m.symbol for m in assumed),
            assumed_reason=row["assumed_reason"],
            traits=traits,
            traits_assumed=with_markers(traits, assumed, self._known),
            leaks=row["leaks"],
            source=row["source"],
            kind=row["kind"],
            dominant=parts(row["dominant"]),
            recessive=parts(row["recessive"]),
            covers_note=row["covers_note"],
            caution=row["caution"],
        )

    def _traits(self, row: Row, where: str) -> Traits:
        always = [self._known.required(s, f"{where}, dominant") for s in parts(row["dominant"])]
        hidden = [self._known.required(s, f"{where}, recessive") for s in parts(row["recessive"])]
        bare = Traits(
            recessive=tuple(pair for m in hidden for pair in m.traits.recessive),
            null_for=frozenset[str]().union(*(m.traits.null_for for m in hidden)),
            restores=frozenset(parts(row["restores"])),
            lethal=frozenset(parts(row["lethal_groups"])),
            male_lethal=yes(row["male_lethal"], where),
            female_sterile=frozenset(parts(row["female_sterile"])),
            male_sterile=frozenset(parts(row["male_sterile"])),
            cover=tuple(cover(part, where) for part in parts(row["cover"])),
            compound=yes(row["compound"], where),
            linked_to=row["linked_to"],
        )
        return with_markers(bare, always, self._known)


def _key(name: str) -> str:
    return re.sub(r"[\s,_']", "", name).casefold()
