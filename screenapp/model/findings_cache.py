"""Keeps findings with all their arrays in the user's cache folder, so that a part that is opened
again shows them at once.

An entry is one file, `<key>.npz`: the arrays, and the records as JSON in an array of bytes.  It is
written whole or not at all; one that cannot be read, or was written by another version of the
program, is removed.  Nothing here ever stops the work: the cache may be lost at any time.
"""

from __future__ import annotations

import io
import json
import logging
import os
import re
from pathlib import Path
from typing import Any

import numpy as np
import platformdirs

from screenapp import __version__
from screenapp.model.atomic_write import write_atomically
from screenapp.model.findings import Findings
from screenapp.model.part import Part
from screenapp.model.record_packing import Arrays, outline_of, pack, unpack

MOST_ENTRIES = 60
MOST_BYTES = 500_000_000

FOLDER_VARIABLE = "SCREENAPP_CACHE"
"""Environment variable that names another folder for the cache."""

_FORMAT = f"screenapp findings; {__version__}; {outline_of(Findings)}"
_RECORD = "record"

log = logging.getLogger(__name__)


def cache_folder() -> Path:
    """The folder of the entries; it need not exist."""
    chosen = os.environ.get(FOLDER_VARIABLE)
    base = Path(chosen) if chosen else Path(platformdirs.user_cache_dir("screenapp", False))
    return base / "findings"


def store(findings: Findings, part: Part) -> bool:
    """Keep the findings of `part`, and remove the oldest entries beyond the bounds.

    Returns whether they were kept: a full disk is no reason to stop.
    """
    arrays: Arrays = {}
    record = {"format": _FORMAT, "title": part.title, "findings": pack(findings, arrays)}
    text = np.frombuffer(json.dumps(record).encode("utf-8"), dtype=np.uint8)
    members: dict[str, Any] = {**arrays, _RECORD: text}
    try:
        path = _path(findings.key)
        path.parent.mkdir(parents=True, exist_ok=True)
        write_atomically(path, lambda file: np.savez(file, **members))
        _trim(path.parent, path)
    except OSError as error:
        log.warning("findings could not be kept: %s", error)
        return False
    return True


def load(key: str) -> Findings | None:
    """The findings kept under `Findings.key`, or None.

    Their readings are of the probes that the part had then: the key does not count readings.
    """
    path = _path(key)
    try:
        content = path.read_bytes()
    except OSError:
        return None
    try:
        findings = _read(content)
    except Exception as error:  # a bad byte can raise nearly anything in zipfile and numpy
        log.warning("the kept findings %s cannot be read: %s", path.name, error)
        _remove(path)
        return None
    if findings is None or findings.key != key:
        _remove(path)
        return None
    _touch(path)
    return findings


def _read(content: bytes) -> Findings | None:
    """The findings of an entry; None if another version wrote it."""
    with np.load(io.BytesIO(content), allow_pickle=False) as entry:
        record = json.loads(entry[_RECORD].tobytes())
        if record["format"] != _FORMAT:
            return None
        arrays = {name: entry[name] for name in entry.files if name != _RECORD}
    return unpack(Findings, record["findings"], arrays)


def _path(key: str) -> Path:
    if not re.fullmatch(r"[0-9A-Za-z_-]{1,128}", key):
        raise ValueError(f"{key!r} is not a key of findings")
    return cache_folder() / f"{key}.npz"


def _trim(folder: Path, newest: Path) -> None:
    """Remove the entries used longest ago until the rest is within the bounds."""
    stats = []
    for path in folder.glob("*.npz"):
        try:
            stat = path.stat()
        except OSError:  # another process removed it
            continue
        stats.append((path == newest, stat.st_mtime_ns, stat.st_size, path))
    total = 0
    for number, (_, _, size, path) in enumerate(sorted(stats, reverse=True)):
        total += size
        if number >= MOST_ENTRIES or (total > MOST_BYTES and number > 0):
            _remove(path)


def _remove(path: Path) -> None:
    try:
        path.unlink(missing_ok=True)
    except OSError as error:
        log.warning("%s could not be removed: %s", path, error)


def _touch(path: Path) -> None:
    """Mark the entry as used now."""
    try:
        os.utime(path)
    except OSError as error:
        log.info("%s could not be marked as used: %s", path, error)
