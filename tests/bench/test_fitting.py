from __future__ import annotations

from collections.abc import Iterator

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from crossplan.bench.fitting import CUT_MARK, Fitted, fit
from crossplan.bench.pdf_page import Pages


@pytest.fixture
def pages() -> Iterator[Pages]:
    with Pages("", 100, 100) as made:
        yield made


def flat(fitted: Fitted) -> list[str]:
    """Return the lines as text."""
    return ["".join(part for part, _ in line) for line in fitted.lines]


def test_first_one_line_each_in_the_largest_type(pages: Pages) -> None:
    fitted = fit(pages, ["2: AD/CyO", "3: +/TM6B"], 60, 20, 9, 4)
    assert (fitted.size, flat(fitted), fitted.whole) == (9, ["2: AD/CyO", "3: +/TM6B"], True)


def test_then_smaller_type_then_broken_lines(pages: Pages) -> None:
    text = "AD-K12@attP40/CyO-twi-GFP"
    wide = pages.width_of(text, 5)
    assert fit(pages, [text], wide + 0.1, 20, 9, 4).size == 5
    broken = fit(pages, [text], 0.6 * pages.width_of(text, 4), 20, 9, 4)
    assert flat(broken) == ["AD-K12@attP40/", "CyO-twi-GFP"]
    assert broken.whole


def test_at_last_cut_with_a_mark(pages: Pages) -> None:
    fitted = fit(pages, ["x" * 50 + " " + "w[1118]" * 50], 30, 8, 9, 4)
    assert not fitted.whole
    assert flat(fitted)[-1].endswith(CUT_MARK) or "".join(flat(fitted)).endswith(CUT_MARK.replace(" ", ""))
    assert fitted.height <= 8


@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(
    texts=st.lists(st.text(alphabet="abAD12@/;,[]+ {}", min_size=1, max_size=80), min_size=1, max_size=4),
    width=st.floats(8, 60),
    height=st.floats(2, 25),
)
def test_it_always_fits_and_loses_nothing_unseen(pages: Pages, texts: list[str], width: float, height: float) -> None:
    fitted = fit(pages, texts, width, height, 9, 4)
    assert fitted.height <= height + 1e-6
    assert all(pages.width_of(line, fitted.size) <= width + 1e-6 for line in fitted.lines)
    shown = "".join("".join(flat(fitted)).split())
    if fitted.whole:
        assert len(shown) >= sum(len(t.replace(" ", "").replace("[", "").replace("]", "")) for t in texts)
    else:
        assert "…" in shown
