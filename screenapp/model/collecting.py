"""Holding off the garbage collector while very many small records are made.

A full collection looks at every object there is and stops all threads meanwhile: with the 200,000
lines of a drawing 0.3 to 0.5 s, several times over.  Records without cycles are freed by their
reference counts and need none.
"""

from __future__ import annotations

import gc
import threading
from collections.abc import Iterator
from contextlib import contextmanager

NEVER = 1_000_000
"""Collections of the middle generation before a full one."""

_lock = threading.Lock()
_held = 0
_before = gc.get_threshold()


@contextmanager
def many_records() -> Iterator[None]:
    """No full collections inside; what was made is left out of later ones until `look_again`."""
    global _held, _before
    with _lock:
        if _held == 0:
            _before = gc.get_threshold()
            gc.set_threshold(_before[0], _before[1], NEVER)
        _held += 1
    try:
        yield
    finally:
        with _lock:
            _held -= 1
            if _held == 0:
                gc.freeze()
                gc.set_threshold(*_before)


def look_again() -> None:
    """Let full collections look at everything again: the many records are gone."""
    gc.unfreeze()
