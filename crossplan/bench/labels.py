"""Vial labels: one for every vial of a cross, on sheets or on a roll.

What stands on one label, and where, is in label_face.py.
"""

from __future__ import annotations

from collections.abc import Iterable

from crossplan.bench.choice import chosen_steps, first_day
from crossplan.bench.label_face import LabelFace, Vial, vials_of
from crossplan.bench.pdf_page import Pages
from crossplan.bench.sheet_layout import SheetLayout
from crossplan.bench.words import Day
from crossplan.errors import InputError
from crossplan.plan.model import Plan


def labels_pdf(
    plan: Plan,
    layout: SheetLayout,
    steps: Iterable[str] | None = None,
    dates: Iterable[Day] | None = None,
    person: str | None = None,
    start_at: int = 1,
    copies: int = 1,
    outlines: bool = False,
) -> bytes:
    """Return a PDF file with a label for every vial, in the order of setting up.

    Args:
        plan: the plan; nothing in it is changed or decided.
        layout: the paper.
        steps: only these steps; None for all.
        dates: only steps set up on these days; None for all.
        person: only steps of this person; None for all.
        start_at: first free place on a sheet already begun, counted from 1, row by row.
        copies: labels for each vial.
        outlines: draw the edge of each label, for a trial on plain paper.

    Raises InputError when a step or a person is unknown, when nothing is left to print, or `start_at` or
    `copies` does not suit the layout.
    """
    if not 1 <= start_at <= layout.per_page:
        raise InputError(
            f"a page of {layout.name} has no place {start_at}",
            f"Places count from 1 to {layout.per_page}, row by row.",
        )
    if copies < 1:
        raise InputError("at least one copy of each label must be printed")
    vials = _vials(plan, steps, dates, person)
    places = [vial for vial in vials for _ in range(copies)]
    title = f"Vial labels: {plan.screen.name}"
    with Pages(title, layout.page_width, layout.page_height, first_day(plan)) as pages:
        _draw_all(pages, layout, places, start_at, outlines)
        return pages.finish()


def _draw_all(pages: Pages, layout: SheetLayout, places: list[Vial], start_at: int, outlines: bool) -> None:
    faces: dict[str, LabelFace] = {}
    for at, vial in enumerate(places, start_at - 1):
        place = at % layout.per_page
        if place == 0 or at == start_at - 1:
            pages.new_page()
        x, y = layout.corner(place)
        if outlines:
            pages.box(x, y, layout.label_width, layout.label_height, 0.1)
        if vial.step.id not in faces:
            faces[vial.step.id] = LabelFace(pages, vial.step, layout.label_width, layout.label_height)
        faces[vial.step.id].draw(vial, x, y)


def shortened_labels(
    plan: Plan,
    layout: SheetLayout,
    steps: Iterable[str] | None = None,
    dates: Iterable[Day] | None = None,
    person: str | None = None,
) -> tuple[str, ...]:
    """Return the steps on whose labels something is shortened, and ends with a mark, in this layout."""
    chosen = list(dict.fromkeys(vial.step.id for vial in _vials(plan, steps, dates, person)))
    with Pages("", layout.page_width, layout.page_height) as pages:
        size = (layout.label_width, layout.label_height)
        return tuple(step for step in chosen if not LabelFace(pages, plan.step(step), *size).is_whole)


def _vials(plan: Plan, steps: Iterable[str] | None, dates: Iterable[Day] | None, person: str | None) -> list[Vial]:
    # a step that shares the vials of another has no labels of its own
    chosen = [s for s in chosen_steps(plan, steps, dates, person) if not s.same_vials_as]
    if not chosen:
        raise InputError("there are no labels to print", "No cross of the plan fits these steps, days and person.")
    return [Vial(step, n) for step in chosen for n in range(1, vials_of(step) + 1)]
