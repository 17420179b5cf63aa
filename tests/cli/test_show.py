"""`crossplan show`, `labels` and `calendar` as a user types them."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest
from typer.testing import CliRunner

from crossplan.cli.app import app
from crossplan.errors import InputError
from tests.bench.example_plan import virgins_plan

RUN = CliRunner()


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    (tmp_path / "plan.json").write_text(virgins_plan().model_dump_json(by_alias=True), encoding="utf-8")
    return tmp_path


@pytest.mark.parametrize("columns", ["80", "160"])
def test_show_fits_the_terminal_and_has_no_colour(folder: Path, columns: str) -> None:
    done = RUN.invoke(app, ["show", str(folder), "S03", "2027-03-17"], env={"COLUMNS": columns, "TERM": "xterm"})
    assert done.exit_code == 0
    assert max(map(len, done.output.splitlines())) <= int(columns)
    assert "\x1b" not in done.output
    assert "15:00 VIRGINS" in done.output


def test_colour_terminals_get_weight_only(folder: Path) -> None:
    done = RUN.invoke(app, ["show", "S03", "--plan", str(folder)], env={"FORCE_COLOR": "1", "TERM": "xterm-256color"})
    assert set(re.findall(r"\x1b\[([0-9;]*)m", done.output)) <= {"1", "0"}


def test_show_as_one_document(folder: Path) -> None:
    assert json.loads(RUN.invoke(app, ["show", str(folder), "S03", "--json"]).output)["step"]["id"] == "S03"
    target = json.loads(RUN.invoke(app, ["show", str(folder), "empty > CsChrimson", "--json"]).output)
    assert [s["id"] for s in target["steps"]] == ["S05"]
    several = json.loads(RUN.invoke(app, ["show", str(folder), "S03", "2027-03-17", "--json"]).output)
    assert several["shown"][1]["day"] == "2027-03-17"


def test_labels_of_one_vial_and_of_stocks(folder: Path) -> None:
    out = folder / "one.pdf"
    done = RUN.invoke(app, ["labels", str(folder), "--step", "S04", "--vial", "2", "--sheet", "roll 25x13",
                            "--out", str(out), "--json"])  # fmt: skip
    assert json.loads(done.output)["shortened"] == ["S04"]
    assert out.read_bytes().startswith(b"%PDF")
    table = folder / "stocks.csv"
    table.write_text("stock,genotype\nA1,w[1118]\nA2,w; Sp/CyO\n", encoding="utf-8")
    done = RUN.invoke(app, ["labels", "--stocks", str(table), "--stock", "A2", "--out", str(out)])
    assert done.exit_code == 0
    for wrong in (
        ["labels"],
        ["labels", str(folder), "--stocks", str(table)],
        ["labels", str(folder), "--stock", "A1"],
    ):
        assert isinstance(RUN.invoke(app, wrong).exception, InputError)


def test_a_calendar_for_each_person_and_again(folder: Path) -> None:
    cals = folder / "cals"
    arguments = ["calendar", str(folder), "--per-person", "--out", str(cals)]
    assert RUN.invoke(app, arguments).exit_code == 0
    before = {p.name: p.read_bytes() for p in cals.iterdir()}
    assert sorted(before) == ["calendar-Ida.ics", "calendar-Tomas.ics"]
    assert RUN.invoke(app, [*arguments, "--instead-of", str(cals)]).exit_code == 0
    assert {p.name: p.read_bytes() for p in cals.iterdir()} == before
    one = cals / "calendar-Ida.ics"
    assert isinstance(RUN.invoke(app, [*arguments, "--instead-of", str(one)]).exception, InputError)
    assert isinstance(RUN.invoke(app, [*arguments, "--person", "Ida"]).exception, InputError)


def test_methods_drawings_and_sheets(folder: Path) -> None:
    for name in ("m.csv", "m.md", "m.tex"):
        done = RUN.invoke(app, ["methods", str(folder), "--out", str(folder / name), "--json"])
        assert json.loads(done.output)["genotypes"] == 2
    for form in ("svg", "png"):
        done = RUN.invoke(app, ["draw", str(folder), "empty > CsChrimson", "--out", str(folder), "--format", form])
        assert done.exit_code == 0
        assert (folder / f"scheme-empty---CsChrimson.{form}").stat().st_size > 1000
    assert isinstance(RUN.invoke(app, ["draw", str(folder), "S9", "--format", "gif"]).exception, InputError)
    out = folder / "ida.pdf"
    assert (
        RUN.invoke(app, ["sheets", str(folder), "--person", "Ida", "--paper", "Letter", "--out", str(out)]).exit_code
        == 0
    )
    assert out.read_bytes().startswith(b"%PDF")


def test_methods_in_the_notation_of_the_list(folder: Path) -> None:
    table = folder / "stocks.csv"
    table.write_text(
        "stock,genotype,received from\nK12-AD,w; P{y[+t7.7] w[+mC]=AD-K12}attP40/CyO,Linnet lab\n", "utf-8"
    )
    RUN.invoke(app, ["methods", str(folder), "--stocks", str(table), "--out", str(folder / "m.csv")])
    written = (folder / "m.csv").read_text("utf-8")
    assert "P{y[+t7.7] w[+mC]=AD-K12}attP40/+" in written
    assert "K12-AD (Linnet lab)" in written
