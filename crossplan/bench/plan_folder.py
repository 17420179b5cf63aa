"""The folder of a plan: every output made first, then every file written whole, beside the old one and then
in its place.

A calendar that stands in the folder already is read before it is replaced, so that entries that moved keep
their identity and entries that are gone are cancelled.
"""

from __future__ import annotations

import os
import stat
import tempfile
from collections.abc import Mapping
from pathlib import Path

from crossplan.bench.bench_sheet import bench_sheet_pdf
from crossplan.bench.calendar_file import calendar_ics
from crossplan.bench.labels import labels_pdf
from crossplan.bench.report import report_html
from crossplan.bench.sheet_layout import DEFAULT_LAYOUT, layout_named
from crossplan.bench.summary import summary_text
from crossplan.errors import CrossplanError, OutputError
from crossplan.plan.model import Plan

CALENDAR = "calendar.ics"


def plan_files(plan: Plan, earlier_calendar: bytes | None = None) -> dict[str, bytes]:
    """Return every file of the folder by name; labels, calendar and bench sheet only where there is work to
    do."""
    files = {
        "plan.json": plan.model_dump_json(by_alias=True, indent=2).encode() + b"\n",
        "summary.md": summary_text(plan).encode(),
        "report.html": report_html(plan).encode(),
    }
    if plan.steps:
        files["labels.pdf"] = labels_pdf(plan, layout_named(DEFAULT_LAYOUT))
    if plan.tasks:
        files["bench_sheet.pdf"] = bench_sheet_pdf(plan)
        files[CALENDAR] = _calendar(plan, earlier_calendar)
    return files


def _calendar(plan: Plan, earlier: bytes | None) -> bytes:
    try:
        return calendar_ics(plan, previous=earlier)
    except CrossplanError:
        if earlier is None:
            raise
        # what stands there is no calendar of ours: it is replaced, not merged
        return calendar_ics(plan)


def write_plan_folder(plan: Plan, folder: Path) -> tuple[Path, ...]:
    """Write the folder of a plan and return its files; a file that was there before is replaced whole.

    Raises:
        OutputError: the folder cannot be made, or a file cannot be written.
    """
    earlier = folder / CALENDAR
    try:
        files = plan_files(plan, earlier.read_bytes() if earlier.is_file() else None)
        folder.mkdir(parents=True, exist_ok=True)
        return write_files(folder, files)
    except OSError as error:
        raise OutputError(
            f"cannot write into {folder}: {error.strerror or error}",
            "choose another folder with --out, or check your rights there",
        ) from error


def write_files(folder: Path, files: Mapping[str, bytes]) -> tuple[Path, ...]:
    """Write all files beside their places first, then move each into its place; on failure nothing is left
    behind.

    A file that is replaced keeps its permissions, and a link its aim; a new file has those that the umask leaves.
    """
    beside: list[tuple[Path, Path]] = []
    try:
        for name, content in files.items():
            place = (folder / name).resolve() if (folder / name).is_symlink() else folder / name
            handle, temporary = tempfile.mkstemp(dir=place.parent, prefix=f".{place.name}.", suffix=".part")
            beside.append((Path(temporary), place))
            with os.fdopen(handle, "wb") as file:
                file.write(content)
            Path(temporary).chmod(_permissions(place))
        for temporary_path, place in beside:
            temporary_path.replace(place)
    finally:
        for temporary_path, _ in beside:
            temporary_path.unlink(missing_ok=True)
    return tuple(folder / name for name in files)


def _permissions(place: Path) -> int:
    """Return the permissions of the file there, or those of a new file."""
    if place.exists():
        return stat.S_IMODE(place.stat().st_mode)
    # the mask can only be read by setting it
    mask = os.umask(0o077)
    os.umask(mask)
    return 0o666 & ~mask
