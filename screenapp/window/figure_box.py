"""A framed figure in the sheet that the keyboard reaches and that says itself in words."""

from __future__ import annotations

from typing import ClassVar, Generic, Protocol, TypeVar

from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QFocusEvent, QFont, QFontMetricsF, QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QSizePolicy, QWidget

from screenapp.window import theme

HEAD, LINE = 8.0, 17.0
"""Room above and below what is in the frame, and the height of a line of words [px]."""


class FigureBox(QWidget):
    """The frame, its focus and its texts; a subclass paints what is inside."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self.hide()
        theme.notifier.changed.connect(self.update)

    def say(self, name: str, words: str) -> None:
        """Name it and tell in words what it shows."""
        self.setAccessibleName(name)
        self.setAccessibleDescription(words)
        self.setToolTip(words)

    def focusInEvent(self, event: QFocusEvent) -> None:
        """Show that it has the focus."""
        super().focusInEvent(event)
        self.update()

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Show that it has it no more."""
        super().focusOutEvent(event)
        self.update()

    def paint_frame(self, painter: QPainter) -> QRectF:
        """Paint the frame and return the room inside it [px]."""
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        frame = QRectF(self.rect()).adjusted(1.0, 1.0, -1.0, -1.0)
        focused = self.hasFocus()
        painter.setPen(QPen(theme.colour("accent" if focused else "faint"), 1.5 if focused else 1))
        painter.drawRoundedRect(frame, 4.0, 4.0)
        return frame.adjusted(10.0, HEAD - 1.0, -10.0, -HEAD + 1.0)

    @staticmethod
    def paint_words(
        painter: QPainter, text: str, inner: QRectF, y: float, bold: bool = False
    ) -> None:
        """Paint a line of words, shortened if it does not fit."""
        weight = QFont.Weight.DemiBold if bold else QFont.Weight.Normal
        painter.setFont(theme.font(theme.TEXT_SMALL, weight))
        painter.setPen(theme.colour("ink" if bold else "quiet"))
        shown = QFontMetricsF(painter.font()).elidedText(
            text, Qt.TextElideMode.ElideRight, inner.width()
        )
        left = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
        painter.drawText(QRectF(inner.left(), y, inner.width(), LINE), left, shown)


class NamedFigure(Protocol):
    """What every figure says of itself."""

    @property
    def name(self) -> str:
        """What it is of, as its heading says."""

    @property
    def words(self) -> str:
        """The whole of it in words."""


FigureT = TypeVar("FigureT", bound=NamedFigure)


class FigurePlot(FigureBox, Generic[FigureT]):
    """Shows a figure under its name and the case's; hidden while there is none.

    The whole of it is said in words as tooltip and accessible description, after `lead`.
    """

    lead: ClassVar[str]

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.figure: FigureT | None = None
        self._case = ""

    def show_figure(self, figure: FigureT | None, case: str = "") -> None:
        """Show a figure under the case of that name, or hide."""
        self.figure, self._case = figure, case
        self.setVisible(figure is not None)
        if figure is not None:
            under = f" under “{case}”" if case else ""
            self.say(f"{self.lead} {figure.name}{under}", figure.words)
        self.update()

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Name, and what the subclass paints below."""
        if self.figure is None:
            return
        painter = QPainter(self)
        inner = self.paint_frame(painter)
        under = f"  ·  {self._case}" if self._case else ""
        self.paint_words(painter, f"{self.figure.name}{under}", inner, inner.top(), bold=True)
        self.paint_figure(painter, inner, self.figure)
        painter.end()

    def paint_figure(self, painter: QPainter, inner: QRectF, figure: FigureT) -> None:
        """Paint the figure inside the frame, from the line below its name on."""
        raise NotImplementedError
