"""What the tool in hand is about to do."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtGui import QPainter

from screenapp.window.board.frame import Frame
from screenapp.window.board.screen_item import Z_PREVIEW, ScreenItem
from screenapp.window.board.snap_signs import draw_snap

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas


class PreviewItem(ScreenItem):
    """What the tool in hand is about to do, and the sign of the snap in force."""

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(Z_PREVIEW)
        self._canvas = canvas

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Let the tool paint."""
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        tool, place = self._canvas.tool, self._canvas.place
        if tool is None:
            return
        tool.paint(painter, frame)
        if place is not None and tool.snapping:
            draw_snap(painter, frame, place.snap)
