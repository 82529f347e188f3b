"""Lines of a drawing that stay open: dashed, with rings where they are open."""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from PySide6.QtCore import Qt
from PySide6.QtGui import QPainter, QPen

from screenapp.model.part import Point
from screenapp.window import theme
from screenapp.window.board.frame import Floats, Frame
from screenapp.window.board.screen_item import Z_PREVIEW, ScreenItem
from screenapp.window.many_lines import paint_pieces

FEW = 2000
"""So many pieces or ends are painted with care; more could not be told apart."""


class OpenChainsItem(ScreenItem):
    """Paints open chains, on the board and in the preview of a drawing."""

    def __init__(self) -> None:
        super().__init__(Z_PREVIEW)
        self.lines: Floats = np.empty((0, 2, 2))
        self.ends: Sequence[Point] = ()

    def show_chains(self, lines: Floats, ends: Sequence[Point]) -> None:
        """Paint these straight pieces (n, 2, 2) [mm] and ring these places from now on."""
        self.lines, self.ends = lines, tuple(ends)
        self.update()

    def clear(self) -> None:
        """Paint nothing."""
        if len(self.lines) or self.ends:
            self.show_chains(np.empty((0, 2, 2)), ())

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint lines and rings."""
        if not len(self.lines) and not self.ends:
            return
        bad, rect = theme.colour("bad"), self.getViewBox().rect()
        few = len(self.lines) < FEW
        painter.setRenderHint(QPainter.RenderHint.Antialiasing, few)
        painter.setBrush(Qt.BrushStyle.NoBrush)
        pen = QPen(bad, 2.0, Qt.PenStyle.DashLine) if few else QPen(bad, 1.0)
        size = math.ceil(rect.width()), math.ceil(rect.height())
        paint_pieces(painter, frame, self.lines, size, pen)
        painter.setPen(QPen(bad, 2.0))
        for at in self.ends[:FEW]:
            painter.drawEllipse(frame.px(at), 5.0, 5.0)
