"""What the components of a target ask of the bench: retinal, darkness, temperatures.

The facts stand in the catalogue of component classes; here they are gathered for one target.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from crossplan.genetics.catalogue import Catalogue, ComponentEntry
from crossplan.schemes.target import base_name


@dataclass(frozen=True)
class Needs:
    """What a target needs: `words` for people, the rest for the calendar.

    Attributes:
        words: sentences for the bench sheet.
        retinal: flies are fed all-trans-retinal before the assay.
        dark: flies are kept in darkness.
        rear_max_C: warmest rearing temperature in degrees C at which everything stays silent; None for no limit.
        test_C: temperature of the assay in degrees C where it acts; None when it is not by temperature.
    """

    words: tuple[str, ...] = ()
    retinal: bool = False
    dark: bool = False
    rear_max_C: float | None = None
    test_C: float | None = None


def needs_of(components: Iterable[str], catalogue: Catalogue) -> Needs:
    """Return what the components (symbols of a target) ask for together."""
    entries = [(name, e) for name in components if (e := catalogue.component(base_name(name))) is not None]
    words: dict[str, None] = {}
    for name, entry in entries:
        for sentence in _sentences(base_name(name), entry):
            words[sentence] = None
    limits = [e.rear_max_C for _, e in entries if e.rear_max_C is not None]
    tests = [e.test_C for _, e in entries if e.test_C is not None]
    return Needs(
        tuple(words),
        any(e.needs_retinal for _, e in entries),
        any(e.needs_dark for _, e in entries),
        min(limits) if limits else None,
        max(tests) if tests else None,
    )


def _sentences(name: str, entry: ComponentEntry) -> list[str]:
    found = []
    if entry.needs_retinal:
        found.append(f"{name}: all-trans-retinal food before the assay, and a group without retinal as control")
    if entry.needs_dark:
        found.append(f"{name}: keep in the dark from eclosion")
    if entry.rear_max_C is not None:
        found.append(f"{name}: rear at no more than {entry.rear_max_C:g} C")
    if entry.test_C is not None:
        found.append(f"{name}: acts at about {entry.test_C:g} C")
    return found
