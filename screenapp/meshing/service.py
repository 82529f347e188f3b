"""The mesher: gmsh in a process of its own that can be stopped at any moment.

gmsh cannot be cancelled, crashes with two threads and may hang, so it runs in a worker process.
The worker is started as a plain `python -c` child: it imports nothing of the program's main
module (no Qt), needs no display, and ends by itself when its input closes, that is, when this
process is gone.
"""

from __future__ import annotations

import json
import os
import queue
import subprocess
import sys
import tempfile
import threading
import time
from types import TracebackType
from typing import IO, Any, BinaryIO, Self, cast

from screenapp.meshing.size_field import SizeField
from screenapp.meshing.worker import receive, send
from screenapp.model.errors import Cancelled, MeshingError
from screenapp.model.mesh import Mesh
from screenapp.model.progress import SILENT, Progress
from screenapp.model.shape import Shape

WORK = "screenapp.meshing.making:make_mesh"
"""What the worker does, as "module:function"."""

POLL = 0.02
"""Seconds between two looks at `progress.cancelled`."""

START_LIMIT = 60.0
"""Seconds within which a started worker must be ready."""

ONE_THREAD = {"OMP_NUM_THREADS": "1", "OPENBLAS_NUM_THREADS": "1", "MKL_NUM_THREADS": "1"}
"""The worker adds up on one thread, so that a mesh does not hang on how many there are."""

BOOT = (
    "import json, sys; sys.path[:] = json.loads(sys.argv[1]); "
    "from screenapp.meshing.worker import serve; serve()"
)


class Mesher:
    """Makes meshes in a worker process; one mesh at a time, from any thread.

    Args:
        time_limit: seconds after which a mesh is given up [s].
        work: what the worker runs; other than the mesher only in tests.

    Example::

        with Mesher() as mesher:
            mesh = mesher.mesh(shape, initial_sizes(shape, part.mesh), progress)
    """

    def __init__(self, time_limit: float = 180.0, work: str = WORK) -> None:
        self._time_limit = time_limit
        self._work = work
        self._lock = threading.Lock()
        self._closing = threading.Event()
        self._worker: _Worker | None = None

    def start(self) -> None:
        """Start the worker without waiting, so that it is warm when a mesh is asked for."""
        if self._lock.acquire(blocking=False):  # else it is in use, and warm
            try:
                self._ensure()
            finally:
                self._lock.release()

    def mesh(self, shape: Shape, sizes: SizeField, progress: Progress = SILENT) -> Mesh:
        """Mesh a valid shape.

        Only `progress.cancelled` is used: the stage is the caller's to report.

        Raises:
            Cancelled: `progress.cancelled` answered True; the worker has been killed.
            MeshingError: no acceptable mesh, the worker ended, or it ran beyond the time limit.
                The next call starts a new worker.
        """
        return cast(Mesh, self._run((shape, sizes), progress))

    def close(self) -> None:
        """End the worker; a mesh in the making ends with Cancelled.  May be used again."""
        self._closing.set()
        with self._lock:
            self._drop()
            self._closing.clear()

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        self.close()

    @property
    def process_id(self) -> int | None:
        """Id of the worker process while there is one."""
        worker = self._worker
        return worker.process.pid if worker is not None else None

    def _run(self, request: tuple[object, ...], progress: Progress) -> object:
        stopping = Progress(cancelled=lambda: self._closing.is_set() or progress.cancelled())
        stopping.check()
        while not self._lock.acquire(timeout=POLL):  # another thread's mesh is in the making
            stopping.check()
        try:
            worker = self._ensure()
            try:
                worker.wait_ready(stopping)
                worker.ask(request)
                kind, answer = worker.wait(stopping, self._time_limit)
            except BaseException:
                self._drop()
                raise
        finally:
            self._lock.release()
        if kind == "done":
            return answer
        if isinstance(answer, MeshingError):
            raise answer
        raise MeshingError(
            f"the mesher failed: {answer}",
            "ask for smaller or larger elements; if it stays, report the part with this message",
        ) from answer

    def _ensure(self) -> _Worker:
        if self._worker is None or self._worker.process.poll() is not None:
            self._drop()
            self._worker = _Worker(self._work)
        return self._worker

    def _drop(self) -> None:
        if self._worker is not None:
            self._worker.kill()
            self._worker = None


class _Worker:
    """One child process, a thread that reads its answers, and a file with what it printed."""

    def __init__(self, work: str) -> None:
        self._printed: IO[bytes] = tempfile.TemporaryFile()  # noqa: SIM115 - closed in kill
        path = [entry or os.getcwd() for entry in sys.path]
        try:
            self.process = subprocess.Popen(
                [sys.executable, "-c", BOOT, json.dumps(path)],
                stdin=subprocess.PIPE,
                stdout=subprocess.PIPE,
                stderr=self._printed,
                env={**os.environ, **ONE_THREAD},
                creationflags=getattr(subprocess, "CREATE_NO_WINDOW", 0),
            )
        except OSError as error:
            self._printed.close()
            raise MeshingError(
                f"the meshing process could not be started: {error}",
                "free memory or close other programs and try again",
            ) from error
        self._answers: queue.SimpleQueue[Any] = queue.SimpleQueue()
        self._ready = False
        threading.Thread(
            target=_collect, args=(self.process.stdout, self._answers), daemon=True
        ).start()
        self._send(work)

    def ask(self, request: tuple[object, ...]) -> None:
        """Send the work."""
        self._send(request)

    def wait_ready(self, progress: Progress) -> None:
        """Wait until the worker has imported its work."""
        if self._ready:
            return
        kind, answer = self.wait(progress, START_LIMIT)
        if kind != "ready":
            raise MeshingError(
                f"the meshing process could not load the mesher: {answer}",
                "install the program again; on Linux the system library libGLU must be there",
            )
        self._ready = True

    def wait(self, progress: Progress, limit: float) -> tuple[str, Any]:
        """The next answer.

        Raises:
            Cancelled: the user asked to stop.
            MeshingError: the process ended or took longer than `limit` [s].
        """
        deadline = time.monotonic() + limit
        while True:
            try:
                answer = self._answers.get(timeout=POLL)
            except queue.Empty:
                if progress.cancelled():
                    raise Cancelled from None
                if time.monotonic() > deadline:
                    raise MeshingError(
                        f"the mesher did not finish within {limit:g} s",
                        "ask for larger elements, or remove very short edges and thin gaps",
                    ) from None
                continue
            if answer is None:
                raise self._ended()
            return cast(tuple[str, Any], answer)

    def kill(self) -> None:
        """End the process at once and wait until it is gone."""
        self.process.kill()
        self.process.wait()
        for stream in (self.process.stdin, self._printed):
            if stream is not None:
                try:
                    stream.close()
                except OSError:  # what was still to be written has no reader any more
                    continue

    def _send(self, message: object) -> None:
        try:
            send(cast(BinaryIO, self.process.stdin), message)
        except OSError as error:
            raise self._ended() from error

    def _ended(self) -> MeshingError:
        status = self.process.wait()
        self._printed.seek(0)
        lines = self._printed.read().decode(errors="replace").strip().splitlines()
        said = f", saying: {lines[-1]}" if lines else ""
        return MeshingError(
            f"the meshing process ended unexpectedly (status {status}){said}",
            "try again; if it stays, ask for larger elements or free memory",
        )


def _collect(stream: BinaryIO, answers: queue.SimpleQueue[Any]) -> None:
    """Pass on answers until the worker is gone, then None."""
    with stream:
        while True:
            try:
                answers.put(receive(stream))
            except Exception:  # end of the stream, or an answer cut short by a kill
                answers.put(None)
                return
