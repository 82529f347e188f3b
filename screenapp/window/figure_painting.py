"""How cells and headings of a table of figures are painted: text and pills in one line."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, cast

from PySide6.QtCore import QModelIndex, QPersistentModelIndex, QRect, QSize, Qt
from PySide6.QtGui import QFontMetrics, QPainter
from PySide6.QtWidgets import (
    QHeaderView,
    QStyle,
    QStyledItemDelegate,
    QStyleOptionViewItem,
    QWidget,
)

from screenapp.window import theme
from screenapp.window.pill import is_pill, paint_pill

if TYPE_CHECKING:
    from screenapp.window.figure_table import FigureTable

PADDING = 6
"""Room left and right of a text [px]."""

LINE_ROLE = Qt.ItemDataRole.UserRole + 1
PILL_ROLE = Qt.ItemDataRole.UserRole + 2

WRAP = Qt.TextFlag.TextWordWrap.value

Index = QModelIndex | QPersistentModelIndex


class FigureDelegate(QStyledItemDelegate):
    """Paints a cell: the ground of its row, then text or pill."""

    def paint(self, painter: QPainter, option: QStyleOptionViewItem, index: Index) -> None:
        """Paint a cell."""
        given = cast(Any, option)  # its fields are missing in the type stubs
        table = cast("FigureTable", given.widget)
        rect: QRect = given.rect
        line = index.data(LINE_ROLE)
        if given.state & QStyle.StateFlag.State_Selected:
            painter.fillRect(rect, theme.colour("chosen"))
        elif table.document.hovered in (line.id, *line.also):
            painter.fillRect(rect, theme.colour("hover"))
        text = str(index.data() or "")
        if index.data(PILL_ROLE) and is_pill(text):
            paint_pill(painter, rect.left() + PADDING, rect.center().y() + 1.0, text)
        else:
            painter.setFont(theme.font())
            painter.setPen(index.data(Qt.ItemDataRole.ForegroundRole))
            _draw(painter, rect, text, index.data(Qt.ItemDataRole.TextAlignmentRole), wraps=True)
        if index == table.currentIndex() and table.hasFocus():
            painter.fillRect(rect.left(), rect.bottom(), rect.width(), 1, theme.colour("accent"))

    def sizeHint(self, _option: QStyleOptionViewItem, index: Index) -> QSize:
        """Room for the text."""
        wide = QFontMetrics(theme.font()).horizontalAdvance(str(index.data() or ""))
        return QSize(wide + 2 * PADDING, 24)


class FigureHeading(QHeaderView):
    """Small quiet headings that stand over their texts."""

    def __init__(self, parent: QWidget) -> None:
        super().__init__(Qt.Orientation.Horizontal, parent)

    def paintSection(self, painter: QPainter, rect: QRect, section: int) -> None:
        """Paint a heading."""
        model = self.model()
        text = model.headerData(section, Qt.Orientation.Horizontal)
        side = model.headerData(
            section, Qt.Orientation.Horizontal, Qt.ItemDataRole.TextAlignmentRole
        )
        painter.setFont(theme.font(theme.TEXT_SMALL))
        painter.setPen(theme.colour("quiet"))
        _draw(painter, rect, str(text or ""), side)


def lines_of(metrics: QFontMetrics, text: str, width: int) -> int:
    """How many lines a text takes between its paddings; 1 too where no line can hold a word."""
    inner = width - 2 * PADDING
    if metrics.horizontalAdvance(text) <= inner + 1:
        return 1
    if any(metrics.horizontalAdvance(word) > inner for word in text.split()):
        return 1
    box = metrics.boundingRect(QRect(0, 0, inner, 10_000), WRAP, text)
    return max(1, round(box.height() / metrics.lineSpacing()))


def _draw(
    painter: QPainter, rect: QRect, text: str, side: Qt.AlignmentFlag, wraps: bool = False
) -> None:
    inner = rect.adjusted(PADDING, 0, -PADDING, 0)
    metrics = painter.fontMetrics()
    lines = lines_of(metrics, text, rect.width()) if wraps else 1
    if lines > 1 and lines * metrics.lineSpacing() <= rect.height() + 2:
        painter.drawText(inner, Qt.AlignmentFlag(side).value | WRAP, text)
        return
    shown = metrics.elidedText(text, Qt.TextElideMode.ElideRight, inner.width() + 1)
    painter.drawText(inner, Qt.AlignmentFlag(side).value, shown)
