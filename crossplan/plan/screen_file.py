"""Reading the screen file and its table of pairs.

What cannot be used at all raises; a bad row or target is a problem, and the good ones go on.
"""

from __future__ import annotations

import datetime as dt
import re
import tomllib
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from difflib import get_close_matches
from pathlib import Path
from typing import Any, Literal

from crossplan.errors import Problem, ScreenError, Severity, StockListError
from crossplan.plan.screen import ScreenFile, TargetSection
from crossplan.stocks.table import Row, read_table

FORBID_WORDS = ("balancers", "markers", "other insertions")
#: flies of either sex that found a stock when the screen does not say (common practice, no source)
FOUNDERS = 6
_COPIES = re.compile(r"(?P<n>\d+)\s*[x×]\s+(?P<symbol>\S.*)")


@dataclass(frozen=True)
class WantedTarget:
    """One wanted fly, all defaults filled in. `components` are (symbol as written, copies)."""

    name: str
    components: tuple[tuple[str, int], ...]
    sex: Literal["female", "male"]
    flies: int
    age_days: tuple[int, int]
    due: dt.date | None
    forbid: tuple[str, ...]
    stock: bool = False
    effector: str = ""


@dataclass(frozen=True)
class ScreenRequest:
    """A screen file that was read: its settings, its targets, and what was wrong with the rest."""

    path: str
    screen: ScreenFile
    targets: tuple[WantedTarget, ...]
    problems: tuple[Problem, ...]


def read_screen(path: Path) -> ScreenRequest:
    """Return what a screen file asks for.

    Raises:
        ScreenError: the file is missing, is no TOML, has unknown or absurd entries, or asks for nothing that can be used.
    """
    data = _load(path)
    screen = _validated(path, data)
    _check_sense(path, screen)
    problems: list[Problem] = []
    sections = list(screen.target)
    if screen.screen.pairs is not None:
        sections += _pairs(path, screen.screen.pairs, problems)
    targets = _targets(path, screen, sections, problems)
    if not targets:
        first = f": {problems[0].message}" if problems else ""
        raise ScreenError(f"{path} asks for no target that can be used{first}",
                          problems[0].hint if problems else "add [[target]] tables, or pairs = \"pairs.csv\"")  # fmt: skip
    return ScreenRequest(str(path), screen, tuple(targets), tuple(problems))


def _load(path: Path) -> dict[str, Any]:
    try:
        return tomllib.loads(path.read_text(encoding="utf-8-sig"))
    except FileNotFoundError:
        raise ScreenError(
            f"there is no file {path}", "check the name; `crossplan demo FOLDER` writes an example"
        ) from None
    except IsADirectoryError:
        raise ScreenError(f"{path} is a folder, not a screen file", "give the TOML file inside it") from None
    except UnicodeDecodeError:
        raise ScreenError(f"{path} is not UTF-8 text", "save it as UTF-8") from None
    except OSError as error:
        raise ScreenError(f"cannot read {path}: {error.strerror or error}", "check your rights to the file") from error
    except tomllib.TOMLDecodeError as error:
        raise ScreenError(f"{path}: {error}", "check quotes, commas and brackets on that line") from None


def _validated(path: Path, data: Mapping[str, Any]) -> ScreenFile:
    from pydantic import ValidationError

    try:
        return ScreenFile.model_validate(data)
    except ValidationError as error:
        first = error.errors()[0]
        where = [str(part) for part in first["loc"]]
        place = f"[{where[0]}] {' '.join(where[1:])}".strip() if where else "the file"
        if first["type"] == "extra_forbidden":
            raise ScreenError(f"{path}: {place} is not known", _closest(where)) from None
        raise ScreenError(f"{path}: {place}: {_plain(first['msg'])}, not {first.get('input')!r}",
                          "correct the value") from None  # fmt: skip


def _closest(where: list[str]) -> str:
    fields: Mapping[str, Any] = ScreenFile.model_fields
    if len(where) > 1 and where[0] in fields:
        annotation = TargetSection if where[0] == "target" else fields[where[0]].annotation
        fields = annotation.model_fields
    near = get_close_matches(where[-1], list(fields), n=1, cutoff=0.5)
    return f"perhaps '{near[0]}'" if near else f"known here: {', '.join(fields)}"


def _plain(message: str) -> str:
    return message.removeprefix("Value error, ").replace("Input should be", "must be").replace("Input", "the value")


def _check_sense(path: Path, screen: ScreenFile) -> None:
    low, high = screen.defaults.age_days
    if not 0 <= low <= high <= 60:
        raise ScreenError(
            f"{path}: [defaults] age_days = [{low}, {high}] is no span of days", "write [youngest, oldest]"
        )
    if not screen.calendar.working_days:
        raise ScreenError(f"{path}: [calendar] working_days is empty: nobody ever works", 'write ["Mon", "Tue", ...]')
    for name in ("morning", "afternoon"):
        text = getattr(screen.calendar, name)
        if not re.fullmatch(r"([01]?\d|2[0-3]):[0-5]\d", text):
            raise ScreenError(f"{path}: [calendar] {name} = '{text}' is no time of day", "write HH:MM, such as 09:00")
    if not 12 <= screen.rearing.temperature <= 30:
        raise ScreenError(
            f"{path}: [rearing] temperature = {screen.rearing.temperature:g} is outside 12 to 30 C",
            "flies are reared at 18 to 29 C",
        )
    if len(set(screen.calendar.people)) != len(screen.calendar.people):
        raise ScreenError(f"{path}: [calendar] people names somebody twice", "give each person a name of their own")


def _pairs(path: Path, name: str, problems: list[Problem]) -> list[TargetSection]:
    place = path.parent / name
    if place.resolve() == path.resolve():
        raise ScreenError(f"{path}: pairs names the screen file itself", "give the table of pairs (CSV)")
    try:
        table = read_table(place, ["target", "components"])
    except StockListError as error:
        raise ScreenError(f"[screen] pairs: {error.message}", error.hint) from error
    by_lower = {h.lower(): h for h in table.headings}
    for needed in ("target", "components"):
        if needed not in by_lower:
            raise ScreenError(
                f"{place} has no column '{needed}'; its columns are {', '.join(table.headings)}",
                "columns: target, components; optional sex, flies, age_days, due, forbid",
            )
    found = []
    for row in table.rows:
        section = _pair(str(place), row, by_lower, problems)
        if section is not None:
            found.append(section)
    return found


def _pair(path: str, row: Row, by_lower: Mapping[str, str], problems: list[Problem]) -> TargetSection | None:
    from pydantic import ValidationError

    cells = {name: row.cells[heading].strip() for name, heading in by_lower.items()}
    data: dict[str, Any] = {
        "target": cells["target"],
        "components": tuple(c.strip() for c in cells["components"].split(",") if c.strip()),
    }
    for name in ("sex", "flies"):
        if cells.get(name):
            data[name] = cells[name]
    if cells.get("age_days"):
        ages = re.findall(r"\d+", cells["age_days"])
        data["age_days"] = tuple(ages[:2]) if len(ages) > 1 else (ages * 2 if ages else (cells["age_days"],) * 2)
    if cells.get("due"):
        data["due"] = cells["due"]
    if cells.get("forbid"):
        data["forbid"] = tuple(c.strip() for c in cells["forbid"].split(",") if c.strip())
    try:
        return TargetSection.model_validate(data)
    except ValidationError as error:
        first = error.errors()[0]
        column = str(first["loc"][0]) if first["loc"] else ""
        problems.append(
            Problem(
                "pair-row",
                Severity.ERROR,
                f"target '{cells['target']}': {_plain(first['msg'])}, not '{cells.get(column, '')}'",
                "correct the cell; the other rows are planned",
                path,
                row.number,
                column,
            )  # fmt: skip
        )
        return None


def _targets(
    path: Path, screen: ScreenFile, sections: Iterable[TargetSection], problems: list[Problem]
) -> list[WantedTarget]:
    targets: list[WantedTarget] = []
    names: set[str] = set()
    effectors: tuple[str, ...] = screen.screen.effectors or ("",)
    for section in sections:
        for effector in effectors:
            name = f"{section.target} x {effector}" if len(effectors) > 1 else section.target
            wanted = _wanted(screen, section, name, effector)
            fault = _contradiction(wanted, names)
            if fault:
                problems.append(Problem("target", Severity.ERROR, f"target '{name}': {fault[0]}", fault[1], str(path)))
                continue
            names.add(name)
            targets.append(wanted)
    return targets


def _wanted(screen: ScreenFile, section: TargetSection, name: str, effector: str) -> WantedTarget:
    defaults = screen.defaults
    components = [_component(c) for c in (*section.components, *((effector,) if effector else ()))]
    usual = () if section.stock else defaults.forbid
    return WantedTarget(
        name, tuple(components), section.sex or defaults.sex, section.flies or (FOUNDERS if section.stock else defaults.flies),
        section.age_days or defaults.age_days, section.due or defaults.due,
        section.forbid if section.forbid is not None else usual, section.stock, effector,
    )  # fmt: skip


def _component(text: str) -> tuple[str, int]:
    match = _COPIES.fullmatch(text.strip())
    return (match["symbol"].strip(), int(match["n"])) if match else (text.strip(), 1)


def _contradiction(wanted: WantedTarget, names: set[str]) -> tuple[str, str] | None:
    symbols = [symbol for symbol, _ in wanted.components]
    if not wanted.name:
        return "it has no name", "fill the target column"
    if wanted.name in names:
        return "the name stands twice", "give each target a name of its own"
    if not symbols:
        return "it has no components", "list them, divided by commas"
    twice = next((s for s in symbols if symbols.count(s) > 1), None)
    if twice:
        return f"{twice} is listed twice", f"write '2x {twice}' for two copies"
    if any(not 1 <= copies <= 2 for _, copies in wanted.components):
        return "a fly has two homologues: one or two copies can be asked for", "write '2x SYMBOL' for two"
    both = sorted(set(symbols) & set(wanted.forbid))
    if both:
        return f"{', '.join(both)} must be carried and must not be carried", "take it out of one of the two"
    low, high = wanted.age_days
    if not 0 <= low <= high <= 60:
        return f"an age of {low} to {high} days is no span", "write youngest-oldest, such as 4-7"
    return None
