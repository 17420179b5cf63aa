"""Each rule of the audit: one planted fault that it finds, one clean twin that it leaves alone."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest

from crossplan.errors import Severity
from crossplan.stocks import audit as rules
from crossplan.stocks.audit import Finding, audit
from crossplan.stocks.shelf import read_stocks

TODAY = dt.date(2026, 12, 1)
DEMO = Path(__file__).resolve().parent.parent.parent / "demo_stocks" / "stocks.csv"


def findings(folder: Path, rows: list[str], head: str = "stock|genotype") -> tuple[Finding, ...]:
    path = folder / "stocks.csv"
    path.write_text("\n".join((head, *rows)) + "\n", encoding="utf-8")
    return audit(read_stocks(path), TODAY)


#: code, severity, headings, rows with the fault, the stock it is found in, words of the message, the clean twin
CASES = [
    pytest.param(
        "three-homologues", Severity.ERROR, "stock|genotype", ["A|w[1118]; Sco/CyO/If"], "A", "Sco/CyO/If",
        ["A|w[1118]; Sco/CyO"], id="three homologues",
    ),
    pytest.param(
        "bracket", Severity.ERROR, "stock|genotype", ["A|w[1118]", "B|w[1118; Sco/CyO"], "B", "never closed",
        ["A|w[1118]", "B|w[1118]; Sco/CyO"], id="bracket",
    ),
    pytest.param(
        "chromosomes-disagree", Severity.ERROR, "stock|genotype", ["A|w; If/TM3, Sb[1]"], "A", "cannot be homologues",
        ["A|w; If/CyO"], id="chromosomes disagree",
    ),
    pytest.param(
        "which-chromosome", Severity.ERROR, "stock|genotype", ["A|w; UAS-Zap"], "A", "nothing says which chromosome",
        ["A|w; UAS-Zap; +"], id="chromosome left open",
    ),
    pytest.param(
        "assumed-place", Severity.WARNING, "stock|genotype", ["A|UAS-Zap; Sco/CyO", "B|UAS-Zap; If/CyO"], "A",
        "(2 stocks)", ["A|UAS-Zap; Sco/CyO; +"], id="assumed place, said once",
    ),
    pytest.param(
        "unknown-symbol", Severity.NOTE, "stock|genotype", ["A|w; foo[1]/CyO; +"], "A", "not in the catalogue",
        ["A|w; cn[1]/CyO; +"], id="unknown symbol",
    ),
    pytest.param(
        "assumed-marker", Severity.NOTE, "stock|genotype", ["A|w;; TM6B/Pr[1]", "B|y;; TM6B/Pr[1]"], "A", "(2 stocks)",
        ["A|w;; TM6B, Tb[1]/Pr[1]"], id="assumed marker, said once",
    ),
    pytest.param(
        "name-twice", Severity.WARNING, "stock|genotype", ["A|w", "A|y"], "A (row 3)", "row 2", ["A|w", "B|y"],
        id="name twice",
    ),
    pytest.param(
        "date", Severity.WARNING, "stock|genotype|last flip", ["A|w|03/11/26"], "A", "2026-11-03 or 2026-03-11",
        ["A|w|3 Nov 2026"], id="date of two days",
    ),
    pytest.param(
        "date", Severity.WARNING, "stock|genotype|last flip", ["A|w|2026-12-02"], "A", "in the future",
        ["A|w|2026-12-01"], id="date to come",
    ),
    pytest.param(
        "not-a-number", Severity.WARNING, "stock|genotype|copies", ["A|w|some"], "A", "'some'", ["A|w|2"],
        id="not a number",
    ),
    pytest.param(
        "not-a-temperature", Severity.WARNING, "stock|genotype|temp", ["A|w|warm"], "A", "'warm'", ["A|w|RT"],
        id="not a temperature",
    ),
    pytest.param(
        "balancer-twice", Severity.ERROR, "stock|genotype", ["A|w[1118]; CyO/CyO"], "A", "flies as written die",
        ["A|w[1118]; Sco/CyO"], id="balancer twice",
    ),
    pytest.param(
        "cannot-live", Severity.ERROR, "stock|genotype", ["A|w; CyO/SM6a"], "A", "Cy", ["A|w; CyO/Sco"],
        id="two balancers that die together",
    ),
    pytest.param(
        "cannot-live", Severity.ERROR, "stock|genotype", ["A|w; Sco/Sco"], "A", "Sco", ["A|w; Sco/SM6a"],
        id="a lethal twice",
    ),
    pytest.param(
        "sterile", Severity.NOTE, "stock|genotype", ["A|sn[X2]"], "A", "female sterile: sn[X2]", ["A|sn[3]"],
        id="sterile",
    ),
    pytest.param(
        "unbalanced-lethal", Severity.ERROR, "stock|genotype", ["A|w; Sco/+"], "A", "nothing keeps it in the stock",
        ["A|w; Sco/CyO"], id="unbalanced lethal",
    ),
    pytest.param(
        "unbalanced-lethal", Severity.ERROR, "stock|genotype", ["A|w;; Pr[1]/+"], "A", "Pr[1]",
        ["A|w;; Pr[1]/TM6B, Tb[1]"], id="unbalanced lethal of the third",
    ),
    pytest.param(
        "floating-balancer", Severity.NOTE, "stock|genotype", ["A|w; UAS-GFP@VK00018/CyO"], "A", "A (CyO)",
        ["A|w; UAS-GFP@VK00018", "B|w; Sco/CyO"], id="floating balancer",
    ),
    pytest.param(
        "same-site", Severity.WARNING, "stock|genotype", ["A|w; AD-Q1@VK00018/UAS-GFP@VK00018"], "A", "at VK00018",
        ["A|w; AD-Q1@VK00018/UAS-GFP@VK00037"], id="two insertions at one site",
    ),
    pytest.param(
        "site-of-half-driver", Severity.NOTE, "stock|genotype", ["A|w; AD-Q1@VK00018", "B|w; UAS-GFP@VK00018"], "B",
        "UAS-GFP@VK00018", ["A|w; AD-Q1@VK00018", "B|w; UAS-GFP@VK00037"], id="effector at the site of a half",
    ),
    pytest.param(
        "site-trouble", Severity.NOTE, "stock|genotype", ["A|w; AD-Q1@attP40"], "A", "homozygous at attP40",
        ["A|w; AD-Q1@attP40/CyO"], id="a site with known trouble",
    ),
    pytest.param(
        "duplicate", Severity.WARNING, "stock|genotype", ["A|w[1118]; Sco/CyO", "B|w[1118]; CyO/Sco"], "B",
        "same genotype as A (row 2)", ["A|w[1118]; Sco/CyO", "B|w[1118]; If/CyO", "C|Canton-S", "D|Canton-S"],
        id="duplicate",
    ),
    pytest.param(
        "look-alike", Severity.WARNING, "stock|genotype|tray",
        ["A|w; Sco/CyO; TM3, Sb/TM6B, Tb|T1", "B|w; Sco/CyO; MKRS/TM6B, Tb|T1"], "B", "same tray (T1)",
        ["A|w; Sco/CyO; TM3, Sb/TM6B, Tb|T1", "B|w; Sco/CyO; MKRS/TM6B, Tb|T2", "C|w; Sco/CyO; TM2/TM6B, Tb|T1"],
        id="look-alikes in one tray",
    ),
    pytest.param(
        "single-copy", Severity.WARNING, "stock|genotype|copies", ["A|w|1"], "A", "only one copy",
        ["A|w|2", "B|y|"], id="single copy",
    ),
    pytest.param(
        "overdue", Severity.WARNING, "stock|genotype|last flip|temp", ["A|w|2026-10-19|18"], "A", "43 days ago",
        ["A|w|2026-10-20|18"], id="overdue at 18 C",
    ),
    pytest.param(
        "overdue", Severity.WARNING, "stock|genotype|last flip|temp", ["A|w|2026-11-09|25"], "A", "every 14 days",
        ["A|w|2026-11-10|25"], id="overdue at 25 C",
    ),
    pytest.param(
        "overdue", Severity.WARNING, "stock|genotype|last flip", ["A|w|2026-10-30"], "A", "at 21.5 C every 21 days",
        ["A|w|2026-10-31"], id="overdue where no temperature is written",
    ),
    pytest.param(
        "never-dated", Severity.NOTE, "stock|genotype|last flip", ["A|w|2026-11-30", "B|y|"], "B", "1 stock(s)",
        ["A|w|", "B|y|"], id="never dated",
    ),
    pytest.param(
        "no-place", Severity.NOTE, "stock|genotype|tray", ["A|w|T1", "B|y|"], "B", "1 stock(s) have no tray: B",
        ["A|w|", "B|y|"], id="no tray",
    ),
]  # fmt: skip


@pytest.mark.parametrize(("code", "severity", "head", "faulty", "stock", "words", "clean"), CASES)
def test_a_planted_fault_is_found_and_its_clean_twin_is_not(
    code: str,
    severity: Severity,
    head: str,
    faulty: list[str],
    stock: str,
    words: str,
    clean: list[str],
    tmp_path: Path,
) -> None:
    found = [f for f in findings(tmp_path, faulty, head) if f.code == code]
    assert [(f.severity, f.stock) for f in found] == [(severity, stock)]
    assert words in found[0].message
    assert found[0].suggestion
    assert code not in [f.code for f in findings(tmp_path, clean, head)]


def test_a_file_in_an_old_encoding_is_said(tmp_path: Path) -> None:
    path = tmp_path / "stocks.csv"
    path.write_bytes("stock|genotype|who\nA|w|Jörg\n".encode("cp1252"))
    assert [(f.code, f.row, f.stock) for f in audit(read_stocks(path), TODAY)] == [("encoding", 2, "A")]
    path.write_bytes("stock|genotype|who\nA|w|Jörg\n".encode())
    assert audit(read_stocks(path), TODAY) == ()


def test_a_landing_site_that_nobody_knows_is_said(tmp_path: Path) -> None:
    found = findings(tmp_path, ["A|w; UAS-GFP@attP99; +", "B|w; UAS-GFP@VK00018; +"])
    assert [(f.code, f.severity, f.stock) for f in found] == [("unknown-site", Severity.WARNING, "A")]


def test_every_rule_of_the_module_is_asked() -> None:
    written = {f for name, f in vars(rules).items() if name.startswith("check_")}
    assert written == set(rules.RULES)
    assert len(rules.RULES) == len(written)


def test_every_rule_finds_something_in_one_of_the_cases(tmp_path: Path) -> None:
    silent = set(rules.RULES)
    facts = rules.default_catalogue()
    for case in CASES:
        _, _, head, faulty, *_ = case.values
        findings(tmp_path, faulty, head)  # type: ignore[arg-type]
        shelf = read_stocks(tmp_path / "stocks.csv")
        silent -= {rule for rule in silent if any(True for _ in rule(shelf, TODAY, facts))}
    assert silent == set()


def test_a_sound_shelf_has_no_findings(tmp_path: Path) -> None:
    rows = ["A|w[1118]; Sco/CyO|2|2026-11-20|18|T1", "B|w[1118]; +; UAS-GFP@attP2|3|2026-11-25|25|T1"]
    assert findings(tmp_path, rows, "stock|genotype|copies|last flip|temp|tray") == ()


def test_stocks_out_of_use_are_not_judged(tmp_path: Path) -> None:
    rows = ["A|w; Sco/+|1|2025-01-01|dead", "B|w|2|2026-11-30|ok"]
    assert findings(tmp_path, rows, "stock|genotype|copies|last flip|status") == ()


def test_errors_come_first_then_rows_in_order(tmp_path: Path) -> None:
    rows = ["A|w|1", "B|w; Sco/+|2", "C|y|1", "D|f; Sco/Sco|2"]
    found = findings(tmp_path, rows, "stock|genotype|copies")
    assert [(f.code, f.row) for f in found] == [
        ("unbalanced-lethal", 3), ("cannot-live", 5), ("single-copy", 2), ("single-copy", 4),
    ]  # fmt: skip


# -- the demo shelf ----------------------------------------------------------------------------------------------


@pytest.fixture(scope="module")
def demo() -> tuple[Finding, ...]:
    return audit(read_stocks(DEMO), TODAY)


@pytest.mark.parametrize(
    ("stock", "code", "severity"),
    [
        ("PT066", "bracket", Severity.ERROR),
        ("PT098", "balancer-typo", Severity.ERROR),
        ("PT143", "unbalanced-lethal", Severity.ERROR),
        ("PT060", "duplicate", Severity.WARNING),
        ("PT048", "overdue", Severity.WARNING),
        ("PT051", "single-copy", Severity.WARNING),
        ("PT018", "look-alike", Severity.WARNING),
        ("PT034", "site-of-half-driver", Severity.NOTE),
    ],
)
def test_the_faults_planted_in_the_demo_are_found(
    stock: str, code: str, severity: Severity, demo: tuple[Finding, ...]
) -> None:
    found = [f for f in demo if (f.stock, f.code) == (stock, code)]
    assert [f.severity for f in found] == [severity]
    lines = DEMO.read_text(encoding="utf-8").splitlines()
    assert f",{stock}," in lines[found[0].row - 1]


@pytest.mark.parametrize(
    "code", ["duplicate", "overdue", "look-alike", "unbalanced-lethal", "bracket", "balancer-typo"]
)
def test_the_demo_has_that_fault_once(code: str, demo: tuple[Finding, ...]) -> None:
    assert len([f for f in demo if f.code == code]) == 1


def test_the_findings_of_the_demo_say_with_what(demo: tuple[Finding, ...]) -> None:
    said = {(f.stock, f.code): f for f in demo}
    assert "PT046 (row 47)" in said["PT060", "duplicate"].message
    assert "PT017" in said["PT018", "look-alike"].message
    assert "109 days ago (2026-08-14)" in said["PT048", "overdue"].message
    assert "TM6B" in said["PT098", "balancer-typo"].suggestion
