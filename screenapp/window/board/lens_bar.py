"""The row of lenses under the board: what is painted on the part."""

from __future__ import annotations

from typing import get_args

from PySide6.QtCore import Qt
from PySide6.QtGui import QKeySequence, QShortcut
from PySide6.QtWidgets import QButtonGroup, QHBoxLayout, QPushButton, QSizePolicy, QWidget

from screenapp.window import theme
from screenapp.window.document import Document, Lens

LENSES: tuple[Lens, ...] = get_args(Lens)

TIPS: dict[Lens, str] = {
    "Shape": "The part as drawn, nothing painted on it",
    "Mesh": "The elements of the last screening",
    "Utilisation": "Stress over what the limit allows: above 1.00 the part does not hold there",
    "Stress": "One component of stress",
    "Displacement": "How far each place moves, drawn on the deformed part",
    "Trust": "Where the numbers are settled, rising, or not settled",
}


class LensBar(QWidget):
    """One pill for each lens; Alt and a digit choose one from anywhere in the window."""

    def __init__(self, document: Document, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._document = document
        self.setAccessibleName("Lenses")
        self.setSizePolicy(QSizePolicy.Policy.Minimum, QSizePolicy.Policy.Fixed)
        self.buttons: dict[Lens, QPushButton] = {}
        self._group = QButtonGroup(self)
        self._group.setExclusive(True)
        row = QHBoxLayout(self)
        row.setContentsMargins(0, 0, 0, 0)
        row.setSpacing(4)
        for number, lens in enumerate(LENSES, start=1):
            row.addWidget(self._button(lens, QKeySequence(f"Alt+{number}")))
        row.addStretch(1)
        document.view_changed.connect(self.sync)
        theme.notifier.changed.connect(self.apply_theme)
        self.apply_theme()
        self.sync()

    def sync(self) -> None:
        """Press the pill of the document's lens."""
        self.buttons[self._document.view.lens].setChecked(True)

    def apply_theme(self) -> None:
        """Take the colours of the theme in force."""
        p = theme.current()
        shape = "border-radius: 14px; padding: 3px 10px; min-height: 20px;"
        self.setStyleSheet(
            f"QPushButton {{ {shape} background: transparent; color: {p.ink};"
            "  border: 2px solid transparent; }"
            f"QPushButton:hover {{ background: {p.hover}; }}"
            f"QPushButton:checked {{ background: {p.ink}; color: {p.sheet}; }}"
            f"QPushButton:focus {{ {shape} border: 2px solid {p.accent}; }}"
        )
        for button in self.buttons.values():
            button.setFont(theme.font(theme.TEXT_BODY))

    def _button(self, lens: Lens, keys: QKeySequence) -> QPushButton:
        button = QPushButton(lens)
        button.setCheckable(True)
        button.setAutoDefault(False)
        button.setCursor(Qt.CursorShape.PointingHandCursor)
        button.setAccessibleName(f"Lens {lens}")
        shown = keys.toString(QKeySequence.SequenceFormat.NativeText)
        button.setToolTip(f"{lens}: {TIPS[lens]} ({shown})")
        button.setAccessibleDescription(TIPS[lens])
        button.clicked.connect(lambda: self._document.look(lens=lens))
        shortcut = QShortcut(keys, self)
        shortcut.activated.connect(lambda: self._document.look(lens=lens))
        self._group.addButton(button)
        self.buttons[lens] = button
        return button
