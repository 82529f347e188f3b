"""A ring that crosses the part: is it cut out of it, or joined to it?"""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING

from PySide6.QtCore import QEvent, QObject, QPoint, Qt
from PySide6.QtGui import QKeyEvent
from PySide6.QtWidgets import QFrame, QHBoxLayout, QLabel, QPushButton, QVBoxLayout

from screenapp.model import edits
from screenapp.model.edits import EditError, Outcome
from screenapp.model.part import Loop
from screenapp.window import theme

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas
    from screenapp.window.board.tools.base import Tool

WIDE = 300
"""Width of the sheet [px]."""

CUT, JOIN = "Cut it out", "Join it"
KEYS = {Qt.Key.Key_X: CUT, Qt.Key.Key_J: JOIN}
STEPS = {CUT: "cut a ring out", JOIN: "join a ring"}
TIPS = {
    CUT: "What lies inside the ring is taken away (X).",
    JOIN: "What lies inside the ring becomes material (J).",
}


class RingChoice(QFrame):
    """Two buttons beside the ring; the board shows what the focused one would make."""

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self._canvas = canvas
        self._ring: Loop | None = None
        self._tool: Tool | None = None
        self._then: Callable[[], None] = lambda: None
        self._why: dict[str, str] = {}
        self.setObjectName("ringChoice")
        self.setAccessibleName("The ring crosses the part")
        self.setFont(theme.font())
        self._title = QLabel("The ring crosses the part")
        self._title.setObjectName("ringTitle")
        self._tip = QLabel()
        self._tip.setWordWrap(True)
        row = QHBoxLayout()
        row.setSpacing(8)
        self._buttons: dict[str, QPushButton] = {}
        for name in (CUT, JOIN):
            button = QPushButton(name)
            button.setAccessibleName(name)
            button.setToolTip(TIPS[name])
            button.clicked.connect(lambda _on, n=name: self._choose(n))
            button.installEventFilter(self)
            self._buttons[name] = button
            row.addWidget(button)
        row.addStretch(1)
        column = QVBoxLayout(self)
        column.setContentsMargins(12, 8, 12, 12)
        column.setSpacing(8)
        column.addWidget(self._title)
        column.addLayout(row)
        column.addWidget(self._tip)
        self.setFixedWidth(WIDE)
        self.hide()

    @property
    def busy(self) -> bool:
        """Whether it is open."""
        return self.isVisibleTo(self._canvas)

    def button(self, name: str) -> QPushButton:
        """The button called "Cut it out" or "Join it"."""
        return self._buttons[name]

    def offer(self, tool: Tool, ring: Loop, near: QPoint, then: Callable[[], None]) -> bool:
        """Ask, if the ring crosses the part; `then` follows when it is done."""
        part = self._canvas.document.part
        if not edits.ring_meets(part, ring):
            return False
        self._ring, self._tool, self._then = ring, tool, then
        self._why = {}
        for name, button in self._buttons.items():
            try:
                self._made(name)
            except EditError as fault:
                self._why[name] = f"{name}: {fault.cause}; {fault.mend}."
            button.setEnabled(name not in self._why)
        self._style()
        self._place(near)
        self.show()
        self.raise_()
        first = next((b for n, b in self._buttons.items() if n not in self._why), None)
        if first is None:
            self._say(" ".join(self._why.values()))
            self.setFocus(Qt.FocusReason.PopupFocusReason)
        else:
            first.setFocus(Qt.FocusReason.PopupFocusReason)
        return True

    def drop(self) -> None:
        """Close without a change."""
        if self._ring is None:
            return
        self._ring = self._tool = None
        if self.busy:
            self._canvas.setFocus(Qt.FocusReason.OtherFocusReason)
        self.hide()
        self._canvas.preview(None)

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Focus shows what a button would make; its keys choose."""
        if event.type() == QEvent.Type.FocusIn:
            name = next(n for n, b in self._buttons.items() if b is watched)
            self._show(name)
        if isinstance(event, QKeyEvent) and event.type() == QEvent.Type.KeyPress:
            return self._key(event)
        if event.type() == QEvent.Type.ShortcutOverride:
            event.accept()
            return True
        return super().eventFilter(watched, event)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Where no button can be pressed, Escape still closes."""
        if not self._key(event):
            super().keyPressEvent(event)

    def _key(self, event: QKeyEvent) -> bool:
        key = event.key()
        if key == Qt.Key.Key_Escape:
            self.drop()
        elif key in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            name = next((n for n, b in self._buttons.items() if b.hasFocus()), None)
            if name is not None:
                self._choose(name)
        elif key in KEYS:
            self._choose(KEYS[Qt.Key(key)])
        else:
            return False
        return True

    def _made(self, name: str) -> Outcome:
        assert self._ring is not None
        part = self._canvas.document.part
        return edits.cut(part, self._ring) if name == CUT else edits.join(part, self._ring)

    def _show(self, name: str) -> None:
        if self._ring is None or name in self._why:
            return
        self._canvas.preview(self._made(name).part)
        self._say(" ".join((TIPS[name], *self._why.values())))

    def _choose(self, name: str) -> None:
        tool, then = self._tool, self._then
        if tool is None or name in self._why:
            return
        made = self._made(name)
        self.drop()
        if tool.apply(STEPS[name], lambda: made):
            then()

    def _say(self, text: str) -> None:
        self._tip.setText(text)
        layout = self.layout()
        if layout is not None:
            layout.activate()
            self.resize(WIDE, layout.totalHeightForWidth(WIDE))

    def _place(self, near: QPoint) -> None:
        self._say(max((TIPS[CUT], *self._why.values()), key=len))
        host = self._canvas
        x = near.x() + 28
        if x + WIDE > host.width() - 8:
            x = near.x() - 28 - WIDE
        y = min(near.y() - 24, host.height() - self.height() - 8)
        self.move(max(8, x), max(8, y))

    def _style(self) -> None:
        p = theme.current()
        small, body = theme.TEXT_SMALL, theme.TEXT_BODY
        self.setStyleSheet(
            f"#ringChoice {{ background: {p.sheet}; border: 1px solid {p.quiet};"
            f" border-radius: 6px; }}"
            f"QLabel {{ color: {p.quiet}; font-size: {small}px; }}"
            f"#ringTitle {{ color: {p.ink}; font-size: {body}px; font-weight: 600; }}"
            f"QPushButton {{ color: {p.ink}; background: transparent; font-size: {body}px;"
            f" border: 1px solid {p.faint}; border-radius: 4px; padding: 3px 10px;"
            f" min-height: 18px; }}"
            f"QPushButton:hover {{ background: {p.hover}; }}"
            f"QPushButton:focus {{ background: {p.accent}; color: {p.on_accent};"
            f" border: 1px solid {p.accent}; }}"
            f"QPushButton:disabled {{ color: {p.faint}; }}"
        )
