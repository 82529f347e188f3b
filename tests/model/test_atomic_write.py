"""A file is replaced whole or stays as it was."""

from __future__ import annotations

import os
import sys
from pathlib import Path
from typing import BinaryIO

import pytest

from screenapp.model.atomic_write import write_atomically


def test_it_writes_and_replaces(tmp_path: Path) -> None:
    path = tmp_path / "a.txt"
    write_atomically(path, b"one")
    write_atomically(path, lambda file: file.write(b"two"))
    assert path.read_bytes() == b"two"
    assert os.listdir(tmp_path) == ["a.txt"]


def test_a_failure_halfway_leaves_the_old_file_and_no_rest(tmp_path: Path) -> None:
    path = tmp_path / "a.txt"
    path.write_bytes(b"old")

    def fail(file: BinaryIO) -> None:
        file.write(b"half")
        raise OSError("disk full")

    with pytest.raises(OSError, match="disk full"):
        write_atomically(path, fail)
    assert path.read_bytes() == b"old"
    assert os.listdir(tmp_path) == ["a.txt"]


def test_the_rename_comes_after_the_flush(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    steps: list[str] = []
    flush, rename = os.fsync, Path.replace

    def note_flush(handle: int) -> None:
        steps.append("flush")
        flush(handle)

    def note_rename(self: Path, target: Path) -> Path:
        steps.append("rename")
        return rename(self, target)

    monkeypatch.setattr(os, "fsync", note_flush)
    monkeypatch.setattr(Path, "replace", note_rename)
    write_atomically(tmp_path / "a.txt", b"x")
    assert steps[:2] == ["flush", "rename"]


@pytest.mark.parametrize("mode", [0o644, 0o600, 0o664])
def test_permissions_are_kept(tmp_path: Path, mode: int) -> None:
    path = tmp_path / "a.txt"
    path.write_bytes(b"old")
    path.chmod(mode)
    before = path.stat().st_mode
    write_atomically(path, b"new")
    assert path.stat().st_mode == before


def test_a_new_file_has_the_permissions_of_any_new_file(tmp_path: Path) -> None:
    (tmp_path / "plain.txt").write_bytes(b"")
    write_atomically(tmp_path / "a.txt", b"x")
    assert (tmp_path / "a.txt").stat().st_mode == (tmp_path / "plain.txt").stat().st_mode


def test_a_link_stays_a_link(tmp_path: Path) -> None:
    real, link = tmp_path / "real.txt", tmp_path / "link.txt"
    real.write_bytes(b"old")
    try:
        link.symlink_to(real)
    except OSError:
        assert sys.platform == "win32"  # where links need a privilege
        return
    write_atomically(link, b"new")
    assert link.is_symlink()
    assert real.read_bytes() == b"new"


def test_a_folder_that_is_not_there_is_an_error(tmp_path: Path) -> None:
    with pytest.raises(FileNotFoundError):
        write_atomically(tmp_path / "none" / "a.txt", b"x")
