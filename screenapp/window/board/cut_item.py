"""Cuts on the board: a centre line with flags that point to the free body."""

from __future__ import annotations

import math

from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QColor, QPainter, QPen

from screenapp.model.part import Cut, Part, Point
from screenapp.window import theme
from screenapp.window.board.frame import Frame
from screenapp.window.board.screen_item import Z_PROBES, ReadingsItem

FLAG, NAME_AWAY = 11.0, 13.0
"""Length of the flag at each end, and how far beyond it the name stands [px]."""


class CutsItem(ReadingsItem):
    """All cuts of the part."""

    def __init__(self) -> None:
        super().__init__(Z_PROBES - 1)

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Dash-dot lines with flags to the left; `labels` paints the names."""
        if self.drawn is None:
            return
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        for cut in self.drawn.part.cuts:
            chosen = cut.id in self.selected
            colour = QColor(theme.current().accent if chosen else theme.current().ink)
            one, two = frame.px(cut.start), frame.px(cut.end)
            dx, dy = two.x() - one.x(), two.y() - one.y()
            length = math.hypot(dx, dy)
            if length < 1.0:
                continue
            pen = QPen(colour, 2.2 if cut.id == self.hovered or chosen else 1.4)
            pen.setDashPattern([9.0, 3.0, 1.5, 3.0])
            painter.setPen(pen)
            painter.drawLine(one, two)
            pen.setStyle(Qt.PenStyle.SolidLine)
            painter.setPen(pen)
            left = QPointF(dy, -dx) / length * FLAG  # y runs downwards on the screen
            for end in (one, two):
                painter.drawLine(end, end + left)


def name_place(frame: Frame, cut: Cut) -> QPointF:
    """Where the name of a cut reads best [px]: beyond its first end."""
    one, two = frame.px(cut.start), frame.px(cut.end)
    gap = one - two
    length = math.hypot(gap.x(), gap.y())
    return one if length < 1.0 else one + gap / length * NAME_AWAY


def nearest_cut(part: Part, at: Point, reach: float) -> tuple[Cut, Point] | None:
    """The cut within `reach` [mm] of a place, and the nearest place on it."""
    best: tuple[float, Cut, Point] | None = None
    for cut in part.cuts:
        dx, dy = cut.end[0] - cut.start[0], cut.end[1] - cut.start[1]
        square = dx * dx + dy * dy
        if square == 0.0:
            continue
        t = ((at[0] - cut.start[0]) * dx + (at[1] - cut.start[1]) * dy) / square
        t = min(max(t, 0.0), 1.0)
        foot = (cut.start[0] + t * dx, cut.start[1] + t * dy)
        far = math.dist(foot, at)
        if far <= reach and (best is None or far < best[0]):
            best = far, cut, foot
    return None if best is None else best[1:]
