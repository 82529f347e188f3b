"""The loop of the meshing process: requests on standard input, answers on standard output.

A message is its length (8 bytes, big-endian) and a pickle.  The first one names the function that
does the work ("module:function"); it is answered with `("ready", None)`.  Every further one is the
tuple of arguments, answered with `("done", result)` or `("failed", exception)`.  The process ends
when its input ends - also in the middle of its work, so that it never outlives its parent.
"""

from __future__ import annotations

import importlib
import os
import pickle
import queue
import signal
import struct
import sys
import threading
import traceback
from collections.abc import Callable
from typing import Any, BinaryIO

LENGTH = struct.Struct(">Q")


def send(stream: BinaryIO, message: object) -> None:
    """Write one message."""
    data = pickle.dumps(message, protocol=pickle.HIGHEST_PROTOCOL)
    stream.write(LENGTH.pack(len(data)) + data)
    stream.flush()


def receive(stream: BinaryIO) -> Any:
    """Read one message.

    Raises:
        EOFError: the other end is gone.
    """
    (length,) = LENGTH.unpack(_exactly(stream, LENGTH.size))
    return pickle.loads(_exactly(stream, length))


def serve() -> None:
    """Answer requests until the input ends."""
    signal.signal(signal.SIGINT, signal.SIG_IGN)  # Ctrl+C in a terminal is the parent's business
    requests: queue.SimpleQueue[Any] = queue.SimpleQueue()
    # Anything that libraries print must not mix with the answers.
    answers = os.fdopen(os.dup(1), "wb")
    os.dup2(2, 1)
    source = sys.stdin.buffer
    threading.Thread(target=_listen, args=(source, requests), daemon=True).start()
    try:
        work = _find(requests.get())
    except Exception as error:
        send(answers, ("failed", _portable(error)))
        return
    send(answers, ("ready", None))
    while True:
        try:
            answer = ("done", work(*requests.get()))
        except Exception as error:
            answer = ("failed", _portable(error))
        send(answers, answer)


def _listen(source: BinaryIO, requests: queue.SimpleQueue[Any]) -> None:
    """Pass requests on; leave the process at once when the parent is gone."""
    while True:
        try:
            requests.put(receive(source))
        except EOFError:
            os._exit(0)
        except Exception:
            traceback.print_exc()
            os._exit(3)


def _find(name: str) -> Callable[..., Any]:
    module, _, function = name.partition(":")
    found: Callable[..., Any] = getattr(importlib.import_module(module), function)
    return found


def _portable(error: Exception) -> Exception:
    """The error itself if it can be sent, else its text."""
    try:
        pickle.loads(pickle.dumps(error))
    except Exception:
        return RuntimeError("".join(traceback.format_exception_only(error)).strip())
    return error


def _exactly(stream: BinaryIO, count: int) -> bytes:
    data = stream.read(count)
    if len(data) < count:
        raise EOFError
    return data
