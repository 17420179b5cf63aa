from __future__ import annotations

import os
import stat
from pathlib import Path

import pytest
from example_plan import example_plan

from crossplan.bench.plan_folder import write_files, write_plan_folder
from crossplan.errors import OutputError


def mode(path: Path) -> int:
    return stat.S_IMODE(path.stat().st_mode)


def test_a_new_file_follows_the_umask_and_a_replaced_one_keeps_its_own(tmp_path: Path) -> None:
    (tmp_path / "old").write_bytes(b"before")
    (tmp_path / "old").chmod(0o640)
    before = os.umask(0o007)
    try:
        write_files(tmp_path, {"old": b"after", "new": b"x"})
        assert os.umask(0o007) == 0o007
    finally:
        os.umask(before)
    assert (tmp_path / "old").read_bytes() == b"after"
    assert (mode(tmp_path / "old"), mode(tmp_path / "new")) == (0o640, 0o660)


def test_a_link_stays_a_link(tmp_path: Path) -> None:
    (tmp_path / "kept").mkdir()
    (tmp_path / "kept" / "file").write_bytes(b"before")
    (tmp_path / "link").symlink_to("kept/file")
    write_files(tmp_path, {"link": b"after"})
    assert (tmp_path / "link").is_symlink()
    assert (tmp_path / "kept" / "file").read_bytes() == b"after"


def test_nothing_is_left_when_one_file_cannot_be_written(tmp_path: Path) -> None:
    (tmp_path / "a").write_bytes(b"before")
    with pytest.raises(FileNotFoundError):
        write_files(tmp_path, {"a": b"after", "no/such/folder": b"x"})
    assert [p.name for p in tmp_path.iterdir()] == ["a"]
    assert (tmp_path / "a").read_bytes() == b"before"


def test_a_folder_that_is_a_file_is_refused_in_words(tmp_path: Path) -> None:
    (tmp_path / "plan").write_bytes(b"")
    with pytest.raises(OutputError, match="cannot write into"):
        write_plan_folder(example_plan(), tmp_path / "plan")
