"""A label that shortens its text to the room it has, and tells all of it in its tooltip."""

from __future__ import annotations

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QPainter, QPaintEvent
from PySide6.QtWidgets import QLabel, QWidget

from screenapp.window import theme


class CutLabel(QLabel):
    """One line of quiet text that never asks for more than there is."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setFont(theme.font())
        theme.notifier.changed.connect(self.update)

    def setText(self, text: str) -> None:
        """Show another text."""
        super().setText(text)
        self.setToolTip(text)

    def minimumSizeHint(self) -> QSize:
        """Any width will do."""
        return QSize(24, super().minimumSizeHint().height())

    def paintEvent(self, _event: QPaintEvent) -> None:
        """The text, shortened at its end."""
        painter = QPainter(self)
        painter.setFont(self.font())
        painter.setPen(theme.colour("quiet"))
        inner = self.contentsRect()
        text = self.fontMetrics().elidedText(
            self.text(), Qt.TextElideMode.ElideRight, inner.width() + 1
        )
        painter.drawText(inner, self.alignment().value, text)
