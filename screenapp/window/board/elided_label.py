"""A line of text that is cut short with an ellipsis where there is no room for it."""

from __future__ import annotations

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QResizeEvent
from PySide6.QtWidgets import QLabel, QSizePolicy

from screenapp.window import theme


class ElidedLabel(QLabel):
    """Right-aligned; asks for little room and takes what it gets; the tooltip has it whole."""

    def __init__(self) -> None:
        super().__init__()
        self.full = ""
        self.setFont(theme.font())
        self.setAlignment(Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter)
        self.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Preferred)

    def say(self, text: str) -> None:
        """Show a text."""
        if text != self.full:
            self.full = text
            self._fit()

    def minimumSizeHint(self) -> QSize:
        """Room for a few figures."""
        return QSize(80, super().minimumSizeHint().height())

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Cut again."""
        super().resizeEvent(event)
        self._fit()

    def _fit(self) -> None:
        shown = self.fontMetrics().elidedText(
            self.full, Qt.TextElideMode.ElideRight, max(self.width() - 2, 0)
        )
        self.setText(shown)
        self.setToolTip(self.full if shown != self.full else "")
