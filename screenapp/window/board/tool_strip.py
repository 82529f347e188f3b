"""The thin strip of drawing tools at the board's left edge."""

from __future__ import annotations

from PySide6.QtCore import QPointF, QSize, Qt, QTimer, Signal
from PySide6.QtGui import (
    QAction,
    QContextMenuEvent,
    QKeyEvent,
    QMouseEvent,
    QPainter,
    QPaintEvent,
    QPolygonF,
    QResizeEvent,
)
from PySide6.QtWidgets import QButtonGroup, QFrame, QMenu, QToolButton, QVBoxLayout, QWidget

from screenapp.window import theme
from screenapp.window.board.tools.base import Tool
from screenapp.window.icons import icon

TALL, LOW = 34, 28
"""Sides of a button [px]: where there is room, and where there is little."""

GAP, EDGE = 4, 8
"""Between buttons, and above the first and below the last [px]."""

HOLD_MS = 450
"""How long a button is held until the tools of its kind open."""


class GroupButton(QToolButton):
    """A button for one tool, or for several of a kind: the one used last stands on it.

    The others open beside it: press it again while it is in hand, press and hold, the right
    button, or the right arrow key.

    Signals:
        picked: the name of the tool chosen.
    """

    picked = Signal(str)

    def __init__(self, tools: tuple[Tool, ...], parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.tools = tools
        self.tool = tools[0]
        self.setCheckable(True)
        self.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        self.setIconSize(QSize(20, 20))
        self.menu_of_tools: QMenu | None = None
        self._was_on = False
        self._hold = QTimer(self)
        self._hold.setSingleShot(True)
        self._hold.setInterval(HOLD_MS)
        self._hold.timeout.connect(self.open_menu)
        self.pressed.connect(self._note)
        self.clicked.connect(self._clicked)
        self.show_tool(self.tool)

    def show_tool(self, tool: Tool) -> None:
        """Stand for this tool of the group from now on."""
        self.tool = tool
        more = "\nPress and hold, or right-click, for more of its kind." if self.many else ""
        self.setToolTip(f"{tool.name} ({tool.key})\n{tool.line}{more}")
        self.setAccessibleName(tool.name)

    @property
    def many(self) -> bool:
        """Whether it stands for several tools."""
        return len(self.tools) > 1

    def open_menu(self) -> None:
        """Show the tools of its kind beside it."""
        if not self.many:
            return
        menu = QMenu(self)
        menu.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        menu.setAccessibleName(f"Tools like {self.tool.name}")
        ink = theme.current().ink
        for tool in self.tools:
            action = QAction(icon(tool.icon, ink), f"{tool.name}\t{tool.key}", menu)
            action.setToolTip(tool.line)
            action.triggered.connect(lambda _on, name=tool.name: self.picked.emit(name))
            menu.addAction(action)
            if tool is self.tool:
                menu.setActiveAction(action)
        self.menu_of_tools = menu
        menu.destroyed.connect(self._closed)
        menu.popup(self.mapToGlobal(self.rect().topRight()))

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """The right arrow opens."""
        if event.key() == Qt.Key.Key_Right and self.many:
            self.open_menu()
            return
        super().keyPressEvent(event)

    def contextMenuEvent(self, event: QContextMenuEvent) -> None:
        """So does the right button or the menu key."""
        self.open_menu()
        event.accept()

    def paintEvent(self, event: QPaintEvent) -> None:
        """A small corner tells that there is more."""
        super().paintEvent(event)
        if not self.many:
            return
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.setPen(Qt.PenStyle.NoPen)
        painter.setBrush(theme.colour("on_accent" if self.isChecked() else "quiet"))
        x, y = self.width() - 4.0, self.height() - 4.0
        painter.drawPolygon(QPolygonF([QPointF(x, y), QPointF(x - 5, y), QPointF(x, y - 5)]))

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Held down, it opens."""
        super().mousePressEvent(event)
        if self.many and event.button() == Qt.MouseButton.LeftButton:
            self._hold.start()

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        """A press that opened the menu is no click."""
        self._hold.stop()
        if self.menu_of_tools is not None:
            self.setDown(False)
            return
        super().mouseReleaseEvent(event)

    def _note(self) -> None:
        self._was_on = self.isChecked()

    def _clicked(self) -> None:
        if self._was_on and self.many:
            self.open_menu()
        else:
            self.picked.emit(self.tool.name)

    def _closed(self) -> None:
        self.menu_of_tools = None


class ToolStrip(QFrame):
    """One button for each tool or group of tools, and below them one that fits the view.

    Signals:
        wanted: the name of the tool clicked.
        fit_wanted: the fit button was clicked.
    """

    wanted = Signal(str)
    fit_wanted = Signal()

    def __init__(self, tools: tuple[Tool, ...], parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setObjectName("toolStrip")
        self.setAccessibleName("Drawing tools")
        self._buttons: dict[str, GroupButton] = {}
        self._every: list[QToolButton] = []
        self._group = QButtonGroup(self)
        column = QVBoxLayout(self)
        column.setContentsMargins(GAP, EDGE, GAP, EDGE)
        column.setSpacing(GAP)
        for kind in _kinds(tools):
            button = GroupButton(kind, self)
            button.picked.connect(self.wanted)
            self._group.addButton(button)
            self._every.append(button)
            for tool in kind:
                self._buttons[tool.name] = button
            column.addWidget(button)
        column.addStretch(1)
        self._fit = QToolButton(self)
        self._fit.setToolTip("Fit (Home)\nShows the whole part.")
        self._fit.setAccessibleName("Fit")
        self._fit.setIconSize(QSize(20, 20))
        self._fit.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        self._fit.clicked.connect(self.fit_wanted)
        self._every.append(self._fit)
        column.addWidget(self._fit)
        self._size_buttons(TALL)
        self.apply_theme()

    def button(self, name: str) -> GroupButton:
        """The button that a tool stands on, or behind."""
        return self._buttons[name]

    def show_tool(self, name: str) -> None:
        """Mark the tool in hand."""
        button = self._buttons[name]
        button.show_tool(next(t for t in button.tools if t.name == name))
        button.setChecked(True)
        self._colour_icons()

    def apply_theme(self) -> None:
        """Take the colours of the present theme."""
        p = theme.current()
        self.setStyleSheet(
            f"#toolStrip {{ background: {p.chrome}; border: none;"
            f" border-right: 1px solid {p.faint}; }}"
            f"QToolButton {{ border: 1px solid transparent; border-radius: 4px;"
            f" background: transparent; padding: 0px; }}"
            f"QToolButton:hover {{ background: {p.faint}; }}"
            f"QToolButton:checked {{ background: {p.accent}; }}"
            f"QToolButton:focus {{ border: 1px solid {p.accent}; }}"
        )
        self._colour_icons()

    def resizeEvent(self, event: QResizeEvent) -> None:
        """In a low window the buttons are smaller, so that none is cut off."""
        super().resizeEvent(event)
        room = (event.size().height() - 2 * EDGE) / len(self._every) - GAP
        self._size_buttons(max(LOW, min(TALL, int(room))))

    def minimumSizeHint(self) -> QSize:
        """Room for all buttons at their smallest."""
        return QSize(TALL + 2 * GAP + 1, 2 * EDGE + len(self._every) * (LOW + GAP))

    def _size_buttons(self, side: int) -> None:
        for button in self._every:
            button.setFixedSize(TALL, side)

    def _colour_icons(self) -> None:
        p = theme.current()
        for button in self._every:
            name = button.tool.icon if isinstance(button, GroupButton) else "fit"
            button.setIcon(icon(name, p.on_accent if button.isChecked() else p.ink))


def _kinds(tools: tuple[Tool, ...]) -> list[tuple[Tool, ...]]:
    """The tools of each button: those of one group together, where the first of them stands."""
    kinds: dict[str, list[Tool]] = {}
    for tool in tools:
        kinds.setdefault(tool.group or tool.name, []).append(tool)
    return [tuple(kind) for kind in kinds.values()]
