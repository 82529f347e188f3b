"""The sign of each snap, drawn at constant screen size: every kind has its own form."""

from __future__ import annotations

import math

from PySide6.QtCore import QLineF, QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPen

from screenapp.window import theme
from screenapp.window.board.frame import Frame
from screenapp.window.board.snapping import Snap


def draw_snap(painter: QPainter, frame: Frame, found: Snap) -> None:
    """The sign of a snap: each kind has its own form."""
    if found.kind == "none":
        return
    p = frame.px(found.at)
    colour = QColor(theme.current().accent)
    pen = QPen(colour, 2.0)
    pen.setCapStyle(Qt.PenCapStyle.FlatCap)
    painter.setBrush(Qt.BrushStyle.NoBrush)
    _draw_lines_to(painter, frame, found)
    painter.setPen(pen)
    if found.kind == "grid":
        pen.setWidthF(1.0)
        painter.setPen(pen)
        painter.drawLines([_line(p, -5, 0, 5, 0), _line(p, 0, -5, 0, 5)])
    elif found.kind == "corner":  # four brackets round the point
        for sx in (-1, 1):
            for sy in (-1, 1):
                x, y = 7 * sx, 7 * sy
                painter.drawLines([_line(p, x, y, x - 4 * sx, y), _line(p, x, y, x, y - 4 * sy)])
    elif found.kind == "centre":
        painter.drawEllipse(p, 7.0, 7.0)
        painter.fillRect(QRectF(p.x() - 1.5, p.y() - 1.5, 3, 3), colour)
    elif found.kind == "middle":  # two bars across, with a gap for the edge
        c, s = math.cos(found.along), -math.sin(found.along)
        for sign in (-1, 1):
            foot = QPointF(p.x() + 3 * sign * c, p.y() + 3 * sign * s)
            painter.drawLine(_line(foot, -7 * s, 7 * c, 7 * s, -7 * c))
    elif found.kind == "edge":  # a thick dash on the edge, with a dot
        c, s = math.cos(found.along), -math.sin(found.along)
        pen.setWidthF(4.0)
        painter.setPen(pen)
        painter.drawLine(_line(p, -8 * c, -8 * s, 8 * c, 8 * s))
    elif found.kind == "intersection":
        painter.drawLines([_line(p, -6, -6, 6, 6), _line(p, -6, 6, 6, -6)])
    elif found.kind == "tangent":  # a circle under a line that touches it
        c, s = math.cos(found.along), -math.sin(found.along)
        painter.drawLine(_line(p, -10 * c, -10 * s, 10 * c, 10 * s))
        painter.drawEllipse(QPointF(p.x() - 5.5 * s, p.y() + 5.5 * c), 5.5, 5.5)
    elif found.kind == "perpendicular":  # a right angle on the edge
        c, s = math.cos(found.along), -math.sin(found.along)
        painter.drawLines([_line(p, -8 * c, -8 * s, 8 * c, 8 * s), _line(p, 0, 0, 12 * s, -12 * c)])
        pen.setWidthF(1.0)
        painter.setPen(pen)
        corners = ((5 * c, 5 * s), (5 * (c + s), 5 * (s - c)), (5 * s, -5 * c))
        painter.drawPolyline([QPointF(p.x() + x, p.y() + y) for x, y in corners])
    elif found.kind in ("horizontal", "vertical"):  # a short bar with two stops
        bars = [(-7, 0, 7, 0), (-7, -4, -7, 4), (7, -4, 7, 4)]
        turn = found.kind == "vertical"
        painter.drawLines(
            [_line(p, *((b, a, d, c) if turn else (a, b, c, d))) for a, b, c, d in bars]
        )
    else:  # "start": closes the chain
        painter.setBrush(colour)
        painter.drawEllipse(p, 4.0, 4.0)
        painter.setBrush(Qt.BrushStyle.NoBrush)
        painter.drawEllipse(p, 9.0, 9.0)


def _draw_lines_to(painter: QPainter, frame: Frame, found: Snap) -> None:
    """Dotted lines to what the place is in line with."""
    pen = QPen(QColor(theme.current().accent), 1.0)
    pen.setDashPattern([2.0, 3.0])
    painter.setPen(pen)
    for other in found.to:
        painter.drawLine(frame.px(found.at), frame.px(other))


def _line(p: QPointF, x0: float, y0: float, x1: float, y1: float) -> QLineF:
    return QLineF(p.x() + x0, p.y() + y0, p.x() + x1, p.y() + y1)
