"""What to look for: the shortest rule by which a person can keep one class and nothing else.

A rule is a set of tests, each a sign that must be seen or must not be seen. Every rule is checked against all classes of
the same sex: it keeps the wanted one and no other.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from itertools import combinations

from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.progeny import ProgenyClass

#: how much harder a sign is to use than an easy one (our weights; common practice, no source)
EASE_WEIGHT = {"easy": 1.0, "medium": 2.0, "hard": 6.0}
#: beyond this many signs that differ, the rule lists them all instead of looking for the shortest set
MOST_SIGNS = 12


@dataclass(frozen=True, slots=True)
class Test:
    """One thing to look at: `sign` must be seen (`present`) or must not be."""

    sign: str
    present: bool

    def passes(self, signs: frozenset[str]) -> bool:
        """Return whether a fly with these signs passes."""
        return (self.sign in signs) == self.present


def shortest_rule(kept: frozenset[str], others: Sequence[frozenset[str]], catalogue: Catalogue) -> tuple[Test, ...]:
    """Return the easiest set of tests that the looks `kept` pass and every one of `others` fails.

    Args:
        kept: signs of the wanted class.
        others: signs of all other classes of that sex; none equals `kept`.
        catalogue: for the ease of each sign.
    """
    if not others:
        return ()
    # what another sign of the wanted flies hides cannot be looked for on them; the hiding sign sets them apart as well
    signs = sorted(s for s in frozenset(s for look in others for s in look ^ kept) if not is_hidden(s, kept, catalogue))
    tests = [Test(sign, sign in kept) for sign in signs]
    weight = {t: _weight(t, catalogue) for t in tests}
    if len(tests) > MOST_SIGNS:
        return tuple(tests)
    best: tuple[float, int, tuple[Test, ...]] | None = None
    for size in range(1, len(tests) + 1):
        for chosen in combinations(tests, size):
            if all(any(not t.passes(look) for t in chosen) for look in others):
                cost = sum(weight[t] for t in chosen)
                if best is None or (cost, size) < best[:2]:
                    best = (cost, size, chosen)
    assert best is not None, "a class with the looks of another"
    return tuple(sorted(best[2], key=lambda t: (weight[t], t.sign)))


def is_hidden(sign: str, look: frozenset[str], catalogue: Catalogue) -> bool:
    """Return whether a fly of that look shows something that hides the sign: the colour of a tiny eye is not seen."""
    known = catalogue.signs.get(sign)
    return known is not None and any(s in look for s in known.hidden_by)


def _weight(test: Test, catalogue: Catalogue) -> float:
    sign = catalogue.signs.get(test.sign)
    return EASE_WEIGHT.get(sign.ease if sign else "medium", 2.0)


def words_of(tests: Iterable[Test], catalogue: Catalogue) -> str:
    """Return the rule in words, such as `straight wings, coloured eyes`."""
    return ", ".join(_words(t, catalogue) for t in tests)


def _words(test: Test, catalogue: Catalogue) -> str:
    if test.present:
        return test.sign
    sign = catalogue.signs.get(test.sign)
    return sign.opposite if sign and sign.opposite else f"no {test.sign}"


def rule_for(kept: ProgenyClass, classes: Iterable[ProgenyClass], catalogue: Catalogue) -> tuple[Test, ...]:
    """Return the shortest rule for a class of a cross."""
    others = [c.signs for c in classes if c.sex == kept.sex and c.signs != kept.signs]
    return shortest_rule(kept.signs, others, catalogue)


def easily_mistaken(
    kept: ProgenyClass, classes: Iterable[ProgenyClass], catalogue: Catalogue
) -> tuple[tuple[ProgenyClass, Test], ...]:
    """Return the classes of the same sex that differ from `kept` in one sign only, with that sign."""
    found = []
    for other in classes:
        if other.sex != kept.sex:
            continue
        differing = other.signs ^ kept.signs
        if len(differing) == 1:
            (sign,) = differing
            found.append((other, Test(sign, sign in kept.signs)))
    return tuple(found)
