"""The history of the chosen number in the sheet: a small figure that the keyboard reaches."""

from __future__ import annotations

from PySide6.QtCore import QRectF, QSize
from PySide6.QtGui import QPainter, QPaintEvent
from PySide6.QtWidgets import QWidget

from screenapp.model.history_figure import HistoryFigure
from screenapp.window.figure_box import HEAD, LINE, FigureBox
from screenapp.window.history_painting import TALL, paint_history

_PLOT = TALL + 12.0
_WIDEST = 420.0


class HistoryPlot(FigureBox):
    """Shows a figure with its name above and its band or growth below; hidden while there is none.

    The whole of it is said in words as tooltip and accessible description.
    """

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.figure: HistoryFigure | None = None
        self._case = ""

    def show_figure(self, figure: HistoryFigure | None, case: str = "") -> None:
        """Show a figure of a number under the case of that name, or hide."""
        self.figure, self._case = figure, case
        self.setVisible(figure is not None)
        if figure is not None:
            under = f" under “{case}”" if case else ""
            self.say(f"History of {figure.name}{under}", figure.words)
        self.update()

    def sizeHint(self) -> QSize:
        """Two lines of words and the plot."""
        return QSize(240, round(2 * HEAD + 2 * LINE + _PLOT))

    def minimumSizeHint(self) -> QSize:
        """As tall as `sizeHint`."""
        return QSize(160, self.sizeHint().height())

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Name, plot, note."""
        figure = self.figure
        if figure is None:
            return
        painter = QPainter(self)
        inner = self.paint_frame(painter)
        under = f"  ·  {self._case}" if self._case else ""
        self.paint_words(painter, f"{figure.name}{under}", inner, inner.top(), bold=True)
        self.paint_words(painter, figure.note, inner, inner.bottom() - LINE)
        box = QRectF(inner.left(), inner.top() + LINE, min(inner.width(), _WIDEST), _PLOT)
        paint_history(painter, box, figure)
        painter.end()
