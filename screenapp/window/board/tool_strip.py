"""The thin strip of drawing tools at the board's left edge."""

from __future__ import annotations

from PySide6.QtCore import QSize, Qt, Signal
from PySide6.QtWidgets import QButtonGroup, QFrame, QToolButton, QVBoxLayout, QWidget

from screenapp.window import theme
from screenapp.window.board.tools.base import Tool
from screenapp.window.icons import icon


class ToolStrip(QFrame):
    """One button for each tool, and below them one that fits the view.

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
        self._buttons: dict[str, QToolButton] = {}
        self._icons: dict[QToolButton, str] = {}
        self._group = QButtonGroup(self)
        column = QVBoxLayout(self)
        column.setContentsMargins(4, 8, 4, 8)
        column.setSpacing(4)
        for tool in tools:
            button = self._button(tool.icon, f"{tool.name} ({tool.key})", tool.line)
            button.setCheckable(True)
            button.setAccessibleName(tool.name)
            button.clicked.connect(lambda _on, name=tool.name: self.wanted.emit(name))
            self._group.addButton(button)
            self._buttons[tool.name] = button
            column.addWidget(button)
        column.addStretch(1)
        fit = self._button("fit", "Fit (Home)", "Shows the whole part.")
        fit.setAccessibleName("Fit")
        fit.clicked.connect(self.fit_wanted)
        column.addWidget(fit)
        self.apply_theme()

    def button(self, name: str) -> QToolButton:
        """The button of a tool."""
        return self._buttons[name]

    def show_tool(self, name: str) -> None:
        """Mark the tool in hand."""
        self._buttons[name].setChecked(True)
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

    def _button(self, icon_name: str, head: str, line: str) -> QToolButton:
        button = QToolButton()
        button.setToolTip(f"{head}\n{line}")
        button.setIconSize(QSize(20, 20))
        button.setFixedSize(34, 34)
        button.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        self._icons[button] = icon_name
        return button

    def _colour_icons(self) -> None:
        p = theme.current()
        for button, name in self._icons.items():
            button.setIcon(icon(name, p.on_accent if button.isChecked() else p.ink))
