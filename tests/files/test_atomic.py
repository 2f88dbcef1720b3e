"""A file appears whole or not at all."""

from __future__ import annotations

import os
import stat
from pathlib import Path

import pytest
from slopewell.files.atomic import whole_file, write_text
from slopewell.problems import UnusableInput


def test_a_text_is_written_as_it_is(tmp_path: Path) -> None:
    write_text(tmp_path / "a.txt", "é\r\n")
    assert (tmp_path / "a.txt").read_bytes() == "é\r\n".encode()


def test_the_folder_is_made(tmp_path: Path) -> None:
    write_text(tmp_path / "new" / "deep" / "a.txt", "a")
    assert (tmp_path / "new" / "deep" / "a.txt").read_text() == "a"


def test_until_the_end_the_old_file_stands(tmp_path: Path) -> None:
    path = tmp_path / "a.txt"
    path.write_text("old")
    with whole_file(path) as temporary:
        temporary.write_text("half")
        assert path.read_text() == "old"
    assert path.read_text() == "half"


def stop_half_way(path: Path) -> None:
    with whole_file(path) as temporary:
        temporary.write_text("half")
        raise RuntimeError("stopped")


def test_a_failure_leaves_what_was_there_and_nothing_else(tmp_path: Path) -> None:
    path = tmp_path / "a.txt"
    path.write_text("old")
    with pytest.raises(RuntimeError, match="stopped"):
        stop_half_way(path)
    assert [file.name for file in tmp_path.iterdir()] == ["a.txt"]
    assert path.read_text() == "old"


@pytest.mark.parametrize("error", [OSError(28, "No space left on device"), PermissionError(13, "Permission denied")])
def test_a_full_disk_is_said_in_one_line(error: OSError, tmp_path: Path) -> None:
    wanted = rf"a\.txt can't be written: {error.strerror}"
    with pytest.raises(UnusableInput, match=wanted), whole_file(tmp_path / "a.txt"):
        raise error
    assert list(tmp_path.iterdir()) == []


def test_a_folder_in_place_of_the_file_is_said(tmp_path: Path) -> None:
    (tmp_path / "a.txt").mkdir()
    with pytest.raises(UnusableInput, match="can't be written"):
        write_text(tmp_path / "a.txt", "a")


def test_a_file_in_place_of_the_folder_is_said(tmp_path: Path) -> None:
    (tmp_path / "folder").write_text("no folder")
    with pytest.raises(UnusableInput, match="can't be written"):
        write_text(tmp_path / "folder" / "a.txt", "a")


def test_permissions_are_those_of_an_ordinary_new_file(tmp_path: Path) -> None:
    before = os.umask(0o027)
    try:
        write_text(tmp_path / "a.txt", "a")
    finally:
        os.umask(before)
    assert stat.S_IMODE((tmp_path / "a.txt").stat().st_mode) == 0o640
