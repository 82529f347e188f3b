"""The stress along a cut in the sheet: a figure that the keyboard reaches, and its sentences."""

from __future__ import annotations

from PySide6.QtCore import QPointF, QRectF, QSize, Qt
from PySide6.QtGui import (
    QFontMetricsF,
    QPainter,
    QPen,
    QPolygonF,
    QResizeEvent,
)

from screenapp.model.cut_figure import CutFigure
from screenapp.window import theme
from screenapp.window.figure_box import HEAD, LINE, FigurePlot

_PLOT, _FOOT = 132.0, 18.0
_LABELS = 52.0
_WIDEST = 460.0
_KEYS = (
    ("stress across the cut", Qt.PenStyle.SolidLine, "ink"),
    ("its linear part", Qt.PenStyle.DashLine, "accent"),
    ("beam theory", Qt.PenStyle.DotLine, "load"),
)
_COLOURS = {"settled": "ink", "rising": "bad", "unsettled": "doubt"}


class CutPlot(FigurePlot[CutFigure]):
    """Shows one cut under one case."""

    lead = "Stress along"

    def show_figure(self, figure: CutFigure | None, case: str = "") -> None:
        """Show a figure under the case of that name, or hide; it is as tall as its sentences."""
        super().show_figure(figure, case)
        self.updateGeometry()
        self.setFixedHeight(self.sizeHint().height())

    def sizeHint(self) -> QSize:
        """The plot, and as many lines as the sentences need."""
        lines = sum(len(self._wrapped(s)) for s in self.figure.sentences) if self.figure else 0
        return QSize(260, round(2 * HEAD + 2 * LINE + _PLOT + _FOOT + 6.0 + lines * LINE))

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Sentences wrap anew."""
        super().resizeEvent(event)
        wanted = self.sizeHint().height()
        if self.height() != wanted:
            self.setFixedHeight(wanted)

    def paint_figure(self, painter: QPainter, inner: QRectF, figure: CutFigure) -> None:
        """Key, plot, sentences."""
        self._key(painter, figure, inner.left(), inner.top() + LINE)
        wide = min(inner.width(), _WIDEST)
        top = inner.top() + 2 * LINE + 4.0
        paint_cut(painter, QRectF(inner.left(), top, wide, _PLOT + _FOOT), figure)
        y = top + _PLOT + _FOOT + 2.0
        for sentence in figure.sentences:
            for line in self._wrapped(sentence):
                self.paint_words(painter, line, inner, y)
                y += LINE

    def _key(self, painter: QPainter, figure: CutFigure, x: float, y: float) -> None:
        """What the three lines are."""
        painter.setFont(theme.font(theme.TEXT_SMALL))
        metrics = QFontMetricsF(painter.font())
        for text, style, name in _KEYS[: 3 if figure.beam else 2]:
            painter.setPen(QPen(theme.colour(name), 1.6, style))
            painter.drawLine(QPointF(x, y + LINE / 2), QPointF(x + 20.0, y + LINE / 2))
            painter.setPen(theme.colour("quiet"))
            painter.drawText(QPointF(x + 25.0, y + LINE / 2 + metrics.ascent() / 2 - 1.5), text)
            x += 25.0 + metrics.horizontalAdvance(text) + 14.0

    def _wrapped(self, sentence: str) -> list[str]:
        """A sentence in lines that fit."""
        metrics = QFontMetricsF(theme.font(theme.TEXT_SMALL))
        room = max(self.width() - 22.0, 120.0)
        lines = [""]
        for word in sentence.split():
            longer = f"{lines[-1]} {word}".strip()
            if lines[-1] and metrics.horizontalAdvance(longer) > room:
                lines.append(word)
            else:
                lines[-1] = longer
        return lines


def paint_cut(painter: QPainter, box: QRectF, figure: CutFigure) -> None:
    """Paint the curves of a figure into a box [px]; distances stand below, values at the left."""
    painter.save()
    painter.setFont(theme.font(theme.TEXT_SMALL))
    plot = box.adjusted(_LABELS, 0.0, -6.0, -_FOOT)

    def spots(line: tuple[tuple[float, float], ...]) -> QPolygonF:
        x0, y0, wide, tall = plot.left(), plot.bottom(), plot.width(), plot.height()
        return QPolygonF([QPointF(x0 + x * wide, y0 - y * tall) for x, y in line])

    zero = plot.bottom() - figure.zero * plot.height()
    painter.setPen(QPen(theme.colour("quiet", 0.5), 1.0))
    painter.drawLine(QPointF(plot.left(), zero), QPointF(plot.right(), zero))
    painter.setPen(Qt.PenStyle.NoPen)
    painter.setBrush(theme.colour("accent" if figure.trust == "settled" else "doubt", 0.18))
    for band in figure.bands:
        painter.drawPolygon(spots(band))
    painter.setBrush(Qt.BrushStyle.NoBrush)
    for lines, (_, style, name) in zip(
        (figure.linear, figure.beam), (_KEYS[1], _KEYS[2]), strict=True
    ):
        painter.setPen(QPen(theme.colour(name), 1.4, style))
        for line in lines:
            painter.drawPolyline(spots(line))
    painter.setPen(QPen(theme.colour(_COLOURS[figure.trust]), 1.6))
    for line in figure.stress:
        painter.drawPolyline(spots(line))
    painter.setPen(theme.colour("quiet"))
    right = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
    taken: list[float] = []
    for height, text in (*figure.values, (figure.zero, "0")):
        y = plot.bottom() - height * plot.height()
        if all(abs(y - other) >= 13.0 for other in taken):
            painter.drawText(QRectF(box.left(), y - 8.0, _LABELS - 6.0, 16.0), right, text)
            taken.append(y)
    below = QRectF(plot.left(), plot.bottom() + 2.0, plot.width(), _FOOT)
    painter.drawText(below, Qt.AlignmentFlag.AlignLeft, figure.left)
    painter.drawText(below, Qt.AlignmentFlag.AlignRight, figure.right)
    painter.restore()
