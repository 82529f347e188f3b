"""The bridge to the solver thread: one screening at a time, stopped within half a second.

The worker object lives in a thread of its own and owns the mesher (a warm process that can be
killed).  The window's thread sends it parts and hears back by queued signals only.  Each job has a
number; what an older job still reports is dropped, so a cancelled job can never speak again even
if the library it is in needs longer to come back.
"""

from __future__ import annotations

import logging
import threading
import traceback
from collections.abc import Callable
from typing import Any, Protocol

from PySide6.QtCore import QObject, QThread, QTimer, Signal, Slot

from screenapp.model.errors import Cancelled, ScreenappError
from screenapp.model.findings import Fields, Findings, PassSummary
from screenapp.model.part import Part
from screenapp.model.progress import Progress, Step

log = logging.getLogger(__name__)

GRACE_MS = 400
"""A cancelled job that has not come back by then is left to end by itself [ms]."""

PATIENCE_MS = 20_000
"""How long closing waits for the thread before the mesher is ended under it [ms]."""


class MesherLike(Protocol):
    """What the worker needs of a mesher beyond handing it to the screening function."""

    def start(self) -> None:
        """Begin the process, so that it is warm when it is wanted."""

    def close(self) -> None:
        """End the process."""


OnPass = Callable[[Fields, PassSummary], None]
ScreenFunction = Callable[[Part, Any, Progress, OnPass], Findings]
MakeMesher = Callable[[], MesherLike]


class _Worker(QObject):
    """Runs in the solver thread."""

    progress = Signal(int, object)
    pass_done = Signal(int, object, object)
    finished = Signal(int, object)
    failed = Signal(int, object)
    cancelled = Signal(int)

    def __init__(self, screen: ScreenFunction, make_mesher: MakeMesher) -> None:
        super().__init__()
        self._screen = screen
        self._make_mesher = make_mesher
        self._mesher: MesherLike | None = None

    @Slot()
    def warm_up(self) -> None:
        """Start the mesher's process; a failure here is met again, and told, when screening."""
        try:
            self._take_mesher()
        except Exception:
            log.warning("the mesher could not be started ahead:\n%s", traceback.format_exc())

    @Slot(int, object, object)
    def run(self, number: int, part: Part, stop: threading.Event) -> None:
        """Screen a part."""
        if stop.is_set():
            self.cancelled.emit(number)
            return
        watch = Progress(lambda step: self.progress.emit(number, step), stop.is_set)
        try:
            findings = self._screen(
                part,
                self._take_mesher(),
                watch,
                lambda fields, summary: self.pass_done.emit(number, fields, summary),
            )
        except Cancelled:
            self.cancelled.emit(number)
        except ScreenappError as error:
            self.failed.emit(number, error)
        except Exception as error:  # the part is immutable and unharmed whatever happened here
            log.error("screening failed:\n%s", traceback.format_exc())
            self.failed.emit(number, _unexpected(error))
        else:
            self.finished.emit(number, findings)

    @Slot()
    def close(self) -> None:
        """End the mesher's process in the thread that owns it, then the thread."""
        self.end_mesher()
        self.thread().quit()

    def end_mesher(self) -> None:
        """End the mesher's process."""
        mesher, self._mesher = self._mesher, None
        if mesher is not None:
            mesher.close()

    def _take_mesher(self) -> MesherLike:
        if self._mesher is None:
            made = self._make_mesher()
            made.start()
            self._mesher = made
        return self._mesher


class Screener(QObject):
    """Starts, watches and stops screenings from the window's thread.

    Signals:
        started: a part is being screened.
        progress: a Step.
        pass_done: Fields and PassSummary of a pass.
        finished: Findings, and the Part they belong to.
        failed: a ScreenappError.
        cancelled: the user's wish was met.
        idle: nothing runs any more, however it ended.
    """

    started = Signal()
    progress = Signal(object)
    pass_done = Signal(object, object)
    finished = Signal(object, object)
    failed = Signal(object)
    cancelled = Signal()
    idle = Signal()

    _run = Signal(int, object, object)
    _warm = Signal()
    _close = Signal()

    def __init__(
        self,
        screen: ScreenFunction,
        make_mesher: MakeMesher,
        parent: QObject | None = None,
    ) -> None:
        super().__init__(parent)
        self._number = 0
        self._stop: threading.Event | None = None
        self._part: Part | None = None
        self._thread = QThread()
        self._thread.setObjectName("screening")
        self._worker = _Worker(screen, make_mesher)
        self._worker.moveToThread(self._thread)
        self._run.connect(self._worker.run)
        self._warm.connect(self._worker.warm_up)
        self._close.connect(self._worker.close)
        self._worker.progress.connect(self._progressed)
        self._worker.pass_done.connect(self._passed)
        self._worker.finished.connect(self._finished)
        self._worker.failed.connect(self._failed)
        self._worker.cancelled.connect(self._cancelled)
        self._grace = QTimer(self)
        self._grace.setSingleShot(True)
        self._grace.setInterval(GRACE_MS)
        self._grace.timeout.connect(lambda: self._cancelled(self._number))
        self._thread.start()

    @property
    def busy(self) -> bool:
        """Whether a screening runs."""
        return self._stop is not None

    @property
    def cancelling(self) -> bool:
        """Whether the one that runs has been asked to stop."""
        return self._stop is not None and self._stop.is_set()

    def warm_up(self) -> None:
        """Start the mesher's process in the background."""
        self._warm.emit()

    def start(self, part: Part) -> None:
        """Screen `part`; a screening that still runs is stopped and replaced."""
        if self._stop is not None:
            self._stop.set()
            self._grace.stop()
        self._number += 1
        self._stop = threading.Event()
        self._part = part
        self.started.emit()
        self._run.emit(self._number, part, self._stop)

    def cancel(self) -> None:
        """Stop; `cancelled` follows within half a second."""
        if self._stop is None or self._stop.is_set():
            return
        self._stop.set()
        self._grace.start()

    def shut_down(self) -> None:
        """Stop everything and wait for the thread to end."""
        if not self._thread.isRunning():
            return
        if self._stop is not None:
            self._stop.set()
        self._grace.stop()
        self._close.emit()
        if not self._thread.wait(PATIENCE_MS):
            log.error("the solver thread does not end; ending its mesher under it")
            self._worker.end_mesher()
            self._thread.wait()
        self._stop = None

    # --- what the worker reports --------------------------------------------------------------

    @Slot(int, object)
    def _progressed(self, number: int, step: Step) -> None:
        if number == self._number and self.busy and not self.cancelling:
            self.progress.emit(step)

    @Slot(int, object, object)
    def _passed(self, number: int, fields: Fields, summary: PassSummary) -> None:
        if number == self._number and self.busy and not self.cancelling:
            self.pass_done.emit(fields, summary)

    @Slot(int, object)
    def _finished(self, number: int, findings: Findings) -> None:
        if number != self._number or not self.busy:
            return
        part = self._part
        self._end()
        self.finished.emit(findings, part)
        self.idle.emit()

    @Slot(int, object)
    def _failed(self, number: int, error: ScreenappError) -> None:
        if number != self._number or not self.busy:
            return
        self._end()
        self.failed.emit(error)
        self.idle.emit()

    @Slot(int)
    def _cancelled(self, number: int) -> None:
        if number != self._number or not self.busy:
            return
        self._end()
        self.cancelled.emit()
        self.idle.emit()

    def _end(self) -> None:
        self._grace.stop()
        self._stop = None
        self._part = None


def _unexpected(error: Exception) -> ScreenappError:
    text = str(error).strip().splitlines()
    detail = f": {text[0]}" if text else ""
    return ScreenappError(
        f"the screening ended unexpectedly ({type(error).__name__}{detail})",
        "the part is unharmed: save it, screen it again, and report this if it comes back",
    )
