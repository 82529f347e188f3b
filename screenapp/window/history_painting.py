"""Paints the history of a number over the passes: its points, its band, what is allowed."""

from __future__ import annotations

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QBrush, QFontMetricsF, QPainter, QPen, QPolygonF

from screenapp.model.history_figure import HistoryFigure
from screenapp.window import theme

WIDE, TALL = 204.0, 100.0
"""Size at which it reads well [px]."""

_LABELS = 44.0  # room for the values at the left
_FOOT = 16.0  # ... and for the sizes below
_COLOURS = {"settled": "ink", "rising": "bad", "unsettled": "doubt"}
_TICK = 6.0


def paint_history(painter: QPainter, box: QRectF, figure: HistoryFigure) -> None:
    """Paint a figure into a box [px]."""
    painter.save()
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    painter.setFont(theme.font(theme.TEXT_SMALL))
    plot = box.adjusted(_LABELS, 6.0, -_TICK - 4.0, -_FOOT - 4.0)

    def at(x: float, y: float) -> QPointF:
        return QPointF(plot.left() + x * plot.width(), plot.bottom() - y * plot.height())

    _paint_band(painter, plot, figure)
    painter.setPen(QPen(theme.colour("quiet", 0.5), 1.0))
    painter.drawLine(plot.bottomLeft(), plot.bottomRight())
    _paint_allowed(painter, plot, figure)
    colour = theme.colour(_COLOURS[figure.trust])
    if figure.growth:
        painter.setPen(QPen(colour, 1.2, Qt.PenStyle.DashLine))
        painter.drawPolyline(QPolygonF([at(x, y) for x, y in figure.growth]))
    spots = [at(x, y) for x, y in figure.points]
    painter.setPen(QPen(colour, 1.2))
    painter.drawPolyline(QPolygonF(spots))
    painter.setBrush(theme.colour("sheet"))
    for spot in spots[:-1]:
        painter.drawEllipse(spot, 2.4, 2.4)
    painter.setBrush(QBrush(colour))
    painter.drawEllipse(spots[-1], 2.8, 2.8)
    _paint_labels(painter, box, plot, figure)
    painter.restore()


def _paint_band(painter: QPainter, plot: QRectF, figure: HistoryFigure) -> None:
    """The last value's band across the whole width, dashed at its ends while it is not settled."""
    if figure.band is None:
        return
    low, high = (min(max(y, 0.0), 1.0) for y in figure.band)
    top, bottom = plot.bottom() - high * plot.height(), plot.bottom() - low * plot.height()
    name = "accent" if figure.trust == "settled" else "doubt"
    area = QRectF(plot.left(), top, plot.width(), max(bottom - top, 1.5))
    painter.fillRect(area, theme.colour(name, 0.18))
    if figure.trust != "settled":
        painter.setPen(QPen(theme.colour(name), 1.0, Qt.PenStyle.DashLine))
        painter.drawLine(area.topLeft(), area.topRight())
        painter.drawLine(area.bottomLeft(), area.bottomRight())


def _paint_allowed(painter: QPainter, plot: QRectF, figure: HistoryFigure) -> None:
    """A bracket at the right: within it the number counts as settled."""
    if figure.allowed is None:
        return
    low, high = (plot.bottom() - y * plot.height() for y in figure.allowed)
    x = plot.right() + _TICK
    painter.setPen(QPen(theme.colour("quiet"), 1.2))
    painter.drawLine(QPointF(x, low), QPointF(x, high))
    for y in (low, high):
        painter.drawLine(QPointF(x - _TICK + 1.0, y), QPointF(x, y))


def _paint_labels(painter: QPainter, box: QRectF, plot: QRectF, figure: HistoryFigure) -> None:
    painter.setPen(theme.colour("quiet"))
    metrics = QFontMetricsF(painter.font())
    right = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
    left = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
    places = [plot.bottom() - y * plot.height() for y, _ in (figure.bottom, figure.top)]
    room = metrics.height()
    if places[0] - places[1] < room:  # both at one height: the last value says it all
        texts = [(places[1], figure.top[1])]
    else:
        texts = [(places[0], figure.bottom[1]), (places[1], figure.top[1])]
    for y, text in texts:
        painter.drawText(QRectF(box.left(), y - 8.0, _LABELS - 6.0, 16.0), right, text)
    foot = QRectF(plot.left(), plot.bottom() + 3.0, plot.width(), _FOOT)
    ends = metrics.horizontalAdvance(figure.left) + metrics.horizontalAdvance(figure.right)
    painter.drawText(foot, left, figure.left)
    painter.drawText(foot, right, figure.right)
    middle = "elements"
    if foot.width() - ends > metrics.horizontalAdvance(middle) + 16.0:
        shift = metrics.horizontalAdvance(figure.left) - metrics.horizontalAdvance(figure.right)
        painter.drawText(foot.translated(shift / 2.0, 0.0), Qt.AlignmentFlag.AlignCenter, middle)
