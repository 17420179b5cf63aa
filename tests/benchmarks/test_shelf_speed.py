"""How long the audit of a long list and the gaps of a long screen take. Run with `--benchmark-enable`; two cores.

Without that option small cases are run once, so that they keep working.
"""

from __future__ import annotations

import random
from pathlib import Path
from typing import Any

from crossplan import api
from tests.stocks.planted import TODAY, as_text, sound_list

#: seconds, reading included
MOST_AUDIT, MOST_GAPS = 60.0, 20.0


def test_audit_of_a_hundred_thousand_stocks(benchmark: Any, tmp_path: Path) -> None:
    rows = 1000 if benchmark.disabled else 100_000
    path = tmp_path / "stocks.csv"
    path.write_text(as_text(sound_list(3, rows)), encoding="utf-8")
    audited = benchmark.pedantic(lambda: api.audit_stocks(path, today=TODAY), rounds=1)
    assert len(audited.shelf.stocks) == rows
    if not benchmark.disabled:
        assert benchmark.stats.stats.max <= MOST_AUDIT


def test_gaps_of_five_hundred_targets(benchmark: Any, tmp_path: Path) -> None:
    rows, targets = (500, 20) if benchmark.disabled else (10_000, 500)
    path = tmp_path / "stocks.csv"
    path.write_text(as_text(sound_list(3, rows)), encoding="utf-8")
    screen = _screen(path, targets)
    report = benchmark.pedantic(lambda: api.find_gaps(path, screen, search=False), rounds=1)
    assert len(report.gaps.targets) == targets
    assert report.least.proved
    if not benchmark.disabled:
        assert benchmark.stats.stats.max <= MOST_GAPS


def _screen(path: Path, targets: int) -> Path:
    """Write targets of three parts each; one in six asks for a half-driver that nobody has."""
    chance = random.Random(4)
    carried = {e.symbol: e.component for s in api.read_stocks(path).usable() for e in s.reading.elements}
    parts = {cls: sorted(s for s, c in carried.items() if c == cls) for cls in ("AD", "DBD", "effector")}
    lines = ["[screen]", 'name = "long"']
    for i in range(targets):
        chosen = [chance.choice(parts[cls]) for cls in ("AD", "DBD", "effector")]
        if i % 6 == 0:
            chosen[0] = f"AD-M{chance.randrange(60)}@attP40"
        listed = ", ".join(f'"{p}"' for p in chosen)
        lines += ["[[target]]", f'target = "t{i}"', f"components = [{listed}]"]
    screen = path.with_name("screen.toml")
    screen.write_text("\n".join(lines) + "\n", encoding="utf-8")
    return screen
