"""How long things take. Run with `pytest tests/benchmarks --benchmark-enable`; comparisons are made inside one run.

Without that option each is run once, so that it keeps working.
"""

from __future__ import annotations

import datetime as dt
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from random import Random
from statistics import median
from time import perf_counter
from typing import Any, get_args

import pytest

from crossplan import api
from tests.reference.random_genotypes import Style, random_genotype

ROOT = Path(__file__).resolve().parents[2]
DEMO = ROOT / "demo_stocks"
#: the start-up of the command line against a bare import of what it stands on
MOST_HELP_RATIO = 1.6


def seconds(*arguments: str) -> float:
    start = perf_counter()
    subprocess.run([sys.executable, *arguments], capture_output=True, check=True, cwd=ROOT)
    return perf_counter() - start


def test_help_against_a_bare_import(benchmark: Any) -> None:
    """`crossplan --help` in no more than 1.6 times `python -c "import typer, rich"`, alternating in one run."""
    rounds = 1 if benchmark.disabled else 15

    def both() -> tuple[list[float], list[float]]:
        pairs = [(seconds("-m", "crossplan", "--help"), seconds("-c", "import typer, rich")) for _ in range(rounds)]
        return [a for a, _ in pairs], [b for _, b in pairs]

    ours, bare = benchmark.pedantic(both, rounds=1)
    benchmark.extra_info["ratio"] = ratio = median(ours) / median(bare)
    if not benchmark.disabled:
        assert ratio <= MOST_HELP_RATIO, f"{ratio:.2f}"


def test_demo_plan(benchmark: Any) -> None:
    """The whole demo: 24 pairs and their controls on 170 stocks, days and replay included."""
    if benchmark.disabled:
        pytest.skip("the demo plan is made in tests/acceptance")
    plan: Callable[[], api.Planned] = lambda: api.plan_screen(  # noqa: E731
        DEMO / "screen.toml", DEMO / "stocks.csv", today=dt.date(2026, 12, 1)
    )
    benchmark.pedantic(plan, rounds=2)


def test_reading_a_thousand_rows(benchmark: Any, tmp_path: Path) -> None:
    """A stock list of 1,000 different rows in about a second."""
    lines = (DEMO / "stocks.csv").read_text(encoding="utf-8").splitlines()
    rows = [
        line.replace("PT", f"P{copy}T").replace("AD-", f"AD-{copy}").replace("DBD-", f"DBD-{copy}")
        for copy in range(6)
        for line in lines[1:]
    ]
    table = tmp_path / "stocks.csv"
    table.write_text("\n".join([lines[0], *rows[:1000]]), encoding="utf-8")
    shelf = benchmark(api.read_stocks, table)
    assert shelf.rows_read == 1000


def long_list(path: Path, rows: int) -> Path:
    """Write a stock list of so many different rows, as three styles of writing give them."""
    random = Random("long list")
    styles = get_args(Style)
    lines = ["stock\tgenotype\tcopies\ttemp\tlast flip"]
    for n in range(rows):
        text, _ = random_genotype(random, styles[n % len(styles)])
        lines.append(f"{n:06d}\t{text.replace('UAS-kx', f'UAS-k{n}')}\t2\t18\t2026-11-{n % 28 + 1:02d}")
    path.write_text("\n".join(lines), encoding="utf-8")
    return path


def test_a_list_of_a_hundred_thousand_rows(benchmark: Any, tmp_path: Path) -> None:
    """Read, checked and indexed; the time and the memory of 100,000 rows against those of 10,000."""
    import tracemalloc

    sizes = (100, 1_000) if benchmark.disabled else (10_000, 100_000)
    lists = [long_list(tmp_path / f"{n}.tsv", n) for n in sizes]

    def both() -> list[tuple[float, int]]:
        found = []
        for path in lists:
            start = perf_counter()
            shelf = api.read_stocks(path)
            found.append((perf_counter() - start, len(shelf.elements())))
        return found

    (few, _), (many, indexed) = benchmark.pedantic(both, rounds=1)
    assert indexed > 0
    memory = []
    for path in lists:
        tracemalloc.start()
        shelf = api.read_stocks(path)
        memory.append(tracemalloc.get_traced_memory()[0])
        tracemalloc.stop()
        assert shelf.rows_refused == 0
    benchmark.extra_info |= {"seconds": round(many, 1), "times the tenth": round(many / few, 1),
                             "MB": [round(m / 1e6) for m in memory]}  # fmt: skip
    assert memory[1] <= 12 * memory[0]


def test_one_unlinked_cross(benchmark: Any) -> None:
    """A cross of three balanced chromosomes."""
    from crossplan.genetics.appearance import Observer
    from crossplan.genetics.catalogue import default_catalogue
    from crossplan.genetics.notation import read_fly
    from crossplan.genetics.progeny import cross

    observer = Observer(default_catalogue())
    mother = read_fly("w[1118]; AD-K12@attP40/CyO; DBD-Q07@attP2/TM6B, Tb[1]", "female")
    father = read_fly("w[1118]; Sco/CyO; TM3, Sb[1]/TM6B, Tb[1]", "male")
    progeny = benchmark(cross, mother, father, observer)
    assert len(progeny.classes) > 10
