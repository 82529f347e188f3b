"""Every command with its key, in one panel that is searched by typing and runs what is chosen."""

from __future__ import annotations

from collections.abc import Callable

from PySide6.QtCore import QEvent, QModelIndex, QObject, QPersistentModelIndex, QRect, QSize, Qt
from PySide6.QtGui import QColor, QFont, QKeyEvent, QPainter
from PySide6.QtWidgets import (
    QApplication,
    QDialog,
    QLabel,
    QLineEdit,
    QListWidget,
    QListWidgetItem,
    QStyle,
    QStyledItemDelegate,
    QStyleOptionViewItem,
    QVBoxLayout,
    QWidget,
)

from screenapp.window import theme
from screenapp.window.commands import WORDS, Command, matches

SHEET = (
    Command("Next value, last one", "Goes on in the sheet.", ("Tab, Shift+Tab",), None, "sheet"),
    Command("Change a value", "Types or chooses anew.", ("Enter, F2 or Space",), None, "sheet"),
    Command("Type a new value", "Begins it at once.", ("a figure or letter",), None, "sheet"),
    Command("Accept a value", "Puts it into the part.", ("Enter",), None, "sheet"),
    Command("Restore a value", "Forgets what was typed.", ("Esc",), None, "sheet"),
    Command("Remove a row", "Removes what the row speaks of.", ("Del",), None, "sheet"),
)
READINGS = (
    Command("Line before, next line", "Selects its probe.", ("Up, Down",), None, "readings"),
    Command("Rename a reading", "Types another name.", ("Enter or F2",), None, "readings"),
    Command("Remove a reading", "Takes its probe away.", ("Del",), None, "readings"),
    Command("Copy the table", "As text.", ("Ctrl+C",), None, "readings"),
)
ROW, MARGIN = 42, 12
_COMMAND = Qt.ItemDataRole.UserRole
_ENABLED = Qt.ItemFlag.ItemIsEnabled
_MOVES = (Qt.Key.Key_Up, Qt.Key.Key_Down, Qt.Key.Key_PageUp, Qt.Key.Key_PageDown)

Index = QModelIndex | QPersistentModelIndex


class CommandsPanel(QDialog):
    """Type to search, Enter runs; it does not stop the work, and Esc puts it away."""

    def __init__(self, commands: Callable[[], tuple[Command, ...]], parent: QWidget) -> None:
        super().__init__(parent)
        self._commands = commands
        self.setWindowTitle("Commands and keys")
        self.setModal(False)
        self.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        self.search = QLineEdit(self)
        self.search.setPlaceholderText("Search: hole, fit, Ctrl …")
        self.search.setAccessibleName("Search the commands")
        self.search.setToolTip("Type part of a name, of what it does, or of a key")
        self.search.setClearButtonEnabled(True)
        self.search.setMinimumHeight(32)
        self.list = QListWidget(self)
        self.list.setAccessibleName("Commands")
        self.list.setItemDelegate(_Delegate(self.list))
        self.list.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self.list.setFrameShape(QListWidget.Shape.NoFrame)
        self.none = QLabel("No command has these words.", self)
        self.none.setProperty("quiet", True)
        self.none.setContentsMargins(MARGIN, 0, 0, 0)
        foot = QLabel("Enter runs the chosen one; Esc closes.", self)
        foot.setProperty("quiet", True)
        foot.setFont(theme.font(theme.TEXT_SMALL))
        column = QVBoxLayout(self)
        column.setContentsMargins(16, 16, 16, 12)
        column.setSpacing(8)
        column.addWidget(self.search)
        column.addWidget(self.none)
        column.addWidget(self.list, 1)
        column.addWidget(foot)
        self.search.textChanged.connect(self._fill)
        self.search.installEventFilter(self)
        self.list.itemActivated.connect(self._run)
        self.resize(640, 620)
        self._fill()

    @property
    def shown(self) -> list[Command]:
        """The commands that are listed now."""
        return [self.list.item(i).data(_COMMAND) for i in range(self.list.count())]

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Arrows move in the list while one types; Enter runs."""
        if event.type() == QEvent.Type.KeyPress and isinstance(event, QKeyEvent):
            if event.key() in _MOVES:
                QApplication.sendEvent(self.list, event)
                return True
            if event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
                if (item := self.list.currentItem()) is not None:
                    self._run(item)
                return True
        return super().eventFilter(watched, event)

    def _fill(self) -> None:
        self.list.clear()
        first = -1
        for command in self._commands():
            if not matches(command, self.search.text()):
                continue
            item = QListWidgetItem(command.name)
            item.setData(_COMMAND, command)
            item.setToolTip(f"{command.name}: {command.line}")
            spoken = (command.name, command.line, command.shown_keys, WORDS[command.where])
            item.setData(Qt.ItemDataRole.AccessibleTextRole, ", ".join(filter(None, spoken)))
            if command.run is None or not command.ready():
                item.setFlags(item.flags() & ~_ENABLED)
            elif first < 0:
                first = self.list.count()
            self.list.addItem(item)
        self.list.setCurrentRow(first)
        self.none.setVisible(self.list.count() == 0)

    def _run(self, item: QListWidgetItem) -> None:
        command: Command = item.data(_COMMAND)
        if command.run is not None and command.ready():
            self.close()
            command.run()


class _Delegate(QStyledItemDelegate):
    """Name over its line, key at the right; quiet where it cannot be run now."""

    def sizeHint(self, _option: QStyleOptionViewItem, _index: Index) -> QSize:
        """Two lines."""
        return QSize(200, ROW)

    def paint(self, painter: QPainter, option: QStyleOptionViewItem, index: Index) -> None:
        """Paint a row."""
        command: Command = index.data(_COMMAND)
        painter.save()
        box: QRect = option.rect
        state = option.state
        if state & QStyle.StateFlag.State_Selected:
            painter.setPen(Qt.PenStyle.NoPen)
            painter.setBrush(theme.colour("chosen"))
            painter.drawRoundedRect(box.adjusted(0, 1, 0, -1), 4, 4)
        runs = bool(index.flags() & _ENABLED)
        inner = box.adjusted(MARGIN, 3, -MARGIN, -3)
        small = theme.font(theme.TEXT_SMALL)
        ink, quiet = theme.colour("ink" if runs else "quiet"), theme.colour("quiet")
        body = theme.font(theme.TEXT_BODY, QFont.Weight.Medium)
        where = WORDS[command.where]
        _write(painter, inner, (command.name, command.shown_keys), (body, small), ink, top=True)
        _write(painter, inner, (command.line, where), (small, small), quiet, top=False)
        painter.restore()


def _write(
    painter: QPainter,
    box: QRect,
    texts: tuple[str, str],
    fonts: tuple[QFont, QFont],
    colour: QColor,
    top: bool,
) -> None:
    """A text at the left, cut if it must be, and one at the right that never is."""
    vertical = Qt.AlignmentFlag.AlignTop if top else Qt.AlignmentFlag.AlignBottom
    painter.setPen(colour)
    painter.setFont(fonts[1])
    room = painter.fontMetrics().horizontalAdvance(texts[1]) + 16 if texts[1] else 0
    painter.drawText(box, int(Qt.AlignmentFlag.AlignRight | vertical), texts[1])
    painter.setFont(fonts[0])
    left = box.adjusted(0, 0, -room, 0)
    elide = Qt.TextElideMode.ElideRight
    shown = painter.fontMetrics().elidedText(texts[0], elide, left.width())
    painter.drawText(left, int(Qt.AlignmentFlag.AlignLeft | vertical), shown)
