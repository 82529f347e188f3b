"""Widgets that lie over the canvas at its edge and keep their place when it is resized."""

from __future__ import annotations

from collections.abc import Callable

from PySide6.QtCore import QEvent, QObject
from PySide6.QtWidgets import QWidget


class Anchor(QObject):
    """Calls `place` whenever the host is resized."""

    def __init__(self, host: QWidget, place: Callable[[], None], parent: QObject) -> None:
        super().__init__(parent)
        self._place = place
        host.installEventFilter(self)

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Look at the host's events; swallow none."""
        if event.type() in (QEvent.Type.Resize, QEvent.Type.Show):
            self._place()
        return super().eventFilter(watched, event)
