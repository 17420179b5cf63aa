from __future__ import annotations

import io
import os
import re
import subprocess
import sys
from pathlib import Path

import pypdf
import pytest
from example_plan import LONG_SYMBOLS, example_plan, long_plan
from reading_back import codes, packed, pictures, texts

from crossplan.bench.code2d import read_stock_code, read_vial_code, stock_code
from crossplan.bench.labels import labels_pdf, shortened_labels, shortened_stock_labels, stock_labels_pdf
from crossplan.bench.sheet_layout import DEFAULT_LAYOUT, LAYOUTS, layout_named, roll, sheet
from crossplan.bench.stock_label import StockLabel
from crossplan.errors import InputError

SMALLEST = layout_named("roll-25x13")
DEFAULT = layout_named(DEFAULT_LAYOUT)
ALL_CODES = sorted(
    f"crossplan/1 {s.id} v{n}/{s.vials} {s.dates.set_up}"
    for s in example_plan().steps
    for n in range(1, s.vials + 1)
    if s.dates
)


@pytest.mark.parametrize("dpi", [203, 300])
@pytest.mark.parametrize("name", LAYOUTS)
def test_every_code_is_read_back_from_the_print(name: str, dpi: int) -> None:
    assert sorted(codes(labels_pdf(example_plan(), LAYOUTS[name]), dpi)) == ALL_CODES


@pytest.mark.parametrize("dpi", [203, 300])
def test_a_code_of_long_numbers_still_fits_the_smallest_label(dpi: int) -> None:
    plan = example_plan()
    plan.steps[0] = plan.steps[0].model_copy(update={"id": "S1204b", "vials": 10})
    assert "crossplan/1 S1204b v10/10 2027-02-22" in codes(labels_pdf(plan, SMALLEST, steps=["S1204b"]), dpi)


def test_codes_say_what_they_said_when_they_are_parsed() -> None:
    code = read_vial_code(ALL_CODES[0])
    assert code is not None
    assert (code.step, code.vial, code.vials, code.set_up) == ("S01", 1, 4, "2027-02-22")
    assert code.text() == ALL_CODES[0]


def test_a_label_says_what_the_vial_needs() -> None:
    words = texts(labels_pdf(example_plan(), DEFAULT, steps=["S01"]))[0]
    for part in ("♀ K12-AD × ♂ double balancer", "AD-K12@attP40/CyO", "virgin females: curly wings", "25 °C"):
        assert part in words
    for day in (
        "set up Mon 22 Feb",
        "clear Fri 26 Feb",
        "collect Thu 4 Mar – Mon 8 Mar",
        "discard Fri 12 Mar",
    ):
        assert day in words
    assert words.count("S01") == 4
    assert [f"{n}/4" in words for n in (1, 2, 3, 4)] == [True] * 4


def test_each_chromosome_has_a_line_of_its_own() -> None:
    page = pypdf.PdfReader(io.BytesIO(labels_pdf(example_plan(), DEFAULT, steps=["S03"]))).pages[0]
    height: dict[str, float] = {}

    def note(text: str, cm: list[float], tm: list[float], *_: object) -> None:
        for start in ("X: w", "2: AD", "3: DBD"):
            if text.strip().startswith(start):
                height.setdefault(start, round(cm[5] + tm[5], 1))

    page.extract_text(visitor_text=note)
    assert height["X: w"] > height["2: AD"] > height["3: DBD"]


def test_superscripts_are_small_and_raised() -> None:
    page = pypdf.PdfReader(io.BytesIO(labels_pdf(example_plan(), roll(50, 25), steps=["S01"]))).pages[0]
    found: dict[str, tuple[float, float]] = {}

    def note(text: str, cm: list[float], tm: list[float], _font: object, size: float) -> None:
        found.setdefault(text.strip(), (cm[5] + tm[5], size))

    page.extract_text(visitor_text=note)
    assert "[1118]" not in page.extract_text()
    (base, size), (raised, small) = found["X: w"], found["1118"]
    assert raised > base
    assert small < size


def test_only_control_crosses_are_marked() -> None:
    assert "CONTROL" in texts(labels_pdf(example_plan(), DEFAULT, steps=["S05"]))[0]
    assert "CONTROL" not in texts(labels_pdf(example_plan(), DEFAULT, steps=["S04"]))[0]
    assert "CONTROL" in texts(labels_pdf(example_plan(), SMALLEST, steps=["S05"]))[0]


def test_ink_is_black_only() -> None:
    pdf = labels_pdf(example_plan(), DEFAULT)
    content = pypdf.PdfReader(io.BytesIO(pdf)).pages[0].get_contents()
    assert content is not None
    found = re.findall(rb"((?:[\d.]+ )+)(?:g|G|rg|RG|k|K)\b", content.get_data())
    assert {float(value) for values in found for value in values.split()} == {0.0, 1.0}


# --- long genotypes -----------------------------------------------------------------------------------------


def test_a_long_genotype_on_the_smallest_label_is_shortened_with_a_mark() -> None:
    plan = long_plan()
    assert len("".join(LONG_SYMBOLS)) > 200
    assert "S04" in shortened_labels(plan, SMALLEST)
    words = texts(labels_pdf(plan, SMALLEST, steps=["S04"]))[0]
    assert "…" in words
    assert "2: made-up-01" in words
    assert LONG_SYMBOLS[-1] not in words


def test_a_long_genotype_stands_whole_where_there_is_room() -> None:
    plan, layout = long_plan(), layout_named("a4-63x34")
    assert "S04" not in shortened_labels(plan, layout)
    words = packed(labels_pdf(plan, layout, steps=["S04"]))
    assert "…" not in words
    for number in range(1, 8):
        assert f"made-up-{number:02d}-GAL4.DBD}}VK{number:05d}" in words


@pytest.mark.parametrize("name", ["roll-25x13", "roll-38x19", "roll-50x25"])
def test_nothing_runs_over_the_edge(name: str) -> None:
    """On a larger page, what hangs over the edge of the label shows as ink outside it."""
    import numpy as np

    small = LAYOUTS[name]
    width, height = small.label_width, small.label_height
    wide = sheet((width + 40, height + 40), 1, 1, width, height, margin_left=20, margin_top=20)
    for picture in pictures(labels_pdf(long_plan(), wide), 300):
        dots = 300 / 25.4
        inside = np.zeros_like(picture, dtype=bool)
        inside[int(20 * dots) : int((20 + height) * dots) + 1, int(20 * dots) : int((20 + width) * dots) + 1] = True
        assert (picture[inside] == 0).any()
        assert not (picture[~inside] == 0).any()


@pytest.mark.parametrize("name", ["roll-25x13", "a4-38x21", DEFAULT_LAYOUT])
def test_nothing_is_printed_into_the_code(name: str) -> None:
    """The code of the long label is read as well as any other."""
    wanted = [f"crossplan/1 S04 v{n}/6 2027-03-22" for n in range(1, 7)]
    assert sorted(codes(labels_pdf(long_plan(), LAYOUTS[name], steps=["S04"]), 203)) == wanted


def test_a_character_that_the_font_lacks_is_a_box() -> None:
    plan = example_plan()
    mother = plan.steps[0].mother.model_copy(update={"stock": "猫 α-Cat"})
    plan.steps[0] = plan.steps[0].model_copy(update={"mother": mother})
    assert "□ α-Cat" in texts(labels_pdf(plan, DEFAULT, steps=["S01"]))[0]


@pytest.mark.parametrize("dpi", [203, 300])
def test_the_longest_genotype_of_the_reference_corpus_on_the_smallest_label(dpi: int) -> None:
    """Both as a vial label and as a stock label: shortened with a mark, the code still read."""
    from crossplan.genetics.notation import fly_json, read_genotype
    from crossplan.plan.model import FlyRecord
    from tests.reference.test_notation_corpus import UNDERSTOOD

    text = max((text for text, _ in UNDERSTOOD), key=len)
    female = read_genotype(text).female
    assert female is not None
    kept = FlyRecord.model_validate(fly_json(female))
    plan = example_plan()
    keep = plan.steps[3].keep.model_copy(update={"fly": kept, "members": [kept]})
    plan.steps[3] = plan.steps[3].model_copy(update={"keep": keep})
    pdf = labels_pdf(plan, SMALLEST, steps=["S04"], vials=[1])
    assert codes(pdf, dpi) == ["crossplan/1 S04 v1/6 2027-03-22"]
    assert ("…" in texts(pdf)[0]) == ("S04" in shortened_labels(plan, SMALLEST))
    stock = StockLabel("PT177", text)
    pdf = stock_labels_pdf([stock], SMALLEST)
    assert codes(pdf, dpi) == [stock_code("PT177")]
    assert ("…" in texts(pdf)[0]) == bool(shortened_stock_labels([stock], SMALLEST))


def test_the_short_form_leaves_out_white_eyes_then_sites_and_says_so() -> None:
    plan = example_plan()
    keep = plan.steps[2].keep.model_copy(update={"rule": "males: curly wings"})
    plan.steps[2] = plan.steps[2].model_copy(update={"keep": keep})
    words = texts(labels_pdf(plan, SMALLEST, steps=["S03"]))[0]
    assert "S03" in shortened_labels(plan, SMALLEST)
    assert "2: AD-K12/CyO; 3: DBD-Q07/TM6B Tb1 …" in words


def test_what_to_keep_stands_whole_before_the_genotype_does() -> None:
    words = texts(labels_pdf(example_plan(), SMALLEST, steps=["S01"]))[0]
    assert "keep virgin females: curly wings, extra humeral bristles" in words


# --- stock labels -------------------------------------------------------------------------------------------

STOCKS = [
    StockLabel("PT025", "w[1118]; P{y[+t7.7] w[+mC]=AD-K12}attP40/CyO", "T02/12", 18.0),
    StockLabel("double balancer α", "w; Sp/CyO; TM2/TM6B, Tb[1]"),
    StockLabel("n" * 900, "w; +; " + " ".join(LONG_SYMBOLS), "cold room, rack 3"),
]


@pytest.mark.parametrize("dpi", [203, 300])
@pytest.mark.parametrize("name", LAYOUTS)
def test_stock_codes_are_read_back_and_a_name_too_long_has_none(name: str, dpi: int) -> None:
    found = codes(stock_labels_pdf(STOCKS[:2], LAYOUTS[name]), dpi)
    assert sorted(found) == sorted(stock_code(s.name) for s in STOCKS[:2])
    assert STOCKS[2].name in shortened_stock_labels(STOCKS, LAYOUTS[name])


def test_a_stock_label_says_name_place_and_genotype() -> None:
    words = texts(stock_labels_pdf(STOCKS, DEFAULT, names=["PT025"]))[0]
    for part in ("PT025", "T02/12 · 18 °C · flipped", "P{y+t7.7 w+mC=AD-K12}attP40/CyO"):
        assert part in words
    assert read_stock_code(stock_code("PT 1: a")) == "PT 1: a"
    assert read_stock_code("crossplan/1 S01 v1/4 undated") is None
    assert read_vial_code(stock_code("x v1/2 undated")) is None


def test_a_name_is_not_broken_where_it_fits_below_the_code() -> None:
    stock = StockLabel("PT024", "w[1118] P{y[+t7.7] w[+mC]=UAS-CsChrimson}attP18")
    assert "w+mC=UAS-CsChrimson}attP18" in texts(stock_labels_pdf([stock], SMALLEST))[0]


def test_a_stock_that_is_not_on_the_list_is_refused() -> None:
    with pytest.raises(InputError, match="no PT999"):
        stock_labels_pdf(STOCKS, DEFAULT, names=["PT999"])


# --- choice and places --------------------------------------------------------------------------------------


def test_labels_come_in_the_order_of_setting_up() -> None:
    found = codes(labels_pdf(example_plan(), SMALLEST), 203)
    assert [c.split()[1] for c in found] == ["S01"] * 4 + ["S02"] * 2 + ["S03"] * 4 + ["S05"] * 2 + ["S04"] * 6


def test_choice_by_step_day_and_person() -> None:
    plan = example_plan()
    assert len(codes(labels_pdf(plan, SMALLEST, steps=["S02", "S05"]), 203)) == 4
    assert len(codes(labels_pdf(plan, SMALLEST, dates=["2027-02-22"]), 203)) == 6
    assert len(codes(labels_pdf(plan, SMALLEST, dates=["2027-02-22"], person="Tomas"), 203)) == 2


def test_one_vial_printed_again() -> None:
    assert codes(labels_pdf(example_plan(), SMALLEST, steps=["S04"], vials=[3]), 203) == [
        "crossplan/1 S04 v3/6 2027-03-22"
    ]


def test_copies_and_a_sheet_already_begun() -> None:
    plan = example_plan()
    pages = texts(labels_pdf(plan, DEFAULT, steps=["S02"], start_at=43, copies=2))
    assert [page.count("S02") for page in pages] == [2, 2]


def test_the_first_label_stands_at_the_place_asked_for() -> None:
    picture = pictures(labels_pdf(example_plan(), DEFAULT, steps=["S02"], start_at=6), 100)[0]
    rows, columns = (picture == 0).nonzero()
    x, y = DEFAULT.corner(5)
    assert x <= columns.min() * 25.4 / 100 <= x + 3
    assert y <= rows.min() * 25.4 / 100 <= y + 4


@pytest.mark.parametrize(
    ("options", "words"),
    [
        ({"steps": ["S99"]}, "S99"),
        ({"person": "Nobody"}, "Ida, Tomas"),
        ({"dates": ["11.1.2027"]}, "YYYY-MM-DD"),
        ({"dates": ["2027-01-01"]}, "no labels"),
        ({"start_at": 45}, "1 to 44"),
        ({"start_at": 0}, "1 to 44"),
        ({"copies": 0}, "copy"),
    ],
)
def test_what_cannot_be_printed_is_refused_in_words(options: dict[str, object], words: str) -> None:
    with pytest.raises(InputError) as caught:
        labels_pdf(example_plan(), DEFAULT, **options)  # type: ignore[arg-type]
    assert words in f"{caught.value.message} {caught.value.hint}"


def test_a_plan_without_days_and_counts_still_gets_labels() -> None:
    plan = example_plan()
    plan.steps[0] = plan.steps[0].model_copy(update={"dates": None, "vials": 0})
    pdf = labels_pdf(plan, DEFAULT, steps=["S01"])
    assert codes(pdf, 203) == ["crossplan/1 S01 v1/1 undated"]
    assert "set up ____" in texts(pdf)[0]


# --- the same bytes -----------------------------------------------------------------------------------------


def test_same_plan_same_bytes() -> None:
    assert labels_pdf(example_plan(), DEFAULT) == labels_pdf(example_plan(), DEFAULT)


def test_same_bytes_in_another_process_with_another_hash_seed() -> None:
    here = Path(__file__).parent
    code = (
        "import hashlib\nfrom example_plan import example_plan\nfrom crossplan.bench.bench_sheet import "
        "bench_sheet_pdf\n"
        "from crossplan.bench.calendar_file import calendar_ics\nfrom crossplan.bench.labels import "
        "labels_pdf\n"
        "from crossplan.bench.report import report_html\nfrom crossplan.bench.sheet_layout import "
        "layout_named\n"
        "p = example_plan()\n"
        "all = labels_pdf(p, layout_named('a4-48x25')) + bench_sheet_pdf(p) + calendar_ics(p) + "
        "report_html(p).encode()\n"
        "print(hashlib.sha256(all).hexdigest())"
    )
    path = os.pathsep.join([str(here), str(here.parents[1])])
    digests = {
        subprocess.run(
            [sys.executable, "-c", code],
            env={**os.environ, "PYTHONPATH": path, "PYTHONHASHSEED": seed, "TZ": zone},
            check=True, capture_output=True, text=True,
        ).stdout
        for seed, zone in (("1", "UTC"), ("77", "Asia/Tokyo"))
    }  # fmt: skip
    assert len(digests) == 1
