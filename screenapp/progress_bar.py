"""Progress on standard error: a bar when it is a terminal, nothing otherwise."""

from __future__ import annotations

import sys
from types import TracebackType
from typing import Self, TextIO

from screenapp.model.progress import Step

_WIDTH = 24


class ProgressBar:
    """Shows the stage and the pass on one line and wipes it at the end."""

    def __init__(self, title: str, stream: TextIO | None = None) -> None:
        self._title = title
        self._stream = sys.stderr if stream is None else stream
        self._shown = self._stream.isatty()
        wide = (self._stream.encoding or "").lower().startswith("utf")
        self._full, self._empty = ("█", "·") if wide else ("#", ".")

    def show(self, step: Step) -> None:
        """Draw a step."""
        if self._shown:
            full = round(_WIDTH * min(max(step.done, 0.0), 1.0))
            bar = self._full * full + self._empty * (_WIDTH - full)
            turn = f"pass {step.number}, " if step.number else ""
            text = f"{self._title} {bar} {turn}{step.stage}"
            self._stream.write(f"\r\x1b[K{text}")
            self._stream.flush()

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        if self._shown:
            self._stream.write("\r\x1b[K")
            self._stream.flush()
