"""Select, drag, nudge, delete, and edit exactly."""

from __future__ import annotations

from typing import ClassVar

from PySide6.QtCore import Qt

from screenapp.window.board.tools.base import Place, Tool


class SelectTool(Tool):
    """Picks what is under the cursor."""

    name: ClassVar[str] = "Select"
    key: ClassVar[str] = "S"
    line: ClassVar[str] = "Click to select, drag to move, double-click for exact values."
    icon: ClassVar[str] = "select"
    snaps: ClassVar[bool] = False

    @property
    def cursor(self) -> Qt.CursorShape:
        """An arrow."""
        return Qt.CursorShape.ArrowCursor

    def press(self, place: Place) -> None:
        """Select what is there."""
        document = self.canvas.document
        if place.hit is None:
            document.select()
        else:
            document.select(place.hit.id)
