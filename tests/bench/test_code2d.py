from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from crossplan.bench.code2d import VialCode, pattern, read_vial_code


@given(
    st.from_regex(r"[A-Za-z0-9]([A-Za-z0-9 ._-]{0,10}[A-Za-z0-9])?", fullmatch=True),
    st.integers(1, 99),
    st.integers(1, 99),
    st.one_of(st.just(""), st.dates().map(str)),
)
def test_a_code_is_read_as_it_was_written(step: str, vial: int, vials: int, day: str) -> None:
    code = VialCode(step, vial, vials, day)
    assert read_vial_code(code.text()) == code


@pytest.mark.parametrize(
    "text",
    [
        "",
        "S03",
        "crossplan/2 S03 v2/4 2027-01-11",
        "crossplan/1 S03 v2/4 2027-13-11",
        "https://crossplan/1 S03 v2/4",
    ],
)
def test_other_codes_are_none_of_ours(text: str) -> None:
    assert read_vial_code(text) is None


def test_an_ordinary_text_takes_the_second_smallest_code() -> None:
    """ISO/IEC 18004: version 2 has 25 x 25 modules and holds 32 characters at level L."""
    modules = pattern("crossplan/1 S03 v2/4 2027-01-11")
    assert (len(modules), {len(row) for row in modules}) == (25, {25})
    assert modules[0][:8] == (True,) * 7 + (False,)
