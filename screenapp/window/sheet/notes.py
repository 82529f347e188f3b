"""The part's notes: a few lines under the first paragraph."""

from __future__ import annotations

import math

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QFocusEvent, QFontMetricsF, QKeyEvent, QResizeEvent
from PySide6.QtWidgets import QPlainTextEdit, QSizePolicy, QWidget

from screenapp.model.edit_settings import set_notes
from screenapp.window import theme
from screenapp.window.document import Document

MOST_LINES = 8
"""Longer notes scroll."""


class NotesEdit(QPlainTextEdit):
    """Grows with its text; leaving it accepts, Escape restores, Tab goes on."""

    def __init__(self, document: Document, parent: QWidget) -> None:
        super().__init__(parent)
        self._document = document
        self._fitted = -1  # width that the height was fitted to [px]
        self.setObjectName("notes")
        self.setAccessibleName("Notes of the part")
        self.setToolTip("Notes of the part; Escape restores what was there")
        self.setPlaceholderText("Notes: anything worth keeping")
        self.setTabChangesFocus(True)
        self.setFont(theme.font())
        self.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self.setSizePolicy(QSizePolicy.Policy.Preferred, QSizePolicy.Policy.Fixed)
        self.document().setDocumentMargin(2)
        self.textChanged.connect(self._fit)
        document.part_changed.connect(self.show_notes)
        theme.notifier.changed.connect(self.apply_theme)
        self.show_notes()
        self.apply_theme()

    @property
    def changed(self) -> bool:
        """Whether other notes than the part's stand here."""
        return self.toPlainText() != self._document.part.notes

    def show_notes(self) -> None:
        """Show the part's notes, unless others are being typed."""
        if not (self.hasFocus() and self.document().isModified()):
            if self.changed:
                self.setPlainText(self._document.part.notes)
            self.document().setModified(False)
        self._fit()

    def accept(self) -> None:
        """Take what was typed."""
        if self.changed:
            part = self._document.part
            self.document().setModified(False)
            self._document.apply("notes", set_notes(part, self.toPlainText()))

    def apply_theme(self) -> None:
        """Take the colours of the present theme."""
        p = theme.current()
        self.setStyleSheet(
            f"#notes {{ color: {p.ink}; background: transparent; border: 1px solid transparent;"
            f" border-radius: 3px; padding: 0px; }}"
            f"#notes:hover {{ border: 1px solid {p.faint}; }}"
            f"#notes:focus {{ border: 1px solid {p.accent}; background: {p.paper}; }}"
        )

    def sizeHint(self) -> QSize:
        """As high as its lines."""
        lines = max(1, min(MOST_LINES, int(self.document().size().height())))
        spacing = QFontMetricsF(self.document().defaultFont()).lineSpacing()
        around = self.height() - self.viewport().height() if self.isVisible() else 4
        margins = 2.0 * self.document().documentMargin() + around
        return QSize(200, math.ceil(lines * math.ceil(spacing) + margins))

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Lines wrap anew."""
        super().resizeEvent(event)
        if self.width() != self._fitted:  # not again by the height that this gives
            self._fitted = self.width()
            self._fit()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Escape restores; Control and Enter accept."""
        if event.key() == Qt.Key.Key_Escape and self.changed:
            self.setPlainText(self._document.part.notes)
            self.document().setModified(False)
            return
        control = bool(event.modifiers() & Qt.KeyboardModifier.ControlModifier)
        if control and event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            self.accept()
            return
        super().keyPressEvent(event)

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Leaving it accepts."""
        super().focusOutEvent(event)
        self.accept()

    def _fit(self) -> None:
        long = self.document().size().height() > MOST_LINES
        policy = Qt.ScrollBarPolicy
        self.setVerticalScrollBarPolicy(
            policy.ScrollBarAsNeeded if long else policy.ScrollBarAlwaysOff
        )
        self.setFixedHeight(self.sizeHint().height())
