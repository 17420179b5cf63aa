"""What a shelf lacks for targets, judged by the parts alone and with the search."""

from __future__ import annotations

from pathlib import Path

import pytest

from crossplan import api
from crossplan.genetics.catalogue import default_catalogue
from crossplan.plan.screen_file import read_screen
from crossplan.schemes.gap_report import GapReport
from crossplan.schemes.gaps import Gaps, TargetGap, fewest_stocks, find_gaps, least_generations
from crossplan.schemes.screen_plan import sources_of

ROWS = [
    "A1|w[1118]; AD-K1@attP40|2",
    "A2|w[1118]; AD-K2@attP40|1",
    "D1|w[1118];; DBD-Q1@attP2|2",
    "D2|w[1118];; DBD-Q2@attP2|2",
    "P1|w[1118]; AD-K3@attP40; DBD-Q3@attP2|2",
    "E1|w[1118] UAS-CsChrimson@attP18|2",
    "E0|w[1118] UAS-CsChrimson@attP18; Sco/CyO|2",
    "E2|w[1118]; UAS-Kir2.1@attP40|2",
    "G1|w[1118]; tubP-GAL80ts@attP16|2",
    "B2|w[1118]; Sco/CyO; TM3, Sb/TM6B, Tb|2",
    "W1|w[1118]|2",
]


def shelf_of(folder: Path, rows: list[str] | None = None, name: str = "stocks.csv") -> Path:
    path = folder / name
    path.write_text("\n".join(("stock|genotype|copies", *(rows or ROWS))) + "\n", encoding="utf-8")
    return path


def screen_of(folder: Path, *targets: tuple[str, str], effectors: str = "") -> Path:
    lines = ["[screen]", 'name = "test"', f"effectors = [{effectors}]", "[search]", "max_generations = 2"]
    for name, parts in targets:
        listed = ", ".join(f'"{p.strip()}"' for p in parts.split(","))
        lines += ["[[target]]", f'target = "{name}"', f"components = [{listed}]"]
    path = folder / "screen.toml"
    path.write_text("\n".join(lines) + "\n", encoding="utf-8")
    return path


def gaps_of(folder: Path, *targets: tuple[str, str], rows: list[str] | None = None) -> Gaps:
    shelf = api.read_stocks(shelf_of(folder, rows))
    request = read_screen(screen_of(folder, *targets))
    return find_gaps(request.targets, sources_of(shelf), default_catalogue())


def one(folder: Path, parts: str) -> TargetGap:
    return gaps_of(folder, ("t", parts)).targets[0]


def test_parts_that_are_there(tmp_path: Path) -> None:
    assert one(tmp_path, "AD-K3@attP40, DBD-Q3@attP2").status == "in stock"
    assert one(tmp_path, "AD-K3, DBD-Q3, UAS-CsChrimson").at_least == 1
    found = one(tmp_path, "AD-K1, DBD-Q1, UAS-CsChrimson")
    assert (found.status, found.at_least) == ("parts there", 2)
    assert found.components == ("AD-K1@attP40", "DBD-Q1@attP2", "UAS-CsChrimson@attP18")


def test_parts_that_nobody_has(tmp_path: Path) -> None:
    found = one(tmp_path, "AD-K9@attP40, DBD-Q1, UAS-zap")
    assert found.status == "lacking"
    assert found.needs == (frozenset(("AD-K9@attP40",)), frozenset(("UAS-zap",)))
    assert "AD-K9@attP40" in found.reason
    assert "AD-K1" in one(tmp_path, "AD-K11@attP40").reason


def test_three_at_one_site_need_one_of_them_elsewhere(tmp_path: Path) -> None:
    found = one(tmp_path, "AD-K1, AD-K2, UAS-Kir2.1")
    assert found.status == "lacking"
    assert len(found.needs) == 1
    assert len(found.needs[0]) == 3


def test_what_is_obtained_may_not_fit_either(tmp_path: Path) -> None:
    found = one(tmp_path, "AD-K1, UAS-Kir2.1, AD-K9@attP40")
    assert found.needs[0] == {"AD-K9@attP40"}
    assert len(found.needs) == 2
    assert "and then" in found.reason


def test_wishes_that_no_stock_mends(tmp_path: Path) -> None:
    rows = [*ROWS, "E3|w[1118];; UAS-Kir2.1@VK00005|2"]
    found = gaps_of(tmp_path, ("t", "AD-K1, DBD-Q1, UAS-Kir2.1"), rows=rows).targets[0]
    assert (found.status, found.needs) == ("never", ())
    assert "ambiguous" in found.reason


def test_parts_that_do_not_go_together_are_told(tmp_path: Path) -> None:
    assert "does not stop" in one(tmp_path, "AD-K1, DBD-Q1, tubP-GAL80ts").cautions[0]


def test_stocks_by_which_targets_hang(tmp_path: Path) -> None:
    gaps = gaps_of(tmp_path, ("t", "AD-K1, DBD-Q1"), ("u", "AD-K2, DBD-Q1"), ("v", "AD-K3, DBD-Q3"))
    assert [(h.stock, h.targets) for h in gaps.hangs_by] == [
        ("D1", ("t", "u")), ("A1", ("t",)), ("A2", ("u",)), ("P1", ("v",)),
    ]  # fmt: skip


def test_base_stocks_that_shorten_most(tmp_path: Path) -> None:
    effector = "UAS-CsChrimson"
    gaps = gaps_of(tmp_path, ("t", f"AD-K1, DBD-Q1, {effector}"), ("u", f"AD-K2, DBD-Q1, {effector}"))
    first = gaps.base_stocks[0]
    assert first.components == ("DBD-Q1@attP2", "UAS-CsChrimson@attP18")
    assert first.shortens == ("t", "u")


@pytest.mark.parametrize(
    ("masks", "stocks", "generations"),
    [({1}, 1, 1), ({1, 2}, 2, 1), ({1, 2, 4}, 3, 2), ({3, 4}, 2, 1), ({1, 2, 4, 8}, 4, 2), ({1, 2, 4, 8, 16}, 5, 3),
     ({3, 6, 4}, 2, 1)],
)  # fmt: skip
def test_lower_bound_of_generations(masks: set[int], stocks: int, generations: int) -> None:
    assert fewest_stocks(masks) == stocks
    assert least_generations(masks) == generations


# -- with the search, and stocks on offer -------------------------------------------------------------------------


@pytest.fixture
def report(tmp_path: Path) -> GapReport:
    screen = screen_of(
        tmp_path, ("t", "AD-K1, DBD-Q1, UAS-CsChrimson"), ("u", "AD-K9@attP40, DBD-Q1"), ("v", "AD-K8@attP40, DBD-Q9@attP2"),
        ("w", "AD-K3, DBD-Q3"),
    )  # fmt: skip
    return api.find_gaps(shelf_of(tmp_path), screen)


def test_the_bound_is_never_above_what_the_search_finds(report: GapReport) -> None:
    for gap in report.gaps.targets:
        made = report.made.get(gap.target)
        if made is not None and made.generations is not None:
            assert gap.at_least is not None
            assert gap.at_least <= made.generations
    assert report.made["w"].generations == 0
    assert report.made["t"].generations == 2


def test_a_base_stock_is_tried(report: GapReport) -> None:
    assert any(b.shorter == ("t",) for b in report.bases)


def test_what_to_obtain(report: GapReport) -> None:
    assert report.least.answers == (("AD-K8@attP40", "AD-K9@attP40", "DBD-Q9@attP2"),)
    assert [(n, met) for n, met, _ in report.least.steps] == [(1, 1), (2, 1), (3, 2)]
    assert report.unlocks[0].what == "AD-K9@attP40"
    assert report.unlocks[0].alone == 1
    assert {h.what for h in report.helpers} >= {
        "a balancer of the X",
        "a wild type with red eyes",
        "an empty AD half at attP40",
    }


def test_stocks_on_offer(tmp_path: Path) -> None:
    screen = screen_of(
        tmp_path, ("u", "AD-K9@attP40, DBD-Q1"), ("v", "AD-K8@attP40, DBD-Q9@attP2"), ("x", "AD-K1, AD-K2, UAS-Kir2.1"),
        ("y", "AD-K77@attP40"),
    )  # fmt: skip
    offers = shelf_of(
        tmp_path,
        ["O1|w; AD-K9@attP40|1", "O2|w; AD-K8@attP40; DBD-Q9@attP2|1", "O3|w;; UAS-Kir2.1@VK00005|1", "O4|w; UAS-Kir2.1@attP40|1",
         "O5|w; AD-K8@attP40|1"],
        "offers.csv",
    )  # fmt: skip
    report = api.find_gaps(shelf_of(tmp_path), screen, offers=offers, search=False)
    assert report.least.answers == (("O1", "O2", "O3"),)
    assert report.least.out_of_reach == ("y",)
    assert {u.what for u in report.unlocks} == {"O1", "O2", "O3", "O5"}


def test_the_reports_say_what_the_document_says(report: GapReport, tmp_path: Path) -> None:
    html, table = api.write_gaps(report, html=tmp_path / "g.html", table=tmp_path / "g.csv")
    assert "AD-K9@attP40" in html.read_text(encoding="utf-8")
    rows = table.read_text(encoding="utf-8").splitlines()
    assert len(rows) == 1 + len(report.gaps.targets)
    document = api.gap_report_json(report)
    assert [t["status"] for t in document["targets"]] == ["parts there", "lacking", "lacking", "in stock"]
