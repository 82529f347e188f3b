"""Writing a file so that it is either the old one or the new one, never half of each."""

from __future__ import annotations

import os
import tempfile
from collections.abc import Callable
from pathlib import Path
from typing import BinaryIO


def write_atomically(path: Path, content: bytes | Callable[[BinaryIO], object]) -> None:
    """Write beside `path`, flush to the disk, rename over it.

    `content` is the bytes, or a function that writes them to the open file it is given.  A link is
    followed, so that it stays a link; the permissions of an existing file are kept.

    Raises:
        OSError: the folder is missing or not writable, the disk is full ...; `path` is unharmed.
    """
    target = Path(os.path.realpath(path))
    handle, name = tempfile.mkstemp(
        prefix=f".{target.name[:80]}.", suffix=".tmp", dir=target.parent
    )
    beside = Path(name)
    try:
        with os.fdopen(handle, "wb") as file:
            if callable(content):
                content(file)
            else:
                file.write(content)
            file.flush()
            os.fsync(file.fileno())
        beside.chmod(_mode(target))
        beside.replace(target)
    except BaseException:
        beside.unlink(missing_ok=True)
        raise
    _flush_folder(target.parent)


def _mode(target: Path) -> int:
    """Permissions for the new file: those of the old one, else what the umask leaves."""
    try:
        return target.stat().st_mode & 0o777
    except FileNotFoundError:
        mask = os.umask(0)
        os.umask(mask)
        return 0o666 & ~mask


def _flush_folder(folder: Path) -> None:
    """Make the rename itself durable, where the system lets a folder be flushed."""
    if os.name != "posix":
        return
    handle = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)
