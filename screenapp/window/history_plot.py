"""The history of the chosen number in the sheet: a small figure that the keyboard reaches."""

from __future__ import annotations

from PySide6.QtCore import QRectF, QSize, Qt
from PySide6.QtGui import QFocusEvent, QFont, QFontMetricsF, QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QSizePolicy, QWidget

from screenapp.model.history_figure import HistoryFigure
from screenapp.window import theme
from screenapp.window.history_painting import TALL, paint_history

_HEAD, _LINE = 8.0, 16.0
_PLOT = TALL + 12.0
_WIDEST = 420.0


class HistoryPlot(QWidget):
    """Shows a figure with its name above and its band or growth below; hidden while there is none.

    The whole of it is said in words as tooltip and accessible description.
    """

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.figure: HistoryFigure | None = None
        self.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self.hide()
        theme.notifier.changed.connect(self.update)

    def show_figure(self, figure: HistoryFigure | None, case: str = "") -> None:
        """Show a figure of a number under the case of that name, or hide."""
        self.figure = figure
        self._case = case
        self.setVisible(figure is not None)
        if figure is not None:
            under = f" under “{case}”" if case else ""
            self.setAccessibleName(f"History of {figure.name}{under}")
            self.setAccessibleDescription(figure.words)
            self.setToolTip(figure.words)
        self.update()

    def sizeHint(self) -> QSize:
        """Two lines of words and the plot."""
        return QSize(240, round(2 * _HEAD + 2 * _LINE + _PLOT))

    def minimumSizeHint(self) -> QSize:
        """As tall as `sizeHint`."""
        return QSize(160, self.sizeHint().height())

    def focusInEvent(self, event: QFocusEvent) -> None:
        """Show that it has the focus."""
        super().focusInEvent(event)
        self.update()

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Show that it has it no more."""
        super().focusOutEvent(event)
        self.update()

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Name, plot, note."""
        figure = self.figure
        if figure is None:
            return
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        frame = QRectF(self.rect()).adjusted(1.0, 1.0, -1.0, -1.0)
        focused = self.hasFocus()
        painter.setPen(QPen(theme.colour("accent" if focused else "faint"), 1.5 if focused else 1))
        painter.drawRoundedRect(frame, 4.0, 4.0)
        inner = frame.adjusted(10.0, _HEAD - 1.0, -10.0, -_HEAD + 1.0)
        left = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
        under = f"  ·  {self._case}" if self._case else ""
        for text, y, weight, colour in (
            (f"{figure.name}{under}", inner.top(), QFont.Weight.DemiBold, "ink"),
            (figure.note, inner.bottom() - _LINE, QFont.Weight.Normal, "quiet"),
        ):
            painter.setFont(theme.font(theme.TEXT_SMALL, weight))
            painter.setPen(theme.colour(colour))
            shown = QFontMetricsF(painter.font()).elidedText(
                text, Qt.TextElideMode.ElideRight, inner.width()
            )
            painter.drawText(QRectF(inner.left(), y, inner.width(), _LINE), left, shown)
        box = QRectF(inner.left(), inner.top() + _LINE, min(inner.width(), _WIDEST), _PLOT)
        paint_history(painter, box, figure)
        painter.end()
