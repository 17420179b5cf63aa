"""Labels on sheets or on a roll: one for every vial of a cross, or one for every stock.

What stands on one label, and where, is in label_face.py and stock_label.py.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence

from crossplan.bench.choice import chosen_steps, first_day
from crossplan.bench.label_face import LabelFace, Vial, vials_of
from crossplan.bench.pdf_page import Pages
from crossplan.bench.sheet_layout import SheetLayout
from crossplan.bench.stock_label import StockFace, StockLabel
from crossplan.bench.words import Day, listed
from crossplan.errors import InputError
from crossplan.plan.model import Plan

#: Draws one label with its top left corner at (x, y), in mm.
Drawing = Callable[[float, float], None]


def labels_pdf(
    plan: Plan,
    layout: SheetLayout,
    steps: Iterable[str] | None = None,
    dates: Iterable[Day] | None = None,
    person: str | None = None,
    start_at: int = 1,
    copies: int = 1,
    outlines: bool = False,
    vials: Iterable[int] | None = None,
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
        vials: only vials of these numbers, to print one label again; None for all.

    Raises InputError when a step or a person is unknown, when nothing is left to print, or `start_at` or
    `copies` does not suit the layout.
    """
    _check(layout, start_at, copies)
    chosen = _vials(plan, steps, dates, person, vials)
    title = f"Vial labels: {plan.screen.name}"
    with Pages(title, layout.page_width, layout.page_height, first_day(plan)) as pages:
        face: LabelFace | None = None

        def drawing(vial: Vial) -> Drawing:
            nonlocal face
            if face is None or face.step is not vial.step:
                face = LabelFace(pages, vial.step, layout.label_width, layout.label_height)
            return lambda x, y, face=face: face.draw(vial, x, y)  # type: ignore[misc]

        _draw_all(pages, layout, (drawing(v) for v in chosen), start_at, copies, outlines)
        return pages.finish()


def stock_labels_pdf(
    stocks: Sequence[StockLabel],
    layout: SheetLayout,
    names: Iterable[str] | None = None,
    start_at: int = 1,
    copies: int = 1,
    outlines: bool = False,
) -> bytes:
    """Return a PDF file with a label for every stock, in the order of the list; `names` for only these.

    Raises InputError when a name is not on the list, nothing is left to print, or `start_at` or `copies` does not
    suit the layout.
    """
    _check(layout, start_at, copies)
    chosen = _stocks(stocks, names)
    with Pages("Stock labels", layout.page_width, layout.page_height) as pages:
        size = (layout.label_width, layout.label_height)
        _draw_all(pages, layout, (StockFace(pages, s, *size).draw for s in chosen), start_at, copies, outlines)
        return pages.finish()


def _check(layout: SheetLayout, start_at: int, copies: int) -> None:
    if not 1 <= start_at <= layout.per_page:
        raise InputError(
            f"a page of {layout.name} has no place {start_at}",
            f"Places count from 1 to {layout.per_page}, row by row.",
        )
    if copies < 1:
        raise InputError("at least one copy of each label must be printed")


def _draw_all(
    pages: Pages, layout: SheetLayout, drawings: Iterable[Drawing], start_at: int, copies: int, outlines: bool
) -> None:
    at = start_at - 1
    for draw in drawings:
        for _ in range(copies):
            place = at % layout.per_page
            if place == 0 or at == start_at - 1:
                pages.new_page()
            x, y = layout.corner(place)
            if outlines:
                pages.box(x, y, layout.label_width, layout.label_height, 0.1)
            draw(x, y)
            at += 1


def shortened_labels(
    plan: Plan,
    layout: SheetLayout,
    steps: Iterable[str] | None = None,
    dates: Iterable[Day] | None = None,
    person: str | None = None,
) -> tuple[str, ...]:
    """Return the steps on whose labels something is shortened, and ends with a mark, in this layout."""
    chosen = list(dict.fromkeys(vial.step.id for vial in _vials(plan, steps, dates, person, None)))
    with Pages("", layout.page_width, layout.page_height) as pages:
        size = (layout.label_width, layout.label_height)
        return tuple(step for step in chosen if not LabelFace(pages, plan.step(step), *size).is_whole)


def shortened_stock_labels(
    stocks: Sequence[StockLabel], layout: SheetLayout, names: Iterable[str] | None = None
) -> tuple[str, ...]:
    """Return the stocks on whose labels something is shortened, or which are too long for a code."""
    with Pages("", layout.page_width, layout.page_height) as pages:
        size = (layout.label_width, layout.label_height)
        return tuple(s.name for s in _stocks(stocks, names) if not StockFace(pages, s, *size).is_whole)


def _stocks(stocks: Sequence[StockLabel], names: Iterable[str] | None) -> list[StockLabel]:
    wanted = None if names is None else set(names)
    unknown = sorted((wanted or set()) - {s.name for s in stocks})
    if unknown:
        raise InputError(f"the stock list has no {listed(unknown)}", "Write names as the list does.")
    chosen = [s for s in stocks if wanted is None or s.name in wanted]
    if not chosen:
        raise InputError("there are no labels to print", "The stock list is empty.")
    return chosen


def _vials(
    plan: Plan,
    steps: Iterable[str] | None,
    dates: Iterable[Day] | None,
    person: str | None,
    numbers: Iterable[int] | None,
) -> list[Vial]:
    # a step that shares the vials of another has no labels of its own
    chosen = [s for s in chosen_steps(plan, steps, dates, person) if not s.same_vials_as]
    wanted = None if numbers is None else set(numbers)
    vials = [Vial(s, n) for s in chosen for n in range(1, vials_of(s) + 1) if wanted is None or n in wanted]
    if not vials:
        raise InputError(
            "there are no labels to print", "No vial of the plan fits these steps, days, vials and person."
        )
    return vials
