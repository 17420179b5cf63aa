"""Accepted findings: they stay accepted until the row changes."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest

from crossplan.errors import InputError
from crossplan.stocks.accepted import Accepted, accept, accepted_toml, mark_accepted, read_accepted
from crossplan.stocks.audit import audit
from crossplan.stocks.finding import Finding
from crossplan.stocks.shelf import Shelf, read_stocks

TODAY = dt.date(2026, 12, 1)
HEAD = "stock|genotype|copies|last flip|tray"


def audited(folder: Path, *rows: str) -> tuple[Shelf, tuple[Finding, ...]]:
    path = folder / "stocks.csv"
    path.write_text("\n".join((HEAD, *rows)) + "\n", encoding="utf-8")
    shelf = read_stocks(path)
    return shelf, audit(shelf, TODAY)


def open_codes(folder: Path, accepted: tuple[Accepted, ...], *rows: str) -> tuple[list[str], int]:
    shelf, findings = audited(folder, *rows)
    marked, stale = mark_accepted(findings, accepted, shelf)
    return [f.code for f in marked if not f.accepted and f.code != "caution"], len(stale)


@pytest.fixture
def single(tmp_path: Path) -> tuple[Accepted, ...]:
    shelf, findings = audited(tmp_path, "A|w|1|2026-11-25|T1")
    return accept((), findings, shelf, "single-copy", "A", "the centre has it")


def test_an_accepted_finding_is_not_open(tmp_path: Path, single: tuple[Accepted, ...]) -> None:
    assert open_codes(tmp_path, single, "A|w|1|2026-11-25|T1") == ([], 0)


def test_it_stays_when_the_row_moves_or_is_flipped(tmp_path: Path, single: tuple[Accepted, ...]) -> None:
    assert open_codes(tmp_path, single, "Z|y|2|2026-11-25|T1", "A|w|1|2026-11-30|T7") == ([], 0)


def test_it_is_open_again_when_what_it_rests_on_changes(tmp_path: Path) -> None:
    shelf, findings = audited(tmp_path, "A|w; UAS-Zap@VK00018/+|2|2026-11-25|T1")
    accepted = accept((), findings, shelf, "not-fixed", "A", "selected every week")
    assert open_codes(tmp_path, accepted, "A|w; UAS-Zap@VK00018/+|3|2026-11-30|T2") == ([], 0)
    assert open_codes(tmp_path, accepted, "A|w; UAS-Zip@VK00018/+|2|2026-11-25|T1") == (["not-fixed"], 1)


def test_it_is_stale_when_it_is_gone(tmp_path: Path, single: tuple[Accepted, ...]) -> None:
    assert open_codes(tmp_path, single, "A|w|2|2026-11-25|T1") == ([], 1)


def test_a_finding_about_two_stocks_rests_on_both(tmp_path: Path) -> None:
    shelf, findings = audited(tmp_path, "A|w; Sco/CyO|2||T1", "B|w; Sco/CyO|2||T2")
    accepted = accept((), findings, shelf, "duplicate", "B", "two isolates")
    assert open_codes(tmp_path, accepted, "A|w; Sco/CyO|2||T9", "B|w; Sco/CyO|2||T2") == ([], 0)
    codes, _ = open_codes(tmp_path, accepted, "A|w[1118]; Sco/CyO|2||T1", "B|w[1118]; Sco/CyO|2||T2")
    assert codes == ["duplicate"]


def test_the_file_comes_back_as_it_was(tmp_path: Path) -> None:
    entries = (
        Accepted("single-copy", 'odd "name" \\ ü', "because\nof\tthis", "abc"),
        Accepted("overdue", "B", "x", "def"),
    )
    path = tmp_path / "accepted.toml"
    path.write_text(accepted_toml(entries), encoding="utf-8")
    assert set(read_accepted(path)) == set(entries)
    assert read_accepted(tmp_path / "none.toml") == ()


@pytest.mark.parametrize(
    "text", ['[[accept]]\ncode = "x"\n', "[[accept", "[other]\n", "accept = 3\n", '[[accept]]\ncode = 1\nstock = "a"\n']
)
def test_a_file_that_cannot_be_used_is_refused(text: str, tmp_path: Path) -> None:
    path = tmp_path / "accepted.toml"
    path.write_text(text, encoding="utf-8")
    with pytest.raises(InputError) as caught:
        read_accepted(path)
    assert "accepted.toml" in caught.value.message
    assert caught.value.hint


def test_what_is_not_found_cannot_be_accepted(tmp_path: Path) -> None:
    shelf, findings = audited(tmp_path, "A|w|1||T1")
    with pytest.raises(InputError, match="finds no 'overdue' for A") as caught:
        accept((), findings, shelf, "overdue", "A", "x")
    assert "single-copy" in caught.value.hint
    with pytest.raises(InputError, match="needs a reason"):
        accept((), findings, shelf, "single-copy", "A", "  ")


def test_accepting_again_replaces_the_reason(tmp_path: Path) -> None:
    shelf, findings = audited(tmp_path, "A|w|1||T1")
    once = accept((), findings, shelf, "single-copy", "A", "first")
    assert [a.reason for a in accept(once, findings, shelf, "single-copy", "A", "second")] == ["second"]
