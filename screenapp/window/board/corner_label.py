"""The words in the corner below the board: where the cursor is and what it snaps to, or a hint."""

from __future__ import annotations

from PySide6.QtCore import QPointF, QSize, Qt
from PySide6.QtGui import (
    QFontMetricsF,
    QPainter,
    QPaintEvent,
    QResizeEvent,
    QTextLayout,
    QTextOption,
)
from PySide6.QtWidgets import QLabel, QSizePolicy

from screenapp.window import theme

LINES = 2


class CornerLabel(QLabel):
    """Two small lines at the right; it asks for little room and takes what it gets.

    A text wraps at its spaces; only what two lines cannot hold is cut, and stands in the tooltip.
    """

    def __init__(self) -> None:
        super().__init__()
        self.full = ""
        self._lines: list[str] = []
        self.setFont(theme.font(theme.TEXT_SMALL))
        self.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Preferred)

    def say(self, *lines: str) -> None:
        """Show one text that may wrap, or two short lines."""
        full = "  ·  ".join(lines)
        if full != self.full:
            self.full = full
            self._lines = list(lines)
            self.setAccessibleDescription(full)
            self._settle()

    @property
    def shown(self) -> list[str]:
        """The lines as they are painted."""
        if len(self._lines) > 1:
            return [self._cut(line) for line in self._lines[:LINES]]
        wrapped = self._wrapped(self._lines[0]) if self._lines else []
        if len(wrapped) > LINES:
            wrapped = [wrapped[0], self._cut(" ".join(wrapped[1:]))]
        return wrapped

    def minimumSizeHint(self) -> QSize:
        """Room for a few figures."""
        return QSize(80, self.sizeHint().height())

    def sizeHint(self) -> QSize:
        """Two lines high."""
        return QSize(240, round(LINES * QFontMetricsF(self.font()).lineSpacing()) + 2)

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Wrap again."""
        super().resizeEvent(event)
        self._settle()

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint the lines, ends at the right."""
        painter = QPainter(self)
        painter.setFont(self.font())
        painter.setPen(theme.colour("quiet"))
        metrics = QFontMetricsF(self.font())
        lines = self.shown
        y = (self.height() - metrics.lineSpacing() * len(lines)) / 2.0 + metrics.ascent()
        for line in lines:
            x = self.width() - 1.0 - metrics.horizontalAdvance(line)
            painter.drawText(QPointF(x, y), line)
            y += metrics.lineSpacing()

    def _settle(self) -> None:
        whole = "".join(self.shown).replace(" ", "") == "".join(self._lines).replace(" ", "")
        self.setToolTip("" if whole else self.full)
        self.update()

    def _cut(self, text: str) -> str:
        metrics = QFontMetricsF(self.font())
        return metrics.elidedText(text, Qt.TextElideMode.ElideRight, max(self.width() - 2.0, 0.0))

    def _wrapped(self, text: str) -> list[str]:
        layout = QTextLayout(text, self.font())
        option = QTextOption()
        option.setWrapMode(QTextOption.WrapMode.WordWrap)
        layout.setTextOption(option)
        layout.beginLayout()
        lines = []
        while (line := layout.createLine()).isValid():
            line.setLineWidth(max(self.width() - 2.0, 1.0))
            lines.append(text[line.textStart() : line.textStart() + line.textLength()].strip())
        layout.endLayout()
        return lines
