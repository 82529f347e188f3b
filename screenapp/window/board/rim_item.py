"""The rim of a deformed part, at the weight of an outline."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtGui import QPainter, QPainterPath, QPen

from screenapp.window import theme
from screenapp.window.board.frame import Frame
from screenapp.window.board.screen_item import Z_OUTLINE, ScreenItem


class RimItem(ScreenItem):
    """Strokes a path given in mm."""

    def __init__(self) -> None:
        super().__init__(Z_OUTLINE)
        self._path: QPainterPath | None = None

    def show_path(self, path: QPainterPath | None) -> None:
        """Stroke this path, or nothing."""
        self._path = path
        self.update()

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint it 2 px wide."""
        if self._path is None:
            return
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        pen = QPen(theme.colour("ink"), 2.0)
        pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
        painter.strokePath(frame.transform.map(self._path), pen)
