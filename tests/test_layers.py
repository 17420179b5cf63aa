"""The house of the project: which room may import which, and that every room is there."""

from __future__ import annotations

import ast
from pathlib import Path

PACKAGE = Path(__file__).resolve().parent.parent / "crossplan"

#: for each room, the rooms that it may import besides itself
MAY_IMPORT: dict[str, set[str]] = {
    "errors": set(),
    "genetics": {"errors"},
    "stocks": {"errors", "genetics"},
    "rearing": {"errors", "genetics"},
    "plan": {"errors", "genetics", "stocks", "rearing"},
    "schemes": {"errors", "genetics", "stocks", "rearing", "plan"},
    "schedule": {"errors", "genetics", "stocks", "rearing", "plan"},
    "bench": {"errors", "genetics", "stocks", "rearing", "plan", "schemes", "schedule"},
    "logbook": {"errors", "genetics", "stocks", "rearing", "plan", "schemes", "schedule", "bench"},
    "api": {"errors", "genetics", "stocks", "rearing", "plan", "schemes", "schedule", "bench", "logbook"},
    "cli": {"errors", "api"},
}
NO_ROOM = {"__init__", "__main__"}
FEWEST_FILES = 45


def room_of(path: Path) -> str:
    relative = path.relative_to(PACKAGE)
    return relative.parts[0] if len(relative.parts) > 1 else relative.stem


def imported_rooms(path: Path) -> set[str]:
    """Return the rooms of crossplan that a file imports, type-only and in-function imports included."""
    rooms: set[str] = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        names: list[str] = []
        if isinstance(node, ast.Import):
            names = [a.name for a in node.names]
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path}: relative import"
            names = [node.module or ""]
            if node.module == "crossplan":
                names = [f"crossplan.{a.name}" for a in node.names]
        for name in names:
            parts = name.split(".")
            if parts[0] == "crossplan" and len(parts) > 1 and not parts[1].startswith("__"):
                rooms.add(parts[1])
    return rooms


def files() -> list[Path]:
    return sorted(p for p in PACKAGE.rglob("*.py"))


def test_enough_files_were_seen() -> None:
    assert len(files()) >= FEWEST_FILES


def test_every_room_is_listed_and_there() -> None:
    rooms = {room_of(p) for p in files()} - NO_ROOM
    assert rooms == set(MAY_IMPORT)


def test_imports_run_one_way() -> None:
    faults = []
    for path in files():
        room = room_of(path)
        if room in NO_ROOM:
            continue
        for other in imported_rooms(path) - MAY_IMPORT[room] - {room}:
            faults.append(f"{path.relative_to(PACKAGE)} ({room}) imports {other}")
    assert faults == []


def test_only_cli_prints_exits_or_reads_the_clock() -> None:
    faults = []
    for path in files():
        if room_of(path) in ("cli", *NO_ROOM):
            continue
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Call):
                called = ast.unparse(node.func)
                if called in ("print", "exit", "sys.exit", "datetime.now", "date.today", "dt.date.today",
                              "dt.datetime.now", "time.time"):  # fmt: skip
                    faults.append(f"{path.relative_to(PACKAGE)}:{node.lineno} calls {called}")
    assert faults == []
