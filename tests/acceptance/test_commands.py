"""The commands as a user types them: what they print, what they write, how they fail."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path
from typing import Any

import pytest

ROOT = Path(__file__).resolve().parents[2]
ONE = ROOT / "examples" / "01-one-cross"


def run(*arguments: str | Path) -> subprocess.CompletedProcess[str]:
    """Run crossplan as a user would, in a terminal of 100 columns without colour."""
    return subprocess.run(
        [sys.executable, "-m", "crossplan", *map(str, arguments)],
        capture_output=True,
        text=True,
        cwd=ROOT,
        env={"PATH": "", "COLUMNS": "100", "NO_COLOR": "1", "PYTHONPATH": str(ROOT), "PYTHONUTF8": "1"},
    )


def document(*arguments: str | Path) -> Any:
    done = run(*arguments, "--json")
    assert done.returncode in (0, 1), done.stderr
    return json.loads(done.stdout)


class TestProgeny:
    def test_json_follows_the_contract(self) -> None:
        result = document("progeny", "w[1118]; AD-K12@attP40/CyO", "w[1118]; +; DBD-Q07@attP2/TM6B, Tb[1]")
        assert set(result) >= {"mother", "father", "classes", "dead"}
        assert sum(c["share"] for c in result["classes"]) == pytest.approx(1.0)
        assert {c["exact"] for c in result["classes"]} == {"1/8"}
        fly = result["mother"]
        assert fly["2"] == [["AD-K12@attP40"], ["CyO"]]
        assert fly["X"] == [["w[1118]"], ["w[1118]"]]
        assert result["father"]["X"] == [["w[1118]"], ["Y"]]

    def test_stock_names_are_looked_up(self) -> None:
        result = document("progeny", "W21", "Chrim-X", "--stocks", ONE / "stocks.csv")
        assert "GAL4-W21@attP2" in result["mother"]["genotype"]

    def test_a_dead_parent_is_refused(self) -> None:
        done = run("progeny", "w; CyO/CyO", "w")
        assert done.returncode == 2
        assert "cannot live" in done.stderr
        assert "Traceback" not in done.stderr


class TestRead:
    def test_contract_and_status(self) -> None:
        result = document("read", "w; AD-K12@attP40/CyO; +/TM6B", "w; P{UAS-GFP")
        good, bad = result["readings"]
        assert good["ok"]
        assert good["flies"]["female"]["3"] == [[], ["TM6B"]]
        assert not bad["ok"]
        (error,) = [p for p in bad["problems"] if p["severity"] == "error"]
        assert bad["text"][error["start"] : error["end"]] == "{"

    def test_table_column(self) -> None:
        result = document("read", "--file", ONE / "stocks.csv")
        assert all(r["ok"] for r in result["readings"])

    def test_nothing_given(self) -> None:
        assert run("read").returncode == 2


class TestNumbers:
    def test_rear(self) -> None:
        result = document("rear", "--temperature", "25")
        assert result["egg_to_adult_hours"] == pytest.approx(220.0)
        assert [s["stage"] for s in result["stages"]][0] == "embryo"

    def test_rear_refuses_heat(self) -> None:
        done = run("rear", "-t", "35")
        assert done.returncode == 2
        assert "too warm" in done.stderr

    def test_count(self) -> None:
        assert document("count", "--share", "1/4", "--need", "20", "--probability", "0.99")["score"] == 121

    def test_count_refuses_a_share_above_one(self) -> None:
        assert run("count", "--share", "3/2").returncode == 2


class TestPlan:
    def test_one_cross_to_all_its_files(self, tmp_path: Path) -> None:
        out = tmp_path / "plan"
        done = run("plan", ONE / "screen.toml", "--stocks", ONE / "stocks.csv", "--out", out)
        assert done.returncode == 0, done.stderr
        names = {p.name for p in out.iterdir()}
        assert names == {
            "plan.json", "summary.md", "report.html", "labels.pdf", "bench_sheet.pdf", "calendar.ics",
        }  # fmt: skip
        for command, name in (("labels", "again.pdf"), ("calendar", "again.ics")):
            assert run(command, out, "--out", tmp_path / name).returncode == 0
            assert (tmp_path / name).stat().st_size > 500

    def test_without_out_nothing_is_written(self, tmp_path: Path) -> None:
        result = document("plan", ONE / "screen.toml", "--stocks", ONE / "stocks.csv")
        assert result["targets"][0]["generations"] == 1
        assert list(tmp_path.iterdir()) == []

    @pytest.mark.parametrize(
        ("screen", "stocks", "words"),
        [
            ("absent.toml", "stocks.csv", "there is no file"),
            ("screen.toml", "absent.csv", "there is no file"),
            ("screen.toml", "empty.csv", "is empty"),
            ("screen.toml", "wrong.csv", "has no column 'genotype'"),
            ("screen.toml", "headings.csv", "no stocks under them"),
            ("broken.toml", "stocks.csv", "broken.toml"),
            ("unknown.toml", "stocks.csv", "perhaps 'flies'"),
            ("absurd.toml", "stocks.csv", "working_days is empty"),
            ("contradiction.toml", "stocks.csv", "must be carried and must not be carried"),
            ("binary.toml", "stocks.csv", "not UTF-8"),
        ],
    )
    def test_bad_input_gets_one_clear_message(self, screen: str, stocks: str, words: str, tmp_path: Path) -> None:
        (tmp_path / "stocks.csv").write_bytes((ONE / "stocks.csv").read_bytes())
        (tmp_path / "screen.toml").write_bytes((ONE / "screen.toml").read_bytes())
        (tmp_path / "empty.csv").write_bytes(b"")
        (tmp_path / "wrong.csv").write_text("stock,geno type,tray\na,w,1\n")
        (tmp_path / "headings.csv").write_text("stock,genotype\n")
        (tmp_path / "broken.toml").write_text("[screen\nname = 1")
        (tmp_path / "unknown.toml").write_text('[defaults]\nfly = 3\n[[target]]\ntarget="a"\ncomponents=["x"]')
        (tmp_path / "absurd.toml").write_text('[calendar]\nworking_days=[]\n[[target]]\ntarget="a"\ncomponents=["x"]')
        (tmp_path / "contradiction.toml").write_text('[[target]]\ntarget="a"\ncomponents=["x"]\nforbid=["x"]')
        (tmp_path / "binary.toml").write_bytes(b"\xff\xfe\x00\x01")
        out = tmp_path / "out"
        done = run("plan", tmp_path / screen, "--stocks", tmp_path / stocks, "--out", out)
        assert done.returncode == 2
        assert words in done.stderr
        assert "Traceback" not in done.stderr
        assert not out.exists()

    def test_good_targets_get_their_plan_beside_bad_ones(self, tmp_path: Path) -> None:
        (tmp_path / "screen.toml").write_text(
            '[[target]]\ntarget="good"\ncomponents=["GAL4-W21@attP2"]\n'
            '[[target]]\ntarget="missing"\ncomponents=["AD-nobody"]\n'
            '[[target]]\ntarget="twice"\ncomponents=["a", "a"]\n'
        )
        done = run("plan", tmp_path / "screen.toml", "--stocks", ONE / "stocks.csv", "--json")
        assert done.returncode == 1
        status = {t["target"]: t["status"] for t in json.loads(done.stdout)["targets"]}
        assert status["good"] in ("planned", "in stock")
        assert status["missing"] == "impossible"
        assert "twice" not in status

    def test_a_folder_that_cannot_be_written(self, tmp_path: Path) -> None:
        (tmp_path / "file").write_text("in the way")
        done = run("plan", ONE / "screen.toml", "--stocks", ONE / "stocks.csv", "--out", tmp_path / "file" / "plan")
        assert done.returncode == 2
        assert "cannot write" in done.stderr


class TestAudit:
    def test_findings_and_gaps(self) -> None:
        result = document("audit", "--stocks", "demo_stocks/stocks.csv", "--today", "2026-12-01")
        assert result["stocks"] == 170
        codes = {f["code"] for f in result["findings"]}
        assert {"bracket", "balancer-typo", "unbalanced-lethal", "duplicate", "overdue", "single-copy"} <= codes
        assert all({"code", "severity", "stock", "row", "message", "suggestion"} <= set(f) for f in result["findings"])

    def test_gaps_of_a_screen(self, tmp_path: Path) -> None:
        (tmp_path / "screen.toml").write_text('[[target]]\ntarget="t"\ncomponents=["AD-nobody", "GAL4-W21@attP2"]\n')
        result = document("audit", "--stocks", ONE / "stocks.csv", "--screen", tmp_path / "screen.toml")
        assert result["gaps"][0]["target"] == "t"
        assert result["acquire"] == [{"what": "AD-nobody", "unlocks": 1}]


def test_demo_writes_a_folder_that_can_be_planned(tmp_path: Path) -> None:
    assert run("demo", tmp_path / "demo").returncode == 0
    names = {p.name for p in (tmp_path / "demo").iterdir()}
    assert {"stocks.csv", "screen.toml", "pairs.csv"} <= names
    (tmp_path / "demo" / "stocks.csv").write_text("changed by hand")
    done = run("demo", tmp_path / "demo")
    assert done.returncode == 2
    assert (tmp_path / "demo" / "stocks.csv").read_text() == "changed by hand"


def test_the_journal_follows_the_bench(tmp_path: Path) -> None:
    plan = tmp_path / "plan"
    assert run("plan", ONE / "screen.toml", "--stocks", ONE / "stocks.csv", "--out", plan).returncode == 0
    steps = json.loads((plan / "plan.json").read_text(encoding="utf-8"))["steps"]
    first, day = steps[0]["id"], steps[0]["dates"]["collect_from"]
    assert document("today", plan, "--date", day)["tasks"]
    assert run("log", plan, first, "flies", "--date", "2027-12-24").returncode == 0
    # what is dated later than the day asked about has not happened yet
    report = document("today", plan, "--date", day)
    assert report["moved"] == []
    assert "2027-12-24" in report["problems"][0]
    report = document("today", plan, "--date", "2027-12-24")
    assert report["cultures"][0]["days_late"] > 100
    assert report["moved"]
    assert run("log", plan, "S99", "flies").returncode == 2
    assert run("log", plan, first, "vanished").returncode == 2


def test_a_list_with_headings_of_its_own_is_read_as_remembered(tmp_path: Path) -> None:
    stocks, how, table = tmp_path / "list.csv", tmp_path / "how.toml", tmp_path / "look.csv"
    stocks.write_text("Line no.,Flies inside\n007,w; Sp/CyO\n008,w; kx-GAL4\n")
    assert run("shelf", stocks).returncode == 2
    done = run("shelf", stocks, "--column", "genotype=Flies inside", "--column", "stock=Line no.", "--remember", how,
               "--report", table)  # fmt: skip
    assert done.returncode == 1
    assert "on which chromosome is kx-GAL4? (row 3)" in done.stdout
    assert "008" in table.read_text()
    report = document("shelf", stocks, "--settings", how)
    assert report["counts"] == {"read": 1, "assumed": 0, "chromosome open": 1, "refused": 0}
    assert run("shelf", stocks, "--settings", how, "--report", stocks).returncode == 2
    assert stocks.read_text().startswith("Line no.")
    audited = document("audit", "--stocks", stocks, "--settings", how)
    assert audited["stocks"] == 2


def test_the_lab_settles_a_line_and_is_named_as_the_source(tmp_path: Path) -> None:
    lab = tmp_path / "lab.toml"
    lab.write_text('[[element]]\nname = "kx-GAL4"\nchromosome = "2"\n')
    assert run("read", "w; kx-GAL4").returncode == 1
    done = run("read", "w; kx-GAL4", "--lab", lab)
    assert done.returncode == 0
    assert "written short: w; kx-GAL4; +" in done.stdout
    assert "the lab's own catalogue file" in done.stdout
