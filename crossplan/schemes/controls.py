"""Matched controls: the effector with an empty driver, and the driver with no effector.

Controls are targets like any other: same sex, number, age and date as the flies that they are controls for, made by the
same kind of crosses, so that whatever the driver or the effector does alone can be told from what they do together.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace

from crossplan.genetics.catalogue import Catalogue
from crossplan.plan.screen_file import WantedTarget
from crossplan.schemes.batch import Asked, ControlKind
from crossplan.schemes.target import Carried, base_name, find_component

#: component classes that turn an effector on, and those that are turned on
DRIVERS = frozenset(("AD", "DBD", "GAL4", "LexA"))
EFFECTORS = frozenset(("effector", "reporter"))


@dataclass(frozen=True)
class Controls:
    """The controls of a screen, and what could not be added."""

    asked: tuple[Asked, ...]
    remarks: tuple[str, ...]


def component_class(name: str, shelf: Mapping[str, Carried], catalogue: Catalogue) -> str:
    """Return the class of a component (`AD`, `DBD`, `effector`, ...); empty when nothing tells."""
    found = find_component(name, shelf)
    if isinstance(found, Carried) and found.element.component:
        return found.element.component
    entry = catalogue.component(base_name(name))
    return entry.cls if entry is not None else ""


def empty_parts(shelf: Mapping[str, Carried], named: Sequence[str]) -> dict[tuple[str, str], str]:
    """Return the empty half-driver or driver for each (class, site), as the screen names them or by the word `empty`."""
    chosen = [shelf[s] for s in named if s in shelf] or [
        c for symbol, c in sorted(shelf.items()) if "empty" in base_name(symbol).lower()
    ]
    found: dict[tuple[str, str], str] = {}
    for carried in chosen:
        element = carried.element
        if element.component in DRIVERS:
            found.setdefault((element.component, element.site), element.symbol)
            found.setdefault((element.component, ""), element.symbol)
    return found


def controls_for(
    targets: Iterable[WantedTarget], shelf: Mapping[str, Carried], catalogue: Catalogue, named_empty: Sequence[str]
) -> Controls:
    """Return the control without effector of each target, and one control with an empty driver for each effector.

    Args:
        targets: those that can be made.
        shelf: the elements of the stock list.
        catalogue: tells drivers from effectors.
        named_empty: the empty drivers that the screen file names.
    """
    empties = empty_parts(shelf, named_empty)
    empty_controls: dict[tuple[object, ...], Asked] = {}
    no_effector: dict[tuple[object, ...], Asked] = {}
    remarks: dict[str, None] = {}
    for target in targets:
        if target.stock:
            continue
        classes = {name: component_class(name, shelf, catalogue) for name, _ in target.components}
        drivers = tuple((n, k) for n, k in target.components if classes[n] in DRIVERS)
        effectors = tuple((n, k) for n, k in target.components if classes[n] in EFFECTORS)
        if not drivers or not effectors:
            remarks[f"{target.name}: no controls, its driver and effector parts could not be told apart"] = None
            continue
        without = replace(target, forbid=(*target.forbid, *(n for n, _ in effectors)))
        alone = _control(without, drivers, f"{target.name}, no effector", "no effector")
        no_effector.setdefault((frozenset(drivers), target.sex), alone)
        replaced, other_site = _with_empty(drivers, shelf, classes, empties)
        if other_site:
            remarks[f"{target.name}: the empty driver sits at another site than {', '.join(other_site)}"] = None
        if replaced is None:
            remarks["no empty driver on this shelf: the effector-alone control was left out"] = None
            continue
        places = " and ".join(n.partition("@")[2] or n for n, _ in replaced)
        label = f"empty driver at {places}, {' + '.join(base_name(n) for n, _ in effectors)}, {target.sex}s"
        key = (frozenset(replaced + effectors), target.sex)
        known = empty_controls.get(key)
        if known is None or known.wanted.flies < target.flies:
            empty_controls[key] = _control(target, replaced + effectors, label, "empty driver")
    return Controls((*no_effector.values(), *_distinct_names(empty_controls.values())), tuple(remarks))


def _control(target: WantedTarget, components: tuple[tuple[str, int], ...], name: str, kind: ControlKind) -> Asked:
    of = target.name if kind == "no effector" else "all targets with this effector"
    return Asked(replace(target, name=name, components=components), of, kind)


def _distinct_names(controls: Iterable[Asked]) -> list[Asked]:
    seen: dict[str, int] = {}
    distinct = []
    for control in controls:
        name = control.wanted.name
        seen[name] = seen.get(name, 0) + 1
        if seen[name] > 1:
            control = replace(control, wanted=replace(control.wanted, name=f"{name} ({seen[name]})"))
        distinct.append(control)
    return distinct


def _with_empty(
    drivers: Sequence[tuple[str, int]],
    shelf: Mapping[str, Carried],
    classes: Mapping[str, str],
    empties: Mapping[tuple[str, str], str],
) -> tuple[tuple[tuple[str, int], ...] | None, list[str]]:
    """Return the drivers with empty ones in their place (None if one is lacking), and those replaced at another site."""
    replaced: list[tuple[str, int]] = []
    other_site: list[str] = []
    for name, copies in drivers:
        found = find_component(name, shelf)
        site = found.element.site if isinstance(found, Carried) else ""
        empty = empties.get((classes[name], site))
        if empty is None:
            empty = empties.get((classes[name], ""))
            other_site.append(name)
        if empty is None:
            return None, []
        replaced.append((empty, copies))
    return tuple(replaced), other_site
