"""Lines, dots and dimension labels of what is being drawn."""

from __future__ import annotations

import math
from functools import lru_cache

from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtGui import QColor, QFontMetricsF, QImage, QPainter, QPainterPath, QPen

from screenapp.model.curves import Arc, Curve
from screenapp.model.part import DisplayUnits, Point
from screenapp.window import theme
from screenapp.window.board.frame import Frame, polygon
from screenapp.window.board.quantity import written
from screenapp.window.board.ring import flatten

OFFSET = QPoint(18, 18)
"""From a place to the row of fields about it [px]."""


def line_pen(width: float = 2.0, dashed: bool = False) -> QPen:
    """The pen for what is not yet part of the part."""
    pen = QPen(QColor(theme.current().accent), width)
    pen.setCapStyle(Qt.PenCapStyle.RoundCap)
    pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
    if dashed:
        pen.setDashPattern([5.0, 4.0])
    return pen


def curve(painter: QPainter, frame: Frame, piece: Curve, dashed: bool = False) -> None:
    """A segment or arc."""
    painter.setPen(line_pen(dashed=dashed))
    painter.setBrush(Qt.BrushStyle.NoBrush)
    painter.drawPolyline(polygon(frame.pxs(flatten(piece, 0.1 / frame.scale))))


def segment(painter: QPainter, frame: Frame, a: Point, b: Point, dashed: bool = False) -> None:
    """A straight line."""
    painter.setPen(line_pen(dashed=dashed))
    painter.drawLine(frame.px(a), frame.px(b))


def dot(painter: QPainter, frame: Frame, at: Point) -> None:
    """A point that is set."""
    painter.setPen(line_pen(1.5))
    painter.setBrush(QColor(theme.current().paper))
    painter.drawEllipse(frame.px(at), 3.5, 3.5)


def label(painter: QPainter, text: str, at: QPointF, colour: str | None = None) -> None:
    """A text centred at a pixel position, with a seam so that lines do not run into it."""
    palette, ratio = theme.current(), painter.device().devicePixelRatioF()
    picture = _text_picture(text, colour or palette.accent, palette.paper, ratio)
    size = picture.deviceIndependentSize()
    x, y = at.x() - size.width() / 2.0, at.y() - size.height() / 2.0
    painter.drawImage(QPointF(round(x * ratio) / ratio, round(y * ratio) / ratio), picture)


@lru_cache(maxsize=512)
def _text_picture(text: str, colour: str, paper: str, ratio: float) -> QImage:
    """A text with its seam, centred, with a whole number of device pixels to the middle."""
    path = _text_path(text)
    box = path.boundingRect()
    half_x, half_y = (
        math.ceil((max(abs(low), abs(high)) + 4.0) * ratio)
        for low, high in ((box.left(), box.right()), (box.top(), box.bottom()))
    )
    picture = QImage(2 * half_x, 2 * half_y, QImage.Format.Format_ARGB32_Premultiplied)
    picture.setDevicePixelRatio(ratio)
    picture.fill(Qt.GlobalColor.transparent)
    seam = QColor(paper)
    seam.setAlphaF(0.92)
    pen = QPen(seam, 4.0)
    pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
    painter = QPainter(picture)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    painter.translate(half_x / ratio, half_y / ratio)
    painter.strokePath(path, pen)
    painter.fillPath(path, QColor(colour))
    painter.end()
    return picture


@lru_cache(maxsize=256)
def _text_path(text: str) -> QPainterPath:
    """A text as lines, centred at the origin."""
    font = theme.font(theme.TEXT_SMALL)
    metrics = QFontMetricsF(font)
    path = QPainterPath()
    wide = metrics.horizontalAdvance(text)
    path.addText(QPointF(-wide / 2.0, (metrics.ascent() - metrics.descent()) / 2.0), font, text)
    return path


def measure(
    painter: QPainter, frame: Frame, a: Point, b: Point, units: DisplayUnits, angle: bool = True
) -> None:
    """The length, and the angle, of a line, beside its middle."""
    if a == b:
        return
    one, two = frame.px(a), frame.px(b)
    text = written(math.dist(a, b), "length", units)
    if angle:
        degrees = math.degrees(math.atan2(b[1] - a[1], b[0] - a[0]))
        text += f"  ∠ {written(degrees, 'angle', units)}"
    label(painter, text, beside(one, two, 16.0))


def beside(one: QPointF, two: QPointF, gap: float) -> QPointF:
    """A pixel position `gap` beside the middle of a line, above it rather than below."""
    dx, dy = two.x() - one.x(), two.y() - one.y()
    length = math.hypot(dx, dy) or 1.0
    nx, ny = -dy / length, dx / length
    if ny > 0.0 or (ny == 0.0 and nx < 0.0):
        nx, ny = -nx, -ny
    wide = gap + 28.0 * abs(nx)  # text is wider than it is high
    return (one + two) / 2.0 + QPointF(nx * wide, ny * gap)


def arc_text(piece: Curve, units: DisplayUnits) -> str:
    """What an arc is called while drawn: its radius, or the length if it is straight."""
    if isinstance(piece, Arc):
        return f"R {written(piece.radius, 'length', units)}"
    return written(piece.length, "length", units)
