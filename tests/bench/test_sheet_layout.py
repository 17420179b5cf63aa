from __future__ import annotations

import pytest

from crossplan.bench.sheet_layout import LAYOUTS, SheetLayout, layout_named, layout_of, roll, sheet
from crossplan.errors import InputError


@pytest.mark.parametrize("layout", LAYOUTS.values(), ids=LAYOUTS)
def test_labels_of_a_layout_lie_apart_on_the_page(layout: SheetLayout) -> None:
    boxes = []
    for place in range(layout.per_page):
        x, y = layout.corner(place)
        assert 0 <= x <= layout.page_width - layout.label_width + 0.01
        assert 0 <= y <= layout.page_height - layout.label_height + 0.01
        boxes.append((x, y))
    w, h = layout.label_width - 0.01, layout.label_height - 0.01
    assert not [1 for i, (x, y) in enumerate(boxes) for a, b in boxes[:i] if abs(x - a) < w and abs(y - b) < h]


def test_places_count_row_by_row() -> None:
    layout = sheet("A4", 3, 8, 60, 30, pitch_x=65, margin_left=7, margin_top=10)
    assert (layout.corner(0), layout.corner(2), layout.corner(3)) == ((7, 10), (137, 10), (7, 40))
    assert sheet("A4", 3, 8, 60, 30).margin_left == 15


def test_a_roll_has_one_label_a_page() -> None:
    layout = roll(40, 20)
    assert (layout.per_page, layout.page_width, layout.page_height) == (1, 40, 20)


@pytest.mark.parametrize(
    ("make", "words"),
    [
        (lambda: roll(24, 13), "too small"),
        (lambda: roll(25, 12), "too small"),
        (lambda: sheet("A4", 5, 8, 50, 30), "do not fit"),
        (lambda: sheet("A4", 2, 8, 50, 30, margin_left=120), "reach to 220"),
        (lambda: sheet("A4", 3, 8, 50, 30, pitch_x=40), "overlap"),
        (lambda: sheet("A7", 3, 8, 50, 30), "A7"),
        (lambda: sheet("A4", 0, 8, 50, 30), "at least one"),
        (lambda: layout_named("fancy"), "fancy"),
    ],
)
def test_what_cannot_be_is_refused_in_words(make: object, words: str) -> None:
    with pytest.raises(InputError, match=words):
        make()  # type: ignore[operator]


def test_a_layout_from_sizes() -> None:
    layout = layout_of("A4 4x11 48.5x25.4")
    assert (layout.columns, layout.rows, layout.label_width, layout.page_height) == (4, 11, 48.5, 297)
    own = layout_of("210x297 3×8 60x30 pitch 65x33 margin 7x10")
    assert (own.corner(0), own.corner(4)) == ((7, 10), (72, 43))
    assert layout_of("letter 3x10 66,7x25,4").page_width == 215.9
    assert layout_of("roll 38x19mm").per_page == 1
    assert layout_of("roll-25x13") is LAYOUTS["roll-25x13"]


@pytest.mark.parametrize(
    "text",
    ["A4 4x11", "A4 4x11 48", "roll", "roll 38", "A9 4x11 40x20", "A4 4x11 nanx20", "A4 2x2 40x20 pitch",
     "A4 2x2 40x20 gap 3x3", "A4 2x2 40x-20", "", "roll 1e9x20"],
)  # fmt: skip
def test_sizes_that_cannot_be_read_are_refused(text: str) -> None:
    with pytest.raises(InputError):
        layout_of(text)
