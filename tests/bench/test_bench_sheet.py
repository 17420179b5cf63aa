from __future__ import annotations

import pytest
from example_plan import LONG_SYMBOLS, example_plan, long_plan
from reading_back import packed, pictures, texts

from crossplan.bench.bench_sheet import bench_sheet_pdf
from crossplan.bench.scheme_drawing import forms_of
from crossplan.bench.words import long_day
from crossplan.errors import InputError


def day_text(day: str, person: str | None = None) -> str:
    """Return the text of the pages of one day."""
    pages = texts(bench_sheet_pdf(example_plan(), dates=[day], person=person))
    return " ".join(page for page in pages if page.startswith(long_day(day)))


def test_every_working_day_begins_a_page() -> None:
    plan = example_plan()
    pages = texts(bench_sheet_pdf(plan))
    for day in sorted({t.date for t in plan.tasks}):
        assert sum(page.startswith(long_day(day) + " red light") for page in pages) == 1


def test_pages_are_numbered() -> None:
    pages = texts(bench_sheet_pdf(example_plan()))
    assert [f"page {n}" in page for n, page in enumerate(pages, 1)] == [True] * len(pages)


def test_collecting_says_what_to_keep_what_to_leave_and_how_many() -> None:
    words = day_text("2027-03-04")
    for part in (
        "KEEP virgin females: curly wings, extra humeral bristles",
        "LEAVE straight wings or large halteres",
        "BEWARE curly wings, large halteres: carries TM2, not TM6B",
        "need 20 · expect 46 in all from 4 vials · 1/8 of all progeny (12.5 %) · look through about 230 flies",
        "looked through",
        "for S03",
    ):
        assert part in words


def test_setting_up_says_which_flies_and_how_many() -> None:
    words = day_text("2027-03-22")
    assert "♀ 5 a vial (30 in all) from CsChrimson attP18, tray 7, vial 1" in words
    assert "♂ 3 a vial (18 in all) from S03" in words
    assert "6 vials at 25 °C" in words
    assert "S05 CONTROL" in words


def test_the_order_is_by_hour_then_as_one_walks() -> None:
    words = day_text("2027-03-12")
    assert words.index("CLEAR") < words.index("DISCARD")
    words = day_text("2027-03-08")
    assert words.index("COLLECT") < words.index("SET UP")


def test_assay_and_food_name_the_target_and_its_needs() -> None:
    assert "for K12 x Q07 > CsChrimson" in day_text("2027-03-31")
    words = day_text("2027-04-08")
    assert "NEEDS food with all-trans-retinal, darkness and rearing at 25 C" in words
    assert "control of K12 x Q07 > CsChrimson (no driver)" in words


def test_one_person_sees_only_their_own_work() -> None:
    words = day_text("2027-03-04", person="Tomas")
    assert "S02" in words
    assert "S01" not in words


def test_each_form_of_scheme_is_drawn_once() -> None:
    plan = example_plan()
    twin = plan.targets[1].model_copy(update={"target": "empty again", "scheme": ["S06"]})
    renamed = plan.steps[4].model_dump_json(by_alias=True).replace("empty-AD@attP40", "void-AD@attP40")
    step = type(plan.steps[4]).model_validate_json(renamed.replace('"id":"S05"', '"id":"S06"'))
    components = ["void-AD@attP40", *plan.targets[1].components[1:]]
    plan.steps.append(step)
    plan.targets.append(twin.model_copy(update={"components": components}))
    forms = forms_of(plan)
    assert [[t.target for t in form.targets] for form in forms] == [
        ["K12 x Q07 > CsChrimson"],
        ["empty > CsChrimson", "empty again"],
    ]
    pages = texts(bench_sheet_pdf(plan))
    assert sum("Scheme: " in page for page in pages) == 2
    assert any("The same scheme serves:" in page and "empty again: S06" in page for page in pages)


def test_a_scheme_shows_homologues_apart_and_marks_the_kept_class() -> None:
    (scheme,) = [p for p in texts(bench_sheet_pdf(example_plan())) if p.startswith("Scheme: K12")]
    for part in (
        "Generation 1",
        "Generation 3",
        "AD-K12@attP40",
        "CyO",
        "♀ S01",
        "♂ S02",
        "3 generations, proved",
    ):
        assert part in scheme
    assert "AD-K12@attP40/CyO" not in scheme
    assert "keep males: curly wings, dark orange eyes" in scheme


def test_a_long_genotype_stands_whole_on_the_sheet() -> None:
    words = packed(bench_sheet_pdf(long_plan(), dates=["2027-04-01"]))
    for symbol in LONG_SYMBOLS:
        assert words.count("".join(symbol.split()).replace("[", "").replace("]", "")) >= 2


@pytest.mark.parametrize("page", ["A4", "Letter"])
def test_nothing_runs_over_the_margin(page: str) -> None:
    for picture in pictures(bench_sheet_pdf(long_plan(), page=page), 72):
        edge = int(12 * 72 / 25.4)
        for strip in (picture[:, :edge], picture[:, -edge:], picture[:edge], picture[-edge:]):
            assert not (strip == 0).any()


def test_many_vials_go_on_in_further_rows_and_pages() -> None:
    plan = example_plan()
    plan.steps[0] = plan.steps[0].model_copy(update={"vials": 400})
    pages = texts(bench_sheet_pdf(plan, dates=["2027-02-26"], person="Ida"))
    assert " 400 " in " ".join(pages)


def test_cautions_and_safety_close_the_sheets() -> None:
    last = texts(bench_sheet_pdf(example_plan()))[-1]
    assert "K12-AD stands in one vial only" in last
    assert "biosafety committee" in last
    assert "see sheet" in last


def test_a_task_of_an_unknown_step_is_still_printed() -> None:
    plan = example_plan()
    plan.tasks[0] = plan.tasks[0].model_copy(update={"step": "stock K12-AD", "kind": "expand", "note": "one bottle"})
    words = " ".join(texts(bench_sheet_pdf(plan, dates=["2027-02-22"])))
    assert "stock K12-AD" in words
    assert "one bottle" in words


@pytest.mark.parametrize(
    ("options", "words"),
    [({"page": "A5"}, "A5"), ({"dates": ["2027-01-01"]}, "no bench sheet"), ({"person": "Nobody"}, "Nobody")],
)
def test_what_cannot_be_printed_is_refused_in_words(options: dict[str, object], words: str) -> None:
    with pytest.raises(InputError, match=words):
        bench_sheet_pdf(example_plan(), **options)  # type: ignore[arg-type]


def test_same_plan_same_bytes() -> None:
    assert bench_sheet_pdf(example_plan()) == bench_sheet_pdf(example_plan())
