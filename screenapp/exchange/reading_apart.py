"""Reads large drawings in a process of its own, which can be ended at any moment.

ezdxf cannot be stopped while it binds what it has read, and makes millions of objects meanwhile;
in a thread of the window these would be felt.  A small file is read where it is asked for: starting
a process takes longer than that.
"""

from __future__ import annotations

import multiprocessing
import time
from collections.abc import Callable
from dataclasses import replace
from multiprocessing.connection import Connection
from pathlib import Path

from screenapp.exchange.drawing import Drawing, DrawingError, DrawnCurve
from screenapp.exchange.dxf_reading import read_drawing
from screenapp.model.errors import ScreenappError
from screenapp.model.progress import SILENT, Progress, Step

LARGE = 2_000_000
"""Larger files are read apart [bytes]."""

CHUNK = 2000
"""Curves that are handed over at once: taking them holds up whoever waits only shortly."""

LOOK_S = 0.05
"""How often it is asked whether to stop [s]."""


def read_apart(path: Path, progress: Progress = SILENT, large: int = LARGE) -> Drawing:
    """As `read_drawing`, in another process where the file is larger than `large` [bytes].

    Raises:
        DrawingError: as `read_drawing`, or the process ended unexpectedly.
        Cancelled: the user wanted to stop; the process has been ended.
    """
    try:
        small = path.stat().st_size <= large
    except OSError:
        small = True  # `read_drawing` says what is wrong
    if small:
        return read_drawing(path, progress)
    here, there = multiprocessing.get_context("spawn").Pipe(duplex=False)
    process = multiprocessing.get_context("spawn").Process(
        target=_read_and_tell, args=(path, there), name="drawing", daemon=True
    )
    process.start()
    there.close()
    try:
        return _listen(here, path, progress)
    finally:
        here.close()
        process.kill()
        process.join()


def _listen(pipe: Connection, path: Path, progress: Progress) -> Drawing:
    """What the process says, until the whole drawing is here."""
    curves: list[DrawnCurve] = []
    while True:
        progress.check()
        try:
            if not pipe.poll(LOOK_S):
                continue
            told = pipe.recv()
        except (EOFError, OSError) as error:
            raise DrawingError(
                f"reading {path.name} ended unexpectedly, perhaps for want of memory",
                "export the flat pattern of the one part only, and try again",
            ) from error
        if isinstance(told, Step):
            progress.report(told)
        elif isinstance(told, ScreenappError):
            raise told
        elif isinstance(told, Drawing):
            return replace(told, curves=tuple(curves))
        else:
            curves += told


def _read_and_tell(path: Path, pipe: Connection) -> None:
    """Runs in the process: steps, then the curves in chunks, then the drawing without them."""
    try:
        drawing = read_drawing(path, Progress(report=_seldom(pipe)))
        for first in range(0, len(drawing.curves), CHUNK):
            pipe.send(drawing.curves[first : first + CHUNK])
        pipe.send(replace(drawing, curves=()))
    except ScreenappError as error:
        pipe.send(error)


def _seldom(pipe: Connection) -> Callable[[Step], None]:
    """Tells steps, but not more often than anybody looks."""
    last = 0.0

    def tell(step: Step) -> None:
        nonlocal last
        now = time.monotonic()
        if now - last >= LOOK_S:
            last = now
            pipe.send(step)

    return tell
