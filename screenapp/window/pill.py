"""The small rounded label that says how far a number can be trusted."""

from __future__ import annotations

from PySide6.QtCore import QModelIndex, QPersistentModelIndex, QRectF, QSize, Qt
from PySide6.QtGui import QFontMetricsF, QPainter, QPen
from PySide6.QtWidgets import QStyle, QStyledItemDelegate, QStyleOptionViewItem

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


class PillDelegate(QStyledItemDelegate):
    """Paints the text of its cells as pills; a dash stays a dash."""

    def paint(
        self,
        painter: QPainter,
        option: QStyleOptionViewItem,
        index: QModelIndex | QPersistentModelIndex,
    ) -> None:
        """Paint ground and pill."""
        text = str(index.data() or "")
        if text not in _COLOURS:
            super().paint(painter, option, index)
            return
        blank = QStyleOptionViewItem(option)
        self.initStyleOption(blank, index)
        blank.text = ""  # type: ignore[attr-defined]
        style = option.widget.style()  # type: ignore[attr-defined]
        style.drawControl(QStyle.ControlElement.CE_ItemViewItem, blank, painter, option.widget)  # type: ignore[attr-defined]
        rect = option.rect  # type: ignore[attr-defined]
        paint_pill(painter, rect.left() + 8.0, rect.center().y() + 1.0, text)

    def sizeHint(
        self, option: QStyleOptionViewItem, index: QModelIndex | QPersistentModelIndex
    ) -> QSize:
        """Room for the pill."""
        return QSize(round(pill_width(str(index.data() or ""))) + 16, 24)
