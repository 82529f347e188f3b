"""A quiet table of figures: no grid, no boxes, numbers to the right, trust as a pill."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Any

from PySide6.QtCore import (
    QAbstractTableModel,
    QEvent,
    QItemSelectionModel,
    QModelIndex,
    QPersistentModelIndex,
    QSize,
    Qt,
    Signal,
)
from PySide6.QtGui import QFontMetrics, QMouseEvent, QResizeEvent
from PySide6.QtWidgets import (
    QAbstractItemView,
    QApplication,
    QHeaderView,
    QSizePolicy,
    QTableView,
    QWidget,
)

from screenapp.model.errors import ScreenappError
from screenapp.window import theme
from screenapp.window.document import Document
from screenapp.window.figure_painting import (
    LINE_ROLE,
    PADDING,
    PILL_ROLE,
    FigureDelegate,
    FigureHeading,
    lines_of,
)
from screenapp.window.pill import pill_width

ROW = 24
"""Height of a row of one line [px]."""

MOST_LINES = 3
"""Words that find no room beside the numbers wrap into so many lines; more are cut."""

LEAST_NAME, LEAST_WORDS, LEAST_IN_SHEET = 72, 56, 76
"""The first column, and others of words, are not made narrower [px]: their texts wrap.  Numbers
are never cut."""

Index = QModelIndex | QPersistentModelIndex


@dataclass(frozen=True)
class Column:
    """A column: its heading, whether it holds numbers or a pill, and its tooltip.

    A `spare` column gives way where words would be cut; its texts stand in the tooltips too.
    """

    title: str
    number: bool = False
    pill: bool = False
    tip: str = ""
    spare: bool = False


@dataclass(frozen=True)
class Line:
    """A row: the id it stands for, its texts, and what its tooltip adds."""

    id: str
    texts: tuple[str, ...]
    tip: str = ""
    also: tuple[str, ...] = field(default=())


class FigureModel(QAbstractTableModel):
    """Columns and lines; the first column may be written in if `rename` is given."""

    def __init__(self, parent: QWidget) -> None:
        super().__init__(parent)
        self.columns: tuple[Column, ...] = ()
        self.lines: tuple[Line, ...] = ()
        self.faded = False
        self.rename: Callable[[str, str], None] | None = None
        self.refused: Callable[[ScreenappError], None] = lambda _error: None

    def show(self, columns: tuple[Column, ...], lines: tuple[Line, ...], faded: bool) -> None:
        """Show other lines; what is the same stays, with its selection and editor."""
        same_form = columns == self.columns and [x.id for x in lines] == [x.id for x in self.lines]
        if same_form:
            self.lines, self.faded = lines, faded
            if lines:
                last = self.index(len(lines) - 1, len(columns) - 1)
                self.dataChanged.emit(self.index(0, 0), last)
            return
        self.beginResetModel()
        self.columns, self.lines, self.faded = columns, lines, faded
        self.endResetModel()

    def rowCount(self, parent: Index | None = None) -> int:
        """Number of lines."""
        return 0 if parent is not None and parent.isValid() else len(self.lines)

    def columnCount(self, parent: Index | None = None) -> int:
        """Number of columns."""
        return 0 if parent is not None and parent.isValid() else len(self.columns)

    def data(self, index: Index, role: int = Qt.ItemDataRole.DisplayRole) -> Any:
        """Text, alignment, colour and tooltip of a cell."""
        if not index.isValid():
            return None
        line, column = self.lines[index.row()], self.columns[index.column()]
        text = line.texts[index.column()]
        if role in (Qt.ItemDataRole.DisplayRole, Qt.ItemDataRole.EditRole):
            return text
        if role == Qt.ItemDataRole.TextAlignmentRole:
            side = Qt.AlignmentFlag.AlignRight if column.number else Qt.AlignmentFlag.AlignLeft
            return side | Qt.AlignmentFlag.AlignVCenter
        if role == Qt.ItemDataRole.ToolTipRole:
            return f"{text}\n{line.tip}" if line.tip else text
        if role == Qt.ItemDataRole.ForegroundRole:
            return theme.colour("quiet" if self.faded else "ink")
        if role == LINE_ROLE:
            return line
        if role == PILL_ROLE:
            return column.pill
        if role == Qt.ItemDataRole.AccessibleTextRole:
            return f"{column.title}: {text}"
        return None

    def headerData(
        self, section: int, orientation: Qt.Orientation, role: int = Qt.ItemDataRole.DisplayRole
    ) -> Any:
        """Headings."""
        if orientation != Qt.Orientation.Horizontal or section >= len(self.columns):
            return None
        column = self.columns[section]
        if role == Qt.ItemDataRole.DisplayRole:
            return column.title
        if role == Qt.ItemDataRole.ToolTipRole:
            return column.tip or column.title
        if role == Qt.ItemDataRole.TextAlignmentRole:
            side = Qt.AlignmentFlag.AlignRight if column.number else Qt.AlignmentFlag.AlignLeft
            return side | Qt.AlignmentFlag.AlignVCenter
        if role == Qt.ItemDataRole.FontRole:
            return theme.font(theme.TEXT_SMALL)
        return None

    def flags(self, index: Index) -> Qt.ItemFlag:
        """The first column may be written in where renaming is possible."""
        flags = super().flags(index)
        if self.rename is not None and index.column() == 0:
            flags |= Qt.ItemFlag.ItemIsEditable
        return flags

    def setData(self, index: Index, value: Any, role: int = Qt.ItemDataRole.EditRole) -> bool:
        """Rename."""
        if role != Qt.ItemDataRole.EditRole or self.rename is None or not index.isValid():
            return False
        try:
            self.rename(self.lines[index.row()].id, str(value))
        except ScreenappError as error:
            self.refused(error)
            return False
        return True


class FigureTable(QTableView):
    """Shows lines and keeps step with what the document hovers over and has selected.

    With `grows` it is as tall as its lines and has no scroll bars (in the sheet).

    Signals:
        line_picked: row of a line that the user went to by mouse or key, after it was selected.
    """

    line_picked = Signal(int)

    def __init__(
        self, document: Document, name: str, parent: QWidget | None = None, grows: bool = False
    ) -> None:
        super().__init__(parent)
        self.document = document
        self.grows = grows
        self.figures = FigureModel(self)
        self.setModel(self.figures)
        self.setAccessibleName(name)
        self.setShowGrid(False)
        self.setFont(theme.font())
        self.setMouseTracking(True)
        self.setWordWrap(False)
        self.setTabKeyNavigation(False)
        self.setSelectionBehavior(QAbstractItemView.SelectionBehavior.SelectRows)
        self.setSelectionMode(QAbstractItemView.SelectionMode.SingleSelection)
        self.setEditTriggers(
            QAbstractItemView.EditTrigger.DoubleClicked
            | QAbstractItemView.EditTrigger.EditKeyPressed
        )
        self.setItemDelegate(FigureDelegate(self))
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setHorizontalHeader(FigureHeading(self))
        upright = self.verticalHeader()
        upright.hide()
        upright.setDefaultSectionSize(ROW)
        upright.setMinimumSectionSize(ROW)
        heading = self.horizontalHeader()
        heading.setHighlightSections(False)
        heading.setFixedHeight(ROW)
        heading.setSectionResizeMode(QHeaderView.ResizeMode.Fixed)
        heading.setMinimumSectionSize(24)
        heading.setFont(theme.font(theme.TEXT_SMALL))
        if grows:
            off = Qt.ScrollBarPolicy.ScrollBarAlwaysOff
            self.setVerticalScrollBarPolicy(off)
            self.setHorizontalScrollBarPolicy(off)
            self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self._echo = False
        self.entered.connect(self._point)
        self.selectionModel().selectionChanged.connect(self._picked)
        document.selection_changed.connect(self.show_selection)
        document.hovered_changed.connect(self._show_hovered)
        theme.notifier.changed.connect(self.viewport().update)

    def show_lines(
        self, columns: tuple[Column, ...], lines: tuple[Line, ...], faded: bool = False
    ) -> None:
        """Show other lines."""
        self._echo = True
        self.figures.show(columns, lines, faded)
        self._echo = False
        self._fit_columns()
        self.show_selection()
        if self.grows:
            self.setVisible(bool(lines))
            self.updateGeometry()

    def line_at(self, row: int) -> Line:
        """One line."""
        return self.figures.lines[row]

    def as_text(self) -> str:
        """The table with tabs between its cells, for pasting elsewhere."""
        rows = [[c.title for c in self.figures.columns]]
        rows += [list(line.texts) for line in self.figures.lines]
        return "\n".join("\t".join(cells) for cells in rows) + "\n"

    def copy(self) -> None:
        """Copy the table as text."""
        QApplication.clipboard().setText(self.as_text())
        self.document.said.emit("The table was copied as text")

    def sizeHint(self) -> QSize:
        """As tall as its lines where it grows."""
        if not self.grows:
            return super().sizeHint()
        rows = sum(self.rowHeight(row) for row in range(len(self.figures.lines)))
        return QSize(240, ROW + rows + 2)

    def minimumSizeHint(self) -> QSize:
        """As `sizeHint` in height."""
        return QSize(120, self.sizeHint().height() if self.grows else 3 * ROW)

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Share the width out anew."""
        super().resizeEvent(event)
        self._fit_columns()

    def leaveEvent(self, event: QEvent) -> None:
        """Nothing is pointed at any more."""
        if any(self.document.hovered == line.id for line in self.figures.lines):
            self.document.hover(None)
        super().leaveEvent(event)

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """A click on the line that is selected already goes there again."""
        index = self.indexAt(event.position().toPoint())
        again = index.isValid() and self.selectionModel().isRowSelected(index.row())
        super().mousePressEvent(event)
        if again and index.row() < len(self.figures.lines):
            self.document.select(self.figures.lines[index.row()].id)
            self.line_picked.emit(index.row())

    # --- keeping step -----------------------------------------------------------------------

    def show_selection(self) -> None:
        """Select the line of what the document has selected."""
        chosen = self.document.selection
        rows = [
            i
            for i, line in enumerate(self.figures.lines)
            if line.id in chosen or any(other in chosen for other in line.also)
        ]
        current = self.currentIndex().row()
        if current in rows:
            rows = [current]
        self._echo = True
        if rows:
            index = self.figures.index(rows[0], max(0, self.currentIndex().column()))
            self.selectionModel().setCurrentIndex(
                index,
                QItemSelectionModel.SelectionFlag.ClearAndSelect
                | QItemSelectionModel.SelectionFlag.Rows,
            )
        else:
            self.selectionModel().clearSelection()
        self._echo = False

    def _picked(self) -> None:
        rows = self.selectionModel().selectedRows()
        if self._echo or not rows:
            return
        self.document.select(self.figures.lines[rows[0].row()].id)
        self.line_picked.emit(rows[0].row())

    def _point(self, index: QModelIndex) -> None:
        self.document.hover(self.figures.lines[index.row()].id)

    def _show_hovered(self) -> None:
        self.viewport().update()

    # --- widths -----------------------------------------------------------------------------

    def _fit_columns(self) -> None:
        """Give each column what it needs; what is left or lacking is the first one's."""
        columns, lines = self.figures.columns, self.figures.lines
        if not columns:
            return
        small, body = QFontMetrics(theme.font(theme.TEXT_SMALL)), QFontMetrics(theme.font())
        wants = []
        for i, column in enumerate(columns):
            wide = small.horizontalAdvance(column.title)
            for line in lines:
                text = line.texts[i]
                need = pill_width(text) if column.pill else body.horizontalAdvance(text)
                wide = max(wide, round(need))
            wants.append(wide + 2 * PADDING + 1)
        spare = self.viewport().width() - sum(wants)
        for i, column in enumerate(columns):
            gives_way = column.spare and spare < 0
            self.setColumnHidden(i, gives_way)
            if gives_way:
                spare += wants[i]
                wants[i] = 0
        words = [i for i, c in enumerate(columns) if not c.number and not c.pill]
        if spare >= 0 and self.grows:
            wants[0] += spare
        elif spare >= 0:  # let the columns breathe
            wants = [wide + min(spare // len(wants), 40) for wide in wants]
        least_words = LEAST_IN_SHEET if self.grows else LEAST_WORDS
        least = {i: LEAST_NAME if i == 0 else least_words for i in words}
        while spare < 0:  # from the widest, a pixel at a time
            wider = [i for i in words if wants[i] > least[i]]
            if not wider:
                break
            wants[max(wider, key=lambda i: wants[i])] -= 1
            spare += 1
        for i, wide in enumerate(wants):
            self.setColumnWidth(i, wide)
        for row, line in enumerate(lines):
            count = max((lines_of(body, line.texts[i], wants[i]) for i in words), default=1)
            more = (min(count, MOST_LINES) - 1) * body.lineSpacing()
            self.setRowHeight(row, ROW + more)
        if self.grows:
            self.updateGeometry()
