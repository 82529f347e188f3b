"""A line of text that goes on in a second, smaller line where there is no room for it."""

from __future__ import annotations

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QFontMetrics, QResizeEvent
from PySide6.QtWidgets import QLabel, QSizePolicy

from screenapp.window import theme


class ElidedLabel(QLabel):
    """Right-aligned; asks for little room and takes what it gets.

    What does not fit in one line stands in two small ones; what does not fit there either ends in
    an ellipsis, and the tooltip has it whole.
    """

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
        room = max(self.width() - 2, 0)
        body, small = theme.font(), theme.font(theme.TEXT_SMALL)
        fits = QFontMetrics(body).horizontalAdvance(self.full) <= room
        lines = [self.full] if fits else two_lines(self.full, QFontMetrics(small), room)
        self.setFont(body if fits else small)
        self.setText("\n".join(lines))
        cut = " ".join(lines) != self.full
        self.setToolTip(self.full if cut else "")


def two_lines(text: str, metrics: QFontMetrics, room: int) -> list[str]:
    """The text broken at a space so that its first line fits, the second one cut if need be."""
    words = text.split(" ")
    first = words[0]
    count = 1
    while count < len(words):
        longer = f"{first} {words[count]}"
        if metrics.horizontalAdvance(longer) > room:
            break
        first, count = longer, count + 1
    lines = [first, " ".join(words[count:])]
    return [metrics.elidedText(line, Qt.TextElideMode.ElideRight, room) for line in lines if line]
