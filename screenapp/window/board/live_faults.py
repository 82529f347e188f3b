"""Faults of a change under way: of what is dragged or previewed, and of a ring half drawn."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import QObject, QTimer

from screenapp.model.errors import Fault
from screenapp.model.part import LoopHole, Part
from screenapp.model.validity import faults_of

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

SOON_MS, LATE_MS = 60, 300
"""Between looks: of a part of usual size while it moves, of a very large one once it rests."""

LARGE = 400
"""Corners and holes from which a part is very large."""

GROUPS = ("outline", "holes", "zones")
"""Fields that concern what is drawn."""


class LiveFaults(QObject):
    """Looks for faults while the hand is still at it, seldom enough not to hold it up."""

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self._canvas = canvas
        self._seen: Part | None = None
        self._timer = QTimer(self)
        self._timer.setSingleShot(True)
        self._timer.timeout.connect(self.look)

    def poke(self) -> None:
        """Something may have changed."""
        part = self._part()
        if part is None:
            self._timer.stop()
            if self._seen is not None:
                self._seen = None
                self._tell(())
            return
        if part is self._seen:
            return
        if _size(part) > LARGE:
            self._timer.start(LATE_MS)
        elif not self._timer.isActive():
            self._timer.start(SOON_MS)

    def look(self) -> None:
        """Look now."""
        part = self._part()
        if part is None:
            return
        self._seen = part
        found = faults_of(part)
        self._tell(tuple(f for f in found if f.span or f.field.startswith(GROUPS)))

    def _part(self) -> Part | None:
        canvas = self._canvas
        if canvas.previewing:
            return canvas.part
        return canvas.tool.drafted() if canvas.tool is not None else None

    def _tell(self, faults: tuple[Fault, ...]) -> None:
        self._canvas.show_live(faults)
        self._canvas.document.tell_live_faults(tuple(f for f in faults if f.blocks))


def _size(part: Part) -> int:
    loops = [h.loop for h in part.holes if isinstance(h, LoopHole)]
    if part.outline is not None:
        loops.append(part.outline)
    return len(part.holes) + sum(len(loop.corners) for loop in loops)
