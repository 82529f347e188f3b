"""The small rounded label that says how far a number can be trusted."""

from __future__ import annotations

from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QFontMetricsF, QPainter, QPen

from screenapp.window import theme

HEIGHT = 16

_COLOURS = {
    "settled": "quiet",
    "rising": "bad",
    "unsettled": "doubt",
    "holds": "good",
    "does not hold": "bad",
    "undecided": "doubt",
}
_PENS = {
    "rising": Qt.PenStyle.SolidLine,
    "does not hold": Qt.PenStyle.SolidLine,
    "unsettled": Qt.PenStyle.DashLine,
    "undecided": Qt.PenStyle.DashLine,
}


def pill_width(text: str) -> float:
    """Width of the pill [px]."""
    return QFontMetricsF(theme.font(theme.TEXT_SMALL)).horizontalAdvance(text) + 16.0


def paint_pill(painter: QPainter, left: float, middle: float, text: str) -> None:
    """Paint a pill from `left`, its middle line at `middle` [px]; dashed while undecided."""
    painter.save()
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    colour = theme.colour(_COLOURS.get(text, "quiet"))
    painter.setPen(QPen(colour, 1.0, _PENS.get(text, Qt.PenStyle.SolidLine)))
    painter.setBrush(Qt.BrushStyle.NoBrush)
    box = QRectF(left + 0.5, middle - HEIGHT / 2 + 0.5, pill_width(text) - 1.0, HEIGHT - 1.0)
    painter.drawRoundedRect(box, box.height() / 2, box.height() / 2)
    painter.setFont(theme.font(theme.TEXT_SMALL))
    painter.drawText(box, Qt.AlignmentFlag.AlignCenter, text)
    painter.restore()


def is_pill(text: str) -> bool:
    """Whether a text is one that stands in a pill."""
    return text in _COLOURS
