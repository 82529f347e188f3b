"""The history of the chosen number in the sheet: a small figure that the keyboard reaches."""

from __future__ import annotations

from PySide6.QtCore import QRectF, QSize
from PySide6.QtGui import QPainter

from screenapp.model.history_figure import HistoryFigure
from screenapp.window.figure_box import HEAD, LINE, FigurePlot
from screenapp.window.history_painting import TALL, paint_history

_PLOT = TALL + 12.0
_WIDEST = 420.0


class HistoryPlot(FigurePlot[HistoryFigure]):
    """Shows a number over the passes, its band or growth below."""

    lead = "History of"

    def sizeHint(self) -> QSize:
        """Two lines of words and the plot."""
        return QSize(240, round(2 * HEAD + 2 * LINE + _PLOT))

    def minimumSizeHint(self) -> QSize:
        """As tall as `sizeHint`."""
        return QSize(160, self.sizeHint().height())

    def paint_figure(self, painter: QPainter, inner: QRectF, figure: HistoryFigure) -> None:
        """Plot and note."""
        self.paint_words(painter, figure.note, inner, inner.bottom() - LINE)
        box = QRectF(inner.left(), inner.top() + LINE, min(inner.width(), _WIDEST), _PLOT)
        paint_history(painter, box, figure)
