"""Each rule of the audit: one planted fault that it finds, one clean twin that it leaves alone."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest

from crossplan.errors import Severity
from crossplan.stocks import audit as rules
from crossplan.stocks.audit import FAMILIES, Finding, View, audit
from crossplan.stocks.audit_codes import CODES
from crossplan.stocks.audit_keeping import check_wanted_out_of_use
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
        "sterile", Severity.ERROR, "stock|genotype", ["A|sn[X2]"], "A", "female sterile: sn[X2]", ["A|sn[3]"],
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
    pytest.param(
        "two-places", Severity.NOTE, "stock|genotype", ["A|w; UAS-Zap/CyO", "B|w;; UAS-Zap/TM3, Sb"], "A",
        "on 2: A; on 3: B", ["A|w; UAS-Zap/CyO", "B|w; UAS-Zap/SM6a"], id="one name on two chromosomes",
    ),
    pytest.param(
        "cannot-live", Severity.ERROR, "stock|genotype", ["A|w;; TM3, Sb/MKRS"], "A", "Sb", ["A|w;; TM3, Ser/MKRS"],
        id="Sb from both balancers",
    ),
    pytest.param(
        "cannot-live", Severity.ERROR, "stock|genotype", ["A|l(1)zap[1]"], "A", "l(1)zap", ["A|l(1)zap[1]/FM7c"],
        id="a lethal of the X without a balancer",
    ),
    pytest.param(
        "no-balancer", Severity.WARNING, "stock|genotype", ["A|w; l(2)ka[1]/l(2)kb[1]"], "A", "nothing stops exchange",
        ["A|w; l(2)ka[1]/CyO"], id="two lethals without a balancer",
    ),
    pytest.param(
        "not-fixed", Severity.WARNING, "stock|genotype", ["A|w; UAS-GFP@VK00018/+"], "A", "does not breed true",
        ["A|w; UAS-GFP@VK00018", "B|w[1118]/w[1]; Sco/CyO"], id="an insertion over wild type",
    ),
    pytest.param(
        "balancer-takes-over", Severity.NOTE, "stock|genotype", ["A|l(1)zap[1]/FM7a"], "A", "can replace",
        ["A|l(1)zap[1]/FM7c"], id="a fertile X balancer",
    ),
    pytest.param(
        "outside-cover", Severity.NOTE, "stock|genotype", ["A|w;; UAS-GFP@VK00031/TM3, Sb"], "A", "UAS-GFP@VK00031",
        ["A|w;; UAS-GFP@VK00005/TM3, Sb"], id="an insertion outside TM3",
    ),
    pytest.param(
        "partial-balancer", Severity.WARNING, "stock|genotype", ["A|w;; l(3)zap[1]/MKRS"], "A", "only a part",
        ["A|w;; l(3)zap[1]/TM3, Sb"], id="MKRS as a full balancer",
    ),
    pytest.param(
        "insertion-on-balancer", Severity.NOTE, "stock|genotype", ["A|w; Sco/CyO, UAS-Zap"], "A", "sits on CyO",
        ["A|w; Sco/CyO, P{w[+mC]=ActGFP}JMR1", "B|w; UAS-Zap/CyO"], id="an insertion on the balancer",
    ),
    pytest.param(
        "not-told-apart", Severity.WARNING, "stock|genotype", ["A|w; UAS-Zap@VK00018/UAS-Zop@VK00037"], "A",
        "all give eye colour", ["A|w; UAS-Zap@VK00018/CyO; UAS-Zop@attP2/TM3, Sb"], id="two coloured insertions",
    ),
    pytest.param(
        "eye-colour-masked", Severity.NOTE, "stock|genotype", ["A|FM7a/w[1118]; UAS-Zap@VK00018/CyO"], "A", "FM7a colours",
        ["A|FM7h/w[1118]; UAS-Zap@VK00018/CyO", "B|FM7a/w[1118]; Sco/CyO"], id="w[a] passes for mini-white",
    ),
    pytest.param(
        "eye-colour-masked", Severity.NOTE, "stock|genotype", ["A|w; UAS-Zap@VK00018/CyO-GFP"], "A", "CyO-GFP colours",
        ["A|w; UAS-Zap@VK00018/CyO"], id="the balancer brings mini-white",
    ),
    pytest.param(
        "unseen-marker", Severity.NOTE, "stock|genotype",
        ["A|w; P{v[+t1.8] y[+t7.7]=UAS-zap.IR}VK00018/CyO"], "A", "A (UAS-zap.IR@VK00018",
        ["A|y v; P{v[+t1.8] y[+t7.7]=UAS-zap.IR}VK00018/CyO"], id="vermilion sought on white eyes",
    ),
    pytest.param(
        "near-symbol", Severity.WARNING, "stock|genotype",
        ["A|w; UAS-Chrimson@VK00018", "B|w; UAS-Chrimson@VK00018/CyO", "C|w; UAS-Chrmison@VK00018"], "C",
        "spelt almost like UAS-Chrimson@VK00018 (row 2)", ["A|w; UAS-Chrimson@VK00018", "B|w; UAS-Chrimson@VK00037/CyO", "C|w; AD-K12@attP40",
        "D|w; AD-L12@attP40"], id="one construct, two spellings",
    ),
    pytest.param(
        "near-symbol", Severity.WARNING, "stock|genotype",
        ["A|w; UAS-Flp@VK00018", "B|w; UAS-FLP@VK00018/CyO", "C|w; AD-K1@attP16", "D|w; AD-k1@attP16/CyO"], "B",
        "2 names are written with other capitals", ["A|w; UAS-Flp@VK00018", "B|w; UAS-Flp@VK00018/CyO"],
        id="other capitals, said once",
    ),
    pytest.param(
        "repressor-of-split", Severity.WARNING, "stock|genotype",
        ["A|w; AD-K12@attP40/CyO; tubP-GAL80ts@attP2/TM3, Sb"], "A", "does not stop",
        ["A|w; kx-GAL4@attP40/CyO; tubP-GAL80ts@attP2/TM3, Sb"], id="GAL80 against a split driver",
    ),
    pytest.param(
        "warmth-twice", Severity.WARNING, "stock|genotype",
        ["A|w; UAS-dTrpA1@VK00018/CyO; tubP-GAL80ts@attP2/TM3, Sb"], "A", "both answer to warmth",
        ["A|w; UAS-Kir2.1@VK00018/CyO; tubP-GAL80ts@attP2/TM3, Sb"], id="GAL80ts with TrpA1",
    ),
    pytest.param(
        "lethal-together", Severity.WARNING, "stock|genotype",
        ["A|w; elav-GAL4/CyO; UAS-CsChrimson@VK00005/TM6B, Tb"], "A", "is lethal",
        ["A|w; kx-GAL4/CyO; UAS-CsChrimson@VK00005/TM6B, Tb"], id="CsChrimson with elav-GAL4",
    ),
    pytest.param(
        "jumps", Severity.WARNING, "stock|genotype", ["A|w; UAS-Zap/CyO; Delta2-3/TM6B, Tb"], "A", "moves transposons",
        ["A|w; Sco/CyO; Delta2-3/TM6B, Tb"], id="transposase beside a transposon",
    ),
    pytest.param(
        "cuts", Severity.WARNING, "stock|genotype", ["A|w; vas-Cas9@VK00018/CyO; U6-zap-gRNA@attP2/TM6B, Tb"], "A",
        "cut its chromosomes", ["A|w; vas-Cas9@VK00018/CyO; Sb/TM6B, Tb"], id="Cas9 beside its guide",
    ),
    pytest.param(
        "balancer-drives", Severity.WARNING, "stock|genotype", ["A|w; UAS-Kir2.1@VK00018/CyO, Kr-GFP"], "A",
        "made with a GAL4", ["A|w; UAS-Kir2.1@VK00018/CyO, ActGFP"], id="a GAL4 in the balancer",
    ),
    pytest.param(
        "green-twice", Severity.NOTE, "stock|genotype", ["A|w; UAS-mCD8-GFP@VK00018/CyO, ActGFP"], "A", "glows green",
        ["A|w; UAS-tdTomato@VK00018/CyO, ActGFP"], id="green twice",
    ),
    pytest.param(
        "too-warm", Severity.WARNING, "stock|genotype|temp",
        ["A|w; kx-GAL4@VK00018; tubP-GAL80ts@attP2|25"], "A", "kept at 25 C",
        ["A|w; kx-GAL4@VK00018; tubP-GAL80ts@attP2|18", "B|w;; tubP-GAL80ts@attP2|25"], id="kept too warm",
    ),
    pytest.param(
        "caution", Severity.NOTE, "stock|genotype", ["A|w[1118]/FM7c"], "A", "sn[X2]", ["A|w[1118]/FM0"],
        id="the catalogue warns",
    ),
    pytest.param(
        "half-missing", Severity.WARNING, "stock|genotype|notes", ["A|w; AD-K12@attP40|split line, walking"], "A",
        "no DBD half", ["A|w; AD-K12@attP40; DBD-Q01@attP2|split line", "B|w; AD-K12@attP40|half of a pair"],
        id="a split line with one half",
    ),
    pytest.param(
        "sign-twice", Severity.NOTE, "stock|genotype", ["A|w; Sco/CyTb; TM2/TM6B, Tb"], "A", "tubby pupae",
        ["A|w; Sco/CyO; TM2/TM6B, Tb"], id="two Tubby sources",
    ),
    pytest.param(
        "unmarked-balancer", Severity.WARNING, "stock|genotype", ["A|w;; l(3)zap[1]/TM3-GFP"], "A",
        "shows nothing on adult", ["A|w;; l(3)zap[1]/TM3, Sb"], id="a balancer without an adult marker",
    ),
    pytest.param(
        "cold-sign", Severity.NOTE, "stock|genotype|temp", ["A|w; UAS-Zap/CyO|18"], "A", "unsure there",
        ["A|w; UAS-Zap/CyO|25", "B|w; Sco/CyO|18", "C|w;; UAS-Zip/TM3, Sb|18"], id="Curly in the cold",
    ),
    pytest.param(
        "looks-contradict", Severity.WARNING, "stock|genotype|notes", ["A|w[1118]; Sco/CyO|red eyes"], "A",
        "the notes say 'red eyes'", ["A|w[1118]; UAS-Zap/CyO|orange eyes", "B|w; Sco/CyO|red eyes?"],
        id="notes against the genotype",
    ),
    pytest.param(
        "looks-contradict", Severity.WARNING, "stock|genotype|notes", ["A|w[1118]; UAS-Zap/+; +|curly wings"], "A",
        "do not show it", ["A|w[1118]; UAS-Zap/CyO; +|curly wings"], id="a sign that nothing gives",
    ),
    pytest.param(
        "lethal-not-written", Severity.WARNING, "stock|genotype|notes", ["A|w; UAS-Zap/CyO|homozygous lethal"], "A",
        "no lethal", ["A|w; UAS-Zap, l(2)zap[1]/CyO|homozygous lethal"], id="a lethal in the notes only",
    ),
    pytest.param(
        "near-name", Severity.WARNING, "stock|genotype", ["KO1|w", "K01|y"], "K01", "easily taken for 'KO1'",
        ["K1|w", "K2|y", "AD-K12|w; Sco/CyO", "AD-K13|w; If/CyO"], id="names that look alike",
    ),
    pytest.param(
        "near-name", Severity.WARNING, "stock|genotype", ["Ptarmigan|w", "Ptarmigen|y"], "Ptarmigen", "taken for",
        ["Ptarmigan|w", "Plover|y"], id="names a letter apart",
    ),
    pytest.param(
        "no-source", Severity.NOTE, "stock|genotype|source", ["A|w|made here", "B|y|"], "B", "1 stock does not say",
        ["A|w|made here", "B|y|old"], id="no source",
    ),
    pytest.param(
        "odd-temperature", Severity.WARNING, "stock|genotype|temp", ["A|w|8"], "A", "kept at 8 C", ["A|w|18"],
        id="a temperature for no fly",
    ),
    pytest.param(
        "place-twice", Severity.WARNING, "stock|genotype|tray|vial", ["A|w|T1|1", "B|y|T1|1"], "B", "where A stands",
        ["A|w|T1|1", "B|y|T1|2"], id="two stocks at one place",
    ),
    pytest.param(
        "quarantine", Severity.NOTE, "stock|genotype|status", ["A|w|quarantine"], "A", "in quarantine: A", ["A|w|ok"],
        id="in quarantine",
    ),
    pytest.param(
        "quarantine-tray", Severity.WARNING, "stock|genotype|tray|status", ["A|w|T1|quarantine", "B|y|T1|ok"], "A",
        "beside stocks in use (B)", ["A|w|Q1|quarantine", "B|y|T1|ok"], id="a newcomer among the others",
    ),
    pytest.param(
        "unwell", Severity.WARNING, "stock|genotype|status", ["A|w|sick"], "A", "calls it 'sick'", ["A|w|ok"],
        id="a sick stock",
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
    files = {p.stem for p in Path(rules.__file__).parent.glob("audit_*.py")} - {"audit_codes"}
    assert files == {family.__name__.rpartition(".")[2] for family in FAMILIES}
    written = [f for family in FAMILIES for name, f in vars(family).items() if name.startswith("check_")]
    assert sorted(written, key=id) == sorted(rules.RULES, key=id)
    assert len(set(written)) == len(written)


def test_every_rule_finds_something_in_one_of_the_cases(tmp_path: Path) -> None:
    silent = set(rules.RULES) - {check_wanted_out_of_use}
    facts = rules.default_catalogue()
    for case in CASES:
        _, _, head, faulty, *_ = case.values
        findings(tmp_path, faulty, head)  # type: ignore[arg-type]
        shelf = read_stocks(tmp_path / "stocks.csv")
        silent -= {rule for rule in silent if any(True for _ in rule(View(shelf, TODAY, facts)))}
    assert silent == set()


def test_a_sound_shelf_has_no_findings(tmp_path: Path) -> None:
    rows = ["A|w[1118]; Sco/CyO|2|2026-11-20|18|T1", "B|w[1118]; +; UAS-GFP@attP2|3|2026-11-25|25|T1"]
    found = findings(tmp_path, rows, "stock|genotype|copies|last flip|temp|tray")
    assert {f.code for f in found} <= {"caution"}


def test_stocks_out_of_use_are_not_judged(tmp_path: Path) -> None:
    rows = ["A|w; Sco/+|1|2025-01-01|dead", "B|w|2|2026-11-30|ok"]
    assert findings(tmp_path, rows, "stock|genotype|copies|last flip|status") == ()


def test_a_stock_that_is_not_understood_is_kept_all_the_same(tmp_path: Path) -> None:
    rows = ["A|w; Sco/CyO/If|1|2026-08-01", "B|w; UAS-Zap|1|2026-08-01"]
    found = {(f.code, f.stock) for f in findings(tmp_path, rows, "stock|genotype|copies|last flip")}
    assert {(code, stock) for code in ("single-copy", "overdue") for stock in "AB"} <= found


def test_errors_come_first_then_rows_in_order(tmp_path: Path) -> None:
    rows = ["A|w|1", "B|w; Sco/+|2", "C|y|1", "D|f; Sco/Sco|2"]
    found = findings(tmp_path, rows, "stock|genotype|copies")
    assert [(f.code, f.row) for f in found] == [
        ("unbalanced-lethal", 3), ("cannot-live", 5), ("single-copy", 2), ("single-copy", 4),
    ]  # fmt: skip


def test_a_screen_makes_findings_graver(tmp_path: Path) -> None:
    path = tmp_path / "stocks.csv"
    rows = [
        "A|w; AD-K1@attP40|1|",
        "B|w; AD-K2@attP40|2|retired",
        "C|w; AD-K3@attP40|2|dead",
        "D|w; AD-K3@attP40/CyO|2|",
    ]
    path.write_text("\n".join(("stock|genotype|copies|status", *rows)) + "\n", encoding="utf-8")
    wanted = {"AD-K1@attP40": ("t-1", "t-2"), "AD-K2@attP40": ("t-3",), "AD-K3@attP40": ("t-4",)}
    found = audit(read_stocks(path), TODAY, wanted=wanted)
    out = [(f.stock, f.severity) for f in found if f.code == "wanted-out-of-use"]
    assert out == [("B", Severity.ERROR)]
    assert "2 targets of the screen depend on" in next(f.message for f in found if f.code == "single-copy")


def test_an_open_chromosome_is_asked_once_for_each_element(tmp_path: Path) -> None:
    found = findings(tmp_path, ["A|w; UAS-Zap", "B|y w; UAS-Zap", "C|w; UAS-Zop"])
    asked = [f for f in found if f.code == "which-chromosome"]
    assert [f.stocks for f in asked] == [("A", "B"), ("C",)]
    assert "UAS-Zap" in asked[0].message


def test_every_finding_says_why_and_what_to_do(tmp_path: Path) -> None:
    for case in CASES:
        code, _, head, faulty, *_ = case.values
        for f in findings(tmp_path, faulty, head):  # type: ignore[arg-type]
            assert f.why, code
            assert f.suggestion, f
            assert f.stock in f.stocks
            assert f.row > 1


def test_every_kind_of_finding_has_a_case() -> None:
    cases = {case.values[0] for case in CASES}
    elsewhere = {"encoding", "too-many-cells", "unknown-site", "wanted-out-of-use"}
    assert set(CODES) - cases - elsewhere == set()


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
