from __future__ import annotations

import io
import xml.etree.ElementTree as ET

import pytest
from example_plan import example_plan, long_plan

from crossplan.bench.figure import WIDTH, png, scheme_figure, svg
from crossplan.errors import InputError
from crossplan.plan.model import Plan

TARGET = "K12 x Q07 > CsChrimson"
SVG = "{http://www.w3.org/2000/svg}"


def texts(plan: Plan) -> list[tuple[str, float]]:
    root = ET.fromstring(svg(scheme_figure(plan, TARGET)))
    return [(t.text or "", float(t.get("y", "0"))) for t in root.iter(f"{SVG}text")]


def test_generations_stand_below_each_other_and_homologues_above_a_line() -> None:
    found = texts(example_plan())
    heights = [y for text, y in found if text.startswith("Generation ")]
    assert heights == sorted(heights)
    assert len(heights) == 3
    above = next(y for text, y in found if text == "AD-K12@attP40")
    below = [y for text, y in found if text == "CyO" and y > above]
    assert below
    assert "beware: curly wings, large halteres: carries TM2, not TM6B" in " ".join(text for text, _ in found)


def test_a_picture_is_told_in_words() -> None:
    root = ET.fromstring(svg(scheme_figure(example_plan(), TARGET)))
    told = root.findtext(f"{SVG}desc") or ""
    assert "Generation 2, S03: ♀ S01 × ♂ S02; keep males: curly wings" in told
    assert root.get("role") == "img"


def test_nothing_lies_outside_the_picture() -> None:
    for plan in (example_plan(), long_plan()):
        figure = scheme_figure(plan, TARGET)
        root = ET.fromstring(svg(figure))
        for text in root.iter(f"{SVG}text"):
            assert 0 <= float(text.get("x", "0")) + float(text.get("textLength", "0")) <= WIDTH
            assert 0 <= float(text.get("y", "0")) <= figure.height


def test_text_of_the_plan_is_escaped() -> None:
    plan = example_plan()
    name = '<script>"&\x07'
    plan.targets[0] = plan.targets[0].model_copy(update={"target": name})
    root = ET.fromstring(svg(scheme_figure(plan, name)))
    assert root.find(f".//{SVG}script") is None


def test_png_has_the_size_asked_for_and_ink_of_one_colour() -> None:
    from PIL import Image

    figure = scheme_figure(example_plan(), TARGET)
    picture = Image.open(io.BytesIO(png(figure, 150)))
    assert picture.mode == "L"
    assert picture.width == round(WIDTH * 150 / 25.4)
    assert picture.getextrema() == (0, 255)
    assert png(figure, 150) == png(scheme_figure(example_plan(), TARGET), 150)


@pytest.mark.parametrize(("name", "words"), [("nobody", "no target"), ("M31 > CsChrimson", "no scheme")])
def test_what_cannot_be_drawn_is_refused(name: str, words: str) -> None:
    with pytest.raises(InputError, match=words):
        scheme_figure(example_plan(), name)


@pytest.mark.parametrize("dpi", [0, 5000])
def test_a_size_that_cannot_be_is_refused(dpi: int) -> None:
    with pytest.raises(InputError, match="dots an inch"):
        png(scheme_figure(example_plan(), TARGET), dpi)
