"""Opens a DXF file whatever state it is in: read, mended and said so, or refused with the reason.

A sound file is read as it is; one with a broken structure is tried once more by the recovering
reader of ezdxf, and what that one mended is reported.
"""

from __future__ import annotations

import logging
import os
from pathlib import Path
from typing import BinaryIO, TextIO

import ezdxf
from ezdxf import recover
from ezdxf.document import Drawing as Document
from ezdxf.lldxf.validator import is_binary_dxf_file

from screenapp.exchange.drawing import DrawingError
from screenapp.model.errors import Cancelled
from screenapp.model.progress import SILENT, Progress, Step

logging.getLogger("ezdxf").setLevel(logging.CRITICAL)  # what matters of it is told by `open_dxf`

LARGEST = 150_000_000
"""A larger file is refused [bytes]: it would need more than 2 GB of memory."""

OFTEN = 4096
"""Lines between two looks at whether the user wants to stop."""

READ_SHARE = 0.7
"""The share of the work that reading the lines is, as the progress bar counts."""

_NO_DXF = "save the drawing as DXF (R12 to R2018) and bring that in"


class _Watched:
    """A stream that reports how far it is and stops when the user wants it."""

    def __init__(self, stream: TextIO | BinaryIO, size: int, progress: Progress) -> None:
        self._stream = stream
        self._size = max(size, 1)
        self._progress = progress
        self._lines = 0
        self._read = 0

    def readline(self) -> str | bytes:
        """The next line."""
        line = self._stream.readline()
        self._lines += 1
        self._read += len(line)
        if self._lines % OFTEN == 0:
            self._progress.check()
            share = min(1.0, self._read / self._size)
            self._progress.report(Step("reading the drawing", 0, READ_SHARE * share))
        return line


def open_dxf(path: Path, progress: Progress = SILENT) -> tuple[Document, tuple[str, ...]]:
    """The document in a file, and what had to be mended in it.

    Raises:
        DrawingError: it cannot be opened, is too big, is no DXF, or is beyond mending.
        Cancelled: the user wanted to stop.
    """
    size, head = _first_look(path)
    progress.check()
    if is_binary_dxf_file(str(path)):
        return _read_binary(path)
    _must_look_like_dxf(path, head)
    try:
        with open(path, encoding=_encoding(path), errors="surrogateescape") as stream:
            document = ezdxf.read(_Watched(stream, size, progress))
        return document, ()
    except Cancelled:
        raise
    except Exception as first:  # its reader raises whatever the nonsense in a file leads to
        progress.check()
        return _recovered(path, size, progress, first)


def _first_look(path: Path) -> tuple[int, bytes]:
    try:
        size = path.stat().st_size
        with open(path, "rb") as stream:
            head = stream.read(4096)
    except OSError as error:
        raise DrawingError(
            f"{path} cannot be opened: {error.strerror or error}", "look at the name and the folder"
        ) from error
    if size == 0:
        raise DrawingError(f"{path.name} is empty", "export the drawing again")
    if size > LARGEST:
        raise DrawingError(
            f"{path.name} has {size / 1e6:.0f} MB, at most {LARGEST / 1e6:.0f} MB are read",
            "export the flat pattern of the one part only, without hatches and pictures",
        )
    return size, head


def _must_look_like_dxf(path: Path, head: bytes) -> None:
    if head[:4] == b"AC10" and head[4:6].isdigit():
        raise DrawingError(f"{path.name} is a DWG file, not a DXF file", _NO_DXF)
    if b"\0" in head:
        raise DrawingError(f"{path.name} is a binary file and no DXF file", _NO_DXF)
    lines = head.decode("latin-1").lstrip("ï»¿").splitlines()
    codes = [line.strip() for line in lines[0:40:2]]
    if not codes or not all(code.isdigit() for code in codes[:-1] or codes):
        raise DrawingError(
            f"{path.name} is no DXF file: line 1 is not the number of a group code", _NO_DXF
        )


def _encoding(path: Path) -> str:
    """The text encoding that the header names."""
    try:
        with open(path, encoding="utf-8", errors="ignore") as stream:
            return str(ezdxf.filemanagement.dxf_stream_info(stream).encoding)
    except Exception:  # the header is broken: the reading itself tells
        return "utf-8"


def _read_binary(path: Path) -> tuple[Document, tuple[str, ...]]:
    """The binary form of DXF; there is no recovering reader for it."""
    try:
        return ezdxf.readfile(str(path)), ()
    except Exception as error:  # its reader unpacks bytes with no check of its own
        raise DrawingError(
            f"{path.name} is a binary DXF file that breaks off or is broken{_told(error)}",
            "export the drawing again, as text (ASCII) DXF if you can choose",
        ) from error


def _recovered(
    path: Path, size: int, progress: Progress, first: Exception
) -> tuple[Document, tuple[str, ...]]:
    with open(path, "rb") as stream:
        complete = _ends(stream, size)
        stream.seek(0)
        try:
            document, audit = recover.read(_Watched(stream, size, progress))
            if not len(document.modelspace()) and not complete:
                raise DrawingError(
                    f"{path.name} breaks off before its first line is drawn",
                    "copy or export the drawing again",
                )
        except (Cancelled, DrawingError):
            raise
        except Exception as error:
            raise DrawingError(
                f"{path.name} is broken beyond mending{_told(first)}", "export the drawing again"
            ) from error
    told = [f"the file is broken and was mended as far as possible{_told(first)}"]
    if not complete:
        told.append("the file breaks off: what stood behind that is missing")
    found = len(audit.errors) + len(audit.fixes)
    if found:
        flaws = "flaw" if found == 1 else "flaws"
        told.append(f"{found} {flaws} in its structure mended or passed over")
    return document, tuple(told)


def _ends(stream: BinaryIO, size: int) -> bool:
    """Whether the closing mark of a DXF file stands near its end."""
    stream.seek(max(0, size - 256), os.SEEK_SET)
    return b"EOF" in stream.read()


def _told(error: Exception) -> str:
    """What the reader said, fit to stand behind a sentence."""
    text = str(error).strip().splitlines()
    said = text[0].removeprefix("DXFStructureError:").strip().rstrip(".") if text else ""
    return f" ({said})" if said else ""
