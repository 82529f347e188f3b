"""How long work reports where it is and learns that it should stop: two plain callbacks."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from screenapp.model.errors import Cancelled


@dataclass(frozen=True)
class Step:
    """A stage of the work: its name ("meshing"), the pass (from 1, 0 when there is none) and the
    share of the whole that is done (0 to 1)."""

    stage: str
    number: int
    done: float


@dataclass(frozen=True)
class Progress:
    """Passed down into long work.

    Attributes:
        report: called with each step.
        cancelled: asked often; when it answers True, `check` raises Cancelled.
    """

    report: Callable[[Step], None] = lambda step: None
    cancelled: Callable[[], bool] = lambda: False

    def check(self) -> None:
        """Raise Cancelled if the user asked to stop."""
        if self.cancelled():
            raise Cancelled


SILENT = Progress()
