"""Short lists inside a paragraph: one row for each support, load, limit or hole."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from PySide6.QtCore import QEvent, QPointF, QRectF, QSize, Qt
from PySide6.QtGui import (
    QContextMenuEvent,
    QEnterEvent,
    QMouseEvent,
    QPainter,
    QPaintEvent,
    QPen,
)
from PySide6.QtWidgets import QAbstractButton, QHBoxLayout, QMenu, QVBoxLayout, QWidget

from screenapp.window import theme
from screenapp.window.document import Document
from screenapp.window.sheet.field import LINE
from screenapp.window.sheet.pieces import Piece
from screenapp.window.sheet.sentence import Sentence


@dataclass(frozen=True)
class RowOf:
    """What a row shows.

    Attributes:
        id: what it stands for: lit on the board while hovered, selected when clicked.
        where: the first column, e.g. "hole h1".
        pieces: the sentence beside it.
        remove: takes it out of the part; None if it cannot be removed here.
        remove_tip: tooltip of the cross, e.g. "Remove the support at hole h1".
        also: further ids that light this row, e.g. the hole that is held.
        selects: whether `id` is that of a thing of the part, to be lit and selected.
    """

    id: str
    where: tuple[Piece | str, ...]
    pieces: tuple[Piece | str, ...]
    remove: Callable[[], None] | None = None
    remove_tip: str = "Remove"
    also: tuple[str, ...] = ()
    selects: bool = True


class Cross(QAbstractButton):
    """A small cross that removes a row."""

    def __init__(self, parent: QWidget) -> None:
        super().__init__(parent)
        self.setFixedSize(LINE, LINE)
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setCursor(Qt.CursorShape.PointingHandCursor)

    def sizeHint(self) -> QSize:
        """One line square."""
        return QSize(LINE, LINE)

    def enterEvent(self, event: QEnterEvent) -> None:
        """Show that it can be pressed."""
        self.update()
        super().enterEvent(event)

    def leaveEvent(self, event: QEvent) -> None:
        """Rest again."""
        self.update()
        super().leaveEvent(event)

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Two strokes; a ring when focused."""
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        if self.hasFocus():
            painter.setPen(QPen(theme.colour("accent"), 1.5))
            painter.drawRoundedRect(QRectF(1, 1, LINE - 2, LINE - 2), 3, 3)
        busy = self.underMouse() or self.hasFocus()
        painter.setPen(QPen(theme.colour("bad" if busy else "quiet"), 1.25))
        middle, arm = LINE / 2, 3.5
        for sign in (1, -1):
            painter.drawLine(
                QPointF(middle - arm, middle - sign * arm),
                QPointF(middle + arm, middle + sign * arm),
            )


class Row(QWidget):
    """One row; it lights what it stands for, and is lit by it."""

    def __init__(self, document: Document, first_width: int, parent: QWidget) -> None:
        super().__init__(parent)
        self._document = document
        self.spec = RowOf("", (), ())
        self.where = Sentence(self)
        self.where.setFixedWidth(first_width)
        self.where.setVisible(first_width > 0)
        self.sentence = Sentence(self)
        self.cross = Cross(self)
        self.cross.clicked.connect(self.remove)
        line = QHBoxLayout(self)
        line.setContentsMargins(0, 1, 0, 1)
        line.setSpacing(4)
        line.addWidget(self.where, 0, Qt.AlignmentFlag.AlignTop)
        line.addWidget(self.sentence, 1)
        line.addWidget(self.cross, 0, Qt.AlignmentFlag.AlignTop)
        for part in (self.where, self.sentence):
            part.on_delete = self.remove
            part.pointed.connect(self._point)
        document.hovered_changed.connect(self.update)
        document.selection_changed.connect(self.update)

    def show_spec(self, spec: RowOf) -> None:
        """Show another row in its place."""
        self.spec = spec
        self.where.set(*spec.where)
        self.sentence.set(*spec.pieces)
        self.cross.setVisible(spec.remove is not None)
        self.cross.setToolTip(spec.remove_tip)
        self.cross.setAccessibleName(spec.remove_tip)
        self.update()

    def remove(self) -> None:
        """Take it out of the part."""
        if self.spec.remove is not None:
            self.spec.remove()

    def _point(self, about: str) -> None:
        """Light what the piece under the pointer speaks of, else what the row stands for."""
        whole = self.spec.id if self.spec.selects else ""
        self._document.hover(about or whole or None)

    @property
    def lit(self) -> bool:
        """Whether the pointer is on what it stands for."""
        hovered = self._document.hovered
        return bool(hovered) and hovered in (self.spec.id, *self.spec.also)

    def enterEvent(self, event: QEnterEvent) -> None:
        """Light it on the board."""
        if self.spec.id and self.spec.selects:
            self._document.hover(self.spec.id)
        super().enterEvent(event)

    def leaveEvent(self, event: QEvent) -> None:
        """Light it no more."""
        if self._document.hovered == self.spec.id:
            self._document.hover(None)
        super().leaveEvent(event)

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Select it."""
        if event.button() == Qt.MouseButton.LeftButton and self.spec.id and self.spec.selects:
            self._document.select(self.spec.id)
        event.accept()

    def contextMenuEvent(self, event: QContextMenuEvent) -> None:
        """Offer to remove it."""
        if self.spec.remove is None:
            return
        menu = QMenu(self)
        menu.addAction(self.spec.remove_tip, self.remove)
        menu.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        menu.popup(event.globalPos())

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Its ground: lit or selected."""
        chosen = bool(self.spec.id) and self.spec.id in self._document.selection
        if not (chosen or self.lit):
            return
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.setPen(Qt.PenStyle.NoPen)
        painter.setBrush(theme.colour("chosen" if chosen else "hover"))
        painter.drawRoundedRect(QRectF(self.rect()), 4, 4)


class Rows(QWidget):
    """A list of rows; the widget of an id stays as long as the id does."""

    def __init__(self, document: Document, first_width: int, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._document = document
        self._first_width = first_width
        self._rows: dict[str, Row] = {}
        self._column = QVBoxLayout(self)
        self._column.setContentsMargins(0, 0, 0, 0)
        self._column.setSpacing(0)
        self.hide()

    def set(self, specs: list[RowOf]) -> None:
        """Show these rows in this order."""
        wanted = {spec.id for spec in specs}
        for key in [k for k in self._rows if k not in wanted]:
            gone = self._rows.pop(key)
            self._column.removeWidget(gone)
            gone.hide()
            gone.deleteLater()
        for place, spec in enumerate(specs):
            row = self._rows.get(spec.id)
            if row is None:
                row = self._rows[spec.id] = Row(self._document, self._first_width, self)
            if self._column.indexOf(row) != place:
                self._column.removeWidget(row)
                self._column.insertWidget(place, row)
            row.show_spec(spec)
        self.setVisible(bool(specs))

    def row(self, id_: str) -> Row:
        """The row of an id."""
        return self._rows[id_]

    @property
    def ids(self) -> tuple[str, ...]:
        """Ids of the rows."""
        return tuple(self._rows)
