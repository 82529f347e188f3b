"""A thread for work that is not screening (drawings, records), one job at a time, stopped when
asked.

A newer job replaces the one that runs; what an older one still reports is dropped.
"""

from __future__ import annotations

import logging
import threading
import traceback
from collections.abc import Callable

from PySide6.QtCore import QCoreApplication, QObject, QThread, Signal, Slot

from screenapp.model.errors import Cancelled, ScreenappError
from screenapp.model.progress import Progress, Step

log = logging.getLogger(__name__)

Work = Callable[[Progress], object]
Unexpected = Callable[[Exception], ScreenappError]
"""What is told of an error that nobody foresaw."""


class _Worker(QObject):
    """Runs in the thread."""

    progress = Signal(int, object)
    finished = Signal(int, object)
    failed = Signal(int, object)

    def __init__(self, unexpected: Unexpected) -> None:
        super().__init__()
        self._unexpected = unexpected

    @Slot(int, object, object)
    def run(self, number: int, work: Work, stop: threading.Event) -> None:
        """Do the work of one job."""
        if stop.is_set():
            return
        watch = Progress(lambda step: self.progress.emit(number, step), stop.is_set)
        try:
            result = work(watch)
        except Cancelled:
            return
        except ScreenappError as error:
            self.failed.emit(number, error)
        except Exception as error:  # nothing of this may end the program
            log.error("work in the background failed:\n%s", traceback.format_exc())
            self.failed.emit(number, self._unexpected(error))
        else:
            self.finished.emit(number, result)


class BackgroundJobs(QObject):
    """Starts and stops jobs from the window's thread.

    Signals:
        progress: a Step.
        finished: what the work gave.
        failed: a ScreenappError.
    """

    progress = Signal(object)
    finished = Signal(object)
    failed = Signal(object)

    _run = Signal(int, object, object)

    def __init__(self, name: str, unexpected: Unexpected, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self._number = 0
        self._stop: threading.Event | None = None
        self._thread = QThread()
        self._thread.setObjectName(name)
        self._worker = _Worker(unexpected)
        self._worker.moveToThread(self._thread)
        self._run.connect(self._worker.run)
        self._worker.progress.connect(self._progressed)
        self._worker.finished.connect(self._finished)
        self._worker.failed.connect(self._failed)
        app = QCoreApplication.instance()
        if app is not None:
            app.aboutToQuit.connect(self.shut_down)

    @property
    def busy(self) -> bool:
        """Whether a job runs that is still wanted."""
        return self._stop is not None

    def start(self, work: Work) -> None:
        """Do some work, in place of what runs."""
        self.cancel()
        self._number += 1
        self._stop = threading.Event()
        if not self._thread.isRunning():
            self._thread.start()
        self._run.emit(self._number, work, self._stop)

    def cancel(self) -> None:
        """Want nothing any more: the job stops soon, and is not heard of again."""
        if self._stop is not None:
            self._stop.set()
            self._stop = None

    def shut_down(self) -> None:
        """Stop, and wait for the thread to end."""
        self.cancel()
        self._thread.quit()
        self._thread.wait()

    @Slot(int, object)
    def _progressed(self, number: int, step: Step) -> None:
        if number == self._number and self.busy:
            self.progress.emit(step)

    @Slot(int, object)
    def _finished(self, number: int, result: object) -> None:
        if number == self._number and self.busy:
            self._stop = None
            self.finished.emit(result)

    @Slot(int, object)
    def _failed(self, number: int, error: ScreenappError) -> None:
        if number == self._number and self.busy:
            self._stop = None
            self.failed.emit(error)
