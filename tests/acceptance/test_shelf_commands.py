"""Audit, gaps, rota, checklist, comparison and corrections, as a user types them."""

from __future__ import annotations

import csv
import json
from pathlib import Path

import pytest
from typer.testing import CliRunner

from crossplan.cli.app import app

DEMO = Path(__file__).resolve().parents[2] / "demo_stocks"
STOCKS = str(DEMO / "stocks.csv")
TODAY = "2026-12-01"
RUNNER = CliRunner()


def run(*arguments: str, status: int = 0) -> str:
    result = RUNNER.invoke(app, list(arguments))
    assert result.exit_code == status, result.output
    return result.stdout


def small(folder: Path, *rows: str) -> str:
    path = folder / "small.csv"
    path.write_text("\n".join(("stock|genotype|copies|last flip", *rows)) + "\n", encoding="utf-8")
    return str(path)


def test_the_contract_of_the_audit() -> None:
    out = run(
        "audit",
        "--stocks",
        STOCKS,
        "--screen",
        str(DEMO / "screen.toml"),
        "--quick",
        "--today",
        TODAY,
        "--json",
        status=1,
    )
    document = json.loads(out)
    assert document["stocks"] == 170
    assert set(document["findings"][0]) >= {"code", "severity", "stock", "row", "message", "suggestion", "why"}
    gaps = {g["target"]: g["missing"] for g in document["gaps"]}
    assert gaps["cf-22"] == ["AD-K21@attP40"]
    assert len(gaps["cf-23"]) == 3
    assert {"what": "AD-K21@attP40", "unlocks": 1} in document["acquire"]
    assert document["obtain"][0]["needed_by"] == ["cf-22"]
    assert len(document["least_sets"]) == 3


@pytest.mark.parametrize(
    ("row", "fail_on", "status"),
    [
        ("A|w; Sco/CyO|2|", "warning", 0),
        ("A|w; Sco/CyO|1|", "warning", 1),
        ("A|w; Sco/CyO|1|", "error", 0),
        ("A|w; Sco/+|2|", "error", 1),
        ("A|w; Sco/+|1|", "never", 0),
        ("A|w; MKRS/TM6B, Tb|2|", "warning", 0),
        ("A|w; MKRS/TM6B, Tb|2|", "note", 1),
    ],
)
def test_exit_status_of_a_nightly_job(row: str, fail_on: str, status: int, tmp_path: Path) -> None:
    run("audit", "--stocks", small(tmp_path, row), "--fail-on", fail_on, "--today", TODAY, status=status)


def test_an_accepted_finding_no_longer_fails_the_job(tmp_path: Path) -> None:
    stocks, accepted = small(tmp_path, "A|w; Sco/CyO|1|"), str(tmp_path / "accepted.toml")
    run("accept", "single-copy", "A", "--because", "the centre has it", "--stocks", stocks, "--accepted", accepted)
    out = run("audit", "--stocks", stocks, "--accepted", accepted, "--today", TODAY)
    assert "1 accepted" in out
    assert "the centre has it" in out
    small(tmp_path, "A|w; Sco/CyO|2|")
    assert "take the entry out" in " ".join(run("audit", "--stocks", stocks, "--accepted", accepted).split())


def test_accepting_what_is_not_there_is_refused(tmp_path: Path) -> None:
    result = RUNNER.invoke(app, ["accept", "overdue", "A", "--because", "x", "--stocks", small(tmp_path, "A|w|2|")])
    assert result.exit_code != 0


def test_reports_of_the_audit(tmp_path: Path) -> None:
    html, table = tmp_path / "a.html", tmp_path / "a.csv"
    run("audit", "--stocks", STOCKS, "--today", TODAY, "--html", str(html), "--csv", str(table), status=1)
    text = html.read_text(encoding="utf-8")
    assert "Content-Security-Policy" in text
    assert "why it matters" in text
    assert "http" not in text.replace("http-equiv", "")
    with table.open(encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    assert {r["code"] for r in rows} >= {"bracket", "overdue", "duplicate"}


def test_text_of_the_list_does_no_harm_in_the_reports(tmp_path: Path) -> None:
    stocks = small(tmp_path, "<script>alert(1)</script>|w; Sco/+|1|", "=1+1|y; Sco/+|1|")
    html, table = tmp_path / "a.html", tmp_path / "a.csv"
    run("audit", "--stocks", stocks, "--html", str(html), "--csv", str(table), status=1)
    assert "<script>alert" not in html.read_text(encoding="utf-8")
    with table.open(encoding="utf-8", newline="") as file:
        assert not any(cell.startswith("=") for row in csv.reader(file) for cell in row)


def test_the_stock_list_is_not_overwritten(tmp_path: Path) -> None:
    stocks = small(tmp_path, "A|w|1|")
    before = Path(stocks).read_text(encoding="utf-8")
    for arguments in (
        ("audit", "--stocks", stocks, "--csv", stocks), ("checklist", "--stocks", stocks, "--out", stocks),
        ("correct", stocks, "--out", stocks), ("accept", "single-copy", "A", "--because", "x", "--stocks", stocks, "--accepted", stocks),
    ):  # fmt: skip
        assert RUNNER.invoke(app, list(arguments)).exit_code != 0
        assert Path(stocks).read_text(encoding="utf-8") == before


def test_gaps_of_the_demo(tmp_path: Path) -> None:
    out = run(
        "gaps", str(DEMO / "screen.toml"), "--stocks", STOCKS, "--quick", "--html", str(tmp_path / "g.html"), status=1
    )
    assert "AD-K21@attP40" in out
    assert "at least" in out
    assert (tmp_path / "g.html").exists()
    document = json.loads(run("gaps", str(DEMO / "screen.toml"), "--stocks", STOCKS, "--quick", "--json", status=1))
    assert document["least_size"] == 2
    assert document["proved_least"] is True


def test_the_rota_as_files(tmp_path: Path) -> None:
    from icalendar import Calendar

    out = run(
        "rota", "--stocks", STOCKS, "--from", TODAY, "--weeks", "2", "--people", "Maren, Tovi", "--out", str(tmp_path)
    )
    assert "Tue 01 Dec 2026" in out
    assert (tmp_path / "rota.pdf").read_bytes().startswith(b"%PDF")
    events = Calendar.from_ical((tmp_path / "rota.ics").read_bytes()).walk("VEVENT")
    assert {str(e["summary"]).partition(":")[0] for e in events} == {"Maren", "Tovi"}
    with (tmp_path / "rota.csv").open(encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    document = json.loads(
        run("rota", "--stocks", STOCKS, "--from", TODAY, "--weeks", "2", "--people", "Maren, Tovi", "--json")
    )
    assert len(rows) == len(document["transfers"])
    assert sum(int(r["vials"]) for r in rows) == sum(t["vials"] for t in document["transfers"])


def test_a_rota_for_no_day_is_refused() -> None:
    assert RUNNER.invoke(app, ["rota", "--stocks", STOCKS, "--days", "Someday"]).exit_code != 0
    assert RUNNER.invoke(app, ["rota", "--stocks", STOCKS, "--days", ""]).exit_code != 0


def test_checklist_comparison_and_corrections(tmp_path: Path) -> None:
    table = tmp_path / "checks.csv"
    run("checklist", "--stocks", STOCKS, "--out", str(table))
    assert "curly wings, missing bristles, white eyes" in table.read_text(encoding="utf-8")
    new = tmp_path / "new.csv"
    out = run("correct", STOCKS, "--out", str(new), status=1)
    assert "PT098" in (tmp_path / "new.changes.csv").read_text(encoding="utf-8")
    assert "TM6B" in out
    out = " ".join(run("compare", STOCKS, str(new)).split())
    assert "PT098 can be read now" in out
    changes = json.loads(run("compare", STOCKS, str(new), "--json"))["changes"]
    assert {c["kind"] for c in changes} <= {"readable", "genotype", "spelling"}
    assert run("compare", STOCKS, STOCKS).strip() == "The two lists say the same."
