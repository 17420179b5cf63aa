"""Commands start quickly: `--help` loads nothing heavy. No stopwatch, so no flakiness."""

from __future__ import annotations

import subprocess
import sys

import pytest

HEAVY = ("pandas", "numpy", "networkx", "ortools", "pydantic", "fpdf", "segno", "icalendar", "openpyxl", "odf", "rich")
COMMANDS = ("plan", "progeny", "read", "audit", "labels", "calendar", "today", "log", "rear", "count", "demo")


def loaded_by(*arguments: str) -> set[str]:
    """Return the modules that a run of the command line has loaded when it leaves."""
    code = (
        "import sys, atexit\n"
        "atexit.register(lambda: print('\\n'.join(sys.modules), file=sys.stderr))\n"
        f"sys.argv = {['crossplan', *arguments]!r}\n"
        "from crossplan.cli.app import main\n"
        "main()\n"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    return {name.split(".")[0] for name in done.stderr.splitlines()}


@pytest.mark.parametrize("arguments", [("--help",), ("--version",), *((c, "--help") for c in COMMANDS)])
def test_help_loads_nothing_heavy(arguments: tuple[str, ...]) -> None:
    assert loaded_by(*arguments).isdisjoint(HEAVY)


def test_the_probe_sees_modules() -> None:
    assert "typer" in loaded_by("--help")
