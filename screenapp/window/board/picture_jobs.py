"""Pictures of the view, made in threads that touch nothing but arrays."""

from __future__ import annotations

import atexit
import logging
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QObject, QRunnable, QThreadPool, Signal

from screenapp.report.raster import Viewport

log = logging.getLogger(__name__)

Scalars = NDArray[np.float32]
Render = Callable[[Viewport], Scalars]


@dataclass(frozen=True, eq=False)
class Picture:
    """An image (height, width) of scalars and what it shows of the plane."""

    view: Viewport
    scalars: Scalars


class Bridge(QObject):
    """Carries pictures, or the words of the fault that prevented them, from thread to item."""

    done = Signal(object)


class PictureJob(QRunnable):
    """Makes the pictures wanted; touches numpy arrays only, and tells by the bridge."""

    def __init__(self, number: int, render: Render, views: tuple[Viewport, ...]) -> None:
        super().__init__()
        self.bridge = Bridge()
        self._number = number
        self._render = render
        self._views = views

    def run(self) -> None:
        """Make the pictures (in a thread of the pool)."""
        pictures: list[Picture] = []
        fault = ""
        try:
            pictures = [Picture(view, self._render(view)) for view in self._views]
        except Exception as error:  # an exception must not leave the thread
            log.exception("a picture of the field could not be made")
            fault = f"{type(error).__name__}: {error}"
        self.bridge.done.emit((self._number, pictures, fault))


_pool: QThreadPool | None = None


def threads() -> QThreadPool:
    global _pool
    if _pool is None:
        _pool = QThreadPool()
        _pool.setMaxThreadCount(2)
        atexit.register(wait_for_pictures)  # a thread must not outlive the interpreter
    return _pool


def wait_for_pictures(milliseconds: int = 10_000) -> bool:
    """Wait until no picture is being made."""
    return threads().waitForDone(milliseconds)
