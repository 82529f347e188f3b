"""The mark in a paragraph's margin and the shape beside the verdict: told by form, not colour."""

from __future__ import annotations

from typing import Literal

from PySide6.QtCore import QPointF, QRectF, QSize, Qt
from PySide6.QtGui import QColor, QPainter, QPaintEvent, QPen, QPolygonF
from PySide6.QtWidgets import QWidget

from screenapp.window import theme

State = Literal["open", "set", "out of date"]
Standing = Literal["holds", "does not hold", "undecided", "not screened", "out of date"]

_MEANING: dict[State, str] = {
    "open": "Open: something is missing",
    "set": "Set",
    "out of date": "Out of date: the part has changed since",
}


class Mark(QWidget):
    """A ring while open, a full dot when set, a half dot when out of date."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.state: State = "open"
        self.setFixedSize(16, 20)
        theme.notifier.changed.connect(self.update)
        self.show_state("open", "")

    def show_state(self, state: State, title: str) -> None:
        """Show another state of the paragraph called `title`."""
        self.state = state
        self.setToolTip(_MEANING[state])
        self.setAccessibleName(f"{title}: {_MEANING[state]}")
        self.update()

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint the ring, dot or half dot."""
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        box = QRectF(4, 6, 9, 9)
        colour = theme.colour("good" if self.state == "set" else "doubt")
        painter.setPen(QPen(colour, 1.75))
        painter.setBrush(colour if self.state == "set" else Qt.BrushStyle.NoBrush)
        painter.drawEllipse(box)
        if self.state == "out of date":
            painter.setBrush(colour)
            painter.drawPie(box, 90 * 16, 180 * 16)


class StandingShape(QWidget):
    """Disc: holds; triangle: does not hold; diamond: undecided; ring: not screened; half: old."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._standing: Standing = "not screened"
        self.setFixedSize(QSize(20, 20))
        theme.notifier.changed.connect(self.update)

    def show_standing(self, standing: Standing) -> None:
        """Show another verdict."""
        self._standing = standing
        self.update()

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint the shape."""
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        paint_standing(painter, QRectF(1, 1, 18, 18), self._standing)


def colour_of(standing: Standing) -> QColor:
    """Its colour in the palette in force."""
    names: dict[Standing, str] = {"holds": "good", "does not hold": "bad", "undecided": "doubt"}
    return theme.colour(names.get(standing, "quiet"))


def paint_standing(painter: QPainter, box: QRectF, standing: Standing) -> None:
    """Paint the shape of a verdict into a box [px]."""
    colour = colour_of(standing)
    painter.setPen(QPen(colour, 1.75))
    painter.setBrush(colour)
    x0, y0, x1, y1 = box.left(), box.top(), box.right(), box.bottom()
    cx, cy = box.center().x(), box.center().y()
    if standing == "holds":
        painter.drawEllipse(box.adjusted(1, 1, -1, -1))
    elif standing == "does not hold":
        corners = [QPointF(cx, y0 + 1), QPointF(x1, y1 - 1.5), QPointF(x0, y1 - 1.5)]
        painter.drawPolygon(QPolygonF(corners))
    elif standing == "undecided":
        corners = [QPointF(cx, y0), QPointF(x1, cy), QPointF(cx, y1), QPointF(x0, cy)]
        painter.drawPolygon(QPolygonF(corners))
    else:
        painter.setBrush(Qt.BrushStyle.NoBrush)
        ring = box.adjusted(1.5, 1.5, -1.5, -1.5)
        painter.drawEllipse(ring)
        if standing == "out of date":
            painter.setBrush(colour)
            painter.drawPie(ring, 90 * 16, 180 * 16)
