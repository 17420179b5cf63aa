"""Seeded lists: every planted fault is found, and sound rows raise next to no alarm."""

from __future__ import annotations

from collections import Counter
from pathlib import Path

import pytest

from crossplan.errors import Severity
from crossplan.stocks.audit import Finding, audit
from crossplan.stocks.audit_codes import CODES
from crossplan.stocks.shelf import read_stocks
from tests.stocks.planted import FAULTS, TODAY, Maker, Row, as_text, faulty_list, sound_list

#: an alarm is an error or a warning; a note asks for nothing
MOST_FALSE_ALARMS = 1 / 200
OF_EACH = 6
#: kinds that need a file, or a screen, of their own (tests/stocks/test_audit.py)
ELSEWHERE = {"encoding", "too-many-cells", "wanted-out-of-use"}


def audited(folder: Path, rows: list[Row]) -> tuple[Finding, ...]:
    path = folder / "stocks.csv"
    path.write_text(as_text(rows), encoding="utf-8")
    return audit(read_stocks(path), TODAY)


@pytest.mark.parametrize("seed", [1, 2])
def test_every_planted_fault_is_found(seed: int, tmp_path: Path) -> None:
    rows, faults = faulty_list(seed, of_each=OF_EACH, sound=400)
    assert len(faults) >= 300
    found = {(f.code, f.severity, name) for f in audited(tmp_path, rows) for name in f.stocks}
    # the second of two stocks of one name is called by its row
    missed = [
        (f.code, name, f.rows[f.at].genotype)
        for f, name in faults
        if (f.code, f.severity, name) not in found
        and not any(c == f.code and s == f.severity and n.startswith(f"{name} (row") for c, s, n in found)
    ]
    assert missed == []


def test_the_faults_are_of_every_kind() -> None:
    maker = Maker(1)
    assert set(CODES) - {make(maker).code for make in FAULTS} == ELSEWHERE


@pytest.mark.parametrize("seed", [11, 12, 13])
def test_sound_rows_raise_next_to_no_alarm(seed: int, tmp_path: Path) -> None:
    rows = sound_list(seed, 1000)
    alarms = [f for f in audited(tmp_path, rows) if f.severity is not Severity.NOTE]
    concerned = {name for f in alarms for name in f.stocks}
    assert len(concerned) <= MOST_FALSE_ALARMS * len(rows), Counter(f.code for f in alarms)
